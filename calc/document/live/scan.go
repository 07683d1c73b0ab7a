package live

import (
	"fmt"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"quoin/calc/document/formula"
)

// scan looks over a text before it is parsed: every character that has no place
// in a pipeline is named with its exact range. It returns the text for the
// parser: letters and digits that it does not know as such (subscripts) are
// replaced by as many plain ones, so that places agree.
func scan(text string) (string, *Error) {
	if t := strings.TrimSpace(text); t == "" {
		return "", whole(text).fail("no value is named", usage)
	}
	if !utf8.ValidString(text) {
		return "", whole(text).fail("this is not UTF-8 text", "")
	}
	var plain strings.Builder
	for i := 0; i < len(text); {
		n := tokenEnd(text[i:])
		token := text[i : i+n]
		at := span{i, n}
		i += n
		switch c := token[0]; {
		case c == ' ' || c == '\t' || c == '\n' || c == '\r':
			plain.WriteByte(' ')
			continue
		case c == '|':
			if strings.TrimSpace(text[i:]) == "" {
				return "", at.fail("a function is missing after the last |", usage)
			}
		case c == '"' || c == '`':
			if n < 2 || token[n-1] != c || strings.Contains(token, "\n") {
				return "", at.fail("this text has no closing "+string(c), "a text stands in quotes, on one line")
			}
			if strings.Contains(token, "{{") || strings.Contains(token, "}}") {
				return "", at.fail("braces cannot stand in a text", "")
			}
		case c == '.':
			if fault := path(token, at); fault != nil {
				return "", fault
			}
			plain.WriteString(ascii(token))
			continue
		case c >= '0' && c <= '9':
		case wordEnd(token) > 0:
			if functionNamed(token) == nil {
				return "", wrongWord(token, at)
			}
		default:
			return "", wrongSign(text[at.offset:], at)
		}
		plain.WriteString(token)
	}
	return plain.String(), nil
}

// tokenEnd is the length of the token at the start of s (s is not empty): a
// blank, a string, a number, a word, a chain of fields, or one character.
func tokenEnd(s string) int {
	if s == "" {
		return 0
	}
	switch c := s[0]; {
	case c == '"':
		for i := 1; i < len(s); i++ {
			if s[i] == '\\' {
				i++
			} else if s[i] == '"' {
				return i + 1
			}
		}
		return len(s)
	case c == '`':
		if i := strings.IndexByte(s[1:], '`'); i >= 0 {
			return i + 2
		}
		return len(s)
	case c >= '0' && c <= '9':
		n := strings.IndexFunc(s, func(r rune) bool { return r != '.' && r != '_' && !unicode.IsLetter(r) && !unicode.IsDigit(r) })
		if n < 0 {
			n = len(s)
		}
		return n
	case c == '.':
		n := 0
		for n < len(s) && s[n] == '.' {
			w := wordEnd(s[n+1:])
			n += 1 + w
			if w == 0 {
				break
			}
		}
		return n
	}
	if n := wordEnd(s); n > 0 {
		return n
	}
	_, n := utf8.DecodeRuneInString(s)
	return n
}

// wordEnd is the length of the letters, digits and _ at the start of s.
func wordEnd(s string) int {
	n := strings.IndexFunc(s, func(r rune) bool { return r == utf8.RuneError || !letter(r) })
	if n < 0 {
		return len(s)
	}
	return n
}

// letter tells what a name is made of: letters, marks and digits of any kind.
func letter(r rune) bool {
	return r == '_' || unicode.IsLetter(r) || unicode.IsNumber(r) || unicode.IsMark(r)
}

// ascii replaces what text/template takes for no letter or digit.
func ascii(chain string) string {
	var b strings.Builder
	for _, r := range chain {
		if r == '.' || r == '_' || unicode.IsLetter(r) || unicode.IsDigit(r) {
			b.WriteRune(r)
		} else {
			b.WriteString(strings.Repeat("_", utf8.RuneLen(r)))
		}
	}
	return b.String()
}

// path checks a chain of fields.
func path(token string, at span) *Error {
	if token == "." {
		return at.fail("a dot alone names no value", usage)
	}
	if strings.HasSuffix(token, ".") {
		return at.fail("a name is missing after the last dot", usage)
	}
	for _, word := range strings.Split(token[1:], ".") {
		if !formula.ValidName(word) {
			return at.fail(fmt.Sprintf("%q is not a name", short(word)), "a name is Latin and Greek letters, digits and _, a letter first; choose an item with | item 1")
		}
	}
	return nil
}

var controls = []string{"if", "else", "end", "range", "with", "define", "block", "template", "break", "continue", "nil", "true", "false"}

// refused are functions that text/template or its libraries have and a package
// has not.
var refused = []string{"index", "get", "default", "and", "or", "not", "eq", "ne", "lt", "le", "gt", "ge", "len", "slice", "print", "printf",
	"println", "html", "js", "urlquery", "call", "add", "sub", "mul", "div", "mod", "max", "min", "round", "floor", "ceil"}

func wrongWord(word string, at span) *Error {
	switch {
	case slices.Contains(controls, word):
		return at.fail(word+" has no place in a package", "a live value is one pipeline: "+usage)
	case word == "index" || word == "get" || word == "slice":
		return at.fail(word+" is not allowed", "choose an item with | item 1")
	case slices.Contains(refused, word):
		return at.fail(word+" is not allowed", "compute it in a formula line and show its name")
	}
	return at.fail(fmt.Sprintf("there is no function %q", short(word)), nearestFunction(word))
}

// wrongSign names a character that has no place.
func wrongSign(rest string, at span) *Error {
	switch {
	case rest[0] == '$' || strings.HasPrefix(rest, ":=") || rest[0] == '=':
		return at.fail("a live value has no variables", "set the value in a formula line and show its name")
	case rest[0] == '(' || rest[0] == ')':
		return at.fail("a live value has no parentheses", "join functions with |: "+usage)
	case rest[0] == '[' || rest[0] == ']':
		return at.fail("brackets cannot stand here", "choose an item with | item 1")
	case strings.HasPrefix(rest, "/*"):
		at.length = 2
		return at.fail("a live value has no comments", "write <!-- --> outside of it")
	case rest[0] == '-' && (at.offset == 0 || len(rest) == 1):
		return at.fail("a live value does not trim blanks", "write {{ and }} without -")
	case rest[0] == '-' && len(rest) > 1 && rest[1] >= '0' && rest[1] <= '9':
		return at.fail("a count is not negative", "items and digits count from 1")
	case strings.ContainsRune("+-*/^%<>!&", rune(rest[0])):
		return at.fail("a live value does not compute", "compute it in a formula line and show its name")
	}
	r, _ := utf8.DecodeRuneInString(rest)
	return at.fail(fmt.Sprintf("%q cannot stand here", r), usage)
}

// short cuts a word to what fits a message.
func short(word string) string {
	if r := []rune(word); len(r) > 40 {
		return string(r[:40]) + "..."
	}
	return word
}
