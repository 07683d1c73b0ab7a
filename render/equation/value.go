package equation

import (
	"strconv"
	"strings"

	"quoin/calc/quantity"
)

// longest column set in full; beyond it the middle is left out.
const column = 12

// value sets a number, a column or a matrix; item (counted from 1) is marked as governing.
func value(v quantity.Value, unit quantity.Unit, digits, item int) piece {
	if digits == 0 {
		digits = quantity.Digits
	}
	show := func(si float64) piece { return digit(quantity.Format(unit.From(si), digits)) }
	if v.Shape == quantity.Number {
		if len(v.SI) == 0 {
			return words("no value")
		}
		return withUnit(show(v.SI[0]), unit.Pretty())
	}
	if len(v.SI) == 0 {
		return words("[ ]")
	}
	across, down := 1, v.Len()
	if v.Shape == quantity.Rows {
		across = v.Width
	}
	var rows [][]piece
	for i := range down {
		if down > column && i >= 3 && i < down-1 && i+1 != item {
			if i == 3 {
				rows = append(rows, dots(min(across, column), "⋮"))
			}
			continue
		}
		var row []piece
		for j := range across {
			if across > column && j >= 3 && j < across-1 {
				if j == 3 {
					row = append(row, words("⋯"))
				}
				continue
			}
			p := show(v.SI[i*across+j])
			if i+1 == item {
				p = governing(p)
			}
			row = append(row, p)
		}
		rows = append(rows, row)
	}
	return withUnit(matrix(rows), unit.Pretty())
}

func dots(n int, sign string) []piece {
	out := make([]piece, n)
	for i := range out {
		out[i] = words(sign)
	}
	return out
}

// matrix sets rows in square brackets.
func matrix(rows [][]piece) piece {
	out := piece{bind: atom, talk: atom}
	var xml, text strings.Builder
	for i, row := range rows {
		line, high := 0.0, 0.0
		xml.WriteString("<mtr>")
		for j, p := range row {
			if i+j > 0 {
				text.WriteString(map[bool]string{true: "; ", false: ", "}[j == 0])
			}
			xml.WriteString(`<mtd class="n">` + p.xml + "</mtd>")
			text.WriteString(p.text)
			line += p.wide + 0.6
			high = max(high, p.high)
		}
		xml.WriteString("</mtr>")
		out.wide, out.high = max(out.wide, line), out.high+high+0.15
	}
	out.xml, out.text = "<mtable>"+xml.String()+"</mtable>", text.String()
	out.high = max(out.high, 2)
	return out.enclosed("[", "]")
}

// digit sets a number as displayed; "1.2×10⁻⁵" becomes a product.
func digit(text string) piece {
	sign := ""
	if rest, ok := strings.CutPrefix(text, "\u2212"); ok {
		sign, text = "\u2212", rest
	}
	mantissa, exponent, scientific := strings.Cut(text, "×10")
	out := token("mn", mantissa, width(mantissa))
	out.side = number
	if scientific {
		e := plainExponent(exponent)
		out.xml += `<mo lspace="0.1em" rspace="0.1em">×</mo><msup><mn>10</mn><mn>` + escape(e) + `</mn></msup>`
		out.text += "×10^" + e
		out.wide += 1.9 + 0.7*width(e)
		out.bind, out.talk = product, product
		out.xml = out.one()
	}
	if sign != "" {
		out.xml = `<mrow><mo form="prefix">` + sign + `</mo>` + out.xml + `</mrow>`
		out.text = sign + out.text
		out.wide += 0.6
		out.bind, out.talk, out.side = minus, minus, other
	}
	return out
}

var lowered = strings.NewReplacer("⁰", "0", "¹", "1", "²", "2", "³", "3", "⁴", "4", "⁵", "5", "⁶", "6", "⁷", "7", "⁸", "8", "⁹", "9", "⁻", "\u2212")

func plainExponent(raised string) string { return lowered.Replace(raised) }

// literal sets a number as it was written.
func literal(text, unit string) piece {
	mantissa, exponent, ok := strings.Cut(strings.ToLower(text), "e")
	p := digit(text)
	if n, err := strconv.Atoi(exponent); ok && err == nil {
		raised := strings.NewReplacer("-", "\u2212").Replace(strconv.Itoa(n))
		p = digit(mantissa + "×10" + raised)
	}
	u, err := quantity.ParseUnit(unit)
	if err != nil {
		return withUnit(p, unit)
	}
	return withUnit(p, u.Pretty())
}

// withUnit puts an upright unit after a number.
func withUnit(p piece, unit string) piece {
	if unit == "" || unit == "1" {
		return p
	}
	out := join(p, thin(), words(unit))
	out.side = number
	out.xml = out.one()
	out.bind, out.talk = product, product
	if p.bind == minus {
		out.bind, out.talk, out.side = minus, minus, other
	}
	return out
}
