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

// example is one spectrum of a standard with its limits: PSA at T = 0, and what
// PSA T^power tends to for long periods; both 0: not looked at. damps is whether
// the standard adjusts it to another damping.
type example struct {
	given       Given
	zero, long  float64
	power       float64
	damps       bool
	falls, ends bool // falls beyond its plateau; ends at a finite period
}

func numbers(of map[string]float64, texts ...string) Given {
	in := Given{Numbers: of, Texts: map[string]string{}}
	for i := 0; i < len(texts); i += 2 {
		in.Texts[texts[i]] = texts[i+1]
	}
	return in
}

const g = quantity.Gravity

// examples gives the suite something to build by each standard.
var examples = map[string]struct {
	all   []example
	cases []string // identifiers of published cases
}{
	"ASCE/SEI 7-22": {
		all: []example{
			{given: numbers(map[string]float64{"S_DS": 1, "S_D1": 0.68, "T_L": 8}), zero: 0.4 * g, long: 0.68 * 8 * g, power: 2, falls: true},
			{given: numbers(map[string]float64{"S_MS": 0.52, "S_M1": 0.225, "T_L": 12}, "spectrum", "MCE_R", "site", "C"), zero: 0.4 * 0.52 * g, long: 0.225 * 12 * g, power: 2, falls: true},
			{given: numbers(map[string]float64{"S_DS": 0.5, "S_D1": 0.5, "T_L": 1, "S_1": 0, "S_S": 0.9}, "risk", "II"), falls: true},
			{given: multi722(0.7, "design", 1), zero: 0.45 * g, long: 0.05 * 10 * 12 * g, power: 2},
			{given: multi722(0.7, "MCE_R", 1).with("MCE_R", map[string]float64{"T_L": 6, "vs30": 300}), zero: 0.45 * g, long: 0.05 * 100 * g, power: 2},
		},
		cases: []string{"two-period-d-8", "multi-period", "multi-period-beyond"},
	},
	"ASCE/SEI 7-16": {
		all: []example{
			{given: numbers(map[string]float64{"S_S": 0.85, "S_1": 0.32, "T_L": 6}, "site", "D", "risk", "III"), zero: 0.4 * 0.986 / 1.5 * g, long: 0.4224 * 6 * g, power: 2, falls: true},
			{given: numbers(map[string]float64{"S_S": 1.2, "S_1": 0.3, "T_L": 6}, "site", "E", "site_specific", "exception"), zero: 0.4 * 0.96 * g, falls: true},
			{given: numbers(map[string]float64{"S_S": 0.552, "S_1": 0.243, "F_a": 1.358, "F_v": 1.914, "T_L": 4}, "spectrum", "MCE_R"), zero: 0.4 * 1.358 * 0.552 * g, falls: true},
			{given: numbers(map[string]float64{"S_DS": 0.9, "S_D1": 0.8, "T_L": 8}, "site", "F", "site_specific", "study"), falls: true},
			{given: numbers(map[string]float64{"S_S": 0.85, "S_1": 0.32, "T_L": 6}, "site", "default", "spectrum", "vertical"), ends: true},
			{given: numbers(map[string]float64{"S_MS": 2, "S_M1": 0.2, "T_L": 6, "S_1": 0.1}, "site", "C", "spectrum", "MCE_R vertical"), zero: 0.39 * 2 * g, ends: true},
		},
		cases: []string{"mapped-d-6", "site-coefficient-fa-d", "masonry-building", "vertical-716", "design-category"},
	},
	"EN 1998-1:2004": {
		all: []example{
			{given: elasticEN("1", "B", 2.5), zero: 2.5 * 1.2, long: 4 * math.Pi * math.Pi * 0.025 * 2.5 * 1.2 * 0.5 * 2, power: 2, damps: true, falls: true},
			{given: elasticEN("2", "D", 2).with("elastic", map[string]float64{"xi": 0.1}), zero: 3.6, damps: true, falls: true},
			{given: numbers(map[string]float64{"a_gR": 2, "gamma_I": 1.2, "S": 1.1, "T_B": 0.1, "T_C": 0.4, "T_D": 2.2}), zero: 2.4 * 1.1, damps: true, falls: true, ends: true},
			{given: elasticEN("1", "B", 2.5).with("design", map[string]float64{"q": 3}), zero: 2.5 * 1.2 * 2 / 3, long: 0.2 * 2.5},
			{given: elasticEN("2", "A", 2.5).with("design", map[string]float64{"q": 6, "beta": 0.15}), zero: 2.5 * 2 / 3, long: 0.15 * 2.5},
			{given: elasticEN("2", "C", 2).with("vertical", map[string]float64{"vertical_ratio": 0.6}), zero: 1.2, damps: true, falls: true, ends: true},
			{given: elasticEN("1", "C", 2).with("vertical design", map[string]float64{"q": 1.5}), zero: 1.2, long: 0.36},
		},
		cases: []string{"elastic-1b", "elastic-2d", "vertical-en-1", "six-storeys-design", "eta"},
	},
	"table": {
		all: []example{
			{given: Given{Numbers: map[string]float64{"damping": 0.05}, Columns: map[string][]float64{"T": {0, 0.2, 0.6, 2}, "PSA": {4, 9, 9, 2}}}, zero: 4, ends: true},
			{given: Given{Numbers: map[string]float64{"damping": 0.02}, Columns: map[string][]float64{"T": {0.1, 1}, "PSA": {4, 4}}}, ends: true},
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
			member, ok := examples[s.Basis]
			if !ok || len(member.all) == 0 || len(member.cases) == 0 {
				t.Fatal("the suite has no example or no published case of this standard")
			}
			for _, id := range member.cases {
				if !ids[id] {
					t.Errorf("there is no published case %q", id)
				}
			}
			described(t, s)
			for _, e := range member.all {
				target, err := Build(s.Basis, e.given)
				if err != nil {
					t.Fatal(err)
				}
				sound(t, s, e, target)
				limits(t, e, target)
				damped(t, e, target)
				encoded(t, target)
				refusals(t, s, e.given)
			}
		})
	}
}

