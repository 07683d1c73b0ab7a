package chart

import (
	"encoding/json"
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

// TestHeadroom: names of vertical lines stand clear of a curve that runs below
// them; where none does, and where the writer set the end, the axis stays.
func TestHeadroom(t *testing.T) {
	at := func(y []float64, end *float64) *panel {
		q := exhibit.Panel{Y: exhibit.Axis{Max: end}, Series: []exhibit.FigSerie{{X: []float64{0, 1, 2, 3, 4}, Y: y}},
			Lines: []exhibit.RefLine{{Vertical: true, At: 0.95, Label: "TB 0.95 s"}, {Vertical: true, At: 1, Label: "TC 1.00 s"}}}
		return measure(exhibit.Figure{Panels: []exhibit.Panel{q}})[0]
	}
	p := at([]float64{0, 1, 0.5, 0.2, 0.1}, nil)
	rows := p.lineRows()
	if rows[0].row != 0 || rows[1].row != 1 {
		t.Fatalf("names that meet stand in rows %v", rows)
	}
	if room := p.height - p.y.at(1, p.height); room < 2*leading || math.Abs(p.y.hi-1.2) > 1e-9 {
		t.Errorf("the curve comes to %.3g px of the top, two rows of names need %.3g; the axis ends at %v", room, 2.0*leading, p.y.hi)
	}
	if p := at([]float64{0, 0.1, 0.2, 0.5, 1}, nil); p.y.hi != 1 {
		t.Errorf("no curve runs below the names, and the axis ends at %v", p.y.hi)
	}
	end := 1.0
	if p := at([]float64{0, 1, 0.5, 0.2, 0.1}, &end); p.y.hi != 1 {
		t.Errorf("the writer's end 1 became %v", p.y.hi)
	}
}

// TestLastNumberHasRoom: half of the number at the end of the last panel's axis
// stands in the right margin.
func TestLastNumberHasRoom(t *testing.T) {
	s := exhibit.FigSerie{X: []float64{15000, 0}, Y: []float64{0, 1}}
	option, _, err := Option(exhibit.Figure{Beside: true, Panels: []exhibit.Panel{{Series: []exhibit.FigSerie{s}}, {Series: []exhibit.FigSerie{s}}, {Series: []exhibit.FigSerie{s}}}})
	if err != nil {
		t.Fatal(err)
	}
	var o struct{ Grid []struct{ Right float64 } }
	if err := json.Unmarshal(option, &o); err != nil {
		t.Fatal(err)
	}
	if want := textWidth("15\u202f000", false) / 2; o.Grid[0].Right < want {
		t.Errorf("%.3g px are left, half of the number takes %.3g", o.Grid[0].Right, want)
	}
}
