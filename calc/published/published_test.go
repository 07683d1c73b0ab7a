package published

import (
	"math"
	"testing"
)

// TestMisses: a value outside its tolerance, a wrong count, a doubled id and an
// engine without cases are all told; what is right is not.
func TestMisses(t *testing.T) {
	one := func(id string, got float64, w Want) Case {
		return Case{ID: id, Wants: []Want{w}, Compute: func() ([]float64, error) { return []float64{got}, nil }}
	}
	for name, c := range map[string]struct {
		cases []Case
		want  int
	}{
		"none":     {nil, 1},
		"right":    {[]Case{one("a", 1.0004, Printed("x", "1.000", ""))}, 0},
		"missed":   {[]Case{one("a", 1.0006, Printed("x", "1.000", ""))}, 1},
		"relative": {[]Case{one("a", 200.1, Want{Name: "x", Value: 200, Tol: 1e-3, Rel: true})}, 0},
		"nan":      {[]Case{one("a", math.NaN(), Printed("x", "1.000", ""))}, 1},
		"twice":    {[]Case{one("a", 1, Printed("x", "1", "")), one("a", 1, Printed("x", "1", ""))}, 1},
		"count":    {[]Case{{ID: "a", Wants: []Want{{}, {}}, Compute: func() ([]float64, error) { return []float64{0}, nil }}}, 1},
		"exact":    {[]Case{one("a", 16.001, Rounded("x", "16", ""))}, 1},
		"rounded":  {[]Case{one("a", 0.4730276825, Rounded("x", "0.473027683", ""))}, 0},
	} {
		if got := Misses(c.cases); len(got) != c.want {
			t.Errorf("%s: %d misses, want %d: %v", name, len(got), c.want, got)
		}
	}
}
