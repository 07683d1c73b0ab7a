package equation

import (
	"strings"
	"testing"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// TestLevels: substituted vectors by level stand highest on top, unless one that
// is written out stands beside them; what governs moves along.
func TestLevels(t *testing.T) {
	metre := quantity.MustUnit("m")
	leaf := func(name string, v quantity.Value) *expr.Node {
		return &expr.Node{Op: expr.Name, Text: name, Value: &v, Digits: 2}
	}
	of := func(op expr.Op, args ...*expr.Node) *expr.Node {
		v := *args[len(args)-1].Value
		return &expr.Node{Op: op, Args: args, Value: &v}
	}
	call := func(name string, args ...*expr.Node) *expr.Node {
		n := of(expr.Call, args...)
		n.Text = name
		return n
	}
	h := func() *expr.Node {
		return leaf("h", quantity.List([]float64{10, 20, 30}, metre, []string{"L1", "L2", "Roof"}))
	}
	T := func() *expr.Node { return leaf("T", quantity.List([]float64{33, 22, 11}, metre, nil)) }
	x := leaf("x", quantity.Pure(2))
	pure := call("num", h())
	pure.Unit = "m"
	largest := call("max", h())
	largest.Taken = []int{3}
	list := func(xs ...*expr.Node) *expr.Node {
		n := of(expr.List, xs...)
		v := quantity.List(make([]float64, len(xs)), quantity.Unit{}, nil)
		n.Value = &v
		return n
	}
	table := call("interp", x, list(x, x), list(x, x))
	table.Value = x.Value
	for _, c := range []struct {
		tree  *expr.Node
		want  string
		turns bool
	}{
		{of(expr.Mul, x, h()), "30; 20; 10", true}, {of(expr.Add, h(), h()), "30; 20; 10", true}, {call("sum", h()), "30; 20; 10", true}, {pure, "30; 20; 10", true},
		{of(expr.Add, T(), h()), "10; 20; 30", false}, {of(expr.Mul, list(x, x, x), h()), "10; 20; 30", false}, {of(expr.Mul, x, T()), "33; 22; 11", false},
		{of(expr.Mul, table, h()), "30; 20; 10", true}, {largest, "30 [governs]; 20; 10", true},
	} {
		if got := Levels(c.tree); got != c.turns {
			t.Errorf("%s: by level %v", Setter{}.Symbols(c.tree).Text, got)
		}
		if got := (Setter{System: quantity.SI, TopDown: Levels(c.tree)}).Numbers(c.tree).Text; !strings.Contains(got, c.want) {
			t.Errorf("%s, want %s", got, c.want)
		}
	}
}
