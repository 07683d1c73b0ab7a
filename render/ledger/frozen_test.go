package ledger

import (
	"bytes"
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// calculation is a small package with one of everything that is frozen.
func calculation(rev string) *exhibit.Package {
	kN, mm := quantity.MustUnit("kN"), quantity.MustUnit("mm")
	long := make([]float64, 40)
	for i := range long {
		long[i] = 0.1 * float64(i+1)
	}
	ratio := 0.4
	return &exhibit.Package{
		Meta:       exhibit.Meta{Title: `Frame, "east"`, Number: "C-001", Status: "for check", Revision: []exhibit.Revision{{Rev: rev, Date: "2031-03-02"}}},
		System:     quantity.SI,
		Provenance: exhibit.Provenance{Tool: "quoin 0.1.0", Source: "calc/package.md"},
		Inputs:     []exhibit.Input{{Path: "calc/package.md", SHA256: "00ff", Role: "document"}, {Path: "records/é east.csv", SHA256: "12e4", Role: "record"}, {Path: "calc/package.frozen", SHA256: "aa", Role: FrozenRole}},
		Settings:   []exhibit.Setting{{ID: "elf.system", Value: exhibit.Cell{Text: "type 2, dual"}}, {ID: "frame.damping", Value: exhibit.Cell{Numbers: []exhibit.Number{{Value: 0.05, Unit: quantity.MustUnit("%")}}}}},
		Values: []exhibit.Entry{
			{ID: "R", Value: quantity.Pure(8), Tree: &expr.Node{Op: expr.Literal}},
			{ID: "V", Value: quantity.Scalar(1271196.7873952612, quantity.Unit{Dim: quantity.Force}), Depends: []string{"R"}},
			{ID: "d.drift", Value: quantity.List([]float64{0.0339, 0.0227}, mm, []string{"Level 1", "Roof = top"}), Depends: []string{"V"}},
			{ID: "grid.T", Value: quantity.List(long, quantity.MustUnit("s"), nil), Depends: []string{"R"}},
			{ID: "m.phi", Value: quantity.Value{SI: []float64{0.5, 1, -1, 1e-17}, Shape: quantity.Rows, Width: 2, Labels: []string{"L1", "Roof"}}, Depends: []string{"R"}},
		},
		Series: []exhibit.Curve{{ID: "rs.PSA@5%", X: quantity.List(long, quantity.MustUnit("s"), nil), Y: quantity.List(long, quantity.MustUnit("m/s^2"), nil)}},
		Checks: []exhibit.Check{
			{ID: "d.drift <= 0.02 * h [1]", Item: "Level 1", Demand: exhibit.Number{Value: 0.0339, Unit: mm}, Limit: exhibit.Number{Value: 0.084, Unit: mm}, Relation: "<=", Ratio: &ratio, OK: true},
			{ID: "V <= 0 kN", Demand: exhibit.Number{Value: 1271196.7, Unit: kN}, Limit: exhibit.Number{Unit: kN}, Relation: "<="},
			{ID: "V <= 0 kN", Demand: exhibit.Number{Value: 1271196.7, Unit: kN}, Limit: exhibit.Number{Unit: kN}, Relation: "<="},
		},
		Assumptions: []exhibit.Assumption{{ID: "A1", Text: "Floors are rigid,\nin their plane", Status: "open"}},
		Chapters:    []exhibit.Chapter{{Pieces: []exhibit.Piece{{Block: &exhibit.Block{Kind: "static", Name: "elf"}}, {Block: &exhibit.Block{Kind: "formula"}}}}},
	}
}

func parsed(t interface{ Fatalf(string, ...any) }, text []byte) *Frozen {
	f, list := ParseFrozen("p.frozen", text)
	if len(list) > 0 {
		t.Fatalf("%v\n%s", list, text)
	}
	return f
}

// TestFrozenText holds the text to the letter.
func TestFrozenText(t *testing.T) {
	got := strings.Split(string(FrozenOf(calculation("A")).Text()), "\n")
	for i, l := range got {
		if at := strings.LastIndex(l, "  ~"); at >= 0 {
			got[i] = l[:at]
		}
	}
	want := `quoin frozen results, format 1
# Written and read by quoin; not to be edited: each line ends with a code of its own.

[document]
document = package.md
number = C-001
title = "Frame, \"east\""
revision = A
date = "2031-03-02"
status = for check
tool = "quoin 0.1.0"
units = SI
tolerance = 1e-06

[files 2]
package.md = document, sha256:00ff
"records/é east.csv" = record, sha256:12e4

[inputs 3]
R = 8
elf.system = "type 2, dual"
frame.damping = 5 %

[values 12]
V = 1271.1968 kN
d.drift [1] "Level 1" = 33.9 mm
d.drift [2] "Roof = top" = 22.7 mm
grid.T [1 to 8] = 0.1 0.2 0.3 0.4 0.5 0.6 0.7 0.8 s
grid.T [9 to 16] = 0.9 1 1.1 1.2 1.3 1.4 1.5 1.6 s
grid.T [17 to 24] = 1.7 1.8 1.9 2 2.1 2.2 2.3 2.4 s
grid.T [25 to 32] = 2.5 2.6 2.7 2.8 2.9 3 3.1 3.2 s
grid.T [33 to 40] = 3.3 3.4 3.5 3.6 3.7 3.8 3.9 4 s
m.phi [1,1] L1 = 0.5
m.phi [1,2] Roof = 1
m.phi [2,1] L1 = -1
m.phi [2,2] Roof = 1e-17

[series 1]
rs.PSA@5% = points 40, greatest 4 m/s^2, rms 2.3526581 m/s^2

[checks 3]
"V <= 0 kN" = NOT OK, demand 1271.1967 kN, limit 0 kN, no ratio
"V <= 0 kN" [2] = NOT OK, demand 1271.1967 kN, limit 0 kN, no ratio
"d.drift <= 0.02 * h [1]" "Level 1" = OK, demand 33.9 mm, limit 84 mm, ratio 0.4

[assumptions 1]
A1 = open, "Floors are rigid, in their plane"

[blocks 1]
elf = static
`
	if g := strings.Join(got, "\n"); g != want {
		t.Errorf("got\n%s", g)
	}
}

func TestFrozenRoundTrip(t *testing.T) {
	a := FrozenOf(calculation("A"))
	p := calculation("B")
	p.Values[1].Value.SI[0] *= 1.1
	p.Values[2].Value.SI = p.Values[2].Value.SI[:1] // a level is gone
	p.Values = append(p.Values, exhibit.Entry{ID: "x.new", Value: quantity.Pure(2), Depends: []string{"V"}})
	b := Freeze(FrozenOf(p), parsed(t, a.Text()))
	if b.Since != "A" || b.Was == nil {
		t.Fatalf("nothing is told against A: %q", b.Since)
	}
	text := b.Text()
	again := parsed(t, text)
	if !bytes.Equal(again.Text(), text) {
		t.Errorf("text of the text:\n%s\nnot\n%s", again.Text(), text)
	}
	if !bytes.Equal((&Frozen{Head: a.Head, Sections: again.Was}).Text(), a.Text()) {
		t.Errorf("what was frozen of A cannot be made again from B:\n%s", text)
	}
	// Frozen once more at B, A stays what changes are told against.
	p.Values[1].Value.SI[0] *= 1.1
	c := parsed(t, Freeze(FrozenOf(p), again).Text())
	if c.Since != "A" || !bytes.Equal((&Frozen{Head: a.Head, Sections: c.Was}).Text(), a.Text()) {
		t.Errorf("A is lost when B is frozen twice: since %q", c.Since)
	}
	// Frozen at C, B takes its place.
	p.Meta.Revision[0].Rev = "C"
	if d := Freeze(FrozenOf(p), c); d.Since != "B" {
		t.Errorf("since %q, not B", d.Since)
	}
	crlf := bytes.ReplaceAll(text, []byte("\n"), []byte("\r\n"))
	if f, list := ParseFrozen("p", append([]byte("\ufeff"), crlf...)); len(list) > 0 || !bytes.Equal(f.Text(), text) {
		t.Errorf("CRLF and a byte order mark: %v", list)
	}
}

// TestNoiseMovesNoLine: numbers that move within the tolerance move no line; each that
// moves beyond it moves its own line and no other.
func TestNoiseMovesNoLine(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 50).Draw(t, "values")
		numbers := func(name string, size int) []float64 {
			return rapid.SliceOfN(rapid.Map(rapid.Float64Range(0.1, 9.99), func(m float64) float64 { return m }), size, size).Draw(t, name)
		}
		build := func(scale func(i int) float64) *Frozen {
			p := &exhibit.Package{System: quantity.SI, Provenance: exhibit.Provenance{Source: "p.md", Tool: "quoin 0"}}
			for i := range n {
				p.Values = append(p.Values, exhibit.Entry{ID: fmt.Sprintf("v%02d", i), Value: quantity.Scalar(scale(i), quantity.MustUnit("kN")), Depends: []string{"x"}})
			}
			return FrozenOf(p)
		}
		base, powers := numbers("base", n), rapid.SliceOfN(rapid.IntRange(0, 9), n, n).Draw(t, "powers")
		value := func(i int) float64 { return base[i] * math.Pow(10, float64(powers[i])) }
		noise := rapid.SliceOfN(rapid.Float64Range(-0.9, 0.9), n, n).Draw(t, "noise")
		first := parsed(t, build(value).Text())
		quiet := Freeze(build(func(i int) float64 { return value(i) * (1 + Tolerance*noise[i]) }), first)
		if !bytes.Equal(quiet.Text(), first.Text()) {
			t.Fatalf("noise moved lines:\n%s\n%s", first.Text(), quiet.Text())
		}
		moves := rapid.SliceOfN(rapid.Bool(), n, n).Draw(t, "moves")
		moved := build(func(i int) float64 {
			if moves[i] {
				return value(i) * (1 + 2.5*Tolerance)
			}
			return value(i) * (1 + Tolerance*noise[i])
		})
		a, b := strings.Split(string(first.Text()), "\n"), strings.Split(string(Freeze(moved, first).Text()), "\n")
		if len(a) != len(b) {
			t.Fatal("the number of lines moved")
		}
		for i := range a {
			id := strings.Split(a[i], " ")[0]
			k := -1
			fmt.Sscanf(id, "v%d", &k)
			if want := k >= 0 && moves[k]; (a[i] != b[i]) != want {
				t.Fatalf("line %d, of a value that moves: %t:\n%s\n%s", i+1, want, a[i], b[i])
			}
		}
		d := Compare(first, moved, Tolerance)
		for i := range n {
			told := slices.ContainsFunc(d.Values, func(m exhibit.Moved) bool { return m.ID == fmt.Sprintf("v%02d", i) })
			if told != moves[i] {
				t.Fatalf("value %d moves: %t, told: %t", i, moves[i], told)
			}
		}
	})
}

