package equation_test

import (
	"encoding/xml"
	"flag"
	"io"
	"os"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/expr"
	"quoin/calc/quantity"
	"quoin/render/equation"
)

var (
	m  = quantity.MustUnit("m")
	s  = quantity.MustUnit("s")
	kN = quantity.MustUnit("kN")
)

// Properties are drawn from one seed, so that a run can be repeated.
func TestMain(m *testing.M) {
	flag.Parse()
	if f := flag.Lookup("rapid.seed"); f.Value.String() == f.DefValue {
		flag.Set("rapid.seed", "1")
	}
	os.Exit(m.Run())
}

func lit(text, unit string) *expr.Node { return &expr.Node{Op: expr.Literal, Text: text, Unit: unit} }

func nm(text string, v ...quantity.Value) *expr.Node {
	n := &expr.Node{Op: expr.Name, Text: text}
	if len(v) > 0 {
		n.Value = &v[0]
	}
	return n
}

func op(o expr.Op, args ...*expr.Node) *expr.Node { return &expr.Node{Op: o, Args: args} }

func call(name string, args ...*expr.Node) *expr.Node {
	return &expr.Node{Op: expr.Call, Text: name, Args: args}
}

func taken(n *expr.Node, which ...int) *expr.Node { n.Taken = which; return n }

func num(x *expr.Node, unit string) *expr.Node {
	n := call("num", x)
	n.Unit = unit
	return n
}

// TestLead: a symbol that is not wider than the lead takes all of it.
func TestLead(t *testing.T) {
	tree := op(expr.Add, nm("a"), nm("b"))
	for _, symbol := range []string{"V", "C_s"} {
		if set := (equation.Setter{Lead: 3}).Equation(nm(symbol), tree); !strings.Contains(set.XML, `<mpadded width="3.00em">`) || set.Text != symbol+" = a + b" {
			t.Errorf("%s: %s", symbol, set.XML)
		}
	}
	if set := (equation.Setter{Lead: 3}).Equation(nm("mass_of_the_roof"), tree); strings.Contains(set.XML, "mpadded") {
		t.Errorf("a wide symbol is squeezed: %s", set.XML)
	}
}

func TestPlainText(t *testing.T) {
	h := nm("h_n", quantity.Scalar(15.24, m))
	h.Digits = 3
	T1 := op(expr.Item, nm("m.T"), lit("1", ""))
	T1.Value = &quantity.Value{Dim: quantity.Time, SI: []float64{0.642}, Unit: s}
	V := nm("V", quantity.Scalar(-1234500, kN))
	w := nm("w", quantity.List([]float64{1000, 2000, 3000}, kN, nil))
	a, b, c := nm("a"), nm("b"), nm("c")
	for _, tt := range []struct {
		tree             *expr.Node
		symbols, numbers string
	}{
		{op(expr.Mul, lit("0.0466", ""), op(expr.Pow, num(h, "m"), lit("0.9", ""))), "0.0466 × (h_n/m)^0.9", "0.0466 × 15.2^0.9"},
		{T1, "m.T[1]", "0.6420 s"},
		{op(expr.Sub, a, op(expr.Sub, b, c)), "a − (b − c)", "a − (b − c)"},
		{op(expr.Sub, op(expr.Sub, a, b), c), "a − b − c", "a − b − c"},
		{op(expr.Div, a, op(expr.Mul, b, c)), "a/(b × c)", "a/(b × c)"},
		{op(expr.Mul, op(expr.Add, a, b), c), "(a + b) × c", "(a + b) × c"},
		{op(expr.Neg, op(expr.Pow, a, lit("2", ""))), "−a^2", "−a^2"},
		{op(expr.Pow, op(expr.Neg, a), lit("2", "")), "(−a)^2", "(−a)^2"},
		{op(expr.Add, a, V), "a + V", "a + (−1234 kN)"},
		{op(expr.Pow, V, lit("2", "")), "V^2", "(−1234 kN)^2"},
		{op(expr.Pow, h, lit("2", "")), "h_n^2", "(15.2 m)^2"},
		{num(h, "cm"), "h_n/cm", "1524"},
		{nm("P", quantity.Value{Dim: quantity.Force, SI: []float64{5000}}), "P", "5.000 kN"},
		{op(expr.Pow, op(expr.Pow, a, b), c), "(a^b)^c", "(a^b)^c"},
		{call("sum", w), "sum(w)", "sum([1.000; 2.000; 3.000] kN)"},
		{taken(call("min", a, b), 2), "min(a, b [governs])", "min(a, b [governs])"},
		{taken(call("max", w), 3), "max(w)", "max([1.000; 2.000; 3.000 [governs]] kN)"},
		{taken(call("min", a, b), 1, 2, 1), "min(a [items 1, 3], b [items 2])", "min(a [items 1, 3], b [items 2])"},
		{taken(call("if", op(expr.AtMost, T1, lit("0.5", "s")), a, b), 2), "{a if\u00a0m.T[1] ≤ 0.5 s; b otherwise [taken]}", "{a if\u00a00.6420 s ≤ 0.5 s; b otherwise [taken]}"},
		{taken(call("if", op(expr.Less, a, b), a, taken(call("if", op(expr.Less, b, c), b, c), 1)), 2), "{a if\u00a0a < b; b if\u00a0b < c [taken]; c otherwise}", "{a if\u00a0a < b; b if\u00a0b < c [taken]; c otherwise}"},
		{op(expr.Within, op(expr.Equal, a, b), lit("2", "%")), "a = b within 2 %", "a = b within 2 %"},
		{call("log", a), "ln(a)", "ln(a)"},
		{call("abs", op(expr.Neg, a)), "|−a|", "|−a|"},
		{lit("2.5e-7", "m"), "2.5×10^−7 m", "2.5×10^−7 m"},
	} {
		if got := (equation.Setter{}).Symbols(tt.tree).Text; got != tt.symbols {
			t.Errorf("symbols: got %q, want %q", got, tt.symbols)
		}
		if got := (equation.Setter{System: quantity.SI}).Numbers(tt.tree).Text; got != tt.numbers {
			t.Errorf("numbers: got %q, want %q", got, tt.numbers)
		}
	}
}

