package block

import (
	"fmt"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/lateral"
	"quoin/calc/quantity"
)

// workings are equations with their numbers: lines of formulas over values of
// this block and others, each compared with what the engine found.
type workings struct {
	r     *Run
	names map[string]given
	call  func(path string, args []quantity.Value) (quantity.Value, string, error)
	worst float64
}

// given is a value that an equation refers to.
type given struct {
	value quantity.Value
	id    string
}

func (w *workings) let(name, id string, si float64, unit quantity.Unit) {
	w.names[name] = given{quantity.Scalar(si, unit), id}
}

// Value and Call make it a formula.Scope.
func (w *workings) Value(path string) (quantity.Value, string, error) {
	g, ok := w.names[path]
	if !ok {
		panic("block: an equation refers to " + path)
	}
	return g.value, g.id, nil
}

func (w *workings) Call(path string, args []quantity.Value) (quantity.Value, string, error) {
	return w.call(path, args)
}

// line adds  name = text  and sets the name for the lines below; want is what the
// engine found, SI.
func (w *workings) line(name, text string, unit quantity.Unit, want float64, doc string, ref cite.Ref) {
	tree, findings := formula.ParseExpr(text, nil)
	if len(findings) > 0 {
		panic("block: equation of " + name + ": " + findings[0].Summary)
	}
	v, findings := formula.Evaluate(tree, w)
	if len(findings) > 0 {
		panic("block: equation of " + name + ": " + findings[0].Summary)
	}
	w.worst = max(w.worst, relative(v.SI[0], want))
	v.Unit = unit
	id := ""
	if _, ok := w.r.Kind.Export(name); ok {
		id = w.r.ID(name)
	}
	formula.ChooseDigits(tree, w.r.System(), unit, quantity.Digits)
	formula.DropZeros(tree)
	w.r.Method = append(w.r.Method, exhibit.Item{Equation: &exhibit.Equation{Symbol: &expr.Node{Op: expr.Name, Text: name, ID: id}, Tree: tree, Result: &v, Digits: quantity.Digits, Description: doc, Ref: &ref}})
	w.r.Refs = append(w.r.Refs, ref)
	w.let(name, id, want, unit)
}

