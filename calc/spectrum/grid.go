package spectrum

import (
	"fmt"
	"math"
	"slices"
)

// maxPeriods bounds a grid: a mistyped count must not run for hours.
const maxPeriods = 100_000

// Grid is count periods from one to the other, both included, spaced evenly in the
// logarithm of the period or, with linear, in the period itself; the periods
// of include are added. The result rises strictly: periods that agree to 1e-9 are
// one, and then the included one is kept as it was written.
//
// A period of 0 (the peak ground acceleration) is allowed where the spacing is linear
// and among the included.
func Grid(from, to float64, count int, linear bool, include []float64) ([]float64, error) {
	switch {
	case !finite(from) || !finite(to) || from < 0 || to < from:
		return nil, fmt.Errorf("periods from %v to %v s: they must rise and not be negative", from, to)
	case from == 0 && !linear:
		return nil, fmt.Errorf("periods from 0 s cannot be spaced logarithmically; start above 0 and include 0")
	case count < 1 || count > maxPeriods:
		return nil, fmt.Errorf("%d periods; from 1 to %d can be had", count, maxPeriods)
	case count == 1 && to > from:
		return nil, fmt.Errorf("one period cannot reach from %v to %v s", from, to)
	case count > 1 && to == from:
		return nil, fmt.Errorf("%d periods between %v s and the same", count, from)
	}
	grid := make([]float64, count)
	for i := range grid {
		switch x := float64(i) / float64(max(1, count-1)); {
		case i == 0:
			grid[i] = from
		case i == count-1:
			grid[i] = to
		case linear:
			grid[i] = from + x*(to-from)
		default:
			grid[i] = from * math.Pow(to/from, x)
		}
	}
	for _, p := range include {
		if !finite(p) || p < 0 {
			return nil, fmt.Errorf("the included period %v s must be 0 or more", p)
		}
		grid = slices.DeleteFunc(grid, func(g float64) bool { return math.Abs(g-p) <= 1e-9*p })
		grid = append(grid, p)
	}
	slices.Sort(grid)
	return grid, nil
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
