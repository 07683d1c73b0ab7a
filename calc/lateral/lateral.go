// Package lateral holds the static procedures of the standards: equivalent
// lateral forces, drifts and second-order effects of planar buildings.
//
// Conventions: vectors run lowest level first; storey i lies under level i;
// displacements are relative to the ground; everything is SI (m, kg, N).
package lateral

import "quoin/calc/cite"

// Static is the result of an equivalent lateral force procedure, as plain
// encodable data.
type Static struct {
	Basis  string // "ASCE/SEI 7-22", "ASCE/SEI 7-16", "EN 1998-1:2004"
	Levels []string
	H, Hs  []float64 // elevations and storey heights, m
	W      []float64 // seismic weight at each level, N

	SDS, SD1, S1, TL float64 // of the spectrum, in g and s; 0 where its standard has none
	R, Ie            float64
	Q, Lambda        float64 // EN 1998-1; 0 elsewhere

	Ta, Cu   float64 // approximate period, s, and the factor of its upper limit
	Stated   float64 // period given, s; 0: none
	T        float64 // period used for the forces, s
	Limbs    []Limb  // every expression for C_s, in the order of the clause; the governing one is marked
	Cs       float64
	V        float64 // base shear, N
	K        float64 // exponent of the distribution
	Cv       []float64
	F        []float64 // force at each level, N
	Shear    []float64 // shear of each storey, N
	Moment   []float64 // overturning moment at the foot of each storey, N*m
	Warnings []Warning

	// Diaphragm forces, N: as computed, their bounds, and what governs; empty
	// where the standard has no such rule.
	Diaphragm, DiaphragmRaw, DiaphragmMin, DiaphragmMax []float64

	// The elastic response under the forces that drift is found from. DriftPeriod
	// is the period of these forces, s (the stated one where the author asks for
	// drifts without its upper limit), DriftShear their storey shears, N.
	DriftPeriod  float64
	DriftShear   []float64
	Displacement []float64 // elastic, m
	Drift        []float64 // elastic storey drift, m
}

// Limb is one expression for the seismic response coefficient.
type Limb struct {
	Name    string // "upper limit"
	Value   float64
	Applies bool // false: not called for here; Why says so
	Why     string
	Governs bool
	Ref     cite.Ref
}

// Warning is something that the reader of a result must know.
type Warning struct {
	Code, Text string
	Ref        cite.Ref
}