// americanMethod shows 12.8 with its numbers and returns how far the equations lie
// from the values of the engine.
func (b *static) americanMethod(r *Run, s *lateral.Static) float64 {
	r.staticSymbols(s)
	u := unitsOf(r.System())
	c := lateral.ClausesOf(s.Basis)
	w := &workings{r: r, names: map[string]given{}}
	target, frame := b.Target.Text()+".", b.Structure.Text()+"."
	w.let("S_DS", target+"S_DS", s.SDS, pure)
	w.let("S_D1", target+"S_D1", s.SD1, pure)
	w.let("T_L", target+"T_L", s.TL, seconds)
	w.let("R", "", s.R, pure)
	w.let("I_e", "", s.Ie, pure)
	w.let("C_t", "", s.Ct, pure)
	w.let("x", "", s.X, pure)
	w.let("W", frame+"weight", s.Weight, u.force)
	hn := frame + "h_n"
	if b.Hn.Given {
		hn = ""
	}
	height := quantity.MustUnit(s.HeightUnit)
	w.let("h_n", hn, s.Hn, height)

	capped := "; the reduction of $S_\\mathrm{DS}$ that 12.8.1.3 offers is not used"
	if b.Cap.Text() == "yes" {
		capped = "; $S_\\mathrm{DS}$ is taken by 12.8.1.3 in the plateau of $C_\\mathrm{s}$ alone"
	}
	r.Explain("Equivalent lateral force procedure of "+c.Ref("12.8").String()+", direction x. What is asked of the structure (12.6) is in the table of conditions: the procedure is "+s.Permitted+capped+".", c.Ref("12.8"))
	b.approximateLines(w, s, c)
	rows := lateral.CuRows(s.SD1)
	if at := rows[0]; len(rows) == 1 {
		side := "S_D1 from " + quantity.Plain(at.SD1) + " on"
		if s.SD1 <= at.SD1 {
			side = "S_D1 up to " + quantity.Plain(at.SD1)
		}
		w.line("C_u", quantity.Plain(at.Cu), pure, s.Cu, "coefficient for the upper limit, of the row for "+side, c.Ref("Table 12.8-1"))
	} else {
		a, b := rows[0], rows[1]
		w.line("C_u", fmt.Sprintf("%s + (%s - %s) * (S_D1 - %s) / (%s - %s)", quantity.Plain(a.Cu), quantity.Plain(b.Cu), quantity.Plain(a.Cu), quantity.Plain(a.SD1), quantity.Plain(b.SD1), quantity.Plain(a.SD1)),
			pure, s.Cu, "coefficient for the upper limit, linear between two rows of the table", c.Ref("Table 12.8-1"))
	}
	if s.Stated > 0 {
		w.let("T_computed", "", s.Stated, seconds)
		w.line("T", "min(T_computed, C_u * T_a)", seconds, s.T, "period used: "+s.TWhy, c.Ref("12.8.2"))
	} else {
		w.line("T", "T_a", seconds, s.T, "period used: "+s.TWhy, c.Ref("12.8.2"))
	}
	b.coefficientLines(w, s, c)
	w.line("V", "C_s * W", u.force, s.V, "base shear", c.Ref(c.Shear))
	w.line("k", "1 + (min(max(num(T, s), 0.5), 2.5) - 0.5) / 2", pure, s.K, "exponent of the distribution: 1 up to 0.5 s, 2 from 2.5 s, linear between", c.Ref("12.8.3"))
	r.Equation(`F_x = C_{\mathrm{v}x} V,\qquad C_{\mathrm{v}x} = \frac{w_x h_x^k}{\sum_i w_i h_i^k}`, "lateral force at level x, h_x its elevation above the base", c.Ref(c.Force+", "+strings.TrimPrefix(c.Share, "Eq. ")))
	r.Equation(`V_x = \sum_{i \ge x} F_i,\qquad M_x = \sum_{i \ge x} F_i (h_i - h_{x-1})`, "shear of storey x and overturning moment at its foot, not reduced", c.Ref(c.Sum+", 12.8.5"))
	r.Equation(`F_{\mathrm{p}x} = \frac{\sum_{i \ge x} F_i}{\sum_{i \ge x} w_i} w_{\mathrm{p}x},\qquad 0.2 S_\mathrm{DS} I_\mathrm{e} w_{\mathrm{p}x} \le F_{\mathrm{p}x} \le 0.4 S_\mathrm{DS} I_\mathrm{e} w_{\mathrm{p}x}`, "diaphragm force; the weight of a diaphragm is taken as the seismic weight of its level", c.Ref("Eqs. 12.10-1 to 12.10-3"))
	b.driftMethod(r, s, c)
	return w.worst
}

// approximateLines shows the approximate period by the rule that was chosen.
func (b *static) approximateLines(w *workings, s *lateral.Static, c lateral.Clauses) {
	switch s.PeriodRule {
	case "storeys":
		w.let("N", "", float64(len(s.Levels)), pure)
		w.line("T_a", "0.1 * N * 1 s", seconds, s.Ta, "approximate period of moment frames, N the number of storeys above the base: "+s.System, c.Ref(c.Storeys))
	case "walls":
		area, unit := "100 / A_B * (", quantity.MustUnit(s.HeightUnit)
		w.let("A_B", "", s.BaseArea, quantity.MustUnit(s.HeightUnit+"^2"))
		for i, wall := range s.Walls {
			if i > 0 {
				area += " + "
			}
			d, t := fmt.Sprintf("D_%d", i+1), fmt.Sprintf("t_%d", i+1)
			w.let(d, "", wall.Length, unit)
			w.let(t, "", wall.Thickness, unitsOf(w.r.System()).small)
			area += d + " * " + t + " / (1 + 0.83 * (h_n / " + d + ")^2)"
		}
		w.let("C_q", "", s.Cq, pure)
		w.line("C_w", area+")", pure, s.Cw, "effective area of the shear walls of length D and thickness t, in percent of the area A_B at the base", c.Ref(c.Area))
		w.line("T_a", "C_q * num(h_n, "+s.HeightUnit+") / sqrt(C_w) * 1 s", seconds, s.Ta, "approximate period of structures with shear walls; C_q for h_n in "+s.HeightUnit+wallUnit(s.HeightUnit), c.Ref(c.Walls))
	default:
		from := "C_t and x as stated"
		if s.System != "" {
			from = "C_t and x of Table 12.8-2: " + s.System
		}
		w.line("T_a", "C_t * num(h_n, "+s.HeightUnit+")^x * 1 s", seconds, s.Ta, "approximate period; "+from, c.Ref(c.Approximate))
	}
}

