package document

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/diag"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/document/live"
	"quoin/calc/document/markdown"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// nodeKind tells what a node of the graph is.
type nodeKind int

const (
	blockNode nodeKind = iota // a declaring block
	lineNode                  // a formula line that sets a name
	checkNode                 // a check line
	liveNode                  // a value in prose
)

// node is one node of the graph.
type node struct {
	kind  nodeKind
	name  string // in the namespace; "" for checks, values in prose and unnamed blocks
	at    diag.Range
	part  *part
	deps  []field.Dep
	needs []*node
	diags diag.List
	// failed: an error here, or in what it needs; what needs it does not run.
	failed bool

	// a block
	def    block.Kind
	body   block.Body
	result block.Result
	order  int    // among the blocks of its kind without a name, from 1
	key    string // of what it gave, in the cache; "" where that is not known
	cached bool   // what it gave came from there
	asked  []question

	// a formula line or check
	line       formula.Line
	source     markdown.Line
	input      *input // of an inputs file, in place of a line
	ref        *cite.Ref
	refText    string
	value      quantity.Value
	unit       quantity.Unit
	digits     int
	rows       []formula.Row
	relation   string
	overridden *exhibit.Override
	original   *expr.Node // the tree an override replaced
	anchor     string

	// a value in prose
	prose    markdown.Live
	pipeline *live.Pipeline
	shown    exhibit.Live
}

// section is a calc fence with its nodes.
type section struct {
	fence  markdown.Fence
	anchor string
	block  *node   // a declaring block
	lines  []*node // a formula block, with nil for lines that are blank; see texts
	texts  map[int]string
}

// declare makes the nodes of all parts.
func (d *run) declare() {
	d.inputFiles()
	names := d.formulaNames()
	isName := func(n string) bool { return names[n] }
	d.declareInputs(isName)
	anchors := map[string]int{}
	d.unnamed = map[string]int{}
	for _, p := range d.parts {
		for i := range p.md.Fences {
			p.blocks = append(p.blocks, d.fence(p, p.md.Fences[i], isName, anchors))
		}
		d.images(p)
		for _, l := range p.md.Lives {
			n := &node{kind: liveNode, at: l.Range, part: p, prose: l}
			pipe, err := live.Parse(l.Text)
			if err != nil {
				n.failed = true
				n.diags.Errorf("prose-value", liveRange(l, err), "%s", err).WithHint("%s", liveHint(err))
			} else {
				n.pipeline = pipe
				for _, name := range pipe.Names {
					n.deps = append(n.deps, field.Dep{Path: name, At: l.Range})
				}
			}
			p.lives = append(p.lives, n)
			d.nodes = append(d.nodes, n)
		}
	}
	for i, o := range d.options.Overrides {
		if slices.ContainsFunc(d.options.Overrides[:i], func(p exhibit.Override) bool { return p.Name == o.Name }) {
			d.diags.Errorf("override", overrideRange(o), "%s is set twice", o.Name)
		}
		d.unusedOverride(o)
	}
}

// liveRange is where an error of a value in prose stands.
func liveRange(l markdown.Live, err error) diag.Range {
	if le, ok := err.(*live.Error); ok {
		return l.At(le.Offset, le.Length)
	}
	return l.Range
}

func liveHint(err error) string {
	if le, ok := err.(*live.Error); ok {
		return le.Hint
	}
	return ""
}

// fence makes the node or nodes of one calc fence.
func (d *run) fence(p *part, f markdown.Fence, isName formula.Names, anchors map[string]int) *section {
	s := &section{fence: f}
	base := f.Name
	if base == "" {
		base = f.Kind
	}
	if anchors[base]++; anchors[base] > 1 {
		base = fmt.Sprintf("%s-%d", base, anchors[base])
	}
	s.anchor = "b-" + base
	if f.Kind == block.Formula {
		if name := formula.Normal(f.Name); f.Name != "" && !formula.ValidName(name) {
			d.diags.Errorf("name", f.NameRange, "%s is not a name", f.Name).WithHint("names are letters, digits and _, and begin with a letter")
		}
		d.lines(p, s, isName)
		return s
	}
	n := &node{kind: blockNode, at: f.Place, part: p, name: formula.Normal(f.Name), anchor: s.anchor}
	s.block = n
	d.nodes = append(d.nodes, n)
	k, ok := block.Lookup(f.Kind)
	if !ok {
		n.failed = true
		d.claim(n, f.NameRange)
		e := n.diags.Errorf("unknown-kind", f.KindRange, "there is no block kind %s", f.Kind)
		if near := diag.Nearest(f.Kind, block.Names()); near != "" {
			e.WithHint("did you mean %s?", near)
		} else {
			e.WithHint("the kinds are %s", strings.Join(block.Names(), ", "))
		}
		return s
	}
	n.def = k
	if f.Name == "" {
		if !k.Nameless {
			n.failed = true
			n.diags.Errorf("missing-name", f.Place, "a %s block needs a name", k.Name).WithHint("write  ```calc %s NAME", k.Name)
		}
		d.unnamed[k.Name]++
		n.order = d.unnamed[k.Name]
	} else {
		d.claim(n, f.NameRange)
	}
	yaml, diags := field.Parse(p.name, yamlLines(f.Body), f.Place)
	n.diags = append(n.diags, diags...)
	if k.List && (yaml.IsList || len(yaml.Pairs) == 0) {
		if yaml.IsList {
			yaml = field.Node{At: f.Place, IsMap: true, Pairs: []field.Pair{{Key: "items", KeyAt: f.Place, Value: yaml}}}
		} else {
			yaml.At = f.Place
		}
	}
	d.override(n, &yaml)
	n.body = k.New()
	if !diags.HasErrors() {
		if yaml.At.Line == 0 || len(yaml.Pairs) > 0 {
			yaml.At = f.Place // what is missing is missing from the block
		}
		n.diags = append(n.diags, field.Decode(yaml, n.body, "the "+k.Name+" block", isName)...)
		if c, ok := n.body.(block.Checked); ok && (yaml.IsMap || len(yaml.Text) == 0) {
			said := &block.Checks{Place: f.Place}
			c.Check(said)
			n.diags = append(n.diags, said.Diags...)
		}
		n.deps = field.Deps(n.body)
	}
	if n.failed = n.failed || n.diags.HasErrors(); n.failed {
		n.diags = append(n.diags, field.ResolveLiterals(n.body)...)
	}
	return s
}

