package equation

import (
	"fmt"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// typeset names of functions that are written otherwise: log is natural.
var spelling = map[string]string{
	"log": "ln", "asin": "arcsin", "acos": "arccos", "atan": "arctan", "cumsum": "cumulative sum", "len": "count",
}

func (w writer) call(n *expr.Node) piece {
	one := len(n.Args) == 1
	switch {
	case n.Text == "sqrt" && one:
		p := w.within(1).set(n.Args[0])
		return piece{xml: "<msqrt>" + p.one() + "</msqrt>", text: "sqrt(" + p.text + ")", wide: p.wide + 0.9, high: p.high + 0.2, bind: atom, talk: atom}
	case n.Text == "abs" && one:
		return w.within(0.7).set(n.Args[0]).enclosed("|", "|")
	case n.Text == "floor" && one:
		p := w.within(0.7).set(n.Args[0])
		q := p.enclosed("⌊", "⌋")
		q.text = "floor(" + p.text + ")"
		return q
	case n.Text == "ceil" && one:
		p := w.within(0.7).set(n.Args[0])
		q := p.enclosed("⌈", "⌉")
		q.text = "ceil(" + p.text + ")"
		return q
	case n.Text == "sum" && one:
		return w.sum(n.Args[0])
	case n.Text == "num" && len(n.Args) > 0:
		return w.pure(n)
	case n.Text == "if" && len(n.Args) == 3:
		return w.cases(n)
	}
	return w.function(n)
}

// sum is a sum over the items of a vector.
func (w writer) sum(arg *expr.Node) piece {
	p := w.within(1.6).set(arg)
	sign := piece{xml: "<mo>∑</mo>", text: "sum", wide: 1.3, high: 1.8, bind: atom, talk: atom}
	out := join(sign, p.bound(product))
	out.text = "sum(" + p.text + ")"
	out.bind, out.talk = loose, atom // how far a sum reaches shows only in parentheses
	out.xml = out.one()
	return out
}

// pure is num(x, unit): x/unit in symbols, the bare number when substituted.
func (w writer) pure(n *expr.Node) piece {
	arg := n.Args[0]
	if w.numbers && arg.Leaf() && arg.Value != nil {
		u, err := quantity.ParseUnit(n.Unit)
		if err == nil && u.Dim.Is(arg.Value.Dim) {
			bare := *arg.Value
			for i, x := range bare.SI {
				if i == 0 {
					bare.SI = append([]float64(nil), bare.SI...)
				}
				bare.SI[i] = u.From(x)
			}
			bare.Dim = quantity.None
			bare, _ = w.turned(bare, 0)
			return value(bare, quantity.Unit{}, arg.Digits, 0)
		}
	}
	unit := n.Unit
	if u, err := quantity.ParseUnit(unit); err == nil {
		unit = u.Pretty()
	}
	if unit == "" {
		unit = "1"
	}
	slash := fence("/", false)
	slash.xml = `<mo stretchy="false" lspace="0" rspace="0">/</mo>`
	out := join(w.set(arg).bound(minus), slash, words(unit))
	out.bind, out.talk = product, product
	return out
}

// cases is an if: one line a branch, the branch taken ticked.
func (w writer) cases(n *expr.Node) piece {
	out := piece{bind: loose, talk: atom}
	inner := w.within(5)
	xml, text := "", ""
	for i, c := range chainOf(n) {
		p := inner.set(c.of.Args[c.branch])
		label := words("otherwise")
		if c.branch == 1 {
			label = join(words("if\u00a0"), inner.set(c.of.Args[0]))
		}
		mark, spoken := "", ""
		if all, items := taken(c.of, c.branch); all {
			mark, spoken = "✓", " [taken]"
		} else if items != "" {
			mark, spoken = "✓ "+items, " [taken: "+items+"]"
		}
		xml += "<mtr><mtd>" + p.xml + "</mtd><mtd>" + label.xml + `</mtd><mtd><mtext class="taken">` + escape(mark) + "</mtext></mtd></mtr>"
		if i > 0 {
			text += "; "
		}
		text += p.text + " " + label.text + spoken
		out.wide = max(out.wide, p.wide+label.wide+width(mark)+2.5)
		out.high += max(p.high, label.high) + 0.45
	}
	out.xml = `<mrow><mo stretchy="true" symmetric="true">{</mo><mtable class="cases" displaystyle="true">` + xml + "</mtable></mrow>"
	out.text = "{" + text + "}"
	return out
}

// branch is one line of an if: the branch of the call that it is.
type branch struct {
	of     *expr.Node
	branch int
}

// chainOf is the lines of an if. One that stands in the last branch of another goes on
// with it, unless items of a vector take different branches.
func chainOf(n *expr.Node) []branch {
	out := []branch{{n, 1}}
	if last := n.Args[2]; last.Op == expr.Call && last.Text == "if" && len(n.Taken) <= 1 && len(last.Taken) <= 1 {
		return append(out, chainOf(last)...)
	}
	return append(out, branch{n, 2})
}

// function is name(arguments); the arguments of min and max are marked.
func (w writer) function(n *expr.Node) piece {
	head := words(n.Text)
	if s, ok := spelling[n.Text]; ok {
		head = words(s)
	}
	if n.Text == "log10" {
		head = piece{xml: `<msub><mtext>log</mtext><mn>10</mn></msub>`, text: "log10", wide: 2, high: 1.5}
	} else if n.Leaf() {
		head = name(n.Text, "")
	}
	head.bind, head.talk = atom, atom
	pick := n.Text == "min" || n.Text == "max"
	inner := w.within(head.wide + 0.7)
	args := make([]piece, len(n.Args))
	for i, a := range n.Args {
		if pick && len(n.Args) == 1 && len(n.Taken) == 1 && w.numbers && a.Leaf() && a.Value != nil {
			args[i] = inner.value(a, n.Taken[0])
			continue
		}
		p := inner.set(a)
		if pick && len(n.Args) > 1 {
			if all, items := taken(n, i+1); all {
				p = governing(p)
			} else if items != "" {
				p = remarked(p, items)
			}
		} else if pick && len(n.Taken) == 1 && !a.Leaf() {
			p = remarked(p, fmt.Sprintf("item %d", n.Taken[0]))
		}
		args[i] = p
	}
	total, tall := 0.7+head.wide, false
	for i, p := range args {
		total += p.wide + 0.5
		tall = tall || p.high > 1.9
		if i < len(args)-1 {
			args[i] = join(p, comma())
		}
	}
	body := join(args...)
	if w.room > 0 && total > w.room && len(args) > 1 {
		body = lines(fill(args, inner.room, 0))
		tall = true
	}
	out := join(head, fence("(", tall), body, fence(")", tall))
	out.xml = out.one()
	return out
}
