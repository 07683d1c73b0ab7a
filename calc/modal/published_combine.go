package modal

import (
	"fmt"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
)

// wants are values under names that count up: "u_1", "u_2".
func wants(want func(name, text, unit string) published.Want, name, unit, texts string) []published.Want {
	var out []published.Want
	for i, text := range strings.Fields(texts) {
		out = append(out, want(fmt.Sprintf("%s_%d", name, i+1), text, unit))
	}
	return out
}

// within is a value printed by a source that carried rounded numbers itself.
func within(name string, value, tol float64, unit, why string) published.Want {
	return published.Want{Name: name, Value: value, Unit: unit, Tol: tol, Why: why}
}

// solved solves a shear building given in kip, inch and second.
func solved(mass, k []float64) (*Modes, float64, error) {
	kip, inch := quantity.MustUnit("kip").Scale, quantity.MustUnit("in").Scale
	m := make([]float64, len(mass))
	ks := make([]float64, len(k))
	for i := range m {
		m[i], ks[i] = mass[i]*kip/inch, k[i]*kip/inch
	}
	model, err := shear(m, ks)
	if err != nil {
		return nil, 0, err
	}
	s, err := Solve(model, 0)
	return s, kip / inch, err
}

// asPrinted is w², L and M_n in kip, inch and second and the shape below the
// top, highest first, all for a top ordinate of 1.
func asPrinted(s *Modes, i int, unit float64) (w2, l, mn float64, shape []float64) {
	phi, l, gamma := topped(s, i)
	for j := len(phi) - 2; j >= 0; j-- {
		shape = append(shape, phi[j])
	}
	return s.Omega[i] * s.Omega[i], l / unit, l / gamma / unit, shape
}

func twoStorey() []published.Case {
	inputs := []published.Input{{Name: "m_1 = m_2", Value: 1.5, Unit: "kip*s^2/in"}, {Name: "k_1 = k_2", Value: 200, Unit: "kip/in"}}
	solve := func() (*Modes, float64, error) { return solved([]float64{1.5, 1.5}, []float64{200, 200}) }
	return []published.Case{{
		ID: "two-storey-frame", Title: "Two-storey frame, as printed",
		Source: cite.To("Taranath", ""), Origin: published.Read, Inputs: inputs,
		Wants: []published.Want{
			published.Printed("w_2^2", "349", "rad^2/s^2"), published.Printed("phi_11, top = 1", "0.618", ""), published.Printed("phi_12, top = 1", "-1.618", ""),
			within("L_1", 2.426, 0.00125, "kip*s^2/in", "printed to 3 decimals from a shape of 3 decimals: 0.0005 + 1.5 * 0.0005"),
		},
		Compute: func() ([]float64, error) {
			s, unit, err := solve()
			if err != nil {
				return nil, err
			}
			_, l, _, shape1 := asPrinted(s, 0, unit)
			w2, _, _, shape2 := asPrinted(s, 1, unit)
			return []float64{w2, shape1[0], shape2[0], l}, nil
		},
	}, {
		ID: "two-storey-frame-exact", Title: "Two-storey frame, full precision",
		Source: cite.To("Taranath", ""), Origin: published.Computed, Inputs: inputs,
		Wants: []published.Want{
			published.Rounded("w_1^2", "50.928802", "rad^2/s^2"), published.Rounded("w_2^2", "349.07120", "rad^2/s^2"),
			published.Rounded("T_1", "0.8804367", "s"), published.Rounded("T_2", "0.3362969", "s"),
			published.Rounded("L_1", "2.427051", "kip*s^2/in"), published.Rounded("L_2", "-0.927051", "kip*s^2/in"),
			published.Rounded("M_1", "2.072949", "kip*s^2/in"), published.Rounded("M_2", "5.427051", "kip*s^2/in"),
			published.Rounded("Gamma_1", "1.170820", ""), published.Rounded("Gamma_2", "-0.170820", ""),
			published.Rounded("M*_1/M", "94.72136", "%"), published.Rounded("M*_2/M", "5.27864", "%"),
		},
		Compute: func() ([]float64, error) {
			s, unit, err := solve()
			if err != nil {
				return nil, err
			}
			w1, l1, m1, _ := asPrinted(s, 0, unit)
			w2, l2, m2, _ := asPrinted(s, 1, unit)
			return []float64{w1, w2, s.T[0], s.T[1], l1, l2, m1, m2, l1 / m1, l2 / m2, 100 * s.MassRatio[0], 100 * s.MassRatio[1]}, nil
		},
	}}
}

