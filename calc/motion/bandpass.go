package motion

import (
	"fmt"
	"math"
)

// Bandpass is a zero-phase Butterworth filter: a high-pass of corner From and a
// low-pass of corner To, one after the other, each of the order given, run
// forward and then backward in time. The gain of the two passes is |H|², a real
// number: nothing is shifted in time. The record counts as zero outside itself, and the
// filter is carried on there until it has died away.
//
// The answer begins before the record and goes on after it. Pad is how much of
// that is kept at each end; without it velocity and displacement from rest would
// miss what the filter moved there [Converse & Brady 1992; Boore 2005].
type Bandpass struct {
	From, To float64 // corners, Hz; 0 for none, at least one
	Order    int     // of one pass, 1 to MaxFilterOrder
	// CornerGain is the gain of both passes together at a corner: 0.5 (−6 dB), as
	// each pass has its half-power point there, or sqrt(1/2) (-3 dB), for which
	// the corners of a pass are moved apart. 0 is 0.5.
	CornerGain float64
	// Pad kept at each end, s; negative for half of [PadTotal].
	Pad float64
}

// MaxFilterOrder bounds the order of one pass.
const MaxFilterOrder = 12

// maxWork bounds the samples filtered, those outside the record included.
const maxWork = 1 << 24

// HalfPower is the CornerGain of -3 dB for both passes together.
const HalfPower = math.Sqrt2 / 2

// PadTotal is the length of zeros that a filter wants, both ends together:
// 1.5 n/f seconds, with n the order over all passes and f the lowest corner, Hz
// [Converse & Brady 1992].
func PadTotal(order int, corner float64) float64 { return 1.5 * float64(order) / corner }

// TwoPassShift is the factor on the corner of a low-pass of order n that makes two
// passes lose 3 dB where one pass did: corner/TwoPassShift(n). A high-pass is multiplied by it.
func TwoPassShift(order int) float64 { return math.Pow(math.Sqrt2-1, 1/float64(2*order)) }

// UsableFactor parts a corner from the usable band: filtered motion is taken as reliable
// from 1.25 times the lower corner to the upper corner over 1.25.
const UsableFactor = 1.25

func (p Bandpass) String() string {
	words := ""
	switch {
	case p.From > 0 && p.To > 0:
		words = fmt.Sprintf("band-pass %.12g to %.12g Hz", p.From, p.To)
	case p.From > 0:
		words = fmt.Sprintf("high-pass %.12g Hz", p.From)
	default:
		words = fmt.Sprintf("low-pass %.12g Hz", p.To)
	}
	gain := "0.5 (−6 dB)"
	if p.CornerGain == HalfPower {
		gain = "0.707 (−3 dB)"
	}
	return fmt.Sprintf("zero-phase Butterworth %s, order %d run forward and backward, gain of both passes %s at a corner, %.12g s of pad kept at each end", words, p.Order, gain, p.PadLength())
}

// PadLength is the pad kept at each end, s.
func (p Bandpass) PadLength() float64 {
	if p.Pad >= 0 {
		return p.Pad
	}
	corner := p.From
	if corner == 0 {
		corner = p.To
	}
	return PadTotal(2*p.Order, corner) / 2
}

// corners are the warped corners of one pass at a step, 0 for none.
func (p Bandpass) corners(step float64) (low, high float64) {
	shift := 1.0
	if p.CornerGain == HalfPower {
		shift = TwoPassShift(p.Order)
	}
	if p.From > 0 {
		low = math.Tan(math.Pi*p.From*step) * shift
	}
	if p.To > 0 {
		high = math.Tan(math.Pi*p.To*step) / shift
	}
	return low, high
}

// Gain is the gain of both passes together at frequency f, Hz, for samples at a
// step in s: between 0 and 1. f lies within 0 and 1/(2 step).
func (p Bandpass) Gain(f, step float64) float64 {
	low, high := p.corners(step)
	x := math.Tan(math.Pi * f * step)
	gain := 1.0
	if low > 0 {
		gain /= 1 + math.Pow(low/x, float64(2*p.Order))
	}
	if high > 0 {
		gain /= 1 + math.Pow(x/high, float64(2*p.Order))
	}
	return gain
}

