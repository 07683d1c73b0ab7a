package document

import (
	"cmp"
	"encoding/json"
	"fmt"
	"slices"

	"quoin/calc/cite"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
)

// assemble makes the package of a run without errors.
func (d *run) assemble() *exhibit.Package {
	a := &assembly{run: d, p: &exhibit.Package{Meta: d.meta, System: d.system, Provenance: d.options.Provenance, Office: d.office}, anchors: map[string]int{}, methods: map[string]*node{}, stems: map[string]bool{}, symbols: map[string]*exhibit.Symbol{}}
	a.p.Provenance.Overrides = d.options.Overrides
	a.p.Provenance.Source = d.src.Main
	for _, pt := range d.parts {
		a.part(pt)
	}
	a.refers()
	a.dependents()
	a.registry()
	a.wheres()
	a.checkers()
	a.notation()
	a.p.Inputs = d.files.inputs(d.src.Main)
	a.given()
	a.settings()
	a.criteria()
	a.motions()
	a.software()
	a.noSource()
	a.references()
	a.cautions()
	a.release()
	return a.p
}

type assembly struct {
	*run
	p                          *exhibit.Package
	anchors                    map[string]int
	equations, figures, tables int
	notes                      int // footnotes of the parts before
	refs                       []cite.Ref
	methods                    map[string]*node // the first block with each method
	stems                      map[string]bool  // file names of tables, in lower case
	symbols                    map[string]*exhibit.Symbol
	referring                  []referring // of the prose, to be numbered once all is counted
}

// unique makes an anchor that no other heading has.
func (a *assembly) unique(anchor string) string {
	if a.anchors[anchor]++; a.anchors[anchor] > 1 {
		return fmt.Sprintf("%s-%d", anchor, a.anchors[anchor])
	}
	return anchor
}

func (a *assembly) part(pt *part) {
	for _, s := range pt.md.Sections {
		c := exhibit.Chapter{Title: a.prose(pt, s.Title), Anchor: a.unique("s-" + s.Anchor), Place: s.Place}
		for _, p := range s.Pieces {
			if p.Fence < 0 {
				c.Pieces = append(c.Pieces, exhibit.Piece{Prose: a.prose(pt, p.Prose)})
				continue
			}
			b := a.block(pt.blocks[p.Fence])
			c.Pieces = append(c.Pieces, exhibit.Piece{Block: b})
		}
		if len(c.Title) > 0 || len(c.Pieces) > 0 {
			a.p.Chapters = append(a.p.Chapters, c)
		}
	}
	for _, f := range pt.md.Footnotes {
		a.p.Footnotes = append(a.p.Footnotes, exhibit.Footnote{Index: a.notes + f.Index, Body: a.prose(pt, f.Body)})
	}
	a.notes = len(a.p.Footnotes)
}

// prose fills in live values and the bytes of images.
func (a *assembly) prose(pt *part, in []exhibit.Prose) []exhibit.Prose {
	if in == nil {
		return nil
	}
	out := slices.Clone(in)
	for i := range out {
		p := &out[i]
		p.Children = a.prose(pt, p.Children)
		switch p.Kind {
		case exhibit.Heading:
			p.Anchor = a.unique("s-" + p.Anchor)
		case exhibit.Value:
			shown := pt.lives[p.Level].shown
			p.Live, p.Level = &shown, 0
		case exhibit.Cite:
			if ref, ok := cite.Parse(p.Target, a.ownKeys); ok {
				p.Target, ref.Memory = ref.Key, false
				a.refs = append(a.refs, ref)
			}
		case exhibit.Refer:
			a.referring = append(a.referring, referring{p, pt.md.Refers[p.Level]})
		case exhibit.Link:
			p.Target = a.linkTarget(pt, p.Target)
		case exhibit.Image:
			p.Data, p.MediaType, p.Target, _ = a.image(pt, p.Target)
		case exhibit.FootnoteRef:
			p.Level += a.notes
		}
	}
	return out
}

