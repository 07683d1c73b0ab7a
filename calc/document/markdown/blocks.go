package markdown

import (
	"strings"

	"github.com/yuin/goldmark/ast"
	extast "github.com/yuin/goldmark/extension/ast"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
)

// converter reads goldmark's tree into the file.
type converter struct {
	*source
	file    *File
	list    *diag.List
	anchors anchors
	kind    func(string) bool // tells whether a word is the kind of a block
	// within is where calc fences are refused ("a footnote"), or "".
	within string
}

// document converts a whole tree: sections first, then the footnotes.
func (c *converter) document(body []byte, cite func(string) bool) {
	root, n := parse(body, cite)
	if n.deep >= 0 {
		c.list.Errorf("too-deep", c.wholeLine(n.deep), "quotes and lists stand more than %d deep inside each other", deepest).
			WithHint("lift the innermost ones out")
	}
	for _, at := range n.lone {
		c.list.Errorf("unused-footnote", c.wholeLine(at), "nothing refers to this footnote").
			WithHint("refer to it in the text, or delete it")
	}
	for _, b := range n.brackets {
		c.file.Brackets = append(c.file.Brackets, Bracket{b.text, c.span(b.at.Start, b.at.Stop)})
	}
	top := 7
	for b := root.FirstChild(); b != nil; b = b.NextSibling() {
		if h, ok := b.(*ast.Heading); ok {
			top = min(top, h.Level)
		}
	}
	for b := root.FirstChild(); b != nil; b = b.NextSibling() {
		if h, ok := b.(*ast.Heading); ok && h.Level == top {
			title := c.heading(h)
			c.file.Sections = append(c.file.Sections, Section{Title: title.Children, Anchor: title.Anchor, Level: title.Level, Place: title.Place})
			continue
		}
		if list, ok := b.(*extast.FootnoteList); ok {
			c.footnotes(list)
			continue
		}
		if pieces := c.block(b); len(pieces) > 0 {
			if len(c.file.Sections) == 0 {
				c.file.Sections = []Section{{Place: c.at(b)}}
			}
			s := &c.file.Sections[len(c.file.Sections)-1]
			s.Pieces = join(s.Pieces, pieces)
		}
	}
}

// join appends pieces, prose to prose.
func join(to, more []Piece) []Piece {
	for _, p := range more {
		if last := len(to) - 1; p.Fence < 0 && last >= 0 && to[last].Fence < 0 {
			to[last].Prose = append(to[last].Prose, p.Prose...)
		} else {
			to = append(to, p)
		}
	}
	return to
}

func prose(p ...exhibit.Prose) []Piece {
	if len(p) == 0 {
		return nil
	}
	return []Piece{{Prose: p, Fence: -1}}
}

// offset is where a block starts in the source.
func offset(n ast.Node) int {
	if at := n.Pos(); at >= 0 {
		return at
	}
	for c := n; c != nil; c = c.FirstChild() {
		if c.Type() == ast.TypeInline {
			return c.Pos()
		}
		if lines := c.Lines(); lines != nil && lines.Len() > 0 {
			return lines.At(0).Start
		}
	}
	return -1
}

func (c *converter) at(n ast.Node) exhibit.Place {
	return exhibit.Place{File: c.name, Line: c.line(max(offset(n), 0))}
}

// block converts a block and what is in it.
func (c *converter) block(n ast.Node) []Piece {
	p := exhibit.Prose{Place: c.at(n)}
	switch n := n.(type) {
	case *ast.Heading:
		return prose(c.heading(n))
	case *ast.Paragraph:
		p.Kind, p.Children = exhibit.Paragraph, c.inlines(n)
		if len(p.Children) == 0 { // a comment only
			return nil
		}
		return prose(p)
	case *ast.TextBlock:
		return prose(c.inlines(n)...)
	case *ast.ThematicBreak:
		p.Kind = exhibit.Rule
		return prose(p)
	case *ast.CodeBlock:
		p.Kind, p.Text = exhibit.CodeBlock, c.raw(n)
		c.indented(n)
		return prose(p)
	case *ast.FencedCodeBlock:
		return c.fence(n)
	case *mathBlockNode:
		p.Kind, p.Text = exhibit.MathBlock, strings.TrimSpace(c.raw(n))
		if !n.closed {
			c.list.Errorf("open-math", c.wholeLine(offset(n)), "$$ without a closing $$").
				WithHint("end the formula with a line $$, or write \\$ for a dollar sign")
		} else if p.Text == "" {
			c.list.Errorf("empty-math", c.wholeLine(offset(n)), "a formula without text")
		} else {
			c.tex(n.Lines().Sliced(0, n.Lines().Len()))
		}
		return prose(p)
	case *ast.HTMLBlock:
		c.htmlBlock(n)
		return nil
	case *ast.Blockquote:
		p.Kind = exhibit.Quote
		return c.container(n, p)
	case *ast.List:
		return c.listBlock(n, p)
	case *extast.DefinitionList:
		return c.definitions(n, p)
	case *extast.Table:
		p.Kind, p.Children = exhibit.ProseTable, c.rows(n)
		return prose(p)
	}
	return nil // definitions of links
}

