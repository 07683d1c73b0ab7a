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
	wide    bool     // stands on a sheet across, with the others of its kind
	anchors []string // what leads here
	again   *item    // repeated where its block goes on on another sheet
	// cut parts what can go on on another sheet: what stands in so much room, mm
	// (nothing, if little would), and the rest. Nil where it is not cut.
	cut func(room float64) (first, rest []item)
}

// leaf is a sheet: what stands on it, and whether it lies across.
type leaf struct {
	items []item
	wide  bool
}

// rooms is how high a sheet is below its head, mm: upright, and across.
type rooms struct{ upright, across float64 }

func (r rooms) of(wide bool) float64 {
	if wide {
		return r.across
	}
	return r.upright
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

// paperSize is the paper, mm.
func (b *book) paperSize() (width, height float64) {
	if strings.EqualFold(b.p.Meta.Paper, "letter") {
		return 215.9, 279.4
	}
	return 210, 297
}

// What the margins of the paper take, mm: above and below, at the right, and at the
// left with the margin of the text, which binds. As in sheetCSS and page.css.
const (
	marginsHigh = 14 + 16
	marginsWide = 10 + 14
	bindingWide = 24
)

// measure is how wide the text of a sheet is, mm.
func (b *book) measure(wide bool) float64 {
	width, height := b.paperSize()
	if wide {
		width = height
	}
	return width - marginsWide - bindingWide
}

// room is the height of an upright sheet below its head in print, mm.
func (b *book) room() float64 { return b.rooms().upright }

// spare is left free at the foot of a sheet, mm: heights are estimates.
const spare = 3

// rooms are measured once: every equation asks.
func (b *book) rooms() rooms {
	if b.most != nil {
		return *b.most
	}
	width, height := b.paperSize()
	b.most = &rooms{height - marginsHigh - spare - b.headHigh(false), width - marginsHigh - spare - b.headHigh(true)}
	return *b.most
}

// headHigh is how high the head of a sheet is, mm.
func (b *book) headHigh(wide bool) float64 {
	const size, line = 8.6 * point, 8.6 * point * 1.5
	h := b.head()
	beside := func(text string) float64 { // what is left of a row for the text at its left, em
		return (b.measure(wide)+bindingWide-2-7)/size - labelFace.width(text)
	}
	state := strings.Join(append([]string{h.Revision, h.Status}, h.Open...), " · ")
	high := 0.0
	if h.Demonstration != "" {
		high += 5
	}
	if own, ok := b.ownHeadHigh(); ok { // with one line of state
		return high + own + line*(labelFace.lines(state, beside("Sheet 00 of 00"))-1)
	}
	high += 9
	by := beside(h.Prepared + " · " + h.Checked)
	for _, row := range []string{h.Number + "  " + h.Title, h.Project + " · " + h.Location} {
		high += line * min(2, labelFace.lines(row, by))
	}
	return high + line*labelFace.lines(state, by)
}

// pack cuts items into sheets: in order, as many as fit, with what is kept
// together on one sheet. What is higher than a sheet and not to be cut spills in
// print.
func pack(items []item, most rooms) []leaf {
	items = slices.Clone(items)
	for i := len(items) - 2; i >= 0; i-- { // a heading goes with what it heads
		items[i].wide = items[i].wide || items[i].keep && items[i+1].wide && !items[i+1].fresh
	}
	var out []leaf
	var sheet leaf
	used, fresh := 0.0, true // fresh: nothing stands here but what is repeated
	turn := func(next item) {
		if len(sheet.items) > 0 && !fresh {
			out = append(out, sheet)
		}
		sheet, used, fresh = leaf{wide: next.wide}, 0, true
		if next.again != nil && len(out) > 0 {
			sheet.items, used = []item{*next.again}, next.again.high
		}
	}
	place := func(list ...item) {
		sheet.items, used, fresh = append(sheet.items, list...), used+total(list), false
	}
	for len(items) > 0 {
		n := 1 // the run of the first n stays together
		for items[n-1].keep && n < len(items) && !items[n].fresh && items[n].wide == items[n-1].wide {
			n++
		}
		run, last := items[:n], items[n-1]
		high, room := total(run), most.of(items[0].wide)
		if fresh && sheet.wide != items[0].wide || !fresh && (items[0].fresh || sheet.wide != items[0].wide || items[0].half && used > halfFull*room) {
			turn(items[0])
		}
		left := room - used - total(run[:n-1])
		if used+high > room && last.cut != nil && left >= least {
			if first, rest := last.cut(left); len(first) > 0 && len(rest) > 0 {
				place(run[:n-1]...)
				place(first...)
				items = slices.Insert(slices.Clone(items[n:]), 0, rest...)
				turn(items[0])
				continue
			}
		}
		if used+high > room && !fresh && !(high > room && last.cut == nil && used < room/2) {
			turn(items[0])
			continue
		}
		place(run...)
		items = items[n:]
	}
	if !fresh {
		out = append(out, sheet)
	}
	return out
}

// halfFull is how full a sheet may be, of its room, for a chapter to begin on it.
const halfFull = 0.6

// number notes the sheet of every anchor.
func (b *book) number(sheets []leaf) {
	for i, s := range sheets {
		for _, it := range s.items {
			for _, a := range it.anchors {
				if _, known := b.sheets[a]; a != "" && !known {
					b.sheets[a] = i + 1
				}
			}
		}
	}
}

// sheetCSS gives each sheet a named page, so that a sheet that spills carries its
// number on every printed page, and the paper, upright or across.
func sheetCSS(p *exhibit.Package, open []string, sheets []leaf) string {
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
	for i, s := range sheets {
		n, across := i+1, ""
		if s.wide {
			across = "size:" + size + " landscape;"
		}
		fmt.Fprintf(&b, "@page s%d{%s@bottom-right{content:%s counter(page)}}\n@media print{.s%d{page:s%d}}\n", n, across, cssString(fmt.Sprintf("Sheet %d of %d · printed page ", n, len(sheets))), n, n)
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
