package document

import (
	"net/url"
	"path"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/formula"
	"quoin/calc/exhibit"
)

// links looks at every link of the prose: a file that is linked is taken into
// the inputs of the package, a heading or block must be there.
func (d *run) links() {
	d.anchors = map[string]string{}
	for _, p := range d.parts {
		for _, s := range p.md.Sections {
			if s.Anchor != "" {
				d.anchors[s.Anchor] = "s-" + s.Anchor
			}
			for _, piece := range s.Pieces {
				eachProse(piece.Prose, exhibit.Place{}, func(n exhibit.Prose, _ exhibit.Place) {
					if n.Kind == exhibit.Heading && n.Anchor != "" {
						d.anchors[n.Anchor] = "s-" + n.Anchor
					}
				})
			}
		}
		for _, b := range p.blocks {
			d.anchors[strings.TrimPrefix(b.anchor, "b-")] = b.anchor
		}
	}
	for _, p := range d.parts {
		look := func(n exhibit.Prose, at exhibit.Place) {
			if n.Kind == exhibit.Link {
				d.checkLink(p, n.Target, at)
			}
		}
		for _, s := range p.md.Sections {
			eachProse(s.Title, s.Place, look)
			for _, piece := range s.Pieces {
				eachProse(piece.Prose, s.Place, look)
			}
		}
		for _, f := range p.md.Footnotes {
			eachProse(f.Body, exhibit.Place{}, look)
		}
	}
}

// eachProse visits prose and all below it, with the place of the nearest block.
func eachProse(list []exhibit.Prose, at exhibit.Place, visit func(exhibit.Prose, exhibit.Place)) {
	for _, n := range list {
		here := at
		if n.Place.Line > 0 {
			here = n.Place
		}
		visit(n, here)
		eachProse(n.Children, here, visit)
	}
}

func (d *run) checkLink(p *part, target string, at exhibit.Place) {
	if anchor, ok := strings.CutPrefix(target, "#"); ok {
		if d.anchorOf(anchor) == "" {
			d.diags.Warnf("no-anchor", d.linkRange(p, target, at), "nothing in the document is called %s", target).
				WithHint("a heading is reached by its words in lower case with hyphens, a block by its name")
		}
		return
	}
	file, ok := linkedFile(target)
	if !ok {
		return
	}
	full, err := below(path.Dir(p.name), file)
	if err == nil {
		_, err = d.files.read(full, "attachment")
	}
	if err != nil {
		d.diags.Errorf("unreadable", d.linkRange(p, target, at), "%s", err).WithHint("a link leads to a file of the package, a heading (#words-of-it), a block (#NAME) or an address on the net")
	}
}

// linkedFile is the file that a link without a scheme leads to.
func linkedFile(target string) (string, bool) {
	if target == "" || target[0] == '#' || strings.Contains(strings.SplitN(target, "/", 2)[0], ":") {
		return "", false
	}
	file, _, _ := strings.Cut(target, "#")
	if plain, err := url.PathUnescape(file); err == nil {
		file = plain
	}
	return file, true
}

// anchorOf is the anchor on the page of a heading or a block.
func (d *run) anchorOf(name string) string {
	if a := d.anchors[name]; a != "" {
		return a
	}
	return d.anchors[formula.Normal(name)]
}

// linkTarget is where a link leads on the page.
func (d *run) linkTarget(p *part, target string) string {
	if anchor, ok := strings.CutPrefix(target, "#"); ok {
		return "#" + d.anchorOf(anchor)
	}
	if file, ok := linkedFile(target); ok {
		if full, err := below(path.Dir(p.name), file); err == nil {
			return full
		}
	}
	return target
}

// linkRange finds a link's target in the lines of its block.
func (d *run) linkRange(p *part, target string, at exhibit.Place) diag.Range {
	lines := strings.Split(string(d.files.got[p.name].data), "\n")
	for i := max(at.Line, 1) - 1; i < len(lines) && i < at.Line+200; i++ {
		if k := strings.Index(lines[i], target); k >= 0 {
			column := len([]rune(lines[i][:k])) + 1
			return diag.Range{File: p.name, Line: i + 1, Column: column, EndLine: i + 1, EndColumn: column + len([]rune(target))}
		}
	}
	return diag.Range{File: p.name, Line: max(at.Line, 1), Column: 1, EndLine: max(at.Line, 1), EndColumn: 2}
}
