package page

import (
	"reflect"
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
	items := b.table(table, "results")
	if len(items) < 5 {
		t.Fatalf("%d parts of 300 rows", len(items))
	}
	next := 0
	for i, it := range items {
		if it.high > b.room()-10 {
			t.Errorf("part %d is %v mm high, a sheet holds %v", i, it.high, b.room())
		}
		v := reflect.ValueOf(it.data)
		if id := v.FieldByName("ID").String(); (id != "") != (i == 0) {
			t.Errorf("part %d has the id %q", i, id)
		}
		if n := v.FieldByName("Notes").Len(); (n > 0) != (i == len(items)-1) {
			t.Errorf("part %d has %d notes", i, n)
		}
		for _, row := range v.FieldByName("Rows").Interface().([][]cellView) {
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
