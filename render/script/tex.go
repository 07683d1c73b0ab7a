package script

import (
	"errors"
	"fmt"
	"regexp"
	"strconv"
	"strings"
	"unicode/utf16"

	"github.com/dop251/goja"
)

// texLength is how long one formula may be, in bytes.
const texLength = 20000

// Fault is what is wrong with a formula.
type Fault struct {
	Reason string // a clause without a full stop
	At     int    // the character where it stands, from 1; one past the last: the end; 0: not known
	Length int    // of what stands there, in characters; 0 at the end
	Hint   string // what to do, or ""
}

func (f *Fault) Error() string {
	switch {
	case f.At == 0:
		return f.Reason
	case f.Length == 0:
		return f.Reason + ", at the end"
	}
	return f.Reason + ", at character " + strconv.Itoa(f.At)
}

// TeX sets TeX as MathML, in a line or displayed. What is wrong with src comes back
// as a [*Fault]; any other error is one of the program.
func TeX(src string, display bool) (mathml string, err error) {
	if len(src) > texLength {
		return "", &Fault{Reason: fmt.Sprintf("the formula has %d characters; %d are allowed", len(src), texLength)}
	}
	text, err := call(texLimit, func(m *machine) goja.Callable { return m.tex }, src, display)
	if errors.Is(err, errTooLong) || errors.Is(err, errTooDeep) {
		return "", &Fault{Reason: "the formula " + err.Error()}
	}
	if err != nil {
		return "", cleaned(err, src)
	}
	if text, err = purified(text); err != nil {
		return "", &Fault{Reason: "the formula " + err.Error()}
	}
	for _, r := range text {
		if deceives(r) {
			return "", &Fault{Reason: fmt.Sprintf("the formula makes U+%04X, which does not show or changes the order of the line", r), Hint: "delete it"}
		}
	}
	return text, nil
}

var (
	position = regexp.MustCompile(`(?s) at (?:position (\d+)|end of input):.*$`)
	// What the typesetter says, and how we say it.
	sayings = []struct {
		said         *regexp.Regexp
		reason, hint string
	}{
		{regexp.MustCompile(`^Unsupported function name: (.*)$`), "there is no command $1", `check its spelling; words are written \text{...}`},
		{regexp.MustCompile(`^Function "(.*)" is not trusted$`), "$1 is not allowed", "write the formula without it"},
		{regexp.MustCompile(`^No such environment: (.*)$`), "there is no environment $1", "check its spelling, as in matrix, cases or aligned"},
		{regexp.MustCompile(`^Unexpected end of input in a macro argument, expected '}'$`), "an argument is missing", "close it with }, or write it as {...}"},
		{regexp.MustCompile(`^Unexpected end of input in (?:a macro argument|.*), expected '?(.*?)'?$`), "the formula ends where $1 is expected", ""},
		{regexp.MustCompile(`^Expected group (?:as|after) (?:argument to )?'(.*)'$`), "$1 has nothing after it", "write {...} after it"},
		{regexp.MustCompile(`^Expected '?(.*?)'?, got 'EOF'$`), "the formula ends where $1 is expected", ""},
		{regexp.MustCompile(`^Expected 'EOF', got '&'$`), `& cannot stand here`, `it parts the columns of an environment; write \& for the sign`},
		{regexp.MustCompile(`^Expected 'EOF', got '#'$`), `# cannot stand here`, `write \# for the sign`},
		{regexp.MustCompile(`^Expected 'EOF', got '(.*)'$`), "$1 cannot stand here", ""},
		{regexp.MustCompile(`^Expected '(.*)', got '(.*)'$`), "$2 stands where $1 is expected", ""},
		{regexp.MustCompile(`^Expected (& or .*)$`), "the formula ends where $1 is expected", ""},
		{regexp.MustCompile(`^Unexpected character: .*$`), "this character has no meaning in a formula", `words are written \text{...}`},
		{regexp.MustCompile(`^Can't use function '(.*)' in (math|text) mode$`), "$1 cannot stand here", ""},
		{regexp.MustCompile(`^Invalid color: '(.*)'$`), "there is no colour $1", "write a name, as in red, or #rrggbb"},
		{regexp.MustCompile(`^Too many expansions.*$`), "the formula expands without end", "write it without commands of its own"},
		{regexp.MustCompile(`^(Double superscript|Double subscript)$`), "$1", "put braces around what belongs together"},
	}
)

// cleaned turns an exception of the typesetter into words for a reader. What it did
// not foresee says nothing to a reader but that the formula cannot be read.
func cleaned(err error, src string) error {
	var thrown *goja.Exception
	if !errors.As(err, &thrown) {
		return err
	}
	o, ok := thrown.Value().(*goja.Object)
	if !ok || o.Get("name") == nil || o.Get("name").String() != "ParseError" || o.Get("message") == nil {
		return &Fault{Reason: "the formula cannot be read", Hint: "simplify it step by step to find what is not understood"}
	}
	f := &Fault{}
	text := strings.Join(strings.Fields(position.ReplaceAllString(o.Get("message").String(), "")), " ")
	if m := position.FindStringSubmatch(o.Get("message").String()); m != nil {
		f.place(src, m[1])
	}
	for _, s := range sayings {
		if m := s.said.FindStringSubmatchIndex(text); m != nil {
			f.Reason, f.Hint = string(s.said.ExpandString(nil, s.reason, text, m)), s.hint
			return f
		}
	}
	if f.At == 0 || text == "" { // about the typesetter's own parts
		f.Reason = "the formula cannot be read"
		return f
	}
	f.Reason = strings.ToLower(text[:1]) + text[1:]
	return f
}

// place sets where the fault is: at a position in UTF-16 units from 1, or at the
// end for "".
func (f *Fault) place(src, at string) {
	f.At = len([]rune(src)) + 1
	n, err := strconv.Atoi(at)
	units := utf16.Encode([]rune(src))
	if err != nil || n < 1 || n > len(units) {
		return
	}
	rest := []rune(string(utf16.Decode(units[n-1:])))
	f.At, f.Length = f.At-len(rest), 1
	if rest[0] == '\\' {
		for f.Length < len(rest) && (rest[f.Length] >= 'a' && rest[f.Length] <= 'z' || rest[f.Length] >= 'A' && rest[f.Length] <= 'Z') {
			f.Length++
		}
		if f.Length == 1 && len(rest) > 1 {
			f.Length = 2
		}
	}
}
