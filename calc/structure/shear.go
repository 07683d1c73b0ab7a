package structure

import (
	"errors"
	"fmt"

	"quoin/calc/quantity"
)

// Storey is one storey of a shear building and the level on top of it.
type Storey struct {
	Level     string  // name of the level
	Height    float64 // of the storey, m; > 0
	Weight    float64 // at the level, N; give this or Mass
	Mass      float64 // at the level, kg; weight = mass * quantity.Gravity
	Stiffness float64 // lateral stiffness of the storey, N/m; > 0
}

// Shear builds the model of a planar shear building: rigid floors on storeys
// that deform in shear only, so that storey i carries V_i = k_i (u_i - u_(i-1)).
// K is tridiagonal: K_ii = k_i + k_(i+1), K_i,i+1 = -k_(i+1); M is diagonal.
//
// Storeys come lowest first, 500 at most. damping is the ratio of critical damping,
// 0 when not given. A height is from 1e-3 to 1e5 m, a stiffness from 1e-3 to
// 1e18 N/m, a mass from 1e-6 to 1e15 kg; what lies outside is a slip of the unit. All
// that is wrong is reported at once, joined, each error naming its storey and level.
func Shear(storeys []Storey, damping float64) (*Model, error) {
	if err := check(storeys, damping); err != nil {
		return nil, err
	}
	n := len(storeys)
	m := &Model{Damping: damping, M: square(n), K: square(n)}
	for i, s := range storeys {
		mass, weight := s.Mass, s.Weight
		if mass == 0 {
			mass = weight / quantity.Gravity
		} else {
			weight = mass * quantity.Gravity
		}
		m.Hn += s.Height
		m.Weight += weight
		m.TotalMass += mass
		m.Levels = append(m.Levels, s.Level)
		m.H = append(m.H, m.Hn)
		m.Hs = append(m.Hs, s.Height)
		m.W = append(m.W, weight)
		m.Mass = append(m.Mass, mass)
		m.Ks = append(m.Ks, s.Stiffness)
		m.Influence = append(m.Influence, 1)
		m.M[i][i] = mass
		m.K[i][i] += s.Stiffness
		if i > 0 {
			m.K[i-1][i-1] += s.Stiffness
			m.K[i-1][i] = -s.Stiffness
			m.K[i][i-1] = -s.Stiffness
		}
	}
	return m, nil
}

// maxStoreys bounds a building: the matrices are dense.
const maxStoreys = 500

// limits of what a storey may be, SI
var (
	heightBounds = bounds{1e-3, 1e5, "m"}
	stiffnesses  = bounds{1e-3, 1e18, "N/m"}
	masses       = bounds{1e-6, 1e15, "kg"}
)

type bounds struct {
	lo, hi float64
	unit   string
}

// miss tells how x > 0 lies outside, or is empty.
func (b bounds) miss(x float64) string {
	if x >= b.lo && x <= b.hi {
		return ""
	}
	return fmt.Sprintf("of %.4g %s is outside %g to %g %s: is the unit right?", x, b.unit, b.lo, b.hi, b.unit)
}

func check(storeys []Storey, damping float64) error {
	var all []error
	if len(storeys) == 0 {
		all = append(all, errors.New("a building needs at least one storey"))
	}
	if len(storeys) > maxStoreys {
		return fmt.Errorf("a building has at most %d storeys here, not %d", maxStoreys, len(storeys))
	}
	if !finite(damping) || damping < 0 || damping >= 1 {
		all = append(all, fmt.Errorf("damping must be a ratio from 0 to below 1, not %v", damping))
	}
	seen := map[string]int{}
	for i, s := range storeys {
		fail := func(format string, args ...any) {
			name := fmt.Sprintf("storey %d", i+1)
			if s.Level != "" {
				name += " (" + s.Level + ")"
			}
			all = append(all, fmt.Errorf("%s: %s", name, fmt.Sprintf(format, args...)))
		}
		if s.Level == "" {
			fail("the level has no name")
		} else if first, ok := seen[s.Level]; ok {
			fail("the name is already that of storey %d", first)
		} else {
			seen[s.Level] = i + 1
		}
		for _, v := range []struct {
			name   string
			value  float64
			bounds bounds
		}{{"height", s.Height, heightBounds}, {"stiffness", s.Stiffness, stiffnesses}} {
			if !finite(v.value) {
				fail("%s is not a finite number", v.name)
			} else if v.value <= 0 {
				fail("%s must be greater than zero", v.name)
			} else if miss := v.bounds.miss(v.value); miss != "" {
				fail("the %s %s", v.name, miss)
			}
		}
		switch {
		case !finite(s.Weight) || !finite(s.Mass):
			fail("weight or mass is not a finite number")
		case s.Weight != 0 && s.Mass != 0:
			fail("give the weight or the mass, not both")
		case s.Weight+s.Mass == 0:
			fail("weight or mass must be given")
		case s.Weight+s.Mass < 0:
			fail("weight or mass must be greater than zero")
		default:
			if miss := masses.miss(s.Mass + s.Weight/quantity.Gravity); miss != "" {
				fail("the mass %s", miss)
			}
		}
	}
	return errors.Join(all...)
}

func square(n int) [][]float64 {
	a := make([][]float64, n)
	for i := range a {
		a[i] = make([]float64, n)
	}
	return a
}
