package document

import (
	"fmt"
	"math"
	"path"
	"runtime"
	"runtime/debug"
	"sync"

	"quoin/calc/diag"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// execute runs the nodes, independent ones side by side, each when all it needs
// is done. Nothing that a node gives depends on the order in which others ran.
func (d *run) execute() {
	waiting := map[*node]int{}
	users := map[*node][]*node{}
	ready := make(chan *node, len(d.nodes))
	for _, n := range d.nodes {
		waiting[n] = len(n.needs)
		for _, m := range n.needs {
			users[m] = append(users[m], n)
		}
		if len(n.needs) == 0 {
			ready <- n
		}
	}
	if len(d.nodes) == 0 {
		return
	}
	var mu sync.Mutex
	var group sync.WaitGroup
	done := 0
	for range min(runtime.GOMAXPROCS(0), len(d.nodes)) {
		group.Go(func() {
			for n := range ready {
				if !n.failed {
					d.runNode(n)
				} else if n.kind == blockNode && n.body != nil && !n.diags.HasErrors() {
					n.diags = append(n.diags, field.ResolveLiterals(n.body)...)
				}
				mu.Lock()
				done++
				if d.options.Progress != nil {
					d.options.Progress(done, len(d.nodes), n.name)
				}
				for _, u := range users[n] {
					u.failed = u.failed || n.failed
					if waiting[u]--; waiting[u] == 0 {
						ready <- u
					}
				}
				if done == len(d.nodes) {
					close(ready)
				}
				mu.Unlock()
			}
		})
	}
	group.Wait()
}

// runNode runs one node. A panic in an engine is a fault of this program; it
// becomes an error that names the node, so that no input ends the program.
func (d *run) runNode(n *node) {
	defer func() {
		if r := recover(); r != nil {
			n.failed = true
			n.diags.Errorf("internal", n.at, "internal error: %v", r).WithHint("this is a fault of quoin, not of the document; please report it with this file. %s", origin(debug.Stack()))
		}
	}()
	sc := scope{d: d, n: n}
	switch n.kind {
	case blockNode:
		d.runBlock(n, sc)
	case lineNode:
		d.runLine(n, sc)
	case checkNode:
		rows, relation, findings := formula.EvaluateCheck(n.line.Tree, sc)
		n.take(findings)
		n.rows, n.relation = rows, relation
		n.percentLimit()
		n.constantCheck()
	case liveNode:
		shown, err := n.pipeline.Run(sc.shown)
		if err != nil {
			n.diags.Errorf("prose-value", liveRange(n.prose, err), "%s", err).WithHint("%s", liveHint(err))
		}
		for i := range shown.Numbers {
			if x := &shown.Numbers[i]; x.Digits == 0 && x.Unit.Text == "" && whole(quantity.Pure(x.Value)) {
				x.Digits = quantity.Exact(x.Value)
			}
		}
		n.shown = shown
	}
	n.failed = n.failed || n.diags.HasErrors()
}

func (n *node) take(findings []formula.Finding) {
	for _, is := range findings {
		e := n.diags.Errorf(is.Code, n.lineSpot(is.From, is.To), "%s", is.Summary)
		e.Hint = is.Hint
		if is.Warning {
			e.Severity = diag.Warning
		}
	}
}

func (d *run) runLine(n *node, sc scope) {
	v, findings := formula.Evaluate(n.line.Tree, sc)
	n.take(findings)
	if n.diags.HasErrors() {
		return
	}
	v, finding := formula.Shown(v, n.line)
	if finding != nil {
		n.take([]formula.Finding{*finding})
		return
	}
	n.unit = v.Unit
	if n.unit.Text == "" {
		n.unit = d.system.Preferred(v.Dim)
	}
	v.Unit = n.unit
	n.value = v
	n.digits = quantity.Digits
	if whole(v) {
		n.digits = quantity.Exact(v.SI[0])
	} else if given(n.line.Tree, n.unit) {
		n.digits = 0
		for _, x := range v.SI {
			n.digits = max(n.digits, quantity.Exact(n.unit.From(x)))
		}
	}
	formula.ChooseDigits(n.line.Tree, d.system, n.unit, n.digits)
	formula.DropZeros(n.line.Tree)
}

// given tells whether a tree is numbers as typed, in the unit they are shown in:
// these are shown with all their digits.
func given(n *expr.Node, unit quantity.Unit) bool {
	switch n.Op {
	case expr.Literal:
		u, err := quantity.ParseUnit(n.Unit)
		return err == nil && u.Text == unit.Text
	case expr.Neg, expr.List:
		for _, a := range n.Args {
			if !given(a, unit) {
				return false
			}
		}
		return len(n.Args) > 0
	}
	return false
}

// whole tells a count from a measure: a pure whole number is shown without
// decimals.
func whole(v quantity.Value) bool {
	return v.Shape == quantity.Number && v.Dim.Is(quantity.None) && v.Unit.Text == "" && v.SI[0] == math.Trunc(v.SI[0]) && math.Abs(v.SI[0]) < 1e6
}

func (d *run) runBlock(n *node, sc scope) {
	n.diags = append(n.diags, field.Resolve(n.body, sc)...)
	if n.diags.HasErrors() {
		return
	}
	asking := d.asking(n)
	if asking == "" || !d.recall(n, sc, asking) {
		w := &witness{scope: sc}
		r := &block.Run{Env: w, Name: n.name, Kind: n.def, Order: n.order, Place: n.at}
		r.EchoFields(n.body)
		n.body.Run(r)
		n.asked = w.asked
		said := r.Diags
		n.result = r.Result
		n.result.Diags = nil
		n.diags = append(n.diags, said...)
		if asking != "" {
			d.remember(n, w, asking, said)
		}
	}
	if n.diags.HasErrors() {
		return
	}
	for _, v := range n.result.Values {
		if !v.Value.Finite() {
			n.diags.Errorf("internal", n.at, "internal error: %s.%s is not a finite number", n.name, v.Name).WithHint("this is a fault of quoin; please report it with this file")
		}
	}
}

// agree lets blocks that have run see each other, for what they state differently.
func (d *run) agree() {
	var all []block.Peer
	for _, n := range d.nodes {
		if n.kind == blockNode && !n.failed && n.result.Made != nil {
			all = append(all, block.Peer{Run: &block.Run{Env: scope{d: d, n: n}, Name: n.name, Kind: n.def, Order: n.order, Place: n.at, Result: n.result}, Body: n.body})
		}
	}
	block.Agree(all)
	at := 0
	for _, n := range d.nodes {
		if n.kind == blockNode && !n.failed && n.result.Made != nil {
			n.result.Warnings = all[at].Warnings
			n.diags = append(n.diags, all[at].Diags...)
			at++
		}
	}
}

// scope is what a node sees of the others.
type scope struct {
	d *run
	n *node
}

var _ formula.Scope = scope{}
var _ block.Env = scope{}

// Value finds a named value.
func (s scope) Value(path string) (quantity.Value, string, error) {
	first, rest := cutPath(path)
	to := s.d.names[first]
	switch {
	case to == nil || to.failed:
		return quantity.Value{}, "", fmt.Errorf("%s has no value", path)
	case to.kind == lineNode && rest == "":
		return to.value, to.name, nil
	case to.kind == blockNode:
		for _, v := range to.result.Values {
			if v.Name == rest {
				return v.Value, to.name + "." + rest, nil
			}
		}
		return quantity.Value{}, "", fmt.Errorf("%s gives no %s with the fields it has", first, rest)
	}
	return quantity.Value{}, "", fmt.Errorf("%s is no value", path)
}

// shown is Value in the unit that the package shows it in.
func (s scope) shown(path string) (quantity.Value, string, error) {
	v, id, err := s.Value(path)
	if v.Unit.Text == "" {
		v.Unit = s.d.system.Preferred(v.Dim)
	}
	return v, id, err
}

// Call calls a block's function.
func (s scope) Call(path string, args []quantity.Value) (quantity.Value, string, error) {
	first, rest := cutPath(path)
	to := s.d.names[first]
	if to == nil || to.failed || to.kind != blockNode {
		return quantity.Value{}, "", fmt.Errorf("%s is no function", path)
	}
	fn, ok := to.def.Function(rest)
	if !ok {
		return quantity.Value{}, "", fmt.Errorf("%s has no function %s", first, rest)
	}
	v, err := s.called(to, rest, args, func() (quantity.Value, error) { return fn.Apply(to.result.Made, args) })
	return v, "", err
}

// System is the unit system of the package.
func (s scope) System() quantity.System { return s.d.system }

// Product is the product of a block.
func (s scope) Product(name string) any { return s.d.names[formula.Normal(name)].result.Made }

// Read opens a file named in the document.
func (s scope) Read(name, role string) ([]byte, string, error) {
	full, err := below(path.Dir(s.n.part.name), name)
	if err != nil {
		return nil, "", err
	}
	data, err := s.d.files.read(full, role)
	return data, full, err
}

// sum is the SHA-256 of a file named in the document, as Read would open it; the
// file is not an input of the package by that.
func (s scope) sum(name string) (full, sum string, err error) {
	if full, err = below(path.Dir(s.n.part.name), name); err != nil {
		return "", "", err
	}
	sum, err = s.d.files.sum(full)
	return full, sum, err
}

// block is the block of a name, or nil.
func (s scope) block(name string) *node {
	if to := s.d.names[formula.Normal(name)]; to != nil && to.kind == blockNode {
		return to
	}
	return nil
}

// Curves are the computed series with this id, or all of a block.
func (s scope) Curves(id string) []exhibit.Curve {
	first, rest := cutPath(id)
	to := s.d.names[formula.Normal(first)]
	if to == nil || to.kind != blockNode {
		return nil
	}
	if rest == "" {
		return to.result.Series
	}
	var out []exhibit.Curve
	for _, c := range to.result.Series {
		if _, what := cutPath(c.ID); what == rest || len(what) > len(rest) && what[:len(rest)] == rest && what[len(rest)] == '@' {
			out = append(out, c)
		}
	}
	return out
}

// Line is a formula name's tree and description.
func (s scope) Line(name string) (*expr.Node, string) {
	if to := s.d.names[formula.Normal(name)]; to != nil && to.kind == lineNode {
		return to.line.Tree, to.line.Description
	}
	return nil, ""
}

// KindOf is the kind of a block.
func (s scope) KindOf(name string) string {
	if to := s.d.names[formula.Normal(name)]; to != nil {
		return to.def.Name
	}
	return ""
}
