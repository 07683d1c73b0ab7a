package motion

import (
	"slices"
	"strings"
	"testing"
)

// TestDoubts: each step is doubted where it does harm, and only there.
func TestDoubts(t *testing.T) {
	record := func(ends float64) *Record {
		a := make([]float64, 2001) // 20 s
		for i := range a {
			a[i] = []float64{0, 1, 0, -1}[i%4]
		}
		a[0], a[2000] = ends, 0
		r, err := New(a, 0.01)
		if err != nil {
			t.Fatal(err)
		}
		return r
	}
	for _, c := range []struct {
		step Treatment
		ends float64
		want []string // parameter and a word of each
	}{
		{Bandpass{From: 0.1, Order: 2}, 0, nil},
		{Bandpass{From: 0.04, Order: 2}, 0, []string{"from below one wave"}},
		{Bandpass{From: 0.1, Order: 2}, 0.02, []string{" jumps to zero by 2.0 %"}},
		{Bandpass{From: 0.1, Order: 2}, 0.009, nil},
		{Resample{Step: 0.01}, 0, []string{"step changes nothing"}},
		{Resample{Step: 0.005}, 0, nil},
		{Resample{Step: 0.05}, 0, []string{"step no motion above 10.0 Hz"}},
	} {
		before := record(c.ends)
		after := before
		if _, ok := c.step.(Resample); ok {
			after = apply(t, c.step, before)
		}
		got := Doubts(c.step, before, after)
		if len(got) != len(c.want) || slices.ContainsFunc(got, func(d Doubt) bool {
			in, word, _ := strings.Cut(c.want[0], " ")
			return d.In != in || !strings.Contains(d.Text, word)
		}) {
			t.Errorf("%s, ends at %v: %v, want %v", c.step, c.ends, got, c.want)
		}
	}
}
