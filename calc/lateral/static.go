package lateral

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"

	"quoin/calc/standard"
	"quoin/calc/structure"
)

// problem is an error about one input, named by its symbol: "R", "T", "target".
func problem(symbol, hint, format string, args ...any) error {
	return &standard.ParameterError{Symbol: symbol, Problem: fmt.Sprintf(format, args...), Hint: hint}
}

// start begins a result with what every procedure takes from the model. hn is
// the structural height, m; 0 takes the elevation of the highest level.
func start(m *structure.Model, hn float64) (*Static, error) {
	n := len(m.Levels)
	if len(m.H) != n || len(m.Hs) != n || len(m.W) != n || len(m.Mass) != n {
		panic("lateral: the vectors of the model differ in length")
	}
	switch {
	case n == 0 || m.Freedoms() != n:
		return nil, problem("structure", "", "a static procedure needs one lateral freedom a level; the model has %d levels and %d freedoms", n, m.Freedoms())
	case !(hn >= 0) || math.IsInf(hn, 0):
		return nil, problem("h_n", "", "must be a height greater than zero")
	case hn > m.Hn*(1+1e-9):
		return nil, problem("h_n", "", "%.6g m lies above the highest level, at %.6g m", hn, m.Hn)
	case hn == 0:
		hn = m.Hn
	}
	for i, h := range m.H {
		if foot := m.Foot(i); !(h > foot) || !(foot >= 0) {
			return nil, problem("structure", "", "level %s at %.6g m does not lie above the foot of its storey, at %.6g m from the base", m.Levels[i], h, foot)
		}
		if !(m.W[i] >= 0) || !(m.Mass[i] >= 0) {
			return nil, problem("structure", "", "level %s has a negative weight", m.Levels[i])
		}
	}
	return &Static{Levels: m.Levels, H: m.H, Hs: m.Hs, W: m.W, M: m.Mass, Weight: sum(m.W), Mass: sum(m.Mass), Hn: hn}, nil
}

// distribute shares v out in proportion to weight times shape:
//
//	F_x = C_vx V,   C_vx = w_x s_x / sum(w_i s_i)
func distribute(v float64, w, shape []float64) (cv, f []float64, err error) {
	total := 0.0
	for i := range w {
		total += w[i] * shape[i]
	}
	if !(total > 0) || math.IsInf(total, 0) {
		return nil, nil, errors.New("the weights have no moment to distribute forces by")
	}
	for i := range w {
		cv = append(cv, w[i]*shape[i]/total)
		f = append(f, cv[i]*v)
	}
	return cv, f, nil
}

// shears are the shears of the storeys under forces f at the levels, N.
func shears(f []float64) []float64 {
	out := make([]float64, len(f))
	above := 0.0
	for i := len(f) - 1; i >= 0; i-- {
		above += f[i]
		out[i] = above
	}
	return out
}

// moments are the overturning moments at the foot of each storey, N*m, storey by
// storey from the top: M_i = M_(i+1) + V_i (h_i - foot_i).
func moments(shear, hs []float64) []float64 {
	out := make([]float64, len(shear))
	above := 0.0
	for i := len(shear) - 1; i >= 0; i-- {
		above += shear[i] * hs[i]
		out[i] = above
	}
	return out
}

// respond finds the elastic displacements under forces f from K u = f, by
// Cholesky, and the drifts u_i - u_(i-1), m.
func respond(m *structure.Model, f []float64) (u, drift []float64, err error) {
	n := len(f)
	k := mat.NewSymDense(n, nil)
	for i, row := range m.K {
		for j := i; j < n; j++ {
			k.SetSym(i, j, row[j])
		}
	}
	var chol mat.Cholesky
	if !chol.Factorize(k) {
		return nil, nil, problem("structure", "", "the stiffness matrix is not positive definite: the structure can move without resistance")
	}
	var x mat.VecDense
	if err := chol.SolveVecTo(&x, mat.NewVecDense(n, f)); err != nil {
		return nil, nil, problem("structure", "", "the stiffnesses differ too widely for displacements to be found: %s", err)
	}
	below := 0.0
	for i := range n {
		u = append(u, x.AtVec(i))
		drift = append(drift, u[i]-below)
		below = u[i]
	}
	return u, drift, nil
}

