package block

import (
	"errors"
	"fmt"
	"math"

	"quoin/calc/cite"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/motion"
	"quoin/calc/quantity"
)

// treatStep is one item of the field treat of a record: one of its groups is given.
type treatStep struct {
	Baseline baselineFields `name:"baseline" doc:"take a polynomial off: a baseline correction"`
	Taper    taperFields    `name:"taper" doc:"bring the ends to zero by cosine tapers"`
	Bandpass bandpassFields `name:"bandpass" doc:"a zero-phase Butterworth filter: band-pass, or high-pass or low-pass with one corner"`
	Resample resampleFields `name:"resample" doc:"another time between samples, band-limited"`
}

type baselineFields struct {
	field.Group
	Order field.Field `name:"order" is:"number" short:"yes" must:"not-negative" default:"1" doc:"order of the polynomial taken off the acceleration, 0 to 10"`
	Fit   field.Field `name:"fit" is:"choice" of:"acceleration|velocity|displacement" default:"acceleration" doc:"what the polynomial, integrated from rest, is fitted to by least squares"`
}

type taperFields struct {
	field.Group
	Ends  field.Field `name:"ends" is:"time" short:"yes" must:"positive" doc:"length of a cosine taper at both ends"`
	Start field.Field `name:"start" is:"time" must:"not-negative" doc:"length of the taper at the start; none if not given"`
	End   field.Field `name:"end" is:"time" must:"not-negative" doc:"length of the taper at the end; none if not given"`
}

type bandpassFields struct {
	field.Group
	From  field.Field `name:"from" is:"frequency" show:"Hz" must:"positive" hint:"a corner is a frequency: 0.1 Hz; that of a period is 1 / (10 s)" doc:"lower corner; what lies below it is removed. None if not given"`
	To    field.Field `name:"to" is:"frequency" show:"Hz" must:"positive" hint:"a corner is a frequency: 25 Hz" doc:"upper corner; what lies above it is removed. None if not given"`
	Order field.Field `name:"order" is:"number" must:"whole" default:"4" doc:"order of the Butterworth filter in one pass, 1 to 12; two passes have twice the slope"`
	Gain  field.Field `name:"corner_gain" is:"choice" of:"0.5|0.707" default:"0.5" doc:"gain of both passes together at a corner: 0.5 (−6 dB) or 0.707 (−3 dB)"`
	Pad   field.Field `name:"pad" is:"time" must:"not-negative" doc:"how much of what the filter moves out of the record is kept at each end; 1.5 times the order over the lower corner (Converse & Brady 1992) if not given"`
}

type resampleFields struct {
	field.Group
	Step field.Field `name:"step" is:"time" short:"yes" need:"yes" must:"positive" doc:"the new time between samples"`
}

// groups are the treatments given in a step: one, if it is right.
func (s *treatStep) groups() []treatGroup {
	var out []treatGroup
	for _, g := range []treatGroup{{"baseline", s.Baseline.Group}, {"taper", s.Taper.Group}, {"bandpass", s.Bandpass.Group}, {"resample", s.Resample.Group}} {
		if g.Given {
			out = append(out, g)
		}
	}
	return out
}

type treatGroup struct {
	name string
	field.Group
}

// checkTreat sees that each step is one treatment and has what it needs.
func (b *record) checkTreat(c *Checks) {
	for i := range b.Treat {
		s := &b.Treat[i]
		if g := s.groups(); len(g) > 1 {
			c.Diags.Errorf("treat-step", g[1].At, "a step of treat is one treatment; this one has %s and %s", g[0].name, g[1].name).WithHint("begin each step with a dash of its own: they run in that order")
			continue
		}
		if t := s.Taper; t.Given && !t.Ends.Given && !t.Start.Given && !t.End.Given {
			c.Diags.Errorf("treat-step", t.At, "a taper needs a length").WithHint("taper: 2 s  for both ends, or  taper: { start: 1 s, end: 5 s }")
		} else if t.Given && t.Ends.Given && (t.Start.Given || t.End.Given) {
			c.Diags.Errorf("treat-step", t.Ends.At, "give ends, or start and end, not both")
		}
		if f := s.Bandpass; f.Given && !f.From.Given && !f.To.Given {
			c.Diags.Errorf("treat-step", f.At, "a bandpass needs a corner").WithHint("bandpass: { from: 0.1 Hz, to: 25 Hz }; from alone removes only what lies below, to alone only what lies above")
		}
	}
}

