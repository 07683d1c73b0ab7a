package ledger

import (
	"fmt"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"quoin/calc/diag"
)

// mostFaults is how many faults of one file are told.
const mostFaults = 10

// ParseFrozen reads the text of frozen results; file names it in messages. Whatever
// [Frozen.Text] would not have written is an error with its line. Lines may end with CRLF.
func ParseFrozen(file string, data []byte) (*Frozen, diag.List) {
	p := frozenParser{file: file, f: &Frozen{Sections: make([][]Row, len(sections))}, was: make([][]Row, len(sections))}
	p.lines = strings.Split(strings.ReplaceAll(strings.TrimPrefix(string(data), "\ufeff"), "\r\n", "\n"), "\n")
	version, ok := strings.CutPrefix(p.lines[0], firstLine)
	switch {
	case !utf8.Valid(data):
		p.fault(1, "this is no text in UTF-8")
	case !ok:
		p.fault(1, "these are no frozen results: the first line of such a file is %q", firstLine+strconv.Itoa(frozenFormat))
	case version != strconv.Itoa(frozenFormat):
		p.list.Errorf("frozen-version", p.at(1), "frozen results of format %s; this program knows format %d", clipped(version), frozenFormat).
			WithHint("use the program that wrote them, or a later one")
	default:
		p.read()
	}
	if len(p.list) > 0 {
		return nil, p.list
	}
	return p.f, nil
}

type frozenParser struct {
	file  string
	lines []string
	f     *Frozen
	was   [][]Row
	since bool // something stands before
	list  diag.List
}

func (p *frozenParser) at(line int) diag.Range {
	return diag.Range{File: p.file, Line: line, Column: 1, EndLine: line, EndColumn: max(2, 1+utf8.RuneCountInString(p.lines[line-1]))}
}

func (p *frozenParser) fault(line int, format string, args ...any) {
	if len(p.list) < mostFaults {
		p.list.Errorf("frozen-broken", p.at(line), format, args...).WithHint("take the file back from version control, or delete it and freeze again after looking at what moved")
	}
}

var sectionHead = regexp.MustCompile(`^\[([a-z]+)( before)?(?: ([0-9]{1,9}))?\]$`)

// read reads all lines, and then holds the text to what it should be.
func (p *frozenParser) read() {
	section, old, want, got, head := -1, false, 0, 0, 0
	document := false
	last, seen := "", map[string]bool{} // of this section
	closed := func() {
		if head > 0 && got != want {
			p.fault(head, "this section says that it has %d lines, and has %d", want, got)
		}
		head = 0
	}
	for i, raw := range p.lines[1:] {
		n := i + 2
		if raw == "" || strings.HasPrefix(raw, "#") {
			continue
		}
		at := strings.LastIndex(raw, "  ~")
		if at < 0 || len(raw) != at+7 {
			p.fault(n, "this line has no code at its end: it was not written by quoin freeze")
			continue
		}
		line := raw[:at]
		if code(line) != raw[at+3:] {
			p.fault(n, "this line is not what was written: its code is that of another")
			continue
		}
		if m := sectionHead.FindStringSubmatch(line); m != nil {
			closed()
			section, old, document = slices.Index(sections, m[1]), m[2] != "", m[1] == "document"
			if !document {
				want, _ = strconv.Atoi(m[3])
				got, head = 0, n
			}
			if !document && (section < 0 || m[3] == "") {
				p.fault(n, "there is no such section")
				head = 0
			}
			continue
		}
		got++
		if head > 0 && got == 1 {
			last, seen = "", map[string]bool{}
		}
		if bare, ok := strings.CutPrefix(line, wasWord); ok && old {
			line = bare
		}
		rows, err := parseLine(line)
		switch {
		case err != nil:
			p.fault(n, "%s", err)
		case document:
			p.headLine(n, rows)
		case section < 0:
			p.fault(n, "this line stands in no section")
		case rows[0].ID < last || seen[rows[0].key()]:
			p.fault(n, "this line stands out of order")
		case old:
			p.since = true
			p.was[section] = append(p.was[section], rows...)
		default:
			p.f.Sections[section] = append(p.f.Sections[section], rows...)
		}
		for _, r := range rows {
			last, seen[r.key()] = r.ID, true
		}
	}
	closed()
	if len(p.list) > 0 {
		return
	}
	if t := p.f.Tolerance; !(t >= 1e-12 && t <= 0.1) {
		p.fault(1, "these frozen results have no tolerance between 1e-12 and 0.1")
		return
	}
	if p.f.Since != "" || p.since {
		p.f.Was = make([][]Row, len(sections))
		for part := range sections {
			p.f.Was[part] = overlaid(p.f.Sections[part], p.was[part])
		}
	}
	p.canonical()
}

// headLine is a line of the head.
func (p *frozenParser) headLine(n int, rows []Row) {
	r := rows[0]
	if r.ID == "tolerance" && len(r.Terms) == 1 && r.Terms[0].Number {
		p.f.Tolerance = r.Terms[0].X
		return
	}
	for _, h := range p.f.head() {
		if h.name == r.ID && len(r.Terms) == 1 && !r.Terms[0].Number {
			*h.to = r.Terms[0].Text
			return
		}
	}
	p.fault(n, "this line is none of the head")
}

// canonical finds the first line that would have been written otherwise.
func (p *frozenParser) canonical() {
	want := strings.Split(string(p.f.Text()), "\n")
	for i := range max(len(want), len(p.lines)) {
		switch {
		case i >= len(p.lines):
			p.fault(len(p.lines), "the file ends too early")
			return
		case i >= len(want):
			p.fault(i+1, "this line is one too many")
			return
		case want[i] != p.lines[i]:
			p.fault(i+1, "this line is not as quoin freeze writes it")
			return
		}
	}
}

