package document

import (
	"fmt"
	"maps"
	"math"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// items visits every exhibit with the block and the part it stands in.
func items(p *exhibit.Package, visit func(b *exhibit.Block, part string, it exhibit.Item)) {
	for _, c := range p.Chapters {
		for _, piece := range c.Pieces {
			if piece.Block == nil {
				continue
			}
			for _, part := range piece.Block.Parts {
				for _, it := range part.Items {
					visit(piece.Block, part.Name, it)
				}
			}
		}
	}
}

// table finds a table by its id.
func table(t *testing.T, p *exhibit.Package, id string) *exhibit.Table {
	t.Helper()
	var found *exhibit.Table
	items(p, func(_ *exhibit.Block, _ string, it exhibit.Item) {
		if it.Table != nil && it.Table.ID == id {
			found = it.Table
		}
	})
	if found == nil {
		t.Fatalf("no table %s", id)
	}
	return found
}

// figureOf finds a figure by its id.
func figureOf(t *testing.T, p *exhibit.Package, id string) *exhibit.Figure {
	t.Helper()
	var found *exhibit.Figure
	items(p, func(_ *exhibit.Block, _ string, it exhibit.Item) {
		if it.Figure != nil && it.Figure.ID == id {
			found = it.Figure
		}
	})
	if found == nil {
		t.Fatalf("no figure %s", id)
	}
	return found
}

// TestShownNumbersAreTheRegisters: a number that names a value is that value, and
// the result of a method's equation is the value of its symbol.
func TestShownNumbersAreTheRegisters(t *testing.T) {
	_, res := runKinds(t, Options{})
	p := res.Package
	numbers, equations := 0, 0
	same := func(where, id string, x float64) {
		stem, rest, indexed := strings.Cut(id, "[")
		v := value(t, p, stem).Value
		i := 0
		if indexed {
			fmt.Sscanf(rest, "%d]", &i)
			i--
		}
		if math.Abs(x-v.SI[i]) > 1e-12*math.Abs(v.SI[i]) {
			t.Errorf("%s shows %v for %s, which is %v", where, x, id, v.SI[i])
		}
		numbers++
	}
	items(p, func(b *exhibit.Block, part string, it exhibit.Item) {
		if it.Table != nil {
			for _, row := range it.Table.Rows {
				for _, c := range row {
					for _, n := range c.Numbers {
						if n.ID != "" {
							same(it.Table.ID, n.ID, n.Value)
						}
					}
				}
			}
		}
		if e := it.Equation; e != nil && e.Result != nil && part == "method" {
			equations++
			same("the method of "+b.Name, e.Symbol.ID, e.Result.SI[0])
		}
	})
	if numbers < 50 || equations < 4 {
		t.Errorf("%d numbers and %d equations of methods found", numbers, equations)
	}
}

// TestModalTables: what the tables of modes and combine add to the values.
func TestModalTables(t *testing.T) {
	_, res := runKinds(t, Options{})
	p := res.Package
	num := func(c exhibit.Cell) float64 { return c.Numbers[0].Value }
	T, gamma, ratio := value(t, p, "m.T").Value.SI, value(t, p, "m.gamma").Value.SI, value(t, p, "m.mass_ratio").Value.SI
	phi := value(t, p, "m.phi").Value.SI
	for i, row := range table(t, p, "m-modes").Rows {
		if got := num(row[2]); math.Abs(got*T[i]-1) > 1e-14 {
			t.Errorf("frequency %d is %v", i+1, got)
		}
	}
	for i, row := range table(t, p, "m-shapes").Rows { // highest level on top
		if level := 1 - i; num(row[2]) != phi[level] || num(row[3]) != phi[2+level] || row[0].Text != []string{"L2", "L1"}[i] {
			t.Errorf("row %d of the shapes is %v", i+1, row)
		}
	}
	mass := value(t, p, "frame.mass").Value.SI[0]
	rows := table(t, p, "r-modes").Rows
	for i, row := range rows[:2] { // on the plateau, R = 5
		if v, a := num(row[6]), 9.80665; math.Abs(v/(ratio[i]*mass*a/5)-1) > 1e-12 || math.Abs(num(row[2])/a-1) > 1e-12 || math.Abs(num(row[3])/(a*T[i]*T[i]/(4*math.Pi*math.Pi))-1) > 1e-12 || num(row[4]) != gamma[i] || num(row[5]) != ratio[i] {
			t.Errorf("mode %d of the combination is %v", i+1, row)
		}
	}
	f := figureOf(t, p, "r")
	drift, u := value(t, p, "r.drift_ratio").Value.SI, value(t, p, "r.displacement").Value.SI
	if got := f.Panels[1].Series[0].X; !slices.Equal(got, []float64{0, u[0], u[1]}) {
		t.Errorf("the profile of displacements is %v", got)
	}
	if got := f.Panels[2].Series[0]; !slices.Equal(got.X, []float64{drift[0], drift[0], drift[1], drift[1]}) || !slices.Equal(got.Y, []float64{0, 4, 4, 7}) {
		t.Errorf("the profile of drift ratios is %v over %v", got.X, got.Y)
	}
}

// TestSeries: every series of the results, with what it is over and of.
func TestSeries(t *testing.T) {
	_, res := runKinds(t, Options{})
	want := map[string]quantity.Dim{"design.PSA": quantity.Acceleration, "read.PSA": quantity.Acceleration}
	for _, r := range []string{"east", "push", "filtered"} {
		want[r+".a"], want[r+".v"], want[r+".d"] = quantity.Acceleration, quantity.Velocity, quantity.Length
		want[r+".husid"] = quantity.None
		if r != "east" { // three samples have no band of their own
			want[r+".fourier"] = quantity.Velocity
		}
	}
	for _, q := range []string{"@2%", "@5%"} {
		for what, d := range map[string]quantity.Dim{"PSA": quantity.Acceleration, "PSV": quantity.Velocity, "SD": quantity.Length, "SV": quantity.Velocity, "SA": quantity.Acceleration} {
			want["rs."+what+q] = d
		}
	}
	for _, of := range []string{"moved.r.base_shear@", "moved.2 * V@"} {
		want[of+"r.R"], want[of+"V"] = quantity.Force, quantity.Force
	}
	for _, c := range res.Package.Series {
		over := quantity.Time
		if strings.HasSuffix(c.ID, "@r.R") {
			over = quantity.None
		} else if strings.HasSuffix(c.ID, "@V") {
			over = quantity.Force
		}
		if strings.HasSuffix(c.ID, ".fourier") {
			over = quantity.MustUnit("Hz").Dim
		}
		if d, ok := want[c.ID]; !ok || !c.Y.Dim.Is(d) || !c.X.Dim.Is(over) || len(c.X.SI) != len(c.Y.SI) {
			t.Errorf("series %s: %d over %d values, %s over %s", c.ID, len(c.Y.SI), len(c.X.SI), c.Y.Dim.Name(), c.X.Dim.Name())
		}
		delete(want, c.ID)
	}
	for id := range want {
		t.Errorf("no series %s", id)
	}
}

// TestEcho: what was used, what was taken by default, and where it came from.
func TestEcho(t *testing.T) {
	_, res := runKinds(t, Options{})
	got := map[string]string{}
	items(res.Package, func(b *exhibit.Block, _ string, it exhibit.Item) {
		if it.Echo == nil {
			return
		}
		for _, r := range it.Echo.Rows {
			text := r.Value.Text
			for _, n := range r.Value.Numbers {
				text += strings.TrimRight(n.Text()+" "+n.Unit.Pretty(), " ") + ";"
			}
			if r.Default {
				text += " default"
			}
			if r.Written != "" {
				text += " written " + r.Written
			}
			got[b.Name+"."+r.Field] = strings.TrimSpace(text + " " + r.From)
		}
	})
	for field, want := range map[string]string{
		"r.rule": "CQC default", "r.direction": "x default", "r.I_e": "1; default", "r.R": "5;", "r.damping": "5 %; of the structure", "rr.rule": "SRSS", "rr.damping": "2 %;",
		"filtered.treat[1]": "straight line taken off the acceleration, by least squares on the acceleration", "filtered.treat[2]": "cosine taper over 0.01 s at the start and 0.02 s at the end",
		"filtered.treat[3]":        "zero-phase Butterworth band-pass 8 to 20 Hz, order 2 run forward and backward, gain of both passes 0.5 (−6 dB) at a corner, 0.375 s of pad kept at each end",
		"filtered.shortest_period": "0.0625 s; from the upper limit of the band, common practice",
		"push.scale":               "1; default", "east.scale": "1.5;", "east.step": "0.01 s; from the file", "east.unit": "cm/s^2 from the file", "grid.spacing": "log default",
		"grid.include": "0.3149 s;0.2123 s; written [m.T[1], 1.5 * m.T[2]]", "rs.damping": "5 %;2 %;", "m.count": "2 default", "read.rows": "3", "read.damping": "5 %;",
	} {
		if got[field] != want {
			t.Errorf("%s is echoed as %q, want %q", field, got[field], want)
		}
	}
}

// triggeredBy are the blocks behind every triggered caution.
func triggeredBy(p *exhibit.Package) map[string]string {
	out := map[string]string{}
	for _, c := range p.Cautions {
		if len(c.Blocks) > 0 {
			out[c.Key] = strings.Join(c.Blocks, " ")
		}
	}
	return out
}

// TestCautionsTriggered: all cautions of documents, with the blocks they name.
func TestCautionsTriggered(t *testing.T) {
	_, res := runKinds(t, Options{})
	kinds := map[string]string{
		"open-assumption": "b-reg", "open-comment": "b-remarks", "sourceless": "b-east b-filtered b-design b-read b-frame b-same b-r b-rr b-dr b-elf b-file", "linear": "b-frame b-same b-r b-rr b-ra b-elf", "reduced": "b-r b-elf", "static": "b-elf", "accidental-torsion": "b-elf", "fixed-base": "b-frame b-same", "planar": "b-frame b-same",
		"second-order": "b-frame b-same", "damping": "b-rs b-frame b-r b-rr b-ra", "combined": "b-r b-rr b-ra", "unprocessed": "b-east b-push", "processed": "b-filtered", "short-record": "b-rs",
		"few-motions": "b-rs b-rr", "two-period": "b-design", "table-target": "b-read", "drift": "b-dr", "drift-scaling": "b-dr", "what-if": "b-moved",
	}
	if got := triggeredBy(res.Package); !maps.Equal(got, kinds) {
		t.Errorf("testdata/kinds.txtar triggers\n%v, want\n%v", got, kinds)
	}

	// Five equal storeys: the first mode holds 88 % of the mass, two hold 96 %.
	storeys := []string{"storeys:"}
	for i := range 5 {
		storeys = append(storeys, fmt.Sprintf("  - {level: L%d, height: 4 m, mass: 100 t, stiffness: 100 MN/m}", i+1))
	}
	p := ran(t, calc("record up", "form: half_sine", "amplitude: 0.1 g", "duration: 0.5 s", "step: 0.01 s", "scale: 4.01")+
		calc("record down", "form: half_sine", "amplitude: 0.1 g", "duration: 0.5 s", "step: 0.01 s", "scale: -0.24")+
		calc("record even", "form: half_sine", "amplitude: 0.1 g", "duration: 0.5 s", "step: 0.01 s", "scale: -4", "usable_period: 0.4 s")+
		calc("record made", "file: r.csv", "source: invented for this test")+
		calc("periods fine", "values: [0.05 s, 0.4 s]")+calc("periods long", "values: [0.2 s, 0.41 s]")+
		calc("spectrum coarse", "record: up", "periods: fine")+calc("spectrum beyond", "record: even", "periods: long")+calc("spectrum inside", "record: even", "periods: edge")+calc("periods edge", "values: [0.2 s, 0.4 s]")+
		calc("structure s", storeys...)+
		calc("modes few", "structure: s", "count: 1")+calc("modes most", "structure: s", "count: 2"),
		map[string]string{"r.csv": sawtooth})
	want := map[string]string{
		"sourceless": "b-s", "scaled": "b-up b-down", "demonstration": "b-made", "coarse-step": "b-coarse", "usable-period": "b-beyond", "unprocessed": "b-up b-down b-even b-made",
		"few-motions": "b-coarse b-beyond b-inside", "damping": "b-coarse b-beyond b-inside", "linear": "b-s", "fixed-base": "b-s", "planar": "b-s", "second-order": "b-s", "mass-sum": "b-few",
	}
	if got := triggeredBy(p); !maps.Equal(got, want) {
		t.Errorf("got\n%v, want\n%v", got, want)
	}
}

// TestDemonstration: a data file whose head says that it is invented marks the
// package; a word further down, or in the document, does not.
func TestDemonstration(t *testing.T) {
	model := calc("structure s", "elevation: [4 m, 8 m]", "weight: {file: w.csv}", "stiffness: {file: K.csv, unit: kN/m}") + calc("table loads", "file: w.csv")
	for _, c := range []struct{ weights, stiffness, want string }{
		{"# Weights. INVENTED.\r\nlevel,weight [kN]\r\nL1,900\r\nL2,800\r\n", "300,-120\n-120,120\n", "b-s b-loads"},
		{"level,weight [kN]\nL1,900\nL2,800\n", "\xef\xbb\xbf# frame\n# invented\n300,-120\n-120,120\n", "b-s"},
		{"level,weight [kN]\n# invented\nL1,900\ninvented,800\n", "300,-120\n-120,120\n", ""},
	} {
		p := ran(t, "All is invented.\n\n"+model, map[string]string{"w.csv": c.weights, "K.csv": c.stiffness})
		if got := triggeredBy(p)["demonstration"]; got != c.want {
			t.Errorf("%q, %q: marked by %q, want %q", c.weights, c.stiffness, got, c.want)
		}
	}
}

// TestCloseModes: a light appendage tuned to the building splits its mode in two
// that SRSS must not combine unsaid.
func TestCloseModes(t *testing.T) {
	building := calc("structure s", "storeys:", "  - {level: L1, height: 4 m, mass: 1000 t, stiffness: 100 MN/m}", "  - {level: L2, height: 1 m, mass: 1 t, stiffness: 0.1 MN/m}", "damping: 5 %") +
		calc("modes m", "structure: s") + calc("target d", "basis: ASCE/SEI 7-22", "S_DS: 1.2", "S_D1: 0.9", "T_L: 6 s")
	for rule, want := range map[string]string{"SRSS": "b-c", "CQC": ""} {
		p := ran(t, building+calc("combine c", "modes: m", "target: d", "rule: "+rule), nil)
		if got := triggeredBy(p)["close-modes"]; got != want || warned(p, "close-modes") != (want != "") {
			t.Errorf("%s of close modes: caution at %q, want %q", rule, got, want)
		}
	}
}

// TestCheckRows: ids, sides, tolerance and verdict of every kind of check.
func TestCheckRows(t *testing.T) {
	p := ran(t, calc("formula f", "a = [1 m, 3 m]", "b = 2 m", "check a <= b", "check b == 2.01 m within 1 %", "check b == 2.05 m within 2 mm", "check b >= 4 m"), nil)
	want := []string{
		"a <= b [1]: 1 <= 2 true ratio 0.5", "a <= b [2]: 3 <= 2 false ratio 1.5", "b == 2.01 m within 1 %: 2 == 2.01 true ratio 0.4975 tolerance 0.0201",
		"b == 2.05 m within 2 mm: 2 == 2.05 false ratio 25 tolerance 0.002", "b >= 4 m: 2 >= 4 false ratio 2",
	}
	for i, c := range p.Checks {
		got := fmt.Sprintf("%s: %g %s %g %v ratio %.4g", c.ID, c.Demand.Value, c.Relation, c.Limit.Value, c.OK, *c.Ratio)
		if c.Tolerance != nil {
			got += fmt.Sprintf(" tolerance %.4g", c.Tolerance.Value)
		}
		if got != want[i] {
			t.Errorf("got %q, want %q", got, want[i])
		}
	}
	if len(p.Checks) != len(want) {
		t.Errorf("%d checks, want %d", len(p.Checks), len(want))
	}
}

// TestFigureBlock: the standard's curve governs and goes on to the end of the
// axis; marks are named by what was written.
func TestFigureBlock(t *testing.T) {
	p := ran(t, one+calc("record r", "file: r.csv")+calc("periods g", "values: [0.5 s, 2 s]")+calc("spectrum rs", "record: r", "periods: g")+
		calc("figure both", "series: [rs.PSA, d.PSA]", "to: 9 s", "mark:", "  - m.T[1]", "  - 2 s"), map[string]string{"r.csv": sawtooth})
	f := figureOf(t, p, "both").Panels[0]
	if f.Series[0].Role != exhibit.Data || f.Series[1].Role != exhibit.Governing || f.Series[0].Label != "rs 5 %" || f.Series[1].Label != "d" {
		t.Errorf("series %s %s and %s %s", f.Series[0].Label, f.Series[0].Role, f.Series[1].Label, f.Series[1].Role)
	}
	x, y := f.Series[1].X, f.Series[1].Y
	if n := len(x) - 1; x[n] != 9 || math.Abs(y[n]-0.9*6/81*9.80665) > 1e-12 || !slices.Contains(x, 6) || !slices.IsSorted(x) {
		t.Errorf("the target ends at %v s with %v m/s²", x[n], y[n])
	}
	if len(f.Lines) != 2 || f.Lines[0].Label != "T₁ 0.500 s" || f.Lines[1].Label != "2 s" {
		t.Errorf("marks %v", f.Lines)
	}
	if own := figureOf(t, p, "d").Panels[0].Series[0].X; own[len(own)-1] != 4 {
		t.Errorf("the target's own figure ends at %v s, want 4 (its last corner below 6 s is at 0.75 s)", own[len(own)-1])
	}
}

// TestFootnotes: they count through all parts, where they are referred to and
// where they stand.
func TestFootnotes(t *testing.T) {
	files := map[string]string{"b.md": "# B\n\nFour[^1] five[^2].\n\n[^1]: fourth\n[^2]: fifth\n"}
	body := "# A\n\nOne[^1] two[^2] three[^3].\n\n[^1]: first\n[^2]: second, as the third[^3]\n[^3]: third\n"
	fs := strings.Replace(head, "title: T\n", "title: T\nparts: [b.md]\n", 1) + body
	p := book(t, fs, files)
	var refs []int
	var collect func([]exhibit.Prose)
	collect = func(list []exhibit.Prose) {
		for _, n := range list {
			if n.Kind == exhibit.FootnoteRef {
				refs = append(refs, n.Level)
			}
			collect(n.Children)
		}
	}
	for _, c := range p.Chapters {
		for _, piece := range c.Pieces {
			collect(piece.Prose)
		}
	}
	var notes []int
	for _, f := range p.Footnotes {
		notes = append(notes, f.Index)
		collect(f.Body)
	}
	if !slices.Equal(notes, []int{1, 2, 3, 4, 5}) || !slices.Equal(refs, []int{1, 2, 3, 4, 5, 3}) {
		t.Errorf("footnotes %v, referred to as %v", notes, refs)
	}
}

// TestFilesOfTables: the id of a table is a name that any file system takes, so
// that the page and the folder agree on it.
func TestFilesOfTables(t *testing.T) {
	p := ran(t, calc("record con", "file: r.csv")+calc("record Con", "file: r.csv"), map[string]string{"r.csv": sawtooth})
	var ids []string
	items(p, func(_ *exhibit.Block, _ string, it exhibit.Item) {
		if it.Figure != nil {
			ids = append(ids, it.Figure.ID)
		}
	})
	if !slices.Equal(ids, []string{"_con", "_Con-2"}) {
		t.Errorf("figures %v", ids)
	}
}

// TestOverridesTold: what was replaced, and that its place in the page says so.
func TestOverridesTold(t *testing.T) {
	body := calc("formula f", "a = 2 m", "b = 2 * a") + calc("periods g", "from: 0.1 s", "to: 1.6 s", "count: 5")
	p := ran(t, body, nil, exhibit.Override{Name: "a", Text: "3 m"}, exhibit.Override{Name: "g.count", Text: "3"}, exhibit.Override{Name: "g.spacing", Text: "linear"})
	near(t, p, 1e-14, map[string][]float64{"a": {3}, "b": {6}, "g.T": {0.1, 0.85, 1.6}})
	if o := p.Provenance.Overrides; len(o) != 3 || o[0].Was != "2 m" || o[1].Was != "5" || o[2].Was != "not given" {
		t.Errorf("overrides %v", o)
	}
	var said []string
	items(p, func(_ *exhibit.Block, _ string, it exhibit.Item) {
		if it.Equation != nil && it.Equation.Overridden {
			said = append(said, it.Equation.ID)
		}
	})
	if !slices.Equal(said, []string{"a"}) {
		t.Errorf("%v are shown as overridden, want a", said)
	}
}

// TestOverridesRefused: a value of another dimension, a name that is not there, a
// list of blocks, a name set twice.
func TestOverridesRefused(t *testing.T) {
	body := []byte(head + calc("formula f", "a = 2 m") + one)
	for code, set := range map[string][]exhibit.Override{
		"dimension": {{Name: "a", Text: "2 s"}}, "unknown-name": {{Name: "b", Text: "2 m"}}, "unknown-field": {{Name: "d.S_DX", Text: "1"}},
		"override": {{Name: "a", Text: "3 m"}, {Name: "a", Text: "4 m"}},
	} {
		res := Run(Source{FS: fstest.MapFS{"package.md": {Data: body}}, Main: "package.md"}, Options{Overrides: set})
		if res.Package != nil || len(res.Diagnostics) != 1 || res.Diagnostics[0].Code != code {
			t.Errorf("%v: want the one error %s\n%s", set, code, text(res))
		}
	}
}

// TestFrontMatter: each person and each default in its own place.
func TestFrontMatter(t *testing.T) {
	p := book(t, "---\nquoin: 1\ntitle: T\nprepared: AB 2031-01-02\nchecked: CD 2031-01-03\napproved: {initials: EF, date: 2031-01-04}\nrevisions: [{rev: A, date: 2031-01-01, note: first, prepared: AB, checked: CD}]\n---\n", nil)
	m := p.Meta
	if m.Prepared != (exhibit.Sign{Initials: "AB", Date: "2031-01-02"}) || m.Checked != (exhibit.Sign{Initials: "CD", Date: "2031-01-03"}) || m.Approved != (exhibit.Sign{Initials: "EF", Date: "2031-01-04"}) ||
		len(m.Revision) != 1 || m.Revision[0] != (exhibit.Revision{Rev: "A", Date: "2031-01-01", Note: "first", Prepared: "AB", Checked: "CD"}) {
		t.Errorf("people %v %v %v, revisions %v", m.Prepared, m.Checked, m.Approved, m.Revision)
	}
	if m.Status != "draft" || m.Paper != "A4" || p.System != quantity.SI {
		t.Errorf("status %q, paper %q, units %q by default", m.Status, m.Paper, p.System)
	}
}

// TestRegisters: the files read with the document first, and the references that
// were cited from memory among all in order of key.
func TestRegisters(t *testing.T) {
	_, res := runKinds(t, Options{})
	var paths, refs []string
	for _, in := range res.Package.Inputs {
		paths = append(paths, in.Path+" "+in.Role)
	}
	for _, r := range res.Package.References {
		said := r.Key
		if r.Memory {
			said += " from memory"
		}
		refs = append(refs, said)
	}
	if got := strings.Join(paths, ", "); got != "package.md document, dot.svg image, east.csv record, more.md document, storeys.csv table, table.csv table" {
		t.Errorf("inputs: %s", got)
	}
	if !slices.IsSorted(refs) || !slices.Contains(refs, "GR") || !slices.Contains(refs, "ASCE/SEI 7-22 from memory") {
		t.Errorf("references: %v", refs)
	}
}

// TestUnitsOfResults: the units of the two systems, small lengths apart.
func TestUnitsOfResults(t *testing.T) {
	for system, want := range map[string][]string{"SI": {"kN", "kN*m", "mm", "m", "t"}, "US": {"kip", "kip*ft", "in", "ft", "kip*s^2/in"}} {
		p := book(t, "---\nquoin: 1\ntitle: T\nunits: "+system+"\n---\n"+one+calc("combine c", "modes: m", "target: d"), nil)
		for i, id := range []string{"c.base_shear", "c.overturning", "c.drift", "s.h", "s.mass"} {
			if got := value(t, p, id).Value.Unit.Text; got != want[i] {
				t.Errorf("%s: %s is shown in %s, want %s", system, id, got, want[i])
			}
		}
	}
}

// TestPeaksRinged: the ring stands on the curve, on its side of zero.
func TestPeaksRinged(t *testing.T) {
	for scale, sign := range map[string]float64{"1": 1, "-1": -1} {
		p := ran(t, calc("record r", "file: r.csv", "scale: "+scale), map[string]string{"r.csv": sawtooth})
		for i, want := range [][2]float64{{1, 3}, {1.5, 2.25}, {3, 3}} {
			at := figureOf(t, p, "r").Panels[i].Points[0]
			if math.Abs(at.X-want[0]) > 1e-12 || math.Abs(at.Y-sign*want[1]) > 1e-12 {
				t.Errorf("scale %s: panel %d rings %v at %v s, want %v at %v s", scale, i+1, at.Y, at.X, sign*want[1], want[0])
			}
		}
	}
}

// TestVerifiedAssumption leaves nothing open.
func TestVerifiedAssumption(t *testing.T) {
	p := ran(t, calc("assumptions a", "- {id: A1, text: Known, status: VERIFIED, by: AB}"), nil)
	near(t, p, 0, map[string][]float64{"a.open": {0}, "a.count": {1}})
	if got := triggeredBy(p); len(got) > 0 {
		t.Errorf("cautions %v", got)
	}
	if as := p.Assumptions; len(as) != 1 || as[0].Status != "verified" || as[0].By != "AB" || as[0].Anchor != "b-a" {
		t.Errorf("assumptions %v", as)
	}
}
