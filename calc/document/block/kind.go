// Package block holds the block kinds, one file each: which fields a kind has,
// and how its Run turns them into exhibits, named values and one product. The
// engineering is done in the engines; nothing is computed here.
package block

import (
	"fmt"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/quantity"
)

// Kind is one block kind.
type Kind struct {
	Name string
	Doc  string
	// Makes is the word for the product; references ask for a product by it.
	Makes string
	// New makes an empty set of fields.
	New func() Body
	// Product makes an empty product to decode into; nil for kinds without one.
	Product func() any
	// Exports are the values NAME.value; a target's depend on its basis, so
	// Export may list more than one run gives.
	Exports []Export
	// Functions are the block functions NAME.fn(...).
	Functions []Function
	// Nameless kinds may stand without a name.
	Nameless bool
	// List: the body may be a YAML list, which is then the field "items".
	List bool
}

// Body is the decoded fields of a block.
type Body interface {
	// Run computes the block. Problems are reported through r.
	Run(r *Run)
}

// Checked is a body that has something to say about its fields before any value
// is known: fields that exclude or need each other.
type Checked interface {
	Check(c *Checks)
}

// Checks collects what Check has to say.
type Checks struct {
	Place diag.Range // of the block's info string
	Diags diag.List
}

// Fail reports an error at a field, or at the block where the field is not given.
func (c *Checks) Fail(f field.Field, code, format string, args ...any) *diag.Diagnostic {
	at := f.At
	if at.Line == 0 && at.File == "" {
		at = c.Place
	}
	return c.Diags.Errorf(code, at, format, args...)
}

// Export is one exported value.
type Export struct {
	Name, Doc string
	Unit      string // its SI unit
}

// Function is a function of a block: a method on its product.
type Function struct {
	Name, Usage, Doc string
	// Min and Max number of arguments; Dims their dimensions.
	Min, Max int
	Dims     []quantity.Dim
	Args     []string
	Call     func(product any, args []float64) (float64, error)
	Unit     quantity.Unit
}

// Kinds is every kind that has fields, in the order of the reference. Formula
// blocks have lines instead; see package formula.
var Kinds = []Kind{
	recordKind, periodsKind, spectrumKind, targetKind, structureKind, modesKind, combineKind, staticKind, driftKind,
	figureKind, tableKind, varyKind, assumptionsKind, commentsKind, checkingKind, referencesKind,
}

// Lookup finds a kind by name.
func Lookup(name string) (Kind, bool) {
	for _, k := range Kinds {
		if k.Name == name {
			return k, true
		}
	}
	return Kind{}, false
}

// Names lists the kinds, formula included.
func Names() []string {
	out := []string{Formula}
	for _, k := range Kinds {
		out = append(out, k.Name)
	}
	return out
}

// Formula is the name of the kind whose body is formula lines.
const Formula = "formula"

// Export finds an exported value.
func (k Kind) Export(name string) (Export, bool) {
	for _, e := range k.Exports {
		if e.Name == name {
			return e, true
		}
	}
	return Export{}, false
}

// Function finds a block function.
func (k Kind) Function(name string) (Function, bool) {
	for _, f := range k.Functions {
		if f.Name == name {
			return f, true
		}
	}
	return Function{}, false
}

// Members names all exports and functions.
func (k Kind) Members() []string {
	var out []string
	for _, e := range k.Exports {
		out = append(out, e.Name)
	}
	for _, f := range k.Functions {
		out = append(out, f.Name)
	}
	return out
}

// Apply calls a function over its arguments; the first may be a vector.
func (f Function) Apply(product any, args []quantity.Value) (quantity.Value, error) {
	if len(args) < f.Min || len(args) > f.Max {
		want := fmt.Sprint(f.Min)
		if f.Max > f.Min {
			want += " or " + fmt.Sprint(f.Max)
		}
		return quantity.Value{}, fmt.Errorf("%s takes %s arguments, not %d: write %s", f.Name, want, len(args), f.Usage)
	}
	x := make([]float64, len(args))
	for i, a := range args {
		if !a.Dim.Is(f.Dims[i]) {
			return quantity.Value{}, fmt.Errorf("%s of %s must be %s, this is %s", f.Args[i], f.Name, f.Dims[i].Name(), a.Dim.Name())
		}
		if i > 0 && a.Shape != quantity.Number {
			return quantity.Value{}, fmt.Errorf("%s of %s must be one number", f.Args[i], f.Name)
		}
		if a.Shape == quantity.Number {
			x[i] = a.SI[0]
		}
	}
	out := quantity.Value{Dim: f.Unit.Dim, Unit: f.Unit}
	if len(args) == 0 || args[0].Shape == quantity.Number {
		y, err := f.Call(product, x)
		out.SI = []float64{y}
		return out, err
	}
	if args[0].Shape == quantity.Rows {
		return quantity.Value{}, fmt.Errorf("%s takes a number or a vector", f.Name)
	}
	out.Shape, out.Labels = quantity.Vector, args[0].Labels
	for _, v := range args[0].SI {
		x[0] = v
		y, err := f.Call(product, x)
		if err != nil {
			return quantity.Value{}, err
		}
		out.SI = append(out.SI, y)
	}
	return out, nil
}

// common fields of every declaring block.
type common struct {
	Caption field.Field `name:"caption" is:"text" doc:"a title for the block, printed in its head"`
	Note    field.Field `name:"note" is:"text" doc:"a remark printed under the block"`
	Cite    field.Field `name:"cite" is:"text" many:"yes" doc:"sources of the data, by key"`
	Show    field.Field `name:"show" is:"choice" of:"echo|method|results" many:"yes" doc:"which parts are printed; all, if not given. Checks, warnings and cautions always are"`
}

func (c *common) shared() *common { return c }

// Common gives the fields that every declaring block has.
func Common(b Body) *common { return b.(interface{ shared() *common }).shared() }
