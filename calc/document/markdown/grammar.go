package markdown

import (
	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/extension"
	extast "github.com/yuin/goldmark/extension/ast"
	"github.com/yuin/goldmark/parser"
	"github.com/yuin/goldmark/text"
	"github.com/yuin/goldmark/util"
)

// deepest is how many blocks (quotes, lists, items) may stand inside each other.
const deepest = 50

// grammar is CommonMark with tables, footnotes and definition lists, and what is
// ours: closed fences, math, live values, citations.
var grammar = parser.NewParser(
	parser.WithBlockParsers(
		util.Prioritized(parser.NewSetextHeadingParser(), 100),
		util.Prioritized(shallow{extension.NewDefinitionListParser()}, 101),
		util.Prioritized(shallow{extension.NewDefinitionDescriptionParser()}, 102),
		util.Prioritized(parser.NewThematicBreakParser(), 200),
		util.Prioritized(shallow{parser.NewListParser()}, 300),
		util.Prioritized(parser.NewListItemParser(), 400),
		util.Prioritized(parser.NewCodeBlockParser(), 500),
		util.Prioritized(parser.NewATXHeadingParser(), 600),
		util.Prioritized(fences{parser.NewFencedCodeBlockParser()}, 700),
		util.Prioritized(mathBlocks{}, 750),
		util.Prioritized(shallow{parser.NewBlockquoteParser()}, 800),
		util.Prioritized(parser.NewHTMLBlockParser(), 900),
		util.Prioritized(shallow{extension.NewFootnoteBlockParser()}, 999),
		util.Prioritized(parser.NewParagraphParser(), 1000),
	),
	parser.WithInlineParsers(
		util.Prioritized(liveValues{}, 50),
		util.Prioritized(mathSpans{}, 60),
		util.Prioritized(parser.NewCodeSpanParser(), 100),
		util.Prioritized(extension.NewFootnoteParser(), 101),
		util.Prioritized(citations{}, 150),
		util.Prioritized(parser.NewLinkParser(), 200),
		util.Prioritized(parser.NewAutoLinkParser(), 300),
		util.Prioritized(parser.NewRawHTMLParser(), 400),
		util.Prioritized(parser.NewEmphasisParser(), 500),
	),
	parser.WithParagraphTransformers(
		util.Prioritized(parser.LinkReferenceParagraphTransformer, 100),
		util.Prioritized(extension.NewTableParagraphTransformer(), 200),
	),
	parser.WithASTTransformers(
		util.Prioritized(extension.NewTableASTTransformer(), 0),
		util.Prioritized(loneFootnotes{}, 500),
		util.Prioritized(extension.NewFootnoteASTTransformer(), 999),
	),
)

// notes is what a run of the grammar leaves for the converter besides its tree.
type notes struct {
	cite func(key string) bool
	deep int   // offset of the first block that stood too deep; -1: none
	lone []int // offsets of footnotes that nothing refers to
	// brackets are texts in brackets that are no citations.
	brackets []bracket
}

// bracket is a text in brackets and its place.
type bracket struct {
	text string
	at   text.Segment
}

var notesKey = parser.NewContextKey()

func notesOf(pc parser.Context) *notes { return pc.Get(notesKey).(*notes) }

// parse runs the grammar.
func parse(source []byte, cite func(key string) bool) (ast.Node, *notes) {
	n := &notes{cite: cite, deep: -1}
	pc := parser.NewContext()
	pc.Set(notesKey, n)
	return grammar.Parse(text.NewReader(source), parser.WithContext(pc)), n
}

// shallow keeps container blocks from nesting without end.
type shallow struct{ parser.BlockParser }

func (s shallow) Open(parent ast.Node, reader text.Reader, pc parser.Context) (ast.Node, parser.State) {
	if len(pc.OpenedBlocks()) < deepest {
		return s.BlockParser.Open(parent, reader, pc)
	}
	line, place := reader.Position()
	node, state := s.BlockParser.Open(parent, reader, pc)
	if node == nil {
		return nil, state
	}
	reader.SetPosition(line, place)
	if n := notesOf(pc); n.deep < 0 {
		n.deep = place.Start
	}
	return nil, parser.NoChildren
}

// fences notes where a fence was closed; one without the attribute is open.
type fences struct{ parser.BlockParser }

// closedAt is the attribute that holds the offset of the closing fence.
const closedAt = "closed-at"

func (f fences) Continue(node ast.Node, reader text.Reader, pc parser.Context) parser.State {
	_, segment := reader.PeekLine()
	state := f.BlockParser.Continue(node, reader, pc)
	if state == parser.Close {
		node.SetAttributeString(closedAt, segment.Start)
	}
	return state
}

// loneFootnotes finds the footnotes that nothing refers to, before they are
// taken off the tree.
type loneFootnotes struct{}

func (loneFootnotes) Transform(doc *ast.Document, _ text.Reader, pc parser.Context) {
	n := notesOf(pc)
	_ = ast.Walk(doc, func(node ast.Node, entering bool) (ast.WalkStatus, error) {
		if f, ok := node.(*extast.Footnote); ok && entering && f.Index < 0 {
			n.lone = append(n.lone, f.Pos())
		}
		return ast.WalkContinue, nil
	})
}
