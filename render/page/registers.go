package page

import (
	"cmp"
	"html/template"
	"math"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/render/equation"
)

// tallest is how high a part of a register or of checks may be, mm, so that it can
// be cut between sheets.
const tallest = 110

// chunked makes one item of every few rows.
func chunked[T any](name string, rows []T, high func(T) float64, anchors func(T) []string) []item {
	var out []item
	for i := 0; i < len(rows); {
		it := item{name: name, high: 10}
		start := i
		for ; i < len(rows) && (i == start || it.high < tallest); i++ {
			it.high += high(rows[i]) + 2
			if anchors != nil {
				it.anchors = append(it.anchors, anchors(rows[i])...)
			}
		}
		it.data = rows[start:i]
		out = append(out, it)
	}
	return out
}

// registers is what stands after the chapters, lettered.
func (b *book) registers() (out []item, toc []entry) {
	letter := 'A'
	add := func(id, title string, items []item) {
		if len(items) == 0 {
			return
		}
		number := string(letter)
		letter++
		head := item{name: "register", data: entry{Number: number, Title: title, ID: id}, high: headingHigh, keep: true, anchors: []string{id}, fresh: len(out) == 0}
		out = append(append(out, head), items...)
		toc = append(toc, entry{Number: number, Title: title, ID: id, Depth: 1})
	}
	p := b.p
	if len(p.Footnotes) > 0 {
		add("q-notes", "Notes", []item{b.footnotes()})
	}
	add("q-assumptions", "Assumptions", chunked("assumptions", p.Assumptions, func(a exhibit.Assumption) float64 {
		return 4.6 * max(lines(a.Text, 40), lines(a.Basis, 22))
	}, nil))
	notation := b.notation()
	add("q-notation", "Notation", chunked("notation", notation, func(n notationRow) float64 { return 4.6 * lines(n.Meaning, 60) }, nil))
	var refs []item
	for _, r := range p.References {
		v := struct {
			ID, Key, Text string
			Clauses       []string
			Memory        bool
		}{b.refs[r.Key], r.Key, r.Text, r.Clauses, r.Memory}
		refs = append(refs, item{name: "reference", data: v, high: 2 + 5*lines(r.Key+r.Text+strings.Join(r.Clauses, "; ")+"from memory, confirm", 85), anchors: []string{v.ID}})
	}
	add("q-references", "References", refs)
	add("q-inputs", "Inputs", chunked("inputs", p.Inputs, func(i exhibit.Input) float64 { return 9.2 * lines(i.Path, 30) }, nil))
	software := struct {
		Tool, Units string
		Digits      int
	}{or(p.Provenance.Tool, "not named"), "Shown in SI units unless written otherwise", quantity.Digits}
	if p.System == quantity.US {
		software.Units = "Shown in US customary units unless written otherwise"
	}
	add("q-software", "Software", []item{{name: "software", data: software, high: 73}})
	add("q-cautions", "Limitations and caution", b.cautions())
	return out, toc
}

func (b *book) cautions() []item {
	var standing, triggered []exhibit.Caution
	high := [2]float64{12, 12}
	for _, c := range b.p.Cautions {
		if len(c.Blocks) == 0 {
			standing = append(standing, c)
			high[0] += paragraph(c.Text)
		} else {
			triggered = append(triggered, c)
			high[1] += paragraph(c.Text + strings.Repeat("sheet 12, ", len(c.Blocks)))
		}
	}
	var out []item
	if len(standing) > 0 {
		out = append(out, item{name: "standing", data: standing, high: high[0]})
	}
	if len(triggered) > 0 {
		out = append(out, item{name: "triggered", data: triggered, high: high[1]})
	}
	return out
}

type footnoteView struct {
	ID, Back string
	Index    int
	Body     []exhibit.Prose
}

func footnoteID(i int) string   { return "q-fn-" + strconv.Itoa(i) }
func footnoteBack(i int) string { return "q-fnref-" + strconv.Itoa(i) }

func (b *book) footnotes() item {
	it := item{name: "footnotes", high: 4}
	var list []footnoteView
	for _, f := range b.p.Footnotes {
		v := footnoteView{footnoteID(f.Index), footnoteBack(f.Index), f.Index, f.Body}
		list = append(list, v)
		it.anchors = append(it.anchors, v.ID)
		for _, n := range f.Body {
			it.high += proseHigh(n)
		}
	}
	it.data = list
	return it
}

type notationRow struct {
	Symbol         template.HTML
	Meaning, Value string
	ID             string // where it is shown
}

// notation is every value named in a formula line.
func (b *book) notation() []notationRow {
	var out []notationRow
	values := slices.SortedStableFunc(slices.Values(b.p.Values), func(x, y exhibit.Entry) int { return naturally(x.ID, y.ID) })
	for _, e := range values {
		if e.Tree == nil {
			continue
		}
		unit := e.Value.Unit
		if unit.Scale == 0 {
			unit = b.p.System.Preferred(e.Value.Dim)
		}
		r := notationRow{Symbol: template.HTML(equation.Name(e.ID)), Meaning: e.Doc, ID: b.origins[e.ID]}
		if r.ID == "" {
			r.ID = e.Anchor
		}
		if e.Value.Shape == quantity.Number && len(e.Value.SI) == 1 {
			r.Value = numbersText([]exhibit.Number{{Value: e.Value.SI[0], Unit: unit, Digits: digits(e, unit)}})
		} else {
			r.Value = strconv.Itoa(e.Value.Len()) + " values, " + or(unit.Pretty(), "pure numbers")
		}
		out = append(out, r)
	}
	return out
}

// digits is how a value of the notation is shown: as given where it was given, a
// whole pure number without decimals, else as usual.
func digits(e exhibit.Entry, unit quantity.Unit) int {
	x := unit.From(e.Value.SI[0])
	given, _ := constantTree(e.Tree)
	if given || e.Value.Dim.Is(quantity.None) && unit.Pretty() == "" && x == math.Round(x) && math.Abs(x) < 1e6 {
		return quantity.Exact(x)
	}
	return quantity.Digits
}

// naturally orders names as people count: a1, a2, a10.
func naturally(a, b string) int {
	for a != "" && b != "" {
		da, db := leading(a), leading(b)
		if da == "" || db == "" {
			x, n := utf8.DecodeRuneInString(a)
			y, m := utf8.DecodeRuneInString(b)
			if x != y {
				return cmp.Compare(x, y)
			}
			a, b = a[n:], b[m:]
			continue
		}
		na, nb := strings.TrimLeft(da, "0"), strings.TrimLeft(db, "0")
		if c := cmp.Or(cmp.Compare(len(na), len(nb)), cmp.Compare(na, nb), cmp.Compare(len(da), len(db))); c != 0 {
			return c
		}
		a, b = a[len(da):], b[len(db):]
	}
	return cmp.Compare(len(a), len(b))
}

// leading is the digits a text begins with.
func leading(text string) string {
	return text[:len(text)-len(strings.TrimLeft(text, "0123456789"))]
}
