// Package expr is the tree of a formula as plain data. It is made and evaluated
// in calc/document/formula and typeset in render/equation.
package expr

import "quoin/calc/quantity"

// Op tells what a node is.
type Op string

const (
	Literal Op = "literal" // Text as written without the unit; Unit the unit as written; Value
	Name    Op = "name"    // Text: "V", "m.T" (normalised: NFKC, Greek letters spelt out)
	Item    Op = "item"    // Args[0] indexed by Args[1], counted from 1
	Call    Op = "call"    // Text: a function ("sqrt") or a block's function ("rs.PSA"); Args
	List    Op = "list"    // [a, b, c]
	Neg     Op = "neg"
	Add     Op = "+"
	Sub     Op = "-"
	Mul     Op = "*"
	Div     Op = "/"
	Pow     Op = "^"
	Less    Op = "<"
	AtMost  Op = "<="
	More    Op = ">"
	AtLeast Op = ">="
	Equal   Op = "=="
	Within  Op = "within" // Args[0] is a comparison, Args[1] the tolerance
	And     Op = "and"
	Or      Op = "or"
	Not     Op = "not"
)

// Node is one node of a formula. One struct serves every Op.
type Node struct {
	Op   Op      `json:"op"`
	Text string  `json:"text,omitempty"`
	Unit string  `json:"unit,omitempty"` // Literal: as written; Call "num": the unit asked for
	Args []*Node `json:"args,omitempty"`
	// From and To are byte offsets into the text that was parsed.
	From int `json:"from,omitempty"`
	To   int `json:"to,omitempty"`

	// What follows is filled in by evaluation.

	// Value of the node; nil where a branch was not taken.
	Value *quantity.Value `json:"value,omitempty"`
	// ID of the value in the registry, for leaves that stand for one: "V", "m.T[1]".
	ID string `json:"id,omitempty"`
	// Taken marks, item by item, which argument governs: of an if the branch
	// (counted from 1: the second argument is 1, the third 2), of a min or max
	// the governing argument, or the governing item where there is one argument.
	Taken []int `json:"taken,omitempty"`
	// Digits is how many significant digits the substituted number is shown
	// with, so that the numbers as shown give the result as shown.
	Digits int `json:"digits,omitempty"`
}

// Leaf tells whether the node is substituted as one value: a literal, a name, an
// item of one, or a call of a block's function.
func (n *Node) Leaf() bool {
	switch n.Op {
	case Literal, Name:
		return true
	case Item:
		return n.Args[0].Leaf()
	case Call:
		return isMethod(n.Text)
	}
	return false
}

func isMethod(name string) bool {
	for i := range name {
		if name[i] == '.' {
			return true
		}
	}
	return false
}

// Walk visits the node and all below it, parents first.
func (n *Node) Walk(visit func(*Node)) {
	if n == nil {
		return
	}
	visit(n)
	for _, a := range n.Args {
		a.Walk(visit)
	}
}
