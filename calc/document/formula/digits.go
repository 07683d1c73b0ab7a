package formula

import (
	"slices"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// mostDigits is enough for any float64.
const mostDigits = 17

// ChooseDigits sets Digits, and where it is open the Unit of Value, of every
// leaf that is substituted: the fewest digits, at least quantity.Digits, with
// which the numbers as shown give the result as shown, in the unit shown (zero:
// the value's own, else the system's) with so many digits, and leave every if,
// max and min with the branch or argument that governs. Literals stay as
// written. The tree must have been evaluated; of a comparison each side is
// treated by itself.
//
// A value that stands in a tree twice has the same digits twice. A leaf right
// below num(x, unit) is shown in that unit or its own: its digits serve both.
func ChooseDigits(n *expr.Node, system quantity.System, shown quantity.Unit, digits int) {
	if isComparison(n.Op) || n.Op == expr.Within {
		for _, a := range n.Args {
			ChooseDigits(a, system, shown, digits)
		}
		return
	}
	if n.Value == nil {
		return
	}
	leaves := substituted(n)
	for _, l := range leaves {
		if l.node.Value.Unit.Scale == 0 {
			l.node.Value.Unit = system.Preferred(l.node.Value.Dim)
		}
		l.units[0] = l.node.Value.Unit
	}
	if shown.Scale == 0 || !shown.Dim.Is(n.Value.Dim) {
		if shown = n.Value.Unit; shown.Scale == 0 {
			shown = system.Preferred(n.Value.Dim)
		}
	}
	want := texts(*n.Value, shown, digits)
	agrees := func() bool {
		for way := range 2 {
			if v, ok := recompute(n, leaves, way); !ok || !slices.Equal(texts(v, shown, digits), want) {
				return false
			}
		}
		return true
	}
	d := quantity.Digits
	for setDigits(leaves, d); !agrees() && d < mostDigits; setDigits(leaves, d) {
		d++
	}
	// What need not be as long as the others is shortened again.
	if d == quantity.Digits || len(leaves)*len(want) > mostShortened {
		return
	}
	for _, same := range grouped(leaves) {
		short := quantity.Digits
		for setDigits(same, short); short < d && !agrees(); setDigits(same, short) {
			short++
		}
	}
}

// mostShortened keeps ChooseDigits quick: leaves times items of the result.
const mostShortened = 4000

func setDigits(leaves []*shownLeaf, d int) {
	for _, l := range leaves {
		l.node.Digits = d
	}
}

// grouped puts leaves together that are one value.
func grouped(leaves []*shownLeaf) [][]*shownLeaf {
	var out [][]*shownLeaf
	at := map[string]int{}
	for _, l := range leaves {
		id := l.node.ID
		i, ok := at[id]
		if !ok || id == "" {
			i = len(out)
			out, at[id] = append(out, nil), i
		}
		out[i] = append(out[i], l)
	}
	return out
}

// shownLeaf is a leaf with the units it may be shown in: its own, and the unit
// of a num around it.
type shownLeaf struct {
	node  *expr.Node
	units [2]quantity.Unit
}

// substituted lists the leaves that were reached and are shown as numbers.
func substituted(n *expr.Node) []*shownLeaf {
	var out []*shownLeaf
	var visit func(n *expr.Node, around *quantity.Unit)
	visit = func(n *expr.Node, around *quantity.Unit) {
		switch {
		case n.Op == expr.Literal:
		case n.Leaf():
			if n.Value == nil {
				return
			}
			l := &shownLeaf{node: n}
			if around != nil {
				l.units[1] = *around
			}
			out = append(out, l)
		default:
			var u *quantity.Unit
			if n.Op == expr.Call && n.Text == "num" {
				if parsed, err := quantity.ParseUnit(n.Unit); err == nil {
					u = &parsed
				}
			}
			for _, a := range n.Args {
				visit(a, u)
			}
		}
	}
	visit(n, nil)
	return out
}

// recompute evaluates with the leaves as shown: way 0 in their own units, way 1
// in the unit of the num around them.
func recompute(n *expr.Node, leaves []*shownLeaf, way int) (quantity.Value, bool) {
	values := make(map[*expr.Node]quantity.Value, len(leaves))
	for _, l := range leaves {
		u := l.units[way]
		if u.Scale == 0 {
			u = l.units[0]
		}
		v := *l.node.Value
		v.SI = make([]float64, len(v.SI))
		for i, x := range l.node.Value.SI {
			v.SI[i] = u.To(quantity.Rounded(u.From(x), l.node.Digits))
		}
		values[l.node] = v
	}
	agree := true
	e := &evaluator{leaf: func(n *expr.Node) (quantity.Value, bool) { v, ok := values[n]; return v, ok }}
	e.governs = func(same bool) { agree = agree && same }
	v, ok := e.eval(n)
	return v, ok && agree
}

// texts is a value as shown.
func texts(v quantity.Value, u quantity.Unit, digits int) []string {
	out := make([]string, len(v.SI))
	for i, x := range v.SI {
		out[i] = quantity.Format(u.From(x), digits)
	}
	return out
}

// DropZeros shows leaves with fewer digits where these show the very same number:
// 8 for 8.00, 0.55 for 0.5500.
func DropZeros(n *expr.Node) {
	n.Walk(func(leaf *expr.Node) {
		if leaf.Digits > 0 && leaf.Value != nil && leaf.Value.Shape == quantity.Number {
			leaf.Digits = min(leaf.Digits, quantity.Exact(leaf.Value.Unit.From(leaf.Value.SI[0])))
		}
	})
}
