package block

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/lateral"
	"quoin/calc/quantity"
)

func (b *drift) results(r *Run, a analysis, d *lateral.Drift) {
	u := unitsOf(r.System())
	vector := func(name string, x []float64, unit quantity.Unit) { r.Export(name, quantity.List(x, unit, d.Levels)) }
	vector("drift", d.Amplified, u.small)
	vector("drift_first_order", d.FirstOrder, u.small)
	vector("drift_elastic", d.Elastic, u.small)
	if len(d.Displacement) > 0 {
		vector("displacement", d.Displacement, u.small)
	}
	vector("drift_ratio", d.Ratio, percent)
	vector("drift_limit", d.Limit, u.small)
	vector("second_order", d.SecondOrder, pure)
	if a.european() {
		r.Number("nu", d.Nu, pure)
	}
	clauses := lateral.DriftClausesOf(d.Basis)
	if b.Limit.Given {
		clauses.Limit = cite.Ref{}
	}
	demand := r.ID("drift")
	if a.european() {
		demand = r.ID("nu") + " * " + demand
	}
	r.Check(demand+" <= "+r.ID("drift_limit"), "storey drift of "+r.Name, clauses.Limit)
	if len(d.Theta) > 0 {
		vector("theta", d.Theta, pure)
		vector("theta_limit", d.ThetaLimit, pure)
		r.Check(r.ID("theta")+" <= "+r.ID("theta_limit"), "stability coefficient of "+r.Name, clauses.ThetaLimit)
	}
	b.method(r, a, d, clauses)
	b.table(r, a, d)
	b.figure(r, a, d)
	for _, c := range d.Checks {
		r.Crosscheck(c.Name+":", c.Residual, c.Limit)
	}
	b.doubts(r, a, d, clauses)
}

// doubts tells what the numbers do not hold.
func (b *drift) doubts(r *Run, a analysis, d *lateral.Drift, clauses lateral.DriftClauses) {
	r.Caution("drift")
	for _, w := range d.Warnings {
		at := field.Field{At: r.Place}
		if w.Code == "gravity-load" || w.Code == "heavy-load" {
			at = b.P
		}
		r.WarnAt(at, w.Code, "%s (%s)", w.Text, w.Ref)
		r.Refs = append(r.Refs, w.Ref)
	}
	if len(d.Theta) == 0 {
		r.Warn("no-theta", "P is not given: stability (second-order effects, %s) is not evaluated", clauses.Theta)
		r.Caution("no-theta")
	}
	if a.european() {
		return
	}
	if a.combined && !b.Scale.Given && a.limb == "" {
		r.Caution("drift-scaling")
		if a.scaled > 1 {
			r.WarnAt(b.From, "drift-scaling", "the forces of %s were scaled by %s and these drifts were not; where C_s is governed by 0.5 S_1/(R/I_e) they must be (%s): state scale_drifts: yes, or no where it is not", a.name, short(a.scaled), clauses.Combined)
			r.Refs = append(r.Refs, clauses.Combined)
		}
	}
	if a.unraised && !a.scale {
		r.WarnAt(b.From, "exception-raise", "the drifts of %s are of a spectrum that exception 2 to 11.4.8 leaves unraised, up to 1.5 times too small: state scale_drifts: yes, or raise the spectrum (site_specific: supplement 3)", a.name)
	}
	if a.divisor == 1 && a.Cd != 1 {
		r.WarnAt(b.From, "drift-unreduced", "%s is not divided by R/I_e (which is 1 there): C_d/I_e = %s multiplies the full elastic drift", a.name, short(d.Factor))
	}
}

// substituted shows an equation of one storey with its numbers: values by symbol,
// each with its id in the registry, if it has one.
type substituted map[string]exhibit.Number

func (s substituted) Value(path string) (quantity.Value, string, error) {
	n, ok := s[path]
	if !ok {
		panic("block: an equation without a value for " + path)
	}
	return quantity.Scalar(n.Value, n.Unit), n.ID, nil
}

