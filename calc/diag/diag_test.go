package diag

import (
	"errors"
	"strings"
	"testing"
	"unicode/utf8"

	"pgregory.net/rapid"
)

func TestNearest(t *testing.T) {
	fields := []string{"range", "target", "damping", "periods", "record", "k", "Hz", "kPa", "V_b"}
	for name, want := range map[string]string{
		"rnage": "range", "targt": "target", "dampings": "damping", "DAMPING": "damping", "period": "periods", "recrod": "record", "Vb": "V_b",
		"hz": "Hz", "KPA": "kPa", "x": "", "m2": "", "height": "", "rxnxe": "", "": "", "re": "", "K": "k",
	} {
		if got := Nearest(name, fields); got != want {
			t.Errorf("nearest to %q is %q, want %q", name, got, want)
		}
	}
	if got := Nearest("abd", []string{"abc", "abe"}); got != "abc" {
		t.Errorf("among equals the first wins, not %q", got)
	}
	if got := Nearest("abcdef", []string{"abcdxx", "abcdeg"}); got != "abcdeg" {
		t.Errorf("the closer one wins, not %q", got)
	}
	if got := Nearest(strings.Repeat("a", 100), []string{strings.Repeat("a", 99)}); got != "" {
		t.Errorf("a long word has the neighbour %q", got)
	}
}

func TestDistance(t *testing.T) {
	for _, c := range []struct {
		a, b string
		want int
	}{{"", "", 0}, {"", "abc", 3}, {"abc", "abc", 0}, {"abc", "acb", 1}, {"abc", "abd", 1}, {"abc", "abcd", 1}, {"kitten", "sitting", 3}, {"ωa", "ab", 2}} {
		if got := Distance(c.a, c.b); got != c.want {
			t.Errorf("from %q to %q: %d, want %d", c.a, c.b, got, c.want)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		a, b := rapid.StringN(0, 12, -1).Draw(t, "a"), rapid.StringN(0, 12, -1).Draw(t, "b")
		d := Distance(a, b)
		if d != Distance(b, a) || (d == 0) != (string([]rune(a)) == string([]rune(b))) || d > max(utf8.RuneCountInString(a), utf8.RuneCountInString(b)) {
			t.Fatalf("from %q to %q: %d", a, b, d)
		}
	})
}

func at(line, column, endLine, endColumn int) Range {
	return Range{File: "package.md", Line: line, Column: column, EndLine: endLine, EndColumn: endColumn}
}

func TestWrite(t *testing.T) {
	var list List
	list.Errorf("unknown-unit", at(2, 10, 2, 12), "%q is not a unit", "KN").WithHint("write %s", "kN")
	list.Warnf("comment", at(1, 1, 1, 1), "an empty range has one caret")
	list.Errorf("file", Range{File: "data.csv"}, "the file is empty")
	list.Errorf("syntax", at(3, 3, 5, 1), "over several lines")
	list.Errorf("syntax", at(9, 1, 9, 2), "a line that is not there")
	lines := []string{"", "abc", "\ty =  12 KN", "a\tbcd"}
	var b strings.Builder
	err := Write(&b, list, func(file string, line int) (string, bool) {
		if line >= len(lines) {
			return "", false
		}
		return lines[line], true
	})
	want := `package.md:2:10: error: "KN" is not a unit (unknown-unit)
     y =  12 KN
             ^^
    hint: write kN
package.md:1:1: warning: an empty range has one caret (comment)
    abc
    ^
data.csv: error: the file is empty (file)
package.md:3:3: error: over several lines (syntax)
    a bcd
      ^^^
package.md:9:1: error: a line that is not there (syntax)
`
	if err != nil || b.String() != want {
		t.Errorf("%v\ngot:\n%s\nwant:\n%s", err, b.String(), want)
	}
	if !list.HasErrors() || list[1:2].HasErrors() {
		t.Error("errors are errors and warnings are not")
	}
	if err := Write(broken{}, list, nil); err == nil {
		t.Error("the fault of the writer is lost")
	}
}

type broken struct{}

func (broken) Write([]byte) (int, error) { return 0, errors.New("no room") }

