package formula

import (
	"reflect"
	"strings"
	"testing"
	"unicode/utf8"

	"gonum.org/v1/gonum/unit"
	"pgregory.net/rapid"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// anyTree draws trees; logic adds conditions, calls and items.
func anyTree(depth int, logic bool) *rapid.Generator[*expr.Node] {
	return rapid.Custom(func(t *rapid.T) *expr.Node {
		leaf := func() *expr.Node {
			if rapid.Bool().Draw(t, "name") {
				return &expr.Node{Op: expr.Name, Text: rapid.SampledFrom([]string{"V", "h_n", "k", "n", "x_d", "mass", "pi"}).Draw(t, "name")}
			}
			return &expr.Node{Op: expr.Literal,
				Text: rapid.SampledFrom([]string{"1", "2.5", "0.02", "1e3", ".75", "310"}).Draw(t, "number"),
				Unit: rapid.SampledFrom([]string{"", "", "", "kN", "m", "kip/in", "%", "t", "m/s^2"}).Draw(t, "unit")}
		}
		if depth == 0 {
			return leaf()
		}
		sub := func() *expr.Node { return anyTree(depth-1, logic).Draw(t, "sub") }
		kinds := []string{"leaf", "binary", "binary", "binary", "neg", "call", "max"}
		if logic {
			kinds = append(kinds, "if", "list", "item", "method", "num")
		}
		switch rapid.SampledFrom(kinds).Draw(t, "kind") {
		case "binary":
			op := rapid.SampledFrom([]expr.Op{expr.Add, expr.Sub, expr.Mul, expr.Div, expr.Pow}).Draw(t, "op")
			return &expr.Node{Op: op, Args: []*expr.Node{sub(), sub()}}
		case "neg":
			return &expr.Node{Op: expr.Neg, Args: []*expr.Node{sub()}}
		case "call":
			return &expr.Node{Op: expr.Call, Text: rapid.SampledFrom([]string{"sqrt", "abs", "sin"}).Draw(t, "function"), Args: []*expr.Node{sub()}}
		case "max":
			return &expr.Node{Op: expr.Call, Text: "max", Args: []*expr.Node{sub(), sub()}}
		case "if":
			c := &expr.Node{Op: rapid.SampledFrom([]expr.Op{expr.Less, expr.AtMost, expr.More, expr.AtLeast}).Draw(t, "relation"), Args: []*expr.Node{sub(), sub()}}
			if rapid.Bool().Draw(t, "not") {
				c = &expr.Node{Op: expr.Not, Args: []*expr.Node{c}}
			}
			return &expr.Node{Op: expr.Call, Text: "if", Args: []*expr.Node{c, sub(), sub()}}
		case "list":
			return &expr.Node{Op: expr.List, Args: []*expr.Node{sub(), sub()}}
		case "item":
			return &expr.Node{Op: expr.Item, Args: []*expr.Node{{Op: expr.Name, Text: "m.T"}, sub()}}
		case "method":
			return &expr.Node{Op: expr.Call, Text: "rs.PSA", Args: []*expr.Node{sub(), sub()}}
		case "num":
			return &expr.Node{Op: expr.Call, Text: "num", Unit: "kN*m", Args: []*expr.Node{sub()}}
		}
		return leaf()
	})
}

// bare is a tree without offsets and values.
func bare(n *expr.Node) *expr.Node {
	m := &expr.Node{Op: n.Op, Text: n.Text, Unit: n.Unit}
	for _, a := range n.Args {
		m.Args = append(m.Args, bare(a))
	}
	return m
}

func TestWrittenTreesReadBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := anyTree(4, true).Draw(t, "tree")
		got, findings := ParseExpr(print(n), nil)
		if len(findings) > 0 {
			t.Fatalf("%s: %v", print(n), findings)
		}
		if !reflect.DeepEqual(bare(got), bare(n)) {
			t.Fatalf("%s reads back as %s", print(n), print(got))
		}
	})
}

// Dimensions by another hand: gonum's unit package over the same trees.
func TestDimensionsAgainstAnotherPackage(t *testing.T) {
	dims := func(d quantity.Dim) unit.Dimensions {
		return unit.Dimensions{unit.LengthDim: int(d[0]), unit.MassDim: int(d[1]), unit.TimeDim: int(d[2])}
	}
	var oracle func(n *expr.Node) (*unit.Unit, bool)
	oracle = func(n *expr.Node) (*unit.Unit, bool) {
		switch n.Op {
		case expr.Literal, expr.Name:
			return unit.New(n.Value.SI[0], dims(n.Value.Dim)), true
		case expr.Neg:
			return oracle(n.Args[0])
		case expr.Add, expr.Sub, expr.Mul, expr.Div:
			a, ok := oracle(n.Args[0])
			if !ok {
				return nil, false
			}
			b, ok := oracle(n.Args[1])
			if !ok {
				return nil, false
			}
			switch n.Op {
			case expr.Mul:
				return a.Mul(b), true
			case expr.Div:
				return a.Div(b), true
			}
			return a, unit.DimensionsMatch(a, b)
		}
		return nil, false
	}
	compared, refused := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		n := anyTree(3, false).Draw(t, "tree")
		known := true
		n.Walk(func(n *expr.Node) { known = known && n.Op != expr.Call && n.Op != expr.Pow })
		if !known {
			return
		}
		v, findings := Evaluate(n, world{})
		for _, i := range findings {
			if i.Code != "dimension" {
				return
			}
		}
		n.Walk(func(n *expr.Node) { // what a fault left without a value
			if n.Value == nil && len(n.Args) == 0 {
				Evaluate(n, world{})
			}
		})
		want, ok := oracle(n)
		if ok != (len(findings) == 0) {
			t.Fatalf("%s: the oracle says %v, we say %v", print(n), ok, findings)
		}
		if !ok {
			refused++
			return
		}
		compared++
		if !unit.DimensionsMatch(want, unit.New(1, dims(v.Dim))) {
			t.Fatalf("%s: dimension %v, the oracle has %v", print(n), v.Dim, want.Dimensions())
		}
	})
	if compared == 0 || refused == 0 {
		t.Errorf("%d compared, %d refused: the drawn formulas prove nothing", compared, refused)
	}
}

