package page

import (
	"html/template"
	"slices"
	"strconv"
	"strings"

	"quoin/calc/exhibit"
	"quoin/templates"
)

// book is a package on its way to paper.
type book struct {
	p    *exhibit.Package
	o    Options
	tmpl *template.Template
	open []string

	ids      map[string]bool   // given out: an id stands once
	sheets   map[string]int    // anchor -> sheet, once packed
	origins  map[string]string // registry id -> anchor of where it is shown
	exhibits map[any]string    // *Equation, *Table, *Figure -> id
	entries  map[string]exhibit.Entry
	refs     map[string]string   // reference key -> anchor
	rows     map[string]string   // key of a check -> anchor of its row
	cited    map[string][]string // id of an assumption -> anchors of the prose that cites it
	notes    map[int]bool        // footnotes there are
	marked   map[int]bool        // footnotes already referred to
	symbols  map[string]bool     // names that words show as symbols
	trail    trail               // what leads values home
	within   string              // the block being made
	lead     float64             // em, of the symbols before the equals signs of that block
	revised  revised             // what is marked as changed
	own      own                 // the clothes of an office
	most     *rooms              // what sheets hold, once measured
	err      error               // the first, of making the page
}

// parsed is the templates; each book gives its own answers to their questions.
var parsed = template.Must(template.New("").Funcs((&book{}).funcs()).ParseFS(templates.Pages, "*.html"))

func openState(p *exhibit.Package, o Options) []string {
	if o.Body {
		return o.State
	}
	return append(OpenState(p), o.State...)
}

func newBook(p *exhibit.Package, o Options) *book {
	b := &book{p: p, o: o, open: openState(p, o), ids: map[string]bool{}, sheets: map[string]int{},
		origins: map[string]string{}, exhibits: map[any]string{}, entries: map[string]exhibit.Entry{}, refs: map[string]string{}, rows: map[string]string{}, cited: map[string][]string{}, notes: map[int]bool{}, marked: map[int]bool{}, symbols: symbolsOf(p), trail: newTrail(p)}
	for _, e := range p.Values {
		b.entries[e.ID] = e
	}
	for i, r := range p.References {
		b.refs[r.Key] = "q-ref-" + strconv.Itoa(i+1)
	}
	for i, a := range p.Assumptions {
		if b.refs[a.ID] == "" {
			b.refs[a.ID] = "q-assumption-" + strconv.Itoa(i+1)
		}
	}
	for _, f := range p.Footnotes {
		b.notes[f.Index] = true
	}
	b.revised = newRevised(p)
	b.tmpl = template.Must(parsed.Clone()).Funcs(b.funcs())
	return b
}

// claim gives out an id once; a second claimant gets none, nor does one that is no
// plain word or begins as the page's own ids do.
func (b *book) claim(id string) string {
	if id == "" || id != slug(id) || b.ids[id] || strings.HasPrefix(id, "q-") || strings.HasPrefix(id, "sheet-") {
		return ""
	}
	b.ids[id] = true
	return id
}

// items is everything in order: cover, contents, check summary, chapters, registers.
func (b *book) items() []item {
	body, toc := b.chapters()
	if b.o.Body {
		return b.withChanges(body)
	}
	back, more := b.registers()
	cover := b.ownCover()
	if cover == nil {
		cover = b.cover()
	}
	contents := b.contents(append(toc, more...))
	if s := pack(cover, b.rooms()); len(s) > 1 { // it goes on, and the contents may follow there
		last := total(s[len(s)-1].items)
		contents[0].fresh = last+total(contents) > b.room() && last > b.room()/3
	}
	return slices.Concat(cover, contents, b.summary(), b.changes(), body, back)
}

// entry of the table of contents. One of the screen alone is not printed.
type entry struct {
	Number, Title, Kind, ID string
	Depth                   int
	Screen                  bool
}

func (b *book) contents(toc []entry) []item {
	out := []item{{name: "contents", high: headingHigh, keep: true, fresh: true, anchors: []string{"q-contents"}}}
	first := []entry{{Title: b.word("check_summary"), ID: "q-checks", Depth: 1}}
	if b.revised.any() {
		first = append(first, entry{Title: b.revised.title(), ID: changesID, Depth: 1})
	}
	toc = append(first, toc...)
	for _, e := range toc {
		high := [4]float64{0, 7.5, 6.4, 5.1}[e.Depth]
		out = append(out, item{name: "contents-row", data: e, high: high + 5.1*(lines(e.Title+e.Kind, 88)-1)})
	}
	if b.o.Assets.Licences != "" {
		out = append(out, item{name: "contents-row", data: entry{Title: "Licences of what is bundled", ID: "q-licences", Depth: 1, Screen: true}})
	}
	return out
}
