package block

import (
	"errors"
	"math"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/motion"
	"quoin/calc/motion/archive"
	"quoin/calc/quantity"
	"quoin/calc/spectrum"
)

var recordKind = Kind{
	Name:    "record",
	Doc:     "a ground-acceleration record, from a file or a closed form",
	Makes:   "record",
	New:     func() Body { return &record{} },
	Product: func() any { return &motion.Record{} },
	Exports: []Export{
		{"pga", "peak ground acceleration, the largest |a|", "m/s^2"},
		{"pgv", "peak ground velocity, the largest |v| from rest, over continuous time", "m/s"},
		{"pgd", "peak ground displacement, the largest |d| from rest, over continuous time", "m"},
		{"arias", "Arias intensity, pi/(2 g) times the integral of a²", "m/s"},
		{"cav", "cumulative absolute velocity, the integral of |a|", "m/s"},
		{"d5_75", "significant duration between 5 and 75 % of the Arias intensity", "s"},
		{"d5_95", "significant duration between 5 and 95 % of the Arias intensity", "s"},
		{"housner", "Housner intensity, the integral of PSV at 5 % damping over periods from 0.1 to 2.5 s", "m"},
		{"step", "time between samples", "s"},
		{"samples", "number of samples", ""},
		{"duration", "time from the first sample to the last", "s"},
		{"usable_period", "longest usable period, where it is stated or a filter sets it", "s"},
		{"shortest_period", "shortest usable period, where a filter or another step sets it", "s"},
	},
}

type record struct {
	common
	File    field.Field `name:"file" is:"file" doc:"the record file, relative to the document"`
	Format  field.Field `name:"format" is:"text" default:"auto" doc:"format of the file; found from its content if auto"`
	Channel field.Field `name:"channel" is:"text" doc:"which column or trace of the file: its name, or its number from 1, a column of times not counted"`
	Step    field.Field `name:"step" is:"time" must:"positive" doc:"time between samples; not needed where the file states it, needed with form"`
	Unit    field.Field `name:"unit" is:"text" label:"unit in file" doc:"unit of the numbers in the file; not needed where the file states it"`
	Scale   field.Field `name:"scale" is:"number" default:"1" doc:"factor on the acceleration"`
	From    field.Field `name:"from" is:"time" must:"not-negative" doc:"start of the stretch that is used; the start of the record if not given"`
	To      field.Field `name:"to" is:"time" must:"positive" doc:"end of the stretch that is used; the end of the record if not given"`
	Treat   []treatStep `name:"treat" must:"filled" doc:"conditioning, a list of steps in the order in which they are taken: baseline, taper, bandpass, resample"`

	Form      field.Field `name:"form" is:"choice" of:"sine|half_sine|pulse|ramp|triangle|blast|versine|smooth" doc:"a closed form instead of a file"`
	Amplitude field.Field `name:"amplitude" is:"acceleration" show:"g" doc:"peak acceleration of the form"`
	Period    field.Field `name:"period" is:"time" must:"positive" doc:"period of a sine"`
	Frequency field.Field `name:"frequency" is:"frequency" show:"Hz" must:"positive" doc:"frequency of a sine, in place of its period"`
	Cycles    field.Field `name:"cycles" is:"number" must:"positive" doc:"number of cycles of a sine, in place of its duration"`
	Length    field.Field `name:"duration" is:"time" must:"positive" doc:"duration of the form"`
	Rise      field.Field `name:"rise" is:"time" must:"positive" doc:"time in which a ramp rises"`

	Event      field.Field `name:"event" is:"text" doc:"event that was recorded"`
	Station    field.Field `name:"station" is:"text" doc:"station"`
	Date       field.Field `name:"date" is:"text" doc:"date of the event"`
	Mechanism  field.Field `name:"mechanism" is:"text" doc:"mechanism of the event: strike-slip, reverse, normal, ..."`
	Magnitude  field.Field `name:"magnitude" is:"text" doc:"magnitude and its type"`
	Distance   field.Field `name:"distance" is:"length" show:"km|km" must:"not-negative" doc:"distance to the source"`
	DistanceIs field.Field `name:"distance_is" is:"choice" of:"Rrup|Rjb|Repi|Rhyp" label:"distance is" doc:"what the distance is measured to: the rupture, its surface projection, the epicentre or the hypocentre"`
	Vs30       field.Field `name:"vs30" is:"velocity" show:"m/s|ft/s" label:"Vs30" must:"positive" doc:"mean shear-wave velocity of the upper 30 m at the station"`
	Vs30Is     field.Field `name:"vs30_is" is:"choice" of:"measured|inferred" label:"Vs30 is" doc:"whether vs30 was measured at the station or inferred"`
	Component  field.Field `name:"component" is:"text" doc:"component of the motion"`
	Azimuth    field.Field `name:"azimuth" is:"number" show:"deg" doc:"azimuth of the component, clockwise from north"`
	Source     field.Field `name:"source" is:"text" doc:"where the record was obtained, when, and under which terms"`
	Usable     field.Field `name:"usable_period" is:"time" must:"positive" label:"longest usable period" doc:"longest period at which the record is reliable"`
}

