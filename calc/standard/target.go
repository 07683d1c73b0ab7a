// Package standard holds design spectra of published standards, one file a
// standard, all built into one plain form: a list of branches.
//
// A new standard is one new file with a Standard in it and one line in the list
// Standards; the suite of the package then runs over it.
package standard

import (
	"fmt"
	"math"
	"slices"
	"strconv"

	"quoin/calc/cite"
)

// Target is a pseudo-acceleration spectrum to design or scale for, as plain
// encodable data. Periods are in s, ordinates in m/s².
type Target struct {
	Basis      string      // "ASCE/SEI 7-22", "table"
	Spectrum   string      // "design", "MCE_R", "elastic"; empty for a table
	Symbol     string      // what the standard calls the ordinate: "S_a", "S_e"
	Damping    float64     // ratio that the ordinates hold for
	Parameters []Parameter // in reading order: given, then derived
	Branches   []Branch    // by rising period, each starting where the last ends
	Corners    []Corner    // named periods where branches meet
	Conditions []Condition // what the standard asks before its spectrum may be used
	Warnings   []Warning
	Notes      []string // what the reader should know of how it was made

	// MultiPeriod is set where the ordinates of ASCE/SEI 7-22 11.4.5.1 are given
	// period by period.
	MultiPeriod bool
	// Vertical is set for a spectrum of vertical motion.
	Vertical bool
	// Q is the behaviour factor that the ordinates are already divided by; 0
	// where they are elastic.
	Q float64
	// Exception is the number of the exception to ASCE/SEI 7-16 11.4.8 that the
	// author claims and that binds what comes after the spectrum; 0: none.
	Exception int
	// Given is what the spectrum was built from, so that it can be built again
	// at another damping.
	Given Given
}

// Parameter is one number or word that a spectrum stands on.
type Parameter struct {
	Symbol string
	Value  float64 // SI; spectral values S_... are pure numbers, in g
	Unit   string  // for display: "s"; empty: pure number
	Text   string  // the word, where the parameter is one: "D"
	Doc    string
	Given  bool // false: derived
	// Formula is how a derived number follows from others, in the language of
	// formula lines; empty where it was given or read from a table.
	Formula string
	Ref     cite.Ref
}

// Branch is PSA = A0 + A1 T + B1/T + B2/T² + C T^Power for From <= T <= To.
type Branch struct {
	Name     string  // "plateau"
	From, To float64 // s; To 0: without end
	A0       float64 // m/s²
	A1       float64 // m/s³
	B1       float64 // m/s
	B2       float64 // m
	C, Power float64 // C: m/s² at 1 s
	// Formula is the ordinate as the clause gives it, over T and the parameters,
	// in the language of formula lines: an acceleration, or a pure number in g.
	Formula string
	// Step is set where the standard itself jumps at From.
	Step bool
	Ref  cite.Ref
}

// Corner is a named period.
type Corner struct {
	Symbol string // "T_S"
	T      float64
}

// Condition is something that the standard asks, and how it stands here.
type Condition struct {
	Text  string
	State string // "applies", "does not apply", "not evaluated", "claimed"
	Ref   cite.Ref
}

// Warning is something that the reader of a spectrum must know.
type Warning struct {
	Code, Text string
	Ref        cite.Ref
}

// At is the ordinate of the branch, m/s², with no look at its ends.
func (b Branch) At(T float64) float64 {
	y := b.A0 + b.A1*T
	if b.B1 != 0 {
		y += b.B1 / T
	}
	if b.B2 != 0 {
		y += b.B2 / (T * T)
	}
	if b.C != 0 {
		y += b.C * math.Pow(T, b.Power)
	}
	return y
}

// PSA is the pseudo-acceleration at period T >= 0, m/s². A spectrum from a
// table is never read beyond its ends.
func (t *Target) PSA(T float64) (float64, error) {
	b, err := t.BranchAt(T)
	if err != nil {
		return 0, err
	}
	return b.At(T), nil
}

// SD is the displacement of an oscillator of period T that the ordinate stands
// for, m: PSA (T/2π)², 0 at T = 0.
func (t *Target) SD(T float64) (float64, error) {
	y, err := t.PSA(T)
	return y * T * T / (4 * math.Pi * math.Pi), err
}

// BranchAt is the branch that holds period T; where two meet, the one below.
func (t *Target) BranchAt(T float64) (Branch, error) {
	if len(t.Branches) == 0 {
		panic("standard: a target without branches")
	}
	if math.IsNaN(T) || math.IsInf(T, 0) || T < 0 {
		return Branch{}, fmt.Errorf("a spectrum is read at a finite period from 0 up, not at %v s", T)
	}
	T = t.settled(T)
	from, to := t.Range()
	if T < from || T > to {
		return Branch{}, fmt.Errorf("period %s s lies outside the spectrum, which runs from %.6g s to %.6g s", outside(T, from, to), from, to)
	}
	i := slices.IndexFunc(t.Branches, func(b Branch) bool { return b.To == 0 || T <= b.To })
	return t.Branches[i], nil
}

// settled is a period that lies outside by rounding alone, put on the end.
func (t *Target) settled(T float64) float64 {
	from, to := t.Range()
	switch {
	case T < from && !above(from, T):
		return from
	case T > to && !above(T, to):
		return to
	}
	return T
}

// Range is the first and the last period of the spectrum, s; the last is
// infinite where the standard sets no end.
func (t *Target) Range() (from, to float64) {
	to = t.Branches[len(t.Branches)-1].To
	if to == 0 {
		to = math.Inf(1)
	}
	return t.Branches[0].From, to
}

// Series is PSA at each period, m/s².
func (t *Target) Series(periods []float64) ([]float64, error) {
	out := make([]float64, len(periods))
	for i, T := range periods {
		y, err := t.PSA(T)
		if err != nil {
			return nil, err
		}
		out[i] = y
	}
	return out, nil
}

// RaisesCs tells whether a structure of period T, s, is designed for more than the
// ordinates say: exception 2 to ASCE/SEI 7-16 11.4.8 raises C_s from T_S on and
// leaves the spectrum as it is.
func (t *Target) RaisesCs(T float64) bool {
	i := slices.IndexFunc(t.Corners, func(c Corner) bool { return c.Symbol == "T_S" })
	return t.Exception == 2 && (i < 0 || T > t.Corners[i].T)
}

// Parameter returns the parameter with this symbol.
func (t *Target) Parameter(symbol string) (Parameter, bool) {
	i := slices.IndexFunc(t.Parameters, func(p Parameter) bool { return p.Symbol == symbol })
	if i < 0 {
		return Parameter{}, false
	}
	return t.Parameters[i], true
}

// outside is a period that lies outside, at 4 digits, or all it needs where 4 would
// put it inside.
func outside(T, from, to float64) string {
	text := strconv.FormatFloat(T, 'g', 4, 64)
	if short, _ := strconv.ParseFloat(text, 64); short >= from && short <= to {
		return strconv.FormatFloat(T, 'g', -1, 64)
	}
	return text
}
