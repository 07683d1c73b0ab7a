// Package structure turns the description of a building into the plain model
// that analyses work on: levels, masses and stiffness matrices.
//
// Conventions: vectors run lowest level first; storey i lies under level i;
// displacements are relative to the ground; everything is SI (m, kg, N, N/m).
package structure

import "math"

// Model is a linear model of n lateral freedoms, as plain encodable data.
//
// A planar shear building has one freedom a level, in direction x. M, K and
// Influence are all that a modal analysis needs; Ks is empty when the stiffness
// did not come storey by storey.
type Model struct {
	Levels       []string    // names, lowest first
	H            []float64   // elevation of each level above the base, m
	Hs           []float64   // height of each storey, m
	Hn           float64     // elevation of the highest level, m
	W            []float64   // seismic weight at each level, N
	Mass         []float64   // mass at each level, kg
	Ks           []float64   // storey stiffness, N/m; empty when not a shear building
	M            [][]float64 // mass matrix, n x n, kg; symmetric
	K            [][]float64 // stiffness matrix, n x n, N/m; symmetric
	Influence    []float64   // displacement of each freedom for a unit ground displacement in x
	Damping      float64     // ratio of critical
	DampingGiven bool        // whether a damping ratio was stated, 0 perhaps; left to the caller of Shear
	Weight       float64     // sum of W, N
	TotalMass    float64     // sum of Mass, kg
}

// Freedoms is the number of freedoms.
func (m *Model) Freedoms() int { return len(m.M) }

// Foot is the elevation of the bottom of storey i (counted from 0), m.
func (m *Model) Foot(i int) float64 {
	if i == 0 {
		return m.H[0] - m.Hs[0]
	}
	return m.H[i-1]
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
