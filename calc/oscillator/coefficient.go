package oscillator

import "math"

// response is the motion of an oscillator after a time t:
//
//	g  unit impulse response, g1 = g' its slope
//	u  = int g: response to a unit step of p, w = int u: to a unit ramp of p
//
// for the load p on unit mass. The exact recurrence follows from these four
// alone (A to D' of the literature):
//
//	x(t)  = (1 - w² u) x0 + g  v0 + u p0 + w p'
//	x'(t) =    - w² g  x0 + g1 v0 + g p0 + u p'
//
// with p' the slope of p.
type response struct{ g, g1, u, w float64 }

// seriesTerms is enough for w t < 1: the first term left out is below 1e-20.
const seriesTerms = 25

// respond computes the response after a time t > 0.
//
// The closed forms of u and w lose about eps/(w t)³ by cancellation, 10 % at
// w t = 1e-5. Below w t = 1 the Taylor series of g in x = w t, from its own
// differential equation, is integrated term by term instead; it is accurate to
// 1.5e-15 throughout.
func respond(omega, z, t float64) response {
	x := omega * t
	if x < 1 {
		// g = sum c[k] x^k / w with c0 = 0, c1 = 1,
		// (k+2)(k+1) c[k+2] = -2 z (k+1) c[k+1] - c[k].
		var c [seriesTerms]float64
		c[1] = 1
		for k := 0; k+2 < seriesTerms; k++ {
			c[k+2] = -(2*z*c[k+1] + c[k]/float64(k+1)) / float64(k+2)
		}
		var g, g1, u, w float64 // Horner, highest power first
		for k := seriesTerms - 1; k >= 1; k-- {
			n := float64(k)
			g1 = g1*x + n*c[k]
			g = g*x + c[k]
			u = u*x + c[k]/(n+1)
			w = w*x + c[k]/((n+1)*(n+2))
		}
		return response{g: g * t, g1: g1, u: u * t * t, w: w * t * t * t}
	}
	q := math.Sqrt((1 - z) * (1 + z))
	decay := math.Exp(-z * x)
	sin, cos := math.Sincos(q * x)
	s := sin / (q * omega) // sin(wD t)/wD
	if q*x < 1e-4 {
		s = t * (1 - q*x*q*x/6)
	}
	r := response{g: decay * s, g1: decay * (cos - z*omega*s)}
	r.u = (1 - r.g1 - 2*z*omega*r.g) / (omega * omega)
	r.w = (t - r.g - 2*z*omega*r.u) / (omega * omega)
	return r
}
