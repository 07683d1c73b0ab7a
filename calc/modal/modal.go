// Package modal finds the periods and mode shapes of a linear model, combines
// the responses of its modes to a response spectrum, and checks both by
// independent calculation.
//
// Equation of motion: M u" + C u' + K u = -M r a_g(t), u relative to the ground,
// r the influence vector of the model. A mode solves K phi = w² M phi; with
// L = phi' M r and M_n = phi' M phi its participation factor is Gamma = L/M_n,
// its effective mass L²/M_n, and its largest displacement Gamma phi SD.
package modal

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"

	"quoin/calc/structure"
)

// Modes is the solution, plain data, longest period first; n freedoms, c modes.
type Modes struct {
	Model     *structure.Model
	T         []float64   // periods, s
	Omega     []float64   // circular frequencies, rad/s
	Phi       [][]float64 // c x n: one row a mode, lowest level first; the component of largest magnitude is +1
	Gamma     []float64   // participation factors that belong to Phi
	ModalMass []float64   // M_n = phi' M phi, kg
	L         []float64   // phi' M r, kg
	MassRatio []float64   // effective mass over the total mass
	MassSum   []float64   // running sum of MassRatio

	// Height is the effective height h* = sum(h m phi)/L above the base, m; 0
	// for a mode that does not participate. BaseMoment is the base overturning
	// moment for a unit pseudo-acceleration, Gamma sum(h m phi), kg*m.
	Height     []float64
	BaseMoment []float64

	// Residual is the largest |K phi - w² M phi| / |w² M phi| of any mode,
	// Orthogonality the largest |phi_i' M phi_j| / sqrt(M_i M_j), i != j.
	Residual      float64
	Orthogonality float64
	// RayleighT1 is the longest period found again by inverse iteration with
	// Rayleigh's quotient; Below counts by inertia, without any eigensolution,
	// the modes of the model down to the shortest period kept: it must be c.
	RayleighT1 float64
	Below      int
	Checks     []Check // the above against their limits; all hold

	// Imported modes come from a Table: the model has no stiffness, and of the
	// cross-checks only Orthogonality stands.
	Imported bool
	// Left are the modes that were not kept, longest period first; not known of
	// imported modes.
	Left []Omitted
}

// Omitted is a mode that was not kept.
type Omitted struct{ T, MassRatio float64 }

// Count is the number of modes.
func (m *Modes) Count() int { return len(m.T) }

// Solve finds the count longest periods of m and their shapes; count 0 means
// all. M = C C' is decomposed by Cholesky and C^-1 K C^-T solved as a symmetric
// eigenproblem, so M must be positive definite; K must be too (a supported
// structure). The result is checked against two independent calculations, and
// an error returned when they disagree.
func Solve(m *structure.Model, count int) (*Modes, error) {
	n := m.Freedoms()
	switch {
	case n == 0:
		return nil, errors.New("the model has no freedoms")
	case count < 0 || count > n:
		return nil, fmt.Errorf("%d modes were asked for; the model has %d", count, n)
	case count == 0:
		count = n
	}
	if err := wellFormed(m); err != nil {
		return nil, err
	}
	lambda, vectors, err := eigen(m)
	if err != nil {
		return nil, err
	}
	all := &Modes{Model: m}
	for i := range n {
		all.add(lambda[i], vectors[i])
	}
	s := all.first(count)
	if err := s.verify(lambda); err != nil {
		return nil, err
	}
	return s, nil
}

// first keeps the count longest periods.
func (s *Modes) first(count int) *Modes {
	out := &Modes{Model: s.Model, T: s.T[:count], Omega: s.Omega[:count], Phi: s.Phi[:count], Gamma: s.Gamma[:count], ModalMass: s.ModalMass[:count],
		L: s.L[:count], MassRatio: s.MassRatio[:count], MassSum: s.MassSum[:count], Height: s.Height[:count], BaseMoment: s.BaseMoment[:count]}
	for i, x := range s.MassRatio[count:] {
		out.Left = append(out.Left, Omitted{s.T[count+i], x})
	}
	return out
}

