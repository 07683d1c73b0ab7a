package block

import (
	"cmp"
	"strconv"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

var figureKind = Kind{
	Name:     "figure",
	Doc:      "a chart of series or vectors of other blocks, of profiles over the height, of ratios, or of usable bands",
	Makes:    "figure",
	New:      func() Body { return &figure{} },
	Nameless: true,
}

type figure struct {
	common
	Series []seriesFields `name:"series" doc:"the curves: names of series (east_rs.PSA, or east_rs.PSA@5% for one damping); x and y; a profile; a ratio; or a band"`
	Over   field.Field    `name:"over" is:"block" of:"structure" doc:"of profiles: the structure whose elevations they stand over"`
	Axes   field.Field    `name:"axes" is:"choice" of:"plain|tripartite" default:"plain" doc:"tripartite: PSV over T, both log, with diagonals of PSA and SD, of the series PSA, PSV and SD of spectra and targets"`
	XAxis  field.Field    `name:"x_axis" is:"choice" of:"linear|log" default:"linear" doc:"linear or log"`
	YAxis  field.Field    `name:"y_axis" is:"choice" of:"linear|log" default:"linear" doc:"linear or log"`
	XLabel field.Field    `name:"x_label" is:"text" doc:"name of the x axis, without unit"`
	YLabel field.Field    `name:"y_label" is:"text" doc:"name of the y axis, without unit"`
	XUnit  field.Field    `name:"x_unit" is:"text" doc:"unit of the x axis"`
	YUnit  field.Field    `name:"y_unit" is:"text" doc:"unit of the y axis"`
	From   field.Field    `name:"from" is:"any" doc:"left end of the x axis"`
	To     field.Field    `name:"to" is:"any" doc:"right end of the x axis"`
	YFrom  field.Field    `name:"y_from" is:"any" doc:"lower end of the y axis"`
	YTo    field.Field    `name:"y_to" is:"any" doc:"upper end of the y axis"`
	Mark   field.Field    `name:"mark" is:"any" many:"yes" doc:"values of x at which a dotted line stands, named with its value"`
	MarkY  field.Field    `name:"mark_y" is:"any" many:"yes" doc:"values of y at which a dotted line stands, named with its value"`
}

type seriesFields struct {
	Of      field.Field `name:"of" is:"series" short:"yes" doc:"a series of a block: BLOCK.WHAT or BLOCK.WHAT@QUALIFIER"`
	X       field.Field `name:"x" is:"any" many:"yes" doc:"a vector, in place of a series"`
	Y       field.Field `name:"y" is:"any" many:"yes" doc:"a vector of the same length"`
	Profile field.Field `name:"profile" is:"any" many:"yes" doc:"a vector by level or storey, drawn over the height of the structure named by over"`
	At      field.Field `name:"at" is:"choice" of:"levels|storeys|feet" doc:"of a profile: whether its values belong to levels (points), to storeys (steps) or to the feet of storeys (points); known for values of blocks"`
	Ratio   field.Field `name:"ratio" is:"series" many:"yes" doc:"two series, [a, b]: a over b where both are defined; a target is computed exactly, a series is linear between its points"`
	Band    field.Field `name:"band" is:"block" of:"record" doc:"a record, whose usable band stands as a bar over the period; the corners of its filter as a thin line"`
	Ring    field.Field `name:"ring" is:"choice" of:"none|least|largest" default:"none" doc:"the least or the largest value between the ends of the axes is ringed and named"`
	Label   field.Field `name:"label" is:"text" doc:"name written at the curve"`
	Draw    field.Field `name:"draw" is:"choice" of:"data|governing|secondary|limit" doc:"how it is drawn: data in ink, the governing curve thick, secondary thin, a limit dashed"`
}

// ways are the fields of which an entry has one; x and y go together.
func (s *seriesFields) ways() []field.Field {
	var out []field.Field
	for _, f := range []field.Field{s.Of, s.X, s.Profile, s.Ratio, s.Band} {
		if f.Given {
			out = append(out, f)
		}
	}
	if s.Y.Given && !s.X.Given {
		out = append(out, s.Y)
	}
	return out
}

// Check sees that every entry is one kind of curve.
func (b *figure) Check(c *Checks) {
	if len(b.Series) == 0 {
		c.Diags.Errorf("missing-field", c.Place, "the figure block needs the field series").WithHint("series: [east_rs.PSA, design.PSA]")
	}
	if b.tripartite() {
		for _, f := range []field.Field{b.XAxis, b.YAxis} {
			if f.Given && f.Text() != "log" {
				c.Fail(f, "figure-tripartite", "tripartite axes are log")
			}
		}
		for i := range b.Series {
			if ways := b.Series[i].ways(); len(ways) > 0 && !b.Series[i].Of.Given {
				c.Fail(ways[0], "figure-tripartite", "tripartite axes take the PSA, PSV or SD of spectra and targets").WithHint("- east_rs.PSV")
				return
			}
		}
	}
	profiles, bands := 0, 0
	for i := range b.Series {
		s := &b.Series[i]
		ways := s.ways()
		switch {
		case len(ways) == 0:
			c.Fail(s.Of, "figure-series", "an entry needs a series, x and y, a profile, a ratio or a band").WithHint("- east_rs.PSA, or - { x: response.storey_force, y: frame.h }")
		case len(ways) > 1:
			c.Fail(ways[1], "figure-series", "an entry is one of: a series, x and y, a profile, a ratio, a band")
		case s.X.Given != s.Y.Given:
			c.Fail(ways[0], "figure-series", "a curve of vectors needs both x and y")
		case s.Ratio.Given && len(s.Ratio.List) != 2:
			c.Fail(s.Ratio, "figure-ratio", "a ratio takes two series").WithHint("ratio: [east_rs.PSA@5%%, design.PSA]")
		case s.At.Given && !s.Profile.Given:
			c.Fail(s.At, "figure-series", "at belongs to a profile")
		case s.Band.Given && s.Ring.Given && s.Ring.Text() != "none":
			c.Fail(s.Ring, "figure-series", "a band has no values to ring")
		}
		if s.Band.Given {
			bands++
		}
		if bands > 0 && bands < i+1 && len(ways) > 0 {
			c.Fail(ways[0], "figure-band", "bands stand over the period alone; other curves need a figure of their own")
			return
		}
		if s.Profile.Given {
			profiles++
		} else if profiles > 0 && len(ways) > 0 {
			c.Fail(ways[0], "figure-profile", "profiles stand over the height; other curves need a figure of their own")
			return
		}
	}
	switch {
	case profiles == 0 && b.Over.Given:
		c.Fail(b.Over, "figure-profile", "over belongs to profiles, and the figure has none").WithHint("leave it out")
	case profiles > 0 && profiles < len(b.Series):
		c.Fail(b.Series[0].ways()[0], "figure-profile", "profiles stand over the height; other curves need a figure of their own")
	case profiles > 0 && !b.Over.Given:
		for _, s := range b.Series {
			if s.Profile.Given {
				c.Fail(s.Profile, "figure-profile", "a profile needs the field over: the structure whose elevations it stands over").WithHint("over: frame")
				return
			}
		}
	}
}

// drawn is one curve and how it is drawn.
type drawn struct {
	exhibit.Curve
	label      string
	name       string // of the value axis, where the curve knows it
	role       exhibit.Role
	step, dots bool
	ring       string      // "least" or "largest": that value is ringed
	from       field.Field // where the document asks for it
}

// Run draws the chart.
func (b *figure) Run(r *Run) {
	var all []drawn
	for i := range b.Series {
		s := &b.Series[i]
		var some []drawn
		switch {
		case s.Profile.Given:
			some = b.profile(r, s)
		case s.Ratio.Given:
			some = b.ratio(r, s)
		case s.Band.Given:
			some = b.band(r, s, i+1) // rows count from the top
		case s.Of.Given:
			some = b.series(r, s)
		default:
			some = b.vectors(r, s)
		}
		for _, d := range some {
			if s.Label.Given && !s.Band.Given {
				d.label = s.Label.Text()
			}
			if s.Draw.Given && !s.Band.Given {
				d.role = exhibit.Role(s.Draw.Text())
			}
			d.ring = s.Ring.Text()
			all = append(all, d)
		}
	}
	if r.Diags.HasErrors() || len(all) == 0 {
		return
	}
	if b.tripartite() && !b.pseudoVelocity(r, all) {
		return
	}
	first := all[0]
	for _, d := range all {
		if !d.X.Dim.Is(first.X.Dim) || !d.Y.Dim.Is(first.Y.Dim) {
			r.Fail(d.from, "dimension", "%s cannot stand on the axes of the first series: it is %s over %s, the first is %s over %s", cmp.Or(d.ID, d.label), d.Y.Dim.Name(), d.X.Dim.Name(), first.Y.Dim.Name(), first.X.Dim.Name())
			return
		}
	}
	var hidden []string // what is said of marks that the axes do not hold
	p, ok := b.panel(r, all, &hidden)
	if !ok {
		return
	}
	var names []string
	for _, d := range all {
		if d.label != "" {
			names = append(names, d.label)
		}
	}
	caption := b.Caption.Text()
	if caption == "" && b.bands() {
		caption = "Usable bands of the records, corners of their filters as thin lines"
	} else if caption == "" {
		caption = strings.Join(names, ", ")
	}
	alt := p.Y.Label + " against " + p.X.Label
	if b.Over.Given {
		alt = p.X.Label + " over the height of " + b.Over.Text()
	}
	if b.tripartite() {
		alt = "PSV against period, both logarithmic, with diagonals of PSA and SD,"
	}
	if b.bands() {
		alt = "Usable periods of the records, a bar each,"
	}
	caption += b.bases(r, caption, names)
	if len(hidden) > 0 {
		caption += "; " + strings.Join(hidden, "; ")
	}
	r.Echo.Rows = nil // the figure shows its inputs
	r.Figure(exhibit.Figure{ID: r.Stem(), Caption: caption, Panels: []exhibit.Panel{p}, Beside: b.Over.Given, Alt: alt + " for " + strings.Join(names, ", ") + "."})
}

// mostDots is how many points of vectors are marked one by one; more are a curve.
const mostDots = 24

// vectors is the curve of an entry with x and y.
func (b *figure) vectors(r *Run, s *seriesFields) []drawn {
	x, y := s.X.Value, s.Y.Value
	if len(x.SI) != len(y.SI) {
		r.Fail(s.Y, "length", "x has %s, y has %d", counted(len(x.SI), "item"), len(y.SI))
		return nil
	}
	if !sameLabels(x, y) {
		r.Fail(s.Y, "labels", "x and y belong to different levels: %s and %s", listed(x.Labels), listed(y.Labels))
		return nil
	}
	return []drawn{{Curve: exhibit.Curve{X: x, Y: y}, label: s.Y.Written, role: exhibit.Data, dots: len(x.SI) <= mostDots, from: s.Y}}
}

// sameLabels tells whether two vectors may stand side by side: of those with
// labels, the labels are the same.
func sameLabels(a, b quantity.Value) bool {
	if len(a.Labels) == 0 || len(b.Labels) == 0 {
		return true
	}
	return strings.Join(a.Labels, "\x00") == strings.Join(b.Labels, "\x00")
}

// listed is a few labels in a message.
func listed(labels []string) string {
	if len(labels) > 3 {
		return labels[0] + " to " + labels[len(labels)-1]
	}
	return strings.Join(labels, ", ")
}

// counted is a number of things: "1 item", "2 items".
func counted(n int, what string) string {
	if n != 1 {
		what += "s"
	}
	return strconv.Itoa(n) + " " + what
}

func literalText(f field.Field, i int) bool {
	if f.Tree != nil {
		return f.Tree.Op == expr.Literal
	}
	return i < len(f.Trees) && f.Trees[i].Op == expr.Literal
}
