package chart

import (
	"slices"
	"strconv"

	"github.com/go-echarts/go-echarts/v2/charts"
	"github.com/go-echarts/go-echarts/v2/types"

	"quoin/calc/exhibit"
)

// panel is one pair of axes, measured.
type panel struct {
	exhibit.Panel
	index   int
	profile bool // the value runs along x, the height along y
	x, y    span
	height  float64 // px
	width   float64 // px, about: for choosing sides only
	names   bool    // curves are named at their ends
}

// profile tells whether the height is the running variable: x does not increase
// from point to point in every series, but y never falls.
func profile(p exhibit.Panel) bool {
	function := true
	for _, s := range p.Series {
		for i := 1; i < len(s.X); i++ {
			function = function && s.X[i] >= s.X[i-1]
			if s.Y[i] < s.Y[i-1] {
				return false
			}
		}
	}
	if !function {
		return true
	}
	if barred(p) {
		return false
	}
	// Both rise: it is a profile if some value stays while the height runs (a limit),
	// or if the heights have names.
	if len(p.Y.Names) > 0 {
		return true
	}
	return slices.ContainsFunc(p.Series, func(s exhibit.FigSerie) bool {
		return len(s.X) > 1 && s.X[0] == s.X[len(s.X)-1] && s.Y[0] != s.Y[len(s.Y)-1]
	})
}

// data is the points of a series in display units, steps written out, without
// points that a logarithmic axis cannot show.
func (p *panel) data(s exhibit.FigSerie) points {
	xs, ys := from(p.X.Unit, s.X), from(p.Y.Unit, s.Y)
	out := make(points, 0, len(xs))
	add := func(x, y float64) {
		if (!p.x.log || x > 0) && (!p.y.log || y > 0) {
			out = append(out, [2]float64{x, y})
		}
	}
	for i := range xs {
		switch {
		case !s.Step:
			add(xs[i], ys[i])
		case p.profile:
			if i > 0 {
				add(xs[i], ys[i-1])
			} else if p.Y.Min != nil && p.y.lo < ys[0] {
				add(xs[0], p.y.lo)
			}
			add(xs[i], ys[i])
		default:
			if i > 0 {
				add(xs[i-1], ys[i])
			}
			add(xs[i], ys[i])
		}
	}
	return out
}

// curves is all that stands between the axes, and what the names at the ends need
// of the right margin.
func (p *panel) curves() []curve {
	var out []curve
	if p.X.Symmetric || p.Y.Symmetric {
		out = append(out, p.zero())
	}
	out = append(out, p.diagonals()...)
	for i, s := range p.Series {
		out = append(out, p.curve(i, s))
		if s.Dash >= 4 && !s.Dots {
			out = append(out, p.marked(i, s))
		}
	}
	for _, l := range p.Lines {
		out = append(out, p.line(len(out), l))
	}
	if c, ok := p.lineNames(); ok {
		out = append(out, c)
	}
	if c, ok := p.rings(); ok {
		out = append(out, c)
	}
	if p.names {
		out = append(out, p.ends()...)
	} else {
		out = append(out, p.limits()...)
	}
	return out
}

func (p *panel) base(kind, id string, z int) curve {
	return curve{
		SingleSeries: charts.SingleSeries{Type: kind, Id: id, XAxisIndex: p.index, YAxisIndex: p.index},
		Clip:         true, Z: z, Emphasis: switched{Disabled: true},
	}
}

// id names a part of the panel; those that begin with ~ are no data.
func (p *panel) id(what string, i int) string {
	return what + strconv.Itoa(p.index) + "." + strconv.Itoa(i)
}

func (p *panel) curve(i int, s exhibit.FigSerie) curve {
	pen := penOf(s)
	c := p.base(types.ChartLine, p.id("s", i), pen.z)
	c.Name = clean(s.Label)
	c.Data = pack(p.data(s), p.x.log, p.y.log)
	c.Symbol, c.ShowSymbol = "none", off()
	if s.Dots {
		c.Symbol, c.SymbolSize, c.ShowSymbol = dots[min(s.Dash, len(dots)-1)], 6, on()
	}
	c.LineStyle = &lineStyle{Color: pen.color, Width: pen.width, Join: "round"}
	if pen.dash != nil {
		c.LineStyle.Type = pen.dash
	}
	c.ItemStyle = &itemStyle{Color: pen.color, Opacity: 1}
	if len(s.X) > 1000 && !p.profile {
		c.Sampling = "minmax"
	}
	if barred(p.Panel) { // a bar has no values at the pointer
		c.Id, c.Silent = p.id("~bar", i), true
		c.LineStyle.Cap = "butt"
	}
	c.Units = []string{p.X.Unit.Pretty(), p.Y.Unit.Pretty()}
	c.Axis = clean(p.Y.Label)
	if p.profile {
		c.Axis = clean(p.X.Label)
	}
	return c
}

// barred tells whether a panel holds bars, one a row.
func barred(p exhibit.Panel) bool { return len(p.Series) > 0 && p.Series[0].Role == exhibit.Bar }

// marked is the marks along a curve whose dash another has too, at even steps of the
// axis: rings, or crosses for the second such dash.
func (p *panel) marked(i int, s exhibit.FigSerie) curve {
	c := p.base(types.ChartScatter, p.id("~mark", i), penOf(s).z)
	c.Name, c.Silent = clean(s.Label), true
	c.Symbol, c.SymbolSize = "circle", 6
	if s.Dash > 4 {
		c.Symbol = cross
	}
	c.ItemStyle = &itemStyle{Color: paper, BorderColor: penOf(s).color, BorderWidth: 1.2, Opacity: 1}
	const count = 9
	at, next := points{}, 0
	for _, q := range p.data(s) {
		if x := p.x.at(q[0], p.width); p.x.holds(q[0]) && x >= (float64(next)+0.5)*p.width/count {
			at = append(at, q)
			next = int(x*count/p.width + 0.5)
		}
	}
	c.Data = at
	return c
}

// zero is the line of rest of a symmetric axis.
func (p *panel) zero() curve {
	c := p.base(types.ChartLine, p.id("~zero", 0), 1)
	c.Data = points{{p.x.lo, 0}, {p.x.hi, 0}}
	if p.X.Symmetric {
		c.Data = points{{0, p.y.lo}, {0, p.y.hi}}
	}
	c.Symbol, c.Silent = "none", true
	c.LineStyle = &lineStyle{Color: soft, Width: 0.8}
	return c
}

func (p *panel) line(i int, l exhibit.RefLine) curve {
	c := p.base(types.ChartLine, p.id("~line", i), 4)
	c.Symbol, c.Silent = "none", true
	if l.Vertical {
		at := p.X.Unit.From(l.At)
		c.Data = points{{at, p.y.lo}, {at, p.y.hi}}
	} else {
		at := p.Y.Unit.From(l.At)
		c.Data = points{{p.x.lo, at}, {p.x.hi, at}}
	}
	c.LineStyle = &lineStyle{Color: bad, Width: 1.2, Type: []float64{2, 3}}
	return c
}
