package document

import (
	"regexp"
	"slices"
	"strings"
	"testing"

	"quoin/calc/document/block"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
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

// TestMethodsNameTheirSymbols: every letter of a method's equation, in TeX or as a
// formula, stands in the notation.
func TestMethodsNameTheirSymbols(t *testing.T) {
	_, kinds := runKinds(t, Options{})
	_, more := archive(t, "testdata/symbols.txtar")
	if more.Diagnostics.HasErrors() {
		t.Fatalf("errors:\n%s", text(more))
	}
	named(t, kinds, "record", "spectrum", "target", "structure", "modes", "combine", "static", "drift")
	named(t, more, "target", "structure", "modes", "combine", "static", "drift")
}

func named(t *testing.T, res Result, kinds ...string) {
	t.Helper()
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
	set := strings.Fields("ge le frac tfrac cos tan Delta sum sqrt max int dot ddot cdot quad qquad mathrm mathsf left right text pi")
	found := map[string]int{}
	names := map[string]bool{}
	for _, s := range res.Package.Notation {
		names[s.Name] = true
	}
	items(res.Package, func(b *exhibit.Block, part string, it exhibit.Item) {
		if it.Equation == nil || b.Kind == block.Formula {
			return
		}
		for _, tree := range []*expr.Node{it.Equation.Symbol, it.Equation.Tree} {
			tree.Walk(func(m *expr.Node) {
				if m.Op == expr.Name {
					found[b.Kind]++
					if name := m.Text[strings.LastIndex(m.Text, ".")+1:]; !names[name] {
						t.Errorf("%s: %s is not in the notation", b.Name, name)
					}
				}
			})
		}
		tex := regexp.MustCompile(`_(\{[^{}]*(\{[^{}]*\})?[^{}]*\}|\\mathrm\{[^}]*\}|.)`).ReplaceAllString(it.Equation.TeX, "") // subscripts belong to their symbol
		tex = regexp.MustCompile(`\^(\{[^}]*\}|\\mathrm\{[^}]*\}|.)`).ReplaceAllString(tex, "")
		for _, w := range words.FindAllString(tex, -1) {
			w = strings.Trim(strings.TrimPrefix(strings.TrimPrefix(w, `\`), "mathrm"), "{} ")
			if slices.Contains(set, w) || strings.Contains(w, ",") || w == "s" {
				continue
			}
			found[b.Kind]++
			if !have[strings.ToLower(w)] {
				t.Errorf("%s: %s is not in the notation: %s", b.Name, w, it.Equation.TeX)
			}
		}
	})
	for _, kind := range kinds {
		if found[kind] < 4 {
			t.Errorf("%s: %d symbols found", kind, found[kind])
		}
	}
}

// TestMeanings: one wording with two units is two meanings, and the same one in
// several places is one; what only a writer must know is left out.
func TestMeanings(t *testing.T) {
	a := &assembly{symbols: map[string]*exhibit.Symbol{}}
	for _, place := range []struct{ unit, block string }{{"kN", "a"}, {"kip", "b"}, {"kN", "c"}, {"kN", "a"}} {
		a.stands("P", "vertical load", quantity.MustUnit(place.unit), exhibit.SymbolPlace{Block: place.block})
	}
	m := a.symbols["P"].Meanings
	if len(m) != 2 || m[0].Unit.Text != "kN" || len(m[0].Places) != 2 || m[1].Unit.Text != "kip" || len(m[1].Places) != 1 {
		t.Errorf("two units make %+v", m)
	}
	for doc, want := range map[string]string{
		"ASCE/SEI 7: importance factor; that of the analysis, where it states one": "importance factor",
		"of EN 1998-1: soil factor, if not given":                                  "soil factor",
		"base shear; F_b of EN 1998-1":                                             "base shear",
		"exponent of the distribution over the height (ASCE/SEI 7)":                "exponent of the distribution over the height",
		"limb of C_s: 0.5 S_1/(R/I_e), where S_1 is 0.6 or more":                   "limb of C_s: 0.5 S_1/(R/I_e), where S_1 is 0.6 or more",
	} {
		if got := meaning(doc); got != want {
			t.Errorf("%q means %q, want %q", doc, got, want)
		}
	}
}
