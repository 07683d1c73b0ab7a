package motion

import (
	"math"

	"quoin/calc/quantity"
)

// Measures are the intensity measures of a record, over continuous time within
// the record. Times are seconds from the first sample; a measure that is reached
// several times has the first.
type Measures struct {
	PGA, TimePGA float64 // largest |a|, m/s²
	PGV, TimePGV float64 // largest |v|, m/s, from rest
	PGD, TimePGD float64 // largest |d|, m, from rest

	Arias float64 // Arias intensity pi/(2 g) int a² dt, m/s [Arias 1970]; g = 9.80665 m/s²
	CAV   float64 // cumulative absolute velocity int |a| dt, m/s [EPRI 1988]

	// T5, T75 and T95 are when 5, 75 and 95 % of the Arias intensity has come in
	// (Husid curve); D5to75 and D5to95 the significant durations between them
	// [Trifunac & Brady 1975]. All are zero for a record without acceleration.
	T5, T75, T95, D5to75, D5to95 float64
}

// Measure computes all measures, exactly for an acceleration linear between
// samples: velocity and displacement turn where acceleration and velocity vanish
// inside a step, |a| is split where a changes sign, and the Husid curve is
// inverted inside the step.
func Measure(r *Record) Measures {
	var m Measures
	h := r.Step
	v, d := Integrate(r)
	energy := make([]float64, len(r.A)) // int a² dt up to each sample
	for i, a := range r.A {
		t := r.Time(i)
		largest(&m.PGA, &m.TimePGA, a, t)
		largest(&m.PGV, &m.TimePGV, v[i], t)
		largest(&m.PGD, &m.TimePGD, d[i], t)
		if i+1 == len(r.A) {
			break
		}
		s := step{a0: a, slope: (r.A[i+1] - a) / h, v0: v[i], d0: d[i]}
		if x := s.rest(); x > 0 && x < h {
			largest(&m.PGV, &m.TimePGV, s.velocity(x), t+x)
		}
		for _, x := range s.still() {
			if x > 0 && x < h {
				largest(&m.PGD, &m.TimePGD, s.displacement(x), t+x)
			}
		}
		m.CAV += s.absolute(h)
		energy[i+1] = energy[i] + s.energy(h)
	}
	total := energy[len(energy)-1]
	m.Arias = math.Pi / (2 * quantity.Gravity) * total
	if total > 0 {
		m.T5, m.T75, m.T95 = r.husid(energy, 0.05), r.husid(energy, 0.75), r.husid(energy, 0.95)
		m.D5to75, m.D5to95 = m.T75-m.T5, m.T95-m.T5
	}
	return m
}

// Husid is how much of the Arias intensity has come in at each sample, from 0 to 1,
// exact for an acceleration linear between samples; all zero for a record without
// acceleration. [Arias 1970; Trifunac & Brady 1975]
func Husid(r *Record) []float64 {
	out := make([]float64, len(r.A))
	for i := range len(out) - 1 {
		s := step{a0: r.A[i], slope: (r.A[i+1] - r.A[i]) / r.Step}
		out[i+1] = out[i] + s.energy(r.Step)
	}
	if total := out[len(out)-1]; total > 0 {
		for i := range out {
			out[i] /= total
		}
	}
	return out
}

func largest(best, at *float64, x, t float64) {
	if x := math.Abs(x); x > *best {
		*best, *at = x, t
	}
}

// husid is the time at which the given fraction of the energy has come in.
func (r *Record) husid(energy []float64, fraction float64) float64 {
	want := fraction * energy[len(energy)-1]
	i := 0
	for energy[i+1] < want {
		i++
	}
	s := step{a0: r.A[i], slope: (r.A[i+1] - r.A[i]) / r.Step}
	want -= energy[i]
	lo, hi := 0.0, r.Step
	x := r.Step / 2
	for range 200 { // Newton, kept inside the bracket; the energy only grows
		miss := s.energy(x) - want
		if miss > 0 {
			hi = x
		} else {
			lo = x
		}
		a := s.a0 + s.slope*x
		next := x - miss/(a*a)
		if !(next > lo && next < hi) {
			next = (lo + hi) / 2
		}
		if math.Abs(next-x) <= 1e-16*r.Step {
			break
		}
		x = next
	}
	return r.Time(i) + x
}

// step is the motion within one step of a record, x seconds after its start.
type step struct{ a0, slope, v0, d0 float64 }

func (s step) velocity(x float64) float64 { return s.v0 + x*(s.a0+x*s.slope/2) }

func (s step) displacement(x float64) float64 {
	return s.d0 + x*(s.v0+x*(s.a0/2+x*s.slope/6))
}

// energy is int a² dt over the first x seconds.
func (s step) energy(x float64) float64 {
	return x * (s.a0*s.a0 + x*(s.a0*s.slope+x*s.slope*s.slope/3))
}

// absolute is int |a| dt over the first x seconds.
func (s step) absolute(x float64) float64 {
	if z := s.rest(); z > 0 && z < x {
		return math.Abs(s.a0)*z/2 + math.Abs(s.slope)*(x-z)*(x-z)/2
	}
	return math.Abs(s.a0+s.slope*x/2) * x
}

// rest is where the acceleration vanishes, or -1.
func (s step) rest() float64 {
	if s.slope == 0 {
		return -1
	}
	return -s.a0 / s.slope
}

// still is where the velocity vanishes: the roots of v0 + a0 x + slope x²/2,
// in the form that does not cancel. Absent roots are -1.
func (s step) still() [2]float64 {
	disc := s.a0*s.a0 - 2*s.slope*s.v0
	if disc < 0 {
		return [2]float64{-1, -1}
	}
	q := -(s.a0 + math.Copysign(math.Sqrt(disc), s.a0))
	out := [2]float64{-1, -1}
	if q != 0 {
		out[0] = 2 * s.v0 / q
	}
	if s.slope != 0 {
		out[1] = q / s.slope
	}
	if out[0] > out[1] {
		out[0], out[1] = out[1], out[0]
	}
	return out
}
