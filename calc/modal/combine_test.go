package modal

import (
	"encoding/json"
	"math"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestCombineProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := modesOf(t, drawn(t))
		n := s.Count()
		psa, damping := make([]float64, n), make([]float64, n)
		for i := range psa {
			psa[i] = rapid.Float64Range(0, 20).Draw(t, "PSA")
			damping[i] = rapid.Float64Range(0.005, 0.3).Draw(t, "damping")
		}
		divisor := rapid.Float64Range(0.5, 8).Draw(t, "divisor")
		of := func(s *Modes, rule Rule, divisor float64) *Combined {
			c, err := Combine(s, psa, damping, rule, divisor)
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
		cqc, srss, sum := of(s, CQC, divisor), of(s, SRSS, divisor), of(s, Absolute, divisor)

		// the same modes with the sign of every second one turned
		turned := *s
		turned.Phi = nil
		turned.Gamma = append([]float64(nil), s.Gamma...)
		turned.L = append([]float64(nil), s.L...)
		for i, phi := range s.Phi {
			row := append([]float64(nil), phi...)
			if i%2 == 1 {
				for j := range row {
					row[j] = -row[j]
				}
				turned.Gamma[i], turned.L[i] = -s.Gamma[i], -s.L[i]
			}
			turned.Phi = append(turned.Phi, row)
		}
		flipped, whole := of(&turned, CQC, divisor), of(s, CQC, 1)

		for q, r := range cqc.Responses() {
			for j := range r.Combined {
				bound := sum.Responses()[q].Combined[j]
				largest := 0.0
				for i := range r.Modal {
					largest = max(largest, math.Abs(r.Modal[i][j]))
				}
				if v := r.Combined[j]; v < 0 || v > bound*(1+1e-12) || math.IsNaN(v) {
					t.Fatalf("%s: CQC %v, absolute sum %v", r.Name, v, bound)
				}
				if v := srss.Responses()[q].Combined[j]; v > bound*(1+1e-12) || v < largest*(1-1e-12) {
					t.Fatalf("%s: SRSS %v outside %v to %v", r.Name, v, largest, bound)
				}
				if a, b := r.Combined[j], flipped.Responses()[q].Combined[j]; math.Abs(a-b) > 1e-12*bound {
					t.Fatalf("%s: the sign of a mode moves it from %v to %v", r.Name, a, b)
				}
				if a, b := r.Combined[j]*divisor, whole.Responses()[q].Combined[j]; math.Abs(a-b) > 1e-9*bound*divisor {
					t.Fatalf("%s: the divisor %v makes %v of %v", r.Name, divisor, r.Combined[j], b)
				}
				if a, b := r.Combined[j], r.AbsSum[j]; a > b*(1+1e-12) {
					t.Fatalf("%s: %v above its own bound %v", r.Name, a, b)
				}
			}
		}
	})
}

func TestCorrelationProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		wi, wj := rapid.Float64Range(0.1, 300).Draw(t, "wi"), rapid.Float64Range(0.1, 300).Draw(t, "wj")
		zi, zj := rapid.Float64Range(0.001, 0.9).Draw(t, "zi"), rapid.Float64Range(0.001, 0.9).Draw(t, "zj")
		rho := Correlation(wi, wj, zi, zj)
		if !(rho > 0 && rho <= 1+1e-12) {
			t.Fatalf("rho = %v", rho)
		}
		if other := Correlation(wj, wi, zj, zi); other != rho {
			t.Fatalf("rho = %v, with the modes exchanged %v", rho, other)
		}
		if same := Correlation(wi, wi, zi, zi); math.Abs(same-1) > 1e-14 {
			t.Fatalf("a mode with itself: %v", same)
		}
		if equal := Correlation(wi, wi, zi, zj); math.Abs(equal-2*math.Sqrt(zi*zj)/(zi+zj)) > 1e-12 {
			t.Fatalf("equal frequencies: %v", equal)
		}
	})
}

