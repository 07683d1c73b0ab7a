package formula

import (
	"math"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// arithmetic is + - * / ^, item by item.
func (e *evaluator) arithmetic(n *expr.Node, a, b quantity.Value) (quantity.Value, bool) {
	if n.Op == expr.Pow {
		return e.power(n, a, b)
	}
	if (n.Op == expr.Add || n.Op == expr.Sub) && !a.Dim.Is(b.Dim) {
		verb, join := "add", "to"
		first, second := b, a
		if n.Op == expr.Sub {
			verb, join = "subtract", "from"
		}
		return e.failHint("dimension", n, zeroHint(n.Args[0], a, n.Args[1], b), "cannot %s %s %s %s", verb, first.Dim.Name(), join, second.Dim.Name())
	}
	out, ok := e.shape(n, a, b)
	if !ok {
		return out, false
	}
	switch n.Op {
	case expr.Add, expr.Sub:
		out.Dim, out.Unit = a.Dim, a.Unit
	case expr.Mul:
		out.Dim, out.Unit = a.Dim.Times(b.Dim), productUnit(a, b)
	case expr.Div:
		out.Dim = a.Dim.Over(b.Dim)
		if plain(b) || b.Dim.Is(quantity.None) && !a.Dim.Is(quantity.None) {
			out.Unit = a.Unit
		}
	}
	for i := range out.SI {
		x, y := item(a, i), item(b, i)
		switch n.Op {
		case expr.Add:
			out.SI[i] = x + y
		case expr.Sub:
			out.SI[i] = x - y
		case expr.Mul:
			out.SI[i] = x * y
		case expr.Div:
			if y == 0 {
				if e.idle(i, len(out.SI)) {
					continue
				}
				return e.fail("domain", n.Args[1], "division by zero%s", at(i, out))
			}
			out.SI[i] = x / y
		}
	}
	return out, true
}

// productUnit is how a product likes to be shown: a pure number leaves the
// unit of the other factor.
func productUnit(a, b quantity.Value) quantity.Unit {
	switch {
	case plain(b), b.Dim.Is(quantity.None) && !a.Dim.Is(quantity.None):
		return a.Unit
	case plain(a), a.Dim.Is(quantity.None) && !b.Dim.Is(quantity.None):
		return b.Unit
	}
	return quantity.Unit{}
}

// plain is a pure number without a unit such as % or deg.
func plain(v quantity.Value) bool { return v.Dim.Is(quantity.None) && v.Unit.Scale == 0 }

// power raises a to b. The exponent of a quantity must be one pure number, for
// it sets the dimension.
func (e *evaluator) power(n *expr.Node, a, b quantity.Value) (quantity.Value, bool) {
	switch {
	case !b.Dim.Is(quantity.None):
		return e.failHint("dimension", n.Args[1], "num(x, unit) is the number of x in a unit", "an exponent is a pure number, not %s", b.Dim.Name())
	case !a.Dim.Is(quantity.None) && b.Shape != quantity.Number:
		return e.failHint("dimension", n.Args[1], "num(x, unit) is the number of x in a unit", "%s can be raised to one exponent only, not to %s", a.Dim.Name(), size(b))
	}
	out, ok := e.shape(n, a, b)
	if !ok {
		return out, false
	}
	if !a.Dim.Is(quantity.None) {
		p := b.SI[0]
		if p != 0 {
			out.Dim = a.Dim.Power(p)
		}
		if p == 1 {
			out.Unit = a.Unit
		}
	}
	for i := range out.SI {
		x, y := item(a, i), item(b, i)
		bad := ""
		switch {
		case x == 0 && y < 0:
			bad = "zero has no negative power"
		case x < 0 && y != math.Trunc(y):
			bad = "a negative number has whole powers only"
		}
		if bad != "" {
			if e.idle(i, len(out.SI)) {
				continue
			}
			return e.fail("domain", n, "%s: %s to the power %s%s", bad, show(x, a), quantity.Format(y, quantity.Digits), at(i, out))
		}
		out.SI[i] = math.Pow(x, y)
	}
	return out, true
}

// zeroHint helps where a plain 0 stands for a quantity.
func zeroHint(na *expr.Node, a quantity.Value, nb *expr.Node, b quantity.Value) string {
	for _, s := range []struct {
		n     *expr.Node
		other quantity.Value
	}{{na, b}, {nb, a}} {
		if s.n.Op == expr.Literal && s.n.Unit == "" && !s.other.Dim.Is(quantity.None) {
			u := s.other.Unit
			if u.Scale == 0 {
				u = quantity.SIUnit(s.other.Dim)
			}
			return "does " + s.n.Text + " need a unit, as in " + s.n.Text + " " + u.Text + ", or a factor that has one?"
		}
	}
	if a.Dim.Is(quantity.None) || b.Dim.Is(quantity.None) {
		return "num(x, unit) is the pure number of x in a unit"
	}
	return massHint(a.Dim, b.Dim)
}

// massHint reminds that weight and mass are two things.
func massHint(a, b quantity.Dim) string {
	if a.Is(quantity.Mass) && b.Is(quantity.Force) || a.Is(quantity.Force) && b.Is(quantity.Mass) {
		return "nothing converts between mass and weight by itself: multiply or divide by 1 g"
	}
	return ""
}
