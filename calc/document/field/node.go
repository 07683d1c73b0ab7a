// Package field reads the YAML of a block or of the front matter. Every scalar
// is kept as its source text; what it means is decided by the field that takes
// it. Structs of [Field] with tags say which fields there are: decoding,
// dependencies, echoes, errors and the printed reference all come from them.
package field

import (
	"errors"
	"strings"
	"unicode"
	"unicode/utf8"

	"github.com/goccy/go-yaml"
	"github.com/goccy/go-yaml/ast"
	"github.com/goccy/go-yaml/parser"
	"github.com/goccy/go-yaml/token"

	"quoin/calc/diag"
)

// Line is a line of a YAML text and where it stands in its file.
type Line struct {
	Text         string
	Line, Column int
}

// Node is YAML as this program reads it: a scalar's text, a list, or a mapping.
type Node struct {
	At     diag.Range
	Text   string // scalar
	Items  []Node // list
	Pairs  []Pair // mapping, in order
	IsList bool
	IsMap  bool
}

// Pair is one key of a mapping.
type Pair struct {
	Key   string
	KeyAt diag.Range
	Value Node
}

// Scalar tells whether the node is a text.
func (n Node) Scalar() bool { return !n.IsList && !n.IsMap }

// Parse reads one YAML document from lines of file. At stands for the place of
// the whole text in messages about it as a whole.
func Parse(file string, lines []Line, at diag.Range) (Node, diag.List) {
	p := &reader{file: file, lines: lines, at: at}
	var text strings.Builder
	blank := true
	for _, l := range lines {
		text.WriteString(l.Text)
		text.WriteByte('\n')
		if t := strings.TrimSpace(l.Text); t != "" && !strings.HasPrefix(t, "#") {
			blank = false
		}
		if i := strings.IndexByte(l.Text, '\t'); i >= 0 && strings.TrimLeft(l.Text[:i], " ") == "" && strings.TrimSpace(l.Text) != "" {
			r := diag.Range{File: file, Line: l.Line, Column: l.Column + i, EndLine: l.Line, EndColumn: l.Column + i + 1}
			p.diags.Errorf("yaml-tab", r, "a tab cannot indent YAML").WithHint("indent with blanks")
		}
	}
	if blank || p.diags.HasErrors() {
		return Node{At: at, IsMap: true}, p.diags
	}
	if strings.Count(text.String(), "[")+strings.Count(text.String(), "{") > 20000 || deep(text.String()) {
		p.diags.Errorf("too-deep", at, "brackets are nested too deeply")
		return Node{At: at, IsMap: true}, p.diags
	}
	f, err := p.parse(text.String())
	if err != nil {
		var se *yaml.SyntaxError
		if errors.As(err, &se) && se.Token != nil {
			e := p.diags.Errorf("yaml", p.rangeOf(se.Token), "%s", tidy(se.Message))
			line := ""
			if n := se.Token.Position.Line; n >= 1 && n <= len(lines) {
				line = lines[n-1].Text
			}
			if name, value, ok := strings.Cut(line, "="); ok && !strings.Contains(line, ":") {
				e.WithHint("a field is written with a colon: %s: %s", strings.TrimSpace(name), strings.TrimSpace(value))
			} else if name, value, ok := strings.Cut(line, ":"); ok && strings.HasPrefix(strings.TrimSpace(value), "%") {
				e.WithHint("quote it: %s: '%s'", strings.TrimSpace(name), strings.TrimSpace(value))
			} else if strings.Contains(text.String(), "[") {
				e.WithHint("an expression that holds brackets or commas is quoted in a list, or the whole list is: \"[0.2 * m.T[1], 2 s]\"")
			}
		} else {
			p.diags.Errorf("yaml", at, "%s", tidy(err.Error()))
		}
		return Node{At: at, IsMap: true}, p.diags
	}
	var body ast.Node
	for i, d := range f.Docs {
		if i > 0 && (d.Body != nil || d.Start != nil) {
			r := at
			if d.Start != nil {
				r = p.rangeOf(d.Start)
			} else if t := d.Body.GetToken(); t != nil {
				r = p.rangeOf(t)
			}
			p.diags.Errorf("yaml-second-document", r, "a second YAML document begins here").WithHint("one block holds one document: remove the ---")
			break
		}
		if body == nil {
			body = d.Body
		}
	}
	if body == nil {
		return Node{At: at, IsMap: true}, p.diags
	}
	return p.node(body, 0), p.diags
}

type reader struct {
	file  string
	lines []Line
	at    diag.Range
	diags diag.List
}

// parse turns a panic of the YAML library into an error: input must never end the program.
func (p *reader) parse(text string) (f *ast.File, err error) {
	defer func() {
		if r := recover(); r != nil {
			err = errors.New("this is not YAML")
		}
	}()
	return parser.ParseBytes([]byte(text), parser.ParseComments, parser.AllowDuplicateMapKey())
}

