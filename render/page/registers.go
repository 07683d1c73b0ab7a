package page

import (
	"html/template"
	"math"
	"strconv"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
	"quoin/render/equation"
)

// tallest is how high a paragraph may be, mm, that is not cut between sheets.
const tallest = 110

// headRow is how high the head of a table of a register is, mm; with a caption
// above it, captioned.
const (
	headRow   = 10
	captioned = headRow + 5
)

// chunked is a table, or a list, of rows that goes on from sheet to sheet; nothing
// without rows.
func chunked[T any](name string, head float64, rows []T, high func(T) float64, anchors func(T) []string) []item {
	if len(rows) == 0 {
		return nil
	}
	it := item{name: name, data: rows, high: head}
	heights := make([]float64, len(rows))
	for i, r := range rows {
		heights[i] = high(r)
		it.high += heights[i]
		if anchors != nil {
			it.anchors = append(it.anchors, anchors(r)...)
		}
	}
	it.cut = func(room float64) (first, rest []item) {
		n := fit(heights, room-head, min(2, len(rows)-1))
		return chunked(name, head, rows[:n], high, anchors), chunked(name, head, rows[n:], high, anchors)
	}
	return []item{it}
}

// cautions is the heading of what no one words anew.
const cautions = "Limitations and caution"

// registers is what stands after the chapters, lettered.
func (b *book) registers() (out []item, toc []entry) {
	letter := 'A'
	add := func(id, title string, items []item) {
		if len(items) == 0 {
			return
		}
		number := string(letter)
		if title != cautions { // which no office calls otherwise
			title = b.word(title)
		}
		letter++
		head := item{name: "register", data: entry{Number: number, Title: title, ID: id}, high: headingHigh, keep: true, anchors: []string{id}, fresh: len(out) == 0}
		out = append(append(out, head), items...)
		toc = append(toc, entry{Number: number, Title: title, ID: id, Depth: 1})
	}
	p := b.p
	if len(p.Footnotes) > 0 {
		add("q-notes", "notes", b.footnotes())
	}
	add("q-assumptions", "assumptions", chunked("assumptions", headRow, p.Assumptions, func(a exhibit.Assumption) float64 {
		return rowHigh(max(lines(a.Text, 40), lines(a.Basis, 22)))
	}, nil))
	notation := chunked("notation", headRow, b.notation(), func(rows []notationRow) float64 {
		high := 0.0
		for _, n := range rows {
			places := ""
			for _, p := range n.Places {
				places += p.Block + " 00, "
			}
			high += rowHigh(max(lines(n.Meaning, 36), lines(places, 21), lines(n.Value, 19)))
		}
		return high
	}, nil)
	if len(notation) > 0 {
		words := "Latin letters first, then Greek. In equations a last subscript in words names the block whose value it is."
		notation = append([]item{{name: "text", data: struct{ Label, Text string }{"", words}, high: paragraph(words), keep: true}}, notation...)
	}
	add("q-notation", "notation", notation)
	var refs []item
	for _, r := range p.References {
		v := struct {
			ID, Key, Text string
			Clauses       []string
			Memory        bool
		}{b.refs[r.Key], r.Key, r.Text, r.Clauses, r.Memory}
		refs = append(refs, item{name: "reference", data: v, high: 2 + 5*lines(r.Key+r.Text+strings.Join(r.Clauses, "; ")+"from memory, confirm", 85), anchors: []string{v.ID}})
	}
	add("q-references", "references", refs)
	add("q-inputs", "inputs", b.inputs())
	add("q-records", "records", b.motions())
	add("q-software", "software", b.software())
	add("q-cautions", cautions, b.cautions())
	return out, toc
}

// cautionRow is a caution and its number in its list.
type cautionRow struct {
	N int
	exhibit.Caution
}

// cautions are two lists that go on from sheet to sheet: those of every package,
// and those of what was used in this one.
func (b *book) cautions() []item {
	var standing, triggered []cautionRow
	for _, c := range b.p.Cautions {
		if len(c.Blocks) == 0 {
			standing = append(standing, cautionRow{len(standing) + 1, c})
		} else {
			triggered = append(triggered, cautionRow{len(triggered) + 1, c})
		}
	}
	high := func(c cautionRow) float64 {
		return 0.7 + cellLine*lines(c.Text+strings.Repeat("sheet 12, ", len(c.Blocks)), 103)
	}
	return append(chunked("standing", cautionHead, standing, high, nil), chunked("triggered", cautionHead, triggered, high, nil)...)
}