// check refuses what is no filter for a step.
func (p Bandpass) check(r *Record) *Misfit {
	nyquist := 1 / (2 * r.Step)
	switch {
	case p.CornerGain != 0 && p.CornerGain != 0.5 && p.CornerGain != HalfPower || !(p.From >= 0 && p.To >= 0):
		panic("motion: a filter of negative corner or unknown gain")
	case p.From == 0 && p.To == 0:
		return misfit("from", "give from (removes what lies below it), to (removes what lies above it), or both", "a filter needs a corner frequency")
	case p.Order < 1 || p.Order > MaxFilterOrder:
		return misfit("order", "", "the order of a filter is a whole number from 1 to %d, not %d", MaxFilterOrder, p.Order)
	case p.To >= nyquist:
		return misfit("to", "leave the upper corner out if nothing is to be removed there", "the upper corner of %.6g Hz is not below the Nyquist frequency of %.6g Hz, half the sampling rate", p.To, nyquist)
	case p.From >= nyquist:
		return misfit("from", "", "the lower corner of %.6g Hz is not below the Nyquist frequency of %.6g Hz, half the sampling rate", p.From, nyquist)
	case p.To > 0 && p.From >= p.To:
		return misfit("from", "from is the lower corner, to the upper one", "the lower corner of %.6g Hz is not below the upper corner of %.6g Hz", p.From, p.To)
	}
	return nil
}

// Apply filters a record. It panics on negative corners and an unknown corner gain.
func (p Bandpass) Apply(r *Record) (*Record, Residual, error) {
	if m := p.check(r); m != nil {
		return nil, Residual{}, m
	}
	low, high := p.corners(r.Step)
	var all []section
	if low > 0 {
		all = append(all, sections(p.Order, low, true)...)
	}
	if high > 0 {
		all = append(all, sections(p.Order, high, false)...)
	}
	settle := 0.0
	for _, s := range all {
		settle = max(settle, s.settle())
	}
	n := len(r.A)
	pad := math.Ceil(p.PadLength()/r.Step - snap)
	if float64(n)+2*pad > MaxSamples {
		return nil, Residual{}, misfit("pad", "a higher corner needs a shorter pad; pad: 0 s keeps none", "with %.6g s of pad at each end the record has more than %d samples", p.PadLength(), MaxSamples)
	}
	settle = max(settle, pad)
	if float64(n)+2*settle > maxWork {
		return nil, Residual{}, misfit("from", "the lower corner is far below what a record of this length holds", "the corner of %.3g Hz is too low for a step of %.6g s: the filter would run over more than %d samples", max(p.From, 0), r.Step, maxWork)
	}
	lead := int(settle)
	work := make([]float64, n+2*lead)
	copy(work[lead:], r.A)
	run(all, work[lead:], false)
	run(all, work, true)
	a := make([]float64, n+2*int(pad))
	copy(a, work[lead-int(pad):])

	out := r.with(a, p)
	out.Origin.Lead += pad * r.Step
	if p.From > 0 {
		out.Origin.Corners[0] = max(r.Origin.Corners[0], p.From)
		out.Origin.UsablePeriod = shorter(r.Origin.UsablePeriod, 1/(UsableFactor*p.From))
	}
	if p.To > 0 {
		out.Origin.Corners[1] = shorter(r.Origin.Corners[1], p.To)
		out.Origin.ShortestPeriod = max(r.Origin.ShortestPeriod, UsableFactor/p.To)
	}
	residual := gainError(r.A, r.Step, work, r.Step, lead, p.probes(), func(f float64) float64 { return p.Gain(f, r.Step) })
	return out, Residual{What: "Fourier sums before and after, at the corners and in the band, differ from the analytic gain without phase by", Value: residual, Limit: 1e-8}, nil
}

// probes are the frequencies at which the filter is checked.
func (p Bandpass) probes() []float64 {
	switch {
	case p.To == 0:
		return []float64{p.From / 2, p.From, math.Min(2*p.From, p.From+1)}
	case p.From == 0:
		return []float64{p.To / 2, p.To / 1.2, p.To}
	}
	return []float64{p.From, math.Sqrt(p.From * p.To), p.To}
}

// shorter is the shorter of two periods, where 0 is none.
func shorter(a, b float64) float64 {
	if a == 0 {
		return b
	}
	return min(a, b)
}
