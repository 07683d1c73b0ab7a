package block

import (
	"fmt"

	"quoin/calc/exhibit"
	"quoin/calc/lateral"
	"quoin/calc/quantity"
)

// limbs is the table of every limb of C_s.
func (b *static) limbs(r *Run, s *lateral.Static) {
	t := exhibit.Table{ID: r.Name + "-coefficient", Caption: "Limbs of the seismic response coefficient of " + r.Name + " by " + s.Basis + " 12.8.1.1; the governing one in bold",
		Columns: []exhibit.Column{Words("clause"), Words("limb"), Col("value", pure), Words("applies"), Words("why")}}
	for _, l := range s.Limbs {
		row := []exhibit.Cell{{Text: l.Ref.Clause}, {Text: l.Name}, {}, {Text: "no"}, {Text: l.Why}}
		if l.Unknown {
			row[3] = exhibit.Cell{Text: "not checked", Strong: true}
		}
		if l.Applies {
			row[2], row[3].Text = exhibit.Cell{Numbers: []exhibit.Number{r.Shown(l.Symbol, l.Value, pure)}}, "yes"
		}
		if l.Governs {
			row[3].Text = "governs"
			for i := range row {
				row[i].Strong = true
			}
		}
		t.Rows = append(t.Rows, row)
		r.Refs = append(r.Refs, l.Ref)
	}
	r.Table(t)
}

// item is a cell with item i of an exported vector.
func (b *static) item(r *Run, name string, i int, x float64, unit quantity.Unit) exhibit.Cell {
	return exhibit.Cell{Numbers: []exhibit.Number{{Value: x, Unit: unit, ID: fmt.Sprintf("%s[%d]", r.ID(name), i+1)}}}
}

// summed is a cell of the row of sums.
func summed(x float64, unit quantity.Unit) exhibit.Cell {
	return exhibit.Cell{Numbers: []exhibit.Number{{Value: x, Unit: unit}}, Strong: true}
}

// forces is the table of forces, shears and moments.
func (b *static) forces(r *Run, s *lateral.Static) {
	u := unitsOf(r.System())
	unit, sizes, whole, size, product := u.force, s.W, s.Weight, "seismic weight", "weight times h^k, h in "+s.HeightUnit
	if s.Q > 0 {
		unit, sizes, whole, size, product = u.mass, s.M, s.Mass, "mass", "mass times z, z in m"
		if b.Modes.Given {
			product = "mass times shape"
		}
	}
	t := exhibit.Table{ID: r.Name + "-forces", Caption: Lines(&b.common, "Static lateral forces of "+r.Name+", highest level on top; accidental torsion not included"),
		Columns: []exhibit.Column{Words("level"), Col("elevation", u.length), Col(size, unit), Col(product, unit), Col("share", pure), Col("lateral force", u.force), Col("storey shear", u.force), Col("overturning at foot", u.moment)}}
	for i := len(s.Levels) - 1; i >= 0; i-- {
		t.Rows = append(t.Rows, []exhibit.Cell{{Text: s.Levels[i]}, Cell(s.H[i], u.length), Cell(sizes[i], unit), Cell(s.Weighted[i], unit),
			b.item(r, "C_v", i, s.Cv[i], pure), b.item(r, "F", i, s.F[i], u.force), b.item(r, "storey_shear", i, s.Shear[i], u.force), b.item(r, "overturning", i, s.Moment[i], u.moment)})
	}
	t.Rows = append(t.Rows, []exhibit.Cell{{Text: "total", Strong: true}, {}, summed(whole, unit), summed(s.Sums.Weighted, unit), summed(s.Sums.Cv, pure), summed(s.Sums.F, u.force), {}, {}})
	r.Table(t)
}

// diaphragms is the table of diaphragm forces, where the standard has them.
func (b *static) diaphragms(r *Run, s *lateral.Static) {
	if len(s.Diaphragm) == 0 {
		return
	}
	u := unitsOf(r.System())
	t := exhibit.Table{ID: r.Name + "-diaphragms", Caption: "Diaphragm forces of " + r.Name + ", highest level on top; from the static forces alone, without transfer forces",
		Columns: []exhibit.Column{Words("level"), Col("weight of the diaphragm", u.force), Col("calculated", u.force), Col("least, 0.2 S_DS I_e w", u.force), Col("largest, 0.4 S_DS I_e w", u.force), Col("diaphragm force", u.force), Words("governs")}}
	for i := len(s.Levels) - 1; i >= 0; i-- {
		force := b.item(r, "diaphragm_force", i, s.Diaphragm[i], u.force)
		force.Strong = true
		t.Rows = append(t.Rows, []exhibit.Cell{{Text: s.Levels[i]}, Cell(s.W[i], u.force), Cell(s.DiaphragmRaw[i], u.force), Cell(s.DiaphragmMin[i], u.force), Cell(s.DiaphragmMax[i], u.force), force, {Text: s.DiaphragmGoverns[i]}})
	}
	r.Table(t)
}

