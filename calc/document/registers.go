package document

import (
	"slices"

	"quoin/calc/cite"
	"quoin/calc/exhibit"
	"quoin/calc/standard"
)

// references makes the register of references, in order of key: the published
// sources that are cited, and the document's own, whether cited or not.
func (a *assembly) references() {
	byKey := map[string]*exhibit.Reference{}
	var order []string
	for _, n := range a.nodes {
		for _, r := range n.result.References {
			byKey[r.Key] = &r
			order = append(order, r.Key)
		}
	}
	for _, ref := range a.refs {
		r := byKey[ref.Key]
		if r == nil {
			s, ok := cite.Lookup(ref.Key)
			if !ok {
				continue
			}
			r = &exhibit.Reference{Key: s.Key, Text: s.Text}
			byKey[ref.Key] = r
			order = append(order, ref.Key)
		}
		r.Memory = r.Memory || ref.Memory
		if ref.Clause != "" && !slices.Contains(r.Clauses, ref.Clause) {
			r.Clauses = append(r.Clauses, ref.Clause)
		}
	}
	slices.Sort(order)
	for _, k := range order {
		a.p.References = append(a.p.References, *byKey[k])
	}
}

// bases are the standards whose spectra the package uses, and the blocks of these.
func (a *assembly) bases() (anchors, bases []string) {
	for _, n := range a.nodes {
		if t, ok := n.result.Made.(*standard.Target); ok && n.kind == blockNode {
			if _, published := cite.Lookup(t.Basis); published {
				anchors = append(anchors, n.anchor)
				if !slices.Contains(bases, t.Basis) {
					bases = append(bases, t.Basis)
				}
			}
		}
	}
	return anchors, bases
}

// cautions makes the limitations section: the standing statements, then what
// this calculation triggered, in the order of the list.
func (a *assembly) cautions() {
	for _, c := range standing {
		if c.key == "open" {
			c.short, c.text = a.openText()
		}
		a.p.Cautions = append(a.p.Cautions, exhibit.Caution{Key: c.key, Short: c.short, Text: c.text})
	}
	for _, text := range a.officeCautions {
		a.p.Cautions = append(a.p.Cautions, exhibit.Caution{Key: "office", Text: text})
	}
	by := map[string][]string{}
	for _, n := range a.nodes {
		for _, key := range n.result.Cautions {
			if !slices.Contains(by[key], n.anchor) {
				by[key] = append(by[key], n.anchor)
			}
		}
	}
	for _, as := range a.p.Assumptions {
		if as.Status == "open" && !slices.Contains(by["open-assumption"], as.Anchor) {
			by["open-assumption"] = append(by["open-assumption"], as.Anchor)
		}
	}
	for _, as := range a.p.Assumptions {
		for _, o := range as.Dependents {
			if as.Status == "open" && !slices.Contains(by["open-assumption"], o.Anchor) {
				by["open-assumption"] = append(by["open-assumption"], o.Anchor)
			}
		}
	}
	once := func(key, anchor string) {
		if !slices.Contains(by[key], anchor) {
			by[key] = append(by[key], anchor)
		}
	}
	for _, c := range exhibit.OpenComments(a.p.Comments) {
		once("open-comment", c.Anchor)
	}
	for _, c := range exhibit.Failed(a.p.Checks) {
		once("not-met", c.Anchor)
	}
	for _, g := range a.p.Given {
		if exhibit.Missing([]exhibit.Given{g}) > 0 {
			once("sourceless", g.Anchor)
		}
	}
	if anchors, bases := a.bases(); len(bases) > 1 {
		by["mixed-editions"] = anchors
	}
	for _, c := range triggered {
		if blocks, ok := by[c.key]; ok {
			a.p.Cautions = append(a.p.Cautions, exhibit.Caution{Key: c.key, Short: c.short, Text: c.text, Blocks: blocks})
			delete(by, c.key)
		}
	}
	for key := range by {
		panic("document: a block triggers the caution " + key + ", which has no text")
	}
}
