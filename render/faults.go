package render

import (
	"bytes"
	"errors"
	"strings"
	"unicode/utf8"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
	"quoin/render/script"
)

// Faults is what the typesetter refuses in the document, or what is wrong with the
// templates of its office: errors with their places.
type Faults struct{ List diag.List }

// Error is the first of them.
func (f *Faults) Error() string {
	if len(f.List) == 0 {
		return "no faults"
	}
	return f.List[0].Range.String() + ": " + f.List[0].Summary
}

// faults finds the formulas of the prose that could not be set. An error that is
// none of the formula's comes back as it is.
func (r *press) faults(p *exhibit.Package, files map[string][]byte) error {
	var out Faults
	var other error
	look := finder{files: files}
	walk(p, func(n exhibit.Prose) {
		j := r.byKey[formulaKey(n.Text, n.Kind == exhibit.MathBlock)]
		if j == nil || j.err == nil {
			return
		}
		var f *script.Fault
		if !errors.As(j.err, &f) {
			other = errors.Join(other, j.err)
			return
		}
		d := out.List.Errorf("tex", look.find(n, f), "%s", f.Reason)
		if f.Hint != "" {
			d.WithHint("%s", f.Hint)
		}
	})
	if len(out.List) > 0 {
		out.List = out.List.Sort()
		return &out
	}
	return other
}

// walk visits every formula of the prose of a package.
func walk(p *exhibit.Package, visit func(exhibit.Prose)) {
	var prose func([]exhibit.Prose)
	prose = func(list []exhibit.Prose) {
		for _, n := range list {
			if n.Kind == exhibit.Math || n.Kind == exhibit.MathBlock {
				visit(n)
			}
			prose(n.Children)
		}
	}
	for _, c := range p.Chapters {
		prose(c.Title)
		for _, piece := range c.Pieces {
			prose(piece.Prose)
			if piece.Block == nil {
				continue
			}
			for _, part := range piece.Block.Parts {
				for _, it := range part.Items {
					prose(it.Prose)
				}
			}
		}
	}
	for _, f := range p.Footnotes {
		prose(f.Body)
	}
}

// finder finds formulas in the source. Equal ones are found one after another.
type finder struct {
	files map[string][]byte
	clean map[string]string // LF line ends, no byte order mark
	seen  map[place]int     // how far the formulas of a line were found
}

type place struct {
	exhibit.Place
	text string
}

// find is the range of a fault of a formula: of what stands at it where that is
// known, else of the formula, else of the line.
func (l *finder) find(n exhibit.Prose, f *script.Fault) diag.Range {
	source, start, ok := l.line(n.Place)
	if !ok {
		return diag.Range{File: n.Place.File, Line: n.Place.Line, Column: 1, EndLine: n.Place.Line, EndColumn: 2}
	}
	// A formula of several lines is written with blanks for its line ends.
	flat := strings.ReplaceAll(source, "\n", " ")
	text := strings.ReplaceAll(n.Text, "\n", " ")
	if l.seen == nil {
		l.seen = map[place]int{}
	}
	key := place{n.Place, text}
	from := max(start, l.seen[key])
	window := flat[from:min(len(flat), from+len(text)+20000)]
	for _, written := range []string{text, strings.ReplaceAll(text, "|", `\|`)} {
		at := strings.Index(window, "$"+written)
		if at++; at == 0 {
			at = strings.Index(window, written)
		}
		if at < 0 || written == "" {
			continue
		}
		at += from
		end := at + len(written)
		l.seen[key] = end
		if f.At > 0 && written == text {
			at = at + offset(text, f.At-1)
			if f.Length == 0 && at > start { // at the end: its last character
				_, size := utf8.DecodeLastRuneInString(source[:at])
				at -= size
			}
			end = at + offset(source[at:], max(1, f.Length))
		}
		return span(n.Place.File, source, at, end)
	}
	at := start + max(0, strings.IndexByte(source[start:], '$'))
	if line := source[start:]; !strings.Contains(strings.SplitN(line, "\n", 2)[0], "$") {
		at = start
	}
	return span(n.Place.File, source, at, min(at+1, len(source)))
}

// line is the text of a file and where a line begins in it.
func (l *finder) line(at exhibit.Place) (source string, start int, ok bool) {
	source, known := l.clean[at.File]
	if !known {
		data, found := l.files[at.File]
		if !found {
			return "", 0, false
		}
		data = bytes.TrimPrefix(data, []byte("\ufeff"))
		source = string(bytes.ReplaceAll(data, []byte("\r\n"), []byte("\n")))
		if l.clean == nil {
			l.clean = map[string]string{}
		}
		l.clean[at.File] = source
	}
	for n := 1; n < at.Line; n++ {
		i := strings.IndexByte(source[start:], '\n')
		if i < 0 {
			return "", 0, false
		}
		start += i + 1
	}
	return source, start, at.Line > 0
}

// offset is the byte at which a character of a text stands, counted from 0.
func offset(text string, character int) int {
	for i := range text {
		if character == 0 {
			return i
		}
		character--
	}
	return len(text)
}

// span is the range from byte at to byte end.
func span(file, source string, at, end int) diag.Range {
	r := diag.Range{File: file}
	locate := func(at int) (line, column int) {
		start := strings.LastIndexByte(source[:at], '\n') + 1
		return 1 + strings.Count(source[:at], "\n"), 1 + utf8.RuneCountInString(source[start:at])
	}
	r.Line, r.Column = locate(at)
	r.EndLine, r.EndColumn = locate(end)
	return r
}
