package live

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"unicode/utf8"

	"github.com/Masterminds/sprig/v3"

	"quoin/calc/quantity"
)

// Doc is a function as the reference page shows it.
type Doc struct {
	Name  string
	Usage string // a whole live value
	Text  string // one sentence
}

// Functions is every function of a pipeline, in the order of the reference.
func Functions() []Doc {
	out := make([]Doc, len(functions))
	for i, f := range functions {
		out[i] = Doc{Name: f.name, Usage: "{{ " + f.usage(f.on) + " }}", Text: f.doc}
	}
	return out
}

// function is a member of the family.
type function struct {
	name  string
	takes []parameter
	on    string // the value of the example
	doc   string
	apply func(step, operand) (operand, error)
}

// parameter is a constant that a function takes before the value.
type parameter struct {
	what    string // "a unit in quotes"
	example string
	check   func(*argument) *Error
}

func (f function) usage(value string) string {
	call := f.name
	for _, p := range f.takes {
		call += " " + p.example
	}
	return "." + value + " | " + call
}

func (f function) hint() string { return "write {{ " + f.usage(f.on) + " }}" }

func functionNamed(name string) *function {
	for i := range functions {
		if functions[i].name == name {
			return &functions[i]
		}
	}
	return nil
}

// sprigText is the string functions we take from, none of which looks at the
// clock, chance or the machine; functions lists the few that a package has
// (nospace is not among them: it takes text for bytes and spoils "kN·m").
var sprigText = sprig.HermeticTxtFuncMap()

var functions = []function{
	{"as", []parameter{aUnit}, "V", "shows the value in this unit", as},
	{"sig", []parameter{aCount("the number of significant digits", "3", 15)}, "V", "shows this many significant digits", sig},
	{"item", []parameter{aCount("the number of the item, from 1", "1", math.MaxInt32)}, "m.T", "is one item of a vector, or one row of rows, counted from 1", item},
	texts("trim", nil, "the text without blanks at its ends"),
	texts("upper", nil, "the text in capitals"),
	texts("lower", nil, "the text in small letters"),
	texts("title", nil, "the text with a capital at the start of each word"),
	texts("replace", []parameter{aText(`"kN"`), aText(`"kilonewtons"`)}, "the text with each first text replaced by the second"),
	texts("trimPrefix", []parameter{aText(`"~"`)}, "the text without this at its start"),
	texts("trimSuffix", []parameter{aText(`" kN"`)}, "the text without this at its end"),
	texts("trunc", []parameter{aCount("the number of characters", "12", 1000)}, "the text cut to this many characters"),
	texts("abbrev", []parameter{aCount("the number of characters", "12", 1000)}, "the text cut to this many characters, with dots"),
}

var aUnit = parameter{"a unit in quotes", `"kip"`, func(a *argument) *Error {
	if a.isInt {
		return a.at.fail("a unit stands in quotes", "")
	}
	u, err := quantity.ParseUnit(a.text)
	if err != nil {
		var e *quantity.UnitError
		at, hint := a.at, ""
		if errors.As(err, &e) {
			hint = e.Hint
			if e.Word != "" && a.at.length == len(a.text)+2 { // no escapes: the word stands where it says
				at = span{a.at.offset + 1 + e.Offset, len(e.Word)}
			}
		}
		return at.fail(err.Error(), hint)
	}
	a.unit = u
	return nil
}}

func aCount(what, example string, most int) parameter {
	return parameter{what, example, func(a *argument) *Error {
		switch {
		case !a.isInt:
			return a.at.fail("this is not a whole number", "")
		case a.whole < 1 || a.whole > most:
			return a.at.fail(fmt.Sprintf("%d is out of range", a.whole), fmt.Sprintf("%s: 1 to %d", what, most))
		}
		return nil
	}}
}

func aText(example string) parameter {
	return parameter{"a text in quotes", example, func(a *argument) *Error {
		if a.isInt {
			return a.at.fail("a text stands in quotes", "")
		}
		return nil
	}}
}

// onValue refuses texts where a value is needed.
func (s step) onValue(o operand) error {
	if o.isText {
		return s.at.fail(s.function.name+" works on a value, and this is a text by now", "put "+s.function.name+" before the string functions")
	}
	return nil
}

