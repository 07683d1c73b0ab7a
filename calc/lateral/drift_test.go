package lateral

import (
	"errors"
	"flag"
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/published"
)

func init() { flag.Set("rapid.seed", "1212") }

func TestDriftPublished(t *testing.T) {
	for _, miss := range published.Misses(publishedDrift()) {
		t.Error(miss)
	}
}

// drawDrift is a building in one state of equilibrium, stable and of any basis.
func drawDrift(t *rapid.T) DriftInput {
	n := rapid.IntRange(1, 8).Draw(t, "n")
	in := DriftInput{Basis: rapid.SampledFrom(DriftBases()).Draw(t, "basis"), Simultaneous: true,
		Cd: rapid.Float64Range(1, 8).Draw(t, "C_d"), Ie: rapid.Float64Range(1, 1.5).Draw(t, "I_e"), Rho: rapid.SampledFrom([]float64{1, 1.3}).Draw(t, "rho"),
		Qd: rapid.Float64Range(1, 6).Draw(t, "q_d"), Nu: rapid.Float64Range(0.4, 0.5).Draw(t, "nu"), Beta: []float64{rapid.Float64Range(0.2, 1).Draw(t, "beta")},
		Limit: []float64{rapid.Float64Range(0.005, 0.025).Draw(t, "limit")}}
	h, u, shear := 0.0, 0.0, make([]float64, n)
	for i := n - 1; i >= 0; i-- {
		shear[i] = rapid.Float64Range(1e4, 1e6).Draw(t, "F")
		if i+1 < n {
			shear[i] += shear[i+1]
		}
	}
	load := make([]float64, n)
	for i := n - 1; i >= 0; i-- {
		load[i] = rapid.Float64Range(1e5, 1e6).Draw(t, "load")
		if i+1 < n {
			load[i] += load[i+1]
		}
	}
	for i := range n {
		hs := rapid.Float64Range(2.5, 6).Draw(t, "h_s")
		// theta of P/(k h) up to 0.15, so that q_d of 6 stays below 1
		k := load[i] / (hs * rapid.Float64Range(0.001, 0.15).Draw(t, "theta"))
		h += hs
		in.Levels, in.H, in.Hs = append(in.Levels, string(rune('A'+i))), append(in.H, h), append(in.Hs, hs)
		in.Elastic, in.Stiffness = append(in.Elastic, shear[i]/k), append(in.Stiffness, k)
		u += shear[i] / k
		in.Displacement = append(in.Displacement, u)
	}
	in.Shear, in.P = shear, load
	return in
}

func mustDrift(t interface{ Fatal(...any) }, in DriftInput) *Drift {
	d, err := Drifts(in)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// TestDriftProperties: the stability coefficient of ASCE/SEI 7 knows neither C_d
// nor I_e, that of EN 1998-1 grows with q_d; what is amplified is never smaller;
// every cross-check holds; the other way to write theta gives the same.
func TestDriftProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := drawDrift(t)
		d := mustDrift(t, in)
		for _, c := range d.Checks {
			if !(c.Residual <= c.Limit) {
				t.Fatalf("%s: %g", c.Name, c.Residual)
			}
		}
		if len(d.Checks) != 3 {
			t.Fatalf("%d cross-checks", len(d.Checks))
		}
		other := in
		other.Cd, other.Ie, other.Qd = 2*in.Cd, 1.1*in.Ie, in.Qd/2
		o := mustDrift(t, other)
		for i, theta := range d.Theta {
			if differ(d.Displacement[i], d.Factor*in.Displacement[i]) > 1e-12 || differ(d.DisplacementElastic[i], in.Displacement[i]) > 1e-12 {
				t.Fatalf("displacement %g amplified to %g by %g", in.Displacement[i], d.Displacement[i], d.Factor)
			}
			same, want := o.Theta[i], theta
			if in.Basis == "EN 1998-1:2004" {
				want /= 2
			}
			if differ(same, want) > 1e-12 {
				t.Fatalf("theta %g became %g", theta, same)
			}
			if d.Amplified[i] < d.FirstOrder[i] || (d.SecondOrder[i] > 1) != (theta > DriftThreshold) {
				t.Fatalf("theta %g: factor %g", theta, d.SecondOrder[i])
			}
			if d.SecondOrder[i] > 1 && differ(d.Amplified[i]*(1-theta), d.FirstOrder[i]) > 1e-12 {
				t.Fatalf("theta %g: %g from %g", theta, d.Amplified[i], d.FirstOrder[i])
			}
		}
	})
}

