package markdown

import (
	"fmt"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"github.com/yuin/goldmark/text"
)

// What is wrong with a formula by its structure alone is found here, where its
// place is known: marks without their partners, ^ and _ with nothing after them,
// and commands that a formula of a package does not have. Which commands there
// are, the typesetter knows.

// texFault is the first thing wrong with a formula, from byte at to byte end.
type texFault struct {
	at, end       int
	summary, hint string
}

// refused are the commands that define, link, load or address, by their reason.
var refused = map[string]string{}

func init() {
	for reason, commands := range map[string]string{
		"a formula defines no commands":            `\def \gdef \edef \xdef \let \futurelet \global \long \newcommand \renewcommand \providecommand \DeclareMathOperator`,
		"a formula holds no links":                 `\href \url \ref \eqref \label`,
		"a formula loads no files":                 `\includegraphics \input \include`,
		"a formula holds no markup of the page":    `\html \htmlClass \htmlId \htmlStyle \htmlData \class \id \cssId \style \data`,
		"a formula is not part of another formula": `\( \) \[ \]`,
	} {
		for _, c := range strings.Fields(commands) {
			refused[c] = reason
		}
	}
}

// tex checks the structure of a formula that stands in parts of the source.
func (c *converter) tex(parts []text.Segment) {
	f := faultOf(joined(parts, c.text))
	if f == nil {
		return
	}
	place := func(offset int) int {
		for _, p := range parts {
			if offset < p.Stop-p.Start {
				return p.Start + offset
			}
			offset -= p.Stop - p.Start
		}
		return parts[len(parts)-1].Stop
	}
	c.list.Errorf("tex", c.span(place(f.at), place(f.end-1)+1), "%s", f.summary).WithHint("%s", f.hint)
}

// texReader reads a formula; open holds what waits for its partner.
type texReader struct {
	s    string
	i    int
	open []opener
}

type opener struct {
	what    string // "{", `\left` or an environment's name after `\begin`
	at, end int
}

// faultOf is the first fault of a formula, nil without one.
func faultOf(s string) *texFault {
	r := &texReader{s: s}
	for r.i < len(s) {
		if f := r.step(); f != nil {
			return f
		}
	}
	if n := len(r.open); n > 0 {
		return r.open[n-1].unclosed()
	}
	return nil
}

func (o opener) unclosed() *texFault {
	switch env, isEnv := strings.CutPrefix(o.what, `\begin`); {
	case isEnv:
		return &texFault{o.at, o.end, fmt.Sprintf(`\begin{%s} without \end{%s}`, env, env), fmt.Sprintf(`close it with \end{%s}`, env)}
	case o.what == "{":
		return &texFault{o.at, o.end, "{ without }", `close it with }, or write \{ for a brace that is seen`}
	}
	return &texFault{o.at, o.end, `\left without \right`, `close it with \right and a delimiter; \right. shows none`}
}

