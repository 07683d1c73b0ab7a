package modal

import (
	"encoding/json"
	"math"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// TestResidualProperties: what the missing mass of any building obeys, for any
// number of modes kept.
func TestResidualProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		m := modesOf(t, drawn(t)).Model
		n := m.Freedoms()
		keep := rapid.IntRange(1, n).Draw(t, "keep")
		s, err := Solve(m, keep)
		if err != nil {
			t.Fatal(err)
		}
		psa := make([]float64, keep)
		for i := range psa {
			psa[i] = rapid.Float64Range(0.1, 20).Draw(t, "PSA")
		}
		zpa, divisor := rapid.Float64Range(0.1, 8).Draw(t, "ZPA"), rapid.Float64Range(0.5, 8).Draw(t, "divisor")
		rule := rapid.SampledFrom(Rules).Draw(t, "rule")
		bare, err := Combine(s, psa, []float64{0.05}, rule, divisor)
		if err != nil {
			t.Fatal(err)
		}
		with := func(zpa float64) *Combined {
			c, err := bare.WithResidual(s, zpa, make([]float64, len(s.Left)))
			if err != nil {
				t.Fatal(err)
			}
			for _, k := range c.Checks {
				if !k.OK || math.IsNaN(k.Residual) {
					t.Fatalf("%s: %v > %v", k.Name, k.Residual, k.Limit)
				}
			}
			return c
		}
		c := with(zpa)

		// the modes and the residual hold the mass once
		if got := c.MassSum + c.Residual.Mass; math.Abs(got-1) > 1e-9 {
			t.Fatalf("modes and residual hold %v of the mass", got)
		}
		left := 0.0
		for _, o := range s.Left {
			left += o.MassRatio
		}
		if math.Abs(left-c.Residual.Mass) > 1e-9 || len(s.Left) != n-keep {
			t.Fatalf("the modes left out hold %v, the residual %v", left, c.Residual.Mass)
		}

		// the residual is the sum of the modes left out, each at the ZPA
		all, err := Solve(m, 0)
		if err != nil {
			t.Fatal(err)
		}
		flat := make([]float64, n)
		for i := range flat {
			flat[i] = zpa
		}
		each, err := Combine(all, flat, []float64{0.05}, SRSS, divisor)
		if err != nil {
			t.Fatal(err)
		}
		for q, r := range c.Responses() {
			for j, x := range r.Residual {
				sum, size := 0.0, 0.0
				for i := 0; i < n; i++ {
					if i >= keep {
						sum += each.Responses()[q].Modal[i][j]
					}
					size += math.Abs(each.Responses()[q].Modal[i][j])
				}
				if math.Abs(sum-x) > 1e-8*size {
					t.Fatalf("%s %d: residual %v, modes left out %v", r.Name, j+1, x, sum)
				}
			}
		}

		// with every mode kept it adds nothing; it never lowers a result
		for q, r := range c.Responses() {
			for j, x := range r.Combined {
				without := bare.Responses()[q].Combined[j]
				if x < without*(1-1e-12) || keep == n && math.Abs(x-without) > 1e-9*bare.Responses()[q].AbsSum[j] {
					t.Fatalf("%s %d: %v with the residual of %d of %d modes, %v without", r.Name, j+1, x, n-keep, n, without)
				}
				want := math.Hypot(without, r.Residual[j])
				if rule == Absolute {
					want = without + math.Abs(r.Residual[j])
				}
				if math.Abs(x-want) > 1e-12*want {
					t.Fatalf("%s %d: %v, want %v", r.Name, j+1, x, want)
				}
			}
		}

		// scale_to multiplies forces of modes and residual alike, displacements not
		target := 2 * c.BaseShear.Combined[0]
		up, err := c.ScaledTo(target)
		if err != nil {
			t.Fatal(err)
		}
		for what, x := range map[string][3]float64{
			"base shear":    {up.BaseShear.Combined[0], target, 1},
			"residual":      {up.StoreyForce.Residual[0], c.StoreyForce.Residual[0], 2},
			"displacement":  {up.Displacement.Residual[0], c.Displacement.Residual[0], 1},
			"before":        {up.BaseShearUnscaled, c.BaseShear.Combined[0], 1},
			"twice the ZPA": {with(2 * zpa).Drift.Residual[0], c.Drift.Residual[0], 2},
		} {
			if math.Abs(x[0]-x[2]*x[1]) > 1e-12*math.Abs(x[2]*x[1]) {
				t.Fatalf("%s: %v, want %v times %v", what, x[0], x[2], x[1])
			}
		}
	})
}

// TestResidualWarnings: a residual stands for all of the mass, and says so where
// the modes left out are not rigid.
func TestResidualWarnings(t *testing.T) {
	m, err := uniform(10, 1, 1)
	if err != nil {
		t.Fatal(err)
	}
	s, err := Solve(m, 2)
	if err != nil {
		t.Fatal(err)
	}
	bare, err := Combine(s, []float64{1, 2.5}, []float64{0.05}, CQC, 1)
	if err != nil {
		t.Fatal(err)
	}
	left := make([]float64, len(s.Left))
	codes := func(c *Combined) (out string) {
		for _, w := range c.Warnings {
			out += w.Code + " "
		}
		return out
	}
	s1, _ := Solve(m, 1)
	one, _ := Combine(s1, []float64{1}, []float64{0.05}, CQC, 1)
	if got := codes(one); got != "mass-sum " { // 0.848
		t.Errorf("warnings %q, want the sum of the masses", got)
	}
	for i := range left {
		left[i] = 1.1
	}
	c, err := bare.WithResidual(s, 1, left)
	if err != nil || codes(c) != "" {
		t.Errorf("warnings %q of rigid modes, %v", codes(c), err)
	}
	left[1], left[0], left[7] = 1.2, 1.11, 9 // the tenth mode holds next to nothing
	c, err = bare.WithResidual(s, 1, left)
	if err != nil || codes(c) != "residual-amplified " || c.Residual.Amplified != 2 || c.Residual.Last != 2 || c.Residual.Peak != 1.2 || c.Residual.PeakT != s.Left[1].T {
		t.Errorf("warnings %q, %+v, %v", codes(c), c.Residual, err)
	}
	if !strings.Contains(c.Warnings[0].Text, "2 of the modes left out") || !strings.Contains(c.Warnings[0].Text, "use 4 modes") {
		t.Error(c.Warnings[0].Text)
	}
	for _, zpa := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if _, err := bare.WithResidual(s, zpa, left); err == nil {
			t.Errorf("a ZPA of %v is taken", zpa)
		}
	}
}

