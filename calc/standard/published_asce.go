package standard

import (
	"fmt"
	"slices"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
)

// synthetic722 are invented ordinates of a design spectrum at the 22 periods, g.
var synthetic722 = []float64{.45, .45, .46, .49, .60, .75, .88, 1.02, 1.10, 1.14, 1.15, 1.12, 1.05, .85, .70, .50, .38, .25, .18, .14, .085, .05}

// multi722 is a multi-period spectrum of the synthetic ordinates with another
// one at 1 s.
func multi722(one float64, of string, factor float64) Given {
	psa := make([]float64, len(synthetic722))
	for i, y := range synthetic722 {
		if periods722[i] == 1 {
			y = one
		}
		psa[i] = factor * y * quantity.Gravity
	}
	return Given{Numbers: map[string]float64{"T_L": 12}, Texts: map[string]string{"site": "D", "ordinates_of": of},
		Columns: map[string][]float64{"T": periods722, "PSA": psa}}
}

// seven are the values that a two-period example ends in, with their names.
var (
	symbols7 = []string{"S_DS", "S_D1", "T_0", "T_S"}
	names7   = []string{"S_DS", "S_D1", "T_0", "T_S", "S_a(0)", "S_a(1 s)", "S_a(T_L)", "S_a(T_L + 2 s)"}
)

// examplesC1 are the examples computed from the tables of 7-16.
var examplesC1 = []struct {
	id, site                 string
	ss, s1, fa, fv, sms, sm1 float64
	tl                       float64
	texts                    []string
}{
	{"d-8", "D", 1.5, 0.6, 1, 1.7, 1.5, 1.02, 8, []string{"1", "0.68", "0.136", "0.68", "0.4", "0.68", "0.085", "0.0544"}},
	{"c-12", "C", 0.4, 0.15, 1.3, 1.5, 0.52, 0.225, 12, []string{"0.34666667", "0.15", "0.086538462", "0.43269231", "0.13866667", "0.15", "0.0125", "0.0091836735"}},
	{"d-6", "D", 0.85, 0.32, 1.16, 1.98, 0.986, 0.6336, 6, []string{"0.65733333", "0.4224", "0.12851927", "0.64259635", "0.26293333", "0.4224", "0.0704", "0.0396"}},
	{"c-8", "C", 1.1, 0.45, 1.2, 1.5, 1.32, 0.675, 8, []string{"0.88", "0.45", "0.10227273", "0.51136364", "0.352", "0.45", "0.05625", "0.036"}},
}

// end are the values of symbols7 and the ordinates of names7.
func end(tl float64) func(t *Target) []float64 {
	return func(t *Target) []float64 {
		return append(values(t, symbols7...), ordinates(t, quantity.Gravity, 0, 1, tl, tl+2)...)
	}
}

// published722 are the cases of ASCE/SEI 7-22.
func published722() []published.Case {
	const basis = "ASCE/SEI 7-22"
	var cases []published.Case
	for _, e := range examplesC1 {
		in := Given{Numbers: map[string]float64{"S_MS": e.sms, "S_M1": e.sm1, "T_L": e.tl}}
		cases = append(cases, published.Case{
			ID: "two-period-" + e.id, Title: fmt.Sprintf("Two-period spectrum, S_MS %g, S_M1 %g, T_L %g s", e.sms, e.sm1, e.tl),
			Source: cite.To(basis, "11.4.5.2"), Origin: published.Computed, Inputs: inputsOf(basis, in),
			Wants: texts(published.Rounded, "", names7, e.texts), Compute: reading(basis, in, end(e.tl)),
		})
	}
	plateau := func(t *Target) []float64 { return values(t, "S_DS", "S_D1", "S_MS", "S_M1") }
	names := []string{"S_DS", "S_D1", "S_MS", "S_M1"}
	for _, e := range []struct {
		id, of string
		one    float64
		factor float64
		want   []string
	}{
		{"multi-period", "design", 0.70, 1, []string{"1.035", "0.70", "1.5525", "1.05"}},
		{"multi-period-mce", "MCE_R", 0.70, 1.5, []string{"1.035", "0.70", "1.5525", "1.05"}},
		{"multi-period-product", "design", 0.65, 1, []string{"1.035", "0.684", "1.5525", "1.026"}},
	} {
		in := multi722(e.one, e.of, e.factor)
		cases = append(cases, published.Case{
			ID: e.id, Title: fmt.Sprintf("Design parameters of a multi-period spectrum, ordinates of the %s spectrum, S_a(1 s) = %g g", e.of, e.one),
			Source: cite.To(basis, "21.4"), Origin: published.Computed, Inputs: inputsOf(basis, in),
			Wants: texts(published.Rounded, "", names, e.want), Compute: reading(basis, in, plateau),
		})
	}
	in := multi722(0.70, "design", 1)
	periods := []float64{0, 0.35, 1.25, 2, 10, 11, 12, 15, 24}
	beyond := published.Case{
		ID: "multi-period-beyond", Title: "Multi-period spectrum between its periods and beyond 10 s, T_L = 12 s",
		Source: cite.To(basis, "11.4.5.1"), Origin: published.Computed, Inputs: inputsOf(basis, in),
		Compute: reading(basis, in, func(t *Target) []float64 { return ordinates(t, quantity.Gravity, periods...) }),
	}
	for i, y := range []float64{0.45, 1.135, 0.6, 0.38, 0.05, 0.05 * 10 / 11, 0.05 * 10 / 12, 0.05 * 10 * 12 / 225, 0.05 * 10 * 12 / 576} {
		beyond.Wants = append(beyond.Wants, exact(at("S_a", periods[i])[0], y, "g"))
	}
	return append(cases, beyond)
}

