package document

import (
	"runtime"
	"slices"
	"strings"
	"sync"

	"quoin/calc/diag"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// A vary block asks what its results come to with other values of some names. The
// document is declared once more with each value set, as by --set, and what lies
// between the names and the results runs; all else is taken over from the run that
// asks. That one is not touched: base values stay what they are.

// varying ties the vary blocks into the graph: to what they vary, and to the checks
// that follow from it.
func (d *run) varying() {
	for _, n := range d.nodes {
		v, ok := n.body.(block.Varies)
		if !ok || n.failed {
			continue
		}
		var varied []*node
		for _, it := range v.Varied() {
			if m := d.settable(n, it); m != nil {
				varied = append(varied, m)
			}
		}
		if n.failed = n.diags.HasErrors(); n.failed {
			continue
		}
		after := d.following(varied)
		own := d.following([]*node{n})
		for _, m := range varied {
			n.needFor(m)
		}
		for _, m := range d.nodes {
			if after[m] && !own[m] && m != n && checks(m) {
				n.needFor(m)
			}
		}
		for m := range d.needed([]*node{n}) {
			if _, nested := m.body.(block.Varies); nested && m != n {
				n.diags.Errorf("vary-nested", n.dependsAt(m), "%s rests on %s, which varies values itself", n.name, m.name).WithHint("a vary block takes results of the document, not of another vary block")
				n.failed = true
				break
			}
		}
	}
}

// checks tells what makes checks.
func checks(n *node) bool {
	return n.kind == checkNode || n.kind == blockNode && n.def.Makes == "drift"
}

func (n *node) needFor(m *node) {
	if !slices.Contains(n.needs, m) {
		n.needs = append(n.needs, m)
	}
}

// settable is the node of a name that can be varied: a formula name that holds
// values of its own, or a block by one of its fields.
func (d *run) settable(n *node, it field.Item) *node {
	first, key := cutPath(it.Text)
	m := d.names[formula.Normal(first)]
	switch {
	case m == nil:
		e := n.diags.Errorf("unknown-name", it.At, "nothing is named %s", first)
		if near := diag.Nearest(first, d.allNames()); near != "" {
			e.WithHint("did you mean %s?", near)
		}
	case m.kind == lineNode && key == "":
		return m
	case m.kind == lineNode:
		n.diags.Errorf("no-member", it.At, "%s is a formula name and has no value %s", first, key)
	case key == "":
		n.diags.Errorf("vary-name", it.At, "%s is a block; name the field that is varied", first).WithHint("%s.FIELD, for instance %s", first, or(example(m), "east.scale"))
	default:
		f, spec := fieldOf(m, key)
		switch {
		case f == nil && m.body != nil:
			e := n.diags.Errorf("vary-name", it.At, "the block %s has no field %s", first, key)
			if _, isValue := m.def.Export(key); isValue {
				e.WithHint("%s is a result of the block; a field or a formula name can be varied", it.Text)
			} else if ex := example(m); ex != "" {
				e.WithHint("for instance %s", ex)
			}
		case f == nil:
		case !spec.Quantity || len(f.List) != 1:
			n.diags.Errorf("vary-name", it.At, "%s is no single quantity in the document that could be varied", it.Text).WithHint("give the field one value in its block first, or name a formula line that holds it")
		default:
			return m
		}
	}
	return nil
}

// fieldOf is the field of a block by its name, or nil.
func fieldOf(n *node, key string) (at *field.Field, spec field.Spec) {
	if n.body == nil {
		return nil, spec
	}
	field.Top(n.body, func(f *field.Field, s field.Spec) {
		if s.Name == key {
			at, spec = f, s
		}
	})
	return at, spec
}

// example is a field of a block that can be varied, as BLOCK.FIELD.
func example(n *node) (name string) {
	if n.body != nil {
		field.Top(n.body, func(f *field.Field, s field.Spec) {
			if name == "" && s.Quantity && f.Given && len(f.List) == 1 {
				name = n.name + "." + s.Name
			}
		})
	}
	return name
}

// following is what needs one of some nodes, they among it.
func (d *run) following(of []*node) map[*node]bool {
	out := map[*node]bool{}
	for _, n := range of {
		out[n] = true
	}
	for grown := true; grown; {
		grown = false
		for _, n := range d.nodes {
			if !out[n] && slices.ContainsFunc(n.needs, func(m *node) bool { return out[m] }) {
				out[n], grown = true, true
			}
		}
	}
	return out
}

// needed is all that some nodes rest on, they among it.
func (d *run) needed(of []*node) map[*node]bool {
	out := map[*node]bool{}
	var visit func(n *node)
	visit = func(n *node) {
		if !out[n] {
			out[n] = true
			for _, m := range n.needs {
				visit(m)
			}
		}
	}
	for _, n := range of {
		visit(n)
	}
	return out
}

// Setting is the value of a formula name or of a field of a block, as it stands.
func (s scope) Setting(name string) (quantity.Value, bool) {
	first, key := cutPath(name)
	m := s.d.names[formula.Normal(first)]
	switch {
	case m == nil || m.failed:
	case m.kind == lineNode:
		return m.value, true
	default:
		if f, spec := fieldOf(m, key); f != nil && len(f.Value.SI) > 0 {
			v := f.Value
			if v.Unit.Text == "" {
				v.Unit = spec.Unit(s.d.system)
			}
			return v, true
		}
	}
	return quantity.Value{}, false
}

// WhatIf runs what follows from names, once with the values of each case set.
func (s scope) WhatIf(cases [][]exhibit.Override) []block.Outcome {
	out := make([]block.Outcome, len(cases))
	next := make(chan int, len(cases))
	for i := range cases {
		next <- i
	}
	close(next)
	var group sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), len(cases)) {
		group.Go(func() {
			for i := range next {
				out[i] = s.d.whatIf(s.n, cases[i])
			}
		})
	}
	group.Wait()
	return out
}

