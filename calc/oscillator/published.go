package oscillator

import (
	"fmt"
	"math"

	"quoin/calc/cite"
	"quoin/calc/motion"
	"quoin/calc/published"
)

// Published is the closed forms of the single oscillator. Loads per unit mass p stand
// for -ag, so that the peak displacement over A/w² is the dynamic load factor (DLF).
func Published() []published.Case {
	cases := []published.Case{coefficients(), textbook(), freeVibration(), steadyState(), underRead()}
	for _, c := range [][]published.Case{stepLoad(), shapes(), resonance(), harmonic()} {
		cases = append(cases, c...)
	}
	return cases
}

const digits10 = "printed to 10 digits"

// stepLoad is A held for one period: the first peak comes within it and the free
// vibration afterwards stays below.
func stepLoad() (cases []published.Case) {
	for _, row := range [][3]float64{
		{0, 2, 0.5}, {0.01, 1.969070904, 0.5000250019}, {0.02, 1.939089563, 0.50010003}, {0.05, 1.854467893, 0.5006261743},
		{0.1, 1.729247614, 0.5025189076}, {0.2, 1.526620599, 0.5103103631}, {0.5, 1.163033535, 0.5773502692},
	} {
		z := row[0]
		cases = append(cases, published.Case{
			ID: fmt.Sprintf("step-load-%g", 100*z), Title: fmt.Sprintf("Suddenly applied constant load, %g %% damping", 100*z),
			Source: cite.To("Chopra", "ch. 4"), Origin: published.Computed,
			Inputs: []published.Input{{Name: "damping", Value: z}},
			Wants: []published.Want{
				{Name: "peak DLF", Value: row[1], Tol: 1e-9, Why: digits10},
				{Name: "time of peak / T", Value: row[2], Tol: 1e-8, Why: "printed to 8 to 10 digits; the time of a flat peak is known to the root of the rounding"},
			},
			Compute: func() ([]float64, error) {
				p, err := dlf("pulse", motion.FormParameters{Amplitude: 1, Duration: 1, Step: 0.05}, 1, z)
				return []float64{p.U, p.TU}, err
			},
		})
	}
	return cases
}

// dlf is the peaks under a form of amplitude 1, u over A/w², times over T.
func dlf(kind string, f motion.FormParameters, T, z float64) (Peaks, error) {
	r, err := motion.Form(kind, f)
	if err != nil {
		return Peaks{}, err
	}
	p := Run(r.A, r.Step, []Oscillator{{T, z}})[0]
	w := 2 * math.Pi / T
	p.U *= w * w
	p.TU /= T
	return p, nil
}

