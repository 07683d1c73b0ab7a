package standard

import (
	"slices"
	"testing"

	"quoin/calc/quantity"
)

// TestRangesOfMaxima: S_DS is sought from 0.2 s to 5 s and S_D1 from 1 s to the end
// of its window, both ends included, and nowhere else.
func TestRangesOfMaxima(t *testing.T) {
	const top = 3.0
	for _, c := range []struct {
		at       float64 // s, the period whose ordinate is raised to 3 g
		site     string
		sds, sd1 bool // whether they follow it
	}{
		{0.15, "D", false, false}, {0.2, "D", true, false}, {0.75, "D", true, false}, {1, "D", true, true}, {5, "D", true, true}, {7.5, "D", false, false},
		{2, "C", true, true}, {3, "C", true, false}, {3, "CD", true, true}, {5, "default", true, true},
	} {
		in := multi722(0.7, "design", 1)
		in.Texts["site"] = c.site
		psa := slices.Clone(in.Columns["PSA"])
		psa[slices.Index(periods722, c.at)] = top * quantity.Gravity
		in.Columns["PSA"] = psa
		target, err := Build("ASCE/SEI 7-22", in)
		if err != nil {
			t.Fatal(err)
		}
		for symbol, want := range map[string]struct {
			follows bool
			value   float64
		}{"S_DS": {c.sds, 0.9 * top}, "S_D1": {c.sd1, max(0.9*top*c.at, map[bool]float64{true: top}[c.at == 1])}} {
			p, _ := target.Parameter(symbol)
			if near(p.Value, want.value, 1e-12) != want.follows {
				t.Errorf("site class %s, 3 g at %v s: %s = %v", c.site, c.at, symbol, p.Value)
			}
		}
	}
}

// TestEndsOfATable: a period outside by rounding alone is read at the end, and one
// outside by more is refused.
func TestEndsOfATable(t *testing.T) {
	const first, last = 0.1, 1.3682434248083695
	target, err := Table([]float64{first, last}, []float64{2, 5}, 0.05)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		T, want float64 // 0: refused
	}{{1.3682434248083697, 5}, {last * (1 + 5e-13), 5}, {last * (1 + 5e-12), 0}, {first * (1 - 5e-13), 2}, {first * (1 - 5e-12), 0}} {
		got, err := target.PSA(c.T)
		if (err != nil) != (c.want == 0) || err == nil && !near(got, c.want, 1e-11) {
			t.Errorf("PSA(%v s) = %v, %v, want %v", c.T, got, err, c.want)
		}
	}
}

// TestDisplacementPeriods: T_E and T_F of EN 1998-1 Table A.1 for every ground.
func TestDisplacementPeriods(t *testing.T) {
	for ground, want := range map[string]float64{"A": 4.5, "B": 5, "C": 6, "D": 6, "E": 6} {
		target, err := Build(basisEN, elasticEN("1", ground, 2))
		if err != nil {
			t.Fatal(err)
		}
		te, _ := target.Parameter("T_E")
		tf, _ := target.Parameter("T_F")
		if te.Value != want || tf.Value != 10 {
			t.Errorf("ground %s: T_E = %v, T_F = %v, want %v and 10", ground, te.Value, tf.Value, want)
		}
	}
}
