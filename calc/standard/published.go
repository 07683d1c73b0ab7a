package standard

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/published"
	"quoin/calc/quantity"
)

// Published is every published case of this package.
func Published() []published.Case {
	return slices.Concat(published722(), published716(), publishedSites(), publishedVertical(), publishedEN(), publishedDisplacement(), []published.Case{rows()})
}

// reading makes what a case computes: it builds the spectrum and reads numbers
// off it.
func reading(basis string, in Given, read func(t *Target) []float64) func() ([]float64, error) {
	return func() ([]float64, error) {
		t, err := Build(basis, in)
		if err != nil {
			return nil, err
		}
		return read(t), nil
	}
}

// ordinates are PSA of t at these periods over unit, m/s².
func ordinates(t *Target, unit float64, periods ...float64) []float64 {
	out := make([]float64, len(periods))
	for i, T := range periods {
		y, err := t.PSA(T)
		if err != nil {
			return nil
		}
		out[i] = y / unit
	}
	return out
}

// values are parameters of t by symbol.
func values(t *Target, symbols ...string) []float64 {
	var out []float64
	for _, s := range symbols {
		p, ok := t.Parameter(s)
		if !ok {
			panic("standard: no parameter " + s)
		}
		out = append(out, p.Value)
	}
	return out
}

// exact is a value that the arithmetic must reproduce to its rounding.
func exact(name string, value float64, unit string) published.Want {
	return published.Want{Name: name, Value: value, Unit: unit, Tol: 1e-12, Why: "exact decimal number"}
}

// texts are wants with the digits of their texts; without a unit, periods are in
// s and ordinates in g.
func texts(want func(name, text, unit string) published.Want, unit string, names, digits []string) []published.Want {
	var out []published.Want
	for i, d := range digits {
		u := unit
		switch {
		case u != "":
		case strings.HasPrefix(names[i], "T_"):
			u = "s"
		case strings.HasPrefix(names[i], "S_a("):
			u = "g"
		}
		out = append(out, want(names[i], d, u))
	}
	return out
}

// at names ordinates by period: "S_a(0.2 s)".
func at(symbol string, periods ...float64) []string {
	var out []string
	for _, T := range periods {
		out = append(out, fmt.Sprintf("%s(%v s)", symbol, T))
	}
	return out
}

// inputsOf lists the numbers given, by symbol, SI.
func inputsOf(basis string, in Given) []published.Input {
	s, _ := Lookup(basis)
	var out []published.Input
	for _, d := range s.Parameters {
		if x, ok := in.Numbers[d.Symbol]; ok {
			out = append(out, published.Input{Name: d.Symbol, Value: x, Unit: quantity.SIUnit(d.Dim).Text})
		}
	}
	return out
}

// rows is an invented spectrum at the 22 periods of the multi-period form, read
// as a table.
func rows() published.Case {
	T, sa := periods722, synthetic722
	c := published.Case{
		ID: "table-22-periods", Title: "Linear interpolation between rows of a spectrum",
		Source: cite.To("ASCE/SEI 7-22", "11.4.5.1"), Origin: published.Computed,
		Wants: []published.Want{exact("S_a(0)", 0.45, "g"), exact("S_a(0.3 s)", 1.15, "g"), exact("S_a(0.35 s)", 1.135, "g"), exact("S_a(1.25 s)", 0.6, "g"), exact("2 S_a(2 s)", 0.76, "g"), exact("S_a(10 s)", 0.05, "g")},
		Compute: func() ([]float64, error) {
			psa := make([]float64, len(sa))
			for i := range sa {
				psa[i] = sa[i] * quantity.Gravity
			}
			t, err := Table(T, psa, 0.05)
			if err != nil {
				return nil, err
			}
			out, err := t.Series([]float64{0, 0.3, 0.35, 1.25, 2, 10})
			for i := range out {
				out[i] /= quantity.Gravity
			}
			if err == nil {
				out[4] *= 2
			}
			return out, err
		},
	}
	for i := range T {
		c.Inputs = append(c.Inputs, published.Input{Name: fmt.Sprintf("S_a(%g s)", T[i]), Value: sa[i], Unit: "g"})
	}
	return c
}
