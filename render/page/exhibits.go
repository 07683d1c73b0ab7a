package page

import (
	"fmt"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"quoin/calc/cite"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
	"quoin/render/equation"
)

// exhibit is one exhibit of a part as items; label is set on the first of a part.
func (b *book) exhibit(it exhibit.Item, label string) []item {
	switch {
	case it.Echo != nil:
		return b.echo(it.Echo, label)
	case it.Equation != nil:
		return b.equation(it.Equation, label)
	case it.Table != nil:
		return b.table(it.Table, label)
	case it.Figure != nil:
		return []item{b.figure(it.Figure, label)}
	case it.Checks != nil:
		return b.checks(it.Checks, label, "Checks", false)
	case it.Text != "":
		return []item{{name: "text", data: struct{ Label, Text string }{label, it.Text}, high: paragraph(it.Text)}}
	case it.Prose != nil:
		high := 0.0
		var anchors []string
		for _, n := range it.Prose {
			high += proseHigh(n)
			anchors = append(anchors, b.inner(n)...)
		}
		return []item{{name: "part-prose", data: struct {
			Label string
			Prose []exhibit.Prose
		}{label, it.Prose}, high: high, anchors: anchors}}
	}
	return nil
}

// cellView is a cell as set.
type cellView struct {
	Text, Numbers, ID string
	Symbol            *expr.Node
	Strong, Right     bool
	Mark              []int
	Whole             bool   // a text that must not break: a date
	Pad               string // how many digits are missing after the point
}

var date = regexp.MustCompile(`^\d{4}-\d{2}-\d{2}$`)

// cell shows numbers in unit where that fits them, else in their own, named.
func (b *book) cell(c exhibit.Cell, unit *quantity.Unit) cellView {
	v := cellView{Text: c.Text, Symbol: c.Symbol, Strong: c.Strong, Mark: c.Mark, Whole: date.MatchString(c.Text)}
	if len(c.Numbers) == 0 {
		return v
	}
	if unit != nil && c.Numbers[0].Unit.Dim.Is(unit.Dim) && unit.Scale != 0 {
		same := slices.Clone(c.Numbers)
		for i := range same {
			same[i].Unit = *unit
		}
		v.Numbers = bareText(same)
	} else {
		v.Numbers = numbersText(c.Numbers)
	}
	v.ID = c.Numbers[0].ID
	return v
}

// bareText is numbers alone, where their unit stands elsewhere.
func bareText(list []exhibit.Number) string {
	texts := make([]string, len(list))
	for i, n := range list {
		texts[i] = n.Text()
	}
	return strings.Join(texts, ", ")
}

// echoRoom is the column of an echoed formula, em; a wider one takes both columns.
const echoRoom = 14

func (b *book) echo(e *exhibit.Echo, label string) []item {
	type row struct {
		Field, Label, Written, From string
		Symbol                      *expr.Node
		Value                       cellView
		Default, Wide               bool
	}
	var out []item
	const most = 36 // rows an item holds, so that a long echo can be cut
	for start := 0; start < len(e.Rows); start += most {
		var rows []row
		for _, r := range e.Rows[start:min(start+most, len(e.Rows))] {
			wide := r.Value.Symbol != nil && equation.Setter{}.Symbols(r.Value.Symbol).Width > echoRoom
			rows = append(rows, row{r.Field, r.Label, r.Written, r.From, r.Symbol, b.cell(r.Value, nil), r.Default, wide})
		}
		high := 3.0
		for i := 0; i < len(rows); {
			tall, n := 0.0, min(2, len(rows)-i)
			if rows[i].Wide || n == 2 && rows[i+1].Wide {
				n = 1
			}
			for _, r := range rows[i : i+n] {
				tall = max(tall, lines(r.Label+r.Value.Text+r.Value.Numbers+r.Written+r.From, 44))
				if r.Value.Symbol != nil {
					tall = max(tall, equation.Setter{}.Symbols(r.Value.Symbol).Height*em/4.9)
				}
			}
			high += 1.4 + 4.9*tall
			i += n
		}
		out = append(out, item{name: "echo", data: struct {
			Label string
			Rows  []row
		}{label, rows}, high: high})
		label = ""
	}
	return out
}

// claimExhibits gives equations, tables and figures their ids, before anything
// leads to one and before a heading can take one.
func (b *book) claimExhibits() {
	for _, c := range b.p.Chapters {
		for _, piece := range c.Pieces {
			if piece.Block == nil {
				continue
			}
			for _, part := range piece.Block.Parts {
				for _, it := range part.Items {
					b.claimExhibit(it, piece.Block.Name)
				}
			}
		}
	}
}

