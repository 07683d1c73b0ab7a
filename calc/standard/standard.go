package standard

import (
	"errors"
	"fmt"
	"maps"
	"math"
	"slices"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/diag"
	"quoin/calc/quantity"
)

// Standards is every basis that a target can have, in the order of reading.
var Standards = []Standard{
	asce722,
	asce716,
	en1998,
	table,
}

// Standard is one way to state a design spectrum.
type Standard struct {
	Basis      string // "ASCE/SEI 7-22"
	Doc        string // one line
	Ref        cite.Ref
	Spectra    []string // allowed values of the text "spectrum", the usual first; empty: none
	Parameters []ParameterDoc
	Derived    []ParameterDoc    // what a spectrum may have beside them
	Gaps       map[string]string // words that are no choice, "site: F", and why
	// Damping is the parameter with the damping ratio, where the standard adjusts
	// its spectra to it; else Fixed says why it does not.
	Damping, Fixed string
	// build gets values that are known, finite and in range, with every
	// required one there.
	build func(in Given) (*Target, error)
}

// Kind is the type of a parameter.
type Kind string

const (
	Number  Kind = "number"
	Text    Kind = "text"
	Numbers Kind = "numbers" // a column
)

// ParameterDoc describes a parameter of a standard.
type ParameterDoc struct {
	Symbol   string
	Kind     Kind
	Dim      quantity.Dim // of a number; SI
	Unit     string       // usual unit of display
	Doc      string
	Required bool
	Choices  []string // of a text
	Zero     bool     // 0 is allowed (a number is otherwise greater than zero)
	Ref      cite.Ref
}

// Given is what the user states, by symbol, SI. Texts holds "spectrum" too.
type Given struct {
	Numbers map[string]float64
	Texts   map[string]string
	Columns map[string][]float64
}

// clone is a copy that shares nothing with the original.
func (in Given) clone() Given {
	out := Given{Numbers: map[string]float64{}, Texts: map[string]string{}, Columns: map[string][]float64{}}
	maps.Copy(out.Numbers, in.Numbers)
	maps.Copy(out.Texts, in.Texts)
	for k, v := range in.Columns {
		out.Columns[k] = slices.Clone(v)
	}
	return out
}

// number is a number and whether it is given.
func (in Given) number(symbol string) (float64, bool) {
	x, ok := in.Numbers[symbol]
	return x, ok
}

// ParameterError says what is wrong with one parameter.
type ParameterError struct {
	Symbol  string // "T_L", "spectrum"
	Problem string
	Hint    string
}

func (e *ParameterError) Error() string { return Said(e.Symbol, e.Problem) }

// Said joins a symbol with what is wrong about it: "q is missing", "q: 12 is no ...".
func Said(symbol, problem string) string {
	if strings.HasPrefix(problem, "is ") {
		return symbol + " " + problem
	}
	return symbol + ": " + problem
}

// Problems lists the parameter errors in err (as Build joins them).
func Problems(err error) []*ParameterError {
	if joined, ok := err.(interface{ Unwrap() []error }); ok {
		var all []*ParameterError
		for _, e := range joined.Unwrap() {
			all = append(all, Problems(e)...)
		}
		return all
	}
	var one *ParameterError
	if errors.As(err, &one) {
		return []*ParameterError{one}
	}
	return nil
}

// Lookup returns the standard with this basis.
func Lookup(basis string) (Standard, bool) {
	i := slices.IndexFunc(Standards, func(s Standard) bool { return s.Basis == basis })
	if i < 0 {
		return Standard{}, false
	}
	return Standards[i], true
}

// Bases lists the basis of every standard.
func Bases() []string {
	var out []string
	for _, s := range Standards {
		out = append(out, s.Basis)
	}
	return out
}

// Build makes the spectrum of the standard named basis. All that is wrong with
// the parameters comes back at once, as joined errors of type *ParameterError.
func Build(basis string, in Given) (*Target, error) {
	s, ok := Lookup(basis)
	if !ok {
		e := &ParameterError{Symbol: "basis", Problem: fmt.Sprintf("%q is not a known basis", basis), Hint: "known: " + strings.Join(Bases(), ", ")}
		return nil, e
	}
	return s.Build(in)
}

