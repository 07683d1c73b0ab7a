package block

import (
	"errors"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/lateral"
	"quoin/calc/modal"
	"quoin/calc/quantity"
)

var driftKind = Kind{
	Name:    "drift",
	Doc:     "amplified storey drifts and stability coefficients against their limits; makes checks",
	Makes:   "drift",
	New:     func() Body { return &drift{} },
	Product: func() any { return &lateral.Drift{} },
	Exports: []Export{
		{"drift", "storey drift, amplified by C_d/I_e or q_d, and by 1/(1 - theta) where theta exceeds 0.10", "m"},
		{"drift_first_order", "storey drift amplified by C_d/I_e or q_d alone", "m"},
		{"drift_elastic", "elastic storey drift", "m"},
		{"displacement", "displacement of each level relative to the ground, amplified by C_d/I_e or q_d; without second-order effects", "m"},
		{"drift_ratio", "drift over storey height", ""},
		{"drift_limit", "allowed storey drift", "m"},
		{"nu", "factor on drifts before they are held to the limit of damage limitation (EN 1998-1)", ""},
		{"theta", "stability coefficient of each storey, where P is given", ""},
		{"theta_limit", "limit of the stability coefficient", ""},
		{"second_order", "factor on drifts and member forces: 1/(1 - theta) where theta exceeds 0.10, else 1", ""},
	},
}

type drift struct {
	common
	From      field.Field `name:"from" is:"block" of:"static|combine" need:"yes" doc:"the analysis: a static or a combine block"`
	Basis     field.Field `name:"basis" is:"choice" of:"ASCE/SEI 7-22|ASCE/SEI 7-16|EN 1998-1:2004" doc:"the standard; that of the analysis, where it has one"`
	Direction field.Field `name:"direction" is:"choice" of:"x|y" default:"x" doc:"direction of the analysis; a planar model has x only"`
	At        field.Field `name:"at" is:"choice" of:"centre|edge" default:"centre" doc:"where drifts are taken; a planar model has its centre only"`

	Cd     field.Field `name:"C_d" is:"number" must:"positive" doc:"ASCE/SEI 7: deflection amplification factor; that of the static block, where it states one"`
	Ie     field.Field `name:"I_e" is:"number" must:"positive" doc:"ASCE/SEI 7: importance factor; that of the analysis, where it states one"`
	Rho    field.Field `name:"rho" is:"number" must:"positive" doc:"ASCE/SEI 7: redundancy factor; it divides the limit, for moment frames in design categories D to F; 1, if not given"`
	System field.Field `name:"system" is:"choice" of:"tolerant finishes|masonry cantilever|masonry|other" doc:"ASCE/SEI 7: row of the table of allowed drifts; tolerant finishes: four storeys or fewer, no masonry, finishes designed for the drifts"`
	Risk   field.Field `name:"risk" is:"choice" of:"I|II|III|IV" doc:"ASCE/SEI 7: risk category; that of the target of the analysis, if not given"`
	Scale  field.Field `name:"scale_drifts" is:"choice" of:"yes|no" doc:"ASCE/SEI 7, from a combine block with scale_to: yes where C_s is governed by 0.5 S_1/(R/I_e), so that drifts are scaled like forces; found, if not given, where scale_to is made of a static block"`

	Qd       field.Field `name:"q_d" label:"q_d" is:"number" must:"positive" doc:"EN 1998-1: displacement behaviour factor; q of the analysis, if not given"`
	Class    field.Field `name:"importance_class" is:"choice" of:"I|II|III|IV" doc:"EN 1998-1: importance class, for nu; that of the target of the analysis, if not given"`
	Nu       field.Field `name:"nu" is:"number" must:"positive" doc:"EN 1998-1: reduction for damage limitation; 0.5 for importance classes I and II, 0.4 for III and IV, if not given"`
	Finishes field.Field `name:"finishes" is:"choice" of:"brittle|ductile|none" doc:"EN 1998-1: non-structural elements: brittle and attached, ductile, or none that interfere"`

	P     field.Field `name:"P" is:"force" must:"positive" many:"yes" doc:"vertical load at and above each level; lowest first, no load factor above 1.0; without it stability is not evaluated"`
	Beta  field.Field `name:"beta" is:"number" must:"positive" many:"yes" doc:"ASCE/SEI 7: shear demand over shear capacity of a storey; one or one a storey; 1, if not given"`
	Limit field.Field `name:"limit" is:"number" must:"positive" many:"yes" show:"" doc:"allowed drift over storey height, one or one a storey, in place of system and risk; shown as stated, and divided by rho like those of the table"`
}

