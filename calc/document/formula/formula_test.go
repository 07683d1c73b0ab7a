package formula

import (
	"encoding/json"
	"math"
	"reflect"
	"testing"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

func TestNormal(t *testing.T) {
	for in, want := range map[string]string{
		"V": "V", "ω": "omega", "Ω_0": "Omega_0", "Δu": "Deltau", "ϕ": "phi", "ς": "sigma", "µ": "mu", "\u2126": "Omega", "Ψ": "Psi", "V₁": "V1", "Ｖ": "V", "ℎ": "h", "φ.Τ": "phi.Tau", "Länge": "Länge", "e\u0301": "é",
	} {
		if got := Normal(in); got != want {
			t.Errorf("%q is %q, want %q", in, got, want)
		}
		if again := Normal(Normal(in)); again != want {
			t.Errorf("%q: the normal form %q is %q again", in, want, again)
		}
	}
}

func TestValidName(t *testing.T) {
	for name, want := range map[string]bool{
		"V": true, "h_n": true, "ω": true, "ω_1": true, "V₁": true, "T2": true, "Länge": true, "a_": true,
		"": false, "_a": false, "2x": false, "x²": false, "xⁿ": false, "а": false, "m.T": false, "a b": false, "a-b": false, "漢": false, "ά": false, "\xff": false, "²": false, "₁a": false,
	} {
		if got := ValidName(name); got != want {
			t.Errorf("%q: %v, want %v", name, got, want)
		}
	}
}

func TestReserved(t *testing.T) {
	for _, name := range []string{"abs", "sqrt", "exp", "log", "log10", "sin", "cos", "tan", "asin", "acos", "atan", "sum", "max", "min", "floor", "ceil", "round", "cumsum", "len", "num", "if", "interp", "pi", "as", "within", "and", "or", "not"} {
		if !Reserved(name) {
			t.Errorf("%s is not reserved", name)
		}
	}
	for _, name := range []string{"V", "check", "m", "kN", "Max", ""} {
		if Reserved(name) {
			t.Errorf("%s is reserved", name)
		}
	}
	if !Reserved(Normal("π")) {
		t.Error("π can be set")
	}
}

func TestLineName(t *testing.T) {
	for line, want := range map[string]string{
		"V = 3 kN": "V", "  ω_1=2 # a = b": "omega_1", "V = foo @": "V", "check a == b": "", "check = 3": "check", "y == 3": "", "y <= 3": "", "": "", "# V = 3": "", "max = 3": "", "m.T = 3": "", "a b = 3": "", "V": "", "= 3": "",
	} {
		if got := LineName(line); got != want {
			t.Errorf("%q sets %q, want %q", line, got, want)
		}
	}
}

func TestDeps(t *testing.T) {
	text := "V * rs.PSA(m.T[1], ξ) + max(V, 2 * pi * k)"
	n, findings := ParseExpr(text, nil)
	if len(findings) > 0 {
		t.Fatal(findings)
	}
	type dep struct {
		path   string
		method bool
		text   string
	}
	var got []dep
	for _, d := range Deps(n) {
		got = append(got, dep{d.Path, d.Method, text[d.From:d.To]})
	}
	want := []dep{{"V", false, "V"}, {"rs.PSA", true, "rs.PSA(m.T[1], ξ)"}, {"m.T", false, "m.T"}, {"xi", false, "ξ"}, {"V", false, "V"}, {"k", false, "k"}}
	if !reflect.DeepEqual(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
	if Deps(nil) != nil {
		t.Error("no tree depends on nothing")
	}
}

func TestNamesAreAskedNormalised(t *testing.T) {
	var asked []string
	ParseExpr("2 m/s*g", func(name string) bool { asked = append(asked, name); return false })
	if !reflect.DeepEqual(asked, []string{"m", "s", "g"}) {
		t.Errorf("asked for %v", asked)
	}
}

// A tree can be evaluated again, in another scope, and after a round trip
// through its encoding, which keeps no trace of what is not written in it.
func TestTreesAreEvaluatedAnew(t *testing.T) {
	n, _ := ParseExpr("if(V > 100 kN, V, h_n * 1 kN / 1 m) + 2 kN", nil)
	first, findings := Evaluate(n, world{})
	if len(findings) > 0 {
		t.Fatal(findings)
	}
	ChooseDigits(n, quantity.SI, quantity.Unit{}, 4)
	data, err := json.Marshal(n)
	if err != nil {
		t.Fatal(err)
	}
	var back expr.Node
	if err := json.Unmarshal(data, &back); err != nil {
		t.Fatal(err)
	}
	if !reflect.DeepEqual(&back, n) {
		t.Error("the tree does not round-trip")
	}
	back.Walk(func(n *expr.Node) { n.Value = nil })
	again, findings := Evaluate(&back, smaller{})
	if len(findings) > 0 || again.SI[0] != 17200 {
		t.Errorf("%v, %v, want 17.2 kN", again, findings)
	}
	if branch := back.Args[0]; !reflect.DeepEqual(branch.Taken, []int{2}) || branch.Args[1].Value != nil || branch.Args[1].Digits != 0 {
		t.Errorf("the branch not taken holds %v", branch.Args[1])
	}
	if third, _ := Evaluate(&back, world{}); !reflect.DeepEqual(first, third) {
		t.Errorf("first %v, then %v", first, third)
	}
}

// smaller is the world with a V of 50 kN.
type smaller struct{ world }

func (s smaller) Value(path string) (quantity.Value, string, error) {
	if path == "V" {
		return scalar(50, "kN"), path, nil
	}
	return s.world.Value(path)
}

func TestScopeValuesAreNotTouched(t *testing.T) {
	before := append([]float64(nil), values["pm"].SI...)
	for _, text := range []string{"-pm", "if(pm > 0, sqrt(pm), pm)", "cumsum(pm)", "max(pm, 0)", "pm * 0", "pm"} {
		n, _ := ParseExpr(text, nil)
		Evaluate(n, world{})
		ChooseDigits(n, quantity.SI, quantity.Unit{}, 4)
	}
	if !reflect.DeepEqual(before, values["pm"].SI) {
		t.Errorf("pm is %v now", values["pm"].SI)
	}
}

func TestNoNumberOutOfAScopeThatHasNone(t *testing.T) {
	n, _ := ParseExpr("bad * 2", nil)
	if _, findings := Evaluate(n, infinite{}); len(findings) != 1 || findings[0].From != 0 || findings[0].To != 3 || findings[0].Code != "domain" {
		t.Errorf("%+v", findings)
	}
}

type infinite struct{ world }

func (infinite) Value(string) (quantity.Value, string, error) {
	return quantity.Pure(math.Inf(1)), "bad", nil
}

func BenchmarkLine(b *testing.B) {
	for b.Loop() {
		line, _ := ParseLine("F = F.w * F.h^k / sum(F.w * F.h^k) * V as kN # [ASCE/SEI 7-22 Eq. 12.8-12] storey forces", nil)
		Evaluate(line.Tree, world{})
		ChooseDigits(line.Tree, quantity.SI, line.As, 4)
	}
}

// TestCheckText: a check is the same however it is spaced, and its text has one form.
func TestCheckText(t *testing.T) {
	read := func(text string) Line {
		line, findings := ParseLine("check "+text, nil)
		if len(findings) > 0 {
			t.Fatalf("%s: %v", text, findings)
		}
		return line
	}
	for _, pair := range [][2]string{{"a <= 4", "a<=4"}, {"a  <=4 ", "a <= 4"}, {"a+b > c*2", "a + b>c * 2"}, {"a == b within 2 %", "a==b within 2 %"}} {
		x, y := read(pair[0]), read(pair[1])
		if Key(x.Tree) != Key(y.Tree) {
			t.Errorf("%q and %q are two checks", pair[0], pair[1])
		}
	}
	for _, pair := range [][2]string{{"a <= 4", "a < 4"}, {"a <= 4", "a <= 4.0 m"}, {"a - (b - c) < 1", "a - b - c < 1"}, {"3 kN*m < a", "3 kN * m < a"}, {"f.x < 1", "fx < 1"}} {
		if Key(read(pair[0]).Tree) == Key(read(pair[1]).Tree) {
			t.Errorf("%q and %q are one check", pair[0], pair[1])
		}
	}
	for text, want := range map[string]string{"a<=4": "a <= 4", " a   >  b": "a > b", "a==b within 2 %": "a == b within 2 %"} {
		if got := read(text).Text; got != want {
			t.Errorf("%q: text %q, want %q", text, got, want)
		}
	}
}