// treatment is the step for the engine, with the fields its parameters come from.
func (s *treatStep) treatment() (motion.Treatment, map[string]field.Field) {
	switch {
	case s.Baseline.Given:
		return motion.Baseline{Order: int(min(s.Baseline.Order.SI(), 1000)), Fit: s.Baseline.Fit.Text()}, map[string]field.Field{"order": s.Baseline.Order}
	case s.Taper.Given:
		t := motion.Taper{Start: s.Taper.Start.SI(), End: s.Taper.End.SI()}
		if s.Taper.Ends.Given {
			t.Start, t.End = s.Taper.Ends.SI(), s.Taper.Ends.SI()
			return t, map[string]field.Field{"start": s.Taper.Ends, "end": s.Taper.Ends}
		}
		return t, map[string]field.Field{"start": s.Taper.Start, "end": s.Taper.End}
	case s.Bandpass.Given:
		f := &s.Bandpass
		t := motion.Bandpass{From: f.From.SI(), To: f.To.SI(), Order: int(f.Order.SI()), CornerGain: 0.5, Pad: -1}
		if f.Gain.Text() == "0.707" {
			t.CornerGain = motion.HalfPower
		}
		if f.Pad.Given {
			t.Pad = f.Pad.SI()
		}
		return t, map[string]field.Field{"from": f.From, "to": f.To, "order": f.Order, "pad": f.Pad}
	default:
		return motion.Resample{Step: s.Resample.Step.SI()}, map[string]field.Field{"step": s.Resample.Step}
	}
}

// treated runs the steps and shows each.
func (b *record) treated(r *Run, rec *motion.Record) *motion.Record {
	table := exhibit.Table{ID: r.Name + "-treat", Caption: "What each step of the conditioning of " + r.Name + " changed, before the scale is applied",
		Columns: []exhibit.Column{Words("step"), Words("treatment"), Col("samples", pure), Col("PGA", inG), Col("PGV", unitsOf(r.System()).velocity), Col("PGD", unitsOf(r.System()).small), Col("v at the end", unitsOf(r.System()).velocity), Col("d at the end", unitsOf(r.System()).small)}}
	table.Rows = append(table.Rows, stateOf(r, "", "as read and cut", rec))
	var shown []exhibit.Item
	for i := range b.Treat {
		if o := b.Treat[i].Baseline.Order; o.SI() != math.Trunc(o.SI()) {
			r.Fail(o, "bounds", "order must be a whole number, this is %s", short(o.SI()))
			return nil
		}
		t, fields := b.Treat[i].treatment()
		r.Echo.Rows = append(r.Echo.Rows, exhibit.EchoRow{Field: fmt.Sprintf("treat[%d]", i+1), Label: fmt.Sprintf("treat, step %d", i+1), Value: plain(t.String())})
		if taper, ok := t.(motion.Taper); ok && taper.Start+taper.End == 0 {
			r.Diags.Errorf("treat-step", b.Treat[i].groups()[0].At, "a taper without length changes nothing").WithHint("leave the step out, or give start or end a length")
			return nil
		}
		out, residual, err := t.Apply(rec)
		if err != nil {
			at, hint := b.Treat[i].groups()[0].At, ""
			var m *motion.Misfit
			if errors.As(err, &m) {
				hint = m.Hint
				if f := fields[m.Parameter]; f.Given {
					at = f.At
				}
			}
			r.Diags.Errorf("treat", at, "%s", err).WithHint("%s", hint)
			return nil
		}
		fields[""] = field.Field{At: b.Treat[i].groups()[0].At} // the step as a whole
		b.doubts(r, t, rec, out, fields)
		if residual.What != "" {
			r.Crosscheck(fmt.Sprintf("step %d (%s): %s", i+1, b.Treat[i].groups()[0].name, residual.What), residual.Value, residual.Limit)
		}
		table.Rows = append(table.Rows, stateOf(r, fmt.Sprint(i+1), b.Treat[i].groups()[0].name, out))
		shown = append(shown, b.compared(r, i+1, t, rec, out)...)
		rec = out
	}
	r.Results = append(r.Results, exhibit.Item{Table: &table})
	r.Results = append(r.Results, shown...)
	b.explain(r)
	r.Caution("processed")
	o := rec.Origin
	if !b.Usable.Given && o.UsablePeriod > 0 {
		r.Used("usable_period", "longest usable period", about(o.UsablePeriod), "1/(1.25 × lower corner), common practice")
	} else if o.UsablePeriod < b.Usable.SI() {
		r.Warn("usable-period", "the lower corner of the filter limits the usable periods to %s s, less than the %s s given", short(round12(o.UsablePeriod)), short(round12(b.Usable.SI())))
	}
	if o.ShortestPeriod > 0 {
		r.Used("shortest_period", "shortest usable period", about(o.ShortestPeriod), "from the upper limit of the band, common practice")
	}
	return rec
}

