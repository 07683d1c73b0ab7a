package standard

import (
	"encoding/json"
	"flag"
	"math"
	"os"
	"reflect"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/published"
	"quoin/calc/quantity"
)

func TestMain(m *testing.M) {
	flag.Set("rapid.seed", "7022")
	os.Exit(m.Run())
}

func TestPublished(t *testing.T) {
	for _, miss := range published.Misses(Published()) {
		t.Error(miss)
	}
}

// examples gives the suite something to build by each standard.
var examples = map[string]struct {
	given []Given
	cases []string // identifiers of published cases
}{
	"ASCE/SEI 7-22": {
		given: []Given{
			{Numbers: map[string]float64{"S_DS": 1, "S_D1": 0.68, "T_L": 8}},
			{Numbers: map[string]float64{"S_MS": 0.52, "S_M1": 0.225, "T_L": 12}, Texts: map[string]string{"spectrum": "MCE_R", "site": "C"}},
			{Numbers: map[string]float64{"S_DS": 0.5, "S_D1": 0.5, "T_L": 1, "S_1": 0, "S_S": 0.9}, Texts: map[string]string{"risk": "II"}},
		},
		cases: []string{"masonry-building", "steel-frame", "two-period-d-8"},
	},
	"table": {
		given: []Given{
			{Numbers: map[string]float64{"damping": 0.05}, Columns: map[string][]float64{"T": {0, 0.2, 0.6, 2}, "PSA": {4, 9, 9, 2}}},
			{Numbers: map[string]float64{"damping": 0.02}, Columns: map[string][]float64{"T": {0.1, 1}, "PSA": {4, 4}}},
		},
		cases: []string{"table-22-periods"},
	},
}

// TestSuite is what every standard must hold to.
func TestSuite(t *testing.T) {
	ids := map[string]bool{}
	for _, c := range Published() {
		ids[c.ID] = true
	}
	for _, s := range Standards {
		t.Run(s.Basis, func(t *testing.T) {
			example, ok := examples[s.Basis]
			if !ok || len(example.given) == 0 || len(example.cases) == 0 {
				t.Fatal("the suite has no example or no published case of this standard")
			}
			for _, id := range example.cases {
				if !ids[id] {
					t.Errorf("there is no published case %q", id)
				}
			}
			if s.Doc == "" {
				t.Error("the standard has no description")
			}
			for _, p := range s.docs() {
				if p.Symbol == "" || p.Doc == "" || (p.Kind == Text) != (len(p.Choices) > 0) {
					t.Errorf("parameter %q: a symbol, a description and, for a text, choices are needed", p.Symbol)
				}
			}
			for _, in := range example.given {
				target, err := Build(s.Basis, in)
				if err != nil {
					t.Fatal(err)
				}
				soundTarget(t, s, target)
				refusals(t, s, in)
			}
		})
	}
}