// published716 are the cases of ASCE/SEI 7-16 from mapped values.
func published716() []published.Case {
	const basis = "ASCE/SEI 7-16"
	var cases []published.Case
	add := func(id, title string, source cite.Ref, origin published.Origin, in Given, read func(*Target) []float64, wants []published.Want) {
		cases = append(cases, published.Case{ID: id, Title: title, Source: source, Origin: origin, Inputs: inputsOf(basis, in), Wants: wants, Compute: reading(basis, in, read)})
	}
	for _, e := range examplesC1 {
		in := Given{Numbers: map[string]float64{"S_S": e.ss, "S_1": e.s1, "T_L": e.tl}, Texts: map[string]string{"site": e.site}}
		symbols := []string{"F_a", "F_v", "S_MS", "S_M1"}
		wants := []published.Want{exact("F_a", e.fa, ""), exact("F_v", e.fv, ""), exact("S_MS", e.sms, ""), exact("S_M1", e.sm1, "")}
		add("mapped-"+e.id, fmt.Sprintf("Spectrum from S_S %g, S_1 %g, site class %s, T_L %g s", e.ss, e.s1, e.site, e.tl), cite.To(basis, "11.4"), published.Computed, in,
			func(t *Target) []float64 { return slices.Concat(values(t, symbols...), end(e.tl)(t)) },
			slices.Concat(wants, texts(published.Rounded, "", names7, e.texts)))
	}
	// older tables, whose coefficients are given
	masonry := Given{Numbers: map[string]float64{"S_S": 0.552, "S_1": 0.243, "F_a": 1.358, "F_v": 1.914, "T_L": 4}}
	add("masonry-building", "Design parameters of a masonry building, as printed", cite.To("Taly", "Example 7.11"), published.Read, masonry,
		func(t *Target) []float64 { return values(t, "S_DS", "S_D1") }, texts(published.Printed, "", symbols7, []string{"0.5", "0.31"}))
	exactly := Given{Numbers: map[string]float64{"S_S": 0.552, "S_1": 0.243, "F_a": 1.3584, "F_v": 1.914, "T_L": 4}}
	add("masonry-building-exact", "Design spectrum of a masonry building, full precision", cite.To("Taly", "Example 7.11"), published.Computed, exactly,
		func(t *Target) []float64 { return values(t, symbols7...) }, texts(published.Rounded, "", symbols7, []string{"0.4998912", "0.310068", "0.12405419", "0.62027097"}))
	steel := Given{Numbers: map[string]float64{"S_S": 1.25, "S_1": 0.40, "F_a": 1, "F_v": 1.4, "T_L": 8}}
	add("steel-frame", "Design spectrum of a twelve-storey steel frame", cite.To("FEMA 451", "steel frame example"), published.Memory, steel,
		func(t *Target) []float64 { return values(t, symbols7...) }, texts(published.Printed, "", symbols7, []string{"0.833333", "0.373333", "0.0896", "0.448"}))
	return cases
}
