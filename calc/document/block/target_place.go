package block

import (
	"regexp"
	"slices"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/standard"
)

// The engine speaks of a spectrum's parameters by symbol, also of those that it
// derived. A message about one stands where the document gives what it came from.

// from are the parameters that a derived one may come from, the nearest first.
var from = map[string][]string{
	"S_DS": {"S_MS", "F_a", "S_S"}, "S_D1": {"S_M1", "F_v", "S_1"}, "S_MS": {"S_DS", "F_a", "S_S"}, "S_M1": {"S_D1", "F_v", "S_1"},
	"a_g": {"a_gR"}, "a_vg": {"vertical_ratio", "a_g", "a_gR"},
}

// states are fields that a warning is about whatever its text names.
var states = map[string]string{"site-exception": "site_specific", "site-specific": "site"}

var symbol = regexp.MustCompile(`[A-Za-z]+(_[A-Za-z0-9]+)*`)

// places are the fields of a target by name.
type places map[string]field.Field

// of is the field that gives a parameter, or that it comes from.
func (p places) of(name string) (field.Field, bool) {
	for _, s := range append([]string{name}, from[name]...) {
		if p[s].Given {
			return p[s], true
		}
	}
	return field.Field{}, false
}

// named is the first field that a text names.
func (p places) named(names []string) (field.Field, bool) {
	for _, s := range names {
		if f, ok := p.of(s); ok {
			return f, true
		}
	}
	return field.Field{}, false
}

// fault is where an error stands: at its parameter; where that is a recommended
// value, at the one given that it does not go with. What is missing stands nowhere.
func (p places) fault(e *standard.ParameterError) field.Field {
	names := symbol.FindAllString(e.Problem, -1)
	if e.Symbol == "q" && p["beta"].Given && slices.Contains(names, "beta") {
		return p["beta"]
	}
	if !p[e.Symbol].Given && !strings.HasPrefix(e.Problem, "is missing") {
		if f, ok := p.named(names); ok {
			return f
		}
	}
	return p[e.Symbol]
}

// doubt is where a warning stands.
func (p places) doubt(t *standard.Target, w standard.Warning) (field.Field, bool) {
	if f := p[states[w.Code]]; f.Given {
		return f, true
	}
	names := symbol.FindAllString(w.Text, -1)
	if w.Code == "large-value" { // of two, the larger
		value := func(s string) float64 { v, _ := t.Parameter(s); return v.Value }
		slices.SortStableFunc(names, func(a, b string) int {
			switch x, y := value(a), value(b); {
			case x > y:
				return -1
			case x < y:
				return 1
			}
			return 0
		})
	}
	return p.named(names)
}
