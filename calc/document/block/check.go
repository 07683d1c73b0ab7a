package block

import (
	"fmt"
	"math"

	"quoin/calc/cite"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// Check makes a check of the block. It is what a check line of the same text
// would be, but that it reads the block's own exports: "d.drift <= d.drift_limit".
// Its text is its id. A ref without a key: the limit is the author's.
func (r *Run) Check(text, description string, ref cite.Ref) {
	line, findings := formula.ParseLine("check "+text, nil)
	if len(findings) > 0 {
		panic("block: the check " + text + " cannot be read")
	}
	rows, relation, findings := formula.EvaluateCheck(line.Tree, ownValues{r})
	for _, f := range findings {
		r.Diags.Errorf(f.Code, r.Place, "%s: %s", line.Text, f.Summary)
	}
	for _, c := range CheckRows(line.Text, line.Tree, rows, relation, r.System()) {
		c.Description = description
		c.Ref, c.RefText = sourced(ref)
		r.Checks = append(r.Checks, c)
	}
}

// sourced is a source as shown: its clause, or that the author states it, where
// there is none.
func sourced(ref cite.Ref) (*cite.Ref, string) {
	if ref.Key == "" {
		return nil, "as stated"
	}
	return &ref, ""
}

// ownValues reads what a block has exported so far.
type ownValues struct{ r *Run }

func (s ownValues) Value(path string) (quantity.Value, string, error) {
	for _, v := range s.r.Values {
		if s.r.ID(v.Name) == path {
			return v.Value, path, nil
		}
	}
	panic("block: " + path + " is read before it is exported")
}

func (s ownValues) Call(string, []quantity.Value) (quantity.Value, string, error) {
	panic("block: a block does not call its own functions")
}

// CheckRows are the rows of an evaluated check as shown: text is its id, with [i]
// for the items of vectors. Description, source and place are left to the caller.
func CheckRows(text string, tree *expr.Node, rows []formula.Row, relation string, system quantity.System) []exhibit.Check {
	sides := tree
	if sides.Op == expr.Within {
		sides = sides.Args[0]
	}
	unit := quantity.Unit{}
	for _, side := range sides.Args {
		if side.Value != nil && unit.Text == "" {
			unit = side.Value.Unit
		}
	}
	out := make([]exhibit.Check, len(rows))
	for i, r := range rows {
		if unit.Text == "" {
			unit = system.Preferred(r.Dim)
		}
		c := exhibit.Check{ID: text, Name: text, Item: r.Item, Relation: relation, Ratio: r.Ratio, OK: r.OK,
			Demand: exhibit.Number{Value: r.Demand, Unit: unit}, Limit: exhibit.Number{Value: r.Limit, Unit: unit}, Tree: tree}
		if r.Index > 0 {
			c.ID = fmt.Sprintf("%s [%d]", text, r.Index)
		}
		c.Demand.Digits, c.Limit.Digits = checkDigits(unit.From(r.Demand), unit.From(r.Limit))
		if r.Tolerance != nil {
			c.Tolerance = &exhibit.Number{Value: *r.Tolerance, Unit: unit, Digits: min(quantity.Digits, quantity.Exact(unit.From(*r.Tolerance)))}
		}
		out[i] = c
	}
	return out
}

// checkDigits is how many digits the two sides of a check are shown with: the
// usual number or what shows them exactly, and more where two sides that differ
// would read the same.
func checkDigits(demand, limit float64) (d, l int) {
	for n := quantity.Digits; ; n++ {
		d, l = min(n, quantity.Exact(demand)), min(n, quantity.Exact(limit))
		if n >= 15 || math.Abs(demand-limit) <= 1e-12*math.Abs(limit) || quantity.Format(demand, d) != quantity.Format(limit, l) {
			return d, l
		}
	}
}
