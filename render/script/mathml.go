package script

import (
	"errors"
	"regexp"
	"strings"
	"unicode"
)

// What the typesetter makes goes into the page as markup. So it is read once more:
// elements of mathematics alone, and of their attributes and styles those that say
// how mathematics looks. What is not known is left out, what is no element of
// mathematics is an error.

var (
	mathTag   = regexp.MustCompile(`^<(/?)([a-z]+)((?: [a-z:-]+=(?:"[^"<>]*"|'[^'<>]*'))*) ?/?>`)
	attribute = regexp.MustCompile(` ([a-z:-]+)=["']([^"']*)["']`)
	element   = regexp.MustCompile(`^(?:m[a-z]+|semantics|span)$`)

	attributes = allowed(`accent accentunder align columnalign columnlines columnspacing depth display displaystyle fence form frame height
		largeop linebreak linethickness lspace mathbackground mathcolor mathsize mathvariant maxsize minsize movablelimits notation
		rowalign rowlines rowspacing rspace scriptlevel separator stretchy symmetric voffset width xmlns class style`)
	value = regexp.MustCompile(`^[A-Za-z0-9 .,:/#%+-]*$`)

	// Styles and what each may be.
	length = `-?(?:\d+\.?\d*|\.\d+)(?:em|ex|px|pt|%)?`
	styles = map[string]*regexp.Regexp{
		"color":           regexp.MustCompile(`^#[0-9a-fA-F]{3,8}$`),
		"display":         regexp.MustCompile(`^(?:block math|flex|inline-block)$`),
		"justify-content": regexp.MustCompile(`^center$`),
		"position":        regexp.MustCompile(`^(?:relative|absolute)$`),
		"text-align":      regexp.MustCompile(`^-?[a-z-]+$`),
		"font-style":      regexp.MustCompile(`^(?:italic|normal)$`),
		"font-weight":     regexp.MustCompile(`^(?:bold|normal)$`),
		"font-family":     regexp.MustCompile(`^[A-Za-z ,-]+$`),
		"math-depth":      regexp.MustCompile(`^\d$`),
		"white-space":     regexp.MustCompile(`^[a-z-]+$`),
		"transform":       regexp.MustCompile(`^scaleX\(-1\)$`),
	}
)

func init() {
	for name := range allowed(`width height left right bottom margin-left padding padding-top padding-bottom padding-left padding-right`) {
		styles[name] = regexp.MustCompile(`^` + length + `(?: ` + length + `){0,3}$`)
	}
	for name := range allowed(`border border-top border-bottom border-left border-right`) {
		styles[name] = regexp.MustCompile(`^` + length + ` (?:solid|dashed|double)(?: #[0-9a-fA-F]{3,8})?$`)
	}
}

func allowed(names string) map[string]bool {
	out := map[string]bool{}
	for _, n := range strings.Fields(names) {
		out[n] = true
	}
	return out
}

var errMarkup = errors.New("makes something that is no mathematics")

// purified is the markup of a formula with what is known alone.
func purified(markup string) (string, error) {
	var out strings.Builder
	for {
		text, rest, more := strings.Cut(markup, "<")
		out.WriteString(text)
		if !more {
			return out.String(), nil
		}
		m := mathTag.FindStringSubmatch("<" + rest)
		if m == nil || !element.MatchString(m[2]) {
			return "", errMarkup
		}
		out.WriteString("<" + m[1] + m[2])
		for _, a := range attribute.FindAllStringSubmatch(m[3], -1) {
			name, text := a[1], a[2]
			switch {
			case !attributes[name]:
				continue
			case name == "style":
				if text = styled(text); text == "" {
					continue
				}
			case !value.MatchString(text):
				continue
			}
			out.WriteString(` ` + name + `="` + text + `"`)
		}
		if strings.HasSuffix(m[0], "/>") {
			out.WriteByte('/')
		}
		out.WriteByte('>')
		markup = rest[len(m[0])-1:]
	}
}

// styled is the declarations of a style attribute that are known.
func styled(text string) string {
	var out strings.Builder
	for _, d := range strings.Split(text, ";") {
		name, v, _ := strings.Cut(d, ":")
		if known := styles[name]; known != nil && known.MatchString(v) {
			out.WriteString(name + ":" + v + ";")
		}
	}
	return out.String()
}

// deceives tells whether a character does not show, or changes the order in which
// a line is read. The invisible operators of mathematics and the zero-width space
// that carries an accent are the typesetter's own.
func deceives(r rune) bool {
	switch {
	case unicode.IsControl(r), unicode.Is(unicode.Bidi_Control, r), r == '\u00ad', r == '\ufeff', r == '\u2028', r == '\u2029', r == '\ufffd':
		return true
	}
	return r >= 0xFFF9 && r <= 0xFFFB || r >= 0xE0000 && r <= 0xE007F
}
