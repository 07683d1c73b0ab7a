package structure

import (
	"fmt"
	"math"

	"quoin/calc/quantity"
)

// Assembled is a planar model that was assembled elsewhere: one lateral freedom
// a level, direction x, the base fixed at elevation 0; freedoms run lowest level
// first and bear the names of their levels. A stiffness matrix with further
// freedoms must have been condensed to these.
type Assembled struct {
	Levels    []string    // names; nil: L1, L2, ...
	Elevation []float64   // of each level above the base, m; rising
	Mass      [][]float64 // n x n, kg
	Stiffness [][]float64 // n x n, N/m
	Damping   float64     // ratio of critical, 0 when not given
}

// Diagonal is the matrix with these values on its diagonal.
func Diagonal(v []float64) [][]float64 {
	a := square(len(v))
	for i, x := range v {
		a[i][i] = x
	}
	return a
}

// asymmetry is how far two mirrored entries may lie apart, in parts of the
// geometric mean of their diagonal entries: rounding of the program they came
// from. They are replaced by their mean.
const asymmetry = 1e-9

// Matrices builds a model from its matrices. Both must be square, of the size of
// the elevations, finite, symmetric and positive definite; at most 500 freedoms.
// Mass at a level is the sum of its row of the mass matrix: the force there for a
// unit acceleration of the ground. Ks stays empty: storeys have no stiffness of
// their own here.
//
// All that is wrong is reported at once, as joined [Fault]s. A structure that can
// move without resistance is refused and the levels that move are named.
func Matrices(g Assembled) (*Model, error) {
	var fs faults
	n := len(g.Elevation)
	switch {
	case n == 0:
		fs.add("missing-field", InElevation, -1, -1, "a model needs at least one level: its elevation")
	case n > maxStoreys:
		fs.add("model-limit", InElevation, -1, -1, "a model has at most %d freedoms here, not %d", maxStoreys, n)
	}
	if !finite(g.Damping) || g.Damping < 0 || g.Damping >= 1 {
		fs = append(fs, fmt.Errorf("damping must be a ratio from 0 to below 1, not %v", g.Damping))
	}
	if len(fs) > 0 {
		return nil, fs.err()
	}
	levels := names(g.Levels, n, &fs)
	heights := rising(g.Elevation, levels, &fs)
	wellShaped(g.Mass, n, InMass, &fs)
	wellShaped(g.Stiffness, n, InStiffness, &fs)
	if len(fs) > 0 {
		return nil, fs.err()
	}
	mass := symmetrised(g.Mass, InMass, levels, &fs)
	stiffness := symmetrised(g.Stiffness, InStiffness, levels, &fs)
	if len(fs) > 0 {
		return nil, fs.err()
	}
	massDefinite(mass, levels, &fs)
	stiffnessDefinite(stiffness, levels, &fs)
	if len(fs) > 0 {
		return nil, fs.err()
	}
	m := &Model{Levels: levels, H: g.Elevation, Hs: heights, Hn: g.Elevation[n-1], M: mass, K: stiffness, Damping: g.Damping}
	for _, row := range mass {
		m.Influence = append(m.Influence, 1)
		at := 0.0
		for _, x := range row {
			at += x
		}
		m.Mass = append(m.Mass, at)
		m.W = append(m.W, at*quantity.Gravity)
		m.TotalMass += at
	}
	m.Weight = m.TotalMass * quantity.Gravity
	return m, nil
}

// names checks the names of n levels, or makes them.
func names(given []string, n int, fs *faults) []string {
	if given == nil {
		out := make([]string, n)
		for i := range out {
			out[i] = fmt.Sprintf("L%d", i+1)
		}
		return out
	}
	if len(given) != n {
		fs.add("matrix-size", InLevels, -1, -1, "%d levels are named, %d elevations are given", len(given), n)
		return append(given, make([]string, max(n-len(given), 0))...)
	}
	seen := map[string]int{}
	for i, name := range given {
		if first, ok := seen[name]; ok {
			fs.add("level-twice", InLevels, i, -1, "level %d has the name of level %d: %s", i+1, first, name)
		} else if name == "" {
			fs.add("level-twice", InLevels, i, -1, "level %d has no name", i+1)
		}
		seen[name] = i + 1
	}
	return given
}

