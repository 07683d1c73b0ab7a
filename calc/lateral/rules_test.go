package lateral

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/standard"
	"quoin/calc/structure"
)

// place is a design spectrum of 7-16 with the words that conditions ask for.
func place(sds, sd1 float64, words ...string) *standard.Target {
	t := spectrum716(sds, sd1, 0.4, 8, 0)
	for i := 0; i < len(words); i += 2 {
		t.Parameters = append(t.Parameters, standard.Parameter{Symbol: words[i], Text: words[i+1]})
	}
	return t
}

// feet is a shear building of equal storeys.
func feet(t fatal, n int, height float64) *structure.Model {
	w, h := make([]float64, n), make([]float64, n)
	for i := range w {
		w[i], h[i] = 100, height
	}
	return must[*structure.Model](t)(kips(w, h, nil))
}

// TestPermitted: Table 12.6-1 row by row, on both sides of every bound.
func TestPermitted(t *testing.T) {
	d := func(words ...string) *standard.Target { return place(1, 0.6, append(words, "category", "D")...) }
	for _, c := range []struct {
		name    string
		target  *standard.Target
		n       int
		height  float64 // of a storey, ft
		T       float64
		regular string
		want    string
	}{
		{"category C", place(1, 0.6, "category", "C"), 20, 12, 0, "no", "permitted"},
		{"two storeys, risk II", d("risk", "II"), 2, 12, 0, "no", "permitted"},
		{"two storeys, risk III", d("risk", "III"), 2, 12, 0, "no", "not permitted"},
		{"three storeys, risk II", d("risk", "II"), 3, 12, 0, "no", "not permitted"},
		{"low and regular", d("risk", "II"), 16, 10, 0, "yes", "permitted"},
		{"tall and quick", d("risk", "II"), 17, 10, 0.5, "yes", "permitted"},
		{"tall and slow", place(1, 0.2, "risk", "II", "category", "D"), 17, 10, 2, "yes", "not permitted"},
		{"tall and slow, nothing said", place(1, 0.2, "risk", "II", "category", "D"), 17, 10, 2, "", "not permitted"},
		{"low, listed", d("risk", "II"), 16, 10, 0, "listed", "permitted"},
		{"tall, listed", d("risk", "II"), 17, 10, 0.5, "listed", "not permitted"},
		{"low, nothing said", d("risk", "II"), 5, 10, 0, "", "not shown"},
		{"no category", place(1, 0.6), 5, 10, 0, "no", "not shown"},
		{"no category, regular", place(1, 0.6), 5, 10, 0, "yes", "permitted"},
		{"category E", place(1, 0.6, "category", "E", "risk", "II"), 5, 10, 0, "no", "not permitted"},
	} {
		s, err := ASCE{Model: feet(t, c.n, c.height), Target: c.target, R: 8, Ie: 1, System: "other", HeightUnit: "ft", T: c.T, Regular: c.regular}.Static()
		if err != nil {
			t.Fatal(c.name, err)
		}
		warned := len(s.Warnings) > 0 && s.Warnings[0].Code == "procedure"
		if s.Permitted != c.want || warned != (c.want == "not permitted") || len(s.Conditions) == 0 {
			t.Errorf("%s: %s, want %s; %+v", c.name, s.Permitted, c.want, s.Conditions)
		}
	}
	// T just below and just above 3.5 T_S of a tall structure
	for _, T := range []float64{0.699, 0.701} {
		s := must[*Static](t)(ASCE{Model: feet(t, 17, 10), Target: place(1, 0.2, "risk", "II", "category", "D"), R: 8, Ie: 1, System: "other", HeightUnit: "ft", T: T, Regular: "yes"}.Static())
		if (s.Permitted == "permitted") != (T < 0.7) {
			t.Errorf("T = %v against 0.7 s: %s", T, s.Permitted)
		}
	}
}

