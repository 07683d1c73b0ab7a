package lateral

import (
	"encoding/json"
	"math"
	"reflect"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/published"
	"quoin/calc/quantity"
	"quoin/calc/standard"
	"quoin/calc/structure"
)

func TestPublished(t *testing.T) {
	for _, miss := range published.Misses(Published()) {
		t.Error(miss)
	}
}

// fatal is what a test and a property have in common.
type fatal interface{ Fatal(...any) }

func must[T any](t fatal) func(T, error) T {
	return func(v T, err error) T {
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
}

// drawModel is a shear building of 1 to 12 storeys.
func drawModel(t *rapid.T) *structure.Model {
	storeys := make([]structure.Storey, rapid.IntRange(1, 12).Draw(t, "storeys"))
	for i := range storeys {
		storeys[i] = structure.Storey{Level: quantity.Plain(float64(i + 1)), Height: rapid.Float64Range(2, 6).Draw(t, "height"),
			Weight: rapid.Float64Range(1e5, 1e7).Draw(t, "weight"), Stiffness: rapid.Float64Range(1e7, 1e9).Draw(t, "stiffness")}
	}
	return must[*structure.Model](t)(structure.Shear(storeys, 0))
}

// drawASCE is the procedure with any inputs that it takes.
func drawASCE(t *rapid.T) ASCE {
	sds := rapid.Float64Range(0.05, 2.5).Draw(t, "S_DS")
	sd1 := sds * rapid.Float64Range(0.2, 1).Draw(t, "T_S")
	target := must[*standard.Target](t)(spectrum722(sds, sd1, rapid.Float64Range(0, 1.2).Draw(t, "S_1"), rapid.Float64Range(2, 16).Draw(t, "T_L")))
	return ASCE{Model: drawModel(t), Target: target, R: rapid.Float64Range(1.5, 8).Draw(t, "R"), Ie: rapid.SampledFrom([]float64{1, 1.25, 1.5}).Draw(t, "I_e"),
		System: rapid.SampledFrom(asceSystems).Draw(t, "system").Name, HeightUnit: rapid.SampledFrom([]string{"m", "ft"}).Draw(t, "unit"), T: rapid.Float64Range(0, 6).Draw(t, "T"),
		DriftPeriod: "capped"}
}

// TestStaticProperties: equilibrium, bounds and scaling hold whatever is given.
func TestStaticProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := drawASCE(t)
		s := must[*Static](t)(in.Static())
		for _, c := range s.Checks {
			if !(c.Residual <= c.Limit) {
				t.Fatalf("%s: %g", c.Name, c.Residual)
			}
		}
		if s.T > s.Cap*(1+1e-15) || s.T != in.T && in.T <= s.Cap && in.T > 0 {
			t.Fatalf("T = %v of a stated %v under %v", s.T, in.T, s.Cap)
		}
		// C_s by its definition, written another way
		d := s.R / s.Ie
		upper := min(s.SDS, s.SD1/s.T, s.SD1*max(s.TL, 0)/(s.T*s.T)) / d
		if s.T <= s.TL {
			upper = min(s.SDS, s.SD1/s.T) / d
		}
		want := max(upper, 0.044*s.SDS*s.Ie, 0.01)
		if s.S1 >= 0.6 {
			want = max(want, 0.5*s.S1/d)
		}
		if math.Abs(s.Cs-want) > 1e-12*want || math.Abs(s.V-want*s.Weight) > 1e-12*s.V {
			t.Fatalf("C_s = %v, want %v; V = %v", s.Cs, want, s.V)
		}
		marked := 0
		for _, l := range s.Limbs {
			if l.Governs {
				marked++
				if l.Value != s.Cs || !l.Applies {
					t.Fatalf("%s is marked with %v, C_s is %v", l.Name, l.Value, s.Cs)
				}
			}
			if l.Why == "" || l.Ref.Key != s.Basis {
				t.Fatalf("%s has no reason or no clause", l.Name)
			}
		}
		if marked != 1 {
			t.Fatalf("%d limbs govern", marked)
		}
		for i := range s.F {
			if i > 0 && (s.Shear[i] > s.Shear[i-1] || s.Moment[i] >= s.Moment[i-1]) {
				t.Fatalf("shear or moment grows upwards at %d", i)
			}
			if s.F[i] <= 0 || s.Displacement[i] <= 0 || s.Drift[i] <= 0 {
				t.Fatalf("level %d: force %v, displacement %v, drift %v", i, s.F[i], s.Displacement[i], s.Drift[i])
			}
			if f := s.Diaphragm[i]; f < 0.2*s.SDS*s.Ie*s.W[i]*(1-1e-12) || f > 0.4*s.SDS*s.Ie*s.W[i]*(1+1e-12) {
				t.Fatalf("diaphragm force %v is out of its bounds", f)
			}
			if g := s.DiaphragmGoverns[i]; (s.Diaphragm[i] == s.DiaphragmRaw[i]) != (g == "calculated") {
				t.Fatalf("diaphragm force %v of %v: %s", s.Diaphragm[i], s.DiaphragmRaw[i], g)
			}
		}
		// drifts found with the uncapped period are never larger
		in.DriftPeriod = "computed"
		if in.T > 0 {
			free := must[*Static](t)(in.Static())
			if free.V != s.V || free.DriftShear[0] > s.Shear[0]*(1+1e-12) || free.DriftPeriod != max(in.T, s.T) && in.T > s.Cap {
				t.Fatalf("forces for drift %v at %v s, for strength %v at %v s", free.DriftShear[0], free.DriftPeriod, s.Shear[0], s.T)
			}
		}
		data, err := json.Marshal(s)
		var back Static
		if err != nil || json.Unmarshal(data, &back) != nil || !reflect.DeepEqual(back, *s) {
			t.Fatal("the result does not survive its encoding")
		}
	})
}