// displacements is the table of the elastic response.
func (b *static) displacements(r *Run, s *lateral.Static) {
	u := unitsOf(r.System())
	factor := "C_d"
	if s.Q > 0 {
		factor = "q_d"
	}
	caption := "Elastic displacements and storey drifts of " + r.Name + ", highest level on top; not amplified by " + factor
	if s.DriftPeriod != s.T {
		caption += "; forces by the computed period of " + quantity.Format(s.DriftPeriod, quantity.Digits) + " s without its upper limit, C_s = " + quantity.Format(s.DriftCs, quantity.Digits)
	}
	t := exhibit.Table{ID: r.Name + "-drifts", Caption: caption,
		Columns: []exhibit.Column{Words("level"), Col("storey height", u.length), Col("force for drift", u.force), Col("storey shear for drift", u.force), Col("displacement", u.small), Col("storey drift", u.small)}}
	for i := len(s.Levels) - 1; i >= 0; i-- {
		t.Rows = append(t.Rows, []exhibit.Cell{{Text: s.Levels[i]}, Cell(s.Hs[i], u.length), Cell(s.DriftForce[i], u.force),
			b.item(r, "drift_shear", i, s.DriftShear[i], u.force), b.item(r, "displacement", i, s.Displacement[i], u.small), b.item(r, "drift", i, s.Drift[i], u.small)})
	}
	r.Table(t)
}

// figures draws the profiles over the height.
func (b *static) figures(r *Run, s *lateral.Static) {
	u := unitsOf(r.System())
	y := levelAxis(s.Levels, s.H, u.length)
	panel := func(title, label string, unit quantity.Unit, series ...exhibit.FigSerie) exhibit.Panel {
		return exhibit.Panel{Title: title, X: exhibit.Axis{Label: label, Unit: unit, Min: zero()}, Y: y, Series: series}
	}
	stepped := storeySteps(s.H, s.Shear)
	foot := s.H[0] - s.Hs[0]
	feet := append([]float64{foot}, s.H...)
	r.Figure(exhibit.Figure{ID: r.Name, Caption: Lines(&b.common, "Static lateral forces, storey shears and overturning moments of "+r.Name+" over the height"), Beside: true,
		Alt: fmt.Sprintf("Profiles over the height of the structure: lateral force at each level, %s %s at the highest; storey shear in steps, %s %s at the base; overturning moment growing to %s %s at the base.",
			short(u.force.From(s.F[len(s.F)-1])), u.force.Pretty(), short(u.force.From(s.Shear[0])), u.force.Pretty(), short(u.moment.From(s.Moment[0])), u.moment.Pretty()),
		Panels: []exhibit.Panel{
			panel("lateral force", "F", u.force, exhibit.FigSerie{X: s.F, Y: s.H, Role: exhibit.Data, Dots: true}),
			panel("storey shear", "V", u.force, exhibit.FigSerie{X: stepped.x, Y: stepped.y, Role: exhibit.Data}),
			panel("overturning moment", "M", u.moment, exhibit.FigSerie{X: append(append([]float64{}, s.Moment...), 0), Y: feet, Role: exhibit.Data}),
		}})
	profile := func(label string, x []float64, role exhibit.Role, dash int, dots bool) exhibit.FigSerie {
		return exhibit.FigSerie{Label: label, X: x, Y: s.H, Role: role, Dash: dash, Dots: dots}
	}
	panels := []exhibit.Panel{}
	caption, alt := "Elastic displacement and storey drift of "+r.Name+" over the height, not amplified", "Profiles over the height of the structure: displacement of the levels, storey drift in steps."
	if len(s.Diaphragm) > 0 {
		caption = "Diaphragm force of " + r.Name + " between its bounds; elastic displacement and storey drift, not amplified"
		alt = "Profiles over the height of the structure: diaphragm force between its least and largest value, displacement of the levels, storey drift in steps."
		panels = append(panels, panel("diaphragm force", "Fp", u.force, profile("least", s.DiaphragmMin, exhibit.Limit, 0, false), profile("largest", s.DiaphragmMax, exhibit.Limit, 0, false),
			profile("calculated", s.DiaphragmRaw, exhibit.Secondary, 2, false), profile("design", s.Diaphragm, exhibit.Governing, 0, true)))
	}
	drift := storeySteps(s.H, s.Drift)
	panels = append(panels, panel("displacement", "u", u.small, exhibit.FigSerie{X: append([]float64{0}, s.Displacement...), Y: feet, Role: exhibit.Data, Dots: true}),
		panel("storey drift", "drift", u.small, exhibit.FigSerie{X: drift.x, Y: drift.y, Role: exhibit.Data}))
	r.Figure(exhibit.Figure{ID: r.Name + "-response", Caption: caption, Beside: true, Alt: alt, Panels: panels})
}
