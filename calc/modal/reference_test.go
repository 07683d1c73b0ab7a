package modal

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"testing"

	"quoin/calc/structure"
)

// reference is testdata/scipy/modal.json, written by modal.py beside it.
type reference struct {
	By                      string
	Height, Mass, Stiffness []float64
	PSA, Damping            []float64
	Divisor                 float64
	Period, Gamma           []float64
	MassRatio               []float64 `json:"mass_ratio"`
	Phi, Rho                [][]float64
	Combined                map[Rule]map[string][]float64
	Matrices                struct {
		Elevation, PSA, Period, Gamma, Missing []float64
		Mass, Stiffness, Phi                   [][]float64
		ZPA                                    float64
		MassRatio                              []float64 `json:"mass_ratio"`
		MissingMass                            float64   `json:"missing_mass"`
		SRSS                                   map[string][]float64
	}
}

// read reads the reference and compares with it.
func read(t *testing.T) (ref reference, near func(name string, got, want []float64, tol float64)) {
	t.Helper()
	bytes, err := os.ReadFile("../../testdata/scipy/modal.json")
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(bytes, &ref); err != nil {
		t.Fatal(err)
	}
	return ref, func(name string, got, want []float64, tol float64) {
		t.Helper()
		if len(got) != len(want) || len(want) == 0 {
			t.Fatalf("%s: %d values, want %d", name, len(got), len(want))
		}
		for i := range want {
			if math.Abs(got[i]-want[i]) > tol*math.Abs(want[i]) {
				t.Errorf("%s[%d] = %.15g, %s gives %.15g", name, i+1, got[i], ref.By, want[i])
			}
		}
	}
}

// A model by full matrices, two modes of seven and the missing mass.
func TestMatricesAgainstReference(t *testing.T) {
	all, near := read(t)
	ref := all.Matrices
	m, err := structure.Matrices(structure.Assembled{Elevation: ref.Elevation, Mass: ref.Mass, Stiffness: ref.Stiffness})
	if err != nil {
		t.Fatal(err)
	}
	whole, err := Solve(m, 0)
	if err != nil {
		t.Fatal(err)
	}
	near("T", whole.T, ref.Period, 1e-9)
	near("gamma", whole.Gamma, ref.Gamma, 1e-9)
	near("mass_ratio", whole.MassRatio, ref.MassRatio, 1e-9)
	for i, row := range ref.Phi {
		near(fmt.Sprintf("phi %d", i+1), whole.Phi[i], row, 1e-8)
	}
	s, err := Solve(m, len(ref.PSA))
	if err != nil {
		t.Fatal(err)
	}
	for i, o := range s.Left {
		near("left out", []float64{o.T, o.MassRatio}, []float64{ref.Period[2+i], ref.MassRatio[2+i]}, 1e-9)
	}
	c, err := Combine(s, ref.PSA, []float64{0.05}, SRSS, all.Divisor)
	if err != nil {
		t.Fatal(err)
	}
	if c, err = c.WithResidual(s, ref.ZPA, make([]float64, len(s.Left))); err != nil {
		t.Fatal(err)
	}
	near("e", c.Residual.Vector, ref.Missing, 1e-8)
	near("missing mass", []float64{c.Residual.Mass}, []float64{ref.MissingMass}, 1e-9)
	if len(ref.SRSS) != len(c.Responses()) {
		t.Errorf("the reference holds %d quantities, the result %d", len(ref.SRSS), len(c.Responses()))
	}
	for _, r := range c.Responses() {
		near(r.Name, r.Combined, ref.SRSS[r.Name], 1e-9)
	}
	for _, k := range c.Checks {
		if !k.OK {
			t.Errorf("%s: %v > %v", k.Name, k.Residual, k.Limit)
		}
	}
}

func TestAgainstReference(t *testing.T) {
	ref, near := read(t)
	storeys := make([]structure.Storey, len(ref.Height))
	for i := range storeys {
		storeys[i] = structure.Storey{Level: fmt.Sprint(i + 1), Height: ref.Height[i], Mass: ref.Mass[i], Stiffness: ref.Stiffness[i]}
	}
	m, err := structure.Shear(storeys, 0)
	if err != nil {
		t.Fatal(err)
	}
	s, err := Solve(m, 0)
	if err != nil {
		t.Fatal(err)
	}
	near("T", s.T, ref.Period, 1e-10)
	near("gamma", s.Gamma, ref.Gamma, 1e-9)
	near("mass_ratio", s.MassRatio, ref.MassRatio, 1e-9)
	for i, row := range ref.Phi {
		near(fmt.Sprintf("phi %d", i+1), s.Phi[i], row, 1e-9)
	}
	// the reference finds correlations from the stationary response of pairs of
	// oscillators to white noise, not from the formula
	for i, row := range Rho(s.Omega, ref.Damping) {
		near(fmt.Sprintf("rho %d", i+1), row, ref.Rho[i], 1e-9)
	}
	for _, rule := range Rules {
		c, err := Combine(s, ref.PSA, ref.Damping, rule, ref.Divisor)
		if err != nil {
			t.Fatal(err)
		}
		if len(ref.Combined[rule]) != len(c.Responses()) {
			t.Errorf("%s: the reference holds %d quantities, the result %d", rule, len(ref.Combined[rule]), len(c.Responses()))
		}
		for _, r := range c.Responses() {
			near(string(rule)+" "+r.Name, r.Combined, ref.Combined[rule][r.Name], 1e-9)
		}
	}
}
