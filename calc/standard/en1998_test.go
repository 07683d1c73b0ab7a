package standard

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestRefusedEN(t *testing.T) {
	for name, c := range map[string]struct {
		in              Given
		symbol, problem string
	}{
		"no a_g":         {numbers(nil, "type", "1", "ground", "B"), "a_g", "is missing"},
		"twice gamma_I":  {elasticEN("1", "B", 2).with("", map[string]float64{"gamma_I": 1.2}), "gamma_I", "holds gamma_I already"},
		"both":           {elasticEN("1", "B", 2).with("", map[string]float64{"a_gR": 2}), "a_gR", "is given already"},
		"no gamma_I":     {numbers(map[string]float64{"a_gR": 2}, "type", "1", "ground", "B"), "gamma_I", "is missing"},
		"no type":        {numbers(map[string]float64{"a_g": 2, "S": 1.1}, "ground", "B"), "type", "national values of T_B, T_C, T_D"},
		"q":              {elasticEN("1", "B", 2).with("", map[string]float64{"q": 3}), "q", "belongs to"},
		"no q":           {elasticEN("1", "B", 2).with("design", nil), "q", "is missing"},
		"design, xi":     {elasticEN("1", "B", 2).with("design", map[string]float64{"q": 3, "xi": 0.02}), "xi", "covers damping"},
		"vertical, S":    {elasticEN("1", "B", 2).with("vertical", map[string]float64{"S": 1}), "S", "is not read"},
		"ratio":          {elasticEN("1", "B", 2).with("", map[string]float64{"vertical_ratio": 0.9}), "vertical_ratio", "belongs to the vertical"},
		"T_C":            {elasticEN("1", "B", 2).with("", map[string]float64{"T_C": 0.1}), "T_C", "lies below T_B"},
		"T_D":            {elasticEN("1", "B", 2).with("", map[string]float64{"T_D": 0.4}), "T_D", "lies below T_C"},
		"T_E":            {elasticEN("1", "B", 2).with("", map[string]float64{"T_E": 1}), "T_E", "lies below T_D"},
		"T_F":            {elasticEN("1", "B", 2).with("", map[string]float64{"T_F": 5}), "T_F", "does not lie above"},
		"vertical, T_D":  {elasticEN("1", "B", 2).with("vertical", map[string]float64{"T_D": 4}), "T_D", "ends at 4 s"},
		"bound over all": {elasticEN("1", "B", 2).with("design", map[string]float64{"q": 16}), "q", "above the whole spectrum"},
		"xi":             {elasticEN("1", "B", 2).with("", map[string]float64{"xi": 5}), "xi", "ratio below 1"},
		"ground S1":      {elasticEN("1", "S1", 2), "ground", "special study"},
	} {
		_, err := Build(basisEN, c.in)
		if !slices.ContainsFunc(Problems(err), func(e *ParameterError) bool {
			return e.Symbol == c.symbol && strings.Contains(e.Problem, c.problem)
		}) {
			t.Errorf("%s: error %v, want one at %s that says %q", name, err, c.symbol, c.problem)
		}
	}
}

// TestNationalValues: what is given stands, and is called what it is.
func TestNationalValues(t *testing.T) {
	target, err := Build(basisEN, elasticEN("1", "B", 2).with("", map[string]float64{"S": 1.4, "T_B": 0.15}))
	if err != nil {
		t.Fatal(err)
	}
	for symbol, want := range map[string]string{"S": "national value; recommended: 1.2", "T_B": "(recommended value)", "T_C": "(recommended value)", "T_E": "(recommended value)"} {
		if p, _ := target.Parameter(symbol); !strings.Contains(p.Doc, want) {
			t.Errorf("%s is described as %q", symbol, p.Doc)
		}
	}
	if y, _ := target.PSA(0.3); y != 2*1.4*2.5 {
		t.Errorf("plateau %v", y)
	}
	steep, err := Build(basisEN, elasticEN("1", "B", 2).with("vertical design", map[string]float64{"q": 2}))
	if err != nil || codes(steep) != "vertical-q" || steep.Q != 2 || !steep.Vertical {
		t.Errorf("vertical, q = 2: %v, %v", codes(steep), err)
	}
	small, err := Build(basisEN, elasticEN("1", "B", 20).with("design", map[string]float64{"q": 0.9}))
	if err != nil || codes(small) != "low-q large-value" {
		t.Errorf("q = 0.9, a_g = 20 m/s²: %v, %v", codes(small), err)
	}
}

