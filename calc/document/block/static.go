package block

import (
	"fmt"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/lateral"
	"quoin/calc/modal"
	"quoin/calc/quantity"
	"quoin/calc/standard"
	"quoin/calc/structure"
)

var staticKind = Kind{
	Name:    "static",
	Doc:     "static lateral forces: the equivalent lateral force procedure of ASCE/SEI 7, the lateral force method of EN 1998-1",
	Makes:   "static",
	New:     func() Body { return &static{} },
	Product: func() any { return &lateral.Static{} },
	Exports: []Export{
		{"T_a", "approximate period", "s"},
		{"C_u", "coefficient for the upper limit on the period (ASCE/SEI 7)", ""},
		{"T", "period that the forces are found with", "s"},
		{"C_s", "seismic response coefficient (ASCE/SEI 7)", ""},
		{"C_s_spectrum", "limb of C_s: S_a/(R/I_e) by a multi-period spectrum, where it is one", ""},
		{"C_s_plateau", "limb of C_s: upper limit S_DS/(R/I_e), where it applies", ""},
		{"C_s_max", "limb of C_s: upper limit by S_D1 at the period T, where it applies", ""},
		{"C_s_min", "limb of C_s: 0.044 S_DS I_e, not below 0.01", ""},
		{"C_s_min_1", "limb of C_s: 0.5 S_1/(R/I_e), where S_1 is 0.6 or more", ""},
		{"S_d", "ordinate of the design spectrum at T (EN 1998-1)", "m/s^2"},
		{"lambda", "correction factor (EN 1998-1)", ""},
		{"V", "base shear; F_b of EN 1998-1", "N"},
		{"k", "exponent of the distribution over the height (ASCE/SEI 7)", ""},
		{"C_v", "share of each level in the base shear", ""},
		{"F", "lateral force at each level", "N"},
		{"storey_shear", "shear of each storey", "N"},
		{"overturning", "overturning moment at the foot of each storey", "N*m"},
		{"diaphragm_force", "design force of the diaphragm at each level, within its bounds (ASCE/SEI 7)", "N"},
		{"displacement", "elastic displacement of each level under the forces for drift, relative to the ground", "m"},
		{"drift", "elastic drift of each storey under the forces for drift, not amplified", "m"},
		{"drift_shear", "shear of each storey under the forces for drift", "N"},
	},
}

