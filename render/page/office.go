package page

import (
	"errors"
	"fmt"
	"html/template"
	"io"
	"reflect"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"text/template/parse"
	"unicode/utf8"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
)

// OfficeFaults is what is wrong with the templates of an office.
type OfficeFaults struct{ List diag.List }

// Error is the first of them.
func (f *OfficeFaults) Error() string {
	return f.List[0].Range.String() + ": " + f.List[0].Summary
}

// CheckOffice fills the templates of a package's office once, for a run that writes
// no page. What is wrong with them is an [*OfficeFaults].
func CheckOffice(p *exhibit.Package) error {
	b := newBook(p, Options{})
	b.dress()
	for n := range 2 {
		b.ownHead(n+1, 2)
	}
	b.ownCover()
	return b.faults()
}

// ownTemplate is a template of an office, read and checked.
type ownTemplate struct {
	file   *exhibit.OfficeFile
	data   reflect.Type
	musts  []string // fields of the data that must be seen
	tree   *parse.Tree
	pieces []piece
	runs   []written
	budget *budget
	sound  bool
}

// piece is a written of a template between the parts that the program draws, or
// such a part.
type piece struct {
	part string
	tmpl *template.Template
}

// written is a text of a template and the branch it stands in.
type written struct{ from, to, branch int }

// mostOutput is how many bytes a template may write in one go.
const mostOutput = 512 << 10

// dress reads the templates of the office, if there is one.
func (b *book) dress() {
	if b.p.Office == nil {
		return
	}
	b.own.head = b.template("head.html", Head{}, "Project", "Number", "Date", "Prepared", "Checked")
	b.own.cover = b.template("cover.html", Cover{}, "Title", "Project", "Number")
}

// own is the clothes of a book; its members are nil where the program's own serve.
type own struct {
	head, cover *ownTemplate
	unsaid      []coverRow // facts that the cover of the office does not show
	list        diag.List
}

// faults are what was found wrong with the templates.
func (b *book) faults() error {
	if !b.own.list.HasErrors() {
		return nil
	}
	return &OfficeFaults{slices.CompactFunc(b.own.list.Sort(), func(x, y diag.Diagnostic) bool { return x.Range == y.Range && x.Summary == y.Summary })}
}

// at is the range of bytes of a template.
func (t *ownTemplate) at(from, to int) diag.Range {
	src := string(t.file.Data)
	from = min(max(from, 0), max(0, len(src)-1))
	to = min(max(to, from+1), len(src))
	r := diag.Range{File: t.file.Path, Line: 1, Column: 1, EndLine: 1, EndColumn: 2}
	if src == "" {
		return r
	}
	place := func(at int) (line, column int) {
		start := strings.LastIndexByte(src[:at], '\n') + 1
		return 1 + strings.Count(src[:at], "\n"), 1 + utf8.RuneCountInString(src[start:at])
	}
	r.Line, r.Column = place(from)
	r.EndLine, r.EndColumn = place(to)
	return r
}

// template reads and checks one template; nil where the office has none.
func (b *book) template(name string, data any, musts ...string) *ownTemplate {
	file := b.p.Office.File(name)
	if file == nil {
		return nil
	}
	t := &ownTemplate{file: file, data: reflect.TypeOf(data), musts: musts, tree: parse.New(name)}
	src := string(file.Data)
	t.tree.Mode = parse.SkipFuncCheck
	set := map[string]*parse.Tree{}
	if _, err := t.tree.Parse(src, "", "", set); err != nil {
		b.syntax(t, err)
		return t
	}
	for other, tree := range set {
		if other != name {
			b.own.list.Errorf("office-template", t.at(define(src), define(src)+2), "the template defines another, %q", tree.Name).WithHint("write it out where it is needed")
		}
	}
	w := &walker{b: b, t: t, src: src}
	w.list(t.tree.Root, t.data)
	b.markup(t, src)
	if b.own.list.HasErrors() {
		return t
	}
	t.sound = true
	b.cut(t)
	return t
}

