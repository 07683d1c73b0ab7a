package spectrum

import (
	"quoin/calc/motion"
)

// Housner is the spectrum intensity of a record [Housner 1952], the integral of
// PSV at a damping ratio z over periods from 0.1 to 2.5 s, in m.
//
// The rule is the composite trapezoid on 240 intervals of 0.01 s. A response
// spectrum has kinks, where the governing peak changes; Simpson's rule would gain
// nothing there. It returns an error for a damping outside [0, 1] and an invalid record.
func Housner(rec *motion.Record, z float64) (float64, error) {
	if err := rec.Validate(); err != nil {
		return 0, err
	}
	rows, err := compute(rec, housnerPeriods(), []float64{z})
	if err != nil {
		return 0, err
	}
	psv := make([]float64, len(rows[0]))
	for i, o := range rows[0] {
		psv[i] = o.PSV
	}
	return trapezoid(psv, housnerStep), nil
}

const (
	housnerStep      = 0.01 // s
	housnerIntervals = 240
)

func housnerPeriods() []float64 {
	periods := make([]float64, housnerIntervals+1)
	for i := range periods {
		periods[i] = 0.1 + housnerStep*float64(i)
	}
	return periods
}

// trapezoid is the integral of values at a constant spacing.
func trapezoid(y []float64, h float64) (sum float64) {
	for i := 1; i < len(y); i++ {
		sum += h * (y[i-1] + y[i]) / 2
	}
	return sum
}
