package structure

import (
	"fmt"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
)

// Published is every published case of this package.
func Published() []published.Case {
	kip, inch := quantity.MustUnit("kip").Scale, quantity.MustUnit("in").Scale
	perInch := kip / inch
	c := published.Case{
		ID: "three-storey-stiffness", Title: "Stiffness matrix of a three-storey shear frame",
		Source: cite.To("CIVL 7119/8119", "modal example"), Origin: published.Read,
	}
	storeys := make([]Storey, 3)
	for i, k := range []float64{180, 120, 60} {
		mass := []float64{2, 1.5, 1}[i]
		storeys[i] = Storey{Level: fmt.Sprint(i + 1), Height: 3, Mass: mass * perInch, Stiffness: k * perInch}
		c.Inputs = append(c.Inputs,
			published.Input{Name: fmt.Sprintf("k_%d", i+1), Value: k, Unit: "kip/in"},
			published.Input{Name: fmt.Sprintf("m_%d", i+1), Value: mass, Unit: "kip*s^2/in"})
	}
	for i, row := range [][]float64{{300, -120, 0}, {-120, 180, -60}, {0, -60, 60}} {
		for j, k := range row {
			c.Wants = append(c.Wants, published.Want{Name: fmt.Sprintf("K_%d%d", i+1, j+1), Value: k, Unit: "kip/in", Tol: 1e-9, Why: "whole numbers; round-off of the units only"})
		}
	}
	c.Compute = func() ([]float64, error) {
		m, err := Shear(storeys, 0)
		if err != nil {
			return nil, err
		}
		var out []float64
		for _, row := range m.K {
			for _, k := range row {
				out = append(out, k/perInch)
			}
		}
		return out, nil
	}
	return []published.Case{c}
}
