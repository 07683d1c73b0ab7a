package formula

import (
	"math"
	"strconv"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// truth is the outcome of a condition: one, or one an item.
type truth struct {
	items  []bool
	vector bool
	labels []string
}

// holds evaluates a condition.
func (e *evaluator) holds(n *expr.Node) (truth, bool) {
	switch n.Op {
	case expr.Not:
		t, ok := e.holds(n.Args[0])
		for i := range t.items {
			t.items[i] = !t.items[i]
		}
		return t, ok
	case expr.And, expr.Or:
		a, ok := e.holds(n.Args[0])
		if !ok {
			return a, false
		}
		if !a.vector && a.items[0] == (n.Op == expr.Or) {
			return a, true // decided; the right side is not looked at
		}
		b, ok := e.holds(n.Args[1])
		if !ok {
			return b, false
		}
		shape, ok := e.shape(n, a.value(), b.value())
		if !ok {
			return truth{}, false
		}
		out := truth{items: make([]bool, len(shape.SI)), vector: shape.Shape == quantity.Vector, labels: shape.Labels}
		for i := range out.items {
			x, y := a.item(i), b.item(i)
			out.items[i] = x && y || n.Op == expr.Or && (x || y)
		}
		return out, true
	}
	c, ok := e.compare(n)
	if !ok {
		return truth{}, false
	}
	out := truth{vector: c.shape.Shape == quantity.Vector, labels: c.shape.Labels}
	for i := range c.shape.SI {
		out.items = append(out.items, c.row(i).OK)
	}
	return out, true
}

func (t truth) value() quantity.Value {
	v := quantity.Value{SI: make([]float64, len(t.items)), Labels: t.labels}
	if t.vector {
		v.Shape = quantity.Vector
	}
	return v
}

func (t truth) item(i int) bool {
	if t.vector {
		return t.items[i]
	}
	return t.items[0]
}

// conditional is if(cond, a, b). Only what is taken is evaluated: a branch that
// no item takes not at all, and in a branch that some items take a fault of the
// other items is no fault.
func (e *evaluator) conditional(n *expr.Node) (quantity.Value, bool) {
	t, ok := e.holds(n.Args[0])
	if !ok {
		return quantity.Value{}, false
	}
	if len(t.items) == 0 {
		return e.fail("length", n.Args[0], "a condition on a vector without items")
	}
	taken := make([]int, len(t.items))
	for i, yes := range t.items {
		taken[i] = 2
		if yes {
			taken[i] = 1
		}
	}
	if !e.take(n, taken) {
		return quantity.Value{}, false
	}
	if !t.vector {
		v, ok := e.eval(n.Args[taken[0]])
		if ok && !e.probing && e.leaf == nil {
			other := n.Args[3-taken[0]]
			w, fine, bad := e.probe(other)
			if bad != nil {
				e.findings = append(e.findings, *bad)
				return v, false
			}
			if fine && !w.Dim.Is(v.Dim) {
				return e.failHint("dimension", other, zeroHint(other, w, n.Args[taken[0]], v), "the branches differ: %s where it is taken, %s here", v.Dim.Name(), w.Dim.Name())
			}
		}
		return v, ok
	}
	var out quantity.Value
	first := true
	for branch := 1; branch <= 2; branch++ {
		mask, any := make([]bool, len(taken)), false
		for i, k := range taken {
			mask[i] = k == branch && !e.idle(i, len(taken))
			any = any || k == branch
		}
		if !any {
			continue
		}
		was := e.mask
		e.mask = mask
		v, ok := e.eval(n.Args[branch])
		e.mask = was
		if !ok {
			return v, false
		}
		shape, ok := e.shape(n, t.value(), v)
		if !ok {
			return v, false
		}
		if first {
			out, first = shape, false
			out.Dim, out.Unit = v.Dim, v.Unit
		} else if !out.Dim.Is(v.Dim) {
			return e.failHint("dimension", n.Args[branch], zeroHint(n.Args[1], out, n.Args[2], v), "the branches differ: %s, %s", out.Dim.Name(), v.Dim.Name())
		}
		for i, k := range taken {
			if k == branch {
				out.SI[i] = item(v, i)
			}
		}
	}
	return out, true
}

// probe evaluates a branch that is not taken, to see its dimension. What is wrong
// with its numbers does not count, what is wrong with its units does; the branch
// itself stays without values.
func (e *evaluator) probe(n *expr.Node) (v quantity.Value, fine bool, bad *Finding) {
	n = clone(n)
	p := start(n, e.scope)
	p.probing = true
	v, fine = p.eval(n)
	for i := range p.findings {
		fine = false
		if p.findings[i].Code == "dimension" {
			bad = &p.findings[i]
		}
	}
	return v, fine, bad
}

func clone(n *expr.Node) *expr.Node {
	c := *n
	c.Args = make([]*expr.Node, len(n.Args))
	for i, a := range n.Args {
		c.Args[i] = clone(a)
	}
	return &c
}

// comparison is an evaluated comparison, taken item by item.
type comparison struct {
	op              expr.Op
	shape           quantity.Value // of the outcome
	a, b, tolerance quantity.Value
	relative        bool
}

// compare evaluates both sides of a comparison, and its tolerance.
func (e *evaluator) compare(n *expr.Node) (c comparison, ok bool) {
	sides := n
	if n.Op == expr.Within {
		sides = n.Args[0]
	}
	c.op = sides.Op
	if !isComparison(sides.Op) || (sides.Op == expr.Equal) != (n.Op == expr.Within) {
		e.failHint("syntax", n, "write a <= b, or a == b within 2 %", "this compares nothing")
		return c, false
	}
	if c.a, ok = e.eval(sides.Args[0]); !ok {
		return c, false
	}
	if c.b, ok = e.eval(sides.Args[1]); !ok {
		return c, false
	}
	if !c.a.Dim.Is(c.b.Dim) {
		e.failHint("dimension", sides, zeroHint(sides.Args[0], c.a, sides.Args[1], c.b), "cannot compare %s with %s", c.a.Dim.Name(), c.b.Dim.Name())
		return c, false
	}
	for i, v := range []quantity.Value{c.a, c.b} {
		if v.Shape == quantity.Rows {
			e.failRows(sides.Args[i])
			return c, false
		}
	}
	if c.shape, ok = e.shape(sides, c.a, c.b); !ok {
		return c, false
	}
	if n.Op != expr.Within {
		return c, true
	}
	if c.tolerance, ok = e.eval(n.Args[1]); !ok {
		return c, false
	}
	c.relative = c.tolerance.Dim.Is(quantity.None)
	if !c.relative && !c.tolerance.Dim.Is(c.a.Dim) {
		e.failHint("dimension", n.Args[1], "a pure number is relative to the right side", "the tolerance is %s, what it applies to is %s", c.tolerance.Dim.Name(), c.a.Dim.Name())
		return c, false
	}
	for i, x := range c.tolerance.SI {
		if x < 0 {
			_, ok = e.fail("domain", n.Args[1], "the tolerance %s%s is negative", show(x, c.tolerance), at(i, c.tolerance))
			return c, ok
		}
	}
	c.shape, ok = e.shape(n, c.shape, c.tolerance)
	return c, ok
}

// Row is one comparison of a check. Demand is the left side and Limit the right
// one, in SI units of Dim. Ratio is nil where the limit, or what it is divided by,
// is zero or negative; it passes up to 1, but OK follows the relation itself.
type Row struct {
	Item          string // label or index of the item; "" where the check is of numbers
	Index         int    // from 1; 0 where the check is of numbers
	Demand, Limit float64
	Tolerance     *float64 // absolute, for ==
	Dim           quantity.Dim
	Ratio         *float64
	OK            bool
}

// row compares item i.
//
//	a <= b, a < b: ratio a/b      a >= b, a > b: ratio b/a
//	a == b within t: ratio |a-b|/t; a pure number t is relative to |b|
func (c comparison) row(i int) Row {
	a, b := item(c.a, i), item(c.b, i)
	r := Row{Demand: a, Limit: b, Dim: c.a.Dim}
	if c.shape.Shape == quantity.Vector {
		r.Index, r.Item = i+1, strconv.Itoa(i+1)
		if i < len(c.shape.Labels) && c.shape.Labels[i] != "" {
			r.Item = c.shape.Labels[i]
		}
	}
	over, under := a, b
	same := math.Abs(a-b) <= rounding*max(math.Abs(a), math.Abs(b))
	switch c.op {
	case expr.AtMost:
		r.OK = a <= b || same
	case expr.Less:
		r.OK = a < b && !same
	case expr.AtLeast:
		r.OK = a >= b || same
		over, under = b, a
	case expr.More:
		r.OK = a > b && !same
		over, under = b, a
	case expr.Equal:
		t := item(c.tolerance, i)
		if c.relative {
			t *= math.Abs(b)
		}
		r.Tolerance = &t
		over, under = math.Abs(a-b), t
		r.OK = over <= t*(1+rounding) || same
		if over > t && r.OK {
			over = t
		}
	}
	if under > 0 && (b > 0 || c.op == expr.Equal) {
		if ratio := over / under; !math.IsInf(ratio, 0) {
			if same && c.op != expr.Equal {
				ratio = 1
			}
			ratio += 0 // no negative zero
			r.Ratio = &ratio
		}
	}
	return r
}

// rounding is the relative difference up to which the two sides of a check count
// as equal: what the arithmetic of doubles leaves of 3 ft against 36 in.
const rounding = 1e-12

// EvaluateCheck computes the comparison of a check: one row, or one an item of
// a vector. relation is "<=", "<", ">=", ">" or "==". It fills the nodes as
// Evaluate does; a comparison itself has no Value.
func EvaluateCheck(n *expr.Node, s Scope) (rows []Row, relation string, findings []Finding) {
	e := start(n, s)
	c, ok := e.compare(n)
	if !ok {
		return nil, string(c.op), e.findings
	}
	for i := range c.shape.SI {
		rows = append(rows, c.row(i))
	}
	if len(rows) == 0 {
		e.fail("length", n, "the check has no items")
	}
	return rows, string(c.op), e.findings
}