// wellFormed panics when the sizes of a model disagree and reports numbers that
// are not finite or matrices that are not symmetric.
func wellFormed(m *structure.Model) error {
	n := len(m.M)
	if len(m.K) != n || len(m.Influence) != n {
		panic("modal: M, K and Influence differ in size")
	}
	for _, a := range []struct {
		name string
		rows [][]float64
	}{{"mass", m.M}, {"stiffness", m.K}} {
		for i, row := range a.rows {
			if len(row) != n {
				panic("modal: a matrix of the model is not square")
			}
			for j, x := range row {
				if math.IsNaN(x) || math.IsInf(x, 0) {
					return fmt.Errorf("%s matrix: row %d, column %d is not a finite number", a.name, i+1, j+1)
				}
				if y := a.rows[j][i]; math.Abs(x-y) > 1e-9*max(math.Abs(x), math.Abs(y)) {
					return fmt.Errorf("%s matrix is not symmetric: row %d, column %d holds %v, its mirror %v", a.name, i+1, j+1, x, y)
				}
			}
		}
	}
	return nil
}

// eigen returns all eigenvalues w² in rising order with M-orthonormal vectors.
func eigen(m *structure.Model) ([]float64, [][]float64, error) {
	n := len(m.M)
	var chol mat.Cholesky
	if !chol.Factorize(symmetric(m.M)) {
		return nil, nil, errors.New("the mass matrix is not positive definite: a freedom has no mass")
	}
	var c, inv mat.TriDense
	chol.LTo(&c)
	if err := inv.InverseTri(&c); err != nil {
		return nil, nil, fmt.Errorf("the mass matrix is close to singular: %w", err)
	}
	var half, full mat.Dense
	half.Mul(&inv, symmetric(m.K))
	full.Mul(&half, inv.T())
	a := mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			a.SetSym(i, j, (full.At(i, j)+full.At(j, i))/2)
		}
	}
	var eig mat.EigenSym
	if !eig.Factorize(a, true) {
		return nil, nil, errors.New("the eigensolution did not converge")
	}
	lambda := eig.Values(nil)
	if !(lambda[0] > float64(n)*1e-15*lambda[n-1]) {
		return nil, nil, errors.New("the stiffness matrix is not positive definite: the structure can move without resistance, or its stiffnesses differ too widely")
	}
	var q, phi mat.Dense
	eig.VectorsTo(&q)
	phi.Mul(inv.T(), &q)
	vectors := make([][]float64, n)
	for i := range vectors {
		vectors[i] = mat.Col(nil, i, &phi)
	}
	settle(m, lambda, vectors)
	return lambda, vectors, nil
}

func symmetric(rows [][]float64) *mat.SymDense {
	a := mat.NewSymDense(len(rows), nil)
	for i, row := range rows {
		for j := i; j < len(rows); j++ {
			a.SetSym(i, j, row[j])
		}
	}
	return a
}

// add appends the mode of one eigenpair.
func (s *Modes) add(lambda float64, v []float64) {
	m := s.Model
	phi := normalise(v)
	mphi := times(m.M, phi)
	modal, l := dot(phi, mphi), dot(m.Influence, mphi)
	total := dot(m.Influence, times(m.M, m.Influence))
	if math.Abs(l) <= 1e-13*math.Sqrt(modal*total) {
		l = 0 // does not participate: what is left is rounding
	}
	moment := 0.0
	for i, h := range m.H {
		moment += h * mphi[i]
	}
	height := 0.0
	if l != 0 {
		height = moment / l
	}
	ratio := l * l / (modal * total)
	sum := ratio
	if n := len(s.MassSum); n > 0 {
		sum += s.MassSum[n-1]
	}
	w := math.Sqrt(lambda)
	s.T = append(s.T, 2*math.Pi/w)
	s.Omega = append(s.Omega, w)
	s.Phi = append(s.Phi, phi)
	s.Gamma = append(s.Gamma, l/modal)
	s.ModalMass = append(s.ModalMass, modal)
	s.L = append(s.L, l)
	s.MassRatio = append(s.MassRatio, ratio)
	s.MassSum = append(s.MassSum, sum)
	s.Height = append(s.Height, height)
	s.BaseMoment = append(s.BaseMoment, l/modal*moment)
}

// normalise scales a shape so that its component of largest magnitude is +1;
// of components equal to 1e-9 the highest counts.
func normalise(v []float64) []float64 {
	top := 0.0
	for _, x := range v {
		top = max(top, math.Abs(x))
	}
	at := 0
	for i, x := range v {
		if math.Abs(x) >= top*(1-1e-9) {
			at = i
		}
	}
	phi := slices.Clone(v)
	for i := range phi {
		phi[i] /= v[at]
	}
	phi[at] = 1
	return phi
}

func times(a [][]float64, x []float64) []float64 {
	y := make([]float64, len(a))
	for i, row := range a {
		y[i] = dot(row, x)
	}
	return y
}

func dot(x, y []float64) float64 {
	sum := 0.0
	for i := range x {
		sum += x[i] * y[i]
	}
	return sum
}
