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
