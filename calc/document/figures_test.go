package document

import (
	"math"
	"slices"
	"strings"
	"testing"

	"quoin/calc/exhibit"
)

var tower = calc("structure frame", "storeys:",
	"  - {level: L1, height: 4 m, weight: 100 kN, stiffness: 9 kN/mm}",
	"  - {level: L2, height: 3 m, weight: 80 kN, stiffness: 7 kN/mm}")

// TestProfiles: values of storeys are steps at the tops of their storeys, values
// of levels points, moments at the feet; shapes begin at the base; a limit is drawn
// as one; and what a formula makes of vectors keeps their place.
func TestProfiles(t *testing.T) {
	p := ran(t, tower+calc("modes m", "structure: frame")+
		calc("target design", "basis: ASCE/SEI 7-22", "S_DS: 1", "S_D1: 0.6", "T_L: 8 s")+
		calc("combine r", "modes: m", "target: design", "damping: 5 %")+
		calc("formula", "Delta = 5 * r.drift as mm", "drift_limit = 0.02 * frame.h_s as mm", "W_x = cumsum(frame.w)")+
		calc("figure all", "over: frame", "series:", "  - { profile: Delta, label: design }", "  - { profile: drift_limit }", "  - { profile: r.displacement, label: u }", "  - { profile: \"m.phi[1] * 1 mm\" }")+
		calc("figure moment", "over: frame", "series: [{ profile: r.overturning }]")+
		calc("figure force", "over: frame", "series: [{ profile: r.storey_force }, { profile: W_x, at: storeys }]", "mark_y: 3 m", "mark: 10 kN"), nil)
	type look struct {
		step, dots bool
		role       exhibit.Role
		y          []float64
	}
	want := []look{{true, false, exhibit.Data, []float64{4, 7}}, {true, false, exhibit.Limit, []float64{4, 7}}, {false, true, exhibit.Data, []float64{0, 4, 7}}, {false, true, exhibit.Data, []float64{0, 4, 7}}}
	f := figureOf(t, p, "all")
	for i, s := range f.Panels[0].Series {
		w := want[i]
		if s.Step != w.step || s.Dots != w.dots || s.Role != w.role || !slices.Equal(s.Y, w.y) || len(s.X) != len(s.Y) {
			t.Errorf("%s: step %v, dots %v, %s, over %v; want %v", s.Label, s.Step, s.Dots, s.Role, s.Y, w)
		}
	}
	if got, want := f.Panels[0].Series[0].X, value(t, p, "Delta").Value.SI; !slices.Equal(got, want) {
		t.Errorf("the profile shows %v, Delta is %v", got, want)
	}
	if names := f.Panels[0].Y.Names; len(names) != 3 || names[1].Name != "L1" || names[1].At != 4 || !f.Beside {
		t.Errorf("the height is named %v", names)
	}
	if y := figureOf(t, p, "moment").Panels[0].Series[0].Y; !slices.Equal(y, []float64{0, 4}) {
		t.Errorf("moments at the feet stand at %v", y)
	}
	q := figureOf(t, p, "force").Panels[0]
	if len(q.Lines) != 2 || !q.Lines[0].Vertical || q.Lines[0].At != 10e3 || q.Lines[1].Vertical || q.Lines[1].At != 3 {
		t.Errorf("marks %v", q.Lines)
	}
	if !slices.Equal(q.Series[0].Y, []float64{4, 7}) || q.Series[0].Step || !q.Series[1].Step {
		t.Errorf("forces stand at %v; steps %v, %v", q.Series[0].Y, q.Series[0].Step, q.Series[1].Step)
	}
}

// TestRatio: a over b on what both cover: a table is linear between its rows, a
// standard's spectrum is computed exactly.
func TestRatio(t *testing.T) {
	p := ran(t, calc("target a", "table: a.csv", "damping: 5 %")+calc("target b", "table: b.csv", "damping: 5 %")+
		calc("target design", "basis: ASCE/SEI 7-22", "S_DS: 1", "S_D1: 0.6", "T_L: 8 s")+
		calc("figure two", "series: [{ ratio: [a.PSA, b.PSA] }]", "mark_y: [0.5, 2]")+
		calc("figure exact", "series: [{ ratio: [a.PSA, design.PSA] }]", "from: 1.003 s", "y_to: 3"),
		map[string]string{"a.csv": "T [s],PSA [g]\n0.5,1\n2.5,3\n", "b.csv": "T [s],PSA [g]\n1,4\n2,2\n4,1\n"})
	f := figureOf(t, p, "two").Panels[0]
	s := f.Series[0]
	if want := []float64{1, 2, 2.5}; !slices.Equal(s.X, want) {
		t.Fatalf("the ratio stands over %v, want %v", s.X, want)
	}
	for i, want := range []float64{1.5 / 4, 2.5 / 2, 3 / 1.75} {
		if math.Abs(s.Y[i]-want) > 1e-14 {
			t.Errorf("ratio %v at %v s, want %v", s.Y[i], s.X[i], want)
		}
	}
	if len(f.Lines) != 3 || f.Lines[0].At != 1 || f.Lines[0].Vertical || f.Lines[2].At != 2 {
		t.Errorf("lines %v", f.Lines)
	}
	q := figureOf(t, p, "exact").Panels[0]
	e := q.Series[0]
	if e.X[0] != 1.003 || e.X[len(e.X)-1] != 2.5 || q.Y.Max == nil || *q.Y.Max != 3 {
		t.Errorf("from %v to %v, up to %v", e.X[0], e.X[len(e.X)-1], q.Y.Max)
	}
	for i, T := range e.X { // S_D1/T beyond T_S, 0.5 + T/... of the table
		if want := (1 + (T - 0.5)) / (0.6 / T); math.Abs(e.Y[i]/want-1) > 1e-12 {
			t.Errorf("ratio %v at %v s, want %v", e.Y[i], T, want)
		}
	}
}

