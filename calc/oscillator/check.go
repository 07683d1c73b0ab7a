package oscillator

import "math"

// Check computes the displacement peak a second time by another route and returns
// the relative difference from that of [Run].
//
// The second route shares nothing with the first: the matrix exponential of the
// system augmented by the load, by scaling and squaring, at an eighth of the step or
// finer (w h <= 0.02), with the peaks between its states read off cubic Hermite
// polynomials. Its own error is about 1e-8 of the peak. It panics as Run does, and
// for a record that would need more than a thousand million steps.
func Check(a []float64, dt float64, o Oscillator) (residual float64) {
	first := Run(a, dt, []Oscillator{o})[0].U
	second := exponentialPeak(a, dt, o)
	if first == 0 && second == 0 {
		return 0
	}
	return math.Abs(first-second) / max(first, second)
}

// exponentialPeak is the largest |u| by the matrix exponential.
func exponentialPeak(a []float64, dt float64, o Oscillator) float64 {
	w := 2 * math.Pi / o.Period
	parts := max(8, math.Ceil(w*dt/0.02))
	if parts*float64(len(a)) > 1e9 {
		panic("oscillator: the period is too short against the step for the cross-check")
	}
	h := dt / parts
	e := transition(w, o.Damping, h)
	// state: u, v/w, load p/w² and its slope p'/w³, p = -ag
	x := [4]float64{}
	peak := 0.0
	cross := func(e *matrix, wh float64) {
		y := e.times(x)
		peak = max(peak, hermite(x[0], y[0], wh*x[1], wh*y[1]))
		x = y
	}
	for i := 1; i < len(a); i++ {
		for j := range int(parts) {
			f := float64(j) / parts
			x[2] = -(a[i-1] + f*(a[i]-a[i-1])) / (w * w)
			x[3] = -(a[i] - a[i-1]) / (dt * w * w * w)
			cross(&e, w*h)
		}
	}
	x[2], x[3] = 0, 0
	const free = 2000 // steps in a period of free vibration
	e = transition(w, o.Damping, o.Period/free)
	for range 2 * free {
		cross(&e, 2*math.Pi/free)
	}
	return peak
}

// matrix is the transition of the state (u, v/w, p/w², p'/w³).
type matrix [4][4]float64

func (m *matrix) times(x [4]float64) (y [4]float64) {
	for i := range 4 {
		for j := range 4 {
			y[i] += m[i][j] * x[j]
		}
	}
	return y
}

func (m *matrix) product(n *matrix) (p matrix) {
	for i := range 4 {
		for j := range 4 {
			for k := range 4 {
				p[i][j] += m[i][k] * n[k][j]
			}
		}
	}
	return p
}

// transition is exp(A w h) for A of u' = v, v' = p - u - 2 z v in the time w t.
func transition(w, z, h float64) matrix {
	const halvings = 6
	x := w * h / (1 << halvings)
	a := matrix{{0, x}, {-x, -2 * z * x, x}, {0, 0, 0, x}}
	term := matrix{{1}, {0, 1}, {0, 0, 1}, {0, 0, 0, 1}}
	sum := term
	for k := 1.0; k <= 12; k++ {
		term = term.product(&a)
		for i := range 4 {
			for j := range 4 {
				term[i][j] /= k
				sum[i][j] += term[i][j]
			}
		}
	}
	for range halvings {
		sum = sum.product(&sum)
	}
	return sum
}

// hermite is the largest |f| on [0, 1] of the cubic with end values f0, f1 and end
// slopes d0, d1.
func hermite(f0, f1, d0, d1 float64) float64 {
	peak := max(math.Abs(f0), math.Abs(f1))
	c2, c3 := 3*(f1-f0)-2*d0-d1, 2*(f0-f1)+d0+d1
	disc := c2*c2 - 3*c3*d0
	if disc < 0 {
		return peak
	}
	q := -(c2 + math.Copysign(math.Sqrt(disc), c2))
	for _, x := range [2]float64{d0 / q, q / (3 * c3)} {
		if x > 0 && x < 1 {
			peak = max(peak, math.Abs(f0+x*(d0+x*(c2+x*c3))))
		}
	}
	return peak
}
