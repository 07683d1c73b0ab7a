package standard

import (
	"fmt"
	"strings"

	"quoin/calc/published"
)

// publishedDisplacement are the spectra of a six-storey concrete building, ground
// B, type 1, a_gR 0.25 g: elastic, design with q = 3, displacement, and at 2 %.
func publishedDisplacement() []published.Case {
	in := elasticEN("1", "B", 0.25*gEN)
	design := in.with("design", map[string]float64{"q": 3})
	periods := []float64{0, 0.05, 0.1, 0.15, 0.5, 0.68, 0.92, 1.0, 2.0, 2.5, 3.0}
	var cases []published.Case
	add := func(id, title, clause string, in Given, symbol, digits, unit string, read func(*Target) []float64, periods []float64) {
		cases = append(cases, published.Case{ID: id, Title: title, Source: ofEN(clause), Origin: published.Computed, Inputs: inputsOf(basisEN, in),
			Wants: texts(published.Rounded, unit, at(symbol, periods...), strings.Fields(digits)), Compute: reading(basisEN, in, read)})
	}
	over := func(unit float64) func(*Target) []float64 {
		return func(t *Target) []float64 { return ordinates(t, unit, periods...) }
	}
	sd := func(periods []float64) func(*Target) []float64 {
		return func(t *Target) []float64 {
			var out []float64
			for _, T := range periods {
				d, err := t.SD(T)
				if err != nil {
					return nil
				}
				out = append(out, 1000*d)
			}
			return out
		}
	}
	const damped = "0.3 0.498807 0.697614 0.896421 0.896421 0.659133 0.487186 0.448211 0.224105 0.143427 0.0996024"
	add("six-storeys-elastic", "Elastic spectrum of a six-storey building", "3.2.2.2", in, "S_e", "0.3 0.45 0.6 0.75 0.75 0.551471 0.407609 0.375 0.1875 0.12 0.0833333", "g", over(gEN), periods)
	add("six-storeys-design", "Design spectrum of a six-storey building, q = 3", "3.2.2.5", design, "S_d", "0.2 0.216667 0.233333 0.25 0.25 0.183824 0.13587 0.125 0.0625 0.05 0.05", "g", over(gEN), periods)
	add("six-storeys-design-si", "Design spectrum of a six-storey building, q = 3, in m/s²", "3.2.2.5", design, "S_d", "1.962 2.1255 2.289 2.4525 2.4525 1.803309 1.33288 1.22625 0.613125 0.4905 0.4905", "m/s^2", over(1), periods)
	add("six-storeys-displacement", "Displacement spectrum of a six-storey building", "Eq. 3.7", in, "S_De", "0 0.2795515 1.490941 4.193272 46.59191 63.365 85.72912 93.18383 186.3677 186.3677 186.3677", "mm", sd(periods), periods)
	add("six-storeys-2-percent", "Elastic spectrum of a six-storey building at 2 % damping", "3.2.2.2", in.with("", map[string]float64{"xi": 0.02}), "S_e", damped, "g", over(gEN), periods)
	add("six-storeys-adjusted", "The same, adjusted from the spectrum at 5 % damping", "3.2.2.2(3)", in, "S_e", damped, "g", func(t *Target) []float64 {
		other, err := t.AtDamping(0.02)
		if err != nil {
			return nil
		}
		return over(gEN)(other)
	}, periods)
	long := []float64{4, 5, 6, 7.5, 10, 20}
	add("long-periods", "Displacement spectrum beyond 4 s: constant to T_E, then towards the ground displacement", "Annex A", in, "S_De",
		"186.36765 186.36765 161.865 128.75625 73.575 73.575", "mm", sd(long), long)
	vertical := in.with("vertical design", map[string]float64{"q": 1.5})
	times := []float64{0, 0.05, 0.15, 0.5, 1, 3}
	v := published.Case{ID: "vertical-design", Title: "Vertical design spectrum over a_vg, q = 1.5: S = 1, lower bound beta a_vg", Source: ofEN("3.2.2.5(5)"), Origin: published.Computed, Inputs: inputsOf(basisEN, vertical),
		Compute: reading(basisEN, vertical, func(t *Target) []float64 { return ordinates(t, 0.9*0.25*gEN, times...) })}
	for i, y := range []float64{2.0 / 3, 2.5 / 1.5, 2.5 / 1.5, 2.5 / 1.5 * 0.15 / 0.5, 2.5 / 1.5 * 0.15, 0.2} {
		v.Wants = append(v.Wants, exact(fmt.Sprintf("S_vd/a_vg at %v s", times[i]), y, ""))
	}
	return append(cases, v,
		published.Case{ID: "ground-displacement", Title: "Design ground displacement", Source: ofEN("Eq. 3.12"), Origin: published.Computed, Inputs: inputsOf(basisEN, in),
			Wants:   []published.Want{exact("d_g", 73.575, "mm")},
			Compute: reading(basisEN, in, func(t *Target) []float64 { return []float64{1000 * values(t, "d_g")[0]} })},
		published.Case{ID: "lower-bound", Title: "Period from which the lower bound of the design spectrum governs", Source: ofEN("3.2.2.5(4)"), Origin: published.Computed, Inputs: inputsOf(basisEN, design),
			Wants:   []published.Want{published.Printed("T_beta", "2.236", "s"), exact("number of branches", 5, "")},
			Compute: reading(basisEN, design, func(t *Target) []float64 { return append(values(t, "T_beta"), float64(len(t.Branches))) })})
}
