package block

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

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
	R         field.Field `name:"R" is:"number" must:"positive" default:"1" doc:"response modification coefficient; forces and displacements are divided by R/I_e"`
	Ie        field.Field `name:"I_e" is:"number" must:"positive" doc:"importance factor; by the risk category of the target, where R is given and it is not; else 1"`
	Residual  field.Field `name:"residual" is:"choice" of:"none|missing mass" default:"none" doc:"missing mass: the mass that the modes do not move is added as rigid, at the zero-period acceleration"`
	ZPA       field.Field `name:"zpa" is:"acceleration" must:"positive" label:"zero-period acceleration" doc:"acceleration of the residual, as the ground has it: stated undivided, divided by R/I_e here; that of the target at T = 0, or the peak acceleration of the record, if not given"`
	ScaleTo   field.Field `name:"scale_to" is:"force" must:"positive" doc:"a base shear: forces, shears and moments are multiplied by max(1, scale_to/base_shear), displacements are not"`
}

// Check sees that one spectrum is named.
func (b *combine) Check(c *Checks) {
	if b.Target.Given == b.Spectrum.Given {
		c.Fail(b.Spectrum, "combine-input", "a combine block reads one spectrum: a target or a spectrum").WithHint("give one of the fields target and spectrum")
	}
	if b.ZPA.Given && b.Residual.Text() == "none" {
		c.Fail(b.ZPA, "residual", "zpa is the acceleration of the residual, and residual is none").WithHint("write  residual: missing mass")
	}
}

// Run combines.
func (b *combine) Run(r *Run) {
	modes := r.Product(b.Modes.Text()).(*modal.Modes)
	if b.Direction.Text() != "x" {
		r.Fail(b.Direction, "direction", "the model is planar and has direction x only")
		return
	}
	ie := b.importance(r)
	in, ok := b.read(r, modes, ie)
	if !ok {
		return
	}
	rule := modal.Rule(b.Rule.Text())
	if rule == modal.CQC && in.z == 0 {
		r.Fail(b.Damping, "damping", "the complete quadratic combination needs damping greater than zero").WithHint("use the rule SRSS, or state the damping")
		return
	}
	c, err := modal.Combine(modes, in.psa, []float64{in.z}, rule, b.R.SI()/ie)
	if err != nil {
		r.Fail(b.Modes, "combine", "%s", err)
		return
	}
	c.Reduced(in.basis, b.R.SI(), ie, in.q)
	if in.target != nil {
		c.Importance = in.target.Importance()
	}
	c.Unraised = in.target != nil && in.target.RaisesCs(slices.Max(c.T))
	if b.Residual.Text() != "none" {
		if c = b.withResidual(r, c, modes, in); c == nil {
			return
		}
	}
	if b.ScaleTo.Given {
		c.Limb = b.limb(r, modes, in)
		if c, err = c.ScaledTo(b.ScaleTo.SI()); err != nil {
			r.Fail(b.ScaleTo, "combine", "%s", err)
			return
		}
		if c.ScaleFactor > unlikelyScale {
			r.WarnAt(b.ScaleTo, "large-value", "scale_to is %s times the base shear of the modes: was it given in another unit?", quantity.Format(c.ScaleFactor, 3))
		}
	}
	r.Made = c
	b.criteria(r, c)
	b.results(r, c, in)
	b.unraised(r, c)
	b.unscaled(r, c)
}

// unlikelyScale is a factor on forces that points to a wrong unit.
const unlikelyScale = 20

// demand is what is read of the spectrum.
type demand struct {
	z     float64   // damping ratio
	psa   []float64 // at the modes used
	left  []float64 // at the modes left out, where a residual asks for them
	zpa   float64   // 0 where the spectrum does not tell
	basis string    // of a target
	ie    float64   // importance factor that forces are multiplied by
	q     float64   // that a target is divided by already; 0: none
	tells string    // where zpa comes from

	target *standard.Target // nil: the spectrum is that of a record
}