// shapes is the undamped response to pulses of duration td (rise time for the ramp).
func shapes() (cases []published.Case) {
	for _, s := range []struct {
		id, title, clause, kind string
		steps                   int // in the duration
		tol                     float64
		why                     string
		rows                    [][2]float64 // td/T, DLF
	}{
		{"ramp", "Ramp to a constant load", "sec. 4.5", "ramp", 60, 1e-9, digits10 + "; exact on samples", [][2]float64{
			{0.1, 1.983631643}, {0.2, 1.935489284}, {0.25, 1.900316316}, {0.5, 1.636619772}, {0.75, 1.300105439},
			{1, 1}, {1.25, 1.180063263}, {1.5, 1.212206591}, {2, 1}, {2.5, 1.127323954}}},
		{"rectangular", "Rectangular pulse", "ch. 4", "pulse", 7, 1e-9, digits10 + "; exact on samples", [][2]float64{
			{0.05, 0.3128689301}, {0.1, 0.6180339887}, {1.0 / 6, 1}, {0.2, 1.175570505}, {0.25, 1.414213562}, {0.3, 1.618033989}, {0.4, 1.902113033}, {0.5, 2}, {0.8, 2}, {3.3, 2}}},
		{"half-sine", "Half-sine pulse", "sec. 4.8", "half_sine", 20000, 1e-8, "printed to 10 digits; chords of the sine at td/20000 lose (pi/20000)²/12 = 2e-9", [][2]float64{
			{0.05, 0.1995329981}, {0.1, 0.3962735485}, {0.2, 0.7704923756}, {0.25, 0.9428090416}, {0.3, 1.102097348}, {0.4, 1.373408864}, {0.5, 1.570796327}, {0.6, 1.690395341}, {0.7, 1.75}, {0.75, 1.763355757},
			{0.8, 1.768327089}, {0.809936785851495, 1.76845765399367}, {0.9, 1.759120836}, {1, 1.732050808}, {1.25, 1.624879854}, {1.5, 1.5}, {2, 1.268075355}, {2.5, 1.082531755}, {3, 1.169913495}, {4, 1.125494575}, {5, 1.099801602}}},
		{"blast", "Load falling linearly from a sudden peak", "ch. 4", "blast", 11, 1e-9, digits10 + "; exact on samples", [][2]float64{
			{0.05, 0.156649462}, {0.1, 0.3107292096}, {0.2, 0.6012376758}, {0.3, 0.8530752748}, {0.4, 1.051347000}, {0.5, 1.196186524}, {0.75, 1.422080101}, {1, 1.550239228}, {1.5, 1.689098558}, {2, 1.762638515}, {3, 1.838957016}, {5, 1.902025740}, {10, 1.950506563}}},
		{"triangle", "Symmetric triangular pulse", "sec. 4.9", "triangle", 10, 1e-9, digits10 + "; exact on samples", [][2]float64{
			{0.1, 0.3115838946}, {0.25, 0.7458464572}, {0.5, 4 / math.Pi}, {0.75, 1.489061489}, {0.9, 1.517155688}, {1, 1.508489764}, {1.25, 1.423559619}, {1.5, 1.287858005}, {2, 1}, {2.5, 1.054647909}, {3, 1.169496588}}},
	} {
		c := published.Case{ID: "shape-" + s.id, Title: s.title + ", undamped", Source: cite.To("Chopra", s.clause), Origin: published.Computed}
		for _, row := range s.rows {
			name := "td/T"
			if s.kind == "ramp" {
				name = "tr/T"
			}
			c.Inputs = append(c.Inputs, published.Input{Name: name, Value: row[0]})
			c.Wants = append(c.Wants, published.Want{Name: fmt.Sprintf("DLF at %s = %.4g", name, row[0]), Value: row[1], Tol: s.tol, Why: s.why})
		}
		c.Compute = func() ([]float64, error) {
			var out []float64
			for _, row := range s.rows {
				f := motion.FormParameters{Amplitude: 1, Duration: row[0], Step: row[0] / float64(s.steps)}
				if s.kind == "ramp" {
					f.Rise, f.Duration, f.Step = row[0], 6*row[0], row[0]/float64(s.steps)
					f.Duration += row[0] * math.Ceil(1/row[0]) // a whole period at the top at least
				}
				p, err := dlf(s.kind, f, 1, 0)
				if err != nil {
					return nil, err
				}
				out = append(out, p.U)
			}
			return out, nil
		}
		cases = append(cases, c)
	}
	return cases
}

// coefficients is the table of the exact recurrence, unit mass.
func coefficients() published.Case {
	c := published.Case{ID: "piecewise-linear-coefficients", Title: "Coefficients of the exact recurrence for a piecewise-linear load", Source: cite.To("Nigam & Jennings 1969", ""), Origin: published.Computed}
	rows := []struct {
		T, z, h float64
		want    [8]float64
	}{
		{1, 0.05, 0.02, [8]float64{0.992147619, 0.0198225939088, 1.3249778021e-4, 6.6405354135e-5, -0.782564640335, 0.97969271592, 0.00987743719159, 0.00994515671725}},
		{0.5, 0.05, 0.01, [8]float64{0.992147619, 0.00991129695442, 3.31244450525e-5, 1.66013385338e-5, -1.56512928067, 0.97969271592, 0.00493871859579, 0.00497257835863}},
		{0.1, 0.02, 0.02, [8]float64{0.320131671266, 0.0147625995379, 1.11361906921e-4, 6.085075255e-5, -58.2804069483, 0.283029211861, 0.00615196656437, 0.00861063297353}},
		{5, 0.05, 0.005, [8]float64{0.99998026499, 0.00499839664433, 8.33133727685e-6, 4.16600402749e-6, -0.00789315160308, 0.999352147943, 0.00249892838346, 0.00249946826087}},
	}
	for _, row := range rows {
		for i, name := range []string{"A", "B", "C", "D", "A'", "B'", "C'", "D'"} {
			c.Wants = append(c.Wants, published.Want{Name: fmt.Sprintf("%s at T = %g s, h = %g s", name, row.T, row.h), Value: row.want[i], Tol: 1e-11, Rel: true, Why: "printed to 11 or 12 digits"})
		}
	}
	c.Compute = func() (out []float64, err error) {
		for _, row := range rows {
			s := newStepper(Oscillator{row.T, row.z}, row.h)
			out = append(out, s.a11, s.a12*s.su/s.sv, s.r1*s.su, s.c1*s.su, s.a21*s.sv/s.su, s.a22, s.r2*s.sv, s.c2*s.sv)
		}
		return out, nil
	}
	return c
}

