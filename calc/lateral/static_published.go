package lateral

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
	"quoin/calc/standard"
	"quoin/calc/structure"
)

// publishedStatic are the published cases of the static procedures.
func publishedStatic() []published.Case {
	return slices.Concat(periodCases(), ruleCases(), ladderCases(), masonryCases(), steelFrameCases(), chainCases(), europeanCases())
}

var (
	kip  = quantity.MustUnit("kip").Scale
	foot = quantity.MustUnit("ft").Scale
	inch = quantity.MustUnit("in").Scale
)

// each makes a want of every text, named NAME_1, NAME_2 ... from the first of the
// labels on.
func each(want func(name, text, unit string) published.Want, name, unit, texts string) []published.Want {
	var out []published.Want
	for i, text := range strings.Fields(texts) {
		out = append(out, want(fmt.Sprintf("%s[%d]", name, i+1), text, unit))
	}
	return out
}

// within is a want of a source that carried rounded numbers itself.
func within(tol float64, why string) func(name, text, unit string) published.Want {
	return func(name, text, unit string) published.Want {
		w := published.Printed(name, text, unit)
		w.Tol += tol
		w.Why = why
		return w
	}
}

// in gives numbers in a unit, lowest first turned to highest first.
func in(x []float64, unit float64) []float64 {
	out := make([]float64, len(x))
	for i, v := range x {
		out[len(x)-1-i] = v / unit
	}
	return out
}

// kips is a shear building in kip, ft and kip/in, given from the top down.
func kips(weights, heights, stiffness []float64) (*structure.Model, error) {
	var storeys []structure.Storey
	for i := len(weights) - 1; i >= 0; i-- {
		k := 100.0
		if stiffness != nil {
			k = stiffness[i]
		}
		storeys = append(storeys, structure.Storey{Level: fmt.Sprint(len(weights) - i), Height: heights[i] * foot, Weight: weights[i] * kip, Stiffness: k * kip / inch})
	}
	return structure.Shear(storeys, 0)
}

// spectrum722 is a two-period design spectrum; s1 below 0: not stated.
func spectrum722(sds, sd1, s1, tl float64) (*standard.Target, error) {
	numbers := map[string]float64{"S_DS": sds, "S_D1": sd1, "T_L": tl}
	if s1 >= 0 {
		numbers["S_1"] = s1
	}
	return standard.Build("ASCE/SEI 7-22", standard.Given{Numbers: numbers})
}

func of716(clause string) cite.Ref { return cite.To("ASCE/SEI 7-16", clause) }

// periodCases: C_u, T_a and k.
func periodCases() []published.Case {
	sd1 := []float64{0.5, 0.4, 0.3, 0.2, 0.15, 0.1, 0.05, 0.125, 0.18, 0.25}
	limit := published.Case{ID: "period-upper-limit", Title: "Coefficient for the upper limit on the period", Source: of716("Table 12.8-1"), Origin: published.Memory,
		Wants: each(published.Rounded, "C_u", "", "1.4 1.4 1.4 1.5 1.6 1.7 1.7 1.65 1.54 1.45")}
	for i, x := range sd1 {
		limit.Inputs = append(limit.Inputs, published.Input{Name: fmt.Sprintf("S_D1[%d]", i+1), Value: x})
	}
	limit.Compute = func() ([]float64, error) {
		var out []float64
		for _, x := range sd1 {
			out = append(out, upperLimit(x))
		}
		return out, nil
	}

	approximatePeriod := func(id, unit string, hn float64, texts string) published.Case {
		c := published.Case{ID: id, Title: "Approximate period by kind of structure, h_n in " + unit, Source: of716("Eq. 12.8-7"), Origin: published.Computed,
			Inputs: []published.Input{{Name: "h_n", Value: hn, Unit: unit}}}
		for i, text := range strings.Fields(texts) {
			c.Wants = append(c.Wants, published.Rounded("T_a, "+asceSystems[i].Name, text, "s"))
		}
		c.Compute = func() ([]float64, error) {
			var out []float64
			for _, s := range asceSystems {
				got := ASCE{System: s.Name, HeightUnit: unit}
				r := &Static{Hn: quantity.MustUnit(unit).To(hn)}
				if err := got.period(r); err != nil {
					return nil, err
				}
				out = append(out, r.Ta)
			}
			return out, nil
		}
		return c
	}

	k := published.Case{ID: "distribution-exponent", Title: "Exponent of the vertical distribution", Source: cite.To("Brockenbrough", "p. 4.30"), Origin: published.Read,
		Wants: each(published.Rounded, "k", "", "1 1 1.5 2 2")}
	for i, T := range []float64{0.2, 0.5, 1.5, 2.5, 4} {
		k.Inputs = append(k.Inputs, published.Input{Name: fmt.Sprintf("T[%d]", i+1), Value: T, Unit: "s"})
	}
	k.Compute = func() ([]float64, error) {
		var out []float64
		for _, in := range k.Inputs {
			out = append(out, exponent(in.Value))
		}
		return out, nil
	}
	return []published.Case{limit,
		approximatePeriod("period-approximate-ft", "ft", 100, "1.11470 1.009532 0.948683 0.948683 0.632456"),
		approximatePeriod("period-approximate-m", "m", 30.48, "1.114168 1.009251 0.948263 0.948263 0.633040"), k}
}

