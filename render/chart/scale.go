package chart

import (
	"fmt"
	"math"
	"slices"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// span is the limits of an axis in its display unit.
type span struct {
	lo, hi float64
	log    bool
}

// at is where v lies on an axis px long: 0 at lo, px at hi.
func (s span) at(v, px float64) float64 {
	if s.log {
		return px * math.Log(v/s.lo) / math.Log(s.hi/s.lo)
	}
	return px * (v - s.lo) / (s.hi - s.lo)
}

func (s span) holds(v float64) bool { return v >= s.lo && v <= s.hi }

// join covers both.
func (s span) join(t span) span {
	return span{math.Min(s.lo, t.lo), math.Max(s.hi, t.hi), s.log}
}

// nice is the smallest of 1, 2, 5 times a power of ten that is not below x > 0.
func nice(x float64) float64 {
	decade := math.Pow(10, math.Floor(math.Log10(x)+1e-9))
	for _, m := range []float64{1, 2, 5} {
		if m*decade >= x*(1-1e-9) {
			return m * decade
		}
	}
	return 10 * decade
}

// niceDown is the largest of 1, 2, 5 times a power of ten that is not above x > 0.
func niceDown(x float64) float64 {
	decade := math.Pow(10, math.Floor(math.Log10(x)+1e-9))
	for _, m := range []float64{5, 2} {
		if m*decade <= x*(1+1e-9) {
			return m * decade
		}
	}
	return decade
}

// roomy is the smallest simple number that is not below x > 0, closer than nice.
func roomy(x float64) float64 {
	decade := math.Pow(10, math.Floor(math.Log10(x)+1e-9))
	for _, m := range []float64{1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8} {
		if m*decade >= x*(1-1e-9) {
			return m * decade
		}
	}
	return 10 * decade
}

// fit says how the limits of an axis follow from its data.
type fit int

const (
	tight   fit = iota // exactly the data: the running variable
	rounded            // to whole ticks, zero included
	level              // heights: the data and a little room above
)

// decades is how far down from the largest value a logarithmic axis of values goes by
// itself: what lies below is noise in most pictures.
const decades = 1e-5

// closest is the least length of an axis, as a share of the larger of its ends.
const closest = 1e-9

// spanOf is the limits of an axis px long for its values (display unit).
func spanOf(a exhibit.Axis, values []float64, how fit, px float64) span {
	s := span{log: a.Log, lo: math.Inf(1), hi: math.Inf(-1)}
	for _, v := range values {
		if !a.Log || v > 0 {
			s.lo, s.hi = math.Min(s.lo, v), math.Max(s.hi, v)
		}
	}
	if s.lo > s.hi { // nothing to show: any limits will do
		s.lo, s.hi = 0, 1
		if a.Log {
			s.lo = 0.1
		}
	}
	switch {
	case a.Symmetric && !a.Log:
		m := math.Max(math.Abs(s.lo), math.Abs(s.hi))
		if m == 0 {
			m = 1
		}
		m = roomy(1.04 * m)
		s.lo, s.hi = -m, m
	case how == tight:
	case a.Log:
		s.hi = nice(s.hi)
		s.lo = niceDown(max(s.lo, s.hi*decades))
	case how == level:
		s.lo = math.Min(s.lo, 0)
		s.hi += 0.03 * (s.hi - s.lo)
	default:
		s.lo, s.hi = math.Min(s.lo, 0), math.Max(s.hi, 0)
		if s.hi > s.lo {
			step := nice((s.hi - s.lo) * 40 / px)
			s.lo = step * math.Floor(s.lo/step+1e-9)
			s.hi = step * math.Ceil(s.hi/step-1e-9)
		}
	}
	if a.Min != nil {
		s.lo = a.Unit.From(*a.Min)
	}
	if a.Max != nil {
		s.hi = a.Unit.From(*a.Max)
	}
	if !(s.hi-s.lo > closest*math.Max(math.Abs(s.lo), math.Abs(s.hi))) { // one value only, but for rounding: ticks between would be equal numbers
		if s.log {
			s.lo, s.hi = s.lo/2, s.lo*2
		} else {
			d := math.Max(1e-3, math.Abs(s.lo)/10)
			s.lo, s.hi = s.lo-d, s.lo+d
		}
	}
	return s
}

// check refuses what cannot be drawn.
func check(f exhibit.Figure) error {
	if len(f.Panels) == 0 {
		return fmt.Errorf("figure %q has no panel", f.ID)
	}
	for _, p := range f.Panels {
		if len(p.Series) == 0 {
			return fmt.Errorf("figure %q has a panel without a series", f.ID)
		}
		for _, s := range p.Series {
			if len(s.X) != len(s.Y) || len(s.X) == 0 {
				return fmt.Errorf("figure %q: the series %q has %d values over %d", f.ID, s.Label, len(s.Y), len(s.X))
			}
			if i := slices.IndexFunc(s.X, bent); i >= 0 {
				return fmt.Errorf("figure %q: the series %q has no number at x %d", f.ID, s.Label, i+1)
			}
			if i := slices.IndexFunc(s.Y, bent); i >= 0 {
				return fmt.Errorf("figure %q: the series %q has no number at y %d", f.ID, s.Label, i+1)
			}
		}
		for _, a := range []exhibit.Axis{p.X, p.Y} {
			for _, m := range []*float64{a.Min, a.Max} {
				if m != nil && (bent(*m) || a.Log && *m <= 0) {
					return fmt.Errorf("figure %q: the axis %q cannot end at %v", f.ID, a.Label, *m)
				}
			}
			if a.Min != nil && a.Max != nil && *a.Min >= *a.Max {
				return fmt.Errorf("figure %q: the axis %q runs from %v to %v", f.ID, a.Label, *a.Min, *a.Max)
			}
			if slices.ContainsFunc(a.Names, func(t exhibit.TickName) bool { return bent(t.At) }) {
				return fmt.Errorf("figure %q: the axis %q names no number", f.ID, a.Label)
			}
		}
		for _, l := range p.Lines {
			if bent(l.At) {
				return fmt.Errorf("figure %q: the line %q stands at no number", f.ID, l.Label)
			}
		}
		for _, q := range p.Points {
			if bent(q.X) || bent(q.Y) {
				return fmt.Errorf("figure %q: the point %q stands at no number", f.ID, q.Label)
			}
		}
	}
	return nil
}

func bent(v float64) bool { return math.IsNaN(v) || math.IsInf(v, 0) }

// from is values in a display unit.
func from(u quantity.Unit, si []float64) []float64 {
	out := make([]float64, len(si))
	for i, v := range si {
		out[i] = u.From(v)
	}
	return out
}

// named is an axis label with its unit: "period T, s".
func named(a exhibit.Axis) string {
	label, unit := clean(a.Label), a.Unit.Pretty()
	switch {
	case unit == "" || len(a.Names) > 0:
		return label
	case label == "":
		return unit
	}
	return label + ", " + unit
}
