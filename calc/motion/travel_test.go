package motion

import (
	"math"
	"testing"
)

// TestBandTravels: every filter adds its pad to the lead and its corners to the band
// that went before; a coarser step ends the band below its own Nyquist frequency, a finer
// one leaves it.
func TestBandTravels(t *testing.T) {
	r := &Record{A: make([]float64, 2001), Step: 0.01}
	for i := range r.A {
		x := r.Time(i)
		r.A[i] = x * math.Exp(-x/2) * math.Sin(9*x)
	}
	once := apply(t, Bandpass{From: 0.5, Order: 2, Pad: 3}, r)
	twice := apply(t, Bandpass{From: 0.2, To: 20, Order: 2, Pad: 2}, once)
	if o := twice.Origin; math.Abs(o.Lead-5) > 1e-9 || math.Abs(o.UsablePeriod-1.6) > 1e-12 || math.Abs(o.ShortestPeriod-0.0625) > 1e-12 {
		t.Errorf("lead %v s, usable from %v to %v s; want 5, 0.0625 and 1.6", o.Lead, o.ShortestPeriod, o.UsablePeriod)
	}
	if got := apply(t, Resample{Step: 0.005}, twice).Origin; got.ShortestPeriod != twice.Origin.ShortestPeriod || got.Lead != twice.Origin.Lead {
		t.Errorf("a finer step changes the band from %v s or the lead of %v s", got.ShortestPeriod, got.Lead)
	}
	coarse := apply(t, Resample{Step: 0.05}, twice).Origin.ShortestPeriod
	if want := 2 * 0.05 / CoarseBand; math.Abs(coarse-want) > 1e-12 {
		t.Errorf("at a step of 0.05 s usable from %v s, want %v", coarse, want)
	}
}