func as(s step, o operand) (operand, error) {
	if err := s.onValue(o); err != nil {
		return o, err
	}
	u := s.args[0].unit
	if !u.Dim.Is(o.value.Dim) {
		return o, s.args[0].at.fail(fmt.Sprintf("%q is %s, but %s is %s", s.args[0].text, u.Dim.Name(), o.name, o.value.Dim.Name()), "")
	}
	o.unit = u
	return o, nil
}

func sig(s step, o operand) (operand, error) {
	o.digits = s.args[0].whole
	return o, s.onValue(o)
}

func item(s step, o operand) (operand, error) {
	if err := s.onValue(o); err != nil {
		return o, err
	}
	n, i := o.value.Len(), s.args[0].whole
	if o.value.Shape == quantity.Number {
		return o, s.at.fail(o.name+" is one number and has no items", "leave item away")
	}
	if i > n {
		return o, s.args[0].at.fail(fmt.Sprintf("%s has %d items", o.name, n), "items count from 1")
	}
	o.value = o.value.Item(i - 1)
	o.name += fmt.Sprintf("[%d]", i)
	return o, nil
}

// texts is a string function of sprig: it works on what the value looks like.
func texts(name string, takes []parameter, doc string) function {
	call := sprigText[name]
	return function{name, takes, "V", doc, func(s step, o operand) (operand, error) {
		o, err := o.asText(s.at)
		if err != nil {
			return o, err
		}
		switch call := call.(type) {
		case func(string) string:
			o.text = call(o.text)
		case func(int, string) string:
			o.text = call(s.args[0].whole, o.text)
		case func(string, string) string:
			o.text = call(s.args[0].text, o.text)
		case func(string, string, string) string:
			o.text = call(s.args[0].text, s.args[1].text, o.text)
		default:
			panic("live: " + name + " has a form that is not known here")
		}
		return o, o.unharmed(s.at)
	}}
}

// asText turns a value into its displayed text, "1234 kN" or "1.2, 3.4 s".
func (o operand) asText(at span) (operand, error) {
	if o.isText {
		return o, nil
	}
	if err := o.printable(at); err != nil {
		return o, err
	}
	u := o.unit
	if u.Scale == 0 && !o.value.Dim.Is(quantity.None) {
		u = quantity.SIUnit(o.value.Dim)
	}
	digits := o.digits
	if digits == 0 {
		digits = quantity.Digits
	}
	var parts []string
	for _, x := range o.value.SI {
		parts = append(parts, quantity.Format(u.From(x), digits))
	}
	o.isText, o.inUnit, o.shown = true, u, strings.Join(parts, ", ")
	o.text = strings.TrimSpace(o.shown + " " + u.Pretty())
	return o, nil
}

// unharmed makes sure that a text still says what was computed: the number
// stands in it as it was, no digits or signs came near it, and what follows is
// no other unit.
func (o operand) unharmed(at span) error {
	flat := func(s string) string { return strings.ReplaceAll(s, "\u202f", "") } // digit groups
	before, after, whole := strings.Cut(flat(o.text), flat(o.shown))
	const digits = "0123456789"
	touched := before != "" && strings.ContainsAny(before[len(before)-1:], ".,-+") || strings.HasSuffix(before, "\u2212") ||
		after != "" && strings.ContainsAny(after[:1], digits+".") || strings.HasPrefix(after, "×")
	joined := strings.ContainsAny(before, digits) || strings.ContainsAny(after, digits) && strings.TrimSpace(after) != o.inUnit.Pretty()
	switch {
	case !utf8.ValidString(o.text):
		return at.fail("this cuts a character in two", "")
	case !whole || touched || joined:
		return at.fail("this would change the number "+o.shown, "string functions change the words around a number, not the number")
	}
	if u, err := quantity.ParseUnit(after); err == nil && strings.TrimSpace(after) != "" {
		if !u.Dim.Is(o.inUnit.Dim) || math.Abs(u.To(1)-o.inUnit.To(1)) > 1e-12*o.inUnit.To(1) {
			return at.fail(fmt.Sprintf("this would show the unit %s, but the number is in %s", strings.TrimSpace(after), o.inUnitName()), "change the unit with | as")
		}
	}
	return nil
}

func (o operand) inUnitName() string {
	if s := o.inUnit.Pretty(); s != "" {
		return s
	}
	return "no unit"
}
