package document

import (
	"cmp"
	"slices"
	"strings"
	"unicode"

	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// notation makes the register of symbols: the names of formula lines, the values
// and functions of blocks that something refers to, the fields that are named by
// a symbol, and the symbols of the methods' equations. Each symbol stands once,
// with all that it stands for.
func (a *assembly) notation() {
	for _, n := range a.nodes {
		if n.kind == lineNode {
			a.stands(n.name, n.line.Description, n.unit, exhibit.SymbolPlace{ID: n.name, Anchor: n.anchor})
		}
		for _, dep := range n.deps {
			if dep.Block == nil {
				path, _, _ := strings.Cut(dep.Path, "@")
				a.member(path)
			}
		}
		if n.kind == blockNode {
			a.fieldSymbols(n)
		}
	}
	for _, s := range a.symbols {
		a.p.Notation = append(a.p.Notation, *s)
	}
	slices.SortFunc(a.p.Notation, bySymbol)
}

// stands adds a meaning to a symbol; one that is there already gets the place.
func (a *assembly) stands(name, text string, unit quantity.Unit, place exhibit.SymbolPlace) {
	key := name
	var tex string
	if t, ok := strings.CutPrefix(name, "$"); ok {
		name, tex = "", strings.TrimSuffix(t, "$")
	}
	s := a.symbols[key]
	if s == nil {
		s = &exhibit.Symbol{Name: name, TeX: tex}
		a.symbols[key] = s
	}
	for i := range s.Meanings {
		m := &s.Meanings[i]
		if m.Text == text && m.Unit == unit {
			if !slices.Contains(m.Places, place) {
				m.Places = append(m.Places, place)
			}
			return
		}
	}
	s.Meanings = append(s.Meanings, exhibit.Meaning{Text: text, Unit: unit, Places: []exhibit.SymbolPlace{place}})
}

// meaning is what the notation says of a field or value: its text up to what only
// a writer must know, without the standard it belongs to.
func meaning(doc string) string {
	if of, rest, ok := strings.Cut(doc, ": "); ok && slices.Contains([]string{"ASCE/SEI 7", "EN 1998-1", "of EN 1998-1", "of 7-16", "of 7-22"}, of) {
		doc = rest
	}
	doc, _, _ = strings.Cut(doc, "; ")
	if open := strings.LastIndex(doc, " ("); open > 0 && strings.HasSuffix(doc, ")") {
		doc = doc[:open]
	}
	return strings.TrimSuffix(doc, ", if not given")
}

// member adds a value or function of a block: "m.T", "rs.PSA".
func (a *assembly) member(path string) { a.memberAs(path, "") }

// memberAs adds a value of a block that an equation writes by another symbol; the
// symbol is the value's name, if none is given.
func (a *assembly) memberAs(path, symbol string) {
	path, _, item := strings.Cut(path, "[")
	first, own := cutPath(path)
	n := a.names[formula.Normal(first)]
	if n == nil || n.kind != blockNode || own == "" {
		return
	}
	place := exhibit.SymbolPlace{Block: n.name, Anchor: n.anchor}
	if e, ok := n.def.Export(own); ok {
		for _, v := range n.result.Values {
			if v.Name == own {
				unit := v.Value.Unit
				if unit.Text == "" {
					unit = a.system.Preferred(v.Value.Dim)
				}
				if place.ID = n.name + "." + own; item {
					place.ID = ""
				}
				if symbol == "" {
					symbol = own
				}
				a.stands(symbol, meaning(e.Doc), unit, place)
			}
		}
		return
	}
	if f, ok := n.def.Function(own); ok {
		doc, _, _ := strings.Cut(f.Doc, " at period T")
		a.stands(own, doc, f.Unit, place)
	}
}

// fieldSymbols adds the fields that a block shows by their symbol: R, S_DS. One
// that is an export of the block is that value, and one that only hands on a
// formula name of its own name is that name's.
func (a *assembly) fieldSymbols(n *node) {
	shown := map[string]bool{}
	for _, row := range n.result.Echo.Rows {
		shown[row.Field] = row.Symbol != nil
	}
	field.Top(n.body, func(f *field.Field, s field.Spec) {
		switch {
		case !f.Given || !shown[s.Name], f.Tree != nil && f.Tree.Op == expr.Name && f.Tree.Text == s.Name:
		default:
			if _, ok := n.def.Export(s.Name); ok {
				a.member(n.name + "." + s.Name)
				return
			}
			unit := f.Value.Unit
			if unit.Text == "" {
				unit = s.Unit(a.system)
			}
			a.stands(s.Name, meaning(s.Doc), unit, exhibit.SymbolPlace{Block: n.name, Anchor: n.anchor})
		}
	})
}

// methodSymbols adds the symbols of a method's equations.
func (a *assembly) methodSymbols(n *node) {
	for _, s := range n.result.Symbols {
		a.stands(s.Name, s.Meaning, s.Unit, exhibit.SymbolPlace{Block: n.name, Anchor: n.anchor})
	}
	for _, it := range n.result.Method {
		if it.Equation == nil {
			continue
		}
		for _, tree := range []*expr.Node{it.Equation.Symbol, it.Equation.Tree} {
			tree.Walk(func(m *expr.Node) {
				if m.Op == expr.Name && m.ID != "" {
					a.memberAs(m.ID, m.Text)
				}
			})
		}
	}
}

// alphabet is the Greek letters as names spell them, in order.
var alphabet = strings.Fields("alpha beta gamma delta epsilon zeta eta theta iota kappa lambda mu nu xi omicron pi rho sigma tau upsilon phi chi psi omega")

// bySymbol sorts symbols: Latin letters, then Greek; a capital before its small
// letter; then by what follows, numbers as people count.
func bySymbol(x, y exhibit.Symbol) int {
	kx, ky := sortKey(x), sortKey(y)
	return cmp.Or(cmp.Compare(kx.greek, ky.greek), cmp.Compare(strings.ToLower(kx.base), strings.ToLower(ky.base)), cmp.Compare(kx.base, ky.base),
		cmp.Compare(kx.small, ky.small), exhibit.Naturally(kx.rest, ky.rest), cmp.Compare(x.TeX, y.TeX))
}

type symbolKey struct {
	greek      int // 0: a Latin letter
	small      int
	base, rest string
}

func sortKey(s exhibit.Symbol) symbolKey {
	name := s.Name
	if s.TeX != "" {
		name = bareTeX(s.TeX)
	}
	base, rest, _ := strings.Cut(name, "_")
	stem := strings.TrimRight(base, "0123456789")
	if i := slices.Index(alphabet, strings.ToLower(stem)); i >= 0 {
		small := 0
		if stem == strings.ToLower(stem) {
			small = 1
		}
		return symbolKey{greek: i + 1, small: small, rest: base[len(stem):] + rest}
	}
	return symbolKey{base: stem, rest: base[len(stem):] + rest}
}

// bareTeX is a symbol in TeX as a name: "\ddot u_n" is u_n.
func bareTeX(tex string) string {
	for _, mark := range []string{`\ddot`, `\dot`, `\bar`, `\hat`, `\tilde`, `\mathrm`, `\mathbf`} {
		tex = strings.ReplaceAll(tex, mark, "")
	}
	return strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) || r == '_' {
			return r
		}
		return -1
	}, tex)
}
