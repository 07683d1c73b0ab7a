package block

import (
	"bytes"
	"cmp"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/quantity"
	"quoin/calc/structure"
)

// matrixFields are the fields of a matrix given in the document or by a file.
type matrixFields struct {
	Unit     field.Field `name:"unit" is:"text" doc:"unit of the numbers: kN/m, kip/in for a stiffness; t, kip*s^2/in for a mass"`
	Rows     []rowFields `name:"rows" doc:"the matrix, one row a level, lowest first"`
	Triplets []rowFields `name:"triplets" doc:"entries of a symmetric matrix: [row, column, value], counted from 1; one half of it, or all"`
}

type rowFields struct {
	Cells field.Field `name:"row" is:"any" many:"yes" short:"yes" doc:"the numbers of one row"`
}

type massFields struct {
	Diagonal field.Field `name:"diagonal" is:"any" many:"yes" short:"yes" doc:"mass at each level, lowest first, of a mass matrix that is diagonal"`
	File     field.Field `name:"file" is:"file" doc:"a CSV file: rows of the matrix, or the columns row, column, value"`
	matrixFields
}

type stiffnessFields struct {
	File field.Field `name:"file" is:"file" short:"yes" doc:"a CSV file: rows of the matrix, or the columns row, column, value"`
	matrixFields
}

// place is where a group of fields stands; its Line is 0 where it is not given.
func (m *matrixFields) place(others ...field.Field) diag.Range {
	for _, f := range append(others, m.Unit) {
		if !f.Given {
			return f.At
		}
	}
	return others[0].At
}

// forms says in how many ways a matrix is given.
func (m *matrixFields) forms(others ...field.Field) (n int) {
	for _, given := range []bool{len(m.Rows) > 0, len(m.Triplets) > 0} {
		if given {
			n++
		}
	}
	for _, f := range others {
		if f.Given {
			n++
		}
	}
	return n
}

// once sees that a matrix is given in one way.
func (m *matrixFields) once(c *Checks, what, ways string, others ...field.Field) {
	switch n := m.forms(others...); {
	case n == 0:
		c.Diags.Errorf("structure-form", m.place(others...), "the %s has no entries: one of %s is needed", what, ways)
	case n > 1:
		c.Diags.Errorf("structure-form", m.place(others...), "the %s is given in %d ways: one of %s is needed", what, n, ways)
	}
}

// grid is a matrix in SI and where each entry stands; at[i][j] has no line where
// entry i, j was not written.
type grid struct {
	si     [][]float64
	at     [][]diag.Range
	whole  diag.Range
	source string // in words: "the file K.csv"
	unit   quantity.Unit
}

// measure is what a matrix holds.
type measure struct {
	part structure.Part
	dim  quantity.Dim
	hint string // for other dimensions
}

var (
	masses      = measure{structure.InMass, quantity.Mass, "a mass is in t, kg, kN*s^2/m or kip*s^2/in; give weights, in kN or kip, by the field weight"}
	stiffnesses = measure{structure.InStiffness, quantity.Stiffness, "a stiffness is a force per length: kN/m, kip/in"}
)

// matrixUnit reads the unit that a matrix states.
func (r *Run) matrixUnit(f field.Field, m measure) (*quantity.Unit, bool) {
	if !f.Given {
		return nil, true
	}
	u, err := quantity.ParseUnit(f.Text())
	if err != nil {
		r.Fail(f, "unit", "%s", err).WithHint("%s", unitHint(err))
		return nil, false
	}
	if !u.Dim.Is(m.dim) {
		r.Fail(f, "dimension", "the %s must be %s, %s is %s", m.part, m.dim.Name(), u.Pretty(), u.Dim.Name()).WithHint("%s", m.hint)
		return nil, false
	}
	return &u, true
}

