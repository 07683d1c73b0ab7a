package page

import (
	"fmt"
	"reflect"
	"slices"
	"strings"
	"text/template/parse"

	"quoin/calc/diag"
)

// walker looks at a template before it is filled: names of data and functions, and
// what a template of an office may not do. Each range it comes upon is made to count
// what it repeats.
type walker struct {
	b      *book
	t      *ownTemplate
	src    string
	branch int
	parts  map[string]bool
}

func (w *walker) fail(n parse.Node, length int, hint, format string, args ...any) {
	at := int(n.Position())
	w.b.own.list.Errorf("office-template", w.t.at(at, at+length), format, args...).WithHint("%s", hint)
}

// list walks a run of nodes, where the dot is of a type; nil: not known.
func (w *walker) list(l *parse.ListNode, dot reflect.Type) {
	if l == nil {
		return
	}
	w.branch++
	branch := w.branch
	for _, n := range l.Nodes {
		if text, ok := n.(*parse.TextNode); ok {
			at := int(text.Pos)
			w.t.runs = append(w.t.runs, written{at, at + len(text.Text), branch})
			continue
		}
		if part, ok := partOf(n); ok {
			w.part(n, part, l == w.t.tree.Root)
			continue
		}
		w.node(n, dot)
	}
}

func (w *walker) node(n parse.Node, dot reflect.Type) {
	switch n := n.(type) {
	case *parse.ActionNode:
		w.pipe(n.Pipe, dot)
	case *parse.IfNode:
		w.pipe(n.Pipe, dot)
		w.list(n.List, dot)
		w.list(n.ElseList, dot)
	case *parse.WithNode:
		w.list(n.List, w.pipe(n.Pipe, dot))
		w.list(n.ElseList, dot)
	case *parse.RangeNode:
		item := w.pipe(n.Pipe, dot)
		if item != nil && item.Kind() == reflect.Slice {
			item = item.Elem()
		} else {
			item = nil
		}
		// What is repeated is counted: the list goes through counted last.
		count := parse.NewIdentifier("counted").SetPos(n.Pipe.Pos).SetTree(w.t.tree)
		n.Pipe.Cmds = append(n.Pipe.Cmds, &parse.CommandNode{NodeType: parse.NodeCommand, Pos: n.Pipe.Pos, Args: []parse.Node{count}})
		w.list(n.List, item)
		w.list(n.ElseList, dot)
	case *parse.TemplateNode:
		w.fail(n, len(n.Name)+2, "write it out where it is needed", "a template of an office has no other templates")
	}
}

// pipe walks a pipeline and gives the type of its value, nil where not known.
func (w *walker) pipe(p *parse.PipeNode, dot reflect.Type) (out reflect.Type) {
	if p == nil {
		return nil
	}
	for _, c := range p.Cmds {
		for i, arg := range c.Args {
			found := w.argument(arg, dot, i == 0)
			if len(p.Cmds) == 1 && len(c.Args) == 1 {
				out = found
			}
		}
	}
	return out
}

func (w *walker) argument(n parse.Node, dot reflect.Type, first bool) reflect.Type {
	switch n := n.(type) {
	case *parse.DotNode:
		return dot
	case *parse.FieldNode:
		return w.field(n, n.Ident, dot)
	case *parse.VariableNode:
		if n.Ident[0] == "$" {
			return w.field(n, n.Ident[1:], w.t.data)
		}
	case *parse.ChainNode:
		w.argument(n.Node, dot, first)
	case *parse.PipeNode:
		w.pipe(n, dot)
	case *parse.IdentifierNode:
		switch {
		case n.Ident == "part":
			w.fail(n, 4, `write {{part "sign"}} by itself, in no branch`, "part is no value")
		case !slices.Contains(ownNames(), n.Ident):
			hint := "its functions are " + strings.Join(ownNames(), ", ")
			if near := diag.Nearest(n.Ident, ownNames()); near != "" {
				hint = "did you mean " + near + "?"
			}
			w.fail(n, len(n.Ident), hint, "a template of an office has no function %s", clip(n.Ident, 40))
		}
	}
	return nil
}

// field follows names from a type, and says where one leads nowhere.
func (w *walker) field(n parse.Node, names []string, from reflect.Type) reflect.Type {
	for _, name := range names {
		if from == nil {
			return nil
		}
		if from.Kind() != reflect.Struct {
			w.failName(n, name, nil)
			return nil
		}
		f, ok := from.FieldByName(name)
		if !ok || f.Tag.Get("doc") == "" {
			var known []string
			for i := range from.NumField() {
				if from.Field(i).Tag.Get("doc") != "" {
					known = append(known, from.Field(i).Name)
				}
			}
			w.failName(n, name, known)
			return nil
		}
		from = f.Type
	}
	return from
}

func (w *walker) failName(n parse.Node, name string, known []string) {
	hint := "quoin blocks office lists the data of each template"
	if near := diag.Nearest(name, known); near != "" {
		hint = "did you mean ." + near + "?"
	} else if len(known) > 0 {
		hint = "there are ." + strings.Join(known, ", .")
	}
	at := int(n.Position())
	if i := strings.Index(w.src[max(0, at-len(name)-1):], "."+name); i >= 0 {
		at = max(0, at-len(name)-1) + i
	}
	w.b.own.list.Errorf("office-template", w.t.at(at, at+1+len(name)), "there is no .%s here", clip(name, 40)).WithHint("%s", hint)
}

// parts are what the program draws of the cover, in their usual order, wherever an
// office places them.
var parts = []string{"state", "criteria", "sign", "caution", "revisions"}

// Parts are the parts of the cover with what they are.
var Parts = [][2]string{
	{"state", "status, what cover.html does not show of subject, client, contract, location, discipline and authority, governing basis, revision, source, inputs, tallies of checks, warnings and assumptions, what is overridden and open, package digest"},
	{"criteria", "the design criteria"},
	{"sign", "the boxes to sign"},
	{"caution", "the short cautions"},
	{"revisions", "the revision table, and what the rows above had no room for"},
}

// partOf tells whether an action is a part by itself, and which.
func partOf(n parse.Node) (string, bool) {
	a, ok := n.(*parse.ActionNode)
	if !ok || len(a.Pipe.Decl) > 0 || len(a.Pipe.Cmds) != 1 {
		return "", false
	}
	args := a.Pipe.Cmds[0].Args
	if id, ok := args[0].(*parse.IdentifierNode); !ok || id.Ident != "part" {
		return "", false
	}
	if len(args) == 2 {
		if s, ok := args[1].(*parse.StringNode); ok {
			return s.Text, true
		}
	}
	return "", true
}

// part judges a part of the cover.
func (w *walker) part(n parse.Node, name string, top bool) {
	hint := fmt.Sprintf(`write {{part "sign"}}: one of %s`, strings.Join(parts, ", "))
	switch {
	case w.t.data != reflect.TypeFor[Cover]():
		w.fail(n, 4, "state and sheet number stand below each head by themselves", "parts belong on the cover")
	case !slices.Contains(parts, name):
		if near := diag.Nearest(name, parts); near != "" {
			hint = "did you mean " + near + "?"
		}
		w.fail(n, 4, hint, "the cover has no part %s", clip(or(name, "without a name"), 40))
	case !top:
		w.fail(n, 4, "move it out of the branch", "a part stands in no branch: it is always drawn")
	case w.parts[name]:
		w.fail(n, 4, "leave one out", "the part %s is placed twice", name)
	}
	if w.parts == nil {
		w.parts = map[string]bool{}
	}
	w.parts[name] = true
}
