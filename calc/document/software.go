package document

import (
	"quoin/calc/document/block"
	"quoin/calc/exhibit"
	"quoin/calc/lateral"
	"quoin/calc/modal"
	"quoin/calc/motion"
	"quoin/calc/oscillator"
	"quoin/calc/published"
	"quoin/calc/spectrum"
	"quoin/calc/standard"
	"quoin/calc/structure"
)

// evidence is what stands behind a block kind: the published cases of the engines
// that compute it, and what it does not do.
type evidence struct {
	kind   string
	cases  []func() []published.Case
	limits string
}

// evidences is every kind that computes, in the order of the reference.
var evidences = []evidence{
	{"record", from(motion.Published), "uniform steps, linear between samples; at most 10 million samples"},
	{"spectrum", from(oscillator.Published, spectrum.Published), "linear oscillators with viscous damping, starting from rest"},
	{"target", from(standard.Published), "the standards that the reference lists, and tables; no national annex by itself"},
	{"structure", from(structure.Published), "planar, elastic, one lateral freedom a level, fixed base"},
	{"modes", from(modal.Published), "undamped modes of the elastic model; no geometric stiffness"},
	{"combine", from(modal.Published), "one direction, classical damping, one ratio for all modes"},
	{"static", from(lateral.Published), "one direction, planar; no torsion, no redundancy, no vertical motion"},
	{"drift", from(lateral.Published), "centre of the floors; no torsion, no residual drift"},
}

func from(list ...func() []published.Case) []func() []published.Case { return list }

// software makes the register of software: the program, and the evidence behind
// each kind that the package uses.
func (a *assembly) software() {
	a.p.Software = exhibit.Software{Build: a.p.Provenance.Build}
	for _, e := range evidences {
		m := exhibit.Method{Kind: e.kind, Limits: e.limits}
		for _, n := range a.nodes {
			if n.kind == blockNode && n.def.Name == e.kind {
				m.Blocks = append(m.Blocks, exhibit.Origin{Name: n.name, Anchor: n.anchor})
			}
		}
		if len(m.Blocks) == 0 {
			continue
		}
		for _, list := range e.cases {
			for _, c := range list() {
				m.Cases++
				m.Values += len(c.Wants)
				if c.Origin == published.Read {
					m.Read++
				}
			}
		}
		a.p.Software.Kinds = append(a.p.Software.Kinds, m)
	}
	for _, n := range a.nodes {
		if n.kind == lineNode || n.kind == checkNode {
			a.p.Software.Kinds = append(a.p.Software.Kinds, exhibit.Method{Kind: block.Formula, Limits: "dimensions are checked; whether a formula is the right one is the author's statement"})
			break
		}
	}
}
