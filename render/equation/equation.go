// Package equation typesets a formula tree as presentation MathML.
//
// The rules of the setting:
//   - A name of one letter is italic, its subscripts are upright: C_s, T_a, S_DS.
//     A Greek name is its letter. A word of several letters is upright; the parts
//     of a lower-case word stay words ("base shear").
//   - What a block exports carries the block's name as the last subscript, and an
//     index after it: m.T[1] is T with the subscript "m, 1", elf.C_s is C with
//     "s, elf".
//   - A division is a fraction; num(x, unit) is x/unit, a quantity divided by its
//     unit (ISO 80000-1), so the substituted number stands there without a unit.
//   - Factors stand side by side where both are single letters or a number is
//     followed by one; else × stands between.
//   - Equations of a block have their equals signs below each other (Setter.Lead).
//   - An if in the last branch of another goes on with its list of cases.
//   - The argument of a min or max that governs is underlined; the branch taken of
//     an if is ticked.
//   - Parentheses stand only where binding needs them.
//
// Every math element carries the formula as plain text in alttext.
package equation

import (
	"fmt"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// Math is a formula as set. Width and Height are estimates in em, for breaking
// lines and packing sheets.
type Math struct {
	XML           string // one math element
	Text          string // its plain text form
	Width, Height float64
}

// Setter sets formulas in a column. Width is the column in em; an expression
// estimated wider is broken at its loosest operators, or after the arguments of a
// call. Width 0 never breaks. Lead is how far the equals sign of an equation stands
// from its left end, em, if its symbol is not wider: so that those of several stand
// below each other. System gives the units of numbers that name none.
//
// TopDown sets substituted vectors by level with the highest level on top; see
// [Levels].
type Setter struct {
	System  quantity.System
	Width   float64
	Lead    float64
	TopDown bool
}

// Symbols is the formula as written, in symbols.
func (s Setter) Symbols(n *expr.Node) Math { return finish(s.writer(false).set(n)) }

// Numbers is the formula with every leaf replaced by its value in its own unit.
// A leaf without a value (a branch not taken) keeps its symbol.
func (s Setter) Numbers(n *expr.Node) Math { return finish(s.writer(true).set(n)) }

// Equation is symbol = tree, in symbols; symbol may be nil.
func (s Setter) Equation(symbol, tree *expr.Node) Math {
	w := s.writer(false)
	if symbol == nil {
		return finish(w.set(tree))
	}
	left := w.set(symbol)
	if left.wide <= s.Lead {
		left.xml = fmt.Sprintf(`<mpadded width="%.2fem"><mrow>%s</mrow></mpadded>`, s.Lead, left.xml)
		left.wide = s.Lead
	}
	left.wide += 1.6
	right := w.within(left.wide).set(tree)
	left.wide -= 1.6
	return finish(join(left, operator("="), right))
}

// Marks tells whether the formula holds an argument that governs, which is
// underlined, and a branch taken, which is ticked.
func Marks(n *expr.Node) (underlined, ticked bool) {
	n.Walk(func(m *expr.Node) {
		if len(m.Taken) > 0 && m.Op == expr.Call {
			ticked = ticked || m.Text == "if"
			underlined = underlined || m.Text != "if"
		}
	})
	return underlined, ticked
}

// Symbols is the formula in symbols, on one line: a math element.
func Symbols(n *expr.Node) string { return Setter{}.Symbols(n).XML }

// Numbers is the formula with its numbers, on one line: a math element.
func Numbers(n *expr.Node, system quantity.System) string {
	return Setter{System: system}.Numbers(n).XML
}

// Value is a value in a unit with a number of significant digits (0: as usual);
// a vector is a column in brackets.
func Value(v quantity.Value, unit quantity.Unit, digits int) string {
	return finish(value(v, unit, digits, 0)).XML
}

// Name is the symbol of a name of the document: "C_s", "m.T", "frame.weight".
func Name(path string) string { return finish(name(path, "")).XML }

func finish(p piece) Math {
	return Math{
		XML:   `<math displaystyle="true" alttext="` + escape(p.text) + `"><mrow>` + p.xml + `</mrow></math>`,
		Text:  p.text,
		Width: p.wide, Height: p.high,
	}
}
