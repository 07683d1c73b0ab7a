package lateral

import (
	"slices"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
)

// masonryCases: a five-storey and a one-storey masonry building.
func masonryCases() []published.Case {
	source := cite.To("Taly", "Examples 7.9 and 7.10, pp. 7.49-7.54")
	weights, heights := []float64{400, 450, 500, 600, 650}, []float64{12, 12, 12, 12, 12}
	inputs := []published.Input{{Name: "S_DS", Value: 0.60}, {Name: "S_D1", Value: 0.41}, {Name: "S_1", Value: 0.45}, {Name: "R", Value: 5.5}, {Name: "I_e", Value: 1},
		{Name: "storeys of 12 ft", Value: 5}, {Name: "w, top", Value: 400, Unit: "kip"}, {Name: "w", Value: 450, Unit: "kip"}, {Name: "w", Value: 500, Unit: "kip"}, {Name: "w", Value: 600, Unit: "kip"}, {Name: "w, lowest", Value: 650, Unit: "kip"}}
	run := func() (*Static, error) {
		m, err := kips(weights, heights, nil)
		if err != nil {
			return nil, err
		}
		t, err := spectrum722(0.60, 0.41, 0.45, 8)
		if err != nil {
			return nil, err
		}
		return ASCE{Model: m, Target: t, R: 5.5, Ie: 1, System: "other", HeightUnit: "ft"}.Static()
	}
	// carried runs the procedure and puts the base shear of the source in its place.
	carried := func(v float64) (*Static, error) {
		s, err := run()
		if err != nil {
			return nil, err
		}
		s.V = v * kip
		if s.Cv, s.F, err = distribute(s.V, s.W, s.Shape); err != nil {
			return nil, err
		}
		s.Shear = shears(s.F)
		s.Moment = moments(s.Shear, s.Hs)
		s.diaphragms()
		return s, nil
	}

	// the source carries C_vx with 3 decimals: each force is off by up to 286 * 0.0005
	const carry = 286 * 0.0005
	printed := published.Case{ID: "five-storey-masonry", Title: "Five-storey masonry building, as printed", Source: source, Origin: published.Read, Inputs: inputs,
		Wants: slices.Concat([]published.Want{published.Printed("T_a", "0.43", "s"), published.Printed("C_s", "0.11", ""), published.Printed("upper limit up to T_L", "0.17", ""),
			published.Printed("least value", "0.0264", ""), published.Printed("V = 0.11 W", "286", "kip")},
			each(within(carry, "half of the last digit, and C_vx carried with 3 decimals: 286 * 0.0005"), "F from the top", "kip", "80.1 72.1 60.1 48.0 26.0"),
			each(within(2*carry, "half of the last digit, and forces off by up to 0.143 each times w_px over the weight above, less than 2"), "F_px before limits, from the top", "kip", "80.1 80.6 78.6 80.1 71.6"),
			[]published.Want{published.Printed("F_p1, least value", "78.0", "kip")}),
		Compute: func() ([]float64, error) {
			s, err := carried(0.11 * 2600)
			if err != nil {
				return nil, err
			}
			v := 0.11 * s.Weight
			return slices.Concat([]float64{s.Ta, s.Cs, limbValue(s.Limbs, "C_s_max"), limbValue(s.Limbs, "C_s_min"), v / kip},
				in(s.F, kip), in(s.DiaphragmRaw, kip), []float64{s.Diaphragm[0] / kip}), nil
		}}

	exact := published.Case{ID: "five-storey-masonry-exact", Title: "Five-storey masonry building, V = 286 kip, full precision", Source: source, Origin: published.Computed, Inputs: inputs,
		Wants: slices.Concat([]published.Want{published.Rounded("T_a", "0.43116493", "s"), published.Rounded("k", "1", "")},
			each(published.Rounded, "C_vx from the top", "", "0.27972028 0.25174825 0.20979021 0.16783217 0.09090909"),
			each(published.Rounded, "F from the top", "kip", "80 72 60 48 26"), each(published.Rounded, "V_x from the top", "kip", "80 152 212 260 286"),
			each(published.Rounded, "M_x from the top", "kip*ft", "960 2784 5328 8448 11880"),
			each(published.Rounded, "F_px before limits, from the top", "kip", "80 80.470588 78.518519 80 71.5"), []published.Want{published.Rounded("F_p1", "78", "kip")}),
		Compute: func() ([]float64, error) {
			s, err := carried(286)
			if err != nil {
				return nil, err
			}
			return slices.Concat([]float64{s.Ta, s.K}, in(s.Cv, 1), in(s.F, kip), in(s.Shear, kip), in(s.Moment, kip*foot), in(s.DiaphragmRaw, kip), []float64{s.Diaphragm[0] / kip}), nil
		}}

	plain := published.Case{ID: "five-storey-masonry-unrounded", Title: "Five-storey masonry building, C_s not rounded", Source: source, Origin: published.Computed, Inputs: inputs,
		Wants: slices.Concat([]published.Want{published.Rounded("C_s", "0.109090909", ""), published.Rounded("V", "283.636364", "kip")},
			each(published.Rounded, "F from the top", "kip", "79.338843 71.404959 59.504132 47.603306 25.785124")),
		Compute: func() ([]float64, error) {
			s, err := run()
			if err != nil {
				return nil, err
			}
			return slices.Concat([]float64{s.Cs, s.V / kip}, in(s.F, kip)), nil
		}}
	return slices.Concat([]published.Case{printed, exact, plain}, oneStoreyMasonry())
}