// Two storeys by hand: m = 1, k = 1, PSA = (2, 3), heights 1.
func TestByHand(t *testing.T) {
	m, err := uniform(2, 1, 1)
	if err != nil {
		t.Fatal(err)
	}
	s, err := Solve(m, 0)
	if err != nil {
		t.Fatal(err)
	}
	c, err := Combine(s, []float64{2, 3}, []float64{0.05}, SRSS, 2)
	if err != nil {
		t.Fatal(err)
	}
	// golden section: M* = (5+2 sqrt5)/5 and (5-2 sqrt5)/5 of mass 1
	v1, v2 := (1+2/math.Sqrt(5))*2/2, (1-2/math.Sqrt(5))*3/2
	near := func(name string, got, want float64) {
		t.Helper()
		if math.Abs(got-want) > 1e-14*(1+math.Abs(want)) {
			t.Errorf("%s = %.15g, want %.15g", name, got, want)
		}
	}
	near("base shear, mode 1", c.BaseShear.Modal[0][0], v1)
	near("base shear, mode 2", c.BaseShear.Modal[1][0], v2)
	near("base shear", c.BaseShear.Combined[0], math.Hypot(v1, v2))
	golden := (1 + math.Sqrt(5)) / 2
	near("overturning, mode 1", c.Overturning.Modal[0][0], v1*golden)
	near("overturning, mode 2", c.Overturning.Modal[1][0], v2*(1-golden))
	near("first drift, mode 1", c.Drift.Modal[0][0], v1)
	near("first drift, mode 2", c.Drift.Modal[1][0], v2)
	near("drift ratio", c.DriftRatio.Combined[0], c.Drift.Combined[0])
	top := math.Hypot(c.StoreyForce.Modal[0][1], c.StoreyForce.Modal[1][1])
	near("top force", c.StoreyForce.Combined[1], top)
	near("top storey shear", c.StoreyShear.Combined[1], top)
	near("moment under the top storey", c.Overturning.Combined[1], top)
	near("SD", c.SD[1], 3/(golden*golden))
	near("mass sum", c.MassSum, 1)

	// drift comes from modal drifts, not from combined displacements
	if naive := c.Displacement.Combined[1] - c.Displacement.Combined[0]; math.Abs(naive-c.Drift.Combined[1]) < 1e-3 {
		t.Error("the drift of the upper storey equals the difference of combined displacements")
	}
	bytes, err := json.Marshal(c)
	if err != nil {
		t.Fatal(err)
	}
	var back Combined
	if err := json.Unmarshal(bytes, &back); err != nil || !reflect.DeepEqual(back, *c) {
		t.Errorf("the result does not survive its encoding (%v)", err)
	}
}

// Each cross-check of a combination sees the fault that it is there for.
func TestChecksSee(t *testing.T) {
	m, _ := uniform(4, 1, 1)
	for name, spoil := range map[string]func(s *Modes){
		"forces of each mode":     func(s *Modes) { s.L[1] *= 1.001 },
		"stiffness times":         func(s *Modes) { s.Omega[2] *= 1.001 },
		"overturning at the base": func(s *Modes) { s.BaseMoment[0] *= 1.001 },
	} {
		s, err := Solve(m, 0)
		if err != nil {
			t.Fatal(err)
		}
		spoil(s)
		c, err := Combine(s, []float64{1, 2, 3, 4}, []float64{0.05}, CQC, 1)
		if err != nil {
			t.Fatal(err)
		}
		for _, k := range c.Checks {
			if want := !strings.HasPrefix(k.Name, name); k.OK != want {
				t.Errorf("%s: check %q is %v (residual %v)", name, k.Name, k.OK, k.Residual)
			}
		}
	}
}