// TestFrozenFaults: what was edited by hand or is broken is told with its line.
func TestFrozenFaults(t *testing.T) {
	p := calculation("B")
	p.Values[1].Value.SI[0] *= 1.1
	text := string(Freeze(FrozenOf(p), FrozenOf(calculation("A"))).Text())
	line := func(with string) int {
		for i, l := range strings.Split(text, "\n") {
			if strings.HasPrefix(l, with) {
				return i + 1
			}
		}
		t.Fatalf("no line %q in\n%s", with, text)
		return 0
	}
	whole := func(l string) string { return strings.Split(text, "\n")[line(l)-1] + "\n" }
	recoded := func(old, now string) string { // a line edited together with its code
		l := strings.TrimSuffix(whole(old), "\n")
		bare := strings.Replace(l[:len(l)-7], old, now, 1)
		return strings.Replace(text, l, bare+"  ~"+code(bare), 1)
	}
	for name, c := range map[string]struct {
		text string
		line int
		says string
	}{
		"a number edited":    {strings.Replace(text, "V = 1398", "V = 1399", 1), line("V = "), "not what was written"},
		"a code edited":      {strings.Replace(text, whole("V = "), whole("V = ")[:len(whole("V = "))-2]+"x\n", 1), line("V = "), "not what was written"},
		"a line gone":        {strings.Replace(text, whole("V = "), "", 1), line("[values"), "says that it has 12 lines, and has 11"},
		"a line twice":       {strings.Replace(text, whole("V = "), whole("V = ")+whole("V = "), 1), line("V = ") + 1, "stands out of order"},
		"lines swapped":      {strings.Replace(strings.Replace(text, whole("R = "), "", 1), whole("elf.system"), whole("elf.system")+whole("R = "), 1), line("R = ") + 1, "stands out of order"},
		"a mark of a merge":  {strings.Replace(text, whole("V = "), "<<<<<<< ours\n"+whole("V = "), 1), line("V = "), "no code"},
		"a remark edited":    {strings.Replace(text, "# Written", "# written", 1), 2, "not as quoin freeze writes it"},
		"cut off":            {strings.TrimSuffix(text, whole("was V = 1271")), line("[values before"), "says that it has 1 lines, and has 0"},
		"no end of line":     {strings.TrimSuffix(text, "\n"), strings.Count(text, "\n"), "ends too early"},
		"another version":    {strings.Replace(text, "format 1\n", "format 2\n", 1), 1, "format \"2\"; this program knows format 1"},
		"something else":     {"hello\n", 1, "no frozen results"},
		"nothing":            {"", 1, "no frozen results"},
		"not UTF-8":          {text + "\xff", 1, "no text in UTF-8"},
		"a strange section":  {recoded("[blocks 1]", "[bricks 1]"), line("[blocks"), "no such section"},
		"a strange head":     {recoded("number", "nummer"), line("number"), "none of the head"},
		"no tolerance":       {strings.Replace(text, whole("tolerance"), "", 1), 1, "no tolerance"},
		"no equals sign":     {recoded("elf = static", "elf static"), line("elf = static"), "no equals sign"},
		"an open bracket":    {recoded("d.drift [1", "d.drift (1"), line("d.drift [1"), "not as quoin freeze writes it"},
		"too few numbers":    {recoded("grid.T [1 to 8] = 0.1", "grid.T [1 to 8] ="), line("grid.T [1 to 8]"), "not as many numbers as items"},
		"a run that is none": {recoded("grid.T [1 to 8]", "grid.T [8 to 1]"), line("grid.T [1 to 8]"), "no run of items"},
		"a word too many":    {recoded("R = 8", "R = 8 kN m"), line("R = 8"), "one word too many"},
		"more digits":        {recoded("R = 8", "R = 8.0"), line("R = 8"), "not as quoin freeze writes it"},
	} {
		f, list := ParseFrozen("p.frozen", []byte(c.text))
		if f != nil || len(list) == 0 {
			t.Errorf("%s: read without complaint", name)
			continue
		}
		d := list[0]
		if d.Range.Line != c.line || !strings.Contains(d.Summary, c.says) || d.Severity != diag.Error || d.Hint == "" {
			t.Errorf("%s: %v, hint %q; wanted line %d, %q", name, d, d.Hint, c.line, c.says)
		}
	}
	many := strings.ReplaceAll(text, "  ~", "   ")
	if _, list := ParseFrozen("p", []byte(many)); len(list) != mostFaults {
		t.Errorf("%d faults told, not %d", len(list), mostFaults)
	}
}