// spectrum716 is a hand-made two-period spectrum of ASCE/SEI 7-16.
func spectrum716(sds, sd1, s1, tl float64, exception int) *standard.Target {
	t, err := spectrum722(sds, sd1, s1, tl)
	if err != nil {
		panic(err)
	}
	t.Basis, t.Exception = "ASCE/SEI 7-16", exception
	return t
}

// TestExceptionTwo: the plateau up to 1.5 T_S, 1.5 times the falling limbs beyond.
func TestExceptionTwo(t *testing.T) {
	g := must[groundMotion](t)(ground(spectrum716(1, 0.6, 0.4, 4, 2)))
	for _, c := range []struct {
		T, want float64
		clause  string
	}{
		{0.5, 1.0 / 8, "Eq. 12.8-2"}, {0.9, 1.0 / 8, "Eq. 12.8-2"}, {0.91, 1.5 * 0.6 / 0.91 / 8, "Eq. 12.8-3"}, {2, 1.5 * 0.6 / 2 / 8, "Eq. 12.8-3"},
		{4, 0.044, "Eq. 12.8-5"}, {5, 0.044, "Eq. 12.8-5"},
	} {
		limbs, cs, _, err := g.coefficient(c.T, 8, 1)
		at := slices.IndexFunc(limbs, func(l Limb) bool { return l.Governs })
		if err != nil || math.Abs(cs-c.want) > 1e-15 || limbs[at].Ref.Clause != c.clause {
			t.Errorf("T = %v: C_s = %v by %s, want %v by %s (%v)", c.T, cs, limbs[at].Ref.Clause, c.want, c.clause, err)
		}
	}
	limbs, cs, _, _ := g.coefficient(5, 2, 1)
	if want := 1.5 * 0.6 * 4 / 25 / 2; math.Abs(cs-want) > 1e-15 || limbs[0].Applies || limbs[1].Applies || !limbs[2].Applies {
		t.Errorf("beyond T_L: C_s = %v, want %v, by %+v", cs, want, limbs)
	}
	// exception 3 ends at T_S
	m := must[*structure.Model](t)(kips([]float64{100, 100}, []float64{12, 12}, nil))
	in := ASCE{Model: m, Target: spectrum716(1, 0.2, 0.4, 4, 3), R: 5, Ie: 1, System: "other"}
	if _, err := in.Static(); err == nil || !strings.Contains(err.Error(), "target: exception 3") {
		t.Errorf("exception 3 beyond T_S gives %v", err)
	}
	in.Target = spectrum716(1, 0.6, 0.4, 4, 3)
	if _, err := in.Static(); err != nil {
		t.Error(err)
	}
}

