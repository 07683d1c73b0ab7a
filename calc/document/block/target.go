package block

import (
	"slices"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
	"quoin/calc/standard"
)

var targetKind = Kind{
	Name:    "target",
	Doc:     "a design spectrum of a standard, or one read from a table",
	Makes:   "target",
	New:     func() Body { return &target{} },
	Product: func() any { return &standard.Target{} },
	Exports: targetExports(),
	Functions: []Function{{
		Name: "PSA", Usage: "PSA(T)", Doc: "pseudo-acceleration at period T", Min: 1, Max: 1, Dims: []quantity.Dim{quantity.Time}, Args: []string{"the period"}, Unit: inG,
		Call: func(product any, args []float64) (float64, error) { return product.(*standard.Target).PSA(args[0]) },
	}},
}

// targetExports are the numbers of every standard, given or derived.
func targetExports() []Export {
	out := []Export{{"T_0", "start of the plateau", "s"}, {"T_S", "end of the plateau", "s"}, {"damping", "damping ratio that the spectrum holds for", ""}}
	for _, s := range standard.Standards {
		for _, p := range s.Parameters {
			if p.Kind == standard.Number && !slices.ContainsFunc(out, func(e Export) bool { return e.Name == p.Symbol }) {
				out = append(out, Export{p.Symbol, p.Doc, quantity.SIUnit(p.Dim).Text})
			}
		}
	}
	return out
}

type target struct {
	common
	Basis    field.Field `name:"basis" is:"text" doc:"the standard: ASCE/SEI 7-22; not needed with a table"`
	Table    tableSource `name:"table" doc:"a file of periods and ordinates"`
	Columns  field.Field `name:"columns" is:"text" many:"yes" doc:"of the table: the columns of period and ordinate, by name or number from 1"`
	Units    field.Field `name:"units" is:"text" many:"yes" doc:"of the table: their units, where its head does not state them"`
	Spectrum field.Field `name:"spectrum" is:"text" doc:"which spectrum of the standard: design or MCE_R"`
	SS       field.Field `name:"S_S" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"not-negative" doc:"mapped acceleration at short periods, in g"`
	S1       field.Field `name:"S_1" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"not-negative" doc:"mapped acceleration at 1 s, in g"`
	Site     field.Field `name:"site" is:"text" label:"site class" doc:"site class"`
	SMS      field.Field `name:"S_MS" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"positive" doc:"MCE_R acceleration at short periods, in g"`
	SM1      field.Field `name:"S_M1" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"positive" doc:"MCE_R acceleration at 1 s, in g"`
	SDS      field.Field `name:"S_DS" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"positive" doc:"design acceleration at short periods, in g"`
	SD1      field.Field `name:"S_D1" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"positive" doc:"design acceleration at 1 s, in g"`
	TL       field.Field `name:"T_L" is:"time" must:"positive" doc:"long-period transition period"`
	Risk     field.Field `name:"risk" is:"text" label:"risk category" doc:"risk category"`
	Damping  field.Field `name:"damping" is:"number" must:"fraction" show:"%" doc:"of a table: the damping its ordinates hold for"`
	Periods  field.Field `name:"periods" is:"block" of:"periods" doc:"periods of its series and figure"`
}

type tableSource struct {
	File    field.Field `name:"file" is:"file" short:"yes" label:"table" doc:"the file: a head row, then rows of period and ordinate"`
	Columns field.Field `name:"columns" is:"text" many:"yes" doc:"the columns of period and ordinate, by name or number from 1"`
	Units   field.Field `name:"units" is:"text" many:"yes" doc:"their units, where the head does not state them"`
	Damping field.Field `name:"damping" is:"number" must:"fraction" show:"%" doc:"the damping its ordinates hold for"`
}

// tableBasis is the name of a table among the standards.
const tableBasis = "table"

