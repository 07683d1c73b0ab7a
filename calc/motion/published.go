package motion

import (
	"math"

	"quoin/calc/cite"
	"quoin/calc/published"
)

// Published is the closed-form intensity measures and integrals, and the conditioning.
func Published() []published.Case {
	return append([]published.Case{sineBurst(), constant(), smoothPulse(), integration()}, treatments()...)
}

// sineBurst is ten cycles of 1 m/s² at 2 Hz.
func sineBurst() published.Case {
	const n = 2000 // steps a cycle
	flat := "the energy is flat to third order there: a time is known to the cube root of the rounding, some 5e-6"
	chord := "chords of the sine at 1/2000 of a cycle lose (2 pi/2000)²/12 = 8.2e-7, twice that in a²"
	return published.Case{
		ID: "sine-burst", Title: "Measures of a sine burst of ten whole cycles", Source: cite.To("Trifunac & Brady 1975", ""), Origin: published.Computed,
		Inputs: []published.Input{{Name: "A", Value: 1, Unit: "m/s²"}, {Name: "frequency", Value: 2, Unit: "Hz"}, {Name: "cycles", Value: 10}},
		Wants: []published.Want{
			{Name: "PGA", Value: 1, Unit: "m/s²", Tol: 1e-15, Why: "a sample lies on the peak"},
			{Name: "Arias", Value: 0.4004416204, Unit: "m/s", Rel: true, Tol: 1.7e-6, Why: chord},
			{Name: "CAV", Value: 3.183098862, Unit: "m/s", Rel: true, Tol: 8.3e-7, Why: chord},
			{Name: "PGV", Value: 0.1591549431, Unit: "m/s", Rel: true, Tol: 8.3e-7, Why: chord},
			{Name: "PGD", Value: 0.3978873577, Unit: "m", Rel: true, Tol: 8.3e-7, Why: chord},
			{Name: "t5", Value: 0.25, Unit: "s", Tol: 2e-5, Why: flat},
			{Name: "t75", Value: 3.75, Unit: "s", Tol: 2e-5, Why: flat},
			{Name: "t95", Value: 4.75, Unit: "s", Tol: 2e-5, Why: flat},
			{Name: "D5-75", Value: 3.5, Unit: "s", Tol: 2e-5, Why: flat},
			{Name: "D5-95", Value: 4.5, Unit: "s", Tol: 2e-5, Why: flat},
			{Name: "D5-75 of one cycle / its duration", Value: 0.620547082, Tol: 5e-7, Why: "a twentieth of the square of a step, by the chords"},
			{Name: "D5-95 of one cycle / its duration", Value: 0.741094164, Tol: 5e-7, Why: "a twentieth of the square of a step, by the chords"},
		},
		Compute: func() ([]float64, error) {
			r, err := Form("sine", FormParameters{Amplitude: 1, Period: 0.5, Cycles: 10, Step: 0.5 / n})
			if err != nil {
				return nil, err
			}
			one, err := Form("sine", FormParameters{Amplitude: 1, Period: 0.5, Cycles: 1, Step: 0.5 / n})
			if err != nil {
				return nil, err
			}
			m, m1 := Measure(r), Measure(one)
			return []float64{m.PGA, m.Arias, m.CAV, m.PGV, m.PGD, m.T5, m.T75, m.T95, m.D5to75, m.D5to95, m1.D5to75 / 0.5, m1.D5to95 / 0.5}, nil
		},
	}
}

// constant is |a| = A throughout.
func constant() published.Case {
	const why = "exact for straight lines"
	return published.Case{
		ID: "constant-acceleration", Title: "Measures of a constant acceleration", Source: cite.To("Arias 1970", ""), Origin: published.Computed,
		Inputs: []published.Input{{Name: "A", Value: 2, Unit: "m/s²"}, {Name: "duration", Value: 3, Unit: "s"}},
		Wants: []published.Want{
			{Name: "Arias", Value: math.Pi * 4 * 3 / (2 * 9.80665), Unit: "m/s", Tol: 1e-13, Why: why},
			{Name: "CAV", Value: 6, Unit: "m/s", Tol: 1e-13, Why: why},
			{Name: "D5-95", Value: 2.7, Unit: "s", Tol: 1e-13, Why: why},
			{Name: "PGV", Value: 6, Unit: "m/s", Tol: 1e-13, Why: why},
			{Name: "PGD", Value: 9, Unit: "m", Tol: 1e-13, Why: why},
		},
		Compute: func() ([]float64, error) {
			r, err := Form("pulse", FormParameters{Amplitude: -2, Duration: 3, Step: 0.125})
			if err != nil {
				return nil, err
			}
			m := Measure(r)
			return []float64{m.Arias, m.CAV, m.D5to95, m.PGV, m.PGD}, nil
		},
	}
}

// smoothPulse is the pulse that ends at rest, D = 0.1 m in 2 s.
func smoothPulse() published.Case {
	const why = "chords at 2 s/20000 lose (w h)²/12 of the component at 4 pi/s, 1.3e-7; twice that"
	return published.Case{
		ID: "smooth-pulse-measures", Title: "Measures of a smooth pulse that ends at rest", Source: cite.To("Arias 1970", ""), Origin: published.Computed,
		Inputs: []published.Input{{Name: "D", Value: 0.1, Unit: "m"}, {Name: "duration", Value: 2, Unit: "s"}},
		Wants: []published.Want{
			{Name: "PGA", Value: 0.9869604401, Unit: "m/s²", Tol: 1e-10, Why: "printed to 10 digits; a sample lies on the peak"},
			{Name: "time of PGA", Value: 1, Unit: "s", Tol: 1e-12, Why: "a sample lies on the peak"},
			{Name: "PGV", Value: 0.2040524285, Unit: "m/s", Rel: true, Tol: 2.6e-7, Why: why},
			{Name: "PGD", Value: 0.1, Unit: "m", Rel: true, Tol: 2.6e-7, Why: why},
			{Name: "Arias", Value: 0.07801330852, Unit: "m/s", Rel: true, Tol: 2.6e-7, Why: why},
			{Name: "CAV", Value: 0.8162097139, Unit: "m/s", Rel: true, Tol: 2.6e-7, Why: why},
		},
		Compute: func() ([]float64, error) {
			r, err := Form("smooth", FormParameters{Amplitude: 0.1 * math.Pi * math.Pi, Duration: 2, Step: 1e-4})
			if err != nil {
				return nil, err
			}
			m := Measure(r)
			return []float64{m.PGA, m.TimePGA, m.PGV, m.PGD, m.Arias, m.CAV}, nil
		},
	}
}

// integration is a = t over one second.
func integration() published.Case {
	return published.Case{
		ID: "integration-of-a-ramp", Title: "Velocity and displacement of a ramp", Source: cite.To("Nigam & Jennings 1969", "piecewise-linear motion"), Origin: published.Computed,
		Inputs: []published.Input{{Name: "step", Value: 0.1, Unit: "s"}},
		Wants: []published.Want{
			{Name: "v(1 s)", Value: 0.5, Unit: "m/s", Tol: 1e-15, Why: "exact for straight lines"},
			{Name: "d(1 s)", Value: 1.0 / 6, Unit: "m", Tol: 1e-15, Why: "exact for straight lines; the trapezoid rule twice would give 0.1675"},
		},
		Compute: func() ([]float64, error) {
			r, err := Form("ramp", FormParameters{Amplitude: 1, Rise: 1, Duration: 1, Step: 0.1})
			if err != nil {
				return nil, err
			}
			v, d := Integrate(r)
			return []float64{v[10], d[10]}, nil
		},
	}
}
