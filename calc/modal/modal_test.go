package modal

import (
	"encoding/json"
	"flag"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/quantity"
	"quoin/calc/structure"
)

func TestMain(m *testing.M) {
	flag.Set("rapid.seed", "7119")
	os.Exit(m.Run())
}

// drawn is a shear building of plausible sizes.
func drawn(t *rapid.T) []structure.Storey {
	n := rapid.IntRange(1, 12).Draw(t, "storeys")
	storeys := make([]structure.Storey, n)
	for i := range storeys {
		storeys[i] = structure.Storey{
			Level: fmt.Sprint(i + 1), Height: rapid.Float64Range(2.5, 6).Draw(t, "h"),
			Mass: rapid.Float64Range(5e4, 1e6).Draw(t, "m"), Stiffness: rapid.Float64Range(5e7, 1e9).Draw(t, "k"),
		}
	}
	return storeys
}

func modesOf(t rapid.TB, storeys []structure.Storey) *Modes {
	t.Helper()
	m, err := structure.Shear(storeys, 0.05)
	if err != nil {
		t.Fatal(err)
	}
	s, err := Solve(m, 0)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func TestModesProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		storeys := drawn(t)
		s := modesOf(t, storeys)
		n := len(storeys)
		if got := s.MassSum[n-1]; math.Abs(got-1) > 1e-10 {
			t.Fatalf("effective masses add up to %v of the total", got)
		}
		if s.Residual > 1e-9 || s.Orthogonality > 1e-10 {
			t.Fatalf("residual %v, orthogonality %v", s.Residual, s.Orthogonality)
		}
		if math.Abs(s.RayleighT1/s.T[0]-1) > 1e-9 || s.Below != n {
			t.Fatalf("T1 %v against %v, %d modes against %d", s.T[0], s.RayleighT1, n, s.Below)
		}
		for _, c := range s.Checks {
			if !c.OK || c.Residual > c.Limit {
				t.Fatalf("%s: %v > %v", c.Name, c.Residual, c.Limit)
			}
		}
		if len(s.Checks) != 5 {
			t.Fatalf("%d checks", len(s.Checks))
		}
		// sum over modes: Gamma phi = 1 at each level, M* h* = first moment of mass
		moment, want := 0.0, 0.0
		for j, h := range s.Model.H {
			want += h * s.Model.Mass[j]
			sum := 0.0
			for i := range s.T {
				sum += s.Gamma[i] * s.Phi[i][j]
			}
			if math.Abs(sum-1) > 1e-9 {
				t.Fatalf("Gamma phi adds up to %v at level %d", sum, j+1)
			}
		}
		for i := range s.T {
			moment += s.MassRatio[i] * s.Model.TotalMass * s.Height[i]
			if i > 0 && s.T[i] > s.T[i-1] {
				t.Fatal("periods are not longest first")
			}
			top := 0.0
			for _, x := range s.Phi[i] {
				top = max(top, math.Abs(x))
			}
			changes := 0
			for j := 1; j < n; j++ {
				if s.Phi[i][j]*s.Phi[i][j-1] < 0 {
					changes++
				}
			}
			if top > 1+1e-9 || top < 1 || changes != i {
				t.Fatalf("mode %d: largest component %v, %d changes of sign", i+1, top, changes)
			}
		}
		if math.Abs(moment-want) > 1e-9*want {
			t.Fatalf("M* h* adds up to %v, want %v", moment, want)
		}
		// T ~ sqrt(m/k); shapes do not change with a common factor
		a, b := rapid.Float64Range(0.1, 10).Draw(t, "mass factor"), rapid.Float64Range(0.1, 10).Draw(t, "stiffness factor")
		scaled := append([]structure.Storey(nil), storeys...)
		for i := range scaled {
			scaled[i].Mass *= a
			scaled[i].Stiffness *= b
		}
		r := modesOf(t, scaled)
		for i := range s.T {
			if want := s.T[i] * math.Sqrt(a/b); math.Abs(r.T[i]-want) > 1e-9*want || math.Abs(r.MassRatio[i]-s.MassRatio[i]) > 1e-9 {
				t.Fatalf("mode %d: T %v, want %v", i+1, r.T[i], want)
			}
		}
	})
}

