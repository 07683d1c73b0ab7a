package spectrum

import (
	"fmt"
	"math"

	"quoin/calc/cite"
	"quoin/calc/motion"
	"quoin/calc/published"
)

// Published is the complete exact spectrum of a smooth pulse with its limits, the
// amplification factors and the damping adjustments.
func Published() []published.Case {
	return append(smooth(), limits(), housner(), amplification(false), amplification(true), eta(), coefficient())
}

// pulse is 2 D w0² (cos 2 w0 t - cos 4 w0 t), D = 0.1 m over 2 s, at 20000 steps.
func pulse() (*motion.Record, error) {
	return motion.Form("smooth", motion.FormParameters{Amplitude: 0.1 * math.Pi * math.Pi, Duration: 2, Step: 1e-4})
}

// smoothRows is T, SD, PSV, PSA, SV, SA by damping.
var smoothRows = []struct {
	z    float64
	rows [][6]float64
}{
	{0, [][6]float64{
		{0.02, 1.0001e-5, 0.0031419068, 0.98705915, 4.3458673e-5, 0.98705915}, {0.1, 0.00025062657, 0.015747332, 0.98943403, 0.0011425734, 0.98943403},
		{0.2, 0.001010101, 0.031733259, 0.99692974, 0.0046375552, 0.99692974}, {0.5, 0.0066666667, 0.083775804, 1.0527578, 0.040810486, 1.0527578},
		{1, 0.080650441, 0.50674167, 3.1839518, 0.49348022, 3.1839518}, {2, 0.15707963, 0.49348022, 1.5503138, 0.49348022, 1.5503138},
		{5, 0.088453917, 0.11115447, 0.13968083, 0.29100946, 0.13968083}, {10, 0.096734649, 0.060780173, 0.038189309, 0.22887173, 0.038189309},
		{50, 0.099864142, 0.012549298, 0.0015769913, 0.2050852, 0.0015769913}}},
	{0.02, [][6]float64{
		{0.02, 1.0002496e-5, 0.0031423768, 0.98720679, 4.2992463e-5, 0.98720699}, {0.1, 0.00025130475, 0.015789943, 0.99211139, 0.0011068875, 0.99211551},
		{0.2, 0.0010174505, 0.03196415, 1.0041834, 0.004499261, 1.0041972}, {0.5, 0.0068512378, 0.086095193, 1.0819041, 0.039415499, 1.0819801},
		{1, 0.073642266, 0.462708, 2.9072801, 0.43617925, 2.9093102}, {2, 0.14312318, 0.44963473, 1.4125692, 0.46415474, 1.4137},
		{5, 0.086850964, 0.10914014, 0.13714955, 0.29003183, 0.13799613}, {10, 0.095862666, 0.060232289, 0.037845064, 0.22972325, 0.038631319},
		{50, 0.099676528, 0.012525722, 0.0015740286, 0.20536205, 0.0021261499}}},
	{0.05, [][6]float64{
		{0.02, 1.0002488e-5, 0.0031423744, 0.98720603, 4.298762e-5, 0.98720726}, {0.1, 0.00025152737, 0.015803931, 0.99299026, 0.0010889555, 0.99302056},
		{0.2, 0.0010224918, 0.032122528, 1.009159, 0.0044102594, 1.0092705}, {0.5, 0.0070497871, 0.088590237, 1.1132577, 0.037739104, 1.113893},
		{1, 0.064667806, 0.40631981, 2.5529827, 0.36541759, 2.5639236}, {2, 0.12501954, 0.39276048, 1.2338935, 0.42570026, 1.2400887},
		{5, 0.084767887, 0.10652247, 0.13386008, 0.28839007, 0.13877896}, {10, 0.09458258, 0.059427988, 0.037339706, 0.23088797, 0.041677284},
		{50, 0.099396389, 0.012490519, 0.0015696049, 0.2057717, 0.0035335008}}},
	{0.2, [][6]float64{
		{0.02, 1.0002301e-5, 0.0031423154, 0.98718751, 4.2986609e-5, 0.98720725}, {0.1, 0.00025144779, 0.015798931, 0.9926761, 0.0010822695, 0.9931733},
		{0.2, 0.0010236546, 0.032159058, 1.0103066, 0.0044276336, 1.0123398}, {0.5, 0.0072878164, 0.091581402, 1.1508458, 0.033608067, 1.1652836},
		{1, 0.041102117, 0.25825222, 1.6226465, 0.21971449, 1.7052659}, {2, 0.092577159, 0.29083972, 0.91369994, 0.30527512, 1.0197507},
		{5, 0.075609066, 0.095013155, 0.11939705, 0.27788908, 0.16833397}, {10, 0.088642613, 0.055695797, 0.034994701, 0.23492521, 0.069573268},
		{50, 0.098018317, 0.012317345, 0.0015478432, 0.20772103, 0.011005736}}},
}

