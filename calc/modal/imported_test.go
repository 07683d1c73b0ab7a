package modal

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/structure"
)

// TestImportIsSolve: modes solved here, written out in another scale and sign and
// imported again, are the same modes and combine to the same response.
func TestImportIsSolve(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		m := modesOf(t, drawn(t)).Model
		keep := rapid.IntRange(1, m.Freedoms()).Draw(t, "keep")
		s, err := Solve(m, keep)
		if err != nil {
			t.Fatal(err)
		}
		table := Table{Levels: m.Levels, Elevation: m.H, Mass: m.Mass, Periods: s.T}
		psa := make([]float64, keep)
		for i, phi := range s.Phi {
			table.Shapes = append(table.Shapes, scaled(phi, rapid.SampledFrom([]float64{-3, 0.01, 1, 400}).Draw(t, "scale")))
			psa[i] = rapid.Float64Range(0.1, 20).Draw(t, "PSA")
		}
		back, err := Import(table)
		if err != nil {
			t.Fatal(err)
		}
		if !back.Imported || len(back.Doubts()) > 0 || back.Orthogonality > 1e-9 || len(back.Model.K) > 0 {
			t.Fatalf("%v, orthogonality %v", back.Doubts(), back.Orthogonality)
		}
		near := func(what string, a, b []float64) {
			for i := range b {
				if len(a) != len(b) || math.Abs(a[i]-b[i]) > 1e-9*math.Max(1, math.Abs(b[i])) {
					t.Fatalf("%s: %v imported, %v solved", what, a, b)
				}
			}
		}
		near("T", back.T, s.T)
		near("omega", back.Omega, s.Omega)
		near("gamma", back.Gamma, s.Gamma)
		near("mass", back.MassSum, s.MassSum)
		for i := range s.Phi {
			near("phi", back.Phi[i], s.Phi[i])
		}
		a, err := Combine(back, psa, []float64{0.05}, CQC, 2)
		if err != nil {
			t.Fatal(err)
		}
		b, err := Combine(s, psa, []float64{0.05}, CQC, 2)
		if err != nil {
			t.Fatal(err)
		}
		for q, r := range a.Responses() {
			for j, x := range r.Combined {
				if y := b.Responses()[q].Combined[j]; math.Abs(x-y) > 1e-9*r.AbsSum[j] {
					t.Fatalf("%s %d: %v imported, %v solved", r.Name, j+1, x, y)
				}
			}
		}
		for _, k := range a.Checks {
			if !k.OK {
				t.Fatalf("%s: %v > %v", k.Name, k.Residual, k.Limit)
			}
		}
		if _, err := a.WithResidual(back, 1, nil); err == nil {
			t.Fatal("a residual without a stiffness")
		}
	})
}

func printed() Table {
	return Table{Levels: []string{"a", "b", "c"}, Elevation: []float64{4, 8, 12}, Mass: []float64{2, 1.5, 1}, Periods: []float64{1.368, 0.640, 0.431},
		Shapes: [][]float64{{0.302, 0.649, 1}, {-0.679, -0.607, 1}, {2.44, -2.542, 1}}}
}

func TestImportDoubts(t *testing.T) {
	s, err := Import(printed())
	if err != nil || len(s.Doubts()) > 0 {
		t.Fatalf("printed to three digits: %v, %v", s.Doubts(), err)
	}
	// by hand: (2*0.302*-0.679 - 1.5*0.649*0.607 + 1)/sqrt(1.814209*2.474...)
	m1, m2 := 2*0.302*0.302+1.5*0.649*0.649+1, 2*0.679*0.679+1.5*0.607*0.607+1
	m3 := 2*2.44*2.44 + 1.5*2.542*2.542 + 1
	want := 0.0
	for _, x := range []float64{(-2*0.302*0.679 - 1.5*0.649*0.607 + 1) / math.Sqrt(m1*m2), (2*0.302*2.44 - 1.5*0.649*2.542 + 1) / math.Sqrt(m1*m3), (-2*0.679*2.44 + 1.5*0.607*2.542 + 1) / math.Sqrt(m2*m3)} {
		want = max(want, math.Abs(x))
	}
	if math.Abs(s.Orthogonality-want) > 1e-12 {
		t.Errorf("orthogonality %v, want %v", s.Orthogonality, want)
	}
	bytes, _ := json.Marshal(s)
	var back Modes
	if err := json.Unmarshal(bytes, &back); err != nil || !reflect.DeepEqual(back, *s) {
		t.Errorf("the modes do not survive their encoding (%v)", err)
	}
	wrong := printed()
	wrong.Mass[0] = 6
	if s, err := Import(wrong); err != nil || len(s.Doubts()) == 0 || s.Doubts()[0].Code != "modes-orthogonality" {
		t.Errorf("masses of another structure: %v", err)
	}
	twice := printed()
	twice.Shapes[1] = twice.Shapes[0]
	if s, err := Import(twice); err != nil || len(s.Doubts()) != 2 {
		t.Errorf("a mode twice: %v, %v", s.Doubts(), err)
	}
}

