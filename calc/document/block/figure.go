package block

import (
	"regexp"
	"slices"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
	"quoin/calc/standard"
)

var figureKind = Kind{
	Name:     "figure",
	Doc:      "a chart of series or vectors of other blocks",
	Makes:    "figure",
	New:      func() Body { return &figure{} },
	Nameless: true,
}

type figure struct {
	common
	Series []seriesFields `name:"series" doc:"the curves: names of series (east_rs.PSA, or east_rs.PSA@5% for one damping), or x and y"`
	XAxis  field.Field    `name:"x_axis" is:"choice" of:"linear|log" default:"linear" doc:"linear or log"`
	YAxis  field.Field    `name:"y_axis" is:"choice" of:"linear|log" default:"linear" doc:"linear or log"`
	XLabel field.Field    `name:"x_label" is:"text" doc:"name of the x axis, without unit"`
	YLabel field.Field    `name:"y_label" is:"text" doc:"name of the y axis, without unit"`
	XUnit  field.Field    `name:"x_unit" is:"text" doc:"unit of the x axis"`
	YUnit  field.Field    `name:"y_unit" is:"text" doc:"unit of the y axis"`
	From   field.Field    `name:"from" is:"any" doc:"left end of the x axis"`
	To     field.Field    `name:"to" is:"any" doc:"right end of the x axis"`
	Mark   field.Field    `name:"mark" is:"any" many:"yes" doc:"values of x at which a dotted line stands, named with its value"`
}

type seriesFields struct {
	Of    field.Field `name:"of" is:"series" short:"yes" doc:"a series of a block: BLOCK.WHAT or BLOCK.WHAT@QUALIFIER"`
	X     field.Field `name:"x" is:"any" many:"yes" doc:"a vector, in place of a series"`
	Y     field.Field `name:"y" is:"any" many:"yes" doc:"a vector of the same length"`
	Label field.Field `name:"label" is:"text" doc:"name written at the curve"`
	Draw  field.Field `name:"draw" is:"choice" of:"data|governing|secondary|limit" doc:"how it is drawn: data in ink, the governing curve thick, secondary thin, a limit dashed"`
}

// Run draws the chart.
func (b *figure) Run(r *Run) {
	if len(b.Series) == 0 {
		r.Diags.Errorf("missing-field", r.Place, "the figure block needs the field series").WithHint("series: [east_rs.PSA, design.PSA]")
		return
	}
	id := r.Name
	if id == "" {
		id = "figure-line-" + quantity.Plain(float64(r.Place.Line))
	}
	p := exhibit.Panel{}
	var xs, ys *quantity.Value
	dash := map[exhibit.Role]int{}
	var names []string
	for i := range b.Series {
		s := &b.Series[i]
		for _, c := range b.curves(r, s) {
			if xs == nil {
				xs, ys = &c.X, &c.Y
			}
			if !c.X.Dim.Is(xs.Dim) || !c.Y.Dim.Is(ys.Dim) {
				r.Fail(s.Of, "dimension", "%s cannot stand on the axes of the first series: it is %s over %s, the first is %s over %s", nameOf(c, s), c.Y.Dim.Name(), c.X.Dim.Name(), ys.Dim.Name(), xs.Dim.Name())
				return
			}
			first, _, _ := strings.Cut(c.ID, ".")
			b.extend(r, first, &c)
			f := exhibit.FigSerie{ID: c.ID, Label: label(c, s), X: c.X.SI, Y: c.Y.SI, Role: exhibit.Data}
			if c.ID != "" && r.KindOf(first) == "target" {
				f.Role = exhibit.Governing
			}
			if s.Draw.Given {
				f.Role = exhibit.Role(s.Draw.Text())
			}
			f.Dots = c.ID == ""
			if f.Role == exhibit.Data || f.Role == exhibit.Governing {
				f.Dash = dash[f.Role] % 4
				dash[f.Role]++
			}
			p.Series = append(p.Series, f)
			names = append(names, f.Label)
		}
	}
	if r.Diags.HasErrors() || xs == nil {
		return
	}
	unit := func(f field.Field, v *quantity.Value) (quantity.Unit, bool) {
		if !f.Given {
			if v.Unit.Text != "" {
				return v.Unit, true
			}
			return r.System().Preferred(v.Dim), true
		}
		u, err := quantity.ParseUnit(f.Text())
		if err != nil || !u.Dim.Is(v.Dim) {
			r.Fail(f, "unit", "%s is no unit for %s", f.Text(), v.Dim.Name())
			return u, false
		}
		return u, true
	}
	xu, ok1 := unit(b.XUnit, xs)
	yu, ok2 := unit(b.YUnit, ys)
	if !ok1 || !ok2 {
		return
	}
	p.X = exhibit.Axis{Label: or(b.XLabel.Text(), axisName(xs.Dim)), Unit: xu, Log: b.XAxis.Text() == "log"}
	p.Y = exhibit.Axis{Label: or(b.YLabel.Text(), what(p.Series, ys.Dim)), Unit: yu, Log: b.YAxis.Text() == "log"}
	if !b.limits(r, &p, xs) {
		return
	}
	caption := b.Caption.Text()
	if caption == "" {
		caption = strings.Join(names, ", ")
	}
	r.Echo.Rows = nil // the figure shows its inputs
	r.Figure(exhibit.Figure{ID: id, Caption: caption, Panels: []exhibit.Panel{p}, Alt: p.Y.Label + " against " + p.X.Label + " for " + strings.Join(names, ", ") + "."})
}

