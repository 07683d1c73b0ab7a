package block

import (
	"cmp"
	"math"
	"slices"
	"strconv"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

var tableKind = Kind{
	Name:     "table",
	Doc:      "a table of values of other blocks and formulas, or of a CSV file",
	Makes:    "table",
	New:      func() Body { return &table{} },
	Nameless: true,
}

type table struct {
	common
	Columns []columnFields `name:"columns" doc:"vectors side by side: names or expressions, or {value, head, unit, digits}"`
	Values  []valueFields  `name:"values" doc:"single values one under another: names or expressions, or {value, label, unit, digits}"`
	File    field.Field    `name:"file" is:"file" doc:"a CSV file with a head row  name [unit], shown as it is"`
	Select  field.Field    `name:"select" is:"text" many:"yes" doc:"of a file: the columns shown, by name or number from 1; all, if not given"`
	Labels  field.Field    `name:"labels" is:"text" many:"yes" doc:"of columns: names of the rows, in the order of the vectors; the levels, where the vectors have them"`
	Order   field.Field    `name:"order" is:"choice" of:"highest first|lowest first" doc:"of columns: whether the highest level stands on top or the lowest; highest first for vectors by level, else as they are"`
	Sum     field.Field    `name:"sum" is:"text" many:"yes" doc:"columns whose sum stands in a last row, by head or number from 1"`
}

type columnFields struct {
	Value  field.Field `name:"value" is:"any" many:"yes" short:"yes" need:"yes" doc:"a vector: a name or an expression"`
	Head   field.Field `name:"head" is:"text" doc:"head of the column, without unit; the expression, if not given. A head such as F_x is typeset"`
	Unit   field.Field `name:"unit" is:"text" doc:"unit of the column"`
	Digits field.Field `name:"digits" is:"number" must:"whole" doc:"significant digits shown"`
}

type valueFields struct {
	Value  field.Field `name:"value" is:"any" short:"yes" need:"yes" doc:"a number: a name or an expression"`
	Label  field.Field `name:"label" is:"text" doc:"what it is, in words"`
	Unit   field.Field `name:"unit" is:"text" doc:"unit it is shown in"`
	Digits field.Field `name:"digits" is:"number" must:"whole" doc:"significant digits shown"`
}

// Check sees that the table has one source, and no fields of another.
func (b *table) Check(c *Checks) {
	var given []string
	for _, s := range []struct {
		name string
		has  bool
	}{{"columns", len(b.Columns) > 0}, {"values", len(b.Values) > 0}, {"file", b.File.Given}} {
		if s.has {
			given = append(given, s.name)
		}
	}
	if len(given) != 1 {
		c.Diags.Errorf("table-input", c.Place, "a table shows one of: columns, values, a file").WithHint("columns: [frame.w, response.storey_force]")
		return
	}
	for _, f := range []struct {
		of string
		field.Field
	}{{"columns", b.Labels}, {"columns", b.Order}, {"file", b.Select}} {
		if f.Given && given[0] != f.of {
			c.Fail(f.Field, "table-input", "this field belongs to a table with %s", f.of)
		}
	}
	if b.Sum.Given && given[0] == "values" {
		c.Fail(b.Sum, "table-input", "single values have no column to sum").WithHint("sum them in a formula line")
	}
}

// Run makes the table.
func (b *table) Run(r *Run) {
	r.Echo.Rows = nil // the table shows its inputs
	t := exhibit.Table{ID: r.Stem()}
	ok := false
	switch {
	case b.File.Given:
		ok = b.fromFile(r, &t)
	case len(b.Values) > 0:
		ok = b.single(r, &t)
	default:
		ok = b.side(r, &t)
	}
	if ok && b.total(r, &t) {
		r.Table(t)
	}
}

// shownIn is the unit and the digits a value is shown with.
func (r *Run) shownIn(v quantity.Value, unit, digits field.Field) (u quantity.Unit, d int, ok bool) {
	u, ok = axisUnit(r, unit, v)
	if digits.Given {
		if d = int(digits.SI()); d > 15 {
			r.Fail(digits, "bounds", "digits is %d; a number holds no more than 15", d)
			return u, d, false
		}
	}
	return u, d, ok
}

// leads is the registry id of a value that a tree names, or "".
func leads(tree *expr.Node) string {
	if tree != nil && (tree.Op == expr.Name || tree.Op == expr.Item) {
		return tree.ID
	}
	return ""
}

// side puts vectors side by side.
func (b *table) side(r *Run, t *exhibit.Table) bool {
	first := b.Columns[0].Value
	var labels []string
	for i := range b.Columns {
		c := &b.Columns[i]
		v := c.Value.Value
		if v.Shape != quantity.Vector || c.Value.Tree != nil && c.Value.Tree.Value != nil && c.Value.Tree.Value.Shape == quantity.Number {
			r.Fail(c.Value, "table-column", "%s is one number; a column takes a vector", c.Value.Written).WithHint("single values stand in a table with  values:")
			return false
		}
		if len(v.SI) != len(first.Value.SI) {
			r.Fail(c.Value, "length", "%s has %s, %s has %d", c.Value.Written, counted(len(v.SI), "item"), first.Written, len(first.Value.SI))
			return false
		}
		if len(v.Labels) > 0 {
			if labels != nil && !slices.Equal(labels, v.Labels) {
				r.Fail(c.Value, "labels", "%s runs over %s, the columns before over %s", c.Value.Written, listed(v.Labels), listed(labels))
				return false
			}
			labels = v.Labels
		}
	}
	n := len(first.Value.SI)
	down := b.Order.Text() == "highest first" || !b.Order.Given && labels != nil
	head, words := "item", "Values by item"
	if labels != nil {
		head, words = "level", "Values by level"
	}
	if down {
		words += ", highest on top"
	} else if b.Order.Given || labels != nil {
		words += ", lowest on top"
	}
	if b.Labels.Given {
		if labels = b.Labels.Texts(); len(labels) != n {
			r.Fail(b.Labels, "length", "labels has %s, the table %s", counted(len(labels), "item"), counted(n, "row"))
			return false
		}
		head = ""
	}
	t.Caption = Lines(&b.common, words)
	t.Columns = []exhibit.Column{Words(head)}
	t.Rows = make([][]exhibit.Cell, n)
	at := func(row int) int {
		if down {
			return n - 1 - row
		}
		return row
	}
	for row := range n {
		label := strconv.Itoa(at(row) + 1)
		if labels != nil {
			label = labels[at(row)]
		}
		t.Rows[row] = []exhibit.Cell{{Text: label}}
	}
	for i := range b.Columns {
		c := &b.Columns[i]
		unit, digits, ok := r.shownIn(c.Value.Value, c.Unit, c.Digits)
		if !ok {
			return false
		}
		col := Col(cmp.Or(c.Head.Text(), c.Value.Written), unit)
		switch tree := c.Value.Tree; {
		case symbolHead(c.Head.Text()):
			col.Symbol, col.Bare = &expr.Node{Op: expr.Name, Text: c.Head.Text()}, true
		case !c.Head.Given && tree != nil:
			col.Symbol, col.Bare = tree, true
		}
		if c.Head.Given && c.Value.Tree != nil {
			r.Echo.Rows = append(r.Echo.Rows, exhibit.EchoRow{Field: "columns", Label: c.Head.Text(), Value: exhibit.Cell{Symbol: c.Value.Tree}})
			if symbolHead(c.Head.Text()) {
				r.Echo.Rows[len(r.Echo.Rows)-1].Symbol = col.Symbol
			}
		}
		t.Columns = append(t.Columns, col)
		id := leads(c.Value.Tree)
		for row := range n {
			num := exhibit.Number{Value: c.Value.Value.SI[at(row)], Unit: unit, Digits: digits}
			if id != "" && !strings.HasSuffix(id, "]") {
				num.ID = id + "[" + strconv.Itoa(at(row)+1) + "]"
			}
			t.Rows[row] = append(t.Rows[row], exhibit.Cell{Numbers: []exhibit.Number{num}})
		}
	}
	return true
}

// symbolHead tells a symbol such as F_x or V from a head in words.
func symbolHead(head string) bool {
	base, sub, ok := strings.Cut(head, "_")
	return head != "" && !strings.Contains(head, " ") && (ok && base != "" && sub != "" || len([]rune(head)) == 1)
}

// single puts values one under another.
func (b *table) single(r *Run, t *exhibit.Table) bool {
	t.Caption = Lines(&b.common, "Values")
	t.Columns = []exhibit.Column{Words("quantity"), Words("symbol"), {Head: "value", Right: true}, Words("unit")}
	for i := range b.Values {
		v := &b.Values[i]
		unit, digits, ok := r.shownIn(v.Value.Value, v.Unit, v.Digits)
		if !ok {
			return false
		}
		id := leads(v.Value.Tree)
		words := v.Label.Text()
		if block, own, dotted := strings.Cut(id, "."); words == "" && dotted {
			own, _, _ = strings.Cut(own, "[")
			e, _ := r.exported(block, own)
			words = e.Doc
		} else if words == "" && id != "" {
			name, _, _ := strings.Cut(id, "[")
			_, words = r.Line(name)
		}
		num := exhibit.Number{Value: v.Value.SI(), Unit: unit, Digits: digits, ID: id}
		if digits == 0 && unit.Text == "" {
			num.Digits = wholeDigits(num.Value)
		}
		t.Rows = append(t.Rows, []exhibit.Cell{{Text: words}, {Symbol: v.Value.Tree}, {Numbers: []exhibit.Number{num}}, {Text: unit.Pretty()}})
	}
	return true
}

// wholeDigits shows a count without decimals; 0 leaves others as usual.
func wholeDigits(x float64) int {
	if x == float64(int64(x)) && x > -1e6 && x < 1e6 {
		return quantity.Exact(x)
	}
	return 0
}

// total adds the row of sums.
func (b *table) total(r *Run, t *exhibit.Table) bool {
	if !b.Sum.Given {
		return true
	}
	from := 1 // the first column of vectors holds labels
	if b.File.Given {
		from = 0
	}
	row := make([]exhibit.Cell, len(t.Columns))
	for _, it := range b.Sum.List {
		j := -1
		for k := from; k < len(t.Columns) && j < 0; k++ {
			if strings.EqualFold(t.Columns[k].Head, it.Text) {
				j = k
			}
		}
		if k, err := strconv.Atoi(it.Text); err == nil && j < 0 && k >= 1 && k+from <= len(t.Columns) {
			j = k + from - 1
		}
		f := b.Sum
		f.At = it.At
		for k := j + 1; j >= 0 && k < len(t.Columns); k++ {
			if strings.EqualFold(t.Columns[k].Head, it.Text) {
				r.Fail(f, "table-sum", "two columns have the head %s", it.Text).WithHint("name the column by its number, counted from 1, or give the two heads of their own")
				return false
			}
		}
		if j < 0 {
			var heads []string
			for _, c := range t.Columns[from:] {
				heads = append(heads, c.Head)
			}
			e := r.Fail(f, "table-sum", "the table has no column %s", it.Text)
			e.WithHint("its columns are %s", strings.Join(heads, ", "))
			if near := diag.Nearest(it.Text, heads); near != "" {
				e.WithHint("did you mean %s?", near)
			}
			return false
		}
		sum := exhibit.Number{Unit: t.Columns[j].Unit}
		decimals := 0
		for _, cells := range t.Rows {
			if len(cells[j].Numbers) != 1 {
				r.Fail(f, "table-sum", "the column %s holds texts and has no sum", t.Columns[j].Head)
				return false
			}
			sum.Value += cells[j].Numbers[0].Value
			_, after, _ := strings.Cut(cells[j].Numbers[0].Text(), ".")
			decimals = max(decimals, len(after))
		}
		whole, _, _ := strings.Cut(quantity.Plain(math.Round(math.Abs(sum.Unit.From(sum.Value)))), ".")
		sum.Digits = min(max(len(whole)+decimals, quantity.Digits), 15)
		row[j] = exhibit.Cell{Numbers: []exhibit.Number{sum}, Strong: true}
	}
	if len(row[0].Numbers) == 0 {
		row[0] = exhibit.Cell{Text: "sum", Strong: true}
	}
	t.Rows = append(t.Rows, row)
	return true
}