func FuzzParseFrozen(f *testing.F) {
	p := calculation("B")
	f.Add(FrozenOf(p).Text())
	p.Values[1].Value.SI[0] *= 2
	f.Add(Freeze(FrozenOf(p), FrozenOf(calculation("A"))).Text())
	f.Add([]byte("quoin frozen results, format 1\n[values 1]  ~1234\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		// The codes are made anew, so that what lies behind them is reached.
		lines := strings.Split(string(data), "\n")
		for i, l := range lines {
			if at := strings.LastIndex(l, "  ~"); at >= 0 {
				lines[i] = l[:at] + "  ~" + code(l[:at])
			}
		}
		for _, text := range []string{string(data), strings.Join(lines, "\n")} {
			r, list := ParseFrozen("p", []byte(text))
			if (r == nil) == (len(list) == 0) {
				t.Fatal("neither results nor faults, or both")
			}
			for _, d := range list {
				if d.Range.Line < 1 || d.Range.Line > 1+strings.Count(text, "\n") {
					t.Fatalf("a fault in line %d", d.Range.Line)
				}
			}
			if r == nil {
				continue
			}
			plain := strings.ReplaceAll(strings.TrimPrefix(text, "\ufeff"), "\r\n", "\n")
			if string(r.Text()) != plain {
				t.Fatalf("read and written:\n%q\nnot\n%q", r.Text(), plain)
			}
			Compare(r, r, r.Tolerance)
			Freeze(r, r)
		}
	})
}

