package field

import (
	"errors"
	"math"
	"strings"
	"testing"

	"quoin/calc/diag"
	"quoin/calc/quantity"
)

type inner struct {
	Name  Field `name:"name" is:"text" short:"yes" doc:"a name"`
	Value Field `name:"value" is:"length" must:"positive" doc:"a length"`
}

type sample struct {
	Width Field   `name:"width" is:"length" need:"yes" must:"positive" show:"mm|in" doc:"width"`
	Ratio Field   `name:"ratio" is:"number" many:"yes" default:"5 %" must:"fraction" doc:"ratios"`
	Rule  Field   `name:"rule" is:"choice" of:"one|two" default:"one" doc:"rule"`
	Rows  []inner `name:"rows" doc:"rows"`
}

// nothing is a document without values.
type nothing struct{}

func (nothing) Value(path string) (quantity.Value, string, error) {
	return quantity.Value{}, "", errors.New(path + " has no value")
}

func (nothing) Call(path string, _ []quantity.Value) (quantity.Value, string, error) {
	return quantity.Value{}, "", errors.New(path + " is no function")
}

func decode(text string) (sample, diag.List) {
	var lines []Line
	for i, t := range strings.Split(text, "\n") {
		lines = append(lines, Line{Text: t, Line: 10 + i, Column: 3})
	}
	n, diags := Parse("f.md", lines, diag.Range{File: "f.md", Line: 9, Column: 1, EndLine: 9, EndColumn: 5})
	var s sample
	if !diags.HasErrors() {
		diags = append(diags, Decode(n, &s, "the sample", nil)...)
	}
	if !diags.HasErrors() {
		diags = append(diags, Resolve(&s, nothing{})...)
	}
	return s, diags
}

// TestDecode: fields by their tags, defaults, short forms, units.
func TestDecode(t *testing.T) {
	s, diags := decode("width: 3 ft\nrows:\n  - first\n  - {name: second, value: 20 cm}")
	if len(diags) > 0 {
		t.Fatal(diags)
	}
	if got := s.Width.SI(); math.Abs(got-0.9144) > 1e-15 {
		t.Errorf("width = %v m", got)
	}
	if s.Ratio.Given || s.Ratio.SI() != 0.05 || s.Ratio.Value.Shape != quantity.Vector {
		t.Errorf("ratio = %+v, want the default", s.Ratio)
	}
	if s.Rule.Given || s.Rule.Text() != "one" {
		t.Errorf("rule = %q", s.Rule.Text())
	}
	if len(s.Rows) != 2 || s.Rows[0].Name.Text() != "first" || s.Rows[1].Value.SI() != 0.2 {
		t.Errorf("rows = %+v", s.Rows)
	}
	if u := specOf(`show:"mm|in"`).Unit(quantity.US); u.Text != "in" {
		t.Errorf("shown in %s in a US package", u.Text)
	}
	specs := Specs(&s)
	if len(specs) != 5 || specs[4].Name != "rows[].value" {
		t.Errorf("specs %+v", specs)
	}
}

// TestPlaces: a message points at the character, quotes and flow lists included.
func TestPlaces(t *testing.T) {
	for text, want := range map[string]string{
		"width: 3 fe":                        "f.md:10:12",
		"width: 3 m\nratio: [1, 2 q]":        "f.md:11:16",
		"width: -3 m":                        "f.md:10:10",
		"width: 3 m\nratio: [0.1, 7]":        "f.md:11:16",
		"width: 3 m\nrows: [{value: 2 kN}]":  "f.md:11:18",
		"widht: 3 m":                         "f.md:10:3",
		"width: 3 m\nwidth: 4 m":             "f.md:11:3",
		"width: \"1 m + 1 s\"":               "f.md:10:10",
		"width: 3 m\nrule: three":            "f.md:11:9",
		"width: [3 m]":                       "f.md:10:10",
		"width: 3 m\nratio: \"[1 %, 2 %, \"": "f.md:11:10",
	} {
		_, diags := decode(text)
		found := false
		for _, d := range diags {
			found = found || d.Range.String() == want
		}
		if !found {
			t.Errorf("%q: want a message at %s, got %v", text, want, diags)
		}
	}
}

// FuzzParse: no text ends the program, and every message has a place in it.
func FuzzParse(f *testing.F) {
	for _, s := range []string{"width: 3 m", "rows:\n  - a\n  - {name: b}", "a: &x 1\nb: *x", "? a\n: b", "- 1\n- [2", "width: |\n  3 m\n  4", "\"\\u202e\": 1", "a: !!int 3", "{a: {b: {c: 1}}}", "%YAML 1.2\n---\na: 1", "<<: {a: 1}"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		if len(text) > 1<<14 {
			return
		}
		_, diags := decode(text)
		last := 10 + strings.Count(text, "\n")
		for _, d := range diags {
			if d.Range.File == "" || d.Range.Line < 9 || d.Range.Line > last || d.Range.Column < 1 || d.Range.EndColumn <= d.Range.Column && d.Range.EndLine == d.Range.Line {
				t.Errorf("%q: %+v", text, d)
			}
		}
	})
}
