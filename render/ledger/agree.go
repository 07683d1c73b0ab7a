package ledger

import (
	"encoding/json"
	"fmt"
	"maps"
	"math"
	"slices"
)

// Agreement is how far two results may be apart on processors of different kinds, relative to the
// largest number of the value or series.
const Agreement = 1e-9

// Agree compares the values, series and checks of two results.json by id, and gives
// the largest difference of a number, relative to the largest of its value or series,
// and everything that is not the same within tolerance, the first of each id.
func Agree(was, now []byte, tolerance float64) (largest float64, differ []Flaw, err error) {
	a, err := readTables(was)
	if err != nil {
		return 0, nil, err
	}
	b, err := readTables(now)
	if err != nil {
		return 0, nil, err
	}
	for _, id := range slices.Sorted(maps.Keys(a)) {
		if _, ok := b[id]; !ok {
			differ = append(differ, Flaw{id, "does not come out any more"})
			continue
		}
		d, why := apart(a[id], b[id])
		largest = max(largest, d)
		switch {
		case why != "":
			differ = append(differ, Flaw{id, why})
		case d > tolerance:
			differ = append(differ, Flaw{id, fmt.Sprintf("differs by %.2g of itself", d)})
		}
	}
	for _, id := range slices.Sorted(maps.Keys(b)) {
		if _, ok := a[id]; !ok {
			differ = append(differ, Flaw{id, "comes out and was not there"})
		}
	}
	return largest, differ, nil
}

// readTables is every value, series and check of results.json, by what it is and its id.
func readTables(text []byte) (map[string]any, error) {
	var all struct {
		Values, Series, Checks []map[string]any
	}
	if err := json.Unmarshal(text, &all); err != nil {
		return nil, fmt.Errorf("results.json cannot be read: %w", err)
	}
	out := map[string]any{}
	for _, list := range []struct {
		what string
		rows []map[string]any
	}{{"value", all.Values}, {"series", all.Series}, {"check", all.Checks}} {
		for _, row := range list.rows {
			id := fmt.Sprint(list.what, " ", row["id"])
			if _, twice := out[id]; twice {
				return nil, fmt.Errorf("results.json holds %s twice", id)
			}
			out[id] = row
		}
	}
	return out, nil
}

// apart is how far two trees of JSON are apart: numbers relative to the largest of
// their list; everything else must be the same.
func apart(a, b any) (largest float64, why string) {
	switch x := a.(type) {
	case float64:
		y, ok := b.(float64)
		if !ok {
			return 0, "is another kind of value"
		}
		return relative(x-y, max(math.Abs(x), math.Abs(y))), ""
	case []any:
		y, ok := b.([]any)
		if !ok || len(x) != len(y) {
			return 0, "has another number of items"
		}
		return apartLists(x, y)
	case map[string]any:
		y, ok := b.(map[string]any)
		if !ok || len(x) != len(y) {
			return 0, "is another kind of value"
		}
		for _, key := range slices.Sorted(maps.Keys(x)) {
			if _, ok := y[key]; !ok {
				return 0, "is another kind of value"
			}
			d, why := apart(x[key], y[key])
			if why != "" {
				return 0, why
			}
			largest = max(largest, d)
		}
		return largest, ""
	}
	if a != b {
		return 0, fmt.Sprintf("is %v, was %v", b, a)
	}
	return 0, ""
}

func apartLists(x, y []any) (largest float64, why string) {
	scale, off := 0.0, 0.0
	for i := range x {
		p, isNumber := x[i].(float64)
		q, ok := y[i].(float64)
		if isNumber && ok {
			scale, off = max(scale, math.Abs(p), math.Abs(q)), max(off, math.Abs(p-q))
			continue
		}
		d, why := apart(x[i], y[i])
		if why != "" {
			return 0, why
		}
		largest = max(largest, d)
	}
	return max(largest, relative(off, scale)), ""
}

func relative(off, scale float64) float64 {
	if off == 0 {
		return 0
	}
	return math.Abs(off) / scale
}
