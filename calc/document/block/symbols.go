package block

import (
	"fmt"
	"regexp"

	"quoin/calc/lateral"
	"quoin/calc/quantity"
	"quoin/calc/standard"
)

// written is a symbol of one letter with a subscript, as words of the engines name it.
var written = regexp.MustCompile(`\b([A-Za-z])_([A-Za-z]+|[0-9])\b`)

// typeset is a text of an engine with its symbols in TeX, for Explain.
func typeset(text string) string {
	return written.ReplaceAllString(text, `$$${1}_\mathrm{$2}$$`)
}

// The symbols of the methods' equations, for the notation. A symbol that means
// the same in several kinds is worded the same.

func (r *Run) recordSymbols() {
	u := unitsOf(r.System())
	r.Symbol("a", "ground acceleration", r.System().Preferred(quantity.Acceleration))
	r.Symbol("t", "time", seconds)
	r.Symbol("T", "period of an oscillator", seconds)
	r.Symbol("g", "standard acceleration of gravity, 9.80665 m/s²", quantity.MustUnit("m/s^2"))
	r.Symbol("I_A", "Arias intensity", u.velocity)
	r.Symbol("CAV", "cumulative absolute velocity", u.velocity)
	r.Symbol("I_H", "Housner intensity", u.length)
	r.Symbol("S_pv", "pseudo-velocity spectrum", u.velocity)
}

func (r *Run) spectrumSymbols() {
	u := unitsOf(r.System())
	r.Symbol("u", "displacement of an oscillator relative to the ground", u.small)
	r.Symbol(`$\dot u$`, "velocity of an oscillator relative to the ground", u.velocity)
	r.Symbol(`$\ddot u$`, "acceleration of an oscillator relative to the ground", r.System().Preferred(quantity.Acceleration))
	r.Symbol("a_g", "ground acceleration", r.System().Preferred(quantity.Acceleration))
	r.Symbol("t", "time", seconds)
	r.Symbol("T", "period of an oscillator", seconds)
	r.Symbol("zeta", "damping ratio", percent)
	r.Symbol("omega", "circular frequency of an oscillator", perTime)
	r.Symbol("SD", "relative displacement", u.small)
	r.Symbol("PSV", "pseudo-velocity", u.velocity)
	r.Symbol("PSA", "pseudo-acceleration", inG)
	r.Symbol("SV", "relative velocity", u.velocity)
	r.Symbol("SA", "absolute acceleration", inG)
}

func (r *Run) shearSymbols() {
	u := unitsOf(r.System())
	r.Symbol("K", "stiffness matrix", u.stiffness)
	r.Symbol("M", "mass matrix", u.mass)
	r.Symbol(`$K_{ii}$`, "term of the stiffness matrix", u.stiffness)
	r.Symbol(`$K_{i,i+1}$`, "term of the stiffness matrix beside the diagonal", u.stiffness)
	r.Symbol(`$M_{ii}$`, "term of the mass matrix", u.mass)
	r.Symbol("k_i", "lateral stiffness of storey i", u.stiffness)
	r.Symbol("m_i", "seismic mass at level i", u.mass)
	r.Symbol("u_i", "displacement of level i relative to the ground", u.small)
	r.Symbol("g", "standard acceleration of gravity, 9.80665 m/s²", quantity.MustUnit("m/s^2"))
}

func (r *Run) modeSymbols() {
	u := unitsOf(r.System())
	r.Symbol("K", "stiffness matrix", u.stiffness)
	r.importedSymbols()
	r.modeShapeSymbols()
}

// importedSymbols are those of modes from elsewhere.
func (r *Run) importedSymbols() {
	u := unitsOf(r.System())
	r.Symbol("M", "mass matrix", u.mass)
	r.Symbol("m", "seismic mass at a level", u.mass)
	r.Symbol("r", "displacement of the levels for a unit displacement of the ground", pure)
	r.Symbol("L_n", "excitation factor of mode n", u.mass)
	r.Symbol("M_n", "generalised mass of mode n", u.mass)
	r.Symbol(`$M_n^*$`, "effective modal mass of mode n", u.mass)
	r.Symbol("Gamma_n", "participation factor of mode n", pure)
	r.Symbol("phi_n", "shape of mode n", pure)
}