// coefficientLines shows every limb of C_s: with its numbers, or why it does not apply.
func (b *static) coefficientLines(w *workings, s *lateral.Static, c lateral.Clauses) {
	texts := map[string]string{
		c.Plateau:   "S_DS / (R / I_e)",
		c.Velocity:  "S_D1 / (num(T, s) * (R / I_e))",
		c.Displaced: "S_D1 * num(T_L, s) / (num(T, s)^2 * (R / I_e))",
		c.Minimum:   "max(0.044 * S_DS * I_e, 0.01)",
		c.Least:     "0.5 * S_1 / (R / I_e)",
	}
	if c.Spectrum != "" {
		texts[c.Spectrum] = "S_a / (R / I_e)"
		w.let("S_a", "", s.Sa/quantity.Gravity, pure)
	}
	if s.SDSUsed < s.SDS {
		texts[c.Plateau] = "S_DS12813 / (R / I_e)"
		w.line("S_DS12813", "max(1, 0.7 * S_DS)", pure, s.SDSUsed, "largest S_DS that C_s need be found from", c.Ref("12.8.1.3"))
	}
	if s.S1Known {
		w.let("S_1", b.Target.Text()+".S_1", s.S1, pure)
	}
	var upper, lower []string
	for _, l := range s.Limbs {
		if !l.Applies {
			verb := ") does not apply: "
			if l.Unknown {
				verb = ") could not be checked: "
			}
			w.r.Explain(l.Ref.String()+typeset(" ("+l.Name+verb+l.Why+"."), l.Ref)
			continue
		}
		text, doc := texts[l.Ref.Clause], l.Name+": "+l.Why
		if s.Exception == 2 && l.Symbol == "C_s_max" {
			text = "1.5 * " + text
		}
		if l.Governs {
			doc += "; governs"
		}
		w.line(l.Symbol, text, pure, l.Value, doc, l.Ref)
		if l.Lower() {
			lower = append(lower, l.Symbol)
		} else {
			upper = append(upper, l.Symbol)
		}
	}
	least := upper[0]
	if len(upper) > 1 {
		least = "min(" + strings.Join(upper, ", ") + ")"
	}
	w.line("C_s", "max("+least+", "+strings.Join(lower, ", ")+")", pure, s.Cs, "seismic response coefficient", c.Ref("12.8.1.1"))
}

// driftMethod says what forces the displacements belong to.
func (b *static) driftMethod(r *Run, s *lateral.Static, c lateral.Clauses) {
	kept := " The least value of " + c.Minimum + " is kept for drift, although the standard may let it aside there."
	if s.DriftPeriod == s.T {
		r.Explain("Elastic displacements $u$ solve $K u = F$ with the forces above; they are not amplified by $C_\\mathrm{d}$."+kept, c.Ref("12.8.6"))
		return
	}
	r.Explain("Elastic displacements $u$ solve $K u = F$ with forces found by the computed period $T = "+quantity.Format(s.DriftPeriod, quantity.Digits)+"\\;\\mathrm{s}$ without the upper limit: $C_\\mathrm{s} = "+quantity.Format(s.DriftCs, quantity.Digits)+
		"$ by "+s.DriftLimb.Ref.Clause+" ("+s.DriftLimb.Name+"), $k = "+quantity.Format(s.DriftK, quantity.Digits)+"$. They are not amplified by $C_\\mathrm{d}$."+kept, c.Ref("12.8.6.2"))
}