// TestRatioCorners: a ratio has a point at each corner of a standard's spectrum,
// beyond the end of its series too.
func TestRatioCorners(t *testing.T) {
	p := ran(t, calc("target a", "table: a.csv", "damping: 5 %")+calc("target design", "basis: ASCE/SEI 7-22", "S_DS: 1", "S_D1: 0.6", "T_L: 8 s")+
		calc("figure f", "series: [{ ratio: [design.PSA, a.PSA] }]"), map[string]string{"a.csv": "T [s],PSA [g]\n0,1\n12,1\n"})
	s := figureOf(t, p, "f").Panels[0].Series[0]
	for _, T := range []float64{0, 0.12, 0.6, 8, 12} {
		if !slices.Contains(s.X, T) {
			t.Errorf("no point at %v s", T)
		}
	}
	if i := slices.Index(s.X, 8); i >= 0 && math.Abs(s.Y[i]-0.075) > 1e-14 {
		t.Errorf("ratio %v at 8 s, want 0.075", s.Y[i])
	}
}

// TestDots: few points of vectors are marked, many are a curve.
func TestDots(t *testing.T) {
	for count, want := range map[string]bool{"24": true, "25": false} {
		p := ran(t, calc("periods grid", "from: 0.1 s", "to: 2 s", "count: "+count)+calc("figure f", "series: [{ x: grid.T, y: grid.T }]"), nil)
		if s := figureOf(t, p, "f").Panels[0].Series[0]; s.Dots != want {
			t.Errorf("%s points: dots %v", count, s.Dots)
		}
	}
}

// TestHistoriesInFigure: records stand over time, not over periods.
func TestHistoriesInFigure(t *testing.T) {
	p := ran(t, calc("record r", "file: r.csv")+calc("figure f", "series: [r.v]", "x_axis: linear"), map[string]string{"r.csv": sawtooth})
	f := figureOf(t, p, "f").Panels[0]
	if f.X.Label != "time t" || f.Y.Label != "velocity v" {
		t.Errorf("%s over %s", f.Y.Label, f.X.Label)
	}
}

// TestNoSeries: what is near is named, and a vector is told from a series.
func TestNoSeries(t *testing.T) {
	for series, hint := range map[string]string{"a.PAS": "did you mean a.PSA?", "frame.w": "profile: frame.w", "a.velocity": "a has a.PSA"} {
		_, res := book2(head+tower+calc("target a", "table: a.csv", "damping: 5 %")+calc("figure f", "series: ["+series+"]"), map[string]string{"a.csv": "T [s],PSA [g]\n0.5,1\n2.5,3\n"})
		if len(res.Diagnostics) != 1 || res.Diagnostics[0].Code != "no-series" || !strings.Contains(res.Diagnostics[0].Hint, hint) {
			t.Errorf("%s: %v", series, res.Diagnostics)
		}
	}
}

