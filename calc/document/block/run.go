package block

import (
	"bytes"
	"cmp"
	"fmt"
	"strconv"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// Env is what a block sees of the document; package document implements it.
type Env interface {
	// System is the unit system of the package.
	System() quantity.System
	// Product is the product of a block referred to; it is there and of the
	// right kind, or the block does not run.
	Product(name string) any
	// Read opens a file named in the document, relative to the file that names
	// it. Its error is fit for a reader.
	Read(path, role string) (data []byte, full string, err error)
	// Curves are the computed series whose id is this, or begins with it and "@";
	// of the name of a block, all of its series.
	Curves(id string) []exhibit.Curve
	// Line is the evaluated tree and the description of a formula name; nil for
	// other names.
	Line(name string) (*expr.Node, string)
	// KindOf is the kind of a block.
	KindOf(name string) string
	// Setting is the value of a formula name, or of a field of a block (frame.damping),
	// as the document has it.
	Setting(name string) (quantity.Value, bool)
	// WhatIf runs what the block rests on once for each case, with the values of the
	// case set, and gives what it asks for. Only a body that [Varies] may ask.
	WhatIf(cases [][]exhibit.Override) []Outcome
}

// Named is an exported value.
type Named struct {
	Name  string
	Value quantity.Value
	Doc   string
}

// Result is what the run of a block gives. It is plain data but for the product.
type Result struct {
	Echo        exhibit.Echo
	Inputs      []exhibit.Item // further inputs: tables
	Method      []exhibit.Item
	Results     []exhibit.Item
	Checks      []exhibit.Check // always shown; their place is filled in by document
	Values      []Named
	Series      []exhibit.Curve
	Made        any // the product
	Warnings    []string
	Cautions    []string // keys of the document's list
	Refs        []cite.Ref
	Symbols     []Symbol // of the method's equations in TeX
	Assumptions []exhibit.Assumption
	Comments    []exhibit.Comment
	Checking    []exhibit.Checking
	Criteria    []exhibit.Criterion // for the cover; their origin is filled in by document
	Motion      *exhibit.Motion     // of a record; its origin and hash are filled in by document
	References  []exhibit.Reference
	Diags       diag.List
}

// Run is one run of one block: what it sees, and what it gives.
type Run struct {
	Env
	Name  string
	Kind  Kind
	Order int        // among the blocks of its kind without a name, from 1
	Place diag.Range // of the block's info string
	Result
}

// Stem is what the tables and figures of the block are called by: its name, or its
// kind and order.
func (r *Run) Stem() string {
	if r.Name != "" {
		return r.Name
	}
	return r.Kind.Name + "-" + strconv.Itoa(r.Order)
}

// Read reads a file; one whose head says that it was made up makes the package a
// demonstration.
func (r *Run) Read(path, role string) ([]byte, string, error) {
	data, full, err := r.Env.Read(path, role)
	if err == nil && invented(comment(data)) {
		r.Caution("demonstration")
	}
	return data, full, err
}

// comment is the lines at the head of a file that begin with #.
func comment(data []byte) string {
	data = bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	end := 0
	for bytes.HasPrefix(data[end:], []byte("#")) {
		n := bytes.IndexByte(data[end:], '\n')
		if n < 0 {
			return string(data)
		}
		end += n + 1
	}
	return string(data[:end])
}

// invented tells whether data say of themselves that they were made up.
func invented(text string) bool { return strings.Contains(strings.ToLower(text), "invented") }

// Fail reports an error at a field.
func (r *Run) Fail(f field.Field, code, format string, args ...any) *diag.Diagnostic {
	at := f.At
	if at.Line == 0 {
		at = r.Place
	}
	return r.Diags.Errorf(code, at, format, args...)
}

// Warn says something that travels with the numbers of the block: a footnote on
// the page, a line on the terminal.
func (r *Run) Warn(code, format string, args ...any) {
	r.WarnAt(field.Field{At: r.Place}, code, format, args...)
}

// WarnAt is Warn about what stands in a field.
func (r *Run) WarnAt(f field.Field, code, format string, args ...any) {
	text := fmt.Sprintf(format, args...)
	r.Warnings = append(r.Warnings, text)
	r.Diags.Warnf(code, f.At, "%s: %s", cmp.Or(r.Name, r.Kind.Name), text)
}

// Caution triggers a sentence of the limitations section.
func (r *Run) Caution(key string) { r.Cautions = append(r.Cautions, key) }

// Export names a value.
func (r *Run) Export(name string, v quantity.Value) {
	e, ok := r.Kind.Export(name)
	if !ok {
		panic("block: " + r.Kind.Name + " exports no " + name)
	}
	r.Values = append(r.Values, Named{Name: name, Value: v, Doc: e.Doc})
}

// Number exports an SI number shown in a unit.
func (r *Run) Number(name string, si float64, unit quantity.Unit) {
	r.Export(name, quantity.Scalar(si, unit))
}

// Curve adds a series NAME.what to the results.
func (r *Run) Curve(what string, x []float64, xu quantity.Unit, y []float64, yu quantity.Unit) string {
	id := r.Name + "." + what
	r.Series = append(r.Series, exhibit.Curve{ID: id, X: quantity.List(x, xu, nil), Y: quantity.List(y, yu, nil)})
	return id
}

// Explain adds a paragraph to the method; TeX stands between dollar signs.
func (r *Run) Explain(text string, refs ...cite.Ref) {
	p := exhibit.Prose{Kind: exhibit.Paragraph}
	for i, part := range strings.Split(text, "$") {
		kind := exhibit.Text
		if i%2 == 1 {
			kind = exhibit.Math
		}
		if part != "" {
			p.Children = append(p.Children, exhibit.Prose{Kind: kind, Text: part})
		}
	}
	r.Method = append(r.Method, exhibit.Item{Prose: []exhibit.Prose{p}})
	r.Refs = append(r.Refs, refs...)
}

// Equation adds an equation of the method, in TeX, with its source.
func (r *Run) Equation(tex, description string, ref cite.Ref) {
	r.Method = append(r.Method, exhibit.Item{Equation: &exhibit.Equation{TeX: tex, Description: description, Ref: &ref}})
	r.Refs = append(r.Refs, ref)
}

// Symbol is a symbol of an equation, for the notation.
type Symbol struct {
	Name    string // as in formulas (omega_n), or TeX between dollar signs
	Meaning string
	Unit    quantity.Unit
}

// Symbol says what a symbol of the method's equations stands for, and its unit.
func (r *Run) Symbol(name, meaning string, unit quantity.Unit) {
	r.Symbols = append(r.Symbols, Symbol{name, meaning, unit})
}

// Figure adds a figure to the results.
func (r *Run) Figure(f exhibit.Figure) {
	r.Results = append(r.Results, exhibit.Item{Figure: &f})
}

// Table adds a table to the results.
func (r *Run) Table(t exhibit.Table) {
	r.Results = append(r.Results, exhibit.Item{Table: &t})
}

// ID is the registry id of an export of this block.
func (r *Run) ID(name string) string { return r.Name + "." + name }

// Shown is a displayed number of this block.
func (r *Run) Shown(name string, si float64, unit quantity.Unit) exhibit.Number {
	return exhibit.Number{Value: si, Unit: unit, ID: r.ID(name)}
}

// Col is a column of numbers.
func Col(head string, unit quantity.Unit) exhibit.Column {
	return exhibit.Column{Head: head, Unit: unit, Right: true}
}

// Words is a column of texts.
func Words(head string) exhibit.Column { return exhibit.Column{Head: head} }

// Cell is a cell with one number.
func Cell(si float64, unit quantity.Unit) exhibit.Cell {
	return exhibit.Cell{Numbers: []exhibit.Number{{Value: si, Unit: unit}}}
}

// Lines is the rule of which caption a figure or table gets: the block's own, or
// this one.
func Lines(c *common, text string) string {
	if c.Caption.Given {
		return c.Caption.Text() + ": " + strings.ToLower(text[:1]) + text[1:]
	}
	return text
}
