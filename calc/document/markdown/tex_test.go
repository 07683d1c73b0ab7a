package markdown

import (
	"strconv"
	"strings"
	"testing"
)

// TestTeXFaults: every faulty formula is reported at the place of its fault.
func TestTeXFaults(t *testing.T) {
	for _, c := range []struct{ tex, at, summary string }{
		{`\frac{1`, "6-7", "{ without }"},
		{`a}`, "2-3", "} without {"},
		{`a_`, "2-3", "_ has nothing after it"},
		{`x^{a^}`, "5-6", "^ has nothing after it"},
		{`a__b`, "2-3", "_ has nothing after it"},
		{`x^'`, "2-3", "^ has nothing after it"},
		{`\left( x_\right)`, "9-10", "_ has nothing after it"},
		{`\begin{matrix}a_ & b\end{matrix}`, "16-17", "_ has nothing after it"},
		{`a_ \\ b`, "2-3", "_ has nothing after it"},
		{`\operatorname{a_}`, "16-17", "_ has nothing after it"},
		{`é\left(a`, "2-7", `\left without \right`},
		{`\right)`, "1-7", `\right without \left`},
		{`\left(a}\right)`, "8-9", "} without {"},
		{`\left({a\right)`, "7-8", "{ without }"},
		{`{\left(a}`, "2-7", `\left without \right`},
		{`\left\{a\right}`, "9-15", `\right without a delimiter`},
		{`\left`, "1-6", `\left without a delimiter`},
		{`\begin{matrix}a`, "1-15", `\begin{matrix} without \end{matrix}`},
		{`a\end{matrix}`, "2-14", `\end{matrix} without \begin{matrix}`},
		{`\begin{matrix}a\end{array}`, "16-27", `\begin{matrix} is closed by \end{array}`},
		{`\begin a`, "1-7", `\begin names no environment`},
		{`x\href{a}{b}`, "2-7", `\href is not allowed: a formula holds no links`},
		{`\url{a}`, "1-5", `\url is not allowed: a formula holds no links`},
		{`\ref{a}`, "1-5", `\ref is not allowed: a formula holds no links`},
		{`\includegraphics{a}`, "1-17", `\includegraphics is not allowed: a formula loads no files`},
		{`\htmlClass{a}{b}`, "1-11", `\htmlClass is not allowed: a formula holds no markup of the page`},
		{`\def\a{b}`, "1-5", `\def is not allowed: a formula defines no commands`},
		{`\newcommand{\a}{b}`, "1-12", `\newcommand is not allowed: a formula defines no commands`},
		{`1 \char"202E 2`, "3-8", `\char makes U+202E, which does not show or changes the order of the line`},
		{`\char8238`, "1-6", `\char makes U+202E, which does not show or changes the order of the line`},
		{`\char'20056`, "1-6", `\char makes U+202E, which does not show or changes the order of the line`},
		{`\char7 x`, "1-6", `\char makes U+0007, which does not show or changes the order of the line`},
		{`\char99999999999`, "1-6", `\char makes U+110000, which does not show or changes the order of the line`},
		{`5 % of`, "3-4", "% hides the rest of the formula"},
		{`\verb|a`, "1-6", `\verb without its end`},
	} {
		_, list := Parse("t.md", []byte("$$"+c.tex+"$$\n"), nil, nil)
		from, to, _ := strings.Cut(c.at, "-")
		want := "1:" + shift(from) + "-1:" + shift(to) + " tex"
		if got := messages(list); got != want || list[0].Summary != c.summary || list[0].Hint == "" {
			t.Errorf("%s:\n got %s %+v\nwant %s %s", c.tex, got, list, want, c.summary)
		}
	}
}

// shift is a column two further: after $$.
func shift(column string) string {
	n, err := strconv.Atoi(column)
	if err != nil {
		panic(err)
	}
	return strconv.Itoa(n + 2)
}

// TestTeXSound: what is sound by structure is left to the typesetter.
func TestTeXSound(t *testing.T) {
	for _, tex := range []string{
		`\frac{a}{b}`, `x_1^2`, `x_{a_b}`, `x^\prime`, `x''`, `\left(\frac{a}{b}\right.`, `\left\{a\middle|b\right\}`, `\left . a \right >`, `\{`, `\}`, `\_`, `\%`,
		`\text{a \_ b}`, `\begin{matrix}a&b\\c\end{matrix}`, `\begin{aligned}a&=b\\[2pt]&=c\end{aligned}`, `\verb|a_|`, `\verb*+{+`, `\leftarrow a_b`, `\rightarrow`, `\nosuch`,
		`\char"3B1`, `\char65`, `\char`, `{{a}}`, `{{.5}}`, `a_ b`, `\sum\limits_{i=1}^{n}`, `\ddot u_g(t)`, `\letter`, `\cr`, ``,
	} {
		if f := faultOf(tex); f != nil {
			t.Errorf("%s: %+v", tex, f)
		}
	}
}

// TestTeXPlaces: in cells, quotes, over line ends and with several formulas.
func TestTeXPlaces(t *testing.T) {
	source := "# Title $a_$\n\ntext $b$ and $c^$, *é $d}$*\n\n| h |\n|---|\n| é \\| $\\|x_$ |\n\n> quote $x +\n> y_$ and $z\n> = \\frac{1$\n\n> $$\n> \\left( a\n> $$\n\nnote[^1] $\\ohm$\n\n[^1]: in a note $e_$\n"
	_, list := Parse("t.md", []byte(source), nil, nil)
	want := "1:11-1:12 tex; 3:16-3:17 tex; 3:25-3:26 tex; 7:12-7:13 tex; 10:4-10:5 tex; 11:10-11:11 tex; 14:3-14:8 tex; 19:19-19:20 tex"
	if got := messages(list); got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
}

// FuzzTeX: faults lie inside the formula, and a formula in braces has a fault just
// when it has one without them.
func FuzzTeX(f *testing.F) {
	for _, s := range []string{`\frac{1`, `x_`, `\left(a\right)`, `\begin{a}\end{b}`, `\verb|x|`, `\char"202E`, `{{ .A }}`, `\`, "é_\xff"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		fault := faultOf(s)
		if fault != nil && (fault.at < 0 || fault.at >= fault.end || fault.end > len(s) || fault.summary == "" || fault.hint == "") {
			t.Errorf("%q: %+v", s, fault)
		}
		if fault == nil && faultOf("{"+s+"}") != nil && !strings.HasPrefix(strings.TrimLeft(s, "{ \n"), ".") {
			t.Errorf("%q is sound and {%s} is not: %+v", s, s, faultOf("{"+s+"}"))
		}
	})
}
