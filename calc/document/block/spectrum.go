package block

import (
	"slices"

	"quoin/calc/cite"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/motion"
	"quoin/calc/quantity"
	"quoin/calc/spectrum"
)

var spectrumKind = Kind{
	Name:    "spectrum",
	Doc:     "the elastic response spectrum of a record",
	Makes:   "spectrum",
	New:     func() Body { return &spectrumFields{} },
	Product: func() any { return &spectrum.Spectrum{} },
	Exports: []Export{
		{"max_PSA", "largest pseudo-acceleration over the periods, at the first damping", "m/s^2"},
		{"T_at_max", "the period where it lies", "s"},
	},
	Functions: []Function{
		ordinate("PSA", "pseudo-acceleration", inG, func(o spectrum.Ordinates) float64 { return o.PSA }),
		ordinate("PSV", "pseudo-velocity", quantity.MustUnit("m/s"), func(o spectrum.Ordinates) float64 { return o.PSV }),
		ordinate("SD", "relative displacement", quantity.MustUnit("mm"), func(o spectrum.Ordinates) float64 { return o.SD }),
		ordinate("SV", "relative velocity", quantity.MustUnit("m/s"), func(o spectrum.Ordinates) float64 { return o.SV }),
		ordinate("SA", "absolute acceleration", inG, func(o spectrum.Ordinates) float64 { return o.SA }),
	},
}

// ordinate is a function of a spectrum, computed exactly at any period.
func ordinate(name, doc string, unit quantity.Unit, pick func(spectrum.Ordinates) float64) Function {
	return Function{
		Name: name, Usage: name + "(T, z)", Doc: doc + " at period T and damping z (the first damping of the block if not given), computed exactly",
		Min: 1, Max: 2, Dims: []quantity.Dim{quantity.Time, quantity.None}, Args: []string{"the period", "the damping"}, Unit: unit,
		Call: func(product any, args []float64) (float64, error) {
			s := product.(*spectrum.Spectrum)
			z := s.Damping[0]
			if len(args) > 1 {
				z = args[1]
			}
			o, err := s.At(args[0], z)
			return pick(o), err
		},
	}
}

type spectrumFields struct {
	common
	Record  field.Field `name:"record" is:"block" of:"record" need:"yes" doc:"the name of a record block"`
	Periods field.Field `name:"periods" is:"block" of:"periods" need:"yes" doc:"the name of a periods block"`
	Damping field.Field `name:"damping" is:"number" many:"yes" must:"fraction" show:"%" default:"5 %" doc:"damping ratios; the first is the one used where none is named"`
}

// Run computes the spectrum.
func (b *spectrumFields) Run(r *Run) {
	rec := r.Product(b.Record.Text()).(*motion.Record)
	grid := r.Product(b.Periods.Text()).(*Grid)
	zs := b.Damping.Value.SI
	for i, z := range zs {
		if slices.Contains(zs[:i], z) {
			r.Fail(b.Damping, "damping-twice", "the damping %s is named twice", damped(z))
			return
		}
	}
	s, err := spectrum.New(rec, grid.T, zs)
	if err != nil {
		r.Fail(b.Periods, "spectrum", "%s", err)
		return
	}
	b.show(r, s)
}