// about is a time to as many digits as results have, fewer where they say it all.
func about(t float64) exhibit.Cell {
	return exhibit.Cell{Numbers: []exhibit.Number{{Value: t, Unit: seconds, Digits: min(quantity.Exact(round12(t)), quantity.Digits)}}}
}

// doubts warns of what a step will not do well on this record.
func (b *record) doubts(r *Run, t motion.Treatment, rec, out *motion.Record, fields map[string]field.Field) {
	for _, d := range motion.Doubts(t, rec, out) {
		r.WarnAt(fields[d.In], "treat", "%s", d.Text)
	}
}

// stateOf is a row of the table of steps.
func stateOf(r *Run, step, what string, rec *motion.Record) []exhibit.Cell {
	u := unitsOf(r.System())
	m := motion.Measure(rec)
	v, d := motion.Integrate(rec)
	end := len(v) - 1
	return []exhibit.Cell{{Text: step}, {Text: what}, inUnits(float64(rec.Samples()), pure), Cell(m.PGA, inG), Cell(m.PGV, u.velocity), Cell(m.PGD, u.small), Cell(v[end], u.velocity), Cell(d[end], u.small)}
}

// compared draws a step: the record before, thin, and after it.
func (b *record) compared(r *Run, step int, t motion.Treatment, before, after *motion.Record) []exhibit.Item {
	u := unitsOf(r.System())
	_, d0 := motion.Integrate(before)
	_, d1 := motion.Integrate(after)
	shift := after.Origin.Lead - before.Origin.Lead
	name := b.Treat[step-1].groups()[0].name
	begin, end := shift+before.Origin.Lead, shift+before.Duration()-before.Origin.Lead // the record between its pads
	from, to := max(0, begin-(end-begin)/4), min(after.Duration(), end+(end-begin)/4)
	panel := func(label string, y0, y1 []float64, unit quantity.Unit) exhibit.Panel {
		return exhibit.Panel{X: exhibit.Axis{Label: "time t", Unit: seconds, Min: &from, Max: &to}, Y: exhibit.Axis{Label: label, Unit: unit, Symmetric: true},
			Series: []exhibit.FigSerie{
				{Label: "before", X: times(before, shift), Y: y0, Role: exhibit.Secondary},
				{Label: "after", X: times(after, 0), Y: y1, Role: exhibit.Data},
			}}
	}
	out := []exhibit.Item{{Figure: &exhibit.Figure{ID: fmt.Sprintf("%s-treat-%d", r.Name, step),
		Caption: fmt.Sprintf("Step %d of %s, %s: acceleration and displacement before (thin) and after", step, r.Name, name),
		Alt:     "Histories of ground acceleration and displacement before and after the step: " + t.String() + ".",
		Panels:  []exhibit.Panel{panel("a", before.A, after.A, inG), panel("d", d0, d1, u.small)}}}}
	f, ok := t.(motion.Bandpass)
	if !ok {
		return out
	}
	x0, y0 := motion.Amplitude(before)
	x1, y1 := motion.Amplitude(after)
	gain := make([]float64, len(x1))
	for i, x := range x1 {
		gain[i] = f.Gain(x, before.Step)
	}
	var corners []exhibit.RefLine
	if f.From > 0 {
		corners = append(corners, exhibit.RefLine{Vertical: true, At: f.From, Label: short(round12(f.From)) + " Hz"})
	}
	if f.To > 0 {
		corners = append(corners, exhibit.RefLine{Vertical: true, At: f.To, Label: short(round12(f.To)) + " Hz"})
	}
	axis := exhibit.Axis{Label: "frequency f", Unit: hertz, Log: true}
	keep := func(x, y []float64, least float64) ([]float64, []float64) { // a logarithmic axis takes no zero
		var kx, ky []float64
		for i := range x {
			if y[i] > least {
				kx, ky = append(kx, x[i]), append(ky, y[i])
			}
		}
		return kx, ky
	}
	top := 0.0
	for _, y := range y0 {
		top = max(top, y)
	}
	x0, y0 = keep(x0, y0, 1e-5*top)
	xa, ya := keep(x1, y1, 1e-5*top)
	if top == 0 || len(xa) == 0 {
		return out
	}
	return append(out, exhibit.Item{Figure: &exhibit.Figure{ID: fmt.Sprintf("%s-treat-%d-fourier", r.Name, step),
		Caption: fmt.Sprintf("Step %d of %s, %s: Fourier amplitude before (thin) and after, and the gain of both passes; corners marked", step, r.Name, name),
		Alt:     "Fourier amplitude of the acceleration before and after the filter against frequency, and the gain of the filter.",
		Panels: []exhibit.Panel{
			{X: axis, Y: exhibit.Axis{Label: "Fourier amplitude", Unit: u.velocity, Log: true}, Lines: corners, Series: []exhibit.FigSerie{{Label: "before", X: x0, Y: y0, Role: exhibit.Secondary}, {Label: "after", X: xa, Y: ya, Role: exhibit.Data}}},
			{X: axis, Y: exhibit.Axis{Label: "gain", Min: zero()}, Lines: corners, Series: []exhibit.FigSerie{{X: x1, Y: gain, Role: exhibit.Data}}},
		}}})
}

