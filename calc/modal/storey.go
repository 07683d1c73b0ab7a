package modal

import "math"

// UnscaledShear is the storey shears that belong to the drifts, N: those before
// ScaledTo, which does not touch drifts.
func (c *Combined) UnscaledShear() []float64 { return scaled(c.StoreyShear.Combined, 1/c.ScaleFactor) }

// StoreyStiffness is shear over drift of each storey, N/m, where that is the same
// in every mode within 1e-6, as in a shear building; ok is false elsewhere.
func (c *Combined) StoreyStiffness() (k []float64, ok bool) {
	for j := range c.Levels {
		d := c.Drift.Modal[0][j]
		if d == 0 {
			return nil, false
		}
		k = append(k, c.StoreyShear.Modal[0][j]/c.ScaleFactor/d)
		for i, shear := range c.StoreyShear.Modal {
			v := shear[j] / c.ScaleFactor
			most := 0.0
			for _, x := range shear {
				most = max(most, math.Abs(x)/c.ScaleFactor)
			}
			if !(math.Abs(v-k[j]*c.Drift.Modal[i][j]) <= 1e-6*most) {
				return nil, false
			}
		}
	}
	return k, true
}

// MassAbove is the mass at and above each level, kg.
func (c *Combined) MassAbove() []float64 {
	out := make([]float64, len(c.LevelMass))
	above := 0.0
	for i := len(out) - 1; i >= 0; i-- {
		above += c.LevelMass[i]
		out[i] = above
	}
	return out
}