// read reads the spectrum at every mode.
func (b *combine) read(r *Run, modes *modal.Modes, ie float64) (in demand, ok bool) {
	in.ie = ie
	in.z = modes.Model.Damping
	source := "of the structure"
	if b.Damping.Given {
		in.z, source = b.Damping.SI(), ""
	}
	known := b.Damping.Given || modes.Model.DampingGiven
	if b.Spectrum.Given {
		s := r.Product(b.Spectrum.Text()).(*spectrum.Spectrum)
		if !known {
			in.z, source = s.Damping[0], "the first of the spectrum"
		}
		r.Used("damping", "damping", inUnits(in.z, percent), source)
		at := func(T float64) (float64, error) {
			o, err := s.At(T, in.z)
			return o.PSA, err
		}
		for i, T := range modes.T {
			a, err := at(T)
			if err != nil {
				r.Fail(b.Spectrum, "combine", "mode %d: %s", i+1, err)
				return in, false
			}
			in.psa = append(in.psa, a)
		}
		in.left = b.left(modes, at)
		r.Caution("few-motions")
		in.zpa, in.tells = s.PGA, "peak acceleration of the record"
		return in, true
	}
	name := b.Target.Text()
	t := r.Product(name).(*standard.Target)
	if !known {
		in.z, source = t.Damping, "of the target"
	}
	if t.Vertical {
		r.Fail(b.Target, "target-vertical", "the target %s is of vertical motion, the modes are lateral", name).WithHint("use the horizontal spectrum")
		return in, false
	}
	if t.Exception == 3 {
		r.Fail(b.Target, "exception-modal", "the target %s rests on exception 3 to 11.4.8, which holds for design by the equivalent lateral force procedure alone", name).
			WithHint("find the forces by a static block, or give the target the values of a site-specific study")
		return in, false
	}
	in.target = t
	if in.basis, in.q = t.Basis, t.Q; t.Q > 0 && b.R.SI()/ie != 1 {
		at := b.R
		if !at.Given {
			at = b.Ie
		}
		r.Fail(at, "reduced-twice", "the target %s is divided by q = %s already; dividing by R/I_e = %s again would reduce the response twice", name, short(t.Q), short(b.R.SI()/ie)).
			WithHint("leave R and I_e out; importance belongs in gamma_I of the target")
		return in, false
	}
	read, err := t.AtDamping(in.z)
	if err != nil {
		at := b.Damping
		if !b.Damping.Given {
			at = b.Target
		}
		r.Fail(at, "target-damping", "the target %s holds for %s damping, the modes have %s", name, damped(t.Damping), damped(in.z)).
			WithHint("its standard gives no rule to adjust it here; state the damping the target holds for, or use a target made for yours")
		return in, false
	}
	r.Used("damping", "damping", inUnits(in.z, percent), source)
	if read != t {
		r.Explain("The target " + name + " holds for " + damped(t.Damping) + " damping; it is read at " + damped(in.z) + ", adjusted by the rule of its standard, " + t.Basis + ".")
	}
	for i, T := range modes.T {
		a, err := read.PSA(T)
		if err != nil {
			r.Fail(b.Target, "target-range", "mode %d of %s: %s", i+1, b.Modes.Text(), err).WithHint("extend the table, or ask for fewer modes")
			return in, false
		}
		in.psa = append(in.psa, a)
	}
	in.left = b.left(modes, read.PSA)
	if a, err := read.PSA(0); err == nil {
		in.zpa, in.tells = a, "the target at T = 0"
	}
	return in, true
}

// left reads the spectrum at the modes left out, where a residual is asked for; NaN
// where it does not reach.
func (b *combine) left(modes *modal.Modes, psa func(T float64) (float64, error)) []float64 {
	if b.Residual.Text() == "none" {
		return nil
	}
	out := make([]float64, len(modes.Left))
	for i, o := range modes.Left {
		a, err := psa(o.T)
		if out[i] = a; err != nil {
			out[i] = math.NaN()
		}
	}
	return out
}

// withResidual adds the missing mass; nil where it cannot be.
func (b *combine) withResidual(r *Run, c *modal.Combined, modes *modal.Modes, in demand) *modal.Combined {
	if modes.Imported {
		r.Fail(b.Residual, "residual", "the residual needs a stiffness matrix: its displacements follow from K, and the modes %s were imported", b.Modes.Text()).
			WithHint("import modes until they hold the mass, or give the structure by its matrices")
		return nil
	}
	zpa, source := b.ZPA.SI(), ""
	if !b.ZPA.Given {
		zpa, source = in.zpa, in.tells
	}
	if zpa == 0 {
		r.Fail(b.Residual, "residual", "the target %s does not tell its zero-period acceleration: it is not given at T = 0", b.Target.Text()).WithHint("state it:  zpa: 0.4 g")
		return nil
	}
	if !b.ZPA.Given {
		r.Used("zpa", "zero-period acceleration", inUnits(zpa, inG), source)
	}
	out, err := c.WithResidual(modes, zpa, in.left)
	if err != nil {
		r.Fail(b.Residual, "residual", "%s", err)
		return nil
	}
	r.Caution("residual")
	return out
}

