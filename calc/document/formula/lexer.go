package formula

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"quoin/calc/quantity"
)

// kind of a token. Operators and brackets stand for themselves.
type kind string

const (
	endOfText kind = "end"
	broken    kind = "broken" // reported already
	number    kind = "number"
	word      kind = "name"
	assign    kind = "="
	asWord    kind = "as"
)

// token is one token with its byte offsets.
type token struct {
	kind     kind
	from, to int
	name     string        // of a word: normalised
	text     string        // of a number: as written, without the unit
	unitText string        // as written
	unit     quantity.Unit // of a number
	value    float64       // SI
}

// next reads the next token into p.tok.
func (p *parser) next() {
	p.last = p.tok.to
	p.tok = p.scan()
	if p.tok.kind == broken {
		p.broken = true
	}
}

// seek goes on reading at an offset.
func (p *parser) seek(at int) {
	p.pos = at
	p.next()
}

func (p *parser) skipBlanks(i int) int {
	for i < len(p.text) && strings.IndexByte(" \t\r\n", p.text[i]) >= 0 {
		i++
	}
	return i
}

var operators = []string{"==", "<=", ">=", "<", ">", "=", "+", "-", "*", "/", "^", "(", ")", "[", "]", ","}

// mistaken are characters with one right spelling.
var mistaken = []struct{ text, hint string }{
	{"!=", "there is no comparison for unequal"}, {"**", "write ^ for a power"}, {"=<", "write <="}, {"=>", "write >="}, {"&&", "write and"}, {"||", "write or"},
	{"≤", "write <="}, {"≥", "write >="}, {"≠", "there is no comparison for unequal"}, {"−", "write -"}, {"–", "write -"}, {"×", "write *"}, {"·", "write *; a unit with · has no blanks"}, {"⋅", "write *"}, {"÷", "write /"}, {"√", "write sqrt(x)"},
	{":", "write name = expression"}, {";", "one line holds one formula; a comma separates the items of a vector"}, {"'", "thousands have no separator: write 1000"}, {"’", "thousands have no separator: write 1000"},
	{"\u00a0", "replace the no-break space by a plain one"}, {"\u202f", "replace the no-break space by nothing: thousands have no separator"}, {"\u2009", "replace the thin space by a plain one"},
	{"°", "write deg for an angle in degrees"}, {"{", "a vector is written [a, b]"}, {"}", "a vector is written [a, b]"}, {"#", "a remark stands behind a formula line only"}, {"%", "the percent sign stands behind a number: 5 %"}, {"$", "TeX stands in prose, not in formulas"}, {"\\", "TeX stands in prose, not in formulas"},
}

func (p *parser) scan() token {
	p.pos = p.skipBlanks(p.pos)
	from := p.pos
	if from >= len(p.text) {
		return token{kind: endOfText, from: from, to: from}
	}
	rest := p.text[from:]
	if c := rest[0]; c >= '0' && c <= '9' || c == '.' && len(rest) > 1 && rest[1] >= '0' && rest[1] <= '9' {
		return p.number()
	}
	r, size := utf8.DecodeRuneInString(rest)
	if letter(r) || r == '_' || unicode.IsLetter(r) {
		return p.word()
	}
	for _, m := range mistaken {
		if strings.HasPrefix(rest, m.text) {
			return p.bad(from, from+len(m.text), fmt.Sprintf("%q has no place here", m.text), m.hint)
		}
	}
	for _, op := range operators {
		if strings.HasPrefix(rest, op) {
			p.pos += len(op)
			return token{kind: kind(op), from: from, to: p.pos}
		}
	}
	if _, ok := raised[r]; ok {
		end := from + len(rest) - len(strings.TrimLeftFunc(rest, func(r rune) bool { _, ok := raised[r]; return ok }))
		return p.bad(from, end, "a raised digit stands only in units", "write ^2 for a power")
	}
	hint := ""
	if strings.HasPrefix(rest, ".") {
		hint = "a value of a block is written NAME.value without blanks"
	}
	if r == utf8.RuneError || !unicode.IsPrint(r) {
		return p.bad(from, from+size, fmt.Sprintf("the character U+%04X has no place here", r), "delete it")
	}
	return p.bad(from, from+size, fmt.Sprintf("%q has no place here", string(r)), hint)
}

var raised = map[rune]byte{'⁰': '0', '¹': '1', '²': '2', '³': '3', '⁴': '4', '⁵': '5', '⁶': '6', '⁷': '7', '⁸': '8', '⁹': '9', '⁻': '-'}

// bad reports a token that cannot be read and steps over it.
func (p *parser) bad(from, to int, summary, hint string) token {
	p.fail("syntax", from, to, summary, hint)
	p.pos = to
	return token{kind: broken, from: from, to: to}
}

// badNumber reports a number that cannot be read; it stands for one, so that
// reading goes on.
func (p *parser) badNumber(from, to int, summary, hint string) token {
	p.bad(from, to, summary, hint)
	t := token{kind: number, from: from, to: to, text: p.text[from:to]}
	p.attach(&t)
	return t
}

