package lateral

import (
	"errors"
	"fmt"
	"math"

	"quoin/calc/cite"
)

// DriftInput is an elastic analysis under the design forces, and what its drifts
// are judged by. Vectors run lowest storey first and are equally long; signs of
// drifts, shears and displacements do not matter but where Simultaneous is set.
type DriftInput struct {
	Basis  string // of DriftBases
	Levels []string
	H, Hs  []float64 // elevations and storey heights, m

	Elastic      []float64 // storey drift, m, not amplified
	Shear        []float64 // storey shears of the very analysis that Elastic is of, N
	Displacement []float64 // of each level relative to the ground, m, not amplified; or none
	// Simultaneous: the above is one state of equilibrium, so that drifts add up to
	// displacements; else each is a maximum by itself.
	Simultaneous bool
	// Stiffness is Shear/Elastic of each storey known from elsewhere, N/m; or none.
	Stiffness []float64

	P []float64 // vertical load at and above each level, N; none: no stability coefficient
	// Weight is the seismic weight at and above each level, N, as far up as it is
	// known; or none. P below it is warned of.
	Weight []float64
	Beta   []float64 // shear demand over shear capacity: one, or one a storey

	Cd, Ie float64 // ASCE/SEI 7: deflection amplification and importance
	Rho    float64 // ASCE/SEI 7: the limit is divided by it; 1 where the clause does not ask
	Qd     float64 // EN 1998-1: displacement behaviour factor
	Nu     float64 // EN 1998-1: reduction to the damage limitation action

	Limit []float64 // allowed drift over storey height: one, or one a storey
}

// Drift is amplified drifts, their limits and the stability of every storey, as
// plain encodable data; vectors run lowest storey first.
type Drift struct {
	Basis  string
	Levels []string
	H, Hs  []float64 // m

	Elastic    []float64 // m
	Factor     float64   // C_d/I_e, or q_d
	FirstOrder []float64 // Factor * Elastic, m
	// Displacement of each level relative to the ground, m, times Factor, as
	// DisplacementElastic is without it; second-order effects are in neither. Empty
	// where the analysis has none.
	Displacement, DisplacementElastic []float64

	P, Shear    []float64 // N; P empty: not given
	Theta       []float64 // stability coefficient; empty without P
	ThetaLimit  []float64
	SecondOrder []float64 // factor on drifts and forces: 1/(1 - theta) above DriftThreshold, else 1

	Amplified []float64 // FirstOrder * SecondOrder, m
	Ratio     []float64 // Amplified over storey height
	Nu        float64   // factor on Amplified before it is held to the limit: 1 for ASCE/SEI 7
	Limit     []float64 // m

	Warnings []Warning
	Checks   []Check
}

// DriftError says what is wrong with one input.
type DriftError struct {
	Symbol        string // "P", "C_d"
	Item          int    // of a vector, counted from 0; -1: the whole
	Problem, Hint string
}

func (e *DriftError) Error() string { return e.Symbol + ": " + e.Problem }

// DriftThreshold is the stability coefficient up to which second-order effects
// are left out (ASCE/SEI 7-22 12.8.7; EN 1998-1:2004 4.4.2.2(2)).
const DriftThreshold = 0.10

// Drifts amplifies elastic drifts, finds stability coefficients and limits:
//
//	FirstOrder = Factor * Elastic           Factor = C_d/I_e, or q_d
//	theta      = P * drift / (Shear * h_s)  drift: Elastic for ASCE/SEI 7, FirstOrder for EN 1998-1
//	Amplified  = FirstOrder / (1 - theta)   where theta > 0.10
//	Limit      = limit ratio * h_s / rho
//
// Elastic and Shear must be of one analysis: of a modal combination that was
// scaled to a base shear, both before scaling or both after. All that is wrong
// with the numbers comes back at once, as joined errors of type *DriftError. It
// panics on vectors of unequal length and on an unknown basis.
// See ASCE/SEI 7-22 12.8.6, 12.8.7, 12.12.1; EN 1998-1:2004 4.3.4, 4.4.2.2, 4.4.3.2.
func Drifts(in DriftInput) (*Drift, error) {
	rule, ok := driftRuleOf(in.Basis)
	n := len(in.Levels)
	if !ok || n == 0 || len(in.H) != n || len(in.Hs) != n || len(in.Elastic) != n || len(in.Shear) != n ||
		len(in.Displacement)%n != 0 || len(in.Stiffness)%n != 0 {
		panic("lateral: Drifts needs a known basis and vectors of one length")
	}
	if err := in.check(rule); err != nil {
		return nil, err
	}
	d := &Drift{Basis: in.Basis, Levels: in.Levels, H: in.H, Hs: in.Hs, P: in.P, Factor: rule.factor(in), Nu: rule.nu(in)}
	for i := range n {
		elastic, shear := math.Abs(in.Elastic[i]), math.Abs(in.Shear[i])
		first, second := d.Factor*elastic, 1.0
		if len(in.P) > 0 {
			theta := rule.theta(in, in.P[i], elastic, shear, in.Hs[i])
			if theta >= 1 {
				return nil, &DriftError{Symbol: "P", Item: i, Problem: fmt.Sprintf("storey %s has no equilibrium: theta is %.3g, and at 1 the gravity load alone moves it", in.Levels[i], theta),
					Hint: "is P the load at and above each level, and the stiffness in the right unit?"}
			}
			if beyond(theta, DriftThreshold) {
				second = 1 / (1 - theta)
			}
			d.Theta, d.ThetaLimit = append(d.Theta, theta), append(d.ThetaLimit, rule.thetaLimit(in, i))
		}
		d.Elastic, d.Shear = append(d.Elastic, elastic), append(d.Shear, shear)
		d.FirstOrder, d.SecondOrder = append(d.FirstOrder, first), append(d.SecondOrder, second)
		d.Amplified, d.Ratio = append(d.Amplified, first*second), append(d.Ratio, first*second/in.Hs[i])
		d.Limit = append(d.Limit, at(in.Limit, i)*in.Hs[i]/rule.rho(in))
	}
	for _, u := range in.Displacement {
		d.DisplacementElastic = append(d.DisplacementElastic, math.Abs(u))
		d.Displacement = append(d.Displacement, d.Factor*math.Abs(u))
	}
	d.warn(in, rule)
	d.check(in, rule)
	return d, nil
}

