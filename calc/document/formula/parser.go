package formula

import (
	"cmp"
	"fmt"
	"regexp"
	"slices"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// Limits that keep a hostile line from exhausting the stack.
const (
	deepest = 400  // calls within calls: about 200 brackets within brackets
	longest = 2000 // levels of the tree, as of a chain of operators
	most    = 20   // findings told of one line
)

// parser is a Pratt parser. Its lexer works on demand, for only the parser
// knows where a unit is expected.
type parser struct {
	text     string
	names    Names
	pos      int   // behind tok
	last     int   // end of the token before tok
	tok      token // the one at hand
	depth    int   // brackets open
	level    int   // calls of unary under way
	logic    bool  // inside the condition of an if
	broken   bool  // a fault is reported that makes what follows meaningless
	findings []Finding
	height   map[*expr.Node]int
}

func newParser(text string, names Names) *parser {
	return &parser{text: text, names: names, height: map[*expr.Node]int{}}
}

// fail reports an error.
func (p *parser) fail(code string, from, to int, summary, hint string) {
	if len(p.findings) >= most {
		return
	}
	p.findings = append(p.findings, Finding{Code: code, From: from, To: to, Summary: summary, Hint: hint})
}

// syntax reports what is wrong with the token at hand. Only the first such
// fault is told: what follows it is guesswork.
// It is also silent where the token, or the one before, is at fault already.
func (p *parser) syntax(summary, hint string) *expr.Node {
	known := func(i Finding) bool { return i.To == p.last || i.From <= p.tok.from && p.tok.from < i.To }
	if !p.broken && !slices.ContainsFunc(p.findings, known) {
		p.fail("syntax", p.tok.from, p.tok.to, summary, hint)
	}
	p.broken = true
	return nil
}

// done returns the findings in the order of the text.
func (p *parser) done() []Finding {
	slices.SortStableFunc(p.findings, func(a, b Finding) int { return cmp.Or(cmp.Compare(a.From, b.From), cmp.Compare(a.To, b.To)) })
	return p.findings
}

// shown is the token at hand for a message.
func (p *parser) shown() string {
	if p.tok.kind == endOfText {
		return "the end of the line"
	}
	return fmt.Sprintf("%q", p.text[p.tok.from:p.tok.to])
}

// end wants the end of the text.
func (p *parser) end() {
	if p.broken || p.tok.kind == endOfText {
		return
	}
	switch p.tok.kind {
	case asWord:
		p.syntax("as has no place here", "a result unit ends a line of the form name = expression as unit")
	case assign:
		p.syntax("a second = in the line", "one line sets one name; equality is tested by ==")
	case ",":
		p.syntax("a comma has no place here", "a vector is written [a, b]; decimals have a point")
	case ")", "]":
		p.syntax(fmt.Sprintf("%s closes nothing", p.shown()), "")
	case "<", "<=", ">", ">=", "==":
		p.syntax("a comparison has no place here", "comparisons stand in check lines and in the condition of an if")
	case "within":
		p.syntax("within has no place here", "it follows an equality: check a == b within 2 %")
	case "and", "or", "not":
		p.syntax(fmt.Sprintf("%s stands only in the condition of an if", p.tok.kind), "")
	case "*", "/":
		p.syntax(fmt.Sprintf("%s has no place behind a unit and a blank", p.shown()), "a unit has no blanks: kN*m")
	default:
		p.missingOperator()
	}
}

// unitBehind is a number with its unit at the end of a text.
var unitBehind = regexp.MustCompile(`[0-9.] ?([A-Za-z][A-Za-z*/^0-9]*)$`)

// missingOperator reports two operands side by side.
func (p *parser) missingOperator() *expr.Node {
	before, _, _ := strings.Cut(p.text[p.last:], p.text[p.tok.from:p.tok.to])
	hint := "is a * missing? products are written with *"
	if p.tok.kind == number {
		hint = "is an operator missing? thousands have no separator; products are written with *"
	}
	if p.tok.kind == word && len(before) > 1 && quantity.IsSymbol(p.tok.name) {
		hint = "a unit stands one blank behind its number at most; products are written with *"
	}
	written := p.text[p.tok.from:p.tok.to]
	switch {
	case strings.HasPrefix(strings.TrimLeft(p.text[p.tok.to:], " "), ":"):
		hint = "is a comma missing before the field " + written + "?"
	case written == "if":
		hint = "write if(a < b, x, y)"
	case p.tok.kind == word && quantity.IsSymbol(written) && unitBehind.MatchString(p.text[:p.last]):
		hint = "a unit has no blanks: " + unitBehind.FindStringSubmatch(p.text[:p.last])[1] + "*" + written
	case p.tok.kind == number && strings.HasPrefix(p.text[p.tok.to:], "/"):
		hint = "an inverse unit is written 2 s^-1"
	case p.depth > 0:
		hint = "is a comma missing, or an operator?"
	}
	return p.syntax(fmt.Sprintf("%s follows without an operator", p.shown()), hint)
}

// node makes a node and guards the height of the tree.
func (p *parser) node(op expr.Op, text string, from int, args ...*expr.Node) *expr.Node {
	n := &expr.Node{Op: op, Text: text, Args: args, From: from, To: p.last}
	h := 0
	for i, a := range args {
		h = max(h, p.height[a])
		if isLogical(a.Op) && !takesCondition(op, text, i) {
			if !p.broken {
				p.fail("syntax", a.From, a.To, "a comparison is no value", "comparisons are joined by and, or, not")
			}
			p.broken = true
			return nil
		}
	}
	p.height[n] = h + 1
	if h >= longest {
		if !p.broken {
			p.fail("too-long", from, p.last, fmt.Sprintf("more than %d operations hang on each other", longest), "split the line; a long sum is written sum([...])")
		}
		p.broken = true
		return nil
	}
	return n
}

// takesCondition tells whether argument i of a node is a condition.
func takesCondition(op expr.Op, text string, i int) bool {
	switch op {
	case expr.And, expr.Or, expr.Not:
		return true
	case expr.Within, expr.Call:
		return i == 0 && (op == expr.Within || text == "if")
	}
	return false
}

// check reads the comparison of a check line.
func (p *parser) check() *expr.Node {
	if p.tok.kind == endOfText {
		return p.syntax("the check is empty", "write check a <= b")
	}
	n := p.comparison()
	if n != nil && !p.broken {
		if n.Op != expr.Within && !isComparison(n.Op) && (p.tok.kind == endOfText || p.tok.kind == assign) {
			hint := "write check a <= b"
			if p.tok.kind == assign {
				hint = "equality is tested by ==, with within: check a == b within 2 %"
			}
			return p.syntax("the check compares nothing", hint)
		}
		p.end()
	}
	return n
}

func isComparison(op expr.Op) bool {
	switch op {
	case expr.Less, expr.AtMost, expr.More, expr.AtLeast, expr.Equal:
		return true
	}
	return false
}

// comparison reads "a <= b" or "a == b within c"; without a sign it is the sum alone.
func (p *parser) comparison() *expr.Node {
	from := p.tok.from
	left := p.expression()
	op := p.tok
	if left == nil || !isComparison(expr.Op(op.kind)) {
		return left
	}
	p.next()
	right := p.expression()
	if right == nil {
		return nil
	}
	n := p.node(expr.Op(op.kind), "", from, left, right)
	switch {
	case isComparison(expr.Op(p.tok.kind)):
		return p.syntax("comparisons do not chain", "write two checks, or in an if: a < b and b < c")
	case p.tok.kind == "within" && n.Op != expr.Equal:
		return p.syntax("within follows an equality only", "write a == b within 2 %")
	case p.tok.kind == "within":
		p.next()
		tolerance := p.expression()
		if tolerance == nil {
			return nil
		}
		return p.node(expr.Within, "", from, n, tolerance)
	case n.Op == expr.Equal && !p.broken:
		p.fail("syntax", op.from, op.to, "an equality needs a tolerance", "write a == b within 2 %; a tolerance with a unit is absolute")
		p.broken = true
		return nil
	}
	return n
}

// condition reads what an if decides by: or, and, not, comparisons.
func (p *parser) condition() *expr.Node { return p.logical("or", expr.Or, p.conjunction) }

func (p *parser) conjunction() *expr.Node { return p.logical("and", expr.And, p.negation) }

func (p *parser) logical(sign kind, op expr.Op, operand func() *expr.Node) *expr.Node {
	from := p.tok.from
	left := operand()
	for left != nil && p.tok.kind == sign {
		p.next()
		right := operand()
		if right == nil {
			return nil
		}
		left = p.node(op, "", from, left, right)
	}
	return left
}

func (p *parser) negation() *expr.Node {
	from := p.tok.from
	if p.tok.kind == "not" {
		if !p.enter() {
			return nil
		}
		defer p.leave()
		p.next()
		n := p.negation()
		if n == nil {
			return nil
		}
		return p.node(expr.Not, "", from, n)
	}
	was := p.logic
	p.logic = true
	n := p.comparison()
	p.logic = was
	if n != nil && !isLogical(n.Op) && !p.broken {
		p.broken = true
		p.fail("syntax", n.From, n.To, "the condition compares nothing", "write if(a < b, x, y)")
		return nil
	}
	return n
}

func isLogical(op expr.Op) bool {
	return isComparison(op) || op == expr.Within || op == expr.And || op == expr.Or || op == expr.Not
}

// power of the binary operators, and of unary minus between * and ^.
const (
	sumPower = iota + 1
	productPower
	minusPower
	raisePower
)

func bindingPower(k kind) int {
	switch k {
	case "+", "-":
		return sumPower
	case "*", "/":
		return productPower
	case "^":
		return raisePower
	}
	return 0
}

// expression reads sums and all that binds tighter.
func (p *parser) expression() *expr.Node { return p.binary(sumPower) }

// binary reads operators that bind at least as tightly as least.
func (p *parser) binary(least int) *expr.Node {
	if !p.enter() {
		return nil
	}
	defer p.leave()
	from := p.tok.from
	left := p.operand()
	for left != nil {
		op := p.tok
		power := bindingPower(op.kind)
		if power < least || power == 0 {
			break
		}
		p.next()
		next := power + 1
		if op.kind == "^" {
			next = minusPower // from the right, and 2^-1
		}
		right := p.binary(next)
		if right == nil {
			return nil
		}
		left = p.node(expr.Op(op.kind), "", from, left, right)
	}
	return p.operandOver(left)
}

// operandOver refuses a second operand without an operator.
func (p *parser) operandOver(n *expr.Node) *expr.Node {
	if n == nil {
		return nil
	}
	switch p.tok.kind {
	case number, word, "(":
		return p.missingOperator()
	case broken:
		return nil
	}
	return n
}

// enter and leave guard the depth of recursion.
func (p *parser) enter() bool {
	p.level++
	if p.level > deepest {
		p.syntax("too many operations within each other", "split the line")
		return false
	}
	return true
}

func (p *parser) leave() { p.level-- }

// operand reads one operand with its indices.
func (p *parser) operand() *expr.Node {
	from := p.tok.from
	n := p.primary()
	for n != nil && p.tok.kind == "[" {
		if n.Op == expr.Literal {
			return p.syntax("a number has no items", "is a * missing before the vector?")
		}
		p.next()
		index := p.expression()
		if index == nil || !p.close("]") {
			return nil
		}
		n = p.node(expr.Item, "", from, n, index)
	}
	return n
}

// close reads a closing bracket.
func (p *parser) close(bracket kind) bool {
	if p.tok.kind != bracket {
		if p.tok.kind == "," || isComparison(expr.Op(p.tok.kind)) || p.tok.kind == "and" || p.tok.kind == "or" || p.tok.kind == "within" || p.tok.kind == asWord {
			if bracket == "]" && p.tok.kind == "," {
				p.syntax("one index stands between the brackets", "rows are indexed one after the other: m.phi[1][2]")
			} else {
				p.end()
			}
		} else {
			p.syntax(fmt.Sprintf("%s is missing before %s", bracket, p.shown()), "")
		}
		return false
	}
	p.next()
	return true
}

func (p *parser) primary() *expr.Node {
	t := p.tok
	switch t.kind {
	case number:
		p.next()
		n := p.node(expr.Literal, t.text, t.from)
		n.Unit, n.To = t.unitText, t.to
		v := quantity.Scalar(t.value, t.unit)
		n.Value = &v
		return n
	case word:
		p.next()
		if p.tok.kind == "(" {
			return p.call(t)
		}
		if _, ok := functions[t.name]; ok {
			p.broken = true
			p.fail("syntax", t.from, t.to, t.name+" is a function", "write "+functions[t.name].form)
			return nil
		}
		return p.node(expr.Name, t.name, t.from)
	case "-":
		if !p.enter() {
			return nil
		}
		defer p.leave()
		p.next()
		n := p.binary(minusPower + 1)
		if n == nil {
			return nil
		}
		return p.node(expr.Neg, "", t.from, n)
	case "(":
		p.next()
		var n *expr.Node
		if p.logic {
			n = p.grouped()
		} else {
			n = p.expression()
		}
		if n == nil || !p.close(")") {
			return nil
		}
		return n
	case "[":
		return p.list()
	case broken:
		return nil
	case "+":
		return p.syntax("a sign + has no place here", "leave it out")
	case endOfText:
		return p.syntax("the expression breaks off", "a number, a name or a bracket is missing")
	case "not", "and", "or":
		if !p.logic {
			return p.syntax(fmt.Sprintf("%s stands only in the condition of an if", t.kind), "")
		}
	case asWord, "within":
		return p.syntax(fmt.Sprintf("a value is missing before %s", t.kind), "")
	}
	return p.syntax(fmt.Sprintf("a value is missing before %s", p.shown()), "")
}

// list reads a vector [a, b].
func (p *parser) list() *expr.Node {
	from := p.tok.from
	p.depth++
	p.next()
	if p.tok.kind == "]" {
		return p.syntax("the vector is empty", "write [a, b]")
	}
	items, ok := p.items("]")
	if !ok {
		return nil
	}
	return p.node(expr.List, "", from, items...)
}

// items reads operands separated by commas up to the closing bracket. Blanks
// tell a separating comma from a decimal one: it is an error where only some
// commas between digits have a blank behind them.
func (p *parser) items(closing kind) ([]*expr.Node, bool) {
	was := p.logic
	p.logic = false
	defer func() { p.logic = was }()
	var items []*expr.Node
	var tight, loose []int
	for {
		n := p.expression()
		if n == nil {
			return nil, false
		}
		items = append(items, n)
		if p.tok.kind != "," {
			break
		}
		tight, loose = p.comma(tight, loose)
		p.next()
		if p.tok.kind == closing {
			p.syntax("an item is missing behind the comma", "")
			return nil, false
		}
	}
	p.depth--
	if p.tok.kind != closing {
		p.unclosed(closing)
		return nil, false
	}
	if len(tight) > 0 && len(loose) > 0 {
		p.fail("syntax", tight[0], tight[0]+1, "this comma can be read as a decimal sign", "decimals have a point; put a blank behind every comma that separates items")
		p.broken = true
	}
	p.next()
	return items, true
}

// comma notes whether the comma at hand stands tightly between digits.
func (p *parser) comma(tight, loose []int) ([]int, []int) {
	i := p.tok.from
	digit := func(j int) bool { return j >= 0 && j < len(p.text) && p.text[j] >= '0' && p.text[j] <= '9' }
	switch {
	case digit(i-1) && digit(i+1):
		tight = append(tight, i)
	case i+1 < len(p.text) && (p.text[i+1] == ' ' || p.text[i+1] == '\t'):
		loose = append(loose, i)
	}
	return tight, loose
}

func (p *parser) unclosed(closing kind) {
	switch p.tok.kind {
	case "<", "<=", ">", ">=", "==", "and", "or", "within", asWord, assign:
		p.end()
	default:
		p.syntax(fmt.Sprintf("%s is missing before %s", closing, p.shown()), "")
	}
}

// grouped reads a bracket inside a condition: a condition or a value.
func (p *parser) grouped() *expr.Node {
	return p.logical("or", expr.Or, func() *expr.Node {
		return p.logical("and", expr.And, func() *expr.Node {
			if p.tok.kind == "not" {
				return p.negation()
			}
			return p.comparison()
		})
	})
}

// call reads the arguments of a function; p.tok is the opening bracket.
func (p *parser) call(name token) *expr.Node {
	p.depth++
	p.next()
	if p.tok.kind == ")" {
		p.depth--
		p.next()
		n := p.node(expr.Call, name.name, name.from)
		p.arity(n, name)
		return n
	}
	var args []*expr.Node
	unit, ok := "", true
	switch name.name {
	case "num":
		args, unit, ok = p.numArguments()
	case "if":
		args, ok = p.ifArguments()
	default:
		args, ok = p.items(")")
	}
	if !ok {
		return nil
	}
	n := p.node(expr.Call, name.name, name.from, args...)
	if n != nil {
		n.Unit = unit
		p.arity(n, name)
	}
	return n
}

// numArguments reads "x, unit)".
func (p *parser) numArguments() (args []*expr.Node, unit string, ok bool) {
	was := p.logic
	p.logic = false
	defer func() { p.logic = was }()
	x := p.expression()
	if x == nil {
		return nil, "", false
	}
	if p.tok.kind != "," {
		p.syntax("num needs the unit to count in", "write num(x, m)")
		return nil, "", false
	}
	at := p.skipBlanks(p.pos)
	p.unitHere(at)
	unit = p.text[at:p.pos]
	p.next()
	p.depth--
	return []*expr.Node{x}, unit, p.close(")")
}

// ifArguments reads "condition, a, b)".
func (p *parser) ifArguments() ([]*expr.Node, bool) {
	was := p.logic
	p.logic = true
	cond := p.condition()
	p.logic = was
	if cond == nil {
		return nil, false
	}
	if p.tok.kind != "," {
		p.syntax("if needs a condition and two values", "write if(a < b, x, y)")
		return nil, false
	}
	p.next()
	values, ok := p.items(")")
	return append([]*expr.Node{cond}, values...), ok
}

// elsewhere is what functions of other languages are called here.
var elsewhere = map[string]string{
	"ln": "log(x), the natural logarithm", "lg": "log10(x)", "pow": "a^b", "power": "a^b", "mean": "sum(v) / len(v)", "average": "sum(v) / len(v)", "avg": "sum(v) / len(v)",
	"srss": "sqrt(sum(v^2))", "sumsq": "sum(v^2)", "arcsin": "asin(x)", "arccos": "acos(x)", "arctan": "atan(x)", "roundup": "ceil(x)", "rounddown": "floor(x)", "IF": "if(a < b, x, y)",
}

// arity tells an unknown function and a wrong number of arguments. Functions of
// blocks are known to the blocks alone.
func (p *parser) arity(n *expr.Node, name token) {
	if n == nil || strings.Contains(n.Text, ".") {
		return
	}
	f, ok := functions[n.Text]
	if !ok {
		hint := "products are written with *"
		if other := elsewhere[n.Text]; other != "" {
			hint = "write " + other
		} else if near := diag.Nearest(n.Text, functionNames); near != "" {
			hint = "did you mean " + near + "?"
		}
		p.fail("unknown-function", name.from, name.to, fmt.Sprintf("%s is no function", n.Text), hint)
		return
	}
	if len(n.Args) < f.least || f.most > 0 && len(n.Args) > f.most {
		p.fail("arity", n.From, n.To, fmt.Sprintf("%s takes %s, not %d", n.Text, f.takes(), len(n.Args)), "write "+f.form)
	}
}
