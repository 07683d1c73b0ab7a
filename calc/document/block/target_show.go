package block

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
	"quoin/calc/standard"
)

func (b *target) results(r *Run, t *standard.Target, at places) {
	r.Made = t
	b.criteria(r, t)
	if t.Basis == "ASCE/SEI 7-16" || t.Basis == "EN 1998-1:2004" {
		r.Caution("earlier-edition")
	}
	std, _ := standard.Lookup(t.Basis)
	for _, p := range t.Parameters {
		if p.Text == "" && p.Symbol != "damping" {
			r.Number(p.Symbol, p.Value, r.unitOf(p))
		}
	}
	r.Number("damping", t.Damping, percent)
	for _, w := range t.Warnings {
		switch w.Code {
		case "two-period":
			r.Caution("two-period")
		case "site-specific", "site-exception":
			r.Caution(w.Code)
			fallthrough
		default:
			if f, ok := at.doubt(t, w); ok {
				r.WarnAt(f, w.Code, "%s", w.Text)
			} else {
				r.Warn(w.Code, "%s", w.Text)
			}
		}
	}
	switch {
	case t.Basis == tableBasis:
		r.Caution("table-target")
		r.Explain("Pseudo-acceleration is linear in the period between the rows of the table and is not given beyond its ends.")
	case t.MultiPeriod:
		r.Explain("Multi-period "+t.Spectrum+" spectrum of "+std.Ref.String()+" for 5 % damping: linear between the 22 periods of the ordinates. $S_\\mathrm{DS}$ and $S_\\mathrm{D1}$ follow from the ordinates of the design spectrum at these periods. Spectral parameters are pure numbers, in $g = 9.80665\\;\\mathrm{m/s^2}$.", std.Ref)
	default:
		text := "The " + t.Spectrum + " spectrum of " + std.Ref.String() + " for " + damped(t.Damping) + " damping"
		if t.Q > 0 {
			text += ", divided by the behaviour factor $q = " + short(t.Q) + "$"
		}
		if t.Symbol[:3] == "S_a" {
			text += "; spectral parameters are pure numbers, in $g = 9.80665\\;\\mathrm{m/s^2}$"
		}
		r.Explain(text+".", std.Ref)
	}
	for _, note := range t.Notes {
		r.Explain(typeset(note))
	}
	if t.Ordinates() != nil {
		r.Symbol("S_aM", "MCE_R pseudo-acceleration", inG)
		r.Equation(`S_\mathrm{a} = \tfrac23\,S_\mathrm{aM}`, "design ordinates from the MCE_R ordinates given, at each of the 22 periods", t.Branches[0].Ref)
	}
	worst := max(r.parameters(t, std), r.ordinates(t))
	if t.Basis != tableBasis {
		r.targetSymbols(t)
	}
	b.standing(r, t)
	b.branches(r, t)
	b.figure(r, t)
	if t.Basis == tableBasis {
		r.Crosscheck("the rows read back from the spectrum differ by at most", rowsBack(t), 1e-12)
	} else {
		r.Crosscheck("derived parameters and ordinates, computed again from the formulas above, differ by at most", worst, 1e-9)
	}
}

// unitOf is the unit a parameter is shown in.
func (r *Run) unitOf(p standard.Parameter) quantity.Unit {
	unit := quantity.MustUnit(p.Unit)
	switch {
	case unit.Dim.Is(quantity.Length):
		return unitsOf(r.System()).small
	case unit.Dim.Is(quantity.Velocity):
		return unitsOf(r.System()).velocity
	}
	return unit
}

// parameters shows derived values as equations with their sources, and says how
// far a second computation lies from them, relative.
func (r *Run) parameters(t *standard.Target, std standard.Standard) (worst float64) {
	docs := map[string]string{}
	for _, d := range std.Parameters {
		docs[d.Symbol] = d.Doc
	}
	shown := slices.DeleteFunc(slices.Clone(t.Parameters), func(p standard.Parameter) bool {
		return p.Text != "" || t.Basis == tableBasis || p.Given && p.Doc == docs[p.Symbol]
	})
	for _, p := range inOrder(shown) {
		unit := r.unitOf(p)
		text := p.Formula
		if text == "" {
			text = strings.TrimSpace(quantity.Plain(round12(unit.From(p.Value))) + " " + unit.Text)
		}
		tree, v := evaluate(text, parameterScope{t: t, name: r.Name})
		worst = max(worst, relative(v.SI[0], p.Value))
		v.Unit = unit
		v.SI = []float64{p.Value}
		formula.ChooseDigits(tree, r.System(), unit, quantity.Digits)
		formula.DropZeros(tree)
		ref := p.Ref
		r.Method = append(r.Method, exhibit.Item{Equation: &exhibit.Equation{Symbol: &expr.Node{Op: expr.Name, Text: p.Symbol, ID: r.ID(p.Symbol)}, Tree: tree, Result: &v, Digits: quantity.Digits, Description: p.Doc, Ref: &ref}})
		r.Refs = append(r.Refs, ref)
	}
	return worst
}