// at is item i of a vector, or its only item.
func at(x []float64, i int) float64 { return x[min(i, len(x)-1)] }

// check holds the input to what the rules can work with.
func (in DriftInput) check(rule driftRule) error {
	var errs []error
	fail := func(symbol string, item int, hint, format string, args ...any) {
		errs = append(errs, &DriftError{symbol, item, fmt.Sprintf(format, args...), hint})
	}
	for _, need := range rule.needs(in) {
		if !(need.value > 0) || math.IsInf(need.value, 0) {
			fail(need.symbol, -1, need.hint, "%s must be a finite number greater than zero", need.symbol)
		}
	}
	if !rule.damage && in.Rho < 1 {
		fail("rho", -1, "it is 1.0 or 1.3", "rho divides the limit and is never below 1")
	}
	if rule.damage && in.Nu > 1 {
		fail("nu", -1, "it is 0.5 or 0.4", "nu reduces the drift and is never above 1")
	}
	n := len(in.Levels)
	vector := func(symbol string, x []float64) {
		if len(x) != 1 && len(x) != n {
			fail(symbol, -1, "give one number for all storeys, or one a storey, lowest first", "%s has %d items for %d storeys", symbol, len(x), n)
		}
		for i, v := range x {
			if !(v > 0) || math.IsInf(v, 0) {
				fail(symbol, i, "", "%s must be a finite number greater than zero", symbol)
			}
		}
	}
	vector("limit", in.Limit)
	if rule.beta {
		vector("beta", in.Beta)
	}
	for i := range n {
		for _, x := range []float64{in.Elastic[i], in.Shear[i], in.Hs[i]} {
			if math.IsNaN(x) || math.IsInf(x, 0) {
				fail("from", -1, "", "storey %s has a drift, shear or height that is no finite number", in.Levels[i])
			}
		}
		if !(in.Hs[i] > 0) {
			fail("from", -1, "", "storey %s has no height", in.Levels[i])
		}
	}
	if len(in.P) > 0 {
		in.gravity(fail)
	}
	return errors.Join(errs...)
}

// gravity checks that P is summed from the top down.
func (in DriftInput) gravity(fail func(symbol string, item int, hint, format string, args ...any)) {
	const hint = "P is the vertical load at and above each level, lowest first: with loads w by level, sum(w) - cumsum(w) + w"
	if len(in.P) != len(in.Levels) {
		fail("P", -1, hint, "P has %d items for %d storeys", len(in.P), len(in.Levels))
		return
	}
	for i, p := range in.P {
		switch {
		case !(p > 0) || math.IsInf(p, 0):
			fail("P", i, hint, "P must be a finite load greater than zero")
		case i > 0 && p >= in.P[i-1]:
			fail("P", i, hint, "P does not grow from storey %s down to storey %s", in.Levels[i], in.Levels[i-1])
		case in.Shear[i] == 0:
			fail("from", -1, "", "storey %s has no shear: its stability cannot be found", in.Levels[i])
		}
	}
}

// Governs is the storey whose drift, and the one whose theta, is largest against
// its limit, counted from 0; -1 where there is no theta.
func (d *Drift) Governs() (drift, theta int) {
	theta = -1
	for i := range d.Amplified {
		if d.Amplified[i]/d.Limit[i] > d.Amplified[drift]/d.Limit[drift] {
			drift = i
		}
	}
	for i := range d.Theta {
		if theta < 0 || d.Theta[i]/d.ThetaLimit[i] > d.Theta[theta]/d.ThetaLimit[theta] {
			theta = i
		}
	}
	return drift, theta
}

// DriftClauses are the places in a standard that its drift rules stand in.
type DriftClauses struct{ Drift, Theta, ThetaLimit, SecondOrder, Limit, Combined cite.Ref }

// DriftOf is what a static procedure gives to Drifts: the elastic response under
// the forces that its drifts are found from.
func DriftOf(s *Static) DriftInput {
	in := DriftInput{Basis: s.Basis, Levels: s.Levels, H: s.H, Hs: s.Hs, Elastic: s.Drift, Shear: s.DriftShear, Displacement: s.Displacement, Simultaneous: true}
	in.Weight = make([]float64, len(s.W))
	above := 0.0
	for i := len(s.W) - 1; i >= 0; i-- {
		above += s.W[i]
		in.Weight[i] = above
	}
	return in
}

// Times is the analysis with drifts, shears and displacements multiplied by f.
func (in DriftInput) Times(f float64) DriftInput {
	for _, x := range []*[]float64{&in.Elastic, &in.Shear, &in.Displacement} {
		y := make([]float64, len(*x))
		for i, v := range *x {
			y[i] = f * v
		}
		*x = y
	}
	return in
}
