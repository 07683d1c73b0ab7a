package block

import (
	"slices"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// EchoFields shows the inputs of a block as used: every field that has a value,
// after conversion, defaults marked as defaults.
func (r *Run) EchoFields(body Body) {
	sys := r.System()
	field.Top(body, func(f *field.Field, s field.Spec) {
		if !f.Set() || s.Name == "caption" || s.Name == "note" || s.Name == "cite" || s.Name == "show" {
			return
		}
		row := exhibit.EchoRow{Field: s.Name, Label: s.Label, Default: !f.Given, Value: exhibit.Cell{Text: f.Written}}
		if symbolic(s.Name) {
			row.Symbol = &expr.Node{Op: expr.Name, Text: s.Name}
		}
		if s.Quantity && len(f.Value.SI) > 0 {
			row.Value = exhibit.Cell{}
			unit := f.Value.Unit
			if unit.Text == "" {
				unit = s.Unit(sys)
			}
			given := Literal(f)
			for _, x := range f.Value.SI {
				n := exhibit.Number{Value: x, Unit: unit, Digits: min(quantity.Digits, quantity.Exact(unit.From(x)))}
				if given {
					n.Digits = quantity.Exact(unit.From(x))
				}
				row.Value.Numbers = append(row.Value.Numbers, n)
			}
			if !given {
				row.Written = f.Written
			}
		}
		r.Echo.Rows = append(r.Echo.Rows, row)
	})
}

// symbolic tells whether a field is named by a symbol of its standard: S_DS, R, I_e.
func symbolic(name string) bool { return name[0] >= 'A' && name[0] <= 'Z' }

// Literal tells whether a field is a plain number with a unit, or a list of such.
func Literal(f *field.Field) bool {
	if f.Tree != nil {
		return f.Tree.Op == expr.Literal
	}
	return !slices.ContainsFunc(f.Trees, func(t *expr.Node) bool { return t.Op != expr.Literal })
}

// Used replaces the value of an echoed row, or adds a row: for values that come
// from a file. from says where from, "" for nothing to say.
func (r *Run) Used(name, label string, value exhibit.Cell, from string) {
	row := exhibit.EchoRow{Field: name, Label: label, Value: value, From: from}
	for i, old := range r.Echo.Rows {
		if old.Field == name {
			row.Label = old.Label
			r.Echo.Rows[i] = row
			return
		}
	}
	r.Echo.Rows = append(r.Echo.Rows, row)
}

// inUnits is a cell with an exact number, shown in a unit with all its digits.
func inUnits(si float64, unit quantity.Unit) exhibit.Cell {
	return exhibit.Cell{Numbers: []exhibit.Number{{Value: si, Unit: unit, Digits: quantity.Exact(unit.From(si))}}}
}

// plain is an echoed text.
func plain(text string) exhibit.Cell { return exhibit.Cell{Text: strings.TrimSpace(text)} }
