package standard

import (
	"fmt"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
)

// publishedSites are the tables of ASCE/SEI 7-16: site coefficients, design
// category, importance.
func publishedSites() []published.Case {
	var cases []published.Case
	type column struct {
		x    float64
		text string
	}
	fa := func(ss float64, class string) Given {
		return Given{Numbers: map[string]float64{"S_S": ss, "S_1": 0.1, "T_L": 20}, Texts: map[string]string{"site": class}}
	}
	fv := func(s1 float64, class string) Given {
		return Given{Numbers: map[string]float64{"S_S": 0.7, "S_1": s1, "T_L": 20}, Texts: map[string]string{"site": class}}
	}
	add := func(id, title, symbol, over string, source cite.Ref, origin published.Origin, want func(name, text, unit string) published.Want, given func(float64) Given, columns []column) {
		c := published.Case{ID: id, Title: title, Source: source, Origin: origin}
		for _, k := range columns {
			c.Wants = append(c.Wants, want(fmt.Sprintf("%s at %s = %v", symbol, over, k.x), k.text, ""))
		}
		c.Compute = func() ([]float64, error) {
			var out []float64
			for _, k := range columns {
				t, err := Build("ASCE/SEI 7-16", given(k.x))
				if err != nil {
					return nil, err
				}
				out = append(out, values(t, symbol)...)
			}
			return out, nil
		}
		cases = append(cases, c)
	}
	row := func(from []float64, digits string) []column {
		var out []column
		for i, text := range strings.Fields(digits) {
			out = append(out, column{from[i], text})
		}
		return out
	}
	ss, s1 := []float64{0.25, 0.5, 0.75, 1, 1.25, 1.5, 2.4}, []float64{0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 1.1}
	for _, r := range [][3]string{
		{"A", "0.8 0.8 0.8 0.8 0.8 0.8 0.8", "0.8 0.8 0.8 0.8 0.8 0.8 0.8"},
		{"B", "0.9 0.9 0.9 0.9 0.9 0.9 0.9", "0.8 0.8 0.8 0.8 0.8 0.8 0.8"},
		{"C", "1.3 1.3 1.2 1.2 1.2 1.2 1.2", "1.5 1.5 1.5 1.5 1.5 1.4 1.4"},
		{"D", "1.6 1.4 1.2 1.1 1.0 1.0 1.0", "2.4 2.2 2.0 1.9 1.8 1.7 1.7"},
		{"E", "2.4 1.7 1.3", "4.2 3.3 2.8 2.4 2.2 2.0 2.0"},
	} {
		class, low := r[0], strings.ToLower(r[0])
		add("site-coefficient-fa-"+low, "Short-period site coefficient, site class "+class, "F_a", "S_S", of716("Table 11.4-1"), published.Memory, published.Rounded,
			func(x float64) Given { return fa(x, class) }, row(ss, r[1]))
		add("site-coefficient-fv-"+low, "Long-period site coefficient, site class "+class, "F_v", "S_1", of716("Table 11.4-2"), published.Memory, published.Rounded,
			func(x float64) Given { return fv(x, class) }, row(s1, r[2]))
	}
	add("site-interpolation", "Site coefficients between columns of the table, class D (the older table has the same row here)", "F_a", "S_S", cite.To("USGS design reports", ""), published.Read, published.Printed,
		func(x float64) Given { return fa(x, "D") }, []column{{0.970, "1.112"}, {0.943, "1.123"}, {0.762, "1.195"}})
	add("site-default", "Site class not determined: not less than 1.2", "F_a", "S_S", cite.To("2018 IBC", "1613.2.3"), published.Read, published.Rounded,
		func(x float64) Given { return fa(x, "default") }, []column{{0.25, "1.6"}, {0.75, "1.2"}, {0.9, "1.2"}, {1.5, "1.2"}})
	add("site-estimated", "Site class B without measured shear wave velocity", "F_a", "S_S", cite.To("2018 IBC", "1613.2.2"), published.Read, published.Rounded,
		func(x float64) Given { return fa(x, "B estimated") }, []column{{0.25, "1.0"}, {1.5, "1.0"}})
	add("site-exception-1", "Site class E at S_S of 1.0 and more under exception 1: F_a of class C", "F_a", "S_S", of716("11.4.8"), published.Memory, published.Rounded,
		func(x float64) Given {
			in := fa(x, "E")
			in.Texts["site_specific"] = "exception"
			return in
		}, []column{{1, "1.2"}, {1.5, "1.2"}})
	return append(cases, designCategories(), importanceFactors(), supplement3())
}

