package markdown

import (
	"bytes"
	"html"
	"strings"
	"unicode/utf8"

	"github.com/yuin/goldmark/ast"
	extast "github.com/yuin/goldmark/extension/ast"
	"github.com/yuin/goldmark/text"
	"github.com/yuin/goldmark/util"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
)

// deepestInline is how many marks (emphasis, links) may stand inside each other.
const deepestInline = 30

// inlines converts the text of a block.
func (c *converter) inlines(block ast.Node) []exhibit.Prose {
	if block.FirstChild() == nil {
		return nil
	}
	w := inlineWriter{converter: c, cell: block.Kind() == extast.KindTableCell}
	return w.children(block, 0, false)
}

type inlineWriter struct {
	*converter
	cell bool
}

func (w inlineWriter) children(parent ast.Node, depth int, inLink bool) []exhibit.Prose {
	var out []exhibit.Prose
	if depth > deepestInline {
		w.list.Errorf("too-deep", w.wholeLine(max(firstOffset(parent), 0)), "emphasis and links stand more than %d deep inside each other", deepestInline)
		return nil
	}
	add := func(p exhibit.Prose) {
		if last := len(out) - 1; p.Kind == exhibit.Text && last >= 0 && out[last].Kind == exhibit.Text {
			out[last].Text += p.Text
			return
		}
		out = append(out, p)
	}
	var b strings.Builder // text is gathered, so that many small pieces do not cost a copy each
	flush := func() {
		if b.Len() > 0 {
			add(exhibit.Prose{Kind: exhibit.Text, Text: b.String()})
			b.Reset()
		}
	}
	for n := parent.FirstChild(); n != nil; n = n.NextSibling() {
		if t, ok := n.(*ast.Text); ok {
			b.WriteString(w.plain(t.Segment.Value(w.text), t.Segment.Start))
			if t.SoftLineBreak() {
				b.WriteByte(' ')
			}
			if t.HardLineBreak() {
				flush()
				add(exhibit.Prose{Kind: exhibit.Break})
			}
			continue
		}
		if p, ok := w.inline(n, depth, inLink); ok {
			flush()
			add(p)
		}
	}
	flush()
	return out
}

// firstOffset is where an inline node starts, -1 if nothing tells.
func firstOffset(n ast.Node) int {
	for ; n != nil; n = n.FirstChild() {
		if at := n.Pos(); at >= 0 {
			return at
		}
	}
	return -1
}

func (w inlineWriter) inline(n ast.Node, depth int, inLink bool) (exhibit.Prose, bool) {
	switch n := n.(type) {
	case *ast.Emphasis:
		p := exhibit.Prose{Kind: exhibit.Emphasis, Children: w.children(n, depth+1, inLink)}
		if n.Level > 1 {
			p.Kind = exhibit.Strong
		}
		return p, true
	case *ast.CodeSpan:
		w.asCode(n)
		return exhibit.Prose{Kind: exhibit.Code, Text: w.code(n)}, true
	case *liveNode:
		return w.live(n)
	case *strayNode:
		w.list.Errorf(n.code, w.span(n.segment.Start, n.segment.Stop), "%s", n.summary).WithHint("%s", n.hint)
		return exhibit.Prose{}, false
	case *citeNode:
		if inLink { // no link inside a link
			return exhibit.Prose{Kind: exhibit.Text, Text: "[" + n.text + "]"}, true
		}
		return exhibit.Prose{Kind: exhibit.Cite, Target: n.key, Text: n.text}, true
	case *referNode:
		return w.refer(n, inLink)
	case *mathNode:
		tex := joined(n.parts, w.text)
		if w.cell {
			tex = strings.ReplaceAll(tex, `\|`, "|")
		}
		w.tex(n.parts)
		at := exhibit.Place{File: w.name, Line: w.line(n.parts[0].Start)}
		return exhibit.Prose{Kind: exhibit.Math, Place: at, Text: strings.TrimSpace(strings.ReplaceAll(tex, "\n", " "))}, true
	case *extast.FootnoteLink:
		return exhibit.Prose{Kind: exhibit.FootnoteRef, Level: n.Index}, true
	case *ast.AutoLink:
		return w.autoLink(n)
	case *ast.Link:
		return w.link(n, w.children(n, depth+1, true))
	case *ast.Image:
		return w.image(n, w.children(n, depth+1, true))
	case *ast.RawHTML:
		start, stop := n.Segments.At(0).Start, n.Segments.At(n.Segments.Len()-1).Stop
		if !strings.HasPrefix(string(w.text[start:stop]), "<!--") {
			w.rawHTML(start, stop, false)
		}
	}
	return exhibit.Prose{}, false
}