// The largest component of each shape is exactly +1, of either sign before; of
// two as large the higher level counts.
func TestNormalise(t *testing.T) {
	for _, c := range []struct{ v, want []float64 }{
		{[]float64{1, -4, 2}, []float64{-0.25, 1, -0.5}},
		{[]float64{0.5, 0.25}, []float64{1, 0.5}},
		{[]float64{3, -3}, []float64{-1, 1}},
		{[]float64{0, 3, -3, 1}, []float64{0, -1, 1, -1.0 / 3}},
		{[]float64{-3, 3 * (1 - 1e-12)}, []float64{-1, 1}},
	} {
		got := normalise(c.v)
		for i := range got {
			if math.Abs(got[i]-c.want[i]) > 1e-11 {
				t.Errorf("%v becomes %v, want %v", c.v, got, c.want)
			}
		}
	}
}

func TestOneStorey(t *testing.T) {
	s := modesOf(t, []structure.Storey{{Level: "roof", Height: 4, Mass: 1e5, Stiffness: 1e5 * 4 * math.Pi * math.Pi}})
	if math.Abs(s.T[0]-1) > 1e-15 || s.Gamma[0] != 1 || s.MassRatio[0] != 1 || s.Phi[0][0] != 1 || s.Height[0] != 4 || math.Abs(s.BaseMoment[0]-4e5) > 1e-9 {
		t.Errorf("%+v", s)
	}
}

// Fewer modes than there are: the longest, and counted right.
func TestCount(t *testing.T) {
	m, err := uniform(8, 2e5, 3e8)
	if err != nil {
		t.Fatal(err)
	}
	all, err := Solve(m, 0)
	if err != nil {
		t.Fatal(err)
	}
	for c := 1; c <= 8; c++ {
		some, err := Solve(m, c)
		if err != nil {
			t.Fatal(err)
		}
		if some.Count() != c || some.Below != c || !reflect.DeepEqual(some.T, all.T[:c]) || !reflect.DeepEqual(some.Phi, all.Phi[:c]) {
			t.Errorf("%d modes: %v", c, some.T)
		}
	}
	bytes, err := json.Marshal(all)
	if err != nil {
		t.Fatal(err)
	}
	var back Modes
	if err := json.Unmarshal(bytes, &back); err != nil || !reflect.DeepEqual(back, *all) {
		t.Errorf("modes do not survive their encoding (%v)", err)
	}
}

func TestSolveErrors(t *testing.T) {
	model := func(k, m [][]float64) *structure.Model {
		return &structure.Model{K: k, M: m, Influence: []float64{1, 1}, H: []float64{1, 2}, Hs: []float64{1, 1}}
	}
	unit := [][]float64{{1, 0}, {0, 1}}
	for _, c := range []struct {
		name  string
		m     *structure.Model
		count int
		want  string
	}{
		{"too many", model(unit, unit), 3, "3 modes were asked for; the model has 2"},
		{"negative", model(unit, unit), -1, "-1 modes were asked for"},
		{"empty", &structure.Model{}, 0, "no freedoms"},
		{"floating", model([][]float64{{1, -1}, {-1, 1}}, unit), 0, "not positive definite"},
		{"indefinite", model([][]float64{{-1, 0}, {0, 1}}, unit), 0, "not positive definite"},
		{"massless", model(unit, [][]float64{{1, 0}, {0, 0}}), 0, "a freedom has no mass"},
		{"lopsided", model([][]float64{{2, -1}, {0, 2}}, unit), 0, "stiffness matrix is not symmetric"},
		{"NaN", model([][]float64{{2, math.NaN()}, {0, 2}}, unit), 0, "stiffness matrix: row 1, column 2 is not a finite number"},
	} {
		if _, err := Solve(c.m, c.count); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: error %v does not say %q", c.name, err, c.want)
		}
	}
}

