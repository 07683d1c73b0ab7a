// Package live is the values in prose: the pipeline inside {{ ... }}, such as
//
//	.V
//	.V | as "kip" | sig 3
//	.m.T | item 1
//	as "kip" .V
//
// A pipeline starts from one value of the package and changes how it is shown,
// never what it is: arithmetic belongs in formula lines. It has the syntax of
// text/template, of which one complete pipeline is allowed: no control words, no
// variables, no parentheses, and only the functions of [Functions].
package live

import (
	"errors"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// Error says what is wrong with a pipeline. Offset and Length count bytes of
// the text given to Parse.
type Error struct {
	Offset, Length int
	Summary, Hint  string
}

func (e *Error) Error() string { return e.Summary }

// Pipeline is a pipeline that was read and checked as far as that goes without
// its value.
type Pipeline struct {
	// Names is the values it depends on, as dotted paths ("V", "m.T"). There is
	// exactly one today.
	Names []string

	at    span   // of the name in the text
	steps []step // in order of application
}

// step is one function call without its last argument, the value.
type step struct {
	function *function
	at       span // of the function's name
	args     []argument
}

// argument is a constant. Text is of a string, whole of a number, unit of a
// string that a function takes as a unit.
type argument struct {
	at    span
	isInt bool
	text  string
	whole int
	unit  quantity.Unit
}

type span struct{ offset, length int }

func (s span) fail(summary, hint string) *Error {
	return &Error{Offset: s.offset, Length: s.length, Summary: summary, Hint: hint}
}

// operand is what passes through a pipeline: a value with how to show it, or,
// once a string function had it, a text.
type operand struct {
	name   string
	value  quantity.Value
	unit   quantity.Unit
	digits int
	isText bool
	text   string
	shown  string        // what the numbers look like in text
	inUnit quantity.Unit // the unit they stand in there
}

// Run computes what is shown. lookup gives the value of a dotted path and its id
// in the registry; an error of it that is an *Error is returned with the place of
// the name filled in, so that it can carry a hint.
//
// Numbers are SI with the unit asked for, or else the value's own. Where neither
// is given, Unit is zero though the value may have a dimension: the caller fills
// in the unit that the package prefers (or sets Unit in lookup, which string
// functions also go by; they fall back to the SI unit).
func (p *Pipeline) Run(lookup func(path string) (quantity.Value, string, error)) (exhibit.Live, error) {
	name := p.Names[0]
	v, id, err := lookup(name)
	if err != nil {
		var e *Error
		if errors.As(err, &e) {
			return exhibit.Live{}, p.at.fail(e.Summary, e.Hint)
		}
		return exhibit.Live{}, p.at.fail(err.Error(), "")
	}
	if len(v.SI) == 0 {
		return exhibit.Live{}, p.at.fail(name+" has no items", "")
	}
	o := operand{name: name, value: v, unit: v.Unit}
	for _, s := range p.steps {
		if o, err = s.function.apply(s, o); err != nil {
			return exhibit.Live{}, err
		}
	}
	if o.isText {
		return exhibit.Live{ID: id, Text: o.text}, nil
	}
	if fault := o.printable(p.at); fault != nil {
		return exhibit.Live{}, fault
	}
	out := exhibit.Live{ID: id}
	for _, x := range o.value.SI {
		out.Numbers = append(out.Numbers, exhibit.Number{Value: x, Unit: o.unit, Digits: o.digits, ID: id})
	}
	return out, nil
}

// printable refuses what cannot stand in a sentence.
func (o operand) printable(at span) error {
	if o.value.Shape == quantity.Rows {
		return at.fail(o.name+" is a table of rows", "choose a row: | item 1")
	}
	if !o.value.Finite() {
		return at.fail(o.name+" is not a finite number", "")
	}
	return nil
}
