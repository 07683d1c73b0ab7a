package lateral

import (
	"fmt"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
)

// publishedDrift is the published cases of drifts.
func publishedDrift() []published.Case {
	return append(append(momentFrame(), driftTables()...), driftRanges()...)
}

// sixStorey is a steel moment frame of six storeys at 13 ft, S_DS 1.0, R 8, as a
// shear building: the storey shears of its equivalent lateral forces, kip, and
// its storey stiffnesses, kip/in, lowest first. The loads are its seismic weights.
func sixStorey(basis string) DriftInput {
	const kip, inch, ft = 4448.2216152605, 0.0254, 0.3048
	in := DriftInput{Basis: basis, Cd: 5.5, Ie: 1, Rho: 1, Beta: []float64{1}, Limit: []float64{0.020}, Simultaneous: true}
	shear := []float64{228.646270155, 221.740817, 204.940049, 175.425810, 131.405739, 71.382391}
	k := []float64{350, 330, 300, 250, 200, 150}
	w := []float64{700, 650, 650, 650, 650, 600}
	u := 0.0
	for i := range k {
		in.Levels = append(in.Levels, fmt.Sprint(i+1))
		in.H, in.Hs = append(in.H, float64(i+1)*13*ft), append(in.Hs, 13*ft)
		in.Shear = append(in.Shear, shear[i]*kip)
		in.Stiffness = append(in.Stiffness, k[i]*kip/inch)
		in.Elastic = append(in.Elastic, in.Shear[i]/in.Stiffness[i])
		u += in.Elastic[i]
		in.Displacement = append(in.Displacement, u)
		above := 0.0
		for _, x := range w[i:] {
			above += x
		}
		in.P = append(in.P, above*kip)
	}
	return in
}

// storeywise are values under names that count storeys down from the top, as the
// tables of calculations do.
func storeywise(name, unit, texts string) []published.Want {
	var out []published.Want
	list := strings.Fields(texts)
	for i, text := range list {
		out = append(out, published.Rounded(fmt.Sprintf("%s, storey %d", name, len(list)-i), text, unit))
	}
	return out
}

func fromTop(x []float64, unit string) []float64 {
	u := quantity.MustUnit(unit)
	var out []float64
	for i := len(x) - 1; i >= 0; i-- {
		out = append(out, u.From(x[i]))
	}
	return out
}

func momentFrame() []published.Case {
	inputs := []published.Input{{Name: "C_d", Value: 5.5}, {Name: "I_e", Value: 1}, {Name: "beta", Value: 1}, {Name: "h_sx", Value: 13, Unit: "ft"}}
	run := func(basis string, columns ...func(*Drift) []float64) func() ([]float64, error) {
		return func() ([]float64, error) {
			d, err := Drifts(sixStorey(basis))
			if err != nil {
				return nil, err
			}
			var out []float64
			for _, c := range columns {
				out = append(out, c(d)...)
			}
			return out, nil
		}
	}
	const elastic, delta = ".47588261 .65702870 .70170324 .68313350 .67194187 .65327506", "2.61735433 3.61365783 3.85936783 3.75723423 3.69568028 3.59301282"
	const ratio, theta = ".01677791 .02316447 .02473954 .02408483 .02369026 .02303213", ".02564103 .04006410 .04871795 .05448718 .06216006 .07142857"
	inches := func(x func(*Drift) []float64) func(*Drift) []float64 {
		return func(d *Drift) []float64 { return fromTop(x(d), "in") }
	}
	pure := func(x func(*Drift) []float64) func(*Drift) []float64 {
		return func(d *Drift) []float64 { return fromTop(x(d), "") }
	}
	theTheta := pure(func(d *Drift) []float64 { return d.Theta })
	return []published.Case{{
		ID: "drift-six-storey", Title: "Six-storey moment frame: elastic drift, design drift and drift ratio",
		Source: cite.To("ASCE/SEI 7-16", "12.8.6"), Origin: published.Computed, Inputs: inputs,
		Wants:   append(append(storeywise("delta_xe", "in", elastic), storeywise("Delta", "in", delta)...), storeywise("Delta/h_sx", "", ratio)...),
		Compute: run("ASCE/SEI 7-16", inches(func(d *Drift) []float64 { return d.Elastic }), inches(func(d *Drift) []float64 { return d.FirstOrder }), pure(func(d *Drift) []float64 { return d.Ratio })),
	}, {
		ID: "drift-six-storey-theta", Title: "Six-storey moment frame: stability coefficient and its limit",
		Source: cite.To("ASCE/SEI 7-16", "12.8.7"), Origin: published.Computed, Inputs: inputs,
		Wants:   append(storeywise("theta", "", theta), published.Rounded("theta_max", "0.0909090909", "")),
		Compute: run("ASCE/SEI 7-16", theTheta, func(d *Drift) []float64 { return d.ThetaLimit[:1] }),
	}, {
		ID: "drift-six-storey-elastic-theta", Title: "Six-storey moment frame: stability coefficient written with the elastic drift",
		Source: cite.To("ASCE/SEI 7-22", "12.8.7"), Origin: published.Computed, Inputs: inputs,
		Wants: storeywise("theta", "", theta), Compute: run("ASCE/SEI 7-22", theTheta),
	}, {
		ID: "drift-six-storey-limit", Title: "Six-storey moment frame: allowed drift, and the storeys that exceed it",
		Source: cite.To("ASCE/SEI 7-16", "12.12.1"), Origin: published.Computed, Inputs: append(inputs[:len(inputs):len(inputs)], published.Input{Name: "allowed drift over height", Value: 0.020}),
		Wants: []published.Want{published.Rounded("Delta_a", "3.12", "in"), published.Rounded("storeys above it", "5", "")},
		Compute: run("ASCE/SEI 7-16", func(d *Drift) []float64 {
			n := 0.0
			for i := range d.Limit {
				if d.Amplified[i] > d.Limit[i] {
					n++
				}
			}
			return []float64{d.Limit[5] / 0.0254, n}
		}),
	}}
}

