package oscillator

import "math"

// best is the largest absolute value so far. The first pass gives the size alone;
// the time comes with the first offer that reaches it.
type best struct {
	size, at float64
	timed    bool
}

func (b *best) offer(x, t float64) {
	if x := math.Abs(x); x > b.size || x == b.size && !b.timed && x > 0 {
		b.size, b.at, b.timed = x, t, true
	}
}

// state is a motion with the load that follows: p at its time, growing with slope.
type state struct{ u, v, p, slope float64 }

// search looks for maxima within one step of the load, which begins at t0 with motion.
type search struct {
	omega, z float64
	u, v, a  best
	t0       float64
	motion   state
}

// slack is the relative size below which a possible gain is not pursued. It stops
// the search among maxima that are equal but for rounding.
const slack = 1e-13

// bound says whether any maximum can be exceeded within a time h after m, from the
// states at both ends of it.
//
// The acceleration q, the second derivative of u, satisfies the homogeneous equation, so that
// q'² + w² q² never grows: |q| <= Q and |q'| <= w Q with Q = |q0| + |q0'|/w.
// A function lies within h²/8 times its largest second derivative of its chord. Where the phase is large the
// chord says nothing; there the sum of the particular solution, which is
// linear, and the homogeneous rest, which never grows either, is the bound.
func (b *search) bound(m state, h, u1, v1 float64) bool {
	w, z := b.omega, b.z
	q := m.p - 2*z*w*m.v - w*w*m.u
	q1 := m.slope - 2*z*w*q - w*w*m.v
	size := math.Abs(q) + math.Abs(q1)/w
	bulge := h * h / 8 * size
	a0, a1 := w*(w*m.u+2*z*m.v), w*(w*u1+2*z*v1)
	up := max(math.Abs(m.u), math.Abs(u1)) + bulge
	vp := max(math.Abs(m.v), math.Abs(v1)) + bulge*w
	ap := max(math.Abs(a0), math.Abs(a1)) + bulge*w*w*(1+2*z)
	if w*h > 1 {
		p1 := m.p + m.slope*h
		shift := 2 * z * m.slope / (w * w * w)
		us, ue, vs := m.p/(w*w)-shift, p1/(w*w)-shift, m.slope/(w*w)
		rest := math.Hypot(m.u-us, (m.v-vs)/w)
		up = min(up, max(math.Abs(us), math.Abs(ue))+rest)
		vp = min(vp, math.Abs(vs)+w*rest)
		ap = min(ap, max(math.Abs(m.p), math.Abs(p1))+w*w*rest*math.Sqrt(1+4*z*z))
	}
	return up > b.u.size*(1+slack) || vp > b.v.size*(1+slack) || ap > b.a.size*(1+slack)
}

// within searches the times lo to hi of the step, halving until the phase is below
// one radian and leaving out halves whose bound stays below the maxima.
func (b *search) within(lo, hi float64) {
	m, e := b.after(lo), b.after(hi)
	if !b.bound(m, hi-lo, e.u, e.v) {
		return
	}
	if b.omega*(hi-lo) > 1 {
		mid := (lo + hi) / 2
		b.within(lo, mid)
		b.within(mid, hi)
		return
	}
	b.turn(m, lo, hi-lo, [3]bool{true, true, true})
}

// after is the motion at a time t of the step.
func (b *search) after(t float64) state {
	m := b.motion
	if t == 0 {
		return m
	}
	r := respond(b.omega, b.z, t)
	w2 := b.omega * b.omega
	return state{
		u:     (1-w2*r.u)*m.u + r.g*m.v + r.u*m.p + r.w*m.slope,
		v:     -w2*r.g*m.u + r.g1*m.v + r.g*m.p + r.u*m.slope,
		p:     m.p + m.slope*t,
		slope: m.slope,
	}
}

// order is the largest number of terms of the Taylor polynomials of a stretch, w h <= 1.
const order = 24

