package document

import (
	"cmp"
	"regexp"
	"slices"
	"strings"

	"quoin/calc/document/block"
	"quoin/calc/exhibit"
)

// An assumption is cited by its id as a source is by its key: in the prose, in cite
// of a block, behind # of a formula line, there also after another source and a
// semicolon: # [ASCE/SEI 7-22 12.8; A1]. What is computed from what cites it rests
// on it.

// sourceOf parts what stands in brackets behind # of a line into the source and the
// assumptions after it.
func (d *run) sourceOf(text string) (source string, assumed []string) {
	parts := strings.Split(text, ";")
	for len(parts) > 0 {
		id := strings.TrimSpace(parts[len(parts)-1])
		if !slices.Contains(d.assumed, id) {
			break
		}
		assumed, parts = append(assumed, id), parts[:len(parts)-1]
	}
	slices.Reverse(assumed)
	if len(parts) == 0 && len(assumed) > 0 { // nothing else is cited: it stands for the source
		return assumed[0], assumed
	}
	return strings.TrimSpace(strings.Join(parts, ";")), assumed
}

// cites is the assumptions that a line or a block itself cites.
func (d *run) cites(n *node) []string {
	if n.kind != blockNode {
		_, ids := d.sourceOf(n.line.Source)
		return ids
	}
	var out []string
	if n.body == nil {
		return nil
	}
	for _, it := range block.Common(n.body).Cite.List {
		if id := strings.TrimSpace(it.Text); slices.Contains(d.assumed, id) {
			out = append(out, id)
		}
	}
	return out
}

// restsOn is every assumption that a node rests on, itself or by what it is
// computed from.
func (d *run) restsOn(n *node) []string {
	if out, ok := d.rests[n]; ok {
		return out
	}
	if d.rests == nil {
		d.rests = map[*node][]string{}
	}
	d.rests[n] = nil // a cycle ends here
	out := slices.Clone(d.cites(n))
	for _, m := range n.needs {
		out = append(out, d.restsOn(m)...)
	}
	slices.SortFunc(out, func(x, y string) int { return cmp.Or(exhibit.Naturally(x, y), cmp.Compare(x, y)) })
	out = slices.Compact(out)
	d.rests[n] = out
	return out
}

// restsOnOpen is the open ones among them.
func (d *run) restsOnOpen(n *node) []string {
	var out []string
	for _, id := range d.restsOn(n) {
		for _, m := range d.nodes {
			for _, as := range m.result.Assumptions {
				if as.ID == id && as.Status == "open" && !slices.Contains(out, id) {
					out = append(out, id)
				}
			}
		}
	}
	return out
}

// dependents gives each assumption of the register what rests on it.
func (a *assembly) dependents() {
	home := map[*node]string{} // lines stand in a block
	for _, pt := range a.parts {
		for _, s := range pt.blocks {
			for _, n := range s.lines {
				if n != nil {
					home[n] = s.anchor
				}
			}
		}
	}
	for _, n := range a.nodes {
		for _, id := range a.restsOn(n) {
			for i := range a.p.Assumptions {
				if as := &a.p.Assumptions[i]; as.ID == id {
					o := exhibit.Origin{Name: n.name, Anchor: n.anchor}
					if h := home[n]; h != "" {
						o.Anchor = h
					}
					as.Dependents = append(as.Dependents, o)
				}
			}
		}
	}
}

var idLike = regexp.MustCompile(`^(\pL+[-.]?)\d+$`)

// assumedLike tells whether a text looks like the id of an assumption of this
// document, though there is none of that name.
func (d *run) assumedLike(text string) bool {
	m := idLike.FindStringSubmatch(text)
	return m != nil && slices.ContainsFunc(d.assumed, func(id string) bool {
		k := idLike.FindStringSubmatch(id)
		return k != nil && k[1] == m[1]
	})
}
