package diag

import (
	"fmt"
	"io"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"golang.org/x/text/width"
)

// widest is how much of a source line is shown, in characters.
const widest = 160

// Write lays messages out for a reader: file:line:column, severity, summary and,
// in parentheses, the code by which the page of diagnostics explains it; the source line; a caret under the range; the hint. source gives the text of
// a line of a file (counted from 1), or false if it has none.
func Write(w io.Writer, list List, source func(file string, line int) (string, bool)) error {
	for _, d := range list {
		if _, err := fmt.Fprintf(w, "%s: %s: %s (%s)\n", Printable(d.Range.String()), d.Severity, Printable(d.Summary), d.Code); err != nil {
			return err
		}
		if d.Range.Line > 0 && source != nil {
			if text, ok := source(d.Range.File, d.Range.Line); ok {
				line, caret := excerpt(text, d.Range)
				if _, err := fmt.Fprintf(w, "    %s\n    %s\n", line, caret); err != nil {
					return err
				}
			}
		}
		if d.Hint != "" {
			if _, err := fmt.Fprintf(w, "    hint: %s\n", Printable(d.Hint)); err != nil {
				return err
			}
		}
	}
	return nil
}

// excerpt returns the line and the caret row under it, cut to a readable window
// around the range (… marks a cut), tabs shown as single blanks. Columns do not
// count a byte order mark at the beginning of the file.
func excerpt(text string, at Range) (line, caret string) {
	if at.Line == 1 {
		text = strings.TrimPrefix(text, "\uFEFF")
	}
	runes := []rune(Printable(strings.TrimRight(text, "\r\n")))
	start := min(max(at.Column-1, 0), len(runes))
	end := at.EndColumn - 1
	if at.EndLine > at.Line || end > len(runes) {
		end = len(runes)
	}
	end = max(end, start+1)
	if len(runes) > widest {
		first := max(0, min(start-widest/4, len(runes)-widest))
		cut := first+widest < len(runes)
		runes = slices.Clone(runes[first : first+widest])
		if first > 0 {
			runes[0] = '…'
		}
		if cut {
			runes[widest-1] = '…'
		}
		start, end = start-first, min(end-first, widest)
	}
	before, under := 0, 0
	for i, r := range runes[:min(end, len(runes))] {
		if i < start {
			before += cells(r)
		} else {
			under += cells(r)
		}
	}
	return string(runes), strings.Repeat(" ", before) + strings.Repeat("^", max(1, under))
}

// cells is how many columns of a terminal a character takes.
func cells(r rune) int {
	switch k := width.LookupRune(r).Kind(); {
	case unicode.In(r, unicode.Mn, unicode.Me):
		return 0
	case k == width.EastAsianWide, k == width.EastAsianFullwidth:
		return 2
	}
	return 1
}

// Printable replaces every character that a terminal would act on, or that
// would hide or reorder text, so that a source line cannot drive the screen.
func Printable(s string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\t':
			return ' '
		case r == utf8.RuneError, unicode.IsControl(r), unicode.Is(unicode.Cf, r), unicode.Is(unicode.Zl, r), unicode.Is(unicode.Zp, r):
			return '\uFFFD'
		}
		return r
	}, s)
}
