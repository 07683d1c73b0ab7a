package motion

import "math"

// A Butterworth filter of order n by the bilinear transform, its corner
// prewarped: with the warped frequency x(f) = tan(pi f step),
//
//	|H|² = 1/(1 + (x(f)/x(fc))^2n)  low-pass
//	|H|² = 1/(1 + (x(fc)/x(f))^2n)  high-pass
//
// It runs as sections of the second order with the quality factors of
// [SectionQ], and one of the first order if n is odd. A section is two trapezoidal integrators in a
// loop, the same transfer function as the quotient of polynomials in 1/z; the
// coefficients of the loop stay well conditioned where the corner lies far below the sampling rate
// and those polynomials would lose digits.
type section struct {
	g, k   float64 // warped corner, 1/Q; k = 0 for the first order
	high   bool
	s1, s2 float64 // state of the integrators
}

// SectionQ are the quality factors of the second-order sections of a Butterworth
// filter of order n, the lowest first: 1/(2 cos(pi (2i-1)/(2n))) for n even.
func SectionQ(n int) []float64 {
	out := make([]float64, n/2)
	for i := range out {
		// poles stand at even angles on the left half circle; the first pair is next to the real axis
		angle := math.Pi * float64(2*i+1+n%2) / float64(2*n)
		out[i] = 1 / (2 * math.Cos(angle))
	}
	return out
}

// sections makes the filter with warped corner g.
func sections(order int, g float64, high bool) []section {
	var out []section
	if order%2 == 1 {
		out = append(out, section{g: g, high: high})
	}
	for _, q := range SectionQ(order) {
		out = append(out, section{g: g, k: 1 / q, high: high})
	}
	return out
}

// next takes a sample through the section.
func (s *section) next(x float64) float64 {
	if s.k == 0 {
		v := (x - s.s1) * s.g / (1 + s.g)
		low := s.s1 + v
		s.s1 = low + v
		if s.high {
			return x - low
		}
		return low
	}
	band := (s.s1 + s.g*(x-s.s2)) / (1 + s.g*(s.g+s.k))
	low := s.s2 + s.g*band
	s.s1 = 2*band - s.s1
	s.s2 = 2*low - s.s2
	if s.high {
		return x - s.k*band - low
	}
	return low
}

// settle is how many samples the section takes to forget: until its free motion has
// fallen to e^-40 = 4e-18.
func (s section) settle() float64 {
	radius := math.Abs(s.g-1) / (s.g + 1)
	if s.k > 0 {
		radius = math.Sqrt((1 - s.g*s.k + s.g*s.g) / (1 + s.g*s.k + s.g*s.g))
	}
	if radius < 1e-17 {
		return 1
	}
	return math.Ceil(-40 / math.Log(radius))
}

// run filters samples in place, forward or backward, from rest.
func run(sections []section, a []float64, backward bool) {
	for _, s := range sections {
		s.s1, s.s2 = 0, 0
		if backward {
			for i := len(a) - 1; i >= 0; i-- {
				a[i] = s.next(a[i])
			}
			continue
		}
		for i, x := range a {
			a[i] = s.next(x)
		}
	}
}