// block makes the exhibit of a fence.
func (a *assembly) block(s *section) *exhibit.Block {
	b := &exhibit.Block{Kind: s.fence.Kind, Name: s.fence.Name, Anchor: s.anchor, Place: exhibit.Place{File: s.fence.Place.File, Line: s.fence.Place.Line}}
	if s.block == nil {
		a.formula(s, b)
		return b
	}
	n := s.block
	res := n.result
	c := block.Common(n.body)
	b.Caption, b.Note, b.Warnings, b.Rests = c.Caption.Text(), c.Note.Text(), res.Warnings, a.restsOnOpen(n)
	for _, it := range c.Cite.List {
		ref, ok := cite.Parse(it.Text, a.ownKeys)
		if !ok {
			ref = cite.Ref{Key: it.Text}
			a.diags.Warnf("unknown-source", it.At, "no reference is known as %q", it.Text).WithHint("%s", a.sourceHint(it.Text, "add it to a references block; it is printed as written"))
		} else {
			ref.Memory = false
			a.refs = append(a.refs, ref)
		}
		b.Cites = append(b.Cites, ref)
	}
	a.refs = append(a.refs, res.Refs...)
	show := func(part string) bool { return !c.Show.Given || slices.Contains(c.Show.Texts(), part) }
	var inputs []exhibit.Item
	n.overriddenRows(&res.Echo)
	if len(res.Echo.Rows) > 0 {
		inputs = append(inputs, exhibit.Item{Echo: &res.Echo})
	}
	inputs = append(inputs, res.Inputs...)
	if len(inputs) > 0 && show("echo") {
		b.Parts = append(b.Parts, exhibit.Part{Name: "inputs", Items: a.numbered(inputs, b)})
	}
	if len(res.Method) > 0 && show("method") {
		b.Parts = append(b.Parts, exhibit.Part{Name: "method", Items: a.method(n, b)})
	}
	if len(res.Results) > 0 && show("results") {
		b.Parts = append(b.Parts, exhibit.Part{Name: "results", Items: a.numbered(res.Results, b)})
	}
	if rows := a.checksOf(n); len(rows) > 0 {
		b.Parts = append(b.Parts, exhibit.Part{Name: "checks", Items: []exhibit.Item{{Checks: rows}}})
		a.p.Checks = append(a.p.Checks, rows...)
		for _, c := range rows {
			if c.Ref != nil {
				a.refs = append(a.refs, *c.Ref)
			}
		}
	}
	a.p.Assumptions = append(a.p.Assumptions, a.anchored(res.Assumptions, b.Anchor)...)
	for _, c := range res.Comments {
		c.Anchor = b.Anchor
		a.p.Comments = append(a.p.Comments, c)
	}
	for _, c := range res.Checking {
		c.Anchor = b.Anchor
		a.p.Checking = append(a.p.Checking, c)
	}
	return b
}

// method is the method of a block, or where it stands if an earlier block of the
// same kind has the very same.
func (a *assembly) method(n *node, b *exhibit.Block) []exhibit.Item {
	text, err := json.Marshal(n.result.Method)
	if err != nil {
		panic("document: a method that cannot be encoded: " + err.Error())
	}
	key := n.def.Name + string(text)
	first, ok := a.methods[key]
	if !ok {
		a.methods[key] = n
		a.methodSymbols(n)
		return a.numbered(n.result.Method, b)
	}
	return []exhibit.Item{{Prose: []exhibit.Prose{{Kind: exhibit.Paragraph, Children: []exhibit.Prose{
		{Kind: exhibit.Text, Text: "As for "},
		{Kind: exhibit.Link, Target: "#" + first.anchor, Children: []exhibit.Prose{{Kind: exhibit.Text, Text: first.name}}},
		{Kind: exhibit.Text, Text: "."},
	}}}}}
}

func (a *assembly) anchored(list []exhibit.Assumption, anchor string) []exhibit.Assumption {
	for i := range list {
		list[i].Anchor = anchor
	}
	return list
}

// stem makes the id of a table or figure fit for a file name, and unlike every
// other, case aside.
func (a *assembly) stem(id string) string { return exhibit.UniqueStem(id, a.stems) }

// numbered counts equations, figures and tables through the package.
func (a *assembly) numbered(items []exhibit.Item, b *exhibit.Block) []exhibit.Item {
	for i := range items {
		switch it := &items[i]; {
		case it.Equation != nil:
			a.equations++
			it.Equation.Number = a.equations
			it.Equation.Place = b.Place
		case it.Figure != nil:
			a.figures++
			it.Figure.Number, it.Figure.ID = a.figures, a.stem(it.Figure.ID)
		case it.Table != nil:
			a.tables++
			it.Table.Number, it.Table.ID = a.tables, a.stem(it.Table.ID)
		}
	}
	return items
}

// formula makes the exhibit of a formula block.
func (a *assembly) formula(s *section, b *exhibit.Block) {
	var items []exhibit.Item
	for i, n := range s.lines {
		switch {
		case n == nil:
			if s.texts[i] != "" {
				items = append(items, exhibit.Item{Text: s.texts[i]})
			}
		case n.kind == checkNode:
			rows := a.checksOf(n)
			if k := len(items) - 1; k >= 0 && items[k].Checks != nil {
				items[k].Checks = append(items[k].Checks, rows...)
			} else {
				items = append(items, exhibit.Item{Checks: rows})
			}
			a.p.Checks = append(a.p.Checks, rows...)
			if rows[0].Ref != nil {
				a.refs = append(a.refs, *rows[0].Ref)
			}
		default:
			a.equations++
			e := exhibit.Equation{ID: n.name, Symbol: &expr.Node{Op: expr.Name, Text: n.name, ID: n.name}, Tree: n.line.Tree, Result: &n.value, Digits: n.digits,
				Description: n.line.Description, Place: n.place(), Number: a.equations, Overridden: n.overridden != nil, Rests: a.restsOnOpen(n)}
			e.Ref, e.RefText = a.source(n.line.Source)
			if e.Ref != nil {
				a.refs = append(a.refs, *e.Ref)
			}
			items = append(items, exhibit.Item{Equation: &e})
		}
	}
	if len(items) > 0 {
		b.Parts = []exhibit.Part{{Items: items}}
	}
}

