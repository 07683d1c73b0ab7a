package modal

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// TestStoreys: what a combination says of its model: the stiffness of its storeys,
// its masses, and the shears before they were scaled.
func TestStoreys(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := modesOf(t, drawn(t))
		m := s.Model
		psa := make([]float64, s.Count())
		for i := range psa {
			psa[i] = rapid.Float64Range(0.1, 20).Draw(t, "PSA")
		}
		plain, err := Combine(s, psa, []float64{0.05}, CQC, rapid.Float64Range(1, 8).Draw(t, "divisor"))
		if err != nil {
			t.Fatal(err)
		}
		c, err := plain.ScaledTo(1.7 * plain.BaseShearUnscaled)
		if err != nil {
			t.Fatal(err)
		}
		k, ok := c.StoreyStiffness()
		if !ok {
			t.Fatal("a shear building is not known as one")
		}
		for i := range k {
			if math.Abs(k[i]/m.Ks[i]-1) > 1e-6 {
				t.Fatalf("storey %d has %g, want %g", i, k[i], m.Ks[i])
			}
			if math.Abs(c.UnscaledShear()[i]/plain.StoreyShear.Combined[i]-1) > 1e-12 {
				t.Fatalf("storey %d: unscaled shear %g, want %g", i, c.UnscaledShear()[i], plain.StoreyShear.Combined[i])
			}
		}
		above := c.MassAbove()
		for i := range above {
			want := 0.0
			for _, x := range m.Mass[i:] {
				want += x
			}
			if math.Abs(above[i]/want-1) > 1e-12 {
				t.Fatalf("mass %g at and above level %d, want %g", above[i], i+1, want)
			}
		}
	})
}

// TestNoShearBuilding: a brace over two storeys ties levels that are no neighbours,
// so that shear over drift differs from mode to mode.
func TestNoShearBuilding(t *testing.T) {
	m, _ := uniform(3, 1, 1)
	m.K[0][2], m.K[2][0], m.K[0][0], m.K[2][2] = m.K[0][2]-0.3, m.K[2][0]-0.3, m.K[0][0]+0.3, m.K[2][2]+0.3
	s, err := Solve(m, 0)
	if err != nil {
		t.Fatal(err)
	}
	c, err := Combine(s, []float64{1, 1, 1}, []float64{0.05}, CQC, 1)
	if err != nil {
		t.Fatal(err)
	}
	if k, ok := c.StoreyStiffness(); ok {
		t.Errorf("storeys of stiffness %v", k)
	}
}
