package standard

import (
	"errors"
	"fmt"

	"quoin/calc/quantity"
)

// table is a spectrum given row by row: linear in T between rows, never read
// beyond the first or the last. Its damping is what the caller says.
var table = Standard{
	Basis: "table",
	Doc:   "a spectrum given as rows of period and pseudo-acceleration",
	Parameters: []ParameterDoc{
		{Symbol: "T", Kind: Numbers, Dim: quantity.Time, Unit: "s", Doc: "periods, strictly increasing", Required: true, Zero: true},
		{Symbol: "PSA", Kind: Numbers, Dim: quantity.Acceleration, Unit: "g", Doc: "pseudo-accelerations, one a period", Required: true},
		{Symbol: "damping", Kind: Number, Doc: "ratio of critical damping that the rows hold for", Required: true},
	},
	Fixed: "a table holds for the damping of its rows alone",
	build: buildTable,
}

// Table is the spectrum through rows of period T (s, from 0 up, strictly
// increasing) and psa (m/s², positive) at a damping ratio.
func Table(T, psa []float64, damping float64) (*Target, error) {
	return table.Build(Given{
		Numbers: map[string]float64{"damping": damping},
		Columns: map[string][]float64{"T": T, "PSA": psa},
	})
}

func buildTable(in Given) (*Target, error) {
	T, psa, damping := in.Columns["T"], in.Columns["PSA"], in.Numbers["damping"]
	var all []error
	fail := func(symbol, format string, args ...any) {
		all = append(all, &ParameterError{Symbol: symbol, Problem: fmt.Sprintf(format, args...)})
	}
	if damping >= 1 {
		fail("damping", "must be a ratio below 1, not %v", damping)
	}
	if len(T) < 2 {
		fail("T", "a spectrum needs at least two rows, not %d", len(T))
	}
	if len(psa) != len(T) {
		fail("PSA", "has %d rows where T has %d", len(psa), len(T))
	}
	for i := 1; i < len(T); i++ {
		if !(T[i] > T[i-1]) {
			fail("T", "row %d (%v s) does not follow row %d (%v s): periods must increase", i+1, T[i], i, T[i-1])
		}
	}
	if err := errors.Join(all...); err != nil {
		return nil, err
	}
	t := &Target{
		Basis: "table", Symbol: "S_a", Damping: damping,
		Parameters: []Parameter{{Symbol: "damping", Value: damping, Unit: "%", Doc: "damping ratio of the rows", Given: true}},
	}
	for i := 1; i < len(T); i++ {
		slope := (psa[i] - psa[i-1]) / (T[i] - T[i-1])
		t.Branches = append(t.Branches, Branch{
			Name: fmt.Sprintf("rows %d to %d", i, i+1), From: T[i-1], To: T[i],
			A0: psa[i-1] - slope*T[i-1], A1: slope,
		})
	}
	return t, nil
}
