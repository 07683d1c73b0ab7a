package document

import (
	"slices"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// Step is what became of one node of the graph in a run: a block, a formula line or a
// check. Two runs whose steps have the same sums read and gave the same.
type Step struct {
	Name   string        `json:"name"` // of a block or a line; the text of a check
	Kind   string        `json:"kind"` // of a block; "" for lines and checks
	Check  bool          `json:"check,omitempty"`
	Place  exhibit.Place `json:"place"`
	Failed bool          `json:"failed,omitempty"` // it did not run, or not to its end
	Cached bool          `json:"cached,omitempty"` // of a block: what it gave came from the cache
	Gave   string        `json:"gave"`             // stands for what it gave
	Reads  []Reading     `json:"reads"`
}

// Reading is one thing that a node read.
type Reading struct {
	What    string   `json:"what"` // one of the words below
	Name    string   `json:"name"`
	Text    string   `json:"text,omitempty"`    // what it was, in short
	Through []string `json:"through,omitempty"` // of a field: the names that its expression uses
	Sum     string   `json:"sum"`               // stands for what it was
}

// What a node reads.
const (
	ReadField = "field" // of its own block
	ReadValue = "value" // of a formula line or a block
	ReadBlock = "block"
	ReadKind  = "kind" // of a block
	ReadFile  = "file"
	ReadUnits = "units" // of the package
	// ReadPlace is where its fields stand as seen from the first line of the block,
	// which messages and links lead to.
	ReadPlace = "place"
)

// steps are those of all nodes, in the order of the document.
func (d *run) steps() []Step {
	var out []Step
	for _, n := range d.nodes {
		s := Step{Name: n.name, Place: n.place(), Failed: n.failed}
		sc := scope{d: d, n: n}
		switch n.kind {
		case blockNode:
			if n.body == nil {
				continue
			}
			s.Kind, s.Cached, s.Gave = n.def.Name, n.cached, n.key
			if s.Name == "" {
				s.Name = n.anchor
			}
			s.Reads = d.blockReads(n, sc)
		case lineNode, checkNode:
			if n.line.Tree == nil {
				continue
			}
			if s.Check = n.kind == checkNode; s.Check {
				s.Name = formula.Key(n.line.Tree)
			}
			s.Gave = hashed(content(viewpoint{}, n.value, n.rows))
			for _, dep := range n.deps {
				s.Reads = append(s.Reads, d.valueRead(dep, sc))
			}
			s.Reads = append(s.Reads, Reading{What: ReadField, Name: "expression", Text: short(strings.TrimSpace(n.source.Text)), Sum: hashed(content(viewpoint{}, formula.Key(n.line.Tree)))})
		default:
			continue
		}
		out = append(out, s)
	}
	return out
}

// blockReads is what a block read: its fields, and what it asked.
func (d *run) blockReads(n *node, sc scope) (out []Reading) {
	field.Each(n.body, func(name string, fields []*field.Field) {
		r := Reading{What: ReadField, Name: name}
		var all []any
		for _, f := range fields {
			if f.Given && r.Text == "" {
				r.Text = short(f.Written)
			}
			all = append(all, f.Given, f.Written, f.Texts(), f.Value)
			for _, name := range f.Names() {
				if !slices.Contains(r.Through, name) {
					r.Through = append(r.Through, name)
				}
			}
		}
		r.Sum = hashed(content(viewpoint{}, all...))
		out = append(out, r)
	})
	for _, q := range n.asked {
		answer, _ := sc.answer(q)
		r := Reading{Name: q.Name, Sum: hashed([]byte(answer))}
		switch q.What {
		case askProduct, askCurves:
			r.What = ReadBlock
		case askKind:
			r.What = ReadKind
		case askFile:
			r.What = ReadFile
			full, sum, _ := sc.sum(q.Name)
			r.Name, r.Text = full, "SHA-256 "+sum[:min(len(sum), 12)]
		case askLine:
			r.What = ReadValue
		default:
			r.What = q.What
		}
		out = append(out, r)
	}
	return append(out, Reading{What: ReadUnits, Name: "units", Text: string(d.system), Sum: string(d.system)},
		Reading{What: ReadPlace, Name: "place", Sum: d.asking(n)})
}

// valueRead is a name that a line uses.
func (d *run) valueRead(dep field.Dep, sc scope) Reading {
	first, _ := cutPath(dep.Path)
	if to := sc.block(first); to != nil && dep.Method {
		return Reading{What: ReadBlock, Name: first, Sum: to.key}
	}
	r := Reading{What: ReadValue, Name: dep.Path}
	v, _, err := sc.Value(dep.Path)
	if err != nil {
		return r
	}
	r.Sum = hashed(content(viewpoint{}, v))
	if len(v.SI) == 1 {
		unit := v.Unit
		if unit.Text == "" {
			unit = d.system.Preferred(v.Dim)
		}
		r.Text = strings.TrimSpace(quantity.Plain(unit.From(v.SI[0])) + " " + unit.Text)
	}
	return r
}

// short is a text on one line, cut where it is long.
func short(s string) string {
	s = strings.Join(strings.Fields(s), " ")
	if r := []rune(s); len(r) > 60 {
		return string(r[:57]) + "..."
	}
	return s
}
