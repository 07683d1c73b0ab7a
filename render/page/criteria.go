package page

import (
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/expr"
)

// criteriaView is the design criteria of one group, as the cover shows them.
type criteriaView struct {
	First bool // the heading stands with it
	Group string
	Rows  []criterionView
}

type criterionView struct {
	Label      string
	Symbol     *expr.Node
	Value      cellView
	Open, Wide bool
	Anchor     string // of the first block that states it
}

// criterionChars is what a cell of the criteria holds in a line, and how many cells
// stand side by side.
const (
	criterionChars = 37
	criteriaAcross = 3
)

// criteria is the criteria block of the cover.
func (b *book) criteria() []item {
	var out []item
	for _, group := range exhibit.CriteriaGroups {
		v := criteriaView{First: len(out) == 0, Group: group}
		count := map[string]int{}
		for _, c := range b.p.Criteria {
			if c.Group == group {
				count[c.Label]++
			}
		}
		for _, c := range b.p.Criteria {
			if c.Group != group {
				continue
			}
			r := criterionView{Label: c.Label, Symbol: c.Symbol, Value: b.cell(c.Value, nil), Open: c.Open}
			r.Value.Text = clip(r.Value.Text, titleChars)
			if count[c.Label] > 1 {
				var names []string
				for _, o := range c.Blocks {
					names = append(names, o.Name)
				}
				r.Label += " (" + clip(strings.Join(names, ", "), 60) + ")"
			}
			if len(c.Blocks) > 0 {
				r.Anchor = c.Blocks[0].Anchor
			}
			r.Wide = lines(r.Label+r.Value.Text+r.Value.Numbers, criterionChars) > 1 && len(r.Value.Text) > 24
			v.Rows = append(v.Rows, r)
		}
		if len(v.Rows) > 0 {
			out = append(out, item{name: "criteria", data: v, high: v.high(), anchors: []string{map[bool]string{true: "q-criteria"}[v.First]}})
		}
	}
	return out
}

// high is the height of a group: rows of cells side by side, and wide ones.
func (v criteriaView) high() float64 {
	high := 1.5
	if v.First {
		high += 6
	}
	used, tall := 0, 0.0
	turn := func() {
		high += 1.2 + 4.4*tall
		used, tall = 0, 0
	}
	for _, r := range v.Rows {
		text := r.Label + r.Value.Text + r.Value.Numbers + r.Value.Was.printed()
		if r.Symbol != nil {
			text += "R_xx "
		}
		if r.Wide {
			if used > 0 {
				turn()
			}
			tall = lines(text, criteriaAcross*criterionChars+6)
			turn()
			continue
		}
		if used == criteriaAcross {
			turn()
		}
		used, tall = used+1, max(tall, lines(text, criterionChars))
	}
	if used > 0 {
		turn()
	}
	return high
}