// fields of one standard only.
func (b *drift) only() (asce, en map[string]field.Field) {
	return map[string]field.Field{"C_d": b.Cd, "I_e": b.Ie, "rho": b.Rho, "system": b.System, "risk": b.Risk, "scale_drifts": b.Scale, "beta": b.Beta},
		map[string]field.Field{"q_d": b.Qd, "importance_class": b.Class, "nu": b.Nu, "finishes": b.Finishes}
}

// Check refuses what a planar model does not have, and two limits at once.
func (b *drift) Check(c *Checks) {
	if b.Direction.Text() == "y" {
		c.Fail(b.Direction, "direction", "the model is planar and has direction x only")
	}
	if b.At.Text() == "edge" {
		c.Fail(b.At, "drift-edge", "a planar model has no edges: drifts are those of its centre").WithHint("torsion, inherent and accidental, is not in these drifts; add it by a formula line where the plan calls for it")
	}
	for _, f := range []field.Field{b.System, b.Finishes} {
		if b.Limit.Given && f.Given {
			c.Fail(f, "drift-field", "the limit is given twice: by the field limit and by a row of the standard").WithHint("leave one out")
		}
	}
	if b.Nu.Given && b.Class.Given {
		c.Fail(b.Class, "drift-field", "nu is given; its value by importance class is not used").WithHint("leave one out")
	}
}

// analysis is what the block reads of a static or a combine block.
type analysis struct {
	lateral.DriftInput
	name       string
	ie, q      float64 // 0: not stated
	cd         float64 // the same
	divisor    float64 // of the elastic response
	scaled     float64 // factor that forces were multiplied by and drifts were not
	combined   bool
	scale      bool   // drifts are multiplied by scaled too
	unraised   bool   // the spectrum was not raised, as C_s is by an exception
	importance string // risk category or importance class of its target; empty: none stated
	limb       string // of C_s, that governs what forces were scaled to; empty: not known
}

func (b *drift) analysis(r *Run) analysis {
	a := analysis{name: b.From.Text(), scaled: 1}
	switch s := r.Product(b.From.Text()).(type) {
	case *lateral.Static:
		a.DriftInput = lateral.DriftOf(s)
		a.ie, a.q, a.cd, a.importance = s.Ie, s.Q, s.Cd, s.Importance
		if a.divisor = s.Q; s.Ie > 0 {
			a.divisor = s.R / s.Ie
		}
	case *modal.Combined:
		a.DriftInput = lateral.DriftInput{Basis: s.Basis, Levels: s.Levels, H: s.H, Hs: s.Hs, Elastic: s.Drift.Combined, Shear: s.UnscaledShear(), Displacement: s.Displacement.Combined}
		if k, ok := s.StoreyStiffness(); ok {
			a.Stiffness = k
		}
		for _, m := range s.MassAbove() {
			a.Weight = append(a.Weight, m*quantity.Gravity)
		}
		a.limb, a.unraised, a.importance = s.Limb, s.Unraised, s.Importance
		a.ie, a.q, a.divisor, a.scaled, a.combined = s.Ie, s.Q, s.Divisor, s.ScaleFactor, true
	}
	return a
}

// Run amplifies the drifts and holds them to their limits.
func (b *drift) Run(r *Run) {
	a := b.analysis(r)
	if !b.basis(r, &a) || !b.importance(r, &a) || !b.factors(r, &a) || !b.limits(r, &a) {
		return
	}
	a.P = b.P.Value.SI
	d, err := lateral.Drifts(a.DriftInput)
	if err != nil {
		b.fail(r, err)
		return
	}
	if b.Beta.Given && !b.P.Given {
		r.WarnAt(b.Beta, "no-theta", "beta belongs to the limit of the stability coefficient, which is not evaluated without P: it has no effect")
	}
	r.Made = d
	b.criteria(r, a, d)
	b.results(r, a, d)
}