func (b *combine) results(r *Run, c *modal.Combined, in demand) {
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
	if c.Divisor != 1 || c.Q > 0 && c.Q != 1 {
		r.Caution("reduced")
	}
	for _, w := range c.Warnings {
		r.Warn(w.Code, "%s", w.Text)
		if !strings.HasPrefix(w.Code, "residual-") { // the caution of every residual says it
			r.Caution(w.Code)
		}
	}
	b.method(r, c, in.z)
	b.tables(r, c)
	b.residual(r, c)
	b.figures(r, c)
	for _, k := range c.Checks {
		r.Crosscheck(k.Name+":", k.Residual, k.Limit)
	}
}

func (b *combine) method(r *Run, c *modal.Combined, z float64) {
	r.Explain("Each mode's displacements, drifts, forces, shears and moments are found with their signs and then combined, each quantity by itself. Forces and displacements are divided by $R/I_\\mathrm{e} = " + short(c.Divisor) + "$; displacements are elastic and not amplified by a deflection factor.")
	r.modalSymbols()
	r.Equation(`u_n = \Gamma_n\phi_n\frac{S_\mathrm{pa}(T_n)}{\omega_n^2 (R/I_\mathrm{e})},\qquad f_n = \Gamma_n M \phi_n \frac{S_\mathrm{pa}(T_n)}{R/I_\mathrm{e}}`, "displacements and forces of mode n", chopra())
	if c.Q > 0 {
		r.Explain("The spectrum is divided by the behaviour factor q = " + short(c.Q) + " already: forces and displacements are those of the reduced spectrum.")
	}
	enough := c.Enough()
	if enough.Ref.Key != "" {
		memory := ""
		if enough.Ref.Memory {
			memory = ", from memory, confirm"
		}
		r.Explain("Number of modes: "+enough.Text+" ("+enough.Ref.String()+memory+").", enough.Ref)
	} else {
		r.Explain("Number of modes: " + enough.Text + ".")
	}
	if b.ScaleTo.Given {
		r.Explain("Forces, shears and moments are multiplied by max(1, scale_to / base shear) = "+quantity.Format(c.ScaleFactor, 4)+"; displacements and drifts are not.", cite.To("ASCE/SEI 7-22", "12.9.1.4"))
	}
	switch c.Rule {
	case modal.CQC:
		r.cqcSymbols()
		r.Equation(`r = \sqrt{\sum_i\sum_j \rho_{ij}\, r_i r_j},\qquad \rho_{ij} = \frac{8\zeta^2(1+x)x^{3/2}}{(1-x^2)^2 + 4\zeta^2 x(1+x)^2},\quad x = \omega_i/\omega_j`,
			"complete quadratic combination, ζ = "+damped(z), cite.To("Der Kiureghian 1981", ""))
		r.Refs = append(r.Refs, cite.To("Wilson et al. 1981", ""))
	case modal.SRSS:
		r.Equation(`r = \sqrt{\sum_i r_i^2}`, "square root of the sum of squares", chopra())
	case modal.Absolute:
		r.Equation(`r = \sum_i |r_i|`, "sum of magnitudes", chopra())
	}
	if c.Residual != nil {
		r.residualSymbols()
		r.Equation(`f_\mathrm{r} = M e\,\frac{\mathrm{ZPA}}{R/I_\mathrm{e}},\quad e = 1 - \sum_n \Gamma_n \phi_n,\qquad K u_\mathrm{r} = f_\mathrm{r}`,
			"missing mass: static forces of the mass that the modes used do not move, and their displacements; 1 is a unit displacement of every level", cite.To("US NRC RG 1.92", "missing mass"))
		if c.Rule == modal.Absolute {
			r.Explain("The response to the missing mass is one more term of the sum.")
		} else {
			r.Explain("The response to the missing mass, $r_\\mathrm{r}$, is combined with that of the modes, $r_\\mathrm{m}$, as $\\sqrt{r_\\mathrm{m}^2 + r_\\mathrm{r}^2}$, each quantity by itself: as one more mode, rigid and not correlated with the others.")
		}
	}
}

// scaledBy says in a caption that forces were scaled.
func scaledBy(c *modal.Combined) string {
	if c.ScaleFactor == 1 {
		return ""
	}
	return ", forces and moments scaled by " + quantity.Format(c.ScaleFactor, 4)
}