// textbook is the piecewise-linear column of the worked example, k = 10 kip/in.
func textbook() published.Case {
	c := published.Case{ID: "piecewise-linear-example", Title: "Half-sine force on an oscillator, piecewise-linear method", Source: cite.To("Chopra", "Example 5.1"), Origin: published.Memory,
		Inputs: []published.Input{{Name: "m", Value: 0.2533, Unit: "kip s²/in"}, {Name: "k", Value: 10, Unit: "kip/in"}, {Name: "damping", Value: 0.05}, {Name: "step", Value: 0.1, Unit: "s"}}}
	for i, u := range []float64{0.031758, 0.22741, 0.63356, 1.1339, 1.4896, 1.4480, 0.90367, 0.05794, -0.75774, -1.2432} {
		c.Wants = append(c.Wants, published.Want{Name: fmt.Sprintf("u(%.1f s)", 0.1*float64(i+1)), Value: u, Unit: "in", Tol: 3e-4 * math.Max(math.Abs(u), 0.3), Why: "the book steps with coefficients rounded to 4 digits"})
	}
	c.Compute = func() ([]float64, error) {
		const m, k = 0.2533, 10.0
		a := make([]float64, 11)
		for i := range 7 {
			a[i] = -10 * math.Sin(math.Pi*float64(i)/6) / m
		}
		u, _, _ := History(a, 0.1, Oscillator{2 * math.Pi * math.Sqrt(m/k), 0.05})
		return u[1:], nil
	}
	return c
}

func freeVibration() published.Case {
	c := published.Case{ID: "free-vibration", Title: "Damped free vibration from u = 0.01, v = 0.2", Source: cite.To("Clough & Penzien", "free vibration"), Origin: published.Computed,
		Inputs: []published.Input{{Name: "T", Value: 1, Unit: "s"}, {Name: "damping", Value: 0.05}}}
	rows := [][3]float64{{0.1, 0.02626348762, 0.1153961869}, {0.25, 0.0299444122, -0.06705144485}, {0.5, -0.008437582841, -0.1711707733}, {1, 0.00711798583, 0.1464946128}, {2, 0.005062789999, 0.1072958921}, {5, 0.001812832044, 0.04213934188}}
	for _, r := range rows {
		c.Wants = append(c.Wants, published.Want{Name: fmt.Sprintf("u(%g s)", r[0]), Value: r[1], Tol: 1e-11, Why: digits10},
			published.Want{Name: fmt.Sprintf("v(%g s)", r[0]), Value: r[2], Tol: 1e-10, Why: digits10})
	}
	c.Compute = func() (out []float64, err error) {
		b := search{omega: 2 * math.Pi, z: 0.05, motion: state{u: 0.01, v: 0.2}}
		for _, r := range rows {
			m := b.after(r[0])
			out = append(out, m.u, m.v)
		}
		return out, nil
	}
	return c
}

// resonance is the sine load at the natural period: |u| over A/w² at the end of cycle j.
func resonance() (cases []published.Case) {
	const n = 4000 // steps a cycle; chords of the sine lose (2 pi/n)²/12 = 2.1e-7
	for _, row := range []struct {
		z    float64
		want [5]float64
	}{
		{0, [5]float64{math.Pi, 2 * math.Pi, 5 * math.Pi, 10 * math.Pi, 20 * math.Pi}},
		{0.01, [5]float64{3.04508147, 5.90471687, 13.4804842, 23.3265651, 35.7706979}},
		{0.02, [5]float64{2.95278724, 5.55684711, 11.6647375, 17.8871121, 22.976593}},
		{0.05, [5]float64{2.69907229, 4.66997577, 7.92689724, 9.57089307, 9.98170211}},
		{0.1, [5]float64{2.34232438, 3.58877741, 4.79000951, 4.99141276, 4.99998694}},
		{0.2, [5]float64{1.81258973, 2.31436806, 2.49680577, 2.49999911, 2.5}},
	} {
		c := published.Case{ID: fmt.Sprintf("resonance-%g", 100*row.z), Title: fmt.Sprintf("Build-up at resonance, %g %% damping", 100*row.z), Source: cite.To("Chopra", "ch. 3"), Origin: published.Computed,
			Inputs: []published.Input{{Name: "damping", Value: row.z}}}
		cycles := []int{1, 2, 5, 10, 20}
		for i, j := range cycles {
			c.Wants = append(c.Wants, published.Want{Name: fmt.Sprintf("|u|/u_st after %d cycles", j), Value: row.want[i], Rel: true, Tol: 2.5e-7, Why: "chords of the sine at T/4000 lose 2.1e-7; printed to 9 digits"})
		}
		c.Compute = func() (out []float64, err error) {
			r, err := motion.Form("sine", motion.FormParameters{Amplitude: 1, Period: 1, Cycles: 20, Step: 1.0 / n})
			if err != nil {
				return nil, err
			}
			u, _, _ := History(r.A, r.Step, Oscillator{1, row.z})
			for _, j := range cycles {
				out = append(out, math.Abs(u[j*n])*4*math.Pi*math.Pi)
			}
			return out, nil
		}
		cases = append(cases, c)
	}
	return cases
}

