package block

import (
	"cmp"
	"math"

	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/motion"
	"quoin/calc/quantity"
)

// motion is the record for the register of records: asRead is what the file or the
// form gave, used is what the package computes with.
func (b *record) motion(r *Run, asRead, used *motion.Record, m motion.Measures) {
	u := unitsOf(r.System())
	o := used.Origin
	number := func(f field.Field, unit quantity.Unit) *exhibit.Number {
		if !f.Given {
			return nil
		}
		return &exhibit.Number{Value: f.SI(), Unit: unit, Digits: quantity.Exact(round12(unit.From(f.SI())))}
	}
	period := func(T float64) *exhibit.Number {
		if T == 0 {
			return nil
		}
		return &exhibit.Number{Value: T, Unit: seconds, Digits: 3}
	}
	exact := func(si float64) exhibit.Number {
		return exhibit.Number{Value: si, Unit: seconds, Digits: quantity.Exact(round12(si))}
	}
	peak := 0.0
	for _, a := range asRead.A {
		peak = max(peak, math.Abs(a))
	}
	v := &exhibit.Motion{
		Event: cmp.Or(b.Event.Text(), o.Event), Date: cmp.Or(b.Date.Text(), o.Date), Mechanism: b.Mechanism.Text(), Magnitude: b.Magnitude.Text(),
		Station: cmp.Or(b.Station.Text(), o.Station), Component: cmp.Or(b.Component.Text(), o.Component),
		Distance: number(b.Distance, b.Distance.Value.Unit), DistanceIs: b.DistanceIs.Text(), Vs30: number(b.Vs30, b.Vs30.Value.Unit), Vs30Is: b.Vs30Is.Text(),
		Azimuth: number(b.Azimuth, pure), File: b.File.Text(), Format: o.Format, UnitInFile: o.UnitInFile, Source: b.Source.Text(),
		FileSamples: asRead.Samples(), Samples: used.Samples(), Step: exact(used.Step), Duration: exact(used.Duration()),
		FilePGA: exhibit.Number{Value: peak, Unit: inG}, PGA: r.Shown("pga", m.PGA, inG), PGV: r.Shown("pgv", m.PGV, u.velocity), PGD: r.Shown("pgd", m.PGD, u.small),
		Arias: r.Shown("arias", m.Arias, u.velocity), D5to95: r.Shown("d5_95", m.D5to95, seconds),
		Scale: exhibit.Number{Value: b.Scale.SI(), Digits: quantity.Exact(b.Scale.SI())}, FileProcessing: o.Filter, Processing: o.Treatment,
		ShortestPeriod: period(o.ShortestPeriod), LongestPeriod: period(o.UsablePeriod),
	}
	if b.From.Given || b.To.Given {
		v.Processing = append([]string{"cut to a stretch"}, v.Processing...)
	}
	r.Motion = v
}

// buildUp is the panel of the Arias intensity as it comes in: shares of the whole over
// time, with 5 and 95 % and the duration between them.
func buildUp(id string, t, husid []float64, m motion.Measures) exhibit.Panel {
	one := 1.0
	at := func(t float64) string { return quantity.Format(t, 3) + " s" }
	return exhibit.Panel{X: exhibit.Axis{Label: "time t", Unit: seconds}, Y: exhibit.Axis{Label: "Arias intensity so far", Unit: percent, Min: zero(), Max: &one},
		Series: []exhibit.FigSerie{{ID: id, Label: "I", X: t, Y: husid, Role: exhibit.Data}},
		Lines: []exhibit.RefLine{{At: 0.05, Label: "5 %"}, {At: 0.95, Label: "95 %"},
			{Vertical: true, At: m.T5, Label: at(m.T5)}, {Vertical: true, At: m.T95, Label: "D5-95 = " + at(m.D5to95) + ", to " + at(m.T95)}}}
}
