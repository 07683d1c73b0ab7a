package structure

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// massDefinite sees that every motion of the freedoms has kinetic energy, and
// that every level moves with the ground.
func massDefinite(m [][]float64, levels []string, fs *faults) {
	if soft, least := softest(m); least <= 0 {
		fs.add("no-mass", InMass, soft[0], -1, "the mass matrix is not positive definite: a motion of %s has no kinetic energy", list(pick(levels, soft))).
			Hint = "masses off the diagonal are too large for those on it; a lumped mass matrix is diagonal"
		return
	}
	for i, row := range m {
		at := 0.0
		for _, x := range row {
			at += x
		}
		if !(at > 0) {
			fs.add("no-mass", InMass, i, -1, "the masses of row %d add up to %s: level %s would not be driven by the ground", i+1, signed(at), levels[i])
		}
	}
}

// stiffnessDefinite sees that every motion meets resistance.
func stiffnessDefinite(k [][]float64, levels []string, fs *faults) {
	soft, least := softest(k)
	move := list(pick(levels, soft))
	switch {
	case least < 0:
		fs.add("mechanism", InStiffness, soft[0], -1, "the stiffness matrix is indefinite: a displacement of %s is pushed on, not resisted", move).
			Hint = "check the signs: positive on the diagonal, and off it no larger than the levels can carry"
	case least == 0:
		fs.add("mechanism", InStiffness, soft[0], -1, "the structure is a mechanism: %s can move without resistance", move).
			Hint = "the stiffness matrix is singular: a storey without stiffness, a missing support or a member left out"
	}
}

// softest looks at the motion that a symmetric matrix with a positive diagonal
// resists least, each freedom measured by its own diagonal entry, so that units
// and sizes do not matter. least is 0 where it is resisted by nothing but
// rounding (n * 1e-14 of the diagonals), and the freedoms that take part in it
// and in every such motion are named; otherwise least is the smallest eigenvalue.
func softest(a [][]float64) (freedoms []int, least float64) {
	n := len(a)
	limit := float64(n) * 1e-14
	scale := make([]float64, n)
	for i := range a {
		scale[i] = 1 / math.Sqrt(a[i][i])
	}
	unit := mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			unit.SetSym(i, j, a[i][j]*scale[i]*scale[j])
		}
	}
	var chol mat.Cholesky
	if chol.Factorize(unit) && 1/chol.Cond() > limit {
		return nil, 1 / chol.Cond()
	}
	var eig mat.EigenSym
	if !eig.Factorize(unit, true) {
		return all(n), 0 // it has no eigenvalues to tell the freedoms by
	}
	lambda := eig.Values(nil)
	if lambda[0] > limit {
		return nil, lambda[0]
	}
	var v mat.Dense
	eig.VectorsTo(&v)
	last := 0 // of the motions that are as bad as the worst
	for last+1 < n && (lambda[0] < -limit && lambda[last+1] < -limit || lambda[0] >= -limit && lambda[last+1] <= limit) {
		last++
	}
	moves := make([]bool, n)
	for c := 0; c <= last; c++ {
		top := 0.0
		for i := range n {
			top = max(top, math.Abs(v.At(i, c)*scale[i]))
		}
		for i := range n {
			moves[i] = moves[i] || math.Abs(v.At(i, c)*scale[i]) > 1e-6*top
		}
	}
	for i, m := range moves {
		if m {
			freedoms = append(freedoms, i)
		}
	}
	if lambda[0] >= -limit {
		return freedoms, 0
	}
	return freedoms, lambda[0]
}

func all(n int) []int {
	out := make([]int, n)
	for i := range out {
		out[i] = i
	}
	return out
}

func pick(names []string, at []int) []string {
	out := make([]string, len(at))
	for i, k := range at {
		out[i] = names[k]
	}
	return out
}