// TestCompare: what moved, in order of weight.
func TestCompare(t *testing.T) {
	p := calculation("A")
	old := FrozenOf(p)
	if d := Compare(old, FrozenOf(calculation("A")), 0); d.Differs() || len(d.Files)+len(d.Blocks) > 0 || d.Compared == 0 {
		t.Fatalf("a package differs from itself: %+v", d)
	}
	q := calculation("B")
	q.Values[0].Value.SI[0] = 6
	q.Values[1].Value.SI[0] *= 1.25
	q.Values[2].Value.SI[1] = -0.0227
	q.Values[4].Value.SI[3] = 3e-10 // faint beside the others of its kind
	q.Settings[1].Value.Numbers[0].Value = 0.02
	q.Inputs[1].SHA256 = "ffff"
	q.Assumptions[0].Status = "verified"
	q.Checks[0].OK, q.Checks[0].Demand.Value = false, 0.09
	r := 0.09 / 0.084
	q.Checks[0].Ratio = &r
	q.Chapters[0].Pieces[0].Block.Name = "elf2"
	q.Series[0].Y = quantity.List(slices.Clone(q.Series[0].Y.SI), q.Series[0].Y.Unit, nil)
	q.Series[0].Y.SI[39] = -8
	d := Compare(old, FrozenOf(q), Tolerance)
	tell := func(list []exhibit.Moved) string {
		var out []string
		for _, m := range list {
			s := fmt.Sprintf("%s[%s]%s: %s -> %s", m.ID, m.Index, m.Label, m.Old, m.New)
			if m.By != nil {
				s += fmt.Sprintf(" %+.3f", *m.By)
			}
			if m.Flipped {
				s += " flipped"
			}
			out = append(out, s)
		}
		return strings.Join(out, "\n")
	}
	for _, c := range []struct{ name, got, want string }{
		{"checks", tell(d.Checks), "d.drift <= 0.02 * h [1][]Level 1: OK, ratio 0.4000 (demand 33.90 mm, limit 84 mm) -> NOT OK, ratio 1.071 (demand 90 mm, limit 84 mm) +1.679 flipped"},
		{"inputs", tell(d.Inputs), "R[]: 8 -> 6 -0.250\nframe.damping[]: 5 % -> 2 % -0.600"},
		{"files", tell(d.Files), "records/é east.csv[]: sha256:12e4 -> sha256:ffff"},
		{"values", tell(d.Values), "d.drift[2]Roof = top: 22.70 mm -> \u221222.70 mm -2.000\nV[]: 1271 kN -> 1589 kN +0.250"},
		{"series", tell(d.Series), "rs.PSA@5%[]: greatest 4 m/s², rms 2.353 m/s² -> greatest 8 m/s², rms 2.595 m/s² +1.000"},
		{"assumptions", tell(d.Assumptions), "A1[]: open: Floors are rigid, in their plane -> verified: Floors are rigid, in their plane"},
		{"blocks", tell(d.Blocks), "elf[]: static -> \nelf2[]:  -> static"},
	} {
		if c.got != c.want {
			t.Errorf("%s:\n%s\nwant\n%s", c.name, c.got, c.want)
		}
	}
	if !slices.IsSortedFunc(d.Results(), func(a, b exhibit.Moved) int {
		order := []string{exhibit.MovedCheck, exhibit.MovedInput, exhibit.MovedAssumption, exhibit.MovedValue, exhibit.MovedSeries}
		return cmp.Compare(slices.Index(order, a.What), slices.Index(order, b.What))
	}) {
		t.Error("results are out of order")
	}
}

