package lateral

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// TestImportanceReaches: I_e raises both bounds of the diaphragm forces and lowers
// the amplification of drifts, whatever the rest.
func TestImportanceReaches(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := must[*Static](t)(drawASCE(t).Static())
		for i, w := range s.W {
			low, high := 0.2*s.SDS*s.Ie*w, 0.4*s.SDS*s.Ie*w
			want := min(max(s.DiaphragmRaw[i], low), high)
			if !close(s.DiaphragmMin[i], low) || !close(s.DiaphragmMax[i], high) || !close(s.Diaphragm[i], want) {
				t.Fatalf("diaphragm force %v within %v and %v, want %v within %v and %v", s.Diaphragm[i], s.DiaphragmMin[i], s.DiaphragmMax[i], want, low, high)
			}
		}
		in := drawDrift(t)
		d := mustDrift(t, in)
		factor := in.Cd / in.Ie
		if in.Basis == enBasis {
			factor = in.Qd
		}
		for i, x := range in.Elastic {
			if !close(d.FirstOrder[i], factor*x) {
				t.Fatalf("%s: a drift of %v is amplified to %v, want %v", in.Basis, x, d.FirstOrder[i], factor*x)
			}
		}
	})
}

// TestTimesReachesAll: an analysis multiplied is one with drifts, shears and
// displacements multiplied, so that theta stays.
func TestTimesReachesAll(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := drawDrift(t)
		f := rapid.Float64Range(1, 3).Draw(t, "factor")
		before := slices.Clone(in.Elastic)
		a, b := mustDrift(t, in), mustDrift(t, in.Times(f))
		for i := range in.Levels {
			if !close(b.FirstOrder[i], f*a.FirstOrder[i]) || !close(b.Shear[i], f*a.Shear[i]) || !close(b.Theta[i], a.Theta[i]) {
				t.Fatalf("times %v: drift %v of %v, shear %v of %v, theta %v of %v", f, b.FirstOrder[i], a.FirstOrder[i], b.Shear[i], a.Shear[i], b.Theta[i], a.Theta[i])
			}
		}
		if !slices.Equal(before, in.Elastic) {
			t.Fatal("the analysis multiplied is changed itself")
		}
		for _, c := range b.Checks {
			if !(c.Residual <= c.Limit) {
				t.Fatalf("%s: %g", c.Name, c.Residual)
			}
		}
	})
}

// TestWeightAbove: what a static procedure hands on is the weight at and above
// each level.
func TestWeightAbove(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := must[*Static](t)(drawASCE(t).Static())
		in := DriftOf(s)
		for i := range s.W {
			if want := sum(s.W[i:]); !close(in.Weight[i], want) {
				t.Fatalf("weight at and above level %d: %v, want %v", i+1, in.Weight[i], want)
			}
		}
	})
}

func close(a, b float64) bool {
	return math.Abs(a-b) <= 1e-12*max(math.Abs(a), math.Abs(b))
}