func TestScaledTo(t *testing.T) {
	m, _ := uniform(3, 1, 1)
	s, err := Solve(m, 0)
	if err != nil {
		t.Fatal(err)
	}
	c, err := Combine(s, []float64{3, 2, 1}, []float64{0.05}, CQC, 4)
	if err != nil {
		t.Fatal(err)
	}
	v := c.BaseShear.Combined[0]
	up, err := c.ScaledTo(1.25 * v)
	if err != nil {
		t.Fatal(err)
	}
	again, err := up.ScaledTo(1.5 * v) // from the unscaled result, whatever went before
	if err != nil {
		t.Fatal(err)
	}
	down, err := c.ScaledTo(0.5 * v)
	if err != nil {
		t.Fatal(err)
	}
	for i, r := range c.Responses() {
		f, g := 1.25, 1.5
		if i > 3 { // displacement, drift, drift_ratio
			f, g = 1, 1
		}
		for j, x := range r.Combined {
			if a, b := up.Responses()[i].Combined[j], again.Responses()[i].Combined[j]; math.Abs(a-f*x) > 1e-14*a || math.Abs(b-g*x) > 1e-14*b {
				t.Errorf("%s: %v becomes %v and %v, want factors %v and %v", r.Name, x, a, b, f, g)
			}
			if y := down.Responses()[i].Combined[j]; y != x {
				t.Errorf("%s: scaled down from %v to %v", r.Name, x, y)
			}
		}
		if a, b := up.Responses()[i].Modal[1][0], r.Modal[1][0]; math.Abs(a-f*b) > 1e-14*math.Abs(a) {
			t.Errorf("%s: modal value %v becomes %v", r.Name, b, a)
		}
	}
	if math.Abs(up.ScaleFactor-1.25) > 1e-14 || up.BaseShearUnscaled != v || down.ScaleFactor != 1 {
		t.Errorf("factors %v and %v, unscaled %v", up.ScaleFactor, down.ScaleFactor, up.BaseShearUnscaled)
	}
	for _, bad := range []float64{-1, math.NaN(), math.Inf(1)} {
		if _, err := c.ScaledTo(bad); err == nil {
			t.Errorf("scaled to %v", bad)
		}
	}
	none, err := Combine(s, []float64{0, 0, 0}, []float64{0.05}, CQC, 4)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := none.ScaledTo(1); err == nil {
		t.Error("a base shear of zero was scaled")
	}
}

func TestCombineNames(t *testing.T) {
	m, _ := uniform(3, 1, 1)
	s, err := Solve(m, 0)
	if err != nil {
		t.Fatal(err)
	}
	c, err := Combine(s, []float64{1, 1, 1}, []float64{0.05}, CQC, 1)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, r := range c.Responses() {
		names = append(names, r.Name)
	}
	want := "base_shear storey_force storey_shear overturning displacement drift drift_ratio"
	if got := strings.Join(names, " "); got != want {
		t.Errorf("%s, want %s", got, want)
	}
}

func TestWarnings(t *testing.T) {
	m, _ := uniform(10, 1, 1)
	codes := func(count int, rule Rule) string {
		s, err := Solve(m, count)
		if err != nil {
			t.Fatal(err)
		}
		psa := make([]float64, count)
		c, err := Combine(s, psa, []float64{0.05}, rule, 1)
		if err != nil {
			t.Fatal(err)
		}
		var out []string
		for _, w := range c.Warnings {
			out = append(out, w.Code)
		}
		return strings.Join(out, " ")
	}
	for _, c := range []struct {
		count int
		rule  Rule
		want  string
	}{
		{1, SRSS, "mass-sum"}, // 0.848
		{2, SRSS, ""},         // 0.939
		{1, CQC, "mass-sum"},
		{10, SRSS, "close-modes close-modes close-modes"}, // 7-8, 8-9, 9-10: the spacing narrows upwards
		{10, CQC, ""},
		{10, Absolute, ""},
	} {
		if got := codes(c.count, c.rule); got != c.want {
			t.Errorf("%d modes by %s: warnings %q, want %q", c.count, c.rule, got, c.want)
		}
	}
}