type static struct {
	common
	Structure field.Field  `name:"structure" is:"block" of:"structure" need:"yes" doc:"the name of a structure block"`
	Target    field.Field  `name:"target" is:"block" of:"target" need:"yes" doc:"the design spectrum: its standard is the standard of the forces"`
	Direction field.Field  `name:"direction" is:"choice" of:"x|y" default:"x" doc:"direction of the forces; a planar model has x only"`
	Torsion   field.Field  `name:"torsion" is:"choice" of:"none" default:"none" label:"accidental torsion" doc:"none: accidental torsion is not included, and the package says so"`
	R         field.Field  `name:"R" is:"number" must:"positive" doc:"ASCE/SEI 7: response modification coefficient"`
	Ie        field.Field  `name:"I_e" is:"number" must:"positive" doc:"ASCE/SEI 7: importance factor; that of the risk category of the target, if not given"`
	System    field.Field  `name:"system" is:"text" doc:"row of the table of C_t and x: steel moment frame, concrete moment frame, eccentrically braced frame, buckling-restrained braced frame (ASCE/SEI 7), other"`
	Ct        field.Field  `name:"C_t" is:"number" must:"positive" label:"C_t" doc:"coefficient of the approximate period; in place of system, T_a = C_t h_n^x in s (EN 1998-1: C_t H^0.75, H in m)"`
	X         field.Field  `name:"x" is:"number" must:"positive" doc:"ASCE/SEI 7: exponent of the approximate period; it belongs to C_t"`
	HnIn      field.Field  `name:"h_n_in" is:"choice" of:"m|ft" label:"h_n measured in" doc:"ASCE/SEI 7: the unit of h_n in C_t h_n^x; m in packages in SI units, ft in US units, if not given"`
	Hn        field.Field  `name:"h_n" is:"length" must:"positive" label:"structural height h_n" doc:"structural height; the elevation of the highest level, if not given"`
	T         field.Field  `name:"T" is:"time" must:"positive" label:"computed period" doc:"a computed period, m.T[1]: ASCE/SEI 7 holds it below C_u T_a; of EN 1998-1 it is T_1, in place of system or C_t"`
	Drift     field.Field  `name:"drift_period" is:"choice" of:"capped|computed" doc:"ASCE/SEI 7: forces that drifts are found under: capped, those for strength (if not given); computed, those by T without the limit C_u T_a"`
	Lambda    field.Field  `name:"lambda" is:"number" must:"positive" doc:"EN 1998-1: correction factor; 0.85 or 1 by the rule, if not given"`
	Walls     []wallFields `name:"walls" doc:"ASCE/SEI 7, in place of system: the shear walls of masonry or concrete at the base, in the direction of the forces"`
	BaseArea  field.Field  `name:"base_area" is:"area" must:"positive" show:"m^2|ft^2" doc:"ASCE/SEI 7: area of the structure at its base, with walls"`
	Period    field.Field  `name:"period" is:"choice" of:"storeys|displacement" label:"approximate period by" doc:"storeys: T_a = 0.1 N of moment frames (ASCE/SEI 7, with system); displacement: T_1 = 2 sqrt(d), d found from the model (EN 1998-1)"`
	Top       field.Field  `name:"top_displacement" is:"length" must:"positive" label:"displacement d of the top" doc:"EN 1998-1, in place of period: displacement: d as you found it, under the gravity loads applied horizontally"`
	Regular   field.Field  `name:"regular" is:"choice" of:"yes|listed|no" doc:"ASCE/SEI 7: yes: no irregularity of 12.3.2; listed: only those that Table 12.6-1 lists (horizontal 2 to 5, vertical 4, 5a, 5b); no: others. EN 1998-1: regular in elevation, yes or no"`
	Cap       field.Field  `name:"S_DS_cap" is:"choice" of:"yes|no" label:"S_DS of 12.8.1.3" doc:"ASCE/SEI 7: yes: C_s by the reduced S_DS of 12.8.1.3, where regular: yes, rho: 1, and site and risk of the target meet its conditions"`
	Omega     field.Field  `name:"Omega_0" is:"number" must:"positive" doc:"ASCE/SEI 7: overstrength factor, for the record: forces are not multiplied by it"`
	Cd        field.Field  `name:"C_d" is:"number" must:"positive" doc:"ASCE/SEI 7: deflection amplification factor, for the record and for drift blocks"`
	Rho       field.Field  `name:"rho" is:"number" must:"positive" doc:"ASCE/SEI 7: redundancy factor, for the record: forces are not multiplied by it"`
	Modes     field.Field  `name:"modes" is:"block" of:"modes" doc:"EN 1998-1: forces follow the shape of the first mode; linear over the height, if not given"`
}

type wallFields struct {
	Length    field.Field `name:"length" is:"length" must:"positive" need:"yes" doc:"length of the wall along the forces"`
	Thickness field.Field `name:"thickness" is:"length" must:"positive" need:"yes" doc:"thickness of its web"`
}

// accidental is printed until accidental torsion can be included.
const accidental = "Accidental torsion is not included: the model is planar."

// Run finds the forces.
func (b *static) Run(r *Run) {
	m := r.Product(b.Structure.Text()).(*structure.Model)
	t := r.Product(b.Target.Text()).(*standard.Target)
	if b.Direction.Text() != "x" {
		r.Fail(b.Direction, "direction", "the model is planar and has direction x only")
		return
	}
	european := strings.HasPrefix(t.Basis, "EN ")
	if !b.belongs(r, t.Basis, european) {
		return
	}
	var s *lateral.Static
	var err error
	if european {
		s, err = b.european(r, m, t)
	} else {
		s, err = b.american(r, m, t)
	}
	if err != nil {
		b.report(r, err)
		return
	}
	if s == nil {
		return
	}
	r.Made = s
	b.export(r, s)
	b.criteria(r, s)
	for _, key := range []string{"static", "accidental-torsion", "linear", "reduced"} {
		r.Caution(key)
	}
	for _, w := range s.Warnings {
		b.warn(r, map[string]field.Field{"importance": b.Ie, "minimum-unchecked": b.Target, "lambda": b.Lambda, "procedure": b.Regular}[w.Code], w.Code, w.Text)
		r.Refs = append(r.Refs, w.Ref)
	}
	r.Warnings = append(r.Warnings, accidental)
	if s.Permitted == "not shown" {
		r.Warnings = append(r.Warnings, "That the procedure is permitted for this structure is not shown: see the table of its conditions.")
	}
	residual := 0.0
	if european {
		residual = b.europeanMethod(r, s)
	} else {
		residual = b.americanMethod(r, s)
		b.limbs(r, s)
	}
	b.basis(r, s, t)
	b.conditions(r, s)
	b.forces(r, s)
	b.diaphragms(r, s)
	b.displacements(r, s)
	b.figures(r, s)
	for _, c := range s.Checks {
		r.Crosscheck(c.Name+":", c.Residual, c.Limit)
	}
	r.Crosscheck("the equations as printed give the values of the engine:", residual, 1e-12)
}