func (b *combine) tables(r *Run, c *modal.Combined) {
	u := unitsOf(r.System())
	modesT := exhibit.Table{ID: r.Name + "-modes", Caption: "Modes and their base shear, divided by R/I_e = " + short(c.Divisor) + scaledBy(c) + ", with sign", Columns: []exhibit.Column{Words("mode"), Col("period T", seconds), Col("PSA, not divided", inG), Col("SD, not divided", u.small),
		Col("participation factor", pure), Col("mass ratio", percent), Col("base shear", u.force), Col("base moment", u.moment)}}
	for i := range c.T {
		modesT.Rows = append(modesT.Rows, []exhibit.Cell{{Text: strconv.Itoa(i + 1)}, Cell(c.T[i], seconds), Cell(c.PSA[i], inG), Cell(c.SD[i], u.small),
			Cell(c.Gamma[i], pure), Cell(c.MassRatio[i], percent), Cell(c.BaseShear.Modal[i][0], u.force), Cell(c.Overturning.Modal[i][0], u.moment)})
	}
	sum := c.MassSum
	if res := c.Residual; res != nil {
		sum += res.Mass
		modesT.Rows = append(modesT.Rows, []exhibit.Cell{{Text: "missing mass"}, {}, Cell(res.ZPA, inG), {}, {}, Cell(max(0, res.Mass), percent), Cell(c.BaseShear.Residual[0], u.force), Cell(c.Overturning.Residual[0], u.moment)})
	}
	modesT.Rows = append(modesT.Rows, []exhibit.Cell{{Text: string(c.Rule), Strong: true}, {}, {}, {}, {}, {Numbers: []exhibit.Number{{Value: sum, Unit: percent}}, Strong: true},
		{Numbers: []exhibit.Number{r.Shown("base_shear", c.BaseShear.Combined[0], u.force)}, Strong: true}, {Numbers: []exhibit.Number{{Value: c.Overturning.Combined[0], Unit: u.moment}}, Strong: true}})
	r.Table(modesT)

	t := exhibit.Table{ID: r.Name + "-storeys", Caption: Lines(&b.common, "Combined response by "+string(c.Rule)+", highest level on top; elastic, divided by R/I_e = "+short(c.Divisor)+scaledBy(c)+", without sign"), Columns: []exhibit.Column{Words("level"), Col("elevation", u.length),
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

// residual shows what the missing mass contributes, level by level.
func (b *combine) residual(r *Run, c *modal.Combined) {
	if c.Residual == nil {
		return
	}
	u := unitsOf(r.System())
	t := exhibit.Table{ID: r.Name + "-residual", Caption: "Missing mass: its static response, with sign, divided by R/I_e = " + short(c.Divisor) + scaledBy(c) + ", highest level on top", Columns: []exhibit.Column{Words("level"), Col("e", pure),
		Col("force", u.force), Col("storey shear", u.force), Col("overturning at foot", u.moment), Col("displacement", u.small), Col("drift", u.small)}}
	for i := len(c.Levels) - 1; i >= 0; i-- {
		t.Rows = append(t.Rows, []exhibit.Cell{{Text: c.Levels[i]}, Cell(c.Residual.Vector[i], pure), Cell(c.StoreyForce.Residual[i], u.force), Cell(c.StoreyShear.Residual[i], u.force),
			Cell(c.Overturning.Residual[i], u.moment), Cell(c.Displacement.Residual[i], u.small), Cell(c.Drift.Residual[i], u.small)})
	}
	r.Table(t)
}

func (b *combine) figures(r *Run, c *modal.Combined) {
	u := unitsOf(r.System())
	y := levelAxis(c.Levels, c.H, u.length)
	panel := func(title, label string, unit quantity.Unit, s steps, dots bool) exhibit.Panel {
		return exhibit.Panel{Title: title, X: exhibit.Axis{Label: label, Unit: unit, Min: zero()}, Y: y, Series: []exhibit.FigSerie{{X: s.x, Y: s.y, Role: exhibit.Data, Dots: dots}}}
	}
	r.Figure(exhibit.Figure{ID: r.Name, Caption: Lines(&b.common, "Combined storey shear, displacement and drift ratio over the height by "+string(c.Rule)+"; elastic, divided by R/I_e = "+short(c.Divisor)+scaledBy(c)), Beside: true,
		Alt: "Profiles over the height of the structure: storey shear in steps, displacement of the levels, drift ratio of the storeys.",
		Panels: []exhibit.Panel{
			panel("storey shear", "V", u.force, storeySteps(c.H, c.StoreyShear.Combined), false),
			panel("displacement", "u", u.small, steps{append([]float64{0}, c.Displacement.Combined...), append([]float64{0}, c.H...)}, true),
			panel("drift ratio", "drift", percent, storeySteps(c.H, c.DriftRatio.Combined), false),
		}})
}
