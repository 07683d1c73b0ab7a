package motion

import (
	"fmt"
	"math"
)

// Resample puts a record on another step, by band-limited interpolation: the sum
// of sin(pi u)/(pi u) about every sample, under a Kaiser window 64 zeros long to each
// side whose stop band lies 120 dB down [Kaiser 1974]. The record counts as zero outside itself.
//
// To a finer step the band up to 0.94 of the old Nyquist frequency is kept as it is,
// and samples that coincide keep their value where the old step is a whole
// multiple of the new. To a coarser step the sum is the low-pass that must
// precede it: it keeps the band up to 0.88 of the new Nyquist frequency and removes all
// above that frequency. The new record ends with the last sample that is not after the old one's end.
type Resample struct {
	Step float64 // the new one, s, positive
}

const (
	sincZeros  = 64    // zeros of the sine to each side
	kaiserBeta = 12.26 // 0.1102 (A - 8.7), A = 120 dB
	// transition is half of the width of the transition relative to its middle:
	// (A - 7.95)/(2.285 pi 2 sincZeros)/2
	transition = 0.061
	// CoarseBand is the part of the new Nyquist frequency that is kept at a coarser step.
	CoarseBand = (1 - transition) / (1 + transition)
	fineBand   = 1 - transition
	coarsest   = 1000 // new steps over old
)

func (p Resample) String() string {
	return fmt.Sprintf("resampled to a step of %.12g s by band-limited interpolation (sine cardinal, 64 zeros to each side, Kaiser window)", p.Step)
}

// Apply resamples a record. It panics on a step that is not positive.
func (p Resample) Apply(r *Record) (*Record, Residual, error) {
	if !(p.Step > 0) {
		panic("motion: a step that is not positive")
	}
	if p.Step < shortestStep || p.Step > longestStep {
		return nil, Residual{}, misfit("step", "", "a step of %.4g s cannot be that of a record (from %g to %g s)", p.Step, shortestStep, longestStep)
	}
	ratio := p.Step / r.Step
	last := math.Floor(float64(len(r.A)-1)/ratio + snap)
	if last < 1 {
		return nil, Residual{}, misfit("step", "", "a step of %.6g s leaves fewer than two samples of a record of %.6g s", p.Step, r.Duration())
	}
	if last >= MaxSamples {
		return nil, Residual{}, misfit("step", "", "at a step of %.6g s the record has more than %d samples", p.Step, MaxSamples)
	}
	if ratio > coarsest {
		return nil, Residual{}, misfit("step", "", "a step of %.6g s is more than %d times that of the record, %.6g s", p.Step, coarsest, r.Step)
	}
	k := newKernel(ratio)
	lead := int(math.Ceil(k.reach/ratio)) + 1
	all := make([]float64, int(last)+1+2*lead)
	for j := range all {
		all[j] = k.sum(r.A, j-lead)
	}
	a := make([]float64, int(last)+1)
	copy(a, all[lead:])
	out := r.with(a, p)
	out.Step = p.Step
	band := fineBand / (2 * r.Step)
	if ratio > 1 {
		band = CoarseBand / (2 * p.Step)
		out.Origin.ShortestPeriod = max(r.Origin.ShortestPeriod, 1/band)
	}
	residual := gainError(r.A, r.Step, all, p.Step, lead, []float64{0, band / 10, band / 2, 0.99 * band}, func(float64) float64 { return 1 })
	return out, Residual{What: "Fourier sums before and after, within the band kept, differ by", Value: residual, Limit: 1e-5}, nil
}

// kernel is the windowed sine cardinal of one ratio of steps. Its weights are computed once
// for each phase, the place of a new sample between two old ones.
type kernel struct {
	ratio  float64 // new step over old step
	cut    float64 // cutoff over the old Nyquist frequency
	reach  float64 // old samples to each side
	p, q   int     // ratio = p/q exactly; p = 0 where it is no simple fraction
	phases [][]float64
}

