package motion

// Integrate returns ground velocity (m/s) and displacement (m) at the samples,
// from rest. It is exact for an acceleration linear between samples:
//
//	v1 = v0 + h (a0 + a1)/2
//	d1 = d0 + h v0 + h² (2 a0 + a1)/6
//
// The trapezoid rule applied twice would over-read d by h² (a1 - a0)/12 in
// every step.
func Integrate(r *Record) (v, d []float64) {
	h := r.Step
	v, d = make([]float64, len(r.A)), make([]float64, len(r.A))
	for i := 1; i < len(r.A); i++ {
		a0, a1 := r.A[i-1], r.A[i]
		v[i] = v[i-1] + h*(a0+a1)/2
		d[i] = d[i-1] + h*v[i-1] + h*h*(2*a0+a1)/6
	}
	return v, d
}
