package chart

import (
	"math"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/exhibit"
)

// TestSpread: labels never overlap, stay inside where there is room, and keep the
// order of their curves; labels that do not meet do not move.
func TestSpread(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 8).Draw(t, "n")
		at := rapid.SliceOfN(rapid.Float64Range(0, 280), n, n).Draw(t, "at")
		high := rapid.SliceOfN(rapid.SampledFrom([]float64{14, 28, 42}), n, n).Draw(t, "high")
		total := 0.0
		for _, h := range high {
			total += h
		}
		got := spread(at, high, -8, 288)
		free := true
		for i := range got {
			for j := range got {
				if i == j {
					continue
				}
				need := (high[i] + high[j]) / 2
				if math.Abs(got[i]-got[j]) < need-1e-6 {
					t.Fatalf("labels at %v (%v high) meet at %v", at, high, got)
				}
				free = free && math.Abs(at[i]-at[j]) >= need
			}
			if total <= 296 && (got[i]-high[i]/2 < -8-1e-6 || got[i]+high[i]/2 > 288+1e-6) {
				t.Fatalf("a label left the panel: %v", got)
			}
			free = free && at[i]-high[i]/2 >= -8 && at[i]+high[i]/2 <= 288
		}
		if free {
			for i := range got {
				if math.Abs(got[i]-at[i]) > 1e-6 {
					t.Fatalf("free labels at %v moved to %v", at, got)
				}
			}
		}
	})
}

func TestSpreadOrder(t *testing.T) {
	got := spread([]float64{100, 101, 99, 250}, []float64{14, 14, 14, 14}, 0, 280)
	if !(got[2] < got[0] && got[0] < got[1]) || got[3] != 250 {
		t.Errorf("got %v", got)
	}
	if mean := (got[0] + got[1] + got[2]) / 3; math.Abs(mean-100) > 1e-9 {
		t.Errorf("three labels about 100 px moved to the mean %g px", mean)
	}
}

// TestScale: the ends of axes by kind.
func TestScale(t *testing.T) {
	for _, c := range []struct {
		name   string
		axis   exhibit.Axis
		values []float64
		how    fit
		lo, hi float64
	}{
		{"zero is included", exhibit.Axis{}, []float64{0.3, 1.31}, rounded, 0, 1.4},
		{"negative too", exhibit.Axis{}, []float64{-0.3, 1}, rounded, -0.4, 1},
		{"the running variable is kept", exhibit.Axis{Log: true}, []float64{0.05, 4}, tight, 0.05, 4},
		{"symmetric about zero", exhibit.Axis{Symmetric: true}, []float64{-0.2, 0.34}, rounded, -0.4, 0.4},
		{"logarithms to 1, 2, 5", exhibit.Axis{Log: true}, []float64{0.013, 0.7}, rounded, 0.01, 1},
		{"zero cannot stand on a logarithmic axis", exhibit.Axis{Log: true}, []float64{0, 0.02, 3}, rounded, 0.02, 5},
		{"limits are SI", exhibit.Axis{Unit: unit("mm"), Min: ptr(0.001), Max: ptr(0.02)}, []float64{3}, rounded, 1, 20},
		{"heights from the ground", exhibit.Axis{}, []float64{4, 20}, level, 0, 20.6},
	} {
		s := spanOf(c.axis, c.values, c.how, 280)
		if math.Abs(s.lo-c.lo) > 1e-12 || math.Abs(s.hi-c.hi) > 1e-12 {
			t.Errorf("%s: %g to %g, want %g to %g", c.name, s.lo, s.hi, c.lo, c.hi)
		}
	}
	if got := (span{lo: 0.1, hi: 10, log: true}).at(1, 200); math.Abs(got-100) > 1e-9 {
		t.Errorf("1 stands at %g px between 0.1 and 10 on 200 px", got)
	}
}

// TestSteps: in a profile the value of point i holds from point i−1 up to i.
func TestSteps(t *testing.T) {
	s := exhibit.FigSerie{X: []float64{9, 9, 5}, Y: []float64{0, 3, 6}, Step: true}
	p := &panel{profile: true, Panel: exhibit.Panel{}}
	if got, want := p.data(s), (points{{9, 0}, {9, 0}, {9, 3}, {5, 3}, {5, 6}}); !reflect.DeepEqual(got, want) {
		t.Errorf("profile %v, want %v", got, want)
	}
	p = &panel{profile: true, Panel: exhibit.Panel{Y: exhibit.Axis{Min: ptr(0)}}, y: span{lo: 0, hi: 6}}
	if got, want := p.data(exhibit.FigSerie{X: []float64{9, 5}, Y: []float64{3, 6}, Step: true}), (points{{9, 0}, {9, 3}, {5, 3}, {5, 6}}); !reflect.DeepEqual(got, want) {
		t.Errorf("tops only: %v, want %v", got, want)
	}
	p = &panel{}
	if got, want := p.data(exhibit.FigSerie{X: []float64{0, 1, 2}, Y: []float64{4, 4, 7}, Step: true}), (points{{0, 4}, {0, 4}, {1, 4}, {1, 7}, {2, 7}}); !reflect.DeepEqual(got, want) {
		t.Errorf("function %v, want %v", got, want)
	}
}

func TestProfile(t *testing.T) {
	for _, f := range family() {
		want := f.Beside || f.ID == "drift"
		for _, p := range f.Panels {
			if profile(p) != want {
				t.Errorf("%s: profile is %v", f.ID, !want)
			}
		}
	}
}

func TestValued(t *testing.T) {
	for _, c := range [][3]string{{"T₁", "s", "T₁ 0.642 s"}, {"T₁ 0.64 s", "s", "T₁ 0.64 s"}, {"", "s", "0.642 s"}, {"T1", "s", "T1 0.642 s"}, {"ratio 0.64", "", "ratio 0.64"}, {"limit", "", "limit 0.642"}} {
		if got := valued(c[0], 0.642, unit(c[1])); got != c[2] {
			t.Errorf("%q, %q: %q, want %q", c[0], c[1], got, c[2])
		}
	}
}

func TestWrap(t *testing.T) {
	for s, want := range map[string][]string{
		"5 %":                           {"5\u00a0%"},
		"mean of eleven scaled records": {"mean of eleven", "scaled records"},
		"":                              {""},
	} {
		if got := wrap(s, 90, false); !reflect.DeepEqual(got, want) {
			t.Errorf("%q breaks into %q, want %q", s, got, want)
		}
	}
	for _, line := range wrap(strings.Repeat("W", 40)+" "+strings.Repeat("i", 90), 90, true) {
		if textWidth(strings.TrimSuffix(line, "…"), true) > 90 {
			t.Errorf("%q is wider than asked", line)
		}
	}
}

func TestShort(t *testing.T) {
	got, err := points{{0, -0.123456789}, {1234567, 1e-9}}.MarshalJSON()
	if want := `[[0,-0.12346],[1.2346e+06,1e-09]]`; err != nil || string(got) != want {
		t.Errorf("%s, want %s", got, want)
	}
}
