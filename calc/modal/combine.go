package modal

import (
	"errors"
	"fmt"
	"math"
)

// Rule combines the responses of modes, whose maxima do not coincide.
type Rule string

const (
	CQC      Rule = "CQC"      // complete quadratic combination
	SRSS     Rule = "SRSS"     // square root of the sum of squares
	Absolute Rule = "absolute" // sum of magnitudes
)

// Rules is every rule, the usual one first.
var Rules = []Rule{CQC, SRSS, Absolute}

// Response is one quantity, mode by mode and combined; lowest level first.
type Response struct {
	Name     string      // of the exported value: "storey_shear"
	Modal    [][]float64 // one row a mode, signed, divided by the divisor
	Combined []float64   // by the rule; >= 0
	AbsSum   []float64   // sum of magnitudes over the modes: the upper bound
	Residual []float64   // of the missing mass, signed, divided; nil without one
}

// Warning is something that the reader of a result must know.
type Warning struct{ Code, Text string }

// Combined is the response of a structure to a spectrum. Force and displacement
// results are both divided by Divisor (R/I_e); modal rows are signed; combined
// values have lost their signs and do not occur at one time, so that one cannot
// be found from another: drift is combined from modal drifts.
type Combined struct {
	Rule    Rule
	Divisor float64
	Levels  []string
	H, Hs   []float64 // elevations and storey heights, m

	// Basis is the standard of the spectrum that was read ("" where it was that
	// of a record), R, Ie and Q the factors that the response is reduced by; all
	// set by the caller, for those who read the result.
	Basis    string
	R, Ie, Q float64

	// Importance is the risk category or importance class that the target states; ""
	// where it states none. Set by the caller.
	Importance string

	// Limb is the symbol of the limb of C_s that governs the static base shear that
	// forces are scaled to, "C_s_min_1" for 0.5 S_1/(R/I_e); "" where it is not
	// known. Set by the caller.
	Limb string
	// Unraised: the static procedure is designed for up to 1.5 times the spectrum that
	// was read (exception 2 to ASCE/SEI 7-16 11.4.8). Set by the caller.
	Unraised bool

	LevelMass []float64   // mass at each level, kg
	T         []float64   // periods of the modes used, s
	Damping   []float64   // ratio of each mode
	PSA       []float64   // spectral ordinate of each mode, m/s², not divided
	SD        []float64   // PSA/w², m, not divided
	Gamma     []float64   // participation factors
	MassRatio []float64   // effective mass of each mode over the total
	Rho       [][]float64 // correlation used: identity for SRSS, empty for absolute

	Displacement Response // u = Gamma phi SD, m, relative to the ground
	Drift        Response // u_i - u_(i-1), m
	DriftRatio   Response // drift over storey height
	StoreyForce  Response // M phi Gamma PSA, N
	StoreyShear  Response // sum of the forces at and above, N
	Overturning  Response // moment of the forces above, at the foot of each storey, N*m
	BaseShear    Response // one item, N

	// ScaleFactor has multiplied forces, shears and moments (see ScaledTo); 1
	// when nothing was scaled. BaseShearUnscaled is what it started from, N.
	ScaleFactor       float64
	BaseShearUnscaled float64

	MassSum float64 // effective mass of the modes used over the total
	LeftOut float64 // largest mass ratio of a mode left out; -1 when not known
	// Residual is the missing mass where it was added, see WithResidual.
	Residual *Residual
	Warnings []Warning
	Checks   []Check
}

// Responses is every quantity in the order of reading.
func (c *Combined) Responses() []Response {
	return []Response{c.BaseShear, c.StoreyForce, c.StoreyShear, c.Overturning, c.Displacement, c.Drift, c.DriftRatio}
}

// closeModes is the relative distance of frequencies within which SRSS fails
// (the ten-percent rule of US NRC RG 1.92 rev. 1, from memory).
const closeModes = 0.10

// Combine finds the response of modes to pseudo-accelerations psa (m/s², one a
// mode, not yet divided). damping holds a ratio for each mode, or one for all;
// CQC needs it greater than zero. divisor is R/I_e, 1 for none; it divides
// forces and displacements alike.
func Combine(modes *Modes, psa, damping []float64, rule Rule, divisor float64) (*Combined, error) {
	z, err := given(modes, psa, damping, rule, divisor)
	if err != nil {
		return nil, err
	}
	m := modes.Model
	c := &Combined{
		Rule: rule, Divisor: divisor, Levels: m.Levels, H: m.H, Hs: m.Hs, LevelMass: m.Mass,
		T: modes.T, Damping: z, PSA: psa, Gamma: modes.Gamma, MassRatio: modes.MassRatio,
		MassSum: modes.MassSum[modes.Count()-1], LeftOut: modes.leftOut(),
	}
	switch rule {
	case CQC:
		c.Rho = Rho(modes.Omega, z)
	case SRSS:
		c.Rho = identity(modes.Count())
	}
	var u, drift, ratio, force, shear, moment, base [][]float64
	for i, w := range modes.Omega {
		c.SD = append(c.SD, psa[i]/(w*w))
		r := respond(modes, i, psa[i]/divisor)
		u, drift, ratio = append(u, r.u), append(drift, r.drift), append(ratio, r.ratio)
		force, shear, moment = append(force, r.force), append(shear, r.shear), append(moment, r.moment)
		base = append(base, r.shear[:1])
	}
	c.Displacement = c.response("displacement", u)
	c.Drift = c.response("drift", drift)
	c.DriftRatio = c.response("drift_ratio", ratio)
	c.StoreyForce = c.response("storey_force", force)
	c.StoreyShear = c.response("storey_shear", shear)
	c.Overturning = c.response("overturning", moment)
	c.BaseShear = c.response("base_shear", base)
	c.ScaleFactor, c.BaseShearUnscaled = 1, c.BaseShear.Combined[0]
	for _, r := range c.Responses() {
		for _, x := range r.AbsSum {
			if math.IsNaN(x) || math.IsInf(x, 0) {
				return nil, fmt.Errorf("%s is not a finite number: the values given are too large", r.Name)
			}
		}
	}
	c.judge()
	c.check(modes)
	return c, nil
}

