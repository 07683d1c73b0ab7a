package structure

import (
	"encoding/json"
	"flag"
	"fmt"
	"math"
	"os"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/published"
	"quoin/calc/quantity"
)

func TestMain(m *testing.M) {
	flag.Set("rapid.seed", "1014")
	os.Exit(m.Run())
}

func TestPublished(t *testing.T) {
	for _, miss := range published.Misses(Published()) {
		t.Error(miss)
	}
}

// building is four storeys, no two alike.
func building() []Storey {
	return []Storey{
		{Level: "level 1", Height: 4.2, Weight: 4e6, Stiffness: 5e8},
		{Level: "level 2", Height: 3.7, Weight: 3.8e6, Stiffness: 4e8},
		{Level: "level 3", Height: 3.6, Mass: 380e3, Stiffness: 3.5e8},
		{Level: "roof", Height: 3.8, Weight: 2.8e6, Stiffness: 3e8},
	}
}

func TestShear(t *testing.T) {
	m, err := Shear(building(), 0.05)
	if err != nil {
		t.Fatal(err)
	}
	near := func(name string, got, want float64) {
		t.Helper()
		if math.Abs(got-want) > 1e-12*math.Abs(want) {
			t.Errorf("%s = %v, want %v", name, got, want)
		}
	}
	near("h_n", m.Hn, 15.3)
	near("h[3]", m.H[2], 11.5)
	near("foot of storey 1", m.Foot(0)+1, 1)
	near("foot of storey 4", m.Foot(3), 11.5)
	near("w[3]", m.W[2], 380e3*9.80665)
	near("mass[1]", m.Mass[0], 4e6/9.80665)
	near("weight", m.Weight, 4e6+3.8e6+380e3*9.80665+2.8e6)
	near("mass", m.TotalMass, m.Weight/quantity.Gravity)
	near("K[2][2]", m.K[1][1], 7.5e8)
	near("K[4][4]", m.K[3][3], 3e8)
	near("K[2][3]", m.K[1][2], -3.5e8)
	near("damping", m.Damping, 0.05)
	if m.K[0][2] != 0 || m.M[0][1] != 0 || m.Freedoms() != 4 {
		t.Error("K must be tridiagonal and M diagonal, 4 x 4")
	}
	m.DampingGiven = true
	bytes, err := json.Marshal(m)
	if err != nil {
		t.Fatal(err)
	}
	var back Model
	if err := json.Unmarshal(bytes, &back); err != nil || !reflect.DeepEqual(back, *m) {
		t.Errorf("the model does not survive its encoding (%v)", err)
	}
}

