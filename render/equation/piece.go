package equation

import (
	"html"
	"strings"
	"unicode"
)

// How tightly an expression binds, loosest first.
const (
	loose = iota // and, or, commas
	relation
	sum
	product
	minus
	power
	atom
)

// piece is a part of a formula as set: its markup, the same as plain text, and
// what the setting around it needs to know.
type piece struct {
	xml  string
	text string
	wide float64 // em
	high float64 // em
	bind int     // of the markup
	talk int     // of the text, where a fraction is a solidus
	side side    // what it looks like beside a factor
	sub  *split  // base and subscript, to carry a power above the subscript
}

type split struct{ base, sub string }

// side is how a factor looks to its neighbour.
type side int

const (
	other  side = iota
	letter      // one letter, perhaps with subscripts or a power
	number      // digits at either end
)

func token(element, text string, wide float64) piece {
	return piece{xml: "<" + element + ">" + escape(text) + "</" + element + ">", text: text, wide: wide, high: 1.3, bind: atom, talk: atom}
}

// width estimates the width of text in em.
func width(text string) float64 {
	w := 0.0
	for _, r := range text {
		switch {
		case strings.ContainsRune("il.,;:|'()[]· \u202f\u2009", r):
			w += 0.29
		case unicode.IsUpper(r) || strings.ContainsRune("mw%", r):
			w += 0.7
		default:
			w += 0.51
		}
	}
	return w
}

func words(text string) piece { return token("mtext", text, width(text)) }

func operator(sign string) piece {
	p := token("mo", sign, width(sign)+0.55)
	p.text = " " + sign + " "
	return p
}

// fence is a bracket, a bar or a comma.
func fence(sign string, tall bool) piece {
	p := piece{text: sign, wide: 0.35, high: 1.3, bind: atom, talk: atom}
	p.xml = `<mo stretchy="false">` + escape(sign) + `</mo>`
	if tall {
		p.xml = `<mo stretchy="true" symmetric="true">` + escape(sign) + `</mo>`
	}
	return p
}

func comma() piece {
	p := token("mo", ",", 0.5)
	p.text = ", "
	return p
}

func thin() piece {
	return piece{xml: `<mspace width="0.1667em"/>`, text: " ", wide: 0.17, bind: atom, talk: atom}
}

// join sets pieces side by side.
func join(ps ...piece) piece {
	out := piece{bind: atom, talk: atom}
	var xml, text strings.Builder
	for _, p := range ps {
		xml.WriteString(p.xml)
		text.WriteString(p.text)
		out.wide += p.wide
		out.high = max(out.high, p.high)
	}
	out.xml, out.text = xml.String(), text.String()
	return out
}

// one is the piece as a single element.
func (p piece) one() string { return "<mrow>" + p.xml + "</mrow>" }

// bound is p in parentheses where it binds looser than least.
func (p piece) bound(least int) piece {
	in := p
	if p.talk < least {
		in.text, in.talk = "("+p.text+")", atom
	}
	if p.bind >= least {
		return in
	}
	tall := p.high > 1.9
	out := join(fence("(", tall), p, fence(")", tall))
	out.text = in.text
	return out
}

// enclosed is p between two fences, in markup and text.
func (p piece) enclosed(open, shut string) piece {
	tall := p.high > 1.9
	out := join(fence(open, tall), p, fence(shut, tall))
	out.xml = out.one()
	return out
}

// escape makes text safe inside XML; what XML does not allow becomes U+FFFD.
func escape(text string) string {
	text = strings.Map(func(r rune) rune {
		if r == '\t' || r == '\n' || r == '\r' || r >= 0x20 && r <= 0xd7ff || r >= 0xe000 && r <= 0xfffd || r >= 0x10000 && r <= 0x10ffff {
			return r
		}
		return '\ufffd'
	}, text)
	return html.EscapeString(text)
}
