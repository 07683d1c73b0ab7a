package lateral

import (
	"slices"

	"quoin/calc/published"
	"quoin/calc/quantity"
)

// ruleCases: approximate periods by storeys, walls and displacement.
func ruleCases() []published.Case {
	walls := published.Case{ID: "period-walls", Title: "Approximate period of two shear walls", Source: of716("Eq. 12.8-9"), Origin: published.Computed,
		Inputs: []published.Input{{Name: "A_B", Value: 6000, Unit: "ft^2"}, {Name: "h_n", Value: 40, Unit: "ft"}, {Name: "length of each wall", Value: 20, Unit: "ft"}, {Name: "thickness", Value: 8, Unit: "in"}},
		Wants:  []published.Want{published.Rounded("C_w", "0.10288066", ""), published.Rounded("T_a", "0.23694455", "s")},
		Compute: func() ([]float64, error) {
			w := Wall{20 * foot, 8 * inch}
			s := &Static{Basis: clauses716.Key, Hn: 40 * foot}
			err := ASCE{Walls: []Wall{w, w}, BaseArea: 6000 * foot * foot, HeightUnit: "ft"}.period(s)
			return []float64{s.Cw, s.Ta}, err
		}}

	storeys := published.Case{ID: "period-storeys", Title: "Approximate period of moment frames by the number of storeys", Source: of716("Eq. 12.8-8"), Origin: published.Memory,
		Inputs: []published.Input{{Name: "storeys of 10 ft", Value: 12}}, Wants: []published.Want{published.Rounded("T_a", "1.2", "s")},
		Compute: func() ([]float64, error) {
			s := &Static{Basis: clauses716.Key, Hn: 120 * foot, Levels: make([]string, 12)}
			err := ASCE{System: "concrete moment frame", ByStoreys: true, HeightUnit: "ft"}.period(s)
			return []float64{s.Ta}, err
		}}

	// five storeys of 100 t on 100 kN/mm: d = m g (5 + 4 + 3 + 2 + 1)/k
	displacement := published.Case{ID: "en-period-displacement", Title: "Period by the displacement of the top of five equal storeys of 100 t and 100 kN/mm", Source: EN("4.3.3.2.2(5)"), Origin: published.Computed,
		Inputs: []published.Input{{Name: "g", Value: quantity.Gravity, Unit: "m/s^2"}},
		Wants:  slices.Concat([]published.Want{published.Rounded("d", "0.14709975", "m")}, each(published.Rounded, "T_1, found and stated", "s", "0.76707170 0.76707170")),
		Compute: func() ([]float64, error) {
			m, err := tonnes(5)
			if err != nil {
				return nil, err
			}
			in := EN1998{Model: m, Target: enDesign(3, 1, 0.2, 0.6, 2, 4), ByTop: true}
			found, err := in.Static()
			if err != nil {
				return nil, err
			}
			in.ByTop, in.Top = false, 0.14709975
			stated, err := in.Static()
			if err != nil {
				return nil, err
			}
			return []float64{found.Top, found.T, stated.T}, nil
		}}
	return []published.Case{walls, storeys, displacement}
}
