// Package formula reads and evaluates formula lines, and the quantities in the
// fields of blocks.
//
//	V = elf.C_s * frame.weight as kN   # [source] description
//	check d.drift <= 0.020 * frame.h_s
//
// Binding, loosest first: within; comparisons; + -; * /; unary minus; ^ (from
// the right); an index. A unit belongs to the number before it and is the
// longest run without blanks, so "3 kN*m" is a moment and "3 kN * m" a product.
//
// Reading makes an expr.Node; evaluating fills the values in. Findings carry
// byte offsets into the text that was read. Nothing evaluates to NaN or an
// infinity: such a result is a finding.
package formula

import (
	"slices"
	"strings"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// Finding is a finding in a text, in byte offsets of that text.
type Finding struct {
	Warning       bool
	Code          string
	From, To      int
	Summary, Hint string
}

// Names tells which formula names are set in the document (normalised), so
// that a compound unit that holds one is refused. nil: none.
type Names func(name string) bool

// Line is one formula line.
type Line struct {
	Check bool
	// Name is what the line sets, normalised; "" for a check.
	Name             string
	NameFrom, NameTo int
	// Tree is the expression, or the comparison (or Within) of a check. It is
	// nil for a line without content and where the line cannot be read.
	Tree         *expr.Node
	HasAs        bool
	As           quantity.Unit
	AsFrom, AsTo int
	Source       string // inside the [ ] of the comment
	Description  string // the rest of the comment
	// Text of a check is its id: as written, with one blank for any run of them
	// and around what compares.
	Text string
}

// ParseLine reads a formula line. A blank line, or one with only a comment, is
// the zero Line. Where findings hold an error the Tree is not fit for evaluation.
func ParseLine(text string, names Names) (Line, []Finding) {
	body, comment := text, ""
	if i := strings.IndexByte(text, '#'); i >= 0 {
		body, comment = text[:i], text[i+1:]
	}
	if strings.TrimSpace(body) == "" {
		return Line{}, nil
	}
	var line Line
	p := newParser(body, names)
	line.Source, line.Description = p.comment(comment, len(body))
	if from, ok := checkStart(body); ok {
		line.Check = true
		line.Text = normal(body[from:])
		p.seek(from)
		line.Tree = p.check()
	} else if p.name(&line) {
		line.Tree = p.expression()
		if line.Tree != nil && p.tok.kind == asWord {
			line.AsFrom = p.skipBlanks(p.pos)
			line.As, line.HasAs = p.unitHere(line.AsFrom)
			line.AsTo = p.pos
			p.next()
		}
		stop := p.tok
		p.end()
		line.Tree = withRest(line.Tree, body, stop, names)
	}
	return line, p.done()
}

// withRest adds what stands behind a word that has no place in a line, "a and b",
// so that all names of the line are looked up. Such a line does not run.
func withRest(tree *expr.Node, body string, stop token, names Names) *expr.Node {
	for tree != nil && (stop.kind == "and" || stop.kind == "or" || isComparison(expr.Op(stop.kind))) {
		p := newParser(body, names)
		p.seek(stop.to)
		n := p.expression()
		if n == nil || len(p.findings) > 0 {
			break
		}
		tree, stop = &expr.Node{Op: expr.List, Args: []*expr.Node{tree, n}, From: tree.From, To: n.To}, p.tok
	}
	return tree
}

// ParseExpr reads the quantity or vector of a field.
func ParseExpr(text string, names Names) (*expr.Node, []Finding) {
	p := newParser(text, names)
	p.next()
	if p.tok.kind == endOfText {
		p.fail("syntax", 0, len(text), "nothing is written here", "write a quantity (3.6 m) or a vector ([3 m, 4 m])")
		return nil, p.done()
	}
	n := p.expression()
	p.end()
	return n, p.done()
}

// LineName is the name that a line sets, "" if none. It is cheap and finds no fault.
func LineName(text string) string {
	body, _, _ := strings.Cut(text, "#")
	head, tail, ok := strings.Cut(body, "=")
	if !ok || strings.HasPrefix(tail, "=") {
		return ""
	}
	if name := Normal(strings.TrimSpace(head)); ValidName(name) && !Reserved(name) {
		return name
	}
	return ""
}

// checkStart tells whether a line is a check, and where its text starts. A name
// may be called check: "check = 3".
func checkStart(body string) (from int, ok bool) {
	s := strings.TrimLeft(body, " \t")
	rest, ok := strings.CutPrefix(s, "check")
	if !ok || rest != "" && !strings.HasPrefix(rest, " ") && !strings.HasPrefix(rest, "\t") && !strings.HasPrefix(rest, "(") && !strings.HasPrefix(rest, "[") {
		return 0, false
	}
	after := strings.TrimLeft(rest, " \t")
	if strings.HasPrefix(after, "=") && !strings.HasPrefix(after, "==") {
		return 0, false
	}
	return len(body) - len(rest), true
}

// name reads "name =" and leaves the parser at the first token behind it.
func (p *parser) name(line *Line) bool {
	before := len(p.findings)
	p.next()
	t := p.tok
	line.NameFrom, line.NameTo = t.from, t.to
	p.next()
	if p.tok.kind != assign {
		i := strings.IndexByte(p.text, '=')
		switch {
		case p.broken:
		case i > p.skipBlanks(0) && !strings.ContainsAny(p.text[i-1:i], "<>!=") && !strings.HasPrefix(p.text[i+1:], "="):
			from := p.skipBlanks(0)
			p.findings = p.findings[:before] // what stands here is no expression
			p.fail("name", from, len(strings.TrimRight(p.text[:i], " \t")), "left of = stands one name", "a name is made of letters, digits and _, and starts with a letter")
			p.seek(i + 1)
			return true
		case strings.ContainsAny(p.text, "<>"), strings.Contains(p.text, "=="):
			p.fail("syntax", t.from, t.to, "this line sets no name", "a comparison is written: check a <= b")
		default:
			p.fail("syntax", t.from, t.to, "this line sets no name", "write name = expression, or check a <= b")
		}
		return false
	}
	switch {
	case t.kind == broken:
	case t.kind == "within", t.kind == "and", t.kind == "or", t.kind == "not", t.kind == asWord:
		p.fail("reserved-name", t.from, t.to, string(t.kind)+" is a word of the language and cannot be set", "choose another name")
	case t.kind != word:
		p.findings = p.findings[:before]
		p.fail("name", t.from, t.to, "left of = stands one name", "a name is made of letters, digits and _, and starts with a letter")
	case strings.Contains(t.name, "."):
		p.fail("name", t.from, t.to, "a formula line sets a name without a point", "values like "+t.name+" are set by blocks")
	case Reserved(t.name):
		p.fail("reserved-name", t.from, t.to, t.name+" is a word of the language and cannot be set", "choose another name, such as "+t.name+"_1")
	default:
		line.Name = t.name
	}
	p.next()
	return true
}

// comment splits "[source] description".
func (p *parser) comment(s string, at int) (source, description string) {
	s = strings.TrimSpace(s)
	if !strings.HasPrefix(s, "[") {
		return "", s
	}
	depth := 0
	for i, r := range s {
		switch r {
		case '[':
			depth++
		case ']':
			depth--
		}
		if depth == 0 {
			return strings.TrimSpace(s[1:i]), strings.TrimSpace(s[i+1:])
		}
	}
	p.findings = append(p.findings, Finding{Warning: true, Code: "open-source", From: at, To: at + 1, Summary: "the source in the comment has no closing ]", Hint: "write # [source] description"})
	return "", s
}

// Dep is a value or a block's function that a tree refers to: "V", "m.T", or
// "rs.PSA" with Method set.
type Dep struct {
	Path     string
	Method   bool
	From, To int
}

// Deps lists what a tree refers to, in the order written, repeats included. The
// range of a function is that of the whole call.
func Deps(n *expr.Node) []Dep {
	var out []Dep
	n.Walk(func(n *expr.Node) {
		switch {
		case n.Op == expr.Name && n.Text != "pi":
			out = append(out, Dep{Path: n.Text, From: n.From, To: n.To})
		case n.Op == expr.Call && strings.Contains(n.Text, "."):
			out = append(out, Dep{Path: n.Text, Method: true, From: n.From, To: n.To})
		}
	})
	slices.SortStableFunc(out, func(a, b Dep) int { return a.From - b.From })
	return out
}
