package document

import (
	"math"
	"testing"
	"testing/fstest"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// build runs a document given as files; package.md gets its front matter here.
func build(t *testing.T, files map[string]string) Result {
	t.Helper()
	fs := fstest.MapFS{}
	for name, data := range files {
		if name == "package.md" {
			data = "---\nquoin: 1\ntitle: t\n---\n" + data
		}
		fs[name] = &fstest.MapFile{Data: []byte(data)}
	}
	return Run(Source{FS: fs, Main: "package.md"}, Options{})
}

// TestTableWithoutHead: columns of a bare file by number, in either order, and by
// declared names; what is not there is refused.
func TestTableWithoutHead(t *testing.T) {
	bare := "0.1,0.05\n0.2,0.1\n0.3,0.5\n0.35,1\n" // ordinate, period
	table := func(columns string) Result {
		return build(t, map[string]string{"bare.csv": bare, "package.md": "```calc target tn\ntable: bare.csv\ncolumns: " + columns + "\nunits: [s, g]\ndamping: 5 %\n```\n```calc formula\nP = tn.PSA(0.2 s) as g\n```\n"})
	}
	for _, columns := range []string{"[2, 1]"} {
		res := table(columns)
		if res.Package == nil {
			t.Fatalf("%s:\n%s", columns, text(res))
		}
		if got, want := value(t, res.Package, "P").Value.SI[0], 0.225*9.80665; math.Abs(got-want) > 1e-12 {
			t.Errorf("columns %s: PSA(0.2 s) = %v m/s², want %v", columns, got, want)
		}
	}
	for _, columns := range []string{"[1, 3]", "[9, 12]", "[2]"} {
		if res := table(columns); res.Package != nil {
			t.Errorf("columns %s of a file of two are accepted", columns)
		}
	}
}

// TestGivenNumbers: what was typed is shown with all its digits, in a line of its
// own; what is computed or converted with the usual number.
func TestGivenNumbers(t *testing.T) {
	res := build(t, map[string]string{"package.md": "```calc formula\na = 1000.1234 kip\nb = -12.3456789 kN\nc = [410.123456 kip, 380.5 kip]\nd = 8\ne = 250 kip as kN\nf = 2 * a\ng_1 = 2 / 3\nn = len(c)\n```\n"})
	if res.Package == nil {
		t.Fatalf("errors:\n%s", text(res))
	}
	want := map[string]string{"a": "1000.1234", "b": "\u221212.3456789", "c": "410.123456", "d": "8", "e": "1112", "f": "2000", "g_1": "0.6667", "n": "2"}
	for _, c := range res.Package.Chapters {
		for _, p := range c.Pieces {
			for _, it := range p.Block.Parts[0].Items {
				e := it.Equation
				if got := quantity.Format(e.Result.Unit.From(e.Result.SI[0]), e.Digits); got != want[e.ID] {
					t.Errorf("%s is shown as %s, want %s", e.ID, got, want[e.ID])
				}
				delete(want, e.ID)
			}
		}
	}
	if len(want) > 0 {
		t.Errorf("not shown: %v", want)
	}
}

// TestCheckDigits: two sides that differ never read the same.
func TestCheckDigits(t *testing.T) {
	res := build(t, map[string]string{"package.md": "```calc formula\na = 3.00004 ft\ncheck a <= 3 ft\nb = 2 / 3\ncheck b <= 1\n```\n"})
	if res.Package == nil {
		t.Fatalf("errors:\n%s", text(res))
	}
	shown := func(n exhibit.Number) string { return n.Text() }
	c := res.Package.Checks
	if shown(c[0].Demand) == shown(c[0].Limit) || c[0].OK {
		t.Errorf("%s <= %s, %v", shown(c[0].Demand), shown(c[0].Limit), c[0].OK)
	}
	if shown(c[1].Demand) != "0.6667" || shown(c[1].Limit) != "1" {
		t.Errorf("%s <= %s", shown(c[1].Demand), shown(c[1].Limit))
	}
}
