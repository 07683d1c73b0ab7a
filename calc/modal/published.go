package modal

import (
	"fmt"
	"math"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
	"quoin/calc/structure"
)

// Published is every published case of this package.
func Published() []published.Case {
	cases := append(uniformCases(), contributionCases()...)
	cases = append(cases, twoStorey()...)
	cases = append(cases, threeStorey()...)
	cases = append(cases, matrixCases()...)
	cases = append(cases, correlationCases()...)
	return append(cases, rayleighCases()...)
}

// shear is a building with storey height 1, in any consistent units.
func shear(mass, k []float64) (*structure.Model, error) {
	storeys := make([]structure.Storey, len(mass))
	for i := range storeys {
		storeys[i] = structure.Storey{Level: fmt.Sprint(i + 1), Height: 1, Mass: mass[i], Stiffness: k[i]}
	}
	return structure.Shear(storeys, 0)
}

func uniform(n int, mass, k float64) (*structure.Model, error) {
	masses, ks := make([]float64, n), make([]float64, n)
	for i := range n {
		masses[i], ks[i] = mass, k
	}
	return shear(masses, ks)
}

// topped is mode i scaled so that its highest level is 1, as textbooks do: the
// shape, L and Gamma.
func topped(s *Modes, i int) (phi []float64, l, gamma float64) {
	top := s.Phi[i][len(s.Phi[i])-1]
	for _, x := range s.Phi[i] {
		phi = append(phi, x/top)
	}
	return phi, s.L[i] / top, s.Gamma[i] * top
}

// uniformTable: levels; mode; w/sqrt(k/m); shape, lowest first; Gamma; effective
// mass over total; effective height over storey height. Gamma holds nine digits.
const uniformTable = `
2  | 1 | 0.618033988750 | 0.61803399 1 | 1.170820393 | 0.9472135955 | 1.618034
2  | 2 | 1.61803398875 | -1.618034 1 | -0.1708203932 | 0.0527864045 | -0.618034
3  | 1 | 0.445041867913 | 0.44504187 0.80193774 1 | 1.22041094 | 0.9140794932 | 2.246980
3  | 2 | 1.24697960372 | -1.2469796 -0.55495813 1 | -0.280110191 | 0.0748769775 | -0.801938
3  | 3 | 1.80193773580 | 1.8019377 -2.2469796 1 | 0.0596992561 | 0.0110435292 | 0.554958
5  | 1 | 0.284629676547 | 0.28462968 0.54620035 0.76352112 0.91898595 1 | 1.25170170 | 0.8795300014 | 3.513337
5  | 2 | 0.830830026004 | -0.83083003 -1.0881559 -0.59435114 0.30972147 1 | -0.362148406 | 0.0871774960 | -1.203616
5  | 3 | 1.30972146789 | 1.3097215 0.3727856 -1.2036156 -0.71537032 1 | 0.158578455 | 0.0242155999 | 0.763521
5  | 4 | 1.68250706566 | -1.6825071 1.3978774 0.52110856 -1.83083 1 | -0.0631725011 | 0.0075093297 | -0.594351
5  | 5 | 1.91898594723 | 1.9189859 -3.2287074 3.5133371 -2.6825071 1 | 0.0150407532 | 0.0015675730 | 0.521109
10 | 1 | 0.149460187173 | | 1.26731047 | 0.8479251172 | 6.690745
10 | 2 | 0.445041867913 | | -0.406803645 | 0.0914079493 | -2.246980
10 | 3 | 0.730682048733 | | 0.225888346 | 0.0309147250 | 1.368584
10 | 4 | 1.0 | | -0.142857142857 | 0.0142857143 | -1.0`

func uniformCases() []published.Case {
	var cases []published.Case
	for _, line := range strings.Split(strings.TrimSpace(uniformTable), "\n") {
		cell := strings.Split(line, "|")
		var n, mode int
		fmt.Sscan(cell[0], &n)
		fmt.Sscan(cell[1], &mode)
		shape := strings.Fields(cell[3])
		text := func(i int) string { return strings.TrimSpace(cell[i]) }
		c := published.Case{
			ID:     fmt.Sprintf("uniform-%d-mode-%d", n, mode),
			Title:  fmt.Sprintf("Uniform shear building of %d storeys, mode %d", n, mode),
			Source: cite.To("Chopra", "closed form w = 2 sqrt(k/m) sin((2n-1) pi/(4N+2))"), Origin: published.Computed,
			Inputs: []published.Input{{Name: "N", Value: float64(n)}, {Name: "m", Value: 1, Unit: "kg"}, {Name: "k", Value: 1, Unit: "N/m"}, {Name: "h", Value: 1, Unit: "m"}},
			Wants: []published.Want{
				published.Rounded("w/sqrt(k/m)", text(2), ""), published.Rounded("Gamma, top = 1", text(4), ""),
				published.Rounded("M*/M", text(5), ""), published.Rounded("h*/h", text(6), "")},
		}
		for i, x := range shape {
			c.Wants = append(c.Wants, published.Rounded(fmt.Sprintf("phi_%d, top = 1", i+1), x, ""))
		}
		c.Compute = func() ([]float64, error) {
			m, err := uniform(n, 1, 1)
			if err != nil {
				return nil, err
			}
			s, err := Solve(m, 0)
			if err != nil {
				return nil, err
			}
			phi, _, gamma := topped(s, mode-1)
			out := []float64{s.Omega[mode-1], gamma, s.MassRatio[mode-1], s.Height[mode-1]}
			return append(out, phi[:len(shape)]...), nil
		}
		cases = append(cases, c)
	}
	return cases
}

