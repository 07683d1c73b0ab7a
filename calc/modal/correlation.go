package modal

import "math"

// Correlation is the coefficient of the complete quadratic combination for two
// modes of frequencies wi, wj (rad/s) and damping ratios zi, zj, all > 0.
//
// With x = w_low/w_high, zL and zH the damping of the lower and the higher mode:
//
//	rho = 8 sqrt(zL zH) (x zL + zH) x^1.5 /
//	      [(1-x²)² + 4 zL zH x (1+x²) + 4 (zL² + zH²) x²]
//
// (Der Kiureghian 1981; Wilson, Der Kiureghian & Bayo 1981.) The two dampings
// are not exchangeable: which belongs to the lower mode matters. It panics on
// arguments that are not positive.
func Correlation(wi, wj, zi, zj float64) float64 {
	if !(wi > 0 && wj > 0 && zi > 0 && zj > 0) {
		panic("modal: Correlation needs positive frequencies and dampings")
	}
	if wi > wj {
		wi, wj, zi, zj = wj, wi, zj, zi
	}
	x := wi / wj
	apart := 1 - x*x
	return 8 * math.Sqrt(zi*zj) * (x*zi + zj) * x * math.Sqrt(x) /
		(apart*apart + 4*zi*zj*x*(1+x*x) + 4*(zi*zi+zj*zj)*x*x)
}

// Rho is the matrix of correlations between all pairs of modes.
func Rho(omega, damping []float64) [][]float64 {
	rho := make([][]float64, len(omega))
	for i := range rho {
		rho[i] = make([]float64, len(omega))
		for j := range i {
			rho[i][j] = Correlation(omega[i], omega[j], damping[i], damping[j])
			rho[j][i] = rho[i][j]
		}
		rho[i][i] = 1
	}
	return rho
}

// quadratic is sqrt(sum_i sum_j rho_ij r_i r_j), r signed. It panics when the
// sizes disagree.
func quadratic(rho [][]float64, r []float64) float64 {
	if len(rho) != len(r) {
		panic("modal: rho and responses differ in size")
	}
	top := 0.0
	for _, x := range r {
		top = max(top, math.Abs(x))
	}
	if top == 0 {
		return 0
	}
	unit := make([]float64, len(r)) // so that squares neither vanish nor overflow
	for i, x := range r {
		unit[i] = x / top
	}
	return top * math.Sqrt(max(0, dot(unit, times(rho, unit))))
}

// squares is the square root of the sum of squares.
func squares(r []float64) float64 {
	sum := 0.0
	for _, x := range r {
		sum = math.Hypot(sum, x)
	}
	return sum
}

// absolute is the sum of magnitudes, the bound of every other rule.
func absolute(r []float64) float64 {
	sum := 0.0
	for _, x := range r {
		sum += math.Abs(x)
	}
	return sum
}