// rising gives the height of each storey.
func rising(elevation []float64, levels []string, fs *faults) []float64 {
	out, below, under := make([]float64, len(elevation)), 0.0, "the base, at 0"
	for i, h := range elevation {
		out[i] = h - below
		switch {
		case !finite(h):
			fs.add("not-finite", InElevation, i, -1, "the elevation of level %s is not a finite number", levels[i])
		case !(h > below):
			fs.add("elevation", InElevation, i, -1, "level %s at %.6g m does not lie above %s: elevations rise from the lowest level", levels[i], h, under).
				Hint = "levels run lowest first; elevations are measured from the base, where the structure is fixed"
		default:
			if miss := heightBounds.miss(out[i]); miss != "" {
				fs.add("elevation", InElevation, i, -1, "the height under level %s %s", levels[i], miss)
			}
		}
		below, under = h, fmt.Sprintf("level %s at %.6g m", levels[i], h)
	}
	return out
}

// wellShaped sees that a matrix is n x n and finite.
func wellShaped(a [][]float64, n int, in Part, fs *faults) {
	if len(a) != n {
		fs.add("matrix-size", in, -1, -1, "the %s matrix has %s, the model has %s", in, counted(len(a), "row"), counted(n, "level"))
		return
	}
	for i, row := range a {
		if len(row) != n {
			fs.add("matrix-size", in, i, -1, "row %d of the %s matrix has %s, the matrix has %s: it must be square", i+1, in, counted(len(row), "value"), counted(n, "row"))
		}
		for j, x := range row {
			if !finite(x) {
				fs.add("not-finite", in, i, j, "row %d, column %d of the %s matrix is not a finite number", i+1, j+1, in)
			}
		}
	}
}

func counted(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}

// diagonals are what the parts call a diagonal entry, and its bounds.
var diagonals = map[Part]struct {
	bounds bounds
	code   string
	hint   string
}{
	InMass:      {masses, "no-mass", "every freedom needs a mass: condense freedoms without one before the matrices are given"},
	InStiffness: {stiffnesses, "mechanism", "nothing resists a displacement of this level: is a support or a member missing, or a row left empty?"},
}

// symmetrised is a symmetric copy of a square matrix with a positive diagonal.
func symmetrised(a [][]float64, in Part, levels []string, fs *faults) [][]float64 {
	out := square(len(a))
	sound := true
	for i := range a {
		d := a[i][i]
		switch miss := diagonals[in].bounds.miss(d); {
		case !(d > 0):
			fs.add(diagonals[in].code, in, i, i, "the %s at level %s is %s: it must be greater than zero", in, levels[i], signed(d)).Hint = diagonals[in].hint
			sound = false
		case miss != "":
			fs.add("bounds", in, i, i, "the %s at level %s %s", in, levels[i], miss)
			sound = false
		}
	}
	for i := range a {
		for j := range i {
			x, y := a[i][j], a[j][i]
			if sound && math.Abs(x-y) > asymmetry*math.Sqrt(a[i][i])*math.Sqrt(a[j][j]) {
				fs.add("matrix-symmetry", in, i, j, "the %s matrix is not symmetric: row %d, column %d %s row %d, column %d", in, i+1, j+1, differs(x, y), j+1, i+1).
					Hint = "a linear structure has a symmetric matrix (Maxwell, Betti): one of the two is wrong"
			}
			out[i][j], out[j][i] = x/2+y/2, x/2+y/2
		}
		out[i][i] = a[i][i]
	}
	return out
}

func signed(x float64) string {
	if x == 0 {
		return "zero"
	}
	return "negative"
}

// differs says how x lies to y, in words that need no unit: the author's is not known
// here.
func differs(x, y float64) string {
	switch {
	case x == -y:
		return "has the opposite sign of"
	case x == 0 || y == 0:
		if x == 0 {
			return "is zero, unlike"
		}
		return "is not zero, unlike"
	}
	return fmt.Sprintf("is %.6g times", x/y)
}