// europeanMethod shows 4.3.3.2 with its numbers; as americanMethod.
func (b *static) europeanMethod(r *Run, s *lateral.Static) float64 {
	r.staticSymbols(s)
	u := unitsOf(r.System())
	target, frame := b.Target.Text(), b.Structure.Text()+"."
	w := &workings{r: r, names: map[string]given{}}
	w.call = func(string, []quantity.Value) (quantity.Value, string, error) {
		return quantity.Scalar(s.Sa, metric), target + ".PSA", nil
	}
	w.let("T_C", target+".T_C", s.TC, seconds)
	w.let("n", "", float64(len(s.Levels)), pure)
	w.let("m", frame+"mass", s.Mass, u.mass)
	w.let("T_stated", "", s.T, seconds)
	w.let("C_t", "", s.Ct, pure)
	hn := frame + "h_n"
	if b.Hn.Given {
		hn = ""
	}
	w.let("H", hn, s.Hn, quantity.MustUnit("m"))

	r.Explain("Lateral force method of analysis of EN 1998-1 4.3.3.2, direction x. What is asked of the building is in the table of conditions: the method is "+s.Permitted+". The ordinates are those of the design spectrum, divided by $q = "+short(s.Q)+"$.", lateral.EN("4.3.3.2"))
	if s.PeriodRule == "displacement" {
		w.let("d", "", s.Top, u.small)
		w.line("T_1", "2 * sqrt(num(d, m)) * 1 s", seconds, s.T, "approximate fundamental period "+s.TWhy, lateral.EN("4.3.3.2.2(5)"))
	} else if s.Ta > 0 {
		from := "C_t as stated"
		if s.System != "" {
			from = "C_t of: " + s.System
		}
		w.line("T_1", "C_t * num(H, m)^0.75 * 1 s", seconds, s.T, "approximate fundamental period, heights up to 40 m; "+from, lateral.EN("Eq. 4.6"))
	} else {
		w.line("T_1", "T_stated", seconds, s.T, "fundamental period, as stated", lateral.EN("4.3.3.2.2(2)"))
	}
	limit := min(4*s.TC, 2)
	w.line("T_limit", "min(4 * T_C, 2 s)", seconds, limit, "the method holds up to this period, and T_1 does not exceed it", lateral.EN("4.3.3.2.1(2)a"))
	w.line("S_d", target+".PSA(T_1)", metric, s.Sa, "ordinate of the design spectrum", lateral.EN("3.2.2.5"))
	if b.Lambda.Given {
		w.let("lambda", r.ID("lambda"), s.Lambda, pure)
		r.Explain("$\\lambda = "+short(s.Lambda)+"$ is "+s.LambdaWhy+".", lateral.EN("4.3.3.2.2(1)"))
	} else {
		w.line("lambda", "if(n > 2 and T_1 <= 2 * T_C, 0.85, 1)", pure, s.Lambda, "correction factor, n the number of storeys: "+s.LambdaWhy, lateral.EN("4.3.3.2.2(1)"))
	}
	w.line("F_b", "S_d * m * lambda", u.force, s.V, "base shear", lateral.EN("Eq. 4.5"))
	if b.Modes.Given {
		r.Equation(`F_i = F_\mathrm{b} \frac{s_i m_i}{\sum_j s_j m_j}`, "force at level i, s_i the shape of the first mode of "+b.Modes.Text(), lateral.EN("Eq. 4.10"))
	} else {
		r.Equation(`F_i = F_\mathrm{b} \frac{z_i m_i}{\sum_j z_j m_j}`, "force at level i, displacements taken as linear over the height, z_i the elevation of the level above the base", lateral.EN("Eq. 4.11"))
	}
	r.Explain("Elastic displacements $u$ solve $K u = F$ with the forces of the design spectrum, already divided by $q$; they are not multiplied by $q_\\mathrm{d}$. The factor $\\delta$ of 4.3.3.2.4 for accidental torsion is not applied.", lateral.EN("4.3.3.2.4"))
	return w.worst
}

// wallUnit says why C_q for metres is not the number that the standard prints.
func wallUnit(unit string) string {
	if unit != "m" {
		return ""
	}
	return ": 0.0019 over 0.3048, which gives the period that feet give; 0.00058 as printed (from memory) does not"
}
