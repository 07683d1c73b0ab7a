package formula

import (
	"cmp"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// Scope gives the values that a formula refers to, with their ids in the
// registry. The text of an error is the summary of the finding; an error that
// has a method Hint() string gives the hint.
type Scope interface {
	// Value is a named value: "V", "m.T".
	Value(path string) (v quantity.Value, id string, err error)
	// Call is a function of a block: "rs.PSA" of T and z.
	Call(path string, args []quantity.Value) (v quantity.Value, id string, err error)
}

// Evaluate computes a tree that is no comparison. It fills Value, ID and Taken
// of every node reached; the branch of an if that is not taken is not reached.
// It stops at the first fault.
func Evaluate(n *expr.Node, s Scope) (quantity.Value, []Finding) {
	e := start(n, s)
	v, ok := e.eval(n)
	if !ok {
		return quantity.Value{}, e.findings
	}
	return v, e.findings
}

// evaluator walks a tree. With leaf set it computes from other leaf values and
// leaves the nodes alone (see ChooseDigits).
type evaluator struct {
	scope    Scope
	leaf     func(*expr.Node) (quantity.Value, bool)
	governs  func(same bool) // told for every if, max and min of a second evaluation
	mask     []bool          // items that count, inside a branch of an if by items
	findings []Finding
	probing  bool // looks only for the dimension of a branch that is not taken
}

func start(n *expr.Node, s Scope) *evaluator {
	n.Walk(func(n *expr.Node) {
		if n.Op != expr.Literal {
			n.Value = nil
		}
		n.ID, n.Taken, n.Digits = "", nil, 0
	})
	return &evaluator{scope: s}
}

// fail reports an error at a node. It returns what a failed evaluation returns.
func (e *evaluator) fail(code string, n *expr.Node, format string, args ...any) (quantity.Value, bool) {
	return e.failHint(code, n, "", format, args...)
}

func (e *evaluator) failHint(code string, n *expr.Node, hint, format string, args ...any) (quantity.Value, bool) {
	e.findings = append(e.findings, Finding{Code: code, From: n.From, To: n.To, Summary: fmt.Sprintf(format, args...), Hint: hint})
	return quantity.Value{}, false
}

func (e *evaluator) failRows(n *expr.Node) (quantity.Value, bool) {
	return e.failHint("shape", n, "take one row by its index, counted from 1: phi[1]", "these are rows of numbers, not a vector")
}

// take notes what governs.
func (e *evaluator) take(n *expr.Node, taken []int) bool {
	if e.leaf != nil {
		same := slices.Equal(n.Taken, taken)
		e.governs(same)
		return same
	}
	n.Taken = taken
	return true
}

// idle tells whether item i of k is one that the if around does not take.
func (e *evaluator) idle(i, k int) bool { return len(e.mask) == k && !e.mask[i] }

// eval computes a node and notes its value.
func (e *evaluator) eval(n *expr.Node) (quantity.Value, bool) {
	v, ok := e.compute(n)
	if !ok {
		return v, false
	}
	for i, x := range v.SI {
		switch {
		case !math.IsNaN(x) && !math.IsInf(x, 0):
			if x == 0 {
				v.SI = positiveZero(v.SI, i)
			}
		case e.idle(i, len(v.SI)):
			v.SI = slices.Clone(v.SI)
			v.SI[i] = 0
		case n.Leaf():
			return e.fail("domain", n, "%s%s is no finite number", n.Text, at(i, v))
		default:
			return e.fail("domain", n, "the result%s is too large to compute with", at(i, v))
		}
	}
	if e.leaf == nil {
		kept := v
		n.Value = &kept
	}
	return v, true
}

// positiveZero makes item i a zero without a sign, in a copy if need be.
func positiveZero(si []float64, i int) []float64 {
	if math.Signbit(si[i]) {
		si = slices.Clone(si)
		si[i] = 0
	}
	return si
}

func (e *evaluator) compute(n *expr.Node) (quantity.Value, bool) {
	if e.leaf != nil {
		if v, ok := e.leaf(n); ok {
			return v, true
		}
		if n.Leaf() && n.Op != expr.Literal {
			return quantity.Value{}, false // not reached the first time
		}
	}
	switch n.Op {
	case expr.Literal:
		return e.literal(n)
	case expr.Name:
		if n.Text == "pi" {
			return quantity.Pure(math.Pi), true
		}
		v, id, err := e.scope.Value(n.Text)
		return e.given(n, v, id, err)
	case expr.Item:
		return e.item(n)
	case expr.Call:
		return e.call(n)
	case expr.List:
		return e.list(n)
	case expr.Neg:
		x, ok := e.eval(n.Args[0])
		if !ok {
			return x, false
		}
		out := like(x, x.Dim, x.Unit)
		for i, v := range x.SI {
			out.SI[i] = -v
		}
		return out, true
	case expr.Add, expr.Sub, expr.Mul, expr.Div, expr.Pow:
		a, ok := e.eval(n.Args[0])
		if !ok {
			return a, false
		}
		b, ok := e.eval(n.Args[1])
		if !ok {
			return b, false
		}
		return e.arithmetic(n, a, b)
	}
	return e.failHint("syntax", n, "comparisons stand in check lines and in the condition of an if", "a comparison is no value")
}

func (e *evaluator) literal(n *expr.Node) (quantity.Value, bool) {
	if n.Value != nil {
		return *n.Value, true
	}
	tree, findings := ParseExpr(strings.TrimSpace(n.Text+" "+n.Unit), nil)
	if len(findings) > 0 || tree.Op != expr.Literal {
		panic("formula: a literal that is none: " + n.Text + " " + n.Unit)
	}
	return *tree.Value, true
}

// given takes over what the scope answers.
func (e *evaluator) given(n *expr.Node, v quantity.Value, id string, err error) (quantity.Value, bool) {
	if err != nil {
		hint := ""
		var h interface{ Hint() string }
		if errors.As(err, &h) {
			hint = h.Hint()
		}
		return e.failHint("no-value", n, hint, "%v", err)
	}
	n.ID = id
	return v, true
}

func (e *evaluator) item(n *expr.Node) (quantity.Value, bool) {
	defer e.unmasked()()
	v, ok := e.eval(n.Args[0])
	if !ok {
		return v, false
	}
	index, ok := e.eval(n.Args[1])
	if !ok {
		return index, false
	}
	if v.Shape == quantity.Number {
		return e.fail("index", n, "a number has no items")
	}
	if !index.Dim.Is(quantity.None) || index.Shape != quantity.Number || index.SI[0] != math.Trunc(index.SI[0]) {
		return e.failHint("index", n.Args[1], "items count from 1", "an index is one whole number")
	}
	i := index.SI[0]
	if i < 1 || i > float64(v.Len()) {
		what := "items"
		if v.Shape == quantity.Rows {
			what = "rows"
		}
		return e.failHint("index", n.Args[1], "items count from 1", "item %s of %s, which has %d %s", quantity.Plain(i), source(n.Args[0]), v.Len(), what)
	}
	if id := n.Args[0].ID; id != "" && e.leaf == nil {
		n.ID = fmt.Sprintf("%s[%d]", id, int(i))
	}
	return v.Item(int(i) - 1), true
}

// source names a node in a message.
func source(n *expr.Node) string {
	if n.Leaf() && n.Op != expr.Literal && n.Text != "" {
		return n.Text
	}
	return "the vector"
}

func (e *evaluator) list(n *expr.Node) (quantity.Value, bool) {
	out := quantity.Value{Shape: quantity.Vector, SI: make([]float64, 0, len(n.Args))}
	for i, a := range n.Args {
		v, ok := e.eval(a)
		if !ok {
			return v, false
		}
		if v.Shape != quantity.Number {
			return e.fail("shape", a, "an item of a vector is one number, not %s", size(v))
		}
		if i == 0 {
			out.Dim, out.Unit = v.Dim, v.Unit
		} else if !v.Dim.Is(out.Dim) {
			return e.fail("dimension", a, "item %d of the vector is %s, the first is %s", i+1, v.Dim.Name(), out.Dim.Name())
		}
		out.SI = append(out.SI, v.SI[0])
	}
	return out, true
}

func (e *evaluator) call(n *expr.Node) (quantity.Value, bool) {
	if n.Text == "if" {
		return e.conditional(n)
	}
	f, known := functions[n.Text]
	if !known || f.whole || n.Text == "interp" || len(n.Args) == 1 && (n.Text == "max" || n.Text == "min") {
		defer e.unmasked()()
	}
	args := make([]quantity.Value, len(n.Args))
	for i, a := range n.Args {
		v, ok := e.eval(a)
		if !ok {
			return v, false
		}
		args[i] = v
	}
	switch {
	case strings.Contains(n.Text, "."):
		v, id, err := e.scope.Call(n.Text, args)
		return e.given(n, v, id, err)
	case !known:
		panic("formula: no function " + n.Text)
	case f.pure != nil:
		return e.applyPure(n, f, args[0])
	}
	return f.apply(e, n, args)
}

// unmasked makes every item count until the returned function is called.
func (e *evaluator) unmasked() func() {
	was := e.mask
	e.mask = nil
	return func() { e.mask = was }
}

// ---- shapes ----

// like is a zero value of the shape and labels of v.
func like(v quantity.Value, dim quantity.Dim, u quantity.Unit) quantity.Value {
	return quantity.Value{Dim: dim, SI: make([]float64, len(v.SI)), Shape: v.Shape, Width: v.Width, Unit: u, Labels: v.Labels}
}

// shape is the shape of a result item by item: that of the operand that is no
// number. Labels are kept unless they contradict each other.
func (e *evaluator) shape(n *expr.Node, a, b quantity.Value) (quantity.Value, bool) {
	switch {
	case b.Shape == quantity.Number:
		return like(a, quantity.None, quantity.Unit{}), true
	case a.Shape == quantity.Number:
		return like(b, quantity.None, quantity.Unit{}), true
	case a.Shape != b.Shape || a.Len() != b.Len() || a.Width != b.Width:
		return e.fail("length", n, "the two sides differ in size: %s, %s", size(a), size(b))
	}
	out := like(a, quantity.None, quantity.Unit{})
	switch {
	case len(a.Labels) == 0:
		out.Labels = b.Labels
	case len(b.Labels) > 0 && !slices.Equal(a.Labels, b.Labels):
		out.Labels = nil
	}
	return out, true
}

// item is item i of what is taken item by item.
func item(v quantity.Value, i int) float64 {
	if v.Shape == quantity.Number {
		return v.SI[0]
	}
	return v.SI[i]
}

// size is a shape in words.
func size(v quantity.Value) string {
	switch v.Shape {
	case quantity.Vector:
		return fmt.Sprintf("a vector of %d", len(v.SI))
	case quantity.Rows:
		return fmt.Sprintf("%d rows of %d", v.Len(), v.Width)
	}
	return "one number"
}

// show is one SI number of v for a message.
func show(si float64, v quantity.Value) string {
	u := v.Unit
	if u.Scale == 0 {
		u = quantity.SIUnit(v.Dim)
	}
	return strings.TrimSpace(quantity.Format(u.From(si), quantity.Digits) + " " + u.Pretty())
}

// at tells which item of v is meant, for a message.
func at(i int, v quantity.Value) string {
	switch {
	case v.Shape == quantity.Number:
		return ""
	case v.Shape == quantity.Vector && i < len(v.Labels):
		return fmt.Sprintf(" (item %d, %s)", i+1, v.Labels[i])
	case v.Shape == quantity.Rows && v.Width > 0:
		return fmt.Sprintf(" (row %d, item %d)", i/v.Width+1, i%v.Width+1)
	}
	return fmt.Sprintf(" (item %d)", i+1)
}

// Shown gives a value the unit that its line asks for by "as".
func Shown(v quantity.Value, line Line) (quantity.Value, *Finding) {
	if !line.HasAs {
		return v, nil
	}
	if !v.Dim.Is(line.As.Dim) {
		return v, &Finding{Code: "dimension", From: line.AsFrom, To: line.AsTo, Hint: massHint(v.Dim, line.As.Dim),
			Summary: fmt.Sprintf("the result is %s, and %s is a unit of %s", v.Dim.Name(), cmp.Or(line.As.Text, "1"), line.As.Dim.Name())}
	}
	v.Unit = line.As
	return v, nil
}
