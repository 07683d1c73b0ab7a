package page

import (
	"bytes"
	"image"
	_ "image/gif" // sizes of pictures
	_ "image/jpeg"
	_ "image/png"
	"strings"

	"quoin/calc/exhibit"
)

// Heights in print, mm, of 10 pt text on a line of 1.45 times that, at most 40 em
// wide, and what stands around its kinds. As in page.css.
const (
	proseSize       = 10 * point
	lineHigh        = 1.45 * proseSize
	prose40         = 40.0
	paragraphAround = 3.0
	listAround      = 3.0
	listIndent      = 1.5 * proseSize
	tableAround     = 6.5
	codeAround      = 5.2
	codeLine        = 0.86 * 1.5 * proseSize
	codeWide        = 0.602 // a character of a listing, em
	headingHigh     = 13.5
	lineChars       = 86
	tallestImage    = 200.0 // as in page.css
)

// charWide is the room that a character of running text is given, em; some to spare.
const charWide = 0.462

// lines is how many lines a text takes, where a line holds so many characters of
// running text.
func lines(text string, chars int) float64 { return textFace.lines(text, charWide*float64(chars)) }

func paragraph(text string) float64 { return lineHigh*lines(text, lineChars) + paragraphAround }

// proseHigh estimates a node of prose on so wide a sheet.
func proseHigh(n exhibit.Prose, measure float64) float64 {
	switch n.Kind {
	case exhibit.CodeBlock:
		high := codeAround
		for row := range strings.SplitSeq(n.Text, "\n") {
			high += codeHigh(row, measure)
		}
		return high
	case exhibit.MathBlock:
		return 8 + 8*float64(1+strings.Count(n.Text, `\\`)+strings.Count(n.Text, `\cr`))
	case exhibit.Image:
		return imageHigh(n, measure)
	case exhibit.Rule:
		return 8
	case exhibit.BulletList, exhibit.OrderedList, exhibit.Quote, exhibit.DefinitionList:
		high := listAround
		for _, c := range n.Children {
			high += itemHigh(c, measure-listIndent)
		}
		return high
	case exhibit.ProseTable:
		high := tableAround
		for _, h := range proseGrid(n).heights(spread(proseGrid(n).columns(), measure)) {
			high += h
		}
		return high
	}
	high := lineHigh*textFace.lines(printed(n), min(prose40, measure/proseSize)) + paragraphAround
	for _, c := range n.Children {
		if c.Kind == exhibit.Image {
			high += imageHigh(c, measure)
		}
	}
	return high
}

// printed is a node as a text with the numbers of sheets that print adds to what
// leads elsewhere.
func printed(n exhibit.Prose) string {
	var b strings.Builder
	b.WriteString(plain([]exhibit.Prose{{Kind: n.Kind, Text: n.Text, Live: n.Live, Level: n.Level}}))
	if n.Kind == exhibit.Value || n.Kind == exhibit.Refer {
		b.WriteString(" (sheet 0)")
	}
	for _, c := range n.Children {
		b.WriteString(printed(c))
	}
	return b.String()
}

// codeHigh is how high a line of a listing is.
func codeHigh(row string, measure float64) float64 {
	word := strings.TrimLeft(row, " \t")
	indent := strings.Repeat("x", len(row)-len(word)+3*strings.Count(row[:len(row)-len(word)], "\t"))
	return codeLine * monoFace.lines(indent+word, (measure-5)/(0.86*proseSize))
}

// itemHigh estimates an item of a list, with what is nested in it.
func itemHigh(n exhibit.Prose, measure float64) float64 {
	switch n.Kind {
	case exhibit.ListItem, exhibit.Term, exhibit.Description:
	default:
		return proseHigh(n, measure)
	}
	if inline(n) {
		high := lineHigh*textFace.lines(printed(n), min(prose40-3, measure/proseSize)) + 1.2
		if n.Kind == exhibit.Description {
			high += 1
		}
		for _, c := range n.Children {
			if c.Kind == exhibit.Image {
				high += imageHigh(c, measure)
			}
		}
		return high
	}
	high := 0.0
	for _, c := range n.Children {
		if inline(exhibit.Prose{Children: []exhibit.Prose{c}}) { // words before a nested list
			high += lineHigh*textFace.lines(printed(c), min(prose40-3, measure/proseSize)) + 1.2
			continue
		}
		high += proseHigh(c, measure)
	}
	return high
}

// imageHigh is how high a picture is: of its own size, where that fits.
func imageHigh(n exhibit.Prose, measure float64) float64 {
	size, _, err := image.DecodeConfig(bytes.NewReader(n.Data))
	if err != nil || size.Width == 0 { // a drawing
		return 90
	}
	const pixel = 25.4 / 96
	wide := min(measure, pixel*float64(size.Width))
	return 3 + min(tallestImage, wide*float64(size.Height)/float64(size.Width))
}

// proseGrid is what the cells of a table of the prose hold.
func proseGrid(n exhibit.Prose) grid {
	var out grid
	for r, row := range n.Children {
		var slots []slot
		for _, c := range row.Children {
			s := slot{right: c.Align == "right", head: r == 0}
			for _, w := range c.Children {
				if w.Kind == exhibit.Math {
					s.symbol += 0.5 * float64(min(len(w.Text), 40))
					continue
				}
				s.text += plain([]exhibit.Prose{w})
			}
			slots = append(slots, s)
		}
		out = append(out, slots)
	}
	return out
}
