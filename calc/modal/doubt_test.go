package modal

import "testing"

// TestOrthogonalityDoubted: two shapes that share a little more than one percent are
// doubted, two that share a little less are not.
func TestOrthogonalityDoubted(t *testing.T) {
	for _, c := range []struct {
		share   float64
		doubted bool
	}{{0.0098, false}, {0.0102, true}, {-0.0102, true}} {
		// unit masses: (1, 1) and (1 + 2s, -1) share s, to the second order
		s, err := Import(Table{Elevation: []float64{3, 6}, Mass: []float64{1, 1}, Periods: []float64{1, 0.5}, Shapes: [][]float64{{1, 1}, {1 + 2*c.share, -1}}})
		if err != nil {
			t.Fatal(err)
		}
		if got := len(s.Doubts()) > 0; got != c.doubted {
			t.Errorf("shapes that share %v (%v found): doubted is %v", c.share, s.Orthogonality, got)
		}
	}
}