// Equal eigenvalues: the space of three equal modes is the same whatever basis
// the eigensolver came with, the first takes all of its participation.
func TestEqualEigenvalues(t *testing.T) {
	m := &structure.Model{
		M:         [][]float64{{2, 0, 0, 0}, {0, 1, 0, 0}, {0, 0, 3, 0}, {0, 0, 0, 1}},
		K:         [][]float64{{10, 0, 0, 0}, {0, 5, 0, 0}, {0, 0, 15, 0}, {0, 0, 0, 40}},
		Influence: []float64{1, 1, 1, 1}, H: []float64{1, 2, 3, 4}, Hs: []float64{1, 1, 1, 1},
	}
	s, err := Solve(m, 0)
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(s.MassRatio[0]-6.0/7) > 1e-14 || s.L[1] != 0 || s.L[2] != 0 || s.Height[1] != 0 || math.Abs(s.MassRatio[3]-1.0/7) > 1e-14 {
		t.Errorf("mass ratios %v", s.MassRatio)
	}
	if s.Residual > 1e-13 || s.Orthogonality > 1e-13 {
		t.Errorf("residual %v, orthogonality %v", s.Residual, s.Orthogonality)
	}
	// turn the basis of the group at random: the settled one is the same
	rng := rand.New(rand.NewPCG(1, 2))
	basis := func() [][]float64 {
		b := [][]float64{{1 / math.Sqrt2, 0, 0, 0}, {0, 1, 0, 0}, {0, 0, 1 / math.Sqrt(3), 0}}
		for range 20 {
			i, j := rng.IntN(3), rng.IntN(3)
			if i == j {
				continue
			}
			c, s := math.Cos(rng.Float64()*7), 0.0
			s = math.Sqrt(1 - c*c)
			for k := range 4 {
				b[i][k], b[j][k] = c*b[i][k]+s*b[j][k], c*b[j][k]-s*b[i][k]
			}
		}
		return b
	}
	first := basis()
	rotate(m, first)
	for range 20 {
		other := basis()
		rotate(m, other)
		for i := range first {
			for k := range first[i] {
				if math.Abs(first[i][k]-other[i][k]) > 1e-12 {
					t.Fatalf("bases settle differently:\n%v\n%v", first, other)
				}
			}
		}
	}
}

// The independent count and the independent period see a wrong solution.
func TestVerifySees(t *testing.T) {
	m, err := uniform(6, 1, 1)
	if err != nil {
		t.Fatal(err)
	}
	lambda, vectors, err := eigen(m)
	if err != nil {
		t.Fatal(err)
	}
	try := func(keep ...int) error {
		s := &Modes{Model: m}
		var l []float64
		for _, i := range keep {
			s.add(lambda[i], vectors[i])
			l = append(l, lambda[i])
		}
		return s.verify(append(l, lambda[keep[len(keep)-1]+1:]...))
	}
	if err := try(0, 1, 2); err != nil {
		t.Errorf("three modes: %v", err)
	}
	if err := try(0, 2, 3); err == nil {
		t.Error("a mode was left out and no one saw it")
	}
	if err := try(1, 2, 3); err == nil {
		t.Error("the first mode was left out and no one saw it")
	}
	s := &Modes{Model: m}
	wrong := append([]float64(nil), vectors[0]...)
	wrong[2] *= 1.001
	s.add(lambda[0], wrong)
	if err := s.verify(lambda); err == nil {
		t.Error("a shape was changed and no one saw it")
	}
}