func (s substituted) Call(string, []quantity.Value) (quantity.Value, string, error) {
	panic("block: an equation of a method calls no block")
}

// equation adds symbol = text = numbers = result to the method; a ref without a key:
// it is as the author states.
func (s substituted) equation(r *Run, symbol, text, description string, ref cite.Ref) {
	tree, findings := formula.ParseExpr(text, nil)
	if len(findings) > 0 {
		panic("block: the equation " + text + " cannot be read")
	}
	v, findings := formula.Evaluate(tree, s)
	if len(findings) > 0 {
		return // its value is in the tables, with what is wrong about it
	}
	v.Unit = s[symbol].Unit
	formula.ChooseDigits(tree, r.System(), v.Unit, quantity.Digits)
	formula.DropZeros(tree)
	e := &exhibit.Equation{Symbol: &expr.Node{Op: expr.Name, Text: symbol, ID: s[symbol].ID}, Tree: tree, Result: &v, Digits: quantity.Digits, Description: description}
	if e.Ref, e.RefText = sourced(ref); e.Ref != nil {
		r.Refs = append(r.Refs, ref)
	}
	r.Method = append(r.Method, exhibit.Item{Equation: e})
}

func (b *drift) method(r *Run, a analysis, d *lateral.Drift, clauses lateral.DriftClauses) {
	r.Explain(b.said(a, d))
	r.driftSymbols(a.european(), len(d.Theta) > 0)
	u := unitsOf(r.System())
	worst, stable := d.Governs()
	storey := func(i int) substituted {
		one := func(name string, x []float64, unit quantity.Unit) exhibit.Number {
			return exhibit.Number{Value: x[i], Unit: unit, ID: fmt.Sprintf("%s[%d]", r.ID(name), i+1)}
		}
		plain := func(x float64, unit quantity.Unit) exhibit.Number { return exhibit.Number{Value: x, Unit: unit} }
		s := substituted{
			"Delta_xe": one("drift_elastic", d.Elastic, u.small), "Delta": one("drift_first_order", d.FirstOrder, u.small), "Delta_2": one("drift", d.Amplified, u.small),
			"Delta_a": one("drift_limit", d.Limit, u.small), "V_x": plain(d.Shear[i], u.force), "h_sx": plain(d.Hs[i], u.length), "C_d": plain(a.Cd, pure), "I_e": plain(a.Ie, pure), "rho": plain(a.Rho, pure),
			"r_a": plain(a.Limit[min(i, len(a.Limit)-1)], pure), "q_d": plain(a.Qd, pure),
		}
		s["d_e"], s["d_r"], s["d_r2"], s["h"], s["V_tot"], s["d_lim"] = s["Delta_xe"], s["Delta"], s["Delta_2"], s["h_sx"], s["V_x"], s["Delta_a"]
		if len(d.Theta) > 0 {
			s["theta"], s["theta_max"], s["P_x"] = one("theta", d.Theta, pure), one("theta_limit", d.ThetaLimit, pure), plain(d.P[i], u.force)
			s["P_tot"] = s["P_x"]
			if !a.european() {
				s["beta"] = plain(a.Beta[min(i, len(a.Beta)-1)], pure)
			}
		}
		return s
	}
	at := func(i int) string { return "storey " + d.Levels[i] }
	s := storey(worst)
	second := d.SecondOrder[worst] > 1
	if a.european() {
		s.equation(r, "d_r", "q_d * d_e", "design drift of "+at(worst)+", nearest to its limit", clauses.Drift)
		if second {
			s.equation(r, "d_r2", "d_r / (1 - theta)", "with second-order effects", clauses.SecondOrder)
		}
		s.equation(r, "d_lim", "r_a * h", "limit of the reduced drift", clauses.Limit)
	} else {
		s.equation(r, "Delta", "C_d * Delta_xe / I_e", "design drift of "+at(worst)+", nearest to its limit", clauses.Drift)
		if second {
			s.equation(r, "Delta_2", "Delta / (1 - theta)", "with second-order effects", clauses.SecondOrder)
		}
		text := "r_a * h_sx"
		if a.Rho != 1 {
			text += " / rho"
		}
		s.equation(r, "Delta_a", text, "allowed drift", clauses.Limit)
	}
	if stable < 0 {
		return
	}
	s = storey(stable)
	description := "stability coefficient of " + at(stable) + ", nearest to its limit"
	switch {
	case a.european():
		s.equation(r, "theta", "P_tot * d_r / (V_tot * h)", description, clauses.Theta)
	case d.Basis == "ASCE/SEI 7-16":
		s.equation(r, "theta", "P_x * Delta * I_e / (V_x * h_sx * C_d)", description, clauses.Theta)
	default:
		s.equation(r, "theta", "P_x * Delta_xe / (V_x * h_sx)", description, clauses.Theta)
	}
	if !a.european() {
		s.equation(r, "theta_max", "min(0.5 / (beta * C_d), 0.25)", "its limit", clauses.ThetaLimit)
	}
}