// TestReducedPlateau: 12.8.1.3 replaces S_DS in the plateau where all that it asks
// is stated, and is refused, naming what is not, elsewhere.
func TestReducedPlateau(t *testing.T) {
	good := func() ASCE {
		return ASCE{Model: feet(t, 5, 10), Target: place(1.2, 0.6, "risk", "II", "category", "D", "site", "D"), R: 8, Ie: 1, System: "other", HeightUnit: "ft", Regular: "yes", Rho: 1, CapSDS: true}
	}
	for sds, want := range map[float64]float64{0.8: 0.8, 1: 1, 1.2: 1, 1.4: 1, 1.6: 1.12, 2: 1.4} {
		in := good()
		in.Target = place(sds, 0.6, "risk", "II", "category", "D", "site", "D")
		s := must[*Static](t)(in.Static())
		if math.Abs(s.Cs-want/8) > 1e-15 || math.Abs(s.SDSUsed-want) > 1e-15 || math.Abs(s.DiaphragmMax[0]-0.4*sds*s.W[0]) > 1e-9*s.W[0] {
			t.Errorf("S_DS = %v: C_s = %v, want %v", sds, s.Cs, want/8)
		}
	}
	for says, change := range map[string]func(*ASCE){
		"irregularity of 12.3.2: not stated": func(in *ASCE) { in.Regular = "" },
		"irregularity of 12.3.2: some":       func(in *ASCE) { in.Regular = "listed" },
		"five storeys: 6":                    func(in *ASCE) { in.Model = feet(t, 6, 8) },
		"0.5 s: 0.51 s":                      func(in *ASCE) { in.T, in.System = 0.51, "steel moment frame" },
		"factor of 1.0: not stated":          func(in *ASCE) { in.Rho = 0 },
		"factor of 1.0: 1.3":                 func(in *ASCE) { in.Rho = 1.3 },
		"determined: E":                      func(in *ASCE) { in.Target = place(1.2, 0.6, "risk", "II", "site", "E") },
		"determined: default":                func(in *ASCE) { in.Target = place(1.2, 0.6, "risk", "II", "site", "default") },
		"determined: not stated":             func(in *ASCE) { in.Target = place(1.2, 0.6, "risk", "II") },
		"category I or II: III":              func(in *ASCE) { in.Target = place(1.2, 0.6, "risk", "III", "site", "D") },
		"multi-period": func(in *ASCE) {
			in.Target = ordinates([]float64{0, 0.1, 0.3, 1, 4}, []float64{0.4, 0.9, 1.2, 0.6, 0.15})
			in.Target.Parameters = append(in.Target.Parameters, standard.Parameter{Symbol: "risk", Text: "II"}, standard.Parameter{Symbol: "site", Text: "D"})
		},
	} {
		in := good()
		change(&in)
		_, err := in.Static()
		if found := standard.Problems(err); len(found) != 1 || found[0].Symbol != "S_DS_cap" || !strings.Contains(found[0].Problem, says) {
			t.Errorf("%s: %v", says, err)
		}
	}
}

// TestApproximateRefusals: the periods by storeys and walls hold within their bounds only.
func TestApproximateRefusals(t *testing.T) {
	walls := []Wall{{6, 0.2}, {6, 0.2}}
	for name, c := range map[string]struct {
		symbol, says string
		in           ASCE
	}{
		"13 storeys":    {"period", "up to 12", ASCE{Model: feet(t, 13, 10), System: "steel moment frame", ByStoreys: true}},
		"low storeys":   {"period", "on average", ASCE{Model: feet(t, 12, 9.99), System: "steel moment frame", ByStoreys: true}},
		"no system":     {"system", "is missing", ASCE{Model: feet(t, 3, 10), ByStoreys: true}},
		"braced":        {"system", "alone", ASCE{Model: feet(t, 3, 10), System: "eccentrically braced frame", ByStoreys: true}},
		"unknown":       {"system", "no row", ASCE{Model: feet(t, 3, 10), System: "frame", ByStoreys: true}},
		"two ways":      {"period", "C_t and x", ASCE{Model: feet(t, 3, 10), Ct: 0.02, X: 0.75, ByStoreys: true}},
		"walls too":     {"walls", "another way", ASCE{Model: feet(t, 3, 10), System: "other", Walls: walls, BaseArea: 300}},
		"no walls":      {"walls", "are missing", ASCE{Model: feet(t, 3, 10), BaseArea: 300}},
		"no area":       {"base_area", "must be given", ASCE{Model: feet(t, 3, 10), Walls: walls}},
		"small area":    {"base_area", "cover", ASCE{Model: feet(t, 3, 10), Walls: walls, BaseArea: 2.3}},
		"high walls":    {"walls", "up to h_n = 120 ft", ASCE{Model: feet(t, 3, 40.1), Walls: walls, BaseArea: 300}},
		"no length":     {"walls[2]", "greater than zero", ASCE{Model: feet(t, 3, 10), Walls: []Wall{{6, 0.2}, {0, 0.2}}, BaseArea: 300}},
		"turned":        {"walls[1]", "thicker", ASCE{Model: feet(t, 3, 10), Walls: []Wall{{0.2, 6}}, BaseArea: 300}},
		"regular":       {"regular", "not a choice", ASCE{Model: feet(t, 3, 10), System: "other", Regular: "perhaps"}},
		"rho":           {"rho", "below 1", ASCE{Model: feet(t, 3, 10), System: "other", Rho: 0.9}},
		"large rho":     {"rho", "above 1.3", ASCE{Model: feet(t, 3, 10), System: "other", Rho: 1.4}},
		"infinite area": {"base_area", "must be given", ASCE{Model: feet(t, 3, 10), Walls: walls, BaseArea: math.Inf(1)}},
	} {
		c.in.Target, c.in.R, c.in.Ie, c.in.HeightUnit = place(1, 0.6), 8, 1, "ft"
		_, err := c.in.Static()
		if found := standard.Problems(err); len(found) != 1 || found[0].Symbol != c.symbol || !strings.Contains(found[0].Problem, c.says) {
			t.Errorf("%s: error %v, want one of %s that says %q", name, err, c.symbol, c.says)
		}
	}
	ok := ASCE{Model: feet(t, 12, 10), Target: place(1, 0.6), R: 8, Ie: 1, HeightUnit: "ft", System: "steel moment frame", ByStoreys: true}
	if s := must[*Static](t)(ok.Static()); math.Abs(s.Ta-1.2) > 1e-15 || s.PeriodRule != "storeys" || len(s.Conditions) < 4 {
		t.Errorf("12 storeys of 10 ft: T_a = %v by %s", s.Ta, s.PeriodRule)
	}
}