// heading converts a heading and gives it its anchor.
func (c *converter) heading(h *ast.Heading) exhibit.Prose {
	p := exhibit.Prose{Kind: exhibit.Heading, Level: h.Level, Place: c.at(h), Children: c.inlines(h)}
	p.Anchor = c.anchors.unique(c.plainText(p.Children))
	return p
}

// children converts what is in a container: fences apart from prose.
func (c *converter) children(n ast.Node) []Piece {
	var out []Piece
	bare := false // the last child was text without a paragraph
	for b := n.FirstChild(); b != nil; b = b.NextSibling() {
		pieces := c.block(b)
		_, text := b.(*ast.TextBlock)
		if text && bare && len(pieces) > 0 { // a comment stood between them
			pieces = prose(exhibit.Prose{Kind: exhibit.Paragraph, Place: c.at(b), Children: pieces[0].Prose})
		}
		bare = text && len(pieces) > 0 || bare && len(pieces) == 0
		out = join(out, pieces)
	}
	return out
}

// container wraps each stretch of prose of a container.
func (c *converter) container(n ast.Node, wrap exhibit.Prose) []Piece {
	out := c.children(n)
	for i, p := range out {
		if p.Fence < 0 {
			w := wrap
			w.Children = p.Prose
			out[i].Prose = []exhibit.Prose{w}
		}
	}
	return out
}

// listBlock converts a list. A fence in an item ends the list; the rest of that
// item stands bare, and the next item starts a list that counts on.
func (c *converter) listBlock(n *ast.List, list exhibit.Prose) []Piece {
	list.Kind = exhibit.BulletList
	if n.IsOrdered() {
		list.Kind, list.Level = exhibit.OrderedList, n.Start
	}
	var out []Piece
	open := false // the last piece is a list that goes on
	number := n.Start
	for item := n.FirstChild(); item != nil; item = item.NextSibling() {
		pieces := c.children(item)
		var head []exhibit.Prose
		if len(pieces) > 0 && pieces[0].Fence < 0 {
			head, pieces = pieces[0].Prose, pieces[1:]
		}
		if len(head) > 0 || len(pieces) == 0 {
			p := exhibit.Prose{Kind: exhibit.ListItem, Children: head, Place: c.at(item)}
			if open {
				l := &out[len(out)-1].Prose
				last := &(*l)[len(*l)-1]
				last.Children = append(last.Children, p)
			} else {
				l := list
				l.Place, l.Children = p.Place, []exhibit.Prose{p}
				if n.IsOrdered() {
					l.Level = number
				}
				out = join(out, prose(l))
				open = true
			}
		}
		if len(pieces) > 0 {
			out = append(out, pieces...)
			open = false
		}
		number++
	}
	return out
}

// definitions converts a definition list; a fence in a description splits it.
func (c *converter) definitions(n ast.Node, list exhibit.Prose) []Piece {
	list.Kind = exhibit.DefinitionList
	var out []Piece
	flush := func() {
		if len(list.Children) > 0 {
			out = join(out, prose(list))
			list.Children = nil
		}
	}
	for b := n.FirstChild(); b != nil; b = b.NextSibling() {
		if term, ok := b.(*extast.DefinitionTerm); ok {
			list.Children = append(list.Children, exhibit.Prose{Kind: exhibit.Term, Place: c.at(term), Children: c.inlines(term)})
			continue
		}
		for _, p := range c.container(b, exhibit.Prose{Kind: exhibit.Description, Place: c.at(b)}) {
			if p.Fence < 0 {
				list.Children = append(list.Children, p.Prose...)
				continue
			}
			flush()
			out = append(out, p)
		}
	}
	flush()
	return out
}

