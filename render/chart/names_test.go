package chart

import (
	"math"
	"strings"
	"testing"

	"quoin/calc/exhibit"
)

// TestEndNames: names of curves that end together stand apart, each with a sample
// of its dash; names that stand at their curves have none.
func TestEndNames(t *testing.T) {
	figure := func(ends ...float64) *panel {
		q := exhibit.Panel{}
		for i, y := range ends {
			q.Series = append(q.Series, exhibit.FigSerie{Label: "curve " + string(rune('a'+i)), X: []float64{0, 1}, Y: []float64{0, y}, Role: exhibit.Data, Dash: i % 4})
		}
		return measure(exhibit.Figure{Panels: []exhibit.Panel{q}})[0]
	}
	apart := func(names []endName) {
		t.Helper()
		for i := range names {
			for j := range i {
				if d := math.Abs(names[i].place - names[j].place); d < leading-1e-9 {
					t.Errorf("%s and %s are %v px apart", names[i].lines[0], names[j].lines[0], d)
				}
			}
		}
	}
	together := figure(1, 1.001, 1.002, 0.999)
	names := together.endNames()
	apart(names)
	for i, n := range names {
		if !strings.HasPrefix(n.lines[0], samples[i]) || !strings.HasSuffix(n.lines[0], string(rune('a'+i))) {
			t.Errorf("name %d is %q", i, n.lines[0])
		}
	}
	if w := together.endWidth(); w < textWidth("—— curve a", false) {
		t.Errorf("%v px of room for the names", w)
	}
	names = figure(0.2, 0.5, 0.8, 1).endNames()
	apart(names)
	for i, n := range names {
		if n.lines[0] != "curve "+string(rune('a'+i)) || n.place != n.at {
			t.Errorf("name %d is %q, moved by %v", i, n.lines[0], n.place-n.at)
		}
	}
	same := figure(1, 1.001)
	same.Series[1].Dash = 0
	for _, n := range same.endNames() {
		if !strings.HasPrefix(n.lines[0], "curve") {
			t.Errorf("a sample tells nothing where all are drawn alike: %q", n.lines[0])
		}
	}
}