func smooth() (cases []published.Case) {
	for _, group := range smoothRows {
		c := published.Case{ID: fmt.Sprintf("smooth-pulse-spectrum-%g", 100*group.z), Title: fmt.Sprintf("Exact response spectrum of a smooth pulse, %g %% damping", 100*group.z),
			Source: cite.To("Chopra", "ch. 6"), Origin: published.Computed,
			Inputs: []published.Input{{Name: "D", Value: 0.1, Unit: "m"}, {Name: "duration", Value: 2, Unit: "s"}, {Name: "damping", Value: group.z}}}
		for _, row := range group.rows {
			for i, name := range []string{"SD", "PSV", "PSA", "SV", "SA"} {
				w := published.Want{Name: fmt.Sprintf("%s(%g s)", name, row[0]), Value: row[i+1], Unit: []string{"m", "m/s", "m/s²", "m/s", "m/s²"}[i], Rel: true, Tol: 3e-7,
					Why: "printed to 8 digits; chords at 1/20000 of the pulse lose (w h)²/12 of the component at 4 pi/s, 1.3e-7"}
				if name == "SV" && row[0] < 0.15 {
					w.Tol, w.Why = 1e-6, "the kinks between chords set a stiff oscillator ringing: (h/T)²/24 = 1e-6 of its small velocity at T = 0.02 s"
				}
				c.Wants = append(c.Wants, w)
			}
		}
		c.Compute = func() (out []float64, err error) {
			r, err := pulse()
			if err != nil {
				return nil, err
			}
			for _, row := range group.rows {
				o, err := At(r, row[0], group.z)
				if err != nil {
					return nil, err
				}
				out = append(out, o.SD, o.PSV, o.PSA, o.SV, o.SA)
			}
			return out, nil
		}
		cases = append(cases, c)
	}
	return cases
}

// limits is PSA and SA as T goes to 0, SD and SV as it grows.
func limits() published.Case {
	return published.Case{ID: "spectrum-limits", Title: "Limits of a response spectrum", Source: cite.To("Chopra", "ch. 6"), Origin: published.Computed,
		Inputs: []published.Input{{Name: "damping", Value: 0.05}},
		Wants: []published.Want{
			{Name: "PSA(0)/PGA", Value: 1, Tol: 0, Why: "by definition"},
			{Name: "PSA(1 ms)/PGA", Value: 1, Tol: 1e-6, Why: "the deviation is of the order (4 pi T/2 pi)² = 4e-6 of the curvature at the peak"},
			{Name: "SA(1 ms)/PGA", Value: 1, Tol: 1e-6, Why: "as PSA"},
			{Name: "SD(1e5 s)/PGD", Value: 1, Tol: 1e-5, Why: "the deviation is of the order of z w td, 6e-6"},
			{Name: "SV(1e5 s)/PGV", Value: 1, Tol: 1e-5, Why: "as SD"},
		},
		Compute: func() ([]float64, error) {
			r, err := pulse()
			if err != nil {
				return nil, err
			}
			m := motion.Measure(r)
			var o [3]Ordinates
			for i, T := range []float64{0, 1e-3, 1e5} {
				if o[i], err = At(r, T, 0.05); err != nil {
					return nil, err
				}
			}
			return []float64{o[0].PSA / m.PGA, o[1].PSA / m.PGA, o[1].SA / m.PGA, o[2].SD / m.PGD, o[2].SV / m.PGV}, nil
		}}
}

// housner is the rule of integration on spectra with known integrals.
func housner() published.Case {
	integral := func(f func(T float64) float64) float64 {
		y := make([]float64, housnerIntervals+1)
		for i, T := range housnerPeriods() {
			y[i] = f(T)
		}
		return trapezoid(y, housnerStep)
	}
	return published.Case{ID: "spectrum-intensity", Title: "Spectrum intensity from 0.1 to 2.5 s of known spectra", Source: cite.To("Housner 1952", ""), Origin: published.Computed,
		Wants: []published.Want{
			{Name: "PSV = 1", Value: 2.4, Tol: 1e-12, Why: "exact for the trapezoid"},
			{Name: "PSV = T", Value: 3.12, Tol: 1e-12, Why: "exact for the trapezoid"},
			{Name: "PSV = sqrt T", Value: 2.614149532, Tol: 1.2e-5, Why: "the trapezoid loses h²/12 times the difference of the end slopes, 1.1e-5"},
			{Name: "PSA = 1", Value: 0.4965634224, Tol: 1e-10, Why: "exact for the trapezoid"},
			{Name: "PSA = 1/T", Value: 0.3819718634, Tol: 1e-10, Why: "exact for the trapezoid"},
		},
		Compute: func() ([]float64, error) {
			return []float64{
				integral(func(T float64) float64 { return 1 }), integral(func(T float64) float64 { return T }), integral(math.Sqrt),
				integral(func(T float64) float64 { return T / (2 * math.Pi) }), integral(func(T float64) float64 { return 1 / (2 * math.Pi) }),
			}, nil
		}}
}

