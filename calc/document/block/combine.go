package block

import (
	"fmt"
	"math"
	"strconv"

	"quoin/calc/cite"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/modal"
	"quoin/calc/quantity"
	"quoin/calc/spectrum"
	"quoin/calc/standard"
)

var combineKind = Kind{
	Name:    "combine",
	Doc:     "response of a structure to a spectrum by combination of its modes",
	Makes:   "combine",
	New:     func() Body { return &combine{} },
	Product: func() any { return &modal.Combined{} },
	Exports: []Export{
		{"base_shear", "base shear", "N"},
		{"base_shear_unscaled", "base shear before scale_to", "N"},
		{"scale_factor", "factor on forces, shears and moments by scale_to; 1 without it", ""},
		{"overturning", "overturning moment at the foot of each storey", "N*m"},
		{"storey_shear", "shear of each storey", "N"},
		{"storey_force", "lateral force at each level", "N"},
		{"displacement", "displacement of each level relative to the ground", "m"},
		{"drift", "drift of each storey, combined from the modal drifts", "m"},
		{"drift_ratio", "drift over storey height", ""},
	},
}

type combine struct {
	common
	Modes     field.Field `name:"modes" is:"block" of:"modes" need:"yes" doc:"the name of a modes block"`
	Target    field.Field `name:"target" is:"block" of:"target" doc:"the design spectrum; or give a spectrum"`
	Spectrum  field.Field `name:"spectrum" is:"block" of:"spectrum" doc:"the response spectrum of a record, in place of a target"`
	Direction field.Field `name:"direction" is:"choice" of:"x|y" default:"x" doc:"direction of the ground motion; a planar model has x only"`
	Damping   field.Field `name:"damping" is:"number" must:"fraction" show:"%" doc:"damping ratio of the modes; that of the structure, if it states one, else that of the spectrum"`
	Rule      field.Field `name:"rule" is:"choice" of:"CQC|SRSS|absolute" default:"CQC" doc:"rule of combination"`
	R         field.Field `name:"R" is:"number" must:"positive" default:"1" doc:"response modification coefficient: forces and displacements are divided by R/I_e"`
	Ie        field.Field `name:"I_e" is:"number" must:"positive" default:"1" doc:"importance factor"`
	ScaleTo   field.Field `name:"scale_to" is:"force" must:"positive" doc:"a base shear: forces, shears and moments are multiplied by max(1, scale_to/base_shear), displacements are not"`
}

// Check sees that one spectrum is named.
func (b *combine) Check(c *Checks) {
	if b.Target.Given == b.Spectrum.Given {
		c.Fail(b.Spectrum, "combine-input", "a combine block reads one spectrum: a target or a spectrum").WithHint("give one of the fields target and spectrum")
	}
}

// Run combines.
func (b *combine) Run(r *Run) {
	modes := r.Product(b.Modes.Text()).(*modal.Modes)
	if b.Direction.Text() != "x" {
		r.Fail(b.Direction, "direction", "the model is planar and has direction x only")
		return
	}
	z, psa, ok := b.ordinates(r, modes)
	if !ok {
		return
	}
	rule := modal.Rule(b.Rule.Text())
	if rule == modal.CQC && z == 0 {
		r.Fail(b.Damping, "damping", "the complete quadratic combination needs damping greater than zero").WithHint("use the rule SRSS, or state the damping")
		return
	}
	c, err := modal.Combine(modes, psa, []float64{z}, rule, b.R.SI()/b.Ie.SI())
	if err != nil {
		r.Fail(b.Modes, "combine", "%s", err)
		return
	}
	if b.ScaleTo.Given {
		if c, err = c.ScaledTo(b.ScaleTo.SI()); err != nil {
			r.Fail(b.ScaleTo, "combine", "%s", err)
			return
		}
	}
	r.Made = c
	b.results(r, c, z)
}