// extend carries the curve of a standard's spectrum on to the end of the axis,
// where the axis ends beyond the series.
func (b *figure) extend(r *Run, block string, c *exhibit.Curve) {
	if c.ID == "" || r.KindOf(block) != "target" || !b.To.Given || !b.To.Value.Dim.Is(quantity.Time) {
		return
	}
	t := r.Product(block).(*standard.Target)
	last, to := c.X.SI[len(c.X.SI)-1], b.To.SI()
	if _, end := t.Range(); to <= last || to > end {
		return
	}
	x, y := slices.Clone(c.X.SI), slices.Clone(c.Y.SI)
	more := []float64{}
	for i := 1; i <= 100; i++ {
		more = append(more, last+(to-last)*float64(i)/100)
	}
	for _, corner := range t.Corners {
		if corner.T > last && corner.T < to {
			more = append(more, corner.T)
		}
	}
	slices.Sort(more)
	for _, T := range more {
		a, err := t.PSA(T)
		if err != nil {
			return
		}
		x, y = append(x, T), append(y, a)
	}
	c.X.SI, c.Y.SI = x, y
}

// curves are the series that an entry names.
func (b *figure) curves(r *Run, s *seriesFields) []exhibit.Curve {
	if s.Of.Given == (s.X.Given && s.Y.Given) || s.X.Given != s.Y.Given {
		r.Fail(s.Of, "figure-series", "a curve is either a series, or x and y")
		return nil
	}
	if s.Of.Given {
		all := r.Curves(s.Of.Text())
		if len(all) == 0 {
			r.Fail(s.Of, "no-series", "there is no series %s", s.Of.Text()).WithHint("a series is named as BLOCK.WHAT, with @ and the damping for one of several: east_rs.PSA@5%%")
		}
		return all
	}
	if len(s.X.Value.SI) != len(s.Y.Value.SI) {
		r.Fail(s.Y, "length", "x has %d items, y has %d", len(s.X.Value.SI), len(s.Y.Value.SI))
		return nil
	}
	return []exhibit.Curve{{X: s.X.Value, Y: s.Y.Value}}
}

