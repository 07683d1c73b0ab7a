package script

import (
	"errors"
	"strings"
	"testing"

	"github.com/dop251/goja"
)

// TestFaults: what is wrong, where, and nothing of how the typesetter works.
func TestFaults(t *testing.T) {
	for src, want := range map[string]Fault{
		`é 𝛼 x`:                   {Reason: "this character has no meaning in a formula", At: 3, Length: 1},
		`\zzz`:                    {Reason: `there is no command \zzz`, At: 1, Length: 4},
		"é é \\zzz":               {Reason: `there is no command \zzz`, At: 5, Length: 4},
		`\frac{1`:                 {Reason: "an argument is missing", At: 8},
		`\frac`:                   {Reason: "an argument is missing", At: 6},
		`\sqrt`:                   {Reason: `\sqrt has nothing after it`, At: 6},
		`x_`:                      {Reason: "the formula cannot be read"},
		`\operatorname{a_}`:       {Reason: "the formula cannot be read"},
		`\href{a}{b}`:             {Reason: `there is no command \href`, At: 1, Length: 5},
		`\begin{zz}a\end{zz}`:     {Reason: "there is no environment zz", At: 7, Length: 1},
		`\left(a`:                 {Reason: `the formula ends where \right is expected`, At: 8},
		`a}`:                      {Reason: "} cannot stand here", At: 2, Length: 1},
		`a & b`:                   {Reason: "& cannot stand here", At: 3, Length: 1},
		`$`:                       {Reason: "$ cannot stand here", At: 1, Length: 1},
		`\textcolor{#zz}{a}`:      {Reason: "there is no colour #zz", At: 1, Length: 10},
		`a^b^c`:                   {Reason: "Double superscript", At: 4, Length: 1},
		`\toggle{a}{b}\endtoggle`: {Reason: "the formula cannot be read"},
		`1\char"202E 2`:           {Reason: "the formula makes U+202E, which does not show or changes the order of the line"},
		"\\text{a\u202eb}":        {Reason: "the formula makes U+202E, which does not show or changes the order of the line"},
		`\char"AD`:                {Reason: "the formula makes U+00AD, which does not show or changes the order of the line"},
		`\char7`:                  {Reason: "the formula makes U+0007, which does not show or changes the order of the line"},
		`\ref{a}`:                 {Reason: "the formula makes something that is no mathematics"},
		`\begin{matrix} a & b`:    {Reason: `the formula ends where & or \\ or \cr or \end is expected`, At: 21},
	} {
		_, err := TeX(src, true)
		var f *Fault
		if !errors.As(err, &f) || f.Reason != want.Reason || f.At != want.At || f.Length != want.Length {
			t.Errorf("%s: %+v, want %+v", src, err, want)
			continue
		}
		for _, word := range []string{"property", "undefined", "null", "EOF", "Type", "function", "parse"} {
			if strings.Contains(f.Error()+f.Hint, word) {
				t.Errorf("%s: %q speaks of %q", src, f.Error(), word)
			}
		}
	}
}

var sound = []string{`\frac{a}{b}`, `V = C_s W`, `\ddot u + 2\zeta\omega`, `\sum_{i=1}^{n} w_i`, `\begin{matrix}a&b\\c&d\end{matrix}`, `\begin{cases}a&b\\c&d\end{cases}`,
	`\begin{array}{c|c}a&b\\\hline c&d\end{array}`, `\begin{align}a&=b\\c&=d\end{align}`, `\color{red}x`, `\boxed{x}`, `\cancel{x}`, `\bar x`, `\overbrace{x}^{y}`, `\left\{a\middle|b\right.`,
	`\xrightarrow{a}`, `\mathllap{x}`, `\raisebox{1em}{x}`, `\tag{1}x`, `\colorbox{red}{x}`, `x''`, `\mathbf{M}\ddot{\mathbf{u}}`, `\sqrt[3]{x}`, `\text{if } x < 1`, `\large x`, `é`, `\hspace{-1em}x`,
	`\rule{1em}{2em}`, `\fcolorbox{red}{#fff}{x}`, `\mathscr{L}`, `\widehat{abc}`, `\vec{x}`, `\underline{x}`, `\dfrac12`, `\binom n k`, `\int_0^T a\,dt`, `\lim_{x\to0}`, `\begin{smallmatrix}a\\b\end{smallmatrix}`}

// TestPurifiedKeeps: sound mathematics comes out as the typesetter made it.
func TestPurifiedKeeps(t *testing.T) {
	for _, src := range sound {
		raw, err := call(texLimit, func(m *machine) goja.Callable { return m.tex }, src, true)
		if err != nil {
			t.Fatalf("%s: %v", src, err)
		}
		if got, err := TeX(src, true); err != nil || got != raw {
			t.Errorf("%s, %v:\n got %s\nmade %s", src, err, got, raw)
		}
	}
}

// TestPurified: what is not known is left out; a row that is short brings nothing
// of the typesetter's into the page.
func TestPurified(t *testing.T) {
	for in, want := range map[string]string{
		`<mi style="level:0;color:undefined;font:;padding-left:1em;">x</mi>`:                         `<mi style="padding-left:1em;">x</mi>`,
		`<mi style="background:url(http://x);position:fixed;">x</mi>`:                                `<mi>x</mi>`,
		`<mi onclick="x" href='#a' id="b" mathvariant="bold">x</mi>`:                                 `<mi mathvariant="bold">x</mi>`,
		`<mi width="expression(1)" height="1em">&lt;</mi>`:                                           `<mi height="1em">&lt;</mi>`,
		`<mtd style="color:#ff0000;border-top:0.06em solid;padding:1em 0 0 0;width:calc(1);"></mtd>`: `<mtd style="color:#ff0000;border-top:0.06em solid;padding:1em 0 0 0;"></mtd>`,
	} {
		if got, err := purified(in); err != nil || got != want {
			t.Errorf("%s:\n got %s, %v\nwant %s", in, got, err, want)
		}
	}
	for _, in := range []string{`<script>x</script>`, `<a href="x">y</a>`, `<mi style="a>x</mi>`, `<!-- x -->`, `<mi`, `a<b`, `<svg></svg>`} {
		if got, err := purified(in); err == nil {
			t.Errorf("%s: %s", in, got)
		}
	}
	for _, env := range []string{"matrix", "cases", "aligned", "pmatrix"} {
		got, err := TeX(`\begin{`+env+`}a&b\\c\end{`+env+`}`, false)
		if err != nil || strings.Contains(got, "undefined") || strings.Contains(got, "level:") || strings.Contains(got, "max-size") || !strings.Contains(got, "<mi>c</mi>") {
			t.Errorf("%s: %s, %v", env, got, err)
		}
	}
}