// oneStoreyMasonry: a masonry building of one storey and its roof diaphragm.
func oneStoreyMasonry() []published.Case {
	source := cite.To("Taly", "Example 7.11, pp. 7.56-7.57")
	run := func(sds, sd1 float64) (*Static, error) {
		m, err := kips([]float64{2.960}, []float64{20}, nil)
		if err != nil {
			return nil, err
		}
		t, err := spectrum722(sds, sd1, 0.243, 4)
		if err != nil {
			return nil, err
		}
		return ASCE{Model: m, Target: t, R: 5, Ie: 1, Ct: 0.02, X: 0.75, HeightUnit: "ft"}.Static()
	}
	inputs := func(sds, sd1 float64) []published.Input {
		return []published.Input{{Name: "S_DS", Value: sds}, {Name: "S_D1", Value: sd1}, {Name: "S_1", Value: 0.243}, {Name: "R", Value: 5}, {Name: "I_e", Value: 1},
			{Name: "h_n", Value: 20, Unit: "ft"}, {Name: "C_t, h_n in ft", Value: 0.02}, {Name: "x", Value: 0.75}, {Name: "w, of a strip of 1 ft", Value: 2960, Unit: "lbf"}}
	}
	return []published.Case{{
		ID: "one-storey-masonry", Title: "One-storey masonry building and its roof diaphragm, as printed", Source: source, Origin: published.Read, Inputs: inputs(0.5, 0.31),
		Wants: []published.Want{published.Printed("T_a", "0.19", "s"), published.Printed("C_s", "0.10", ""),
			within(0.31/5/(0.19*0.19)*0.005, "half of the last digit, and the source divides by T_a = 0.19 s")("upper limit up to T_L", "0.326", ""),
			published.Printed("F_p", "296", "lbf"), published.Printed("least value", "296", "lbf"), published.Printed("largest value", "592", "lbf")},
		Compute: func() ([]float64, error) {
			s, err := run(0.5, 0.31)
			if err != nil {
				return nil, err
			}
			lbf := kip / 1000
			return []float64{s.Ta, s.Cs, limbValue(s.Limbs, "C_s_max"), s.Diaphragm[0] / lbf, s.DiaphragmMin[0] / lbf, s.DiaphragmMax[0] / lbf}, nil
		},
	}, {
		ID: "one-storey-masonry-exact", Title: "One-storey masonry building, full precision", Source: source, Origin: published.Computed, Inputs: inputs(0.4998912, 0.310068),
		Wants: []published.Want{published.Rounded("T_a", "0.18914832", "s"), published.Rounded("C_s", "0.09997824", ""), published.Rounded("upper limit up to T_L", "0.32785699", ""), published.Rounded("0.044 S_DS", "0.02199521", "")},
		Compute: func() ([]float64, error) {
			s, err := run(0.4998912, 0.310068)
			if err != nil {
				return nil, err
			}
			return []float64{s.Ta, s.Cs, limbValue(s.Limbs, "C_s_max"), limbValue(s.Limbs, "C_s_min")}, nil
		},
	}}
}