// ordinates is a spectrum by rows, as a multi-period one.
func ordinates(T, sa []float64) *standard.Target {
	t := &standard.Target{Basis: "ASCE/SEI 7-22", Spectrum: "design", Damping: 0.05, MultiPeriod: true,
		Parameters: []standard.Parameter{{Symbol: "S_DS", Value: 1}, {Symbol: "S_D1", Value: 0.6}, {Symbol: "S_1", Value: 0.3}, {Symbol: "T_L", Value: 8}}}
	for i := 1; i < len(T); i++ {
		slope := (sa[i] - sa[i-1]) / (T[i] - T[i-1])
		t.Branches = append(t.Branches, standard.Branch{Name: "row", From: T[i-1], To: T[i], A0: (sa[i-1] - slope*T[i-1]) * quantity.Gravity, A1: slope * quantity.Gravity})
	}
	return t
}

// TestMultiPeriod: below the peak the largest ordinate counts, above it the ordinate.
func TestMultiPeriod(t *testing.T) {
	target := ordinates([]float64{0, 0.1, 0.3, 1, 4}, []float64{0.4, 0.9, 1.2, 0.6, 0.15})
	g := must[groundMotion](t)(ground(target))
	for T, want := range map[float64]float64{0: 1.2, 0.1: 1.2, 0.2: 1.2, 0.3: 1.2, 0.65: 0.9, 1: 0.6, 2.5: 0.375} {
		limbs, cs, sa, err := g.coefficient(T, 6, 1.5)
		if err != nil || math.Abs(sa/quantity.Gravity-want) > 1e-14 || math.Abs(cs-want/4) > 1e-14 || !limbs[0].Governs || limbs[1].Applies || limbs[2].Applies || limbs[3].Applies {
			t.Errorf("T = %v: S_a %v, C_s %v, want %v and %v (%v)", T, sa/quantity.Gravity, cs, want, want/4, err)
		}
	}
	if _, cs, _, err := g.coefficient(4, 8, 1); err != nil || cs != 0.044 {
		t.Errorf("the least value does not govern: %v, %v", cs, err)
	}
	if _, _, _, err := g.coefficient(4.1, 8, 1); err == nil {
		t.Error("a period beyond the rows is read")
	}
	// the two-period spectrum of the other edition has no such limb
	if limbs, _, _, _ := must[groundMotion](t)(ground(spectrum716(1, 0.6, 0.3, 8, 0))).coefficient(1, 8, 1); len(limbs) != 5 {
		t.Errorf("7-16 has %d limbs", len(limbs))
	}
}

// TestLeastValueFromSixTenths: the limb of S_1 is called for from 0.6 on.
func TestLeastValueFromSixTenths(t *testing.T) {
	for s1, want := range map[float64]float64{0.6: 0.5 * 0.6 / 2, 0.599: 0.1} {
		g := must[groundMotion](t)(ground(must[*standard.Target](t)(spectrum722(1, 0.2, s1, 8))))
		limbs, cs, _, err := g.coefficient(1, 2, 1)
		last := limbs[len(limbs)-1]
		if err != nil || math.Abs(cs-want) > 1e-15 || last.Applies != (s1 == 0.6) || strings.Contains(last.Why, "below") == last.Applies {
			t.Errorf("S_1 = %v: C_s = %v, want %v; %+v", s1, cs, want, last)
		}
	}
}

