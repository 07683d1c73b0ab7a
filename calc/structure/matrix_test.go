package structure

import (
	"encoding/json"
	"fmt"
	"math"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// frame is three levels, its stiffness no chain of storeys.
func frame() Assembled {
	return Assembled{
		Levels: []string{"low", "mid", "top"}, Elevation: []float64{4, 7.5, 11},
		Mass:      [][]float64{{300, 10, 0}, {10, 280, 10}, {0, 10, 200}},
		Stiffness: [][]float64{{9000, -5000, 900}, {-5000, 7000, -3000}, {900, -3000, 2400}},
		Damping:   0.05,
	}
}

func TestMatrices(t *testing.T) {
	m, err := Matrices(frame())
	if err != nil {
		t.Fatal(err)
	}
	for name, c := range map[string]struct{ got, want []float64 }{
		"mass": {m.Mass, []float64{310, 300, 210}}, "w": {m.W, []float64{310 * 9.80665, 300 * 9.80665, 210 * 9.80665}}, "h": {m.H, []float64{4, 7.5, 11}}, "h_s": {m.Hs, []float64{4, 3.5, 3.5}},
		"sums": {[]float64{m.TotalMass, m.Weight, m.Hn, m.Damping, m.Foot(0), m.Foot(2)}, []float64{820, 820 * 9.80665, 11, 0.05, 0, 7.5}},
		"r":    {m.Influence, []float64{1, 1, 1}}, "k_s": {m.Ks, nil},
	} {
		if len(c.got) != len(c.want) {
			t.Errorf("%s = %v, want %v", name, c.got, c.want)
			continue
		}
		for i := range c.want {
			if math.Abs(c.got[i]-c.want[i]) > 1e-12*math.Abs(c.want[i]) {
				t.Errorf("%s = %v, want %v", name, c.got, c.want)
			}
		}
	}
	if !reflect.DeepEqual(m.K, frame().Stiffness) || !reflect.DeepEqual(m.M, frame().Mass) || m.Freedoms() != 3 {
		t.Error("the matrices are not those given")
	}
	bytes, _ := json.Marshal(m)
	var back Model
	if err := json.Unmarshal(bytes, &back); err != nil || !reflect.DeepEqual(back, *m) {
		t.Errorf("the model does not survive its encoding (%v)", err)
	}
	g := frame()
	g.Levels = nil
	if m, err := Matrices(g); err != nil || strings.Join(m.Levels, " ") != "L1 L2 L3" {
		t.Errorf("levels %v, %v", m, err)
	}
}

// TestMatrixFaults: each fault by its code, its place and the words that name the freedom.
func TestMatrixFaults(t *testing.T) {
	// two bodies on springs of their own: levels low and top on one, mid on the other
	free := [][]float64{{400, 0, -400}, {0, 500, 0}, {-400, 0, 400}}
	for name, c := range map[string]struct {
		change func(g *Assembled)
		want   string // code, part, row, column; a part of the text
		says   string
	}{
		"no level":        {func(g *Assembled) { g.Elevation = nil }, "missing-field elevation -1 -1", "at least one level"},
		"many":            {func(g *Assembled) { g.Elevation = make([]float64, 501) }, "model-limit elevation -1 -1", "at most 500 freedoms here, not 501"},
		"names":           {func(g *Assembled) { g.Levels = g.Levels[:2] }, "matrix-size levels -1 -1", "2 levels are named, 3 elevations"},
		"name twice":      {func(g *Assembled) { g.Levels = []string{"a", "b", "a"} }, "level-twice levels 2 -1", "the name of level 1: a"},
		"no name":         {func(g *Assembled) { g.Levels[1] = "" }, "level-twice levels 1 -1", "level 2 has no name"},
		"falling":         {func(g *Assembled) { g.Elevation[1] = 4 }, "elevation elevation 1 -1", "level mid at 4 m does not lie above level low at 4 m"},
		"below the base":  {func(g *Assembled) { g.Elevation[0] = 0 }, "elevation elevation 0 -1", "above the base"},
		"millimetres":     {func(g *Assembled) { g.Elevation[2] = 4e5 }, "elevation elevation 2 -1", "is the unit right?"},
		"infinite height": {func(g *Assembled) { g.Elevation[2] = math.Inf(1) }, "not-finite elevation 2 -1", "level top"},
		"rows":            {func(g *Assembled) { g.Stiffness = g.Stiffness[:2] }, "matrix-size stiffness -1 -1", "the stiffness matrix has 2 rows, the model has 3 levels"},
		"row length":      {func(g *Assembled) { g.Mass[1] = g.Mass[1][:2] }, "matrix-size mass 1 -1", "row 2 of the mass matrix has 2 values"},
		"NaN":             {func(g *Assembled) { g.Mass[0][2] = math.NaN() }, "not-finite mass 0 2", "row 1, column 3 of the mass matrix is not a finite number"},
		"unsymmetric":     {func(g *Assembled) { g.Stiffness[2][0] = 901 }, "matrix-symmetry stiffness 2 0", "row 3, column 1 is 1.00111 times row 1, column 3"},
		"zero mass":       {func(g *Assembled) { g.Mass[1][1] = 0 }, "no-mass mass 1 1", "the mass at level mid is zero"},
		"negative mass":   {func(g *Assembled) { g.Mass[1][1] = -3 }, "no-mass mass 1 1", "the mass at level mid is negative: it must"},
		"light":           {func(g *Assembled) { g.Mass[2][2] = 1e-7 }, "bounds mass 2 2", "is the unit right?"},
		"indefinite mass": {func(g *Assembled) { g.Mass[0][1], g.Mass[1][0] = 300, 300 }, "no-mass mass 0 -1", "levels low, mid and top has no kinetic energy"},
		"not driven":      {func(g *Assembled) { g.Mass = [][]float64{{100, -60, -60}, {-60, 100, 0}, {-60, 0, 100}} }, "no-mass mass 0 -1", "level low would not be driven"},
		"free level":      {func(g *Assembled) { g.Stiffness[1] = []float64{0, 0, 0} }, "mechanism stiffness 1 1", "the stiffness at level mid is zero"},
		"mechanism":       {func(g *Assembled) { g.Stiffness = free }, "mechanism stiffness 0 -1", "the structure is a mechanism: levels low and top can move without resistance"},
		"storey without stiffness": {func(g *Assembled) { g.Stiffness = [][]float64{{0.3, 0, 0}, {0, 0.1, -0.1}, {0, -0.1, 0.1}} },
			"mechanism stiffness 1 -1", "levels mid and top can move"},
		"indefinite": {func(g *Assembled) { g.Stiffness = [][]float64{{400, -500, 0}, {-500, 400, 0}, {0, 0, 300}} }, "mechanism stiffness 0 -1", "indefinite: a displacement of levels low and mid"},
	} {
		g := frame()
		c.change(&g)
		_, err := Matrices(g)
		var got []string
		says := ""
		for _, f := range Faults(err) {
			got = append(got, fmt.Sprintf("%s %s %d %d", f.Code, f.In, f.Row, f.Column))
			says += f.Text
		}
		if strings.Join(got, "; ") != c.want || !strings.Contains(says, c.says) {
			t.Errorf("%s: %v %q, want %s %q", name, got, says, c.want, c.says)
		}
	}
	g := frame()
	g.Damping = 1
	if _, err := Matrices(g); err == nil || len(Faults(err)) > 0 || !strings.Contains(err.Error(), "damping") {
		t.Errorf("damping of 1: %v", err)
	}
	g = frame() // rounding of a printed matrix is taken, and evened out
	g.Stiffness[2][0] = 900 * (1 + 1e-10)
	if m, err := Matrices(g); err != nil || m.K[2][0] != m.K[0][2] {
		t.Errorf("a rounding: %v", err)
	}
}

// TestSofterIsNoMechanism: a slender chain of 500 storeys, stiffnesses a million
// apart, stands.
func TestSofterIsNoMechanism(t *testing.T) {
	n := 500
	g := Assembled{Elevation: make([]float64, n), Mass: Diagonal(make([]float64, n)), Stiffness: Diagonal(make([]float64, n))}
	for i := range n {
		k := 1e9
		if i%2 == 1 {
			k = 1e3
		}
		g.Elevation[i], g.Mass[i][i] = 3*float64(i+1), 1e3
		g.Stiffness[i][i] += k
		if i > 0 {
			g.Stiffness[i-1][i-1] += k
			g.Stiffness[i-1][i], g.Stiffness[i][i-1] = -k, -k
		}
	}
	if _, err := Matrices(g); err != nil {
		t.Error(err)
	}
}

// TestMechanismOfAnyFrame: a shear building that loses the stiffness of one
// storey is a mechanism of the levels above it, whatever its units.
func TestMechanismOfAnyFrame(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(2, 9).Draw(t, "n")
		lost := rapid.IntRange(1, n-1).Draw(t, "lost")
		unit := math.Pow(10, rapid.Float64Range(0, 9).Draw(t, "unit"))
		g := Assembled{Elevation: make([]float64, n), Mass: Diagonal(make([]float64, n)), Stiffness: Diagonal(make([]float64, n))}
		for i := range n {
			g.Elevation[i], g.Mass[i][i] = float64(i+1), 1
			k := rapid.Float64Range(1, 30).Draw(t, "k") * unit
			if i == lost {
				k = 0
			}
			g.Stiffness[i][i] += k
			if i > 0 {
				g.Stiffness[i-1][i-1] += k
				g.Stiffness[i-1][i], g.Stiffness[i][i-1] = -k, -k
			}
		}
		if lost == n-1 { // the top hangs on nothing: its own entry is zero
			g.Stiffness[lost][lost] = 0
		}
		_, err := Matrices(g)
		fs := Faults(err)
		if len(fs) != 1 || fs[0].Code != "mechanism" {
			t.Fatalf("%v", err)
		}
		for i := range n {
			named := strings.Contains(strings.NewReplacer(",", " ", ":", " ").Replace(fs[0].Text)+" ", fmt.Sprintf("L%d ", i+1))
			if moves := i >= lost; n-lost <= 6 && named != moves {
				t.Fatalf("storey %d lost, level %d: %s", lost+1, i+1, fs[0].Text)
			}
		}
	})
}