// cells reads the numbers of a field, each with its place.
func (r *Run) cells(f field.Field, unit *quantity.Unit, m measure) ([]float64, []diag.Range, bool) {
	v := f.Value
	out, at := make([]float64, len(v.SI)), make([]diag.Range, len(v.SI))
	for i, x := range v.SI {
		at[i] = f.At
		if len(f.List) == len(v.SI) {
			at[i] = f.List[i].At
		}
		out[i] = x
		switch {
		case v.Dim.Is(m.dim):
		case v.Dim.Is(quantity.None) && unit != nil:
			out[i] = unit.To(x)
		case v.Dim.Is(quantity.None):
			r.Diags.Errorf("dimension", at[i], "the %s must be %s, this is a pure number", m.part, m.dim.Name()).WithHint("state the unit of all numbers:  unit: %s", r.System().Preferred(m.dim).Text)
			return nil, nil, false
		default:
			r.Diags.Errorf("dimension", at[i], "the %s must be %s, this is %s", m.part, m.dim.Name(), v.Dim.Name()).WithHint("%s", m.hint)
			return nil, nil, false
		}
	}
	return out, at, len(out) > 0
}

// matrix reads the matrix of a field group for n levels; nil where it is at fault.
func (r *Run) matrix(m *matrixFields, file field.Field, n int, what measure) *grid {
	unit, ok := r.matrixUnit(m.Unit, what)
	if !ok {
		return nil
	}
	if file.Given {
		return r.matrixFile(file, m.Unit, unit, n, what)
	}
	g := &grid{source: "the rows written in this document"}
	if len(m.Rows) > 0 {
		g.whole = spanOf(m.Rows)
		if n > 1 && flat(m.Rows) {
			r.Diags.Errorf("matrix-size", g.whole, "these are numbers, not rows of a matrix").WithHint("a row stands in brackets of its own:  rows: [[300, -120], [-120, 120]]")
			return nil
		}
		for _, row := range m.Rows {
			si, at, ok := r.cells(row.Cells, unit, what)
			if !ok {
				return nil
			}
			g.si, g.at = append(g.si, si), append(g.at, at)
		}
	} else {
		g.source, g.whole = "the triplets written in this document", spanOf(m.Triplets)
		var entries []structure.Triplet
		var places []diag.Range
		for _, row := range m.Triplets {
			e, at, ok := r.triplet(row.Cells, unit, what)
			if !ok {
				return nil
			}
			entries, places = append(entries, e), append(places, at)
		}
		if !r.assemble(g, n, entries, places, what) {
			return nil
		}
	}
	if unit != nil {
		g.unit = *unit
	}
	return g
}

// triplet reads [row, column, value].
func (r *Run) triplet(f field.Field, unit *quantity.Unit, m measure) (structure.Triplet, diag.Range, bool) {
	if len(f.Value.SI) != 3 {
		r.Diags.Errorf("matrix-entry", across(f), "a triplet is  [row, column, value], this has %d numbers", len(f.Value.SI))
		return structure.Triplet{}, f.At, false
	}
	value, at := f, across(f)
	value.Value.SI = f.Value.SI[2:]
	if len(f.List) == 3 {
		value.List = f.List[2:]
	}
	si, _, ok := r.cells(value, unit, m)
	if !ok {
		return structure.Triplet{}, at, false
	}
	row, column := f.Value.SI[0], f.Value.SI[1]
	if row != float64(int(row)) || column != float64(int(column)) {
		r.Diags.Errorf("matrix-entry", at, "row and column are whole numbers, counted from 1")
		return structure.Triplet{}, at, false
	}
	return structure.Triplet{Row: int(row), Column: int(column), Value: si[0]}, at, true
}

// assemble makes the matrix of entries.
func (r *Run) assemble(g *grid, n int, entries []structure.Triplet, places []diag.Range, m measure) bool {
	a, err := structure.Triplets(n, entries, m.part)
	for _, f := range structure.Faults(err) {
		r.Diags.Errorf(f.Code, places[f.Row], "%s", f.Text).WithHint("%s", f.Hint)
	}
	if err != nil {
		return false
	}
	g.si = a
	g.at = make([][]diag.Range, n)
	for i := range g.at {
		g.at[i] = make([]diag.Range, n)
	}
	for i, e := range entries {
		g.at[e.Row-1][e.Column-1] = places[i]
		if g.at[e.Column-1][e.Row-1].Line == 0 {
			g.at[e.Column-1][e.Row-1] = places[i]
		}
	}
	return true
}

