package lateral

import (
	"errors"
	"math"

	"quoin/calc/cite"
	"quoin/calc/quantity"
	"quoin/calc/standard"
	"quoin/calc/structure"
)

const enBasis = "EN 1998-1:2004"

// enSystems are the coefficients of EN 1998-1 4.3.3.2.2(3), H in m, up to 40 m.
var enSystems = []System{
	{"steel moment frame", 0.085, 0, enExponent},
	{"concrete moment frame", 0.075, 0, enExponent},
	{"eccentrically braced frame", 0.075, 0, enExponent},
	{"other", 0.050, 0, enExponent},
}

const (
	enExponent = 0.75
	enHeight   = 40 // m: the approximate period holds up to here
)

// EN1998 is what the lateral force method of analysis of EN 1998-1:2004, 4.3.3.2, works
// on. SI.
type EN1998 struct {
	Model  *structure.Model
	Target *standard.Target // horizontal design spectrum with its behaviour factor

	T      float64 // fundamental period T_1, s; or, for T_1 = C_t H^0.75,
	System string  // a kind of structure, see Systems; or
	Ct     float64 // C_t, H in m; or, for T_1 = 2 sqrt(d),
	Top    float64 // d, lateral elastic displacement of the top under the gravity loads applied horizontally, m; or
	ByTop  bool    // d found here, with the seismic weights and the stiffness of the model
	Hn     float64 // H, m; 0: the elevation of the highest level
	Lambda float64 // correction factor; 0: by 4.3.3.2.2(1)

	// Shape is the fundamental mode shape at the levels, lowest first; nil: linear
	// over the height (4.3.3.2.3(3)).
	Shape []float64

	Regular string // what the author says of regularity in elevation: "yes", "no", "" (not stated)
}

// Static runs the method:
//
//	F_b = S_d(T_1) m λ,  F_i = F_b s_i m_i / sum(s_j m_j)
//
// s_i the mode shape or z_i, the height above the base; T_1 up to min(4 T_C, 2 s) only
// (4.3.3.2.1). λ = 0.85 where T_1 <= 2 T_C and the building has more than two
// storeys, else 1. Torsion is not included.
//
// Errors are joined *standard.ParameterError, named by the symbols T, system,
// C_t, h_n, top_displacement, regular, lambda, modes, target and structure. It panics
// without a model or a target.
func (in EN1998) Static() (*Static, error) {
	if in.Model == nil || in.Target == nil {
		panic("lateral: a static procedure needs a model and a target")
	}
	tc, err := enGround(in.Target)
	if err := errors.Join(err, in.valid()); err != nil {
		return nil, err
	}
	s, err := start(in.Model, in.Hn)
	if err != nil {
		return nil, err
	}
	s.Importance = in.Target.Importance()
	s.Basis, s.Q, s.TC = in.Target.Basis, in.Target.Q, tc
	if err := in.period(s); err != nil {
		return nil, err
	}
	if limit := min(4*tc, 2); beyond(s.T, limit) {
		return nil, problem("T", "use modal response spectrum analysis (4.3.3.3): a combine block",
			"T_1 = %.4g s is beyond %.4g s, the lesser of 4 T_C and 2 s, up to which the method holds (4.3.3.2.1)", s.T, limit)
	}
	in.permit(s)
	if s.Sa, err = in.Target.PSA(s.T); err != nil {
		return nil, problem("target", "", "%s", err)
	}
	if err := in.correction(s); err != nil {
		return nil, err
	}
	if err := in.shape(s); err != nil {
		return nil, err
	}
	s.V = s.Sa * s.Mass * s.Lambda
	if err := s.settle(in.Model); err != nil {
		return nil, err
	}
	return s, nil
}

// enGround reads T_C of a target and refuses what the method may not use.
func enGround(t *standard.Target) (tc float64, err error) {
	switch {
	case t.Basis != enBasis:
		return 0, problem("target", "use a target of EN 1998-1:2004", "the method of EN 1998-1 takes no spectrum of %s", t.Basis)
	case t.Vertical:
		return 0, problem("target", "use the horizontal design spectrum", "the spectrum is one of vertical motion")
	case !(t.Q > 0):
		return 0, problem("target", "write  spectrum: design  and the behaviour factor q in the target", "the spectrum is elastic; the method takes the design spectrum, which holds the behaviour factor q")
	}
	p, ok := t.Parameter("T_C")
	if !ok || !(p.Value > 0) {
		return 0, problem("target", "", "the target states no T_C")
	}
	return p.Value, nil
}

// valid looks at the inputs one by one.
func (in EN1998) valid() error {
	var all []error
	ways := 0
	for _, given := range []bool{in.T != 0, in.System != "", in.Ct != 0, in.ByTop || in.Top != 0} {
		if given {
			ways++
		}
	}
	if ways != 1 {
		what := "is missing"
		if ways > 1 {
			what = "is stated in more than one way"
		}
		all = append(all, problem("T", "give one of: T (T: m.T[1]); system, one of "+names(enSystems)+"; C_t; period: displacement", "the period T_1 %s", what))
	}
	for _, n := range []struct {
		symbol string
		value  float64
	}{{"T", in.T}, {"C_t", in.Ct}, {"top_displacement", in.Top}} {
		if !(n.value >= 0) || math.IsInf(n.value, 0) {
			all = append(all, problem(n.symbol, "", "must be greater than zero"))
		}
	}
	switch in.Regular {
	case "", "yes":
	case "no":
		all = append(all, problem("regular", "use modal response spectrum analysis (4.3.3.3): a combine block", "the method holds for buildings that are regular in elevation (4.3.3.2.1(2)b, Table 4.1)"))
	default:
		all = append(all, problem("regular", "write yes or no: regularity in elevation by 4.2.3.3", "%q is not a choice of EN 1998-1", in.Regular))
	}
	if !(in.Lambda >= 0) || in.Lambda > 1 {
		all = append(all, problem("lambda", "4.3.3.2.2(1) knows 0.85 and 1.0", "must be above 0, and 1 at most"))
	}
	return errors.Join(all...)
}