func threeStorey() []published.Case {
	source := cite.To("CIVL 7119/8119", "modal example")
	inputs := []published.Input{
		{Name: "m_1", Value: 2, Unit: "kip*s^2/in"}, {Name: "m_2", Value: 1.5, Unit: "kip*s^2/in"}, {Name: "m_3", Value: 1, Unit: "kip*s^2/in"},
		{Name: "k_1", Value: 180, Unit: "kip/in"}, {Name: "k_2", Value: 120, Unit: "kip/in"}, {Name: "k_3", Value: 60, Unit: "kip/in"}}
	solve := func() (*Modes, float64, error) { return solved([]float64{2, 1.5, 1}, []float64{180, 120, 60}) }

	printed := published.Case{ID: "three-storey-frame", Title: "Three-storey frame, as printed", Source: source, Origin: published.Read, Inputs: inputs}
	for _, w := range [][]published.Want{
		wants(published.Printed, "w^2", "rad^2/s^2", "21.088 96.396 212.516"), wants(published.Printed, "T", "s", "1.368 0.640 0.431"),
		wants(published.Printed, "phi_1, from level 2 down", "", "0.649 0.302"), wants(published.Printed, "phi_2, from level 2 down", "", "-0.607 -0.679"), wants(published.Printed, "phi_3, from level 2 down", "", "-2.542 2.44"),
	} {
		printed.Wants = append(printed.Wants, w...)
	}
	// L = sum m phi and M = sum m phi² of the source use its rounded shapes
	const why = "from a shape of 3 decimals (2.44: 2)"
	for i, w := range [][2]float64{{2.577, 1.813}, {-1.268, 2.474}, {2.066, 22.596}} {
		tolL := []float64{0.00225, 0.00225, 0.01125}[i] // 0.0005 + 1.5 * 0.0005 + 2 * (0.0005 or 0.005)
		tolM := []float64{0.0021, 0.0028, 0.0531}[i]    // 0.0005 + 2 * 1.5 phi_2 0.0005 + 2 * 2 phi_1 * (0.0005 or 0.005)
		printed.Wants = append(printed.Wants,
			within(fmt.Sprintf("L_%d", i+1), w[0], tolL, "kip*s^2/in", why), within(fmt.Sprintf("M_%d", i+1), w[1], tolM, "kip*s^2/in", why))
	}
	printed.Compute = func() ([]float64, error) {
		s, unit, err := solve()
		if err != nil {
			return nil, err
		}
		var squared, shapes, sums []float64
		for i := range s.T {
			w2, l, mn, shape := asPrinted(s, i, unit)
			squared, shapes, sums = append(squared, w2), append(shapes, shape...), append(sums, l, mn)
		}
		return append(append(append(squared, s.T...), shapes...), sums...), nil
	}

	cases := []published.Case{printed}
	ordinates := []published.Input{{Name: "S_v1", Value: 1.74, Unit: "ft/s"}, {Name: "S_v2", Value: 1.41, Unit: "ft/s"}, {Name: "S_v3", Value: 1.20, Unit: "ft/s"}, {Name: "zeta", Value: 0.05}}
	for _, r := range []struct {
		rule            Rule
		u, shear, drift string
	}{
		{Absolute, "2.77036428 4.95570702 7.43476641", "498.665571 330.473258 240.585869", ""},
		{SRSS, "2.052302 4.230698 6.521965", "369.414360 274.280467 161.807401", "2.052302 2.28567056 2.69679002"},
		{CQC, "2.06582708 4.23573668 6.50850536", "371.848874 273.953253 160.217949", "2.06582708 2.28294378 2.67029915"},
	} {
		c := published.Case{
			ID: "three-storey-" + strings.ToLower(string(r.rule)), Title: "Three-storey frame, response combined by " + string(r.rule),
			Source: source, Origin: published.Computed, Inputs: append(inputs[:len(inputs):len(inputs)], ordinates...),
		}
		c.Wants = append(wants(published.Rounded, "u", "in", r.u), append(wants(published.Rounded, "V", "kip", r.shear), wants(published.Rounded, "drift", "in", r.drift)...)...)
		c.Compute = func() ([]float64, error) {
			b, err := combined(solve, r.rule)
			if err != nil {
				return nil, err
			}
			out := append(inches(b.Displacement.Combined), kips(b.StoreyShear.Combined)...)
			if r.drift != "" {
				out = append(out, inches(b.Drift.Combined)...)
			}
			return out, nil
		}
		cases = append(cases, c)
	}

	signed := published.Case{ID: "three-storey-modal", Title: "Three-storey frame, signed response of each mode", Source: source, Origin: published.Computed, Inputs: append(inputs[:len(inputs):len(inputs)], ordinates...)}
	for i, row := range [][3]string{
		{"1.95033078 4.19035447 6.46125917", "82.2566972 132.548562 136.254282", "351.059540 268.802843 136.254282"},
		{"0.59965572 0.53573296 -0.88317469", "115.608760 77.4637285 -85.1344592", "107.938030 -7.67073066 -85.1344592"},
		{"0.22037778 -0.22961958 0.09033255", "93.6676846 -73.1968121 19.1971282", "39.6680007 -53.9996839 19.1971282"},
	} {
		mode := fmt.Sprintf(", mode %d, level", i+1)
		signed.Wants = append(signed.Wants, wants(published.Rounded, "u"+mode, "in", row[0])...)
		signed.Wants = append(signed.Wants, wants(published.Rounded, "f"+mode, "kip", row[1])...)
		signed.Wants = append(signed.Wants, wants(published.Rounded, "V"+mode, "kip", row[2])...)
	}
	signed.Wants = append(signed.Wants, published.Rounded("rho_12", "0.01513484", ""), published.Rounded("rho_13", "0.00569252", ""), published.Rounded("rho_23", "0.05827970", ""))
	signed.Wants = append(signed.Wants, wants(published.Rounded, "SD", "in", "4.54688527 1.72334003 0.98779427")...)
	signed.Wants = append(signed.Wants, wants(published.Rounded, "Gamma, top = 1", "", "1.42102973 -0.51247849 0.09144875")...)
	signed.Wants = append(signed.Wants, wants(published.Rounded, "M*/M", "", "0.8136194 0.1443884 0.0419923")...)
	signed.Wants = append(signed.Wants, wants(published.Rounded, "w^2", "rad^2/s^2", "21.087884 96.395946 212.51617")...)
	signed.Compute = func() ([]float64, error) {
		b, err := combined(solve, CQC)
		if err != nil {
			return nil, err
		}
		s, _, err := solve()
		if err != nil {
			return nil, err
		}
		var out, gammas, squared []float64
		for i := range b.T {
			out = append(out, inches(b.Displacement.Modal[i])...)
			out = append(out, kips(b.StoreyForce.Modal[i])...)
			out = append(out, kips(b.StoreyShear.Modal[i])...)
			_, _, gamma := topped(s, i)
			gammas, squared = append(gammas, gamma), append(squared, s.Omega[i]*s.Omega[i])
		}
		out = append(out, b.Rho[0][1], b.Rho[0][2], b.Rho[1][2])
		out = append(append(out, inches(b.SD)...), gammas...)
		return append(append(out, s.MassRatio...), squared...), nil
	}
	return append(cases, signed)
}

// combined is the response to the pseudo-velocities of the three-storey case.
func combined(solve func() (*Modes, float64, error), rule Rule) (*Combined, error) {
	s, _, err := solve()
	if err != nil {
		return nil, err
	}
	psa := make([]float64, 3)
	for i, sv := range []float64{1.74, 1.41, 1.20} {
		psa[i] = s.Omega[i] * sv * quantity.MustUnit("ft").Scale
	}
	return Combine(s, psa, []float64{0.05}, rule, 1)
}

func inches(si []float64) []float64 { return in(si, "in") }
func kips(si []float64) []float64   { return in(si, "kip") }

func in(si []float64, unit string) []float64 {
	out := make([]float64, len(si))
	for i, x := range si {
		out[i] = quantity.MustUnit(unit).From(x)
	}
	return out
}
