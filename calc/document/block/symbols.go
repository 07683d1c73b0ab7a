package block

import "quoin/calc/quantity"

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
	r.Symbol("M", "mass matrix", u.mass)
	r.Symbol("m", "seismic mass at a level", u.mass)
	r.Symbol("r", "displacement of the levels for a unit displacement of the ground", pure)
	r.Symbol("L_n", "excitation factor of mode n", u.mass)
	r.Symbol("M_n", "generalised mass of mode n", u.mass)
	r.Symbol(`$M_n^*$`, "effective modal mass of mode n", u.mass)
	r.modeShapeSymbols()
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