// TestTripartite: curves become pseudo-velocities, and the diagonals say what they
// are called: 1 g at 1 s is 1.5608 m/s, 100 mm at 1 s 0.62832 m/s; the same in US units.
func TestTripartite(t *testing.T) {
	text := calc("target a", "table: a.csv", "damping: 5 %") + calc("figure f", "series: [a.PSA]", "axes: tripartite", "from: 0.1 s", "to: 10 s")
	files := map[string]string{"a.csv": "T [s],PSA [g]\n0,1\n0.5,1\n1,2\n10,0.1\n"}
	p := figureOf(t, ran(t, text, files), "f").Panels[0]
	s := p.Series[0]
	if i := slices.Index(s.X, 1); i < 0 || math.Abs(s.Y[i]/(2*9.80665/(2*math.Pi))-1) > 1e-12 || !p.X.Log || !p.Y.Log || s.X[0] <= 0 {
		t.Errorf("the curve is %v over %v", s.Y, s.X)
	}
	at1 := map[string]float64{"1 g": 9.80665 / (2 * math.Pi), "0.1 g": 0.980665 / (2 * math.Pi), "100 mm": 0.2 * math.Pi, "1000 mm": 2 * math.Pi}
	for _, d := range p.Diagonals {
		if want, ok := at1[d.Label]; ok {
			if got := d.Y * math.Pow(1/d.X, float64(d.Rise)); math.Abs(got/want-1) > 1e-12 || (d.Rise == 1) != strings.HasSuffix(d.Label, "g") {
				t.Errorf("%s is %v m/s at 1 s, rising %d; want %v", d.Label, got, d.Rise, want)
			}
			delete(at1, d.Label)
		}
	}
	if len(at1) > 0 {
		t.Errorf("no diagonals %v among %v", at1, p.Diagonals)
	}
}

const sine = "form: sine\namplitude: 0.3 g\nperiod: 0.5 s\ncycles: 20\nstep: 0.01 s\nsource: invented"

// TestBands: a bar from the shortest to the longest usable period of each record, the
// first on top; the corners of its filter, 1.25 beyond it, as a thin line.
func TestBands(t *testing.T) {
	filtered := sine + "\ntreat:\n  - taper: 1 s\n  - bandpass: { from: 0.2 Hz, to: 20 Hz }"
	p := ran(t, calc("record a", filtered)+calc("record b", sine+"\nusable_period: 3 s")+
		calc("figure f", "series: [{ band: a, label: first }, { band: b }]", "mark: 1 s"), nil)
	f := figureOf(t, p, "f")
	got := f.Panels[0]
	want := []exhibit.FigSerie{
		{Label: "0.0625 to 4.00 s", X: []float64{1.25 / 20, 1 / (1.25 * 0.2)}, Y: []float64{1, 1}, Role: exhibit.Bar},
		{X: []float64{1.0 / 20, 1 / 0.2}, Y: []float64{1, 1}, Role: exhibit.Data, Dots: true},
		{Label: "0.0200 to 3.00 s", X: []float64{0.02, 3}, Y: []float64{0, 0}, Role: exhibit.Bar}, // from the Nyquist period
	}
	if len(got.Series) != len(want) {
		t.Fatalf("series %v", got.Series)
	}
	for i, s := range got.Series {
		w := want[i]
		if s.Label != w.Label || s.Role != w.Role || s.Dots != w.Dots || s.Y[0] != w.Y[0] || s.Y[1] != w.Y[1] || math.Abs(s.X[0]/w.X[0]-1) > 1e-12 || math.Abs(s.X[1]/w.X[1]-1) > 1e-12 {
			t.Errorf("series %d is %v, want %v", i, s, w)
		}
	}
	if n := got.Y.Names; len(n) != 2 || n[0] != (exhibit.TickName{At: 1, Name: "first"}) || n[1] != (exhibit.TickName{At: 0, Name: "b"}) || !got.X.Log || *got.X.Min > 0.02 || *got.X.Max < 5 {
		t.Errorf("axes %v and %v", got.X, got.Y)
	}
}

// TestRing: the least and the largest value within the ends of the axes are ringed.
func TestRing(t *testing.T) {
	p := ran(t, calc("figure f", "series:", "  - { x: [1 s, 2 s, 3 s, 4 s], y: [5, 3, 4, 1], ring: least }", "  - { x: [1 s, 2 s, 3 s, 4 s], y: [5, 3, 4, 1], ring: largest }", "from: 2 s", "to: 3.5 s"), nil)
	got := figureOf(t, p, "f").Panels[0].Points
	if len(got) != 2 || got[0] != (exhibit.RefPoint{X: 2, Y: 3, Label: "3.00 at 2.00 s"}) || got[1] != (exhibit.RefPoint{X: 3, Y: 4, Label: "4.00 at 3.00 s"}) {
		t.Errorf("rings %v", got)
	}
	p = ran(t, tower+calc("figure f", "series: [{ profile: frame.w, ring: largest }]", "over: frame"), nil)
	w := value(t, p, "frame.w").Value
	most := slices.Index(w.SI, slices.Max(w.SI))
	if got := figureOf(t, p, "f").Panels[0].Points; len(got) != 1 || got[0].X != w.SI[most] || !strings.HasSuffix(got[0].Label, "at "+w.Labels[most]) {
		t.Errorf("rings %v", got)
	}
}