// source reads the citation of a formula line.
func (d *run) source(text string) (*cite.Ref, string) {
	if text == "" {
		return nil, ""
	}
	text, _ = d.sourceOf(text)
	if ref, ok := cite.Parse(text, d.ownKeys); ok {
		ref.Memory = false // the author cites it, and answers for it
		return &ref, ""
	}
	return nil, text
}

// checks are all check rows of the document, in order.
func (d *run) checks() []exhibit.Check {
	var out []exhibit.Check
	for _, n := range d.nodes {
		if (n.kind == checkNode || n.kind == blockNode) && !n.failed {
			out = append(out, d.checksOf(n)...)
		}
	}
	return out
}

func (d *run) checksOf(n *node) []exhibit.Check {
	if n.kind == blockNode {
		out := slices.Clone(n.result.Checks)
		for i := range out {
			out[i].Place, out[i].Anchor, out[i].Rests = n.place(), n.anchor, d.restsOnOpen(n)
		}
		return out
	}
	out := block.CheckRows(n.line.Text, n.line.Tree, n.rows, n.relation, d.system)
	ref, refText := d.source(n.line.Source)
	for i := range out {
		out[i].Description, out[i].Ref, out[i].RefText, out[i].Place, out[i].Anchor, out[i].Rests = n.line.Description, ref, refText, n.place(), n.anchor, d.restsOnOpen(n)
	}
	return out
}

// sameChecks reports a check line that a block makes already: a check is known by
// what it says.
func (d *run) sameChecks() {
	for _, n := range d.nodes {
		for _, c := range n.result.Checks {
			if line := d.checked[formula.Key(c.Tree)]; line != nil && !line.failed {
				line.failed = true
				line.diags.Errorf("check-twice", line.at, "the block %s makes this check already", n.name).WithHint("leave it out here")
			}
		}
	}
}

// registry lists every value with its origin and what it depends on.
func (a *assembly) registry() {
	moved := a.overrides()
	for _, n := range a.nodes {
		switch n.kind {
		case lineNode:
			a.p.Values = append(a.p.Values, exhibit.Entry{ID: n.name, Value: n.value, Tree: n.line.Tree, Place: n.place(), Anchor: n.anchor,
				Depends: leaves(n.line.Tree), Doc: n.line.Description, Overridden: n.overridden != nil})
		case blockNode:
			deps := n.dependsOn()
			for _, v := range n.result.Values {
				if n.name == "" { // nothing can name its values
					break
				}
				if v.Value.Unit.Text == "" {
					v.Value.Unit = a.system.Preferred(v.Value.Dim)
				}
				a.p.Values = append(a.p.Values, exhibit.Entry{ID: n.name + "." + v.Name, Value: v.Value, Place: n.place(), Anchor: n.anchor, Depends: deps, Doc: v.Doc})
			}
			a.p.Series = append(a.p.Series, n.result.Series...)
		}
	}
	for i := range a.p.Values {
		first, _ := cutPath(a.p.Values[i].ID)
		a.p.Values[i].Moved = moved[a.names[first]]
	}
	slices.SortFunc(a.p.Values, func(x, y exhibit.Entry) int { return cmp.Compare(x.ID, y.ID) })
	slices.SortFunc(a.p.Series, func(x, y exhibit.Curve) int { return cmp.Compare(x.ID, y.ID) })
}

// leaves are the registry ids a tree uses, without item numbers, sorted.
func leaves(tree *expr.Node) []string {
	set := map[string]bool{}
	tree.Walk(func(n *expr.Node) {
		if n.Op == expr.Name && n.Text != "pi" {
			set[n.Text] = true
		}
		if n.Op == expr.Call {
			if first, rest := cutPath(n.Text); rest != "" {
				set[first] = true
			}
		}
	})
	return sorted(set)
}

// dependsOn are the values and blocks that a block uses.
func (n *node) dependsOn() []string {
	set := map[string]bool{}
	for _, d := range field.Deps(n.body) {
		p := d.Path
		if d.Series || d.Method {
			p, _ = cutPath(p)
		}
		set[p] = true
	}
	return sorted(set)
}