// inOrder puts what a formula reads before it, and keeps the order else.
func inOrder(all []standard.Parameter) []standard.Parameter {
	var out []standard.Parameter
	for len(all) > 0 {
		ready := slices.IndexFunc(all, func(p standard.Parameter) bool {
			tree, _ := formula.ParseExpr(cmp.Or(p.Formula, "1"), nil)
			return !slices.ContainsFunc(formula.Deps(tree), func(d formula.Dep) bool {
				return slices.ContainsFunc(all, func(q standard.Parameter) bool { return q.Symbol == d.Path })
			})
		})
		out = append(out, all[max(ready, 0)])
		all = slices.Delete(all, max(ready, 0), max(ready, 0)+1)
	}
	return out
}

// ordinates shows the formula of each branch, and says how far the spectrum
// computed from them lies from it, relative.
func (r *Run) ordinates(t *standard.Target) (worst float64) {
	for i, br := range t.Branches {
		if br.Formula == "" {
			continue
		}
		_, to := t.Range()
		end := br.To
		if end == 0 {
			end = 4 * max(br.From, 1)
		}
		for k := range 9 {
			T := min(br.From+(end-br.From)*float64(k)/8, to)
			if T == 0 && br.From == 0 && strings.Contains(br.Formula, "/ T") && !strings.Contains(br.Formula, "T / T") {
				continue
			}
			_, v := evaluate(br.Formula, parameterScope{t, r.Name, T})
			y := v.SI[0]
			if v.Dim.Is(quantity.None) {
				y *= quantity.Gravity
			}
			worst = max(worst, relative(y, br.At(T)))
		}
		if i > 0 && t.Branches[i-1].Formula == br.Formula || t.MultiPeriod && br.A1 != 0 || t.MultiPeriod && br.A0 != 0 {
			continue
		}
		last := br
		for _, next := range t.Branches[i+1:] {
			if next.Formula != br.Formula {
				break
			}
			last = next
		}
		tree, _ := formula.ParseExpr(br.Formula, nil)
		ref := br.Ref
		r.Method = append(r.Method, exhibit.Item{Equation: &exhibit.Equation{Symbol: &expr.Node{Op: expr.Name, Text: t.Symbol}, Tree: tree, Description: br.Name + ", " + span(t, br.From, last.To), Ref: &ref}})
		r.Refs = append(r.Refs, ref)
	}
	return worst
}

// span is a range of periods in words: "T_0 ≤ T ≤ T_S".
func span(t *standard.Target, from, to float64) string {
	name := func(T float64) string {
		i := slices.IndexFunc(t.Corners, func(c standard.Corner) bool { return c.T == T })
		if i >= 0 {
			return t.Corners[i].Symbol
		}
		return short(T) + " s"
	}
	switch {
	case to == 0:
		return "T > " + name(from)
	case from == 0:
		return "T ≤ " + name(to)
	}
	return name(from) + " ≤ T ≤ " + name(to)
}

// evaluate reads and evaluates a formula of a standard.
func evaluate(text string, scope formula.Scope) (*expr.Node, quantity.Value) {
	tree, findings := formula.ParseExpr(text, nil)
	if len(findings) > 0 {
		panic("block: a standard has the formula " + text + ": " + findings[0].Summary)
	}
	v, findings := formula.Evaluate(tree, scope)
	if len(findings) > 0 || len(v.SI) != 1 {
		panic("block: a standard has the formula " + text + ", which gives no number")
	}
	return tree, v
}

// parameterScope reads a target's parameters by symbol, and the period T.
type parameterScope struct {
	t    *standard.Target
	name string
	T    float64
}