func TestMarkup(t *testing.T) {
	T := nm("T")
	for _, tt := range []struct{ got, want string }{
		{equation.Name("C_s"), `<msub><mi>C</mi><mrow><mi mathvariant="normal">s</mi></mrow></msub>`},
		{equation.Name("S_DS"), `<msub><mi>S</mi><mrow><mtext>DS</mtext></mrow></msub>`},
		{equation.Name("omega_1"), `<msub><mi>ω</mi><mrow><mn>1</mn></mrow></msub>`},
		{equation.Name("T1"), `<msub><mi>T</mi><mrow><mn>1</mn></mrow></msub>`},
		{equation.Name("elf.C_s"), `<msub><mi>C</mi><mrow><mi mathvariant="normal">s</mi><mo>,</mo><mtext>elf</mtext></mrow></msub>`},
		{equation.Name("frame.weight"), `<msub><mi>weight</mi><mrow><mtext>frame</mtext></mrow></msub>`},
		{equation.Name("base_shear"), "<mi>base\u00a0shear</mi>"},
		{equation.Name("Delta_a"), `<msub><mi mathvariant="normal">Δ</mi><mrow><mi mathvariant="normal">a</mi></mrow></msub>`},
		{equation.Symbols(op(expr.Mul, nm("C_s"), nm("W"))), `<mo lspace="0" rspace="0.1667em">&#x2062;</mo><mi>W</mi>`},
		{equation.Symbols(op(expr.Mul, lit("2", ""), lit("3", ""))), `<mn>2</mn><mo>×</mo><mn>3</mn>`},
		{equation.Symbols(op(expr.Mul, nm("mass"), nm("a"))), `<mi>mass</mi><mo>×</mo><mi>a</mi>`},
		{equation.Symbols(op(expr.Div, T, nm("R"))), `<mfrac><mrow><mi>T</mi></mrow><mrow><mi>R</mi></mrow></mfrac>`},
		// Fractions inside a fraction or a power keep their size: T/R below W, in
		// parentheses where more stands beside it, and in full where they are long.
		{equation.Symbols(op(expr.Div, nm("W"), op(expr.Div, T, nm("R")))), `<mfrac><mrow><mi>W</mi></mrow><mrow><mrow><mi>T</mi><mo stretchy="false" lspace="0" rspace="0">/</mo><mi>R</mi></mrow></mrow></mfrac>`},
		{equation.Symbols(op(expr.Div, nm("W"), op(expr.Mul, T, op(expr.Div, T, nm("R"))))), `(</mo><mrow><mi>T</mi><mo stretchy="false" lspace="0" rspace="0">/</mo><mi>R</mi></mrow>`},
		{equation.Symbols(op(expr.Div, nm("W"), op(expr.Div, nm("base_shear"), nm("total_weight")))), `<mfrac displaystyle="true">`},
		{equation.Symbols(op(expr.Pow, T, op(expr.Div, lit("2", ""), lit("3", "")))), `<mrow><mrow><mn>2</mn><mo stretchy="false" lspace="0" rspace="0">/</mo><mn>3</mn></mrow></mrow></msup>`},
		{equation.Symbols(op(expr.Pow, nm("h_n"), lit("0.9", ""))), `<msubsup><mi>h</mi><mrow><mi mathvariant="normal">n</mi></mrow><mrow><mn>0.9</mn></mrow></msubsup>`},
		{equation.Symbols(call("sqrt", T)), `<msqrt><mrow><mi>T</mi></mrow></msqrt>`},
		{equation.Symbols(taken(call("min", T, nm("R")), 1)), `<mrow class="governs"><mi>T</mi></mrow>`},
		{equation.Symbols(op(expr.Mul, op(expr.Add, T, op(expr.Div, T, nm("R"))), T)), `<mo stretchy="true" symmetric="true">(</mo>`},
		{equation.Symbols(op(expr.Pow, op(expr.Div, T, nm("R")), lit("2", ""))), `)</mo></mrow><mrow><mn>2</mn></mrow></msup>`},
		{equation.Symbols(op(expr.Mul, op(expr.Add, T, T), T)), `<mo stretchy="false">(</mo>`},
		{equation.Value(quantity.Pure(1.2345e-5), quantity.Unit{}, 3), `<mn>1.23</mn><mo lspace="0.1em" rspace="0.1em">×</mo><msup><mn>10</mn><mn>−5</mn></msup>`},
		{equation.Value(quantity.Scalar(9.80665, quantity.MustUnit("m/s^2")), quantity.MustUnit("m/s^2"), 0), `<mn>9.807</mn><mspace width="0.1667em"/><mtext>m/s²</mtext>`},
	} {
		if !strings.Contains(tt.got, tt.want) {
			t.Errorf("got  %s\nwant %s", tt.got, tt.want)
		}
		wellFormed(t, tt.got)
	}
}

