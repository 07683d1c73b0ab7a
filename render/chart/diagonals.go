package chart

import (
	"math"
	"strings"

	"quoin/calc/exhibit"
)

// diagonals are the slanting grid lines of two log axes, named along themselves near
// their upper ends, where the names have room; those that have none are left out.
func (p *panel) diagonals() []curve {
	if !p.x.log || !p.y.log {
		return nil
	}
	var out []curve
	var taken [][3]float64 // centres of names, and half their widths, px
	names := map[int]*curve{}
	for i, g := range p.Diagonals {
		a, b, ok := p.clipped(g)
		if !ok {
			continue
		}
		c := p.base("line", p.id("~diagonal", i), 1)
		c.Symbol, c.Silent, c.Data = "none", true, points{a, b}
		c.LineStyle = &lineStyle{Color: rule, Width: 0.8}
		if strings.HasPrefix(strings.TrimLeft(g.Label, "0."), "1") {
			c.LineStyle.Color = soft // decades
		}
		out = append(out, c)
		if names[g.Rise] == nil {
			n := p.marks("~along", 2)
			n.Id, n.Rise = p.id("~along", g.Rise+1), g.Rise
			names[g.Rise] = &n
		}
		if q, ok := p.along(g, a, b, &taken); ok {
			spots, _ := names[g.Rise].Data.([]spot)
			names[g.Rise].Data = append(spots, q)
		}
	}
	for _, rise := range []int{1, -1} {
		if n := names[rise]; n != nil && n.Data != nil {
			out = append(out, *n)
		}
	}
	return out
}

// clipped is the ends of a diagonal at the frame, in display units, the left one first.
func (p *panel) clipped(g exhibit.Diagonal) (a, b [2]float64, ok bool) {
	x0, y0 := p.X.Unit.From(g.X), p.Y.Unit.From(g.Y)
	y := func(x float64) float64 { return y0 * math.Pow(x/x0, float64(g.Rise)) }
	x := func(y float64) float64 { return x0 * math.Pow(y/y0, float64(g.Rise)) } // its own inverse
	low, high := x(p.y.lo), x(p.y.hi)
	from, to := math.Max(p.x.lo, math.Min(low, high)), math.Min(p.x.hi, math.Max(low, high))
	return [2]float64{from, y(from)}, [2]float64{to, y(to)}, from < to*(1-1e-6)
}

// along places the name of a diagonal near its upper end.
func (p *panel) along(g exhibit.Diagonal, a, b [2]float64, taken *[][3]float64) (spot, bool) {
	at := func(q [2]float64) (x, y float64) { return p.x.at(q[0], p.width), p.y.at(q[1], p.height) }
	if g.Rise > 0 {
		a, b = b, a
	}
	name := clean(g.Label)
	half := textWidth(name, false)/2 + 3
	x0, y0 := at(a)
	x1, y1 := at(b)
	long := math.Hypot(x1-x0, y1-y0)
	for d := half + 4; d <= long-half && d < half+160; d += 12 {
		x, y := x0+(x1-x0)*d/long, y0+(y1-y0)*d/long
		free := true
		for _, t := range *taken {
			free = free && math.Hypot(x-t[0], y-t[1]) > half+t[2]
		}
		if !free {
			continue
		}
		*taken = append(*taken, [3]float64{x, y, half})
		share := func(a, b float64) float64 { return a * math.Pow(b/a, d/long) }
		return spot{Name: name, Value: numbers{share(a[0], b[0]), share(a[1], b[1])}, Label: spotLabel{Position: "inside", Align: "center", VAlign: "middle"}}, true
	}
	return spot{}, false
}
