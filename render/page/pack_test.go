package page

import (
	"slices"
	"strconv"
	"strings"
	"testing"

	"quoin/calc/cite"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
)

// TestCutFills: a table that goes on fills every sheet but the last, begins only
// where there is room for some of it, and loses no row and no anchor.
func TestCutFills(t *testing.T) {
	const most = 220.0
	rows := make([]int, 90)
	for i := range rows {
		rows[i] = i
	}
	high := func(i int) float64 { return 4.6 + float64(i%3)*4.6 }
	anchors := func(i int) []string { return []string{"r" + strconv.Itoa(i)} }
	for _, before := range []float64{0, 100, most - least - 20, most - least + 1, most - 1} {
		items := append([]item{{name: "text", high: before}, {name: "head", high: 14, keep: true}}, chunked("table", headRow, rows, high, anchors)...)
		sheets := pack(items, rooms{most, most})
		var got []int
		var led []string
		for n, sheet := range sheets {
			s := sheet.items
			for _, it := range s {
				if it.name != "table" {
					continue
				}
				got, led = append(got, it.data.([]int)...), append(led, it.anchors...)
				if n == 0 && before+14 > most-least {
					t.Errorf("after %v mm the table begins in %v mm", before, most-before-14)
				}
			}
			if high := total(s); high > most || n > 0 && n < len(sheets)-1 && high < most-16 {
				t.Errorf("after %v mm sheet %d of %d holds %v mm of %v", before, n+1, len(sheets), high, most)
			}
			if s[len(s)-1].name == "head" {
				t.Errorf("after %v mm a head stands alone at the foot of sheet %d", before, n+1)
			}
		}
		if !slices.Equal(got, rows) {
			t.Errorf("after %v mm the rows are %v", before, got)
		}
		if len(led) != len(rows) || led[89] != "r89" {
			t.Errorf("after %v mm the anchors are %v", before, led)
		}
	}
}

// TestChecksCut: where a table of checks goes on in the midst of one check, its
// source and formula are said again.
func TestChecksCut(t *testing.T) {
	ref := cite.To("ASCE/SEI 7-22", "12.12.1")
	tree := &expr.Node{Op: expr.AtMost, Args: []*expr.Node{{Op: expr.Name, Text: "a"}, {Op: expr.Name, Text: "b"}}}
	var list []exhibit.Check
	for i := range 40 {
		list = append(list, exhibit.Check{ID: "a <= b [" + strconv.Itoa(i) + "]", Name: "a <= b", Item: "L" + strconv.Itoa(i), Relation: "<=", Description: "drift", Ref: &ref, Tree: tree})
	}
	b := newBook(plainPackage("A4", 0), Options{})
	sheets := pack(b.checks(list, "checks", "Checks", false), rooms{120, 120})
	if len(sheets) < 2 {
		t.Fatal("nothing is cut")
	}
	ids := 0
	for _, s := range sheets {
		for _, it := range s.items {
			ids += len(it.anchors)
			text, err := b.execute(it)
			if err != nil {
				t.Fatal(err)
			}
			if n := strings.Count(string(text), "12.12.1"); n != 1 {
				t.Errorf("a part names its source %d times:\n%.600s", n, text)
			}
		}
	}
	if ids != 40 {
		t.Errorf("%d rows are led to of 40", ids)
	}
}