// modeShapeSymbols are those of modes and of their combination.
func (r *Run) modeShapeSymbols() {
	r.Symbol("T_n", "period of mode n", seconds)
	r.Symbol("Gamma_n", "participation factor of mode n", pure)
	r.Symbol("phi_n", "shape of mode n", pure)
	r.Symbol("omega_n", "circular frequency of mode n", perTime)
}

func (r *Run) modalSymbols() {
	u := unitsOf(r.System())
	r.Symbol("u_n", "displacement of the levels in mode n", u.small)
	r.Symbol("f_n", "lateral forces of mode n", u.force)
	r.Symbol("M", "mass matrix", u.mass)
	r.Symbol("S_pa", "pseudo-acceleration of the spectrum", inG)
	r.Symbol("R", "response modification coefficient", pure)
	r.Symbol("I_e", "importance factor", pure)
	r.modeShapeSymbols()
	r.Symbol("r", "a response, combined from the modes", pure)
	r.Symbol("r_i", "a response in mode i", pure)
}

// cqcSymbols are those of the complete quadratic combination.
func (r *Run) cqcSymbols() {
	r.Symbol("r_j", "a response in mode j", pure)
	r.Symbol(`$\rho_{ij}$`, "correlation of modes i and j", pure)
	r.Symbol("zeta", "damping ratio", percent)
	r.Symbol("x", "ratio of two circular frequencies, ωi/ωj", pure)
	r.Symbol("omega_i", "circular frequency of mode i", perTime)
	r.Symbol("omega_j", "circular frequency of mode j", perTime)
}

// residualSymbols are those of the mass that the modes do not move.
func (r *Run) residualSymbols() {
	u := unitsOf(r.System())
	r.Symbol("f_r", "lateral forces of the residual, the missing mass", u.force)
	r.Symbol("u_r", "displacement of the levels under the forces of the residual", u.small)
	r.Symbol("r_r", "a response to the residual", pure)
	r.Symbol("r_m", "a response of the modes together", pure)
	r.Symbol("e", "part of a unit displacement of every level that the modes do not hold", pure)
	r.Symbol("ZPA", "zero-period acceleration", inG)
	r.Symbol("K", "stiffness matrix", u.stiffness)
}

// matrixSymbols are those of a model by matrices.
func (r *Run) matrixSymbols() {
	u := unitsOf(r.System())
	r.Symbol("K", "stiffness matrix", u.stiffness)
	r.Symbol("M", "mass matrix", u.mass)
	r.Symbol("m_i", "seismic mass at level i", u.mass)
	r.Symbol(`$M_{ij}$`, "term of the mass matrix", u.mass)
	r.Symbol("g", "standard acceleration of gravity, 9.80665 m/s²", quantity.MustUnit("m/s^2"))
}

// taperSymbols and filterSymbols are those of steps that condition a record.
func (r *Run) taperSymbols() {
	r.Symbol("w", "factor of a taper", pure)
	r.Symbol("t", "time", seconds)
	r.Symbol("t_start", "length of the taper at the start", seconds)
}

func (r *Run) filterSymbols() {
	r.Symbol("H", "gain of a filter", pure)
	r.Symbol("f", "frequency", hertz)
	r.Symbol("f_from", "lower corner of a filter", hertz)
	r.Symbol("f_to", "upper corner of a filter", hertz)
	r.Symbol("n", "order of a filter in one pass", pure)
	r.Symbol("x", "frequency of a filter, prewarped", pure)
	r.Symbol("x_from", "lower corner of a filter, prewarped", pure)
	r.Symbol("x_to", "upper corner of a filter, prewarped", pure)
	r.Symbol("Delta", "step, before a variable", pure)
}

// targetSymbols are the ordinate of a spectrum and its period.
func (r *Run) targetSymbols(t *standard.Target) {
	text := "pseudo-acceleration of the " + t.Spectrum + " spectrum"
	r.Symbol(t.Symbol, text, inG)
	r.Symbol("T", "period of an oscillator", seconds)
}

