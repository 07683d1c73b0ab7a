package standard

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func codes(t *Target) string {
	var out []string
	for _, w := range t.Warnings {
		out = append(out, w.Code)
	}
	return strings.Join(out, " ")
}

func states(t *Target) string {
	var out []string
	for _, c := range t.Conditions {
		out = append(out, map[string]string{applies: "+", notHere: "-", notEvaluated: "?", claimedState: "!"}[c.State])
	}
	return strings.Join(out, "")
}

// TestWays: 11.4.8 is never passed in silence, and what is claimed is kept.
func TestWays(t *testing.T) {
	mapped := func(ss, s1 float64, texts ...string) Given {
		return numbers(map[string]float64{"S_S": ss, "S_1": s1, "T_L": 8}, texts...)
	}
	direct := func(texts ...string) Given {
		return numbers(map[string]float64{"S_DS": 0.8, "S_D1": 0.5, "T_L": 8}, texts...)
	}
	for name, c := range map[string]struct {
		in        Given
		codes     string
		states    string // class F, E with S_S, D or E with S_1, isolation, claims
		exception int
	}{
		"C":                {mapped(1.5, 0.6, "site", "C"), "", "---?", 0},
		"D low":            {mapped(0.5, 0.19, "site", "D"), "", "---?", 0},
		"D":                {mapped(1, 0.2, "site", "D"), "site-specific", "--+?", 0},
		"default":          {mapped(1, 0.4, "site", "default"), "site-specific", "--+?", 0},
		"D, exception":     {mapped(1, 0.4, "site", "D", "site_specific", "exception"), "site-exception", "--+?!", 2},
		"D, supplement":    {mapped(1.5, 0.4, "site", "D", "site_specific", "supplement 3"), "site-exception", "--+?!", 0},
		"E":                {mapped(0.9, 0.3, "site", "E"), "site-specific", "--+?", 0},
		"E, exception 3":   {mapped(0.9, 0.3, "site", "E", "site_specific", "exception"), "site-exception", "--+?!", 3},
		"E, exception 1":   {mapped(1.1, 0.15, "site", "E", "site_specific", "exception"), "site-exception", "-+-?!", 1},
		"E, exceptions":    {mapped(1.1, 0.4, "site", "E", "site_specific", "exception"), "site-exception site-exception", "-++?!!", 3},
		"F, study":         {direct("site", "F", "site_specific", "study"), "", "+--?!", 0},
		"direct":           {direct(), "site-specific", "????", 0},
		"direct, C":        {direct("site", "C"), "", "---?", 0},
		"direct, D no S_1": {direct("site", "D"), "site-specific", "--??", 0},
		"direct, D study":  {direct("site", "D", "site_specific", "study").with("", map[string]float64{"S_1": 0.6}), "", "--+?!", 0},
		"direct, D":        {direct("site", "D").with("", map[string]float64{"S_1": 0.6}), "site-specific site-coefficient", "--+?", 0},
	} {
		target, err := Build("ASCE/SEI 7-16", c.in)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if codes(target) != c.codes || states(target) != c.states || target.Exception != c.exception {
			t.Errorf("%s: warnings %q, conditions %q, exception %d; want %q, %q, %d", name, codes(target), states(target), target.Exception, c.codes, c.states, c.exception)
		}
	}
}

func TestRefused716(t *testing.T) {
	for name, c := range map[string]struct {
		in              Given
		symbol, problem string
	}{
		"F":                  {numbers(map[string]float64{"S_S": 1, "S_1": 0.4, "T_L": 8}, "site", "F"), "site", "site class F needs"},
		"E, no value":        {numbers(map[string]float64{"S_S": 1, "S_1": 0.1, "T_L": 8}, "site", "E"), "site", "has no value for site class E"},
		"study, no values":   {numbers(map[string]float64{"S_S": 1, "S_1": 0.4, "T_L": 8}, "site", "D", "site_specific", "study"), "site_specific", "are missing"},
		"nothing to claim":   {numbers(map[string]float64{"S_S": 1, "S_1": 0.4, "T_L": 8}, "site", "C", "site_specific", "exception"), "site_specific", "no exception to claim"},
		"supplement, E":      {numbers(map[string]float64{"S_S": 0.5, "S_1": 0.4, "T_L": 8}, "site", "E", "site_specific", "supplement 3"), "site_specific", "is for site class D"},
		"supplement, direct": {numbers(map[string]float64{"S_DS": 1, "S_D1": 0.6, "S_1": 0.4, "T_L": 8}, "site", "D", "site_specific", "supplement 3"), "site_specific", "is given here directly"},
		"vertical, no site":  {numbers(map[string]float64{"S_DS": 1, "S_D1": 0.6, "T_L": 8}, "spectrum", "vertical"), "site", "vertical coefficient"},
		"zero":               {numbers(map[string]float64{"S_S": 1, "S_1": 0, "T_L": 8}, "site", "C"), "S_1", "greater than zero"},
		"coefficient":        {numbers(map[string]float64{"S_DS": 1, "S_D1": 0.6, "F_v": 2, "T_L": 8}, "site", "C"), "F_v", "has no use"},
		"T_L":                {numbers(map[string]float64{"S_S": 0.3, "S_1": 0.5, "T_L": 0.4}, "site", "C"), "T_L", "lies below T_S"},
	} {
		_, err := Build("ASCE/SEI 7-16", c.in)
		if !slices.ContainsFunc(Problems(err), func(e *ParameterError) bool {
			return e.Symbol == c.symbol && strings.Contains(e.Problem, c.problem)
		}) {
			t.Errorf("%s: error %v, want one at %s that says %q", name, err, c.symbol, c.problem)
		}
	}
}

