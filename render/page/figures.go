package page

import (
	"bytes"
	"fmt"
	"html/template"
	"math"
	"regexp"
	"strconv"
	"strings"
	"unicode"

	"quoin/calc/exhibit"
	"quoin/render/chart"
	"quoin/render/equation"
)

// textWidth is the width of the column in print, mm.
const textWidth = 162

func (b *book) figure(f *exhibit.Figure, label string) item {
	if b.o.Picture == nil {
		panic("page: a figure and no Options.Picture")
	}
	v := struct {
		Label, ID, Caption, CSV, Alt string
		Number, Height               int
		Twin                         template.HTML
		Option                       template.JS
		Values                       chart.Values
	}{Label: label, ID: b.exhibits[f], Caption: f.Caption, CSV: "tables/" + f.ID + ".csv", Alt: f.Alt, Number: f.Number, Height: 380, Values: chart.ValuesOf(*f)}
	if b.o.Body {
		v.CSV = ""
	}
	twin, err := b.o.Picture(*f, Prefix(f))
	b.fail(err, "figure %q", f.ID)
	v.Twin = template.HTML(twin)
	if b.o.Chart != nil {
		option, height, err := b.o.Chart(*f)
		b.fail(err, "figure %q", f.ID)
		if bytes.Contains(option, []byte("</")) || bytes.Contains(option, []byte("<!--")) {
			b.fail(fmt.Errorf("its option would end the script element"), "figure %q", f.ID)
			option = nil
		}
		v.Option, v.Height = template.JS(option), height
	}
	high := textWidth*aspect(twin, float64(v.Height)/700) + 8 + 4.6*lines(f.Caption+" values: "+v.CSV, 90)
	return item{name: "figure", data: v, high: high, anchors: []string{v.ID}}
}

// Prefix is what the ids in the picture of a figure begin with.
func Prefix(f *exhibit.Figure) string { return "q-" + slug(f.ID) + "-" }

var viewBox = regexp.MustCompile(`viewBox="[-0-9.]+ [-0-9.]+ ([0-9.]+) ([0-9.]+)"`)

// aspect is height over width of a picture, or what it is taken to be.
func aspect(svg string, otherwise float64) float64 {
	if m := viewBox.FindStringSubmatch(svg[:min(len(svg), 2000)]); m != nil {
		w, _ := strconv.ParseFloat(m[1], 64)
		h, _ := strconv.ParseFloat(m[2], 64)
		if w > 0 && h > 0 {
			return h / w
		}
	}
	return otherwise
}

// slug is a text as part of an id: letters, digits, hyphens, points.
func slug(text string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) || r == '-' || r == '_' || r == '.' {
			return r
		}
		return '-'
	}, text)
}

type checkView struct {
	Name, Item, Anchor, Demand, Relation, Limit, Ratio string
	ID                                                 string   // of the row in its block
	Again                                              bool     // the row above is of the same check
	Of                                                 int      // of how many rows of this check it is the worst
	Rests                                              []string // open assumptions behind it
	Was                                                *wasView
	Over                                               bool          // the bar would be longer than there is room
	Formula                                            template.HTML // instead of a name in words
	Sides                                              [2]numbersView
	Tree                                               template.HTML // below the name
	Plain                                              string        // or its text
	Source                                             any
	HasBar, OK                                         bool
	Bar                                                string
}

var relations = map[string]string{"<=": "≤", "<": "<", ">=": "≥", ">": ">", "==": "="}

// checkRow is a row of a table of checks, and how high it is, mm; short where the
// row above is of the same check and has said the rest.
type checkRow struct {
	full, short         checkView
	fullHigh, shortHigh float64
}

// checks is a table of checks that goes on from sheet to sheet. A summary leads to
// the blocks; a block shows the formula of the check.
func (b *book) checks(list []exhibit.Check, label, caption string, summary bool) []item {
	rows := make([]checkRow, len(list))
	for i, c := range list {
		rows[i] = b.checkRow(c, summary)
		if i == 0 || summary || list[i-1].Name != c.Name {
			rows[i].short, rows[i].shortHigh = rows[i].full, rows[i].fullHigh
		}
	}
	return checkTable(rows, label, caption, summary)
}

type checksView struct {
	Label, Caption string
	Summary        bool
	Rows           []checkView
}