// whatIf runs one case for a vary block.
func (d *run) whatIf(asks *node, set []exhibit.Override) (out block.Outcome) {
	at := slices.Index(d.nodes, asks)
	o := Options{Provenance: d.options.Provenance}
	o.Overrides = slices.DeleteFunc(slices.Clone(d.options.Overrides), func(a exhibit.Override) bool {
		return slices.ContainsFunc(set, func(b exhibit.Override) bool { return formula.Normal(a.Name) == formula.Normal(b.Name) })
	})
	o.Overrides = append(o.Overrides, set...)
	w := &run{src: d.src, options: o, files: d.files, names: map[string]*node{}, checked: map[string]*node{}}
	w.read()
	w.declare()
	w.link()
	if len(w.nodes) != len(d.nodes) {
		panic("document: a value that was set changed the nodes of the document")
	}
	var varied []*node
	for _, s := range set {
		first, _ := cutPath(s.Name)
		varied = append(varied, w.names[formula.Normal(first)])
	}
	moves, all := w.following(varied), d.needed([]*node{asks})
	asking := w.nodes[at]
	var run []*node
	for i, n := range w.nodes {
		base := d.nodes[i]
		switch {
		case n == asking || !all[base]:
		case moves[n]:
			run = append(run, n)
		default:
			n.diags, n.failed = nil, base.failed
			n.result, n.key = base.result, base.key
			n.value, n.unit, n.digits = base.value, base.unit, base.digits
			n.rows, n.relation = base.rows, base.relation
		}
	}
	for _, n := range run {
		n.needs = slices.DeleteFunc(n.needs, func(m *node) bool { return !slices.Contains(run, m) })
	}
	whole := w.nodes
	w.nodes = run
	w.execute()
	for _, n := range run {
		if i := slices.IndexFunc(n.diags, func(m diag.Diagnostic) bool { return m.Severity == diag.Error }); i >= 0 {
			out.Failed = n.diags[i].Summary
			if n.kind == blockNode {
				out.Failed = n.name + ": " + out.Failed
			}
			return out
		}
	}
	for _, it := range asking.body.(block.Varies).Asked() {
		tree, findings := formula.ParseExpr(it.Text, nil)
		var v quantity.Value
		if len(findings) == 0 {
			v, findings = formula.Evaluate(tree, scope{d: w, n: asking})
		}
		switch {
		case len(findings) > 0:
			out.Failed = findings[0].Summary
			return out
		case len(v.SI) != 1:
			out.Failed = it.Text + " is no single number"
			return out
		}
		out.Values = append(out.Values, v.SI[0])
	}
	for i, n := range whole {
		if all[d.nodes[i]] && checks(n) && !n.failed {
			for _, c := range w.checksOf(n) {
				out.Checks = append(out.Checks, block.Verdict{Check: c.ID, OK: c.OK})
			}
		}
	}
	return out
}

// rests is all that a what-if of a block can depend on: the text of every node that
// it rests on, and what they gave. ok is false where that is not known.
func (s scope) rests() (string, bool) {
	all := s.d.needed([]*node{s.n})
	said := []any{s.d.options.Overrides, s.d.system}
	for _, n := range s.d.nodes {
		switch {
		case !all[n] || n == s.n:
		case n.kind == blockNode:
			if n.key == "" {
				return "", false
			}
			said = append(said, n.name, n.key) // its fields are in it as written
		default:
			said = append(said, n.name, strings.TrimSpace(n.source.Text), n.value, n.rows)
		}
	}
	return hashed(content(viewpoint{}, said...)), true
}
