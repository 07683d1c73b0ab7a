package document

import (
	"strings"
	"testing"
)

// TestLongRow: a row of a data file has a bound, and its cells keep their places,
// whatever the width of their characters.
func TestLongRow(t *testing.T) {
	for cells, want := range map[int]string{4096: "this row has 4096 cells, the head has 2", 4097: "this row has more than the 4096 cells that a row may have", 3_000_000: "this row has more than the 4096 cells"} {
		row := strings.Repeat("1,", cells-1) + "1"
		_, res := book2(head+calc("target d", "table: t.csv", "damping: 5 %"), map[string]string{"t.csv": "T [s],PSA [g]\n" + row + "\n"})
		if len(res.Diagnostics) != 1 || !strings.Contains(res.Diagnostics[0].Summary, want) {
			t.Errorf("%d cells: %.300s", cells, text(res))
		}
	}
	_, res := book2(head+calc("structure s", "elevation: [3 m, 6 m]", "mass: [1 t, 1 t]", "stiffness: {file: K.csv, unit: kN/m}"), map[string]string{"K.csv": strings.Repeat("1,", 3_000_000)})
	if len(res.Diagnostics) != 1 || !strings.Contains(res.Diagnostics[0].Summary, "more than the 4096 cells") {
		t.Errorf("a matrix: %.300s", text(res))
	}
	_, res = book2(head+calc("structure s", "storeys: s.csv"), map[string]string{"s.csv": "level,height [m],weight [kN],stiffness [kN/m]\n \"ébène\" , Ω ,x,1\n"})
	if d := res.Diagnostics; len(d) != 1 || d[0].Range.Column != 12 || d[0].Range.EndColumn != 13 {
		t.Errorf("the cell Ω stands in column 12: %s", text(res))
	}
}
