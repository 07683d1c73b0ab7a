package render

import (
	"bytes"
	"fmt"
	"maps"
	"math"
	"runtime"
	"slices"
	"strings"
	"testing"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/render/ledger"
)

// sample is a package with two figures, a table and an equation in prose.
func sample() *exhibit.Package {
	s, g := quantity.MustUnit("s"), quantity.MustUnit("g")
	figure := func(id string, peak float64) exhibit.Item {
		return exhibit.Item{Figure: &exhibit.Figure{ID: id, Caption: "Spectrum " + id, Alt: "one curve", Panels: []exhibit.Panel{{
			X: exhibit.Axis{Label: "period T", Unit: s}, Y: exhibit.Axis{Label: "PSA", Unit: g},
			Series: []exhibit.FigSerie{{ID: id + ".PSA", Label: id, X: []float64{0.1, 0.5, 2}, Y: []float64{2, peak, 1}, Role: exhibit.Data}}}}}}
	}
	table := exhibit.Item{Table: &exhibit.Table{ID: "frame", Caption: "Frame", Columns: []exhibit.Column{{Head: "level"}, {Head: "height", Unit: quantity.MustUnit("m")}},
		Rows: [][]exhibit.Cell{{{Text: "Roof"}, {Numbers: []exhibit.Number{{Value: 3.6, Unit: quantity.MustUnit("m")}}}}}}}
	block := &exhibit.Block{Kind: "spectrum", Name: "rs", Anchor: "rs", Place: exhibit.Place{File: "package.md", Line: 9},
		Parts: []exhibit.Part{{Name: "results", Items: []exhibit.Item{figure("east", 9), figure("north", 7), table}}}}
	return &exhibit.Package{
		Meta: exhibit.Meta{Title: "Tower", Number: "C-2", Status: "draft", Paper: "A4"}, System: quantity.SI,
		Provenance: exhibit.Provenance{Tool: "quoin 9.8.7", Source: "package.md"},
		Chapters: []exhibit.Chapter{{Title: []exhibit.Prose{{Kind: exhibit.Text, Text: "One"}}, Anchor: "s-one", Pieces: []exhibit.Piece{
			{Prose: []exhibit.Prose{{Kind: exhibit.MathBlock, Text: `\frac{a}{b}`}}}, {Block: block}}}},
	}
}

var files = map[string][]byte{"package.md": []byte("text\n"), "data/a.csv": []byte("1\n")}

func TestPackage(t *testing.T) {
	var told []string
	got, err := Package(sample(), files, Options{Progress: func(done, total int, what string) { told = append(told, fmt.Sprintf("%d/%d", done, total)) }})
	if err != nil {
		t.Fatal(err)
	}
	want := []string{"README.txt", "index.html", "inputs/build.json", "inputs/data/a.csv", "inputs/package.md", "manifest.json", "results.json", "results.txt",
		"tables/east.csv", "tables/frame.csv", "tables/north.csv"}
	if paths := slices.Sorted(maps.Keys(got)); !slices.Equal(paths, want) {
		t.Errorf("the package holds %v, want %v", paths, want)
	}
	if !slices.Equal(told, []string{"1/3", "2/3", "3/3"}) {
		t.Errorf("progress: %v", told)
	}
	m, err := ledger.ReadManifest(got[ledger.ManifestFile])
	if err != nil || len(m.Files) != len(want)-1 || m.Tool != "quoin 9.8.7" {
		t.Errorf("manifest %+v, %v", m, err)
	}
	index := string(got["index.html"])
	for _, part := range []string{"<mfrac", "Spectrum east", "Spectrum north", "tables/frame.csv", m.Digest[:4]} {
		if !strings.Contains(index, part) {
			t.Errorf("the page does not hold %q", part)
		}
	}
	if n := strings.Count(index, "<svg"); n < 2 {
		t.Errorf("%d pictures, want 2", n)
	}
}

// The bytes do not depend on the number of cores, nor on what was made before.
func TestPackageIsTheSameAgain(t *testing.T) {
	first, err := Package(sample(), files, Options{})
	if err != nil {
		t.Fatal(err)
	}
	defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(1))
	again, err := Package(sample(), files, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if !maps.EqualFunc(first, again, bytes.Equal) {
		t.Error("two runs differ")
	}
	other := sample()
	other.Chapters[0].Pieces[1].Block.Parts[0].Items[0].Figure.Panels[0].Series[0].Y[1] = 8
	changed, err := Package(other, files, Options{})
	if err != nil {
		t.Fatal(err)
	}
	for _, path := range []string{"index.html", "tables/east.csv", "manifest.json"} {
		if bytes.Equal(first[path], changed[path]) {
			t.Errorf("%s does not show another value", path)
		}
	}
}

func TestPackageRefuses(t *testing.T) {
	for name, spoil := range map[string]func(p *exhibit.Package, files map[string][]byte){
		"a NaN in a figure": func(p *exhibit.Package, _ map[string][]byte) {
			p.Chapters[0].Pieces[1].Block.Parts[0].Items[0].Figure.Panels[0].Series[0].Y[0] = math.NaN()
		},
		"a NaN in the results": func(p *exhibit.Package, _ map[string][]byte) {
			p.Values = []exhibit.Entry{{ID: "x", Value: quantity.Pure(math.NaN())}}
		},
		"an input out of place":  func(_ *exhibit.Package, f map[string][]byte) { f["../x"] = nil },
		"TeX that cannot be set": func(p *exhibit.Package, _ map[string][]byte) { p.Chapters[0].Pieces[0].Prose[0].Text = `\frac{a}{` },
	} {
		p, f := sample(), maps.Clone(files)
		spoil(p, f)
		if _, err := Package(p, f, Options{}); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
}

// A fault on one of the cores comes out where it can be caught, and says where it was.
func TestPressPanics(t *testing.T) {
	defer func() {
		if got := fmt.Sprint(recover()); got != "boom, making b" {
			t.Errorf("recovered %q", got)
		}
	}()
	r := &press{byKey: map[string]*job{}}
	made := func() (string, error) { return "x", nil }
	r.ask("a", "a", made)
	r.ask("b", "b", func() (string, error) { panic("boom") })
	r.ask("c", "c", made)
	r.ask("c", "c", made)
	r.run(nil, func(*job) bool { return true })
}