// ordinates reads the spectrum at every mode.
func (b *combine) ordinates(r *Run, modes *modal.Modes) (z float64, psa []float64, ok bool) {
	z, source := modes.Model.Damping, "of the structure"
	if b.Damping.Given {
		z, source = b.Damping.SI(), ""
	}
	known := b.Damping.Given || modes.Model.DampingGiven
	if b.Spectrum.Given {
		s := r.Product(b.Spectrum.Text()).(*spectrum.Spectrum)
		if !known {
			z, source = s.Damping[0], "the first of the spectrum"
		}
		r.Used("damping", "damping", inUnits(z, percent), source)
		for i, T := range modes.T {
			o, err := s.At(T, z)
			if err != nil {
				r.Fail(b.Spectrum, "combine", "mode %d: %s", i+1, err)
				return 0, nil, false
			}
			psa = append(psa, o.PSA)
		}
		r.Caution("few-motions")
		return z, psa, true
	}
	t := r.Product(b.Target.Text()).(*standard.Target)
	if !known {
		z, source = t.Damping, "of the target"
	}
	if math.Abs(z-t.Damping) > 1e-9 {
		at := b.Damping
		if !b.Damping.Given {
			at = b.Target
		}
		r.Fail(at, "target-damping", "the target %s holds for %s damping, the modes have %s", b.Target.Text(), damped(t.Damping), damped(z)).
			WithHint("its standard gives no rule to adjust it here; state the damping the target holds for, or use a target made for yours")
		return 0, nil, false
	}
	r.Used("damping", "damping", inUnits(z, percent), source)
	for i, T := range modes.T {
		a, err := t.PSA(T)
		if err != nil {
			r.Fail(b.Target, "target-range", "mode %d of %s: %s", i+1, b.Modes.Text(), err).WithHint("extend the table, or ask for fewer modes")
			return 0, nil, false
		}
		psa = append(psa, a)
	}
	return z, psa, true
}

func (b *combine) results(r *Run, c *modal.Combined, z float64) {
	u := unitsOf(r.System())
	r.Number("base_shear", c.BaseShear.Combined[0], u.force)
	r.Number("base_shear_unscaled", c.BaseShearUnscaled, u.force)
	r.Number("scale_factor", c.ScaleFactor, pure)
	vector := func(name string, x []float64, unit quantity.Unit) { r.Export(name, quantity.List(x, unit, c.Levels)) }
	vector("overturning", c.Overturning.Combined, u.moment)
	vector("storey_shear", c.StoreyShear.Combined, u.force)
	vector("storey_force", c.StoreyForce.Combined, u.force)
	vector("displacement", c.Displacement.Combined, u.small)
	vector("drift", c.Drift.Combined, u.small)
	vector("drift_ratio", c.DriftRatio.Combined, percent)
	for _, k := range []string{"combined", "damping", "linear"} {
		r.Caution(k)
	}
	if c.Divisor != 1 {
		r.Caution("reduced")
	}
	for _, w := range c.Warnings {
		r.Warn(w.Code, "%s", w.Text)
		r.Caution(w.Code)
	}
	b.method(r, c, z)
	b.tables(r, c)
	b.figures(r, c)
	for _, k := range c.Checks {
		r.Crosscheck(k.Name+":", k.Residual, k.Limit)
	}
}

func (b *combine) method(r *Run, c *modal.Combined, z float64) {
	r.Explain("Each mode's displacements, drifts, forces, shears and moments are found with their signs and then combined, each quantity by itself. Forces and displacements are divided by $R/I_\\mathrm{e} = " + short(c.Divisor) + "$; displacements are elastic and not amplified by a deflection factor.")
	r.Equation(`u_n = \Gamma_n\phi_n\frac{S_\mathrm{pa}(T_n)}{\omega_n^2 (R/I_\mathrm{e})},\qquad f_n = \Gamma_n M \phi_n \frac{S_\mathrm{pa}(T_n)}{R/I_\mathrm{e}}`, "displacements and forces of mode n", chopra())
	if b.ScaleTo.Given {
		r.Explain("Forces, shears and moments are multiplied by max(1, scale_to / base shear) = "+quantity.Format(c.ScaleFactor, 4)+"; displacements and drifts are not.", cite.To("ASCE/SEI 7-22", "12.9.1.4"))
	}
	switch c.Rule {
	case modal.CQC:
		r.Equation(`r = \sqrt{\sum_i\sum_j \rho_{ij}\, r_i r_j},\qquad \rho_{ij} = \frac{8\zeta^2(1+x)x^{3/2}}{(1-x^2)^2 + 4\zeta^2 x(1+x)^2},\quad x = \omega_i/\omega_j`,
			"complete quadratic combination, ζ = "+damped(z), cite.To("Der Kiureghian 1981", ""))
		r.Refs = append(r.Refs, cite.To("Wilson et al. 1981", ""))
	case modal.SRSS:
		r.Equation(`r = \sqrt{\sum_i r_i^2}`, "square root of the sum of squares", chopra())
	case modal.Absolute:
		r.Equation(`r = \sum_i |r_i|`, "sum of magnitudes", chopra())
	}
}

