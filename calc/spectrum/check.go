package spectrum

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"quoin/calc/motion"
	"quoin/calc/oscillator"
)

// Residual recomputes the displacement peak at a few points of the grid by an
// independent route (see [oscillator.Check]) and returns the largest relative
// difference: at the shortest and the longest period and where PSA is largest, for every
// damping. Left out are periods shorter than a tenth of the step and those that would take
// that route more than 1e8 steps. It is infinite, never NaN, where the routes give no number.
func (s *Spectrum) Residual() float64 {
	worst := 0.0
	const phase = 0.02 // the steps of that route, in radians
	least := s.Record.Step * max(0.1, float64(len(s.Record.A))*2*math.Pi/phase/1e8)
	for i, z := range s.Damping {
		_, top := s.MaxPSA(i)
		points := []float64{top, s.Periods[len(s.Periods)-1]}
		if k := slices.IndexFunc(s.Periods, func(T float64) bool { return T >= least }); k >= 0 {
			points = append(points, s.Periods[k])
		}
		slices.Sort(points)
		for _, T := range slices.Compact(points) {
			if T < least {
				continue
			}
			x := oscillator.Check(s.Record.A, s.Record.Step, oscillator.Oscillator{Period: T, Damping: z})
			if math.IsNaN(x) {
				return math.Inf(1)
			}
			worst = max(worst, x)
		}
	}
	return worst
}

// warnings are the doubts about computing these periods from this record.
func warnings(rec *motion.Record, periods []float64) (out []motion.Warning) {
	warn := func(code, format string, args ...any) {
		out = append(out, motion.Warning{Code: code, Text: fmt.Sprintf(format, args...)})
	}
	shortest, longest := periods[len(periods)-1], periods[len(periods)-1]
	if k := slices.IndexFunc(periods, func(T float64) bool { return T > 0 }); k >= 0 {
		shortest = periods[k]
	}
	if r := shortest / rec.Step; longest == 0 {
	} else if r < 2 {
		warn("period-unresolved", "the shortest period, %.4g s, is %.3g times the step of the record, which cannot hold such motion: 2 times at least", shortest, r)
	} else if r < 10 {
		warn("period-coarse", "the shortest period, %.4g s, is %.3g times the step of the record; below 10 times the straight line between samples loses several per cent of band-limited motion", shortest, r)
	}
	if d := rec.Duration(); longest > d {
		warn("record-short", "the longest period, %.4g s, exceeds the duration of the record, %.4g s", longest, d)
	}
	if strings.HasPrefix(rec.Origin.Format, "form ") {
		return out // a form starts, ends and drifts as it is meant to
	}
	p := peak(rec.A)
	if e := max(math.Abs(rec.A[0]), math.Abs(rec.A[len(rec.A)-1])); e > 0.1*p {
		warn("record-cut", "the record starts or ends at %.0f %% of its peak acceleration: it may be cut", 100*e/p)
	}
	v, _ := motion.Integrate(rec)
	if last, most := math.Abs(v[len(v)-1]), peak(v); last > 0.1*most {
		warn("velocity-drift", "the ground still moves at %.0f %% of its peak velocity when the record ends: long periods want a baseline correction first", 100*last/most)
	}
	return out
}
