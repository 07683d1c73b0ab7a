package markdown

import (
	"strings"
	"testing"
)

// TestNearCalc: what was meant as a block is an error; an ordinary listing is one.
func TestNearCalc(t *testing.T) {
	for _, info := range []string{
		"cacl formula g", "calcformula", "calcformula g", "calc-formula", "calc_formula g", "calculate", "calc:formula", "calc.formula", "{calc formula}", "calc=formula",
		"CALC formula g", "Calc formula", "calc: formula", "kalc formula", "cal formula", "cla formula", "clac", "calk formula", "calcs formula", "xcalc formula", "cacl-formula g",
		"\u0441alc formula g", // Cyrillic es
		"c\u0430lc formula",   // Cyrillic a
		"ca1c formula", "caIc formula", "\u200ccalc formula", "calc\u200d formula g", "cal\u0301c formula",
		"ｃａｌｃ formula", // full width
		"cla f\u043ermula", "formula g", "Spectrum rs", "spectrum",
	} {
		_, list := Parse("t.md", []byte("```"+info+"\nV = 1\n```\n"), nil, kinds)
		if got := messages(list); !strings.HasSuffix(got, "calc-word") || len(list) != 1 {
			t.Errorf("%q: %s", info, got)
		}
	}
	for _, info := range []string{"", "go", "go formula", "yaml calc", "python formula", "c formula", "text", "sh spectrum", "json", "mermaid", "scala", "cl", "math", "toml", "local x"} {
		if file, list := Parse("t.md", []byte("```"+info+"\nV = 1\n```\n"), nil, kinds); len(list) > 0 || len(file.Fences) > 0 {
			t.Errorf("%q: %+v", info, list)
		}
	}
	if file, list := Parse("t.md", []byte("```calc formula g\nV = 1\n```\n"), nil, kinds); len(list) > 0 || len(file.Fences) != 1 {
		t.Errorf("calc itself: %+v", list)
	}
}

// TestBlockAsCode: too few marks, or marks inside a line, make no block.
func TestBlockAsCode(t *testing.T) {
	for source, want := range map[string]string{
		"``calc formula g\nV = 1\n``\n":           "1:3-1:15 calc-word",
		"text ```calc formula g\nV = 1\n```\n":    "3:1-3:4 open-fence",
		"``cacl spectrum\nV = 1\n``\n":            "1:3-1:16 calc-word",
		"`calc formula` and `calculate the\nsum`": "",
		"``x\ncalc formula``":                     "",
	} {
		_, list := Parse("t.md", []byte(source), nil, kinds)
		if got := messages(list); got != want {
			t.Errorf("%q: %s, want %s", source, got, want)
		}
	}
}
