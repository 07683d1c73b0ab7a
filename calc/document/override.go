package document

import (
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
)

// overrideRange is where messages about an override point: at the option itself.
func overrideRange(o exhibit.Override) diag.Range {
	return diag.Range{File: "--set " + o.Name + "=" + o.Text}
}

// overriding tells whether the value of a field came from an option.
func overriding(f *field.Field) bool {
	return len(f.List) > 0 && f.List[0].At.Line == 0 && strings.HasPrefix(f.List[0].At.File, "--set ")
}

// overriddenRows marks the inputs of a block that were set from outside.
func (n *node) overriddenRows(e *exhibit.Echo) {
	set := map[string]bool{}
	field.Visit(n.body, func(f *field.Field, s field.Spec) {
		if overriding(f) {
			set[s.Name] = true
		}
	})
	for i := range e.Rows {
		e.Rows[i].Overridden = set[e.Rows[i].Field]
	}
}

// overrides says of every node which names set from outside it rests on, itself not
// among them.
func (d *run) overrides() map[*node][]string {
	out := map[*node][]string{}
	if len(d.options.Overrides) == 0 {
		return out
	}
	var visit func(n *node) []string
	visit = func(n *node) []string {
		if list, ok := out[n]; ok {
			return list
		}
		set := map[string]bool{}
		for _, m := range n.needs {
			for _, name := range visit(m) {
				set[name] = true
			}
			if m.kind == lineNode && m.overridden != nil {
				set[m.overridden.Name] = true
			}
		}
		for _, o := range d.options.Overrides { // a block's own fields move all that it gives
			if name, _, dot := strings.Cut(o.Name, "."); dot && n.kind == blockNode && formula.Normal(name) == n.name {
				set[o.Name] = true
			}
		}
		out[n] = sorted(set)
		return out[n]
	}
	for _, n := range d.nodes {
		visit(n)
	}
	return out
}

// overrideLine puts an override's expression in the place of a formula line's.
func (d *run) overrideLine(n *node, names formula.Names) {
	for i := range d.options.Overrides {
		o := &d.options.Overrides[i]
		if formula.Normal(o.Name) != n.name || n.line.Check {
			continue
		}
		tree, findings := formula.ParseExpr(o.Text, names)
		for _, is := range findings {
			n.diags.Errorf(is.Code, overrideRange(*o), "%s", is.Summary).WithHint("%s", is.Hint)
		}
		if n.failed = n.failed || n.diags.HasErrors(); n.failed {
			continue
		}
		o.Was = strings.TrimSpace(n.source.Text[n.line.Tree.From:n.line.Tree.To])
		used := *o
		n.overridden = &used
		n.original, n.line.Tree = n.line.Tree, tree
	}
}

// sameDimension sees that what was set from outside has the dimension of what it
// replaced, where that can be found. It runs when all nodes have run.
func (d *run) sameDimension() {
	for _, n := range d.nodes {
		if n.original == nil || n.failed {
			continue
		}
		was, findings := formula.Evaluate(n.original, scope{d: d, n: n})
		if len(findings) == 0 && !was.Dim.Is(n.value.Dim) {
			n.diags.Errorf("dimension", overrideRange(*n.overridden), "%s is %s, the value set is %s", n.name, was.Dim.Name(), n.value.Dim.Name())
		}
	}
}

// override sets fields of a block named as NAME.field.
func (d *run) override(n *node, yaml *field.Node) {
	for i := range d.options.Overrides {
		o := &d.options.Overrides[i]
		name, key, dot := strings.Cut(o.Name, ".")
		if !dot || n.name == "" || formula.Normal(name) != n.name {
			continue
		}
		value := field.Node{Text: o.Text, At: overrideRange(*o)}
		found := false
		for j := range yaml.Pairs {
			if p := &yaml.Pairs[j]; p.Key == key {
				if !p.Value.Scalar() {
					n.diags.Errorf("override", overrideRange(*o), "%s is no single value that could be set", o.Name)
					return
				}
				o.Was, p.Value, found = p.Value.Text, value, true
			}
		}
		if !found {
			o.Was = "not given"
			yaml.Pairs = append(yaml.Pairs, field.Pair{Key: key, KeyAt: overrideRange(*o), Value: value})
		}
		used := *o
		n.overridden = &used
	}
}

// unusedOverride complains about an override that names nothing.
func (d *run) unusedOverride(o exhibit.Override) {
	name, _, dot := strings.Cut(o.Name, ".")
	n := d.names[formula.Normal(name)]
	if n != nil && (dot == (n.kind == blockNode)) {
		return
	}
	e := d.diags.Errorf("unknown-name", overrideRange(o), "nothing named %s can be set", o.Name)
	if n != nil && n.kind == blockNode {
		e.WithHint("name a field of the block: %s.FIELD=VALUE", name)
	} else if near := diag.Nearest(o.Name, d.allNames()); near != "" {
		e.WithHint("did you mean %s?", near)
	} else {
		e.WithHint("formula names and fields of blocks (NAME.field) can be set")
	}
}
