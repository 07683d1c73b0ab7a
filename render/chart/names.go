package chart

import (
	"math"
	"strings"

	"github.com/go-echarts/go-echarts/v2/types"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// Names stand where the thing is: at a line, at a point, at the end of a curve.

// lineNames writes the names of the lines: of a vertical one at its top, beside it,
// of a horizontal one at the right, above it. Names that would meet take rows.
func (p *panel) lineNames() (curve, bool) {
	c := p.marks("~linename", 7)
	var spots []spot
	var taken [][3]float64 // from, to (px), row
	for _, l := range p.Lines {
		unit, s := p.Y.Unit, p.y
		if l.Vertical {
			unit, s = p.X.Unit, p.x
		}
		v := unit.From(l.At)
		text := valued(clean(l.Label), v, unit)
		if text == "" || !s.holds(v) {
			continue
		}
		if !l.Vertical {
			spots = append(spots, spot{Name: text, Value: numbers{p.x.hi, v}, Label: spotLabel{Position: "inside", Align: "right", VAlign: "bottom", Offset: numbers{-2, -2}}})
			continue
		}
		at, w := s.at(v, p.width), textWidth(text, false)+8
		right := at+w <= p.width || at < p.width/2
		a, b := at, at+w
		if !right {
			a, b = at-w, at
		}
		row := 0.0
		for again := true; again; {
			again = false
			for _, t := range taken {
				if t[2] == row && a < t[1] && b > t[0] {
					row, again = row+1, true
				}
			}
		}
		taken = append(taken, [3]float64{a, b, row})
		q := spotLabel{Position: "inside", Align: "left", VAlign: "top", Offset: numbers{5, 2 + row*leading}}
		if !right {
			q.Align, q.Offset[0] = "right", -5
		}
		spots = append(spots, spot{Name: text, Value: numbers{v, p.y.hi}, Label: q})
	}
	c.Data = spots
	return c, len(spots) > 0
}

// valued is the name of a line with its value, unless the name says it already.
func valued(name string, v float64, u quantity.Unit) string {
	unit := u.Pretty()
	if unit != "" && strings.HasSuffix(name, unit) || unit == "" && strings.ContainsAny(name, "0123456789") {
		return name
	}
	return strings.TrimSpace(name + " " + strings.TrimSpace(quantity.Format(v, 3)+" "+unit))
}

// rings draws the ringed points with their names, on the side that has room.
func (p *panel) rings() (curve, bool) {
	c := p.marks("~ring", 8)
	c.Symbol, c.SymbolSize = "circle", 7
	c.ItemStyle = &itemStyle{Color: paper, BorderColor: bad, BorderWidth: 1.5, Opacity: 1}
	c.Clip = false
	var spots []spot
	for _, q := range p.Points {
		x, y := p.X.Unit.From(q.X), p.Y.Unit.From(q.Y)
		if !p.x.holds(x) || !p.y.holds(y) {
			continue
		}
		name := clean(q.Label)
		w, at, down := textWidth(name, false), p.x.at(x, p.width), p.height-p.y.at(y, p.height)
		l := spotLabel{Position: "inside", Align: "left", VAlign: "middle", Offset: numbers{9, 0}}
		if at+w+9 > p.width && at > p.width/2 {
			l.Align, l.Offset[0] = "right", -9
		}
		// Away from the curve: a peak's name goes up, a trough's down, within the panel.
		shift := -5.0
		switch {
		case p.profile:
			shift = -10
		case p.y.lo < 0 && y < 0:
			shift = 5
		}
		l.Offset[1] = math.Max(9-down, math.Min(p.height-9-down, shift))
		spots = append(spots, spot{Name: name, Value: numbers{x, y}, Label: l})
	}
	c.Data = spots
	return c, len(spots) > 0
}

// marks is a series of named places without symbols.
func (p *panel) marks(what string, z int) curve {
	c := p.base(types.ChartScatter, p.id(what, 0), z)
	c.Symbol, c.SymbolSize, c.Silent = "circle", 0.01, true
	c.ItemStyle = &itemStyle{Color: ink, Opacity: 1}
	style := written(ink, false)
	style.BorderColor, style.BorderWidth = paper, 3
	c.Label = &label{Show: true, Formatter: "fn:name", textStyle: style}
	return c
}

// limits names the limits of a profile at their tops, beside the line.
func (p *panel) limits() []curve {
	var out []curve
	row := 0.0
	for i, s := range p.Series {
		name, d := clean(s.Label), p.data(s)
		if s.Role != exhibit.Limit || name == "" || len(d) == 0 {
			continue
		}
		c := p.marks("~limit", 7)
		c.Id, c.Name = p.id("~limit", i), name
		c.Label.Color, c.Label.Weight = bad, 600
		top := d[len(d)-1]
		l := spotLabel{Position: "inside", Align: "left", VAlign: "bottom", Offset: numbers{6, -2 - row*leading}}
		if at := p.x.at(top[0], p.width); at+textWidth(name, true)+8 > p.width && at > p.width/2 {
			l.Align, l.Offset[0] = "right", 6
		}
		c.Clip = false
		c.Data = []spot{{Name: name, Value: numbers{top[0], top[1]}, Label: l}}
		out, row = append(out, c), row+1
	}
	return out
}

// endLimit is the widest name at the end of a curve, in px: longer ones break.
const endLimit = 112

// ends names the curves at their right ends, moved apart where they would meet. A
// series each, of the curve's name, so that a name goes with its curve.
func (p *panel) ends() []curve {
	var kept []int
	var at, high []float64
	var texts [][]string
	for i, s := range p.Series {
		name := clean(s.Label)
		d := p.data(s)
		if name == "" || len(d) == 0 {
			continue
		}
		lines := wrap(name, endLimit, penOf(s).strong)
		_, y := p.lastSeen(d)
		kept, texts = append(kept, i), append(texts, lines)
		at = append(at, p.height-p.y.at(y, p.height))
		high = append(high, float64(len(lines))*leading)
	}
	places := spread(at, high, -8, p.height+8)
	var out []curve
	for k, i := range kept {
		s := p.Series[i]
		pen := penOf(s)
		x, y := p.lastSeen(p.data(s))
		c := p.marks("~end", 7)
		c.Id = p.id("~end", i)
		c.Name = clean(s.Label)
		c.Clip = false
		c.Label.Color = pen.color
		if pen.strong {
			c.Label.Weight = 600
		}
		c.Data = []spot{{Name: strings.Join(texts[k], "\n"), Value: numbers{x, y},
			Label: spotLabel{Position: "inside", Align: "left", VAlign: "middle", Offset: numbers{7, places[k] - at[k]}}}}
		out = append(out, c)
	}
	return out
}

// lastSeen is the last point of a curve within the limits of the axes.
func (p *panel) lastSeen(d points) (x, y float64) {
	for i := len(d) - 1; i >= 0; i-- {
		if p.x.holds(d[i][0]) {
			return d[i][0], math.Max(p.y.lo, math.Min(p.y.hi, d[i][1]))
		}
	}
	return p.x.hi, p.y.lo
}

// endWidth is the room that the names at the ends need, in px.
func (p *panel) endWidth() float64 {
	w := 0.0
	for _, s := range p.Series {
		strong := penOf(s).strong
		for _, line := range wrap(clean(s.Label), endLimit, strong) {
			if line != "" {
				w = math.Max(w, textWidth(line, strong)+10)
			}
		}
	}
	return w
}