func soundTarget(t *testing.T, s Standard, target *Target) {
	if target.Basis != s.Basis || !(target.Damping > 0) {
		t.Errorf("basis %q, damping %v", target.Basis, target.Damping)
	}
	from, to := target.Range()
	end := min(to, 30)
	for i := range 3001 {
		T := min(from+(end-from)*float64(i)/3000, end)
		if y, err := target.PSA(T); err != nil || !(y > 0) || math.IsInf(y, 0) {
			t.Fatalf("PSA(%v) = %v, %v: must be positive", T, y, err)
		}
	}
	for i, b := range target.Branches[1:] {
		before := target.Branches[i]
		if before.To != b.From || !(before.To > before.From) {
			t.Errorf("branch %q ends at %v, %q starts at %v", before.Name, before.To, b.Name, b.From)
		}
		if y, z := before.At(b.From), b.At(b.From); math.Abs(y-z) > 1e-12*y {
			t.Errorf("the spectrum jumps from %v to %v at %v s", y, z, b.From)
		}
	}
	if i := slices.IndexFunc(target.Branches, func(b Branch) bool { return b.Name == "plateau" }); i >= 0 {
		plateau := target.Branches[i]
		top := plateau.A0
		last := top
		for T := plateau.To * 1.001; T < end; T *= 1.05 {
			y, _ := target.PSA(T)
			if !(y < last) {
				t.Errorf("PSA(%v) = %v does not fall", T, y)
			}
			last = y
		}
		for T := 0.0; T < plateau.To; T += plateau.To / 50 {
			if y, _ := target.PSA(T); y > top*(1+1e-12) {
				t.Errorf("PSA(%v) = %v lies above the plateau %v", T, y, top)
			}
		}
	}
	bad := []float64{-0.01, math.NaN(), math.Inf(1)}
	if !math.IsInf(to, 1) {
		bad = append(bad, to*1.0001, math.Nextafter(to, 100))
	}
	if from > 0 {
		bad = append(bad, from*0.9999)
	}
	for _, T := range bad {
		if y, err := target.PSA(T); err == nil {
			t.Errorf("PSA(%v) = %v, want an error", T, y)
		}
		if _, err := target.Series([]float64{from, T}); err == nil {
			t.Errorf("Series with %v: want an error", T)
		}
	}
	for _, c := range target.Corners {
		if p, ok := target.Parameter(c.Symbol); !ok || p.Value != c.T {
			t.Errorf("corner %s = %v is not the parameter %v", c.Symbol, c.T, p.Value)
		}
	}
	bytes, err := json.Marshal(target)
	if err != nil {
		t.Fatal(err)
	}
	var back Target
	if err := json.Unmarshal(bytes, &back); err != nil || !reflect.DeepEqual(back, *target) {
		t.Errorf("the target does not survive its encoding (%v)", err)
	}
}

// refusals: every required parameter is asked for by name, and no number may be
// negative, infinite or not a number; unknown names are refused with a hint.
func refusals(t *testing.T, s Standard, in Given) {
	blame := func(symbol string, in Given) {
		t.Helper()
		_, err := s.Build(in)
		if !slices.ContainsFunc(Problems(err), func(e *ParameterError) bool { return e.Symbol == symbol }) {
			t.Errorf("error %v does not point at %s", err, symbol)
		}
	}
	for _, p := range s.Parameters {
		if p.Required {
			less := copied(in)
			delete(less.Numbers, p.Symbol)
			delete(less.Texts, p.Symbol)
			delete(less.Columns, p.Symbol)
			blame(p.Symbol, less)
		}
		switch p.Kind {
		case Number:
			for _, x := range []float64{-1, math.NaN(), math.Inf(1)} {
				wrong := copied(in)
				wrong.Numbers[p.Symbol] = x
				blame(p.Symbol, wrong)
			}
		case Numbers:
			wrong := copied(in)
			wrong.Columns[p.Symbol][1] = math.NaN()
			blame(p.Symbol, wrong)
			wrong.Columns[p.Symbol] = nil
			blame(p.Symbol, wrong)
		case Text:
			wrong := copied(in)
			wrong.Texts[p.Symbol] = "no such choice"
			blame(p.Symbol, wrong)
		}
	}
	wrong := copied(in)
	wrong.Numbers["S_DSx"] = 1
	blame("S_DSx", wrong)
}

func copied(in Given) Given {
	out := Given{Numbers: map[string]float64{}, Texts: map[string]string{}, Columns: map[string][]float64{}}
	for k, v := range in.Numbers {
		out.Numbers[k] = v
	}
	for k, v := range in.Texts {
		out.Texts[k] = v
	}
	for k, v := range in.Columns {
		out.Columns[k] = slices.Clone(v)
	}
	return out
}