// cautionHead is the head of a list of cautions, and what stands around it, mm.
const cautionHead = 18

type footnoteView struct {
	ID, Back string
	Index    int
	Body     []exhibit.Prose
}

func footnoteID(i int) string   { return "q-fn-" + strconv.Itoa(i) }
func footnoteBack(i int) string { return "q-fnref-" + strconv.Itoa(i) }

func (b *book) footnotes() []item {
	var list []footnoteView
	for _, f := range b.p.Footnotes {
		list = append(list, footnoteView{footnoteID(f.Index), footnoteBack(f.Index), f.Index, f.Body})
	}
	return chunked("footnotes", headRow, list, func(f footnoteView) float64 {
		high := 0.0
		for _, n := range f.Body {
			high += proseHigh(n, b.measure(false))
		}
		return high
	}, func(f footnoteView) []string { return []string{f.ID} })
}

// rowHigh is how high a row of a register is that takes so many lines.
func rowHigh(lines float64) float64 { return cellAround + cellLine*lines }

// notationRow is one meaning of a symbol. The symbol stands at its first.
type notationRow struct {
	Symbol         template.HTML
	First          bool
	Meaning, Value string
	Places         []placeView
}

// placeView is a block whose symbol it is, or the sheet where a formula sets it.
type placeView struct{ Block, ID string }

// most places that a meaning names; the rest is counted.
const mostPlaces = 6

// notation is every symbol with its meanings, each a row.
func (b *book) notation() [][]notationRow {
	var out [][]notationRow
	for _, s := range b.p.Notation {
		var rows []notationRow
		for i, m := range s.Meanings {
			r := notationRow{First: i == 0, Meaning: m.Text, Value: m.Unit.Pretty()}
			if s.TeX != "" {
				set, err := b.tex(s.TeX, false)
				b.fail(err, "notation")
				r.Symbol = set
			} else {
				r.Symbol = symbol(s.Name)
			}
			var known []exhibit.Entry
			for _, p := range m.Places {
				if e, ok := b.entries[p.ID]; ok {
					known = append(known, e)
				}
			}
			if len(known) == 1 {
				r.Value = b.worth(known[0])
			}
			for j, p := range m.Places {
				if j == mostPlaces {
					r.Places = append(r.Places, placeView{Block: "and " + strconv.Itoa(len(m.Places)-j) + " more"})
					break
				}
				r.Places = append(r.Places, placeView{p.Block, or(b.origins[p.ID], p.Anchor)})
			}
			rows = append(rows, r)
		}
		out = append(out, rows)
	}
	return out
}

// symbol is a name typeset, or where that is wider than its column, as written,
// free to break at its parts.
func symbol(name string) template.HTML {
	set := equation.Setter{}.Symbols(&expr.Node{Op: expr.Name, Text: name})
	if set.Width <= symbolColumn {
		return template.HTML(set.XML)
	}
	return template.HTML(strings.ReplaceAll(template.HTMLEscapeString(name), "_", "_<wbr>"))
}

// symbolColumn is how wide a symbol of the notation may be, em.
const symbolColumn = 11

// worth is the value of an entry, or how many it holds and in what unit.
func (b *book) worth(e exhibit.Entry) string {
	unit := e.Value.Unit
	if unit.Scale == 0 {
		unit = b.p.System.Preferred(e.Value.Dim)
	}
	if e.Value.Shape == quantity.Number && len(e.Value.SI) == 1 {
		return numbersText([]exhibit.Number{{Value: e.Value.SI[0], Unit: unit, Digits: digits(e, unit)}})
	}
	return strconv.Itoa(e.Value.Len()) + " values, " + or(unit.Pretty(), "pure numbers")
}

// digits is how a value of the notation is shown: as given where it was given, a
// whole pure number without decimals, else as usual.
func digits(e exhibit.Entry, unit quantity.Unit) int {
	x := unit.From(e.Value.SI[0])
	given := false
	if e.Tree != nil {
		given, _ = constantTree(e.Tree)
	}
	if given || e.Value.Dim.Is(quantity.None) && unit.Pretty() == "" && x == math.Round(x) && math.Abs(x) < 1e6 {
		return quantity.Exact(x)
	}
	return quantity.Digits
}