func times(rec *motion.Record, shift float64) []float64 {
	t := make([]float64, rec.Samples())
	for i := range t {
		t[i] = shift + rec.Time(i)
	}
	return t
}

// explain says how each treatment that is used works.
func (b *record) explain(r *Run) {
	r.Explain("Order of work: the record is read, cut to the stretch given by from and to, treated step by step in the order written, and scaled.")
	used := map[string]bool{}
	for i := range b.Treat {
		used[b.Treat[i].groups()[0].name] = true
	}
	if used["baseline"] {
		r.Explain("Baseline: a polynomial of time is taken off the acceleration; its coefficients make the sum of squares of what is left, over the samples, least: of the acceleration, or of the velocity or displacement integrated from rest.", cite.To("Boore & Bommer 2005", ""))
	}
	if used["taper"] {
		r.taperSymbols()
		r.Equation(`w = \tfrac12\left(1 - \cos\frac{\pi t}{t_\mathrm{start}}\right)`, "cosine taper over the first t_start of the record, and likewise before its end", cite.To("Boore & Bommer 2005", ""))
	}
	if used["bandpass"] {
		r.filterSymbols()
		r.Equation(`|H|^2 = \frac{1}{1 + (x_\mathrm{from}/x)^{2n}} \cdot \frac{1}{1 + (x/x_\mathrm{to})^{2n}},\quad x = \tan(\pi f \Delta t)`,
			"gain of the forward and the backward pass together, without phase: Butterworth filters of order n by the bilinear transform, corners prewarped. At a corner it is 0.5 (−6 dB), one pass being at its half-power point; with corner_gain 0.707 (−3 dB) x_from is multiplied and x_to divided by (√2 - 1)^(1/2n)", cite.To("Butterworth 1930", ""))
		r.Explain("The record counts as zero outside itself and the filter is carried on there until it has died away; of what it moves out of the record, a pad is kept at each end, by default 1.5 times the order of both passes together over the corner, in seconds, shared between the ends. Velocity and displacement from rest hold only with it; records filtered with different pads are not in step.", cite.To("Converse & Brady 1992", ""), cite.To("Boore 2005", ""))
		r.Explain("Usable band, by common practice: periods up to $1/(1.25 f_\\mathrm{from})$ and from $1.25/f_\\mathrm{to}$.", cite.To("Boore & Bommer 2005", ""))
	}
	if used["resample"] {
		r.Explain("Resampling: band-limited interpolation by the sine cardinal under a Kaiser window (64 zeros to each side, stop band 120 dB down), the record zero outside itself. To a finer step the band up to 0.94 of the old Nyquist frequency is kept; to a coarser step the same sum is a low-pass that keeps the band up to 0.88 of the new Nyquist frequency and removes what lies above it.", cite.To("Kaiser 1974", ""))
	}
}