// checkTable is rows of checks, the first in full.
func checkTable(rows []checkRow, label, caption string, summary bool) []item {
	if len(rows) == 0 {
		return nil
	}
	v := checksView{Label: label, Caption: caption, Summary: summary}
	it := item{name: "checks", high: 14}
	add := func(r checkView, high float64) {
		v.Rows = append(v.Rows, r)
		it.high += high
		if r.ID != "" {
			it.anchors = append(it.anchors, r.ID)
		}
	}
	add(rows[0].full, rows[0].fullHigh)
	for _, r := range rows[1:] {
		add(r.short, r.shortHigh)
	}
	it.data = v
	it.cut = func(room float64) (first, rest []item) {
		heights := make([]float64, len(rows))
		for i, r := range rows {
			heights[i] = r.shortHigh
		}
		heights[0] = rows[0].fullHigh
		n := fit(heights, room-14, min(2, len(rows)-1))
		return checkTable(rows[:n], label, caption, summary), checkTable(rows[n:], "", caption, summary)
	}
	return []item{it}
}

// How wide the columns of a table of checks are, em: of its names and clauses, and
// in the summary. As in page.css.
const (
	checkName0, checkClause0 = 13.0, 9.4
	checkName1, checkClause1 = 11.4, 8.5
)

func (b *book) checkRow(c exhibit.Check, summary bool) checkRow {
	r := checkView{Name: checkName(c), Item: c.Item, Source: sourceOf(c.Ref, c.RefText), OK: c.OK, Rests: c.Rests,
		Demand: numbersText([]exhibit.Number{c.Demand}), Limit: numbersText([]exhibit.Number{c.Limit}), Ratio: c.RatioText()}
	r.Relation = or(relations[c.Relation], c.Relation)
	if c.Tolerance != nil {
		r.Limit += " ± " + numbersText([]exhibit.Number{*c.Tolerance})
	}
	if c.Ratio != nil && !math.IsNaN(*c.Ratio) {
		r.HasBar, r.Over = true, *c.Ratio > 1.25
		r.Bar = strconv.FormatFloat(math.Round(10*min(max(80**c.Ratio, 0), 100))/10, 'f', -1, 64)
	}
	name, clause := checkName0, checkClause0
	if summary {
		name, clause = checkName1, checkClause1
	}
	tall := textFace.lines(r.Name+", "+r.Item, name)
	if c.Description == "" && c.Tree != nil {
		set := equation.Setter{System: b.p.System, Width: 15}.Symbols(c.Tree)
		r.Formula, tall = template.HTML(set.XML), set.Height*0.8
	}
	if summary {
		r.Anchor = or(b.rows[checkKey(c)], c.Anchor)
	} else {
		r.ID = b.claimRow(c)
	}
	r.Sides = [2]numbersView{{Numbers: r.Demand, ID: b.side(c, 0)}, {Numbers: r.Limit, ID: b.side(c, 1)}}
	r.Was = b.wasCheck(c)
	tall += r.Was.high(26)
	high := func(tall float64) float64 { return 2.4 + 4.6*tall }
	out := checkRow{short: r, shortHigh: high(tall)}
	if out.short.Source, out.short.Rests = "", nil; c.Item != "" {
		out.short.Again, out.shortHigh = true, high(textFace.lines(c.Item, name))
	}
	if c.Ref != nil {
		source := labelFace.lines(c.Ref.String(), clause)
		if c.Ref.Memory {
			source += labelFace.lines("from memory, confirm", clause)
		}
		tall = max(tall, 0.87*source)
	}
	if !summary && c.Tree != nil && c.Description != "" {
		set := equation.Setter{System: b.p.System, Width: 16}.Symbols(c.Tree)
		if set.Width > 16 { // it does not break far enough: the text of the document does
			r.Plain, tall = c.Name, tall+lines(c.Name, 26)
		} else {
			r.Tree, tall = template.HTML(set.XML), tall+set.Height*0.8
		}
	}
	if len(r.Rests) > 0 {
		tall += lines(restText(r.Rests), 25)
	}
	out.full, out.fullHigh = r, high(tall)
	return out
}

func checkName(c exhibit.Check) string { return or(or(c.Description, c.Name), c.ID) }
