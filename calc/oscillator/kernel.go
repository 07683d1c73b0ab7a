package oscillator

import "math"

// stepper crosses the steps of a record for one oscillator.
//
// It is driven by p = +ag, which gives the state -u: maxima of absolute values do
// not care. The state is scaled, x = -u/su and y = -v/sv, so that the newest
// sample enters with the factor 1 and a step takes six fused multiply-adds, the
// total acceleration a seventh.
//
// # The contract of every kernel
//
// A kernel for another machine gives the same bits when it computes, in this
// order, with one rounding an fma(a, b, c) = a b + c:
//
//	s  = fma(r1, p0, p1)      x1 = fma(a11, x0, fma(a12, y0, s))
//	t  = fma(r2, p0, p1)      y1 = fma(a22, y0, fma(a21, x0, t))
//	q1 = fma(k, y1, x1)
//
// and keeps the maxima of |x1|, |y1|, |q1|, which times su, sv, sa are those of
// |u|, |v| and the total acceleration at the samples.
type stepper struct {
	omega, z, dt float64

	a11, a12, r1, c1 float64 // row of x; c1 is the factor of p1, 1 unless rigid
	a21, a22, r2, c2 float64 // row of y
	k                float64 // total acceleration is sa (x + k y)
	su, sv, sa       float64
}

// rigid is the phase w dt from which a stepper leaves the state unscaled: there the
// divisor of the velocity row, int g, vanishes at whole periods in a step when
// the damping is zero. (It is pi at least before the first zero, 2 pi.)
const rigid = 3

func newStepper(o Oscillator, dt float64) *stepper {
	s := &stepper{omega: 2 * math.Pi / o.Period, z: o.Damping, dt: dt}
	r := respond(s.omega, s.z, dt)
	w2 := s.omega * s.omega
	b12, b22 := r.w/dt, r.u/dt
	b11, b21 := r.u-b12, r.g-b22
	a12, a21 := r.g, -w2*r.g
	s.a11, s.a22 = 1-w2*r.u, r.g1
	s.su, s.sv, s.c1, s.c2 = b12, b22, 1, 1
	if s.omega*dt > rigid {
		s.su, s.sv, s.c1, s.c2 = 1, 1, b12, b22
		s.a12, s.r1, s.a21, s.r2 = a12, b11, a21, b21
	} else {
		s.a12, s.r1 = a12*b22/b12, b11/b12
		s.a21, s.r2 = a21*b12/b22, b21/b22
	}
	s.sa = w2 * s.su
	s.k = 2 * s.z * s.sv / (s.omega * s.su)
	return s
}

// step crosses one step of the record.
func (s *stepper) step(x, y, p0, p1 float64) (x1, y1 float64) {
	x1 = math.FMA(s.a11, x, math.FMA(s.a12, y, math.FMA(s.r1, p0, s.c1*p1)))
	y1 = math.FMA(s.a22, y, math.FMA(s.a21, x, math.FMA(s.r2, p0, s.c2*p1)))
	return x1, y1
}

// total is the total acceleration of a state, over sa.
func (s *stepper) total(x, y float64) float64 { return math.FMA(s.k, y, x) }

// maxima is the kernel proper: the state after the samples, begun with x and y at the first, and
// the largest |x|, |y| and |x + k y| at them, the first included. It must not be used for a rigid stepper.
func (s *stepper) maxima(a []float64, x, y float64) (x1, y1, mx, my, mq float64) {
	a11, a12, r1 := s.a11, s.a12, s.r1
	a21, a22, r2 := s.a21, s.a22, s.r2
	k := s.k
	const size = 1<<63 - 1 // all bits but the sign; sizes compare as whole numbers do, only faster
	ix, iy, iq := math.Float64bits(x)&size, math.Float64bits(y)&size, math.Float64bits(s.total(x, y))&size
	p0 := a[0]
	for _, p1 := range a[1:] {
		x, y = math.FMA(a11, x, math.FMA(a12, y, math.FMA(r1, p0, p1))), math.FMA(a22, y, math.FMA(a21, x, math.FMA(r2, p0, p1)))
		ix = max(ix, math.Float64bits(x)&size)
		iy = max(iy, math.Float64bits(y)&size)
		iq = max(iq, math.Float64bits(math.FMA(k, y, x))&size)
		p0 = p1
	}
	return x, y, math.Float64frombits(ix), math.Float64frombits(iy), math.Float64frombits(iq)
}
