package formula

import (
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// substitute writes the tree with every leaf as the number that is shown.
func substitute(n *expr.Node) string {
	if n.Leaf() && n.Op != expr.Literal && n.Value != nil {
		v, u := *n.Value, n.Value.Unit
		items := make([]string, len(v.SI))
		for i, x := range v.SI {
			text := quantity.Plain(quantity.Rounded(u.From(x), n.Digits))
			items[i] = "(" + strings.TrimSpace(text+" "+strings.Replace(u.Text, "1/s", "Hz", 1)) + ")"
		}
		if v.Shape == quantity.Vector {
			return "[" + strings.Join(items, ", ") + "]"
		}
		return items[0]
	}
	if len(n.Args) == 0 {
		return "(" + print(n) + ")"
	}
	m := *n
	m.Args = make([]*expr.Node, len(n.Args))
	for i, a := range n.Args {
		m.Args[i] = &expr.Node{Op: expr.Name, Text: substitute(a)}
	}
	return print(&m)
}

// reproduced wants the numbers as shown to give the result as shown.
func reproduced(t interface{ Fatalf(string, ...any) }, text string, system quantity.System, shown quantity.Unit, digits int) *expr.Node {
	n, findings := ParseExpr(text, nil)
	if len(findings) > 0 {
		t.Fatalf("%s: %v", text, findings)
	}
	v, findings := Evaluate(n, world{})
	if len(findings) > 0 {
		return nil
	}
	ChooseDigits(n, system, shown, digits)
	DropZeros(n)
	if shown.Scale == 0 || !shown.Dim.Is(v.Dim) {
		if shown = v.Unit; shown.Scale == 0 {
			shown = system.Preferred(v.Dim)
		}
	}
	again, findings := ParseExpr(substitute(n), nil)
	if len(findings) > 0 {
		t.Fatalf("%s as shown: %s: %v", text, substitute(n), findings)
	}
	w, findings := Evaluate(again, world{})
	if len(findings) > 0 {
		t.Fatalf("%s as shown: %s: %v", text, substitute(n), findings)
	}
	for i := range v.SI {
		want, got := quantity.Format(shown.From(v.SI[i]), digits), quantity.Format(shown.From(w.SI[i]), digits)
		if want != got {
			t.Fatalf("%s is shown as %s %s, but its numbers as shown, %s, give %s", text, want, shown.Text, substitute(n), got)
		}
	}
	return n
}

func TestShownNumbersGiveTheShownResult(t *testing.T) {
	for _, text := range []string{
		"V", "V * h_n", "x_d^3 * 1 kN", "x_d - 1.234 m", "1 / (x_d - 1.2345 m)", "F.w * F.h^k / sum(F.w * F.h^k)", "num(x_d, ft)^3",
		"max(x_d, 1.23456 m)", "max(1.23456 m, x_d)", "if(x_d > 1.2345 m, 1, 2)", "if(x_d * q > 4.93 m, q, -q)", "rs.PSA(x_d / 1 m * 1 s) * mass", "m.phi[2][1] * m.T[1]",
		"interp(x_d / 1.234567 m * 1 s, xs, ys)", "if(V < 100 kN and x_d > 1 m, x_d, 2 m)", "exp(20 * x_d / 1 m)", "sin(100 * x_d / 1 m)", "mass * 1 g", "pi * x_d^2",
	} {
		for digits := 3; digits <= 8; digits++ {
			for _, system := range []quantity.System{quantity.SI, quantity.US} {
				n := reproduced(t, text, system, quantity.Unit{}, digits)
				if n == nil {
					t.Fatalf("%s has no value", text)
				}
				n.Walk(func(n *expr.Node) {
					least := quantity.Digits
					if n.Digits != 0 && n.Value.Shape == quantity.Number { // fewer only where these are all there are
						least = min(least, quantity.Exact(n.Value.Unit.From(n.Value.SI[0])))
					}
					if n.Digits != 0 && (n.Digits < least || n.Digits > mostDigits || n.Op == expr.Literal) {
						t.Errorf("%s: %s has %d digits", text, print(n), n.Digits)
					}
				})
			}
		}
	}
}

func TestDigitsChosen(t *testing.T) {
	for _, c := range []struct {
		text string
		unit string
		want map[string]int
	}{
		{"V * h_n", "kN*m", map[string]int{"V": 4, "h_n": 4}},                   // exact with few digits
		{"x_d - 1.234 m", "mm", map[string]int{"x_d": 7}},                       // 0.567 mm are the last digits of x_d
		{"(x_d - 1.234 m) * k", "mm", map[string]int{"x_d": 7, "k": 4}},         // only x_d is longer
		{"x_d - 1.234 m + 0 * x_d", "mm", map[string]int{"x_d": 7}},             // the same value, the same digits
		{"max(1.2347 m, x_d)", "m", map[string]int{"x_d": 5}},                   // 1.235 m would govern, though the result looks the same
		{"if(x_d > 1.2345 m, 1, 2)", "", map[string]int{"x_d": 4}},              // 1.235 m is beyond it too
		{"if(x_d < 1.2347 m, 1, 2)", "", map[string]int{"x_d": 5}},              // 1.235 m is not
		{"if(V < 1 kN, x_d, 2 m)", "m", map[string]int{"x_d": 0, "V": 4}},       // not reached: not substituted
		{"rs.PSA(x_d / 1 m * 1 s)", "g", map[string]int{"x_d": 0, "rs.PSA": 4}}, // substituted as one value
		{"m.T[1] * x_d / 1 s", "m", map[string]int{"m.T": 0, "": 4, "x_d": 5}},  // an item is one value
		{"num(x_d, mm)", "", map[string]int{"x_d": 4}},
	} {
		n, _ := ParseExpr(c.text, nil)
		if _, findings := Evaluate(n, world{}); len(findings) > 0 {
			t.Fatal(c.text, findings)
		}
		ChooseDigits(n, quantity.SI, quantity.MustUnit(c.unit), 4)
		n.Walk(func(n *expr.Node) {
			if want, ok := c.want[n.Text]; ok && n.Op != expr.Literal && (n.Text != "" || n.Op == expr.Item) && n.Digits != want {
				t.Errorf("%s: %s is shown with %d digits, want %d", c.text, print(n), n.Digits, want)
			}
		})
	}
}

func TestDigitsOfACheck(t *testing.T) {
	line, _ := ParseLine("check x_d - 1.234 m <= 0.020 * F.h", nil)
	if _, _, findings := EvaluateCheck(line.Tree, world{}); len(findings) > 0 {
		t.Fatal(findings)
	}
	ChooseDigits(line.Tree, quantity.SI, quantity.MustUnit("mm"), 4)
	if x, h := line.Tree.Args[0].Args[0].Digits, line.Tree.Args[1].Args[1].Digits; x != 7 || h != 4 {
		t.Errorf("digits %d and %d, want 7 and 4", x, h)
	}
}

func TestDigitsOfRandomFormulas(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := anyTree(3, false).Draw(t, "tree")
		reproduced(t, print(n), rapid.SampledFrom([]quantity.System{quantity.SI, quantity.US}).Draw(t, "system"), quantity.Unit{}, rapid.IntRange(3, 7).Draw(t, "digits"))
	})
}