// harmonic is the exact transient from rest under A sin Wt, A = 1 m/s².
func harmonic() (cases []published.Case) {
	const n = 8000 // steps a cycle
	why := "chords of the sine at 1/8000 of a cycle lose (2 pi/8000)²/12 = 5.1e-8; printed to 9 digits; twice that"
	for i, row := range []struct {
		T, z, f float64
		at      [4][3]float64 // at 0.1, 0.5, 1, 5 s: u, v, total acceleration
		peak    [4]float64    // over 20 s: SD, its time, SV, SA
	}{
		{1, 0.05, 1.5, [4][3]float64{{-0.00144938684, -0.041359995, 0.0832067501}, {-0.0180290242, 0.183580429, 0.59641036}, {-0.00397514246, -0.3259276, 0.361718685}, {-0.00264913873, -0.227583173, 0.24757853}}, [4]float64{0.0416311981, 0.7899384, 0.328877121, 1.65616989}},
		{1, 0.05, 1, [4][3]float64{{-0.000990822437, -0.0287792051, 0.0571986098}, {-0.0368653887, 0.0053514974, 1.45202477}, {0.0683682998, -0.00914709404, -2.693325}, {0.200790653, -0.0130135357, -7.9187206}}, [4]float64{0.252839479, 0, 1.58836917, 10.0314848}},
		{0.2, 0.02, 2, [4][3]float64{{-0.00111780274, -0.0191858708, 1.12733676}, {4.08480533e-5, -0.0262182476, -0.00736859105}, {9.09898829e-6, -0.00707020546, -9.56592749e-5}, {2.13207411e-5, -0.0144982253, -0.00282372077}}, [4]float64{0.00160550799, 0.1434745, 0.0262202861, 1.58506041}},
		{3, 0.1, 1, [4][3]float64{{-0.001013746, -0.0298590261, 0.0169541071}, {-0.0696906306, -0.24155619, 0.406880133}, {-0.0575511773, 0.26473804, 0.141554501}, {0.0277377408, 0.205501498, -0.207751612}}, [4]float64{0.101892242, 0.7282351, 0.266077553, 0.473615785}},
	} {
		c := published.Case{ID: fmt.Sprintf("harmonic-transient-%d", i+1), Title: fmt.Sprintf("Sine base acceleration from rest, T = %g s, %g %%, %g Hz", row.T, 100*row.z, row.f), Source: cite.To("Chopra", "ch. 3"), Origin: published.Computed,
			Inputs: []published.Input{{Name: "T", Value: row.T, Unit: "s"}, {Name: "damping", Value: row.z}, {Name: "frequency", Value: row.f, Unit: "Hz"}}}
		times := []float64{0.1, 0.5, 1, 5}
		for k, t := range times {
			for j, name := range []string{"u", "v", "a"} {
				c.Wants = append(c.Wants, published.Want{Name: fmt.Sprintf("%s(%g s)", name, t), Value: row.at[k][j], Unit: []string{"m", "m/s", "m/s²"}[j], Tol: 1e-7 * []float64{row.peak[0], row.peak[2], row.peak[3]}[j], Why: why})
			}
		}
		c.Wants = append(c.Wants, published.Want{Name: "SD", Value: row.peak[0], Unit: "m", Rel: true, Tol: 1e-7, Why: why},
			published.Want{Name: "SV", Value: row.peak[2], Unit: "m/s", Rel: true, Tol: 1e-7, Why: why},
			published.Want{Name: "SA", Value: row.peak[3], Unit: "m/s²", Rel: true, Tol: 1e-7, Why: why})
		if row.peak[1] > 0 {
			c.Wants = append(c.Wants, published.Want{Name: "time of SD", Value: row.peak[1], Unit: "s", Tol: 1e-6, Why: "printed to 7 digits"})
		}
		c.Compute = func() (out []float64, err error) {
			r, err := motion.Form("sine", motion.FormParameters{Amplitude: 1, Period: 1 / row.f, Duration: 20, Step: 1 / (n * row.f)})
			if err != nil {
				return nil, err
			}
			o := Oscillator{row.T, row.z}
			u, v, a := History(r.A, r.Step, o)
			for _, t := range times {
				k := int(math.Round(t / r.Step))
				out = append(out, u[k], v[k], a[k])
			}
			p := Run(r.A, r.Step, []Oscillator{o})[0]
			out = append(out, p.U, p.V, p.A)
			if row.peak[1] > 0 {
				out = append(out, p.TU)
			}
			return out, nil
		}
		cases = append(cases, c)
	}
	return cases
}

