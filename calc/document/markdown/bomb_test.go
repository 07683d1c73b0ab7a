package markdown

import (
	"strings"
	"testing"
)

// bombs are inputs of one shape repeated, made to blow up a parser's time, its
// stack or its memory.
var bombs = []struct{ name, head, unit, tail string }{
	{"quotes", "", ">", ""}, {"quotes with blanks", "", "> ", "x"}, {"bullets", "", "- ", "x"}, {"numbers", "", "1. ", "x"},
	{"braces", "", "{{", ""}, {"open braces", "", "{{ ", ""}, {"close braces", "", "}}", ""}, {"values", "", "{{ .V }} ", ""},
	{"brackets", "", "[", ""}, {"bracket pairs", "", "[]", ""}, {"links", "", "[a](", ""}, {"nested links", "", "[", strings.Repeat("](x)", 5000)},
	{"images", "", "![", ""}, {"nested brackets", "", "[a", strings.Repeat("]", 5000)}, {"footnotes", "", "[^a]", ""}, {"footnote bodies", "", "[^a]: ", "x"},
	{"stars", "", "*", "a"}, {"emphasis", "", "*a **b ", ""}, {"closed emphasis", "", "*a _b ", strings.Repeat("_ *", 5000)},
	{"ticks", "", "`", ""}, {"ticks of all lengths", "", "` `` ``` ", ""}, {"dollars", "", "$a ", ""}, {"double dollars", "x ", "$$ a", ""},
	{"open comments", "x ", "<!-- ", ""}, {"tags", "x ", "<a ", ""}, {"declarations", "x ", "<!A ", ""}, {"instructions", "x ", "<? ", ""},
	{"pipes", "", "|", "\n|-|\n"}, {"columns", "|a", "|a", "|\n"}, {"rows", "|a|\n|-|\n", "|b|\n", ""}, {"escaped pipes", "|a|\n|-|\n|`", `\|`, "`|\n"},
	{"escaped pipes in a value", "|a|\n|-|\n|{{ ", `\|`, " }}|\n"},
	{"headings", "", "# a\n", ""}, {"long heading", "# ", "a", ""}, {"long name", "```calc formula ", "n", "\n```\n"}, {"long info", "```calc ", "n ", "\n```\n"},
	{"open fences", "", "```calc a\n\n", ""}, {"fences", "", "```calc a\n```\n", ""}, {"fence lines", "```calc a\n", "x: 1\n", "```\n"},
	{"entities", "", "&amp;", ""}, {"backslashes", "", `\`, ""}, {"references", "", "[a]: b\n", ""}, {"definitions", "", "a\n: b\n\n", ""},
	{"nested definitions", "a\n", ": ", "b"}, {"nested list", "", "", indented(60)}, {"front matter", "---\n", "a: b\n", ""}, {"escapes", "", "\u202e", ""},
	{"quoted lines", "", strings.Repeat("> ", 40) + "x\n", ""}, {"many citations", "", "[K one two] ", ""}, {"spaces", "a", " ", "b"}, {"tabs", "", "\t", "x"},
	{"rules", "", "---\n", ""}, {"setext", "", "a\n---\n", ""},
}

func indented(deep int) string {
	var b strings.Builder
	for i := range deep {
		b.WriteString(strings.Repeat("  ", i) + "- x\n")
	}
	return b.String()
}

// TestBombs shows that size alone stops nothing: a time out or an overflowing
// stack would fail the run.
func TestBombs(t *testing.T) {
	const times = 3000
	for _, b := range bombs {
		src := b.head + strings.Repeat(b.unit, times) + b.tail
		file, list := Parse("bomb.md", []byte(src), func(k string) bool { return k == "K" }, kinds)
		sound(t, []byte(src), file, list)
	}
}

func BenchmarkParse(b *testing.B) {
	page := "# Base shear {{ .V }}\n\nThe *shear* of [K, Eq. 2] is $V$ = {{ .V | as \"kip\" }} `x`.\n\n" +
		"```calc formula\nV = 2 kN\nW = 3 kN\n```\n\n| a | b |\n|---|---|\n| 1 | {{ .V }} |\n\n- a\n- b\n\n"
	source := []byte(strings.Repeat(page, 200))
	b.SetBytes(int64(len(source)))
	for b.Loop() {
		Parse("b.md", source, known, kinds)
	}
}