// Check sees that a file's and a form's fields are not mixed.
func (b *record) Check(c *Checks) {
	if b.File.Given == b.Form.Given {
		c.Fail(b.File, "record-source", "a record has either a file or a form").WithHint("give one of the fields file and form")
		return
	}
	b.checkTreat(c)
	other, what := []field.Field{b.Amplitude, b.Period, b.Frequency, b.Cycles, b.Length, b.Rise}, "belongs to a closed form, and the record has a file"
	if b.Form.Given {
		other, what = []field.Field{b.Format, b.Channel, b.Unit}, "belongs to a file, and the record has a form"
	}
	for _, f := range other {
		if f.Given {
			c.Fail(f, "form-field", "this field %s", what)
		}
	}
	if b.Frequency.Given && b.Period.Given {
		c.Fail(b.Frequency, "form-field", "give the period or the frequency, not both")
	}
}

// Run reads the record and measures it.
func (b *record) Run(r *Run) {
	var rec *motion.Record
	if b.Form.Given {
		rec = b.form(r)
	} else {
		rec = b.read(r)
	}
	if rec == nil {
		return
	}
	asRead := rec
	if rec = b.cut(r, rec); rec == nil {
		return
	}
	if n := rec.Samples(); n > motion.MaxSamples {
		at := b.File
		if b.Form.Given {
			at = b.Step
		}
		r.Fail(at, "record-size", "the record has %d samples; a calculation takes %d at most", n, motion.MaxSamples).WithHint("cut it with from and to, or take a longer step")
		return
	}
	rec.Origin.UsablePeriod = b.Usable.SI()
	if len(b.Treat) > 0 {
		if rec = b.treated(r, rec); rec == nil {
			return
		}
	} else {
		r.Caution("unprocessed")
	}
	scale := b.Scale.SI()
	if scale == 0 {
		r.Fail(b.Scale, "bounds", "scale must not be zero")
		return
	}
	if math.Abs(scale) < 0.25 || math.Abs(scale) > 4 {
		r.Caution("scaled")
	}
	rec = rec.Scaled(scale)
	if err := rec.Validate(); err != nil {
		r.Fail(b.Scale, "record", "%s", err)
		return
	}
	r.Made = rec
	b.results(r, asRead, rec)
}

// read takes the record from its file.
func (b *record) read(r *Run) *motion.Record {
	if b.Unit.Given {
		if u, err := quantity.ParseUnit(b.Unit.Text()); err == nil && !u.Dim.Is(quantity.Acceleration) {
			r.Fail(b.Unit, "unit", "a record holds accelerations; %s is a unit of %s", b.Unit.Text(), u.Dim.Name()).WithHint("for instance g, m/s^2, cm/s^2 or gal")
			return nil
		}
	}
	data, full, err := r.Read(b.File.Text(), "record")
	if err != nil {
		r.Fail(b.File, "unreadable", "%s", err)
		return nil
	}
	ask := archive.Options{Format: b.Format.Text(), Channel: b.Channel.Text(), Step: b.Step.SI(), Unit: b.Unit.Text()}
	rec, err := archive.Read(full, data, ask)
	if err != nil {
		at := b.File.At
		hint := ""
		text := err.Error()
		var ae *archive.Error
		if errors.As(err, &ae) {
			hint, text = ae.Hint, ae.Summary
			switch {
			case ae.Channel && b.Channel.Given:
				at = b.Channel.At
			case ae.Format:
				at = b.Format.At
			case ae.Unit:
				at = b.Unit.At
			}
			if ae.Line > 0 {
				at = diag.Range{File: full, Line: ae.Line, Column: ae.Column, EndLine: ae.Line, EndColumn: ae.Column + ae.Width}
			}
		}
		r.Diags.Errorf("record", at, "%s", text).WithHint("%s", hint)
		return nil
	}
	o := rec.Origin
	for _, w := range o.Warnings {
		if w.Line > 0 {
			r.Warn(w.Code, "%s (%s line %d)", w.Text, full, w.Line)
		} else {
			r.Warn(w.Code, "%s", w.Text)
		}
	}
	r.Used("format", "format", plain(o.Format), found(!b.Format.Given))
	r.Used("unit", "unit in file", plain(o.UnitInFile), found(!b.Unit.Given))
	r.Used("step", "step", inUnits(rec.Step, seconds), found(!b.Step.Given))
	r.Used("samples_in_file", "samples in file", plain(quantity.Plain(float64(o.FileSamples))), "")
	for _, m := range []struct{ name, text string }{{"channel", o.Channel}, {"event", o.Event}, {"station", o.Station}, {"component", o.Component}, {"filter", o.Filter}} {
		if m.text != "" && !r.echoed(m.name) {
			r.Used(m.name, m.name, plain(m.text), "from the file")
		}
	}
	if invented(strings.Join(o.Header, " ") + " " + b.Source.Text()) {
		r.Caution("demonstration")
	}
	return rec
}

