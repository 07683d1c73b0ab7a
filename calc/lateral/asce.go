package lateral

import (
	"errors"
	"math"
	"slices"

	"quoin/calc/quantity"
	"quoin/calc/standard"
	"quoin/calc/structure"
)

// ASCE is what the equivalent lateral force procedure of ASCE/SEI 7-22 or 7-16,
// section 12.8, works on. SI.
type ASCE struct {
	Model  *structure.Model
	Target *standard.Target // horizontal design spectrum of one of the two, 5 % damping
	R      float64          // response modification coefficient
	Ie     float64          // importance factor

	System     string  // a row of Table 12.8-2, see Systems; or
	Ct, X      float64 // the author's: T_a = Ct h_n^X s
	HeightUnit string  // "m" or "ft": what h_n is measured in there
	ByStoreys  bool    // T_a = 0.1 N s of the moment frames that System names; or, in place of System,
	Walls      []Wall  // the shear walls at the base: T_a = C_q h_n/sqrt(C_w), with
	BaseArea   float64 // the area of the structure at its base, m²
	Hn         float64 // structural height, m; 0: the elevation of the highest level

	T float64 // computed fundamental period, s; 0: none, T_a is used
	// DriftPeriod is "capped" (the forces for drift are those for strength) or
	// "computed" (12.8.6.2: they are found with T, without the limit C_u T_a).
	DriftPeriod string

	// Regular is what the author says of the irregularities of 12.3.2: "yes" (there
	// are none), "listed" (only those that Table 12.6-1 lists), "no", "" (not stated).
	Regular string
	Rho     float64 // redundancy factor; 0: not stated. Forces are not multiplied by it
	CapSDS  bool    // use the largest S_DS of 12.8.1.3 in C_s
}

// Static runs the procedure:
//
//	V = C_s W,  F_x = C_vx V,  C_vx = w_x h_x^k / sum(w_i h_i^k)
//
// with T_a, C_u and T of 12.8.2, C_s of 12.8.1.1, k of 12.8.3, V_x and M_x of
// 12.8.4 and 12.8.5, F_px of 12.10.1.1 (the weight of a diaphragm is that of its
// level), and the elastic displacements under the forces from the stiffness of
// the model. Torsion is not included.
//
// Errors are joined *standard.ParameterError, named by the symbols R, I_e,
// system, C_t, x, h_n, h_n_in, period, walls, walls[1], base_area, T, drift_period, regular, rho,
// S_DS_cap, target and structure. It panics without a model or a target.
func (in ASCE) Static() (*Static, error) {
	if in.Model == nil || in.Target == nil {
		panic("lateral: a static procedure needs a model and a target")
	}
	g, err := ground(in.Target)
	if err := errors.Join(err, in.valid()); err != nil {
		return nil, err
	}
	s, err := start(in.Model, in.Hn)
	if err != nil {
		return nil, err
	}
	s.Basis, s.R, s.Ie = in.Target.Basis, in.R, in.Ie
	s.Importance = in.Target.Importance()
	s.SDS, s.SD1, s.S1, s.TL, s.S1Known, s.Exception = g.sds, g.sd1, g.s1, g.tl, g.s1Known, g.exception
	if err := in.period(s); err != nil {
		return nil, err
	}
	if s.Exception == 3 && beyond(s.T, g.ts()) {
		return nil, problem("target", "use a site-specific ground motion, or another exception", "exception 3 to 11.4.8 holds for T up to T_S = %.4g s; T is %.4g s", g.ts(), s.T)
	}
	if in.CapSDS {
		if err := in.capped(s, &g); err != nil {
			return nil, err
		}
	}
	s.SDSUsed = g.short()
	if s.Limbs, s.Cs, s.Sa, err = g.coefficient(s.T, in.R, in.Ie); err != nil {
		return nil, err
	}
	s.V = s.Cs * s.Weight
	s.K = exponent(s.T)
	s.Shape = powers(s.H, s.HeightUnit, s.K)
	if err := in.forDrift(s, g); err != nil {
		return nil, err
	}
	in.permit(s)
	s.warn(in.Target)
	if err := s.settle(in.Model); err != nil {
		return nil, err
	}
	return s, nil
}

