package spectrum_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/spectrum"
)

// A sine of amplitude u at the period T moves at u 2π/T and accelerates at u (2π/T)².
func TestTripartite(t *testing.T) {
	near := func(got, want float64) bool { return math.Abs(got-want) <= 1e-12*want }
	// 100 mm at T = 1 s: PSV 0.628 m/s, PSA 3.948 m/s².
	if v := spectrum.FromSD(0.1, 1); !near(v, 0.2*math.Pi) || !near(spectrum.FromPSA(0.4*math.Pi*math.Pi, 1), v) {
		t.Error("0.1 m at 1 s", v)
	}
	rapid.Check(t, func(t *rapid.T) {
		T, sd := rapid.Float64Range(0.01, 20).Draw(t, "T"), rapid.Float64Range(1e-5, 5).Draw(t, "sd")
		w := 2 * math.Pi / T
		if v := spectrum.FromSD(sd, T); !near(v, w*sd) || !near(spectrum.FromPSA(w*w*sd, T), v) {
			t.Fatal(v)
		}
		psa, d := spectrum.Diagonals(T, 3*T, sd, 2*sd)
		if !near(spectrum.FromPSA(psa[0], 3*T), sd) || !near(spectrum.FromPSA(psa[1], T), 2*sd) || !near(spectrum.FromSD(d[0], T), sd) || !near(spectrum.FromSD(d[1], 3*T), 2*sd) {
			t.Fatal(psa, d)
		}
	})
}