// TestEuropeanConditions: what 4.3.3.2.1(2) asks is said, and regularity is the author's word.
func TestEuropeanConditions(t *testing.T) {
	in := EN1998{Model: must[*structure.Model](t)(tonnes(5)), Target: enDesign(3, 1, 0.2, 0.6, 2, 4), T: 0.7}
	for regular, want := range map[string]string{"": "not shown", "yes": "permitted"} {
		in.Regular = regular
		if s := must[*Static](t)(in.Static()); s.Permitted != want || len(s.Conditions) != 3 {
			t.Errorf("regular %q: %s, %v", regular, s.Permitted, s.Conditions)
		}
	}
	for regular, says := range map[string]string{"no": "regular in elevation", "listed": "not a choice"} {
		in.Regular = regular
		_, err := in.Static()
		if found := standard.Problems(err); len(found) != 1 || found[0].Symbol != "regular" || !strings.Contains(found[0].Problem, says) {
			t.Errorf("regular %q: %v", regular, err)
		}
	}
}

// TestStaticFamily: how forces answer to weights, periods and the shape of the building.
func TestStaticFamily(t *testing.T) {
	close := func(a, b float64) bool { return math.Abs(a-b) <= 1e-9*max(math.Abs(a), math.Abs(b)) }
	rapid.Check(t, func(t *rapid.T) {
		in := drawASCE(t)
		in.Regular = rapid.SampledFrom([]string{"", "yes", "listed", "no"}).Draw(t, "regular")
		s := must[*Static](t)(in.Static())
		// weights and stiffnesses times f: forces times f, displacements the same
		f := rapid.Float64Range(0.1, 10).Draw(t, "factor")
		var storeys []structure.Storey
		for i, level := range in.Model.Levels {
			storeys = append(storeys, structure.Storey{Level: level, Height: in.Model.Hs[i], Weight: f * in.Model.W[i], Stiffness: f * in.Model.Ks[i]})
		}
		scaled := in
		scaled.Model = must[*structure.Model](t)(structure.Shear(storeys, 0))
		big := must[*Static](t)(scaled.Static())
		for i := range s.F {
			if !close(big.F[i], f*s.F[i]) || !close(big.Diaphragm[i], f*s.Diaphragm[i]) || !close(big.Moment[i], f*s.Moment[i]) || !close(big.Drift[i], s.Drift[i]) {
				t.Fatalf("level %d: weights times %v do not give forces times it", i, f)
			}
			if want := s.W[i] * math.Pow(s.H[i], s.K); !close(s.Cv[i]/s.Cv[0], want/(s.W[0]*math.Pow(s.H[0], s.K))) {
				t.Fatalf("share of level %d is not in proportion to w h^k", i)
			}
			arm := 0.0
			for j := i; j < len(s.F); j++ {
				foot := s.H[i] - s.Hs[i]
				arm += s.F[j] * (s.H[j] - foot)
			}
			if !close(arm, s.Moment[i]) {
				t.Fatalf("overturning at the foot of storey %d", i)
			}
		}
		// a longer period: never a larger shear, never a smaller k, and k within 1 and 2
		longer := in
		longer.T = s.T * rapid.Float64Range(1, 3).Draw(t, "longer")
		if slow := must[*Static](t)(longer.Static()); slow.T < s.T*(1-1e-12) || slow.V > s.V*(1+1e-12) || slow.K < s.K-1e-12 || slow.K > 2 || s.K < 1 {
			t.Fatalf("T %v to %v: V %v to %v, k %v to %v", s.T, slow.T, s.V, slow.V, s.K, slow.K)
		}
		// more reduction: never a larger shear
		soft := in
		soft.R *= 1.1
		if less := must[*Static](t)(soft.Static()); less.V > s.V*(1+1e-12) {
			t.Fatalf("R times 1.1: V %v to %v", s.V, less.V)
		}
		// nothing passes in silence
		if category, _ := in.Target.Parameter("category"); category.Text == "" && in.Regular == "" && s.Permitted == "permitted" {
			t.Fatal("permitted with neither a category nor regularity stated")
		}
	})
}

// TestUpperLimitFalls: C_u and with it the limit of the period never grow with S_D1.
func TestUpperLimitFalls(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := rapid.Float64Range(0, 0.6).Draw(t, "S_D1")
		b := a + rapid.Float64Range(0, 0.1).Draw(t, "more")
		if upperLimit(b) > upperLimit(a)+1e-15 || upperLimit(a) > 1.7 || upperLimit(b) < 1.4 {
			t.Fatalf("C_u of %v is %v, of %v is %v", a, upperLimit(a), b, upperLimit(b))
		}
	})
}
