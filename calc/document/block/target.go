package block

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/field"
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
	Functions: []Function{
		targetFunction("PSA", "pseudo-acceleration at period T", inG, (*standard.Target).PSA),
		targetFunction("SD", "displacement at period T that the pseudo-acceleration stands for: PSA (T/2π)²", quantity.MustUnit("mm"), (*standard.Target).SD),
	},
}

func targetFunction(name, doc string, unit quantity.Unit, read func(*standard.Target, float64) (float64, error)) Function {
	return Function{
		Name: name, Usage: name + "(T)", Doc: doc, Min: 1, Max: 1, Dims: []quantity.Dim{quantity.Time}, Args: []string{"the period"}, Unit: unit,
		Call: func(product any, args []float64) (float64, error) { return read(product.(*standard.Target), args[0]) },
	}
}

// targetExports are the numbers of every standard, given or derived.
func targetExports() []Export {
	out := []Export{{"T_0", "start of the plateau", "s"}, {"T_S", "end of the plateau", "s"}, {"damping", "damping ratio that the spectrum holds for", ""}}
	for _, s := range standard.Standards {
		for _, p := range slices.Concat(s.Parameters, s.Derived) {
			if p.Kind == standard.Number && !slices.ContainsFunc(out, func(e Export) bool { return e.Name == p.Symbol }) {
				out = append(out, Export{p.Symbol, p.Doc, quantity.SIUnit(p.Dim).Text})
			}
		}
	}
	return out
}

