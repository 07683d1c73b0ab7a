package equation

import (
	"strings"

	"quoin/calc/expr"
)

// signs are the operators that stand between, with how they bind.
var signs = map[expr.Op]struct {
	sign string
	bind int
}{
	expr.Add: {"+", sum}, expr.Sub: {"\u2212", sum}, expr.Mul: {"×", product},
	expr.Less: {"<", relation}, expr.AtMost: {"≤", relation}, expr.More: {">", relation}, expr.AtLeast: {"≥", relation},
	expr.Equal: {"=", relation}, expr.Within: {"within", loose}, expr.And: {"and", loose}, expr.Or: {"or", loose},
}

// chain sets what is joined by signs of one strength, broken where it is too wide.
func (w writer) chain(n *expr.Node) piece {
	s, ok := signs[n.Op]
	if !ok || len(n.Args) != 2 {
		return words(string(n.Op))
	}
	var parts []piece // each but the first begins with its sign
	w.collect(n, s.bind, &parts)
	total := 0.0
	for _, p := range parts {
		total += p.wide
	}
	out := join(parts...)
	if w.room > 0 && total > w.room && len(parts) > 1 {
		out = lines(fill(parts, w.room, 1))
	}
	if len(parts) > 0 && s.bind == product {
		out.side = parts[0].side
	}
	out.bind, out.talk = s.bind, s.bind
	return out
}

// collect flattens the left side of a chain; the right operand stands on its own.
func (w writer) collect(n *expr.Node, bind int, parts *[]piece) {
	s := signs[n.Op]
	left, right := n.Args[0], n.Args[1]
	if l, ok := signs[left.Op]; ok && l.bind == bind && bind != relation && len(left.Args) == 2 {
		w.collect(left, bind, parts)
	} else {
		*parts = append(*parts, w.set(left).bound(bind))
	}
	least := bind + 1
	switch {
	case n.Op == expr.Add, n.Op == expr.And, n.Op == expr.Or:
		least = bind
	case bind == product:
		least = product
	case bind == relation, bind == loose:
		least = sum
	}
	p := w.within(1.2).set(right)
	switch {
	case bind >= sum && p.bind == minus: // a + (−3), a × (−3)
		p = p.bound(power)
	default:
		p = p.bound(least)
	}
	if n.Op != expr.Mul {
		op := operator(s.sign)
		if bind == loose {
			op = words("\u2002" + s.sign + "\u2002")
			op.text = " " + s.sign + " "
		}
		*parts = append(*parts, join(op, p))
		return
	}
	before := (*parts)[len(*parts)-1]
	out := join(between(before, p), p)
	out.side, out.bind = p.side, p.bind
	*parts = append(*parts, out)
}

// between is what stands between two factors.
func between(a, b piece) piece {
	if b.side == letter && (a.side == letter || a.side == number && a.bind == atom) {
		return piece{xml: `<mo lspace="0" rspace="0.1667em">&#x2062;</mo>`, text: " × ", wide: 0.17, bind: atom, talk: atom}
	}
	return operator("×")
}

// fill puts parts on lines of at most room em, the second and later ones indented.
func fill(parts []piece, room, indent float64) []piece {
	var out []piece
	var line []piece
	used := 0.0
	for _, p := range parts {
		if len(line) > 0 && used+p.wide > room {
			out, line, used = append(out, join(line...)), nil, indent
			if indent > 0 {
				line = append(line, piece{xml: `<mspace width="1em"/>`, wide: indent})
				p.xml = visible(p.xml)
			}
		}
		line, used = append(line, p), used+p.wide
	}
	return append(out, join(line...))
}

// visible turns an unwritten product sign at the start of a line into ×.
func visible(xml string) string {
	const unseen = `<mo lspace="0" rspace="0.1667em">&#x2062;</mo>`
	if rest, ok := strings.CutPrefix(xml, unseen); ok {
		return "<mo>×</mo>" + rest
	}
	return xml
}

// lines sets pieces under each other, flush left.
func lines(ps []piece) piece {
	out := piece{bind: atom, talk: atom}
	var xml strings.Builder
	for _, p := range ps {
		xml.WriteString("<mtr><mtd>" + p.xml + "</mtd></mtr>")
		out.text += p.text
		out.wide, out.high = max(out.wide, p.wide), out.high+p.high+0.3
	}
	out.xml = `<mtable class="lines" displaystyle="true">` + xml.String() + "</mtable>"
	return out
}
