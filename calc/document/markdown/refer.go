package markdown

import (
	"regexp"

	"github.com/yuin/goldmark/ast"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
)

var kindRefer = ast.NewNodeKind("Reference")

// referNode is [Eq. NAME], from start to stop; name stands at the end of it.
type referNode struct {
	ast.BaseInline
	what, name  string
	start, stop int
}

func (*referNode) Kind() ast.NodeKind     { return kindRefer }
func (n *referNode) Dump(s []byte, l int) { ast.DumpHelper(n, s, l, nil, nil) }

// referring is the inside of a reference to an equation, a figure or a table of the
// document. A name begins with a letter: [Table 12.8-2] is a text in brackets.
var referring = regexp.MustCompile(`^(Eq\.|Equation|Fig\.|Figure|Table) (\pL[\pL\pN_.-]*)$`)

// referWords is what a reference begins with, and what it is to.
var referWords = map[string]string{"Eq.": "eq", "Equation": "eq", "Fig.": "fig", "Figure": "fig", "Table": "table"}

// Refer is a reference to an equation, a figure or a table.
type Refer struct {
	What  string // eq, fig or table
	Name  string
	Text  string     // as written, without brackets
	Range diag.Range // of the name
}

// refer notes a reference. Inside a link it is text.
func (w inlineWriter) refer(n *referNode, inLink bool) (exhibit.Prose, bool) {
	text := string(w.text[n.start:n.stop])
	if inLink {
		return exhibit.Prose{Kind: exhibit.Text, Text: text}, true
	}
	end := n.stop - 1
	w.file.Refers = append(w.file.Refers, Refer{What: n.what, Name: n.name, Text: text[1 : len(text)-1], Range: w.span(end-len(n.name), end)})
	return exhibit.Prose{Kind: exhibit.Refer, Level: len(w.file.Refers) - 1}, true
}
