package page

import (
	"bytes"
	"fmt"
	"slices"
	"strings"

	"quoin/calc/exhibit"
)

// item is one thing on a sheet that is not cut: a heading, a paragraph, an
// equation, a table, a figure.
type item struct {
	name    string // its template
	data    any
	high    float64  // estimated height in print, mm
	keep    bool     // stays with what follows
	fresh   bool     // starts a sheet
	half    bool     // starts a sheet unless half of one is free: a chapter
	anchors []string // what leads here
	again   *item    // repeated where its block goes on on another sheet
	// cut parts what can go on on another sheet: what stands in so much room, mm
	// (nothing, if little would), and the rest. Nil where it is not cut.
	cut func(room float64) (first, rest []item)
}

// Sheets is how many sheets a written page has.
func Sheets(html []byte) int { return bytes.Count(html, []byte(`<section class="sheet`)) }

// least is the room, mm, below which nothing is cut to begin in it.
const least = 45

// headChars is how long a line of the head is; it shows two lines of a title.
const headChars = 100

// total is how high items are.
func total(items []item) float64 {
	sum := 0.0
	for _, it := range items {
		sum += it.high
	}
	return sum
}

// room is the height of a sheet below its head in print, mm.
func (b *book) room() float64 {
	high := 297.0
	if strings.EqualFold(b.p.Meta.Paper, "letter") {
		high = 279.4
	}
	high -= 14 + 16 + 22 + 3 // margins, head, and a little to spare
	h := b.head()
	if own, ok := b.ownHeadHigh(); ok {
		high -= own - 22
	}
	high -= 4.4 * (lines(strings.Join(append([]string{h.Revision, h.Status}, h.Open...), " · "), 80) - 1)
	for _, line := range []string{h.Number + "  " + h.Title, h.Project + " · " + h.Location} {
		high -= 4.5 * (min(2, lines(line, headChars)) - 1)
	}
	if h.Demonstration != "" {
		high -= 6
	}
	return high
}

// pack cuts items into sheets: in order, as many as fit, with what is kept
// together on one sheet. What is higher than a sheet and not to be cut spills in
// print.
func pack(items []item, most float64) [][]item {
	items = slices.Clone(items)
	var out [][]item
	var sheet []item
	used := 0.0
	turn := func() {
		if len(sheet) > 0 {
			out, sheet, used = append(out, sheet), nil, 0
		}
	}
	for i := 0; i < len(items); {
		j := i // the run i..j stays together
		high := items[i].high
		for items[j].keep && j+1 < len(items) && !items[j+1].fresh {
			j++
			high += items[j].high
		}
		// A run that no sheet holds starts here if half a sheet is free.
		begins := items[j].cut != nil && most-used-high+items[j].high >= least
		if items[i].fresh || items[i].half && used > most/2 || used+high > most && !begins && !(high > most && used < most/2) {
			turn()
			if again := items[i].again; again != nil {
				sheet, used = append(sheet, *again), again.high
			}
		}
		if room := most - used - high + items[j].high; used+high > most && items[j].cut != nil {
			if first, rest := items[j].cut(room); len(first) > 0 && len(rest) > 0 {
				sheet = append(append(sheet, items[i:j]...), first...)
				turn()
				items = slices.Insert(items[j+1:], 0, rest...)
				i = 0
				continue
			}
		}
		sheet = append(sheet, items[i:j+1]...)
		used += high
		i = j + 1
	}
	turn()
	return out
}

// number notes the sheet of every anchor.
func (b *book) number(sheets [][]item) {
	for i, s := range sheets {
		for _, it := range s {
			for _, a := range it.anchors {
				if _, known := b.sheets[a]; a != "" && !known {
					b.sheets[a] = i + 1
				}
			}
		}
	}
}

// sheetCSS gives each sheet a named page, so that a sheet that spills carries its
// number on every printed page, and the paper.
func sheetCSS(p *exhibit.Package, open []string, of int) string {
	size := "A4"
	if strings.EqualFold(p.Meta.Paper, "letter") {
		size = "letter"
	}
	var b strings.Builder
	left := []string{clip(or(p.Meta.Number, "no number"), 40)}
	if r := current(p); r.Rev != "" {
		left = append(left, "Rev "+clip(r.Rev, 12))
	}
	if status := clip(or(p.Meta.Status, "no status"), 20); len(open) == 0 || !strings.EqualFold(open[0], status) {
		left = append(left, status)
	}
	left = append(left, open...)
	foot := clip(strings.Join(left, " · "), 190)
	fmt.Fprintf(&b, "@page{size:%s;margin:14mm 14mm 16mm 10mm;@bottom-left{content:%s;width:56%%;padding-left:24mm}@bottom-right{width:28%%}}\n", size, cssString(foot))
	for n := 1; n <= of; n++ {
		fmt.Fprintf(&b, "@page s%d{@bottom-right{content:%s counter(page)}}\n@media print{.s%d{page:s%d}}\n", n, cssString(fmt.Sprintf("Sheet %d of %d · printed page ", n, of)), n, n)
	}
	return b.String()
}

// cssString is a text as a CSS string: all but letters, digits and blanks escaped.
func cssString(text string) string {
	var b strings.Builder
	b.WriteByte('"')
	for _, r := range text {
		switch {
		case r == 0:
			b.WriteString(`\FFFD `)
		case r >= 'a' && r <= 'z', r >= 'A' && r <= 'Z', r >= '0' && r <= '9', r == ' ':
			b.WriteRune(r)
		default:
			fmt.Fprintf(&b, `\%X `, r)
		}
	}
	b.WriteByte('"')
	return b.String()
}
