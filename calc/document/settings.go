package document

import (
	"slices"

	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// displays are the kinds whose fields say what is shown: nothing is computed from them.
var displays = []string{"figure", "table", "assumptions", "references"}

// settings lists the fields of every named block as used, shown or not. A field
// that reads other values is no input and not listed. Quantities that stand in lists
// of groups (the storeys of a structure) go by NAME.listed.FIELD, as one vector.
func (a *assembly) settings() {
	for _, n := range a.nodes {
		if n.kind != blockNode || n.name == "" || slices.Contains(displays, n.def.Name) {
			continue
		}
		for _, r := range n.result.Echo.Rows {
			if r.Written == "" && (r.Value.Text != "" || len(r.Value.Numbers) > 0) {
				a.p.Settings = append(a.p.Settings, exhibit.Setting{ID: n.name + "." + r.Field, Value: r.Value})
			}
		}
		top := map[*field.Field]bool{}
		field.Top(n.body, func(f *field.Field, _ field.Spec) { top[f] = true })
		at := map[string]int{}
		field.Visit(n.body, func(f *field.Field, s field.Spec) {
			if top[f] || !f.Set() || !s.Quantity || !block.Literal(f) {
				return
			}
			id := n.name + ".listed." + s.Name
			if _, ok := at[id]; !ok {
				at[id] = len(a.p.Settings)
				a.p.Settings = append(a.p.Settings, exhibit.Setting{ID: id})
			}
			c := &a.p.Settings[at[id]].Value
			unit := f.Value.Unit
			if unit.Text == "" {
				unit = s.Unit(a.system)
			}
			for _, x := range f.Value.SI {
				c.Numbers = append(c.Numbers, exhibit.Number{Value: x, Unit: unit, Digits: quantity.Exact(unit.From(x))})
			}
		})
	}
}
