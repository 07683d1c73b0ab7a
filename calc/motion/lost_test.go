package motion

import (
	"math"
	"testing"
)

// TestLost: of two waves under one window, the coarser step keeps the slower one,
// and with it its share of the energy.
func TestLost(t *testing.T) {
	const slow, fast = 0.3, 0.4 // m/s²
	r := &Record{Step: 0.01}
	for i := range 4001 {
		x := float64(i) / 100
		w := math.Pow(math.Sin(math.Pi*x/40), 2)
		r.A = append(r.A, w*(slow*math.Sin(2*math.Pi*0.5*x)+fast*math.Sin(2*math.Pi*10*x)))
	}
	for step, want := range map[float64]float64{0.1: fast * fast / (slow*slow + fast*fast), 0.02: 0} {
		if got := Lost(r, apply(t, Resample{step}, r)); math.Abs(got-want) > 1e-4 {
			t.Errorf("to %v s: %v of the energy is lost, want %v", step, got, want)
		}
	}
	if Lost(&Record{A: []float64{0, 0}, Step: 1}, r) != 0 {
		t.Error("a record at rest loses nothing")
	}
}