// overlaid is rows with those of another list in their place; a dash takes one away.
func overlaid(rows, over []Row) []Row {
	put := byKey(over)
	var out []Row
	for _, r := range merged(rows, over) {
		if o, ok := put[r.key()]; ok {
			if o.Terms == nil {
				continue
			}
			r = o
		}
		out = append(out, r)
	}
	return out
}

// parseLine reads a line without its code: one row, or the items of a run. A row of
// what was not there has no terms.
func parseLine(line string) ([]Row, error) {
	id, rest, ok := token(line)
	if !ok || id == "" {
		return nil, fmt.Errorf("this line does not begin with a name")
	}
	r := Row{ID: id}
	from, to := 0, 0
	prefix := ""
	if strings.HasPrefix(rest, " [") {
		index, after, ok := strings.Cut(rest[2:], "]")
		if !ok {
			return nil, fmt.Errorf("the bracket of this line is not closed")
		}
		rest = after
		r.Index = index
		if first, last, run := strings.Cut(index, " to "); run {
			prefix, from = cutIndex(first)
			to, _ = strconv.Atoi(last)
			if from < 1 || to <= from || to-from >= runLength {
				return nil, fmt.Errorf("%s is no run of items", clipped(index))
			}
		}
	}
	if strings.HasPrefix(rest, " ") && !strings.HasPrefix(rest, " = ") {
		rest = rest[1:]
		if strings.HasPrefix(rest, `"`) {
			if r.Label, rest, ok = token(rest); !ok {
				return nil, fmt.Errorf("the quotes of this line are not closed")
			}
		} else {
			at := strings.Index(rest, " = ")
			if at < 0 {
				return nil, fmt.Errorf("this line has no equals sign")
			}
			r.Label, rest = rest[:at], rest[at:]
		}
	}
	body, ok := strings.CutPrefix(rest, " = ")
	if !ok {
		return nil, fmt.Errorf("this line has no equals sign")
	}
	if body == "-" {
		return []Row{r}, nil
	}
	terms, run, err := parseTerms(body)
	if err != nil {
		return nil, err
	}
	if from == 0 {
		if len(run) > 0 {
			return nil, fmt.Errorf("this line has more numbers than items")
		}
		r.Terms = terms
		return []Row{r}, nil
	}
	if len(terms) != 1 || len(run) != to-from {
		return nil, fmt.Errorf("this line has not as many numbers as items")
	}
	var out []Row
	for i, x := range append([]float64{terms[0].X}, run...) {
		t := terms[0]
		t.X = x
		out = append(out, Row{ID: r.ID, Index: prefix + strconv.Itoa(from+i), Label: r.Label, Terms: []Term{t}})
	}
	return out, nil
}

// parseTerms reads the terms behind the equals sign; run is further numbers of the
// only one.
func parseTerms(body string) (terms []Term, run []float64, err error) {
	for {
		var t Term
		var words []string
		quoted := false
		for {
			var tok string
			isQuoted := strings.HasPrefix(body, `"`)
			tok, body = cutToken(body)
			x, isNumber := asNumber(tok)
			switch {
			case tok == "":
				return nil, nil, fmt.Errorf("this line lacks a term")
			case isQuoted:
				s, err := strconv.Unquote(tok)
				if err != nil || len(words) > 0 || t.Number {
					return nil, nil, fmt.Errorf("%s is no text", clipped(tok))
				}
				t.Text, quoted = s, true
			case quoted || t.Unit != "":
				return nil, nil, fmt.Errorf("%s is one word too many", clipped(tok))
			case isNumber && !t.Number:
				t.Number, t.X, t.Name = true, x, strings.Join(words, " ")
			case isNumber:
				run = append(run, x)
			case t.Number:
				t.Unit = tok
			default:
				words = append(words, tok)
			}
			if !strings.HasPrefix(body, " ") {
				break
			}
			body = body[1:]
		}
		if !t.Number && !quoted {
			t.Text = strings.Join(words, " ")
		}
		terms = append(terms, t)
		if body == "" {
			break
		}
		if body, _ = strings.CutPrefix(body, ", "); body == "" {
			return nil, nil, fmt.Errorf("this line lacks a term")
		}
	}
	if len(run) > 0 && len(terms) > 1 {
		return nil, nil, fmt.Errorf("this line has too many numbers")
	}
	return terms, run, nil
}

// cutToken cuts a word or a quoted text off, up to a blank or a comma.
func cutToken(s string) (tok, rest string) {
	if strings.HasPrefix(s, `"`) {
		if q, err := strconv.QuotedPrefix(s); err == nil {
			return q, s[len(q):]
		}
	}
	end := strings.IndexAny(s, " ,")
	if end < 0 {
		return s, ""
	}
	return s[:end], s[end:]
}

// token is the first word of a line, its quotes taken off.
func token(s string) (word, rest string, ok bool) {
	word, rest = cutToken(s)
	if strings.HasPrefix(word, `"`) {
		text, err := strconv.Unquote(word)
		return text, rest, err == nil
	}
	return word, rest, true
}

// asNumber reads a number; nothing that begins as a word does is one.
func asNumber(tok string) (float64, bool) {
	bare := strings.TrimLeft(tok, "-")
	if bare == "" || bare[0] < '0' || bare[0] > '9' || len(tok)-len(bare) > 1 || strings.ContainsAny(bare, "xXpP_") {
		return 0, false
	}
	x, err := strconv.ParseFloat(tok, 64)
	return x, err == nil
}

func clipped(s string) string {
	if r := []rune(s); len(r) > 40 {
		s = string(r[:40]) + "…"
	}
	return strconv.Quote(s)
}