// TestUnitsDoNotMove: the same force in another unit has not moved, another force has.
func TestUnitsDoNotMove(t *testing.T) {
	in := func(unit string, x float64) *Frozen {
		u := quantity.MustUnit(unit)
		return FrozenOf(&exhibit.Package{System: quantity.SI, Values: []exhibit.Entry{{ID: "V", Value: quantity.Scalar(x, u), Depends: []string{"x"}}}})
	}
	if d := Compare(in("kN", 5e5), in("kip", 5e5), Tolerance); d.Differs() {
		t.Errorf("%v", d.Values)
	}
	for _, other := range []*Frozen{in("kip", 6e5), in("m", 500), in("N", 500)} {
		if d := Compare(in("kN", 5e5), other, Tolerance); len(d.Values) != 1 {
			t.Errorf("%v is taken for 500 kN", other.Sections[valuesPart])
		}
	}
}

// TestRatioOfAnIdentity: what rounding leaves of a difference is no change of a check of equality.
func TestRatioOfAnIdentity(t *testing.T) {
	in := func(r float64) *Frozen {
		return FrozenOf(&exhibit.Package{Checks: []exhibit.Check{{ID: "a == b within 1 %", Demand: exhibit.Number{Value: 1}, Limit: exhibit.Number{Value: 1}, Ratio: &r, OK: true}}})
	}
	if d := Compare(in(1e-13), in(3e-9), Tolerance); d.Differs() {
		t.Errorf("%v", d.Checks)
	}
	if d := Compare(in(1e-13), in(1e-5), Tolerance); !d.Differs() {
		t.Error("a difference that appears is not told")
	}
}
