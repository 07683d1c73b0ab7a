package lateral

import (
	"fmt"
	"slices"
	"strings"
)

// DriftSystem is a row of ASCE/SEI 7 Table 12.12-1: the allowed storey drift as a
// part of the storey height by risk category. Every value is from memory, to be
// confirmed; both editions have the same.
type DriftSystem struct {
	Word, Doc string
	Storeys   int        // the most that the row holds for; 0: any number
	Ratio     [3]float64 // for risk categories I and II, III, IV
}

// DriftSystems is the table, in the order of its rows.
var DriftSystems = []DriftSystem{
	{"tolerant finishes", "other than masonry shear walls, four storeys or fewer, with interior walls, partitions, ceilings and exterior walls designed for the drifts", 4, [3]float64{0.025, 0.020, 0.015}},
	{"masonry cantilever", "masonry cantilever shear walls", 0, [3]float64{0.010, 0.010, 0.010}},
	{"masonry", "other masonry shear walls", 0, [3]float64{0.007, 0.007, 0.007}},
	{"other", "all other structures", 0, [3]float64{0.020, 0.015, 0.010}},
}

// AllowedDrift is the allowed drift over storey height by ASCE/SEI 7 Table
// 12.12-1 for a system of DriftSystems, a risk category I to IV, and a number of
// storeys. It panics on another word; the error is of type *DriftError.
func AllowedDrift(system, risk string, storeys int) (float64, error) {
	i := slices.IndexFunc(DriftSystems, func(s DriftSystem) bool { return s.Word == system })
	column, ok := map[string]int{"I": 0, "II": 0, "III": 1, "IV": 2}[risk]
	if i < 0 || !ok {
		panic("lateral: no row of drift limits for " + system + ", risk category " + risk)
	}
	s := DriftSystems[i]
	if s.Storeys > 0 && storeys > s.Storeys {
		return 0, &DriftError{"system", -1, fmt.Sprintf("%s holds for %d storeys at most, this structure has %d", s.Word, s.Storeys, storeys), "use the row of all other structures: other"}
	}
	return s.Ratio[column], nil
}

// DriftFinish is a case of EN 1998-1:2004 4.4.3.2(1): the limit of the reduced
// storey drift as a part of the storey height, from memory.
type DriftFinish struct {
	Word, Doc string
	Ratio     float64
}

// DriftFinishes is the clause, in its order.
var DriftFinishes = []DriftFinish{
	{"brittle", "non-structural elements of brittle materials attached to the structure", 0.005},
	{"ductile", "ductile non-structural elements", 0.0075},
	{"none", "non-structural elements fixed so as not to interfere with deformations, or none", 0.010},
}

// DamageLimit is the limit of nu*drift over storey height for a word of
// DriftFinishes; it panics on another.
func DamageLimit(finish string) float64 {
	i := slices.IndexFunc(DriftFinishes, func(f DriftFinish) bool { return f.Word == finish })
	if i < 0 {
		panic("lateral: no damage limit for " + finish)
	}
	return DriftFinishes[i].Ratio
}

// DamageReduction is nu of EN 1998-1:2004 4.4.3.2(2), as recommended: 0.5 for
// importance classes I and II, 0.4 for III and IV (from memory; a national annex
// may set others). It panics on another class.
func DamageReduction(class string) float64 {
	switch strings.ToUpper(class) {
	case "I", "II":
		return 0.5
	case "III", "IV":
		return 0.4
	}
	panic("lateral: no importance class " + class)
}
