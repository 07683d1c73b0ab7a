package block

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/expr"
	"quoin/calc/lateral"
	"quoin/calc/modal"
	"quoin/calc/standard"
	"quoin/calc/structure"
)

// R, C_d and I_e belong to a system, not to a block: the blocks that state them for
// one system are held to each other once all have run.

// Peer is a block that has run without errors.
type Peer struct {
	*Run
	Body Body
}

// Agree warns of factors of modal and drift blocks that are not those of the static
// block they belong to: the one that forces are scaled to, else any of the same
// structure and target. Of several, one that agrees is enough.
func Agree(all []Peer) {
	for _, p := range all {
		switch b := p.Body.(type) {
		case *combine:
			b.agree(p.Run, all)
		case *drift:
			b.agree(p.Run, all)
		}
	}
}

// kin are the static blocks that a combine block belongs to, and how it does.
func (b *combine) kin(r *Run, all []Peer) (kin []Peer, how string) {
	if scaled := r.staticNames(b.ScaleTo.Tree); b.ScaleTo.Given && len(scaled) > 0 {
		for _, name := range scaled {
			kin = append(kin, peers(all, r.Product(name))...)
		}
		return kin, "to whose base shear forces are scaled"
	}
	if !b.Target.Given {
		return nil, ""
	}
	target := r.Product(b.Target.Text()).(*standard.Target)
	for _, m := range peers(all, r.Product(b.Modes.Text())) {
		modes, ok := m.Body.(*modes)
		if !ok || !modes.Structure.Given {
			continue
		}
		model := r.Product(modes.Structure.Text()).(*structure.Model)
		for _, p := range all {
			if s, ok := p.Body.(*static); ok && r.Product(s.Target.Text()) == any(target) && r.Product(s.Structure.Text()) == any(model) {
				kin = append(kin, p)
			}
		}
	}
	return kin, "of the same structure and target"
}

// peers are the blocks that made a product.
func peers(all []Peer, made any) []Peer {
	return slices.DeleteFunc(slices.Clone(all), func(p Peer) bool { return made == nil || p.Made != made })
}

func (b *combine) agree(r *Run, all []Peer) {
	c := r.Made.(*modal.Combined)
	kin, how := b.kin(r, all)
	if !b.R.Given && !b.ScaleTo.Given {
		return // the elastic response, on purpose
	}
	at := b.R
	if !at.Given {
		at = b.ScaleTo
	}
	differ(r, at, "R", c.R, kin, how, func(s *lateral.Static) float64 { return s.R })
	if b.Ie.Given {
		at = b.Ie
	} else if !b.R.Given {
		return // of an elastic response it is 1
	}
	differ(r, at, "I_e", c.Ie, kin, how, func(s *lateral.Static) float64 { return s.Ie })
}

// agree holds C_d to the static block that the analysis belongs to. That of the
// analysis itself is no other: see factors.
func (b *drift) agree(r *Run, all []Peer) {
	for _, p := range peers(all, r.Product(b.From.Text())) {
		if c, ok := p.Body.(*combine); ok && b.Cd.Given {
			kin, how := c.kin(p.Run, all)
			differ(r, b.Cd, "C_d", b.Cd.SI(), kin, strings.Replace(how, "forces", "forces of "+b.From.Text(), 1), func(s *lateral.Static) float64 { return s.Cd })
		}
	}
}

// differ warns of a factor that no static block states like this and one states
// otherwise; of a block that states none it is 0.
func differ(r *Run, at field.Field, name string, here float64, kin []Peer, how string, there func(*lateral.Static) float64) {
	var said []string
	for _, p := range kin {
		s, ok := p.Made.(*lateral.Static)
		switch {
		case !ok || there(s) == 0:
		case math.Abs(there(s)-here) <= 1e-9*math.Abs(here):
			return
		default:
			said = append(said, fmt.Sprintf("%s in %s", short(there(s)), p.Name))
		}
	}
	if len(said) > 0 {
		r.WarnAt(at, "factors-differ", "%s is %s here and %s, %s: one system has one %s", name, short(here), strings.Join(said, ", "), how, name)
	}
}

// staticNames are the static blocks that a tree is made of, formula names followed to
// their lines.
func (r *Run) staticNames(tree *expr.Node) []string {
	var out []string
	seen := map[string]bool{}
	var walk func(n *expr.Node)
	walk = func(n *expr.Node) {
		if n == nil {
			return
		}
		if n.Op == expr.Name {
			first, _, dotted := strings.Cut(n.Text, ".")
			switch {
			case seen[first]:
			case !dotted:
				seen[first] = true
				line, _ := r.Line(first)
				walk(line)
			case r.KindOf(first) == staticKind.Name:
				seen[first] = true
				out = append(out, first)
			}
		}
		for _, a := range n.Args {
			walk(a)
		}
	}
	walk(tree)
	return out
}
