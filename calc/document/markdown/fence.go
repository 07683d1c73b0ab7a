package markdown

import (
	"bytes"
	"strings"
	"unicode"
	"unicode/utf8"

	"github.com/yuin/goldmark/ast"

	"quoin/calc/exhibit"
)

// fence converts a fence: a calc block, or a listing.
func (c *converter) fence(n *ast.FencedCodeBlock) []Piece {
	start := offset(n)
	info, infoAt := "", start
	if n.Info != nil {
		infoAt = n.Info.Segment.Start
		info = string(bytes.TrimSpace(n.Info.Segment.Value(c.text)))
	}
	words := split(info)
	calc := len(words) > 0 && words[0].text == "calc"
	closing, closed := n.AttributeString(closedAt)
	if !closed {
		d := c.list.Errorf("open-fence", c.wholeLine(start), "this fence is not closed")
		d.WithHint("close it with a line of the same marks; inside a list or quote, keep its indentation or > marks")
	}
	if !calc {
		if meansBlock(words, c.kind) {
			c.list.Errorf("calc-word", c.span(infoAt+words[0].at, infoAt+words[0].end()), "%q does not make a block", short(words[0].text)).
				WithHint("a block begins with ```calc KIND; a listing needs another first word")
		}
		return prose(exhibit.Prose{Kind: exhibit.CodeBlock, Text: c.raw(n), Title: info, Place: c.at(n)})
	}
	place := c.span(infoAt, infoAt+len(info))
	if len(words) < 2 {
		c.list.Errorf("missing-kind", place, "a calc fence needs a kind").WithHint("write ```calc KIND NAME")
		return nil
	}
	f := Fence{Info: info, Kind: words[1].text, Place: place, KindRange: c.span(infoAt+words[1].at, infoAt+words[1].end())}
	if len(words) > 2 {
		f.Name, f.NameRange = words[2].text, c.span(infoAt+words[2].at, infoAt+words[2].end())
	}
	if len(words) > 3 {
		c.list.Errorf("block-words", c.span(infoAt+words[3].at, infoAt+len(info)), "a calc fence has a kind and a name, no more").
			WithHint("names are one word; say more in the caption")
	}
	if c.within != "" {
		c.list.Errorf("block-place", place, "a calc block cannot stand in %s", c.within).WithHint("move it into the text")
		return nil
	}
	if !closed {
		return nil // its body is whatever follows
	}
	f.EndLine = c.line(closing.(int))
	for i := range n.Lines().Len() {
		seg := n.Lines().At(i)
		line, column := c.place(seg.Start)
		text := strings.TrimSuffix(string(seg.Value(c.text)), "\n")
		if open := split(strings.TrimSpace(text)); strings.HasPrefix(strings.TrimSpace(text), "```") && len(open) > 1 && open[0].text == "```calc" {
			c.list.Errorf("open-fence", place, "this block is not closed: the next one begins in line %d", line).WithHint("end it with three back quotes on a line of their own")
			return nil
		}
		f.Body = append(f.Body, Line{Text: text, Line: line, Column: max(1, column-seg.Padding)})
	}
	c.file.Fences = append(c.file.Fences, f)
	return []Piece{{Fence: len(c.file.Fences) - 1}}
}

// indented refuses indented text that looks like a block: it would be a listing.
func (c *converter) indented(n *ast.CodeBlock) {
	for i := range n.Lines().Len() {
		line := n.Lines().At(i)
		text := string(line.Value(c.text))
		info := strings.TrimLeft(text, " \t`~")
		if marks := strings.TrimSpace(text[:len(text)-len(info)]); len(marks) >= 3 && meansBlock(split(info), c.kind) {
			c.list.Errorf("indented-fence", c.wholeLine(line.Start), "a fence that is indented by four blanks or a tab makes no block").
				WithHint("begin the line with the marks of the fence")
			return
		}
	}
}

// asCode refuses code over several lines that looks like a block: its marks are
// too few, or do not begin a line.
func (w inlineWriter) asCode(n *ast.CodeSpan) {
	first, ok := n.FirstChild().(*ast.Text)
	if !ok || first.NextSibling() == nil {
		return
	}
	words := split(string(first.Segment.Value(w.text)))
	if len(words) > 1 && w.kind(plainWord(words[1].text)) && meansBlock(words, w.kind) {
		w.list.Errorf("calc-word", w.span(first.Segment.Start+words[0].at, first.Segment.Start+words[1].end()), "this is code in a line of text, and no block").
			WithHint("a block begins with ``` at the start of a line")
	}
}

// word is one word of an info string, at a byte of it.
type word struct {
	text string
	at   int
}

func (w word) end() int { return w.at + len(w.text) }

// split cuts a text at white space.
func split(s string) []word {
	var out []word
	for i := 0; i < len(s); {
		r, n := utf8.DecodeRuneInString(s[i:])
		if unicode.IsSpace(r) {
			i += n
			continue
		}
		end := strings.IndexFunc(s[i:], unicode.IsSpace)
		if end < 0 {
			end = len(s) - i
		}
		out = append(out, word{s[i : i+end], i})
		i += end
	}
	return out
}