func (b *book) claimExhibit(it exhibit.Item, block string) {
	switch {
	case it.Equation != nil && it.Equation.Of(block) != "":
		of := it.Equation.Of(block)
		if id := b.claim("eq-" + slug(of)); id != "" {
			b.exhibits[it.Equation], b.origins[of] = id, id
			b.trail.numbers[id], b.trail.trees[of], b.trail.named["eq "+of] = it.Equation.Number, it.Equation.Tree, id
		}
	case it.Table != nil:
		b.exhibits[it.Table] = b.claim("tab-" + slug(it.Table.ID))
		b.trail.named["table "+it.Table.ID] = b.exhibits[it.Table]
	case it.Figure != nil:
		b.exhibits[it.Figure] = b.claim("fig-" + slug(it.Figure.ID))
		b.trail.named["fig "+it.Figure.ID] = b.exhibits[it.Figure]
	}
}

// sourceView is a source in the margin.
type sourceView struct {
	Words  []word
	To     string
	Memory bool
}

// word is a word of a source; a whole one does not break at its hyphen: 12.8-4.
type word struct {
	Text  string
	Whole bool
}

// wordsOf cuts a source into words.
func wordsOf(text string) []word {
	var out []word
	for _, w := range strings.Fields(text) {
		out = append(out, word{w, strings.ContainsAny(w, "-\u2013") && utf8.RuneCountInString(w) <= 14})
	}
	return out
}

func sourceOf(ref *cite.Ref, text string) any {
	if ref != nil {
		return ref
	}
	return text
}

type columnHead struct {
	Head   string
	Symbol *expr.Node
	Unit   string
	Right  bool
}

// table is a table as items: one, or several where it is higher than a sheet.
func (b *book) table(t *exhibit.Table, label string) []item {
	type view struct {
		Label, ID, Caption, CSV, Aria string
		Number                        int
		Heads                         []columnHead
		Rows                          [][]cellView
		Notes                         []string
	}
	v := view{Label: label, ID: b.exhibits[t], Caption: t.Caption, CSV: "tables/" + t.ID + ".csv", Number: t.Number,
		Aria: fmt.Sprintf("Table %d, %s", t.Number, t.Caption)}
	for _, c := range t.Columns {
		head := c.Head
		if c.Bare && c.Symbol != nil {
			head = ""
		}
		v.Heads = append(v.Heads, columnHead{head, c.Symbol, c.Unit.Pretty(), c.Right})
	}
	rows := make([][]cellView, len(t.Rows))
	heights := make([]float64, len(t.Rows))
	chars := max(6, 100/max(1, len(t.Columns)))
	for r, row := range t.Rows {
		tall := 1.0
		cells := make([]cellView, len(row))
		for i, c := range row {
			if i < len(t.Columns) {
				cells[i] = b.cell(c, &t.Columns[i].Unit)
				if i+1 < len(row) && t.Columns[i+1].Head == "unit" && row[i+1].Text != "" {
					cells[i].Numbers = bareText(c.Numbers)
				}
				cells[i].Right = t.Columns[i].Right || len(c.Numbers) > 0
			} else {
				cells[i] = b.cell(c, nil)
			}
			tall = max(tall, lines(cells[i].Text+cells[i].Numbers, chars))
		}
		rows[r], heights[r] = cells, 1.9+4.6*tall
	}
	for i := range t.Columns {
		alignPoints(rows, i)
		for _, r := range rows {
			if i < len(r) && r[i].Right {
				v.Heads[i].Right = true
			}
		}
	}
	notes := 0.0
	for _, n := range t.Notes {
		notes += 4.6 * lines(n, 95)
	}
	var out []item
	most := b.room() - 15 - notes // what a sheet holds below the head of the block
	high := 14 + 4.6*lines(t.Caption, 90)
	add := func(last bool) {
		it := item{name: "table", high: high}
		if last {
			v.Notes = t.Notes
			it.high += notes
		}
		if v.ID != "" {
			it.anchors = []string{v.ID}
		}
		it.data = v
		out = append(out, it)
		v.Label, v.ID, v.Rows, v.Caption = "", "", nil, t.Caption+", continued"
		v.Aria = fmt.Sprintf("Table %d, %s", t.Number, v.Caption)
		high = 14 + 4.6*lines(v.Caption, 90)
	}
	for r := range rows {
		if len(v.Rows) > 0 && high+heights[r] > most {
			add(false)
		}
		v.Rows = append(v.Rows, rows[r])
		high += heights[r]
	}
	add(true)
	return out
}

// alignPoints says for each number of a column how many digits are missing after
// its point, so that points stand under each other. A column with other texts is
// left as it is.
func alignPoints(rows [][]cellView, column int) {
	most := 0
	after := make([]int, len(rows))
	for i, r := range rows {
		if column >= len(r) || r[column].Numbers == "" {
			continue
		}
		text := r[column].Numbers
		if strings.Trim(text, "0123456789.\u2212\u202f") != "" {
			return
		}
		if _, frac, ok := strings.Cut(text, "."); ok {
			after[i] = len(frac)
		}
		most = max(most, after[i])
	}
	for i, r := range rows {
		if column < len(r) && r[column].Numbers != "" && after[i] < most && most < 9 {
			r[column].Pad = strconv.Itoa(most - after[i])
			if after[i] == 0 {
				r[column].Pad += "p"
			}
		}
	}
}