// said is the method in words.
func (b *drift) said(a analysis, d *lateral.Drift) string {
	text := "Storey drifts of " + a.name + " at the centre of the floors, by " + d.Basis + ". "
	if a.european() {
		text += "The elastic drift is multiplied by $q_d$. "
	} else {
		text += "The elastic drift, divided by $R/I_\\mathrm{e}$ there, is multiplied by $C_\\mathrm{d}/I_\\mathrm{e}$; floors are rigid, so that no displacement of diaphragms is added. "
	}
	switch {
	case !a.combined:
		text += "Drifts and the storey shears in $\\theta$ are those of one set of forces. "
	case a.scale:
		text += "Drifts and the storey shears in $\\theta$ are combined over the modes, each by itself, and both are scaled by " + short(a.scaled) + ". "
	default:
		text += "Drifts and the storey shears in $\\theta$ are combined over the modes, each by itself, and neither is scaled to a base shear. "
	}
	if len(d.Theta) == 0 {
		return text + "The vertical load is not given: second-order effects are not evaluated."
	}
	text += "Where $\\theta$ exceeds 0.10 drifts are multiplied by $1/(1 - \\theta)$, and member forces must be too; the factor is the value second_order. "
	if a.european() {
		text += "It may stand for a second-order analysis up to $\\theta = 0.20$; $\\theta$ never exceeds 0.30."
	} else {
		text += "A structure whose $\\theta$ exceeds its limit is potentially unstable and is redesigned."
	}
	return text
}

func (b *drift) table(r *Run, a analysis, d *lateral.Drift) {
	u := unitsOf(r.System())
	t := exhibit.Table{ID: r.Name + "-storeys", Caption: Lines(&b.common, "Storey drifts of "+a.name+" by "+r.Name+" and their limits, highest storey on top; displacements are those of the level above, at the centre"),
		Columns: []exhibit.Column{Words("storey under"), Col("height", u.length)}}
	levels := len(d.Displacement) > 0
	if levels {
		t.Columns = append(t.Columns, Col("elastic displacement", u.small), Col("amplified displacement", u.small))
	}
	t.Columns = append(t.Columns, Col("elastic drift", u.small), Col("amplified drift", u.small), Col("drift ratio", percent))
	if a.european() {
		t.Columns = append(t.Columns, Col("ν × drift", u.small))
	}
	t.Columns = append(t.Columns, Col("limit", u.small), Col("ratio to limit", pure))
	if len(d.Theta) > 0 {
		t.Columns = append(t.Columns, Col("theta", pure), Col("theta limit", pure), Col("factor 1/(1 − theta)", pure))
	}
	for i := len(d.Levels) - 1; i >= 0; i-- {
		num := func(name string, x []float64, unit quantity.Unit) exhibit.Cell {
			return exhibit.Cell{Numbers: []exhibit.Number{{Value: x[i], Unit: unit, ID: fmt.Sprintf("%s[%d]", r.ID(name), i+1)}}}
		}
		row := []exhibit.Cell{{Text: d.Levels[i]}, Cell(d.Hs[i], u.length)}
		if levels {
			row = append(row, Cell(d.DisplacementElastic[i], u.small), num("displacement", d.Displacement, u.small))
		}
		row = append(row, num("drift_elastic", d.Elastic, u.small), num("drift", d.Amplified, u.small), num("drift_ratio", d.Ratio, percent))
		if a.european() {
			row = append(row, Cell(d.Nu*d.Amplified[i], u.small))
		}
		ratio := d.Nu * d.Amplified[i] / d.Limit[i]
		row = append(row, num("drift_limit", d.Limit, u.small), over(Cell(ratio, pure), ratio))
		if len(d.Theta) > 0 {
			row = append(row, over(num("theta", d.Theta, pure), d.Theta[i]/d.ThetaLimit[i]), num("theta_limit", d.ThetaLimit, pure), num("second_order", d.SecondOrder, pure))
		}
		t.Rows = append(t.Rows, row)
	}
	r.Table(t)
}