// described: every parameter, given or derived, has its words, and the same
// symbol has the same dimension everywhere.
func described(t *testing.T, s Standard) {
	if s.Doc == "" || (s.Damping == "") == (s.Fixed == "") {
		t.Error("the standard has no description, or does not say whether it adjusts to another damping")
	}
	for _, p := range append(s.docs(), s.Derived...) {
		derived := slices.ContainsFunc(s.Derived, func(d ParameterDoc) bool { return d.Symbol == p.Symbol })
		if p.Symbol == "" || p.Doc == "" || (p.Kind == Text) != (len(p.Choices) > 0) && !derived {
			t.Errorf("parameter %q: a symbol, a description and, for a text, choices are needed", p.Symbol)
		}
		for _, other := range Standards {
			for _, q := range append(other.Parameters, other.Derived...) {
				if q.Symbol == p.Symbol && (q.Dim != p.Dim || q.Kind != p.Kind) {
					t.Errorf("%s is another kind of quantity in %s", p.Symbol, other.Basis)
				}
			}
		}
	}
	for key := range s.Gaps {
		symbol, word, _ := strings.Cut(key, ": ")
		in := Given{Texts: map[string]string{symbol: word}}
		if _, err := s.Build(in); !slices.ContainsFunc(Problems(err), func(e *ParameterError) bool { return e.Symbol == symbol && e.Problem == s.Gaps[key] }) {
			t.Errorf("the gap %q is not told: %v", key, err)
		}
	}
}

// sound: positive everywhere, without a gap, and continuous where the standard is.
func sound(t *testing.T, s Standard, e example, target *Target) {
	if target.Basis != s.Basis || !(target.Damping > 0) {
		t.Errorf("basis %q, damping %v", target.Basis, target.Damping)
	}
	from, to := target.Range()
	if math.IsInf(to, 1) == e.ends {
		t.Errorf("the spectrum ends at %v s", to)
	}
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
		if y, z := before.At(b.From), b.At(b.From); (math.Abs(y-z) > 1e-12*y) != b.Step {
			t.Errorf("the spectrum goes from %v to %v at %v s", y, z, b.From)
		}
	}
	if i := slices.IndexFunc(target.Branches, func(b Branch) bool { return b.Name == "plateau" }); i >= 0 {
		plateau := target.Branches[i]
		last := plateau.A0
		for T := plateau.To * 1.001; T < end; T *= 1.05 {
			y, _ := target.PSA(T)
			if y > last || e.falls && y == last {
				t.Errorf("PSA(%v) = %v does not fall", T, y)
			}
			last = y
		}
		for T := 0.0; T < plateau.To && target.Q <= 3.75; T += plateau.To / 50 { // with a larger q S_d falls from 2/3 a_g S
			if y, _ := target.PSA(T); y > plateau.A0*(1+1e-12) {
				t.Errorf("PSA(%v) = %v lies above the plateau %v", T, y, plateau.A0)
			}
		}
	}
	bad := []float64{-0.01, math.NaN(), math.Inf(1)}
	if !math.IsInf(to, 1) {
		bad = append(bad, to*1.0001, to*(1+1e-11))
	}
	if from > 0 {
		bad = append(bad, from*0.999)
	}
	for _, T := range bad {
		if y, err := target.PSA(T); err == nil {
			t.Errorf("PSA(%v) = %v, want an error", T, y)
		}
	}
	known := append(s.Parameters, s.Derived...)
	for _, p := range target.Parameters {
		if p.Doc == "" || !slices.ContainsFunc(known, func(d ParameterDoc) bool { return d.Symbol == p.Symbol }) {
			t.Errorf("parameter %s is not described by the standard", p.Symbol)
		}
	}
	for i, c := range target.Corners {
		p, ok := target.Parameter(c.Symbol)
		if !ok || p.Value != c.T || i > 0 && !(c.T >= target.Corners[i-1].T) {
			t.Errorf("corner %s = %v is not the parameter %v, or stands in the wrong place", c.Symbol, c.T, p.Value)
		}
		if !slices.ContainsFunc(target.Branches, func(b Branch) bool { return math.Abs(b.From-c.T) <= 1e-9*c.T || math.Abs(b.To-c.T) <= 1e-9*c.T }) {
			t.Errorf("no branch meets another at the corner %s = %v", c.Symbol, c.T)
		}
	}
}

