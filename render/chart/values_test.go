package chart

import (
	"math"
	"slices"
	"strconv"
	"strings"
	"testing"

	"quoin/calc/exhibit"
)

// TestValues: the table of a figure has its ends and its extremes, about forty rows,
// a cell a column, and no value that its curves do not have.
func TestValues(t *testing.T) {
	for _, f := range family() {
		v := ValuesOf(f)
		for i, table := range v.Tables {
			if len(table.Rows) == 0 || len(table.Rows) > mostRows+3*len(f.Panels[i].Series)+1 {
				t.Errorf("%s: %d rows", f.ID, len(table.Rows))
			}
			for _, row := range table.Rows {
				if len(row) != len(table.Heads) {
					t.Errorf("%s: %d cells under %d heads", f.ID, len(row), len(table.Heads))
				}
			}
		}
	}
	f := history()
	s := f.Panels[0].Series[0]
	v := ValuesOf(f)
	_, y := peak(s.X, s.Y)
	if g := f.Panels[0].Y.Unit.From(y); !v.Left || !slices.ContainsFunc(v.Tables[0].Rows, func(r []string) bool {
		x, err := strconv.ParseFloat(strings.ReplaceAll(r[1], "\u2212", "-"), 64)
		return err == nil && math.Abs(x/g-1) < 1e-3
	}) {
		t.Errorf("the peak %v is left out of %v", g, v.Tables[0].Rows)
	}
}

// TestValuesBetween: a curve without a point at a row is read off its line, marked;
// beyond its ends it has no value, nor has a step between its points.
func TestValuesBetween(t *testing.T) {
	f := exhibit.Figure{Panels: []exhibit.Panel{{X: exhibit.Axis{Unit: unit("s")}, Series: []exhibit.FigSerie{
		{Label: "a", X: []float64{1, 3}, Y: []float64{10, 30}}, {Label: "b", X: []float64{0, 2, 3}, Y: []float64{5, 6, 7}}, {Label: "c", X: []float64{0, 3}, Y: []float64{1, 2}, Step: true}}}}}
	var got []string
	for _, r := range ValuesOf(f).Tables[0].Rows {
		got = append(got, strings.ReplaceAll(strings.Join(r, " "), "\u2009", ""))
	}
	want := []string{"0  5.000 1.000", "1.000 10.00 ≈5.50 ", "2.000 ≈20.0 6.000 ", "3.000 30.00 7.000 2.000"}
	if !slices.Equal(got, want) {
		t.Errorf("rows %q, want %q", got, want)
	}
}

// TestDiagonals: a slanting line ends at the frame and goes through its point.
func TestDiagonals(t *testing.T) {
	f := tripartite()
	p := measure(f)[0]
	for _, g := range p.Diagonals {
		a, b, ok := p.clipped(g)
		if !ok {
			continue
		}
		for _, q := range [][2]float64{a, b} {
			if along := g.Y * math.Pow(q[0]/g.X, float64(g.Rise)); math.Abs(q[1]/along-1) > 1e-9 {
				t.Errorf("%s passes %v, not %v", g.Label, q, along)
			}
			edge := func(v, lo, hi float64) bool { return math.Abs(v/lo-1) < 1e-9 || math.Abs(v/hi-1) < 1e-9 }
			if !edge(q[0], p.x.lo, p.x.hi) && !edge(q[1], p.y.lo, p.y.hi) {
				t.Errorf("%s ends at %v, inside the frame", g.Label, q)
			}
		}
	}
}

// TestBarValues: a bar is a row: its name, and its ends.
func TestBarValues(t *testing.T) {
	y := exhibit.Axis{Label: "record", Names: []exhibit.TickName{{At: 1, Name: "a"}, {At: 0, Name: "b"}}}
	bar := func(from, to, at float64) exhibit.FigSerie {
		return exhibit.FigSerie{X: []float64{from, to}, Y: []float64{at, at}, Role: exhibit.Bar}
	}
	thin := bar(0.04, 5, 1)
	thin.Role = exhibit.Data
	v := ValuesOf(exhibit.Figure{Panels: []exhibit.Panel{{X: exhibit.Axis{Label: "period T"}, Y: y, Series: []exhibit.FigSerie{bar(0.05, 4, 1), thin, bar(0.02, 3, 0)}}}})
	got := v.Tables[0].Rows
	if len(got) != 2 || strings.Join(got[0], " ") != "a 0.05000 4.000" || strings.Join(got[1], " ") != "b 0.02000 3.000" {
		t.Errorf("rows %q", got)
	}
}