// TestBases: a caption that does not say by what standard its target stands, and at
// what damping, is helped; one that does is left alone.
func TestBases(t *testing.T) {
	d := calc("target d", "basis: ASCE/SEI 7-22", "S_DS: 1", "S_D1: 0.6", "T_L: 8 s")
	for caption, want := range map[string]string{"Demand": "Demand; d by ASCE/SEI 7-22, 5 % damping", "Demand by ASCE/SEI 7-22": "Demand by ASCE/SEI 7-22"} {
		p := ran(t, d+calc("figure f", "series: [d.PSA]", "caption: "+caption), nil)
		if got := figureOf(t, p, "f").Caption; got != want {
			t.Errorf("caption %q, want %q", got, want)
		}
	}
	p := ran(t, calc("record r", sine)+calc("periods g", "values: [0.5 s, 2 s]")+calc("spectrum rs", "record: r", "periods: g", "damping: 3 %")+calc("figure f", "series: [{ of: rs.PSA, label: east }]")+calc("figure h", "series: [rs.PSA]"), nil)
	if got := figureOf(t, p, "f").Caption; got != "east; rs at 3 % damping" {
		t.Errorf("caption %q", got)
	}
	if got := figureOf(t, p, "h").Caption; got != "rs 3 %" {
		t.Errorf("caption %q", got)
	}
}

// TestUnnamed: blocks without a name are called by their kind and order; text above
// changes nothing.
func TestUnnamed(t *testing.T) {
	vectors := "series: [{ x: [1 s, 2 s], y: [1, 2] }]"
	for _, above := range []string{"", "Words.\n\nAnd more words.\n\n"} {
		p := ran(t, above+calc("figure", vectors)+calc("table", "values: [{ value: 2 m, label: a }]")+calc("figure named", vectors)+calc("figure", vectors), nil)
		figureOf(t, p, "figure-1")
		figureOf(t, p, "figure-2")
		table(t, p, "table-1")
	}
}

// TestMasses: the running sum of the effective masses stands against the 90 % needed,
// and where it gets there is ringed.
func TestMasses(t *testing.T) {
	p := ran(t, tower+calc("modes m", "structure: frame"), nil)
	f := figureOf(t, p, "m-mass").Panels[0]
	sum := value(t, p, "m.mass_sum").Value.SI
	if s := f.Series[0]; !slices.Equal(s.Y[1:], sum) || s.Y[0] != 0 || s.X[0] != 0 || s.X[len(sum)] != float64(len(sum)) {
		t.Errorf("%v over %v, want %v", s.Y, s.X, sum)
	}
	first := slices.IndexFunc(sum, func(x float64) bool { return x >= 0.9 })
	if len(f.Lines) != 1 || f.Lines[0].At != 0.9 || f.Lines[0].Vertical || len(f.Points) != 1 || f.Points[0].X != float64(first+1) || f.Points[0].Y != sum[first] {
		t.Errorf("lines %v, points %v", f.Lines, f.Points)
	}
}

// TestBuildUp: the Arias intensity comes in from 0 to 1, with 5 and 95 % and the
// duration between them, which is the one of the register.
func TestBuildUp(t *testing.T) {
	p := ran(t, calc("record r", "file: r.csv"), map[string]string{"r.csv": sawtooth})
	f := figureOf(t, p, "r")
	if len(f.Panels) != 4 {
		t.Fatalf("%d panels", len(f.Panels))
	}
	q := f.Panels[3]
	s, d := q.Series[0], value(t, p, "r.d5_95").Value.SI[0]
	if s.Y[0] != 0 || math.Abs(s.Y[len(s.Y)-1]-1) > 1e-12 || !slices.IsSorted(s.Y) || *q.Y.Min != 0 || *q.Y.Max != 1 || q.X.Label != f.Panels[0].X.Label {
		t.Errorf("from %v to %v, axes %v and %v", s.Y[0], s.Y[len(s.Y)-1], q.X, q.Y)
	}
	if l := q.Lines; len(l) != 4 || l[0].At != 0.05 || l[1].At != 0.95 || !l[3].Vertical || math.Abs(l[3].At-l[2].At-d) > 1e-12 || !strings.HasPrefix(l[3].Label, "D5-95 = ") {
		t.Errorf("lines %v, D5-95 is %v s", l, d)
	}
}

// TestMarksBeyond: a mark that the axis does not hold is not drawn, and the caption
// says so; an axis of values without an end is drawn to hold its marks.
func TestMarksBeyond(t *testing.T) {
	p := ran(t, calc("target a", "table: t.csv", "damping: 5 %")+
		calc("figure f", "series: [a.PSA]", "from: 0.1 s", "to: 2 s", "mark: [0.0798 s, 1 s]", "mark_y: 99 g"), flat)
	f := figureOf(t, p, "f")
	if got := f.Panels[0].Lines; len(got) != 2 || got[0].At != 1 || got[1].Vertical {
		t.Errorf("drawn: %+v", got)
	}
	if !strings.HasSuffix(f.Caption, "; the mark 0.0798 s lies beyond the axis") {
		t.Error(f.Caption)
	}
}
