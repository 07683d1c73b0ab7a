// Package markdown turns one markdown file into plain data: front matter,
// sections of prose, calc fences, live values, footnotes and images, each with
// its place in the file. It computes nothing and writes no HTML.
//
// The dialect is CommonMark with tables, footnotes, definition lists and TeX
// math. Beyond it:
//
//   - a fence whose info string begins with the word calc is a block;
//   - {{ ... }} is a live value, and \{{ is two braces as text;
//   - [key] is a citation where the key is known;
//   - [Eq. NAME], [Fig. NAME] and [Table NAME] are references;
//   - HTML comments vanish, all other raw HTML is an error;
//   - characters that reorder or hide text are an error anywhere in the file;
//   - a fence that comes near to being a block, and is none, is an error;
//   - formulas are checked for their structure: what is opened is closed.
//
// Lines and columns count from 1, columns in characters, as the file stands on
// disk (a byte order mark is not counted).
package markdown

import (
	"fmt"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
)

// Line is a stretch of one source line: its text, and where the text starts.
type Line struct {
	Text   string
	Line   int
	Column int
}

// Fence is a calc fence. Kind is never empty; Name may be.
type Fence struct {
	Info       string // the whole info string, "calc formula shear"
	Kind, Name string
	Place      diag.Range // of the info string
	KindRange  diag.Range
	NameRange  diag.Range // zero without a name
	Body       []Line     // without line ends
	EndLine    int        // of the closing fence
}

// Live is the inside of {{ ... }} as written, but with \| of a table cell as |.
type Live struct {
	Text  string
	Range diag.Range // of the whole, braces included; At has the places inside
	Parts []Line     // the stretches that Text is made of, one after another
}

// At is the range of length bytes of the text from offset on (both are clipped
// to the text): where an error in the pipeline stands in the file.
func (l Live) At(offset, length int) diag.Range {
	offset = min(max(offset, 0), len(l.Text))
	end := min(max(offset+length, offset), len(l.Text))
	out := diag.Range{File: l.Range.File}
	out.Line, out.Column = l.place(offset, false)
	out.EndLine, out.EndColumn = l.place(end, true)
	return out
}

// place is the line and column of a byte of the text; at the seam of two parts,
// the end of the first if before, else the start of the second.
func (l Live) place(offset int, before bool) (line, column int) {
	for i, p := range l.Parts {
		if offset < len(p.Text) || offset == len(p.Text) && (before || i == len(l.Parts)-1) {
			return p.Line, p.Column + len([]rune(p.Text[:offset]))
		}
		offset -= len(p.Text)
	}
	return l.Range.Line, l.Range.Column
}

// Piece is a stretch of prose, or a fence.
type Piece struct {
	Prose []exhibit.Prose
	Fence int // an index into File.Fences; -1 for prose
}

// Section is what stands under one heading of the highest level used in the
// file. A first section without title (Level 0) holds what precedes it.
type Section struct {
	Title  []exhibit.Prose
	Anchor string
	Level  int
	Place  exhibit.Place
	Pieces []Piece
}

// ImageRef is an image that the prose shows: a cleaned slash path relative to
// the file's folder, never leading out of it.
type ImageRef struct {
	Path  string
	Range diag.Range
}

// File is one markdown file.
//
// In prose, a listing has its info string in Title; a live value is Prose{Kind: exhibit.Value, Level: index into Lives};
// a reference is Prose{Kind: exhibit.Refer, Level: index into Refers};
// an image has its path in Target and what it shows in Children; a tight list
// item (or description) holds its text directly, a loose one in paragraphs. A
// list or quote with a calc fence inside is split around it; what follows the
// fence in the same item stands as plain paragraphs.
type File struct {
	Front     string // the YAML of the front matter
	FrontLine int    // the line of its first YAML line
	HasFront  bool
	// FrontFault: why there is no front matter to read was reported.
	FrontFault bool
	Sections   []Section
	Fences     []Fence
	Lives      []Live
	Refers     []Refer
	Footnotes  []exhibit.Footnote
	Images     []ImageRef
	// Brackets are the texts in brackets that are neither links nor citations.
	Brackets []Bracket
}

// Bracket is a text in brackets that stands in the prose as it is.
type Bracket struct {
	Text  string
	Range diag.Range
}

// Parse reads a markdown file. name is its path as shown in messages; cite tells
// whether a text is the key of a reference, kind whether a word is the kind of a
// block (nil: none is). It returns all that is wrong with the file, and a file
// that is never nil; after an error the file holds what could be read.
func Parse(name string, source []byte, cite, kind func(string) bool) (file *File, list diag.List) {
	file = &File{}
	none := func(string) bool { return false }
	if cite == nil {
		cite = none
	}
	if kind == nil {
		kind = none
	}
	clean, ok := readable(name, source, &list)
	if !ok {
		file.FrontFault = true
		return file, list
	}
	c := &converter{source: newSource(name, clean), file: file, list: &list, anchors: anchors{}, kind: kind}
	body := c.front()
	defer func() {
		if fault := recover(); fault != nil {
			*file = File{Front: file.Front, FrontLine: file.FrontLine, HasFront: file.HasFront, FrontFault: file.FrontFault}
			list.Errorf("markdown-fault", diag.Range{File: name}, "this markdown cannot be read (%s)", fmt.Sprint(fault)).
				WithHint("please report the file; rewriting its last changed paragraph may help meanwhile")
		}
		list = list.Sort()
	}()
	c.document(body, cite)
	return file, list
}