func TestBreaking(t *testing.T) {
	tree := nm("a_1")
	for range 12 {
		tree = op(expr.Add, tree, op(expr.Mul, nm("b_2"), lit("1.25", "kN")))
	}
	free, narrow := equation.Setter{}.Symbols(tree), equation.Setter{Width: 20}.Symbols(tree)
	if strings.Contains(free.XML, "mtable") || !strings.Contains(narrow.XML, `class="lines"`) {
		t.Error("broken only where the column is too narrow")
	}
	if free.Text != narrow.Text {
		t.Errorf("breaking changed the formula:\n%s\n%s", free.Text, narrow.Text)
	}
	if narrow.Width > 20 || narrow.Height < 2*free.Height {
		t.Errorf("estimates %.1f × %.1f em do not fit the column", narrow.Width, narrow.Height)
	}
	limbs := call("min", tree, tree, tree)
	if got := (equation.Setter{Width: 24}).Symbols(limbs); got.Width > 26 {
		t.Errorf("min is %.1f em wide in a column of 24", got.Width)
	}
}

func TestLongColumn(t *testing.T) {
	si := make([]float64, 40)
	for i := range si {
		si[i] = float64(i + 1)
	}
	v := quantity.List(si, m, nil)
	n := taken(call("max", nm("x", v)), 20)
	text := equation.Setter{}.Numbers(n).Text
	if want := "max([1.000; 2.000; 3.000; ⋮; 20.00 [governs]; 40.00] m)"; text != want {
		t.Errorf("got %q, want %q", text, want)
	}
}

func wellFormed(t interface{ Fatalf(string, ...any) }, text string) {
	d := xml.NewDecoder(strings.NewReader(text))
	roots, depth := 0, 0
	for {
		tok, err := d.Token()
		if err == io.EOF {
			break
		}
		if err != nil {
			t.Fatalf("not well formed: %v\n%s", err, text)
		}
		switch tok.(type) {
		case xml.StartElement:
			if depth == 0 {
				roots++
			}
			depth++
		case xml.EndElement:
			depth--
		}
	}
	if roots != 1 {
		t.Fatalf("%d roots in %s", roots, text)
	}
}

