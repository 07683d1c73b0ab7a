package spectrum

import (
	"fmt"
	"math"
)

// Amplification is how much a design spectrum stands above the peak ground
// acceleration, velocity and displacement [Newmark & Hall 1982].
type Amplification struct{ A, V, D float64 }

// NewmarkHall is the amplification at a damping ratio z, for the median or the
// 84.1st percentile (one sigma) of motions, unrounded:
//
//	median  A 3.21 - 0.68 ln p   V 2.31 - 0.41 ln p   D 1.82 - 0.27 ln p
//	84.1 %  A 4.38 - 1.04 ln p   V 3.38 - 0.67 ln p   D 2.73 - 0.45 ln p
//
// with p the damping in per cent. The formulas were fitted from 0.5 to 20 %; it returns an
// error outside.
func NewmarkHall(z float64, sigma bool) (Amplification, error) {
	if !(z >= 0.005 && z <= 0.20) {
		return Amplification{}, fmt.Errorf("the amplification factors hold from 0.5 to 20 %% damping, not at %v %%", 100*z)
	}
	ln := math.Log(100 * z)
	if sigma {
		return Amplification{4.38 - 1.04*ln, 3.38 - 0.67*ln, 2.73 - 0.45*ln}, nil
	}
	return Amplification{3.21 - 0.68*ln, 2.31 - 0.41*ln, 1.82 - 0.27*ln}, nil
}

// Eta is the damping correction factor sqrt(10/(5 + xi)), xi in per cent, not less than
// 0.55 [EN 1998-1:2004 3.2.2.2(3)], that multiplies the elastic spectrum at 5 %. It
// returns an error for a damping ratio z outside [0, 1].
func Eta(z float64) (float64, error) {
	if !(z >= 0 && z <= 1) {
		return 0, fmt.Errorf("the damping ratio %v is outside 0 to 1", z)
	}
	return math.Max(math.Sqrt(10/(5+100*z)), 0.55), nil
}

// damping coefficient B by effective damping in per cent
var (
	dampedB   = [][2]float64{{2, 0.8}, {5, 1.0}, {10, 1.2}, {20, 1.5}, {30, 1.8}, {40, 2.1}, {50, 2.4}, {60, 2.7}, {70, 3.0}, {80, 3.3}, {90, 3.6}, {100, 4.0}}
	isolatedB = [][2]float64{{2, 0.8}, {5, 1.0}, {10, 1.2}, {20, 1.5}, {30, 1.7}, {40, 1.9}, {50, 2.0}}
)

// DampedB is the divisor of the 5 % spectrum for structures with damping systems
// [ASCE/SEI 7-16 Table 18.7-1], linear between the entries and constant beyond its
// ends, as the table states. It returns an error for a damping ratio outside [0, 1].
func DampedB(z float64) (float64, error) { return coefficientB(dampedB, z) }

// IsolatedB is the same for seismically isolated structures [ASCE/SEI 7-16 Table 17.5-1].
func IsolatedB(z float64) (float64, error) { return coefficientB(isolatedB, z) }

func coefficientB(table [][2]float64, z float64) (float64, error) {
	if !(z >= 0 && z <= 1) {
		return 0, fmt.Errorf("the damping ratio %v is outside 0 to 1", z)
	}
	p := 100 * z
	if p <= table[0][0] {
		return table[0][1], nil
	}
	for i := 1; i < len(table); i++ {
		a, b := table[i-1], table[i]
		if p <= b[0] {
			return a[1] + (b[1]-a[1])*(p-a[0])/(b[0]-a[0]), nil
		}
	}
	return table[len(table)-1][1], nil
}
