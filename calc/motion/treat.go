package motion

import (
	"fmt"
	"math"
	"math/cmplx"
	"slices"
)

// Treatment is one step in the conditioning of a record: [Baseline], [Taper],
// [Bandpass] or [Resample]. Each is linear in the acceleration and leaves the
// record that it is given as it was.
type Treatment interface {
	// Apply gives the record after the step, and the relative residual of an
	// independent check of what was done, with the most that it may be. The error
	// is a *Misfit where a parameter does not fit the record.
	Apply(r *Record) (*Record, Residual, error)
	// String says in words what the step does, units included.
	String() string
}

// Residual is how well a step agrees with an independent calculation.
type Residual struct {
	What  string // what was compared; "" where there is nothing to compare
	Value float64
	Limit float64
}

// Misfit is a parameter of a treatment that does not fit the record.
type Misfit struct {
	Parameter string // name of the parameter: "from"
	Text      string // one line, no full stop
	Hint      string // what to do; may be empty
}

func (m *Misfit) Error() string { return m.Text }

func misfit(parameter, hint, format string, args ...any) *Misfit {
	return &Misfit{Parameter: parameter, Hint: hint, Text: fmt.Sprintf(format, args...)}
}

// MaxSamples is the most that a record may have when it is used: an hour at 200
// samples a second and more. A longer file is read and can be cut to a window.
const MaxSamples = 1 << 20

// with is the record after a step: other samples, and the step added to its story.
func (r *Record) with(a []float64, t Treatment) *Record {
	out := *r
	out.A = a
	out.Origin.Treatment = append(slices.Clone(r.Origin.Treatment), t.String())
	return &out
}

// Taper multiplies the ends of a record by half a cosine wave,
//
//	w = (1 - cos(pi t/Start))/2 for t < Start,
//
// likewise before the end. The first sample becomes zero where Start is positive, the last where End is.
type Taper struct {
	Start, End float64 // s, not negative; together no longer than the record
}

func (p Taper) String() string {
	return fmt.Sprintf("cosine taper over %.12g s at the start and %.12g s at the end", p.Start, p.End)
}

// Apply tapers a record. It panics on a negative length.
func (p Taper) Apply(r *Record) (*Record, Residual, error) {
	if !(p.Start >= 0 && p.End >= 0) {
		panic("motion: a taper of negative length")
	}
	if d := r.Duration(); p.Start+p.End > d*(1+1e-12) {
		at := "start"
		if p.End > p.Start {
			at = "end"
		}
		return nil, Residual{}, misfit(at, "both together may be as long as the record", "the tapers of %.6g s and %.6g s are longer than the record, %.6g s", p.Start, p.End, d)
	}
	a := slices.Clone(r.A)
	n := len(a) - 1
	for i := range a {
		if t := r.Time(i); t < p.Start {
			a[i] *= halfCosine(t / p.Start)
		}
		if t := r.Time(n - i); t < p.End {
			a[i] *= halfCosine(t / p.End)
		}
	}
	return r.with(a, p), Residual{}, nil
}

// halfCosine rises from 0 to 1 as x does.
func halfCosine(x float64) float64 {
	s := sinpi(x / 2)
	return s * s
}

// transform is the Fourier integral of samples at times (i - lead) step, at frequency f
// in Hz: step times the sum of a exp(-2 pi i f t).
func transform(a []float64, step float64, lead int, f float64) complex128 {
	turn := cmplx.Rect(1, -2*math.Pi*f*step)
	var sum, e complex128
	for i, x := range a {
		if i%64 == 0 { // anew, so that no error gathers
			e = cmplx.Rect(1, -2*math.Pi*math.Mod(f*step*float64(i-lead), 1))
		}
		sum += complex(x, 0) * e
		e *= turn
	}
	return sum * complex(step, 0)
}

// gainError compares the Fourier integrals of samples before and after a step that
// has a known real gain and no phase: the largest difference over some
// frequencies, relative to the largest value before.
func gainError(before []float64, step float64, after []float64, stepAfter float64, lead int, frequencies []float64, gain func(f float64) float64) float64 {
	worst, most := 0.0, 0.0
	for _, f := range frequencies {
		x := transform(before, step, 0, f)
		y := transform(after, stepAfter, lead, f)
		most = max(most, cmplx.Abs(x))
		worst = max(worst, cmplx.Abs(y-complex(gain(f), 0)*x))
	}
	if most == 0 {
		return worst
	}
	return worst / most
}