// valid looks at the inputs one by one.
func (in ASCE) valid() error {
	var all []error
	for _, n := range []struct {
		symbol string
		value  float64
	}{{"R", in.R}, {"I_e", in.Ie}} {
		if !(n.value > 0) || math.IsInf(n.value, 0) {
			all = append(all, problem(n.symbol, "", "must be a number greater than zero"))
		}
	}
	if !(in.T >= 0) || math.IsInf(in.T, 0) {
		all = append(all, problem("T", "", "must be a period greater than zero"))
	}
	switch in.DriftPeriod {
	case "capped", "":
	case "computed":
		if in.T == 0 {
			all = append(all, problem("drift_period", "give T, the computed period: T: m.T[1]", "forces for drift by the computed period need a computed period"))
		}
	default:
		all = append(all, problem("drift_period", "write capped or computed", "%q is not a choice", in.DriftPeriod))
	}
	if in.Regular != "" && in.Regular != "yes" && in.Regular != "listed" && in.Regular != "no" {
		all = append(all, problem("regular", "write yes, listed or no", "%q is not a choice", in.Regular))
	}
	if in.Rho != 0 && !(in.Rho >= 1 && in.Rho <= 1.3) {
		all = append(all, problem("rho", "it is 1.0 or 1.3 (12.3.4)", "the redundancy factor is not below 1 nor above 1.3"))
	}
	if in.R > 0 && in.Ie > 0 && in.R < in.Ie {
		all = append(all, problem("R", "R comes from Table 12.2-1, I_e from Table 1.5-2", "R = %v is below I_e = %v: forces would exceed the elastic ones", in.R, in.Ie))
	}
	return errors.Join(all...)
}

// forDrift sets the forces for drift where they differ from those for strength
// (12.8.6.2). The least C_s of Eq. 12.8-5 (7-16) or 12.8-6 (7-22) is kept.
func (in ASCE) forDrift(s *Static, g groundMotion) error {
	if in.DriftPeriod != "computed" || in.T <= s.T {
		return nil
	}
	limbs, cs, _, err := g.coefficient(in.T, in.R, in.Ie)
	if err != nil {
		return err
	}
	for _, l := range limbs {
		if l.Governs {
			s.DriftLimb = l
		}
	}
	s.DriftPeriod, s.DriftCs, s.DriftK = in.T, cs, exponent(in.T)
	_, s.DriftForce, err = distribute(cs*s.Weight, s.W, powers(s.H, s.HeightUnit, s.DriftK))
	return err
}

// exponent is k of 12.8.3: 1 up to T = 0.5 s, 2 from 2.5 s, linear between.
func exponent(T float64) float64 {
	return 1 + (min(max(T, 0.5), 2.5)-0.5)/2
}

// powers are h^k, h in m measured in a unit of height.
func powers(h []float64, unit string, k float64) []float64 {
	u := quantity.MustUnit(unit)
	out := make([]float64, len(h))
	for i := range h {
		out[i] = math.Pow(u.From(h[i]), k)
	}
	return out
}

// diaphragms finds the forces of 12.10.1.1:
//
//	F_px = sum(F_i, i >= x) / sum(w_i, i >= x) w_px
//
// not below 0.2 S_DS I_e w_px and not above 0.4 S_DS I_e w_px.
func (s *Static) diaphragms() {
	n := len(s.F)
	s.DiaphragmGoverns = slices.Repeat([]string{"calculated"}, n)
	s.DiaphragmRaw, s.DiaphragmMin, s.DiaphragmMax = make([]float64, n), make([]float64, n), make([]float64, n)
	s.Diaphragm = make([]float64, n)
	forces, weights := 0.0, 0.0
	for x := n - 1; x >= 0; x-- {
		forces += s.F[x]
		weights += s.W[x]
		if weights > 0 {
			s.DiaphragmRaw[x] = forces / weights * s.W[x]
		}
		s.DiaphragmMin[x] = 0.2 * s.SDS * s.Ie * s.W[x]
		s.DiaphragmMax[x] = 0.4 * s.SDS * s.Ie * s.W[x]
		s.Diaphragm[x] = s.DiaphragmRaw[x]
		switch {
		case s.DiaphragmRaw[x] < s.DiaphragmMin[x]:
			s.Diaphragm[x], s.DiaphragmGoverns[x] = s.DiaphragmMin[x], "minimum"
		case s.DiaphragmRaw[x] > s.DiaphragmMax[x]:
			s.Diaphragm[x], s.DiaphragmGoverns[x] = s.DiaphragmMax[x], "maximum"
		}
	}
}

// warn says what the reader must know.
func (s *Static) warn(t *standard.Target) {
	c := clausesOf(s.Basis)
	if !s.S1Known {
		s.Warnings = append(s.Warnings, Warning{"minimum-unchecked",
			"the target states no S_1: the least value of C_s where S_1 is 0.6 or more could not be checked, and none is included", c.ref(c.Least)})
	}
	if least, risk, ok := Importance(t); ok && least > s.Ie {
		s.Warnings = append(s.Warnings, Warning{"importance",
			"I_e = " + quantity.Format(s.Ie, quantity.Exact(s.Ie)) + " is below the " + quantity.Format(least, 3) + " of risk category " + risk, c.ref("Table 1.5-2")})
	}
}

// Importance is the importance factor of the risk category that a target states.
func Importance(t *standard.Target) (ie float64, category string, ok bool) {
	risk, _ := t.Parameter("risk")
	ie, ok = standard.Importance(risk.Text)
	return ie, risk.Text, ok
}