// designCategories has a category as its number: A is 1.
func designCategories() published.Case {
	c := published.Case{ID: "design-category", Title: "Seismic design category (A is 1, F is 6), the worse of the two tables", Source: of716("11.6"), Origin: published.Memory}
	rows := []struct {
		sds, sd1, s1 float64
		risk         string
		want         float64
	}{
		{0.166, 0.066, 0.05, "II", 1}, {0.167, 0.066, 0.05, "II", 2}, {0.329, 0.066, 0.05, "IV", 3}, {0.33, 0.066, 0.05, "III", 3}, {0.499, 0.1, 0.05, "IV", 4},
		{0.5, 0.1, 0.05, "I", 4}, {0.166, 0.067, 0.05, "II", 2}, {0.166, 0.133, 0.05, "II", 3}, {0.166, 0.132, 0.05, "IV", 3}, {0.166, 0.2, 0.05, "II", 4},
		{1, 0.6, 0.74, "II", 4}, {1, 0.6, 0.75, "III", 5}, {1, 0.6, 0.75, "IV", 6}, {0.2, 0.1, 0.04, "II", 2},
	}
	for _, r := range rows {
		c.Wants = append(c.Wants, exact(fmt.Sprintf("S_DS %v, S_D1 %v, S_1 %v, risk %s", r.sds, r.sd1, r.s1, r.risk), r.want, ""))
	}
	c.Compute = func() ([]float64, error) {
		var out []float64
		for _, r := range rows {
			t, err := Build("ASCE/SEI 7-16", Given{Numbers: map[string]float64{"S_DS": r.sds, "S_D1": r.sd1, "S_1": r.s1, "T_L": 8}, Texts: map[string]string{"risk": r.risk}})
			if err != nil {
				return nil, err
			}
			p, _ := t.Parameter("category")
			out = append(out, float64(strings.Index("ABCDEF", p.Text)+1))
		}
		return out, nil
	}
	return c
}

func importanceFactors() published.Case {
	c := published.Case{ID: "importance-factor", Title: "Importance factor of risk categories I to IV", Source: of716("Table 1.5-2"), Origin: published.Memory}
	for i, y := range []float64{1, 1, 1.25, 1.5} {
		c.Wants = append(c.Wants, exact("I_e of "+riskCategories[i], y, ""))
	}
	c.Compute = func() ([]float64, error) {
		var out []float64
		for _, risk := range riskCategories {
			t, err := Build("ASCE/SEI 7-22", Given{Numbers: map[string]float64{"S_DS": 1, "S_D1": 0.6, "S_1": 0.6, "T_L": 8}, Texts: map[string]string{"risk": risk}})
			if err != nil {
				return nil, err
			}
			out = append(out, values(t, "I_e")...)
		}
		return out, nil
	}
	return c
}

// supplement3 is the first class D example with S_M1 raised by half.
func supplement3() published.Case {
	in := Given{Numbers: map[string]float64{"S_S": 1.5, "S_1": 0.6, "T_L": 8}, Texts: map[string]string{"site": "D", "site_specific": "supplement 3"}}
	return published.Case{ID: "supplement-3", Title: "Site class D with S_M1 raised by 50 %", Source: of716("11.4.8, Supplement 3"), Origin: published.Memory, Inputs: inputsOf("ASCE/SEI 7-16", in),
		Wants: []published.Want{exact("S_M1", 1.53, ""), exact("S_D1", 1.02, ""), exact("T_S", 1.02, "s"), exact("S_a(2 s)", 0.51, "g")},
		Compute: reading("ASCE/SEI 7-16", in, func(t *Target) []float64 {
			return append(values(t, "S_M1", "S_D1", "T_S"), ordinates(t, quantity.Gravity, 2)...)
		})}
}

// publishedVertical are the vertical spectrum of ASCE/SEI 7-16 and its table.
func publishedVertical() []published.Case {
	periods := []float64{0, 0.03, 0.04, 0.05, 0.15, 0.2, 0.3, 0.5, 1, 2}
	// class C at S_MS = 2 has C_v = 1.3; S_M1 is small enough for the lower bound
	// to stay away. The reference has S_MS = 1: half of this.
	in := Given{Numbers: map[string]float64{"S_MS": 2, "S_M1": 0.2, "T_L": 8}, Texts: map[string]string{"site": "C", "spectrum": "MCE_R vertical"}}
	spectrum := published.Case{ID: "vertical-716", Title: "Vertical MCE_R spectrum over S_MS, C_v = 1.3", Source: of716("11.9.2"), Origin: published.Computed, Inputs: inputsOf("ASCE/SEI 7-16", in),
		Wants:   texts(published.Rounded, "", at("S_aMv/S_MS", periods...), strings.Fields("0.39 0.52 0.78 1.04 1.04 0.83816455 0.61838770 0.42157445 0.25066967 0.14904908")),
		Compute: reading("ASCE/SEI 7-16", in, func(t *Target) []float64 { return ordinates(t, 2*quantity.Gravity, periods...) })}
	table := published.Case{ID: "vertical-coefficient", Title: "Vertical coefficient of 7-16", Source: of716("Table 11.9-1"), Origin: published.Memory}
	type row struct {
		site string
		sms  float64
	}
	var rows []row
	for i, site := range []string{"B", "C", "D"} {
		for j, sms := range []float64{2.5, 2, 1, 0.6, 0.3, 0.2, 0.1} {
			rows = append(rows, row{site, sms})
			want := [][]string{strings.Fields("0.9 0.9 0.9 0.9 0.8 0.7 0.7"), strings.Fields("1.3 1.3 1.1 1.0 0.8 0.7 0.7"), strings.Fields("1.5 1.5 1.3 1.1 0.9 0.7 0.7")}[i][j]
			table.Wants = append(table.Wants, published.Rounded(fmt.Sprintf("class %s, S_MS %v", site, sms), want, ""))
		}
	}
	table.Compute = func() ([]float64, error) {
		var out []float64
		for _, r := range rows {
			t, err := Build("ASCE/SEI 7-16", Given{Numbers: map[string]float64{"S_MS": r.sms, "S_M1": 0.05, "S_1": 0.05, "T_L": 8}, Texts: map[string]string{"site": r.site, "spectrum": "vertical"}})
			if err != nil {
				return nil, err
			}
			out = append(out, values(t, "C_v")...)
		}
		return out, nil
	}
	return []published.Case{spectrum, table}
}
