package page

import (
	"fmt"
	"path"
	"strconv"
	"strings"

	"quoin/calc/exhibit"
)

type headingView struct {
	Number, ID string
	Depth      int
	Title      []exhibit.Prose
}

// chapters is the body, and its lines in the table of contents.
func (b *book) chapters() (out []item, toc []entry) {
	b.claimExhibits()
	chapter := 0
	for i, c := range b.p.Chapters {
		id := b.claim(c.Anchor)
		if id == "" {
			id = fmt.Sprintf("q-chapter-%d", i+1)
		}
		first := len(out)
		number := ""
		if len(c.Title) > 0 {
			chapter++
			number = strconv.Itoa(chapter)
			out = append(out, item{name: "chapter", data: headingView{Number: number, ID: id, Title: c.Title}, high: headingHigh, keep: true, anchors: []string{id}})
			toc = append(toc, entry{Number: number, Title: plain(c.Title), ID: id, Depth: 1})
		}
		o := outline{number: number}
		for _, piece := range c.Pieces {
			if piece.Block != nil {
				more, line := b.block(piece.Block)
				out = append(out, more...)
				if line.Title != "" {
					toc = append(toc, line)
				}
				continue
			}
			for _, n := range piece.Prose {
				if n.Kind != exhibit.Heading {
					out = append(out, b.nodes(n)...)
					continue
				}
				h := headingView{ID: b.claim(n.Anchor), Title: n.Children}
				h.Depth, h.Number = o.step(n.Level)
				out = append(out, item{name: "heading", data: h, high: 11, keep: true, anchors: []string{h.ID}})
				if h.Depth == 1 && h.ID != "" {
					toc = append(toc, entry{Number: h.Number, Title: plain(n.Children), ID: h.ID, Depth: 2})
				}
			}
		}
		if first < len(out) {
			out[first].fresh, out[first].half = first == 0, true
			if len(c.Title) == 0 && id == c.Anchor {
				out[first].anchors = append(out[first].anchors, id)
			}
		}
	}
	return out, toc
}

// inner is the anchors inside a node of prose.
func (b *book) inner(n exhibit.Prose) []string {
	var out []string
	if n.Kind == exhibit.FootnoteRef {
		out = append(out, footnoteBack(n.Level))
	}
	if n.Kind == exhibit.Cite && strings.HasPrefix(b.refs[n.Target], "q-assumption-") {
		a := fmt.Sprintf("%s-by-%d", b.refs[n.Target], len(b.cited[n.Target])+1)
		b.cited[n.Target] = append(b.cited[n.Target], a)
		out = append(out, a)
	}
	for _, c := range n.Children {
		out = append(out, b.inner(c)...)
	}
	return out
}

// outline numbers headings below a chapter; a level left out counts as the next.
type outline struct {
	number string
	levels []int
	counts []int
}

func (o *outline) step(level int) (depth int, number string) {
	for len(o.levels) > 0 && o.levels[len(o.levels)-1] > level {
		o.levels = o.levels[:len(o.levels)-1]
	}
	if len(o.levels) == 0 || o.levels[len(o.levels)-1] < level {
		o.levels = append(o.levels, level)
	}
	depth = len(o.levels)
	for len(o.counts) < depth {
		o.counts = append(o.counts, 0)
	}
	o.counts = o.counts[:depth]
	o.counts[depth-1]++
	parts := make([]string, 0, depth+1)
	if o.number != "" {
		parts = append(parts, o.number)
	}
	for _, c := range o.counts {
		parts = append(parts, strconv.Itoa(c))
	}
	return depth, strings.Join(parts, ".")
}

type blockView struct {
	ID, Place, Kind, Name, Caption string
	Cites                          any
	Rests                          []string
}

// place is a line of the source as said in the margin.
func (b *book) place(p exhibit.Place) string {
	switch {
	case p.Line == 0:
		return ""
	case p.File == "" || p.File == b.p.Provenance.Source:
		return fmt.Sprintf("line %d", p.Line)
	}
	return fmt.Sprintf("%s %d", path.Base(p.File), p.Line)
}

func (b *book) block(k *exhibit.Block) ([]item, entry) {
	b.within, b.lead = k.Name, leadOf(k)
	v := blockView{ID: b.claim(k.Anchor), Place: b.place(k.Place), Kind: k.Kind, Name: k.Name, Caption: k.Caption, Cites: k.Cites, Rests: k.Rests}
	head := item{name: "block", data: v, high: 12 + 5*(lines(k.Kind+k.Name+k.Caption+restText(k.Rests), 80)-1), keep: true, anchors: []string{v.ID}}
	again := &item{name: "continued", data: v, high: 10}
	out := []item{head}
	for _, part := range k.Parts {
		label := part.Name
		for _, it := range part.Items {
			out = append(out, b.exhibit(it, label)...)
			label = "" // said once
		}
	}
	if k.Note != "" {
		out = append(out, item{name: "note", data: k.Note, high: paragraph(k.Note)})
	}
	if len(k.Warnings) > 0 {
		high := 3.0
		for _, w := range k.Warnings {
			high += 0.8 + cellLine*lines(w, 98)
		}
		out = append(out, item{name: "warnings", data: k.Warnings, high: high})
	}
	for i := 1; i < len(out); i++ {
		out[i].again = again
	}
	if len(out) == 1 {
		out[0].keep = false
	}
	line := entry{}
	if k.Name != "" && v.ID != "" {
		line = entry{Title: k.Name, Kind: k.Kind, ID: v.ID, Depth: 3}
		if k.Caption != "" {
			line.Kind += ": " + k.Caption
		}
	}
	return out, line
}
