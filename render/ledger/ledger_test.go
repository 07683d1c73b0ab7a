package ledger

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"errors"
	"flag"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// Properties are tried on the same cases every time.
func TestMain(m *testing.M) {
	flag.Parse()
	if err := errors.Join(flag.Set("rapid.seed", "1"), flag.Set("rapid.nofailfile", "true")); err != nil {
		panic(err)
	}
	os.Exit(m.Run())
}

func ptr(x float64) *float64 { return &x }

// sample is a package with a value of each shape, a series, checks and exhibits.
func sample() *exhibit.Package {
	kN, m, percent := quantity.MustUnit("kN"), quantity.MustUnit("m"), quantity.MustUnit("%")
	at := func(line int) exhibit.Place { return exhibit.Place{File: "a/package.md", Line: line} }
	table := &exhibit.Table{ID: "frame", Columns: []exhibit.Column{{Head: "level"}, {Head: "storey shear", Unit: kN}, {Head: "share"}, {Head: "mixed"}},
		Notes: []string{"governs"},
		Rows: [][]exhibit.Cell{
			{{Text: "Roof"}, {Numbers: []exhibit.Number{{Value: 1234500, Unit: kN}}}, {Numbers: []exhibit.Number{{Value: 0.07, Unit: percent}}}, {Numbers: []exhibit.Number{{Value: 2, Unit: m}}}},
			{{Text: "=1+1"}, {Numbers: []exhibit.Number{{Value: -100.25}}, Mark: []int{1}}, {Numbers: []exhibit.Number{{Value: 0.5, Unit: percent}}}, {Numbers: []exhibit.Number{{Value: 3000, Unit: kN}}}},
			{{Text: "-"}, {}, {}, {Symbol: &expr.Node{Op: expr.Name, Text: "V"}}},
		}}
	over := &exhibit.Figure{ID: "rs", Panels: []exhibit.Panel{{X: exhibit.Axis{Label: "period T", Unit: quantity.MustUnit("s")}, Y: exhibit.Axis{Label: "PSA", Unit: quantity.MustUnit("g")},
		Series: []exhibit.FigSerie{{Label: "a", X: []float64{0.1, 0.2}, Y: []float64{9.80665, 19.6133}}, {Label: "b", X: []float64{0.1, 0.2}, Y: []float64{1, 2}}}}}}
	pairs := &exhibit.Figure{ID: "rs", Panels: []exhibit.Panel{{X: exhibit.Axis{Label: "drift"}, Y: exhibit.Axis{Label: "elevation", Unit: m},
		Series: []exhibit.FigSerie{{Label: "a", X: []float64{0.1, 0.2}, Y: []float64{0, 3}}, {Label: "a", X: []float64{0.3}, Y: []float64{4}}}}}}
	profile := &exhibit.Figure{ID: "shapes", Beside: true, Panels: []exhibit.Panel{
		{Title: "mode 1", X: exhibit.Axis{Label: "shape"}, Y: exhibit.Axis{Label: "level", Unit: m}, Series: []exhibit.FigSerie{{X: []float64{0.5, 1}, Y: []float64{3, 6}}}},
		{Title: "mode 2", X: exhibit.Axis{Label: "shape"}, Y: exhibit.Axis{Label: "level", Unit: m}, Series: []exhibit.FigSerie{{X: []float64{1, -1}, Y: []float64{3, 6}}}}}}
	measures := &exhibit.Table{ID: "measures", Columns: []exhibit.Column{{Head: "value"}, {Head: "unit"}},
		Rows: [][]exhibit.Cell{{{Numbers: []exhibit.Number{{Value: 2, Unit: m}}}, {Text: "m"}}, {{Numbers: []exhibit.Number{{Value: 3000, Unit: kN}}}, {Text: "kN"}}}}
	return &exhibit.Package{
		Meta:       exhibit.Meta{Title: "Frame <A>", Number: "C-1", Status: "draft", Revision: []exhibit.Revision{{Rev: "A", Date: "2026-01-02"}, {Rev: "B", Date: "2026-02-03"}}},
		Provenance: exhibit.Provenance{Tool: "quoin 9.8.7", Source: "a/package.md", Commit: "c0ffee", CommitDate: "2026-02-04", Dirty: true, Overrides: []exhibit.Override{{Name: "R", Text: "5", Was: "8"}}},
		System:     quantity.SI,
		Values: []exhibit.Entry{
			{ID: "m.phi", Value: quantity.Value{Shape: quantity.Rows, Width: 2, SI: []float64{1, 0.30000000000000004, 3, 4}}, Place: at(9)},
			{ID: "V", Value: quantity.Scalar(1234500, kN), Place: at(41)},
			{ID: "h", Value: quantity.List([]float64{3.6, math.Copysign(0, -1)}, m, nil), Place: exhibit.Place{File: "a/other.md", Line: 2}},
		},
		Series: []exhibit.Curve{{ID: "rs.PSA@5%", X: quantity.List([]float64{0.1}, quantity.MustUnit("s"), nil), Y: quantity.List([]float64{2}, quantity.MustUnit("g"), nil)}},
		Checks: []exhibit.Check{
			{ID: "d <= 0.02 [2]", Demand: exhibit.Number{Value: 0.07, Unit: m}, Limit: exhibit.Number{Value: 0, Unit: m}, Relation: "<=", Place: at(7)},
			{ID: "d <= 0.02 [1]", Demand: exhibit.Number{Value: 0.07, Unit: m}, Limit: exhibit.Number{Value: 0.1, Unit: m}, Relation: "<=", Ratio: ptr(0.7), OK: true, Place: at(7)},
		},
		Warnings: diag.List{{Severity: diag.Warning, Code: "coarse", Summary: "step < 0.01 s", Range: diag.Range{File: "a/package.md", Line: 5}}},
		Chapters: []exhibit.Chapter{{Pieces: []exhibit.Piece{{Block: &exhibit.Block{Parts: []exhibit.Part{{Items: []exhibit.Item{{Table: table}, {Figure: over}, {Figure: pairs}, {Figure: profile}, {Table: measures}}}}}}}}},
	}
}

