package block

import (
	"slices"

	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/calc/spectrum"
)

var periodsKind = Kind{
	Name:    "periods",
	Doc:     "a grid of periods",
	Makes:   "periods",
	New:     func() Body { return &periods{} },
	Product: func() any { return &Grid{} },
	Exports: []Export{{"T", "the periods, rising", "s"}},
}

// Grid is the product of a periods block.
type Grid struct {
	T []float64 `json:"t"` // s, rising
}

type periods struct {
	common
	From    field.Field `name:"from" is:"time" must:"not-negative" doc:"shortest period"`
	To      field.Field `name:"to" is:"time" must:"positive" doc:"longest period"`
	Count   field.Field `name:"count" is:"number" must:"whole" doc:"number of periods from the shortest to the longest"`
	Spacing field.Field `name:"spacing" is:"choice" of:"log|linear" default:"log" doc:"log or linear"`
	Values  field.Field `name:"values" is:"time" many:"yes" must:"not-negative" doc:"the periods themselves, instead of from, to and count"`
	Include field.Field `name:"include" is:"time" many:"yes" must:"not-negative" doc:"periods added to the grid"`
}

// most is how many periods a grid may have.
const most = 20000

// Check sees that the grid is stated in one way.
func (b *periods) Check(c *Checks) {
	ranged := b.From.Given || b.To.Given || b.Count.Given
	if b.Values.Given {
		if ranged {
			c.Fail(b.Values, "periods", "give either values, or from, to and count")
		}
		return
	}
	for _, need := range []struct {
		f    field.Field
		name string
	}{{b.From, "from"}, {b.To, "to"}, {b.Count, "count"}} {
		if !need.f.Given {
			c.Fail(need.f, "missing-field", "the periods block needs the field %s", need.name).WithHint("give from, to and count, or values")
		}
	}
}

// Run makes the grid.
func (b *periods) Run(r *Run) {
	var grid []float64
	switch {
	case b.Values.Given:
		grid = append(slices.Clone(b.Values.Value.SI), b.Include.Value.SI...)
		slices.Sort(grid)
		grid = slices.Compact(grid)
	default:
		if b.Count.SI() > most {
			r.Fail(b.Count, "bounds", "count is at most %d", most)
			return
		}
		var err error
		grid, err = spectrum.Grid(b.From.SI(), b.To.SI(), int(b.Count.SI()), b.Spacing.Text() == "linear", b.Include.Value.SI)
		if err != nil {
			at := b.To
			if b.From.SI() <= 0 {
				at = b.From
			}
			r.Fail(at, "periods", "%s", err)
			return
		}
	}
	r.Made = &Grid{T: grid}
	r.Export("T", quantity.List(grid, seconds, nil))
	r.Used("periods", "periods in the grid", plain(quantity.Plain(float64(len(grid)))), "")
	r.Results = append(r.Results, exhibit.Item{Text: "From " + short(grid[0]) + " s to " + short(grid[len(grid)-1]) + " s, " + quantity.Plain(float64(len(grid))) + " periods."})
}