type target struct {
	common
	Basis    field.Field `name:"basis" is:"text" doc:"the standard: ASCE/SEI 7-22, ASCE/SEI 7-16 or EN 1998-1:2004; not needed with a table"`
	Table    tableSource `name:"table" doc:"a file of periods and ordinates"`
	Columns  field.Field `name:"columns" is:"text" many:"yes" doc:"of the table or the ordinates: the columns of period and ordinate, by name or number from 1"`
	Units    field.Field `name:"units" is:"text" many:"yes" doc:"of the table or the ordinates: their units, where the head does not state them"`
	Spectrum field.Field `name:"spectrum" is:"text" doc:"which spectrum of the standard: design or MCE_R (7-22); also vertical, MCE_R vertical (7-16); elastic, design, vertical, vertical design (EN)"`
	SS       field.Field `name:"S_S" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"not-negative" doc:"mapped acceleration at short periods, in g"`
	S1       field.Field `name:"S_1" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"not-negative" doc:"mapped acceleration at 1 s, in g"`
	Site     field.Field `name:"site" is:"text" label:"site class" doc:"site class: A, B, C, D, E, F or default (7-16 also B estimated, 7-22 also BC, CD, DE)"`
	Vs30     field.Field `name:"vs30" is:"velocity" must:"positive" show:"m/s|ft/s" label:"mean shear wave velocity" doc:"of 7-22 ordinates: mean shear wave velocity of the upper 30 m, in place of or beside the site class"`
	Specific field.Field `name:"site_specific" is:"text" label:"site-specific study" doc:"of 7-16: how 11.4.8 is met, where it asks for a study: study (with S_DS and S_D1 of the study), exception, or supplement 3"`
	Fa       field.Field `name:"F_a" is:"number" must:"positive" doc:"of 7-16: short-period site coefficient, where it is not that of the table"`
	Fv       field.Field `name:"F_v" is:"number" must:"positive" doc:"of 7-16: long-period site coefficient, where it is not that of the table"`
	SMS      field.Field `name:"S_MS" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"positive" doc:"MCE_R acceleration at short periods, in g"`
	SM1      field.Field `name:"S_M1" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"positive" doc:"MCE_R acceleration at 1 s, in g"`
	SDS      field.Field `name:"S_DS" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"positive" doc:"design acceleration at short periods, in g"`
	SD1      field.Field `name:"S_D1" is:"number" hint:"a spectral value is a pure number, in g: write 1.0, not 1.0 g" must:"positive" doc:"design acceleration at 1 s, in g"`
	TL       field.Field `name:"T_L" is:"time" must:"positive" doc:"long-period transition period"`
	Risk     field.Field `name:"risk" is:"text" label:"risk category" doc:"risk category I, II, III or IV: gives I_e and the design category"`
	Ordin    field.Field `name:"ordinates" is:"file" doc:"of 7-22: a file with the 22 periods and ordinates of the multi-period spectrum"`
	OrdinOf  field.Field `name:"ordinates_of" is:"text" label:"ordinates of" doc:"which spectrum the ordinates are of: MCE_R or design"`
	Type     field.Field `name:"type" is:"text" doc:"of EN 1998-1: type of the spectrum, 1 or 2"`
	Ground   field.Field `name:"ground" is:"text" label:"ground type" doc:"of EN 1998-1: ground type A, B, C, D or E"`
	AgR      field.Field `name:"a_gR" is:"acceleration" must:"positive" show:"g" label:"reference ground acceleration" doc:"of EN 1998-1: reference peak ground acceleration; with gamma_I or importance"`
	Class    field.Field `name:"importance" is:"text" label:"importance class" doc:"of EN 1998-1: importance class I, II, III or IV, for the recommended gamma_I"`
	GammaI   field.Field `name:"gamma_I" is:"number" must:"positive" doc:"of EN 1998-1: importance factor"`
	Ag       field.Field `name:"a_g" is:"acceleration" must:"positive" show:"g" label:"design ground acceleration" doc:"of EN 1998-1: design ground acceleration, gamma_I a_gR; it holds gamma_I already"`
	S        field.Field `name:"S" is:"number" must:"positive" doc:"of EN 1998-1: soil factor, where a national value differs from the recommended one"`
	TB       field.Field `name:"T_B" is:"time" must:"positive" doc:"of EN 1998-1: national value"`
	TC       field.Field `name:"T_C" is:"time" must:"positive" doc:"of EN 1998-1: national value"`
	TD       field.Field `name:"T_D" is:"time" must:"positive" doc:"of EN 1998-1: national value"`
	TE       field.Field `name:"T_E" is:"time" must:"positive" doc:"of EN 1998-1: national value, of the elastic spectrum beyond 4 s"`
	TF       field.Field `name:"T_F" is:"time" must:"positive" doc:"of EN 1998-1: national value, of the elastic spectrum beyond 4 s"`
	Ratio    field.Field `name:"vertical_ratio" is:"number" must:"positive" doc:"of EN 1998-1: a_vg/a_g of vertical spectra, national value"`
	Xi       field.Field `name:"xi" is:"number" must:"fraction" show:"%" doc:"of EN 1998-1: viscous damping ratio of an elastic spectrum; 5 % if not given"`
	Q        field.Field `name:"q" is:"number" must:"positive" label:"behaviour factor" doc:"of EN 1998-1: behaviour factor of a design spectrum"`
	Beta     field.Field `name:"beta" is:"number" must:"positive" doc:"of EN 1998-1: factor of the lower bound of a design spectrum, national value"`
	Damping  field.Field `name:"damping" is:"number" must:"fraction" show:"%" doc:"of a table: the damping its ordinates hold for; of EN 1998-1: xi"`
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
	std, ok := standard.Lookup(basis)
	if !ok {
		e := r.Fail(b.Basis, "unknown-basis", "there is no basis %s", basis)
		if near := diag.Nearest(basis, bases()); near != "" {
			e.WithHint("did you mean %s?", near)
		} else {
			e.WithHint("bases: %s; or give a table", strings.Join(bases(), ", "))
		}
		return
	}
	given, at := b.given(basis)
	cells := map[string][]cell{}
	if !b.damping(r, std, given, at) || !b.files(r, basis, given, cells) {
		return
	}
	t, err := standard.Build(basis, given)
	if err != nil {
		for _, p := range standard.Problems(err) {
			f, row := at.fault(p), 0
			if fmt.Sscanf(p.Problem, "row %d ", &row); row >= 1 && row <= len(cells[p.Symbol]) {
				f.At = cells[p.Symbol][row-1].at
			}
			r.Fail(f, "target", "%s", standard.Said(named(p.Symbol, basis), p.Problem)).WithHint("%s", p.Hint)
		}
		if len(standard.Problems(err)) == 0 {
			r.Fail(b.Basis, "target", "%s", err)
		}
		return
	}
	b.results(r, t, at)
}

// named is a parameter as the document knows it.
func named(symbol, basis string) string {
	if (symbol == "T" || symbol == "PSA") && basis != tableBasis {
		return "ordinates"
	}
	return symbol
}

