package document

import (
	"regexp"
	"slices"
	"strings"
	"testing"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// symbol finds a symbol by its name or TeX.
func symbol(t *testing.T, p *exhibit.Package, name string) exhibit.Symbol {
	t.Helper()
	for _, s := range p.Notation {
		if s.Name+s.TeX == name {
			return s
		}
	}
	t.Fatalf("the notation has no %s", name)
	return exhibit.Symbol{}
}

// TestNotation: each symbol once, Latin letters before Greek, a capital before
// its small letter; all that one symbol stands for, with the block and the place.
func TestNotation(t *testing.T) {
	_, res := runKinds(t, Options{})
	p := res.Package
	var names []string
	for _, s := range p.Notation {
		names = append(names, s.Name+s.TeX)
		if len(s.Meanings) == 0 {
			t.Errorf("%s has no meaning", s.Name)
		}
	}
	for i, n := range names {
		if slices.Contains(names[:i], n) {
			t.Errorf("%s stands twice", n)
		}
	}
	order := []string{"base_shear", "I_A", "K", "M", "m", "omega_n", "R", "r", "r_i", "T", "V", "zeta", "phi_n"}
	latin := slices.DeleteFunc(slices.Clone(order), func(s string) bool { return s == "omega_n" || s == "zeta" || s == "phi_n" })
	at := -1
	for _, n := range append(latin, "zeta", "phi_n", "omega_n") {
		k := slices.Index(names, n)
		if k <= at {
			t.Errorf("%s stands at %d, after %d; the order is %v", n, k, at, names)
		}
		at = k
	}
	// T: the periods of a grid or of modes, and the period of an oscillator.
	seen := map[string]string{}
	for _, m := range symbol(t, p, "T").Meanings {
		seen[m.Text] = m.Places[0].Block + " " + m.Unit.Text
	}
	if len(seen) < 2 || seen["periods, longest first"] != "m s" || seen["period of an oscillator"] == "" {
		t.Errorf("T stands for %v", seen)
	}
	// V is set by a formula line, r.base_shear is an export, R a field of a block.
	for name, want := range map[string]exhibit.SymbolPlace{"V": {ID: "V", Anchor: "v-V"}, "base_shear": {ID: "r.base_shear", Block: "r", Anchor: "b-r"}} {
		var at []exhibit.SymbolPlace
		for _, m := range symbol(t, p, name).Meanings {
			at = append(at, m.Places...)
		}
		if !slices.Contains(at, want) {
			t.Errorf("%s stands at %v, want %v", name, at, want)
		}
	}
}

// TestNotationUnits: one meaning in two units stands twice, in one unit once with
// both places.
func TestNotationUnits(t *testing.T) {
	a := assembly{p: &exhibit.Package{}, symbols: map[string]*exhibit.Symbol{}}
	for _, use := range [][2]string{{"kN", "one"}, {"kip", "two"}, {"kN", "three"}} {
		a.stands("q", "load", quantity.MustUnit(use[0]), exhibit.SymbolPlace{ID: use[1]})
	}
	m := a.symbols["q"].Meanings
	if len(m) != 2 || m[0].Unit.Text != "kN" || len(m[0].Places) != 2 || m[1].Unit.Text != "kip" {
		t.Errorf("%v", m)
	}
}

// TestMethodsNameTheirSymbols: every letter of a method's equation in TeX stands
// in the notation.
func TestMethodsNameTheirSymbols(t *testing.T) {
	_, res := runKinds(t, Options{})
	have := map[string]bool{"d": true, "i": true, "j": true, "n": true}
	for _, s := range res.Package.Notation {
		name := s.Name
		if s.TeX != "" {
			name = bareTeX(s.TeX)
		}
		base, _, _ := strings.Cut(name, "_")
		have[strings.ToLower(base)] = true
	}
	words := regexp.MustCompile(`\\(mathrm\{[^}]*\}|[A-Za-z]+)|[A-Za-z]`)
	set := strings.Fields("frac tfrac cos tan Delta sum sqrt max int dot ddot cdot quad qquad mathrm mathsf left right text pi")
	kinds := []string{"record", "spectrum", "structure", "modes", "combine"}
	found := 0
	items(res.Package, func(b *exhibit.Block, part string, it exhibit.Item) {
		if it.Equation == nil || it.Equation.TeX == "" || !slices.Contains(kinds, b.Kind) {
			return
		}
		tex := regexp.MustCompile(`_(\{[^{}]*(\{[^{}]*\})?[^{}]*\}|\\mathrm\{[^}]*\}|.)`).ReplaceAllString(it.Equation.TeX, "") // subscripts belong to their symbol
		tex = regexp.MustCompile(`\^(\{[^}]*\}|\\mathrm\{[^}]*\}|.)`).ReplaceAllString(tex, "")
		for _, w := range words.FindAllString(tex, -1) {
			w = strings.Trim(strings.TrimPrefix(strings.TrimPrefix(w, `\`), "mathrm"), "{} ")
			if slices.Contains(set, w) || strings.Contains(w, ",") || w == "s" {
				continue
			}
			found++
			if !have[strings.ToLower(w)] {
				t.Errorf("%s: %s is not in the notation: %s", b.Name, w, it.Equation.TeX)
			}
		}
	})
	if found < 40 {
		t.Errorf("%d symbols found", found)
	}
}