// ScaledTo is the result with forces, shears and moments multiplied so that the
// base shear reaches v (N) where it lies below; displacements and drifts stay as
// they are (ASCE/SEI 7-22 12.9.1.4, from memory). Warnings and checks are those
// of the unscaled result.
func (c *Combined) ScaledTo(v float64) (*Combined, error) {
	if !(v >= 0) || math.IsInf(v, 0) {
		return nil, fmt.Errorf("the base shear to scale to must be a finite number from 0 up, not %v", v)
	}
	if c.BaseShearUnscaled == 0 {
		return nil, errors.New("a base shear of zero cannot be scaled")
	}
	out := *c
	out.ScaleFactor = max(1, v/c.BaseShearUnscaled)
	f := out.ScaleFactor / c.ScaleFactor
	for _, r := range []*Response{&out.BaseShear, &out.StoreyForce, &out.StoreyShear, &out.Overturning} {
		*r = r.times(f)
	}
	return &out, nil
}

func (r Response) times(f float64) Response {
	out := Response{Name: r.Name, Combined: scaled(r.Combined, f), AbsSum: scaled(r.AbsSum, f)}
	if r.Residual != nil {
		out.Residual = scaled(r.Residual, f)
	}
	for _, row := range r.Modal {
		out.Modal = append(out.Modal, scaled(row, f))
	}
	return out
}

func scaled(x []float64, f float64) []float64 {
	y := make([]float64, len(x))
	for i := range x {
		y[i] = f * x[i]
	}
	return y
}

func given(modes *Modes, psa, damping []float64, rule Rule, divisor float64) ([]float64, error) {
	n := modes.Count()
	if n == 0 || len(psa) != n || len(damping) != n && len(damping) != 1 {
		panic("modal: Combine needs one ordinate a mode and one damping, or one a mode")
	}
	z := make([]float64, n)
	for i := range z {
		z[i] = damping[min(i, len(damping)-1)]
		if !(z[i] >= 0 && z[i] < 1) {
			return nil, fmt.Errorf("mode %d: damping must be a ratio from 0 to below 1, not %v", i+1, z[i])
		}
		if rule == CQC && z[i] == 0 {
			return nil, fmt.Errorf("mode %d: CQC needs a damping greater than zero", i+1)
		}
		if !(psa[i] >= 0) || math.IsInf(psa[i], 0) {
			return nil, fmt.Errorf("mode %d: the spectral acceleration must be a finite number from 0 up, not %v", i+1, psa[i])
		}
	}
	if rule != CQC && rule != SRSS && rule != Absolute {
		return nil, fmt.Errorf("unknown combination rule %q: write CQC, SRSS or absolute", rule)
	}
	if !(divisor > 0) || math.IsInf(divisor, 0) {
		return nil, fmt.Errorf("the divisor R/I_e must be greater than zero, not %v", divisor)
	}
	return z, nil
}

// modalResponse is what one mode does, signed.
type modalResponse struct{ u, drift, ratio, force, shear, moment []float64 }

// respond is the response of mode i to a pseudo-acceleration a, m/s².
func respond(modes *Modes, i int, a float64) modalResponse {
	phi, w := modes.Phi[i], modes.Omega[i]
	force, u := times(modes.Model.M, phi), make([]float64, len(phi))
	for j, x := range phi {
		force[j] *= modes.Gamma[i] * a
		u[j] = modes.Gamma[i] * x * a / (w * w)
	}
	return spread(modes, force, u)
}

// spread is all that follows from forces and displacements of the levels.
func spread(modes *Modes, force, u []float64) modalResponse {
	m, n := modes.Model, len(u)
	r := modalResponse{force: force, u: u}
	below := 0.0
	for j, x := range u {
		r.drift = append(r.drift, x-below)
		r.ratio = append(r.ratio, (x-below)/m.Hs[j])
		below = x
	}
	r.shear, r.moment = make([]float64, n), make([]float64, n)
	shear, moment := 0.0, 0.0
	for j := n - 1; j >= 0; j-- {
		shear += r.force[j]
		moment += shear * (m.H[j] - m.Foot(j))
		r.shear[j], r.moment[j] = shear, moment
	}
	return r
}

// response combines modal rows item by item.
func (c *Combined) response(name string, rows [][]float64) Response {
	r := Response{Name: name, Modal: rows}
	one := make([]float64, len(rows))
	for j := range rows[0] {
		for i := range rows {
			one[i] = rows[i][j]
		}
		bound := absolute(one)
		value := bound
		if c.Rule != Absolute {
			value = quadratic(c.Rho, one)
		}
		r.Combined = append(r.Combined, value)
		r.AbsSum = append(r.AbsSum, bound)
	}
	return r
}

func identity(n int) [][]float64 {
	a := make([][]float64, n)
	for i := range a {
		a[i] = make([]float64, n)
		a[i][i] = 1
	}
	return a
}
