package field

import (
	"reflect"
	"strings"

	"quoin/calc/quantity"
)

// Row is one line of the reference of a struct of fields: a field, or the head
// of fields that stand together under a name.
type Row struct {
	Spec
	Depth int  // 0 at the top, 1 below a head
	Head  bool // the fields that follow, one deeper, stand below this name
	List  bool // of a head: there may be many
}

// Rows lists the fields of a struct for the reference, in order. The fields of
// the embedded struct common are left out if common is not nil.
func Rows(fields, common any) []Row {
	skip := map[string]bool{}
	if common != nil {
		for _, l := range Rows(common, nil) {
			skip[l.Name] = true
		}
	}
	var out []Row
	var walk func(v reflect.Value, depth int)
	walk = func(v reflect.Value, depth int) {
		for _, s := range slots(v, nil) {
			l := Row{Spec: s.spec, Depth: depth}
			switch {
			case depth == 0 && skip[l.Name]:
				continue
			case s.value.Type() == fieldType:
				out = append(out, l)
				continue
			case s.value.Kind() == reflect.Struct:
				l.Head = true
				out = append(out, l)
				walk(s.value, depth+1)
			case s.value.Kind() == reflect.Slice:
				l.Head, l.List = true, true
				out = append(out, l)
				walk(reflect.New(s.value.Type().Elem()).Elem(), depth+1)
			}
		}
	}
	walk(reflect.ValueOf(fields).Elem(), 0)
	return out
}

// Type says in words what a field takes. makers gives the block kinds that make
// a product.
func (l Row) Type(makers func(product string) []string) string {
	switch {
	case l.List:
		return "a list; each item has the fields marked –"
	case l.Head:
		return "the fields marked –"
	}
	one, many := "a text", "texts"
	switch l.Is {
	case "file":
		one, many = "a file", "files"
	case "choice":
		one, many = "one of "+strings.Join(l.Of, ", "), "any of "+strings.Join(l.Of, ", ")
	case "block":
		var kinds []string
		for _, product := range l.Of {
			kinds = append(kinds, makers(product)...)
		}
		one, many = "the name of a "+strings.Join(kinds, " or ")+" block", "names of "+strings.Join(kinds, " or ")+" blocks"
	case "series":
		one, many = "a series, BLOCK.WHAT", "series, BLOCK.WHAT"
	case "name":
		one, many = "a name", "names"
	case "any":
		one, many = "any quantity", "any quantities of one kind"
	}
	if l.Quantity && l.Is != "any" {
		one = l.Dim.Name()
		if l.Dim.Is(quantity.None) {
			one = "a number"
		}
		if u := l.units(); u != "" {
			one += ", for instance in " + u
		}
		many = one + ", or a list"
	}
	if l.Many {
		one = many
	}
	if l.Short {
		one += ", which may stand for the whole group"
	}
	return one
}

// units are the units that a field is usually written in.
func (l Row) units() string {
	si, us := l.Unit(quantity.SI).Pretty(), l.Unit(quantity.US).Pretty()
	if si == us || us == "" {
		return si
	}
	return si + " or " + us
}

// Bounds says in words what a field's value must be, "" if anything.
func (s Spec) Bounds() string {
	var out []string
	for _, m := range s.Must {
		out = append(out, bound[m])
	}
	return strings.Join(out, ", ")
}

// bound is the must of a field in words.
var bound = map[string]string{
	"positive": "greater than zero", "not-negative": "zero or more", "fraction": "between 0 and 1 (0 % and 100 %)", "whole": "a whole number from 1 on",
}
