package motion

import (
	"math"

	"gonum.org/v1/gonum/dsp/fourier"
)

// perOctave is the number of bands of [Amplitude] in an octave.
const perOctave = 12

// Amplitude is the Fourier amplitude of a record, |step sum of a exp(-2 pi i f t)| in m/s,
// as the root mean square over bands of a twelfth of an octave: frequencies are the middles of
// the bands, Hz, from that of one wave over the record to the Nyquist frequency. Bands
// narrower than the spacing of the transform are left out.
func Amplitude(r *Record) (frequency, amplitude []float64) {
	n := 1
	for n < len(r.A) {
		n *= 2
	}
	padded := make([]float64, n)
	copy(padded, r.A)
	line := 1 / (float64(n) * r.Step) // spacing of the transform, Hz
	c := fourier.NewFFT(n).Coefficients(nil, padded)
	first := int(math.Ceil(perOctave * math.Log2(1/(r.Duration()))))
	last := int(math.Floor(perOctave * math.Log2(1/(2*r.Step))))
	for b := first; b <= last; b++ {
		f := math.Exp2(float64(b) / perOctave)
		lo, hi := int(math.Ceil(f*math.Exp2(-0.5/perOctave)/line)), int(math.Ceil(f*math.Exp2(0.5/perOctave)/line))
		sum := 0.0
		for k := lo; k < min(hi, len(c)); k++ {
			sum += real(c[k])*real(c[k]) + imag(c[k])*imag(c[k])
		}
		if count := min(hi, len(c)) - lo; count > 0 && lo > 0 {
			frequency = append(frequency, f)
			amplitude = append(amplitude, r.Step*math.Sqrt(sum/float64(count)))
		}
	}
	return frequency, amplitude
}