// maxPhases is the number of phases kept for a kernel that is not stretched. Between
// phases so near to each other a straight line is off by (pi/4096)²/24 = 2e-8.
const maxPhases = 4096

func newKernel(ratio float64) *kernel {
	k := &kernel{ratio: ratio, cut: 1}
	if ratio > 1 {
		k.cut = 1 / (ratio * (1 + transition))
	}
	k.reach = sincZeros / k.cut
	most := max(int(maxPhases*k.cut), 1)
	k.p, k.q = fraction(ratio, most)
	if k.p == 0 {
		k.q = most
	}
	k.phases = make([][]float64, k.q+1)
	return k
}

// sum is the new sample j. The old sample i lies at i old steps.
func (k *kernel) sum(a []float64, j int) float64 {
	if k.p > 0 {
		whole := j * k.p / k.q
		phase := j*k.p - whole*k.q
		if phase < 0 {
			whole, phase = whole-1, phase+k.q
		}
		return k.about(a, whole, phase)
	}
	at := float64(j) * k.ratio
	whole := math.Floor(at)
	phase, part := math.Modf((at - whole) * float64(k.q))
	return (1-part)*k.about(a, int(whole), int(phase)) + part*k.about(a, int(whole), int(phase)+1)
}

// about is the sum about old sample number whole and a phase of phases after it.
func (k *kernel) about(a []float64, whole, phase int) float64 {
	side := int(k.reach)
	weights := k.phases[phase]
	if weights == nil {
		weights = make([]float64, 2*side+2)
		for i := range weights { // of sample whole - side + i
			weights[i] = k.weight(float64(phase)/float64(k.q) + float64(side-i))
		}
		k.phases[phase] = weights
	}
	first := whole - side
	lo, hi := max(0, -first), min(len(weights), len(a)-first)
	if lo >= hi {
		return 0
	}
	return dot(weights[lo:hi], a[first+lo:first+hi])
}

// weight is the kernel u old steps from its middle.
func (k *kernel) weight(u float64) float64 {
	x := u / k.reach
	if math.Abs(x) >= 1 {
		return 0
	}
	w := bessel0(kaiserBeta*math.Sqrt(1-x*x)) / bessel0(kaiserBeta)
	if u *= k.cut; u != 0 {
		w *= sinpi(u) / (math.Pi * u)
	}
	return k.cut * w
}

// bessel0 is the modified Bessel function of order zero, by its power series: all
// terms are positive, none is lost.
func bessel0(x float64) float64 {
	sum, term := 1.0, 1.0
	for i := 1.0; term > 1e-17*sum; i++ {
		term *= x * x / (4 * i * i)
		sum += term
	}
	return sum
}

// fraction finds the whole numbers with p/q = x, to rounding, by continued
// fractions; p is 0 where q would be more than most.
func fraction(x float64, most int) (p, q int) {
	p0, q0, p1, q1 := 1.0, 0.0, math.Floor(x), 1.0
	rest := x - math.Floor(x)
	for range 40 {
		if q1 <= float64(most) && math.Abs(x-p1/q1) <= 4e-15*x {
			return int(p1), int(q1)
		}
		if rest == 0 {
			break
		}
		t := 1 / rest
		n := math.Floor(t)
		rest = t - n
		p0, q0, p1, q1 = p1, q1, n*p1+p0, n*q1+q0
		if q1 > float64(most) || p1 > 1e9 {
			break
		}
	}
	return 0, 0
}

// Lost is the share of the energy of before, the integral of a², that after does not
// hold; 0 where before is at rest. Both are read as band-limited: by Parseval the
// integral is the sum of a² over the samples times the step.
func Lost(before, after *Record) float64 {
	energy := func(r *Record) (sum float64) {
		for _, a := range r.A {
			sum += a * a * r.Step
		}
		return sum
	}
	all := energy(before)
	if all == 0 {
		return 0
	}
	return 1 - energy(after)/all
}
