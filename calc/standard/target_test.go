package standard

import "testing"

// TestPeriodsInMessagesAreShort: a computed period is told at four digits, unless
// they would put it inside.
func TestPeriodsInMessagesAreShort(t *testing.T) {
	for _, c := range []struct {
		T, from, to float64
		want        string
	}{{0.3172411641554282, 0.5, 4, "0.3172"}, {4.0000001, 0.5, 4, "4.0000001"}, {12, 0, 4, "12"}} {
		if got := outside(c.T, c.from, c.to); got != c.want {
			t.Errorf("%v outside %v to %v is told as %s, want %s", c.T, c.from, c.to, got, c.want)
		}
	}
}