func found(fromFile bool) string {
	if fromFile {
		return "from the file"
	}
	return ""
}

func (r *Run) echoed(name string) bool {
	for _, row := range r.Echo.Rows {
		if row.Field == name {
			return true
		}
	}
	return false
}

// form samples a closed form.
func (b *record) form(r *Run) *motion.Record {
	p := motion.FormParameters{Amplitude: b.Amplitude.SI(), Period: b.Period.SI(), Cycles: b.Cycles.SI(), Duration: b.Length.SI(), Rise: b.Rise.SI(), Step: b.Step.SI()}
	if b.Frequency.Given {
		p.Period = 1 / b.Frequency.SI()
	}
	rec, err := motion.Form(b.Form.Text(), p)
	if err != nil {
		r.Fail(b.Form, "form", "%s", err)
		return nil
	}
	for i, row := range r.Echo.Rows {
		if row.Field == "format" {
			r.Echo.Rows = append(r.Echo.Rows[:i], r.Echo.Rows[i+1:]...)
			break
		}
	}
	return rec
}

// cut takes the stretch from..to.
func (b *record) cut(r *Run, rec *motion.Record) *motion.Record {
	if !b.From.Given && !b.To.Given {
		return rec
	}
	from, to := b.From.SI(), rec.Duration()
	at := b.From
	if b.To.Given {
		to, at = b.To.SI(), b.To
	}
	if b.From.Given && from > rec.Duration() {
		at = b.From
	}
	out, err := rec.Window(from, to)
	if err != nil {
		r.Fail(at, "window", "%s", err)
		return nil
	}
	for _, end := range []struct {
		f    field.Field
		name string
		t    float64
	}{{b.From, "from", math.Ceil(from/rec.Step-1e-6) * rec.Step}, {b.To, "to", math.Floor(to/rec.Step+1e-6) * rec.Step}} {
		if end.f.Given && math.Abs(end.t-end.f.SI()) > 1e-6*rec.Step {
			r.Warn("window", "%s lies between samples; the stretch used ends at the sample inside, %s s", end.name, short(round12(end.t)))
		}
	}
	return out
}