// largestMatrix bounds the file of a matrix, bytes.
const largestMatrix = 16 << 20

// matrixFile reads a matrix from a CSV file: rows of numbers without a head, or
// entries under the heads row, column, value [unit].
func (r *Run) matrixFile(f, unitField field.Field, unit *quantity.Unit, n int, m measure) *grid {
	data, full, err := r.Read(f.Text(), string(m.part)+" matrix")
	switch {
	case err != nil:
		r.Fail(f, "unreadable", "%s", err)
		return nil
	case len(data) > largestMatrix:
		r.Fail(f, "model-limit", "%s is larger than the %d MiB that a matrix may take", full, largestMatrix>>20)
		return nil
	case !utf8.Valid(data):
		r.Fail(f, "invalid-utf8", "%s is not UTF-8 text", full)
		return nil
	}
	data = bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	g := &grid{whole: f.At, source: "the file " + f.Text()}
	var entries []structure.Triplet
	var places []diag.Range
	sep, headed := "", false
	for i, text := range strings.Split(strings.ReplaceAll(string(data), "\r\n", "\n"), "\n") {
		if t := strings.TrimSpace(text); t == "" || strings.HasPrefix(t, "#") {
			continue
		}
		first := sep == ""
		if first {
			sep = separator(text)
		}
		row, problem := split(text, sep, full, i+1)
		if problem != "" {
			r.Diags.Errorf("table", lineRange(full, i+1, text), "%s", problem)
			return nil
		}
		row = unpadded(row)
		if first && !begun(row[0].text) {
			if headed = true; !r.heads(row, unitField, &unit, m) {
				return nil
			}
			continue
		}
		if unit == nil {
			r.Fail(f, "missing-field", "the numbers of %s need a unit", full).WithHint("write  {file: %s, unit: %s}", f.Text(), r.System().Preferred(m.dim).Text)
			return nil
		}
		if headed && len(row) != 3 {
			r.Diags.Errorf("table", lineRange(full, i+1, text), "this row has %d cells, the head has 3", len(row))
			return nil
		}
		if len(g.si) >= n && !headed {
			r.Diags.Errorf("matrix-size", lineRange(full, i+1, text), "the %s matrix has more rows than the model has levels, %d", m.part, n)
			return nil
		}
		x, at := make([]float64, len(row)), make([]diag.Range, len(row))
		for j, c := range row {
			v, err := strconv.ParseFloat(c.text, 64)
			if err != nil || strings.ContainsAny(c.text, "xXpP_nN") {
				r.Diags.Errorf("table-number", c.at, "%s is not a number", quoted(c.text)).WithHint("%s", numberHint(c.text, sep))
				return nil
			}
			x[j], at[j] = v, c.at
		}
		if !headed {
			for j := range x {
				x[j] = unit.To(x[j])
			}
			g.si, g.at = append(g.si, x), append(g.at, at)
			continue
		}
		if x[0] != float64(int(x[0])) || x[1] != float64(int(x[1])) {
			r.Diags.Errorf("matrix-entry", at[0], "row and column are whole numbers, counted from 1")
			return nil
		}
		entries, places = append(entries, structure.Triplet{Row: int(x[0]), Column: int(x[1]), Value: unit.To(x[2])}), append(places, union(at[0], at[2]))
	}
	if headed && !r.assemble(g, n, entries, places, m) {
		return nil
	}
	if len(g.si) == 0 {
		r.Fail(f, "table", "%s has no numbers", full)
		return nil
	}
	g.unit = *unit
	return g
}

