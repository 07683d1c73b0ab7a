package equation

import (
	"slices"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// Levels tells whether the vectors of a formula may be set with the highest level
// on top: every vector that works item by item runs by level. A vector written
// out beside them runs from the lowest level, and then all do.
func Levels(n *expr.Node) bool {
	if n == nil {
		return true
	}
	if v := n.Value; v != nil && v.Shape == quantity.Vector && v.Len() > 1 && len(v.Labels) == 0 {
		return false
	}
	args := n.Args
	if n.Op == expr.Call && n.Text == "interp" && len(args) == 3 {
		args = args[:1] // the table it reads is no vector by level
	}
	if n.Leaf() {
		args = nil
	}
	return !slices.ContainsFunc(args, func(a *expr.Node) bool { return !Levels(a) })
}

// turned is a vector by level from the top, and where an item of it then stands.
func (w writer) turned(v quantity.Value, item int) (quantity.Value, int) {
	if !w.topDown || v.Shape != quantity.Vector || len(v.Labels) == 0 {
		return v, item
	}
	v.SI = slices.Clone(v.SI)
	slices.Reverse(v.SI)
	if item > 0 {
		item = len(v.SI) + 1 - item
	}
	return v, item
}
