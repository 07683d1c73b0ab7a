package page

import (
	"html/template"
	"regexp"
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/render/equation"
)

// Words of the program name symbols as they are written, S_DS; on the page they
// stand as in equations.

// greek is the letters that base a symbol and are spelt out.
var greek = strings.Fields("beta Gamma gamma Delta delta zeta eta theta lambda nu xi rho phi psi Omega omega")

// subscripted is a name with subscripts.
var subscripted = regexp.MustCompile(`[A-Za-z]+(_[A-Za-z0-9]+)+`)

// symbolsOf is the symbols of the notation that have one letter and subscripts,
// without the names of blocks, which words mean by themselves.
func symbolsOf(p *exhibit.Package) map[string]bool {
	known := map[string]bool{"MCE_R": true}
	for _, s := range p.Notation {
		base, sub, _ := strings.Cut(s.Name, "_")
		if sub != "" && (len(base) == 1 || slices.Contains(greek, base)) {
			known[s.Name] = true
		}
	}
	for _, c := range p.Chapters {
		for _, piece := range c.Pieces {
			if piece.Block != nil {
				delete(known, piece.Block.Name)
			}
		}
	}
	return known
}

// worded is a text with its symbols typeset.
func (b *book) worded(text string) template.HTML {
	var out strings.Builder
	at := 0
	for _, m := range subscripted.FindAllStringIndex(text, -1) {
		word := text[m[0]:m[1]]
		// Behind a point it is the value of a block, elf.C_s, as it is written.
		if !b.symbols[word] || m[0] > 0 && text[m[0]-1] == '.' {
			continue
		}
		out.WriteString(template.HTMLEscapeString(text[at:m[0]]))
		out.WriteString(equation.Symbols(&expr.Node{Op: expr.Name, Text: word}))
		at = m[1]
	}
	out.WriteString(template.HTMLEscapeString(text[at:]))
	return template.HTML(out.String())
}
