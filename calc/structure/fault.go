package structure

import (
	"errors"
	"fmt"
	"strings"
)

// Part names what a fault is in.
type Part string

const (
	InLevels    Part = "levels"
	InElevation Part = "elevation"
	InMass      Part = "mass"
	InStiffness Part = "stiffness"
)

// Fault is one thing wrong with what a model is built from, and where.
type Fault struct {
	Code        string // of the diagnostic: "mechanism"
	In          Part
	Row, Column int // counted from 0; -1 where it is not one row or one cell
	Text, Hint  string
}

func (f *Fault) Error() string { return f.Text }

// Faults are the faults joined in an error, in order; empty where it holds others.
func Faults(err error) []*Fault {
	var joined interface{ Unwrap() []error }
	if errors.As(err, &joined) {
		var out []*Fault
		for _, e := range joined.Unwrap() {
			out = append(out, Faults(e)...)
		}
		return out
	}
	var f *Fault
	if errors.As(err, &f) {
		return []*Fault{f}
	}
	return nil
}

// faults collects.
type faults []error

func (fs *faults) add(code string, in Part, row, column int, format string, args ...any) *Fault {
	f := &Fault{Code: code, In: in, Row: row, Column: column, Text: fmt.Sprintf(format, args...)}
	*fs = append(*fs, f)
	return f
}

func (fs faults) err() error { return errors.Join(fs...) }

// list is "level L1", "levels L1 and L2" or, of many, "levels L1, L2, L3 and 4 more".
func list(levels []string) string {
	switch n := len(levels); {
	case n == 0:
		return "no level"
	case n == 1:
		return "level " + levels[0]
	case n > 6:
		return fmt.Sprintf("levels %s and %d more", strings.Join(levels[:4], ", "), n-4)
	default:
		return "levels " + strings.Join(levels[:n-1], ", ") + " and " + levels[n-1]
	}
}
