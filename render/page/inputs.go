package page

import (
	"strconv"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/render/equation"
)

// givenView is what one block takes from outside, or a stretch of it.
type givenView struct {
	Name, Kind, Anchor, Place string
	Rows                      []givenRow
	Shared                    bool // one source for all rows
	Sources                   []any
}

type givenRow struct {
	Label  string
	Symbol *expr.Node
	Value  cellView
	Source any
	ID     string // of the row, where the value stands nowhere else
	Line   int    // of its file, there
}

// mostGiven is how many rows of one block stand together.
const mostGiven = 16

// given is the register of values from outside.
func (b *book) given() []item {
	var views []givenView
	for _, g := range b.p.Given {
		v := givenView{Name: or(g.Name, g.Kind), Kind: g.Kind, Anchor: g.Anchor, Place: b.place(g.Place), Shared: len(g.Sources) > 0}
		if v.Name == v.Kind {
			v.Kind = ""
		}
		for _, s := range g.Sources {
			v.Sources = append(v.Sources, sourceOf(s.Ref, clip(s.Text, titleChars)))
		}
		for i := 0; i < len(g.Rows); i += mostGiven {
			v.Rows = nil
			for _, r := range g.Rows[i:min(i+mostGiven, len(g.Rows))] {
				row := givenRow{ID: b.rowOf(r), Label: clip(r.Label, titleChars), Symbol: r.Symbol, Value: b.cell(r.Value, nil)}
				if row.ID != "" {
					row.Line = r.Place.Line
				}
				if row.Symbol != nil && (equation.Setter{}).Symbols(row.Symbol).Width > symbolColumn {
					row.Symbol = nil
					row.Label = strings.TrimSpace(r.ID + " " + row.Label)
				}
				if r.Source != nil {
					row.Source = sourceOf(r.Source.Ref, clip(r.Source.Text, titleChars))
				}
				v.Rows = append(v.Rows, row)
			}
			views = append(views, v)
		}
	}
	return chunked("given", headRow, views, func(v givenView) float64 {
		high := 0.0
		for _, r := range v.Rows {
			text := ""
			if t, ok := r.Source.(string); ok {
				text = t
			}
			high += 1.4 + 4.6*max(lines(r.Label+"S_xx ", 29), lines(r.Value.Text+r.Value.Numbers, 19), lines(text, 25))
		}
		shared := 0.0
		for _, s := range v.Sources {
			if t, ok := s.(string); ok {
				shared += 4.6 * lines(t, 25)
			} else {
				shared += 4.6
			}
		}
		return 2 + max(high, shared, 9.2)
	}, func(v givenView) []string {
		var ids []string
		for _, r := range v.Rows {
			if r.ID != "" {
				ids = append(ids, r.ID)
			}
		}
		return ids
	})
}

// rowOf is the id of the row of a value that stands nowhere else.
func (b *book) rowOf(v exhibit.GivenValue) string {
	if v.Anchor == "" {
		return ""
	}
	return b.origins[v.ID]
}

// inputs is the register of inputs: the values, then the files.
func (b *book) inputs() []item {
	p := b.p
	words := "Values that the package takes from outside, as used, each with its source. Choices of the analysis (periods, rules, dampings of spectra) are echoed with their blocks."
	missing := exhibit.Missing(p.Given)
	if missing > 0 {
		words += " Where no source is named, that is said."
	}
	var out []item
	if len(p.Given) > 0 {
		out = append(out, item{name: "text", data: struct{ Label, Text string }{"", words}, high: paragraph(words), keep: true})
		out = append(out, b.given()...)
	}
	files := chunked("inputs", headRow, p.Inputs, func(i exhibit.Input) float64 { return rowHigh(max(lines(i.Path, 22), 1)) }, nil)
	if len(files) > 0 && len(p.Given) > 0 {
		out = append(out, item{name: "files-head", high: 11, keep: true, anchors: []string{"q-files"}})
	}
	return append(out, files...)
}

// inputTally is how many values are given, and how many without a source.
func (b *book) inputTally() (given, open string) {
	n := 0
	for _, g := range b.p.Given {
		n += len(g.Rows)
	}
	if n == 0 {
		return "", ""
	}
	if k := exhibit.Missing(b.p.Given); k > 0 {
		open = strconv.Itoa(k) + " without a source"
	}
	return strconv.Itoa(n) + " given", open
}