func driftTables() []published.Case {
	table := published.Case{
		ID: "drift-allowed", Title: "Allowed storey drift over storey height, Table 12.12-1",
		Source: cite.To("ASCE/SEI 7-16", "Table 12.12-1"), Origin: published.Memory,
		Compute: func() ([]float64, error) {
			var out []float64
			for _, s := range DriftSystems {
				for _, risk := range []string{"I", "II", "III", "IV"} {
					x, err := AllowedDrift(s.Word, risk, 4)
					if err != nil {
						return nil, err
					}
					out = append(out, x)
				}
			}
			return out, nil
		},
	}
	for i, row := range []string{"0.025 0.025 0.020 0.015", "0.010 0.010 0.010 0.010", "0.007 0.007 0.007 0.007", "0.020 0.020 0.015 0.010"} {
		for j, text := range strings.Fields(row) {
			table.Wants = append(table.Wants, published.Rounded([]string{"four storeys, tolerant finishes", "masonry cantilever shear walls", "other masonry shear walls", "all other"}[i]+", risk category "+[]string{"I", "II", "III", "IV"}[j], text, ""))
		}
	}
	return []published.Case{table, {
		ID: "drift-damage-limit", Title: "Damage limitation: limits of reduced drift over height, and the reduction",
		Source: cite.To("EN 1998-1:2004", "4.4.3.2"), Origin: published.Memory,
		Wants: []published.Want{published.Rounded("brittle", "0.005", ""), published.Rounded("ductile", "0.0075", ""), published.Rounded("none", "0.010", ""),
			published.Rounded("nu, classes I and II", "0.5", ""), published.Rounded("nu, classes III and IV", "0.4", "")},
		Compute: func() ([]float64, error) {
			return []float64{DamageLimit("brittle"), DamageLimit("ductile"), DamageLimit("none"), DamageReduction("II"), DamageReduction("III")}, nil
		},
	}}
}

// oneStorey has theta as given, by the basis, with a unit shear, height and
// elastic drift.
func oneStorey(basis string, theta float64) DriftInput {
	in := DriftInput{Basis: basis, Levels: []string{"1"}, H: []float64{1}, Hs: []float64{1}, Elastic: []float64{0.001}, Shear: []float64{1}, Limit: []float64{0.005},
		Beta: []float64{1}, Cd: 2, Ie: 1, Rho: 1, Qd: 4, Nu: 0.5, P: []float64{theta / 0.001}}
	if basis == "EN 1998-1:2004" {
		in.P[0] /= in.Qd
	}
	return in
}

func driftRanges() []published.Case {
	limits := published.Case{
		ID: "drift-theta-limit", Title: "Limit of the stability coefficient, 0.5/(beta C_d) and never above 0.25",
		Source: cite.To("ASCE/SEI 7-16", "Eq. 12.8-17"), Origin: published.Memory,
		Wants: []published.Want{published.Rounded("C_d 5.5, beta 1", "0.0909090909", ""), published.Rounded("C_d 2, beta 1", "0.25", ""), published.Rounded("C_d 2, beta 0.8", "0.25", ""), published.Rounded("C_d 4, beta 0.5", "0.25", ""), published.Rounded("C_d 4, beta 0.8", "0.15625", "")},
		Compute: func() ([]float64, error) {
			var out []float64
			for _, x := range [][2]float64{{5.5, 1}, {2, 1}, {2, 0.8}, {4, 0.5}, {4, 0.8}} {
				in := oneStorey("ASCE/SEI 7-16", 0.01)
				in.Cd, in.Beta = x[0], []float64{x[1]}
				d, err := Drifts(in)
				if err != nil {
					return nil, err
				}
				out = append(out, d.ThetaLimit[0])
			}
			return out, nil
		},
	}
	ranges := published.Case{
		ID: "drift-theta-ranges", Title: "Second-order effects: left out up to 0.1, by 1/(1 - theta) up to 0.2, theta never above 0.3",
		Source: cite.To("EN 1998-1:2004", "4.4.2.2"), Origin: published.Memory,
		Wants: []published.Want{published.Rounded("factor at 0.10", "1", ""), published.Rounded("factor at 0.15", "1.176470588", ""), published.Rounded("factor at 0.20", "1.25", ""), published.Rounded("limit", "0.3", ""),
			published.Rounded("reduced drift nu q d_e/(1 - theta) over height at 0.15", "0.002352941176", "")},
		Compute: func() ([]float64, error) {
			var out []float64
			var d *Drift
			for _, theta := range []float64{0.10, 0.15, 0.20} {
				var err error
				if d, err = Drifts(oneStorey("EN 1998-1:2004", theta)); err != nil {
					return nil, err
				}
				out = append(out, d.SecondOrder[0])
			}
			d, err := Drifts(oneStorey("EN 1998-1:2004", 0.15))
			if err != nil {
				return nil, err
			}
			return append(out, d.ThetaLimit[0], d.Nu*d.Ratio[0]), nil
		},
	}
	return []published.Case{limits, ranges}
}
