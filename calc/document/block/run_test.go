package block

import (
	"math"
	"testing"
)

// TestCrosscheck: a residual up to its limit is shown, beyond it warned of, and
// one that is no number ends the block.
func TestCrosscheck(t *testing.T) {
	for _, c := range []struct {
		residual         float64
		warnings, errors int
	}{{0, 0, 0}, {1e-6, 0, 0}, {1.01e-6, 1, 0}, {math.Inf(1), 0, 1}, {math.NaN(), 0, 1}} {
		r := &Run{Name: "rs"}
		r.Crosscheck("differ by", 1e-9, 1e-6)
		r.Crosscheck("differ by", c.residual, 1e-6)
		failed := 0
		if r.Diags.HasErrors() {
			failed = 1
		}
		for _, d := range r.Diags {
			if d.Code != "cross-check" {
				t.Errorf("residual %v: the code %s", c.residual, d.Code)
			}
		}
		if len(r.Warnings) != c.warnings || failed != c.errors || len(r.Results) != 1 {
			t.Errorf("residual %v: warnings %v, diagnostics %v, results %v", c.residual, r.Warnings, r.Diags, r.Results)
		}
	}
}

// TestLinear: a series is linear between its points and itself at them.
func TestLinear(t *testing.T) {
	xs, ys := []float64{1, 2, 4}, []float64{10, 20, 0}
	for x, want := range map[float64]float64{1: 10, 1.25: 12.5, 2: 20, 3.5: 5, 4: 0} {
		if got := linear(xs, ys, x); got != want {
			t.Errorf("at %v: %v, want %v", x, got, want)
		}
	}
}

// TestTypeset: symbols in words of an engine become TeX, all else stays.
func TestTypeset(t *testing.T) {
	for text, want := range map[string]string{
		"up to T_L = 8 s; S_DS, T_0": `up to $T_\mathrm{L}$ = 8 s; $S_\mathrm{DS}$, $T_\mathrm{0}$`,
		"MCE_R, storey_shear":        "MCE_R, storey_shear",
	} {
		if got := typeset(text); got != want {
			t.Errorf("%q is %q, want %q", text, got, want)
		}
	}
}