// TestFormulasEN holds every spectrum to the clauses written out once more.
func TestFormulasEN(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ag := rapid.Float64Range(0.1, 6).Draw(t, "a_g")
		S := rapid.Float64Range(1, 2).Draw(t, "S")
		tb := rapid.Float64Range(0.03, 0.2).Draw(t, "T_B")
		tc := rapid.Float64Range(0.2, 1).Draw(t, "T_C")
		td := rapid.Float64Range(1, 3).Draw(t, "T_D")
		q := rapid.Float64Range(1, 8).Draw(t, "q")
		xi := rapid.Float64Range(0, 0.6).Draw(t, "xi")
		T := rapid.Float64Range(0, 14).Draw(t, "T")
		at := map[string]float64{"a_g": ag, "S": S, "T_B": tb, "T_C": tc, "T_D": td}
		design, err := Build(basisEN, numbers(at).with("design", map[string]float64{"q": q}))
		if err != nil {
			t.Fatal(err)
		}
		elastic, err := Build(basisEN, numbers(at).with("elastic", map[string]float64{"xi": xi, "T_E": 5, "T_F": 10}))
		if err != nil {
			t.Fatal(err)
		}
		eta := math.Max(math.Sqrt(10/(5+100*xi)), 0.55)
		shape := func(start, top float64) float64 {
			switch {
			case T <= tb:
				return ag * S * (start + T/tb*(top-start))
			case T <= tc:
				return ag * S * top
			case T <= td:
				return ag * S * top * tc / T
			}
			return ag * S * top * tc * td / T / T
		}
		sd := shape(2.0/3, 2.5/q)
		if T > tc {
			sd = math.Max(sd, 0.2*ag)
		}
		if y, err := design.PSA(T); err != nil || math.Abs(y-sd) > 1e-9*sd {
			t.Fatalf("S_d(%v) = %v, %v, want %v", T, y, err, sd)
		}
		se := shape(1, 2.5*eta)
		if T > 5 {
			d := 0.025 * ag * S * tc * td * (2.5*eta + (math.Min(T, 10)-5)/5*(1-2.5*eta))
			se = d * 4 * math.Pi * math.Pi / T / T
		}
		if y, err := elastic.PSA(T); err != nil || math.Abs(y-se) > 1e-9*se {
			t.Fatalf("S_e(%v) = %v, %v, want %v", T, y, err, se)
		}
	})
}