// rows converts a table: the head, then the rows.
func (c *converter) rows(table ast.Node) []exhibit.Prose {
	var out []exhibit.Prose
	for r := table.FirstChild(); r != nil; r = r.NextSibling() {
		row := exhibit.Prose{Kind: exhibit.TableRow, Place: c.at(r)}
		for cell := r.FirstChild(); cell != nil; cell = cell.NextSibling() {
			p := exhibit.Prose{Kind: exhibit.TableCell, Children: c.inlines(cell), Place: row.Place}
			if a := cell.(*extast.TableCell).Alignment; a != extast.AlignNone {
				p.Align = a.String()
			}
			row.Children = append(row.Children, p)
		}
		out = append(out, row)
		if r.Kind() == extast.KindTableRow {
			c.surplus(r)
		}
	}
	return out
}

// surplus reports cells beyond the columns of a table: they would vanish. A cell
// torn by the | of a live value was reported as such.
func (c *converter) surplus(row ast.Node) {
	start := max(offset(row), 0)
	line := c.lineText(c.line(start))
	text := strings.TrimSpace(string(line[start-c.starts[c.line(start)-1]:]))
	text = strings.TrimPrefix(text, "|")
	if !strings.HasSuffix(text, `\|`) {
		text = strings.TrimSuffix(text, "|")
	}
	cells := 1 + strings.Count(text, "|") - strings.Count(text, `\|`)
	if cells <= row.ChildCount() {
		return
	}
	for cell := row.FirstChild(); cell != nil; cell = cell.NextSibling() {
		for n := cell.FirstChild(); n != nil; n = n.NextSibling() {
			if n.Kind() == kindStray {
				return
			}
		}
	}
	c.list.Errorf("table-cells", c.wholeLine(start), "this row has %d cells, and the table %d columns", cells, row.ChildCount()).
		WithHint("write \\| for a bar inside a cell")
}

// footnotes converts the footnotes, in the order they are referred to.
func (c *converter) footnotes(list ast.Node) {
	c.within = "a footnote"
	for n := list.FirstChild(); n != nil; n = n.NextSibling() {
		f := exhibit.Footnote{Index: n.(*extast.Footnote).Index}
		for _, p := range c.children(n) {
			f.Body = append(f.Body, p.Prose...)
		}
		c.file.Footnotes = append(c.file.Footnotes, f)
	}
	c.within = ""
}

// raw is the text of a block that is not markdown inside.
func (c *converter) raw(n ast.Node) string {
	var b strings.Builder
	for i := range n.Lines().Len() {
		line := n.Lines().At(i)
		b.Write(line.Value(c.text))
	}
	return b.String()
}

// htmlBlock lets comments pass and refuses all else.
func (c *converter) htmlBlock(n *ast.HTMLBlock) {
	text := c.raw(n)
	start, stop := offset(n), offset(n)
	if k := n.Lines().Len(); k > 0 {
		start, stop = n.Lines().At(0).Start, n.Lines().At(k-1).Stop
	}
	if n.HasClosure() {
		closure := n.ClosureLine
		text += string(closure.Value(c.text))
		stop = closure.Stop
	}
	for rest := strings.TrimSpace(text); rest != ""; rest = strings.TrimSpace(rest) {
		if !strings.HasPrefix(rest, "<!--") {
			c.rawHTML(start, stop, rest != strings.TrimSpace(text))
			return
		}
		end := strings.Index(rest[2:], "-->")
		if end < 0 {
			c.list.Errorf("open-comment", c.wholeLine(start), "this comment has no closing -->").
				WithHint("close it with -->; all that follows would vanish")
			return
		}
		rest = rest[2+end+3:]
	}
}

// rawHTML reports markup that is refused.
func (c *converter) rawHTML(start, stop int, afterComment bool) {
	if afterComment {
		c.list.Errorf("raw-html", c.span(start, stop), "text after a comment that starts a line is taken for raw HTML").
			WithHint("put the text on a line of its own")
		return
	}
	c.list.Errorf("raw-html", c.span(start, stop), "raw HTML is not part of a package").
		WithHint("write it in markdown, or as code between back-quotes; < as text is \\<")
}