// limits sets the ends of the x axis and the marks.
func (b *figure) limits(r *Run, p *exhibit.Panel, xs *quantity.Value) bool {
	for _, l := range []struct {
		f  field.Field
		to **float64
	}{{b.From, &p.X.Min}, {b.To, &p.X.Max}} {
		if !l.f.Given {
			continue
		}
		if !l.f.Value.Dim.Is(xs.Dim) {
			r.Fail(l.f, "dimension", "the x axis shows %s, this is %s", xs.Dim.Name(), l.f.Value.Dim.Name())
			return false
		}
		x := l.f.SI()
		*l.to = &x
	}
	for i := range p.Series {
		s := &p.Series[i]
		if s.X, s.Y = logarithmic(s.X, s.Y, p.X.Log, p.Y.Log); len(s.X) == 0 {
			r.Fail(b.XAxis, "log-axis", "%s has no values greater than zero; a log axis cannot show it", s.Label)
			return false
		}
	}
	if p.X.Log && b.From.Given && b.From.SI() <= 0 {
		r.Fail(b.From, "log-axis", "a log axis begins above zero")
		return false
	}
	if !p.Y.Log {
		p.Y.Min = zeroIfPositive(p.Series)
	}
	if !b.Mark.Given {
		return true
	}
	if !b.Mark.Value.Dim.Is(xs.Dim) {
		r.Fail(b.Mark, "dimension", "the x axis shows %s, this is %s", xs.Dim.Name(), b.Mark.Value.Dim.Name())
		return false
	}
	for i, x := range b.Mark.Value.SI {
		text := quantity.Format(p.X.Unit.From(x), 3)
		if u := p.X.Unit.Pretty(); u != "" {
			text += " " + u
		}
		if i < len(b.Mark.List) && !literalText(b.Mark, i) {
			text = markName(b.Mark.List[i].Text) + " " + text
		}
		p.Lines = append(p.Lines, exhibit.RefLine{Vertical: true, At: x, Label: text})
	}
	return true
}

// logarithmic leaves out the points that have no place on log axes, as a period
// of zero.
func logarithmic(x, y []float64, xlog, ylog bool) (u, v []float64) {
	for i := range x {
		if !(xlog && x[i] <= 0 || ylog && y[i] <= 0) {
			u, v = append(u, x[i]), append(v, y[i])
		}
	}
	return u, v
}

// markName is how an expression is named at its line: m.T[1] is T₁.
func markName(text string) string {
	m := indexed.FindStringSubmatch(text)
	if m == nil {
		return text
	}
	return m[1] + plainSymbol("_"+m[2])
}

var indexed = regexp.MustCompile(`^[\pL\d_]+\.(\pL+)\[(\d+)\]$`)

func literalText(f field.Field, i int) bool {
	if f.Tree != nil {
		return f.Tree.Op == expr.Literal
	}
	return i < len(f.Trees) && f.Trees[i].Op == expr.Literal
}

func zeroIfPositive(series []exhibit.FigSerie) *float64 {
	for _, s := range series {
		if len(s.Y) > 0 && slices.Min(s.Y) < 0 {
			return nil
		}
	}
	return zero()
}

func or(a, b string) string {
	if a != "" {
		return a
	}
	return b
}

func axisName(d quantity.Dim) string {
	switch {
	case d.Is(quantity.Time):
		return "period T"
	case d.Is(quantity.Length):
		return "length"
	case d.Is(quantity.Force):
		return "force"
	}
	return "value"
}

// what names the y axis from the ids of the series, where they agree.
func what(series []exhibit.FigSerie, d quantity.Dim) string {
	name := ""
	for _, s := range series {
		_, w, _ := strings.Cut(s.ID, ".")
		w, _, _ = strings.Cut(w, "@")
		if w == "" || name != "" && w != name {
			return axisName(d)
		}
		name = w
	}
	return name
}

func nameOf(c exhibit.Curve, s *seriesFields) string {
	if c.ID != "" {
		return c.ID
	}
	return s.Y.Written
}

// label names a curve: as asked, else by block and damping.
func label(c exhibit.Curve, s *seriesFields) string {
	if s.Label.Given {
		return s.Label.Text()
	}
	if c.ID == "" {
		return s.Y.Written
	}
	first, rest, _ := strings.Cut(c.ID, ".")
	if _, q, ok := strings.Cut(rest, "@"); ok {
		return first + " " + strings.Replace(q, "%", " %", 1)
	}
	return first
}