// define is where a template is defined in the source.
func define(src string) int {
	at := regexp.MustCompile(`\{\{-?\s*(?:define|block)\b`).FindStringIndex(src)
	if at == nil {
		return 0
	}
	return at[0]
}

var lineOf = regexp.MustCompile(`^(?:html/)?template: ?[^:]+:(\d+):(?:(\d+):)? ?(.*)$`)

// syntax tells what the reader of templates found.
func (b *book) syntax(t *ownTemplate, err error) {
	text, line, column := err.Error(), 1, 0
	if m := lineOf.FindStringSubmatch(strings.ReplaceAll(text, "\n", " ")); m != nil {
		line, _ = strconv.Atoi(m[1])
		column, _ = strconv.Atoi(m[2])
		text = m[3]
	}
	start := t.offset(line)
	end := start + len(strings.SplitN(string(t.file.Data)[start:], "\n", 2)[0])
	if column > 0 && start+column < end {
		start += column
	} else if i := strings.Index(string(t.file.Data)[start:end], "{{"); i >= 0 {
		start += i
	}
	if _, why, ok := strings.Cut(text, ">: "); ok { // where it was is said already
		text = why
	}
	if _, why, ok := strings.Cut(text, "error calling "); ok {
		text = strings.TrimPrefix(why, "counted: ")
	}
	b.own.list.Errorf("office-template", t.at(start, end), "the template cannot be filled: %s", strings.TrimSpace(text)).WithHint("quoin blocks office lists the data and functions that a template has")
}

// offset is where a line begins.
func (t *ownTemplate) offset(line int) int {
	at := 0
	for n := 1; n < line; n++ {
		i := strings.IndexByte(string(t.file.Data)[at:], '\n')
		if i < 0 {
			break
		}
		at += i + 1
	}
	return at
}

// markup checks the source of a template as a fragment.
func (b *book) markup(t *ownTemplate, src string) {
	r := &reader{src: src, parts: map[int]bool{}, branch: func(at int) int {
		for _, x := range t.runs {
			if at >= x.from && at < x.to {
				return x.branch
			}
		}
		return 0
	}, picture: func(action string) bool { return picturePlace.MatchString(action) }}
	slices.SortFunc(t.runs, func(a, b written) int { return a.from - b.from })
	end := 0
	r.actions = [][2]int{}
	for _, x := range t.runs {
		if x.from > end {
			r.actions = append(r.actions, [2]int{end, x.from})
		}
		end = x.to
	}
	if end < len(src) {
		r.actions = append(r.actions, [2]int{end, len(src)})
	}
	for _, n := range t.tree.Root.Nodes {
		if part, ok := partOf(n); ok && part != "" {
			r.parts[int(n.Position())] = false
		}
	}
	r.read()
	for at, top := range r.parts {
		if !top && len(r.faults) == 0 {
			r.fail(at, at+4, "close all elements before it", "a part stands by itself, within no element")
		}
	}
	for _, f := range r.faults {
		d := b.own.list.Errorf("office-markup", t.at(f.from, f.to), "%s", f.text)
		if f.hint != "" {
			d.WithHint("%s", f.hint)
		}
	}
}

var picturePlace = regexp.MustCompile(`^\{\{-?\s*picture\s+(?:"[^"]*"|` + "`[^`]*`" + `)\s*-?\}\}$`)

// cut parts a template at the parts that the program draws.
func (b *book) cut(t *ownTemplate) {
	var nodes []parse.Node
	budget := &budget{}
	turn := func() {
		if len(nodes) == 0 {
			return
		}
		tree := t.tree.Copy()
		tree.Root.Nodes = nodes
		tmpl, err := template.New(t.file.Name).Funcs(b.ownFuncs(budget)).AddParseTree(t.file.Name, tree)
		if err != nil {
			panic("page: " + err.Error())
		}
		t.pieces = append(t.pieces, piece{tmpl: tmpl})
		nodes = nil
	}
	for _, n := range t.tree.Root.Nodes {
		if part, ok := partOf(n); ok {
			turn()
			t.pieces = append(t.pieces, piece{part: part})
			continue
		}
		nodes = append(nodes, n)
	}
	turn()
	t.budget = budget
}

