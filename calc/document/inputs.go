package document

import (
	"fmt"
	"path"
	"slices"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/diag"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// takes are the kinds that take values from outside the document. Other kinds say
// what is computed and shown: periods, dampings of spectra, columns of tables. Of a
// table its file alone is data.
var takes = []string{"record", "structure", "modes", "target", "static", "combine", "drift", "table"}

// words of a field that are data, besides quantities and files.
var words = map[string][]string{
	"target": {"site", "risk", "ground", "type", "importance", "site_specific"},
	"record": {"form"},
}

// choices of the analysis that are quantities all the same.
var choices = []string{"count"}

// facts of a record stand in the register of records.
var facts = []string{"distance", "vs30", "azimuth", "usable_period"}

// given makes the register of inputs: what blocks and formula lines take from
// outside, and the source of it. A formula line is an input if it reads no name.
func (a *assembly) given() {
	a.givenFiles()
	for _, pt := range a.parts {
		for _, s := range pt.blocks {
			g := exhibit.Given{Origin: exhibit.Origin{Name: s.fence.Name, Anchor: s.anchor}, Kind: s.fence.Kind, Place: exhibit.Place{File: s.fence.Place.File, Line: s.fence.Place.Line}}
			if s.block == nil {
				a.givenLines(s, &g)
			} else if slices.Contains(takes, g.Kind) {
				a.givenFields(s.block, &g)
			}
			if len(g.Rows) > 0 {
				a.p.Given = append(a.p.Given, g)
			}
		}
	}
}

// givenLines are the lines of a formula block that read no name.
func (a *assembly) givenLines(s *section, g *exhibit.Given) {
	for _, n := range s.lines {
		if n == nil || n.kind != lineNode || len(leaves(n.line.Tree)) > 0 {
			continue
		}
		g.Rows = append(g.Rows, a.givenLine(n))
	}
}

// givenLine is a formula line or a value of an inputs file.
func (a *assembly) givenLine(n *node) exhibit.GivenValue {
	v := exhibit.GivenValue{Label: n.line.Description, Symbol: &expr.Node{Op: expr.Name, Text: n.name}, ID: n.name, Place: n.place()}
	for _, x := range n.value.SI {
		v.Value.Numbers = append(v.Value.Numbers, exhibit.Number{Value: x, Unit: n.unit, Digits: n.digits, ID: n.name})
	}
	ref, text := a.source(n.line.Source)
	switch {
	case n.overridden != nil:
		v.Source = &exhibit.Source{Text: setOutside}
	case ref != nil || text != "":
		v.Source = &exhibit.Source{Ref: ref, Text: text}
	}
	return v
}

// setOutside is the source of a value of --set.
const setOutside = "overridden from outside the document"

// givenFiles are the values of inputs files, a group a file; the register is where
// they stand in the package.
func (a *assembly) givenFiles() {
	for _, n := range a.run.inputs {
		k := len(a.p.Given) - 1
		if k < 0 || a.p.Given[k].Place.File != n.part.name {
			a.p.Given = append(a.p.Given, exhibit.Given{Origin: exhibit.Origin{Name: n.part.name, Anchor: n.anchor}, Kind: "inputs file", Place: exhibit.Place{File: n.part.name, Line: n.at.Line}})
			k++
		}
		v := a.givenLine(n)
		v.Anchor = n.anchor
		if v.Source != nil && v.Source.Ref != nil {
			a.refs = append(a.refs, *v.Source.Ref)
		}
		a.p.Given[k].Rows = append(a.p.Given[k].Rows, v)
	}
}

// inputGroup tells the values of a file from those of a block.
func (a *assembly) inputGroup(g exhibit.Given) bool {
	return slices.ContainsFunc(a.run.inputs, func(n *node) bool { return n.part.name == g.Place.File && n.anchor == g.Anchor })
}

// givenFields are the fields of a block with values and files of their own, and
// its sources.
func (a *assembly) givenFields(n *node, g *exhibit.Given) {
	top := map[*field.Field]bool{}
	field.Top(n.body, func(f *field.Field, _ field.Spec) { top[f] = true })
	listed := 0
	field.Visit(n.body, func(f *field.Field, s field.Spec) {
		place := exhibit.Place{File: f.At.File, Line: f.At.Line}
		start := len(g.Rows)
		defer func() {
			for i := start; i < len(g.Rows) && overriding(f); i++ {
				g.Rows[i].Source = &exhibit.Source{Text: setOutside}
			}
		}()
		switch {
		case !f.Given || slices.Contains(choices, s.Name) || g.Kind == "record" && slices.Contains(facts, s.Name):
		case s.Is == "file":
			g.Rows = append(g.Rows, exhibit.GivenValue{Label: "file", Value: exhibit.Cell{Text: a.full(n, f.Text())}, Place: place})
		case g.Kind == "table": // values of others, and how they are shown
		case !top[f]:
			if s.Quantity && block.Literal(f) {
				listed += max(1, len(f.Value.SI))
			}
		case slices.Contains(words[g.Kind], s.Name):
			g.Rows = append(g.Rows, exhibit.GivenValue{Label: s.Label, Value: exhibit.Cell{Text: f.Text()}, Place: place})
		case s.Quantity && block.Literal(f):
			v := exhibit.GivenValue{Label: s.Label, Place: place}
			for _, r := range n.result.Echo.Rows {
				if r.Field == s.Name {
					v.Value, v.Symbol = r.Value, r.Symbol
					if r.Symbol != nil && s.Label == strings.ReplaceAll(s.Name, "_", " ") {
						v.Label = s.Doc
					}
				}
			}
			g.Rows = append(g.Rows, v)
		}
	})
	if listed > 0 && g.Kind != "record" { // of a record they are its treatment
		g.Rows = append(g.Rows, exhibit.GivenValue{Label: "listed in the block", Value: exhibit.Cell{Text: quantity.Plain(float64(listed)) + " values"}, Place: g.Place})
	}
	for _, it := range block.Common(n.body).Cite.List {
		s := exhibit.Source{Text: it.Text}
		if ref, ok := cite.Parse(it.Text, a.ownKeys); ok {
			ref.Memory = false
			s = exhibit.Source{Ref: &ref}
		}
		g.Sources = append(g.Sources, s)
	}
	if m := n.result.Motion; m != nil {
		switch {
		case strings.TrimSpace(m.Source) != "":
			g.Sources = append(g.Sources, exhibit.Source{Text: m.Source})
		case m.File == "" && len(g.Sources) == 0:
			g.Sources = append(g.Sources, exhibit.Source{Text: "a closed form, as stated"})
		}
	}
}

// full is a file that a block names, below the root.
func (a *assembly) full(n *node, name string) string {
	if p, err := below(path.Dir(n.part.name), name); err == nil {
		return p
	}
	return name
}

// sourceless calls do for every input without a source, the blocks in order.
func (a *assembly) sourceless(do func(at diag.Range, what string, count int)) {
	for _, g := range a.p.Given {
		if len(g.Sources) > 0 {
			continue
		}
		var names []string
		var first exhibit.Place
		for _, r := range g.Rows {
			if r.Source == nil {
				if len(names) == 0 {
					first = r.Place
				}
				name := or(r.ID, r.Label)
				if r.Symbol != nil {
					name = r.Symbol.Text
				}
				names = append(names, name)
			}
		}
		if len(names) == 0 {
			continue
		}
		at := diag.Range{File: first.File, Line: first.Line, Column: 1, EndLine: first.Line, EndColumn: 2}
		for _, n := range a.nodes {
			if n.kind == lineNode && n.name == names[0] {
				at = n.at
			} else if n.kind == blockNode && n.anchor == g.Anchor {
				at = n.at
			}
		}
		what := strings.Join(names[:min(3, len(names))], ", ")
		if len(names) > 3 {
			what += fmt.Sprintf(" and %d more", len(names)-3)
		}
		if g.Kind != block.Formula && !a.inputGroup(g) {
			what += " of " + or(g.Name, g.Kind)
		}
		do(at, what, len(names))
	}
}

func or(a, b string) string {
	if strings.TrimSpace(a) == "" {
		return b
	}
	return a
}

// noSource warns once of all inputs without a source, naming the first few.
func (a *assembly) noSource() {
	var first diag.Range
	var names []string
	total, blocks := 0, 0
	a.sourceless(func(at diag.Range, what string, count int) {
		if blocks == 0 {
			first = at
		}
		if blocks < 3 {
			names = append(names, what+fmt.Sprintf(" (line %d)", at.Line))
		}
		total += count
		blocks++
	})
	switch {
	case total == 0:
		return
	case blocks > len(names):
		names = append(names, fmt.Sprintf("and those of %d more blocks", blocks-len(names)))
	}
	verb := "inputs name no source"
	if total == 1 {
		verb = "input names no source"
	}
	a.diags.Warnf("no-source", first, "%d %s: %s", total, verb, strings.Join(names, "; ")).
		WithHint("a formula line names it in its comment, # [KEY] what it is; a block by cite: [KEY], a record by source too; KEY stands in a references block")
}

// inputsOpen are the inputs without a source.
func inputsOpen(a *assembly, say sayer) {
	a.sourceless(func(at diag.Range, what string, _ int) {
		say(at, "no source is named for "+what, "# [KEY] in a formula line, cite: [KEY] in a block")
	})
}

// criteria are those that blocks state, by group; what several state alike stands
// once, what they state differently stands once each, with the block.
func (a *assembly) criteria() {
	reduced := false
	for _, group := range exhibit.CriteriaGroups {
		start := len(a.p.Criteria)
		for _, n := range a.nodes {
			for _, c := range n.result.Criteria {
				if c.Group == group {
					c.Blocks = []exhibit.Origin{{Name: n.name, Anchor: n.anchor}}
					reduced = reduced || group == exhibit.CriteriaGroups[1]
					a.p.Criteria = merge(a.p.Criteria, start, c)
				}
			}
		}
		if group == exhibit.CriteriaGroups[1] && (reduced || a.p.Meta.System != "") {
			c := exhibit.Criterion{Group: group, Label: "seismic force-resisting system", Value: exhibit.Cell{Text: or(a.p.Meta.System, "not stated")}, Open: strings.TrimSpace(a.p.Meta.System) == ""}
			a.p.Criteria = slices.Insert(a.p.Criteria, start, c)
		}
	}
}

// merge adds a criterion to those from start on, after others of its label.
func merge(all []exhibit.Criterion, start int, c exhibit.Criterion) []exhibit.Criterion {
	at := len(all)
	for i := start; i < len(all); i++ {
		if all[i].Label != c.Label {
			continue
		}
		at = i + 1
		if same(all[i], c) {
			all[i].Blocks = append(all[i].Blocks, c.Blocks...)
			return all
		}
		// A value that one block states takes the place of one that another lacks.
		if all[i].Open || c.Open {
			if all[i].Open {
				all[i] = c
			}
			return all
		}
	}
	return slices.Insert(all, at, c)
}

func same(a, b exhibit.Criterion) bool {
	if a.Open != b.Open || a.Value.Text != b.Value.Text || len(a.Value.Numbers) != len(b.Value.Numbers) {
		return false
	}
	for i, x := range a.Value.Numbers {
		if y := b.Value.Numbers[i]; x.Value != y.Value || x.Unit.Text != y.Unit.Text {
			return false
		}
	}
	return true
}

// motions makes the register of records.
func (a *assembly) motions() {
	for _, n := range a.nodes {
		if n.result.Motion == nil {
			continue
		}
		m := *n.result.Motion
		m.Origin = exhibit.Origin{Name: n.name, Anchor: n.anchor}
		if m.File != "" {
			m.File = a.full(n, m.File)
		}
		a.p.Motions = append(a.p.Motions, m)
	}
}