// TestGivenCoefficient: a coefficient given stands, and the table's is named.
func TestGivenCoefficient(t *testing.T) {
	in := numbers(map[string]float64{"S_S": 0.552, "S_1": 0.243, "F_a": 1.2, "T_L": 4}, "site", "C")
	target, err := Build("ASCE/SEI 7-16", in)
	if err != nil {
		t.Fatal(err)
	}
	p, _ := target.Parameter("F_a")
	if p.Value != 1.2 || !p.Given || !strings.Contains(p.Doc, "Table 11.4-1 has 1.279") {
		t.Errorf("%+v", p)
	}
	if m, _ := target.Parameter("S_MS"); math.Abs(m.Value-1.2*0.552) > 1e-15 {
		t.Errorf("S_MS = %v", m.Value)
	}
	short, err := Build("ASCE/SEI 7-16", numbers(map[string]float64{"S_S": 0.2, "S_1": 0.19, "F_v": 1.6, "T_L": 8}, "site", "C"))
	if err != nil || codes(short) != "short-below-long" {
		t.Errorf("S_MS below S_M1: %v, %v", codes(short), err)
	}
	class, err := Build("ASCE/SEI 7-16", numbers(map[string]float64{"S_DS": 1, "S_D1": 0.6, "T_L": 8}, "site", "C", "risk", "IV"))
	if err != nil || codes(class) != "design-category" || !strings.Contains(class.Warnings[0].Text, "would be F") {
		t.Errorf("category without S_1: %v, %v", class.Warnings, err)
	}
	low, err := Build("ASCE/SEI 7-16", numbers(map[string]float64{"S_S": 0.15, "S_1": 0.04, "T_L": 8}, "site", "D", "risk", "IV"))
	if p, _ := low.Parameter("category"); err != nil || p.Text != "A" {
		t.Errorf("S_S 0.15 and S_1 0.04 give category %q, %v", p.Text, err)
	}
}

// TestVertical716: the vertical spectrum is the larger of its own formula and
// half of the horizontal one, everywhere.
func TestVertical716(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		sms := rapid.Float64Range(0.1, 3).Draw(t, "S_MS")
		sm1 := rapid.Float64Range(0.05, 2).Draw(t, "S_M1")
		tl := max(6, 1.001*sm1/sms)
		site := rapid.SampledFrom([]string{"B", "C", "D"}).Draw(t, "site")
		T := rapid.Float64Range(0, 2).Draw(t, "T")
		build := func(word string) *Target {
			target, err := Build("ASCE/SEI 7-16", numbers(map[string]float64{"S_MS": sms, "S_M1": sm1, "S_1": 0.1, "T_L": tl}, "site", site, "spectrum", word))
			if err != nil {
				t.Fatal(err)
			}
			return target
		}
		vertical, horizontal := build("MCE_R vertical"), build("MCE_R")
		cv, _ := vertical.Parameter("C_v")
		own := cv.Value * sms * g
		switch {
		case T <= 0.025:
			own *= 0.3
		case T <= 0.05:
			own *= 20*(T-0.025) + 0.3
		case T <= 0.15:
			own *= 0.8
		default:
			own *= 0.8 * math.Pow(0.15/T, 0.75)
		}
		half, _ := horizontal.PSA(T)
		want := max(own, half/2)
		got, err := vertical.PSA(T)
		if err != nil || math.Abs(got-want) > 1e-9*want {
			t.Fatalf("at %v s %v, %v, want %v", T, got, err, want)
		}
		if d, _ := build("vertical").PSA(T); math.Abs(1.5*d-got) > 1e-9*got {
			t.Fatalf("design %v is not 2/3 of %v", d, got)
		}
		for i, b := range vertical.Branches[1:] {
			if y, z := vertical.Branches[i].At(b.From), b.At(b.From); math.Abs(y-z) > 1e-9*y {
				t.Fatalf("a jump from %v to %v at %v s", y, z, b.From)
			}
		}
	})
}
