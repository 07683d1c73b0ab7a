// Package motion is ground acceleration: the record as plain data, the closed
// forms it may be made from, its integrals and its intensity measures.
//
// A record is a row of samples at a constant step and is taken as linear between
// them, everywhere in the program. What can be had exactly from that (integrals,
// turning points between samples, energy) is computed exactly; no step size is
// tuned anywhere. Before the first and after the last sample the ground does not
// accelerate. Units are SI throughout: m/s², s.
package motion

import (
	"fmt"
	"math"
	"slices"
)

// Record is the ground acceleration as used, with where it came from.
type Record struct {
	A      []float64 `json:"a"`    // m/s², at t = 0, Step, 2 Step, ...
	Step   float64   `json:"step"` // s
	Origin Origin    `json:"origin,omitzero"`
}

// Origin is what the record file says about itself, kept word for word. It is
// empty for a closed form, but for Format.
type Origin struct {
	Format      string   `json:"format,omitempty"`       // name in archive.Formats, or "form sine"
	UnitInFile  string   `json:"unit_in_file,omitempty"` // as written there, or as given by the caller
	StepSource  string   `json:"step_source,omitempty"`  // "header", "time column" or "given"
	Channel     string   `json:"channel,omitempty"`      // name of the column or trace that was taken
	Component   string   `json:"component,omitempty"`    // "45", "NS", "UP"
	Event       string   `json:"event,omitempty"`
	Date        string   `json:"date,omitempty"` // as written
	Station     string   `json:"station,omitempty"`
	Filter      string   `json:"filter,omitempty"` // filter text of the header
	Header      []string `json:"header,omitempty"` // all lines before the numbers
	FileSamples int      `json:"file_samples,omitempty"`
	// UsablePeriod is the longest period at which the record is reliable, s; 0 when not stated.
	UsablePeriod float64 `json:"usable_period,omitempty"`
	// ShortestPeriod is the shortest period at which the record is reliable, s; 0 when not stated.
	ShortestPeriod float64 `json:"shortest_period,omitempty"`
	// Corners are the lower and the upper corner of the filters applied here, Hz: of
	// several the narrower; 0 for none.
	Corners [2]float64 `json:"corners,omitzero"`
	// Lead is the pad before the first sample of the file, s: records that belong
	// together are in step when their leads are.
	Lead      float64   `json:"lead,omitempty"`
	Treatment []string  `json:"treatment,omitempty"` // what was done here, step by step
	Warnings  []Warning `json:"warnings,omitempty"`
}

// Warning is a doubt about a record that travels with it.
type Warning struct {
	Code string `json:"code"`           // stable: "unit-contradicts"
	Line int    `json:"line,omitempty"` // of the record file, from 1; 0 is the file as a whole
	Text string `json:"text"`
}

// snap is how near a time must lie to a sample to mean it, in steps.
const snap = 1e-6

// New is a record of these samples. It returns the error of [Record.Validate].
func New(a []float64, step float64) (*Record, error) {
	r := &Record{A: a, Step: step}
	if err := r.Validate(); err != nil {
		return nil, err
	}
	return r, nil
}

// Limits of a record. They leave every shaking table, blast and centrifuge within, and every
// measure a finite number; what lies outside is a slip of the unit or the scale.
const (
	maxAcceleration = 1e6  // m/s²
	shortestStep    = 1e-6 // s
	longestStep     = 1e3  // s
)

// Validate tells what makes the record unusable: fewer than two samples, values
// that are not finite, accelerations above 1e6 m/s², a step outside 1e-6 to 1e3 s.
func (r *Record) Validate() error {
	if !(r.Step > 0) || math.IsInf(r.Step, 0) {
		return fmt.Errorf("the step of a record must be positive, not %v s", r.Step)
	}
	if r.Step < shortestStep || r.Step > longestStep {
		return fmt.Errorf("a step of %.4g s cannot be that of a record (from %g to %g s): is the unit right?", r.Step, shortestStep, longestStep)
	}
	if len(r.A) < 2 {
		return fmt.Errorf("a record needs two samples or more, not %d", len(r.A))
	}
	peak := 0.0
	for i, a := range r.A {
		if math.IsNaN(a) || math.IsInf(a, 0) {
			return fmt.Errorf("sample %d of the record is not a finite number", i+1)
		}
		peak = max(peak, math.Abs(a))
	}
	if peak > maxAcceleration {
		return fmt.Errorf("accelerations up to %.3g m/s² cannot be those of a record (at most %g m/s²): is the unit right?", peak, maxAcceleration)
	}
	return nil
}

// Samples is the number of samples.
func (r *Record) Samples() int { return len(r.A) }

// Duration is the time from the first to the last sample, s.
func (r *Record) Duration() float64 { return float64(len(r.A)-1) * r.Step }

// Time is the time of sample i, counted from 0, s.
func (r *Record) Time(i int) float64 { return float64(i) * r.Step }

// Scaled is the record multiplied by f.
func (r *Record) Scaled(f float64) *Record {
	out := *r
	out.A = make([]float64, len(r.A))
	for i, a := range r.A {
		out.A[i] = f * a
	}
	return &out
}

// Window is the part of the record from one time to another, both included, with
// its time counted anew from 0. Times within a millionth of a step of a sample
// are that sample; any other time is snapped inwards, to the samples that lie
// within the window. It returns an error for times outside the record and for a
// window that holds fewer than two samples.
func (r *Record) Window(from, to float64) (*Record, error) {
	n := float64(len(r.A) - 1)
	first, last := math.Ceil(from/r.Step-snap), math.Floor(to/r.Step+snap)
	switch {
	case math.IsNaN(first) || math.IsNaN(last):
		return nil, fmt.Errorf("the window of a record needs two times")
	case from/r.Step < -snap || to/r.Step > n+snap:
		return nil, fmt.Errorf("the window %v to %v s reaches outside the record, which lasts %v s", from, to, r.Duration())
	case last <= first:
		return nil, fmt.Errorf("the window %v to %v s holds fewer than two samples", from, to)
	}
	out := *r
	out.A = slices.Clone(r.A[int(math.Max(first, 0)) : int(last)+1])
	return &out, nil
}
