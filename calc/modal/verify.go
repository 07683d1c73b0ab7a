package modal

import (
	"errors"
	"fmt"
	"math"

	"quoin/calc/structure"
)

// Check is a cross-check of a result: Residual must not exceed Limit.
type Check struct {
	Name     string
	Residual float64
	Limit    float64
	OK       bool
}

func checked(name string, residual, limit float64) Check {
	return Check{name, residual, limit, residual <= limit}
}

// verify fills the cross-checks of a solution and returns the first that fails;
// lambda holds all eigenvalues.
func (s *Modes) verify(lambda []float64) error {
	s.substitute()
	w2, err := rayleigh(s.Model)
	if err != nil {
		return err
	}
	s.RayleighT1 = 2 * math.Pi / math.Sqrt(w2)
	limit := 1e-6
	if len(lambda) > 1 && lambda[1]/lambda[0] < 1.01 {
		limit += lambda[1]/lambda[0] - 1 // iteration hardly tells the two apart
	}
	if err := s.recount(lambda); err != nil {
		return err
	}
	s.Checks = []Check{
		checked("each mode satisfies K phi = w² M phi (relative)", s.Residual, 1e-6),
		checked("modes are orthogonal with respect to mass (relative)", s.Orthogonality, 1e-9),
		checked("the longest period by inverse iteration (relative)", math.Abs(s.RayleighT1/s.T[0]-1), limit),
		checked("modes counted without an eigensolution (difference)", math.Abs(float64(s.Below-s.Count())), 0),
	}
	if s.Count() == len(lambda) {
		s.Checks = append(s.Checks, checked("effective masses of all modes add up to the total (relative)", math.Abs(s.MassSum[s.Count()-1]-1), 1e-9))
	}
	for _, c := range s.Checks {
		if !c.OK {
			return fmt.Errorf("the eigensolution fails its cross-check: %s: %.1e, limit %.0e; stiffnesses or masses may differ too widely", c.Name, c.Residual, c.Limit)
		}
	}
	return nil
}

// substitute puts the solution back into its equation.
func (s *Modes) substitute() {
	m := s.Model
	for i, phi := range s.Phi {
		kphi, mphi := times(m.K, phi), times(m.M, phi)
		off, size := 0.0, 0.0
		for j := range phi {
			inertia := s.Omega[i] * s.Omega[i] * mphi[j]
			off = math.Hypot(off, kphi[j]-inertia)
			size = math.Hypot(size, inertia)
		}
		s.Residual = max(s.Residual, off/size)
	}
	s.orthogonality()
}

// recount counts the modes between the last one kept and the next that is
// clearly apart from it.
func (s *Modes) recount(lambda []float64) error {
	c := s.Count()
	sigma, want := 2*lambda[len(lambda)-1], len(lambda)
	for i := c; i < len(lambda); i++ {
		if lambda[i] > lambda[i-1]*(1+1e-6) {
			sigma, want = (lambda[i]+lambda[i-1])/2, i
			break
		}
	}
	below, err := countBelow(s.Model, sigma)
	s.Below = below - (want - c)
	return err
}

// rayleigh finds the smallest w² by inverse iteration: K u = M v, then the
// two-step quotient w² = u' M v / u' M u (Rayleigh; Stodola).
func rayleigh(m *structure.Model) (float64, error) {
	f, d, err := factor(m.K)
	if err != nil {
		return 0, err
	}
	n := len(m.K)
	v := make([]float64, n)
	for i := range v {
		v[i] = 1 + float64(i)/float64(n+i*i) // no symmetry that could hide a mode
	}
	last := 0.0
	for range 2000 {
		mv := times(m.M, v)
		u := solve(f, d, mv)
		w2 := dot(u, mv) / dot(u, times(m.M, u))
		scale := 0.0
		for _, x := range u {
			scale = max(scale, math.Abs(x))
		}
		for i := range u {
			v[i] = u[i] / scale
		}
		if math.Abs(w2-last) <= 1e-15*w2 {
			return w2, nil
		}
		last = w2
	}
	return last, nil
}

// countBelow is the number of w² below sigma: by Sylvester's law the number of
// negative pivots of K - sigma M.
func countBelow(m *structure.Model, sigma float64) (int, error) {
	a := make([][]float64, len(m.K))
	for i := range a {
		a[i] = make([]float64, len(m.K))
		for j := range a[i] {
			a[i][j] = m.K[i][j] - sigma*m.M[i][j]
		}
	}
	_, d, err := factor(a)
	count := 0
	for _, p := range d {
		if p < 0 {
			count++
		}
	}
	return count, err
}

// factor is a = F D F' with unit lower triangular F and pivots d, unpivoted.
func factor(a [][]float64) (f [][]float64, d []float64, err error) {
	n := len(a)
	f, d = make([][]float64, n), make([]float64, n)
	for i := range n {
		f[i] = make([]float64, i)
		p := a[i][i]
		for j := range i {
			x := a[i][j]
			for k := range j {
				x -= f[i][k] * d[k] * f[j][k]
			}
			f[i][j] = x / d[j]
			p -= f[i][j] * x
		}
		if p == 0 {
			return nil, nil, errors.New("the stiffness matrix is singular")
		}
		d[i] = p
	}
	return f, d, nil
}

// solve is F D F' x = b.
func solve(f [][]float64, d, b []float64) []float64 {
	n := len(d)
	x := make([]float64, n)
	for i := range n {
		x[i] = b[i] - dot(f[i], x[:i])
	}
	for i := n - 1; i >= 0; i-- {
		x[i] /= d[i]
		for k := i + 1; k < n; k++ {
			x[i] -= f[k][i] * x[k]
		}
	}
	return x
}