// Storey drifts as freedoms: u_i = q_1 + ... + q_i makes M full and K diagonal;
// periods and effective masses stay.
func TestFullMassMatrix(t *testing.T) {
	storeys := []structure.Storey{
		{Level: "1", Height: 4, Mass: 3, Stiffness: 40}, {Level: "2", Height: 3, Mass: 2, Stiffness: 25}, {Level: "3", Height: 3, Mass: 1, Stiffness: 18},
	}
	want := modesOf(t, storeys)
	m := &structure.Model{H: want.Model.H, Hs: want.Model.Hs, Influence: []float64{1, 0, 0}}
	for i := range 3 {
		var row, k []float64
		for j := range 3 {
			above := 0.0
			for _, s := range storeys[max(i, j):] {
				above += s.Mass
			}
			row, k = append(row, above), append(k, 0)
		}
		k[i] = storeys[i].Stiffness
		m.M, m.K = append(m.M, row), append(m.K, k)
	}
	s, err := Solve(m, 0)
	if err != nil {
		t.Fatal(err)
	}
	for i := range 3 {
		if math.Abs(s.T[i]-want.T[i]) > 1e-13 || math.Abs(s.MassRatio[i]-want.MassRatio[i]) > 1e-13 {
			t.Errorf("mode %d: T %v, want %v; mass ratio %v, want %v", i+1, s.T[i], want.T[i], s.MassRatio[i], want.MassRatio[i])
		}
	}
}

// Two modes that nearly coincide: a small mass on a storey tuned to the rest.
func TestNearModes(t *testing.T) {
	for _, mu := range []float64{1e-2, 1e-4, 1e-6, 1e-8} {
		m, err := shear([]float64{1e6, 1e6 * mu}, []float64{1e6, 1e6 * mu})
		if err != nil {
			t.Fatal(err)
		}
		s, err := Solve(m, 0)
		if err != nil {
			t.Fatalf("mass ratio %v: %v", mu, err)
		}
		for i, sign := range []float64{-1, 1} { // w² = 1 + mu/2 -+ sqrt(mu + mu²/4)
			want := math.Sqrt(1 + mu/2 + sign*math.Sqrt(mu+mu*mu/4))
			if math.Abs(s.Omega[i]-want) > 1e-13 {
				t.Errorf("mass ratio %v: w_%d = %v, want %v", mu, i+1, s.Omega[i], want)
			}
		}
	}
}

// Sizes far from any building give an error or a checked result, never a
// panic or a number that is not finite.
func TestExtremes(t *testing.T) {
	for _, mass := range [][]float64{{1, 1, 1}, {1e300, 1e-300, 1}, {1e-300, 1e-300, 1e-300}, {1, 1e15, 1}} {
		for _, k := range [][]float64{{1, 1, 1}, {1e300, 1, 1e-300}, {1e307, 1e307, 1e307}, {1, 1e-12, 1e12}} {
			m, err := shear([]float64{1, 1, 1}, []float64{1, 1, 1})
			if err != nil {
				t.Fatal(err)
			}
			m.TotalMass = 0
			for i := range 3 { // beyond what a building may be described with
				m.Mass[i], m.W[i], m.Ks[i], m.M[i][i] = mass[i], mass[i]*quantity.Gravity, k[i], mass[i]
				m.TotalMass += mass[i]
				m.K[i][i] = k[i]
				if i > 0 {
					m.K[i-1][i-1] += k[i]
					m.K[i-1][i], m.K[i][i-1] = -k[i], -k[i]
				}
			}
			m.Weight = m.TotalMass * quantity.Gravity
			s, err := Solve(m, 0)
			if err != nil {
				continue
			}
			for i := range s.T {
				if x := s.T[i] + s.Gamma[i] + s.MassRatio[i] + s.Height[i]; math.IsNaN(x) || math.IsInf(x, 0) {
					t.Errorf("masses %v, stiffnesses %v: mode %d: %v %v", mass, k, i+1, s.T[i], s.Gamma[i])
				}
			}
		}
	}
}

func BenchmarkSolve50(b *testing.B) {
	m, err := uniform(50, 3e5, 6e8)
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		if _, err := Solve(m, 0); err != nil {
			b.Fatal(err)
		}
	}
}