// Run builds the spectrum.
func (b *target) Run(r *Run) {
	basis := strings.TrimSpace(b.Basis.Text())
	switch {
	case b.Table.File.Given && b.Basis.Given && basis != tableBasis:
		r.Fail(b.Basis, "target-basis", "a target has either a basis or a table")
		return
	case b.Table.File.Given:
		basis = tableBasis
	case !b.Basis.Given || basis == tableBasis:
		r.Fail(b.Basis, "missing-field", "the target block needs the field basis, or a table").WithHint("bases: %s", strings.Join(bases(), ", "))
		return
	}
	given := standard.Given{Numbers: map[string]float64{}, Texts: map[string]string{}, Columns: map[string][]float64{}}
	at := map[string]field.Field{"basis": b.Basis, "T": b.Table.File, "PSA": b.Table.File}
	field.Top(b, func(f *field.Field, s field.Spec) {
		switch s.Name {
		case "basis", "columns", "units", "periods", "caption", "note", "cite", "show":
			return
		case "damping":
			if basis != tableBasis {
				at[s.Name] = *f
				return
			}
		}
		at[s.Name] = *f
		switch {
		case !f.Given:
		case s.Quantity:
			given.Numbers[s.Name] = f.SI()
		default:
			given.Texts[s.Name] = f.Text()
		}
	})
	if b.Damping.Given && basis != tableBasis && b.Damping.SI() != 0.05 {
		r.Fail(b.Damping, "target-damping", "the spectrum of %s holds for 5 %% damping; the standard gives no rule for another here", basis)
		return
	}
	if basis == tableBasis && !b.columns(r, &given) {
		return
	}
	if _, ok := standard.Lookup(basis); !ok {
		e := r.Fail(b.Basis, "unknown-basis", "there is no basis %s", basis)
		if near := diag.Nearest(basis, bases()); near != "" {
			e.WithHint("did you mean %s?", near)
		} else {
			e.WithHint("bases: %s; or give a table", strings.Join(bases(), ", "))
		}
		return
	}
	t, err := standard.Build(basis, given)
	if err != nil {
		for _, p := range standard.Problems(err) {
			r.Fail(at[p.Symbol], "target", "%s: %s", p.Symbol, p.Problem).WithHint("%s", p.Hint)
		}
		if len(standard.Problems(err)) == 0 {
			r.Fail(b.Basis, "target", "%s", err)
		}
		return
	}
	b.results(r, t)
}

func bases() []string {
	return slices.DeleteFunc(standard.Bases(), func(s string) bool { return s == tableBasis })
}

// columns reads the table's columns.
func (b *target) columns(r *Run, given *standard.Given) bool {
	names, units, damping := b.Table.Columns, b.Table.Units, b.Table.Damping
	if b.Columns.Given {
		names = b.Columns
	}
	if b.Units.Given {
		units = b.Units
	}
	if b.Damping.Given {
		damping = b.Damping
	}
	s := r.readSheet(b.Table.File, names, units)
	if s == nil {
		return false
	}
	if !damping.Given {
		r.Fail(b.Table.File, "missing-field", "a table needs the field damping: the ratio its ordinates hold for").WithHint("write  damping: 5 %%")
		return false
	}
	given.Numbers["damping"] = damping.SI()
	want := []string{"1", "2"}
	if names.Given {
		if want = names.Texts(); len(want) != 2 {
			r.Fail(names, "table-columns", "name two columns: the period and the ordinate")
			return false
		}
	} else if len(s.columns) != 2 {
		r.Fail(b.Table.File, "table-columns", "%s has %d columns; say which hold period and ordinate", s.path, len(s.columns)).WithHint("columns: [period, ordinate]; %s", s.names())
		return false
	}
	for i, key := range []string{"T", "PSA"} {
		c := s.pick(want[i])
		if c == nil {
			r.Fail(names, "table-columns", "%s has no column %s", s.path, want[i]).WithHint("%s", s.names())
			return false
		}
		if units.Given {
			if len(units.List) != 2 {
				r.Fail(units, "table-units", "name two units: of the period and of the ordinate")
				return false
			}
			u, err := quantity.ParseUnit(units.List[i].Text)
			if err != nil {
				r.Diags.Errorf("unit", units.List[i].At, "%s", err)
				return false
			}
			if c.unit != nil && c.unit.Text != u.Text {
				r.Diags.Errorf("table-units", units.List[i].At, "the head of the column %s states %s, the document %s", c.name, c.unit.Pretty(), u.Pretty()).WithHint("state the unit once")
				return false
			}
			c.unit = &u
		}
		dim := quantity.Time
		if i == 1 {
			dim = quantity.Acceleration
		}
		x, _, ok := r.numbers(c, dim)
		if !ok {
			return false
		}
		given.Columns[key] = x
	}
	r.Used("damping", "damping", inUnits(damping.SI(), percent), "")
	r.Used("table", "table", plain(b.Table.File.Text()), "")
	r.Used("rows", "rows of the table", plain(quantity.Plain(float64(len(given.Columns["T"])))), "")
	return true
}