func TestASCE722(t *testing.T) {
	build := func(spectrum string, numbers map[string]float64) (*Target, error) {
		return Build("ASCE/SEI 7-22", Given{Numbers: numbers, Texts: map[string]string{"spectrum": spectrum}})
	}
	design, err := build("design", map[string]float64{"S_DS": 1, "S_D1": 0.6, "T_L": 8})
	if err != nil {
		t.Fatal(err)
	}
	mce, err := build("MCE_R", map[string]float64{"S_MS": 1.5, "S_M1": 0.9, "T_L": 8})
	if err != nil {
		t.Fatal(err)
	}
	for _, T := range []float64{0, 0.05, 0.12, 0.3, 0.6, 1, 8, 12} {
		d, _ := design.PSA(T)
		m, _ := mce.PSA(T)
		if math.Abs(m-1.5*d) > 1e-12*m {
			t.Errorf("MCE_R(%v) = %v, want 1.5 * %v", T, m, d)
		}
	}
	for symbol, want := range map[string]float64{"S_MS": 1.5, "S_M1": 0.9, "S_DS": 1, "S_D1": 0.6, "T_0": 0.12, "T_S": 0.6, "T_L": 8} {
		for _, target := range []*Target{design, mce} {
			if p, ok := target.Parameter(symbol); !ok || math.Abs(p.Value-want) > 1e-15*8 {
				t.Errorf("%s: %s = %v, want %v", target.Spectrum, symbol, p.Value, want)
			}
		}
	}
	for T, name := range map[float64]string{0.1: "rise", 0.4: "plateau", 0.6: "plateau", 2: "constant velocity", 8: "constant velocity", 9: "constant displacement"} {
		if b, err := design.BranchAt(T); err != nil || b.Name != name {
			t.Errorf("branch at %v s is %q, want %q", T, b.Name, name)
		}
	}
	if given, _ := design.Parameter("S_MS"); given.Given {
		t.Error("S_MS was derived, not given")
	}
	if len(design.Warnings) != 1 || design.Warnings[0].Code != "two-period" {
		t.Errorf("warnings %v", design.Warnings)
	}
	large, err := Build("ASCE/SEI 7-22", Given{Numbers: map[string]float64{"S_DS": 9.81, "S_D1": 5, "T_L": 8}, Texts: map[string]string{"site": "F"}})
	if err != nil || len(large.Warnings) != 3 {
		t.Errorf("warnings %v, %v: want those of site class F and of large values too", large.Warnings, err)
	}
	for _, c := range []struct {
		numbers map[string]float64
		symbol  string
		problem string
	}{
		{map[string]float64{"S_DS": 1, "S_D1": 0.6}, "T_L", "is missing"},
		{map[string]float64{"S_D1": 0.6, "T_L": 8}, "S_DS", "give S_DS or S_MS"},
		{map[string]float64{"S_DS": 1, "T_L": 8}, "S_D1", "give S_D1 or S_M1"},
		{map[string]float64{"S_DS": 1, "S_MS": 1.6, "S_D1": 0.6, "T_L": 8}, "S_DS", "does not agree with 2/3 S_MS"},
		{map[string]float64{"S_DS": 1, "S_D1": 0.6, "S_M1": 0.6, "T_L": 8}, "S_D1", "does not agree with 2/3 S_M1"},
		{map[string]float64{"S_DS": 0.1, "S_D1": 1, "T_L": 8}, "T_L", "lies below T_S"},
		{map[string]float64{"S_DS": 1, "S_D1": 0.6, "T_L": 8, "S_ds": 1}, "S_ds", "not a parameter"},
	} {
		_, err := build("design", c.numbers)
		found := Problems(err)
		if len(found) != 1 || found[0].Symbol != c.symbol || !strings.Contains(found[0].Problem, c.problem) {
			t.Errorf("%v: error %v, want one that says %s: %s", c.numbers, err, c.symbol, c.problem)
		}
	}
	// both pairs, rounded to three digits, agree; the design values govern
	both, err := build("design", map[string]float64{"S_MS": 0.986, "S_DS": 0.657, "S_M1": 0.634, "S_D1": 0.423, "T_L": 6})
	if err != nil {
		t.Fatal(err)
	}
	if y, _ := both.PSA(0.3); math.Abs(y-0.657*quantity.Gravity) > 1e-12 {
		t.Errorf("plateau %v, want the S_DS given", y)
	}
	if _, err := Build("ASCE/SEI 7-99", Given{}); len(Problems(err)) != 1 {
		t.Errorf("an unknown basis gives %v", err)
	}
}

