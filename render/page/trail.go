package page

import (
	"html/template"
	"path"
	"slices"
	"strconv"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
	"quoin/render/equation"
)

// Every number leads home: to its equation or its block, and from there to all that
// it depends on, down to the inputs. On paper and without scripts a link leads to
// the line, which names what its numbers come from; with scripts a card says all of
// it. What a card needs stands once a value, in a template of the page that shows
// nothing by itself.

// trail is the values that something on the page leads to.
type trail struct {
	here    int // the sheet being made
	uses    map[string]int
	order   []string                  // ids by their number, from 1
	blocks  map[string]*exhibit.Block // by name
	needs   map[string][]string       // by block: what its values depend on
	trees   map[string]*expr.Node     // by id, of values that a block shows as an equation
	numbers map[string]int            // by anchor: of equations
	named   map[string]string         // "eq V", "fig elf", "table elf-forces" -> anchor
	sides   map[string]side           // by id: of checks, where they are expressions
}

func newTrail(p *exhibit.Package) trail {
	t := trail{uses: map[string]int{}, blocks: map[string]*exhibit.Block{}, needs: map[string][]string{}, trees: map[string]*expr.Node{}, numbers: map[string]int{}, named: map[string]string{}, sides: map[string]side{}}
	anchors := map[string]*exhibit.Block{}
	for _, c := range p.Chapters {
		for _, piece := range c.Pieces {
			if k := piece.Block; k != nil && k.Name != "" {
				t.blocks[k.Name] = k
				anchors[k.Anchor] = k
			}
		}
	}
	for _, e := range p.Values {
		if name, _, ok := strings.Cut(e.ID, "."); ok {
			t.needs[name] = e.Depends
			if k := anchors[e.Anchor]; k != nil { // in values names are spelt in Latin letters
				t.blocks[name] = k
			}
		}
	}
	return t
}

// side is a side of a check that is no single value.
type side struct {
	tree  *expr.Node
	place exhibit.Place
	to    string // the row of the check
}

// numbersView is numbers, and the id of the value they are.
type numbersView struct {
	Numbers, ID string
	Was         *wasView // none: the row of the check says it
}

// side is the id of what a check compares, 0 on the left and 1 on the right: of the
// value, or of the expression as a step of its own.
func (b *book) side(c exhibit.Check, which int) string {
	tree := c.Tree
	if tree != nil && tree.Op == expr.Within {
		tree = tree.Args[0]
	}
	if tree == nil || which >= len(tree.Args) {
		return ""
	}
	switch tree = tree.Args[which]; {
	case tree.Op == expr.Name:
		return or(tree.ID, tree.Text)
	case tree.Op == expr.Item:
		return or(tree.ID, tree.Args[0].Text)
	case len(b.leavesOf(tree)) == 0:
		return ""
	}
	id := "=" + b.at(c.Place) + " " + equation.Setter{}.Symbols(tree).Text
	if _, ok := b.trail.sides[id]; !ok {
		b.trail.sides[id] = side{tree, c.Place, b.rows[checkKey(c)]}
	}
	return id
}

// step is the id of a value or a block that an id stands for: itself, the whole of
// which it is an item, or the block that makes it; "" for none.
func (b *book) step(id string) string {
	if _, ok := b.trail.sides[id]; ok {
		return id
	}
	id, _, _ = strings.Cut(id, "[")
	if _, ok := b.entries[id]; ok {
		return id
	}
	name, _, _ := strings.Cut(id, ".")
	if b.trail.blocks[name] != nil {
		return name
	}
	return ""
}

// use is the number of a value in the trail, 0 for one that is not known.
func (b *book) use(id string) int {
	id = b.step(id)
	if id == "" {
		return 0
	}
	if b.trail.uses[id] == 0 {
		b.trail.order = append(b.trail.order, id)
		b.trail.uses[id] = len(b.trail.order)
	}
	return b.trail.uses[id]
}

// homeView is where a number leads. Sheet is set where that is another sheet.
type homeView struct {
	Set        bool // the value was set from outside the document
	Href       string
	Use, Sheet int
}

// home is where a value was made, or nil.
func (b *book) home(id string) *homeView {
	to := b.origin(id)
	if s, ok := b.trail.sides[id]; ok {
		to = b.known(s.to)
	}
	if to == "" {
		if k := b.trail.blocks[b.step(id)]; k != nil {
			to = b.known(k.Anchor)
		}
	}
	if to == "" {
		return nil
	}
	v := &homeView{Href: to, Use: b.use(id), Set: b.overridden(id)}
	if s := b.sheets[to]; s != b.trail.here {
		v.Sheet = s
	}
	return v
}

// overridden tells whether a value was set from outside the document.
func (b *book) overridden(id string) bool {
	stem, _, _ := strings.Cut(id, "[")
	return b.entries[stem].Overridden
}

// mostFrom is how many origins an equation names.
const mostFrom = 8

type fromView struct {
	homeView
	Text string
}

