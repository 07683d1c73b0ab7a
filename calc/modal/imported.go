package modal

import (
	"errors"
	"fmt"
	"math"

	"quoin/calc/quantity"
	"quoin/calc/structure"
)

// Table is the result of an eigensolution made elsewhere: c modes of n levels,
// one lateral freedom a level, direction x, lowest level first, masses lumped at
// the levels and the base at elevation 0.
type Table struct {
	Levels    []string    // n names; nil: L1, L2, ...
	Elevation []float64   // n, m, rising
	Mass      []float64   // n, kg, > 0
	Periods   []float64   // c, s, longest first
	Shapes    [][]float64 // c x n, of any scale and sign
}

// TableError is one thing wrong with a table of modes. In is "elevation",
// "levels", "mass", "periods" or "shapes"; Row and Column count from 0, -1 where
// it is not one row or one cell.
type TableError struct {
	Code        string // "modes-table", or that of a structure.Fault
	In          string
	Row, Column int
	Text, Hint  string
}

func (e *TableError) Error() string { return e.Text }

// Import takes modes that were computed elsewhere. Shapes are scaled as those of
// Solve; participation and effective masses follow from the masses given. Nothing
// is known of a stiffness: Model.K is empty, and the periods are taken on trust.
// Orthogonality tells how well shapes and masses belong together; an exact
// solution printed to three digits gives some 1e-3. All that is wrong is reported
// at once, as joined [TableError]s.
func Import(t Table) (*Modes, error) {
	var all []error
	fail := func(in string, row, column int, format string, args ...any) *TableError {
		e := &TableError{Code: "modes-table", In: in, Row: row, Column: column, Text: fmt.Sprintf(format, args...)}
		all = append(all, e)
		return e
	}
	n, c := len(t.Elevation), len(t.Periods)
	if c == 0 {
		fail("periods", -1, -1, "a table of modes needs at least one period")
	}
	if len(t.Shapes) != c {
		fail("shapes", -1, -1, "%d shapes are given for %d periods", len(t.Shapes), c)
	}
	if len(t.Mass) != n {
		fail("mass", -1, -1, "%d masses are given for %d elevations", len(t.Mass), n)
	}
	for i, T := range t.Periods {
		if !(T > 0) || math.IsInf(T, 0) {
			fail("periods", i, -1, "period %d must be a finite time greater than zero", i+1)
		} else if i > 0 && T > t.Periods[i-1] {
			fail("periods", i, -1, "period %d (%.6g s) is longer than period %d (%.6g s): modes run longest period first", i+1, T, i, t.Periods[i-1]).
				Hint = "put periods and shapes in order"
		}
	}
	for i, row := range t.Shapes {
		if len(row) != n {
			fail("shapes", i, -1, "shape %d has a length of %d, the model has %d levels", i+1, len(row), n)
			continue
		}
		top := 0.0
		for j, x := range row {
			if math.IsNaN(x) || math.IsInf(x, 0) {
				fail("shapes", i, j, "shape %d, level %d is not a finite number", i+1, j+1)
			}
			top = max(top, math.Abs(x))
		}
		if top == 0 {
			fail("shapes", i, -1, "shape %d is zero at every level", i+1).Hint = "leave out modes that do not move in direction x"
		}
	}
	if len(all) > 0 {
		return nil, errors.Join(all...)
	}
	// a model with any stiffness, to have levels and masses checked
	m, err := structure.Matrices(structure.Assembled{Levels: t.Levels, Elevation: t.Elevation, Mass: structure.Diagonal(t.Mass), Stiffness: structure.Diagonal(ones(n))})
	for _, f := range structure.Faults(err) {
		row := f.Row
		all = append(all, &TableError{f.Code, string(f.In), row, -1, f.Text, f.Hint})
	}
	if len(all) > 0 {
		return nil, errors.Join(all...)
	}
	if err != nil {
		return nil, err
	}
	m.K = nil
	s := &Modes{Model: m, Imported: true}
	for i, T := range t.Periods {
		w := 2 * math.Pi / T
		s.add(w*w, t.Shapes[i])
		s.T[i], s.Omega[i] = T, w
	}
	s.orthogonality()
	return s, nil
}

// ImportedLimit is the orthogonality beyond which imported shapes and masses do
// not belong to one structure, or were printed with too few digits.
const ImportedLimit = 0.01

// Doubts are what the reader of imported modes must know.
func (s *Modes) Doubts() []Warning {
	if !s.Imported {
		return nil
	}
	var out []Warning
	if s.Orthogonality > ImportedLimit {
		out = append(out, Warning{"modes-orthogonality", fmt.Sprintf(
			"the imported shapes are not orthogonal with respect to the masses: two of them share %s %% (at most %g %% is expected): shapes and masses do not belong together, or have too few digits",
			quantity.Format(100*s.Orthogonality, 3), 100*ImportedLimit)})
	}
	if sum := s.MassSum[s.Count()-1]; sum > 1.001 {
		out = append(out, Warning{"modes-orthogonality", fmt.Sprintf("the imported modes hold %.4g %% of the mass, more than there is", 100*sum)})
	}
	return out
}

// orthogonality finds the largest |phi_i' M phi_j| / sqrt(M_i M_j), i != j.
func (s *Modes) orthogonality() {
	for i, phi := range s.Phi {
		mphi := times(s.Model.M, phi)
		for j := range i {
			cross := math.Abs(dot(s.Phi[j], mphi)) / math.Sqrt(s.ModalMass[i]*s.ModalMass[j])
			s.Orthogonality = max(s.Orthogonality, cross)
		}
	}
}

func ones(n int) []float64 {
	v := make([]float64, n)
	for i := range v {
		v[i] = 1
	}
	return v
}
