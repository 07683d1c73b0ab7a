package lateral

import (
	"math"
	"testing"

	"quoin/calc/structure"
)

// TestWallsInBothUnits: one building has one approximate period by its walls, h_n
// measured in feet or in metres.
func TestWallsInBothUnits(t *testing.T) {
	m, err := structure.Shear([]structure.Storey{{Level: "L1", Height: 40 * 0.3048, Mass: 1e5, Stiffness: 1e8}}, 0)
	if err != nil {
		t.Fatal(err)
	}
	wall := Wall{20 * 0.3048, 8 * 0.0254}
	for _, unit := range []string{"ft", "m"} {
		s := &Static{Basis: "ASCE/SEI 7-16", Levels: m.Levels, Hn: m.Hn, HeightUnit: unit}
		if err := (ASCE{Model: m, Walls: []Wall{wall, wall}, BaseArea: 6000 * 0.3048 * 0.3048}).walls(s); err != nil {
			t.Fatal(err)
		}
		if math.Abs(s.Ta/0.23694455-1) > 1e-7 {
			t.Errorf("in %s: T_a = %v s, want 0.23694455 s", unit, s.Ta)
		}
	}
}