// TestASCERefusals: what is wrong is named by its symbol.
func TestASCERefusals(t *testing.T) {
	m := must[*structure.Model](t)(kips([]float64{100, 100}, []float64{12, 12}, nil))
	design := must[*standard.Target](t)(spectrum722(1, 0.6, 0.5, 8))
	mce := must[*standard.Target](t)(standard.Build("ASCE/SEI 7-22", standard.Given{Numbers: map[string]float64{"S_DS": 1, "S_D1": 0.6, "T_L": 8}, Texts: map[string]string{"spectrum": "MCE_R"}}))
	rows := must[*standard.Target](t)(standard.Table([]float64{0, 1}, []float64{1, 2}, 0.05))
	vertical, bare, damped, level := *design, *design, *design, *m
	vertical.Vertical, bare.Parameters, damped.Damping = true, nil, 0.02
	level.H = []float64{-1, 2}
	good := func() ASCE {
		return ASCE{Model: m, Target: design, R: 8, Ie: 1, System: "other", HeightUnit: "ft", T: 1}
	}
	if s, err := good().Static(); err != nil || len(s.Warnings) != 0 {
		t.Fatal(s.Warnings, err)
	}
	for name, c := range map[string]struct {
		symbol, says string
		change       func(*ASCE)
	}{
		"no R":          {"R", "greater than zero", func(in *ASCE) { in.R = 0 }},
		"R not finite":  {"R", "greater than zero", func(in *ASCE) { in.R = math.Inf(1) }},
		"R below I_e":   {"R", "below I_e", func(in *ASCE) { in.R, in.Ie = 1, 1.5 }},
		"I_e":           {"I_e", "greater than zero", func(in *ASCE) { in.Ie = math.NaN() }},
		"T":             {"T", "greater than zero", func(in *ASCE) { in.T = -1 }},
		"tiny T":        {"T", "no finite C_s", func(in *ASCE) { in.T = 1e-320 }},
		"no system":     {"system", "is missing", func(in *ASCE) { in.System = "" }},
		"unknown":       {"system", "no row", func(in *ASCE) { in.System = "steel moment frames" }},
		"both":          {"system", "either", func(in *ASCE) { in.Ct, in.X = 0.02, 0.75 }},
		"no x":          {"x", "both be given", func(in *ASCE) { in.System, in.Ct = "", 0.02 }},
		"no C_t":        {"C_t", "both be given", func(in *ASCE) { in.System, in.X = "", 0.75 }},
		"large x":       {"x", "no exponent", func(in *ASCE) { in.System, in.Ct, in.X = "", 0.02, 3 }},
		"unit":          {"h_n_in", "not a choice", func(in *ASCE) { in.HeightUnit = "mm" }},
		"h_n":           {"h_n", "above the highest level", func(in *ASCE) { in.Hn = 1e3 }},
		"drift":         {"drift_period", "not a choice", func(in *ASCE) { in.DriftPeriod = "long" }},
		"drift without": {"drift_period", "computed period", func(in *ASCE) { in.DriftPeriod, in.T = "computed", 0 }},
		"MCE_R":         {"target", "not MCE_R", func(in *ASCE) { in.Target = mce }},
		"table":         {"target", "a table of ordinates", func(in *ASCE) { in.Target = rows }},
		"vertical":      {"target", "vertical motion", func(in *ASCE) { in.Target = &vertical }},
		"parameters":    {"target", "states no S_D", func(in *ASCE) { in.Target = &bare }},
		"damping":       {"target", "5 % damping, not at 2.00 %", func(in *ASCE) { in.Target = &damped }},
		"EN":            {"target", "no spectrum of EN 1998-1:2004", func(in *ASCE) { in.Target = enDesign(3, 1, .2, .6, 2, 4) }},
		"level":         {"structure", "does not lie above", func(in *ASCE) { in.Model = &level }},
	} {
		in := good()
		c.change(&in)
		_, err := in.Static()
		found := standard.Problems(err)
		if len(found) == 0 || found[0].Symbol != c.symbol || !strings.Contains(found[0].Problem, c.says) {
			t.Errorf("%s: error %v, want one of %s that says %q", name, err, c.symbol, c.says)
		}
	}
	in := good()
	in.System = "Steel  Moment frame"
	if s, err := in.Static(); err != nil || s.Ct != 0.028 {
		t.Error("the words of the table do not count letters by case", err)
	}
}

