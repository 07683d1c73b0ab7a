package page

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/exhibit"
)

// checkKey tells the rows of checks apart.
func checkKey(c exhibit.Check) string {
	return strings.Join([]string{c.Anchor, c.ID, c.Item, fmt.Sprint(c.Place)}, "\x00")
}

// claimRow gives the row of a check in its block its id, for the summary to lead
// to; a row that stands twice has one the first time.
func (b *book) claimRow(c exhibit.Check) string {
	key := checkKey(c)
	if b.rows[key] != "" {
		return ""
	}
	b.rows[key] = fmt.Sprintf("q-check-%d", len(b.rows)+1)
	return b.rows[key]
}

// summary is the check summary, worst first, and what the run warned of.
func (b *book) summary() []item {
	t := checkTally(b.p)
	out := []item{{name: "summary", data: t, high: headingHigh + 18 + 5*lines(t.Failed, 85), keep: t.Any, anchors: []string{"q-checks"}, fresh: len(b.p.Checks) > 12}}
	out = append(out, b.summaryTable()...)
	for i, w := range b.warnings() {
		it := item{name: "warning", data: w, high: 1 + 4.8*lines("sheet 00, "+w.Place+w.Text, 100)}
		if i == 0 {
			out = append(out, item{name: "warnings-head", high: 11, keep: true, anchors: []string{"q-warnings"}})
		}
		out = append(out, it)
	}
	return out
}

// summaryTable is a row a check, its worst item, and a row for every other item that
// is not met: none hides behind a worse one.
func (b *book) summaryTable() []item {
	var list []exhibit.Check
	of := map[string]int{} // by the row of the worst
	for start := 0; start < len(b.p.Checks); {
		end := start + 1
		for end < len(b.p.Checks) && sameCheck(b.p.Checks[start], b.p.Checks[end]) {
			end++
		}
		worst := exhibit.WorstFirst(b.p.Checks[start:end])
		of[checkKey(worst[0])] = end - start
		list = append(append(list, worst[0]), exhibit.Failed(worst[1:])...)
		start = end
	}
	list = exhibit.WorstFirst(list)
	rows := make([]checkRow, len(list))
	for i, c := range list {
		r := b.checkRow(c, true)
		if n := of[checkKey(c)]; n > 1 {
			r.full.Of = n
			r.fullHigh += 4.6 * (textFace.lines(r.full.Name+", "+r.full.Item+" worst of 00", checkName1) - textFace.lines(r.full.Name+", "+r.full.Item, checkName1))
		}
		r.short, r.shortHigh = r.full, r.fullHigh
		rows[i] = r
	}
	return checkTable(rows, "", "Checks, worst first", true)
}

// sameCheck tells two rows of one check.
func sameCheck(x, y exhibit.Check) bool {
	return x.Name == y.Name && x.Anchor == y.Anchor && x.Place == y.Place && x.Item != "" && y.Item != ""
}

// warning is what the run warned of, and the block it is about.
type warning struct {
	Text, Place, To string
}

// warnings is all warnings of the package, then those of blocks that it lacks.
func (b *book) warnings() []warning {
	var out []warning
	var blocks []*exhibit.Block
	for _, c := range b.p.Chapters {
		for _, piece := range c.Pieces {
			if piece.Block != nil {
				blocks = append(blocks, piece.Block)
			}
		}
	}
	said := func(k *exhibit.Block, text string) bool {
		return slices.ContainsFunc(out, func(w warning) bool { return w.To == k.Anchor && strings.HasSuffix(w.Text, text) })
	}
	for _, d := range b.p.Warnings {
		at := exhibit.Place{File: d.Range.File, Line: d.Range.Line}
		w := warning{Text: d.Summary, Place: b.place(at)}
		near := -1 // the line of the last block at or above it
		for _, k := range blocks {
			if k.Place.File == at.File && k.Place.Line <= at.Line && k.Place.Line > near {
				near, w.To = k.Place.Line, k.Anchor
			}
		}
		out = append(out, w)
	}
	for _, k := range blocks {
		for _, text := range k.Warnings {
			if !said(k, text) {
				name := or(k.Name, k.Kind)
				out = append(out, warning{name + ": " + text, b.place(k.Place), k.Anchor})
			}
		}
	}
	for i := range out {
		out[i].Text = clip(out[i].Text, 240)
	}
	return out
}
