package chart

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// mostRows is about how many rows of values stand beside a figure; the extremes of
// every curve may add a few.
const mostRows = 40

// Values is the figure in numbers, for those who cannot see it: a table a panel.
type Values struct {
	Tables []ValueTable
	// Marked is what the figure names beside its curves: lines and ringed points.
	Marked []string
	// Left tells that rows are left out; Between that values between two points of a
	// curve are read off its line, and begin with ≈.
	Left, Between bool
	Stepped       bool // a value holds from the place before it to its own
}

// ValueTable is one panel: what its curves stand over, and a column a curve.
type ValueTable struct {
	Title string
	Heads []string
	Rows  [][]string
}

// ValuesOf is the values of a figure that [Option] can draw.
func ValuesOf(f exhibit.Figure) Values {
	var out Values
	for _, p := range f.Panels {
		t := valueTable(p, &out)
		if t.Title = clean(p.Title); t.Title == "" && len(f.Panels) > 1 {
			t.Title = named(p.Y)
		}
		out.Tables = append(out.Tables, t)
		for _, l := range p.Lines {
			unit := p.Y.Unit
			if l.Vertical {
				unit = p.X.Unit
			}
			out.Marked = append(out.Marked, valued(clean(l.Label), unit.From(l.At), unit))
		}
		for _, q := range p.Points {
			out.Marked = append(out.Marked, clean(q.Label))
		}
	}
	out.Marked = slices.DeleteFunc(out.Marked, func(s string) bool { return s == "" })
	return out
}

// column is the curves of one name in a panel: strokes across, one a level, are one
// quantity.
type column struct {
	head   string
	curves []valueCurve
}

// valueCurve is a curve in display units: over runs, value follows.
type valueCurve struct {
	over, value []float64
	step        bool
}

func valueTable(p exhibit.Panel, v *Values) ValueTable {
	base, value := p.X, p.Y
	upright := profile(p)
	if upright {
		base, value = p.Y, p.X
	}
	if barred(p) {
		return bars(p)
	}
	var columns []column
	runs := true
	for _, s := range p.Series {
		c := valueCurve{from(p.X.Unit, s.X), from(p.Y.Unit, s.Y), s.Step}
		if upright {
			c.over, c.value = c.value, c.over
			if len(s.Y) == 2 && s.Y[0] == s.Y[1] { // a stroke across says its end
				c.over, c.value = c.over[1:], c.value[1:]
			}
		}
		v.Stepped = v.Stepped || s.Step
		runs = runs && slices.IsSorted(c.over)
		head := clean(s.Label)
		switch unit := value.Unit.Pretty(); {
		case head == "":
			head = named(value)
		case unit != "":
			head += ", " + unit
		}
		if i := slices.IndexFunc(columns, func(k column) bool { return k.head == head && s.Label == "" }); i >= 0 {
			columns[i].curves = append(columns[i].curves, c)
		} else {
			columns = append(columns, column{head, []valueCurve{c}})
		}
	}
	if !runs {
		return pairs(p, v)
	}
	places := rowsOf(p, base, columns, upright, v)
	t := ValueTable{Heads: []string{named(base)}}
	for _, c := range columns {
		t.Heads = append(t.Heads, c.head)
	}
	for _, at := range places {
		row := []string{placeName(base, at)}
		for _, c := range columns {
			row = append(row, c.at(at, v))
		}
		t.Rows = append(t.Rows, row)
	}
	return t
}