func (b *target) results(r *Run, t *standard.Target) {
	r.Made = t
	std, _ := standard.Lookup(t.Basis)
	for _, p := range t.Parameters {
		if p.Text == "" && p.Symbol != "damping" {
			r.Number(p.Symbol, p.Value, quantity.MustUnit(p.Unit))
		}
	}
	r.Number("damping", t.Damping, percent)
	for _, w := range t.Warnings {
		switch w.Code {
		case "two-period":
			r.Caution("two-period")
		default:
			r.Warn(w.Code, "%s", w.Text)
		}
	}
	if t.Basis == tableBasis {
		r.Caution("table-target")
		r.Explain("Pseudo-acceleration is linear in the period between the rows of the table and is not given beyond its ends.")
	} else {
		r.Explain("Pseudo-acceleration spectrum of "+std.Ref.String()+" for "+damped(t.Damping)+" damping; spectral parameters are pure numbers, in $g = 9.80665\\;\\mathrm{m/s^2}$.", std.Ref)
		r.parameters(t)
	}
	b.branches(r, t)
	b.figure(r, t)
}

// parameters shows derived values as equations with their sources.
func (r *Run) parameters(t *standard.Target) {
	for _, p := range t.Parameters {
		if p.Given || p.Text != "" {
			continue
		}
		text, ok := derivations[p.Symbol]
		if !ok {
			continue
		}
		if p.Symbol == "S_MS" || p.Symbol == "S_M1" { // shown the way they were derived
			continue
		}
		if s, ok := t.Parameter(strings.Replace(p.Symbol, "S_D", "S_M", 1)); strings.HasPrefix(p.Symbol, "S_D") && (!ok || !s.Given) {
			continue
		}
		tree, findings := formula.ParseExpr(text, nil)
		if len(findings) > 0 {
			panic("block: derivation of " + p.Symbol)
		}
		unit := quantity.MustUnit(p.Unit)
		v, findings := formula.Evaluate(tree, parameterScope{t, r.Name})
		if len(findings) > 0 {
			continue
		}
		v.Unit = unit
		formula.ChooseDigits(tree, r.System(), unit, quantity.Digits)
		formula.DropZeros(tree)
		ref := p.Ref
		r.Method = append(r.Method, exhibit.Item{Equation: &exhibit.Equation{Symbol: &expr.Node{Op: expr.Name, Text: p.Symbol, ID: r.ID(p.Symbol)}, Tree: tree, Result: &v, Digits: quantity.Digits, Description: p.Doc, Ref: &ref}})
		r.Refs = append(r.Refs, ref)
	}
}

// derivations of standard parameters, as the clauses give them.
var derivations = map[string]string{
	"S_DS": "2 / 3 * S_MS",
	"S_D1": "2 / 3 * S_M1",
	"T_0":  "0.2 * S_D1 / S_DS * 1 s",
	"T_S":  "S_D1 / S_DS * 1 s",
}

// parameterScope reads a target's parameters by symbol.
type parameterScope struct {
	t    *standard.Target
	name string
}

