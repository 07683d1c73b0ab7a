package exhibit

import (
	"cmp"
	"math"
	"slices"
)

// Failed are the checks that are not met, in order.
func Failed(checks []Check) []Check {
	var out []Check
	for _, c := range checks {
		if !c.OK {
			out = append(out, c)
		}
	}
	return out
}

// WorstFirst sorts by ratio, the largest first, of equals the one not met. A check
// without a ratio, whose limit is zero or negative, comes before all others if it
// is not met and after them if it is: nothing says how close it is.
func WorstFirst(checks []Check) []Check {
	out := slices.Clone(checks)
	rank := func(c Check) float64 {
		switch {
		case c.Ratio != nil:
			return *c.Ratio
		case c.OK:
			return math.Inf(-1)
		}
		return math.Inf(1)
	}
	met := func(c Check) int {
		if c.OK {
			return 1
		}
		return 0
	}
	slices.SortStableFunc(out, func(a, b Check) int { return cmp.Or(cmp.Compare(rank(b), rank(a)), met(a)-met(b)) })
	return out
}