// from is what the numbers of an equation come from: equations by number, blocks by name.
func (b *book) from(ids []string) []fromView {
	var out []fromView
	for _, id := range ids {
		h := b.home(id)
		if h == nil {
			continue
		}
		v := fromView{*h, ""}
		if n := b.trail.numbers[h.Href]; n > 0 {
			v.Text, v.Sheet = "("+strconv.Itoa(n)+")", 0
		} else if e, ok := b.entries[id]; ok && strings.HasPrefix(h.Href, "in-") {
			v.Text = e.ID
		} else {
			v.Text, _, _ = strings.Cut(b.step(id), ".")
		}
		if !slices.ContainsFunc(out, func(w fromView) bool { return w.Text == v.Text }) {
			out = append(out, v)
		}
	}
	if len(out) > mostFrom {
		out = out[:mostFrom]
	}
	return out
}

// leavesOf is the values that stand in a formula, in order.
func (b *book) leavesOf(tree *expr.Node) []string {
	var out []string
	tree.Walk(func(n *expr.Node) {
		if n.Op != expr.Name && n.Op != expr.Call {
			return
		}
		id := n.ID
		if id == "" {
			id = n.Text
		}
		if n.Op == expr.Call && !strings.Contains(id, ".") {
			return
		}
		if id = b.step(id); id != "" && !slices.Contains(out, id) {
			out = append(out, id)
		}
	})
	return out
}

// depends is what a value or a block depends on.
func (b *book) depends(id string) []string {
	if s, ok := b.trail.sides[id]; ok {
		return b.leavesOf(s.tree)
	}
	if tree := b.trail.trees[id]; tree != nil {
		return b.leavesOf(tree)
	}
	list := b.trail.needs[id]
	if e, ok := b.entries[id]; ok {
		list = e.Depends
	}
	var out []string
	for _, d := range list {
		if d = b.step(d); d != "" && d != id && !slices.Contains(out, d) {
			out = append(out, d)
		}
	}
	return out
}

// stepView is a value as the trail tells it.
type stepView struct {
	Name, To, At, Made, Reads, Doc, Value, From, Was string
	Symbol                                           *expr.Node
	Numbers                                          template.HTML
}

// steps is every value that something leads to, and what these depend on.
func (b *book) steps() []stepView {
	var out []stepView
	for i := 0; i < len(b.trail.order); i++ {
		id := b.trail.order[i]
		v := stepView{Name: id}
		if h := b.home(id); h != nil {
			v.To = h.Href
		}
		var from []string
		for _, d := range b.depends(id) {
			from = append(from, strconv.Itoa(b.use(d)))
		}
		v.From = strings.Join(from, " ")
		name, _, _ := strings.Cut(id, ".")
		k := b.trail.blocks[name]
		if s, ok := b.trail.sides[id]; ok {
			v.Name, v.Symbol, v.At, k = strings.TrimPrefix(strings.TrimPrefix(id, "="), b.at(s.place)+" "), s.tree, b.at(s.place), nil
			if s.tree.Value != nil && s.tree.Value.Shape == quantity.Number {
				v.Numbers = template.HTML(equation.Numbers(s.tree, b.p.System))
			}
		} else if e, ok := b.entries[id]; ok {
			v.Was = b.was(id).told()
			v.Symbol, v.Value, v.Doc, v.At = &expr.Node{Op: expr.Name, Text: id}, b.worth(e), e.Doc, b.at(e.Place)
			switch {
			case e.Overridden:
				v.Doc = strings.TrimPrefix(v.Doc+"; OVERRIDDEN from outside the document", "; ")
			case len(e.Moved) > 0:
				v.Doc = strings.TrimPrefix(v.Doc+"; rests on overridden "+strings.Join(e.Moved[:min(len(e.Moved), listed)], ", "), "; ")
			}
			if k != nil && name != id {
				v.Made = "made by " + name + ", " + k.Kind
			}
		} else if k != nil {
			v.Made, v.Doc, v.At = k.Kind, k.Caption, b.at(k.Place)
		}
		if k != nil {
			v.Reads = b.reads(k)
		}
		out = append(out, v)
	}
	return out
}

// at is a line of the source as a message names it.
func (b *book) at(p exhibit.Place) string {
	if p.Line == 0 {
		return ""
	}
	return b.below(p.File) + ":" + strconv.Itoa(p.Line)
}

// below is a file as seen from the document.
func (b *book) below(file string) string {
	return strings.TrimPrefix(file, path.Dir(b.p.Provenance.Source)+"/")
}

// reads is the files that a block took its data from.
func (b *book) reads(k *exhibit.Block) string {
	var out []string
	for _, part := range k.Parts {
		for _, it := range part.Items {
			if it.Echo == nil {
				continue
			}
			for _, r := range it.Echo.Rows {
				file := path.Join(path.Dir(k.Place.File), r.Value.Text)
				for _, in := range b.p.Inputs {
					if r.Value.Text != "" && (in.Path == file || in.Path == r.Value.Text) {
						out = append(out, b.below(in.Path))
					}
				}
			}
		}
	}
	return strings.Join(out, ", ")
}

// referView is a reference to an equation, a figure or a table.
type referView struct {
	Href  string
	Sheet int
}

func (b *book) refer(target string) referView {
	to := b.known(b.trail.named[target])
	if id, ok := strings.CutPrefix(target, "value "); ok {
		to = b.origin(id)
	}
	v := referView{Href: to}
	if s := b.sheets[to]; to != "" && s != b.trail.here {
		v.Sheet = s
	}
	return v
}