// TestTriplets: one half, the other, or all of a symmetric matrix are one matrix.
func TestTriplets(t *testing.T) {
	want := frame().Stiffness
	var upper, lower, all []Triplet
	for i, row := range want {
		for j, x := range row {
			e := Triplet{i + 1, j + 1, x}
			all = append(all, e)
			if j >= i {
				upper = append(upper, e)
			}
			if j <= i {
				lower = append([]Triplet{e}, lower...)
			}
		}
	}
	for name, entries := range map[string][]Triplet{"upper": upper, "lower": lower, "all": all} {
		if a, err := Triplets(3, entries, InStiffness); err != nil || !reflect.DeepEqual(a, want) {
			t.Errorf("%s: %v, %v", name, a, err)
		}
	}
	for name, c := range map[string]struct {
		more Triplet
		want string
	}{
		"outside": {Triplet{4, 1, 1}, "matrix-entry 6"}, "zero": {Triplet{0, 1, 1}, "matrix-entry 6"}, "twice": {Triplet{1, 2, -5000}, "matrix-entry 6"},
		"contradiction": {Triplet{2, 1, -5001}, "matrix-symmetry 6"}, "infinite": {Triplet{2, 1, math.Inf(1)}, "not-finite 6"}, "mirror": {Triplet{2, 1, -5000}, ""},
	} {
		_, err := Triplets(3, append(upper[:len(upper):len(upper)], c.more), InStiffness)
		got := ""
		for _, f := range Faults(err) {
			got += fmt.Sprintf("%s %d", f.Code, f.Row)
		}
		if got != c.want {
			t.Errorf("%s: %q, want %q (%v)", name, got, c.want, err)
		}
	}
}

// BenchmarkMatrices: 500 levels.
func BenchmarkMatrices(b *testing.B) {
	n := 500
	storeys := make([]Storey, n)
	for i := range storeys {
		storeys[i] = Storey{Level: fmt.Sprint(i), Height: 3, Mass: 1e5, Stiffness: 1e8}
	}
	m, err := Shear(storeys, 0)
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		if _, err := Matrices(Assembled{Elevation: m.H, Mass: m.M, Stiffness: m.K}); err != nil {
			b.Fatal(err)
		}
	}
}

// TestDiffers: entries that should be mirrors are compared without a unit.
func TestDiffers(t *testing.T) {
	for _, c := range []struct {
		x, y float64
		want string
	}{{-2, 2, "has the opposite sign of"}, {0, 2, "is zero, unlike"}, {2, 0, "is not zero, unlike"}, {3, 2, "is 1.5 times"}} {
		if got := differs(c.x, c.y); got != c.want {
			t.Errorf("%v to %v: %q, want %q", c.x, c.y, got, c.want)
		}
	}
}
