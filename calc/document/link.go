package document

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/quantity"
)

// link resolves every dependency to its node, and finds cycles.
func (d *run) link() {
	for _, n := range d.nodes {
		for _, dep := range n.deps {
			if to := d.resolve(n, dep); to != nil && !slices.Contains(n.needs, to) {
				n.needs = append(n.needs, to)
			}
		}
		n.failed = n.failed || n.diags.HasErrors()
	}
	d.varying()
	d.cycles()
}

// resolve finds the node behind a dependency and checks that it has what is asked of it.
func (d *run) resolve(n *node, dep field.Dep) *node {
	path := dep.Path
	if dep.Series {
		path, _, _ = strings.Cut(path, "@")
	}
	first, rest, dotted := strings.Cut(path, ".")
	to := d.names[first]
	if to == nil {
		e := n.diags.Errorf("unknown-name", dep.At, "nothing is named %s", first)
		if near := diag.Nearest(first, d.allNames()); near != "" {
			e.WithHint("did you mean %s?", near)
		} else if dep.Block != nil {
			e.WithHint("%s", d.blocksMaking(dep.Block))
		} else if quantity.IsSymbol(first) {
			e.WithHint("%s is a unit: it stands behind its number, and a product of units is written without blanks, as kN*m", first)
		} else {
			e.WithHint("set it in a formula line, or name a block and its value: NAME.value")
		}
		return nil
	}
	k := to.def
	switch {
	case to.kind == blockNode && k.Name == "": // of an unknown kind: said there
	case dep.Block != nil:
		if to.kind != blockNode || !slices.Contains(dep.Block, k.Makes) {
			n.diags.Errorf("wrong-block", dep.At, "%s is %s; here goes a block that makes %s", first, to.what(), strings.Join(dep.Block, " or ")).
				WithHint("%s", d.blocksMaking(dep.Block))
			return nil
		}
	case to.kind != blockNode && dotted:
		n.diags.Errorf("no-member", dep.At, "%s is a formula name and has no value %s", first, rest)
		return nil
	case to.kind != blockNode && dep.Series:
		n.diags.Errorf("no-series", dep.At, "%s is a formula name, not a series of a block", first).WithHint("a series is named as BLOCK.WHAT, for instance east_rs.PSA")
		return nil
	case to.kind == blockNode && dep.Series:
		if !dotted {
			n.diags.Errorf("no-series", dep.At, "%s is a block; say which of its series", first).WithHint("a series is named as BLOCK.WHAT, for instance %s.PSA", first)
			return nil
		}
	case to.kind == blockNode && !dotted:
		n.diags.Errorf("block-as-value", dep.At, "%s is a block; say which of its values", first).WithHint("it has %s", strings.Join(k.Members(), ", "))
		return nil
	case to.kind == blockNode:
		_, isFn := k.Function(rest)
		_, isValue := k.Export(rest)
		switch {
		case dep.Method && !isFn && isValue:
			n.diags.Errorf("no-function", dep.At, "%s is a value, not a function", dep.Path).WithHint("an item of a vector is taken by [1]")
			return nil
		case !dep.Method && isFn && !isValue:
			fn, _ := k.Function(rest)
			n.diags.Errorf("function-as-value", dep.At, "%s is a function", dep.Path).WithHint("write %s.%s", first, fn.Usage)
			return nil
		case !isFn && !isValue:
			e := n.diags.Errorf("no-member", dep.At, "%s is %s and has no value %s", first, to.what(), rest)
			if near := diag.Nearest(rest, k.Members()); near != "" {
				e.WithHint("did you mean %s.%s?", first, near)
			} else if len(k.Members()) > 0 {
				e.WithHint("it has %s", strings.Join(k.Members(), ", "))
			}
			return nil
		}
	}
	return to
}

// what a node is, in words.
func (n *node) what() string {
	switch {
	case n.kind != blockNode:
		return "a formula name"
	case n.def.Name == "":
		return "a block of unknown kind"
	}
	return "a " + n.def.Name + " block"
}

func (d *run) allNames() []string {
	out := make([]string, 0, len(d.names))
	for n := range d.names {
		out = append(out, n)
	}
	slices.Sort(out)
	return out
}

// blocksMaking names the blocks of the document that could be meant.
func (d *run) blocksMaking(products []string) string {
	var have []string
	for _, n := range d.nodes {
		if n.kind == blockNode && n.name != "" && slices.Contains(products, n.def.Makes) {
			have = append(have, n.name)
		}
	}
	if len(have) > 0 {
		return "there is " + strings.Join(have, ", ")
	}
	var kinds []string
	for _, k := range block.Kinds {
		if slices.Contains(products, k.Makes) {
			kinds = append(kinds, k.Name)
		}
	}
	return "the document has none; add a block of kind " + strings.Join(kinds, " or ")
}

// cycles reports every cycle once, naming its members in order, and takes them
// out of the run.
func (d *run) cycles() {
	const white, grey, black = 0, 1, 2
	colour := map[*node]int{}
	var stack []*node
	var visit func(n *node)
	visit = func(n *node) {
		colour[n] = grey
		stack = append(stack, n)
		for _, m := range n.needs {
			switch colour[m] {
			case white:
				visit(m)
			case grey:
				members := stack[slices.Index(stack, m):]
				var names []string
				for _, c := range members {
					c.failed = true
					names = append(names, c.name)
				}
				names = append(names, m.name)
				if len(members) == 1 {
					n.diags.Errorf("cycle", n.dependsAt(m), "%s depends on itself", m.name).WithHint("a block or line never sees its own values")
				} else {
					if len(names) > 12 {
						names = append(append(names[:6:6], fmt.Sprintf("... (%d more)", len(names)-12)), names[len(names)-6:]...)
					}
					n.diags.Errorf("cycle", n.dependsAt(m), "a cycle: %s", strings.Join(names, " needs ")).WithHint("break it by giving one of them a value of its own")
				}
			}
		}
		stack = stack[:len(stack)-1]
		colour[n] = black
	}
	for _, n := range d.nodes {
		if colour[n] == white {
			visit(n)
		}
	}
	for _, n := range d.nodes { // an edge within a cycle would hold up the run
		if n.failed {
			n.needs = slices.DeleteFunc(n.needs, func(m *node) bool { return m.failed })
		}
	}
}

// dependsAt is where n names m.
func (n *node) dependsAt(m *node) diag.Range {
	for _, dep := range n.deps {
		if first, _, _ := strings.Cut(dep.Path, "."); first == m.name {
			return dep.At
		}
	}
	return n.at
}
