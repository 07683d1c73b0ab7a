package block

import (
	"quoin/calc/exhibit"
	"quoin/calc/lateral"
	"quoin/calc/quantity"
	"quoin/calc/standard"
)

// basis is the table of what the forces rest on: what a reviewer asks for first, in
// one place, and said where it is not stated.
func (b *static) basis(r *Run, s *lateral.Static, t *standard.Target) {
	u := unitsOf(r.System())
	tab := exhibit.Table{ID: r.Name + "-basis", Caption: "Basis of the static lateral forces of " + r.Name + " by " + s.Basis, Columns: []exhibit.Column{Words("item"), Words("value"), Words("from")}}
	row := func(item string, value exhibit.Cell, from string) {
		tab.Rows = append(tab.Rows, []exhibit.Cell{{Text: item}, value, {Text: from}})
	}
	open := func(item string) { row(item, exhibit.Cell{Text: "not stated", Strong: true}, "") }
	of := func(symbols ...string) {
		for _, symbol := range symbols {
			switch p, ok := t.Parameter(symbol); {
			case !ok:
				open(symbol)
			case p.Text != "":
				row(symbol, exhibit.Cell{Text: p.Text}, "target "+b.Target.Text())
			default:
				row(symbol, Cell(p.Value, quantity.MustUnit(p.Unit)), "target "+b.Target.Text())
			}
		}
	}
	stated := func(item string, x float64, from string) {
		if x > 0 {
			row(item, Cell(x, pure), from)
		} else {
			open(item)
		}
	}
	row("procedure", exhibit.Cell{Text: "static; " + s.Permitted, Strong: s.Permitted != "permitted"}, "table of conditions")
	if s.Q > 0 {
		row("behaviour factor q", Cell(s.Q, pure), "target "+b.Target.Text())
		of("T_C")
	} else {
		of("risk")
		if t.MultiPeriod { // whose ordinates hold the site
			for _, symbol := range []string{"S_S", "F_a", "F_v"} {
				if _, stated := t.Parameter(symbol); stated {
					of(symbol)
				} else {
					row(symbol, exhibit.Cell{Text: "does not apply"}, "multi-period spectrum")
				}
			}
			of("S_1", "site")
		} else {
			of("S_S", "S_1", "site", "F_a", "F_v")
		}
		of("S_DS", "S_D1", "T_L", "category")
		row("I_e", Cell(s.Ie, pure), "Table 1.5-2")
		stated("R", s.R, "this block")
		stated("Omega_0", s.Omega0, "this block; forces are not multiplied by it")
		stated("C_d", s.Cd, "this block; displacements here are not multiplied by it")
		stated("rho", s.Rho, "this block; forces are not multiplied by it")
	}
	if s.System != "" {
		row("system, for the approximate period", exhibit.Cell{Text: s.System}, "this block")
	}
	row("structural height", Cell(s.Hn, u.length), "structure "+b.Structure.Text())
	if s.Ta > 0 {
		row("approximate period", exhibit.Cell{Numbers: []exhibit.Number{r.Shown("T_a", s.Ta, seconds)}}, map[string]string{"C_t": "C_t and the height", "storeys": "0.1 s a storey", "walls": "shear walls", "displacement": "displacement of the top"}[s.PeriodRule])
	}
	if s.Cap > 0 {
		row("upper limit of the period, C_u T_a", Cell(s.Cap, seconds), "")
	}
	if s.Stated > 0 {
		row("computed period", Cell(s.Stated, seconds), "this block")
	}
	row("period used", exhibit.Cell{Numbers: []exhibit.Number{r.Shown("T", s.T, seconds)}, Strong: true}, s.TWhy)
	if s.Cs > 0 {
		for _, l := range s.Limbs {
			if l.Governs {
				row("C_s", exhibit.Cell{Numbers: []exhibit.Number{r.Shown("C_s", s.Cs, pure)}, Strong: true}, l.Ref.Clause+": "+l.Name)
			}
		}
		row("k", exhibit.Cell{Numbers: []exhibit.Number{r.Shown("k", s.K, pure)}}, "12.8.3")
	}
	row("seismic weight", Cell(s.Weight, u.force), "structure "+b.Structure.Text())
	row("base shear", exhibit.Cell{Numbers: []exhibit.Number{r.Shown("V", s.V, u.force)}, Strong: true}, "")
	r.Table(tab)
}

// conditions is the table of what the standard asks of the procedure.
func (b *static) conditions(r *Run, s *lateral.Static) {
	caption := "What " + s.Basis + " asks before the procedure of " + r.Name + " may be used: it is " + s.Permitted
	if s.Basis == "ASCE/SEI 7-22" {
		caption += "; the conditions are those of Table 12.6-1 of 7-16, which 7-22 may have relaxed"
	}
	tab := exhibit.Table{ID: r.Name + "-conditions", Caption: caption, Columns: []exhibit.Column{Words("of the standard"), Words("here"), Words("clause")}}
	for _, c := range s.Conditions {
		met := len(c.State) > 3 && c.State[:3] == "met"
		tab.Rows = append(tab.Rows, []exhibit.Cell{{Text: c.Text}, {Text: c.State, Strong: !met}, {Text: c.Ref.String()}})
		r.Refs = append(r.Refs, c.Ref)
	}
	r.Table(tab)
}