// TestMultiPeriodRefusals: what is wrong with the ordinates is named.
func TestMultiPeriodRefusals(t *testing.T) {
	for name, c := range map[string]struct {
		change          func(in *Given)
		symbol, problem string
	}{
		"missing": {func(in *Given) {
			in.Columns["T"] = slices.Delete(in.Columns["T"], 10, 11)
			in.Columns["PSA"] = slices.Delete(in.Columns["PSA"], 10, 11)
		}, "T", "missing: 0.3 s"},
		"other":    {func(in *Given) { in.Columns["T"][21] = 9 }, "T", "missing: 10 s; not among them: 9 s"},
		"order":    {func(in *Given) { in.Columns["T"][3] = 0.02 }, "T", "does not follow"},
		"rows":     {func(in *Given) { in.Columns["PSA"] = in.Columns["PSA"][1:] }, "PSA", "has 21 rows where T has 22"},
		"of":       {func(in *Given) { delete(in.Texts, "ordinates_of") }, "ordinates_of", "is missing"},
		"site":     {func(in *Given) { delete(in.Texts, "site") }, "site", "is missing"},
		"velocity": {func(in *Given) { in.Numbers["vs30"] = 500 }, "vs30", "is of site class C, not D"},
		"S_DS":     {func(in *Given) { in.Numbers["S_DS"] = 1 }, "S_DS", "the ordinates, which give 1.035"},
		"S_M1":     {func(in *Given) { in.Numbers["S_M1"] = 1 }, "S_M1", "S_D1 = 0.6667 does not agree"},
	} {
		in := multi722(0.7, "design", 1).clone()
		c.change(&in)
		_, err := Build("ASCE/SEI 7-22", in)
		found := Problems(err)
		if len(found) != 1 || found[0].Symbol != c.symbol || !strings.Contains(found[0].Problem, c.problem) {
			t.Errorf("%s: error %v, want one at %s that says %q", name, err, c.symbol, c.problem)
		}
	}
	rounded := multi722(0.7, "design", 1).with("", map[string]float64{"S_DS": 1.03})
	if t1, err := Build("ASCE/SEI 7-22", rounded); err != nil || values(t1, "S_DS")[0] != 1.03 || math.Abs(values(t1, "S_MS")[0]-1.545) > 1e-12 {
		t.Errorf("the value of the hazard tool, rounded, does not stand: %v", err)
	}
	for site, want := range map[string]float64{"C": 0.70, "D": 0.9 * 3 * 0.3} { // T S_a is largest at 3 s
		in := multi722(0.7, "design", 1).clone()
		in.Columns["PSA"][slices.Index(periods722, 3)] = 0.3 * g
		in.Texts["site"] = site
		if target, err := Build("ASCE/SEI 7-22", in); err != nil || math.Abs(values(target, "S_D1")[0]-want) > 1e-12 {
			t.Errorf("site class %s: S_D1 is not %v (%v)", site, want, err)
		}
	}
	below, err := Build("ASCE/SEI 7-22", multi722(0.7, "design", 1).with("", map[string]float64{"T_L": 8}))
	if err != nil || codes(below) != "long-period" || !below.MultiPeriod {
		t.Errorf("T_L below 10 s: %v, %v", codes(below), err)
	}
}

// TestSiteOfVelocity: a velocity on a limit is of the softer class, in whatever unit
// it was written, and a class that it does not belong to is refused.
func TestSiteOfVelocity(t *testing.T) {
	for feet, want := range map[float64][2]string{5000: {"B", "A"}, 3000: {"BC", "B"}, 2100: {"C", "BC"}, 1450: {"CD", "C"}, 1000: {"D", "CD"}, 700: {"DE", "D"}, 500: {"E", "DE"}} {
		for _, v := range []float64{feet * foot, math.Nextafter(feet*foot, 0), math.Nextafter(feet*foot, 1e4)} {
			if got := siteOf722(v); got != want[0] {
				t.Errorf("%v ft/s (%v m/s) is of class %s, want %s", feet, v, got, want[0])
			}
		}
		if got := siteOf722(feet * foot * 1.0001); got != want[1] {
			t.Errorf("above %v ft/s: class %s, want %s", feet, got, want[1])
		}
		for i, site := range want {
			var p problems
			siteWindow(Given{Numbers: map[string]float64{"vs30": feet * foot}, Texts: map[string]string{"site": site}}, &p)
			if refused := len(p.all) == 1 && Problems(p.err())[0].Symbol == "vs30"; refused != (i == 1) {
				t.Errorf("%v ft/s with class %s: %v", feet, site, p.all)
			}
		}
	}
}

// TestWindow: the range of periods for S_D1 follows from the ground.
func TestWindow(t *testing.T) {
	for _, c := range []struct {
		site string
		vs30 float64
		want float64
	}{{"C", 0, 2}, {"BC", 0, 2}, {"A", 0, 2}, {"CD", 0, 5}, {"D", 0, 5}, {"E", 0, 5}, {"default", 0, 5}, {"F", 0, 5}, {"", 443, 2}, {"", 441, 5}, {"D", 250, 5}, {"C", 442, 2}, {"", 1450 * foot, 5}, {"CD", 1450 * foot, 5}, {"CD", 441.96000000000004, 5}, {"", 441.96000000000004, 5}, {"F", 500, 2}, {"", 0, 0}} {
		in := Given{Numbers: map[string]float64{}, Texts: map[string]string{}}
		if c.site != "" {
			in.Texts["site"] = c.site
		}
		if c.vs30 > 0 {
			in.Numbers["vs30"] = c.vs30
		}
		var p problems
		if w := siteWindow(in, &p); w.to != c.want || len(p.all) > 0 {
			t.Errorf("site %q, vs30 %v: up to %v s, %v, want %v", c.site, c.vs30, w.to, p.all, c.want)
		}
	}
}
