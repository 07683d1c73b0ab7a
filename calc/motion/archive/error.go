package archive

import "fmt"

// Error says what is wrong with a record file and where. Line and Column count from
// 1, columns in characters; a zero Line means the file as a whole.
type Error struct {
	Line, Column int
	Summary      string // one line, no full stop
	Hint         string // what to do; may be empty
	Excerpt      string // the line, cut to a readable length
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

// fail is an error about the file as a whole.
func fail(summary, hint string) *Error { return &Error{Summary: summary, Hint: hint} }

// excerptLength is how much of a line an error shows, in characters.
const excerptLength = 120

// at is an error at a place of the file.
func (f *file) at(line, column int, summary, hint string) *Error {
	e := &Error{Line: line, Column: max(column, 1), Summary: summary, Hint: hint}
	for n, text := range f.lines(line) {
		if n == line {
			r := []rune(text[:min(len(text), 4*(excerptLength+column))])
			e.Excerpt = string(r[:min(len(r), excerptLength)])
		}
		break
	}
	return e
}
