// Package document runs a calculation: markdown source in, blocks and formula
// lines as nodes of one graph, exhibits out.
//
// [Run] is re-entrant and reads nothing but the file system it is given: that is
// what rebuilding, comparing and previewing stand on.
package document

import (
	"io/fs"
	"path"
	"slices"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/diag"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/document/markdown"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// Source is where a calculation is read from.
type Source struct {
	FS   fs.FS  // the root; nothing outside it is read
	Main string // the markdown file, a slash path below the root
}

// Options are what comes from outside the document.
type Options struct {
	Overrides  []exhibit.Override
	Provenance exhibit.Provenance
	// Progress, if set, is told of every node that is done; it may be called
	// from several goroutines, one at a time.
	Progress func(done, total int, what string)
	// Cache, if set, keeps the results of blocks for the next run. With it and
	// without, Run gives the same.
	Cache Cache
	// Trace asks for the steps of the run.
	Trace bool
}

// Result is what a run gives. Package is nil when there are errors.
type Result struct {
	Package     *exhibit.Package
	Diagnostics diag.List
	Files       map[string][]byte // every file read, by path below the root
	Checks      []exhibit.Check
	Asked       []string // every file asked for, there or not, sorted
	Steps       []Step   // if asked for: what became of each block, line and check, in order
}

// Run reads the document, runs its graph and assembles the package. All errors
// are reported, not only the first.
func Run(src Source, o Options) Result {
	o.Overrides = slices.Clone(o.Overrides)
	d := &run{src: src, options: o, files: newFiles(src.FS), names: map[string]*node{}, checked: map[string]*node{}}
	d.read()
	if len(d.parts) > 0 {
		d.declare()
		d.links()
		d.brackets()
		d.link()
		d.unusedInputs()
		d.execute()
		d.agree()
		d.sameChecks()
		d.sameDimension()
	}
	for _, n := range d.nodes {
		d.diags = append(d.diags, n.diags...)
	}
	res := Result{Diagnostics: d.diags.Sort(), Files: d.files.contents()}
	for p := range d.files.got {
		res.Asked = append(res.Asked, p)
	}
	slices.Sort(res.Asked)
	if len(d.parts) > 0 {
		res.Checks = d.checks()
	}
	if o.Trace {
		res.Steps = d.steps()
	}
	if !res.Diagnostics.HasErrors() {
		res.Package = d.assemble()
		if res.Diagnostics = d.diags.Sort(); res.Diagnostics.HasErrors() {
			res.Package = nil
		} else {
			res.Package.Warnings = res.Diagnostics
		}
	}
	return res
}

// run is the state of one run.
type run struct {
	src     Source
	options Options
	files   *files
	diags   diag.List

	front   frontMatter
	meta    exhibit.Meta
	system  quantity.System
	parts   []*part  // the main file first
	ownKeys []string // of its references blocks, and the ids of its assumptions
	assumed []string // ids of assumptions
	rests   map[*node][]string

	nodes  []*node          // in document order
	inputs []*node          // those of inputs files, which come first
	names  map[string]*node // the one namespace
	// anchors leads from the words of a heading and the names of blocks to their
	// anchors on the page.
	anchors map[string]string
	unnamed map[string]int // blocks without a name, by kind
	// checked holds the checks by what they say.
	checked map[string]*node

	office         *exhibit.Office // nil: the program's own look
	officeCautions []string
}

// part is one markdown file.
type part struct {
	name   string
	md     *markdown.File
	blocks []*section // by fence
	lives  []*node    // by live value
}

// read takes in the main file, its front matter and the further files.
func (d *run) read() {
	main := d.src.Main
	data, err := d.files.read(main, "document")
	if err != nil {
		d.diags.Errorf("unreadable", diag.Range{File: main}, "%s", err)
		return
	}
	keys := map[string]bool{}
	md, list := d.markdown(main, data, keys)
	front := &d.front
	switch {
	case md == nil, md.FrontFault:
		d.diags = append(d.diags, list...)
		return
	case !md.HasFront:
		d.diags = append(d.diags, list...)
		what := "the file does not begin with front matter"
		if len(strings.TrimSpace(string(data))) == 0 {
			what = "the file is empty"
		}
		d.diags.Errorf("no-front-matter", diag.Range{File: main, Line: 1, Column: 1, EndLine: 1, EndColumn: 2}, "%s", what).
			WithHint("begin it with three lines:  ---   quoin: 1   title: ...  and close with ---; quoin new DIR makes a package to start from")
		return
	default:
		d.diags = append(d.diags, front.decode(main, md)...)
	}
	d.meta, d.system = front.meta(&d.diags), quantity.System(front.Units.Text())
	d.dress(front.Office)
	type file struct {
		name string
		data []byte
		md   *markdown.File
		list diag.List
	}
	all := []file{{main, data, md, list}}
	seen := map[string]bool{main: true}
	for _, p := range front.Parts.List {
		full, err := below(path.Dir(main), p.Text)
		if err == nil && seen[full] {
			d.diags.Errorf("part-twice", p.At, "the part %s is named twice", p.Text)
			continue
		}
		var bytes []byte
		if err == nil {
			seen[full] = true
			bytes, err = d.files.read(full, "document")
		}
		if err != nil {
			d.diags.Errorf("unreadable", p.At, "%s", err).WithHint("parts are named relative to %s", path.Base(main))
			continue
		}
		m, l := d.markdown(full, bytes, keys)
		all = append(all, file{full, bytes, m, l})
	}
	for i := range all {
		if all[i].md == nil {
			continue
		}
		for _, f := range all[i].md.Fences {
			if f.Kind == "references" {
				for _, k := range listed(all[i].name, f, "key") {
					keys[k.Text] = true
				}
			}
		}
	}
	for i := range all {
		if all[i].md == nil {
			continue
		}
		for _, f := range all[i].md.Fences {
			if f.Kind != "assumptions" {
				continue
			}
			for _, id := range listed(all[i].name, f, "id") {
				switch _, published := cite.Lookup(id.Text); {
				case slices.Contains(d.assumed, id.Text): // told by the block
				case keys[id.Text] || published:
					d.diags.Errorf("assumption-key", id.At, "%s is the key of a reference already", id.Text).WithHint("both are cited in brackets: give the assumption another id, A1")
				default:
					d.assumed = append(d.assumed, id.Text)
				}
			}
		}
	}
	for _, id := range d.assumed {
		keys[id] = true
	}
	d.ownKeys = sorted(keys)
	for i, f := range all {
		if len(keys) > 0 && f.md != nil {
			f.md, f.list = d.markdown(f.name, f.data, keys) // once more: [key] is known now
		}
		d.diags = append(d.diags, f.list...)
		if f.md == nil {
			continue
		}
		if i > 0 && f.md.HasFront {
			d.diags.Errorf("front-matter-in-part", diag.Range{File: f.name, Line: 1, Column: 1, EndLine: 1, EndColumn: 4}, "a part has no front matter of its own").
				WithHint("move it to %s", main)
		}
		d.parts = append(d.parts, &part{name: f.name, md: f.md})
	}
}

func (d *run) markdown(name string, data []byte, keys map[string]bool) (*markdown.File, diag.List) {
	return markdown.Parse(name, data, func(key string) bool {
		ref, ok := cite.Parse(key, sorted(keys))
		return ok && ref.Key != ""
	}, func(word string) bool { return slices.Contains(block.Names(), word) })
}

func sorted(keys map[string]bool) []string {
	out := make([]string, 0, len(keys))
	for k := range keys {
		out = append(out, k)
	}
	slices.Sort(out)
	return out
}

// listed finds the values of one field in a block that is a list, without complaint.
func listed(file string, f markdown.Fence, name string) []field.Node {
	n, _ := field.Parse(file, yamlLines(f.Body), f.Place)
	var out []field.Node
	for _, it := range n.Items {
		for _, p := range it.Pairs {
			if p.Key == name && p.Value.Scalar() && p.Value.Text != "" {
				out = append(out, p.Value)
			}
		}
	}
	return out
}

func yamlLines(body []markdown.Line) []field.Line {
	out := make([]field.Line, len(body))
	for i, l := range body {
		out[i] = field.Line{Text: l.Text, Line: l.Line, Column: l.Column}
	}
	return out
}

// formulaNames finds every name that a formula line sets, in all parts.
func (d *run) formulaNames() map[string]bool {
	out := map[string]bool{}
	for _, n := range d.inputs {
		out[n.name] = true
	}
	for _, p := range d.parts {
		for _, f := range p.md.Fences {
			if f.Kind == block.Formula {
				for _, l := range f.Body {
					if n := formula.LineName(l.Text); n != "" {
						out[n] = true
					}
				}
			}
		}
	}
	return out
}