// given are the numbers and words of the fields by symbol, and where each stands.
func (b *target) given(basis string) (standard.Given, places) {
	given := standard.Given{Numbers: map[string]float64{}, Texts: map[string]string{}, Columns: map[string][]float64{}}
	at := places{}
	field.Top(b, func(f *field.Field, s field.Spec) {
		at[s.Name] = *f
		switch s.Name {
		case "basis", "columns", "units", "periods", "ordinates", "damping", "caption", "note", "cite", "show":
			return
		}
		switch {
		case !f.Given:
		case s.Quantity:
			given.Numbers[s.Name] = f.SI()
		default:
			given.Texts[s.Name] = f.Text()
		}
	})
	source := b.Ordin
	if basis == tableBasis {
		source = b.Table.File
	}
	at["T"], at["PSA"] = source, source
	return given, at
}

// damping is the field damping: of a table, or another word for the standard's
// own parameter.
func (b *target) damping(r *Run, std standard.Standard, given standard.Given, at places) bool {
	if !b.Damping.Given || std.Basis == tableBasis {
		return true
	}
	switch z := b.Damping.SI(); {
	case std.Damping == "" && relative(z, 0.05) > 1e-9:
		r.Fail(b.Damping, "target-damping", "the spectrum of %s holds for 5 %% damping; the standard gives no rule for another here", std.Basis)
		return false
	case std.Damping == "":
	case at[std.Damping].Given:
		r.Fail(b.Damping, "target-damping", "%s is the damping of this standard, and it is given already", std.Damping).WithHint("give one of the two")
		return false
	default:
		given.Numbers[std.Damping] = z
		at[std.Damping] = b.Damping
	}
	return true
}

// files reads the columns of a table or of ordinates.
func (b *target) files(r *Run, basis string, given standard.Given, cells map[string][]cell) bool {
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
	switch {
	case basis == tableBasis && b.Ordin.Given:
		r.Fail(b.Ordin, "target-basis", "ordinates belong to the multi-period spectrum of ASCE/SEI 7-22, and this target is a table").WithHint("give one of the two")
		return false
	case basis == tableBasis:
		if !b.columns(r, b.Table.File, names, units, given, cells) {
			return false
		}
		if !damping.Given {
			r.Fail(b.Table.File, "missing-field", "a table needs the field damping: the ratio its ordinates hold for").WithHint("write  damping: 5 %%")
			return false
		}
		given.Numbers["damping"] = damping.SI()
		r.Used("damping", "damping", inUnits(damping.SI(), percent), "")
		r.Used("table", "table", plain(b.Table.File.Text()), "")
		r.Used("rows", "rows of the table", plain(quantity.Plain(float64(len(given.Columns["T"])))), "")
	case b.Ordin.Given:
		if !b.columns(r, b.Ordin, names, units, given, cells) {
			return false
		}
		r.Used("rows", "rows of the ordinates", plain(quantity.Plain(float64(len(given.Columns["T"])))), "")
	case names.Given:
		r.Fail(names, "target-basis", "columns are those of a table or of ordinates, and there is no file")
		return false
	case units.Given:
		r.Fail(units, "target-basis", "units are those of a table or of ordinates, and there is no file")
		return false
	}
	return true
}

func bases() []string {
	return slices.DeleteFunc(standard.Bases(), func(s string) bool { return s == tableBasis })
}

// columns reads the columns of period and ordinate of a file.
func (b *target) columns(r *Run, file, names, units field.Field, given standard.Given, cells map[string][]cell) bool {
	s := r.readSheet(file, names, units)
	if s == nil {
		return false
	}
	want := []string{"1", "2"}
	if names.Given {
		if want = names.Texts(); len(want) != 2 {
			r.Fail(names, "table-columns", "name two columns: the period and the ordinate")
			return false
		}
	} else if len(s.columns) != 2 {
		r.Fail(file, "table-columns", "%s has %d columns; say which hold period and ordinate", s.path, len(s.columns)).WithHint("columns: [period, ordinate]; %s", s.names())
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
				r.Diags.Errorf("unit", units.List[i].At, "%s", err).WithHint("%s", unitHint(err))
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
		given.Columns[key], cells[key] = x, c.cells
	}
	return true
}
