package spectrum

import "math"

// By definition PSV = ω SD and PSA = ω² SD with ω = 2π/T. On logarithmic axes of PSV over T the
// places of one PSA and of one SD are straight lines: the diagonals of a tripartite
// chart.

// FromPSA is the pseudo-velocity, m/s, that goes with the pseudo-acceleration psa,
// m/s², at the period T > 0, s.
func FromPSA(psa, T float64) float64 { return psa * T / (2 * math.Pi) }

// FromSD is the pseudo-velocity, m/s, that goes with the displacement sd, m, at the
// period T > 0, s.
func FromSD(sd, T float64) float64 { return 2 * math.Pi * sd / T }

// Diagonals is the range of PSA (m/s²) and SD (m) of a tripartite chart of the
// periods from..to (s) and the pseudo-velocities low..high (m/s): its corners.
func Diagonals(from, to, low, high float64) (psa, sd [2]float64) {
	return [2]float64{2 * math.Pi * low / to, 2 * math.Pi * high / from},
		[2]float64{low * from / (2 * math.Pi), high * to / (2 * math.Pi)}
}
