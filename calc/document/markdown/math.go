package markdown

import (
	"bytes"
	"unicode"
	"unicode/utf8"

	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/parser"
	"github.com/yuin/goldmark/text"
)

var (
	kindMath      = ast.NewNodeKind("Math")
	kindMathBlock = ast.NewNodeKind("MathBlock")
)

// mathNode is $...$, or $$...$$ inside a paragraph.
type mathNode struct {
	ast.BaseInline
	parts []text.Segment
}

func (*mathNode) Kind() ast.NodeKind     { return kindMath }
func (n *mathNode) Dump(s []byte, l int) { ast.DumpHelper(n, s, l, nil, nil) }

// mathSpans reads TeX in a line of text. An opening $ is not followed by a
// blank; a closing $ is not preceded by one, nor followed by a digit ("$5 and
// $6" is no math). The next $ that is not escaped decides.
type mathSpans struct{}

func (mathSpans) Trigger() []byte { return []byte{'$'} }

func (mathSpans) Parse(_ ast.Node, block text.Reader, _ parser.Context) ast.Node {
	line, _ := block.PeekLine()
	mark := []byte("$")
	if bytes.HasPrefix(line, []byte("$$")) {
		mark = []byte("$$")
	}
	block.Advance(len(mark))
	if len(line) == len(mark) || len(mark) == 1 && blank(line[1:]) {
		return nil
	}
	parts, ok := reach(block, func(rest []byte) int {
		switch {
		case bytes.HasPrefix(rest, mark):
			return found
		case rest[0] == '\\' && len(rest) > 1:
			return 2
		}
		return 1
	})
	if !ok || len(parts) == 0 {
		return nil
	}
	block.Advance(len(mark))
	if len(mark) == 1 {
		last := parts[len(parts)-1]
		r, _ := utf8.DecodeLastRune(last.Value(block.Source()))
		after, _ := block.PeekLine()
		if unicode.IsSpace(r) || len(after) > 0 && after[0] >= '0' && after[0] <= '9' {
			return nil
		}
	}
	return &mathNode{parts: parts}
}

// blank tells whether a text starts with white space.
func blank(s []byte) bool {
	r, _ := utf8.DecodeRune(s)
	return unicode.IsSpace(r)
}

// mathBlockNode is $$ ... $$ standing by itself; Lines are the TeX.
type mathBlockNode struct {
	ast.BaseBlock
	closed bool
}

func (*mathBlockNode) Kind() ast.NodeKind     { return kindMathBlock }
func (*mathBlockNode) IsRaw() bool            { return true }
func (n *mathBlockNode) Dump(s []byte, l int) { ast.DumpHelper(n, s, l, nil, nil) }

// mathBlocks reads $$ ... $$ that starts a line and ends one: nothing inside is
// markdown. A line that goes on after a second $$ is left to mathSpans.
type mathBlocks struct{}

func (mathBlocks) Trigger() []byte { return []byte{'$'} }

func (mathBlocks) Open(_ ast.Node, reader text.Reader, pc parser.Context) (ast.Node, parser.State) {
	line, segment := reader.PeekLine()
	pos := pc.BlockOffset()
	if pos < 0 || !bytes.HasPrefix(line[pos:], []byte("$$")) {
		return nil, parser.NoChildren
	}
	inside := line[pos+2:]
	end := closing(inside)
	if end >= 0 && len(bytes.TrimSpace(inside[end+2:])) > 0 {
		return nil, parser.NoChildren
	}
	n := &mathBlockNode{closed: end >= 0}
	if end < 0 {
		end = len(inside)
	}
	start := segment.Start - segment.Padding + pos + 2
	n.Lines().Append(text.NewSegment(start, start+end))
	reader.AdvanceToEOL()
	return n, parser.NoChildren
}

func (mathBlocks) Continue(node ast.Node, reader text.Reader, _ parser.Context) parser.State {
	n := node.(*mathBlockNode)
	if n.closed {
		return parser.Close
	}
	line, segment := reader.PeekLine()
	start := segment.Start - segment.Padding
	stop := segment.Stop
	if end := closing(line); end >= 0 {
		if len(bytes.TrimSpace(line[end+2:])) > 0 {
			end = len(line) // text after it: a later line must close
		} else {
			n.closed = true
		}
		stop = start + end
	}
	n.Lines().Append(text.NewSegment(max(segment.Start, start), max(segment.Start, stop)))
	reader.AdvanceToEOL()
	if n.closed {
		return parser.Close
	}
	return parser.Continue | parser.NoChildren
}

func (mathBlocks) Close(ast.Node, text.Reader, parser.Context) {}
func (mathBlocks) CanInterruptParagraph() bool                 { return true }
func (mathBlocks) CanAcceptIndentedLine() bool                 { return false }

// closing is where $$ stands in a line, -1 without one. \$ is no dollar of ours.
func closing(line []byte) int {
	for i := 0; i < len(line); i++ {
		if line[i] == '\\' {
			i++
		} else if bytes.HasPrefix(line[i:], []byte("$$")) {
			return i
		}
	}
	return -1
}