// steelFrameCases: a twelve-storey steel frame with setbacks.
func steelFrameCases() []published.Case {
	source := cite.To("FEMA 451", "chapter 3, twelve-storey steel frame")
	weights := []float64{1656.5, 1595.8, 1595.8, 1595.8, 3403.0, 2330.8, 2330.8, 2330.8, 4323.8, 3066.1, 3066.1, 3097.0}
	heights := []float64{12.5, 12.5, 12.5, 12.5, 12.5, 12.5, 12.5, 12.5, 12.5, 12.5, 12.5, 18}
	inputs := []published.Input{{Name: "S_DS", Value: 1.25 / 1.5}, {Name: "S_D1", Value: 0.56 / 1.5}, {Name: "S_1", Value: 0.4}, {Name: "R", Value: 8}, {Name: "I_e", Value: 1}, {Name: "h_n", Value: 155.5, Unit: "ft"}}
	for i, w := range weights {
		inputs = append(inputs, published.Input{Name: []string{"w, roof", "w, 12", "w, 11", "w, 10", "w, 9", "w, 8", "w, 7", "w, 6", "w, 5", "w, 4", "w, 3", "w, 2"}[i], Value: w, Unit: "kip"})
	}
	run := func() (*Static, error) {
		m, err := kips(weights, heights, nil)
		if err != nil {
			return nil, err
		}
		t, err := spectrum722(1.25/1.5, 0.56/1.5, 0.4, 8)
		if err != nil {
			return nil, err
		}
		return ASCE{Model: m, Target: t, R: 8, Ie: 1, System: "steel moment frame", HeightUnit: "ft", T: 3}.Static()
	}
	coefficients := published.Case{ID: "twelve-storey-coefficients", Title: "Twelve-storey steel frame: period and coefficient", Source: source, Origin: published.Memory, Inputs: inputs,
		Wants: []published.Want{published.Printed("T_a", "1.59", "s"), published.Rounded("T_a", "1.586874", "s"), published.Rounded("C_u", "1.4", ""),
			within(0.0014*5, "half of the last digit, and T_a carried as 1.59 s")("C_u T_a", "2.23", "s"),
			published.Rounded("upper limit at short periods", "0.104167", ""), published.Printed("upper limit up to T_L", "0.0210", ""), published.Rounded("least value", "0.036667", ""),
			published.Printed("C_s", "0.037", ""), published.Printed("W", "30392.3", "kip")},
		Compute: func() ([]float64, error) {
			s, err := run()
			if err != nil {
				return nil, err
			}
			return []float64{s.Ta, s.Ta, s.Cu, s.Cap, limbValue(s.Limbs, "C_s_plateau"), limbValue(s.Limbs, "C_s_max"), limbValue(s.Limbs, "C_s_min"), s.Cs, s.Weight / kip}, nil
		}}

	table := published.Case{ID: "twelve-storey-forces", Title: "Twelve-storey steel frame: forces and shears for V = 1124.5 kip, T = 2.23 s", Source: source, Origin: published.Memory, Inputs: inputs,
		Wants: slices.Concat([]published.Want{published.Rounded("k", "1.865", ""), published.Printed("V = 0.037 W", "1124.5", "kip")},
			each(published.Printed, "w h^k from the roof", "kip", "20266027 16698604 14079657 11669128 20194253 10932657 8352458 6097252 7744119 3411968 1798066 679242"),
			each(published.Printed, "C_vx from the roof", "", "0.1662 0.1370 0.1155 0.0957 0.1656 0.0897 0.0685 0.0500 0.0635 0.0280 0.0147 0.0056"),
			each(published.Printed, "F from the roof", "kip", "186.9 154.0 129.9 107.6 186.3 100.8 77.0 56.2 71.4 31.5 16.6 6.3"),
			each(published.Printed, "V_x from the roof", "kip", "186.9 340.9 470.8 578.4 764.7 865.5 942.5 998.8 1070.2 1101.7 1118.2 1124.5")),
		Compute: func() ([]float64, error) {
			s, err := run()
			if err != nil {
				return nil, err
			}
			s.K = exponent(2.23)
			s.Shape = powers(s.H, "ft", s.K)
			s.V = 1124.5 * kip // as the source carries it
			if s.Cv, s.F, err = distribute(s.V, s.W, s.Shape); err != nil {
				return nil, err
			}
			weighted := make([]float64, len(s.W))
			for i := range weighted {
				weighted[i] = s.W[i] * s.Shape[i]
			}
			return slices.Concat([]float64{s.K, 0.037 * s.Weight / kip}, in(weighted, kip), in(s.Cv, 1), in(s.F, kip), in(shears(s.F), kip)), nil
		}}

	moment := published.Case{ID: "twelve-storey-overturning", Title: "Twelve-storey steel frame: overturning at the foot of each storey, V = 1124.5 kip, T = 2.23 s", Source: source, Origin: published.Computed, Inputs: inputs,
		Wants: each(published.Printed, "M from the roof", "kip*ft", "2336 6598 12483 19713 29271 40090 51871 64356 77733 91504 105482 125723"),
		Compute: func() ([]float64, error) {
			s, err := run()
			if err != nil {
				return nil, err
			}
			_, f, err := distribute(1124.5*kip, s.W, powers(s.H, "ft", exponent(2.23)))
			return in(moments(shears(f), s.Hs), kip*foot), err
		}}

	plain := published.Case{ID: "twelve-storey-unrounded", Title: "Twelve-storey steel frame, C_s and T not rounded", Source: source, Origin: published.Computed, Inputs: inputs,
		Wants: []published.Want{published.Rounded("T", "2.22162310", "s"), published.Rounded("k", "1.86081155", ""), published.Rounded("V", "1114.3843", "kip"), published.Printed("F, roof", "184.9", "kip"), published.Printed("F, level 2", "6.3", "kip")},
		Compute: func() ([]float64, error) {
			s, err := run()
			if err != nil {
				return nil, err
			}
			return []float64{s.T, s.K, s.V / kip, s.F[len(s.F)-1] / kip, s.F[0] / kip}, nil
		}}
	return []published.Case{coefficients, table, moment, plain}
}

