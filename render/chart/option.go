// Package chart turns figures into pictures: one definition, the chart option, gives
// the chart a reader can work with and the static picture for print and for pages
// without scripts. Options hold no code; all text in them is plain text.
package chart

import (
	"encoding/json"
	"math"
	"slices"

	"github.com/go-echarts/go-echarts/v2/charts"
	"github.com/go-echarts/go-echarts/v2/opts"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// Widths in px for which static pictures are drawn: a sheet's column, a phone's.
const (
	Wide   = 700
	Narrow = 380
)

// Option is the chart option of a figure as JSON that may stand inside HTML, with
// the height in px that it is laid out for. It suits every width. A figure that
// cannot be drawn (no panel, no data, NaN) is an error.
//
// A Step series holds the value of point i from point i−1 to point i; in a profile
// with a lower limit of y the first value also holds from that limit up.
func Option(f exhibit.Figure) (option []byte, height int, err error) {
	if err := check(f); err != nil {
		return nil, 0, err
	}
	whole := f
	f = drawable(f)
	panels := measure(f)
	v := &visitor{pointer: "x", beside: f.Beside, fixed: slices.ContainsFunc(panels, func(p *panel) bool { return len(p.Diagonals) > 0 }), curves: []curve{}, headings: []heading{}}
	if panels[0].profile {
		v.pointer = "y"
	}
	v.thinned = thinned(whole, f)
	height = layout(f, panels, v)
	for _, p := range panels {
		v.curves = append(v.curves, p.curves()...)
	}
	c := charts.NewLine()
	c.SetGlobalOptions(charts.WithAnimation(false))
	c.Accept(v)
	c.Validate()
	option, err = json.Marshal(c.JSON()) // keys sorted; <, >, &, U+2028 escaped
	return option, height, err
}

// measure finds what kind each panel is, its size and the limits of its axes.
func measure(f exhibit.Figure) []*panel {
	out := make([]*panel, len(f.Panels))
	n := len(f.Panels)
	for i, q := range f.Panels {
		p := &panel{Panel: q, index: i, profile: profile(q), width: Wide - 160}
		switch {
		case f.Beside:
			p.height, p.width = 280, float64(Wide-60)/float64(n)-24
		case p.profile:
			p.height = 300
		case q.Y.Symmetric && n == 1:
			p.height = 130
		case q.Y.Symmetric:
			p.height = 96
		case barred(q):
			p.height = 34*float64(len(p.Y.Names)) + 8
		case n == 1:
			p.height = 280
		default:
			p.height = 170
		}
		xFit, yFit := tight, rounded
		if p.profile {
			xFit, yFit = rounded, level
		}
		var xs, ys []float64
		for _, s := range q.Series {
			xs, ys = append(xs, from(q.X.Unit, s.X)...), append(ys, from(q.Y.Unit, s.Y)...)
		}
		for _, r := range q.Points {
			ys = append(ys, q.Y.Unit.From(r.Y))
		}
		for _, l := range q.Lines { // an axis of values holds its lines
			switch {
			case !l.Vertical:
				ys = append(ys, q.Y.Unit.From(l.At))
			case xFit != tight:
				xs = append(xs, q.X.Unit.From(l.At))
			}
		}
		p.x, p.y = spanOf(q.X, xs, xFit, p.width), spanOf(q.Y, ys, yFit, p.height)
		if len(q.Diagonals) > 0 && p.x.log && p.y.log { // decades of one length: diagonals at 45°
			p.height = min(max(p.width*math.Log(p.y.hi/p.y.lo)/math.Log(p.x.hi/p.x.lo), 260), 440)
		}
		p.headroom()
		out[i] = p
	}
	// Panels share the running axis where it is the same one.
	if shared(f, !f.Beside) {
		x, y := out[0].x, out[0].y
		for _, p := range out {
			x, y = x.join(p.x), y.join(p.y)
		}
		for _, p := range out {
			if f.Beside {
				p.y = y
			} else {
				p.x = x
			}
		}
	}
	for _, p := range out {
		p.names = !f.Beside && !p.profile
	}
	return out
}

// shared tells whether all panels have the same x axis (or y axis).
func shared(f exhibit.Figure, x bool) bool {
	pick := func(p exhibit.Panel) exhibit.Axis {
		if x {
			return p.X
		}
		return p.Y
	}
	first := pick(f.Panels[0])
	return !slices.ContainsFunc(f.Panels, func(p exhibit.Panel) bool {
		a := pick(p)
		return a.Label != first.Label || a.Unit != first.Unit || a.Log != first.Log
	})
}

// layout places grids, axes and headings, and gives the height of all.
func layout(f exhibit.Figure, panels []*panel, v *visitor) int {
	at := 4.0
	right := 14.0
	for _, p := range panels {
		if p.names {
			right = math.Max(right, p.endWidth()+4)
		} else if p.index == len(panels)-1 && p.x.hi != 0 {
			// Half of the number at the end of the axis.
			right = math.Max(right, textWidth(quantity.Format(p.x.hi, 3), false)/2+4)
		}
	}
	v.legend = opts.Legend{Show: off()}
	if key := keyOf(panels); key != nil {
		v.legend, at = key, at+24
	}
	oneX, oneY := shared(f, true), shared(f, false)
	if f.Beside {
		titles := slices.ContainsFunc(panels, func(p *panel) bool { return p.Title != "" })
		if titles {
			for _, p := range panels {
				if t := clean(p.Title); t != "" {
					v.headings = append(v.headings, heading{Text: t, Top: at, Style: written(ink, true), Panel: p.index, Over: "plot"})
				}
			}
			at += leading + 4
			if len(panels) > 2 {
				at += leading // room for a title that breaks
			}
		}
		for _, p := range panels {
			name := named(p.Y)
			if name != "" && (p.index == 0 || !oneY) {
				h := heading{Text: name, Top: at, Style: written(ink, false), Panel: p.index}
				if p.index > 0 {
					h.Over = "plot"
				}
				v.headings = append(v.headings, h)
			}
		}
		at += leading + 8
	}
	bottom := 0.0
	for _, p := range panels {
		if !f.Beside {
			if t := clean(p.Title); t != "" {
				v.headings = append(v.headings, heading{Text: t, Top: at, Style: written(ink, true), Panel: p.index})
				at += leading + 3
			}
			if name := named(p.Y); name != "" {
				v.headings = append(v.headings, heading{Text: name, Top: at, Style: written(ink, false), Panel: p.index})
				at += leading + 8
			}
		}
		last := p.index == len(panels)-1
		v.grids = append(v.grids, gridBox{Top: at, Height: p.height, Right: right, Bounds: "none"})
		v.x = append(v.x, p.xAxis(f.Beside || last || !oneX, f.Beside && oneX))
		v.y = append(v.y, p.yAxis(!f.Beside || p.index == 0 || !oneY))
		bottom = at + p.height
		switch {
		case f.Beside:
		case last:
			at = bottom
		case oneX:
			at = bottom + 14
		default:
			at = bottom + 46
		}
	}
	if f.Beside && oneX {
		v.headings = append(v.headings, heading{Text: named(panels[0].X), Top: bottom + 24, Align: "center", Style: written(ink, false), Panel: -1})
	}
	foot := 44.0
	if f.Beside && !oneX && len(panels) > 2 {
		foot += leading // names that break
	}
	return int(bottom + foot)
}

// keyOf is the key above panels whose curves have no right end to be named at, where
// a panel has several curves. Limits are named where they stand.
func keyOf(panels []*panel) any {
	var names []any
	seen := map[string]bool{}
	several := false
	for _, p := range panels {
		if p.names {
			return nil
		}
		curves := 0
		for _, s := range p.Series {
			if s.Role == exhibit.Limit {
				continue
			}
			curves++
			several = several || curves > 1
			if name := clean(s.Label); name != "" && !seen[name] {
				seen[name] = true
				names = append(names, map[string]any{"name": name})
			}
		}
	}
	if !several || len(names) == 0 {
		return nil
	}
	return map[string]any{
		"show": true, "data": names, "top": 0, "itemWidth": 34, "itemHeight": 8, "itemGap": 16, "padding": []int{3, 5}, "selectedMode": false,
		"textStyle": written(ink, false), "inactiveColor": rule, "itemStyle": map[string]any{"opacity": 0},
	}
}
