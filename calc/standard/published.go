package standard

import (
	"fmt"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
)

// Published is every published case of this package.
func Published() []published.Case {
	masonry := cite.To("Taly", "Example 7.11")
	cases := []published.Case{
		corner("masonry-building", "Design parameters of a masonry building, as printed", masonry, published.Read,
			1.358*0.552, 1.914*0.243, 4, published.Printed, "0.5", "0.31", "", ""),
		corner("masonry-building-exact", "Design spectrum of a masonry building, full precision", masonry, published.Computed,
			1.3584*0.552, 1.914*0.243, 4, published.Rounded, "0.4998912", "0.310068", "0.12405419", "0.62027097"),
		corner("steel-frame", "Design spectrum of a twelve-storey steel frame", cite.To("FEMA 451", "steel frame example"), published.Memory,
			1.25, 0.56, 8, published.Printed, "0.833333", "0.373333", "0.0896", "0.448"),
	}
	for _, r := range []struct {
		id           string
		sms, sm1, tl float64
		texts        []string // S_DS S_D1 T_0 T_S Sa(0) Sa(1) Sa(T_L) Sa(T_L + 2)
	}{
		{"d-8", 1.5, 1.02, 8, []string{"1", "0.68", "0.136", "0.68", "0.4", "0.68", "0.085", "0.0544"}},
		{"c-12", 0.52, 0.225, 12, []string{"0.34666667", "0.15", "0.086538462", "0.43269231", "0.13866667", "0.15", "0.0125", "0.0091836735"}},
		{"d-6", 0.986, 0.6336, 6, []string{"0.65733333", "0.4224", "0.12851927", "0.64259635", "0.26293333", "0.4224", "0.0704", "0.0396"}},
		{"c-8", 1.32, 0.675, 8, []string{"0.88", "0.45", "0.10227273", "0.51136364", "0.352", "0.45", "0.05625", "0.036"}},
	} {
		names := []string{"S_DS", "S_D1", "T_0", "T_S", "S_a(0)", "S_a(1 s)", "S_a(T_L)", "S_a(T_L + 2 s)"}
		units := []string{"", "", "s", "s", "g", "g", "g", "g"}
		c := published.Case{
			ID: "two-period-" + r.id, Title: fmt.Sprintf("Two-period spectrum, S_MS %g, S_M1 %g, T_L %g s", r.sms, r.sm1, r.tl),
			Source: cite.To("ASCE/SEI 7-22", "11.4.5.2"), Origin: published.Computed, Inputs: inputs(r.sms, r.sm1, r.tl),
			Compute: func() ([]float64, error) {
				t, err := twoPeriod(r.sms, r.sm1, r.tl)
				if err != nil {
					return nil, err
				}
				out := values(t, "S_DS", "S_D1", "T_0", "T_S")
				sa, err := t.Series([]float64{0, 1, r.tl, r.tl + 2})
				for _, a := range sa {
					out = append(out, a/quantity.Gravity)
				}
				return out, err
			},
		}
		for i, text := range r.texts {
			w := published.Rounded(names[i], text, units[i])
			if len(text) < 9 {
				w.Tol, w.Why = 1e-12, "exact decimal number"
			}
			c.Wants = append(c.Wants, w)
		}
		cases = append(cases, c)
	}
	return append(cases, rows())
}

// rows is an invented spectrum at the 22 periods of the multi-period form, read
// as a table.
func rows() published.Case {
	T := []float64{0, 0.01, 0.02, 0.03, 0.05, 0.075, 0.1, 0.15, 0.2, 0.25, 0.3, 0.4, 0.5, 0.75, 1, 1.5, 2, 3, 4, 5, 7.5, 10}
	sa := []float64{.45, .45, .46, .49, .60, .75, .88, 1.02, 1.10, 1.14, 1.15, 1.12, 1.05, .85, .70, .50, .38, .25, .18, .14, .085, .05}
	exact := func(name string, value float64) published.Want {
		return published.Want{Name: name, Value: value, Unit: "g", Tol: 1e-12, Why: "linear interpolation, exact decimal number"}
	}
	c := published.Case{
		ID: "table-22-periods", Title: "Linear interpolation between rows of a spectrum",
		Source: cite.To("ASCE/SEI 7-22", "11.4.5.1"), Origin: published.Computed,
		Wants: []published.Want{exact("S_a(0)", 0.45), exact("S_a(0.3 s)", 1.15), exact("S_a(0.35 s)", 1.135), exact("S_a(1.25 s)", 0.6), exact("2 S_a(2 s)", 0.76), exact("S_a(10 s)", 0.05)},
		Compute: func() ([]float64, error) {
			psa := make([]float64, len(sa))
			for i := range sa {
				psa[i] = sa[i] * quantity.Gravity
			}
			t, err := Table(T, psa, 0.05)
			if err != nil {
				return nil, err
			}
			out, err := t.Series([]float64{0, 0.3, 0.35, 1.25, 2, 10})
			for i := range out {
				out[i] /= quantity.Gravity
			}
			if err == nil {
				out[4] *= 2
			}
			return out, err
		},
	}
	for i := range T {
		c.Inputs = append(c.Inputs, published.Input{Name: fmt.Sprintf("S_a(%g s)", T[i]), Value: sa[i], Unit: "g"})
	}
	return c
}

// corner is a case that wants S_DS and S_D1 and, where given, T_0 and T_S.
func corner(id, title string, source cite.Ref, origin published.Origin, sms, sm1, tl float64,
	want func(name, text, unit string) published.Want, sds, sd1, t0, ts string) published.Case {
	c := published.Case{ID: id, Title: title, Source: source, Origin: origin, Inputs: inputs(sms, sm1, tl)}
	symbols := []string{"S_DS", "S_D1"}
	c.Wants = []published.Want{want("S_DS", sds, ""), want("S_D1", sd1, "")}
	if t0 != "" {
		symbols = append(symbols, "T_0", "T_S")
		c.Wants = append(c.Wants, want("T_0", t0, "s"), want("T_S", ts, "s"))
	}
	c.Compute = func() ([]float64, error) {
		t, err := twoPeriod(sms, sm1, tl)
		if err != nil {
			return nil, err
		}
		return values(t, symbols...), nil
	}
	return c
}

func inputs(sms, sm1, tl float64) []published.Input {
	return []published.Input{{Name: "S_MS", Value: sms}, {Name: "S_M1", Value: sm1}, {Name: "T_L", Value: tl, Unit: "s"}}
}

func twoPeriod(sms, sm1, tl float64) (*Target, error) {
	return Build("ASCE/SEI 7-22", Given{Numbers: map[string]float64{"S_MS": sms, "S_M1": sm1, "T_L": tl}})
}

func values(t *Target, symbols ...string) []float64 {
	var out []float64
	for _, s := range symbols {
		p, ok := t.Parameter(s)
		if !ok {
			panic("standard: no parameter " + s)
		}
		out = append(out, p.Value)
	}
	return out
}
