package block

import (
	"cmp"
	"math"
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// whatIf is what the runs of a vary block gave.
type whatIf struct {
	*vary
	names []varied
	base  []float64 // results as the document stands, SI
	units []quantity.Unit
	out   []Outcome // of all cases, name by name
	own   []Outcome // with the document's own values, a name each
}

// of is a result in the words of the document.
func (w *whatIf) of(j int) string { return cmp.Or(w.Of[j].Label.Text(), w.Of[j].Value.Written) }

// all is the results, named.
func (w *whatIf) all() string {
	var out []string
	for j := range w.Of {
		out = append(out, w.of(j))
	}
	return strings.Join(out, ", ")
}

// exports names what formulas can use; a run without a result is no item of it.
func (w *whatIf) exports(r *Run) {
	var x, y []float64
	failed := 0
	least, most := w.base[0], w.base[0]
	for _, v := range w.names {
		for i, at := range v.values {
			o := w.out[v.first+i]
			if o.Failed != "" {
				failed++
				continue
			}
			x, y = append(x, at), append(y, o.Values[0])
			least, most = math.Min(least, o.Values[0]), math.Max(most, o.Values[0])
		}
	}
	if len(w.names) == 1 && len(x) > 0 {
		r.Export("x", quantity.List(x, w.names[0].unit, nil))
		r.Export("y", quantity.List(y, w.units[0], nil))
	}
	r.Number("base", w.base[0], w.units[0])
	r.Number("least", least, w.units[0])
	r.Number("most", most, w.units[0])
	r.Number("count", float64(len(w.out)), pure)
	r.Number("failed", float64(failed), pure)
}

// row is the results of one case; why there are none goes to the notes of the table.
func (w *whatIf) row(t *exhibit.Table, o Outcome, at string, strong bool) []exhibit.Cell {
	if o.Failed != "" {
		t.Notes = append(t.Notes, "No result with "+at+": "+o.Failed)
	}
	var out []exhibit.Cell
	for j := range w.base {
		switch {
		case o.Failed != "":
			c := exhibit.Cell{Text: "no result"}
			if j == 0 {
				c.Mark = []int{len(t.Notes)}
			}
			out = append(out, c)
		default:
			c := Cell(o.Values[j], w.units[j])
			c.Strong = strong
			out = append(out, c)
		}
	}
	return append(out, exhibit.Cell{Text: verdicts(o)})
}

// verdicts is how the checks of a case came out.
func verdicts(o Outcome) string {
	if o.Failed != "" {
		return "none"
	}
	bad := 0
	for _, c := range o.Checks {
		if !c.OK {
			bad++
		}
	}
	switch {
	case len(o.Checks) == 0:
		return "none"
	case bad == 0:
		return "OK"
	}
	return quantity.Plain(float64(bad)) + " NOT OK"
}

func (w *whatIf) columns(heads ...exhibit.Column) []exhibit.Column {
	for j := range w.base {
		heads = append(heads, Col(w.of(j), w.units[j]))
	}
	return append(heads, Words("checks"))
}

// response shows results over the values of one name: a table with the document's
// own value among the others, and a panel a result.
func (w *whatIf) response(r *Run) {
	v := w.names[0]
	type line struct {
		x   float64
		o   Outcome
		own bool
	}
	lines := []line{{v.base.SI[0], w.own[0], true}}
	for i, x := range v.values {
		if x == v.base.SI[0] {
			continue // it is the document's own
		}
		lines = append(lines, line{x, w.out[i], false})
	}
	slices.SortStableFunc(lines, func(a, b line) int { return cmp.Compare(a.x, b.x) })
	t := exhibit.Table{ID: r.Name + "-response", Caption: Lines(&w.common, "What results come to with other values of "+v.name), Columns: w.columns(Col(v.name, v.unit), Words(""))}
	t.Notes = append([]string{"What-if results, no design values. In bold the value and the results that the document has."}, w.flips()...)
	for _, l := range lines {
		at := exhibit.Cell{Numbers: []exhibit.Number{{Value: l.x, Unit: v.unit, Digits: min(max(quantity.Digits, 1), quantity.Exact(v.unit.From(l.x)))}}, Strong: l.own}
		is := exhibit.Cell{Text: "varied"}
		if l.own {
			is = exhibit.Cell{Text: "document", Strong: true}
		}
		t.Rows = append(t.Rows, append([]exhibit.Cell{at, is}, w.row(&t, l.o, v.at(l.x), l.own)...))
	}
	f := exhibit.Figure{ID: r.Name + "-response-figure", Caption: Lines(&w.common, "Results over "+v.name+" (what if)"), Alt: w.all() + " against " + v.name + "; the value of the document is marked."}
	for j := range w.base {
		var x, y []float64
		for _, l := range lines {
			if l.o.Failed == "" {
				x, y = append(x, l.x), append(y, l.o.Values[j])
			}
		}
		id := r.Curve(w.of(j), x, v.unit, y, w.units[j])
		s := exhibit.FigSerie{ID: id, Label: w.of(j), X: x, Y: y, Role: exhibit.Data, Dots: len(x) <= mostDots}
		f.Panels = append(f.Panels, exhibit.Panel{X: exhibit.Axis{Label: v.name, Unit: v.unit}, Y: exhibit.Axis{Label: w.of(j), Unit: w.units[j]}, Series: []exhibit.FigSerie{s},
			Lines: []exhibit.RefLine{{Vertical: true, At: v.base.SI[0], Label: "document"}}})
	}
	if len(f.Panels[0].Series[0].X) > 1 {
		r.Figure(f)
	}
	r.Table(t)
}

// reach is the least and the greatest result of one name, and where they are.
type reach struct {
	varied
	low, high   float64
	atLow, atHi float64
}

// spans are the names by how far they move result j, the longest first.
func (w *whatIf) spans(j int) []reach {
	var out []reach
	for _, v := range w.names {
		s := reach{v, w.base[j], w.base[j], v.base.SI[0], v.base.SI[0]}
		for i, x := range v.values {
			o := w.out[v.first+i]
			if o.Failed != "" {
				continue
			}
			if y := o.Values[j]; y < s.low {
				s.low, s.atLow = y, x
			} else if y > s.high {
				s.high, s.atHi = y, x
			}
		}
		out = append(out, s)
	}
	slices.SortStableFunc(out, func(a, b reach) int { return cmp.Compare(b.high-b.low, a.high-a.low) })
	return out
}

// curve is the series of result j over the values of a name that gave one.
func (w *whatIf) curve(r *Run, j int, v varied) string {
	var x, y []float64
	for i, at := range v.values {
		if o := w.out[v.first+i]; o.Failed == "" {
			x, y = append(x, at), append(y, o.Values[j])
		}
	}
	if len(x) == 0 {
		return ""
	}
	return r.Curve(w.of(j)+"@"+v.name, x, v.unit, y, w.units[j])
}

// tornado shows names varied one at a time: a table of all cases, and for each
// result bars from its least to its greatest value, the longest on top.
func (w *whatIf) tornado(r *Run) {
	t := exhibit.Table{ID: r.Name + "-cases", Caption: Lines(&w.common, "What results come to with one value changed at a time"), Columns: w.columns(Words("name"), exhibit.Column{Head: "value", Right: true})}
	t.Notes = append([]string{"What-if results, no design values. The first row is the document as it stands; in each other row one name has another value."}, w.flips()...)
	t.Rows = append(t.Rows, append([]exhibit.Cell{{Text: "document", Strong: true}, {Text: "as it stands"}}, w.row(&t, Outcome{Values: w.base, Checks: w.own[0].Checks}, "", true)...))
	for _, s := range w.spans(0) {
		for i, x := range s.values {
			at := exhibit.Cell{Numbers: []exhibit.Number{{Value: x, Unit: s.unit, Digits: min(quantity.Digits, quantity.Exact(s.unit.From(x)))}}}
			t.Rows = append(t.Rows, append([]exhibit.Cell{{Text: s.name}, at}, w.row(&t, w.out[s.first+i], s.at(x), false)...))
		}
	}
	for j := range w.base {
		spans := w.spans(j)
		n := len(spans)
		p := exhibit.Panel{X: exhibit.Axis{Label: w.of(j), Unit: w.units[j]}, Y: exhibit.Axis{Label: "varied", Min: end(0.4), Max: end(float64(n) + 0.6)},
			Lines: []exhibit.RefLine{{Vertical: true, At: w.base[j], Label: "document"}}}
		for i, s := range spans {
			y := float64(n - i)
			p.Y.Names = append(p.Y.Names, exhibit.TickName{At: y, Name: s.name})
			id := w.curve(r, j, s.varied)
			if s.high == s.low {
				continue
			}
			p.Series = append(p.Series, exhibit.FigSerie{ID: id, Label: s.name, X: []float64{s.low, s.high}, Y: []float64{y, y}, Role: exhibit.Governing})
			ends := []struct{ x, v float64 }{{s.low, s.atLow}, {s.high, s.atHi}}
			if s.high-s.low < 0.1*(spans[0].high-spans[0].low) { // two labels would lie over one another
				further := 0
				if s.high-w.base[j] >= w.base[j]-s.low {
					further = 1
				}
				ends = ends[further : further+1]
			}
			for _, e := range ends {
				if e.x != w.base[j] {
					p.Points = append(p.Points, exhibit.RefPoint{X: e.x, Y: y, Label: s.shown(e.v) + " gives " + quantity.Short(w.units[j].From(e.x))})
				}
			}
		}
		slices.Reverse(p.Y.Names)
		if len(p.Series) > 0 {
			r.Figure(exhibit.Figure{ID: r.Name + "-tornado-" + quantity.Plain(float64(j+1)), Caption: Lines(&w.common, "How far "+w.of(j)+" moves with one value changed at a time (what if), the strongest on top"), Panels: []exhibit.Panel{p},
				Alt: "Bars from the least to the greatest " + w.of(j) + " for each name varied; the value of the document is marked."})
		}
	}
	r.Table(t)
}

func end(x float64) *float64 { return &x }