// word reads a name, a dotted path or a keyword.
func (p *parser) word() token {
	from, i := p.pos, p.pos
	var odd rune
	points := 0
	for i < len(p.text) {
		r, size := utf8.DecodeRuneInString(p.text[i:])
		if r == '.' && i > from {
			after, _ := utf8.DecodeRuneInString(p.text[i+1:])
			if !unicode.IsLetter(after) && after != '_' {
				break
			}
			points++
		} else if !namePart(r) {
			if !unicode.IsLetter(r) {
				break
			}
			if odd == 0 {
				odd = r
			}
		}
		i += size
	}
	p.pos = i
	written := p.text[from:i]
	if raisedLetter(odd) {
		return p.bad(from, i, fmt.Sprintf("the letter %s is raised, and no name is made of it", string(odd)), "write ^ for a power")
	}
	if odd != 0 {
		return p.bad(from, i, fmt.Sprintf("%s, and no name is made of it", foreign(odd)), "type the letter on a Latin keyboard; names take Latin and Greek letters, digits and _")
	}
	name := Normal(written)
	for part := range strings.SplitSeq(name, ".") {
		if !ValidName(part) {
			return p.bad(from, i, fmt.Sprintf("%q is no name", written), "a name starts with a letter")
		}
	}
	if points > 1 {
		return p.bad(from, i, fmt.Sprintf("%q has more than one point", written), "a value of a block is written NAME.value")
	}
	switch name {
	case "as", "within", "and", "or", "not":
		return token{kind: kind(name), from: from, to: i}
	}
	return token{kind: word, from: from, to: i, name: name}
}

// number reads a number and the unit that belongs to it.
func (p *parser) number() token {
	from := p.pos
	i := digits(p.text, from)
	whole := p.text[from:i]
	if i < len(p.text) && p.text[i] == '.' {
		j := digits(p.text, i+1)
		if j == i+1 {
			return p.badNumber(from, j, "a digit must follow the decimal point", "write "+whole+" or "+whole+".0")
		}
		i = j
	}
	if j := i + 1; i < len(p.text) && (p.text[i] == 'e' || p.text[i] == 'E') {
		if j < len(p.text) && (p.text[j] == '+' || p.text[j] == '-') {
			j++
		}
		if k := digits(p.text, j); k > j {
			i = k
		}
	}
	t := token{kind: number, from: from, to: i, text: p.text[from:i]}
	p.pos = i
	rest := p.text[i:]
	x, err := strconv.ParseFloat(t.text, 64)
	zero := strings.Trim(strings.ToLower(t.text), "0.") == "" || strings.HasPrefix(strings.TrimLeft(t.text, "0."), "e")
	switch {
	case strings.HasPrefix(rest, "_"):
		return p.badNumber(from, p.run(i), "digits are not grouped", "write 1000 without a separator")
	case whole == "0" && i == from+1 && len(rest) > 1 && strings.IndexByte("xXbBoO", rest[0]) >= 0 && (digits(rest, 1) > 1 || rest[0] == 'x' || rest[0] == 'X'):
		return p.badNumber(from, p.run(i), "numbers are written in decimals", "")
	case len(whole) > 1 && whole[0] == '0' && p.tok.kind == number && p.tok.unitText == "":
		return p.badNumber(p.tok.from, i, "digits are not grouped", "write "+p.tok.text+whole)
	case len(whole) > 1 && whole[0] == '0':
		hint := strings.TrimLeft(t.text, "0")
		if hint == "" || hint[0] < '0' || hint[0] > '9' {
			hint = "0" + hint
		}
		return p.badNumber(from, i, fmt.Sprintf("the number %s starts with a zero", t.text), "write "+hint)
	case p.depth == 0 && len(rest) > 1 && rest[0] == ',' && digits(rest, 1) > 1:
		j := i + digits(rest, 1)
		hint := fmt.Sprintf("write %s.%s, or %s%s if the comma separates thousands", t.text, p.text[i+1:j], t.text, p.text[i+1:j])
		if j-i != 4 {
			hint = fmt.Sprintf("write %s.%s", t.text, p.text[i+1:j])
		}
		return p.badNumber(from, j, "a comma is no decimal sign", hint)
	case strings.HasPrefix(rest, ".") && digits(rest, 1) > 1:
		return p.badNumber(from, p.run(i), "the number has two decimal points", "")
	case err != nil || math.IsInf(x, 0):
		return p.badNumber(from, i, fmt.Sprintf("the number %s is too large", t.text), "")
	case x == 0 && !zero:
		return p.badNumber(from, i, fmt.Sprintf("the number %s is too small", t.text), "")
	}
	t.value = x
	p.attach(&t)
	return t
}

// run is the end of the run of letters, digits, _, commas and points at i.
func (p *parser) run(i int) int {
	for i < len(p.text) {
		r, size := utf8.DecodeRuneInString(p.text[i:])
		if !namePart(r) && r != '.' {
			break
		}
		i += size
	}
	return i
}

func digits(s string, i int) int {
	for i < len(s) && s[i] >= '0' && s[i] <= '9' {
		i++
	}
	return i
}
