package chart

import "quoin/calc/exhibit"

// The look of figures: ink on paper, two axes, a light grid. Curves differ by dash
// and thickness first, by colour second: a figure must read in one-bit black.
const (
	ink   = "#1c1b19"
	soft  = "#625e56"
	faint = "#8b857a"
	grid  = "#e3ded2"
	rule  = "#c9c3b6"
	paper = "#fffdf8"
	tie   = "#1d5a6c"
	bad   = "#9c2f1b"

	face    = "Label, Arial, sans-serif"
	size    = 12.5 // px, of all text
	leading = 14   // px, from line to line
)

// dashes by FigSerie.Dash: solid, long dash, dots, dash-dot; two more that carry marks.
var dashes = [][]float64{nil, {7, 3}, {1.5, 2.6}, {8, 3, 1.5, 3}, nil, {7, 3}}

// dots are the symbols at the points of a curve by its dash: curves of a few points are
// told apart by them.
var dots = []string{"circle", "rect", "triangle", "diamond", "circle", "rect"}

// cross is a symbol of two strokes.
const cross = "path://M0,0L2,2M0,2L2,0"

// pen is how one curve is drawn.
type pen struct {
	color  string
	width  float64
	dash   []float64
	z      int // higher lies on top
	strong bool
}

// penOf is the pen of a series by its role and dash.
func penOf(s exhibit.FigSerie) pen {
	p := pen{color: ink, width: 1.5, z: 3}
	switch s.Role {
	case exhibit.Governing:
		p = pen{color: tie, width: 2.8, z: 5, strong: true}
	case exhibit.Secondary:
		p = pen{color: faint, width: 0.8, z: 2} // no thinner: 0.5 pt on paper
	case exhibit.Limit:
		p = pen{color: bad, width: 1.8, dash: []float64{9, 4}, z: 4, strong: true}
	case exhibit.Bar:
		p = pen{color: ink, width: 9, z: 2}
	default:
		if s.Dash > 0 {
			p.width = 1.1
		}
		if len(s.X) > 1000 {
			p.width = 0.9
		}
	}
	if s.Dash > 0 && s.Dash < len(dashes) {
		p.dash = dashes[s.Dash]
	}
	return p
}
