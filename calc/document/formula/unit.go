package formula

import (
	"errors"
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"

	"quoin/calc/quantity"
)

// attach reads the unit that belongs to the number before p.pos: behind one
// blank or none, the longest run without blanks of unit symbols, powers, *, ·
// and /. A keyword is no unit.
func (p *parser) attach(t *token) {
	at := p.pos
	if at < len(p.text) && (p.text[at] == ' ' || p.text[at] == '\t') {
		at++
	}
	end, words := p.unitRun(at)
	if len(words) == 0 {
		return
	}
	first := p.text[words[0][0]:words[0][1]]
	switch first {
	case "as", "within", "and", "or", "not":
		return
	}
	p.pos, t.to = end, end
	t.unitText = p.text[at:end]
	u, ok := p.readUnit(at, end, words, t.text)
	if !ok {
		return
	}
	t.unit, t.value = u, u.To(t.value)
	p.powerAfterUnit(t)
}

// powerAfterUnit refuses "3 m ^2", which could mean 3 m² or 9 m².
func (p *parser) powerAfterUnit(t *token) {
	at := p.skipBlanks(p.pos)
	if at >= len(p.text) || p.text[at] != '^' {
		return
	}
	to := digits(p.text, p.skipBlanks(at+1))
	exponent := strings.TrimLeft(p.text[at+1:to], " \t")
	if exponent == "" {
		p.fail("unit-power", t.from, at+1, "the power of a unit is a number without blanks", fmt.Sprintf("write (%s %s)^x for a power of the quantity", t.text, t.unitText))
		return
	}
	p.fail("unit-power", t.from, to, "a power behind a unit and a blank can be read in two ways",
		fmt.Sprintf("write %s %s^%s for a unit, (%s %s)^%s for a power of the quantity", t.text, t.unitText, exponent, t.text, t.unitText, exponent))
}

// unitHere reads the unit at an offset, for as and num(), and leaves p.pos
// behind it. "1" is the pure number; "1/s" is read.
func (p *parser) unitHere(at int) (quantity.Unit, bool) {
	p.pos = at
	run := at
	if strings.HasPrefix(p.text[at:], "1") {
		p.pos = at + 1
		if !strings.HasPrefix(p.text[p.pos:], "/") {
			return quantity.Unit{}, true
		}
		run = p.pos + 1
	}
	end, words := p.unitRun(run)
	if len(words) == 0 {
		p.fail("missing-unit", p.pos, min(p.pos+1, len(p.text)), "a unit is missing here", "write a unit, such as kN or m/s^2")
		p.broken = true
		return quantity.Unit{}, false
	}
	p.pos = end
	return p.readUnit(at, end, words, "")
}

// unitRun finds the end of a unit that starts at from, and its words.
func (p *parser) unitRun(from int) (end int, words [][2]int) {
	i := from
	for {
		j := unitWord(p.text, i)
		if j == i {
			return end, words
		}
		words = append(words, [2]int{i, j})
		j = unitPower(p.text, j)
		end = j
		switch {
		case strings.HasPrefix(p.text[j:], "*"), strings.HasPrefix(p.text[j:], "/"):
			i = j + 1
		case strings.HasPrefix(p.text[j:], "·"):
			i = j + len("·")
		default:
			return end, words
		}
	}
}

// unitWord is the end of the word at i: % or letters, with what hangs on to
// them, so that "m.T", "m2" and "x_1" are seen whole.
func unitWord(s string, i int) int {
	if strings.HasPrefix(s[i:], "%") {
		return i + 1
	}
	from := i
	for i < len(s) {
		r, size := utf8.DecodeRuneInString(s[i:])
		switch {
		case unicode.IsLetter(r) || r == '°':
		case i > from && namePart(r):
		case i > from && r == '.' && i+1 < len(s) && letter(rune(s[i+1])):
		default:
			return i
		}
		i += size
	}
	return i
}

// unitPower is the end of the power at i, if there is one: ^2, ^-1, ^0.5, ².
func unitPower(s string, i int) int {
	if strings.HasPrefix(s[i:], "^") {
		j := i + 1
		if j < len(s) && (s[j] == '-' || s[j] == '+') {
			j++
		}
		k := digits(s, j)
		if k == j {
			return i
		}
		if k+1 < len(s) && s[k] == '.' && digits(s, k+1) > k+1 {
			k = digits(s, k+1)
		}
		return k
	}
	for i < len(s) {
		r, size := utf8.DecodeRuneInString(s[i:])
		if _, ok := raised[r]; !ok {
			break
		}
		i += size
	}
	return i
}

// readUnit reads the unit text[from:end] and reports every word that is none.
// number is the text of the number before it, "" behind as and in num(), where
// no value can be meant.
func (p *parser) readUnit(from, end int, words [][2]int, number string) (quantity.Unit, bool) {
	ok := true
	for i, w := range words {
		text := p.text[w[0]:w[1]]
		if _, err := quantity.ParseUnit(text); err != nil {
			ok = false
			hint := err.(*quantity.UnitError).Hint
			if number != "" {
				hint = p.meantProduct(hint, text, number, from, w, i)
			}
			p.fail("unknown-unit", w[0], w[1], fmt.Sprintf("%q is not a unit", text), hint)
			continue
		}
		if name := Normal(text); number != "" && len(words) > 1 && p.names != nil && p.names(name) {
			ok = false
			hint := "write the unit in another way, or rename " + name
			if i > 0 {
				before := strings.TrimRight(p.text[from:w[0]], "*/·")
				op := strings.TrimSpace(p.text[from+len(before) : w[0]])
				hint = fmt.Sprintf("for the value of %s put blanks round the sign: %s %s %s %s; for the unit rename the value", name, number, before, op, text)
			}
			p.fail("ambiguous-unit", w[0], w[1], fmt.Sprintf("%s is a unit and also a value of this document", text), hint)
		}
	}
	if !ok {
		return quantity.Unit{}, false
	}
	u, err := quantity.ParseUnit(p.text[from:end])
	if err != nil {
		var ue *quantity.UnitError
		hint := ""
		if errors.As(err, &ue) {
			hint = ue.Hint
		}
		if ue != nil && ue.Power != "" {
			at := from + ue.Offset
			if i := strings.Index(p.text[at:end], ue.Power); i >= 0 {
				at += i
			}
			p.fail("unit-power", at, min(at+len(ue.Power), end), err.Error(), hint)
		} else {
			p.fail("unknown-unit", from, end, err.Error(), hint)
		}
		return quantity.Unit{}, false
	}
	return u, true
}

// meantProduct adds to the hint what to write if a value was meant, not a unit.
func (p *parser) meantProduct(hint, text, number string, from int, at [2]int, i int) string {
	known := p.names != nil && p.names(Normal(text))
	if !known && hint != "" || !ValidName(strings.Replace(text, ".", "", 1)) {
		return hint
	}
	if strings.HasPrefix(p.text[at[1]:], "(") {
		text += "(...)"
	}
	product := fmt.Sprintf("is a * missing? write %s * %s", number, text)
	if i > 0 {
		before := strings.TrimRight(p.text[from:at[0]], "*/·")
		product = fmt.Sprintf("for the value of %s put blanks round the sign: %s %s %s %s", text, number, before, p.text[from+len(before):at[0]], text)
	}
	return product
}