func TestEvaluationIsFiniteOrAnIssue(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := anyTree(4, true).Draw(t, "tree")
		v, findings := Evaluate(n, world{})
		if len(findings) == 0 && !v.Finite() {
			t.Fatalf("%s = %v", print(n), v.SI)
		}
		n.Walk(func(n *expr.Node) {
			if n.Value != nil && !n.Value.Finite() {
				t.Fatalf("%s = %v", print(n), n.Value.SI)
			}
		})
	})
}

func TestDeepAndLongLines(t *testing.T) {
	const many = 50000
	for _, part := range []string{"(", "-", "1 + ", "2 ^ ", "[", "a[", "if(", "if(1 < 2, 1, ", "if(not ", "max(1, ", "num(", "rs.PSA(", "1 < 2 and ", "a * (", "3 foo + "} {
		_, findings := ParseLine("y = "+strings.Repeat(part, many), nil)
		if len(findings) == 0 || len(findings) > most {
			t.Errorf("%q again and again: %d findings", part, len(findings))
		}
	}
	for _, text := range []string{
		strings.Repeat("(", 150) + "1" + strings.Repeat(")", 150),
		"sum([" + strings.Repeat("1, ", many) + "1])",
		"1" + strings.Repeat(" + 1", 1000),
		strings.Repeat("-", 150) + "1",
		strings.Repeat("x", many) + " * 0",
	} {
		n, findings := ParseExpr(text, nil)
		if len(findings) > 0 {
			t.Errorf("%.40s...: %v", text, findings)
			continue
		}
		if !strings.Contains(text, "x") {
			if _, findings := Evaluate(n, nil); len(findings) > 0 {
				t.Errorf("%.40s...: %v", text, findings)
			}
		}
	}
}

func FuzzParseLine(f *testing.F) {
	for _, s := range []string{"h_n = 15.2 m # [x] y", "check a == b within 2 %", "y = if(q > 2, q, -q) as kN", "ω = 2cm/s²*t", "y = 1,5", "y = num(h_n, kN*m)^-.5e3", "check а <= 3 foo", "y = m.phi[2][1]", "y = \xff\xfe", "= [", " =", "y = 2 m ^", "y = V as 1/", "y = e\u0301 + ﬁ", "x\u0345 = 1", "ω\u0301 = 3"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		line, findings := ParseLine(text, set)
		for _, i := range findings {
			if i.From < 0 || i.From > i.To || i.To > len(text) || i.Summary == "" || i.Code == "" {
				t.Fatalf("%q: finding %+v", text, i)
			}
			if utf8.ValidString(text) && (!utf8.ValidString(text[:i.From]) || !utf8.ValidString(text[:i.To])) {
				t.Fatalf("%q: finding within a character: %+v", text, i)
			}
		}
		line.Tree.Walk(func(n *expr.Node) {
			if n.From < 0 || n.From >= n.To || n.To > len(text) {
				t.Fatalf("%q: node %s at %d-%d", text, print(n), n.From, n.To)
			}
		})
		for _, i := range findings {
			if !i.Warning {
				return
			}
		}
		if line.Check {
			rows, _, findings := EvaluateCheck(line.Tree, world{})
			if len(rows) == 0 && len(findings) == 0 {
				t.Fatalf("%q: neither rows nor findings", text)
			}
			return
		}
		if name := LineName(text); name != line.Name {
			t.Fatalf("%q sets %q, at a glance %q", text, line.Name, name)
		}
		if line.Tree == nil {
			return
		}
		if v, findings := Evaluate(line.Tree, world{}); len(findings) == 0 {
			if !v.Finite() {
				t.Fatalf("%q = %v", text, v.SI)
			}
			ChooseDigits(line.Tree, quantity.SI, line.As, 4)
			DropZeros(line.Tree)
		}
		again, findings := ParseExpr(print(line.Tree), set)
		if len(findings) > 0 || !reflect.DeepEqual(bare(again), bare(line.Tree)) {
			t.Fatalf("%q: written again as %q: %v", text, print(line.Tree), findings)
		}
	})
}

func FuzzUnit(f *testing.F) {
	for _, s := range quantity.Symbols() {
		f.Add(s)
	}
	for _, s := range []string{"kip*s^2/in", "m⁻²·kN", "1/s", "m^0.9", "kN * m", "m^", "*", "m²³", "km^12*km^12", "%/%", "m^-1^2"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		u, err := quantity.ParseUnit(text)
		if err != nil {
			e := err.(*quantity.UnitError)
			if e.Offset < 0 || e.Offset > len(text) {
				t.Fatalf("%q: offset %d", text, e.Offset)
			}
			return
		}
		for _, again := range []string{u.Text, u.Pretty()} {
			w, err := quantity.ParseUnit(again)
			if err != nil || w.Scale != u.Scale || !w.Dim.Is(u.Dim) {
				t.Fatalf("%q is %v, written as %q it is %v, %v", text, u, again, w, err)
			}
		}
	})
}
