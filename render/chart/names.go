package chart

import (
	"math"
	"slices"
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
	rows := p.lineRows()
	for i, l := range p.Lines {
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
			continue
		}
		q := spotLabel{Position: "inside", Align: "left", VAlign: "top", Offset: numbers{5, 2 + float64(rows[i].row)*leading}}
		if !rows[i].right {
			q.Align, q.Offset[0] = "right", -5
		}
		at, y := p.y.hi, p.clear(q.Offset[1], true)
		q.Offset[1] = y
		if top := p.height - y; p.crossed(rows[i].from, rows[i].to, top-leading, top) && !p.crossed(rows[i].from, rows[i].to, y, y+leading) {
			y = p.clear(2+float64(rows[i].row)*leading, false)
			at, q.VAlign, q.Offset[1] = p.y.lo, "bottom", -y
		}
		spots = append(spots, spot{Name: text, Value: numbers{v, at}, Label: q})
	}
	spots = append(spots, p.levelNames()...)
	c.Data = spots
	return c, len(spots) > 0
}

// clear is y px from the top or from the bottom, or as much more as a line of text needs
// to keep off the horizontal lines.
func (p *panel) clear(y float64, top bool) float64 {
	for range p.Lines {
		for _, l := range p.Lines {
			if l.Vertical || !p.y.holds(p.Y.Unit.From(l.At)) {
				continue
			}
			at := p.y.at(p.Y.Unit.From(l.At), p.height)
			if top {
				at = p.height - at
			}
			if at > y-1 && at < y+leading-2 {
				y = at + 1
			}
		}
	}
	return y
}

// levelNames are the names of the horizontal lines: above them at the right, or at the
// left where a curve runs there; moved apart where lines lie close.
func (p *panel) levelNames() []spot {
	var sides [2][]spot // right, left
	var at, high [2][]float64
	for _, l := range p.Lines {
		v := p.Y.Unit.From(l.At)
		text := valued(clean(l.Label), v, p.Y.Unit)
		if l.Vertical || text == "" || !p.y.holds(v) {
			continue
		}
		y, w := p.y.at(v, p.height), textWidth(text, false)+4
		side, q := 0, spot{Name: text, Value: numbers{p.x.hi, v}, Label: spotLabel{Position: "inside", Align: "right", VAlign: "middle", Offset: numbers{-2, 0}}}
		if p.crossed(p.width-w, p.width, y, y+leading) && !p.crossed(0, w, y, y+leading) {
			side, q.Value[0], q.Label.Align, q.Label.Offset[0] = 1, p.x.lo, "left", 4
		}
		sides[side], at[side], high[side] = append(sides[side], q), append(at[side], p.height-y-leading/2-1), append(high[side], leading)
	}
	for side := range sides {
		for k, place := range spread(at[side], high[side], -8, p.height) {
			q := &sides[side][k]
			q.Label.Offset[1] = place - (p.height - p.y.at(q.Value[1], p.height))
		}
	}
	return append(sides[0], sides[1]...)
}

// crossed tells whether a curve runs through a box, px from the lower left corner.
func (p *panel) crossed(left, right, low, high float64) bool {
	for _, s := range p.Series {
		d := p.data(s)
		at := func(i int) (x, y float64) { return p.x.at(d[i][0], p.width), p.y.at(d[i][1], p.height) }
		for i := range d {
			x, y := at(i)
			if x >= left && x <= right && y >= low && y <= high {
				return true
			}
			if i == 0 {
				continue
			}
			a, b := at(i - 1)
			if a > x {
				a, b, x, y = x, y, a, b
			}
			if x < left || a > right || x == a {
				continue
			}
			from, to := math.Max(a, left), math.Min(x, right)
			u, v := b+(y-b)*(from-a)/(x-a), b+(y-b)*(to-a)/(x-a)
			if math.Max(u, v) >= low && math.Min(u, v) <= high {
				return true
			}
		}
	}
	return false
}

// lineRow is where the name of a vertical line stands: the row from the top, and
// the side.
type lineRow struct {
	row      int
	right    bool
	from, to float64 // px
}

