package document

import (
	"path"
	"strings"
	"unicode"
	"unicode/utf8"

	"quoin/calc/diag"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/document/markdown"
)

// Files named under inputs in the front matter hold named values, each with its
// source. A value is a node like a formula line that reads no other name; its place
// is the line of its file.

// input is a named value of a file.
type input struct {
	name, source, words, text string
	nameAt, valueAt, sourceAt diag.Range
	pieces                    []piece // of the text of its value, where each stands
}

// piece is a stretch of a value's text that stands together in a file.
type piece struct {
	from int
	text string
	at   diag.Range
}

// add adds a stretch to the text of the value, and what joins it to that before.
func (in *input) add(joint, text string, at diag.Range) {
	in.text += joint
	in.pieces = append(in.pieces, piece{len(in.text), text, at})
	in.text += text
}

// spot is the place of byte offsets of the text.
func (in *input) spot(from, to int) diag.Range {
	for _, p := range in.pieces {
		if from >= p.from && to <= p.from+len(p.text) && from < to {
			return field.Within(p.at, p.text, from-p.from, to-p.from)
		}
	}
	return in.valueAt
}

// inputFields are the fields of a value in a YAML file.
type inputFields struct {
	Value       field.Field `name:"value" is:"text" many:"yes" short:"yes" need:"yes" doc:"the value with its unit (310 kip), or a list of values"`
	Source      field.Field `name:"source" is:"text" doc:"where it was taken from: a key of the references, or words"`
	Description field.Field `name:"description" is:"text" doc:"what it is"`
}

// inputFiles makes the nodes of the values of all inputs files.
func (d *run) inputFiles() {
	seen := map[string]bool{}
	for _, it := range d.front.Inputs.List {
		full, err := below(path.Dir(d.src.Main), it.Text)
		if err == nil && seen[full] {
			d.diags.Errorf("inputs-file", it.At, "the file %s is named twice", it.Text).WithHint("name each file once")
			continue
		}
		var data []byte
		if err == nil {
			seen[full] = true
			data, err = d.files.read(full, "values")
		}
		if err != nil {
			d.diags.Errorf("unreadable", it.At, "%s", err).WithHint("inputs are named relative to %s", path.Base(d.src.Main))
			continue
		}
		var values []*input
		switch strings.ToLower(path.Ext(full)) {
		case ".yaml", ".yml":
			values = d.inputsYAML(full, data, it.At)
		case ".csv":
			values = d.inputsCSV(it)
		default:
			d.diags.Errorf("inputs-file", it.At, "%s is neither a YAML nor a CSV file", it.Text).WithHint("name a file that ends in .yaml or .csv")
		}
		pt := &part{name: full}
		for _, in := range values {
			n := &node{kind: lineNode, part: pt, input: in, at: in.nameAt, name: formula.Normal(in.name)}
			n.source = markdown.Line{Text: in.text, Line: in.nameAt.Line}
			n.line = formula.Line{Name: n.name, Source: in.source, Description: in.words}
			d.inputs = append(d.inputs, n)
		}
	}
}

// declareInputs reads the expressions and claims the names, before those of the
// document itself.
func (d *run) declareInputs(isName formula.Names) {
	for _, n := range d.inputs {
		tree, findings := formula.ParseExpr(n.source.Text, isName)
		n.line.Tree = tree
		for _, is := range findings {
			e := n.diags.Errorf(is.Code, n.spot(is.From, is.To), "%s", is.Summary)
			e.Hint = is.Hint
			if is.Warning {
				e.Severity = diag.Warning
			}
		}
		if tree != nil {
			for _, dep := range formula.Deps(tree) {
				n.diags.Errorf("input-value", n.spot(dep.From, dep.To), "%s reads %s; an input is a value of its own", n.name, dep.Path).
					WithHint("write numbers with their units here, and formulas in the document")
				break
			}
		}
		if _, text := d.source(n.line.Source); text != "" {
			n.diags.Warnf("unknown-source", n.input.sourceAt, "no reference is known as %q", text).WithHint("%s", d.sourceHint(text, "add it to a references block; it is printed as written"))
		}
		if n.name == "" {
			n.diags.Errorf("name", n.input.valueAt, "this value has no name").WithHint("names are letters, digits and _, and begin with a letter")
		}
		n.failed = n.diags.HasErrors()
		n.anchor = "v-" + n.name
		d.claim(n, n.input.nameAt)
		d.overrideLine(n, isName)
		if n.overridden != nil && n.line.Tree != nil {
			for _, dep := range formula.Deps(n.line.Tree) {
				n.deps = append(n.deps, field.Dep{Path: dep.Path, Method: dep.Method, At: n.lineSpot(dep.From, dep.To)})
			}
		}
		d.nodes = append(d.nodes, n)
	}
}

