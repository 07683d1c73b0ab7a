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

// TestNamesKeepClear: names stand where no curve runs: a level's at the left where the
// right is taken, a period's at the bottom where the top is; the name of a curve that ends
// early stands at its end only where it is alone.
func TestNamesKeepClear(t *testing.T) {
	one, zero := 1.0, 0.0
	q := exhibit.Panel{Y: exhibit.Axis{Min: &zero, Max: &one},
		Series: []exhibit.FigSerie{{Label: "early", X: []float64{0, 4}, Y: []float64{0, 0.97}}, {Label: "late", X: []float64{0, 2, 10}, Y: []float64{0, 0.97, 0.98}, Dash: 1}},
		Lines:  []exhibit.RefLine{{At: 0.95, Label: "95 %"}, {At: 0.05, Label: "5 %"}, {Vertical: true, At: 6, Label: "6 s"}}}
	p := measure(exhibit.Figure{Panels: []exhibit.Panel{q}})[0]
	levels := p.levelNames()
	if len(levels) != 2 || levels[0].Name != "5 %" || levels[0].Label.Align != "right" || levels[1].Name != "95 %" || levels[1].Label.Align != "left" {
		t.Errorf("levels %+v", levels)
	}
	c, _ := p.lineNames()
	if s := c.Data.([]spot)[0]; s.Name != "6 s" || s.Label.VAlign != "bottom" || s.Value[1] != 0 {
		t.Errorf("the period is named at %+v", s)
	}
	p.height = 100 // where the line of 5 % is 5 px up
	c, _ = p.lineNames()
	if up := math.Abs(c.Data.([]spot)[0].Label.Offset[1]); up < 0.05*p.height {
		t.Errorf("its name, %v px from an end, meets a line that is 5 px from it", up)
	}
	for _, n := range p.endNames() {
		if n.inside || !strings.HasPrefix(n.lines[0], samples[n.series]) {
			t.Errorf("the name %q stands inside: %v", n.lines[0], n.inside)
		}
	}
	q.Series = append(q.Series[:0:0], exhibit.FigSerie{Label: "early", X: []float64{0, 4}, Y: []float64{0, 0.5}}, exhibit.FigSerie{Label: "late", X: []float64{0, 10}, Y: []float64{0, 0.1}})
	for _, n := range measure(exhibit.Figure{Panels: []exhibit.Panel{q}})[0].endNames() {
		if n.inside != (n.lines[0] == "early") {
			t.Errorf("%s stands inside: %v", n.lines[0], n.inside)
		}
	}
}

// TestLevelsApart: names of lines that lie close are moved apart, in their order.
func TestLevelsApart(t *testing.T) {
	q := exhibit.Panel{Series: []exhibit.FigSerie{{X: []float64{0, 1}, Y: []float64{0, 2.5}}}}
	for _, at := range []float64{0.9, 1, 1.1} {
		q.Lines = append(q.Lines, exhibit.RefLine{At: at, Label: "at " + string(rune('a'+len(q.Lines)))})
	}
	p := measure(exhibit.Figure{Panels: []exhibit.Panel{q}})[0]
	above := math.Inf(1)
	for _, s := range p.levelNames() {
		y := p.height - p.y.at(s.Value[1], p.height) + s.Label.Offset[1]
		if y > above-leading+1e-9 {
			t.Errorf("%s stands %v px from the top, the one below it %v", s.Name, y, above)
		}
		above = y
	}
}

// TestRingsKeepClear: the name of a ring stands where no curve runs through it.
func TestRingsKeepClear(t *testing.T) {
	q := exhibit.Panel{Series: []exhibit.FigSerie{{X: []float64{0, 5, 10}, Y: []float64{0.52, 0.5, 0.52}}, {X: []float64{0, 10}, Y: []float64{1, 1}}}, Points: []exhibit.RefPoint{{X: 5, Y: 0.5, Label: "0.5 at 5"}}}
	p := measure(exhibit.Figure{Panels: []exhibit.Panel{q}})[0]
	c, _ := p.rings()
	if l := c.Data.([]spot)[0].Label; l.Offset[1] != leading+2 && l.Offset[1] != -leading-2 {
		t.Errorf("the name stands at %v", l.Offset)
	}
}

// TestLastSeen: a curve that leaves by the right edge is named where it leaves.
func TestLastSeen(t *testing.T) {
	three := 3.0
	q := exhibit.Panel{X: exhibit.Axis{Max: &three}, Series: []exhibit.FigSerie{{Label: "a", X: []float64{0, 2, 4}, Y: []float64{0, 1, 2}}}}
	p := measure(exhibit.Figure{Panels: []exhibit.Panel{q}})[0]
	if x, y := p.lastSeen(p.data(q.Series[0])); x != 3 || math.Abs(y-1.5) > 1e-12 {
		t.Errorf("it is last seen at %v, %v", x, y)
	}
}

// TestMarkedDashes: the fifth and the sixth curve carry marks, and a logarithmic axis of
// values shows five decades by itself.
func TestMarkedDashes(t *testing.T) {
	q := exhibit.Panel{Y: exhibit.Axis{Log: true}}
	for i := range 6 {
		q.Series = append(q.Series, exhibit.FigSerie{Label: string(rune('a' + i)), X: []float64{0, 1, 2, 3, 4, 5, 6, 7, 8, 9}, Y: []float64{1, 1e-9, 1, 1, 1, 1, 1, 1, 1, 1}, Dash: i})
	}
	p := measure(exhibit.Figure{Panels: []exhibit.Panel{q}})[0]
	if p.y.lo != 1e-5 || p.y.hi != 1 {
		t.Errorf("the axis runs from %v to %v", p.y.lo, p.y.hi)
	}
	var marked []string
	for _, c := range p.curves() {
		if strings.HasPrefix(c.Id, "~mark") {
			marked = append(marked, c.Name)
			if n := len(c.Data.(points)); n < 5 || n > 9 {
				t.Errorf("%s carries %d marks", c.Name, n)
			}
		}
	}
	if strings.Join(marked, "") != "ef" {
		t.Errorf("marked are %v", marked)
	}
}