// live notes a live value.
func (w inlineWriter) live(n *liveNode) (exhibit.Prose, bool) {
	inside := joined(n.parts, w.text)
	l := Live{Text: inside, Range: w.span(n.start, n.stop), Parts: w.lines(n.parts)}
	if strings.TrimSpace(inside) == "" {
		w.list.Errorf("empty-value", l.Range, "{{ }} names no value").
			WithHint("write {{ .NAME }}, or \\{{ for two braces as text")
		return exhibit.Prose{}, false
	}
	w.file.Lives = append(w.file.Lives, l)
	return exhibit.Prose{Kind: exhibit.Value, Level: len(w.file.Lives) - 1}, true
}

// lines is the places of stretches of source.
func (w inlineWriter) lines(parts []text.Segment) []Line {
	out := make([]Line, len(parts))
	for i, p := range parts {
		out[i].Text = string(p.Value(w.text))
		out[i].Line, out[i].Column = w.place(p.Start)
	}
	return out
}

// code is the text of a code span.
func (c *converter) code(n ast.Node) string {
	var b strings.Builder
	for t := n.FirstChild(); t != nil; t = t.NextSibling() {
		if t, ok := t.(*ast.Text); ok {
			b.Write(t.Segment.Value(c.text))
		}
	}
	return strings.ReplaceAll(b.String(), "\n", " ")
}

// plain resolves backslashes and character references of a text at an offset.
func (c *converter) plain(s []byte, at int) string {
	return c.resolve(s, func() diag.Range { return c.span(at, at+len(s)) })
}

// resolve is unescape for what will be shown or followed: a character that
// reorders or hides text must not come in by reference either.
func (c *converter) resolve(s []byte, at func() diag.Range) string {
	text := unescape(string(s))
	deceives := func(r rune) bool { return reorders(r) || hides(r) }
	i := strings.IndexFunc(text, deceives)
	if i >= 0 && len(text) < len(s) && bytes.IndexFunc(s, deceives) < 0 { // else it was reported where it stands
		r, _ := utf8.DecodeRuneInString(text[i:])
		hidden(c.list, at(), r, "this text")
	}
	return text
}

// unescape resolves backslash escapes and character references in one pass, as
// CommonMark has it.
func unescape(s string) string {
	if !strings.ContainsAny(s, `\&`) {
		return s
	}
	var b strings.Builder
	for i := 0; i < len(s); {
		switch {
		case s[i] == '\\' && i+1 < len(s) && util.IsPunct(s[i+1]):
			b.WriteByte(s[i+1])
			i += 2
			continue
		case s[i] == '&':
			if n := reference(s[i:]); n > 0 {
				r := html.UnescapeString(s[i : i+n])
				if r != s[i:i+n] {
					r = strings.ReplaceAll(r, "\x00", "\uFFFD")
				}
				b.WriteString(r)
				i += n
				continue
			}
		}
		_, n := utf8.DecodeRuneInString(s[i:])
		b.WriteString(s[i : i+n])
		i += n
	}
	return b.String()
}

// reference is the length of a character reference at the start of s, or 0.
func reference(s string) int {
	end := strings.IndexByte(s[:min(len(s), 40)], ';')
	if end < 2 {
		return 0
	}
	for i, r := range s[1:end] {
		letter := r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9'
		if !letter && !(r == '#' && i == 0) {
			return 0
		}
	}
	return end + 1
}
