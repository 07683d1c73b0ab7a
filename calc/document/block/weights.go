package block

import (
	"slices"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/quantity"
	"quoin/calc/structure"
)

// weightFields are the seismic weights of a model by matrices: written out, or
// added up from the columns of a file.
type weightFields struct {
	Each    field.Field `name:"each" is:"force" many:"yes" short:"yes" must:"positive" hint:"a weight is a force (kN, kip); for masses (t, kg) use the field mass" doc:"weight at each level, lowest first"`
	File    field.Field `name:"file" is:"file" doc:"a CSV file with a row a level, lowest first, and columns of weights; a column level must hold the names of the levels"`
	Columns field.Field `name:"columns" is:"text" many:"yes" doc:"of a file: the columns that are added up, by name or number from 1; weight, if not given"`
}

// place is the field that is given, for messages about the weights as a whole.
func (w *weightFields) place() field.Field {
	if w.File.Given {
		return w.File
	}
	return w.Each
}

// check sees that the weights are given in one way.
func (w *weightFields) check(c *Checks) {
	columns := w.Columns
	columns.At = across(columns)
	switch {
	case w.Each.Given && w.File.Given:
		c.Fail(w.File, "structure-form", "the weights are given in 2 ways: one of each and file is needed")
	case !w.Each.Given && !w.File.Given:
		c.Fail(columns, "structure-form", "the weights are given in 0 ways: one of each and file is needed")
	case w.Columns.Given && !w.File.Given:
		c.Fail(columns, "structure-form", "columns belong to a file of weights")
	}
}

// weightsFrom adds up the columns of the file, N, and makes masses of them; nil
// where the file is at fault.
func (b *building) weightsFrom(r *Run, levels int) *grid {
	f, ask := b.Weight.File, b.Weight.Columns
	s := r.readSheet(f, field.Field{}, field.Field{})
	if s == nil {
		return nil
	}
	if !ask.Given {
		ask = f
		ask.List = []field.Item{{Text: "weight", At: f.At}}
	}
	n := len(s.columns[0].cells)
	if n != levels {
		r.Fail(f, "length", "%s has %d rows, the structure has %d levels", s.path, n, levels).WithHint("a row a level, lowest first; sums stand in no row")
		return nil
	}
	si, at := make([]float64, n), make([][]diag.Range, n)
	var used []*column
	for _, it := range ask.List {
		item := ask
		item.At = it.At
		c := s.pick(it.Text)
		switch {
		case c == nil:
			r.Fail(item, "missing-column", "%s has no column %s", s.path, it.Text).WithHint("%s", s.names())
			return nil
		case slices.Contains(used, c):
			r.Fail(item, "structure-form", "the column %s is added twice", c.name)
			return nil
		}
		used = append(used, c)
		x, _, ok := r.numbers(c, quantity.Force)
		if !ok {
			return nil
		}
		for i := range x {
			if x[i] < 0 {
				r.Diags.Errorf("bounds", c.cells[i].at, "a weight must be zero or more")
				return nil
			}
			si[i] += x[i]
			at[i] = append(at[i], c.cells[i].at)
		}
	}
	if names := s.find("level"); names != nil && b.Levels.Given {
		want := b.Levels.Texts()
		for i, c := range names.cells {
			if i < len(want) && c.text != want[i] { // too few names: said by the engine
				r.Diags.Errorf("labels", c.at, "row %d is level %s; the structure's level %d is %s", i+1, c.text, i+1, want[i]).WithHint("rows stand in the order of the levels, lowest first")
				return nil
			}
		}
	}
	var words []string
	for _, c := range used {
		words = append(words, c.name)
	}
	sum := ""
	if len(words) > 1 {
		sum = ", the sum of its columns " + strings.Join(words, ", ")
	}
	masses := make([]float64, n)
	for i := range si {
		masses[i] = si[i] / quantity.Gravity
		at[i] = []diag.Range{at[i][0]}
	}
	r.Used("weight", "weight", plain(strings.TrimSpace(f.Text())), "one row a level"+sum)
	return &grid{si: structure.Diagonal(masses), at: at, whole: f.At, source: "the weights of the file " + f.Text() + sum}
}