// lines makes the nodes of a formula block.
func (d *run) lines(p *part, s *section, isName formula.Names) {
	s.texts = map[int]string{}
	for i, src := range s.fence.Body {
		line, findings := formula.ParseLine(src.Text, isName)
		n := &node{kind: lineNode, part: p, source: src, line: line, name: line.Name}
		n.at = n.spot(0, len(src.Text))
		for _, is := range findings {
			e := n.diags.Errorf(is.Code, n.spot(is.From, is.To), "%s", is.Summary)
			e.Hint = is.Hint
			if is.Warning {
				e.Severity = diag.Warning
			}
		}
		if line.Tree == nil && len(findings) == 0 {
			s.texts[i] = strings.TrimSpace(strings.TrimLeft(strings.TrimSpace(src.Text), "#"))
			s.lines = append(s.lines, nil)
			continue
		}
		if line.Check {
			n.kind = checkNode
			n.anchor = s.anchor
			key := formula.Key(line.Tree)
			if old := d.checked[key]; old != nil && key != "" {
				n.diags.Errorf("check-twice", n.at, "this check stands already in line %d of %s", old.at.Line, old.part.name).WithHint("a check is known by its text: leave one out")
			} else {
				d.checked[key] = n
			}
		} else if line.Name == "" {
			n.name = formula.LineName(src.Text) // keeps what uses it from a second error
		}
		if _, text := d.source(line.Source); text != "" {
			n.diags.Warnf("unknown-source", n.sourceSpot(text), "no reference is known as %q", text).WithHint("%s", d.sourceHint(text, "add it to a references block; it is printed as written"))
		}
		n.failed = n.diags.HasErrors()
		if n.name != "" {
			n.anchor = "v-" + n.name
			d.claim(n, n.spot(line.NameFrom, line.NameTo))
			d.overrideLine(n, isName)
		}
		if n.line.Tree != nil {
			for _, dep := range formula.Deps(n.line.Tree) {
				n.deps = append(n.deps, field.Dep{Path: dep.Path, Method: dep.Method, At: n.lineSpot(dep.From, dep.To)})
			}
		}
		s.lines = append(s.lines, n)
		d.nodes = append(d.nodes, n)
	}
}

// spot is the place of byte offsets of a formula line.
func (n *node) spot(from, to int) diag.Range {
	if n.input != nil {
		return n.input.spot(from, to)
	}
	t := n.source.Text
	from, to = min(max(from, 0), len(t)), min(max(to, 0), len(t))
	if from == 0 && to == len(t) { // the line without its margins
		trimmed := strings.TrimSpace(t)
		from = strings.Index(t, trimmed)
		to = from + len(trimmed)
	}
	start := n.source.Column + len([]rune(t[:from]))
	end := start + len([]rune(t[from:max(from, to)]))
	return diag.Range{File: n.part.name, Line: n.source.Line, Column: start, EndLine: n.source.Line, EndColumn: max(end, start+1)}
}

// sourceSpot is the place of the source in the comment of a formula line.
func (n *node) sourceSpot(text string) diag.Range {
	if i := strings.LastIndex(n.source.Text, "["+text+"]"); i >= 0 {
		return n.spot(i+1, i+1+len(text))
	}
	return n.at
}

// lineSpot is spot, or the whole override for a line that is overridden.
func (n *node) lineSpot(from, to int) diag.Range {
	if n.overridden != nil {
		return overrideRange(*n.overridden)
	}
	return n.spot(from, to)
}

func (n *node) place() exhibit.Place { return exhibit.Place{File: n.part.name, Line: n.at.Line} }

// claim puts a node's name into the one namespace.
func (d *run) claim(n *node, at diag.Range) {
	if n.name == "" {
		return
	}
	switch {
	case !formula.ValidName(n.name):
		n.failed = true
		n.diags.Errorf("name", at, "%s is not a name", n.name).WithHint("names are letters, digits and _, and begin with a letter")
		return
	case formula.Reserved(n.name):
		n.failed = true
		n.diags.Errorf("reserved-name", at, "%s is a word of the formula language", n.name).WithHint("choose another name, for instance %s_1", n.name)
		return
	}
	if old := d.names[n.name]; old != nil {
		n.failed = true
		if old.input != nil && n.input == nil { // neither file alone shows it
			old.diags.Errorf("name-twice", old.at, "%s is set in line %d of %s too", n.name, at.Line, n.part.name).WithHint("each name is set once; rename one, or leave one out")
		}
		n.diags.Errorf("name-twice", at, "%s is already set in line %d of %s", n.name, old.at.Line, old.part.name).WithHint("each name is set once; choose another")
		return
	}
	d.names[n.name] = n
}