func TestShearErrors(t *testing.T) {
	for _, c := range []struct {
		name    string
		change  func(s []Storey) []Storey
		damping float64
		want    []string
	}{
		{"none", func([]Storey) []Storey { return nil }, 0, []string{"at least one storey"}},
		{"stiffness", func(s []Storey) []Storey { s[3].Stiffness = 0; return s }, 0, []string{"storey 4 (roof): stiffness must be greater than zero"}},
		{"negative height", func(s []Storey) []Storey { s[0].Height = -1; return s }, 0, []string{"storey 1 (level 1): height must be greater than zero"}},
		{"twice", func(s []Storey) []Storey { s[2].Level = "level 1"; return s }, 0, []string{"storey 3 (level 1): the name is already that of storey 1"}},
		{"no name", func(s []Storey) []Storey { s[1].Level = ""; return s }, 0, []string{"storey 2: the level has no name"}},
		{"both", func(s []Storey) []Storey { s[1].Mass = 1; return s }, 0, []string{"storey 2 (level 2): give the weight or the mass, not both"}},
		{"neither", func(s []Storey) []Storey { s[1].Weight = 0; return s }, 0, []string{"storey 2 (level 2): weight or mass must be given"}},
		{"negative weight", func(s []Storey) []Storey { s[1].Weight = -5; return s }, 0, []string{"storey 2 (level 2): weight or mass must be greater than zero"}},
		{"NaN", func(s []Storey) []Storey { s[1].Weight = math.NaN(); return s }, 0, []string{"storey 2 (level 2): weight or mass is not a finite number"}},
		{"infinite", func(s []Storey) []Storey { s[1].Height = math.Inf(1); return s }, 0, []string{"storey 2 (level 2): height is not a finite number"}},
		{"high", func(s []Storey) []Storey { s[0].Height = 1.01e5; return s }, 0, []string{"storey 1 (level 1): the height of 1.01e+05 m is outside 0.001 to 100000 m"}},
		{"low", func(s []Storey) []Storey { s[0].Height = 0.99e-3; return s }, 0, []string{"the height of 0.00099 m"}},
		{"stiff", func(s []Storey) []Storey { s[3].Stiffness = 1.01e18; return s }, 0, []string{"storey 4 (roof): the stiffness of 1.01e+18 N/m"}},
		{"soft", func(s []Storey) []Storey { s[3].Stiffness = 0.99e-3; return s }, 0, []string{"the stiffness of 0.00099 N/m"}},
		{"heavy", func(s []Storey) []Storey { s[1].Weight = 1e16; return s }, 0, []string{"storey 2 (level 2): the mass of 1.02e+15 kg"}},
		{"light", func(s []Storey) []Storey { s[2].Mass = 0.99e-6; return s }, 0, []string{"storey 3 (level 3): the mass of 9.9e-07 kg"}},
		{"many", func(s []Storey) []Storey { return make([]Storey, 501) }, 0, []string{"at most 500 storeys here, not 501"}},
		{"damping", func(s []Storey) []Storey { return s }, 5, []string{"damping must be a ratio"}},
		{"critical", func(s []Storey) []Storey { return s }, 1, []string{"damping must be a ratio"}},
		{"two at once", func(s []Storey) []Storey { s[0].Height, s[3].Stiffness = 0, -1; return s }, 0, []string{"storey 1 (level 1): height", "storey 4 (roof): stiffness"}},
	} {
		_, err := Shear(c.change(building()), c.damping)
		if err == nil {
			t.Errorf("%s: no error", c.name)
			continue
		}
		for _, want := range c.want {
			if !strings.Contains(err.Error(), want) {
				t.Errorf("%s: %q does not say %q", c.name, err, want)
			}
		}
	}
}

// What lies on a limit is taken.
func TestShearLimits(t *testing.T) {
	storeys := make([]Storey, 500)
	for i := range storeys {
		storeys[i] = Storey{Level: fmt.Sprint(i), Height: 1e5, Mass: 1e15, Stiffness: 1e18}
		if i%2 == 1 {
			storeys[i] = Storey{Level: fmt.Sprint(i), Height: 1e-3, Mass: 1e-6, Stiffness: 1e-3}
		}
	}
	if m, err := Shear(storeys, 0); err != nil || m.DampingGiven {
		t.Errorf("%v", err)
	}
}

// Lateral forces F on a shear building displace it by the running sum of
// storey shear over storey stiffness; K times that displacement is F again.
func TestStiffnessIsShearOverDrift(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 12).Draw(t, "n")
		storeys := make([]Storey, n)
		force := make([]float64, n)
		for i := range storeys {
			storeys[i] = Storey{
				Level: string(rune('a' + i)), Height: 3,
				Mass: rapid.Float64Range(1, 100).Draw(t, "mass"), Stiffness: rapid.Float64Range(1, 100).Draw(t, "k"),
			}
			force[i] = rapid.Float64Range(-10, 10).Draw(t, "F")
		}
		m, err := Shear(storeys, 0)
		if err != nil {
			t.Fatal(err)
		}
		u, at := make([]float64, n), 0.0
		for i := range u {
			shear := 0.0
			for _, f := range force[i:] {
				shear += f
			}
			at += shear / storeys[i].Stiffness
			u[i] = at
		}
		for i := range u {
			got := 0.0
			for j := range u {
				got += m.K[i][j] * u[j]
			}
			if math.Abs(got-force[i]) > 1e-9*float64(n*n)*100 {
				t.Fatalf("freedom %d: K u = %v, want the force %v", i+1, got, force[i])
			}
		}
	})
}
