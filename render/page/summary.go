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
	out := []item{{name: "summary", data: t, high: headingHigh + 8 + 5*lines(t.Failed, 85), keep: t.Any, anchors: []string{"q-checks"}, fresh: len(b.p.Checks) > 12}}
	out = append(out, b.checks(exhibit.WorstFirst(b.p.Checks), "", "Checks, worst first", true)...)
	for i, w := range b.warnings() {
		it := item{name: "warning", data: w, high: 1.5 + 4.8*lines(w.Text+w.Place, 92)}
		if i == 0 {
			out = append(out, item{name: "warnings-head", high: 11, keep: true, anchors: []string{"q-warnings"}})
		}
		out = append(out, it)
	}
	return out
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
