package page

import (
	"strconv"
	"testing"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// TestTallTable: a table higher than a sheet is cut into parts that fit, each
// with its heads; no row is lost, only the first part bears the id, only the
// last the notes.
func TestTallTable(t *testing.T) {
	table := &exhibit.Table{ID: "big", Caption: "Many rows", Columns: []exhibit.Column{{Head: "n"}, {Head: "force", Unit: quantity.MustUnit("kN"), Right: true}}, Notes: []string{"a note"}}
	for i := range 300 {
		table.Rows = append(table.Rows, []exhibit.Cell{{Text: strconv.Itoa(i)}, {Numbers: []exhibit.Number{{Value: float64(i), Unit: quantity.MustUnit("kN")}}}})
	}
	b := newBook(&exhibit.Package{System: quantity.SI}, Options{})
	b.exhibits[table] = "tab-big"
	sheets := pack(b.table(table, "results"), b.rooms())
	if len(sheets) < 5 {
		t.Fatalf("%d sheets of 300 rows", len(sheets))
	}
	next := 0
	for i, s := range sheets {
		if high := total(s.items); high > b.room() || len(s.items) != 1 {
			t.Fatalf("sheet %d is %v mm high, a sheet holds %v", i, high, b.room())
		}
		v := s.items[0].data.(tableView)
		if (v.ID != "") != (i == 0) {
			t.Errorf("part %d has the id %q", i, v.ID)
		}
		if (len(v.Notes) > 0) != (i == len(sheets)-1) {
			t.Errorf("part %d has %d notes", i, len(v.Notes))
		}
		if (v.Caption == "Many rows, continued") != (i > 0) {
			t.Errorf("part %d says %q", i, v.Caption)
		}
		for _, row := range v.Rows {
			if row[0].Text != strconv.Itoa(next) {
				t.Fatalf("row %s where %d belongs", row[0].Text, next)
			}
			next++
		}
	}
	if next != 300 {
		t.Errorf("%d rows of 300", next)
	}
}