func TestCombineErrors(t *testing.T) {
	m, _ := uniform(2, 1, 1)
	s, err := Solve(m, 0)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name         string
		psa, damping []float64
		rule         Rule
		divisor      float64
		want         string
	}{
		{"rule", []float64{1, 1}, []float64{0.05}, "cqc", 1, `unknown combination rule "cqc"`},
		{"divisor", []float64{1, 1}, []float64{0.05}, CQC, 0, "must be greater than zero"},
		{"NaN divisor", []float64{1, 1}, []float64{0.05}, CQC, math.NaN(), "must be greater than zero"},
		{"negative", []float64{1, -1}, []float64{0.05}, CQC, 1, "mode 2: the spectral acceleration"},
		{"infinite", []float64{math.Inf(1), 1}, []float64{0.05}, CQC, 1, "mode 1: the spectral acceleration"},
		{"NaN", []float64{1, math.NaN()}, []float64{0.05}, CQC, 1, "mode 2: the spectral acceleration"},
		{"undamped", []float64{1, 1}, []float64{0.05, 0}, CQC, 1, "mode 2: CQC needs a damping greater than zero"},
		{"overflow", []float64{1e308, 1e308}, []float64{0.05}, CQC, 0.001, "is not a finite number"},
		{"percent", []float64{1, 1}, []float64{5}, SRSS, 1, "mode 1: damping must be a ratio"},
	} {
		if _, err := Combine(s, c.psa, c.damping, c.rule, c.divisor); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: error %v does not say %q", c.name, err, c.want)
		}
	}
	if _, err := Combine(s, []float64{1, 1}, []float64{0}, SRSS, 1); err != nil {
		t.Errorf("SRSS needs no damping: %v", err)
	}
	for _, wrong := range []func(){
		func() { Combine(s, []float64{1}, []float64{0.05}, CQC, 1) },
		func() { Correlation(0, 1, 0.05, 0.05) },
		func() { quadratic(identity(2), []float64{1}) },
	} {
		func() {
			defer func() {
				if r, ok := recover().(string); !ok || !strings.HasPrefix(r, "modal: ") {
					t.Errorf("a wrong call gave %v, want a panic of the package", r)
				}
			}()
			wrong()
		}()
	}
}

func TestRayleighDamping(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		wi := rapid.Float64Range(0.5, 50).Draw(t, "wi")
		wj := wi * rapid.Float64Range(1.2, 20).Draw(t, "wj/wi")
		zi, zj := rapid.Float64Range(0.01, 0.2).Draw(t, "zi"), rapid.Float64Range(0.01, 0.2).Draw(t, "zj")
		r, err := NewRayleigh(wi, wj, zi, zj)
		if err != nil {
			if zi*wj >= zj*wi && zj*wj >= zi*wi {
				t.Fatalf("refused: %v", err)
			}
			return
		}
		if math.Abs(r.Ratio(wi)-zi) > 1e-10 || math.Abs(r.Ratio(wj)-zj) > 1e-10 {
			t.Fatalf("ratios %v and %v", r.Ratio(wi), r.Ratio(wj))
		}
		if back, err := NewRayleigh(wj, wi, zj, zi); err != nil || math.Abs(back.A0-r.A0) > 1e-12*r.A0+1e-12 {
			t.Fatalf("the order matters: %v, %v", r, back)
		}
		least, at := r.Least()
		if at > 0 && (math.Abs(r.Ratio(at)-least) > 1e-12 || r.Ratio(at*1.01) < least || r.Ratio(at*0.99) < least) {
			t.Fatalf("least ratio %v at %v", least, at)
		}
	})
	for _, c := range [][4]float64{{0, 1, 0.05, 0.05}, {1, 1, 0.05, 0.05}, {1, math.Inf(1), 0.05, 0.05}, {1, 5, math.NaN(), 0.05}, {1, 5, 5, 5}, {1, 5, 0.01, 0.2}} {
		if r, err := NewRayleigh(c[0], c[1], c[2], c[3]); err == nil {
			t.Errorf("%v gives %v, want an error", c, r)
		}
	}
	if z, w := (Rayleigh{A0: 1}).Least(); z != 0 || w != 0 {
		t.Errorf("mass-proportional: %v at %v", z, w)
	}
}