// TestASCEWarnings: no S_1, and an importance factor below the risk category.
func TestASCEWarnings(t *testing.T) {
	m := must[*structure.Model](t)(kips([]float64{100, 100}, []float64{12, 12}, nil))
	target := must[*standard.Target](t)(standard.Build("ASCE/SEI 7-22", standard.Given{Numbers: map[string]float64{"S_DS": 1, "S_D1": 0.6, "T_L": 8}, Texts: map[string]string{"risk": "IV"}}))
	s := must[*Static](t)(ASCE{Model: m, Target: target, R: 8, Ie: 1.25, System: "other"}.Static())
	var codes []string
	for _, w := range s.Warnings {
		codes = append(codes, w.Code)
	}
	if !slices.Equal(codes, []string{"minimum-unchecked", "importance"}) || !s.Limbs[len(s.Limbs)-1].Unknown || s.S1Known {
		t.Errorf("warnings %v", s.Warnings)
	}
	if ie, risk, ok := Importance(target); ie != 1.5 || risk != "IV" || !ok {
		t.Error(ie, risk, ok)
	}
	for risk, want := range map[string]float64{"I": 1, "II": 1, "III": 1.25, "IV": 1.5} {
		target.Parameters = []standard.Parameter{{Symbol: "risk", Text: risk}}
		if ie, _, ok := Importance(target); ie != want || !ok {
			t.Errorf("risk category %s has I_e = %v, want %v", risk, ie, want)
		}
	}
	if other, wrong := OtherUnit(0.028, 0.8, "m"); !wrong || other != "ft" {
		t.Error("C_t of the foot form passes for the metre form")
	}
	if other, wrong := OtherUnit(0.0488, 0.75, "ft"); !wrong || other != "m" {
		t.Error("C_t of the metre form passes for the foot form")
	}
	if _, wrong := OtherUnit(0.0488, 0.75, "m"); wrong {
		t.Error("C_t of the metre form is refused for metres")
	}
}

