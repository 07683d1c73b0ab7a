package render

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"quoin/calc/exhibit"
)

// TestFaults: all formulas that cannot be set, each at its place, before anything is drawn.
func TestFaults(t *testing.T) {
	source := "\ufeffé $x$ and $\\zzz$, again $\\zzz$\r\n> $$\r\n> a \\nope\r\n> b\r\n> $$\r\n> in $c +\r\n> \\odd$ quote\r\n$$\r\n\\frac{a}\r\n\\last\r\n$$\r\n"
	math := func(line int, kind exhibit.ProseKind, tex string) exhibit.Prose {
		return exhibit.Prose{Kind: kind, Text: tex, Place: exhibit.Place{File: "package.md", Line: line}}
	}
	p := sample()
	p.Chapters[0].Title = append(p.Chapters[0].Title, math(1, exhibit.Math, `x`))
	p.Chapters[0].Pieces[0].Prose = []exhibit.Prose{{Kind: exhibit.Paragraph, Children: []exhibit.Prose{
		math(1, exhibit.Math, `\zzz`), {Kind: exhibit.Emphasis, Children: []exhibit.Prose{math(1, exhibit.Math, `\zzz`)}}}},
		{Kind: exhibit.Quote, Children: []exhibit.Prose{math(2, exhibit.MathBlock, "a \\nope\nb"), math(6, exhibit.Math, `c + \odd`)}},
		math(8, exhibit.MathBlock, "\\frac{a}\n\\last"), math(99, exhibit.Math, `\gone`),
		{Kind: exhibit.Math, Text: `\elsewhere`, Place: exhibit.Place{File: "other.md", Line: 3}}}
	drawn := 0
	_, err := Package(p, map[string][]byte{"package.md": []byte(source)}, Options{Progress: func(_, _ int, what string) {
		if what != equation {
			drawn++
		}
	}})
	var f *Faults
	if !errors.As(err, &f) || drawn > 0 {
		t.Fatalf("%v, %d pictures drawn", err, drawn)
	}
	var got []string
	for _, d := range f.List {
		got = append(got, fmt.Sprintf("%s:%d:%d-%d:%d %s", d.Range.File, d.Range.Line, d.Range.Column, d.Range.EndLine, d.Range.EndColumn, d.Summary))
	}
	want := []string{
		`other.md:3:1-3:2 there is no command \elsewhere`,
		`package.md:1:12-1:16 there is no command \zzz`, `package.md:1:26-1:30 there is no command \zzz`,
		`package.md:2:3-2:4 there is no command \nope`,
		`package.md:6:6-6:7 there is no command \odd`,
		`package.md:10:1-10:6 there is no command \last`,
		`package.md:99:1-99:2 there is no command \gone`,
	}
	if strings.Join(got, "\n") != strings.Join(want, "\n") {
		t.Errorf("got\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
}