func anyValue() *rapid.Generator[*quantity.Value] {
	return rapid.Custom(func(t *rapid.T) *quantity.Value {
		v := quantity.Value{SI: rapid.SliceOfN(rapid.Float64Range(-1e9, 1e9), 1, 20).Draw(t, "si")}
		v.Dim = rapid.SampledFrom([]quantity.Dim{quantity.None, quantity.Length, quantity.Force, {0.9, 0, 0}}).Draw(t, "dim")
		if len(v.SI) > 1 {
			v.Shape = quantity.Vector
		}
		if len(v.SI)%2 == 0 && rapid.Bool().Draw(t, "rows") {
			v.Shape, v.Width = quantity.Rows, 2
		}
		return &v
	})
}

func anyTree(depth int) *rapid.Generator[*expr.Node] {
	ops := []expr.Op{expr.Literal, expr.Name, expr.Item, expr.Call, expr.List, expr.Neg, expr.Add, expr.Sub, expr.Mul, expr.Div, expr.Pow,
		expr.Less, expr.AtMost, expr.More, expr.AtLeast, expr.Equal, expr.Within, expr.And, expr.Or, expr.Not}
	names := []string{"", "V", "m.T", "a<b", `"&'`, "base_shear", "_", "x\x00\xff", "rs.PSA", "]]>", "omega_n"}
	calls := []string{"abs", "sqrt", "sum", "num", "if", "min", "max", "log", "log10", "floor", "ceil", "interp", "rs.PSA"}
	return rapid.Custom(func(t *rapid.T) *expr.Node {
		n := &expr.Node{Op: rapid.SampledFrom(ops).Draw(t, "op")}
		if depth == 0 {
			n.Op = rapid.SampledFrom([]expr.Op{expr.Literal, expr.Name}).Draw(t, "leaf")
		}
		arity := 2
		switch n.Op {
		case expr.Literal:
			n.Text = rapid.SampledFrom([]string{"1", "2.5e-7", "-3", "1e", "<"}).Draw(t, "text")
			n.Unit = rapid.SampledFrom([]string{"", "m", "kN*m", "%", "<i>"}).Draw(t, "unit")
			return n
		case expr.Name:
			n.Text, arity = rapid.SampledFrom(names).Draw(t, "name"), 0
		case expr.Call:
			n.Text = rapid.SampledFrom(calls).Draw(t, "call")
			arity = map[string]int{"if": 3, "abs": 1, "sqrt": 1, "sum": 1, "num": 1}[n.Text]
			if arity == 0 {
				arity = rapid.IntRange(1, 4).Draw(t, "arity")
			}
			n.Unit = "m"
			n.Taken = rapid.SliceOfN(rapid.IntRange(1, 3), 0, 3).Draw(t, "taken")
		case expr.List:
			arity = rapid.IntRange(0, 3).Draw(t, "items")
		case expr.Neg, expr.Not:
			arity = 1
		}
		for range arity {
			n.Args = append(n.Args, anyTree(depth-1).Draw(t, "arg"))
		}
		if rapid.Bool().Draw(t, "valued") {
			n.Value = anyValue().Draw(t, "value")
		}
		return n
	})
}

func TestWellFormedAlways(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := anyTree(4).Draw(t, "tree")
		width := rapid.SampledFrom([]float64{0, 3, 12, 40}).Draw(t, "width")
		set := equation.Setter{System: quantity.US, Width: width}
		for _, got := range []equation.Math{set.Symbols(n), set.Numbers(n), set.Equation(n, n)} {
			wellFormed(t, got.XML)
			if !(got.Width >= 0 && got.Height >= 0) {
				t.Fatalf("estimates %v, %v", got.Width, got.Height)
			}
		}
		if a, b := set.Symbols(n).Text, (equation.Setter{}).Symbols(n).Text; a != b {
			t.Fatalf("breaking changed the formula:\n%s\n%s", a, b)
		}
	})
}

func BenchmarkSymbols(b *testing.B) {
	tree := op(expr.Mul, lit("0.0466", ""), op(expr.Pow, num(nm("h_n"), "m"), lit("0.9", "")))
	for b.Loop() {
		equation.Symbols(tree)
	}
}
