package equation

import (
	"strconv"
	"strings"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// writer sets one formula, in symbols or in numbers.
type writer struct {
	numbers bool
	system  quantity.System
	room    float64 // em; 0: endless
	inside  bool    // of a fraction
	topDown bool
}

func (s Setter) writer(numbers bool) writer {
	return writer{numbers: numbers, system: s.System, room: s.Width, topDown: s.TopDown}
}

// within is the writer with less room.
func (w writer) within(used float64) writer {
	if w.room > 0 {
		w.room = max(w.room-used, 6)
	}
	return w
}

func (w writer) set(n *expr.Node) piece {
	if n == nil {
		return piece{text: "", bind: atom, talk: atom}
	}
	if n.Leaf() && w.numbers && n.Value != nil && n.Op != expr.Literal {
		return w.value(n, 0)
	}
	switch n.Op {
	case expr.Literal:
		return literal(n.Text, n.Unit)
	case expr.Name:
		return name(n.Text, "")
	case expr.Item:
		return w.item(n)
	case expr.Call:
		return w.call(n)
	case expr.List:
		rows := make([][]piece, len(n.Args))
		for i, a := range n.Args {
			rows[i] = []piece{w.set(a)}
		}
		if len(rows) == 0 {
			return words("[ ]")
		}
		return matrix(rows)
	case expr.Neg:
		p := join(prefix("\u2212"), w.within(0.6).set(n.Args[0]).bound(power))
		p.bind, p.talk = minus, minus
		return p
	case expr.Not:
		p := join(prefix("not "), w.set(n.Args[0]).bound(relation))
		p.bind, p.talk = loose, loose
		return p
	case expr.Div:
		return w.fraction(n)
	case expr.Pow:
		return w.power(n)
	}
	return w.chain(n)
}

func prefix(sign string) piece {
	p := token("mo", strings.TrimSpace(sign), 0.6)
	p.xml = `<mo form="prefix">` + escape(sign) + `</mo>`
	p.text = sign
	return p
}

// value is a leaf substituted.
func (w writer) value(n *expr.Node, item int) piece {
	u := n.Value.Unit
	if u.Scale == 0 {
		u = w.system.Preferred(n.Value.Dim)
	}
	v, item := w.turned(*n.Value, item)
	return value(v, u, n.Digits, item)
}

func (w writer) item(n *expr.Node) piece {
	base, at := n.Args[0], n.Args[1]
	if base.Op == expr.Name && at.Op == expr.Literal {
		return name(base.Text, at.Text)
	}
	p := w.set(base).bound(atom)
	symbols := w
	symbols.numbers = false
	sub := symbols.set(at)
	p.sub = &split{p.one(), sub.one()}
	p.xml = "<msub>" + p.one() + sub.one() + "</msub>"
	p.wide += 0.72 * sub.wide
	p.text += "[" + sub.text + "]"
	return p
}

// fraction is a division. One inside another keeps its size, so that it can be
// read in print: with a slash where both its sides are short, else in full.
func (w writer) fraction(n *expr.Node) piece {
	in := w
	in.inside = true
	up, down := in.set(n.Args[0]), in.set(n.Args[1])
	text := up.bound(product).text + "/" + down.bound(minus).text
	if w.inside && up.wide+down.wide < slashed && up.high < 1.9 && down.high < 1.9 {
		slash := fence("/", false)
		slash.xml = `<mo stretchy="false" lspace="0" rspace="0">/</mo>`
		out := join(up.bound(product), slash, down.bound(minus))
		out.xml, out.text, out.bind, out.talk = out.one(), text, sum, product
		return out
	}
	open := "<mfrac>"
	if w.inside {
		open = `<mfrac displaystyle="true">`
	}
	return piece{
		xml:  open + up.one() + down.one() + "</mfrac>",
		text: text,
		wide: max(up.wide, down.wide) + 0.25, high: up.high + down.high + 0.25,
		bind: power, talk: product,
	}
}

// slashed is the width up to which an inner fraction is set with a slash, em.
const slashed = 7

func (w writer) power(n *expr.Node) piece {
	raised := w
	raised.inside = true
	base, exponent := w.set(n.Args[0]).bound(atom), raised.set(n.Args[1])
	out := piece{bind: power, talk: power, side: base.side, text: base.text + "^" + exponent.bound(atom).text}
	if base.sub != nil {
		out.xml = "<msubsup>" + base.sub.base + base.sub.sub + exponent.one() + "</msubsup>"
	} else {
		out.xml = "<msup>" + base.one() + exponent.one() + "</msup>"
	}
	out.wide, out.high = base.wide+0.72*exponent.wide, base.high+0.4*exponent.high
	return out
}

// governing marks a piece with a line under it.
func governing(p piece) piece {
	p.xml = `<mrow class="governs">` + p.xml + `</mrow>`
	p.text += " [governs]"
	p.high += 0.2
	return p
}

// remarked puts a remark in words under a piece.
func remarked(p piece, remark string) piece {
	q := words(remark)
	p.xml = "<munder>" + p.one() + q.xml + "</munder>"
	p.text += " [" + remark + "]"
	p.wide, p.high = max(p.wide, 0.72*q.wide), p.high+0.9
	return p
}

// taken tells whether argument i (from 1) governs for all items, or for which.
func taken(n *expr.Node, i int) (all bool, items string) {
	var some []string
	for k, t := range n.Taken {
		if t == i {
			some = append(some, strconv.Itoa(k+1))
		}
	}
	if len(n.Taken) == 0 || len(some) == 0 {
		return false, ""
	}
	if len(some) == len(n.Taken) {
		return true, ""
	}
	return false, "items " + strings.Join(some, ", ")
}
