package markdown

import (
	"bytes"
	"strings"
	"unicode/utf8"

	"github.com/yuin/goldmark/ast"
	extast "github.com/yuin/goldmark/extension/ast"
	"github.com/yuin/goldmark/parser"
	"github.com/yuin/goldmark/text"
	"github.com/yuin/goldmark/util"
)

var (
	kindLive  = ast.NewNodeKind("Live")
	kindStray = ast.NewNodeKind("Stray")
	kindCite  = ast.NewNodeKind("Citation")
)

// liveNode is {{ ... }}, from start to stop; parts are the stretches of its inside.
type liveNode struct {
	ast.BaseInline
	start, stop int
	parts       []text.Segment
}

func (*liveNode) Kind() ast.NodeKind     { return kindLive }
func (n *liveNode) Dump(s []byte, l int) { ast.DumpHelper(n, s, l, nil, nil) }

// strayNode is text that is an error.
type strayNode struct {
	ast.BaseInline
	segment             text.Segment
	code, summary, hint string
}

func (*strayNode) Kind() ast.NodeKind     { return kindStray }
func (n *strayNode) Dump(s []byte, l int) { ast.DumpHelper(n, s, l, nil, nil) }

// citeNode is [key clause].
type citeNode struct {
	ast.BaseInline
	key, text string
}

func (*citeNode) Kind() ast.NodeKind     { return kindCite }
func (n *citeNode) Dump(s []byte, l int) { ast.DumpHelper(n, s, l, nil, nil) }

// What reach asks of its guide at each byte, besides a number of bytes to go on.
const (
	found = 0
	lost  = -1
)

// reach reads on from the reader's place, over line ends but within the
// paragraph, until step finds the end. It returns what it passed, with the
// reader at the end found; or false, with the reader anywhere.
func reach(block text.Reader, step func(line []byte) int) ([]text.Segment, bool) {
	var passed []text.Segment
	for {
		line, segment := block.PeekLine()
		if line == nil || segment.Padding != 0 {
			return nil, false
		}
		for i := 0; i < len(line); {
			switch n := step(line[i:]); n {
			case found:
				if i > 0 {
					passed = append(passed, text.NewSegment(segment.Start, segment.Start+i))
				}
				block.Advance(i)
				return passed, true
			case lost:
				return nil, false
			default:
				i += n
			}
		}
		passed = append(passed, text.NewSegment(segment.Start, segment.Start+len(line)))
		block.AdvanceLine()
	}
}

// liveValues reads {{ ... }}. The first }} ends it.
type liveValues struct{}

func (liveValues) Trigger() []byte { return []byte{'{', '}'} }

func (liveValues) Parse(parent ast.Node, block text.Reader, _ parser.Context) ast.Node {
	line, segment := block.PeekLine()
	if len(line) < 2 || line[1] != line[0] {
		return nil
	}
	brace := text.NewSegment(segment.Start, segment.Start+2)
	if line[0] == '}' {
		block.Advance(2)
		return &strayNode{segment: brace, code: "stray-braces", summary: "}} closes no live value",
			hint: "write {{ .NAME }} for a value, or \\}} for two braces as text"}
	}
	at, place := block.Position()
	block.Advance(2)
	parts, ok := reach(block, func(rest []byte) int {
		switch {
		case bytes.HasPrefix(rest, []byte("}}")):
			return found
		case bytes.HasPrefix(rest, []byte("{{")):
			return lost
		}
		return 1
	})
	if !ok {
		block.SetPosition(at, place)
		block.Advance(2)
		hint := "close it with }} in the same paragraph, or write \\{{ for two braces as text"
		if parent.Kind() == extast.KindTableCell {
			hint = "in a table cell | ends the cell: write {{ as \"kip\" .V }}, or \\| for |"
		}
		return &strayNode{segment: brace, code: "stray-braces", summary: "{{ without }}", hint: hint}
	}
	_, end := block.Position()
	if len(parts) == 0 {
		parts = []text.Segment{text.NewSegment(end.Start, end.Start)}
	}
	block.Advance(2)
	if parent.Kind() == extast.KindTableCell {
		parts = unescapePipes(parts, block.Source())
	}
	return &liveNode{start: segment.Start, stop: end.Start + 2, parts: parts}
}

// unescapePipes cuts the backslash out of each \| of a table cell.
func unescapePipes(parts []text.Segment, source []byte) []text.Segment {
	var out []text.Segment
	for _, p := range parts {
		for {
			i := bytes.Index(p.Value(source), []byte(`\|`))
			if i < 0 {
				break
			}
			if i > 0 {
				out = append(out, text.NewSegment(p.Start, p.Start+i))
			}
			p.Start += i + 1
		}
		out = append(out, p)
	}
	return out
}

// joined is the text of segments, one after another.
func joined(parts []text.Segment, source []byte) string {
	var b strings.Builder
	for _, p := range parts {
		b.Write(p.Value(source))
	}
	return b.String()
}

// longestCite is how long a citation may be, in bytes.
const longestCite = 300

// citations reads [key] and [key clause] where the key is known, and finds
// footnotes that do not exist.
type citations struct{}

func (citations) Trigger() []byte { return []byte{'['} }

func (citations) Parse(_ ast.Node, block text.Reader, pc parser.Context) ast.Node {
	_, open := block.PeekLine()
	block.Advance(1)
	left := longestCite
	parts, ok := reach(block, func(rest []byte) int {
		left--
		switch {
		case rest[0] == ']':
			return found
		case rest[0] == '[' || left <= 0:
			return lost
		}
		return 1
	})
	if !ok || len(parts) == 0 {
		return nil
	}
	block.Advance(1)
	inside := strings.Join(strings.Fields(unescape(joined(parts, block.Source()))), " ")
	next := block.Peek()
	if label, ok := strings.CutPrefix(inside, "^"); ok && label != "" && !strings.Contains(label, " ") {
		_, end := block.Position()
		return &strayNode{segment: text.NewSegment(open.Start, max(open.Start, end.Start)), code: "unknown-footnote",
			summary: "there is no footnote [^" + short(label) + "]", hint: "add a line [^" + short(label) + "]: with its text, or write \\[^ for a bracket as text"}
	}
	if next == '(' || next == '[' || strings.Contains(inside, "{{") || strings.ContainsFunc(inside, reorders) {
		return nil
	}
	key := citeKey(inside, notesOf(pc).cite)
	if m := referring.FindStringSubmatch(inside); m != nil && key == "" && len(parts) == 1 && parts[0].Len() == len(inside) {
		if _, defined := pc.Reference(util.ToLinkReference([]byte(inside))); !defined {
			_, end := block.Position()
			return &referNode{what: referWords[m[1]], name: m[2], start: open.Start, stop: end.Start}
		}
	}
	if key == "" {
		if _, defined := pc.Reference(util.ToLinkReference([]byte(inside))); !defined {
			_, end := block.Position()
			n := notesOf(pc)
			n.brackets = append(n.brackets, bracket{inside, text.NewSegment(open.Start, max(open.Start, end.Start))})
		}
		return nil
	}
	return &citeNode{key: key, text: inside}
}

// citeKey is the longest known key that a citation starts with, or "".
func citeKey(inside string, known func(string) bool) string {
	for end := len(inside); end > 0; end = strings.LastIndexAny(inside[:end], " ,") {
		if known(inside[:end]) {
			return inside[:end]
		}
	}
	return ""
}

// short cuts a text to what fits a message.
func short(s string) string {
	const most = 40
	if utf8.RuneCountInString(s) <= most {
		return s
	}
	return string([]rune(s)[:most]) + "..."
}
