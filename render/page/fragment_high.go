package page

import (
	"slices"
	"strconv"
	"strings"
)

// How high a fragment is in print is estimated like all else on a sheet: from its
// texts, the sizes it states and the room that each element has.

// length is a length in mm, in a font of so many points; 0 for what is none.
func length(text string, font float64) float64 {
	for _, u := range []struct {
		unit string
		mm   float64
	}{{"mm", 1}, {"pt", point}, {"px", 25.4 / 96}, {"em", font * point}} {
		if n, ok := strings.CutSuffix(text, u.unit); ok {
			x, _ := strconv.ParseFloat(n, 64)
			return x * u.mm
		}
	}
	return 0
}

// sides are top, right, bottom and left.
var sides = [4]string{"top", "right", "bottom", "left"}

// box is the margin or padding of an element on its four sides, mm.
func (e *element) box(of string) (out [4]float64) {
	if words := strings.Fields(e.style[of]); len(words) > 0 {
		for i := range out { // the fourth is as the second, the third as the first, ...
			j := i
			for j >= len(words) {
				j = max(0, j-2)
			}
			out[i] = length(words[j], 10)
		}
	}
	for i, s := range sides {
		if set := e.style[of+"-"+s]; set != "" {
			out[i] = length(set, 10)
		}
	}
	return out
}

// inline tells what runs in lines.
func (e *element) inline() bool {
	return (e.tag == "" || slices.Contains(strings.Fields(phrasing), e.tag)) && e.style["display"] != "block" && e.style["display"] != "flex" && e.style["display"] != "grid"
}

// high estimates an element in a room so wide, mm, with a font of so many points.
func (e *element) high(wide, font float64) float64 {
	if set := e.style["font-size"]; set != "" {
		font = length(set, font) / point
	} else if e.tag == "h1" {
		font = 23
	}
	m, p := e.box("margin"), e.box("padding")
	for _, name := range []string{"width", "max-width"} {
		if set := e.style[name]; strings.HasSuffix(set, "mm") {
			wide = min(wide, length(set, font))
		} else if n, err := strconv.ParseFloat(strings.TrimSuffix(set, "%"), 64); err == nil {
			wide *= n / 100
		}
	}
	wide = max(10, wide-m[1]-m[3]-p[1]-p[3])
	sum := m[0] + m[2] + p[0] + p[2]
	for _, b := range []string{"border", "border-top", "border-bottom"} {
		if w, _, ok := strings.Cut(e.style[b], " "); ok {
			sum += length(w, font)
			if b == "border" {
				sum += length(w, font)
			}
		}
	}
	switch columns := strings.Fields(e.style["grid-template-columns"]); {
	case e.tag == "hr":
		return sum + 6
	case e.tag == "table":
		rows := 0.0
		for _, part := range e.blocks() {
			for _, row := range part.blocks() {
				rows += 2 + row.row(wide, font, nil, 0)
			}
		}
		return sum + rows
	case e.style["display"] == "grid" && len(columns) > 0:
		return sum + e.grid(wide, font, columns)
	case e.style["display"] == "flex" && e.style["flex-wrap"] == "":
		return sum + e.row(wide, font, nil, length(e.style["gap"], font))
	}
	return sum + e.flow(wide, font)
}

// flow is lines of running text, and blocks under each other.
func (e *element) flow(wide, font float64) float64 {
	leading := 1.5
	if x, err := strconv.ParseFloat(e.style["line-height"], 64); err == nil {
		leading = max(1.15, x)
	}
	var run strings.Builder
	sum, picture, largest := 0.0, 0.0, font
	turn := func() {
		if text := strings.TrimSpace(run.String()); text != "" || picture > 0 {
			sum += max(picture+1.5, leading*largest*point*lines(text, int(max(4, wide/(0.54*largest*point)))))
		}
		run.Reset()
		picture, largest = 0, font
	}
	var walk func(*element)
	walk = func(c *element) {
		switch {
		case c.tag == "br":
			turn()
		case c.tag == "img":
			picture = max(picture, length(c.style["height"], font))
		case !c.inline():
			turn()
			sum += c.high(wide, font)
		default:
			run.WriteString(c.text)
			if set := c.style["font-size"]; set != "" {
				largest = max(largest, length(set, font)/point)
			}
			for _, inner := range c.children {
				walk(inner)
			}
		}
	}
	for _, c := range e.children {
		walk(c)
	}
	turn()
	if e.tag == "ul" || e.tag == "ol" || e.tag == "dl" {
		sum += 0.6 * float64(len(e.children))
	}
	return sum
}

// blocks are the children that are elements.
func (e *element) blocks() (out []*element) {
	for _, c := range e.children {
		if c.tag != "" || strings.TrimSpace(c.text) != "" {
			out = append(out, c)
		}
	}
	return out
}

// row is as high as its highest cell; widths nil: all alike.
func (e *element) row(wide, font float64, widths []float64, gap float64) float64 {
	cells := e.blocks()
	high := 0.0
	for i, c := range cells {
		w := (wide - gap*float64(len(cells)-1)) / float64(len(cells))
		if widths != nil {
			w = widths[i]
		}
		holder := &element{children: []*element{c}}
		high = max(high, holder.flow(max(10, w), font))
	}
	return high
}

// grid is rows of cells.
func (e *element) grid(wide, font float64, columns []string) float64 {
	gap := max(length(strings.Fields(e.style["gap"] + " 0")[0], font), length(e.style["column-gap"], font))
	left, shares := wide-gap*float64(len(columns)-1), 0.0
	widths := make([]float64, len(columns))
	for i, c := range columns {
		if strings.HasSuffix(c, "mm") {
			widths[i] = length(c, font)
			left -= widths[i]
		} else if n, err := strconv.ParseFloat(strings.TrimSuffix(c, "fr"), 64); err == nil {
			widths[i] = -n
			shares += n
		} else { // auto
			widths[i] = -1
			shares++
		}
	}
	for i, w := range widths {
		if w < 0 {
			widths[i] = max(10, -w*left/shares)
		}
	}
	sum := 0.0
	rowGap := max(length(e.style["gap"], font), length(e.style["row-gap"], font))
	for cells := range slices.Chunk(e.blocks(), len(columns)) {
		if sum > 0 {
			sum += rowGap
		}
		sum += (&element{children: cells}).row(wide, font, widths, gap)
	}
	return sum
}
