// Package spectrum is the elastic response spectrum of a record: period grids, the
// ordinates over a grid, exact ordinates at any period and damping, and the
// factors that carry a spectrum from one damping to another.
//
//	SD  = max|u|      relative displacement, m
//	SV  = max|u'|     relative velocity, m/s
//	SA  = max|2 z w u' + w² u|, total acceleration, m/s²
//	PSV = w SD,  PSA = w² SD,  w = 2 pi/T
//
// PSA is the pseudo-acceleration, equal to SA only without damping. As T goes to 0,
// PSA and SA tend to the peak ground acceleration; as T grows, SD tends to the peak
// ground displacement and SV to the peak ground velocity. Maxima are over
// continuous time, the free vibration after the record included.
package spectrum

import (
	"fmt"
	"math"
	"slices"

	"quoin/calc/motion"
	"quoin/calc/oscillator"
)

// Ordinates are the spectral values at one period and damping, SI.
type Ordinates struct {
	SD  float64 `json:"sd"`
	SV  float64 `json:"sv"`
	SA  float64 `json:"sa"`
	PSV float64 `json:"psv"`
	PSA float64 `json:"psa"`
}

// Spectrum is the response spectrum of a record over a grid of periods. Rows belong to
// Damping, columns to Periods.
type Spectrum struct {
	Record  *motion.Record `json:"record"` // kept to answer exactly at any period
	Periods []float64      `json:"periods"`
	Damping []float64      `json:"damping"`
	PGA     float64        `json:"pga"` // m/s²

	SD  [][]float64 `json:"sd"`
	SV  [][]float64 `json:"sv"`
	SA  [][]float64 `json:"sa"`
	PSV [][]float64 `json:"psv"`
	PSA [][]float64 `json:"psa"`

	// Warnings are doubts about the spectrum, not about the record itself.
	Warnings []motion.Warning `json:"warnings,omitempty"`
}

// New computes the spectrum of rec at periods (rising; 0, or from a millionth of the step to
// 1e6 s) and damping ratios (in [0, 1]). It returns an error for a record, a period or a damping
// that cannot be used.
func New(rec *motion.Record, periods, damping []float64) (*Spectrum, error) {
	if err := rec.Validate(); err != nil {
		return nil, err
	}
	if len(periods) == 0 || len(damping) == 0 {
		return nil, fmt.Errorf("a spectrum needs a period and a damping at least")
	}
	if !slices.IsSorted(periods) {
		return nil, fmt.Errorf("the periods of a spectrum must rise")
	}
	s := &Spectrum{Record: rec, Periods: slices.Clone(periods), Damping: slices.Clone(damping), PGA: peak(rec.A)}
	rows, err := compute(rec, periods, damping)
	if err != nil {
		return nil, err
	}
	for _, row := range rows {
		pick := func(f func(Ordinates) float64) []float64 {
			out := make([]float64, len(row))
			for i, o := range row {
				out[i] = f(o)
			}
			return out
		}
		s.SD = append(s.SD, pick(func(o Ordinates) float64 { return o.SD }))
		s.SV = append(s.SV, pick(func(o Ordinates) float64 { return o.SV }))
		s.SA = append(s.SA, pick(func(o Ordinates) float64 { return o.SA }))
		s.PSV = append(s.PSV, pick(func(o Ordinates) float64 { return o.PSV }))
		s.PSA = append(s.PSA, pick(func(o Ordinates) float64 { return o.PSA }))
	}
	s.Warnings = warnings(rec, s.Periods)
	return s, nil
}

// At is the exact response at a period T >= 0 (s) and a damping ratio in [0, 1],
// whether or not they are in the grid.
func (s *Spectrum) At(T, z float64) (Ordinates, error) { return At(s.Record, T, z) }

// At is the exact response to a record at one period and damping.
func At(rec *motion.Record, T, z float64) (Ordinates, error) {
	if err := rec.Validate(); err != nil {
		return Ordinates{}, err
	}
	rows, err := compute(rec, []float64{T}, []float64{z})
	if err != nil {
		return Ordinates{}, err
	}
	return rows[0][0], nil
}

// MaxPSA is the largest pseudo-acceleration of a damping row over the grid, and
// the period where it lies (the shortest of several).
func (s *Spectrum) MaxPSA(zIndex int) (value, T float64) {
	if zIndex < 0 || zIndex >= len(s.PSA) {
		panic(fmt.Sprintf("spectrum: damping row %d of %d", zIndex, len(s.PSA)))
	}
	value, T = s.PSA[zIndex][0], s.Periods[0]
	for i, x := range s.PSA[zIndex] {
		if x > value {
			value, T = x, s.Periods[i]
		}
	}
	return value, T
}

// compute is the ordinates by damping and period. The record is valid.
func compute(rec *motion.Record, periods, damping []float64) ([][]Ordinates, error) {
	var todo []oscillator.Oscillator
	for _, z := range damping {
		if !(z >= 0 && z <= 1) {
			return nil, fmt.Errorf("the damping ratio %v is outside 0 to 1", z)
		}
		for _, T := range periods {
			if !(T >= 0 && T <= maxPeriod) || T > 0 && T < minPeriod*rec.Step {
				return nil, fmt.Errorf("no response can be computed at the period %v s: it must be 0, or from %.4g to %g s", T, minPeriod*rec.Step, maxPeriod)
			}
			if T > 0 {
				todo = append(todo, oscillator.Oscillator{Period: T, Damping: z})
			}
		}
	}
	peaks := oscillator.Run(rec.A, rec.Step, todo)
	rows := make([][]Ordinates, len(damping))
	for i := range damping {
		for _, T := range periods {
			if T == 0 {
				pga := peak(rec.A)
				rows[i] = append(rows[i], Ordinates{SA: pga, PSA: pga})
				continue
			}
			p := peaks[0]
			peaks = peaks[1:]
			w := 2 * math.Pi / T
			o := Ordinates{SD: p.U, SV: p.V, SA: p.A, PSV: w * p.U, PSA: w * w * p.U}
			if !finite(o.SD + o.SV + o.SA + o.PSV + o.PSA) {
				return nil, fmt.Errorf("the response at the period %v s is not a finite number", T)
			}
			rows[i] = append(rows[i], o)
		}
	}
	return rows, nil
}

// minPeriod is the shortest period other than 0, in steps of the record: below it
// the oscillator follows the ground to nine digits and the work grows without end.
const minPeriod = 1e-6

// maxPeriod is the longest period, s.
const maxPeriod = 1e6

func peak(a []float64) (p float64) {
	for _, x := range a {
		p = max(p, math.Abs(x))
	}
	return p
}
