package block

import (
	"cmp"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/lateral"
	"quoin/calc/modal"
	"quoin/calc/quantity"
	"quoin/calc/standard"
)

// The groups of the criteria on the cover.
const (
	ofSite      = 0
	ofSystem    = 1
	ofProcedure = 2
)

// Criterion states a line of the design criteria: a value that the block rests on
// or settles. symbol may be empty.
func (r *Run) Criterion(group int, label, symbol string, value exhibit.Cell) {
	c := exhibit.Criterion{Group: exhibit.CriteriaGroups[group], Label: label, Value: value}
	if symbol != "" {
		c.Symbol = &expr.Node{Op: expr.Name, Text: symbol}
	}
	r.Criteria = append(r.Criteria, c)
}

// criterionWords are the parameters of targets that a cover states, in its order,
// with the words for them.
var criterionWords = []struct{ symbol, label string }{
	{"risk", "risk category"}, {"category", "design category"}, {"S_S", "mapped, short periods"}, {"S_1", "mapped, 1 s"}, {"site", "site class"},
	{"vs30", "shear wave velocity"}, {"F_a", "site coefficient"}, {"F_v", "site coefficient, 1 s"},
	{"S_DS", "design, short periods"}, {"S_D1", "design, 1 s"}, {"T_L", "long-period transition"},
	{"type", "type of spectrum"}, {"ground", "ground type"}, {"importance", "importance class"}, {"gamma_I", "importance factor"},
	{"a_gR", "reference ground acceleration"}, {"a_g", "design ground acceleration"}, {"S", "soil factor"},
	{"T_B", "plateau from"}, {"T_C", "plateau to"}, {"T_D", "long periods from"}, {"q", "behaviour factor"},
}

// criteria are those of a target.
func (b *target) criteria(r *Run, t *standard.Target) {
	for _, w := range criterionWords {
		p, ok := t.Parameter(w.symbol)
		switch {
		case !ok:
		case p.Text != "":
			r.Criterion(ofSite, w.label, "", exhibit.Cell{Text: p.Text})
		default:
			n := exhibit.Number{Value: p.Value, Unit: r.unitOf(p), ID: r.ID(p.Symbol)}
			if p.Given {
				n.Digits = quantity.Exact(n.Unit.From(p.Value))
			}
			group := ofSite
			if w.symbol == "q" {
				group = ofSystem
			}
			r.Criterion(group, w.label, w.symbol, exhibit.Cell{Numbers: []exhibit.Number{n}})
		}
	}
	spectrum := t.Spectrum + ", " + damped(t.Damping)
	if t.Basis == tableBasis {
		spectrum = "from a table, " + damped(t.Damping)
	} else if t.MultiPeriod {
		spectrum += ", multi-period"
	}
	r.Criterion(ofSite, "spectrum "+r.Name, "", exhibit.Cell{Text: spectrum})
	switch {
	case b.Specific.Given:
		r.Criterion(ofSite, "site-specific study (11.4.8)", "", exhibit.Cell{Text: b.Specific.Text()})
	case len(t.Warnings) > 0:
		for _, w := range t.Warnings {
			if w.Code == "site-specific" {
				r.Criteria = append(r.Criteria, exhibit.Criterion{Group: exhibit.CriteriaGroups[ofSite], Label: "site-specific study (11.4.8)", Value: exhibit.Cell{Text: "not stated"}, Open: true})
			}
		}
	}
}

// factor states a factor of the system, in words where it is missing.
func (r *Run) factor(label, symbol string, x float64) {
	if x == 0 {
		r.Criteria = append(r.Criteria, exhibit.Criterion{Group: exhibit.CriteriaGroups[ofSystem], Label: label, Symbol: &expr.Node{Op: expr.Name, Text: symbol}, Value: exhibit.Cell{Text: "not stated"}, Open: true})
		return
	}
	r.Criterion(ofSystem, label, symbol, inUnits(x, pure))
}

// criteria are those of static forces.
func (b *static) criteria(r *Run, s *lateral.Static) {
	u := unitsOf(r.System())
	name := "equivalent lateral force"
	if s.Q > 0 {
		name = "lateral force method"
	} else {
		r.factor("response modification", "R", s.R)
		r.factor("importance factor", "I_e", s.Ie)
		r.factor("deflection amplification", "C_d", s.Cd)
		if s.Omega0 > 0 {
			r.factor("overstrength", "Omega_0", s.Omega0)
		}
		if s.Rho > 0 {
			r.factor("redundancy", "rho", s.Rho)
		}
	}
	permitted := map[string]string{"permitted": "permitted", "not permitted": "NOT permitted"}[s.Permitted]
	r.Criterion(ofProcedure, "procedure", "", exhibit.Cell{Text: name + ", " + cmp.Or(permitted, "not shown to be permitted")})
	r.Criterion(ofProcedure, "seismic weight", "W", Cell(s.Weight, u.force))
	r.Criterion(ofProcedure, "period used", "T", exhibit.Cell{Numbers: []exhibit.Number{r.Shown("T", s.T, seconds)}})
	if s.Cs > 0 {
		r.Criterion(ofProcedure, "response coefficient", "C_s", exhibit.Cell{Numbers: []exhibit.Number{r.Shown("C_s", s.Cs, pure)}})
	} else {
		r.Criterion(ofProcedure, "correction factor", "lambda", exhibit.Cell{Numbers: []exhibit.Number{r.Shown("lambda", s.Lambda, pure)}})
	}
	r.Criterion(ofProcedure, "base shear", "V", exhibit.Cell{Numbers: []exhibit.Number{r.Shown("V", s.V, u.force)}})
}

// criteria are those of a modal response.
func (b *combine) criteria(r *Run, c *modal.Combined) {
	if b.R.Given {
		r.factor("response modification", "R", b.R.SI())
	}
	if b.Ie.Given {
		r.factor("importance factor", "I_e", b.Ie.SI())
	}
	text := []string{string(c.Rule), quantity.Plain(float64(len(c.T))) + " modes", quantity.Format(100*c.MassSum, 3) + " % of the mass"}
	if c.Residual != nil {
		text = append(text, "the rest as residual")
	}
	r.Criterion(ofProcedure, "procedure", "", exhibit.Cell{Text: "modal response spectrum: " + strings.Join(text, ", ")})
	label := "modal base shear"
	if c.ScaleFactor != 1 {
		label += ", scaled"
	}
	r.Criterion(ofProcedure, label, "", exhibit.Cell{Numbers: []exhibit.Number{r.Shown("base_shear", c.BaseShear.Combined[0], unitsOf(r.System()).force)}})
}

// criteria are those of drifts.
func (b *drift) criteria(r *Run, a analysis, d *lateral.Drift) {
	if a.european() {
		r.factor("displacement factor", "q_d", a.Qd)
		r.factor("reduction, damage limitation", "nu", a.Nu)
		return
	}
	r.factor("deflection amplification", "C_d", a.Cd)
	if b.Rho.Given {
		r.factor("redundancy", "rho", a.Rho)
	}
	least := d.Limit[0] / a.Hs[0]
	for i := range d.Limit {
		least = min(least, d.Limit[i]/a.Hs[i])
	}
	r.Criterion(ofProcedure, "allowed drift over height", "", Cell(least, pure))
}
