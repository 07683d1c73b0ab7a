package field

import (
	"math"
	"reflect"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/formula"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// Field is one field of a block. Its struct tag says what it takes:
//
//	name     the word in the document
//	is       text, file, name, block, series, choice, a dimension (number,
//	         length, area, mass, time, velocity, acceleration, force, stiffness, any)
//	of       choice: the words, by |; block: the products, by |
//	many     "yes": a list, or one quoted vector
//	need     "yes": must be given
//	default  the text used when it is not given
//	must     positive, not-negative, fraction, whole (by blanks); filled for a list of groups
//	show     the unit it is echoed in: SI|US by a bar, "small" for displacements
//	label    in words, for the echo; doc: a line for the reference
//	hint     what to say when the dimension is wrong
//	short    "yes": a scalar in place of the mapping sets this field
type Field struct {
	Given   bool
	As      string // the name it goes by in the document, where that is the one of its group
	Written string // as in the source, or the default
	At      diag.Range
	List    []Item         // texts (one unless many)
	Tree    *expr.Node     // one expression, evaluated
	Trees   []*expr.Node   // of a YAML list of expressions
	Value   quantity.Value // of a quantity, once resolved
}

// Group is embedded in a struct of fields that stands under a name of its own: it
// tells whether the name was given, and where. Such a group may be given by its name alone, with
// the defaults of its fields.
type Group struct {
	Given bool
	At    diag.Range // of the name
}

func (g *Group) mark(at diag.Range) { g.Given, g.At = true, at }
func (g *Group) unmark()            { g.Given = false }

// marked is a struct that embeds a Group.
type marked interface {
	mark(at diag.Range)
	unmark()
}

// Item is one text of a field.
type Item struct {
	Text string
	At   diag.Range
}

// Text is the text of a text field.
func (f Field) Text() string {
	if len(f.List) == 0 {
		return ""
	}
	return f.List[0].Text
}

// Texts are the texts of a field with many.
func (f Field) Texts() []string {
	out := make([]string, len(f.List))
	for i, it := range f.List {
		out[i] = it.Text
	}
	return out
}

// Set tells whether there is a value, given or by default.
func (f Field) Set() bool { return f.Given || f.Written != "" }

// SI is the number of a resolved quantity, 0 when there is none.
func (f Field) SI() float64 {
	if len(f.Value.SI) == 0 {
		return 0
	}
	return f.Value.SI[0]
}

// Spec is a field's tag, read.
type Spec struct {
	Name, Is, Label, Doc, Default, Hint string
	Of, Must                            []string
	Many, Need, Short                   bool
	Show                                string
	Dim                                 quantity.Dim
	Quantity                            bool
}

var dimensions = map[string]quantity.Dim{
	"number": quantity.None, "length": quantity.Length, "area": quantity.Length.Power(2), "mass": quantity.Mass, "time": quantity.Time, "velocity": quantity.Velocity,
	"acceleration": quantity.Acceleration, "force": quantity.Force, "stiffness": quantity.Stiffness, "frequency": quantity.PerTime, "any": quantity.None,
}

func specOf(tag reflect.StructTag) Spec {
	s := Spec{Name: tag.Get("name"), Is: tag.Get("is"), Label: tag.Get("label"), Doc: tag.Get("doc"), Default: tag.Get("default"), Hint: tag.Get("hint"),
		Many: tag.Get("many") == "yes", Need: tag.Get("need") == "yes", Short: tag.Get("short") == "yes", Show: tag.Get("show"), Must: strings.Fields(tag.Get("must"))}
	if of := tag.Get("of"); of != "" {
		s.Of = strings.Split(of, "|")
	}
	s.Dim, s.Quantity = dimensions[s.Is]
	if s.Label == "" {
		s.Label = strings.ReplaceAll(s.Name, "_", " ")
	}
	return s
}

// Unit is the unit a field is shown in when it was written without one.
func (s Spec) Unit(sys quantity.System) quantity.Unit {
	text := s.Show
	if si, us, two := strings.Cut(s.Show, "|"); two {
		if text = si; sys == quantity.US {
			text = us
		}
	}
	if text == "" {
		return sys.Preferred(s.Dim)
	}
	return quantity.MustUnit(text)
}

// Visit calls do for every Field of a struct of fields, embedded and nested ones
// included, in order.
func Visit(fields any, do func(f *Field, s Spec)) {
	visit(reflect.ValueOf(fields).Elem(), do)
}

// Top calls do for the fields that are not nested in a list or a group.
func Top(fields any, do func(f *Field, s Spec)) {
	for _, s := range slots(reflect.ValueOf(fields).Elem(), nil) {
		if f, ok := s.value.Addr().Interface().(*Field); ok {
			do(f, s.spec)
		}
	}
}

// Each calls do for every name of a struct of fields, with all fields that stand
// under it: one, or those of a group or a list of groups.
func Each(fields any, do func(name string, under []*Field)) {
	for _, s := range slots(reflect.ValueOf(fields).Elem(), nil) {
		var under []*Field
		take := func(f *Field, _ Spec) { under = append(under, f) }
		switch v := s.value; {
		case v.Type() == fieldType:
			take(v.Addr().Interface().(*Field), s.spec)
		case v.Kind() == reflect.Struct:
			visit(v, take)
		case v.Kind() == reflect.Slice && v.Type().Elem().Kind() == reflect.Struct:
			for i := range v.Len() {
				visit(v.Index(i), take)
			}
		}
		do(s.spec.Name, under)
	}
}

// Names are the names that the expressions of a field use.
func (f *Field) Names() (out []string) {
	for _, tree := range f.trees() {
		for _, d := range formula.Deps(tree) {
			out = append(out, d.Path)
		}
	}
	return out
}

var fieldType = reflect.TypeFor[Field]()

func visit(v reflect.Value, do func(*Field, Spec)) {
	t := v.Type()
	for i := range t.NumField() {
		f := v.Field(i)
		switch {
		case t.Field(i).PkgPath != "" && !t.Field(i).Anonymous:
		case f.Type() == fieldType:
			do(f.Addr().Interface().(*Field), specOf(t.Field(i).Tag))
		case f.Kind() == reflect.Struct:
			visit(f, do)
		case f.Kind() == reflect.Slice && f.Type().Elem().Kind() == reflect.Struct:
			for j := range f.Len() {
				visit(f.Index(j), do)
			}
		}
	}
}

// Dep is a name that a block depends on.
type Dep struct {
	Path   string // "V", "m.T", "east"
	Method bool
	Block  []string // a reference to a block that makes one of these products; nil for values
	Series bool
	At     diag.Range
}

// Deps are all names the fields depend on.
func Deps(fields any) []Dep {
	var out []Dep
	Visit(fields, func(f *Field, s Spec) {
		for i, tree := range f.trees() {
			for _, d := range formula.Deps(tree) {
				out = append(out, Dep{Path: d.Path, Method: d.Method, At: f.spot(i, d.From, d.To)})
			}
		}
		if !f.Given {
			return
		}
		for _, it := range f.List {
			switch s.Is {
			case "block":
				if name := formula.Normal(it.Text); formula.ValidName(name) {
					out = append(out, Dep{Path: name, Block: s.Of, At: it.At})
				}
			case "series":
				out = append(out, Dep{Path: it.Text, Series: true, At: it.At})
			}
		}
	})
	return out
}

func (f *Field) trees() []*expr.Node {
	if f.Tree != nil {
		return []*expr.Node{f.Tree}
	}
	return f.Trees
}

// spot is the place of a stretch of the text of tree i.
func (f *Field) spot(i, from, to int) diag.Range {
	if i >= len(f.List) {
		return f.At
	}
	return within(f.List[i].At, f.List[i].Text, from, to)
}

// Within is within, for texts read elsewhere.
func Within(at diag.Range, text string, from, to int) diag.Range { return within(at, text, from, to) }

// within narrows a range to byte offsets of its text, where the text stands in
// the file as it is.
func within(at diag.Range, text string, from, to int) diag.Range {
	width := at.EndColumn - at.Column
	if from < 0 || to > len(text) || from > to || width != len([]rune(text)) {
		return at
	}
	start := at.Column + len([]rune(text[:from]))
	return diag.Range{File: at.File, Line: at.Line, Column: start, EndLine: at.Line, EndColumn: max(start+len([]rune(text[from:to])), start+1)}
}

// Resolve evaluates every quantity of the fields and checks its dimension and
// bounds. It reports every error.
func Resolve(fields any, scope formula.Scope) diag.List {
	var diags diag.List
	Visit(fields, func(f *Field, s Spec) { f.resolve(s, scope, &diags) })
	return diags
}

// ResolveLiterals checks what needs no other block: for a block that will not
// run, so that its other errors are told at once.
func ResolveLiterals(fields any) diag.List {
	var diags diag.List
	Visit(fields, func(f *Field, s Spec) {
		for _, tree := range f.trees() {
			if len(formula.Deps(tree)) > 0 {
				return
			}
		}
		f.resolve(s, nil, &diags)
	})
	return diags
}

func (f *Field) resolve(s Spec, scope formula.Scope, diags *diag.List) {
	if !s.Quantity || len(f.trees()) == 0 {
		return
	}
	if f.As != "" {
		s.Name = f.As
	}
	var parts []quantity.Value
	for i, tree := range f.trees() {
		v, findings := formula.Evaluate(tree, scope)
		for _, is := range findings {
			if d := report(diags, is, f.spot(i, is.From, is.To)); d.Severity == diag.Error {
				return
			}
		}
		if s.Is != "any" && !v.Dim.Is(s.Dim) {
			hint := s.Hint
			if hint == "" && v.Dim.Is(quantity.None) {
				hint = "write the unit after the number, for instance " + s.Unit(quantity.SI).Pretty()
			} else if hint == "" && s.Dim.Is(quantity.Force) && v.Dim.Is(quantity.Mass) {
				hint = "a weight is a force (kN, kip): that of a mass (t, kg) is the mass times 9.80665 m/s^2"
			}
			diags.Errorf("dimension", f.spot(i, 0, len(f.List[i].Text)), "%s must be %s, this is %s", s.Name, s.Dim.Name(), v.Dim.Name()).WithHint("%s", hint)
			return
		}
		if !s.Many && v.Shape != quantity.Number {
			diags.Errorf("shape", f.spot(i, 0, len(f.List[i].Text)), "%s must be one number, this is a vector of %d", s.Name, v.Len()).WithHint("take an item of it: [1] is the first")
			return
		}
		if v.Shape == quantity.Rows && len(f.trees()) == 1 {
			diags.Errorf("shape", f.spot(i, 0, len(f.List[i].Text)), "%s must be a vector, these are rows of numbers", s.Name).WithHint("take one row by its index, counted from 1: m.phi[1]")
			return
		}
		if v.Shape == quantity.Rows || f.Tree == nil && v.Shape != quantity.Number {
			diags.Errorf("shape", f.spot(i, 0, len(f.List[i].Text)), "an item of %s must be one number", s.Name)
			return
		}
		parts = append(parts, v)
	}
	if len(parts) == 1 && (!s.Many || parts[0].Shape == quantity.Vector) {
		f.Value = parts[0]
	} else {
		f.Value = quantity.Value{Dim: parts[0].Dim, Shape: quantity.Vector, Unit: parts[0].Unit}
		for i, p := range parts {
			if !p.Dim.Is(f.Value.Dim) {
				diags.Errorf("dimension", f.spot(i, 0, len(f.List[i].Text)), "the items of %s differ in dimension: %s and %s", s.Name, f.Value.Dim.Name(), p.Dim.Name())
				return
			}
			f.Value.SI = append(f.Value.SI, p.SI...)
		}
	}
	bounds(f, s, diags)
}

// bounds checks the must of a field's values.
func bounds(f *Field, s Spec, diags *diag.List) {
	for i, x := range f.Value.SI {
		for _, m := range s.Must {
			wrong := ""
			switch m {
			case "positive":
				if !(x > 0) {
					wrong = bound[m]
				}
			case "not-negative":
				if !(x >= 0) {
					wrong = bound[m]
				}
			case "fraction":
				if !(x >= 0 && x <= 1) {
					wrong = bound[m]
				}
			case "whole":
				if x != math.Trunc(x) || x < 1 || x > 1e6 {
					wrong = bound[m]
				}
			}
			if wrong != "" {
				at := f.At
				if len(f.List) == len(f.Value.SI) {
					at = f.List[i].At
				}
				shown := quantity.Format(f.Value.Unit.From(x), quantity.Exact(f.Value.Unit.From(x)))
				if u := f.Value.Unit.Pretty(); u != "" {
					shown += " " + u
				}
				e := diags.Errorf("bounds", at, "%s must be %s, this is %s", s.Name, wrong, shown)
				if m == "fraction" && x > 1 && f.Value.Unit.Text == "" {
					e.WithHint("in per cent it is written with its sign: %s %%", shown)
				}
				return
			}
		}
	}
}

func report(diags *diag.List, is formula.Finding, at diag.Range) diag.Diagnostic {
	d := diags.Errorf(is.Code, at, "%s", is.Summary)
	if is.Warning {
		d.Severity = diag.Warning
	}
	d.Hint = is.Hint
	return *d
}
