package modal

import (
	"errors"
	"fmt"
	"math"
)

// Rayleigh is damping proportional to mass and stiffness, C = A0 M + A1 K.
type Rayleigh struct {
	A0 float64 // 1/s
	A1 float64 // s
}

// NewRayleigh gives the damping zi at frequency wi and zj at wj (rad/s):
//
//	a0 = 2 wi wj (zi wj - zj wi)/(wj² - wi²),  a1 = 2 (zj wj - zi wi)/(wj² - wi²)
//
// The order of the two does not matter. A pair of ratios that would need a
// negative coefficient (negative damping somewhere) is an error.
func NewRayleigh(wi, wj, zi, zj float64) (Rayleigh, error) {
	for _, x := range []float64{wi, wj} {
		if !(x > 0) || math.IsInf(x, 0) {
			return Rayleigh{}, fmt.Errorf("Rayleigh damping: a frequency must be greater than zero, not %v", x)
		}
	}
	for _, z := range []float64{zi, zj} {
		if !(z >= 0 && z < 1) {
			return Rayleigh{}, fmt.Errorf("Rayleigh damping: a ratio must lie from 0 to below 1, not %v", z)
		}
	}
	d := (wj - wi) * (wj + wi)
	if math.Abs(d) < 1e-9*wi*wj {
		return Rayleigh{}, errors.New("Rayleigh damping: the two frequencies are the same")
	}
	r := Rayleigh{A0: 2 * wi * wj * (zi*wj - zj*wi) / d, A1: 2 * (zj*wj - zi*wi) / d}
	if r.A0 < 0 || r.A1 < 0 {
		return Rayleigh{}, fmt.Errorf("Rayleigh damping: the ratios %v and %v are too far apart: damping would be negative at some frequency", zi, zj)
	}
	return r, nil
}

// Ratio is the damping ratio at frequency w > 0, rad/s.
func (r Rayleigh) Ratio(w float64) float64 { return r.A0/(2*w) + r.A1*w/2 }

// Least is the smallest damping ratio and the frequency where it occurs, rad/s;
// both are 0 when a coefficient is zero, since the ratio then has no minimum.
func (r Rayleigh) Least() (ratio, w float64) {
	if r.A0 == 0 || r.A1 == 0 {
		return 0, 0
	}
	return math.Sqrt(r.A0 * r.A1), math.Sqrt(r.A0 / r.A1)
}