// TestDriftScales: drifts and shears of twice the forces have twice the drift and
// the same theta; signs do not matter.
func TestDriftScales(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := drawDrift(t)
		two := in
		two.Simultaneous = false
		two.Elastic, two.Shear = slices.Clone(in.Elastic), slices.Clone(in.Shear)
		for i := range two.Elastic {
			two.Elastic[i] *= -2
			two.Shear[i] *= 2
		}
		a, b := mustDrift(t, in), mustDrift(t, two)
		for i := range a.Theta {
			if differ(a.Theta[i], b.Theta[i]) > 1e-12 || differ(2*a.Amplified[i], b.Amplified[i]) > 1e-12 || a.Limit[i] != b.Limit[i] {
				t.Fatalf("storey %d: theta %g and %g, drift %g and %g", i, a.Theta[i], b.Theta[i], a.Amplified[i], b.Amplified[i])
			}
		}
	})
}

// TestDriftLimits: no row allows more drift to a higher risk category, none less
// to a weaker finish; rho divides and beta lowers; a row of few storeys ends.
func TestDriftLimits(t *testing.T) {
	for _, s := range DriftSystems {
		last := 1.0
		for _, risk := range []string{"I", "II", "III", "IV"} {
			x, err := AllowedDrift(s.Word, risk, 4)
			if err != nil || x > last || x <= 0 {
				t.Errorf("%s, %s: %g after %g, %v", s.Word, risk, x, last, err)
			}
			last = x
		}
		if s.Ratio[0] > DriftSystems[0].Ratio[0] {
			t.Errorf("%s allows more than tolerant finishes do", s.Word)
		}
	}
	var e *DriftError
	if _, err := AllowedDrift("tolerant finishes", "II", 5); !errors.As(err, &e) || e.Symbol != "system" {
		t.Errorf("five storeys of tolerant finishes: %v", err)
	}
	for i, f := range DriftFinishes[1:] {
		if f.Ratio <= DriftFinishes[i].Ratio {
			t.Errorf("%s allows no more than %s", f.Word, DriftFinishes[i].Word)
		}
	}
	a := mustDrift(t, oneStorey("ASCE/SEI 7-22", 0.05))
	in := oneStorey("ASCE/SEI 7-22", 0.05)
	in.Rho = 1.3
	if b := mustDrift(t, in); differ(a.Limit[0], 1.3*b.Limit[0]) > 1e-15 {
		t.Errorf("rho: %g and %g", a.Limit[0], b.Limit[0])
	}
}

// TestDriftWarnings: each range of theta says what it must, with the storey.
func TestDriftWarnings(t *testing.T) {
	for _, c := range []struct {
		basis string
		theta float64
		code  string
	}{
		{"ASCE/SEI 7-22", 0.10, ""}, {"ASCE/SEI 7-22", 0.11, "second-order-factor"}, {"ASCE/SEI 7-22", 0.25, "second-order-factor"}, {"ASCE/SEI 7-22", 0.26, "unstable"},
		{"ASCE/SEI 7-16", 0.10, ""}, {"ASCE/SEI 7-16", 0.11, "second-order-factor"}, {"ASCE/SEI 7-16", 0.26, "unstable"},
		{"EN 1998-1:2004", 0.10, ""}, {"EN 1998-1:2004", 0.15, "second-order-factor"}, {"EN 1998-1:2004", 0.20, "second-order-factor"},
		{"EN 1998-1:2004", 0.21, "second-order-analysis"}, {"EN 1998-1:2004", 0.30, "second-order-analysis"}, {"EN 1998-1:2004", 0.31, "unstable"},
	} {
		d := mustDrift(t, oneStorey(c.basis, c.theta)) // C_d 2: the limit is 0.25
		got := ""
		for _, w := range d.Warnings {
			got += w.Code
			if !strings.Contains(w.Text, "1 (0.") || w.Ref.Key != c.basis {
				t.Errorf("%s: %q of %v", w.Code, w.Text, w.Ref)
			}
		}
		if got != c.code {
			t.Errorf("%s, theta %g: warned of %q, want %q", c.basis, c.theta, got, c.code)
		}
	}
}

