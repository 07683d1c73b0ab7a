package modal

import (
	"errors"
	"fmt"
	"math"
)

// Residual is the part of the mass that the modes used do not move, taken as
// rigid: it follows the ground at the zero-period acceleration.
type Residual struct {
	ZPA    float64   // zero-period acceleration, m/s², not divided
	Vector []float64 // e = r - sum(Gamma phi) over the modes used, by freedom
	Mass   float64   // fraction of the mass, e'M r / r'M r = 1 - sum of mass ratios

	// Amplified counts the modes left out that hold mass worth counting and that
	// the spectrum raises above the ZPA, so that they are not rigid; Last of the
	// modes left out would have to be used to reach them all. Peak is the largest
	// ordinate among them, m/s², at the period PeakT.
	Amplified, Last int
	Peak, PeakT     float64
	// Unjudged counts those that hold mass worth counting and whose ordinate is not
	// known.
	Unjudged int
}

// A mode left out is amplified from amplified times the ZPA on, and counts from
// countable of the mass on.
const (
	amplified = 1.10
	countable = 0.001
)

// WithResidual is the result with the missing mass of the modes added: the static
// forces M e ZPA, divided like the rest, and all that follows from them by
// equilibrium and K u = M e ZPA. The modes left out are taken to move together
// with the ground and with each other, and not in step with the modes used, so
// that CQC and SRSS become
//
//	R = sqrt(Rm² + Rr²),   Rm the modes combined, Rr the residual
//
// and the absolute sum takes |Rr| as one more term (missing mass: US NRC RG 1.92
// rev. 2 and 3, from memory; there the rigid parts of modes below the zero-period
// frequency may be added to Rr with their signs, which is not done here).
//
// left are the ordinates of the spectrum at the periods of modes.Left, m/s², NaN
// where it has none, by which the reader is warned where a mode left out is not rigid. It needs the
// stiffness of the structure, a result not scaled yet, and a finite zpa > 0.
func (c *Combined) WithResidual(modes *Modes, zpa float64, left []float64) (*Combined, error) {
	m := modes.Model
	switch {
	case len(left) != len(modes.Left):
		panic("modal: WithResidual needs an ordinate for each mode left out")
	case c.ScaleFactor != 1 || c.Residual != nil:
		panic("modal: a residual is added once, before scaling")
	case !(zpa > 0) || math.IsInf(zpa, 0):
		return nil, fmt.Errorf("the zero-period acceleration must be a finite number greater than 0, not %v", zpa)
	case len(m.K) == 0:
		return nil, errors.New("the displacements of the missing mass follow from the stiffness matrix, and imported modes have none")
	}
	res := &Residual{ZPA: zpa, Vector: missing(modes)}
	for i, o := range modes.Left {
		if o.MassRatio < countable || left[i] <= amplified*zpa {
			continue
		}
		if math.IsNaN(left[i]) {
			res.Unjudged++
			continue
		}
		res.Amplified, res.Last = res.Amplified+1, i+1
		if left[i] > res.Peak {
			res.Peak, res.PeakT = left[i], o.T
		}
	}
	mr := times(m.M, m.Influence)
	res.Mass = dot(res.Vector, mr) / dot(m.Influence, mr)
	force := times(m.M, res.Vector)
	for i := range force {
		force[i] *= zpa / c.Divisor
	}
	f, d, err := factor(m.K)
	if err != nil {
		return nil, err
	}
	r := spread(modes, force, solve(f, d, force))

	out := *c
	out.Residual = res
	for _, part := range []struct {
		to  *Response
		row []float64
	}{{&out.BaseShear, r.shear[:1]}, {&out.StoreyForce, r.force}, {&out.StoreyShear, r.shear}, {&out.Overturning, r.moment},
		{&out.Displacement, r.u}, {&out.Drift, r.drift}, {&out.DriftRatio, r.ratio}} {
		*part.to = part.to.plus(part.row, c.Rule)
	}
	out.BaseShearUnscaled = out.BaseShear.Combined[0]
	out.judge()
	out.checkResidual(modes)
	return &out, nil
}

// missing is e = r - sum(Gamma phi).
func missing(modes *Modes) []float64 {
	e := append([]float64(nil), modes.Model.Influence...)
	for i, phi := range modes.Phi {
		axpy(e, -modes.Gamma[i], phi)
	}
	return e
}

// plus combines a response with that of the residual.
func (r Response) plus(residual []float64, rule Rule) Response {
	out := Response{Name: r.Name, Modal: r.Modal, Residual: residual}
	for j, x := range residual {
		if rule == Absolute {
			out.Combined = append(out.Combined, r.Combined[j]+math.Abs(x))
		} else {
			out.Combined = append(out.Combined, math.Hypot(r.Combined[j], x))
		}
		out.AbsSum = append(out.AbsSum, r.AbsSum[j]+math.Abs(x))
	}
	return out
}

// checkResidual compares the residual with independent calculations.
func (c *Combined) checkResidual(modes *Modes) {
	m := modes.Model
	force, u := c.StoreyForce.Residual, c.Displacement.Residual
	size, off, sum := 0.0, 0.0, 0.0
	back := times(m.K, u)
	for i, f := range force {
		sum += f
		size = max(size, math.Abs(f))
		off = max(off, math.Abs(back[i]-f))
	}
	rigid := dot(m.Influence, times(m.M, m.Influence)) * c.Residual.ZPA / c.Divisor // all of the mass at the ZPA
	c.Checks = append(c.Checks[:len(c.Checks):len(c.Checks)],
		checked("forces of the missing mass add up to 1 - sum of the mass ratios, times total mass and ZPA (relative)", math.Abs(sum-(1-c.MassSum)*rigid)/rigid, 1e-9),
		checked("stiffness times displacement gives the forces of the missing mass (relative)", off/max(size, 1e-9*rigid), 1e-6))
	cross := 0.0 // the missing mass moves in no mode used
	for _, phi := range modes.Phi {
		cross = max(cross, math.Abs(dot(phi, force))/rigid)
	}
	c.Checks = append(c.Checks, checked("the missing mass is orthogonal to every mode used (relative)", cross, 1e-9))
}