func (b *record) results(r *Run, asRead, rec *motion.Record) {
	u := unitsOf(r.System())
	m := motion.Measure(rec)
	b.motion(r, asRead, rec, m)
	housner, err := spectrum.Housner(rec, 0.05)
	if err != nil {
		r.Fail(b.File, "record", "%s", err)
		return
	}
	r.Number("pga", m.PGA, inG)
	r.Number("pgv", m.PGV, u.velocity)
	r.Number("pgd", m.PGD, u.small)
	r.Number("arias", m.Arias, u.velocity)
	r.Number("cav", m.CAV, u.velocity)
	r.Number("d5_75", m.D5to75, seconds)
	r.Number("d5_95", m.D5to95, seconds)
	r.Number("housner", housner, u.length)
	r.Number("step", rec.Step, seconds)
	r.Number("samples", float64(rec.Samples()), pure)
	r.Number("duration", rec.Duration(), seconds)
	if rec.Origin.UsablePeriod > 0 {
		r.Number("usable_period", rec.Origin.UsablePeriod, seconds)
	}
	if rec.Origin.ShortestPeriod > 0 {
		r.Number("shortest_period", rec.Origin.ShortestPeriod, seconds)
	}

	r.Explain("The acceleration is linear between samples. Velocity and displacement follow by exact integration from rest, so that their peaks, the integrals of $a^2$ and $|a|$, and the times at which the Arias integral passes 5, 75 and 95 % are exact for that motion.")
	r.recordSymbols()
	r.Equation(`I_\mathrm{A} = \frac{\pi}{2g}\int a^2\,\mathrm{d}t \qquad \mathrm{CAV} = \int |a|\,\mathrm{d}t \qquad I_\mathrm{H} = \int_{0.1\,\mathrm{s}}^{2.5\,\mathrm{s}} S_\mathrm{pv}(T,\,5\,\%)\,\mathrm{d}T`,
		"Arias intensity, cumulative absolute velocity, Housner intensity (trapezoid rule with a step of 0.01 s in T); g = 9.80665 m/s²", cite.To("Arias 1970", ""))

	if !b.Form.Given && m.PGD > 0 && m.TimePGD > rec.Duration()-rec.Step/2 {
		r.Warn("displacement-drift", "the displacement is largest at the end of the record: it drifts, and wants a baseline correction before its displacements or long periods are used")
	} else if v, d := motion.Integrate(rec); len(b.Treat) > 0 && math.Abs(d[len(d)-1]) > 0.1*m.PGD {
		r.Warn("displacement-drift", "after treatment the displacement ends at %s %% of its peak, with %s m/s of velocity: confirm that it may", quantity.Format(100*math.Abs(d[len(d)-1])/m.PGD, 2), quantity.Format(v[len(v)-1], 2))
	}
	v, d := motion.Integrate(rec)
	t := times(rec, 0)
	accel := r.System().Preferred(quantity.Acceleration)
	aID := r.Curve("a", t, seconds, rec.A, accel)
	vID := r.Curve("v", t, seconds, v, u.velocity)
	dID := r.Curve("d", t, seconds, d, u.small)
	var husid []float64
	husidID := ""
	if m.Arias > 0 {
		husid = motion.Husid(rec)
		husidID = r.Curve("husid", t, seconds, husid, percent)
	}
	if f, amplitude := motion.Amplitude(rec); len(f) > 1 {
		r.Curve("fourier", f, quantity.MustUnit("Hz"), amplitude, u.velocity)
	}
	panel := func(id, label, symbol string, y []float64, unit quantity.Unit, at, peak float64) exhibit.Panel {
		p := exhibit.Panel{X: exhibit.Axis{Label: "time t", Unit: seconds}, Y: exhibit.Axis{Label: label, Unit: unit, Symmetric: true},
			Series: []exhibit.FigSerie{{ID: id, Label: symbol, X: t, Y: y, Role: exhibit.Data}}}
		p.Points = []exhibit.RefPoint{{X: at, Y: peak, Label: quantity.Format(unit.From(peak), 3) + " " + unit.Pretty() + " at " + quantity.Format(at, 3) + " s"}}
		return p
	}
	fig := exhibit.Figure{ID: r.Name, Caption: Lines(&b.common, "Acceleration, velocity and displacement of "+r.Name+", as used"),
		Alt: "Histories of ground acceleration, velocity and displacement over " + quantity.Format(rec.Duration(), 4) + " s; the peaks are ringed.",
		Panels: []exhibit.Panel{
			panel(aID, "a", "a", rec.A, inG, m.TimePGA, at(rec.A, rec.Step, m.TimePGA)),
			panel(vID, "v", "v", v, u.velocity, m.TimePGV, signed(v, rec.Step, m.TimePGV, m.PGV)),
			panel(dID, "d", "d", d, u.small, m.TimePGD, signed(d, rec.Step, m.TimePGD, m.PGD)),
		}}
	if m.Arias > 0 {
		fig.Caption += ", and the build-up of the Arias intensity"
		fig.Alt += " Below them the share of the Arias intensity, from 0 to 100 %."
		fig.Panels = append(fig.Panels, buildUp(husidID, t, husid, m))
	}
	r.Figure(fig)
	row := func(words, name string, si float64, unit quantity.Unit, when float64) []exhibit.Cell {
		c := []exhibit.Cell{{Text: words}, {Numbers: []exhibit.Number{r.Shown(name, si, unit)}}, {Text: unit.Pretty()}, {}}
		if when >= 0 {
			c[3] = Cell(when, seconds)
		}
		return c
	}
	r.Table(exhibit.Table{ID: r.Name + "-measures", Caption: "Measures of " + r.Name,
		Columns: []exhibit.Column{Words("measure"), {Head: "value", Right: true}, Words("unit"), Col("at", seconds)},
		Rows: [][]exhibit.Cell{
			row("peak acceleration PGA", "pga", m.PGA, inG, m.TimePGA),
			row("peak velocity PGV", "pgv", m.PGV, u.velocity, m.TimePGV),
			row("peak displacement PGD", "pgd", m.PGD, u.small, m.TimePGD),
			row("Arias intensity", "arias", m.Arias, u.velocity, -1),
			row("cumulative absolute velocity", "cav", m.CAV, u.velocity, -1),
			row("significant duration, 5 to 75 %", "d5_75", m.D5to75, seconds, m.T5),
			row("significant duration, 5 to 95 %", "d5_95", m.D5to95, seconds, m.T5),
			row("Housner intensity, 5 % damping", "housner", housner, u.length, -1),
		}})
}

// at is the sample at a time that is a sample's.
func at(y []float64, step, t float64) float64 {
	return y[min(max(int(math.Round(t/step)), 0), len(y)-1)]
}

// signed gives a peak found as a magnitude the sign of the curve there.
func signed(y []float64, step, t, magnitude float64) float64 {
	return math.Copysign(magnitude, at(y, step, t))
}
