package motion

import (
	"fmt"
	"math"

	"quoin/calc/quantity"
)

// Doubt is a step that will not do well on a record: the parameter it is about ("from",
// "step"; empty for the step as a whole), and why.
type Doubt struct{ In, Text string }

// Doubts are those about a step that turned before into after.
func Doubts(t Treatment, before, after *Record) []Doubt {
	var out []Doubt
	add := func(in, format string, args ...any) { out = append(out, Doubt{in, fmt.Sprintf(format, args...)}) }
	switch t := t.(type) {
	case Bandpass:
		if t.From > 0 && t.From*before.Duration() < 1 {
			add("from", "the lower corner of %s Hz is below one wave over the record (%s s): such a filter can hardly tell drift from motion", quantity.Short(t.From), quantity.Format(before.Duration(), 3))
		}
		if jump := before.Jump(); jump > 0.01 {
			add("", "the record jumps to zero by %s %% of its peak at an end before it is filtered; taper it first", quantity.Format(100*jump, 2))
		}
	case Resample:
		if t.Step == before.Step {
			add("step", "the record has the step of %s s already; resampling changes nothing", quantity.Short(t.Step))
		}
		if lost := Lost(before, after); t.Step > before.Step && lost > 0.01 {
			add("step", "a step of %s s holds no motion above %s Hz: resampling removes %s %% of the energy of the record, the integral of a²", quantity.Short(t.Step), quantity.Format(0.5/t.Step, 3), quantity.Format(100*lost, 3))
		}
	}
	return out
}

// Jump is how far the acceleration stands from zero at an end, in parts of its peak: the
// ground does not accelerate before and after.
func (r *Record) Jump() float64 {
	peak := Measure(r).PGA
	if peak == 0 {
		return 0
	}
	return max(math.Abs(r.A[0]), math.Abs(r.A[len(r.A)-1])) / peak
}