func TestResults(t *testing.T) {
	got, err := Results(sample())
	if err != nil {
		t.Fatal(err)
	}
	want := `{
"schema": 1,
"package": {"number":"C-1","title":"Frame <A>","project":"","revision":"B","date":"2026-02-03","status":"draft","units":"SI","source":"a/package.md","commit":"c0ffee","commit_date":"2026-02-04","dirty":true,"overrides":[{"name":"R","text":"5","was":"8"}]},
"tool": {"name":"quoin","version":"9.8.7"},
"values": [
  {"id":"V","value":1234500,"unit":"N","line":41},
  {"id":"h","value":[3.6,0],"unit":"m","line":2,"file":"a/other.md"},
  {"id":"m.phi","value":[[1,0.30000000000000004],[3,4]],"unit":"","line":9}
],
"series": [
  {"id":"rs.PSA@5%","x":{"unit":"s","values":[0.1]},"y":{"unit":"m/s^2","values":[2]}}
],
"checks": [
  {"id":"d <= 0.02 [1]","demand":0.07,"limit":0.1,"unit":"m","relation":"<=","ratio":0.7,"ok":true,"line":7},
  {"id":"d <= 0.02 [2]","demand":0.07,"limit":0,"unit":"m","relation":"<=","ratio":null,"ok":false,"line":7}
],
"warnings": [
  {"code":"coarse","text":"step < 0.01 s","line":5}
]
}
`
	if string(got) != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
	empty, err := Results(&exhibit.Package{})
	if err != nil || !json.Valid(empty) || !strings.Contains(string(empty), `"values": []`) {
		t.Errorf("an empty package gives %s, %v", empty, err)
	}
}

// Whatever goes wrong with a number, no NaN and no infinity comes out.
func TestResultsRefuse(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for name, spoil := range map[string]func(p *exhibit.Package){
		"NaN value":           func(p *exhibit.Package) { p.Values[1].Value.SI[0] = nan },
		"infinite row":        func(p *exhibit.Package) { p.Values[0].Value.SI[3] = inf },
		"infinite series":     func(p *exhibit.Package) { p.Series[0].Y.SI[0] = -inf },
		"NaN demand":          func(p *exhibit.Package) { p.Checks[0].Demand.Value = nan },
		"NaN limit":           func(p *exhibit.Package) { p.Checks[0].Limit.Value = nan },
		"infinite ratio":      func(p *exhibit.Package) { p.Checks[1].Ratio = &inf },
		"NaN tolerance":       func(p *exhibit.Package) { p.Checks[1].Tolerance = &exhibit.Number{Value: nan} },
		"uneven series":       func(p *exhibit.Package) { p.Series[0].X.SI = nil },
		"uneven rows":         func(p *exhibit.Package) { p.Values[0].Value.Width = 3 },
		"a number of two":     func(p *exhibit.Package) { p.Values[1].Value.SI = []float64{1, 2} },
		"a value named twice": func(p *exhibit.Package) { p.Values[2].ID = "V" },
	} {
		p := sample()
		spoil(p)
		if got, err := Results(p); err == nil {
			t.Errorf("%s: no error, but %s", name, got)
		}
	}
}

