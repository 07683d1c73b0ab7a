package block

import (
	"strconv"
	"strings"

	"quoin/calc/exhibit"
)

// longest is how many rows of a file a table shows.
const longest = 1000

// fromFile shows a CSV file: its heads with their units, numbers with the digits
// they are written with.
func (b *table) fromFile(r *Run, t *exhibit.Table) bool {
	s := r.readSheet(b.File, b.Labels, b.Labels)
	if s == nil {
		return false
	}
	rows := len(s.columns[0].cells)
	if rows > longest {
		r.Fail(b.File, "table-long", "%s has %d rows; a table shows at most %d", s.path, rows, longest).WithHint("keep the file as data and show a selection of it")
		return false
	}
	var shown []*column
	if !b.Select.Given {
		for i := range s.columns {
			shown = append(shown, &s.columns[i])
		}
	}
	for _, it := range b.Select.List {
		c := s.pick(it.Text)
		if c == nil {
			f := b.Select
			f.At = it.At
			r.Fail(f, "table-columns", "%s has no column %s", s.path, it.Text).WithHint("%s", s.names())
			return false
		}
		shown = append(shown, c)
	}
	t.Caption = Lines(&b.common, "Table from "+b.File.Text())
	t.Rows = make([][]exhibit.Cell, rows)
	ok := true
	for _, c := range shown {
		col := exhibit.Column{Head: c.name, Right: c.unit != nil}
		if c.unit != nil {
			col.Unit = *c.unit
		}
		for i, cl := range c.cells {
			text := strings.TrimSpace(cl.text)
			x, err := strconv.ParseFloat(strings.ReplaceAll(text, "−", "-"), 64)
			cell := exhibit.Cell{Text: text}
			switch {
			case err == nil && isFinite(col.Unit.To(x)):
				cell = exhibit.Cell{Numbers: []exhibit.Number{{Value: col.Unit.To(x), Unit: col.Unit, Digits: digitsWritten(text)}}}
			case c.unit != nil && text != "":
				r.Diags.Errorf("table-number", cl.at, "%q is not a number", text).WithHint("the column %s has a unit and holds numbers", c.name)
				ok = false
			}
			t.Rows[i] = append(t.Rows[i], cell)
		}
		t.Columns = append(t.Columns, col)
	}
	return ok
}

func isFinite(x float64) bool { return x-x == 0 }

// digitsWritten counts the significant digits a number is written with.
func digitsWritten(text string) int {
	mantissa, _, _ := strings.Cut(strings.ToLower(text), "e")
	digits := strings.TrimLeft(strings.Map(func(r rune) rune {
		if r >= '0' && r <= '9' {
			return r
		}
		return -1
	}, mantissa), "0")
	return min(max(len(digits), 1), 15)
}
