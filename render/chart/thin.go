package chart

import (
	"math"
	"slices"
	"strings"
	"unicode"

	"quoin/calc/exhibit"
)

// A figure is drawn from what a reader can see of it: names of a length that a
// chart has room for, curves of no more points than there are places for. The
// tables keep every name and every value.

const (
	longest = 60   // characters of a name in a chart
	crowded = 4000 // points of a curve: longer ones are thinned
	columns = 1000 // stretches of the running axis that a thinned curve is cut into
)

// drawable is a figure with names and curves cut to what is drawn. Nothing of f changes.
func drawable(f exhibit.Figure) exhibit.Figure {
	f.Panels = slices.Clone(f.Panels)
	for i := range f.Panels {
		p := &f.Panels[i]
		p.Title = clip(p.Title)
		for _, a := range []*exhibit.Axis{&p.X, &p.Y} {
			a.Label, a.Names = clip(a.Label), slices.Clone(a.Names)
			for k := range a.Names {
				a.Names[k].Name = clip(a.Names[k].Name)
			}
		}
		p.Series, p.Lines, p.Points = slices.Clone(p.Series), slices.Clone(p.Lines), slices.Clone(p.Points)
		for k := range p.Lines {
			p.Lines[k].Label = clip(p.Lines[k].Label)
		}
		for k := range p.Points {
			p.Points[k].Label = clip(p.Points[k].Label)
		}
		for k := range p.Series {
			p.Series[k] = thin(*p, p.Series[k])
			p.Series[k].Label = clip(p.Series[k].Label)
		}
	}
	return f
}

// thinned tells whether a curve of a figure lost points on its way to what is drawn.
func thinned(whole, drawn exhibit.Figure) bool {
	for i, p := range whole.Panels {
		for k, s := range p.Series {
			if len(drawn.Panels[i].Series[k].X) < len(s.X) {
				return true
			}
		}
	}
	return false
}

// clip shortens a name from its middle: names that belong together often differ at
// their ends.
func clip(s string) string {
	if len(s) <= longest {
		return s
	}
	runes := []rune(clean(s))
	if len(runes) <= longest {
		return string(runes)
	}
	const tail = 19
	end := strings.TrimLeftFunc(string(runes[len(runes)-tail:]), unicode.IsMark)
	return strings.TrimRight(string(runes[:longest-tail-1]), " ") + "…" + strings.TrimLeft(end, " ")
}

// thin keeps of a long curve, in each column of the running axis, the first and the
// last point and the lowest and the highest: the line looks the same, and no peak is
// lost. A curve that runs along neither axis is cut by number of points, and keeps
// the extremes of both. Points at and beside the ringed ones stay.
func thin(p exhibit.Panel, s exhibit.FigSerie) exhibit.FigSerie {
	n := len(s.X)
	if n <= crowded {
		return s
	}
	run, axis, ring := s.X, p.X, func(q exhibit.RefPoint) float64 { return q.X }
	along := slices.IsSorted(s.X)
	if !along && slices.IsSorted(s.Y) {
		run, axis, ring = s.Y, p.Y, func(q exhibit.RefPoint) float64 { return q.Y }
		along = true
	}
	keep := make([]bool, n)
	extremes := func(from, to int, values []float64, log bool) {
		low, high := -1, -1
		for i := from; i < to; i++ {
			if log && values[i] <= 0 { // not drawn
				continue
			}
			if low < 0 || values[i] < values[low] {
				low = i
			}
			if high < 0 || values[i] > values[high] {
				high = i
			}
		}
		if low >= 0 {
			keep[low], keep[high] = true, true
		}
	}
	column := func(i int) int { return i * (columns / 2) / n }
	if along {
		column = columnOf(run, axis)
	}
	for from := 0; from < n; {
		to := from + 1
		for to < n && column(to) == column(from) {
			to++
		}
		keep[from], keep[to-1] = true, true
		extremes(from, to, s.Y, p.Y.Log)
		extremes(from, to, s.X, p.X.Log)
		from = to
	}
	for _, q := range p.Points {
		if along {
			i, _ := slices.BinarySearch(run, ring(q))
			for k := max(i-1, 0); k <= min(i+1, n-1); k++ {
				keep[k] = true
			}
		}
		for i := range s.X {
			if s.X[i] == q.X && s.Y[i] == q.Y {
				keep[i] = true
			}
		}
	}
	var x, y []float64
	for i, k := range keep {
		if k {
			x, y = append(x, s.X[i]), append(y, s.Y[i])
		}
	}
	s.X, s.Y = x, y
	return s
}

// columnOf tells in which column of the axis a point of a curve lies; what lies
// beyond the limits of the axis is one column at either side.
func columnOf(run []float64, axis exhibit.Axis) func(i int) int {
	scale := func(v float64) float64 { return v }
	if axis.Log {
		scale = math.Log
	}
	lo, hi := run[0], run[len(run)-1]
	if axis.Log && lo <= 0 {
		i, _ := slices.BinarySearch(run, math.SmallestNonzeroFloat64)
		lo = run[min(i, len(run)-1)]
	}
	if axis.Min != nil {
		lo = math.Max(lo, *axis.Min)
	}
	if axis.Max != nil {
		hi = math.Min(hi, *axis.Max)
	}
	return func(i int) int {
		switch v := run[i]; {
		case v < lo, axis.Log && v <= 0:
			return -1
		case v > hi:
			return columns
		case hi == lo:
			return 0
		default:
			return min(int(columns*(scale(v)-scale(lo))/(scale(hi)-scale(lo))), columns-1)
		}
	}
}