// TestDriftErrors: each bad number is told with its symbol and item.
func TestDriftErrors(t *testing.T) {
	two := func() DriftInput {
		in := sixStorey("ASCE/SEI 7-22")
		in.Levels, in.H, in.Hs, in.Elastic, in.Shear, in.Displacement, in.Stiffness, in.P = in.Levels[:2], in.H[:2], in.Hs[:2], in.Elastic[:2], in.Shear[:2], nil, nil, []float64{2e6, 1e6}
		return in
	}
	if _, err := Drifts(two()); err != nil {
		t.Fatal(err)
	}
	for name, c := range map[string]struct {
		change func(*DriftInput)
		symbol string
		item   int
	}{
		"no C_d":         {func(in *DriftInput) { in.Cd = 0 }, "C_d", -1},
		"I_e":            {func(in *DriftInput) { in.Ie = math.NaN() }, "I_e", -1},
		"rho below 1":    {func(in *DriftInput) { in.Rho = 0.9 }, "rho", -1},
		"no q_d":         {func(in *DriftInput) { in.Basis, in.Nu = "EN 1998-1:2004", 0.5 }, "q_d", -1},
		"nu above 1":     {func(in *DriftInput) { in.Basis, in.Qd, in.Nu = "EN 1998-1:2004", 3, 2 }, "nu", -1},
		"P upside down":  {func(in *DriftInput) { in.P = []float64{1e6, 2e6} }, "P", 1},
		"P by level":     {func(in *DriftInput) { in.P = []float64{1e6, 1e6} }, "P", 1},
		"P of no length": {func(in *DriftInput) { in.P = in.P[:1] }, "P", -1},
		"no load":        {func(in *DriftInput) { in.P[1] = 0 }, "P", 1},
		"heavy":          {func(in *DriftInput) { in.P[0] = 1e10 }, "P", 0},
		"beta":           {func(in *DriftInput) { in.Beta = []float64{1, 0} }, "beta", 1},
		"limit":          {func(in *DriftInput) { in.Limit = []float64{1, 1, 1} }, "limit", -1},
		"no shear":       {func(in *DriftInput) { in.Shear = []float64{1, 0} }, "from", -1},
		"infinite drift": {func(in *DriftInput) { in.Elastic = []float64{1, math.Inf(1)} }, "from", -1},
	} {
		in := two()
		c.change(&in)
		d, err := Drifts(in)
		var e *DriftError
		if d != nil || !errors.As(err, &e) || e.Symbol != c.symbol || e.Item != c.item {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// TestDriftWithoutLoads gives drifts and no theta.
func TestDriftWithoutLoads(t *testing.T) {
	in := sixStorey("ASCE/SEI 7-22")
	in.P = nil
	d := mustDrift(t, in)
	if len(d.Theta)+len(d.ThetaLimit) != 0 || !slices.Equal(d.Amplified, d.FirstOrder) || len(d.Checks) != 1 {
		t.Errorf("theta %v, %d checks", d.Theta, len(d.Checks))
	}
}

// TestDriftChecksCanFail: a displacement, a stiffness or a shear of another
// analysis shows in a cross-check.
func TestDriftChecksCanFail(t *testing.T) {
	for i, change := range []func(*DriftInput){
		func(in *DriftInput) { in.Displacement[5] *= 1.01 },
		func(in *DriftInput) { in.Stiffness[2] *= 1.01 },
		func(in *DriftInput) { in.Displacement[2] *= 1.01 },
	} {
		in := sixStorey("ASCE/SEI 7-22")
		change(&in)
		if c := mustDrift(t, in).Checks[i]; c.Residual < 1e-5 {
			t.Errorf("%s: %g", c.Name, c.Residual)
		}
	}
	in := sixStorey("ASCE/SEI 7-22")
	in.Simultaneous = false
	in.Displacement[5] *= 1.01
	if c := mustDrift(t, in).Checks[0]; differ(c.Residual, 0.01) > 1e-9 {
		t.Errorf("%s: %g", c.Name, c.Residual)
	}
}

// TestDriftLoads: a load that is no sum from the top, or less than the weight, is
// told of; the weight itself is enough.
func TestDriftLoads(t *testing.T) {
	in := sixStorey("ASCE/SEI 7-22")
	in.Weight = slices.Clone(in.P)
	if w := mustDrift(t, in).Warnings; len(w) != 0 {
		t.Errorf("the weight itself: %v", w)
	}
	in.Weight[0] *= 1.01
	in.Weight = in.Weight[:1]
	if w := mustDrift(t, in).Warnings; len(w) != 1 || w[0].Code != "gravity-load" || !strings.Contains(w[0].Text, "above 1:") {
		t.Errorf("too light: %v", w)
	}
}

// TestDriftGoverns: the storey nearest to its limit, not the one that drifts most.
func TestDriftGoverns(t *testing.T) {
	in := sixStorey("ASCE/SEI 7-22")
	if drift, theta := mustDrift(t, in).Governs(); drift != 3 || theta != 0 {
		t.Errorf("storeys %d and %d govern", drift, theta)
	}
	in.Limit, in.Beta = []float64{0.02, 0.02, 0.02, 0.02, 0.02, 0.01}, []float64{0.2, 0.2, 1, 0.2, 0.2, 0.2}
	if drift, theta := mustDrift(t, in).Governs(); drift != 5 || theta != 2 {
		t.Errorf("storeys %d and %d govern", drift, theta)
	}
	in.P = nil
	if _, theta := mustDrift(t, in).Governs(); theta != -1 {
		t.Errorf("storey %d governs without loads", theta)
	}
}