// fail puts the errors of the engine at their fields.
func (b *drift) fail(r *Run, err error) {
	fields := map[string]field.Field{"P": b.P, "beta": b.Beta, "limit": b.Limit, "C_d": b.Cd, "I_e": b.Ie, "rho": b.Rho, "q_d": b.Qd, "nu": b.Nu, "system": b.System}
	for _, one := range unjoin(err) {
		var e *lateral.DriftError
		if !errors.As(one, &e) {
			r.Fail(b.From, "drift-input", "%s", one)
			continue
		}
		f, ok := fields[e.Symbol]
		if !ok || !f.Given {
			f = b.From
		}
		if e.Item >= 0 && len(f.List) > e.Item && len(f.List) == len(f.Value.SI) {
			f.At = f.List[e.Item].At
		}
		r.Fail(f, "drift-input", "%s", e.Problem).WithHint("%s", e.Hint)
	}
}

// basis settles which standard judges, and that no field of another is given.
func (b *drift) basis(r *Run, a *analysis) bool {
	known := strings.Join(lateral.DriftBases(), "|")
	has := a.Basis != "" && strings.Contains("|"+known+"|", "|"+a.Basis+"|")
	switch {
	case !b.Basis.Given && !has:
		r.Fail(b.From, "drift-basis", "%s does not say by which standard its drifts are judged", a.name).WithHint("add  basis: ASCE/SEI 7-22, ASCE/SEI 7-16 or EN 1998-1:2004")
		return false
	case b.Basis.Given && has && b.Basis.Text() != a.Basis:
		r.Fail(b.Basis, "drift-basis", "%s follows %s", a.name, a.Basis).WithHint("drifts are judged by the standard of the analysis: leave the field out")
		return false
	case b.Basis.Given:
		a.Basis = b.Basis.Text()
	default:
		r.Used("basis", "basis", plain(a.Basis), "of "+a.name)
	}
	ok := true
	asce, en := b.only()
	wrong, owner := en, "EN 1998-1"
	if a.european() {
		wrong, owner = asce, "ASCE/SEI 7"
	}
	field.Top(b, func(f *field.Field, s field.Spec) {
		if _, there := wrong[s.Name]; there && f.Given {
			r.Fail(*f, "drift-field", "%s is a field of %s, and %s follows %s", s.Name, owner, a.name, a.Basis).WithHint("leave it out")
			ok = false
		}
	})
	return ok
}

// importance settles the risk category or the importance class: that of the target,
// which the field may repeat but not contradict.
func (b *drift) importance(r *Run, a *analysis) bool {
	f, name, label := b.Risk, "risk", "risk category"
	if a.european() {
		f, name, label = b.Class, "importance_class", "importance class"
	}
	switch {
	case f.Given && a.importance != "" && f.Text() != a.importance:
		r.Fail(f, "drift-input", "the target of %s has %s %s, and %s is given here", a.name, label, a.importance, f.Text()).WithHint("leave it out here: it is taken from there")
		return false
	case f.Given:
		a.importance = f.Text()
	case a.importance != "" && !b.Limit.Given && !b.Nu.Given:
		r.Used(name, label, plain(a.importance), "of the target of "+a.name)
	}
	return true
}

func (a *analysis) european() bool { return strings.HasPrefix(a.Basis, "EN ") }

