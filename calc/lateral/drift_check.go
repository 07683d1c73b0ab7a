package lateral

import "math"

// check finds results again another way.
func (d *Drift) check(in DriftInput, rule driftRule) {
	n := len(d.Levels)
	add := func(name string, residual, limit float64) {
		d.Checks = append(d.Checks, Check{name, residual, limit})
	}
	if len(in.Displacement) == n {
		roof, sum := math.Abs(in.Displacement[n-1])*d.Factor, 0.0
		for i, x := range d.FirstOrder {
			if in.Simultaneous {
				x = math.Copysign(x, in.Elastic[i])
			}
			sum += x
		}
		if in.Simultaneous {
			add("drifts before second-order effects add up to the amplified displacement of the top", differ(math.Abs(sum), roof), 1e-9)
		} else {
			add("amplified displacement of the top above the sum of the drifts, which bounds it", max(0, roof-sum)/max(sum, tiny), 1e-9)
		}
	}
	if len(d.Theta) == 0 {
		return
	}
	if len(in.Stiffness) == n {
		worst := 0.0
		for i, k := range in.Stiffness {
			// theta = P/(k h) for ASCE/SEI 7, where C_d and I_e cancel; q_d times as much for EN 1998-1
			again := in.P[i] / (k * in.Hs[i])
			if rule.inelastic {
				again *= in.Qd
			}
			worst = max(worst, differ(d.Theta[i], again))
		}
		add("theta found again from the storey stiffness, P/(k h)", worst, 1e-9)
	}
	if in.Simultaneous && len(in.Displacement) == n {
		add("theta averaged over the height by the work of the shears, found again from the work of loads and forces", differ(in.averageTheta(d.Theta), in.workRatio(rule)), 1e-9)
	}
}

const tiny = 1e-300

// differ is how far a lies from b, in parts of the larger.
func differ(a, b float64) float64 {
	if a == b {
		return 0
	}
	return math.Abs(a-b) / max(math.Abs(a), math.Abs(b))
}

// averageTheta is the mean of theta with the work of each storey's shear as weight.
func (in DriftInput) averageTheta(theta []float64) float64 {
	sum, work := 0.0, 0.0
	for i, t := range theta {
		w := in.Shear[i] * in.Elastic[i]
		sum, work = sum+t*math.Abs(w), work+w
	}
	return sum / max(work, tiny)
}

// workRatio is the same mean from the work of the forces at the levels over their
// displacements, and of the loads over the vertical movement drift²/h of each
// storey's top: sum(P drift²/h) / sum(F u).
func (in DriftInput) workRatio(rule driftRule) float64 {
	loads, forces := 0.0, 0.0
	below := 0.0
	for i, u := range in.Displacement {
		f := in.Shear[i]
		if i+1 < len(in.Shear) {
			f -= in.Shear[i+1]
		}
		drift := u - below
		below = u
		loads += in.P[i] * drift * drift / in.Hs[i]
		forces += f * u
	}
	ratio := loads / max(math.Abs(forces), tiny)
	if rule.inelastic {
		ratio *= in.Qd
	}
	return ratio
}