// TestEuropean: the limits of the method, lambda, the shape, and the level form of forces.
func TestEuropean(t *testing.T) {
	five, two := must[*structure.Model](t)(tonnes(5)), must[*structure.Model](t)(tonnes(2))
	tall := must[*structure.Model](t)(tonnes(14))
	target := enDesign(3, 1, 0.2, 0.45, 2, 4)
	lambda := func(in EN1998) (float64, int) {
		s := must[*Static](t)(in.Static())
		return s.Lambda, len(s.Warnings)
	}
	for _, c := range []struct {
		in       EN1998
		want     float64
		warnings int
	}{
		{EN1998{Model: five, Target: target, T: 0.9}, 0.85, 0}, {EN1998{Model: five, Target: target, T: 0.91}, 1, 0}, {EN1998{Model: two, Target: target, T: 0.5}, 1, 0},
		{EN1998{Model: five, Target: target, T: 0.91, Lambda: 0.85}, 0.85, 1}, {EN1998{Model: five, Target: target, T: 0.5, Lambda: 1}, 1, 0},
	} {
		if got, warnings := lambda(c.in); got != c.want || warnings != c.warnings {
			t.Errorf("T_1 = %v, %d storeys: lambda = %v with %d warnings, want %v with %d", c.in.T, len(c.in.Model.Levels), got, warnings, c.want, c.warnings)
		}
	}
	linear := must[*Static](t)(EN1998{Model: five, Target: target, T: 0.5}.Static())
	same := must[*Static](t)(EN1998{Model: five, Target: target, T: 0.5, Shape: []float64{.2, .4, .6, .8, 1}}.Static())
	for i := range linear.F {
		if math.Abs(linear.F[i]-same.F[i]) > 1e-9*linear.F[i] {
			t.Errorf("level %d: %v by height, %v by the same shape", i, linear.F[i], same.F[i])
		}
	}
	if math.Abs(linear.Weighted[1]-600e3) > 1e-6 {
		t.Errorf("mass times height of level 2 is %v kg, want 600e3", linear.Weighted[1])
	}
	if len(linear.Diaphragm) != 0 || len(linear.Limbs) != 0 || linear.Q != 4 || linear.DriftPeriod != 0.5 {
		t.Error("EN 1998-1 has what belongs to another standard, or lacks its own")
	}
	for _, c := range linear.Checks {
		if !(c.Residual <= c.Limit) {
			t.Errorf("%s: %g", c.Name, c.Residual)
		}
	}
	elastic, vertical, bare := *target, *target, *target
	elastic.Q, vertical.Vertical, bare.Parameters = 0, true, nil
	for name, c := range map[string]struct {
		symbol, says string
		in           EN1998
	}{
		"long":      {"T", "beyond 1.8 s", EN1998{Model: five, Target: target, T: 1.81}},
		"2 s":       {"T", "beyond 2 s", EN1998{Model: five, Target: enDesign(3, 1, .2, .8, 3, 4), T: 2.01}},
		"none":      {"T", "is missing", EN1998{Model: five, Target: target}},
		"two ways":  {"T", "more than one way", EN1998{Model: five, Target: target, T: 1, Ct: 0.05}},
		"tall":      {"system", "up to 40 m", EN1998{Model: tall, Target: target, System: "other"}},
		"tall C_t":  {"C_t", "up to 40 m", EN1998{Model: tall, Target: target, Ct: 0.05}},
		"system":    {"system", "no row", EN1998{Model: five, Target: target, System: "buckling-restrained braced frame"}},
		"lambda":    {"lambda", "1 at most", EN1998{Model: five, Target: target, T: 1, Lambda: 1.1}},
		"shape":     {"modes", "3 components", EN1998{Model: five, Target: target, T: 1, Shape: []float64{1, 1, 1}}},
		"sign":      {"modes", "the same way", EN1998{Model: two, Target: target, T: 1, Shape: []float64{-0.5, 1}}},
		"elastic":   {"target", "elastic", EN1998{Model: five, Target: &elastic, T: 1}},
		"vertical":  {"target", "vertical", EN1998{Model: five, Target: &vertical, T: 1}},
		"no T_C":    {"target", "no T_C", EN1998{Model: five, Target: &bare, T: 1}},
		"other":     {"target", "no spectrum of ASCE", EN1998{Model: five, Target: spectrum716(1, .6, .5, 8, 0), T: 1}},
		"T":         {"T", "greater than zero", EN1998{Model: five, Target: target, T: -1}},
		"h_n":       {"h_n", "greater than zero", EN1998{Model: five, Target: target, T: 1, Hn: -3}},
		"h_n above": {"h_n", "above the highest", EN1998{Model: five, Target: target, T: 1, Hn: 16}},
	} {
		_, err := c.in.Static()
		found := standard.Problems(err)
		if len(found) == 0 || found[0].Symbol != c.symbol || !strings.Contains(found[0].Problem, c.says) {
			t.Errorf("%s: error %v, want one of %s that says %q", name, err, c.symbol, c.says)
		}
	}
}

// TestChecksCanFail: a wrong force, moment or displacement is seen.
func TestChecksCanFail(t *testing.T) {
	m := must[*structure.Model](t)(kips([]float64{100, 150, 200}, []float64{12, 12, 14}, []float64{100, 120, 140}))
	in := ASCE{Model: m, Target: must[*standard.Target](t)(spectrum722(1, 0.6, 0.5, 8)), R: 8, Ie: 1, System: "other"}
	for name, spoil := range map[string]func(*Static){
		"force": func(s *Static) { s.Sums.F *= 1.001 }, "share": func(s *Static) { s.Sums.Cv += 1e-6 }, "moment": func(s *Static) { s.Moment[1] *= 1.001 },
		"displacement": func(s *Static) { s.Displacement[2] *= 1.001 }, "drift": func(s *Static) { s.Drift[0] *= 1.001 },
	} {
		s := must[*Static](t)(in.Static())
		s.Checks = nil
		spoil(s)
		s.check(m)
		if !slices.ContainsFunc(s.Checks, func(c Check) bool { return c.Residual > c.Limit }) {
			t.Errorf("a wrong %s passes all checks", name)
		}
	}
	defer func() {
		if recover() == nil {
			t.Error("a procedure without a model does not panic")
		}
	}()
	_, _ = ASCE{}.Static()
}
