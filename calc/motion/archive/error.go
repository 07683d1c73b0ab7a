package archive

import (
	"fmt"
	"strings"
	"unicode/utf8"
)

// Error says what is wrong with a record file and where. Line and Column count from
// 1, columns in characters; a zero Line means the file as a whole.
type Error struct {
	Line, Column int
	Width        int    // characters that are meant from Column on, 1 or more where there is a Line
	Summary      string // one line, no full stop
	Hint         string // what to do; may be empty
	Excerpt      string // the line, cut to a readable length
	Channel      bool   // it is the channel asked for that does not fit, not the file
	Format       bool   // likewise the format asked for
	Unit         bool   // likewise the unit
}

func (e *Error) Error() string {
	s := e.Summary
	if e.Line > 0 {
		s = fmt.Sprintf("line %d: %s", e.Line, s)
	}
	if e.Hint != "" {
		s += " (" + e.Hint + ")"
	}
	return s
}

// ofChannel is an error about the channel asked for.
func ofChannel(summary, hint string) *Error {
	return &Error{Summary: summary, Hint: hint, Channel: true}
}

// fail is an error about the file as a whole.
func fail(summary, hint string) *Error { return &Error{Summary: summary, Hint: hint} }

// excerptLength is how much of a line an error shows, in characters.
const excerptLength = 120

// at is an error about a line: all of it, but for the blanks around.
func (f *file) at(line int, summary, hint string) *Error {
	e := &Error{Line: line, Column: 1, Width: 1, Summary: summary, Hint: hint}
	for n, text := range f.lines(line) {
		if n == line {
			e.Excerpt = excerpt(text)
			words := strings.TrimSpace(e.Excerpt)
			if words != "" {
				e.Column = column(e.Excerpt, strings.Index(e.Excerpt, words))
				e.Width = utf8.RuneCountInString(words)
			}
		}
		break
	}
	return e
}

// excerpt cuts a line to a readable length.
func excerpt(text string) string {
	r := []rune(text[:min(len(text), 4*excerptLength)])
	return string(r[:min(len(r), excerptLength)])
}

// unreadable is the error about a token that is no number, at a byte offset of its line.
func (f *file) unreadable(line int, text string, offset int, token string) *Error {
	summary, hint := unreadable(token)
	return &Error{Line: line, Column: column(text, offset), Width: max(utf8.RuneCountInString(token), 1), Summary: summary, Hint: hint, Excerpt: excerpt(text)}
}