// show makes the exhibits.
func (b *spectrumFields) show(r *Run, s *spectrum.Spectrum) {
	r.Made = s
	u := unitsOf(r.System())
	best, at := s.MaxPSA(0)
	r.Number("max_PSA", best, inG)
	r.Number("T_at_max", at, seconds)
	for _, w := range s.Warnings {
		r.Warn(w.Code, "%s", w.Text)
		switch w.Code {
		case "period-unresolved", "period-coarse":
			r.Caution("coarse-step")
		case "record-short":
			r.Caution("short-record")
		}
	}
	if limit := s.Record.Origin.UsablePeriod; limit > 0 && s.Periods[len(s.Periods)-1] > limit*(1+1e-9) {
		r.Warn("usable-period", "ordinates beyond %s s lie outside the usable range of %s", quantity.Format(limit, 3), b.Record.Text())
		r.Caution("usable-period")
	}
	if limit := s.Record.Origin.ShortestPeriod; limit > 0 && s.Periods[0] < limit*(1-1e-9) {
		r.Warn("usable-period", "ordinates below %s s answer to motion that was filtered out of %s", quantity.Format(limit, 3), b.Record.Text())
		r.Caution("usable-period")
	}
	r.Caution("few-motions")
	r.Caution("damping")
	for i, z := range s.Damping {
		q := "@" + qualifier(z)
		r.Curve("PSA"+q, s.Periods, seconds, s.PSA[i], inG)
		r.Curve("PSV"+q, s.Periods, seconds, s.PSV[i], u.velocity)
		r.Curve("SD"+q, s.Periods, seconds, s.SD[i], u.small)
		r.Curve("SV"+q, s.Periods, seconds, s.SV[i], u.velocity)
		r.Curve("SA"+q, s.Periods, seconds, s.SA[i], inG)
	}
	r.Explain("Each oscillator is stepped exactly for acceleration that is linear between samples; the coefficients of the step come from series where closed forms would lose digits. Maxima are over continuous time (turning points inside a step by the closed form) and include the free vibration after the record.", cite.To("Nigam & Jennings 1969", ""))
	r.spectrumSymbols()
	r.Equation(`\ddot u + 2\zeta\omega\dot u + \omega^2 u = -a_\mathrm{g}(t),\quad \omega = 2\pi/T`, "relative displacement u of an oscillator of period T and damping ratio ζ", cite.To("Nigam & Jennings 1969", ""))
	r.Equation(`\mathrm{SD} = \max|u|,\quad \mathrm{PSV} = \omega\,\mathrm{SD},\quad \mathrm{PSA} = \omega^2\,\mathrm{SD},\quad \mathrm{SV} = \max|\dot u|,\quad \mathrm{SA} = \max|2\zeta\omega\dot u + \omega^2 u|`, "spectral ordinates", cite.To("Nigam & Jennings 1969", ""))

	fig := exhibit.Figure{ID: r.Name, Caption: Lines(&b.common, "Pseudo-acceleration response spectrum of "+b.Record.Text()),
		Alt: "Pseudo-acceleration against period for damping ratios of " + dampings(s.Damping) + "."}
	p := exhibit.Panel{X: exhibit.Axis{Label: "period T", Unit: seconds, Log: s.Periods[0] > 0 && s.Periods[len(s.Periods)-1] > 5*s.Periods[0]}, Y: exhibit.Axis{Label: "PSA", Unit: inG, Min: zero()}}
	for i, z := range s.Damping {
		p.Series = append(p.Series, exhibit.FigSerie{ID: r.Name + ".PSA@" + qualifier(z), Label: damped(z), X: s.Periods, Y: s.PSA[i], Role: exhibit.Data, Dash: i % 4})
	}
	p.Points = []exhibit.RefPoint{{X: at, Y: best, Label: quantity.Format(inG.From(best), 3) + " g at " + quantity.Format(at, 3) + " s"}}
	fig.Panels = []exhibit.Panel{p}
	r.Figure(fig)

	t := exhibit.Table{ID: r.Name + "-peaks", Caption: "Largest ordinates of " + r.Name + " over its periods",
		Columns: []exhibit.Column{Col("damping", percent), Col("PSA", inG), Col("at T", seconds), Col("PSV", u.velocity), Col("SD", u.small), Col("SA", inG)}}
	for i, z := range s.Damping {
		v, T := s.MaxPSA(i)
		t.Rows = append(t.Rows, []exhibit.Cell{inUnits(z, percent), Cell(v, inG), Cell(T, seconds), Cell(slices.Max(s.PSV[i]), u.velocity), Cell(slices.Max(s.SD[i]), u.small), Cell(slices.Max(s.SA[i]), inG)})
	}
	r.Table(t)
	r.Crosscheck("peak displacements at the shortest and longest period and at the peak, found again by a matrix exponential on a refined step, differ by at most", s.Residual(), 1e-6)
}

func dampings(zs []float64) string {
	out := ""
	for i, z := range zs {
		switch {
		case i > 0 && i == len(zs)-1:
			out += " and "
		case i > 0:
			out += ", "
		}
		out += damped(z)
	}
	return out
}

func zero() *float64 { z := 0.0; return &z }
