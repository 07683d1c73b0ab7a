package block

import (
	"slices"

	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

var checkingKind = Kind{
	Name: "checking", Doc: "the record of the checker: scope, method, and values of the checker's own beside those of the calculation", Makes: "record of checking", Nameless: true,
	New:     func() Body { return &checking{} },
	Exports: []Export{{"count", "number of values computed by the checker", ""}, {"differing", "how many of them differ by more than the tolerance", ""}},
}

type checking struct {
	common
	By     field.Field  `name:"by" is:"text" need:"yes" label:"checked by" doc:"initials of the checker, who is not the preparer"`
	Date   field.Field  `name:"date" is:"text" need:"yes" label:"date" doc:"YYYY-MM-DD"`
	Scope  field.Field  `name:"scope" is:"text" need:"yes" label:"scope" doc:"what was checked, and what was not"`
	Method field.Field  `name:"method" is:"text" need:"yes" label:"method" doc:"how: by hand, by another model, by another program"`
	Within field.Field  `name:"within" is:"number" must:"positive" default:"1 %" label:"agreement within" doc:"difference that counts as agreement, relative to the checker's value"`
	Values []recomputed `name:"values" doc:"values that the checker computed"`
}

type recomputed struct {
	Of   field.Field `name:"of" is:"any" need:"yes" doc:"a value of the calculation: V, elf.V or m.T[1]"`
	Own  field.Field `name:"own" is:"any" need:"yes" doc:"the checker's own value, with its unit"`
	By   field.Field `name:"by" is:"text" doc:"initials, where they differ from those of the block"`
	Date field.Field `name:"date" is:"text" doc:"YYYY-MM-DD, likewise"`
	Note field.Field `name:"note" is:"text" doc:"how it was computed"`
}

// Checkers are the fields that name who checked, for the document to hold to who
// prepared.
func (b *checking) Checkers() []field.Field {
	out := []field.Field{b.By}
	for _, v := range b.Values {
		if v.By.Given {
			out = append(out, v.By)
		}
	}
	return out
}

// Run compares the checker's values with the calculation's, each as a check.
func (b *checking) Run(r *Run) {
	t := exhibit.Table{ID: r.Stem(), Caption: Lines(&b.common, "Values computed by the checker"),
		Columns: []exhibit.Column{Words("value"), {Head: "of this calculation", Right: true}, {Head: "of the checker", Right: true}, Col("difference", percent), Words("by"), Words("date"), Words("note")}}
	seen, differing := map[string]bool{}, 0
	for _, v := range b.Values {
		text := v.Of.Written + " == " + v.Own.Written + " within " + b.Within.Written
		if seen[text] {
			r.Fail(v.Of, "check-twice", "%s is compared with the same value twice", v.Of.Written)
			continue
		}
		seen[text] = true
		if v.Of.Value.Shape != quantity.Number || v.Own.Value.Shape != quantity.Number {
			r.Fail(v.Of, "shape", "one value is compared with one; take an item, as in m.T[1]")
			continue
		}
		if leads(v.Of.Tree) == "" {
			r.Fail(v.Of, "checking-value", "%s names no value of the calculation", v.Of.Written).WithHint("of: V, or elf.V; the checker's value stands under own")
			continue
		}
		tree := &expr.Node{Op: expr.Within, Args: []*expr.Node{{Op: expr.Equal, Args: []*expr.Node{copied(v.Of.Tree), copied(v.Own.Tree)}}, copied(b.Within.Tree)}}
		rows, relation, findings := formula.EvaluateCheck(tree, treeScope{v.Of.Tree, v.Own.Tree})
		if len(findings) > 0 {
			f := r.Fail(v.Own, findings[0].Code, "%s: %s", v.Of.Written, findings[0].Summary)
			if findings[0].Hint != "" {
				f.WithHint("%s", findings[0].Hint)
			}
			continue
		}
		by, date := v.By.Text(), v.Date.Text()
		if by == "" {
			by = b.By.Text()
		}
		if date == "" {
			date = b.Date.Text()
		}
		for _, c := range CheckRows(text, tree, rows, relation, r.System()) {
			c.Description, c.RefText = v.Of.Written+", computed by the checker "+by, "record of checking"
			if !c.OK {
				differing++
			}
			r.Checks = append(r.Checks, c)
			demand := c.Demand
			demand.ID = leads(v.Of.Tree)
			difference := exhibit.Cell{Text: "–"}
			if c.Limit.Value != 0 {
				difference = Cell((c.Demand.Value-c.Limit.Value)/c.Limit.Value, percent)
				difference.Numbers[0].Digits = 2
			}
			t.Rows = append(t.Rows, []exhibit.Cell{{Symbol: v.Of.Tree}, {Numbers: []exhibit.Number{demand}}, {Numbers: []exhibit.Number{c.Limit}}, difference, {Text: by}, {Text: date}, {Text: v.Note.Text()}})
		}
	}
	r.Number("count", float64(len(b.Values)), pure)
	r.Number("differing", float64(differing), pure)
	r.Checking = append(r.Checking, exhibit.Checking{By: b.By.Text(), Date: b.Date.Text(), Scope: b.Scope.Text(), Method: b.Method.Text(), Values: len(b.Values), Differing: differing})
	if len(t.Rows) > 0 {
		r.Table(t)
	}
}

// copied is a tree that may be written into.
func copied(n *expr.Node) *expr.Node {
	c := *n
	c.Args = make([]*expr.Node, len(n.Args))
	for i, a := range n.Args {
		c.Args[i] = copied(a)
	}
	return &c
}

// treeScope answers what evaluated trees hold.
type treeScope []*expr.Node

func (s treeScope) find(op expr.Op, text string, args []quantity.Value) (quantity.Value, string, error) {
	var found *expr.Node
	var walk func(n *expr.Node)
	walk = func(n *expr.Node) {
		if n.Op == op && n.Text == text && n.Value != nil && (op == expr.Name || slices.EqualFunc(n.Args, args, func(a *expr.Node, v quantity.Value) bool { return a.Value != nil && slices.Equal(a.Value.SI, v.SI) })) {
			found = n
		}
		for _, a := range n.Args {
			walk(a)
		}
	}
	for _, n := range s {
		walk(n)
	}
	if found == nil {
		panic("block: " + text + " is not in an evaluated tree")
	}
	return *found.Value, found.ID, nil
}

// Value is the value of a name.
func (s treeScope) Value(path string) (quantity.Value, string, error) {
	return s.find(expr.Name, path, nil)
}

// Call is the value of a function of a block.
func (s treeScope) Call(path string, args []quantity.Value) (quantity.Value, string, error) {
	return s.find(expr.Call, path, args)
}