func TestTables(t *testing.T) {
	got, err := Tables(sample())
	if err != nil {
		t.Fatal(err)
	}
	want := map[string]string{
		"tables/frame.csv":    "level,storey shear [kN],share [%],mixed,notes\nRoof,1234.5,7,2 m,\n'=1+1,-0.10025,50,3 kN,governs\n-,,,V,\n",
		"tables/rs.csv":       "period T [s],a: PSA [g],b: PSA [g]\n0.1,1,0.10197162129779283\n0.2,2,0.20394324259558566\n",
		"tables/rs-2.csv":     "a: drift,a: elevation [m],a: drift (2),a: elevation (2) [m]\n0.1,0,0.3,4\n0.2,3,,\n",
		"tables/shapes.csv":   "level [m],mode 1: shape,mode 2: shape\n3,0.5,1\n6,1,-1\n",
		"tables/measures.csv": "value,unit\n2,m\n3,kN\n",
	}
	for path, text := range want {
		if string(got[path]) != text {
			t.Errorf("%s: got\n%s\nwant\n%s", path, got[path], text)
		}
	}
	if len(got) != len(want) {
		t.Errorf("%d tables, want %d", len(got), len(want))
	}
	for name, spoil := range map[string]func(p *exhibit.Package){
		"NaN cell":     func(p *exhibit.Package) { items(p)[0].Table.Rows[0][1].Numbers[0].Value = math.NaN() },
		"short row":    func(p *exhibit.Package) { items(p)[0].Table.Rows[0] = nil },
		"NaN curve":    func(p *exhibit.Package) { items(p)[1].Figure.Panels[0].Series[0].Y[0] = math.NaN() },
		"uneven curve": func(p *exhibit.Package) { items(p)[1].Figure.Panels[0].Series[0].Y = nil },
	} {
		p := sample()
		spoil(p)
		if _, err := Tables(p); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
}

func items(p *exhibit.Package) []exhibit.Item { return p.Chapters[0].Pieces[0].Block.Parts[0].Items }

// Whatever the ids and texts, the files have safe and different names, and every
// table reads back with its rows, no field of which a spreadsheet would run.
func TestTablesOfAnyText(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		text := rapid.OneOf(rapid.String(), rapid.SampledFrom([]string{"", ".", "..", "../../x", "a/b", "A/B", "con", "NUL.x", "=1", " +x", "\t=cmd", "@a", "-1.5", "-b", "a,\"b\"\n", "é"}))
		n := rapid.IntRange(1, 6).Draw(t, "tables")
		var list []exhibit.Item
		for range n {
			tb := &exhibit.Table{ID: text.Draw(t, "id"), Columns: []exhibit.Column{{Head: text.Draw(t, "head")}, {Head: text.Draw(t, "head")}}}
			for range rapid.IntRange(0, 3).Draw(t, "rows") {
				tb.Rows = append(tb.Rows, []exhibit.Cell{{Text: text.Draw(t, "cell")}, {Text: text.Draw(t, "cell")}})
			}
			list = append(list, exhibit.Item{Table: tb})
		}
		p := &exhibit.Package{Chapters: []exhibit.Chapter{{Pieces: []exhibit.Piece{{Block: &exhibit.Block{Parts: []exhibit.Part{{Items: list}}}}}}}}
		got, err := Tables(p)
		if err != nil {
			t.Fatal(err)
		}
		folded := map[string]bool{}
		for i, path := range TablePaths(p) {
			name := strings.TrimSuffix(strings.TrimPrefix(path, "tables/"), ".csv")
			if name == "" || name[0] == '.' || strings.Trim(name, "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789._-") != "" {
				t.Fatalf("unsafe name %q", path)
			}
			folded[strings.ToLower(path)] = true
			rows, err := csv.NewReader(bytes.NewReader(got[path])).ReadAll()
			if err != nil || len(rows) != len(list[i].Table.Rows)+1 {
				t.Fatalf("%q reads back as %d rows, %v", got[path], len(rows), err)
			}
			for _, row := range rows {
				for _, f := range row {
					lead := strings.TrimSpace(f)
					if _, err := strconv.ParseFloat(lead, 64); err != nil && len(lead) > 1 && strings.ContainsAny(lead[:1], "=+-@") {
						t.Fatalf("%q begins like a formula", f)
					}
				}
			}
		}
		if len(folded) != n {
			t.Fatalf("%d files for %d tables", len(folded), n)
		}
	})
}

// A number in a table, read in its unit, is the SI number to the last bit or the
// nearest that the unit can give.
func TestNumberReadsBack(t *testing.T) {
	units := []string{"", "m", "mm", "kN", "kip", "in", "%", "g", "deg", "kip*s^2/in"}
	rapid.Check(t, func(t *rapid.T) {
		u := quantity.MustUnit(rapid.SampledFrom(units).Draw(t, "unit"))
		si := rapid.Float64Range(-1e12, 1e12).Draw(t, "si")
		x, err := strconv.ParseFloat(number(si, u), 64)
		if err != nil {
			t.Fatal(err)
		}
		if back := u.To(x); math.Abs(back-si) > 2.3e-16*math.Abs(si) && math.Abs(back-si) > 1e-320 {
			t.Fatalf("%v is written %v %s and reads back as %v", si, x, u.Text, back)
		}
	})
	for _, c := range []struct {
		written float64
		unit    string
		want    string
	}{{7, "%", "7"}, {0.3, "%", "0.3"}, {310, "kip", "310"}, {3.6, "m", "3.6"}, {14.1, "mm", "14.1"}} {
		u := quantity.MustUnit(c.unit)
		if got := number(u.To(c.written), u); got != c.want {
			t.Errorf("%v %s comes out as %s", c.written, c.unit, got)
		}
	}
}

