package page

import (
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
		return []item{{name: "text", data: struct{ Label, Text string }{label, it.Text}, high: 1.6 + paragraph(it.Text)}}
	case it.Prose != nil:
		return b.partProse(it.Prose, label)
	}
	return nil
}

// partProse is paragraphs of a part of a block, cut between them or, where one is
// higher than a sheet may be, in its midst.
func (b *book) partProse(list []exhibit.Prose, label string) []item {
	it := item{name: "part-prose", data: struct {
		Label string
		Prose []exhibit.Prose
	}{label, list}, high: 1.6}
	heights := make([]float64, len(list))
	for i, n := range list {
		heights[i] = proseHigh(n, b.measure(false))
		it.high += heights[i]
		it.anchors = append(it.anchors, b.inner(n)...)
	}
	it.cut = func(room float64) (first, rest []item) {
		if it.high <= wholeProse {
			return nil, nil
		}
		n := fit(heights, room-1.6, 1)
		for _, h := range heights[:n] {
			room -= h
		}
		head, tail := slices.Clone(list[:n]), slices.Clone(list[n:])
		if heights[n] > tallest {
			if f, r, ok := cut(list[n], room, b.measure(false)); ok {
				head, tail[0] = append(head, f), r
			}
		}
		if len(head) == 0 {
			return nil, nil
		}
		return b.partProse(head, label), b.partProse(tail, "")
	}
	return []item{it}
}

// cellView is a cell as set.
type cellView struct {
	Text, Numbers, ID string
	Refer             string // what the text leads to
	Symbol            *expr.Node
	Strong, Right     bool
	Mark              []int
	Whole             bool   // a text that must not break: a date
	Pad               string // how many digits are missing after the point
	Was               *wasView
}

var date = regexp.MustCompile(`^\d{4}-\d{2}-\d{2}$`)

// cell shows numbers in unit where that fits them, else in their own, named.
func (b *book) cell(c exhibit.Cell, unit *quantity.Unit) cellView {
	v := cellView{Text: c.Text, Refer: c.Refer, Symbol: c.Symbol, Strong: c.Strong, Mark: c.Mark, Whole: date.MatchString(c.Text)}
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
	if v.Was = b.was(v.ID); len(c.Numbers) == 1 && v.Was != nil {
		n := c.Numbers[0]
		bare := unit != nil && n.Unit.Dim.Is(unit.Dim) && unit.Scale != 0
		if bare {
			n.Unit = *unit
		}
		v.Was = b.wasNumber(n, bare)
	}
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
		Default, Wide, Overridden   bool
		Was                         *wasView
	}
	var out []item
	const most = 36 // rows an item holds, so that a long echo can be cut
	for start := 0; start < len(e.Rows); start += most {
		var rows []row
		for _, r := range e.Rows[start:min(start+most, len(e.Rows))] {
			wide := r.Value.Symbol != nil && equation.Setter{}.Symbols(r.Value.Symbol).Width > echoRoom
			rows = append(rows, row{r.Field, r.Label, r.Written, r.From, r.Symbol, b.cell(r.Value, nil), r.Default, wide, r.Overridden, b.wasInput(r.Field)})
		}
		high := 3.0
		for i := 0; i < len(rows); {
			tall, n := 0.0, min(2, len(rows)-i)
			if rows[i].Wide || n == 2 && rows[i+1].Wide {
				n = 1
			}
			for _, r := range rows[i : i+n] {
				tall = max(tall, lines(r.Label+r.Value.Text+r.Value.Numbers+r.Written+r.From+r.Was.printed(), 44))
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
	for _, g := range b.p.Given {
		for _, r := range g.Rows {
			if r.Anchor != "" {
				b.origins[r.ID] = b.claim("in-" + slug(r.ID))
			}
		}
	}
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