// contributionCases: parts of each mode in the static response to a pattern of
// forces, top displacement relative to the static one and base shear.
func contributionCases() []published.Case {
	var cases []published.Case
	for _, p := range []struct {
		id, what          string
		load              []float64
		origin            published.Origin
		displacement, vee string
	}{
		{"top-force", "force at the top", []float64{0, 0, 0, 0, 1}, published.Read, "0.880 0.087 0.024 0.008 0.002", "1.252 -0.362 0.159 -0.063 0.015"},
		{"top-couple", "forces -1 and 2 at the two highest levels", []float64{0, 0, 0, -1, 2}, published.Read, "0.792 0.123 0.055 0.024 0.006", "1.353 -0.612 0.431 -0.242 0.070"},
		{"top-force-exact", "force at the top", []float64{0, 0, 0, 0, 1}, published.Computed, "0.8795300 0.0871775 0.0242156 0.00750933 0.00156757", "1.251702 -0.3621484 0.1585785 -0.0631725 0.01504075"},
		{"top-couple-exact", "forces -1 and 2 at the two highest levels", []float64{0, 0, 0, -1, 2}, published.Computed, "0.7923202 0.1227952 0.05479527 0.02397247 0.00611681", "1.353107 -0.6121317 0.4305992 -0.2420031 0.07042843"},
	} {
		c := published.Case{
			ID: "contribution-" + p.id, Title: "Modal contribution factors of a uniform five-storey frame, " + p.what,
			Source: cite.To("Chopra (reprint)", "Table 12.11.1"), Origin: p.origin,
			Inputs: []published.Input{{Name: "N", Value: 5}},
		}
		want := published.Printed
		if p.origin == published.Computed {
			want = published.Rounded
		}
		for i, x := range strings.Fields(p.displacement) {
			c.Wants = append(c.Wants, want(fmt.Sprintf("top displacement, mode %d", i+1), x, ""))
		}
		for i, x := range strings.Fields(p.vee) {
			c.Wants = append(c.Wants, want(fmt.Sprintf("base shear, mode %d", i+1), x, ""))
		}
		c.Compute = func() ([]float64, error) {
			m, err := uniform(5, 1, 1)
			if err != nil {
				return nil, err
			}
			s, err := Solve(m, 0)
			if err != nil {
				return nil, err
			}
			var top, base []float64
			static := 0.0
			for i, phi := range s.Phi {
				part := dot(phi, p.load) / s.ModalMass[i] // the pattern's share of this mode
				top = append(top, part*phi[4]/(s.Omega[i]*s.Omega[i]))
				base = append(base, part*s.L[i])
				static += top[i]
			}
			for i := range top {
				top[i] /= static
			}
			return append(top, base...), nil
		}
		cases = append(cases, c)
	}
	return append(cases, published.Case{
		ID: "five-storey-periods", Title: "Periods of a five-storey frame",
		Source: cite.To("Chopra", "Sec. 12.11"), Origin: published.Computed,
		Inputs: []published.Input{{Name: "m", Value: 100, Unit: "kip/g"}, {Name: "k", Value: 31.54, Unit: "kip/in"}, {Name: "g", Value: 386, Unit: "in/s^2"}},
		Wants: []published.Want{
			published.Rounded("T_1", "2.00067", "s"), published.Rounded("T_2", "0.685399", "s"), published.Rounded("T_3", "0.434787", "s"),
			published.Rounded("T_4", "0.338453", "s"), published.Rounded("T_5", "0.296745", "s")},
		Compute: func() ([]float64, error) {
			kip, inch := quantity.MustUnit("kip").Scale, quantity.MustUnit("in").Scale
			m, err := uniform(5, 100.0/386*kip/inch, 31.54*kip/inch)
			if err != nil {
				return nil, err
			}
			s, err := Solve(m, 0)
			if err != nil {
				return nil, err
			}
			return s.T, nil
		},
	})
}

func rayleighCases() []published.Case {
	var cases []published.Case
	for i, p := range []struct {
		wi, wj, zi, zj    float64
		a0, a1, least, at string
	}{
		{10, 50, 0.05, 0.05, "0.8333333333", "0.00166666667", "0.0372677996", "22.3606798"},
		{2 * math.Pi, 10 * math.Pi, 0.05, 0.05, "0.5235987756", "0.002652582385", "0.0372677996", "14.0496294621"},
		{10, 50, 0.02, 0.05, "0.2083333333", "0.00191666667", "0.0199826314", "10.4257207"},
	} {
		cases = append(cases, published.Case{
			ID: fmt.Sprintf("rayleigh-damping-%d", i+1), Title: "Rayleigh damping from two ratios",
			Source: cite.To("Clough & Penzien", "Rayleigh damping"), Origin: published.Computed,
			Inputs: []published.Input{{Name: "w_i", Value: p.wi, Unit: "rad/s"}, {Name: "w_j", Value: p.wj, Unit: "rad/s"}, {Name: "zeta_i", Value: p.zi}, {Name: "zeta_j", Value: p.zj}},
			Wants: []published.Want{
				published.Rounded("a_0", p.a0, "1/s"), published.Rounded("a_1", p.a1, "s"),
				published.Rounded("least ratio", p.least, ""), published.Rounded("at", p.at, "rad/s")},
			Compute: func() ([]float64, error) {
				r, err := NewRayleigh(p.wi, p.wj, p.zi, p.zj)
				if err != nil {
					return nil, err
				}
				least, at := r.Least()
				return []float64{r.A0, r.A1, least, at}, nil
			},
		})
	}
	return cases
}
