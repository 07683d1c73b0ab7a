package standard

import (
	"fmt"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
)

const basisEN = "EN 1998-1:2004"

// columnsEN are S_e/a_g for 5 % damping at periodsEN, by type and ground.
var periodsEN = []float64{0, 0.02, 0.05, 0.1, 0.15, 0.2, 0.25, 0.3, 0.4, 0.5, 0.6, 0.8, 1.0, 1.2, 1.5, 2.0, 3.0, 4.0}

var columnsEN = []struct{ kind, ground, digits string }{
	{"1", "A", "1 1.2 1.5 2 2.5 2.5 2.5 2.5 2.5 2 1.66667 1.25 1 0.833333 0.666667 0.5 0.222222 0.125"},
	{"1", "B", "1.2 1.44 1.8 2.4 3 3 3 3 3 3 2.5 1.875 1.5 1.25 1 0.75 0.333333 0.1875"},
	{"1", "C", "1.15 1.3225 1.58125 2.0125 2.44375 2.875 2.875 2.875 2.875 2.875 2.875 2.15625 1.725 1.4375 1.15 0.8625 0.383333 0.215625"},
	{"1", "D", "1.35 1.5525 1.85625 2.3625 2.86875 3.375 3.375 3.375 3.375 3.375 3.375 3.375 2.7 2.25 1.8 1.35 0.6 0.3375"},
	{"1", "E", "1.4 1.68 2.1 2.8 3.5 3.5 3.5 3.5 3.5 3.5 2.91667 2.1875 1.75 1.45833 1.16667 0.875 0.388889 0.21875"},
	{"2", "A", "1 1.6 2.5 2.5 2.5 2.5 2.5 2.08333 1.5625 1.25 1.04167 0.78125 0.625 0.520833 0.333333 0.1875 0.0833333 0.046875"},
	{"2", "B", "1.35 2.16 3.375 3.375 3.375 3.375 3.375 2.8125 2.10938 1.6875 1.40625 1.05469 0.84375 0.703125 0.45 0.253125 0.1125 0.0632812"},
	{"2", "C", "1.5 1.95 2.625 3.75 3.75 3.75 3.75 3.125 2.34375 1.875 1.5625 1.17188 0.9375 0.78125 0.5 0.28125 0.125 0.0703125"},
	{"2", "D", "1.8 2.34 3.15 4.5 4.5 4.5 4.5 4.5 3.375 2.7 2.25 1.6875 1.35 1.125 0.72 0.405 0.18 0.10125"},
	{"2", "E", "1.6 2.56 4 4 4 4 4 3.33333 2.5 2 1.66667 1.25 1 0.833333 0.533333 0.3 0.133333 0.075"},
}

// gEN is the acceleration of gravity of the worked example.
const gEN = 9.81

func elasticEN(kind, ground string, ag float64) Given {
	return Given{Numbers: map[string]float64{"a_g": ag}, Texts: map[string]string{"type": kind, "ground": ground}}
}

// with adds numbers and the word for the spectrum.
func (in Given) with(spectrum string, numbers map[string]float64) Given {
	out := in.clone()
	if spectrum != "" {
		out.Texts["spectrum"] = spectrum
	}
	for k, x := range numbers {
		out.Numbers[k] = x
	}
	return out
}

// publishedEN are the cases of EN 1998-1 by table and formula.
func publishedEN() []published.Case {
	var cases []published.Case
	for _, c := range columnsEN {
		in := elasticEN(c.kind, c.ground, 2)
		cases = append(cases, published.Case{
			ID: "elastic-" + c.kind + strings.ToLower(c.ground), Title: "Elastic spectrum of type " + c.kind + " on ground " + c.ground + ", over a_g",
			Source: ofEN("3.2.2.2"), Origin: published.Computed, Inputs: inputsOf(basisEN, in),
			Wants:   texts(published.Rounded, "", at("S_e/a_g", periodsEN...), strings.Fields(c.digits)),
			Compute: reading(basisEN, in, func(t *Target) []float64 { return ordinates(t, 2, periodsEN...) }),
		})
	}
	periods := []float64{0, 0.02, 0.05, 0.15, 0.2, 0.5, 1, 2, 4}
	for _, v := range []struct{ kind, digits string }{
		{"1", "0.9 1.62 2.7 2.7 2.025 0.81 0.405 0.10125 0.0253125"},
		{"2", "0.45 0.81 1.35 1.35 1.0125 0.405 0.2025 0.050625 0.01265625"},
	} {
		in := elasticEN(v.kind, "D", 2).with("vertical", nil)
		cases = append(cases, published.Case{
			ID: "vertical-en-" + v.kind, Title: "Vertical elastic spectrum of type " + v.kind + ", over a_g", Source: ofEN("3.2.2.3"), Origin: published.Computed, Inputs: inputsOf(basisEN, in),
			Wants: texts(published.Rounded, "", at("S_ve/a_g", periods...), strings.Fields(v.digits)), Compute: reading(basisEN, in, func(t *Target) []float64 { return ordinates(t, 2, periods...) }),
		})
	}
	frame := Given{Numbers: map[string]float64{"a_gR": 0.3 * gEN, "gamma_I": 1.2, "q": 4}, Texts: map[string]string{"type": "1", "ground": "C", "spectrum": "design"}}
	return append(cases, groundCase("1", cite.To("TCVN 9386:2012", ""), published.Read), groundCase("2", ofEN("Table 3.3"), published.Memory), etaCase(), gammaCase(), published.Case{
		ID: "five-storeys-en", Title: "Design ordinate of a five-storey building, q = 4", Source: ofEN("Eq. 3.14"), Origin: published.Computed, Inputs: inputsOf(basisEN, frame),
		Wants:   []published.Want{published.Rounded("S_d(0.57164934 s)", "0.25875", "g")},
		Compute: reading(basisEN, frame, func(t *Target) []float64 { return ordinates(t, gEN, 0.57164934) }),
	})
}