func (b *combine) tables(r *Run, c *modal.Combined) {
	u := unitsOf(r.System())
	modesT := exhibit.Table{ID: r.Name + "-modes", Caption: "Modes and their base shear, divided by R/I_e = " + short(c.Divisor) + ", with sign", Columns: []exhibit.Column{Words("mode"), Col("period T", seconds), Col("PSA, not divided", inG), Col("SD, not divided", u.small),
		Col("participation factor", pure), Col("mass ratio", percent), Col("base shear", u.force), Col("base moment", u.moment)}}
	for i := range c.T {
		modesT.Rows = append(modesT.Rows, []exhibit.Cell{{Text: strconv.Itoa(i + 1)}, Cell(c.T[i], seconds), Cell(c.PSA[i], inG), Cell(c.SD[i], u.small),
			Cell(c.Gamma[i], pure), Cell(c.MassRatio[i], percent), Cell(c.BaseShear.Modal[i][0], u.force), Cell(c.Overturning.Modal[i][0], u.moment)})
	}
	modesT.Rows = append(modesT.Rows, []exhibit.Cell{{Text: string(c.Rule), Strong: true}, {}, {}, {}, {}, {Numbers: []exhibit.Number{{Value: c.MassSum, Unit: percent}}, Strong: true},
		{Numbers: []exhibit.Number{r.Shown("base_shear", c.BaseShear.Combined[0], u.force)}, Strong: true}, {Numbers: []exhibit.Number{{Value: c.Overturning.Combined[0], Unit: u.moment}}, Strong: true}})
	r.Table(modesT)

	t := exhibit.Table{ID: r.Name + "-storeys", Caption: Lines(&b.common, "Combined response by "+string(c.Rule)+", highest level on top; elastic, divided by R/I_e = "+short(c.Divisor)+", without sign"), Columns: []exhibit.Column{Words("level"), Col("elevation", u.length),
		Col("storey force", u.force), Col("storey shear", u.force), Col("overturning at foot", u.moment), Col("displacement", u.small), Col("drift", u.small), Col("drift ratio", percent)}}
	for i := len(c.Levels) - 1; i >= 0; i-- {
		num := func(name string, x float64, unit quantity.Unit) exhibit.Cell {
			return exhibit.Cell{Numbers: []exhibit.Number{{Value: x, Unit: unit, ID: fmt.Sprintf("%s[%d]", r.ID(name), i+1)}}}
		}
		t.Rows = append(t.Rows, []exhibit.Cell{{Text: c.Levels[i]}, Cell(c.H[i], u.length), num("storey_force", c.StoreyForce.Combined[i], u.force), num("storey_shear", c.StoreyShear.Combined[i], u.force),
			num("overturning", c.Overturning.Combined[i], u.moment), num("displacement", c.Displacement.Combined[i], u.small), num("drift", c.Drift.Combined[i], u.small), num("drift_ratio", c.DriftRatio.Combined[i], percent)})
	}
	r.Table(t)
}

func (b *combine) figures(r *Run, c *modal.Combined) {
	u := unitsOf(r.System())
	y := levelAxis(c.Levels, c.H, u.length)
	panel := func(title, label string, unit quantity.Unit, s steps, dots bool) exhibit.Panel {
		return exhibit.Panel{Title: title, X: exhibit.Axis{Label: label, Unit: unit, Min: zero()}, Y: y, Series: []exhibit.FigSerie{{X: s.x, Y: s.y, Role: exhibit.Data, Dots: dots}}}
	}
	r.Figure(exhibit.Figure{ID: r.Name, Caption: Lines(&b.common, "Combined storey shear, displacement and drift ratio over the height by "+string(c.Rule)+"; elastic, divided by R/I_e = "+short(c.Divisor)), Beside: true,
		Alt: "Profiles over the height of the structure: storey shear in steps, displacement of the levels, drift ratio of the storeys.",
		Panels: []exhibit.Panel{
			panel("storey shear", "V", u.force, storeySteps(c.H, c.StoreyShear.Combined), false),
			panel("displacement", "u", u.small, steps{append([]float64{0}, c.Displacement.Combined...), append([]float64{0}, c.H...)}, true),
			panel("drift ratio", "drift", percent, storeySteps(c.H, c.DriftRatio.Combined), false),
		}})
}
