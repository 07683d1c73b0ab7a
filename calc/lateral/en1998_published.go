package lateral

import (
	"fmt"
	"math"
	"slices"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/standard"
	"quoin/calc/structure"
)

// enDesign is a design spectrum of EN 1998-1 for a ground acceleration ag S of the
// ground, m/s², as the standard gives it beyond T_B, with the floor beta ag left out.
func enDesign(ag, s, tb, tc, td, q float64) *standard.Target {
	top := ag * s * 2.5 / q
	return &standard.Target{Basis: enBasis, Spectrum: "design", Damping: 0.05, Q: q,
		Parameters: []standard.Parameter{{Symbol: "T_B", Value: tb}, {Symbol: "T_C", Value: tc}, {Symbol: "T_D", Value: td}},
		Branches: []standard.Branch{
			{Name: "rise", To: tb, A0: ag * s * 2 / 3, A1: (top - ag*s*2/3) / tb},
			{Name: "plateau", From: tb, To: tc, A0: top},
			{Name: "constant velocity", From: tc, To: td, B1: top * tc},
			{Name: "constant displacement", From: td, B2: top * tc * td},
		}}
}

// tonnes is a shear building of equal storeys of 3 m and 100 t.
func tonnes(n int) (*structure.Model, error) {
	storeys := make([]structure.Storey, n)
	for i := range storeys {
		storeys[i] = structure.Storey{Level: fmt.Sprint(i + 1), Height: 3, Mass: 100e3, Stiffness: 100e6}
	}
	return structure.Shear(storeys, 0)
}

// europeanCases: EN 1998-1, 4.3.3.2.
func europeanCases() []published.Case {
	source := func(clause string) cite.Ref { return EN(clause) }
	chain := published.Case{ID: "en-five-storeys", Title: "Lateral force method for five equal storeys of 3 m and 100 t", Source: source("4.3.3.2"), Origin: published.Computed,
		Inputs: []published.Input{{Name: "a_g = 1.2 * 0.3 g, g = 9.81 m/s^2", Value: 0.36}, {Name: "S, ground C, type 1", Value: 1.15}, {Name: "T_C", Value: 0.6, Unit: "s"}, {Name: "q", Value: 4}, {Name: "C_t", Value: 0.075}},
		Wants: slices.Concat([]published.Want{published.Rounded("T_1", "0.57164934", "s"), published.Rounded("S_d/g", "0.25875", ""), published.Rounded("lambda", "0.85", ""), published.Rounded("F_b", "1078.7934", "kN")},
			each(published.Rounded, "F from the lowest", "kN", "71.91956 143.83913 215.75869 287.67825 359.59781"), []published.Want{published.Rounded("base moment", "11866.728", "kN*m")}),
		Compute: func() ([]float64, error) {
			m, err := tonnes(5)
			if err != nil {
				return nil, err
			}
			s, err := EN1998{Model: m, Target: enDesign(0.36*9.81, 1.15, 0.2, 0.6, 2, 4), System: "concrete moment frame"}.Static()
			if err != nil {
				return nil, err
			}
			out := []float64{s.T, s.Sa / 9.81, s.Lambda, s.V / 1000}
			for _, f := range s.F {
				out = append(out, f/1000)
			}
			return append(out, s.Moment[0]/1000), nil
		}}

	period := published.Case{ID: "en-period", Title: "Approximate period by kind of structure", Source: source("4.3.3.2.2(3)"), Origin: published.Computed,
		Inputs: []published.Input{{Name: "H", Value: 16, Unit: "m"}},
		Wants: []published.Want{published.Rounded("T_1, steel moment frame", "0.68", "s"), published.Rounded("T_1, concrete moment frame", "0.6", "s"),
			published.Rounded("T_1, eccentrically braced frame", "0.6", "s"), published.Rounded("T_1, other", "0.4", "s")},
		Compute: func() ([]float64, error) {
			var out []float64
			for _, row := range enSystems {
				s := &Static{Hn: 16}
				if err := (EN1998{System: row.Name}).period(s); err != nil {
					return nil, err
				}
				out = append(out, s.T)
			}
			return out, nil
		}}

	// two storeys: the shape 1 : golden ratio is the fundamental mode of equal storeys
	golden := (1 + math.Sqrt(5)) / 2
	shape := published.Case{ID: "en-mode-shape", Title: "Lateral force method by the mode shape of two equal storeys", Source: source("4.3.3.2.3(2)"), Origin: published.Computed,
		Inputs: []published.Input{{Name: "s_1/s_2", Value: 1 / golden}, {Name: "F_b", Value: 600, Unit: "kN"}},
		Wants:  []published.Want{published.Rounded("lambda, two storeys", "1", ""), published.Rounded("F_b", "600", "kN"), published.Rounded("F_1", "229.179607", "kN"), published.Rounded("F_2", "370.820393", "kN")},
		Compute: func() ([]float64, error) {
			m, err := tonnes(2)
			if err != nil {
				return nil, err
			}
			s, err := EN1998{Model: m, Target: enDesign(3, 1, 0.2, 0.6, 2, 2.5), T: 0.5, Shape: []float64{1 / golden, 1}}.Static()
			if err != nil {
				return nil, err
			}
			return []float64{s.Lambda, s.V / 1000, s.F[0] / 1000, s.F[1] / 1000}, nil
		}}
	return []published.Case{chain, period, shape}
}