// unusedInputs warns of values that nothing reads.
func (d *run) unusedInputs() {
	used := map[*node]bool{}
	for _, n := range d.nodes {
		for _, m := range n.needs {
			used[m] = true
		}
	}
	for _, n := range d.inputs {
		if !used[n] && d.names[n.name] == n {
			n.diags.Warnf("unused-input", n.input.nameAt, "nothing reads the input %s", n.name).WithHint("leave it out, or see whether a name in the document is misspelt")
		}
	}
}

// inputsYAML reads a mapping of names to values.
func (d *run) inputsYAML(full string, data []byte, at diag.Range) []*input {
	text := strings.TrimPrefix(string(data), "\ufeff")
	whole := diag.Range{File: full, Line: 1, Column: 1, EndLine: 1, EndColumn: 2}
	if !utf8.ValidString(text) {
		d.diags.Errorf("invalid-utf8", at, "%s is not UTF-8 text", full)
		return nil
	}
	var lines []field.Line
	for i, t := range strings.Split(strings.TrimSuffix(strings.ReplaceAll(text, "\r\n", "\n"), "\n"), "\n") {
		column := 0
		for _, c := range t {
			column++
			if c != '\t' && (unicode.IsControl(c) || unicode.In(c, unicode.Cf, unicode.Zl, unicode.Zp)) {
				d.diags.Errorf("hidden-character", diag.Range{File: full, Line: i + 1, Column: column, EndLine: i + 1, EndColumn: column + 1},
					"the text holds the character U+%04X, which cannot be seen", c).WithHint("leave it out: it can make a reader see another text or number")
				return nil
			}
		}
		lines = append(lines, field.Line{Text: t, Line: i + 1, Column: 1})
	}
	n, diags := field.Parse(full, lines, whole)
	d.diags = append(d.diags, diags...)
	if diags.HasErrors() {
		return nil
	}
	if !n.IsMap {
		d.diags.Errorf("inputs-file", whole, "%s holds no named values", full).WithHint("write lines of  name: value with unit")
		return nil
	}
	var out []*input
	for _, p := range n.Pairs {
		var f inputFields
		if p.Value.At.Line == 0 || len(p.Value.Pairs) > 0 {
			p.Value.At = p.KeyAt // what is missing is missing from the name
		}
		said := field.Decode(p.Value, &f, p.Key, nil)
		d.diags = append(d.diags, said...)
		in := &input{name: p.Key, nameAt: p.KeyAt, valueAt: f.Value.At, source: bare(f.Source.Text()), sourceAt: f.Source.At, words: f.Description.Text()}
		if said.HasErrors() {
			d.spoilt(in)
			continue
		}
		joint, end := "", ""
		if severalIn(p.Value) {
			joint, end = "[", "]"
		}
		for _, it := range f.Value.List {
			in.add(joint, it.Text, it.At)
			joint = ", "
		}
		in.text += end
		out = append(out, in)
	}
	return out
}

// severalIn tells whether a value is a YAML list.
func severalIn(n field.Node) bool {
	for _, p := range n.Pairs {
		if p.Key == "value" {
			return p.Value.IsList
		}
	}
	return n.IsList
}

// spoilt claims the name of an input that cannot be read, which is told already.
func (d *run) spoilt(in *input) {
	n := &node{kind: lineNode, part: &part{name: in.nameAt.File}, input: in, at: in.nameAt, name: formula.Normal(in.name), failed: true}
	if d.names[n.name] == nil {
		d.names[n.name] = n
	}
}

// bare is a source without the brackets that it may be written in.
func bare(text string) string {
	text = strings.TrimSpace(text)
	if strings.HasPrefix(text, "[") && strings.HasSuffix(text, "]") {
		return strings.TrimSpace(text[1 : len(text)-1])
	}
	return text
}

// inputsCSV reads a table with the columns name and value, and perhaps unit, source
// and description.
func (d *run) inputsCSV(it field.Item) []*input {
	main := &node{part: &part{name: d.src.Main}}
	rows, diags := block.InputRows(scope{d: d, n: main}, field.Field{Given: true, At: it.At, Written: it.Text, List: []field.Item{it}})
	d.diags = append(d.diags, diags...)
	var out []*input
	for _, r := range rows {
		in := &input{name: r.Name.Text, nameAt: r.Name.At, valueAt: r.Value.At, source: bare(r.Source.Text), sourceAt: r.Source.At, words: r.Description.Text}
		in.add("", r.Value.Text, r.Value.At)
		if r.Unit.Text != "" {
			in.add(" ", r.Unit.Text, r.Unit.At)
		}
		out = append(out, in)
	}
	return out
}