// amplification is the printed table of factors.
func amplification(sigma bool) published.Case {
	c := published.Case{ID: "amplification-median", Title: "Amplification factors, median", Source: cite.To("Newmark & Hall 1982", ""), Origin: published.Memory}
	rows := [][4]float64{{0.5, 3.68, 2.59, 2.01}, {1, 3.21, 2.31, 1.82}, {2, 2.74, 2.03, 1.63}, {3, 2.46, 1.86, 1.52}, {5, 2.12, 1.65, 1.39}, {7, 1.89, 1.51, 1.29}, {10, 1.64, 1.37, 1.20}, {20, 1.17, 1.08, 1.01}}
	if sigma {
		c.ID, c.Title = "amplification-sigma", "Amplification factors, 84.1 percentile"
		rows = [][4]float64{{0.5, 5.10, 3.84, 3.04}, {1, 4.38, 3.38, 2.73}, {2, 3.66, 2.92, 2.42}, {3, 3.24, 2.64, 2.24}, {5, 2.71, 2.30, 2.01}, {7, 2.36, 2.08, 1.85}, {10, 1.99, 1.84, 1.69}, {20, 1.26, 1.37, 1.38}}
	}
	for _, r := range rows {
		for i, name := range []string{"A", "V", "D"} {
			c.Wants = append(c.Wants, published.Want{Name: fmt.Sprintf("%s at %g %%", name, r[0]), Value: r[i+1], Tol: 0.005 + 1e-9, Why: "printed to 2 decimals"})
		}
	}
	c.Compute = func() (out []float64, err error) {
		for _, r := range rows {
			a, err := NewmarkHall(r[0]/100, sigma)
			if err != nil {
				return nil, err
			}
			out = append(out, a.A, a.V, a.D)
		}
		return out, nil
	}
	return c
}

func eta() published.Case {
	c := published.Case{ID: "damping-correction-eta", Title: "Damping correction factor", Source: cite.To("EN 1998-1:2004", "3.2.2.2(3)"), Origin: published.Memory}
	rows := [][2]float64{{0.5, 1.34839972}, {1, 1.29099445}, {2, 1.19522861}, {3, 1.11803399}, {5, 1}, {7, 0.91287093}, {10, 0.81649658}, {15, 0.70710678}, {20, 0.63245553}, {25, 0.57735027}, {28.0578512, 0.55}, {40, 0.55}}
	for _, r := range rows {
		c.Wants = append(c.Wants, published.Want{Name: fmt.Sprintf("eta at %g %%", r[0]), Value: r[1], Tol: 6e-9, Why: "printed to 8 decimals"})
	}
	c.Compute = func() (out []float64, err error) {
		for _, r := range rows {
			x, err := Eta(r[0] / 100)
			if err != nil {
				return nil, err
			}
			out = append(out, x)
		}
		return out, nil
	}
	return c
}

func coefficient() published.Case {
	c := published.Case{ID: "damping-coefficient-b", Title: "Damping coefficients of damped and of isolated structures", Source: cite.To("ASCE/SEI 7-16", "Tables 18.7-1 and 17.5-1"), Origin: published.Memory}
	damped := [][2]float64{{1, 0.8}, {2, 0.8}, {3, 0.866667}, {5, 1}, {7, 1.08}, {10, 1.2}, {15, 1.35}, {20, 1.5}, {25, 1.65}, {30, 1.8}, {35, 1.95}, {40, 2.1}, {50, 2.4}, {60, 2.7}, {70, 3}, {80, 3.3}, {90, 3.6}, {100, 4}}
	isolated := [][2]float64{{2, 0.8}, {5, 1}, {10, 1.2}, {20, 1.5}, {25, 1.6}, {30, 1.7}, {35, 1.8}, {40, 1.9}, {50, 2}, {70, 2}}
	for _, r := range damped {
		c.Wants = append(c.Wants, published.Want{Name: fmt.Sprintf("B damped at %g %%", r[0]), Value: r[1], Tol: 4e-7, Why: "exact, printed to 6 decimals"})
	}
	for _, r := range isolated {
		c.Wants = append(c.Wants, published.Want{Name: fmt.Sprintf("B isolated at %g %%", r[0]), Value: r[1], Tol: 4e-7, Why: "exact, printed to 6 decimals"})
	}
	c.Compute = func() (out []float64, err error) {
		for _, r := range damped {
			b, err := DampedB(r[0] / 100)
			if err != nil {
				return nil, err
			}
			out = append(out, b)
		}
		for _, r := range isolated {
			b, err := IsolatedB(r[0] / 100)
			if err != nil {
				return nil, err
			}
			out = append(out, b)
		}
		return out, nil
	}
	return c
}
