package structure

import "math"

// Triplet is one entry of a symmetric matrix; Row and Column count from 1.
type Triplet struct {
	Row, Column int
	Value       float64
}

// Triplets assembles a symmetric n x n matrix from its entries: those on and above
// the diagonal, on and below, or all. What is not given is zero. An entry that
// stands twice, lies outside the matrix or contradicts its mirror is a [Fault]
// whose Row is the index of the triplet, counted from 0, and whose Column is -1.
func Triplets(n int, entries []Triplet, in Part) ([][]float64, error) {
	if n > maxStoreys {
		panic("structure: Triplets of too large a matrix")
	}
	var fs faults
	a, at := square(n), map[[2]int]int{}
	for i, e := range entries {
		if e.Row < 1 || e.Column < 1 || e.Row > n || e.Column > n {
			fs.add("matrix-entry", in, i, -1, "row %d, column %d lies outside the matrix of %d levels", e.Row, e.Column, n).
				Hint = "rows and columns count from 1, the lowest level"
			continue
		}
		if !finite(e.Value) {
			fs.add("not-finite", in, i, -1, "row %d, column %d of the %s matrix is not a finite number", e.Row, e.Column, in)
			continue
		}
		if first, ok := at[[2]int{e.Row, e.Column}]; ok {
			fs.add("matrix-entry", in, i, -1, "row %d, column %d stands twice: it is entry %d already", e.Row, e.Column, first+1).
				Hint = "entries are not added up; give each once"
			continue
		}
		at[[2]int{e.Row, e.Column}] = i
		a[e.Row-1][e.Column-1] = e.Value
	}
	for i, e := range entries {
		if k, ok := at[[2]int{e.Row, e.Column}]; !ok || k != i {
			continue
		}
		r, c := e.Row-1, e.Column-1
		k, both := at[[2]int{e.Column, e.Row}]
		switch tolerance := asymmetry * math.Sqrt(math.Abs(a[r][r])) * math.Sqrt(math.Abs(a[c][c])); {
		case !both:
			a[c][r] = e.Value
		case k < i && math.Abs(e.Value-entries[k].Value) > tolerance:
			fs.add("matrix-symmetry", in, i, -1, "the %s matrix is not symmetric: row %d, column %d %s its mirror, entry %d", in, e.Row, e.Column, differs(e.Value, entries[k].Value), k+1).
				Hint = "give one of the two, or both alike"
		}
	}
	if len(fs) > 0 {
		return nil, fs.err()
	}
	return a, nil
}
