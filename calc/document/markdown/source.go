package markdown

import (
	"bytes"
	"slices"
	"unicode"
	"unicode/utf8"

	"quoin/calc/diag"
)

// source is the text of a file with the places of its lines.
type source struct {
	name   string
	text   []byte // LF line ends
	starts []int  // offset of each line
	// The place asked for last: the next is mostly near it, and a line may be as
	// long as the file.
	lastLine, lastOffset, lastColumn int
}

func newSource(name string, text []byte) *source {
	s := &source{name: name, text: text, starts: []int{0}}
	for i, b := range text {
		if b == '\n' {
			s.starts = append(s.starts, i+1)
		}
	}
	return s
}

// line is the line of a byte, from 1.
func (s *source) line(offset int) int {
	i, found := slices.BinarySearch(s.starts, offset)
	if found {
		return i + 1
	}
	return i
}

// place is the line and column of a byte.
func (s *source) place(offset int) (line, column int) {
	offset = min(max(offset, 0), len(s.text))
	line = s.line(offset)
	start := s.starts[line-1]
	switch last := s.lastOffset; {
	case s.lastLine == line && last <= offset:
		column = s.lastColumn + utf8.RuneCount(s.text[last:offset])
	case s.lastLine == line && last-offset < offset-start:
		column = s.lastColumn - utf8.RuneCount(s.text[offset:last])
	default:
		column = 1 + utf8.RuneCount(s.text[start:offset])
	}
	s.lastLine, s.lastOffset, s.lastColumn = line, offset, column
	return line, column
}

// span is the range from byte start to byte stop; a line end at its end is left out.
func (s *source) span(start, stop int) diag.Range {
	stop = min(stop, len(s.text))
	if stop > start+1 && s.text[stop-1] == '\n' {
		stop--
	}
	r := diag.Range{File: s.name}
	r.Line, r.Column = s.place(start)
	r.EndLine, r.EndColumn = s.place(max(stop, start))
	return r
}

// wholeLine is the range of the line that holds a byte.
func (s *source) wholeLine(offset int) diag.Range {
	line := s.line(offset)
	start := s.starts[line-1]
	return s.span(start, start+len(s.lineText(line)))
}

// readable returns the text without byte order mark and with LF line ends. It
// reports bytes that are no UTF-8 (then nothing else can be said of the file)
// and characters that hide or reorder text.
func readable(name string, text []byte, list *diag.List) ([]byte, bool) {
	text = bytes.TrimPrefix(text, []byte("\ufeff"))
	text = bytes.ReplaceAll(text, []byte("\r\n"), []byte("\n"))
	line, column, valid := 1, 1, true
	for i := 0; i < len(text); {
		r, n := utf8.DecodeRune(text[i:])
		at := diag.Range{File: name, Line: line, Column: column, EndLine: line, EndColumn: column + 1}
		switch {
		case r == utf8.RuneError && n == 1:
			list.Errorf("invalid-utf8", at, "this byte (0x%02x) is not UTF-8 text", text[i]).
				WithHint("save the file as UTF-8")
			valid = false
			next := bytes.IndexByte(text[i:], '\n') // one message a line
			if next < 0 {
				return nil, false
			}
			n = next
		case reorders(r), hides(r):
			hidden(list, at, r, "this line")
		case unicode.IsControl(r) && r != '\n' && r != '\t':
			list.Errorf("control-character", at, "U+%04X is a control character", r).WithHint("delete it")
		}
		column++
		if text[i+n-1] == '\n' && r == '\n' {
			line, column = line+1, 1
		}
		i += n
	}
	return text, valid
}

// reorders tells whether a character changes the direction of text (Unicode
// Standard Annex 9: explicit formatting and implicit marks).
func reorders(r rune) bool {
	return r >= 0x202A && r <= 0x202E || r >= 0x2066 && r <= 0x2069 || r == 0x200E || r == 0x200F || r == 0x061C
}

// hides tells whether a character does not show, or shows only at the end of a
// line, where it is no part of how a language is written: soft hyphen, zero-width
// space, word joiner, a byte order mark inside the file and their like. Two names
// that look the same could differ by it.
func hides(r rune) bool {
	switch {
	case r == 0x00AD, r == 0x034F, r == 0x115F, r == 0x1160, r == 0x17B4, r == 0x17B5, r == 0x180E, r == 0x200B, r == 0x3164, r == 0xFEFF, r == 0xFFA0:
		return true
	}
	return r >= 0x2060 && r <= 0x2064 || r >= 0x206A && r <= 0x206F || r >= 0xFFF9 && r <= 0xFFFB || r >= 0xE0000 && r <= 0xE007F
}

// hidden reports a character that reorders or hides text.
func hidden(list *diag.List, at diag.Range, r rune, where string) {
	if reorders(r) {
		list.Errorf("hidden-character", at, "U+%04X changes the order in which %s is read", r, where).
			WithHint("delete it: with it, a reviewer can see another number than the one computed")
		return
	}
	list.Errorf("hidden-character", at, "U+%04X does not show in %s", r, where).
		WithHint("delete it: with it, two words that look the same can differ")
}

// front takes the front matter off and returns the text to read as markdown: of
// the same length, with blanks for the front matter, so that places agree.
func (c *converter) front() []byte {
	lines := c.starts
	if !dashes(c.lineText(1)) {
		return c.text
	}
	for i := 2; i <= len(lines); i++ {
		if !dashes(c.lineText(i)) {
			continue
		}
		end := len(c.text)
		if i < len(lines) {
			end = lines[i]
		}
		c.file.HasFront, c.file.FrontLine = true, 2
		c.file.Front = string(c.text[lines[1]:lines[i-1]])
		body := slices.Clone(c.text)
		for k := range body[:end] {
			if body[k] != '\n' {
				body[k] = ' '
			}
		}
		return body
	}
	c.file.FrontFault = true
	c.list.Errorf("open-front-matter", c.wholeLine(0), "the front matter has no closing ---").
		WithHint("write a line --- after the last line of the front matter")
	return c.text
}

// lineText is the text of a line without its end.
func (s *source) lineText(line int) []byte {
	start, end := s.starts[line-1], len(s.text)
	if line < len(s.starts) {
		end = s.starts[line] - 1
	}
	return s.text[start:end]
}

func dashes(line []byte) bool { return string(bytes.TrimRight(line, " \t")) == "---" }