func (s parameterScope) Value(path string) (quantity.Value, string, error) {
	p, _ := s.t.Parameter(path)
	return quantity.Scalar(p.Value, quantity.MustUnit(p.Unit)), s.name + "." + path, nil
}

func (s parameterScope) Call(string, []quantity.Value) (quantity.Value, string, error) {
	panic("block: a derivation calls no block")
}

func (b *target) branches(r *Run, t *standard.Target) {
	if t.Basis == tableBasis {
		tab := exhibit.Table{ID: r.Name + "-rows", Caption: "Rows of " + r.Name, Columns: []exhibit.Column{Col("period T", seconds), Col("PSA", inG)}}
		for i, br := range t.Branches {
			if i == 0 {
				tab.Rows = append(tab.Rows, []exhibit.Cell{inUnits(br.From, seconds), Cell(br.At(br.From), inG)})
			}
			tab.Rows = append(tab.Rows, []exhibit.Cell{inUnits(br.To, seconds), Cell(br.At(br.To), inG)})
		}
		r.Table(tab)
		return
	}
	tab := exhibit.Table{ID: r.Name + "-branches", Caption: "Branches of " + r.Name + ": PSA at their ends",
		Columns: []exhibit.Column{Words("branch"), Col("from T", seconds), Col("PSA", inG), Col("to T", seconds), Col("PSA at the end", inG), Words("clause")}}
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

// figure draws the spectrum, corners named.
func (b *target) figure(r *Run, t *standard.Target) {
	grid := b.grid(r, t)
	y, err := t.Series(grid)
	if err != nil {
		r.Fail(b.Periods, "target-range", "%s", err)
		return
	}
	id := r.Curve("PSA", grid, seconds, y, inG)
	p := exhibit.Panel{X: exhibit.Axis{Label: "period T", Unit: seconds}, Y: exhibit.Axis{Label: "PSA", Unit: inG, Min: zero()},
		Series: []exhibit.FigSerie{{ID: id, Label: r.Name, X: grid, Y: y, Role: exhibit.Governing}}}
	for _, c := range t.Corners {
		if c.T <= grid[len(grid)-1] {
			p.Lines = append(p.Lines, exhibit.RefLine{Vertical: true, At: c.T, Label: plainSymbol(c.Symbol) + " " + quantity.Format(c.T, 3) + " s"})
		}
	}
	name := t.Basis + ", " + t.Spectrum + " spectrum"
	if t.Basis == tableBasis {
		name = "spectrum from " + b.Table.File.Text()
	}
	r.Figure(exhibit.Figure{ID: r.Name, Caption: Lines(&b.common, "Target "+r.Name+": "+name+", "+damped(t.Damping)+" damping"), Panels: []exhibit.Panel{p},
		Alt: "Pseudo-acceleration of the design spectrum against period."})
}

// plainSymbol is a symbol as plain text: T_0 is T₀, T_S is TS.
func plainSymbol(s string) string {
	base, sub, _ := strings.Cut(s, "_")
	return base + strings.Map(func(r rune) rune {
		if r >= '0' && r <= '9' {
			return '₀' + r - '0'
		}
		return r
	}, sub)
}

// grid is the periods of the series: those asked for, or a fine grid with the
// corners, up to 4 s or a little past the last corner that lies below 6 s.
func (b *target) grid(r *Run, t *standard.Target) []float64 {
	if b.Periods.Given {
		return r.Product(b.Periods.Text()).(*Grid).T
	}
	from, to := t.Range()
	if t.Basis == tableBasis {
		grid := []float64{from}
		for _, br := range t.Branches {
			grid = append(grid, br.To)
		}
		return grid
	}
	to = min(to, 4)
	for _, c := range t.Corners {
		if c.T < 6 {
			to = max(to, 1.25*c.T)
		}
	}
	grid := []float64{}
	for i := range 201 {
		grid = append(grid, round12(from+(to-from)*float64(i)/200))
	}
	for _, c := range t.Corners {
		if c.T <= to {
			grid = append(grid, c.T)
		}
	}
	slices.Sort(grid)
	return slices.Compact(grid)
}
