package archive

import (
	"bytes"
	"encoding/binary"
	"iter"
	"strings"
	"unicode/utf16"
	"unicode/utf8"
)

// file is a record file as text. Lines are found as they are asked for: a file
// may be one line of many megabytes or ten million short ones.
type file struct {
	name string
	data []byte // as it came
	text string // decoded, without byte order mark and padding at the end
	head []string
}

// headLines is how many lines may come before the numbers.
const headLines = 50

func newFile(name string, data []byte) (*file, error) {
	if len(data) > MaxSize {
		return nil, fail("the file is larger than 256 MiB", "cut it to the record")
	}
	f := &file{name: name, data: data, text: decode(data)}
	if strings.TrimSpace(f.text) == "" && !bytes.ContainsRune(data, 0) {
		return nil, fail("the file is empty", "")
	}
	for n, line := range f.lines(1) {
		if n > headLines {
			break
		}
		f.head = append(f.head, line)
	}
	return f, nil
}

// decode turns bytes into text: UTF-8 with or without a mark, UTF-16 with a mark,
// else ISO 8859-1. Ctrl-Z, NUL and blanks at the end are padding.
func decode(data []byte) string {
	var text string
	switch {
	case bytes.HasPrefix(data, []byte{0xEF, 0xBB, 0xBF}):
		data = data[3:]
		fallthrough
	default:
		text = string(data)
		if !utf8.ValidString(text) {
			var b strings.Builder
			for _, c := range data {
				b.WriteRune(rune(c))
			}
			text = b.String()
		}
	case bytes.HasPrefix(data, []byte{0xFF, 0xFE}):
		text = wide(data[2:], binary.LittleEndian)
	case bytes.HasPrefix(data, []byte{0xFE, 0xFF}):
		text = wide(data[2:], binary.BigEndian)
	}
	return strings.TrimRight(text, " \t\r\n\f\x1a\x00")
}

func wide(data []byte, order binary.ByteOrder) string {
	units := make([]uint16, len(data)/2)
	for i := range units {
		units[i] = order.Uint16(data[2*i:])
	}
	return string(utf16.Decode(units))
}

// lines yields lines with their numbers from one on. A line ends at LF, CRLF or a lone CR.
func (f *file) lines(from int) iter.Seq2[int, string] {
	return func(yield func(int, string) bool) {
		rest := f.text
		for n := 1; ; n++ {
			i := strings.IndexAny(rest, "\r\n")
			line, next := rest, ""
			if i >= 0 {
				line, next = rest[:i], rest[i+1:]
				if rest[i] == '\r' && strings.HasPrefix(next, "\n") {
					next = next[1:]
				}
			}
			if n >= from && !yield(n, strings.TrimRight(line, "\f")) {
				return
			}
			if i < 0 {
				return
			}
			rest = next
		}
	}
}