// chainCases: a six-storey frame from spectrum to elastic drift.
func chainCases() []published.Case {
	weights, stiffness := []float64{600, 650, 650, 650, 650, 700}, []float64{150, 200, 250, 300, 330, 350}
	heights := []float64{13, 13, 13, 13, 13, 13}
	inputs := []published.Input{{Name: "S_DS", Value: 1}, {Name: "S_D1", Value: 0.6}, {Name: "S_1", Value: 0.5}, {Name: "T_L", Value: 8, Unit: "s"}, {Name: "R", Value: 8}, {Name: "I_e", Value: 1}, {Name: "storeys of 13 ft", Value: 6}}
	for i := range weights {
		inputs = append(inputs, published.Input{Name: "w", Value: weights[i], Unit: "kip"}, published.Input{Name: "k", Value: stiffness[i], Unit: "kip/in"})
	}
	run := func() (*Static, error) {
		m, err := kips(weights, heights, stiffness)
		if err != nil {
			return nil, err
		}
		t, err := spectrum722(1, 0.6, 0.5, 8)
		if err != nil {
			return nil, err
		}
		return ASCE{Model: m, Target: t, R: 8, Ie: 1, System: "steel moment frame", HeightUnit: "ft", T: 2}.Static()
	}
	made := func(id, title string, wants []published.Want, get func(*Static) []float64) published.Case {
		return published.Case{ID: id, Title: title, Source: of716("12.8"), Origin: published.Computed, Inputs: inputs, Wants: wants,
			Compute: func() ([]float64, error) {
				s, err := run()
				if err != nil {
					return nil, err
				}
				return get(s), nil
			}}
	}
	return []published.Case{
		made("six-storey-shear", "Six-storey steel frame: period, coefficient, base shear",
			[]published.Want{published.Rounded("T_a", "0.913763305", "s"), published.Rounded("C_u", "1.4", ""), published.Rounded("T", "1.279268627", "s"), published.Rounded("C_s", "0.0586272488", ""),
				published.Rounded("V", "228.646270155", "kip"), published.Rounded("k", "1.389634313", "")},
			func(s *Static) []float64 { return []float64{s.Ta, s.Cu, s.T, s.Cs, s.V / kip, s.K} }),
		made("six-storey-forces", "Six-storey steel frame: shares, forces, shears and moments", slices.Concat(
			each(published.Rounded, "C_vx from the top", "", "0.31219574 0.26251619 0.19252477 0.12908253 0.07347930 0.03020147"),
			each(published.Rounded, "F from the top", "kip", "71.382391 60.023348 44.020071 29.514239 16.800768 6.905453"),
			each(published.Rounded, "V_x from the top", "kip", "71.382391 131.405739 175.425810 204.940049 221.740817 228.646270"),
			each(published.Rounded, "M at the foot of the storey, from the top", "kip*ft", "927.9711 2636.2457 4916.7812 7581.0019 10463.6325 13436.0340")),
			func(s *Static) []float64 {
				return slices.Concat(in(s.Cv, 1), in(s.F, kip), in(s.Shear, kip), in(s.Moment, kip*foot))
			}),
		made("six-storey-diaphragms", "Six-storey steel frame: diaphragm forces", slices.Concat(
			each(published.Rounded, "F_px before limits, from the top", "kip", "71.382391 68.330984 60.014093 52.239620 45.041103 41.039074"),
			each(published.Rounded, "F_px from the top", "kip", "120 130 130 130 130 140")),
			func(s *Static) []float64 { return slices.Concat(in(s.DiaphragmRaw, kip), in(s.Diaphragm, kip)) }),
		made("six-storey-elastic-drift", "Six-storey steel frame: elastic storey drifts",
			each(published.Rounded, "drift from the top", "in", "0.47588261 0.65702870 0.70170324 0.68313350 0.67194187 0.65327506"),
			func(s *Static) []float64 { return in(s.Drift, quantity.MustUnit("in").Scale) }),
	}
}