// limited names a line of limits, with its value where it is one.
func limited(limit []float64, unit quantity.Unit) string {
	for _, x := range limit {
		if relative(x, limit[0]) > 1e-12 {
			return "limit"
		}
	}
	return strings.TrimSpace("limit " + quantity.Format(unit.From(limit[0]), 3) + "\u202f" + unit.Pretty())
}

// over makes a cell strong where its number exceeds its limit.
func over(c exhibit.Cell, ratio float64) exhibit.Cell {
	c.Strong = ratio > 1+1e-12
	return c
}

func (b *drift) figure(r *Run, a analysis, d *lateral.Drift) {
	u := unitsOf(r.System())
	y := levelAxis(d.Levels, d.H, u.length)
	ratio, limit := make([]float64, len(d.Ratio)), make([]float64, len(d.Ratio))
	for i := range ratio {
		ratio[i], limit[i] = d.Nu*d.Ratio[i], d.Limit[i]/d.Hs[i]
	}
	profile := func(title, label string, unit quantity.Unit, x, limit []float64) exhibit.Panel {
		s, l := storeySteps(d.H, x), storeySteps(d.H, limit)
		return exhibit.Panel{Title: title, X: exhibit.Axis{Label: label, Unit: unit, Min: zero()}, Y: y, Series: []exhibit.FigSerie{
			{X: s.x, Y: s.y, Role: exhibit.Data}, {Label: limited(limit, unit), X: l.x, Y: l.y, Role: exhibit.Limit}}}
	}
	label := "drift / height"
	if a.european() {
		label = "ν × drift / height"
	}
	panels := []exhibit.Panel{profile("drift ratio", label, percent, ratio, limit)}
	if len(d.Theta) > 0 {
		p := profile("stability", "θ", pure, d.Theta, d.ThetaLimit)
		if slices.Max(d.ThetaLimit) > lateral.DriftThreshold { // else the limit itself stands below it
			p.Lines = append(p.Lines, exhibit.RefLine{Vertical: true, At: lateral.DriftThreshold, Label: "0.10"})
		}
		panels = append(panels, p)
	}
	worst, stable := d.Governs()
	seen := fmt.Sprintf("Profile over the height of the structure, in steps by storey, the limit dashed: the drift ratio comes nearest to its limit under level %s, %s %% against %s %%.", d.Levels[worst], short(100*ratio[worst]), short(100*limit[worst]))
	if stable >= 0 {
		seen += fmt.Sprintf(" Beside it the stability coefficient with its limit: nearest under level %s, %s against %s.", d.Levels[stable], short(d.Theta[stable]), short(d.ThetaLimit[stable]))
	}
	r.Figure(exhibit.Figure{ID: r.Name, Caption: Lines(&b.common, "Storey drifts of "+a.name+" by "+r.Name+" over the height with their limits"), Beside: true, Panels: panels,
		Alt: seen})
}
