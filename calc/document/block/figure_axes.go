package block

import (
	"cmp"
	"math"
	"regexp"
	"slices"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// panel puts the curves on their axes.
func (b *figure) panel(r *Run, all []drawn, hidden *[]string) (p exhibit.Panel, ok bool) {
	xs, ys := all[0].X, all[0].Y
	xu, ok1 := axisUnit(r, b.XUnit, xs)
	yu, ok2 := axisUnit(r, b.YUnit, ys)
	if !ok1 || !ok2 {
		return p, false
	}
	dash := map[exhibit.Role]int{}
	for _, d := range all {
		f := exhibit.FigSerie{ID: d.ID, Label: d.label, X: d.X.SI, Y: d.Y.SI, Role: d.role, Step: d.step, Dots: d.dots}
		if f.Role == exhibit.Data && b.bands() {
			f.Dash = 0
		} else if f.Role == exhibit.Data || f.Role == exhibit.Governing {
			if f.Role == exhibit.Data && dash[f.Role] == 0 && b.Over.Given && governed(all) {
				dash[f.Role]++ // curves of profiles are few and alike: thickness alone does not part them
			}
			f.Dash = dash[f.Role] % dashes
			dash[f.Role]++
		}
		p.Series = append(p.Series, f)
	}
	p.X = exhibit.Axis{Label: cmp.Or(b.XLabel.Text(), axisName(xs.Dim)), Unit: xu, Log: b.XAxis.Text() == "log" || b.tripartite()}
	p.Y = exhibit.Axis{Label: cmp.Or(b.YLabel.Text(), agreed(all), axisName(ys.Dim)), Unit: yu, Log: b.YAxis.Text() == "log" || b.tripartite()}
	if xs.Dim.Is(quantity.Time) && !b.XLabel.Given && r.histories(all) {
		p.X.Label = "time t"
	}
	if b.Over.Given {
		b.height(r, &p, all)
	}
	if b.bands() {
		b.rows(&p)
	}
	if b.Series[0].Ratio.Given {
		p.Lines = append(p.Lines, exhibit.RefLine{At: 1, Label: "1"})
	}
	ok = b.ends(r, &p.X, b.From, b.To, b.XAxis, xs, "x") && b.ends(r, &p.Y, b.YFrom, b.YTo, b.YAxis, ys, "y") && b.logarithmic(r, &p, all) && b.decades(r, &p, all)
	if !ok {
		return p, false
	}
	if b.tripartite() {
		b.diagonals(r, &p)
	}
	value := &p.Y
	if b.Over.Given {
		value = &p.X
	}
	if !value.Log && value.Min == nil && positive(p.Series, b.Over.Given) && (value.Max == nil || *value.Max > 0) {
		value.Min = zero()
	}
	b.rings(&p, all)
	return p, b.inView(r, &p) && b.marks(r, &p, b.Mark, p.X, true, hidden) && b.marks(r, &p, b.MarkY, p.Y, false, hidden)
}

// histories tells whether all curves are of records: over time, not period.
func (r *Run) histories(all []drawn) bool {
	return !slices.ContainsFunc(all, func(d drawn) bool {
		block, _, _ := strings.Cut(d.ID, ".")
		return r.KindOf(block) != "record"
	})
}

func axisUnit(r *Run, f field.Field, v quantity.Value) (quantity.Unit, bool) {
	if !f.Given {
		if v.Unit.Text != "" {
			return v.Unit, true
		}
		return r.System().Preferred(v.Dim), true
	}
	u, err := quantity.ParseUnit(f.Text())
	if err != nil || !u.Dim.Is(v.Dim) {
		e := r.Fail(f, "unit", "%s is no unit for %s", f.Text(), v.Dim.Name())
		switch hint := unitHint(err); {
		case hint != "":
			e.WithHint("%s", hint)
		case err == nil:
			e.WithHint("it is a unit of %s; for instance %s", u.Dim.Name(), r.System().Preferred(v.Dim).Pretty())
		}
		return u, false
	}
	return u, true
}

// ends sets the ends of an axis.
func (b *figure) ends(r *Run, a *exhibit.Axis, from, to, scale field.Field, v quantity.Value, which string) bool {
	for _, l := range []struct {
		f  field.Field
		to **float64
	}{{from, &a.Min}, {to, &a.Max}} {
		if !l.f.Given {
			continue
		}
		if !l.f.Value.Dim.Is(v.Dim) {
			r.Fail(l.f, "dimension", "the %s axis shows %s, this is %s", which, v.Dim.Name(), l.f.Value.Dim.Name())
			return false
		}
		x := l.f.SI()
		if a.Log && x <= 0 {
			r.Fail(l.f, "log-axis", "a log axis lies above zero")
			return false
		}
		*l.to = &x
	}
	if from.Given && to.Given {
		switch lo, hi := from.SI(), to.SI(); {
		case lo >= hi:
			r.Fail(to, "figure-range", "the %s axis ends at %s, where it begins or before", which, to.Written)
			return false
		case hi-lo < 1e-9*max(math.Abs(lo), math.Abs(hi)):
			r.Fail(to, "figure-range", "the %s axis ends at %s, too close to where it begins", which, to.Written)
			return false
		}
	}
	return true
}

// inView sees that something of the curves lies between the ends of the axes.
func (b *figure) inView(r *Run, p *exhibit.Panel) bool {
	within := func(a exhibit.Axis, lo, hi float64) bool {
		return (a.Max == nil || lo <= *a.Max) && (a.Min == nil || hi >= *a.Min)
	}
	for _, s := range p.Series {
		if within(p.X, slices.Min(s.X), slices.Max(s.X)) && within(p.Y, slices.Min(s.Y), slices.Max(s.Y)) {
			return true
		}
	}
	for _, f := range []field.Field{b.From, b.To, b.YFrom, b.YTo} {
		if f.Given {
			r.Fail(f, "figure-range", "no curve lies between the ends of the axes")
			return false
		}
	}
	return true
}

// logarithmic leaves out the points that have no place on log axes, and says so.
// Only where a series of a block begins at a period of zero goes without saying.
func (b *figure) logarithmic(r *Run, p *exhibit.Panel, all []drawn) bool {
	if !p.X.Log && !p.Y.Log {
		return true
	}
	for i := range p.Series {
		s := &p.Series[i]
		var u, v []float64
		lost, points := 0, len(s.X)
		for j := range s.X {
			switch {
			case !(p.X.Log && s.X[j] <= 0 || p.Y.Log && s.Y[j] <= 0):
				u, v = append(u, s.X[j]), append(v, s.Y[j])
			case s.ID == "" || s.X[j] != 0:
				lost++
			}
		}
		if s.X, s.Y = u, v; len(u) == 0 {
			at := b.XAxis
			if !p.X.Log {
				at = b.YAxis
			}
			r.Fail(at, "log-axis", "%s has no values greater than zero; a log axis cannot show it", s.Label)
			return false
		}
		if lost > 0 {
			r.WarnAt(all[i].from, "log-axis", "of %s, %d of %d points are not shown: they are not greater than zero, and the axis is logarithmic", s.Label, lost, points)
		}
	}
	return true
}

const (
	// logSpan is how many times its beginning the end of a log axis may be.
	logSpan = 1e30
	// logLeast and logLargest lie well inside of what can be drawn.
	logLeast, logLargest = 1e-60, 1e60
)

// decades sees that log axes span what can be drawn and read.
func (b *figure) decades(r *Run, p *exhibit.Panel, all []drawn) bool {
	for _, axis := range []struct {
		exhibit.Axis
		from, to field.Field
		of       func(s exhibit.FigSerie) []float64
		whole    bool // shows all down to the least value, unless it is told where to begin
	}{
		{p.X, b.From, b.To, func(s exhibit.FigSerie) []float64 { return s.X }, true},
		{p.Y, b.YFrom, b.YTo, func(s exhibit.FigSerie) []float64 { return s.Y }, b.tripartite()},
	} {
		if !axis.Log {
			continue
		}
		for i, s := range p.Series {
			at := all[i].from
			lo, hi := slices.Min(axis.of(s)), slices.Max(axis.of(s))
			if axis.Max != nil {
				hi, at = *axis.Max, axis.to
			}
			if axis.Min != nil {
				lo, at = *axis.Min, axis.from
			} else if !axis.whole {
				lo = max(lo, hi/logSpan)
			}
			if lo < logLeast || hi > logLargest || hi/lo > logSpan {
				r.Fail(at, "log-axis", "a log axis shows at most 30 decades of values from 1e-60 to 1e60").WithHint("end the axis closer to where the curves lie")
				return false
			}
		}
	}
	return true
}

// marks draws dotted lines across the panel, named with their values.
func (b *figure) marks(r *Run, p *exhibit.Panel, f field.Field, a exhibit.Axis, vertical bool, hidden *[]string) bool {
	if !f.Given {
		return true
	}
	if !f.Value.Dim.Is(a.Unit.Dim) {
		which := "y"
		if vertical {
			which = "x"
		}
		r.Fail(f, "dimension", "the %s axis shows %s, this is %s", which, a.Unit.Dim.Name(), f.Value.Dim.Name())
		return false
	}
	for i, x := range f.Value.SI {
		text := quantity.Format(a.Unit.From(x), 3)
		if i < len(f.List) && len(f.List) == len(f.Value.SI) && literalText(f, i) { // as it was written
			text = short(round12(a.Unit.From(x)))
		}
		if u := a.Unit.Pretty(); u != "" {
			text += " " + u
		}
		if i < len(f.List) && len(f.List) == len(f.Value.SI) && !literalText(f, i) {
			text = markName(f.List[i].Text) + " " + text
		}
		if end := b.beyond(p, x, vertical); end != "" {
			at := f
			if i < len(f.List) && len(f.List) == len(f.Value.SI) && f.List[i].At.Line > 0 {
				at.At = f.List[i].At
			}
			r.WarnAt(at, "mark-beyond", "the mark %s lies beyond the axis, which %s, and is not shown", text, end)
			*hidden = append(*hidden, "the mark "+text+" lies beyond the axis")
			continue
		}
		p.Lines = append(p.Lines, exhibit.RefLine{Vertical: vertical, At: x, Label: text})
	}
	return true
}

// beyond says how the axis of a line ends before it, "" where the axis holds it. An
// axis of values without a stated end is drawn to hold its lines; the running axis
// ends with the curves.
func (b *figure) beyond(p *exhibit.Panel, at float64, vertical bool) string {
	a := p.Y
	if vertical {
		a = p.X
	}
	lo, hi := math.Inf(-1), math.Inf(1)
	if vertical && !b.Over.Given {
		lo, hi = hi, lo
		for _, s := range p.Series {
			lo, hi = min(lo, slices.Min(s.X)), max(hi, slices.Max(s.X))
		}
	}
	if a.Min != nil {
		lo = *a.Min
	}
	if a.Max != nil {
		hi = *a.Max
	}
	words := func(x float64) string {
		return strings.TrimSpace(quantity.Format(a.Unit.From(x), 3) + " " + a.Unit.Pretty())
	}
	switch {
	case at < lo:
		return "begins at " + words(lo)
	case at > hi:
		return "ends at " + words(hi)
	case a.Log && at <= 0:
		return "is logarithmic"
	}
	return ""
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

// positive tells whether no curve goes below zero on the axis of its values.
func positive(series []exhibit.FigSerie, alongX bool) bool {
	return !slices.ContainsFunc(series, func(s exhibit.FigSerie) bool {
		v := s.Y
		if alongX {
			v = s.X
		}
		return len(v) > 0 && slices.Min(v) < 0
	})
}

func axisName(d quantity.Dim) string {
	switch {
	case d.Is(quantity.Time):
		return "period T"
	case d.Is(quantity.MustUnit("Hz").Dim):
		return "frequency f"
	case d.Is(quantity.Length):
		return "length"
	case d.Is(quantity.Force):
		return "force"
	}
	return "value"
}

// agreed names the value axis, where the curves that know a name agree.
func agreed(all []drawn) string {
	name := ""
	for _, d := range all {
		if d.name != "" && name != "" && d.name != name {
			return ""
		}
		name = cmp.Or(name, d.name)
	}
	return name
}

// dashes is how many ways of drawing a curve of one role are told apart.
const dashes = 6

func governed(all []drawn) bool {
	return slices.ContainsFunc(all, func(d drawn) bool { return d.role == exhibit.Governing })
}

// rings names the least or the largest value of the curves that ask for it, of the
// points that lie between the ends of the axes.
func (b *figure) rings(p *exhibit.Panel, all []drawn) {
	holds := func(a exhibit.Axis, v float64) bool {
		return (a.Min == nil || v >= *a.Min) && (a.Max == nil || v <= *a.Max)
	}
	for i, d := range all {
		if d.ring != "least" && d.ring != "largest" {
			continue
		}
		s, best := p.Series[i], -1
		value, at := s.Y, s.X
		va, pa := p.Y, p.X
		if b.Over.Given {
			value, at, va, pa = s.X, s.Y, p.X, p.Y
		}
		for k := range value {
			if holds(p.X, s.X[k]) && holds(p.Y, s.Y[k]) && (best < 0 || d.ring == "least" && value[k] < value[best] || d.ring == "largest" && value[k] > value[best]) {
				best = k
			}
		}
		if best < 0 {
			continue
		}
		words := func(a exhibit.Axis, v float64) string {
			return strings.TrimSpace(quantity.Format(a.Unit.From(v), 3) + " " + a.Unit.Pretty())
		}
		text := words(va, value[best]) + " at " + words(pa, at[best])
		if k := slices.IndexFunc(pa.Names, func(n exhibit.TickName) bool { return n.At == at[best] }); k >= 0 {
			text = words(va, value[best]) + " at " + pa.Names[k].Name
		}
		if d.step && b.Over.Given { // in the storey, not at its top
			text = words(va, value[best])
		}
		p.Points = append(p.Points, exhibit.RefPoint{X: s.X[best], Y: s.Y[best], Label: text})
	}
}