// step reads one token.
func (r *texReader) step() *texFault {
	at := r.i
	switch c := r.s[at]; c {
	case '\\':
		return r.command()
	case '{':
		if live := strings.TrimLeft(r.s[at+1:], "{ \n"); strings.HasPrefix(r.s[at:], "{{") && len(live) > 1 && live[0] == '.' && (live[1] == '_' || unicode.IsLetter(rune(live[1]))) {
			return &texFault{at, at + 2, "a live value cannot stand in a formula", "put it beside the formula, as in $V$ = {{ .V }}"}
		}
		r.push("{", at, at+1)
	case '}':
		return r.pop("{", at, at+1)
	case '^', '_':
		rest := strings.TrimLeft(r.s[at+1:], " \t\n")
		if rest == "" || strings.ContainsRune("}&^_'", rune(rest[0])) || ends(rest) {
			return &texFault{at, at + 1, string(c) + " has nothing after it", `write ` + string(c) + `{...}, or \` + string(c) + ` for the mark itself in \text{}`}
		}
	case '%':
		return &texFault{at, at + 1, "% hides the rest of the formula", `write \% for the sign`}
	}
	r.i = at + 1
	return nil
}

// ends tells whether a text begins with a command before which something ends.
func ends(s string) bool {
	switch commandOf(s) {
	case `\\`, `\cr`, `\right`, `\end`, `\middle`:
		return true
	}
	return false
}

// commandOf is the command that a text begins with: \ and letters, or \ and one
// other character; "" without one.
func commandOf(s string) string {
	if s == "" || s[0] != '\\' {
		return ""
	}
	n := 1
	for n < len(s) && (s[n] >= 'a' && s[n] <= 'z' || s[n] >= 'A' && s[n] <= 'Z') {
		n++
	}
	if n == 1 {
		_, size := utf8.DecodeRuneInString(s[1:])
		n += size
	}
	return s[:n]
}

func (r *texReader) command() *texFault {
	at, name := r.i, commandOf(r.s[r.i:])
	r.i += len(name)
	rest := r.s[r.i:]
	if reason := refused[name]; reason != "" {
		return &texFault{at, r.i, name + " is not allowed: " + reason, "write the formula without it"}
	}
	switch name {
	case `\`:
		return &texFault{at, r.i, `\ with nothing after it`, `write \\ for a new line, or delete it`}
	case `\verb`:
		rest = strings.TrimPrefix(rest, "*")
		_, n := utf8.DecodeRuneInString(rest)
		end := strings.Index(rest[n:], rest[:n])
		if n == 0 || end < 0 {
			return &texFault{at, r.i, `\verb without its end`, `write it as \verb|...|, or use \text{...}`}
		}
		r.i = len(r.s) - len(rest) + n + end + n
	case `\char`:
		if c, ok := charOf(rest); ok && (c > unicode.MaxRune || unicode.IsControl(c) || reorders(c) || hides(c)) {
			return &texFault{at, r.i, fmt.Sprintf(`\char makes U+%04X, which does not show or changes the order of the line`, c), "delete it"}
		}
	case `\left`, `\right`:
		d := strings.TrimLeft(rest, " \t\n")
		switch {
		case d == "":
			return &texFault{at, r.i, name + " without a delimiter", `write a bracket after it, or a point for none: ` + name + `.`}
		case d[0] == '{' || d[0] == '}':
			return &texFault{at, r.i, name + " without a delimiter", `a brace that is seen is written ` + name + `\` + d[:1]}
		}
		if name == `\left` {
			r.push(name, at, r.i)
			return nil
		}
		return r.pop(`\left`, at, r.i)
	case `\begin`, `\end`:
		env, ok := strings.CutPrefix(strings.TrimLeft(rest, " \t\n"), "{")
		end := strings.IndexAny(env, "{}\\")
		if !ok || end < 0 || env[end] != '}' || end == 0 {
			return &texFault{at, r.i, name + " names no environment", `write ` + name + `{matrix} or another name`}
		}
		r.i = len(r.s) - len(env) + end + 1
		if name == `\begin` {
			r.push(`\begin`+env[:end], at, r.i)
			return nil
		}
		return r.pop(`\begin`+env[:end], at, r.i)
	}
	return nil
}

func (r *texReader) push(what string, at, end int) {
	r.open = append(r.open, opener{what, at, end})
	r.i = end
}

// pop takes the opener that a closing mark answers.
func (r *texReader) pop(what string, at, end int) *texFault {
	r.i = end
	last := len(r.open) - 1
	if last >= 0 && r.open[last].what == what {
		r.open = r.open[:last]
		return nil
	}
	closing := r.s[at:end]
	for i := last; i >= 0; i-- {
		if r.open[i].what == what {
			return r.open[last].unclosed()
		}
	}
	if env, ok := strings.CutPrefix(what, `\begin`); ok {
		if last >= 0 && strings.HasPrefix(r.open[last].what, `\begin`) {
			began := strings.TrimPrefix(r.open[last].what, `\begin`)
			return &texFault{at, end, fmt.Sprintf(`\begin{%s} is closed by \end{%s}`, began, env), fmt.Sprintf(`close it with \end{%s}`, began)}
		}
		return &texFault{at, end, fmt.Sprintf(`\end{%s} without \begin{%s}`, env, env), "delete it, or write where it begins"}
	}
	hint := "delete it, or write where it begins"
	if what == "{" {
		hint = `delete it, or write \} for a brace that is seen`
	}
	return &texFault{at, end, closing + " without " + what, hint}
}

// charOf is the character that follows \char: a decimal, 'octal or "hexadecimal number.
func charOf(s string) (rune, bool) {
	s = strings.TrimLeft(s, " {")
	base, digits := 10, "0123456789"
	switch {
	case strings.HasPrefix(s, `"`):
		s, base, digits = s[1:], 16, "0123456789abcdefABCDEF"
	case strings.HasPrefix(s, "'"):
		s, base, digits = s[1:], 8, "01234567"
	}
	n := len(s) - len(strings.TrimLeft(s, digits))
	if n == 0 {
		return 0, false
	}
	v, err := strconv.ParseInt(s[:n], base, 32)
	if err != nil {
		return unicode.MaxRune + 1, true
	}
	return rune(v), true
}