// staticSymbols are those of the static method of the standard.
func (r *Run) staticSymbols(s *lateral.Static) {
	u := unitsOf(r.System())
	r.approximateSymbols(s)
	r.Symbol("C_t", "coefficient of the approximate period", pure)
	r.Symbol("K", "stiffness matrix", u.stiffness)
	r.Symbol("u", "elastic displacement of the levels", u.small)
	r.Symbol("F_i", "lateral force at level i", u.force)
	if s.Q > 0 {
		r.Symbol("n", "number of storeys", pure)
		r.Symbol("T_1", "fundamental period", seconds)
		r.Symbol("T_stated", "fundamental period, as stated", seconds)
		r.Symbol("T_limit", "longest fundamental period that the method holds for", seconds)
		r.Symbol("F_b", "base shear", u.force)
		r.Symbol("m_i", "seismic mass at level i", u.mass)
		r.Symbol("m_j", "seismic mass at level j", u.mass)
		r.Symbol("z_i", "elevation of level i above the base", u.length)
		r.Symbol("z_j", "elevation of level j above the base", u.length)
		r.Symbol("s_i", "shape of the first mode at level i", pure)
		r.Symbol("s_j", "shape of the first mode at level j", pure)
		r.Symbol("q", "behaviour factor", pure)
		return
	}
	r.Symbol("R", "response modification coefficient", pure)
	r.Symbol("I_e", "importance factor", pure)
	r.Symbol("x", "exponent of the approximate period", pure)
	r.Symbol("T_computed", "computed period, as stated", seconds)
	r.Symbol("S_a", "ordinate of the spectrum at the period T", inG)
	r.Symbol("F_x", "lateral force at level x", u.force)
	r.Symbol("V_x", "shear of storey x", u.force)
	r.Symbol("M_x", "overturning moment at the foot of storey x", u.moment)
	r.Symbol(`$C_{\mathrm{v}x}$`, "share of level x in the base shear", pure)
	r.Symbol(`$F_{\mathrm{p}x}$`, "design force of the diaphragm at level x", u.force)
	r.Symbol(`$w_{\mathrm{p}x}$`, "weight of the diaphragm at level x", u.force)
	r.Symbol("w_x", "seismic weight at level x", u.force)
	r.Symbol("w_i", "seismic weight at level i", u.force)
	r.Symbol("h_x", "elevation of level x above the base", u.length)
	r.Symbol("h_i", "elevation of level i above the base", u.length)
}

// approximateSymbols are those of the rule that the approximate period was found by.
func (r *Run) approximateSymbols(s *lateral.Static) {
	u := unitsOf(r.System())
	switch s.PeriodRule {
	case "storeys":
		r.Symbol("N", "number of storeys above the base", pure)
	case "displacement":
		r.Symbol("d", "displacement of the top under the gravity loads applied horizontally", u.small)
	case "walls":
		r.Symbol("C_q", "coefficient of the approximate period of structures with shear walls", pure)
		r.Symbol("C_w", "effective area of the shear walls, in percent of the area at the base", pure)
		r.Symbol("A_B", "area of the structure at its base", quantity.MustUnit(s.HeightUnit+"^2"))
		for i := range s.Walls {
			r.Symbol(fmt.Sprintf("D_%d", i+1), fmt.Sprintf("length of shear wall %d", i+1), quantity.MustUnit(s.HeightUnit))
			r.Symbol(fmt.Sprintf("t_%d", i+1), fmt.Sprintf("thickness of shear wall %d", i+1), u.small)
		}
	}
}

// driftSymbols are those of drifts and stability by the standard.
func (r *Run) driftSymbols(european, stability bool) {
	u := unitsOf(r.System())
	r.Symbol("r_a", "allowed drift over storey height", pure)
	if european {
		r.Symbol("q_d", "displacement behaviour factor", pure)
		r.Symbol("h", "height of the storey", u.length)
	} else {
		r.Symbol("C_d", "deflection amplification factor", pure)
		r.Symbol("I_e", "importance factor", pure)
		r.Symbol("R", "response modification coefficient", pure)
		r.Symbol("rho", "redundancy factor", pure)
	}
	switch {
	case !stability:
	case european:
		r.Symbol("P_tot", "vertical load at and above the storey", u.force)
		r.Symbol("V_tot", "shear of the storey", u.force)
	default:
		r.Symbol("P_x", "vertical load at and above level x", u.force)
		r.Symbol("V_x", "shear of storey x", u.force)
		r.Symbol("beta", "shear demand over shear capacity of a storey", pure)
	}
	if !european {
		r.Symbol("h_sx", "height of storey x", u.length)
	}
}