// factors settles what drifts are multiplied by.
func (b *drift) factors(r *Run, a *analysis) bool {
	missing := func(f field.Field, name, hint string) bool {
		r.Fail(f, "missing-field", "the drift block needs the field %s by %s", name, a.Basis).WithHint("%s", hint)
		return false
	}
	if a.european() {
		a.Qd, a.Nu = b.Qd.SI(), b.Nu.SI()
		if !b.Qd.Given {
			if a.q == 0 {
				return missing(b.Qd, "q_d", "the displacement behaviour factor, q unless otherwise stated; the analysis states no q")
			}
			a.Qd = a.q
			r.Used("q_d", "q_d", inUnits(a.q, pure), "q of "+a.name)
		}
		if !b.Nu.Given {
			if a.importance == "" {
				return missing(b.Nu, "importance_class or nu", "nu is 0.5 for importance classes I and II, 0.4 for III and IV")
			}
			a.Nu = lateral.DamageReduction(a.importance)
			r.Used("nu", "nu", inUnits(a.Nu, pure), "by importance class "+a.importance)
		}
		return true
	}
	a.Cd, a.Ie, a.Rho, a.Beta = b.Cd.SI(), b.Ie.SI(), 1, []float64{1}
	switch {
	case !b.Cd.Given && a.cd == 0:
		return missing(b.Cd, "C_d", "the deflection amplification factor stands beside R in the table of systems")
	case !b.Cd.Given:
		a.Cd = a.cd
		r.Used("C_d", "C_d", inUnits(a.cd, pure), "of "+a.name)
	case a.cd != 0 && a.cd != a.Cd:
		r.Fail(b.Cd, "drift-input", "C_d is %s in %s and %s here", short(a.cd), a.name, short(a.Cd)).WithHint("leave it out here: it is taken from there")
		return false
	}
	switch {
	case !b.Ie.Given && a.ie == 0:
		return missing(b.Ie, "I_e", "the importance factor that the analysis was divided by R/I_e with")
	case !b.Ie.Given:
		a.Ie = a.ie
		r.Used("I_e", "I_e", inUnits(a.ie, pure), "of "+a.name)
	case a.ie != 0 && a.ie != a.Ie:
		r.Fail(b.Ie, "drift-input", "I_e is %s in %s and %s here", short(a.ie), a.name, short(a.Ie)).WithHint("leave it out here: it is taken from there")
		return false
	}
	if b.Rho.Given {
		a.Rho = b.Rho.SI()
	} else {
		r.assumed("rho", 1)
	}
	if b.Beta.Given {
		a.Beta = b.Beta.Value.SI
	} else if b.P.Given {
		r.assumed("beta", 1)
	}
	return b.scaling(r, a)
}

// scaling multiplies drifts and shears alike where the author says so.
func (b *drift) scaling(r *Run, a *analysis) bool {
	if b.Scale.Given && !a.combined {
		r.Fail(b.Scale, "drift-field", "%s is no modal combination: its drifts are those of its forces already", a.name).WithHint("leave it out")
		return false
	}
	least := a.limb == lateral.LeastSymbol
	clause := lateral.DriftClausesOf(a.Basis).Combined
	switch {
	case a.scaled > 1 && least && b.Scale.Text() == "no":
		r.Fail(b.Scale, "drift-unscaled", "the forces of %s were scaled by %s to a base shear that 0.5 S_1/(R/I_e) governs, and drifts follow them there (%s)", a.name, short(a.scaled), clause).
			WithHint("leave the field out: drifts are then scaled")
		return false
	case b.Scale.Given:
		a.scale = b.Scale.Text() == "yes"
	case a.scaled > 1 && a.limb != "":
		a.scale = least
		r.Used("scale_drifts", "scale_drifts", plain(map[bool]string{true: "yes", false: "no"}[least]), "by what governs C_s")
	}
	if a.scale {
		a.DriftInput = a.Times(a.scaled)
	}
	return true
}

// assumed echoes the value of a field that was left out.
func (r *Run) assumed(name string, x float64) {
	r.Used(name, name, inUnits(x, pure), "")
	r.Echo.Rows[len(r.Echo.Rows)-1].Default = true
}

// limits settles what drifts are held to.
func (b *drift) limits(r *Run, a *analysis) bool {
	switch {
	case b.Limit.Given:
		a.Limit = b.Limit.Value.SI
		return true
	case a.european() && b.Finishes.Given:
		a.Limit = []float64{lateral.DamageLimit(b.Finishes.Text())}
		return true
	case a.european():
		r.Fail(b.Finishes, "missing-field", "the drift block needs the field finishes, or limit, by %s", a.Basis).WithHint("finishes: brittle, ductile or none")
		return false
	case !b.System.Given:
		needs := "fields system and risk"
		if a.importance != "" {
			needs = "field system"
		}
		r.Fail(b.System, "missing-field", "the drift block needs the %s, or limit, by %s", needs, a.Basis).WithHint("system: tolerant finishes, masonry cantilever, masonry or other; risk: I to IV, unless the target states it")
		return false
	case a.importance == "":
		r.Fail(b.Risk, "missing-field", "the drift block needs the field risk, or limit, by %s: the target of %s states none", a.Basis, a.name).WithHint("risk: I to IV, best in the target")
		return false
	}
	x, err := lateral.AllowedDrift(b.System.Text(), a.importance, len(a.Levels))
	if err != nil {
		b.fail(r, err)
		return false
	}
	a.Limit = []float64{x}
	return true
}