// lineRows gives the names of the vertical lines rows in which they do not meet.
func (p *panel) lineRows() map[int]lineRow {
	out := map[int]lineRow{}
	var taken [][3]float64 // from, to (px), row
	for i, l := range p.Lines {
		v := p.X.Unit.From(l.At)
		text := valued(clean(l.Label), v, p.X.Unit)
		if !l.Vertical || text == "" || !p.x.holds(v) {
			continue
		}
		at, w := p.x.at(v, p.width), textWidth(text, false)+8
		right := at+w <= p.width || at < p.width/2
		a, b := at, at+w
		if !right {
			a, b = at-w, at
		}
		row := 0
		for slices.ContainsFunc(taken, func(t [3]float64) bool { return t[2] == float64(row) && a < t[1] && b > t[0] }) {
			row++
		}
		taken = append(taken, [3]float64{a, b, float64(row)})
		out[i] = lineRow{row, right, a, b}
	}
	return out
}

// headroom raises the upper end of y, where it is free, until the names of the
// vertical lines stand clear of the curves that run below them.
func (p *panel) headroom() {
	if p.profile || p.y.log || p.Y.Max != nil || p.Y.Symmetric {
		return
	}
	need := p.y.hi
	for _, r := range p.lineRows() {
		free := 1 - (float64(r.row+1)*leading+6)/p.height
		if free < 0.6 {
			continue
		}
		for _, s := range p.Series {
			for _, q := range p.data(s) {
				if at := p.x.at(q[0], p.width); at >= r.from && at <= r.to {
					need = math.Max(need, p.y.lo+(q[1]-p.y.lo)/free)
				}
			}
		}
	}
	for p.y.hi < need*(1-1e-9) { // a higher end may have wider ticks
		step := nice((need - p.y.lo) * 40 / p.height)
		p.y.hi = step * math.Ceil(need/step-1e-9)
		need = math.Max(need, p.y.hi)
		if wider := nice((p.y.hi - p.y.lo) * 40 / p.height); wider > step {
			p.y.hi = wider * math.Ceil(need/wider-1e-9)
		}
	}
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
		// Away from the curve: a peak's name goes up, a trough's down, within the panel; else
		// wherever no curve runs.
		first := -5.0
		switch {
		case p.profile:
			first = -10
		case p.y.lo < 0 && y < 0:
			first = 5
		}
		l := spotLabel{Position: "inside", VAlign: "middle"}
		var found bool
		for _, shift := range []float64{first, -leading - 2, leading + 2} {
			shift = math.Max(9-down, math.Min(p.height-9-down, shift))
			for _, left := range []bool{false, true} {
				from := at + 9
				if left {
					from = at - 9 - w
				}
				middle := p.height - down - shift
				fits := from >= 0 && from+w <= p.width
				if free := fits && !p.crossed(from, from+w, middle-leading/2+2, middle+leading/2-2); free && !found || l.Align == "" && (fits || left) {
					found = free
					l.Align, l.Offset = "left", numbers{9, shift}
					if left {
						l.Align, l.Offset[0] = "right", -9
					}
				}
			}
		}
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

// samples are the dashes as text, for names that do not stand at their curve.
var samples = []string{"—— ", "– – ", "···· ", "–·– ", "—o— ", "–x– "}

// endName is the name at the right end of a curve: its lines, where the curve
// ends and where the name stands, px from the top. One inside stands at a curve that ends
// within the panel; all others stand at its right edge.
type endName struct {
	series    int
	lines     []string
	at, place float64
	inside    bool
	far       bool // at the edge, though the curve ends before
}

// endNames are the names at the right ends, moved apart where they would meet.
// Where one is moved from its curve, all begin with a sample of their curve's
// dash, so that a reader still knows which is which.
func (p *panel) endNames() []endName {
	names := p.spreadNames(false)
	moved, differ := false, false
	for _, n := range names {
		moved = moved || n.far || math.Abs(n.place-n.at) > leading/2
		differ = differ || sample(p.Series[n.series]) != sample(p.Series[names[0].series])
	}
	if moved && differ {
		return p.spreadNames(true)
	}
	return names
}

func sample(s exhibit.FigSerie) string {
	dash := s.Dash
	if s.Role == exhibit.Limit && dash == 0 {
		dash = 1
	}
	return samples[max(0, min(dash, len(samples)-1))]
}

func (p *panel) spreadNames(sampled bool) []endName {
	var out, within []endName
	var at, high []float64
	var boxes [][4]float64
	for i, s := range p.Series {
		name, d := clean(s.Label), p.data(s)
		if name == "" || len(d) == 0 {
			continue
		}
		n := endName{series: i, lines: wrap(name, endLimit, penOf(s).strong)}
		if sampled {
			n.lines[0] = sample(s) + n.lines[0]
		}
		x, y := p.lastSeen(d)
		n.at = p.height - p.y.at(y, p.height)
		if end := p.x.at(x, p.width); end < p.width-1 {
			half, wide := float64(len(n.lines))*leading/2, 0.0
			for _, line := range n.lines {
				wide = math.Max(wide, textWidth(line, penOf(s).strong))
			}
			box := [4]float64{end + 6, end + 8 + wide, p.height - n.at - half, p.height - n.at + half}
			met := slices.ContainsFunc(boxes, func(b [4]float64) bool { return box[0] < b[1] && box[1] > b[0] && box[2] < b[3] && box[3] > b[2] })
			if !met && box[1] <= p.width && !p.crossed(box[0], box[1], box[2], box[3]) {
				n.inside, n.place = true, n.at
				boxes, within = append(boxes, box), append(within, n)
				continue
			}
			n.far = true
		}
		out, at, high = append(out, n), append(at, n.at), append(high, float64(len(n.lines))*leading)
	}
	for k, place := range spread(at, high, -8, p.height+8) {
		out[k].place = place
	}
	return append(out, within...)
}

// ends names the curves at their right ends. A series each, of the curve's name,
// so that a name goes with its curve.
func (p *panel) ends() []curve {
	var out []curve
	for _, n := range p.endNames() {
		s := p.Series[n.series]
		pen := penOf(s)
		x, y := p.lastSeen(p.data(s))
		if !n.inside {
			x = p.x.hi
		}
		c := p.marks("~end", 7)
		c.Id = p.id("~end", n.series)
		c.Name = clean(s.Label)
		c.Clip = false
		c.Label.Color = pen.color
		if pen.color == faint {
			c.Label.Color = soft // a thin curve may be pale, its name not
		}
		if pen.strong {
			c.Label.Weight = 600
		}
		c.Data = []spot{{Name: strings.Join(n.lines, "\n"), Value: numbers{x, y},
			Label: spotLabel{Position: "inside", Align: "left", VAlign: "middle", Offset: numbers{7, n.place - n.at}}}}
		out = append(out, c)
	}
	return out
}

// lastSeen is the last place of a curve within the limits of the axes: its last point
// there, or where it leaves by the right edge.
func (p *panel) lastSeen(d points) (x, y float64) {
	for i := len(d) - 1; i >= 0; i-- {
		if !p.x.holds(d[i][0]) {
			continue
		}
		x, y = d[i][0], d[i][1]
		if i+1 < len(d) && d[i+1][0] > p.x.hi {
			a, b := p.x.at(x, 1), p.x.at(d[i+1][0], 1)
			if t := (1 - a) / (b - a); p.y.log {
				y *= math.Pow(d[i+1][1]/y, t)
			} else {
				y += t * (d[i+1][1] - y)
			}
			x = p.x.hi
		}
		return x, math.Max(p.y.lo, math.Min(p.y.hi, y))
	}
	return p.x.hi, p.y.lo
}

// endWidth is the room that the names at the ends need, in px.
func (p *panel) endWidth() float64 {
	w := 0.0
	for _, n := range p.endNames() {
		if n.inside {
			continue
		}
		for _, line := range n.lines {
			w = math.Max(w, textWidth(line, penOf(p.Series[n.series]).strong)+10)
		}
	}
	return w
}