// fill executes the pieces of a template and makes sure that what must be seen is
// there. It gives, piece by piece, markup and how high it is in a room so wide.
func (b *book) fill(t *ownTemplate, data any, wide, font float64) (out []filled) {
	if t == nil || !t.sound {
		return nil
	}
	seen := ""
	*t.budget = budget{}
	for _, p := range t.pieces {
		if p.tmpl == nil {
			out = append(out, filled{part: p.part})
			continue
		}
		w := &limited{left: mostOutput}
		if err := p.tmpl.Execute(w, data); err != nil {
			if errors.Is(err, errOutput) {
				b.own.list.Errorf("office-large", t.at(0, t.offset(2)), "%s", errOutput).WithHint("shorten what the template repeats")
			} else {
				b.syntax(t, err)
			}
			return nil
		}
		text := w.b.String()
		r := &reader{src: text}
		tree := r.read()
		if len(r.faults) > 0 {
			b.own.list.Errorf("office-markup", diag.Range{File: t.file.Path}, "%s, once the template is filled", r.faults[0].text).WithHint("%s", r.faults[0].hint)
			return nil
		}
		said := tree.seen()
		seen += " " + said
		if strings.TrimSpace(text) != "" {
			out = append(out, filled{text: template.HTML(text), seen: said, high: tree.high(wide, font)})
		}
	}
	seen = strings.ToLower(strings.Join(strings.Fields(seen), " "))
	v := reflect.ValueOf(data)
	var missing, places []string
	for _, name := range t.musts {
		want := strings.ToLower(strings.Join(strings.Fields(v.FieldByName(name).String()), " "))
		if strings.Contains(seen, want) {
			continue
		}
		if i := regexp.MustCompile(`\.` + name + `\b`).FindStringIndex(string(t.file.Data)); i != nil {
			b.omits(t, t.at(i[0], i[1]), []string{strings.ToLower(name)}, []string{"{{." + name + "}}"})
			continue
		}
		missing, places = append(missing, strings.ToLower(name)), append(places, "{{."+name+"}}")
	}
	if len(missing) > 0 {
		b.omits(t, diag.Range{File: t.file.Path, Line: 1, Column: 1, EndLine: 1, EndColumn: 2}, missing, places)
	}
	return out
}

// omits refuses a template that does not show what must be seen, all of it at once.
func (b *book) omits(t *ownTemplate, at diag.Range, names, places []string) {
	b.own.list.Errorf("office-omits", at, "the template does not show %s", all(names)).WithHint("place %s where it is always seen, as it is: in a text, in no branch", all(places))
}

// all is a list in a sentence: a, b and c.
func all(list []string) string {
	if len(list) < 2 {
		return strings.Join(list, "")
	}
	return strings.Join(list[:len(list)-1], ", ") + " and " + list[len(list)-1]
}

// filled is a piece of a template, filled, or a part for the program to draw.
type filled struct {
	part string
	text template.HTML
	seen string // what a reader sees of the text
	high float64
}

var errOutput = fmt.Errorf("the template writes more than %d KiB", mostOutput>>10)

// limited keeps what is written, up to a size.
type limited struct {
	b    strings.Builder
	left int
}

func (w *limited) Write(p []byte) (int, error) {
	if w.left -= len(p); w.left < 0 {
		return 0, errOutput
	}
	return w.b.Write(p)
}

var _ io.Writer = &limited{}

// ownHead is the head of a sheet as the office has it, or "".
func (b *book) ownHead(n, of int) (template.HTML, float64) {
	if b.own.head == nil {
		return "", 0
	}
	h := b.head()
	h.Sheet, h.Sheets = n, of
	out := b.fill(b.own.head, h, 182, 8.6)
	if len(out) == 0 {
		return "", 0
	}
	return out[0].text, out[0].high
}