// steadyState is the response to a sine of the base long after its start:
// displacement Ra times that of the ground, total acceleration TR times its.
// The amplitude of the displacement is sqrt(u² + (v/W)²) at any one time.
func steadyState() published.Case {
	c := published.Case{ID: "steady-state", Title: "Steady state under a sine of the base: displacement ratio and transmissibility", Source: cite.To("Chopra", "ch. 3"), Origin: published.Computed}
	rows := [][4]float64{ // damping, r = forcing over natural frequency, Ra, TR
		{0.05, 0.5, 0.332595053, 1.33204215}, {0.05, 0.8, 1.73544366, 2.7202941}, {0.05, 1, 10, 10.0498756}, {0.05, 1.2, 3.15740887, 2.20837566}, {0.05, 2, 1.33038021, 0.339181733}, {0.05, 3, 1.12420982, 0.130412168},
		{0.10, 0.9, 3.09485092, 3.88220721}, {0.10, 1, 5, 5.09901951}, {0.10, 2, 1.3216372, 0.355861707},
		{0.20, 0.5, 0.322078313, 1.31382688}, {0.20, 1, 2.5, 2.6925824}, {0.20, 3, 1.1125534, 0.193095996},
	}
	const perCycle = 2000
	why := "straight lines between 2000 samples a cycle: (pi/2000)²/3 of the input, (pi/2000)²/2 of the peak between samples"
	for _, row := range rows {
		at := fmt.Sprintf(" at z = %g, r = %g", row[0], row[1])
		c.Wants = append(c.Wants, published.Want{Name: "Ra" + at, Value: row[2], Tol: 2e-6, Rel: true, Why: why}, published.Want{Name: "TR" + at, Value: row[3], Tol: 4e-6, Rel: true, Why: why})
	}
	c.Compute = func() (out []float64, err error) {
		for _, row := range rows {
			z, r := row[0], row[1]
			W := 2 * math.Pi // forcing of 1 Hz
			cycles := int(math.Ceil(5 / z * max(r, 1)))
			a := make([]float64, cycles*perCycle+1)
			for i := range a {
				a[i] = math.Sin(2 * math.Pi * float64(i%perCycle) / perCycle)
			}
			u, v, total := History(a, 1.0/perCycle, Oscillator{Period: r, Damping: z})
			last := len(a) - 1
			most := 0.0
			for _, x := range total[last-perCycle:] {
				most = max(most, math.Abs(x))
			}
			out = append(out, math.Hypot(u[last], v[last]/W)*W*W, most)
		}
		return out, nil
	}
	return c
}

// underRead is what peak picking on samples would lose at worst, and the loss here.
func underRead() published.Case {
	c := published.Case{ID: "peak-between-samples", Title: "A free-vibration peak half-way between samples", Source: cite.To("Nigam & Jennings 1969", ""), Origin: published.Computed}
	rows := [][2]float64{{10, 0.04894348}, {20, 0.01231166}, {40, 0.00308267}, {50, 0.00197327}, {100, 0.00049344}}
	for _, r := range rows {
		c.Wants = append(c.Wants,
			published.Want{Name: fmt.Sprintf("loss of the samples at T/%g", r[0]), Value: r[1], Tol: 1e-8, Why: "printed to 6 or 7 digits"},
			published.Want{Name: fmt.Sprintf("peak at T/%g", r[0]), Value: 1, Tol: 1e-12, Why: "exact but for rounding"})
	}
	c.Compute = func() (out []float64, err error) {
		for _, r := range rows {
			h := 1 / r[0]
			w := 2 * math.Pi
			b := search{omega: w, motion: state{u: math.Cos(w * h / 2), v: w * math.Sin(w*h/2)}}
			e := b.after(h)
			b.u.offer(b.motion.u, 0)
			b.u.offer(e.u, h)
			out = append(out, 1-b.u.size)
			b.within(0, h)
			out = append(out, b.u.size)
		}
		return out, nil
	}
	return c
}