// belongs refuses fields of the other standard.
func (b *static) belongs(r *Run, basis string, european bool) bool {
	wall := field.Field{}
	if len(b.Walls) > 0 {
		wall = b.Walls[0].Length
	}
	others, whose := []field.Field{b.Lambda, b.Modes, b.Top}, "EN 1998-1"
	names := []string{"lambda", "modes", "top_displacement"}
	if european {
		others, whose = []field.Field{b.R, b.Ie, b.X, b.HnIn, b.Drift, wall, b.BaseArea, b.Cap, b.Omega, b.Cd, b.Rho}, "ASCE/SEI 7"
		names = []string{"R", "I_e", "x", "h_n_in", "drift_period", "walls", "base_area", "S_DS_cap", "Omega_0", "C_d", "rho"}
	}
	ok := true
	if rule := map[bool]string{false: "storeys", true: "displacement"}[european]; b.Period.Given && b.Period.Text() != rule {
		r.Fail(b.Period, "static-field", "period: %s belongs to %s; the target %s is one of %s", b.Period.Text(), whose, b.Target.Text(), basis).WithHint("leave it out, or use a target of %s", whose)
		ok = false
	}
	for i, f := range others {
		if f.Given {
			hint := "leave it out, or use a target of " + whose
			if names[i] == "R" || names[i] == "I_e" {
				hint = "leave it out: the design spectrum holds the behaviour factor q, and a_g the importance factor"
			}
			r.Fail(f, "static-field", "%s belongs to %s; the target %s is one of %s", names[i], whose, b.Target.Text(), basis).WithHint("%s", hint)
			ok = false
		}
	}
	return ok
}

// american runs ASCE/SEI 7.
func (b *static) american(r *Run, m *structure.Model, t *standard.Target) (*lateral.Static, error) {
	in := lateral.ASCE{Model: m, Target: t, R: b.R.SI(), Ie: b.Ie.SI(), System: b.System.Text(), Ct: b.Ct.SI(), X: b.X.SI(), HeightUnit: b.HnIn.Text(), Hn: b.Hn.SI(), T: b.T.SI(), DriftPeriod: b.Drift.Text(),
		ByStoreys: b.Period.Given, BaseArea: b.BaseArea.SI(), Regular: b.Regular.Text(), Rho: b.Rho.SI(), CapSDS: b.Cap.Text() == "yes"}
	for _, w := range b.Walls {
		in.Walls = append(in.Walls, lateral.Wall{Length: w.Length.SI(), Thickness: w.Thickness.SI()})
	}
	if !b.R.Given {
		r.Fail(b.R, "missing-field", "the static block needs the field R").WithHint("the response modification coefficient of Table 12.2-1")
		return nil, nil
	}
	assume := func(name, label, value string) {
		r.Echo.Rows = append(r.Echo.Rows, exhibit.EchoRow{Field: name, Label: label, Value: plain(value), Default: true})
	}
	if in.HeightUnit == "" {
		in.HeightUnit = "m"
		if r.System() == quantity.US {
			in.HeightUnit = "ft"
		}
		if b.System.Given || b.Ct.Given || len(b.Walls) > 0 {
			assume("h_n_in", "h_n measured in", in.HeightUnit)
		}
		if other, wrong := lateral.OtherUnit(in.Ct, in.X, in.HeightUnit); wrong {
			r.Fail(b.Ct, "static", "C_t = %s and x = %s are the values of Table 12.8-2 for h_n in %s, and h_n is taken in %s here", short(in.Ct), short(in.X), other, in.HeightUnit).
				WithHint("write  h_n_in: %s  , or take the values for %s", other, in.HeightUnit)
			return nil, nil
		}
	}
	if !b.Ie.Given {
		ie, risk, ok := lateral.Importance(t)
		if in.Ie = ie; ok {
			r.Used("I_e", "I_e", inUnits(ie, pure), "of risk category "+risk)
		} else {
			in.Ie = 1
			assume("I_e", "I_e", "1")
			b.warn(r, b.Target, "importance", "I_e is not stated and the target names no risk category: I_e = 1 is taken, that of categories I and II")
		}
	}
	if in.DriftPeriod == "" {
		assume("drift_period", "drift period", "capped")
	}
	s, err := in.Static()
	if s != nil {
		s.Omega0, s.Cd = b.Omega.SI(), b.Cd.SI()
	}
	return s, err
}