// rowsOf chooses the places of the rows: all where they are few, else the ends and
// the largest value of every curve, and others evenly along the axis as it is drawn.
func rowsOf(p exhibit.Panel, base exhibit.Axis, columns []column, upright bool, v *Values) []float64 {
	var all, must []float64
	for _, c := range columns {
		for _, k := range c.curves {
			all = append(all, k.over...)
			must = append(must, k.over[0], k.over[len(k.over)-1], k.over[largest(k.value)])
		}
	}
	slices.Sort(all)
	if all = slices.Compact(all); len(all) <= mostRows {
		return all
	}
	v.Left = true
	scale := func(x float64) float64 { return x }
	if base.Log && all[0] > 0 {
		scale = math.Log
	}
	lo, hi := scale(all[0]), scale(all[len(all)-1])
	near := func(want float64) float64 {
		i, _ := slices.BinarySearchFunc(all, want, func(x, w float64) int {
			if scale(x) < w {
				return -1
			}
			return 1
		})
		i = min(i, len(all)-1)
		if i > 0 && want-scale(all[i-1]) < scale(all[i])-want {
			i--
		}
		return all[i]
	}
	for _, q := range p.Points {
		at := p.X.Unit.From(q.X)
		if upright {
			at = p.Y.Unit.From(q.Y)
		}
		if at >= all[0] && at <= all[len(all)-1] {
			must = append(must, near(scale(at)))
		}
	}
	slices.Sort(must)
	rows := slices.Compact(must)
	for n, k := max(mostRows-len(rows), 8), 0; k < n; k++ {
		rows = append(rows, near(lo+(hi-lo)*(float64(k)+0.5)/float64(n)))
	}
	slices.Sort(rows)
	return slices.Compact(rows)
}

// largest is the place of the value that lies farthest from zero.
func largest(values []float64) int {
	at := 0
	for i, v := range values {
		if math.Abs(v) > math.Abs(values[at]) {
			at = i
		}
	}
	return at
}

// at is the value of a column at a place: at points of its own their values, where
// it jumps both; between two points what the line shows.
func (c column) at(x float64, v *Values) string {
	var texts []string
	for _, k := range c.curves {
		i, found := slices.BinarySearch(k.over, x)
		if found {
			for ; i < len(k.over) && k.over[i] == x; i++ {
				if text := quantity.Format(k.value[i], 4); !slices.Contains(texts, text) {
					texts = append(texts, text)
				}
			}
		} else if i > 0 && i < len(k.over) && !k.step {
			t := (x - k.over[i-1]) / (k.over[i] - k.over[i-1])
			texts = append(texts, "≈\u2009"+quantity.Format(k.value[i-1]+t*(k.value[i]-k.value[i-1]), 3))
			v.Between = true
		}
	}
	return strings.Join(texts, " / ")
}

// placeName is a place of the running axis: its name, where it has one.
func placeName(a exhibit.Axis, at float64) string {
	for _, n := range a.Names {
		if a.Unit.From(n.At) == at {
			return clean(n.Name)
		}
	}
	return quantity.Format(at, 4)
}

// bars is the table of a panel of bars: a row a bar, its name and ends.
func bars(p exhibit.Panel) ValueTable {
	t := ValueTable{Heads: []string{clean(p.Y.Label), "from: " + named(p.X), "to: " + named(p.X)}}
	for _, s := range p.Series {
		if s.Role != exhibit.Bar {
			continue
		}
		name := placeName(p.Y, p.Y.Unit.From(s.Y[0]))
		t.Rows = append(t.Rows, []string{name, quantity.Format(p.X.Unit.From(s.X[0]), 4), quantity.Format(p.X.Unit.From(s.X[1]), 4)})
	}
	return t
}

// pairs is the table of curves that run back and forth: two columns a curve, in
// order of their points.
func pairs(p exhibit.Panel, v *Values) ValueTable {
	var t ValueTable
	var curves []exhibit.FigSerie
	rows := 0
	for _, s := range p.Series {
		every := (len(s.X) + mostRows - 1) / mostRows
		keep := []int{largest(s.X), largest(s.Y), len(s.X) - 1}
		v.Left = v.Left || every > 1
		k := exhibit.FigSerie{}
		for i := range s.X {
			if i%every == 0 || slices.Contains(keep, i) {
				k.X, k.Y = append(k.X, p.X.Unit.From(s.X[i])), append(k.Y, p.Y.Unit.From(s.Y[i]))
			}
		}
		curves, rows = append(curves, k), max(rows, len(k.X))
		for _, a := range []exhibit.Axis{p.X, p.Y} {
			t.Heads = append(t.Heads, strings.TrimPrefix(fmt.Sprintf("%s: %s", clean(s.Label), named(a)), ": "))
		}
	}
	for i := range rows {
		var row []string
		for _, k := range curves {
			if i < len(k.X) {
				row = append(row, quantity.Format(k.X[i], 4), quantity.Format(k.Y[i], 4))
			} else {
				row = append(row, "", "")
			}
		}
		t.Rows = append(t.Rows, row)
	}
	return t
}
