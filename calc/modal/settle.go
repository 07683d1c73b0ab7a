package modal

import (
	"math"

	"quoin/calc/structure"
)

// together is how close two w² are, relative to the larger, to be the same
// eigenvalue to working precision.
const together = 1e-11

// settle chooses, within each group of equal eigenvalues, the vectors that do
// not depend on how the eigensolver came to them: the first takes all of the
// participation that the group has, the others follow the freedoms in order.
// vectors are M-orthonormal and stay so.
func settle(m *structure.Model, lambda []float64, vectors [][]float64) {
	for from := 0; from < len(lambda); {
		to := from + 1
		for to < len(lambda) && lambda[to]-lambda[to-1] <= together*lambda[to] {
			to++
		}
		if to > from+1 {
			rotate(m, vectors[from:to])
		}
		from = to
	}
}

// rotate replaces an M-orthonormal basis by the settled one of the same space.
func rotate(m *structure.Model, basis [][]float64) {
	n := len(m.M)
	starts := [][]float64{m.Influence}
	for i := range n {
		unit := make([]float64, n)
		unit[i] = 1 / math.Sqrt(m.M[i][i])
		starts = append(starts, unit)
	}
	var out [][]float64
	for _, start := range starts {
		if len(out) == len(basis) {
			break
		}
		ms := times(m.M, start)
		size := math.Sqrt(dot(start, ms))
		if size == 0 {
			continue
		}
		v := make([]float64, n) // the part of start in the space
		for _, b := range basis {
			axpy(v, dot(b, ms), b)
		}
		for range 2 { // twice is enough for orthogonality to rounding
			mv := times(m.M, v)
			for _, o := range out {
				axpy(v, -dot(o, mv), o)
			}
		}
		length := math.Sqrt(dot(v, times(m.M, v)))
		if length <= 1e-6*size {
			continue
		}
		for i := range v {
			v[i] /= length
		}
		out = append(out, v)
	}
	if len(out) == len(basis) {
		copy(basis, out)
	}
}

func axpy(y []float64, a float64, x []float64) {
	for i := range y {
		y[i] += a * x[i]
	}
}