// european runs EN 1998-1.
func (b *static) european(r *Run, m *structure.Model, t *standard.Target) (*lateral.Static, error) {
	in := lateral.EN1998{Model: m, Target: t, T: b.T.SI(), System: b.System.Text(), Ct: b.Ct.SI(), Hn: b.Hn.SI(), Lambda: b.Lambda.SI(),
		ByTop: b.Period.Given, Top: b.Top.SI(), Regular: b.Regular.Text()}
	if b.Modes.Given {
		modes := r.Product(b.Modes.Text()).(*modal.Modes)
		in.Shape = modes.Phi[0]
	}
	return in.Static()
}

// warn says something that travels with the numbers, at the field it is about.
func (b *static) warn(r *Run, f field.Field, code, text string) {
	at := f.At
	if !f.Given {
		at = r.Place
	}
	r.Warnings = append(r.Warnings, text)
	r.Diags.Warnf(code, at, "%s: %s", r.Name, text)
}

// report puts what the engine finds wrong at the fields it names.
func (b *static) report(r *Run, err error) {
	at := map[string]field.Field{"R": b.R, "I_e": b.Ie, "system": b.System, "C_t": b.Ct, "x": b.X, "h_n": b.Hn, "h_n_in": b.HnIn, "T": b.T,
		"drift_period": b.Drift, "lambda": b.Lambda, "modes": b.Modes, "target": b.Target, "structure": b.Structure,
		"base_area": b.BaseArea, "period": b.Period, "top_displacement": b.Top, "regular": b.Regular, "rho": b.Rho, "S_DS_cap": b.Cap}
	for i, w := range b.Walls {
		at[fmt.Sprintf("walls[%d]", i+1)] = w.Length
		at["walls"] = b.Walls[0].Length
	}
	found := standard.Problems(err)
	if len(found) == 0 {
		r.Fail(b.Structure, "static", "%s", err)
	}
	for _, p := range found {
		r.Fail(at[p.Symbol], "static", "%s", standard.Said(p.Symbol, p.Problem)).WithHint("%s", p.Hint)
	}
}

// export names the values.
func (b *static) export(r *Run, s *lateral.Static) {
	u := unitsOf(r.System())
	european := s.Q > 0
	if s.Ta > 0 {
		r.Number("T_a", s.Ta, seconds)
	}
	r.Number("T", s.T, seconds)
	if european {
		r.Number("S_d", s.Sa, metric)
		r.Number("lambda", s.Lambda, pure)
	} else {
		r.Number("C_u", s.Cu, pure)
		r.Number("k", s.K, pure)
		for _, l := range s.Limbs {
			if l.Applies {
				r.Number(l.Symbol, l.Value, pure)
			}
		}
		r.Number("C_s", s.Cs, pure)
	}
	r.Number("V", s.V, u.force)
	vector := func(name string, x []float64, unit quantity.Unit) {
		if len(x) > 0 {
			r.Export(name, quantity.List(x, unit, s.Levels))
		}
	}
	vector("C_v", s.Cv, pure)
	vector("F", s.F, u.force)
	vector("storey_shear", s.Shear, u.force)
	vector("overturning", s.Moment, u.moment)
	vector("diaphragm_force", s.Diaphragm, u.force)
	vector("displacement", s.Displacement, u.small)
	vector("drift", s.Drift, u.small)
	vector("drift_shear", s.DriftShear, u.force)
}

// metric is the unit of accelerations that masses are multiplied by.
var metric = quantity.MustUnit("m/s^2")