// terms is how many of them are needed: the next is below 1e-18.
func terms(wh float64) int {
	x := 1.0
	for n := 1; n < order; n++ {
		if x *= wh / float64(n); x < 1e-18 {
			return min(n+4, order)
		}
	}
	return order
}

// turn offers the turning points of u, v and the total acceleration, those of them that
// are wanted, within a time h after the motion m, which is at lo.
//
// In x = w t the motion is the Taylor series of its differential equation. The
// turning points of v are the zeros of q = v', which is a decaying sinusoid and
// has one zero at most in so short a stretch; between them v is monotonic
// and has one zero at most, where u turns. The total acceleration is
// p - q: it turns where p' = q', and q' is monotonic between the zeros of its
// slope, again a decaying sinusoid.
func (b *search) turn(m state, lo, h float64, wanted [3]bool) {
	w, z := b.omega, b.z
	u := make(polynomial, terms(w*h), order)
	u[0], u[1] = m.u, m.v/w
	load := [2]float64{m.p / (w * w), m.slope / (w * w * w)}
	for k := 0; k+2 < len(u); k++ {
		c := -2*z*float64(k+1)*u[k+1] - u[k]
		if k < 2 {
			c += load[k]
		}
		u[k+2] = c / float64((k+1)*(k+2))
	}
	v := u.slope()
	q := v.slope()
	end := w * h
	at := func(x float64) float64 { return b.t0 + lo + x/w }
	peak := func(best *best, f, f1, f2 polynomial, unit float64) {
		if x, ok := f1.zero(0, end); ok { // the only one
			best.offer(f.at(x)*unit, at(x))
		} else if split, ok := f2.zero(0, end); ok { // two or none
			if x, ok := f1.zero(0, split); ok {
				best.offer(f.at(x)*unit, at(x))
			}
			if x, ok := f1.zero(split, end); ok {
				best.offer(f.at(x)*unit, at(x))
			}
		}
		best.offer(f.at(end)*unit, at(end))
	}
	if wanted[0] {
		peak(&b.u, u, v, q, 1)
	}
	if wanted[1] {
		if x, ok := q.zero(0, end); ok {
			b.v.offer(v.at(x)*w, at(x))
		}
		b.v.offer(v.at(end)*w, at(end))
	}
	if wanted[2] {
		a := make(polynomial, len(u), order) // w² (u + 2 z v) over w²
		for k := range a {
			a[k] = u[k] + 2*z*v[k]
		}
		a1 := a.slope()
		peak(&b.a, a, a1, a1.slope(), w*w)
	}
}

// polynomial is sum c[k] x^k.
type polynomial []float64

func (c polynomial) at(x float64) (y float64) {
	for k := len(c) - 1; k >= 0; k-- {
		y = y*x + c[k]
	}
	return y
}

func (c polynomial) slope() polynomial {
	d := make(polynomial, len(c), order)
	for k := 1; k < len(c); k++ {
		d[k-1] = float64(k) * c[k]
	}
	return d
}

// zero finds the zero between lo and hi of a polynomial that has one there at most where it
// changes sign: Newton, kept inside a bracket. There is none without a change of sign. It stops
// at 1e-10, which in the value at a turning point is its square.
func (c polynomial) zero(lo, hi float64) (x float64, ok bool) {
	left, right := c.at(lo), c.at(hi)
	if !(left < 0 && right > 0 || left > 0 && right < 0) {
		return 0, false
	}
	d := c.slope()
	x = lo + (hi-lo)*left/(left-right)
	for range 100 {
		y := c.at(x)
		if y == 0 {
			break
		}
		if (y < 0) == (left < 0) {
			lo = x
		} else {
			hi = x
		}
		next := x - y/d.at(x)
		if !(next > lo && next < hi) {
			next = (lo + hi) / 2
		}
		near := math.Abs(next-x) <= 1e-10
		if x = next; near {
			break
		}
	}
	return x, true
}