func TestTable(t *testing.T) {
	target, err := Table([]float64{0.1, 0.5, 2}, []float64{6, 8, 2}, 0.03)
	if err != nil {
		t.Fatal(err)
	}
	for T, want := range map[float64]float64{0.1: 6, 0.2: 6.5, 0.5: 8, 1.25: 5, 2: 2} {
		if y, err := target.PSA(T); err != nil || math.Abs(y-want) > 1e-14*want {
			t.Errorf("PSA(%v) = %v, %v, want %v", T, y, err, want)
		}
	}
	if _, err := target.PSA(2.5); err == nil || !strings.Contains(err.Error(), "from 0.1 s to 2 s") {
		t.Errorf("error %v does not name the range", err)
	}
	for name, c := range map[string]struct {
		T, psa  []float64
		damping float64
		want    string
	}{
		"one row":     {[]float64{1}, []float64{1}, 0.05, "at least two rows"},
		"order":       {[]float64{1, 1}, []float64{1, 2}, 0.05, "row 2 (1 s) does not follow row 1"},
		"length":      {[]float64{1, 2}, []float64{1}, 0.05, "has 1 rows where T has 2"},
		"zero":        {[]float64{1, 2}, []float64{1, 0}, 0.05, "PSA: row 2 must be greater than zero"},
		"negative T":  {[]float64{-1, 2}, []float64{1, 1}, 0.05, "T: row 1 must not be negative"},
		"percent":     {[]float64{1, 2}, []float64{1, 1}, 5, "must be a ratio below 1"},
		"no damping":  {[]float64{1, 2}, []float64{1, 1}, 0, "damping: must be greater than zero"},
		"not finite":  {[]float64{1, math.Inf(1)}, []float64{1, 1}, 0.05, "T: row 2 is not a finite number"},
		"steep cliff": {[]float64{0, 5e-324, 1}, []float64{1, 2, 1}, 0.05, "too large or too small"},
	} {
		if _, err := Table(c.T, c.psa, c.damping); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: error %v does not say %q", name, err, c.want)
		}
	}
}

// The two-period spectrum scales with its ordinates, and holds its own limits.
func TestTwoPeriodProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		sds := rapid.Float64Range(0.05, 3).Draw(t, "S_DS")
		sd1 := rapid.Float64Range(0.05, 3).Draw(t, "S_D1")
		tl := sd1 / sds * rapid.Float64Range(1, 20).Draw(t, "T_L/T_S")
		f := rapid.Float64Range(0.1, 1.2).Draw(t, "f")
		T := rapid.Float64Range(0, 40).Draw(t, "T")
		build := func(f float64) *Target {
			target, err := Build("ASCE/SEI 7-22", Given{Numbers: map[string]float64{"S_DS": f * sds, "S_D1": f * sd1, "T_L": tl * (1 + 1e-12)}})
			if err != nil {
				t.Fatal(err)
			}
			return target
		}
		one, scaled := build(1), build(f)
		y, _ := one.PSA(T)
		z, _ := scaled.PSA(T)
		if math.Abs(z-f*y) > 1e-9*z {
			t.Fatalf("PSA(%v) = %v scaled by %v gives %v", T, y, f, z)
		}
		g := quantity.Gravity
		bound := min(sds, sd1/T, sd1*tl*(1+1e-12)/(T*T)) * g
		if y > bound*(1+1e-9) || y < 0.4*min(bound, sds*g)*(1-1e-9) {
			t.Fatalf("PSA(%v) = %v, outside its bounds by %v", T, y, bound)
		}
		if T >= sd1/sds && math.Abs(y-bound) > 1e-9*y {
			t.Fatalf("PSA(%v) = %v beyond T_S, want %v", T, y, bound)
		}
	})
}
