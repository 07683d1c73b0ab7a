// Package lateral holds the static procedures of the standards: equivalent
// lateral forces, drifts and second-order effects of planar buildings.
//
// Conventions: vectors run lowest level first; storey i lies under level i;
// displacements are relative to the ground; everything is SI (m, kg, N).
package lateral

import (
	"quoin/calc/cite"
	"quoin/calc/standard"
)

// Static is the result of an equivalent lateral force procedure, as plain
// encodable data.
type Static struct {
	Basis  string // "ASCE/SEI 7-22", "ASCE/SEI 7-16", "EN 1998-1:2004"
	Levels []string
	H, Hs  []float64 // elevations and storey heights, m
	W      []float64 // seismic weight at each level, N
	M      []float64 // mass at each level, kg

	SDS, SD1, S1, TL float64 // of the spectrum, in g and s; 0 where its standard has none
	R, Ie            float64
	Q, Lambda        float64 // EN 1998-1; 0 elsewhere
	TC               float64 // end of the plateau, s, EN 1998-1
	LambdaWhy        string  // why this lambda
	Importance       string  // risk category or importance class that the target states; "": none
	S1Known          bool    // whether the target states S_1
	Exception        int     // to ASCE/SEI 7-16 11.4.8, claimed by the target; 0: none

	Weight, Mass float64 // total seismic weight, N, and mass, kg
	Hn           float64 // structural height, m
	System       string  // row of the table that Ct and X come from; empty where they are the author's
	Ct, X        float64 // T_a = Ct h_n^X, h_n in HeightUnit; 0 where no such formula was used
	HeightUnit   string  // "m" or "ft"

	// How the approximate period was found: "C_t", "storeys", "walls" or
	// "displacement"; empty where there is none.
	PeriodRule string
	Cq, Cw     float64 // of walls, h_n in HeightUnit
	Walls      []Wall
	BaseArea   float64 // m²
	Top        float64 // displacement of the top under gravity loads applied horizontally, m (EN 1998-1); 0 elsewhere

	Ta, Cu   float64 // approximate period, s, and the factor of its upper limit
	Stated   float64 // period given, s; 0: none
	Cap      float64 // C_u T_a, s; 0 where the standard has no such limit
	SDSUsed  float64 // S_DS that the plateau of C_s is found from: SDS, or less by 12.8.1.3
	T        float64 // period used for the forces, s
	TWhy     string  // why this one
	Limbs    []Limb  // every expression for C_s, in the order of the clause; the governing one is marked
	Cs       float64
	Sa       float64   // ordinate at T that the shear is found from: S_d of EN 1998-1, S_a of a multi-period spectrum, m/s²; else 0
	V        float64   // base shear, N
	K        float64   // exponent of the distribution
	Shape    []float64 // what the forces are distributed by, with the weights: h_x^k with h_x in HeightUnit, z_i in m, or s_i
	Weighted []float64 // weight times Shape, N; of EN 1998-1 mass times Shape, kg
	Cv       []float64 // share of each level
	F        []float64 // force at each level, N
	Shear    []float64 // shear of each storey, N
	Moment   []float64 // overturning moment at the foot of each storey, N*m
	Sums     Sums
	Warnings []Warning

	// Conditions are what the standard asks before the procedure, its approximate
	// period and its reliefs may be used; Permitted what follows: "permitted", "not
	// permitted" or "not shown".
	Conditions []standard.Condition
	Permitted  string
	// Redundancy, overstrength and deflection amplification factors stated; 0: not
	// stated. Nothing here is multiplied by them.
	Rho, Omega0, Cd float64

	// Diaphragm forces, N: as computed, their bounds, and what governs; empty
	// where the standard has no such rule.
	Diaphragm, DiaphragmRaw, DiaphragmMin, DiaphragmMax []float64
	DiaphragmGoverns                                    []string // "calculated", "minimum", "maximum"

	// The elastic response under the forces that drift is found from. DriftPeriod
	// is the period of these forces, s (the stated one where the author asks for
	// drifts without its upper limit), DriftShear their storey shears, N.
	DriftPeriod  float64
	DriftCs      float64
	DriftK       float64
	DriftLimb    Limb // that governs DriftCs; empty where the forces are those for strength
	DriftForce   []float64
	DriftShear   []float64
	Displacement []float64 // elastic, m
	Drift        []float64 // elastic storey drift, m

	Checks []Check // results found again by independent calculation
}

// Sums are sums over the levels.
type Sums struct{ Weighted, Cv, F float64 }

// Limb is one expression for the seismic response coefficient.
type Limb struct {
	Symbol  string  // "C_s_max"
	Name    string  // "upper limit"
	Value   float64 // 0 where it does not apply
	Applies bool    // false: not called for here; Why says so
	Unknown bool    // whether it applies could not be found; Why says so
	Why     string
	Governs bool
	Ref     cite.Ref
}

// Warning is something that the reader of a result must know.
type Warning struct {
	Code, Text string
	Ref        cite.Ref
}

// Check is a result found again another way.
type Check struct {
	Name            string
	Residual, Limit float64 // relative
}