// period settles T_1.
func (in EN1998) period(s *Static) error {
	if in.T != 0 {
		s.Stated, s.T, s.TWhy = in.T, in.T, "the period stated"
		return nil
	}
	if in.ByTop || in.Top != 0 {
		return in.displacement(s)
	}
	s.Ct, s.X, s.HeightUnit = in.Ct, enExponent, "m"
	at := "C_t"
	if in.System != "" {
		row, err := systemOf(enSystems, in.System)
		if err != nil {
			return err
		}
		s.System, s.Ct, at = row.Name, row.CtM, "system"
	}
	if beyond(s.Hn, enHeight) {
		return problem(at, "give T, a computed period: T: m.T[1]", "the approximate period holds for heights up to %d m; H is %.5g m", enHeight, s.Hn)
	}
	s.Ta = approximate(s.Ct, s.X, s.Hn, "m")
	s.PeriodRule, s.T, s.TWhy = "C_t", s.Ta, "the approximate period"
	return nil
}

// displacement is T_1 = 2 sqrt(d) s (4.3.3.2.2(5)), d in m.
func (in EN1998) displacement(s *Static) error {
	s.PeriodRule, s.Top, s.TWhy = "displacement", in.Top, "by the displacement of the top as stated"
	if in.Top == 0 {
		u, _, err := respond(in.Model, s.W)
		if err != nil {
			return err
		}
		s.Top, s.TWhy = u[len(u)-1], "by the displacement of the top under the seismic weights applied horizontally"
	}
	if s.Ta = 2 * math.Sqrt(s.Top); !(s.Ta > 0) || math.IsInf(s.Ta, 0) {
		return problem("structure", "", "the top does not move to the side of the weights: there is no period by its displacement")
	}
	s.T = s.Ta
	return nil
}

// permit says what 4.3.3.2.1(2) asks and how it stands.
func (in EN1998) permit(s *Static) {
	state := func(limit float64) string {
		return "met: " + quantity.Short(s.T) + " s against " + quantity.Short(limit) + " s"
	}
	add := func(text, state, clause string) {
		s.Conditions = append(s.Conditions, standard.Condition{Text: text, State: state, Ref: EN(clause)})
	}
	add("T_1 of no more than 4 T_C", state(4*s.TC), "4.3.3.2.1(2)a")
	add("T_1 of no more than 2 s", state(2), "4.3.3.2.1(2)a")
	if s.PeriodRule == "C_t" {
		add("T_1 by C_t: a height of no more than 40 m", "met: "+quantity.Short(s.Hn)+" m", "4.3.3.2.2(3)")
	}
	s.Permitted = "permitted"
	if in.Regular == "" {
		s.Permitted = "not shown"
	}
	add("regularity in elevation (4.2.3.3)", map[string]string{"": "not stated by the author", "yes": "stated by the author"}[in.Regular], "4.3.3.2.1(2)b")
}

// correction settles λ.
func (in EN1998) correction(s *Static) error {
	rule := 1.0
	few, many := "", quantity.Plain(float64(len(s.Levels)))+" storeys"
	if len(s.Levels) > 2 && !beyond(s.T, 2*s.TC) {
		rule = 0.85
	}
	switch {
	case rule < 1:
		few = "T_1 is up to 2 T_C and the building has more than two storeys (" + many + ")"
	case len(s.Levels) <= 2:
		few = "the building has no more than two storeys"
	default:
		few = "T_1 is beyond 2 T_C"
	}
	s.Lambda, s.LambdaWhy = rule, few
	if in.Lambda != 0 {
		s.Lambda = in.Lambda
		s.LambdaWhy = "stated; by the rule it is " + quantity.Format(rule, quantity.Exact(rule)) + ": " + few
		if in.Lambda < rule-1e-9 {
			s.Warnings = append(s.Warnings, Warning{"lambda",
				"lambda = " + quantity.Format(in.Lambda, quantity.Exact(in.Lambda)) + " is stated where the rule gives " + quantity.Format(rule, 2) + ": " + few, EN("4.3.3.2.2(1)")})
		}
	}
	return nil
}

// shape settles s_i.
func (in EN1998) shape(s *Static) error {
	if in.Shape == nil {
		s.Shape = s.H
		return nil
	}
	if len(in.Shape) != len(s.Levels) {
		return problem("modes", "", "the mode shape has %d components, the structure %d levels", len(in.Shape), len(s.Levels))
	}
	for i, x := range in.Shape {
		if !(x > 0) || math.IsInf(x, 0) {
			return problem("modes", "leave modes out: displacements are then taken as linear over the height", "the shape is %.4g at level %s: the fundamental mode moves all levels the same way", x, s.Levels[i])
		}
	}
	s.Shape = in.Shape
	return nil
}

// EN points to a clause of EN 1998-1:2004.
func EN(clause string) cite.Ref { return cite.To(enBasis, clause) }