// ladderCases: every limb of C_s governs once.
func ladderCases() []published.Case {
	var out []published.Case
	for _, r := range []struct {
		id                           string
		sds, sd1, T, rr, ie, s1, tl  float64
		plateau, cap, floor, c, caps string
	}{
		{"plateau", 1, .6, .4, 8, 1, .5, 8, "0.125", "0.1875", "0.044", "0.125", "C_s_max"},
		{"velocity", 1, .6, 1, 8, 1, .5, 8, "0.125", "0.075", "0.044", "0.075", "C_s_max"},
		{"minimum", 1, .6, 2.5, 8, 1, .5, 8, "0.125", "0.03", "0.044", "0.044", "C_s_max"},
		{"minimum-near-fault", 1, .6, 2.5, 8, 1, .75, 8, "0.125", "0.03", "0.046875", "0.046875", "C_s_max"},
		{"long-period", 1, .6, 9, 3, 1.25, .5, 8, "0.416667", "0.02469136", "0.055", "0.055", "C_s_max"},
		{"least-of-all", .15, .06, 1.5, 3, 1, .05, 6, "0.05", "0.01333333", "0.01", "0.01333333", "C_s_max"},
	} {
		out = append(out, published.Case{
			ID: "coefficient-" + r.id, Title: "Limbs of the seismic response coefficient: " + r.id, Source: of716("12.8.1.1"), Origin: published.Computed,
			Inputs: []published.Input{{Name: "S_DS", Value: r.sds}, {Name: "S_D1", Value: r.sd1}, {Name: "T", Value: r.T, Unit: "s"}, {Name: "R", Value: r.rr},
				{Name: "I_e", Value: r.ie}, {Name: "S_1", Value: r.s1}, {Name: "T_L", Value: r.tl, Unit: "s"}},
			Wants: []published.Want{published.Rounded("upper limit at short periods", r.plateau, ""), published.Rounded("upper limit up to T_L", r.cap, ""),
				published.Rounded("lower limit", r.floor, ""), published.Rounded("C_s", r.c, "")},
			Compute: func() ([]float64, error) {
				t, err := spectrum722(r.sds, r.sd1, r.s1, r.tl)
				if err != nil {
					return nil, err
				}
				g, err := ground(t)
				if err != nil {
					return nil, err
				}
				limbs, cs, _, err := g.coefficient(r.T, r.rr, r.ie)
				low := max(limbValue(limbs, "C_s_min"), limbValue(limbs, "C_s_min_1"))
				return []float64{limbValue(limbs, "C_s_plateau"), limbValue(limbs, r.caps), low, cs}, err
			},
		})
	}
	return out
}

// limbValue is the value of the limb with a symbol that applies; 0 without one.
func limbValue(limbs []Limb, symbol string) float64 {
	for _, l := range limbs {
		if l.Symbol == symbol && l.Applies {
			return l.Value
		}
	}
	return 0
}