// groundCase are S, T_B, T_C and T_D of one type, ground by ground.
func groundCase(kind string, source cite.Ref, origin published.Origin) published.Case {
	digits := map[string]string{
		"1": "1.0 0.15 0.4 2.0 1.2 0.15 0.5 2.0 1.15 0.20 0.6 2.0 1.35 0.20 0.8 2.0 1.4 0.15 0.5 2.0",
		"2": "1.0 0.05 0.25 1.2 1.35 0.05 0.25 1.2 1.5 0.10 0.25 1.2 1.8 0.10 0.30 1.2 1.6 0.05 0.25 1.2",
	}[kind]
	grounds, symbols := []string{"A", "B", "C", "D", "E"}, []string{"S", "T_B", "T_C", "T_D"}
	var names []string
	for _, ground := range grounds {
		for _, s := range symbols {
			names = append(names, s+" on ground "+ground)
		}
	}
	return published.Case{ID: "parameters-en-" + kind, Title: "Soil factor and corner periods of type " + kind + ", grounds A to E", Source: source, Origin: origin,
		Wants: texts(published.Rounded, "", names, strings.Fields(digits)),
		Compute: func() ([]float64, error) {
			var out []float64
			for _, ground := range grounds {
				t, err := Build(basisEN, elasticEN(kind, ground, 2))
				if err != nil {
					return nil, err
				}
				out = append(out, values(t, symbols...)...)
			}
			return out, nil
		}}
}

func etaCase() published.Case {
	c := published.Case{ID: "eta", Title: "Damping correction factor", Source: ofEN("Eq. 3.6"), Origin: published.Computed}
	ratios := []float64{0.5, 1, 2, 3, 5, 7, 10, 15, 20, 25, 28.0578512, 30, 50}
	for i, digits := range strings.Fields("1.34839972 1.29099445 1.19522861 1.11803399 1 0.91287093 0.81649658 0.70710678 0.63245553 0.57735027 0.55000000 0.55 0.55") {
		c.Wants = append(c.Wants, published.Rounded(fmt.Sprintf("eta at %v %%", ratios[i]), digits, ""))
	}
	c.Compute = func() ([]float64, error) {
		var out []float64
		for _, xi := range ratios {
			t, err := Build(basisEN, elasticEN("1", "A", 2).with("", map[string]float64{"xi": xi / 100}))
			if err != nil {
				return nil, err
			}
			out = append(out, values(t, "eta")...)
		}
		return out, nil
	}
	return c
}

func gammaCase() published.Case {
	c := published.Case{ID: "importance-factor-en", Title: "Design ground acceleration over the reference one, importance classes I to IV", Source: ofEN("4.2.5(5)"), Origin: published.Memory}
	for i, y := range []float64{0.8, 1, 1.2, 1.4} {
		c.Wants = append(c.Wants, exact("a_g/a_gR of class "+riskCategories[i], y, ""))
	}
	c.Compute = func() ([]float64, error) {
		var out []float64
		for _, class := range riskCategories {
			t, err := Build(basisEN, Given{Numbers: map[string]float64{"a_gR": quantity.Gravity}, Texts: map[string]string{"type": "1", "ground": "A", "importance": class}})
			if err != nil {
				return nil, err
			}
			out = append(out, values(t, "a_g")[0]/quantity.Gravity)
		}
		return out, nil
	}
	return c
}