// Build makes the spectrum from what is given.
func (s Standard) Build(in Given) (*Target, error) {
	if err := s.check(in); err != nil {
		return nil, err
	}
	t, err := s.build(in)
	if err != nil {
		return nil, err
	}
	numbers := []float64{}
	for _, b := range t.Branches {
		numbers = append(numbers, b.A0, b.A1, b.B1, b.B2, b.C, b.From, b.To)
	}
	for _, p := range t.Parameters {
		numbers = append(numbers, p.Value)
	}
	for _, x := range numbers {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return nil, &ParameterError{Symbol: "basis", Problem: "the values given are too large or too small for a spectrum"}
		}
	}
	t.Given = in.clone()
	return t, nil
}

// check looks at each parameter by itself.
func (s Standard) check(in Given) error {
	var all []error
	fail := func(symbol, hint, format string, args ...any) {
		all = append(all, &ParameterError{Symbol: symbol, Problem: fmt.Sprintf(format, args...), Hint: hint})
	}
	kinds := map[string]Kind{}
	var symbols []string
	for _, p := range s.docs() {
		kinds[p.Symbol] = p.Kind
		symbols = append(symbols, p.Symbol)
	}
	known := func(symbol string, kind Kind) {
		switch want, ok := kinds[symbol]; {
		case !ok:
			hint := "parameters: " + strings.Join(symbols, ", ")
			if of := belongs(symbol); of != "" {
				hint = "it belongs to " + of
			} else if near := diag.Nearest(symbol, symbols); near != "" {
				hint = "did you mean " + near + "?"
			}
			fail(symbol, hint, "not a parameter of %s", s.Basis)
		case want != kind:
			fail(symbol, "", "must be a %s", want)
		}
	}
	for _, symbol := range slices.Sorted(maps.Keys(in.Numbers)) {
		known(symbol, Number)
	}
	for _, symbol := range slices.Sorted(maps.Keys(in.Texts)) {
		known(symbol, Text)
	}
	for _, symbol := range slices.Sorted(maps.Keys(in.Columns)) {
		known(symbol, Numbers)
	}
	for _, p := range s.docs() {
		present := false
		switch p.Kind {
		case Number:
			var x float64
			if x, present = in.Numbers[p.Symbol]; present {
				switch {
				case math.IsNaN(x) || math.IsInf(x, 0):
					fail(p.Symbol, "", "is not a finite number")
				case x < 0 || x == 0 && !p.Zero:
					fail(p.Symbol, "", "must %s", p.bound())
				}
			}
		case Text:
			var word string
			if word, present = in.Texts[p.Symbol]; present && !slices.Contains(p.Choices, word) {
				if gap := s.Gaps[p.Symbol+": "+word]; gap != "" {
					fail(p.Symbol, "write one of "+strings.Join(p.Choices, ", "), "%s", gap)
					break
				}
				fail(p.Symbol, "write one of "+strings.Join(p.Choices, ", "), "%q is not allowed", word)
			}
		case Numbers:
			var column []float64
			column, present = in.Columns[p.Symbol]
			for i, x := range column {
				if math.IsNaN(x) || math.IsInf(x, 0) {
					fail(p.Symbol, "", "row %d is not a finite number", i+1)
				} else if x < 0 || x == 0 && !p.Zero {
					fail(p.Symbol, "", "row %d must %s", i+1, p.bound())
				}
			}
		}
		if p.Required && !present {
			fail(p.Symbol, "", "is missing: %s", p.Doc)
		}
	}
	return errors.Join(all...)
}

// belongs names the standards that have a parameter.
func belongs(symbol string) string {
	var of []string
	for _, s := range Standards {
		if slices.ContainsFunc(s.docs(), func(p ParameterDoc) bool { return p.Symbol == symbol }) {
			of = append(of, s.Basis)
		}
	}
	return strings.Join(of, ", ")
}

// bound says what a number must be.
func (p ParameterDoc) bound() string {
	if p.Zero {
		return "not be negative"
	}
	return "be greater than zero"
}

// docs is every parameter, with the choice of spectrum first where there is one.
func (s Standard) docs() []ParameterDoc {
	if len(s.Spectra) == 0 {
		return s.Parameters
	}
	return append([]ParameterDoc{{Symbol: "spectrum", Kind: Text, Doc: "which spectrum of the standard", Choices: s.Spectra, Ref: s.Ref}}, s.Parameters...)
}
