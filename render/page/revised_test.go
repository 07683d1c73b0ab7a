package page

import (
	"strings"
	"testing"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// revisedBook is a package at B, in which a few things are not what they were at A.
func revisedBook(t *testing.T) string {
	t.Helper()
	kN, mm := quantity.MustUnit("kN"), quantity.MustUnit("mm")
	number := func(id string, si float64, unit quantity.Unit) exhibit.Cell {
		return exhibit.Cell{Numbers: []exhibit.Number{{Value: si, Unit: unit, ID: id}}}
	}
	was := func(si float64, unit quantity.Unit) *exhibit.Number { return &exhibit.Number{Value: si, Unit: unit} }
	ratio := 0.5
	check := exhibit.Check{ID: "V <= 2 kN", Name: "V <= 2 kN", Demand: exhibit.Number{Value: 1000, Unit: kN}, Limit: exhibit.Number{Value: 2000, Unit: kN}, Relation: "<=", Ratio: &ratio, OK: true, Description: "capacity", Anchor: "b-elf"}
	p := &exhibit.Package{Meta: exhibit.Meta{Title: "T", Revision: []exhibit.Revision{{Rev: "A", Note: "first"}, {Rev: "B", Note: "second"}}}, System: quantity.SI,
		Provenance: exhibit.Provenance{Source: "p.md", Commit: "c"},
		Values: []exhibit.Entry{
			{ID: "elf.F", Value: quantity.List([]float64{1000, 3000}, kN, []string{"L1", "L2"}), Anchor: "b-elf"},
			{ID: "elf.V", Value: quantity.Scalar(1000, kN), Anchor: "b-elf"},
		},
		Checks: []exhibit.Check{check},
		Chapters: []exhibit.Chapter{{Pieces: []exhibit.Piece{
			{Prose: []exhibit.Prose{{Kind: exhibit.Paragraph, Children: []exhibit.Prose{
				{Kind: exhibit.Value, Live: &exhibit.Live{ID: "elf.F", Numbers: []exhibit.Number{{Value: 3000, Unit: quantity.MustUnit("N"), ID: "elf.F"}}}},
				{Kind: exhibit.Value, Live: &exhibit.Live{ID: "elf.F", Numbers: []exhibit.Number{{Value: 1000, Unit: kN, ID: "elf.F"}}}},
			}}}},
			{Block: &exhibit.Block{Kind: "static", Name: "elf", Anchor: "b-elf", Parts: []exhibit.Part{{Items: []exhibit.Item{
				{Echo: &exhibit.Echo{Rows: []exhibit.EchoRow{{Field: "R", Label: "R", Value: number("", 8, quantity.Unit{})}, {Field: "I", Label: "I", Value: number("", 1, quantity.Unit{})}}}},
				{Table: &exhibit.Table{ID: "t", Columns: []exhibit.Column{{Head: "F", Unit: kN}, {Head: "u", Unit: mm}}, Rows: [][]exhibit.Cell{{number("elf.F[2]", 3000, kN), number("elf.u[1]", 0.01, mm)}}}},
				{Checks: []exhibit.Check{check}},
			}}}}},
		}}},
		Frozen: &exhibit.Frozen{File: "p.frozen", Revision: "A", Since: "A", Marks: []exhibit.Moved{
			{What: exhibit.MovedCheck, ID: "V <= 2 kN", Old: "NOT OK, ratio 1.1", New: "OK, ratio 0.5", Flipped: true},
			{What: exhibit.MovedInput, ID: "elf.R", Old: "6", New: "8", Was: was(6, quantity.Unit{})},
			{What: exhibit.MovedValue, ID: "elf.F", Index: "2", Label: "L2", Old: "2.5 kN", New: "3 kN", Was: was(2500, kN)},
			{What: exhibit.MovedValue, ID: "elf.gone", Old: "1 kN"},
		}},
	}
	p.Frozen.Moved = p.Frozen.Marks
	html, err := Render(p, Options{})
	if err != nil {
		t.Fatal(err)
	}
	return string(html)
}

// TestMarks: what changed is marked where it stands, in the unit in which it is
// shown, and nothing else is.
func TestMarks(t *testing.T) {
	html := revisedBook(t)
	for what, mark := range map[string]string{
		"a value in prose":     `3000&#x202f;N</a><span class="rv" title="was 2500 N since revision A"><b>▲B</b> <i>was 2500 N</i></span>`,
		"a cell of a table":    `3.000</a><span class="rv" title="was 2.5 since revision A"><b>▲B</b> <i>was 2.5</i></span>`,
		"an input":             `<dd>8.000<span class="rv" title="was 6 since revision A"><b>▲B</b> <i>was 6</i></span></dd>`,
		"a check":              `<span class="rv" title="was NOT OK, ratio 1.1 since revision A"><b>▲B</b> <i>was NOT OK, ratio 1.1</i></span></th>`,
		"the cover":            "▲B marks what changed since revision A: 1 check (1 flipped), 1 input, 2 values",
		"the revision table":   `second<div class="rs">▲B on sheets <a href="#sheet-`,
		"the list":             `<h2 id="q-changes">Changes since revision A</h2>`,
		"a flipped check":      `<b>flipped</b>`,
		"what is gone":         `<th scope="row">elf.gone</th><td class="r">1 kN</td><td class="r">——</td><td class="r">gone</td>`,
		"that B is not frozen": "revision B is not frozen yet",
	} {
		mark = strings.ReplaceAll(strings.ReplaceAll(mark, "&#x202f;", "\u202f"), "2500 N", "2500\u202fN")
		if !strings.Contains(html, mark) {
			t.Errorf("%s is not marked: no %s", what, mark)
		}
	}
	// Prose 1, table 1, input 1, check twice: in the summary and in its block.
	if n := strings.Count(html, `class="rv"`); n != 5 {
		t.Errorf("%d marks, not 5", n)
	}
	if strings.Contains(html, "results differ") {
		t.Error("a package that has gone on to B is said to differ from A")
	}
}

// TestDiffers: results of the same revision that are others are an open state.
func TestDiffers(t *testing.T) {
	p := &exhibit.Package{Meta: exhibit.Meta{Status: "for check"}, Provenance: exhibit.Provenance{Commit: "c"}, Frozen: &exhibit.Frozen{Revision: "A", Current: true}}
	if open := OpenState(p); len(open) > 0 {
		t.Errorf("results that agree: %q", open)
	}
	p.Frozen.Moved = []exhibit.Moved{{What: exhibit.MovedValue}}
	if open := OpenState(p); len(open) != 1 || open[0] != "results differ from the frozen ones of revision A" {
		t.Errorf("results that differ: %q", open)
	}
	p.Frozen.Current = false
	if open := OpenState(p); len(open) > 0 {
		t.Errorf("another revision: %q", open)
	}
}