func TestInputsAndDigest(t *testing.T) {
	files := map[string][]byte{"a/package.md": []byte("text\n"), "a/b.csv": []byte("1\n")}
	in, err := Inputs(files, sample())
	if err != nil {
		t.Fatal(err)
	}
	if len(in) != 3 || string(in["inputs/a/b.csv"]) != "1\n" {
		t.Errorf("inputs: %v", in)
	}
	var b struct {
		Schema                          int
		Main, Commit, Commit_date, Tool string
		Dirty                           bool
		Overrides                       []exhibit.Override
	}
	if err := json.Unmarshal(in[BuildFile], &b); err != nil || b.Schema != 1 || b.Main != "a/package.md" || b.Commit != "c0ffee" ||
		b.Commit_date != "2026-02-04" || b.Tool != "quoin 9.8.7" || !b.Dirty || len(b.Overrides) != 1 || b.Overrides[0].Was != "8" {
		t.Errorf("build.json: %s, %v", in[BuildFile], err)
	}
	// By hand: printf 'a' | sha256sum and so on, then the three lines through sha256sum.
	hand := Digest(map[string][]byte{"inputs/b": []byte("b"), "inputs/a": []byte("a")}, "quoin 1")
	if want := handDigest; hand != want {
		t.Errorf("digest %s, want %s", hand, want)
	}
	for _, bad := range []string{"../x", "/x", "a//b", ".", "", "build.json"} {
		if _, err := Inputs(map[string][]byte{bad: nil}, sample()); err == nil {
			t.Errorf("input %q is taken", bad)
		}
	}
	manifest := Manifest(map[string][]byte{"b": []byte("b"), "a": []byte("a"), ManifestFile: nil}, hand, "quoin 1")
	m, err := ReadManifest(manifest)
	if err != nil || m.Digest != hand || m.Tool != "quoin 1" || len(m.Files) != 2 || m.Files[0] != (ManifestEntry{"a", "ca978112ca1bbdcafac231b39a23dc4da786eff8147c4e72b9807785afee48bb", 1}) {
		t.Errorf("manifest %s reads as %+v, %v", manifest, m, err)
	}
	if _, err := ReadManifest([]byte(`{"name": "an app"}`)); err == nil {
		t.Error("another program's manifest is taken for ours")
	}
}

// handDigest was made with printf and sha256sum in a shell.
const handDigest = "084f69d989f9aac15f35655af3371586dc95abe632272e1f2028efa92c1ccda3"

// Names that differ in case only would be one file on many machines.
func TestTablePathsApart(t *testing.T) {
	var list []exhibit.Item
	for _, id := range []string{"rs", "RS", "rs-2", "../rs", "nul", ".x"} {
		list = append(list, exhibit.Item{Table: &exhibit.Table{ID: id}})
	}
	p := &exhibit.Package{Chapters: []exhibit.Chapter{{Pieces: []exhibit.Piece{{Block: &exhibit.Block{Parts: []exhibit.Part{{Items: list}}}}}}}}
	got := strings.Join(TablePaths(p), " ")
	if want := "tables/rs.csv tables/RS-2.csv tables/rs-2-2.csv tables/_.._rs.csv tables/_nul.csv tables/_.x.csv"; got != want {
		t.Errorf("got %s, want %s", got, want)
	}
}

// TestChecksInSI: the rows of checks are SI whatever they are shown in.
func TestChecksInSI(t *testing.T) {
	mm := quantity.MustUnit("mm")
	rows, err := Checks([]exhibit.Check{{ID: "d <= 20 mm", Demand: exhibit.Number{Value: 0.012, Unit: mm}, Limit: exhibit.Number{Value: 0.02, Unit: mm},
		Relation: "<=", OK: true, Place: exhibit.Place{File: "more.md", Line: 3}}}, "package.md")
	if err != nil {
		t.Fatal(err)
	}
	if want := (Check{ID: "d <= 20 mm", Demand: 0.012, Limit: 0.02, Unit: "m", Relation: "<=", OK: true, Line: 3, File: "more.md"}); len(rows) != 1 || rows[0] != want {
		t.Errorf("got %+v, want %+v", rows, want)
	}
}