func TestImportFaults(t *testing.T) {
	for name, c := range map[string]struct {
		change func(g *Table)
		want   string
	}{
		"no period":     {func(g *Table) { g.Periods, g.Shapes = nil, nil }, "modes-table periods -1 -1"},
		"a shape less":  {func(g *Table) { g.Shapes = g.Shapes[:2] }, "modes-table shapes -1 -1"},
		"a mass less":   {func(g *Table) { g.Mass = g.Mass[:2] }, "modes-table mass -1 -1"},
		"zero period":   {func(g *Table) { g.Periods[2] = 0 }, "modes-table periods 2 -1"},
		"out of order":  {func(g *Table) { g.Periods[1] = 2 }, "modes-table periods 1 -1"},
		"a value less":  {func(g *Table) { g.Shapes[1] = g.Shapes[1][:2] }, "modes-table shapes 1 -1"},
		"not a number":  {func(g *Table) { g.Shapes[1][2] = math.NaN() }, "modes-table shapes 1 2"},
		"no motion":     {func(g *Table) { g.Shapes[0] = make([]float64, 3) }, "modes-table shapes 0 -1"},
		"zero mass":     {func(g *Table) { g.Mass[1] = 0 }, "no-mass mass 1 -1"},
		"falling":       {func(g *Table) { g.Elevation[1] = 3 }, "elevation elevation 1 -1"},
		"names":         {func(g *Table) { g.Levels = g.Levels[:1] }, "matrix-size levels -1 -1"},
		"nothing wrong": {func(*Table) {}, ""},
	} {
		g := printed()
		c.change(&g)
		_, err := Import(g)
		got := ""
		for _, e := range errorsOf(err) {
			var te *TableError
			if errors.As(e, &te) {
				got += fmt.Sprintf("%s %s %d %d", te.Code, te.In, te.Row, te.Column)
			}
		}
		if got != c.want || (err == nil) != (c.want == "") {
			t.Errorf("%s: %q (%v), want %q", name, got, err, c.want)
		}
	}
}

func errorsOf(err error) []error {
	if j, ok := err.(interface{ Unwrap() []error }); ok {
		return j.Unwrap()
	}
	return []error{err}
}

// TestMatrixModels: a matrix model has the modes of the storeys it came from, and
// its masses and stiffnesses times one factor leave them alone.
func TestMatrixModels(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		m := modesOf(t, drawn(t)).Model
		f := rapid.Float64Range(0.01, 100).Draw(t, "factor")
		g := structure.Assembled{Levels: m.Levels, Elevation: m.H}
		for i := range m.M {
			g.Mass, g.Stiffness = append(g.Mass, scaled(m.M[i], f)), append(g.Stiffness, scaled(m.K[i], f))
		}
		matrix, err := structure.Matrices(g)
		if err != nil {
			t.Fatal(err)
		}
		a, err := Solve(matrix, 0)
		if err != nil {
			t.Fatal(err)
		}
		b, err := Solve(m, 0)
		if err != nil {
			t.Fatal(err)
		}
		for i := range b.T {
			if math.Abs(a.T[i]-b.T[i]) > 1e-8*b.T[i] || math.Abs(a.MassSum[i]-b.MassSum[i]) > 1e-7 {
				t.Fatalf("mode %d: T %v and %v, mass %v and %v", i+1, a.T[i], b.T[i], a.MassSum[i], b.MassSum[i])
			}
		}
		if last := a.MassSum[len(a.MassSum)-1]; math.Abs(last-1) > 1e-9 {
			t.Fatalf("all modes hold %v of the mass", last)
		}
		if strings.Join(matrix.Levels, " ") != strings.Join(m.Levels, " ") || len(matrix.Ks) > 0 {
			t.Fatal("levels or storey stiffness")
		}
	})
}
