package page

import (
	"slices"
	"strconv"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/exhibit"
)

// TestSummary: the summary has every check by its worst item, how many items there
// are, and every item that is NOT OK; the worst stand first.
func TestSummary(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := plainPackage("A4", 0)
		p.Checks = nil
		names := rapid.IntRange(1, 8).Draw(t, "checks")
		want, worst, items := map[string]bool{}, map[string]float64{}, map[string]int{}
		for n := range names {
			name, of := "check "+strconv.Itoa(n), rapid.IntRange(1, 9).Draw(t, "items")
			items[name] = of
			for i := range of {
				ratio := rapid.Float64Range(0.1, 1.4).Draw(t, "ratio")
				c := exhibit.Check{ID: name + strconv.Itoa(i), Name: name, Description: name, Anchor: "a", Place: exhibit.Place{Line: n}, Ratio: &ratio, OK: ratio <= 1, Relation: "<="}
				if of > 1 {
					c.Item = "L" + strconv.Itoa(i)
				}
				if worst[name] = max(worst[name], ratio); !c.OK {
					want[name+", "+c.Item] = true
				}
				p.Checks = append(p.Checks, c)
			}
		}
		b := newBook(p, Options{})
		seen, last := map[string]int{}, 99.0
		for _, s := range pack(b.summaryTable(), rooms{80, 80}) {
			for _, it := range s.items {
				for _, r := range it.data.(checksView).Rows {
					delete(want, r.Name+", "+r.Item)
					seen[r.Name]++
					ratio, _ := strconv.ParseFloat(r.Ratio, 64)
					if ratio > last+0.011 {
						t.Fatalf("%s, ratio %s, stands below %v", r.Name, r.Ratio, last)
					}
					last = ratio
					if r.Of > 0 && r.Of != items[r.Name] || r.Of == 0 && seen[r.Name] == 1 && items[r.Name] > 1 {
						t.Fatalf("%s is said to be the worst of %d, of %d", r.Name, r.Of, items[r.Name])
					}
					if r.Of > 1 && ratio < worst[r.Name]-0.011 {
						t.Fatalf("%s is said to be the worst with %s, which is %v", r.Name, r.Ratio, worst[r.Name])
					}
				}
			}
		}
		if len(want) > 0 || len(seen) != names {
			t.Fatalf("%d checks of %d; these are NOT OK and not there: %v", len(seen), names, want)
		}
	})
}

// TestRuns: sheets that follow one another are said in short.
func TestRuns(t *testing.T) {
	got := runs([]int{3, 5, 6, 8, 9, 10, 11, 14})
	want := []run{{3, 3}, {5, 5}, {6, 6}, {8, 11}, {14, 14}}
	for i := range want {
		if i >= len(got) || got[i] != want[i] {
			t.Fatalf("%v, want %v", got, want)
		}
	}
}

// TestRested: an assumption names the sheets of what cites it and of all that rests on it.
func TestRested(t *testing.T) {
	b := newBook(plainPackage("A4", 0), Options{})
	b.cited = map[string][]string{"A1": {"b-frame"}}
	b.sheets = map[string]int{"b-frame": 3, "b-modes": 7, "b-other": 9}
	a := exhibit.Assumption{ID: "A1", Dependents: []exhibit.Origin{{Name: "modes", Anchor: "b-modes"}}}
	if got := b.rested(a); !slices.Equal(got, []run{{3, 3}, {7, 7}}) {
		t.Errorf("sheets %v, want 3 and 7", got)
	}
}
