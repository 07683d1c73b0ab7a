package ledger

import (
	"math"

	"quoin/calc/quantity"
)

// What counts as the same number, besides what lies within the tolerance: two items
// of a vector that differ by less than faint of its largest, two numbers that differ by less
// than nothing of their unit. Both are what rounding leaves of a zero. A ratio is held against 1.
const (
	faint   = 1e-9
	nothing = 1e-12
)

// si is the number of a term in SI units; false where its unit is none.
func (t Term) si() (x float64, unit quantity.Unit, ok bool) {
	if t.Unit == "" {
		return t.X, quantity.Unit{Scale: 1}, true
	}
	u, err := quantity.ParseUnit(t.Unit)
	if err != nil {
		return t.X, quantity.Unit{Text: t.Unit, Scale: 1}, false
	}
	return u.To(t.X), u, true
}

// scales is the largest number of each id, without sign, in SI units.
func scales(lists ...[]Row) map[string]float64 {
	out := map[string]float64{}
	for _, rows := range lists {
		for _, r := range rows {
			if r.Index != "" && len(r.Terms) == 1 && r.Terms[0].Number {
				x, _, _ := r.Terms[0].si()
				out[r.ID] = max(out[r.ID], math.Abs(x))
			}
		}
	}
	return out
}

// alike tells whether two terms say the same.
func alike(old, now Term, tolerance, scale float64) bool {
	if old.Number != now.Number || old.Name != now.Name {
		return false
	}
	if !now.Number {
		return old.Text == now.Text
	}
	a, ua, oka := old.si()
	b, ub, okb := now.si()
	if !ua.Dim.Is(ub.Dim) || oka != okb || !oka && old.Unit != now.Unit {
		return false
	}
	if now.Name == "ratio" {
		scale = max(scale, tolerance/faint)
	}
	return math.Abs(a-b) <= max(tolerance*max(math.Abs(a), math.Abs(b)), faint*scale, nothing*ub.Scale)
}