// tidy drops the library's own excerpt and makes one line of a message.
func tidy(s string) string {
	s, _, _ = strings.Cut(s, "\n")
	s = strings.TrimSpace(s)
	for _, m := range []struct{ theirs, ours string }{
		{"sequence end token ']' not found", "this list has no closing ]"},
		{"could not find flow map content", "this { } mapping cannot be read"},
		{"',' or ']' must be specified", "a , or ] is missing in this list"},
		{"',' or '}' must be specified", "a , or } is missing in this mapping"},
		{"could not find flow mapping end token '}'", "this mapping has no closing }"},
		{"non-map value is specified", "this line is no  field: value"},
		{"unexpected key name", "this line is no  field: value"},
		{"mapping value is not allowed in this context", "this line does not fit its neighbours: look at the indentation, or for a second colon in the line"},
		{"value is not allowed in this context", "this does not belong to a line of  field: value"},
		{"could not find end character of double-quoted text", "this text has no closing quote"},
		{"could not find end character of single-quoted text", "this text has no closing quote"},
	} {
		if strings.HasPrefix(s, m.theirs) {
			return m.ours
		}
	}
	return s
}

// rangeOf is the place of a token in the file.
func (p *reader) rangeOf(t *token.Token) diag.Range {
	if t == nil || t.Position == nil || t.Position.Line < 1 || t.Position.Line > len(p.lines) {
		return p.at
	}
	l := p.lines[t.Position.Line-1]
	start := max(t.Position.Column, 1)
	width := len([]rune(strings.TrimSpace(strings.SplitN(strings.TrimLeft(t.Origin, "\r\n"), "\n", 2)[0])))
	if t.Type == token.SingleQuoteType || t.Type == token.DoubleQuoteType {
		width = len([]rune(t.Value)) + 2
	}
	if rest := len([]rune(l.Text)) - start + 1; width > rest || width == 0 {
		width = max(rest, 1)
	}
	return diag.Range{File: p.file, Line: l.Line, Column: l.Column + start - 1, EndLine: l.Line, EndColumn: l.Column + start - 1 + width}
}

const deepest = 20

// deep tells whether brackets open more than 100 deep anywhere, quotes aside: the
// YAML library takes very long over such a text.
func deep(text string) bool {
	open := 0
	for i := range len(text) {
		switch text[i] {
		case '[', '{':
			if open++; open > 100 {
				return true
			}
		case ']', '}':
			open = max(open-1, 0)
		}
	}
	return false
}

func (p *reader) node(n ast.Node, depth int) Node {
	at := p.at
	if n != nil && n.GetToken() != nil {
		at = p.rangeOf(n.GetToken())
	}
	if depth > deepest {
		p.diags.Errorf("too-deep", at, "nested too deeply")
		return Node{At: at}
	}
	switch n := n.(type) {
	case nil, *ast.NullNode:
		return Node{At: at}
	case *ast.MappingNode:
		return p.mapping(n.Values, depth)
	case *ast.MappingValueNode:
		return p.mapping([]*ast.MappingValueNode{n}, depth)
	case *ast.SequenceNode:
		out := Node{At: at, IsList: true}
		if n.IsFlowStyle && n.End != nil {
			if end := p.rangeOf(n.End); end.Line == at.Line && end.EndColumn > at.EndColumn {
				out.At.EndColumn = end.EndColumn
			}
		}
		for _, v := range n.Values {
			out.Items = append(out.Items, p.node(v, depth+1))
		}
		return out
	case *ast.LiteralNode:
		return p.clean(Node{At: at, Text: strings.TrimRight(n.Value.Value, "\n")})
	case *ast.AnchorNode, *ast.AliasNode, *ast.MergeKeyNode, *ast.TagNode:
		p.diags.Errorf("yaml-reference", at, "anchors, aliases and tags are not read").WithHint("write the value out, or give it a name in a formula line; quote a text that begins with & * or !")
		return Node{At: at}
	case *ast.StringNode:
		return p.clean(Node{At: at, Text: n.Value})
	case ast.ScalarNode:
		return Node{At: at, Text: strings.TrimSpace(n.GetToken().Value)}
	}
	p.diags.Errorf("yaml", at, "this kind of YAML is not read here")
	return Node{At: at}
}

// clean refuses characters that an escape brought in and that hide or reorder
// text, or that no text holds.
func (p *reader) clean(n Node) Node {
	for _, r := range n.Text {
		if r != '\n' && r != '\t' && (unicode.IsControl(r) || unicode.Is(unicode.Cf, r) || unicode.Is(unicode.Zl, r) || unicode.Is(unicode.Zp, r) || r == utf8.RuneError || r&0xFFFE == 0xFFFE) {
			p.diags.Errorf("hidden-character", n.At, "the text holds the character U+%04X, which cannot be seen", r).WithHint("leave it out: it can make a reader see another text or number")
			n.Text = ""
			break
		}
	}
	return n
}

func (p *reader) mapping(values []*ast.MappingValueNode, depth int) Node {
	out := Node{At: p.at, IsMap: true}
	seen := map[string]bool{}
	for i, v := range values {
		key := v.Key.GetToken()
		if _, merge := v.Key.(*ast.MergeKeyNode); merge {
			p.node(v.Key.(ast.Node), depth)
			continue
		}
		at := p.rangeOf(key)
		if i == 0 {
			out.At = at
		}
		if seen[key.Value] {
			p.diags.Errorf("field-twice", at, "%s is given twice", key.Value).WithHint("leave one of the two lines out")
			continue
		}
		seen[key.Value] = true
		out.Pairs = append(out.Pairs, Pair{Key: key.Value, KeyAt: at, Value: p.node(v.Value, depth+1)})
	}
	return out
}
