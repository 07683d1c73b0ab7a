package markdown

import (
	"fmt"
	"reflect"
	"strings"
	"testing"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
)

func same(t *testing.T, what string, got, want any) {
	t.Helper()
	if !reflect.DeepEqual(got, want) {
		t.Errorf("%s:\n got %+v\nwant %+v", what, got, want)
	}
}

// outline writes a file in one line a section and a footnote, for comparing.
func outline(f *File) string {
	var b strings.Builder
	for _, s := range f.Sections {
		if s.Level > 0 {
			fmt.Fprintf(&b, "h%d#%s(%s) ", s.Level, s.Anchor, inlineOutline(s.Title))
		}
		for _, p := range s.Pieces {
			if p.Fence >= 0 {
				x := f.Fences[p.Fence]
				fmt.Fprintf(&b, "<%s:%s:%d-%d:%d> ", x.Kind, x.Name, x.Place.Line, x.EndLine, len(x.Body))
				continue
			}
			b.WriteString(inlineOutline(p.Prose) + " ")
		}
		b.WriteString("/ ")
	}
	for _, n := range f.Footnotes {
		fmt.Fprintf(&b, "^%d %s", n.Index, inlineOutline(n.Body))
	}
	return strings.TrimSuffix(strings.TrimSpace(b.String()), " /")
}

func inlineOutline(list []exhibit.Prose) string {
	var b strings.Builder
	for _, p := range list {
		switch p.Kind {
		case exhibit.Text:
			b.WriteString(p.Text)
			continue
		case exhibit.Value:
			fmt.Fprintf(&b, "{%d}", p.Level)
			continue
		}
		b.WriteString(string(p.Kind))
		if p.Level != 0 {
			fmt.Fprintf(&b, "=%d", p.Level)
		}
		for _, s := range []string{p.Anchor, p.Target, p.Title, p.Align} {
			if s != "" {
				b.WriteString("@" + s)
			}
		}
		b.WriteString("(" + p.Text + inlineOutline(p.Children) + ")")
	}
	return b.String()
}

// messages writes diagnostics as line:column-endline:endcolumn code.
func messages(list diag.List) string {
	var out []string
	for _, d := range list {
		out = append(out, fmt.Sprintf("%d:%d-%d:%d %s", d.Range.Line, d.Range.Column, d.Range.EndLine, d.Range.EndColumn, d.Code))
	}
	return strings.Join(out, "; ")
}

func known(key string) bool { return key == "K" || key == "K L" || key == "ASCE/SEI 7-22" }

func kinds(word string) bool { return word == "formula" || word == "spectrum" }

func TestParse(t *testing.T) {
	names := map[string]bool{}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if names[c.name] {
				t.Fatal("this name is taken")
			}
			names[c.name] = true
			file, list := Parse("t.md", []byte(c.source), known, kinds)
			if got := outline(file); got != c.want {
				t.Errorf("source %q\n got %s\nwant %s", c.source, got, c.want)
			}
			if got := messages(list); got != c.messages {
				t.Errorf("source %q\n got messages %s\nwant messages %s\n%+v", c.source, got, c.messages, list)
			}
			sound(t, []byte(c.source), file, list)
		})
	}
}

// TestFields looks at what the outline leaves out: texts and places.
func TestFields(t *testing.T) {
	f, list := Parse("t.md", []byte("---\na: é\nb: 2\n---\n"+
		"> ```calc formula s\n>   é = 1\n>\n> \tW\n> ```\n\n"+
		"| a |\n|---|\n| é {{ .V \\| as \"kip\" \\| sig 3 }} |\n\n"+
		"> x {{ .Vé\n> | as \"foo\" }}\n"), nil, nil)
	if len(list) > 0 || len(f.Fences) != 1 || len(f.Lives) != 2 {
		t.Fatalf("got %+v, %+v", f, list)
	}
	same(t, "front matter", []any{f.Front, f.FrontLine, f.HasFront}, []any{"a: é\nb: 2\n", 2, true})
	at := func(line, column, endLine, endColumn int) diag.Range {
		return diag.Range{File: "t.md", Line: line, Column: column, EndLine: endLine, EndColumn: endColumn}
	}
	same(t, "fence", f.Fences[0], Fence{Info: "calc formula s", Kind: "formula", Name: "s", Place: at(5, 6, 5, 20),
		KindRange: at(5, 11, 5, 18), NameRange: at(5, 19, 5, 20), EndLine: 9,
		Body: []Line{{"  é = 1", 6, 3}, {"", 7, 2}, {"\tW", 8, 3}}})
	cell := f.Lives[0]
	same(t, "text in a cell", cell.Text, ` .V | as "kip" | sig 3 `)
	same(t, "range in a cell", cell.Range, at(13, 5, 13, 34))
	same(t, "place of .V", cell.At(strings.Index(cell.Text, ".V"), 2), at(13, 8, 13, 10))
	same(t, "place of kip", cell.At(strings.Index(cell.Text, "kip"), 3), at(13, 18, 13, 21))
	same(t, "place of the 3", cell.At(strings.Index(cell.Text, "3"), 1), at(13, 30, 13, 31))
	same(t, "place beyond the end", cell.At(1000, 5), at(13, 32, 13, 32))
	two := f.Lives[1]
	same(t, "range over two lines", two.Range, at(15, 5, 16, 16))
	same(t, "place on the first line", two.At(strings.Index(two.Text, ".V"), 4), at(15, 8, 15, 11))
	same(t, "place on the second line", two.At(strings.Index(two.Text, "foo"), 3), at(16, 9, 16, 12))
}
