// Package diag holds what the program says about a source file: a message with
// a range, its severity, a code, and a hint that says what to do.
//
// Diagnostics are collected, never printed where they arise; [Write] is the one
// place that lays them out for a reader.
package diag

import (
	"cmp"
	"fmt"
	"slices"
)

// Severity tells whether a message stops the build.
type Severity string

const (
	Error   Severity = "error"
	Warning Severity = "warning"
)

// Range is a stretch of one file. Lines and columns count from 1; columns count
// characters (not bytes). EndColumn is exclusive. A zero Line means the file as
// a whole.
type Range struct {
	File      string `json:"file"`
	Line      int    `json:"line"`
	Column    int    `json:"column"`
	EndLine   int    `json:"end_line"`
	EndColumn int    `json:"end_column"`
}

// String is file:line:column, as editors read it.
func (r Range) String() string {
	if r.Line == 0 {
		return r.File
	}
	return fmt.Sprintf("%s:%d:%d", r.File, r.Line, r.Column)
}

// Diagnostic is one message. Code is stable and short ("unknown-name"); Summary
// is one line without a full stop; Hint says what to try and may be empty.
type Diagnostic struct {
	Severity Severity `json:"severity"`
	Code     string   `json:"code"`
	Range    Range    `json:"range"`
	Summary  string   `json:"summary"`
	Hint     string   `json:"hint,omitempty"`
}

// List is what a run has to say.
type List []Diagnostic

// Errorf appends an error and returns a pointer to it, so that a hint can follow.
func (l *List) Errorf(code string, at Range, format string, args ...any) *Diagnostic {
	return l.add(Error, code, at, format, args)
}

// Warnf appends a warning.
func (l *List) Warnf(code string, at Range, format string, args ...any) *Diagnostic {
	return l.add(Warning, code, at, format, args)
}

func (l *List) add(s Severity, code string, at Range, format string, args []any) *Diagnostic {
	*l = append(*l, Diagnostic{Severity: s, Code: code, Range: at, Summary: fmt.Sprintf(format, args...)})
	return &(*l)[len(*l)-1]
}

// WithHint sets the hint of a diagnostic just made.
func (d *Diagnostic) WithHint(format string, args ...any) {
	d.Hint = fmt.Sprintf(format, args...)
}

// HasErrors tells whether any of the messages stops the build.
func (l List) HasErrors() bool {
	return slices.ContainsFunc(l, func(d Diagnostic) bool { return d.Severity == Error })
}

// Sort orders messages by file, line, column, then text, and drops repeats.
func (l List) Sort() List {
	slices.SortStableFunc(l, func(a, b Diagnostic) int {
		return cmp.Or(cmp.Compare(a.Range.File, b.Range.File), cmp.Compare(a.Range.Line, b.Range.Line),
			cmp.Compare(a.Range.Column, b.Range.Column), cmp.Compare(a.Summary, b.Summary))
	})
	return slices.Compact(l)
}
