package ledger

import (
	"bytes"
	"fmt"
	"hash/crc32"
	"math"
	"regexp"
	"strconv"
	"strings"

	"quoin/calc/quantity"
)

// The text of frozen results is made to be read as a difference: a line a thing, in
// a fixed order, nothing aligned, nothing counted but the lines of a section. A line
// is
//
//	ID [INDEX] LABEL = TERM, TERM  ~CODE
//
// ID, LABEL and texts stand in quotes where they are no plain words. A term is a
// text, or a number with a name before it and a unit behind it where it has these.
// Items of vectors stand on lines of their own, of long ones without levels eight to
// a line. CODE is made of the line: a line that was edited is found. After the
// results come those of the revision before where they are others, section by
// section, each line with "was" before it, so that none is taken for one of the others; "-" says that
// there was nothing.

const (
	frozenFormat = 1
	firstLine    = "quoin frozen results, format "
	remark       = "# Written and read by quoin; not to be edited: each line ends with a code of its own."
	longVector   = 32 // items beyond which a vector without levels is written in runs
	runLength    = 8
	wasWord      = "was "
)

// digits is how many significant digits show a number well within a tolerance.
func digits(tolerance float64) int { return int(math.Ceil(-math.Log10(tolerance)-1e-9)) + 2 }

// head is the fields of the head by name, in order.
func (f *Frozen) head() []struct {
	name string
	to   *string
} {
	system := (*string)(&f.System)
	return []struct {
		name string
		to   *string
	}{{"document", &f.Document}, {"number", &f.Number}, {"title", &f.Title}, {"revision", &f.Revision}, {"date", &f.Date}, {"status", &f.Status},
		{"tool", &f.Tool}, {"units", system}, {"since", &f.Since}}
}

// Text is the text of frozen results: UTF-8, LF.
func (f *Frozen) Text() []byte {
	var b bytes.Buffer
	fmt.Fprintf(&b, "%s%d\n%s\n", firstLine, frozenFormat, remark)
	line := func(text string) { fmt.Fprintf(&b, "%s  ~%s\n", text, code(text)) }
	b.WriteString("\n")
	line("[document]")
	for _, h := range f.head() {
		if *h.to != "" {
			line(h.name + " = " + word(*h.to))
		}
	}
	line("tolerance = " + strconv.FormatFloat(f.Tolerance, 'g', -1, 64))
	section := func(name string, lines []string) {
		b.WriteString("\n")
		line("[" + name + " " + strconv.Itoa(len(lines)) + "]")
		for _, l := range lines {
			line(l)
		}
	}
	n := digits(f.Tolerance)
	for part, name := range sections {
		section(name, linesOf(f.Sections[part], n))
	}
	if f.Was == nil {
		return b.Bytes()
	}
	for part, name := range sections {
		if lines := before(f.Was[part], f.Sections[part], n); len(lines) > 0 {
			section(name+" before", lines)
		}
	}
	return b.Bytes()
}

// linesOf are the lines of rows, runs of long vectors on one.
func linesOf(rows []Row, digits int) []string {
	var out []string
	for i := 0; i < len(rows); {
		n := 1
		for i+n < len(rows) && rows[i+n].ID == rows[i].ID {
			n++
		}
		for j := i; j < i+n; {
			k := j + 1
			for n > longVector && k < i+n && k-j < runLength && follows(rows[k-1], rows[k]) {
				k++
			}
			out = append(out, lineOf(rows[j:k], digits))
			j = k
		}
		i += n
	}
	return out
}

// follows tells whether a row is the next item, and may stand on the same line.
func follows(a, b Row) bool {
	rowA, itemA := cutIndex(a.Index)
	rowB, itemB := cutIndex(b.Index)
	return a.Label == "" && b.Label == "" && rowA == rowB && itemB == itemA+1 && len(a.Terms) == 1 && len(b.Terms) == 1 &&
		a.Terms[0].Number && b.Terms[0].Number && a.Terms[0].Unit == b.Terms[0].Unit
}

// cutIndex is "2,3" as "2," and 3; of what is no index, 0.
func cutIndex(index string) (row string, item int) {
	at := strings.LastIndexByte(index, ',') + 1
	item, err := strconv.Atoi(index[at:])
	if err != nil || strconv.Itoa(item) != index[at:] {
		return "", 0
	}
	return index[:at], item
}

func lineOf(run []Row, digits int) string {
	var b strings.Builder
	first := run[0]
	b.WriteString(idWord(first.ID))
	switch {
	case len(run) > 1:
		_, last := cutIndex(run[len(run)-1].Index)
		fmt.Fprintf(&b, " [%s to %d]", first.Index, last)
	case first.Index != "":
		fmt.Fprintf(&b, " [%s]", first.Index)
	}
	if first.Label != "" {
		b.WriteString(" " + word(first.Label))
	}
	b.WriteString(" = ")
	for i, t := range first.Terms {
		if i > 0 {
			b.WriteString(", ")
		}
		if !t.Number {
			b.WriteString(word(t.Text))
			continue
		}
		if t.Name != "" {
			b.WriteString(t.Name + " ")
		}
		for j, r := range run {
			if j > 0 {
				b.WriteString(" ")
			}
			b.WriteString(strconv.FormatFloat(r.Terms[i].X+0, 'g', digits, 64))
		}
		if t.Unit != "" {
			b.WriteString(" " + t.Unit)
		}
	}
	return b.String()
}

// before are the lines of what was, where it is not what is.
func before(was, is []Row, digits int) []string {
	now, old := byKey(is), byKey(was)
	var out []string
	for _, r := range merged(was, is) {
		w, ok := old[r.key()]
		if !ok {
			r.Terms, r.Label = []Term{{Text: "-"}}, ""
			out = append(out, wasWord+strings.TrimSuffix(lineOf([]Row{r}, digits), `"-"`)+"-")
			continue
		}
		line := lineOf([]Row{w}, digits)
		if n, ok := now[r.key()]; !ok || lineOf([]Row{n}, digits) != line {
			out = append(out, wasWord+line)
		}
	}
	return out
}

// merged are the rows of both lists by id, each once.
func merged(a, b []Row) []Row {
	var out []Row
	seen := byKey(a)
	i := 0
	for _, r := range b {
		for i < len(a) && a[i].ID <= r.ID {
			out = append(out, a[i])
			i++
		}
		if _, ok := seen[r.key()]; !ok {
			out = append(out, r)
		}
	}
	return append(out, a[i:]...)
}

var (
	plainWords = regexp.MustCompile(`^[A-Za-z][A-Za-z0-9._:/-]*( [A-Za-z][A-Za-z0-9._:/-]*)*$`)
	plainID    = regexp.MustCompile(`^[\p{L}\p{N}_][\p{L}\p{N}_.@%/+-]*$`)
)

// word is a text as it stands in a term, or a label.
func word(s string) string {
	if plainWords.MatchString(s) {
		return s
	}
	return strconv.Quote(s)
}

func idWord(s string) string {
	if plainID.MatchString(s) {
		return s
	}
	return strconv.Quote(s)
}

// code is four hexadecimal digits made of a line.
func code(line string) string {
	sum := crc32.ChecksumIEEE([]byte(line))
	return fmt.Sprintf("%04x", uint16(sum^sum>>16))
}

// validSystem tells the unit systems there are.
func validSystem(s quantity.System) bool { return s == quantity.SI || s == quantity.US }
