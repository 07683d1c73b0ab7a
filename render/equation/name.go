package equation

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

var greek = map[string]string{
	"alpha": "α", "beta": "β", "gamma": "γ", "delta": "δ", "epsilon": "ε", "zeta": "ζ", "eta": "η", "theta": "θ",
	"iota": "ι", "kappa": "κ", "lambda": "λ", "mu": "μ", "nu": "ν", "xi": "ξ", "omicron": "ο", "pi": "π", "rho": "ρ",
	"sigma": "σ", "tau": "τ", "upsilon": "υ", "phi": "φ", "chi": "χ", "psi": "ψ", "omega": "ω",
	"Gamma": "Γ", "Delta": "Δ", "Theta": "Θ", "Lambda": "Λ", "Xi": "Ξ", "Pi": "Π", "Sigma": "Σ", "Upsilon": "Υ",
	"Phi": "Φ", "Psi": "Ψ", "Omega": "Ω",
}

// name sets a name; item is an index to follow it, or "".
func name(path, item string) piece {
	block, own := "", path
	if i := strings.LastIndexByte(path, '.'); i >= 0 {
		block, own = path[:i], path[i+1:]
	}
	base, subs := parts(own)
	if block != "" {
		subs = append(subs, strings.ReplaceAll(block, "_", "\u00a0"))
	}
	if item != "" {
		subs = append(subs, item)
	}
	out := token("mi", base, width(base)+0.08)
	if utf8.RuneCountInString(base) == 1 {
		out.side = letter
		if r, _ := utf8.DecodeRuneInString(base); unicode.IsUpper(r) && unicode.Is(unicode.Greek, r) {
			out.xml = `<mi mathvariant="normal">` + escape(base) + `</mi>`
		}
	}
	if len(subs) > 0 {
		sub := subscript(subs)
		out.sub = &split{out.xml, sub.one()}
		out.xml = "<msub>" + out.xml + sub.one() + "</msub>"
		out.wide += 0.72 * sub.wide
		out.high += 0.2
	}
	out.text = path
	if item != "" {
		out.text += "[" + item + "]"
	}
	return out
}

// parts splits a name into what stands on the line and its subscripts.
func parts(own string) (base string, subs []string) {
	pieces := strings.FieldsFunc(own, func(r rune) bool { return r == '_' })
	if len(pieces) == 0 {
		return own, nil
	}
	base = pieces[0]
	if g, ok := greek[base]; ok {
		base = g
	} else if stem := strings.TrimRight(base, "0123456789"); stem != base && (utf8.RuneCountInString(stem) == 1 || greek[stem] != "") {
		pieces = append([]string{"", base[len(stem):]}, pieces[1:]...)
		if base = stem; greek[stem] != "" {
			base = greek[stem]
		}
	}
	if isWord(base) {
		return strings.Join(pieces, "\u00a0"), nil
	}
	for _, s := range pieces[1:] {
		if g, ok := greek[s]; ok {
			s = g
		}
		subs = append(subs, s)
	}
	return base, subs
}

// isWord tells a plain word (mass, ratio) from a symbol (T, PSA, Sa).
func isWord(s string) bool {
	n := 0
	for _, r := range s {
		if !unicode.IsLower(r) {
			return false
		}
		n++
	}
	return n > 1
}

// subscript sets the parts of a subscript, upright, with commas.
func subscript(subs []string) piece {
	var ps []piece
	for i, s := range subs {
		if i > 0 {
			ps = append(ps, comma())
		}
		switch {
		case strings.Trim(s, "0123456789") == "":
			ps = append(ps, token("mn", s, width(s)))
		case utf8.RuneCountInString(s) == 1:
			p := token("mi", s, width(s))
			p.xml = `<mi mathvariant="normal">` + escape(s) + `</mi>`
			ps = append(ps, p)
		default:
			ps = append(ps, words(s))
		}
	}
	return join(ps...)
}
