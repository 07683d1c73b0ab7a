package lateral

import (
	"testing"

	"quoin/calc/standard"
)

// TestIsLeast: a base shear is known as 0.5 S_1/(R/I_e) times the weight, from S_1 =
// 0.6 on.
func TestIsLeast(t *testing.T) {
	with := func(s1 float64) *standard.Target {
		return &standard.Target{Parameters: []standard.Parameter{{Symbol: "S_1", Value: s1}}}
	}
	for _, c := range []struct {
		name   string
		target *standard.Target
		v      float64
		want   bool
	}{
		{"it is", with(0.75), 0.5 * 0.75 / (8 / 1.25) * 1e6, true},
		{"at four digits", with(0.75), 58590, true},
		{"another", with(0.75), 60000, false},
		{"S_1 below 0.6", with(0.59), 0.5 * 0.59 / (8 / 1.25) * 1e6, false},
		{"no S_1", &standard.Target{}, 1e5, false},
	} {
		if got := IsLeast(c.target, c.v, 1e6, 8, 1.25); got != c.want {
			t.Errorf("%s: %v", c.name, got)
		}
	}
}
