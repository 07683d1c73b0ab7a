package page

import (
	"math"
	"strings"
	"unicode"

	"quoin/calc/exhibit"
)

// Heights in print, mm, of 10 pt text on a line of 5.1 mm with 88 characters.
const (
	headingHigh = 13.5
	lineHigh    = 5.1
	lineChars   = 86
)

// lines is how many lines a text takes, where a line holds so many characters of
// running text. Capitals and the characters of East Asia are wider.
func lines(text string, chars int) float64 {
	wide := 0.0
	for _, r := range text {
		switch {
		case r >= 0x2e80:
			wide += 2
		case unicode.IsUpper(r):
			wide += 1.4
		default:
			wide++
		}
	}
	return max(1, math.Ceil(wide/float64(chars)))
}

func paragraph(text string) float64 { return lineHigh*lines(text, lineChars) + 3 }

// proseHigh estimates a node of prose.
func proseHigh(n exhibit.Prose) float64 {
	switch n.Kind {
	case exhibit.CodeBlock:
		return 5 + 4.6*float64(strings.Count(n.Text, "\n")+1)
	case exhibit.MathBlock:
		return 16
	case exhibit.Image:
		return 90
	case exhibit.Rule:
		return 8
	case exhibit.BulletList, exhibit.OrderedList, exhibit.Quote, exhibit.DefinitionList:
		high := 3.0
		for _, c := range n.Children {
			high += itemHigh(c)
		}
		return high
	case exhibit.ProseTable:
		high := 8.0
		for _, row := range n.Children {
			tall := 1.0
			for _, cell := range row.Children {
				tall = max(tall, lines(plain(cell.Children), max(8, 100/max(1, len(row.Children)))))
			}
			high += 2 + 4.6*tall
		}
		return high
	}
	high := paragraph(plain([]exhibit.Prose{n}))
	for _, c := range n.Children {
		if c.Kind == exhibit.Image {
			high += proseHigh(c)
		}
	}
	return high
}

// itemHigh estimates an item of a list, with what is nested in it.
func itemHigh(n exhibit.Prose) float64 {
	inline := true
	high := 0.0
	for _, c := range n.Children {
		switch c.Kind {
		case exhibit.Paragraph, exhibit.BulletList, exhibit.OrderedList, exhibit.CodeBlock, exhibit.MathBlock, exhibit.ProseTable, exhibit.Quote, exhibit.DefinitionList:
			inline = false
			high += proseHigh(c)
		}
	}
	if inline {
		return lineHigh*lines(plain(n.Children)+n.Text, lineChars-6) + 1.2
	}
	return high
}
