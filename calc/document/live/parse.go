package live

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"
	"text/template/parse"
	"unicode/utf8"

	"quoin/calc/diag"
	"quoin/calc/document/formula"
	"quoin/calc/quantity"
)

// calls is what text/template's parser is told of our functions.
var calls = func() map[string]any {
	m := map[string]any{}
	for _, f := range functions {
		m[f.name] = f.name
	}
	return m
}()

// Parse reads the inside of {{ ... }}. Names are spelt as formula lines spell
// them ([formula.Normal]). The error is always an *Error.
func Parse(text string) (*Pipeline, error) {
	plain, fault := scan(text)
	if fault != nil {
		return nil, fault
	}
	trees, err := parse.Parse("value", "{{"+plain+"}}", "", "", calls)
	if err != nil {
		return nil, whole(text).fail("this is not one complete pipeline: "+complaint(err), usage)
	}
	nodes := trees["value"].Root.Nodes
	if len(nodes) != 1 {
		return nil, whole(text).fail("this is not one complete pipeline", usage)
	}
	action, ok := nodes[0].(*parse.ActionNode)
	if !ok || len(action.Pipe.Decl) > 0 || len(action.Pipe.Cmds) == 0 {
		return nil, whole(text).fail("only a value can stand here", usage)
	}
	r := reader{text: text, out: &Pipeline{}}
	for i, cmd := range action.Pipe.Cmds {
		if err := r.command(cmd, i == 0); err != nil {
			return nil, err
		}
	}
	return r.out, nil
}

const usage = `write .NAME, as in {{ .V | as "kip" | sig 3 }}`

// whole is the range of a text without the blanks around it.
func whole(text string) span {
	t := strings.TrimSpace(text)
	return span{strings.Index(text, t), len(t)}
}

// complaint is what the template parser said, without its place and quotes of
// the whole input.
func complaint(err error) string {
	s := err.Error()
	if i := strings.LastIndex(s, "value:"); i >= 0 {
		s = strings.TrimLeft(s[i+len("value:"):], "0123456789: ")
	}
	if r := []rune(s); len(r) > 100 {
		s = string(r[:100]) + "..."
	}
	return s
}

// reader walks the commands of a pipeline.
type reader struct {
	text string
	out  *Pipeline
}

// place is the range of a node; a chain of fields and a word end where their
// characters do.
func (r reader) place(n parse.Node) span {
	at := min(max(int(n.Position())-len("{{"), 0), len(r.text))
	if _, ok := n.(*parse.FieldNode); ok { // its position may be of a later field
		for at > 0 && (wordEnd(r.text[at-1:]) > 0 || !utf8.RuneStart(r.text[at-1]) || r.text[at-1] == '.') {
			at--
		}
	}
	if n := tokenEnd(r.text[at:]); n > 0 {
		return span{at, n}
	}
	return span{at, min(1, len(r.text)-at)}
}

// command reads one command: the value, or a function with constants, and with
// the value last if it is the first of the pipeline.
func (r reader) command(cmd *parse.CommandNode, first bool) error {
	head := cmd.Args[0]
	at := r.place(head)
	switch head := head.(type) {
	case *parse.FieldNode:
		if !first {
			return at.fail("a value stands first in its pipeline", usage)
		}
		if len(cmd.Args) > 1 {
			return r.place(cmd.Args[1]).fail("a value takes no arguments", "join functions with |: "+usage)
		}
		r.name(at)
		return nil
	case *parse.IdentifierNode:
		f := functionNamed(head.Ident)
		if f == nil {
			return at.fail("there is no function "+head.Ident, "")
		}
		args := cmd.Args[1:]
		if first {
			if len(args) == 0 {
				return at.fail(f.name+" needs a value", "write {{ "+f.usage("V")+" }}")
			}
			last := args[len(args)-1]
			if _, ok := last.(*parse.FieldNode); !ok {
				return r.place(last).fail("no value of the package stands here", "a typed text or number is not a result: "+usage)
			}
			r.name(r.place(last))
			args = args[:len(args)-1]
		}
		return r.call(f, at, args)
	case *parse.StringNode, *parse.NumberNode:
		return at.fail("a typed text or number is not a result", "write it as prose, or set it in a formula line and show its name")
	}
	return at.fail("only a value can stand here", usage)
}

func (r reader) name(at span) {
	var path []string
	for _, word := range strings.Split(r.text[at.offset+1:at.offset+at.length], ".") {
		path = append(path, formula.Normal(word))
	}
	r.out.Names, r.out.at = []string{strings.Join(path, ".")}, at
}

// call reads a function with its constants.
func (r reader) call(f *function, at span, args []parse.Node) error {
	s := step{function: f, at: at}
	for i, n := range args {
		a := argument{at: r.place(n)}
		switch n := n.(type) {
		case *parse.FieldNode:
			return a.at.fail("a pipeline shows one value", "a value stands first, or last in the first function")
		case *parse.StringNode:
			a.text = n.Text
		case *parse.NumberNode:
			k, err := strconv.Atoi(n.Text)
			if err != nil || !plainNumber.MatchString(n.Text) {
				return a.at.fail("this is not a whole number", f.hint())
			}
			a.isInt, a.whole = true, k
		default:
			return a.at.fail("only a text or a number can stand here", f.hint())
		}
		if i >= len(f.takes) {
			return a.at.fail(f.name+" takes no more arguments", f.hint())
		}
		if fault := f.takes[i].check(&a); fault != nil {
			if fault.Hint == "" {
				fault.Hint = f.hint()
			}
			return fault
		}
		s.args = append(s.args, a)
	}
	if len(s.args) < len(f.takes) {
		return at.fail(f.name+" needs "+f.takes[len(s.args)].what, f.hint())
	}
	r.out.steps = append(r.out.steps, s)
	return nil
}

var plainNumber = regexp.MustCompile(`^(0|[1-9][0-9]{0,8})$`)

// nearestFunction is a hint for a word that is no function.
func nearestFunction(word string) string {
	if quantity.IsSymbol(word) {
		return fmt.Sprintf("a unit stands in quotes: as %q", word)
	}
	var names []string
	for _, f := range functions {
		names = append(names, f.name)
	}
	if n := diag.Nearest(word, names); n != "" && len(word) > 1 {
		return "did you mean " + n + "?"
	}
	return "a value has a dot before its name: ." + short(word) + "; the functions are " + strings.Join(names, ", ")
}
