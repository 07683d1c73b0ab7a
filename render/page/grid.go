package page

import "slices"

// point is a printer's point, mm.
const point = 25.4 / 72

// The sizes of a table in print, mm: a line of its cells and what stands around it,
// the same of its head, and what a cell has beside its text. A tight table is set
// smaller, to stay upright. As in page.css.
const (
	cellSize, cellLine, cellAround = 9.4 * point, 9.4 * point * 1.45, 2.15
	headSize, headLine, headAround = 8.4 * point, 8.4 * point * 1.5, 2.4
	beside                         = 1.6 // on either side
	tightCell, tightHead           = 8.4 * point, 8 * point
	tightBeside                    = 0.95
)

// belowSize is the size of what stands under a cell, and its line, mm.
const belowSize, belowLine = 7.4 * point, 7.4 * point * 1.3

// breakable is how long a word of a cell may be, em: a longer one is broken.
const breakable = 22

// slot is a cell before it is set: text that breaks between its words, or what must
// stay in one piece, and how wide that is, mm.
type slot struct {
	text        string
	below       string  // in small letters under it, in print
	symbol      float64 // a symbol before it, em
	pad         float64 // digits missing after the point, em
	right, head bool
	tight       bool
}

// set is the face and size a cell is set in, and what stands beside it, mm.
func (s slot) set() (f *face, size, around float64) {
	f, size, around = &textFace, cellSize, beside
	switch {
	case s.head && s.tight:
		f, size = &labelFace, tightHead
	case s.head:
		f, size = &labelFace, headSize
	case s.tight:
		size = tightCell
	}
	if s.tight {
		around = tightBeside
	}
	if s.right {
		around *= 2
	}
	return f, size, around + size*s.pad
}

// least is how narrow a cell can be, and most how wide it is in one line, mm.
func (s slot) least() float64 {
	f, size, around := s.set()
	return max(size*max(s.symbol, min(breakable, f.longest(s.text))), belowSize*labelFace.longest(s.below)) + around
}

func (s slot) most() float64 {
	f, size, around := s.set()
	w := f.width(s.text)
	if s.symbol > 0 {
		w += s.symbol + 0.3
	}
	return size*w + around
}

// lines is how many lines a cell takes in so much room.
func (s slot) lines(room float64) float64 {
	f, size, around := s.set()
	if s.below != "" {
		small := labelFace.lines(s.below, (room-around)/belowSize)
		s.below = ""
		return s.lines(room) + small*belowLine/cellLine
	}
	if s.most() <= room+0.1 {
		return 1
	}
	n := f.lines(s.text, (room-around)/size)
	if s.symbol > 0 && s.text != "" {
		n++
	}
	return n
}

// grid is a table before it is set: rows of cells, its heads first.
type grid [][]slot

// column is how wide a column must be and would be, mm.
type column struct{ least, most float64 }

func (g grid) columns() []column {
	var out []column
	for _, row := range g {
		for i, s := range row {
			if i == len(out) {
				out = append(out, column{})
			}
			out[i].least, out[i].most = max(out[i].least, s.least()), max(out[i].most, s.most())
		}
	}
	return out
}

// needs is the narrowest that columns can stand side by side, mm.
func needs(columns []column) float64 {
	sum := 0.0
	for _, c := range columns {
		sum += c.least
	}
	return sum
}

// spread gives columns their widths in a room, as a browser does: what each needs,
// and of the rest in proportion to what it would have.
func spread(columns []column, room float64) []float64 {
	least, most := 0.0, 0.0
	for _, c := range columns {
		least, most = least+c.least, most+c.most
	}
	out := make([]float64, len(columns))
	for i, c := range columns {
		switch {
		case most <= room && most > 0:
			out[i] = c.most * room / most
		case least < room && most > least:
			out[i] = c.least + (c.most-c.least)*(room-least)/(most-least)
		default:
			out[i] = c.least
		}
	}
	return out
}

// heights is how high rows are in columns of these widths.
func (g grid) heights(widths []float64) []float64 {
	out := make([]float64, len(g))
	for r, row := range g {
		tall, head := 1.0, false
		for i, s := range row {
			tall, head = max(tall, s.lines(widths[i])), head || s.head
		}
		out[r] = cellAround + cellLine*tall
		if head {
			out[r] = headAround + headLine*tall
		}
	}
	return out
}

// stretch is a stretch of columns that stand side by side, the first of all with them.
type stretch struct{ from, to int }

// stretches parts columns into stretches that fit a room, the first column repeated in
// each; one where all fit. A column that alone is too wide stands alone.
func stretches(columns []column, room float64) []stretch {
	if needs(columns) <= room || len(columns) < 3 {
		return []stretch{{0, len(columns)}}
	}
	var out []stretch
	for i := 1; i < len(columns); {
		s, used := stretch{from: i}, columns[0].least
		for i < len(columns) && (i == s.from || used+columns[i].least <= room) {
			used += columns[i].least
			i++
		}
		s.to = i
		out = append(out, s)
	}
	if n := len(out); n > 1 { // no column is left alone that could stand with others
		for out[n-1].to-out[n-1].from < (out[n-2].to-out[n-2].from)/2 && columns[0].least+needs(columns[out[n-1].from-1:out[n-1].to]) <= room {
			out[n-1].from--
			out[n-2].to--
		}
	}
	return out
}

// taken is what of a row stands on a side.
func taken[T any](row []T, s stretch) []T {
	if s.from == 0 {
		return row[:min(s.to, len(row))]
	}
	return append(slices.Clone(row[:min(1, len(row))]), row[min(s.from, len(row)):min(s.to, len(row))]...)
}

// fit is how many rows of these heights stand in a room: all, or so many that at
// least few are on either side of the cut; none, if that cannot be.
func fit(heights []float64, room float64, few int) int {
	n, used := 0, 0.0
	for n < len(heights) && used+heights[n] <= room {
		used += heights[n]
		n++
	}
	if n == len(heights) {
		return n
	}
	n = min(n, len(heights)-few)
	if n < few {
		return 0
	}
	return n
}
