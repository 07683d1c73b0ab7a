package modal

import (
	"fmt"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
	"quoin/calc/structure"
)

// imperial is a model by its matrices, given in kip, inch and second, levels at
// 12, 24, ... ft.
func imperial(mass []float64, k [][]float64) (*structure.Model, error) {
	unit := quantity.MustUnit("kip/in").Scale
	g := structure.Assembled{Mass: structure.Diagonal(scaled(mass, unit))}
	for i, row := range k {
		g.Elevation = append(g.Elevation, quantity.MustUnit("ft").To(12*float64(i+1)))
		g.Stiffness = append(g.Stiffness, scaled(row, unit))
	}
	return structure.Matrices(g)
}

var (
	threeMass      = []float64{2, 1.5, 1}
	threeStiffness = [][]float64{{300, -120, 0}, {-120, 180, -60}, {0, -60, 60}}
)

func matrixInputs(mass []float64, k [][]float64) []published.Input {
	var in []published.Input
	for i, m := range mass {
		in = append(in, published.Input{Name: fmt.Sprintf("m_%d", i+1), Value: m, Unit: "kip*s^2/in"})
	}
	for i, row := range k {
		for j, x := range row {
			in = append(in, published.Input{Name: fmt.Sprintf("K_%d%d", i+1, j+1), Value: x, Unit: "kip/in"})
		}
	}
	return in
}

// matrixCases are the worked modal examples once more, as models by matrices, and
// the missing mass of one of them.
func matrixCases() []published.Case {
	var cases []published.Case
	for _, p := range []struct {
		id, title                string
		source                   cite.Ref
		mass                     []float64
		k                        [][]float64
		squared, gamma, fraction string
	}{
		{"two-storey-matrices", "Two-storey frame by its matrices", cite.To("Taranath", ""), []float64{1.5, 1.5}, [][]float64{{400, -200}, {-200, 200}},
			"50.928802 349.07120", "1.170820 -0.170820", "0.9472136 0.0527864"},
		{"three-storey-matrices", "Three-storey frame by its matrices", cite.To("CIVL 7119/8119", "modal example"), threeMass, threeStiffness,
			"21.087884 96.395946 212.51617", "1.42102973 -0.51247849 0.09144875", "0.8136194 0.1443884 0.0419923"},
	} {
		c := published.Case{ID: p.id, Title: p.title + ", highest level 1", Source: p.source, Origin: published.Computed, Inputs: matrixInputs(p.mass, p.k)}
		c.Wants = append(wants(published.Rounded, "w^2", "rad^2/s^2", p.squared), wants(published.Rounded, "Gamma", "", p.gamma)...)
		c.Wants = append(c.Wants, wants(published.Rounded, "M*/M", "", p.fraction)...)
		c.Compute = func() ([]float64, error) {
			m, err := imperial(p.mass, p.k)
			if err != nil {
				return nil, err
			}
			s, err := Solve(m, 0)
			if err != nil {
				return nil, err
			}
			var squared, gammas []float64
			for i, w := range s.Omega {
				_, _, gamma := topped(s, i)
				squared, gammas = append(squared, w*w), append(gammas, gamma)
			}
			return append(append(squared, gammas...), s.MassRatio...), nil
		}
		cases = append(cases, c)
	}
	return append(cases, missingMass(), importedShapes())
}

// missingMass: the three-storey frame with its first mode only.
func missingMass() published.Case {
	c := published.Case{
		ID: "missing-mass", Title: "Missing mass of the three-storey frame, first mode only",
		Source: cite.To("US NRC RG 1.92", "missing mass"), Origin: published.Memory, Inputs: matrixInputs(threeMass, threeStiffness),
		Wants: wants(published.Rounded, "e", "", "0.57106224 0.07841209 -0.42102973"),
	}
	c.Wants = append(c.Wants, wants(published.Rounded, "force/ZPA", "kip*s^2/in", "1.14212448 0.11761814 -0.42102973")...)
	c.Wants = append(c.Wants, published.Rounded("sum of forces/ZPA", "0.83871289", "kip*s^2/in"), published.Rounded("missing fraction", "0.18638064", ""))
	c.Compute = func() ([]float64, error) {
		m, err := imperial(threeMass, threeStiffness)
		if err != nil {
			return nil, err
		}
		s, err := Solve(m, 1)
		if err != nil {
			return nil, err
		}
		r, err := Combine(s, []float64{1}, []float64{0.05}, SRSS, 1)
		if err != nil {
			return nil, err
		}
		const zpa = 2.5
		if r, err = r.WithResidual(s, zpa, []float64{0, 0}); err != nil {
			return nil, err
		}
		perZPA := 1 / zpa / quantity.MustUnit("kip*s^2/in").Scale
		out := append(append([]float64(nil), r.Residual.Vector...), scaled(r.StoreyForce.Residual, perZPA)...)
		return append(out, r.BaseShear.Residual[0]*perZPA, r.Residual.Mass), nil
	}
	return c
}

// importedShapes: the printed periods and shapes of the three-storey frame, taken
// as they stand.
func importedShapes() published.Case {
	c := published.Case{
		ID: "three-storey-imported", Title: "Three-storey frame, its printed shapes imported, highest level 1",
		Source: cite.To("CIVL 7119/8119", "modal example"), Origin: published.Read, Inputs: matrixInputs(threeMass, nil),
	}
	shapes := [][]float64{{0.302, 0.649, 1}, {-0.679, -0.607, 1}, {2.44, -2.542, 1}}
	periods := []float64{1.368, 0.640, 0.431}
	for i, T := range periods {
		c.Inputs = append(c.Inputs, published.Input{Name: fmt.Sprintf("T_%d", i+1), Value: T, Unit: "s"})
		for j, x := range shapes[i] {
			c.Inputs = append(c.Inputs, published.Input{Name: fmt.Sprintf("phi_%d%d", i+1, j+1), Value: x})
		}
	}
	const why = "from a shape of 3 decimals (2.44: 2)"
	for i, w := range [][2]float64{{2.577, 1.813}, {-1.268, 2.474}, {2.066, 22.596}} {
		tolL := []float64{0.00225, 0.00225, 0.01125}[i]
		tolM := []float64{0.0021, 0.0028, 0.0531}[i]
		c.Wants = append(c.Wants,
			within(fmt.Sprintf("L_%d", i+1), w[0], tolL, "kip*s^2/in", why), within(fmt.Sprintf("M_%d", i+1), w[1], tolM, "kip*s^2/in", why))
	}
	c.Compute = func() ([]float64, error) {
		unit := quantity.MustUnit("kip*s^2/in").Scale
		s, err := Import(Table{Elevation: []float64{4, 8, 12}, Mass: scaled(threeMass, unit), Periods: periods, Shapes: shapes})
		if err != nil {
			return nil, err
		}
		var out []float64
		for i := range s.T {
			_, l, mn, _ := asPrinted(s, i, unit)
			out = append(out, l, mn)
		}
		return out, nil
	}
	return c
}
