package page

import (
	"slices"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// TestPackCuts: whatever is packed stands in order, whole, on sheets of its own
// orientation; a sheet is fuller than it holds only by one thing that is not cut and
// that no sheet holds.
func TestPackCuts(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		most := rooms{upright: 200, across: 130}
		var items []item
		var want []string
		for i := range rapid.IntRange(1, 40).Draw(t, "items") {
			name := strconv.Itoa(i)
			wide := rapid.IntRange(0, 5).Draw(t, "wide") == 0
			switch rapid.IntRange(0, 3).Draw(t, "kind") {
			case 0:
				rows := make([]string, rapid.IntRange(1, 90).Draw(t, "rows"))
				for r := range rows {
					rows[r] = name + "." + strconv.Itoa(r)
				}
				high := rapid.Float64Range(4, 30).Draw(t, "row")
				part := chunked("rows", headRow, rows, func(string) float64 { return high }, nil)
				for k := range part {
					part[k].wide = wide
				}
				items, want = append(items, lying(part, wide)...), append(want, rows...)
			case 1:
				items, want = append(items, item{name: "head", data: []string{name}, high: 12, keep: true}), append(want, name)
			default:
				items, want = append(items, item{name: "one", data: []string{name}, high: rapid.Float64Range(3, 150).Draw(t, "high"), wide: wide, half: rapid.IntRange(0, 9).Draw(t, "half") == 0}), append(want, name)
			}
		}
		var got []string
		for n, s := range pack(items, most) {
			room := most.of(s.wide)
			for i, it := range s.items {
				got = append(got, it.data.([]string)...)
				if it.wide && !s.wide || !it.wide && s.wide && !it.keep {
					t.Fatalf("sheet %d lies wrong for %s", n+1, it.name)
				}
				if it.keep && i == len(s.items)-1 && len(got) < len(want) {
					t.Fatalf("a heading ends sheet %d", n+1)
				}
			}
			last := s.items[len(s.items)-1]
			alone := last.high
			for i := len(s.items) - 2; i >= 0 && s.items[i].keep; i-- {
				alone += s.items[i].high
			}
			if total(s.items) > room && alone <= room {
				t.Fatalf("sheet %d holds %v of %v mm", n+1, total(s.items), room)
			}
		}
		if !slices.Equal(got, want) {
			t.Fatalf("%v\nwant\n%v", got, want)
		}
	})
}

// lying makes items, and what they are cut into, lie across.
func lying(list []item, wide bool) []item {
	for i := range list {
		list[i].wide = wide
		if inner := list[i].cut; inner != nil {
			list[i].cut = func(room float64) (first, rest []item) {
				first, rest = inner(room)
				return lying(first, wide), lying(rest, wide)
			}
		}
	}
	return list
}

// TestStretches: columns that do not fit side by side are parted, each once but the
// first, in parts that fit.
func TestStretches(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var columns []column
		var names []int
		for i := range rapid.IntRange(3, 60).Draw(t, "columns") {
			w := rapid.Float64Range(4, 50).Draw(t, "width")
			columns, names = append(columns, column{w, 2 * w}), append(names, i)
		}
		next := 1
		for _, s := range stretches(columns, 200) {
			part := taken(names, s)
			if part[0] != 0 {
				t.Fatalf("%v does not begin with the first column", part)
			}
			for _, k := range part[1:] {
				if k != next {
					t.Fatalf("column %d where %d belongs", k, next)
				}
				next++
			}
			if w := needs(taken(columns, s)); w > 200 {
				t.Fatalf("%v is %v mm wide", part, w)
			}
			sum := 0.0
			for i, w := range spread(taken(columns, s), 200) {
				if sum += w; w < taken(columns, s)[i].least {
					t.Fatal("a column is narrower than it can be")
				}
			}
			if sum > 200.001 {
				t.Fatalf("columns take %v mm", sum)
			}
		}
		if next != len(columns) {
			t.Fatalf("%d columns of %d", next, len(columns))
		}
	})
}

// TestWideTable: a table is set upright, then tight, then across, then in parts, as
// it has more columns; no column is lost.
func TestWideTable(t *testing.T) {
	b := newBook(plainPackage("A4", 0), Options{})
	var kinds []string
	for n := 2; n < 60; n++ {
		table := &exhibit.Table{ID: "t", Caption: "Forces"}
		row := []exhibit.Cell{{Text: "L1"}}
		table.Columns = append(table.Columns, exhibit.Column{Head: "level"})
		for i := 1; i < n; i++ {
			table.Columns = append(table.Columns, exhibit.Column{Head: "c" + strconv.Itoa(i), Unit: quantity.MustUnit("kN"), Right: true})
			row = append(row, exhibit.Cell{Numbers: []exhibit.Number{{Value: 123400, Unit: quantity.MustUnit("kN")}}})
		}
		for range 30 {
			table.Rows = append(table.Rows, row)
		}
		items := b.table(table, "")
		v := items[0].data.(tableView)
		kind := "upright"
		switch {
		case len(items) > 1:
			kind = "parts"
		case items[0].wide:
			kind = "across"
		case v.Tight:
			kind = "tight"
		}
		if len(kinds) == 0 || kinds[len(kinds)-1] != kind {
			kinds = append(kinds, kind)
		}
		seen := 1
		for _, it := range items {
			part := it.data.(tableView)
			seen += len(part.Heads) - 1
			if part.Heads[0].Head != "level" || len(part.Rows[29]) != len(part.Heads) {
				t.Errorf("%d columns: a part has %v", n, part.Heads)
			}
			if (len(items) > 1) != strings.Contains(part.Caption, "columns") {
				t.Errorf("%d columns: %q", n, part.Caption)
			}
		}
		if seen != n {
			t.Errorf("%d columns of %d", seen, n)
		}
	}
	if !slices.Equal(kinds, []string{"upright", "tight", "across", "parts"}) {
		t.Errorf("tables are set %v", kinds)
	}
}

// A face breaks a text in whatever room there is.
func TestLinesWithoutRoom(t *testing.T) {
	for _, room := range []float64{-300, 0, 0.2} {
		if got := textFace.lines("a name that goes on", room); got < 4 || got > 40 {
			t.Errorf("in a room of %v em it takes %v lines", room, got)
		}
	}
}
