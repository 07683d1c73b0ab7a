// Package published is the type of a published case: a worked example, a table
// value or a closed form from outside the project, kept as data beside the
// engine that it tests. Tests run every case; the verification package prints
// them.
package published

import (
	"fmt"
	"math"

	"quoin/calc/cite"
)

// Origin tells how sure the wanted value is.
type Origin string

const (
	Read     Origin = "read in the source"
	Memory   Origin = "from memory, confirm"
	Computed Origin = "computed from the stated formula"
)

// Input is one given number, in the unit of the source.
type Input struct {
	Name  string
	Value float64
	Unit  string
}

// Want is one published result.
type Want struct {
	Name  string
	Value float64
	Unit  string  // of Value; Compute answers in the same unit
	Tol   float64 // absolute unless Rel
	Rel   bool
	Why   string // why this tolerance: "printed to 4 digits"
}

// Case is one published case. Compute returns a number for each Want, in order.
type Case struct {
	ID      string // unique, lower case: "half-sine-max"
	Title   string
	Source  cite.Ref
	Origin  Origin
	Inputs  []Input
	Wants   []Want
	Compute func() ([]float64, error)
}

// Outcome is one compared number.
type Outcome struct {
	Want Want
	Got  float64
	OK   bool
}

// Run computes the case and compares.
func (c Case) Run() ([]Outcome, error) {
	got, err := c.Compute()
	if err != nil {
		return nil, fmt.Errorf("%s: %w", c.ID, err)
	}
	if len(c.Wants) == 0 || len(got) != len(c.Wants) {
		return nil, fmt.Errorf("%s: %d results for %d wanted values", c.ID, len(got), len(c.Wants))
	}
	out := make([]Outcome, len(got))
	for i, w := range c.Wants {
		tol := w.Tol
		if w.Rel {
			tol *= math.Abs(w.Value)
		}
		out[i] = Outcome{Want: w, Got: got[i], OK: math.Abs(got[i]-w.Value) <= tol}
	}
	return out, nil
}