func TestSort(t *testing.T) {
	list := List{
		{Summary: "z", Range: Range{File: "b.md", Line: 1}}, {Summary: "b", Range: Range{File: "a.md", Line: 10, Column: 2}}, {Summary: "a", Range: Range{File: "a.md", Line: 10, Column: 2}},
		{Summary: "x", Range: Range{File: "a.md", Line: 9, Column: 5}}, {Summary: "a", Range: Range{File: "a.md", Line: 10, Column: 2}},
	}.Sort()
	var got []string
	for _, d := range list {
		got = append(got, d.Summary)
	}
	if s := strings.Join(got, ""); s != "xabz" {
		t.Errorf("sorted as %s, want xabz", s)
	}
}

func TestExcerpt(t *testing.T) {
	long := strings.Repeat("a", 300) + "XYZ" + strings.Repeat("b", 300)
	for _, c := range []struct {
		name, text string
		at         Range
		marked     string // what stands over the carets
	}{
		{"plain", "y = 12 KN", at(1, 8, 1, 10), "KN"},
		{"Greek", "ω = 12 KN", at(1, 8, 1, 10), "KN"},
		{"at the end", "y =", at(1, 4, 1, 4), ""},
		{"beyond the end", "y =", at(1, 40, 1, 44), ""},
		{"column zero", "y =", at(1, 0, 1, 0), "y"},
		{"backwards", "y = 2", at(1, 3, 1, 1), "="},
		{"long", long, at(1, 301, 1, 304), "XYZ"},
		{"carriage return", "y = KN\r\n", at(1, 5, 1, 7), "KN"},
		{"reordering", "y = \u202eKN", at(1, 5, 1, 6), "\uFFFD"},
		{"broken text", "y = \xff\xfeKN", at(1, 7, 1, 9), "KN"},
	} {
		line, caret := excerpt(c.text, c.at)
		runes := []rune(line)
		first := strings.Index(caret, "^")
		if first < 0 || strings.Trim(strings.TrimLeft(caret, " "), "^") != "" {
			t.Errorf("%s: carets %q", c.name, caret)
			continue
		}
		marked := ""
		if first < len(runes) {
			marked = string(runes[first:min(len(runes), len(caret))])
		}
		if marked != c.marked {
			t.Errorf("%s: the carets stand under %q, want %q", c.name, marked, c.marked)
		}
		if len(runes) > widest {
			t.Errorf("%s: %d characters shown", c.name, len(runes))
		}
	}
	// A wide character takes two columns, an accent of its own none.
	if _, caret := excerpt("層e\u0301 KN", at(1, 5, 1, 7)); caret != "    ^^" {
		t.Errorf("behind a wide letter and an accent the carets are %q", caret)
	}
	if line, _ := excerpt(long, at(1, 301, 1, 304)); !strings.HasPrefix(line, "…") || !strings.HasSuffix(line, "…") {
		t.Errorf("what is cut off is not marked: %s", line)
	}
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(-2, 400)
		line, caret := excerpt(rapid.String().Draw(t, "text"), at(1, n.Draw(t, "column"), rapid.IntRange(1, 2).Draw(t, "end line"), n.Draw(t, "end")))
		if strings.Count(caret, "^") < 1 || utf8.RuneCountInString(line) > widest || strings.ContainsAny(line, "\n\t\x1b") {
			t.Fatalf("%q, %q", line, caret)
		}
	})
}

func TestPrintable(t *testing.T) {
	for in, want := range map[string]string{"a\tb": "a b", "\x1b[31m": "\uFFFD[31m", "a\u200bb": "a\uFFFDb", "a\u2028b": "a\uFFFDb", "ω²": "ω²", "a\xffb": "a\uFFFDb", "\u202e": "\uFFFD"} {
		if got := Printable(in); got != want {
			t.Errorf("%q is printed %q, want %q", in, got, want)
		}
	}
}

func TestRangeText(t *testing.T) {
	if s := at(4, 7, 4, 9).String(); s != "package.md:4:7" {
		t.Error(s)
	}
	if s := (Range{File: "a.csv"}).String(); s != "a.csv" {
		t.Error(s)
	}
}