// TestEnough: the rule of each standard for the number of modes, on mass ratios
// made up for it.
func TestEnough(t *testing.T) {
	ten := make([]string, 10)
	for name, c := range map[string]struct {
		of     Combined
		met    bool
		clause string
		says   string
	}{
		"ninety":         {Combined{MassSum: 0.9, T: []float64{1}, Basis: "ASCE/SEI 7-22"}, true, "12.9.1.1", "90.0 % of the mass, at least 90 %"},
		"less":           {Combined{MassSum: 0.89, T: []float64{1, 0.3}, Basis: "ASCE/SEI 7-16"}, false, "12.9.1.1", "the 2 modes used move 89.0 % of the mass; at least 90 %"},
		"residual":       {Combined{MassSum: 0.7, T: []float64{1}, Basis: "ASCE/SEI 7-22", Residual: &Residual{Mass: 0.3}}, true, "12.9.1.1", "the residual holds the other 30.0 %"},
		"no basis":       {Combined{MassSum: 0.7, T: []float64{1}}, false, "", "at least 90 %"},
		"EN ninety":      {Combined{MassSum: 0.95, T: []float64{1}, Basis: "EN 1998-1:2004"}, true, "4.3.3.3.1(3)", "at least 90 %"},
		"EN small modes": {Combined{MassSum: 0.89, LeftOut: 0.049, T: []float64{1}, Basis: "EN 1998-1:2004"}, true, "4.3.3.3.1(3)", "no mode left out holds more than 4.9 %"},
		"EN large mode":  {Combined{MassSum: 0.89, LeftOut: 0.051, T: []float64{1}, Levels: ten, Basis: "EN 1998-1:2004"}, false, "4.3.3.3.1(3)", "a mode left out holds 5.1 %, more than 5 %: use more modes or the residual; nor is the alternative"},
		"EN not known":   {Combined{MassSum: 0.89, LeftOut: -1, T: []float64{1}, Levels: ten, Basis: "EN 1998-1:2004"}, false, "4.3.3.3.1(3)", "may hold more than 5 %"},
		"EN alternative": {Combined{MassSum: 0.8, LeftOut: 0.06, T: []float64{9, 8, 7, 6, 5, 4, 3, 2, 1, 0.2}, Levels: ten, Basis: "EN 1998-1:2004"}, false, "4.3.3.3.1(3)", "met is the alternative for where neither can be reached, k >= 3 sqrt(n) = 9.49 modes (here 10)"},
		"EN too few":     {Combined{MassSum: 0.8, LeftOut: 0.06, T: []float64{9, 8, 7, 6, 5, 4, 3, 2, 0.2}, Levels: ten, Basis: "EN 1998-1:2004"}, false, "4.3.3.3.1(3)", "nor is"},
		"EN too long":    {Combined{MassSum: 0.8, LeftOut: 0.06, T: []float64{9, 8, 7, 6, 5, 4, 3, 2, 1, 0.21}, Levels: ten, Basis: "EN 1998-1:2004"}, false, "4.3.3.3.1(3)", "nor is"},
	} {
		e := c.of.Enough()
		if e.Met != c.met || e.Ref.Clause != c.clause || !strings.Contains(e.Text, c.says) {
			t.Errorf("%s: %+v, want %v by %s: %s", name, e, c.met, c.clause, c.says)
		}
		c.of.Reduced(c.of.Basis, 4, 1, 0)
		if warned := len(c.of.Warnings) > 0 && c.of.Warnings[0].Code == "mass-sum"; warned == c.met || c.of.R != 4 {
			t.Errorf("%s: warnings %v", name, c.of.Warnings)
		}
	}
}

// TestResidualEncoding: a result with its residual survives its encoding.
func TestResidualEncoding(t *testing.T) {
	m, err := uniform(5, 1, 1)
	if err != nil {
		t.Fatal(err)
	}
	s, err := Solve(m, 2)
	if err != nil {
		t.Fatal(err)
	}
	c, err := Combine(s, []float64{1, 2}, []float64{0.05}, CQC, 4)
	if err != nil {
		t.Fatal(err)
	}
	c.Reduced("ASCE/SEI 7-22", 8, 2, 0)
	if c, err = c.WithResidual(s, 0.5, []float64{2, 1, 1}); err != nil {
		t.Fatal(err)
	}
	bytes, err := json.Marshal(c)
	if err != nil {
		t.Fatal(err)
	}
	var back Combined
	if err := json.Unmarshal(bytes, &back); err != nil || !reflect.DeepEqual(back, *c) {
		t.Errorf("the result does not survive its encoding (%v)", err)
	}
	bytes, _ = json.Marshal(s)
	var modes Modes
	if err := json.Unmarshal(bytes, &modes); err != nil || !reflect.DeepEqual(modes, *s) {
		t.Errorf("the modes do not survive their encoding (%v)", err)
	}
}
