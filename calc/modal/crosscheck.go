package modal

import "math"

// check compares the results with independent calculations.
func (c *Combined) check(modes *Modes) {
	add := func(name string, residual, limit float64) {
		c.Checks = append(c.Checks, checked(name, residual, limit))
	}
	over, apart := 0.0, 0.0
	one := make([]float64, len(c.T))
	for _, r := range c.Responses() {
		for j, bound := range r.AbsSum {
			if bound == 0 {
				continue
			}
			for i := range one {
				one[i] = r.Modal[i][j]
			}
			over = max(over, r.Combined[j]/bound-1)
			apart = max(apart, math.Abs(quadratic(identity(len(one)), one)-squares(one))/bound)
		}
	}
	add("combined values do not exceed the absolute sum (relative excess)", over, 1e-12)
	add("the double sum without correlation equals SRSS (relative)", apart, 1e-12)

	// forces of each mode against its effective mass, and against its stiffness
	forces, elastic := 0.0, 0.0
	m := modes.Model
	for i, a := range c.PSA {
		want := modes.Gamma[i] * modes.L[i] * a / c.Divisor
		got, size := 0.0, 0.0
		for _, f := range c.StoreyForce.Modal[i] {
			got += f
			size += math.Abs(f)
		}
		if size == 0 {
			continue
		}
		forces = max(forces, math.Abs(got-want)/size, math.Abs(c.BaseShear.Modal[i][0]-want)/size)
		if len(m.K) > 0 {
			resist := times(m.K, c.Displacement.Modal[i])
			for j, f := range c.StoreyForce.Modal[i] {
				elastic = max(elastic, math.Abs(resist[j]-f)/size)
			}
		}
		for j, k := range m.Ks {
			elastic = max(elastic, math.Abs(k*c.Drift.Modal[i][j]-c.StoreyShear.Modal[i][j])/size)
		}
	}
	add("forces of each mode add up to effective mass times PSA (relative)", forces, 1e-9)
	if len(m.K) > 0 {
		add("stiffness times displacement gives the forces of each mode (relative)", elastic, 1e-6)
	}

	// moments at the base of each mode against effective height
	moments := 0.0
	foot := m.Foot(0)
	for i, a := range c.PSA {
		size := 0.0
		for j, f := range c.StoreyForce.Modal[i] {
			size += math.Abs(f) * (m.H[j] - foot)
		}
		if size > 0 {
			want := (modes.BaseMoment[i] - foot*modes.Gamma[i]*modes.L[i]) * a / c.Divisor
			moments = max(moments, math.Abs(c.Overturning.Modal[i][0]-want)/size)
		}
	}
	add("overturning at the base equals effective mass times effective height times PSA (relative)", moments, 1e-9)
}