// limits: the ordinate at zero period, what the spectrum tends to, and SD.
func limits(t *testing.T, e example, target *Target) {
	if y, err := target.PSA(0); e.zero > 0 && (err != nil || math.Abs(y-e.zero) > 1e-12*e.zero) {
		t.Errorf("PSA(0) = %v, %v, want %v", y, err, e.zero)
	}
	for _, T := range []float64{100, 1e4} {
		if y, err := target.PSA(T); e.long > 0 && (err != nil || math.Abs(y*math.Pow(T, e.power)-e.long) > 1e-12*e.long) {
			t.Errorf("PSA(%v) T^%v = %v, %v, want %v", T, e.power, y*math.Pow(T, e.power), err, e.long)
		}
	}
	y, _ := target.PSA(1)
	if d, err := target.SD(1); err != nil || math.Abs(d*4*math.Pi*math.Pi-y) > 1e-12*y {
		t.Errorf("SD(1) = %v, %v, PSA(1) = %v", d, err, y)
	}
}

// damped: a spectrum at another damping is the one built for it, or refused.
func damped(t *testing.T, e example, target *Target) {
	if same, err := target.AtDamping(target.Damping); err != nil || same != target {
		t.Errorf("the damping it holds for gives %v, %v", same, err)
	}
	std, _ := Lookup(target.Basis)
	for _, z := range []float64{0, 0.02, 0.07, 0.3} {
		if z == target.Damping {
			continue
		}
		other, err := target.AtDamping(z)
		if (err == nil) != e.damps {
			t.Fatalf("%s at %v: %v", target.Spectrum, z, err)
		}
		if err != nil {
			continue
		}
		again, err := std.Build(e.given.with("", map[string]float64{std.Damping: z}))
		if err != nil || other.Damping != z || !reflect.DeepEqual(other, again) {
			t.Errorf("adjusted to %v it is not the one built for it (%v)", z, err)
		}
		y, _ := target.PSA(1)
		w, _ := other.PSA(1)
		if (w > y) != (z < target.Damping) {
			t.Errorf("PSA(1) is %v at %v damping and %v at %v", y, target.Damping, w, z)
		}
	}
	for _, z := range []float64{-0.1, 1, math.NaN()} {
		if _, err := target.AtDamping(z); err == nil {
			t.Errorf("damping %v is accepted", z)
		}
	}
	if back, err := Build(target.Basis, target.Given); err != nil || !reflect.DeepEqual(back, target) {
		t.Errorf("what it was built from gives another spectrum (%v)", err)
	}
}

func encoded(t *testing.T, target *Target) {
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
			less := in.clone()
			delete(less.Numbers, p.Symbol)
			delete(less.Texts, p.Symbol)
			delete(less.Columns, p.Symbol)
			blame(p.Symbol, less)
		}
		switch p.Kind {
		case Number:
			for _, x := range []float64{-1, math.NaN(), math.Inf(1)} {
				wrong := in.clone()
				wrong.Numbers[p.Symbol] = x
				blame(p.Symbol, wrong)
			}
		case Numbers:
			wrong := in.clone()
			if !p.Required && wrong.Columns[p.Symbol] == nil {
				break
			}
			wrong.Columns[p.Symbol][1] = math.NaN()
			blame(p.Symbol, wrong)
			if p.Required {
				wrong.Columns[p.Symbol] = nil
				blame(p.Symbol, wrong)
			}
		case Text:
			wrong := in.clone()
			wrong.Texts[p.Symbol] = "no such choice"
			blame(p.Symbol, wrong)
		}
	}
	wrong := in.clone()
	wrong.Numbers["S_DSx"] = 1
	blame("S_DSx", wrong)
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