// heads reads the head row of entries: row, column, value [unit].
func (r *Run) heads(row []cell, unitField field.Field, unit **quantity.Unit, m measure) bool {
	var names []string
	for _, c := range row {
		col, err := head(c)
		if err != nil {
			r.Diags.Errorf("table-head", c.at, "%s", err).WithHint("%s", cmp.Or(unitHint(err), headForm))
			return false
		}
		names = append(names, strings.ToLower(col.name))
		if col.unit == nil {
			continue
		}
		switch {
		case !col.unit.Dim.Is(m.dim):
			r.Diags.Errorf("dimension", c.at, "the %s must be %s, %s is %s", m.part, m.dim.Name(), col.unit.Pretty(), col.unit.Dim.Name()).WithHint("%s", m.hint)
			return false
		case *unit != nil && (*unit).Text != col.unit.Text:
			r.Fail(unitField, "table-units", "the head of the file states %s, the document %s", col.unit.Pretty(), (*unit).Pretty()).WithHint("state the unit once")
			return false
		}
		*unit = col.unit
	}
	if strings.Join(names, " ") != "row column value" {
		r.Diags.Errorf("table-head", union(row[0].at, row[len(row)-1].at), "a matrix has no head row, or the heads row, column, value").WithHint("rows of numbers alone, lowest level first; or entries under  row, column, value [%s]", r.System().Preferred(m.dim).Text)
		return false
	}
	return true
}

// faults reports what an engine found in matrices, each at its place.
func (r *Run) faults(err error, parts map[structure.Part]*grid, other field.Field) {
	found := structure.Faults(err)
	for _, f := range found {
		at := other.At
		if g := parts[f.In]; g != nil {
			at = g.spot(f.Row, f.Column)
		}
		e := r.Diags.Errorf(f.Code, at, "%s", f.Text)
		if f.Hint != "" {
			e.WithHint("%s", f.Hint)
		}
	}
	if len(found) == 0 {
		for _, e := range unjoin(err) {
			r.Fail(other, "structure", "%s", e)
		}
	}
}

// spot is the place of an entry, else of its row, else of the whole.
func (g *grid) spot(row, column int) diag.Range {
	if row < 0 || row >= len(g.at) || len(g.at[row]) == 0 {
		return g.whole
	}
	if column >= 0 && column < len(g.at[row]) && g.at[row][column].Line > 0 {
		return g.at[row][column]
	}
	from, to := g.at[row][0], g.at[row][len(g.at[row])-1]
	if from.Line == 0 || to.Line == 0 {
		return g.whole
	}
	return union(from, to)
}

// vector is the grid of one field, a column of numbers: Fault.Row counts them.
func vector(f field.Field) *grid {
	g := &grid{whole: across(f)}
	if len(f.List) > 1 || len(f.Value.SI) == len(f.List) {
		for _, it := range f.List {
			g.at = append(g.at, []diag.Range{it.At})
		}
	}
	return g
}

// across is the place of all items of a field.
func across(f field.Field) diag.Range {
	if len(f.List) == 0 {
		return f.At
	}
	return union(f.List[0].At, f.List[len(f.List)-1].At)
}

// flat tells whether what should be rows are single numbers: a bracket is missing.
func flat(rows []rowFields) bool {
	return len(rows) > 1 && !slices.ContainsFunc(rows, func(r rowFields) bool { return len(r.Cells.Value.SI) != 1 })
}

// spanOf is the place of rows, where they stand in one line; else that of the first.
func spanOf(rows []rowFields) diag.Range {
	return union(across(rows[0].Cells), across(rows[len(rows)-1].Cells))
}

// union reaches from a to b, where both stand in one line.
func union(a, b diag.Range) diag.Range {
	if a.File == b.File && a.Line == b.EndLine && b.EndColumn > a.Column {
		a.EndColumn = b.EndColumn
	}
	return a
}

// sized says what a matrix is, for the echo.
func (g *grid) sized() string {
	return fmt.Sprintf("%d × %d matrix", len(g.si), len(g.si))
}