// settle fills what follows from forces: shears, moments, displacements, drifts,
// and finds them again another way. Shape, V, DriftForce, DriftPeriod are set.
func (s *Static) settle(m *structure.Model) error {
	var err error
	sizes := s.W
	if s.Q > 0 {
		sizes = s.M
	}
	if s.Cv, s.F, err = distribute(s.V, sizes, s.Shape); err != nil {
		return problem("structure", "", "%s", err)
	}
	for i := range sizes {
		s.Weighted = append(s.Weighted, sizes[i]*s.Shape[i])
	}
	s.Sums = Sums{sum(s.Weighted), sum(s.Cv), sum(s.F)}
	if s.DriftForce == nil {
		s.DriftForce, s.DriftPeriod, s.DriftCs, s.DriftK = s.F, s.T, s.Cs, s.K
	}
	if s.SDS > 0 {
		s.diaphragms()
	}
	s.Shear = shears(s.F)
	s.Moment = moments(s.Shear, s.storeys())
	s.DriftShear = shears(s.DriftForce)
	if s.Displacement, s.Drift, err = respond(m, s.DriftForce); err != nil {
		return err
	}
	for _, list := range [][]float64{{s.V, s.T, s.Cs, s.Sa}, s.Cv, s.F, s.Shear, s.Moment, s.Diaphragm, s.Displacement, s.Drift} {
		for _, x := range list {
			if math.IsNaN(x) || math.IsInf(x, 0) {
				return problem("structure", "are the numbers given of a sensible size?", "the forces or displacements have no finite value")
			}
		}
	}
	s.check(m)
	return nil
}

// storeys are the heights from the foot of each storey to its level, m.
func (s *Static) storeys() []float64 {
	out := make([]float64, len(s.H))
	for i := range s.H {
		out[i] = s.H[i] - s.foot(i)
	}
	return out
}

// foot is the elevation of the bottom of storey i, counted from 0, m.
func (s *Static) foot(i int) float64 {
	if i == 0 {
		return s.H[0] - s.Hs[0]
	}
	return s.H[i-1]
}

// check finds the results again by other ways.
func (s *Static) check(m *structure.Model) {
	add := func(name string, residual, limit float64) {
		s.Checks = append(s.Checks, Check{name, residual, limit})
	}
	add("the forces add up to V", differ(s.Sums.F, s.V), 1e-12)
	add("the shares of the levels add up to 1", differ(s.Sums.Cv, 1), 1e-12)

	// every moment from the forces above and their arms
	worst := 0.0
	for i := range s.F {
		arm := 0.0
		for j := i; j < len(s.F); j++ {
			arm += s.F[j] * (s.H[j] - s.foot(i))
		}
		worst = max(worst, differ(arm, s.Moment[i]))
	}
	add("moments of the forces about the foot of each storey equal the sums of shear times height", worst, 1e-12)

	// equilibrium of the displaced structure, and the work done on it
	scale, off, work, energy := 0.0, 0.0, 0.0, 0.0
	for i, row := range m.K {
		r := 0.0
		for j, k := range row {
			r += k * s.Displacement[j]
		}
		scale = max(scale, math.Abs(s.DriftForce[i]))
		off = max(off, math.Abs(r-s.DriftForce[i]))
		work += s.DriftForce[i] * s.Displacement[i]
		energy += r * s.Displacement[i]
	}
	add("stiffness times displacement gives the forces back", off/scale, 1e-9)
	add("work of the forces equals twice the strain energy", differ(energy, work), 1e-9)
	if len(m.Ks) == len(s.Drift) {
		worst = 0
		for i, k := range m.Ks {
			worst = max(worst, math.Abs(k*s.Drift[i]-s.DriftShear[i])/s.DriftShear[0])
		}
		add("storey stiffness times drift gives the storey shears", worst, 1e-9)
	}
}

// beyond tells whether a lies above b by more than rounding.
func beyond(a, b float64) bool { return a > b*(1+1e-12) }

func sum(x []float64) float64 {
	total := 0.0
	for _, v := range x {
		total += v
	}
	return total
}