func (s parameterScope) Value(path string) (quantity.Value, string, error) {
	if path == "T" {
		return quantity.Scalar(s.T, seconds), "", nil
	}
	p, ok := s.t.Parameter(path)
	if !ok {
		return quantity.Value{}, "", fmt.Errorf("there is no parameter %s", path)
	}
	return quantity.Scalar(p.Value, quantity.MustUnit(p.Unit)), s.name + "." + path, nil
}

func (s parameterScope) Call(string, []quantity.Value) (quantity.Value, string, error) {
	panic("block: a derivation calls no block")
}

// rowsBack is how far the rows of a table lie from its spectrum, relative.
func rowsBack(t *standard.Target) (worst float64) {
	for i, T := range t.Given.Columns["T"] {
		y, err := t.PSA(T)
		if err != nil {
			return 1
		}
		worst = max(worst, relative(y, t.Given.Columns["PSA"][i]))
	}
	return worst
}

// standing is what the standard asks before its spectrum may be used, and the
// words that it derives.
func (b *target) standing(r *Run, t *standard.Target) {
	tab := exhibit.Table{ID: r.Name + "-conditions", Caption: "What " + t.Basis + " asks of " + r.Name, Columns: []exhibit.Column{Words("of the standard"), Words("here"), Words("clause")}}
	for _, p := range t.Parameters {
		if p.Text != "" && !p.Given {
			tab.Rows = append(tab.Rows, []exhibit.Cell{{Text: p.Doc}, {Text: p.Text, Strong: true}, {Text: p.Ref.String()}})
			r.Refs = append(r.Refs, p.Ref)
		}
	}
	for _, c := range t.Conditions {
		tab.Rows = append(tab.Rows, []exhibit.Cell{{Text: c.Text}, {Text: c.State, Strong: c.State == "applies" || c.State == "claimed"}, {Text: c.Ref.String()}})
		r.Refs = append(r.Refs, c.Ref)
	}
	if len(tab.Rows) > 0 {
		r.Table(tab)
	}
}

func (b *target) branches(r *Run, t *standard.Target) {
	if t.Basis == tableBasis || t.MultiPeriod {
		tab := exhibit.Table{ID: r.Name + "-rows", Caption: "Rows of " + r.Name, Columns: []exhibit.Column{Col("period T", seconds), Col(axisSymbol(t), inG)}}
		given := t.Ordinates()
		if given != nil {
			tab.Caption += ": MCE_R ordinates as given, and the ordinates of the design spectrum, two thirds of them"
			tab.Columns = []exhibit.Column{Col("period T", seconds), Col("SaM, as given", inG), Col(axisSymbol(t), inG)}
		}
		add := func(T, y float64) {
			row := []exhibit.Cell{inUnits(T, seconds), Cell(y, inG)}
			if given != nil {
				row = []exhibit.Cell{row[0], {}, row[1]}
				if k := len(tab.Rows); k < len(given) {
					row[1] = inUnits(given[k], inG)
				}
			}
			tab.Rows = append(tab.Rows, row)
		}
		for i, br := range t.Branches {
			if i == 0 {
				add(br.From, br.At(br.From))
			}
			if br.To > 0 {
				add(br.To, br.At(br.To))
			}
		}
		r.Table(tab)
		return
	}
	head := axisSymbol(t)
	tab := exhibit.Table{ID: r.Name + "-branches", Caption: "Branches of " + r.Name + ": " + head + " at their ends",
		Columns: []exhibit.Column{Words("branch"), Col("from T", seconds), Col(head, inG), Col("to T", seconds), Col(head+" at the end", inG), Words("clause")}}
	for _, br := range t.Branches {
		row := []exhibit.Cell{{Text: br.Name}, Cell(br.From, seconds), Cell(br.At(br.From), inG), {Text: "no end"}, {Text: ""}, {Text: br.Ref.String()}}
		if br.To > 0 {
			row[3], row[4] = Cell(br.To, seconds), Cell(br.At(br.To), inG)
		}
		tab.Rows = append(tab.Rows, row)
		r.Refs = append(r.Refs, br.Ref)
	}
	r.Table(tab)
}

// axisSymbol names the ordinate on axes and in heads.
func axisSymbol(t *standard.Target) string {
	if t.Basis == tableBasis {
		return "PSA"
	}
	return plainSymbol(t.Symbol)
}
