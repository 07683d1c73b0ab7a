package render

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/render/chart"
	"quoin/render/ledger"
)

// Overlay is a series as it was and as it is.
type Overlay struct {
	ID       string
	Old, New exhibit.Curve
}

// mostOverlays is how many series a change sheet draws: those that moved furthest.
const mostOverlays = 12

// Changes is the change sheet of two sets of results: one HTML page, cut into sheets
// as the page of a package is and under its policy. given names the two; of the
// series, spectra are drawn, old over new.
func Changes(d *ledger.Difference, given [2]string, tool string, series []Overlay, o Options) ([]byte, error) {
	p := &exhibit.Package{System: d.New.System, Provenance: exhibit.Provenance{Tool: tool},
		Meta: exhibit.Meta{Project: "Change sheet", Title: "Changes of " + d.New.Title, Number: d.New.Number, Status: d.New.Status, Paper: "A4"}}
	if d.New.System == quantity.US {
		p.Meta.Paper = "Letter"
	}
	if d.New.Revision != "" {
		p.Meta.Revision = []exhibit.Revision{{Rev: d.New.Revision, Date: d.New.Date}}
	}
	chapter := func(title string, pieces ...exhibit.Piece) {
		p.Chapters = append(p.Chapters, exhibit.Chapter{Title: words(title), Anchor: "s-" + strings.ToLower(strings.Fields(title)[0]), Pieces: pieces})
	}
	chapter("What was compared", compared(d, given)...)
	p.Frozen = &exhibit.Frozen{Since: d.Old.Revision, Marks: slices.Concat(d.Checks, d.Inputs, d.Files, d.Assumptions, d.Values, d.Series, d.Blocks)}
	if figures := overlays(series, d); len(figures) > 0 {
		chapter("Spectra, old and new", figures...)
	}
	o.body = true
	return index(p, nil, "", o)
}

// compared is the first chapter: the two, and what it comes to.
func compared(d *ledger.Difference, given [2]string) []exhibit.Piece {
	rows := [][]string{{"", "old", "new"}, {"named", given[0], given[1]}}
	for _, r := range []struct {
		what string
		of   func(ledger.Head) string
	}{
		{"document", func(h ledger.Head) string { return h.Document }}, {"calculation", func(h ledger.Head) string { return h.Number }},
		{"title", func(h ledger.Head) string { return h.Title }}, {"revision", func(h ledger.Head) string { return h.Revision }},
		{"date", func(h ledger.Head) string { return h.Date }}, {"status", func(h ledger.Head) string { return h.Status }},
		{"program", func(h ledger.Head) string { return h.Tool }}, {"units", func(h ledger.Head) string { return string(h.System) }},
	} {
		if a, b := r.of(d.Old), r.of(d.New); a != "" || b != "" {
			rows = append(rows, []string{r.what, dash(a), dash(b)})
		}
	}
	text := fmt.Sprintf("%d numbers were held against each other; one counts as the same within %s of itself.", d.Compared, quantity.Plain(d.Tolerance))
	flipped := len(d.Flipped())
	switch {
	case !d.Differs():
		text += " All results are the same."
	case flipped == 0:
		text += " No check changed its verdict."
	case flipped == 1:
		text += " One check changed its verdict."
	default:
		text += fmt.Sprintf(" %d checks changed their verdicts.", flipped)
	}
	return []exhibit.Piece{{Prose: []exhibit.Prose{table(rows), paragraph(text)}}}
}

// Part is a part as so many per cent, with its sign.
func Part(x float64) string {
	sign := "+"
	if x < 0 {
		sign, x = "\u2212", -x
	}
	if x < 1e-4 {
		return sign + "under 0.01 %"
	}
	return sign + strings.TrimSuffix(quantity.Format(100*x, 3), ".00") + " %"
}

func dash(s string) string {
	if s == "" {
		return "——"
	}
	return s
}

func words(s string) []exhibit.Prose { return []exhibit.Prose{{Kind: exhibit.Text, Text: s}} }

func paragraph(s string) exhibit.Prose {
	return exhibit.Prose{Kind: exhibit.Paragraph, Children: words(s)}
}

// table is a table of texts, the first row its head.
func table(rows [][]string) exhibit.Prose {
	t := exhibit.Prose{Kind: exhibit.ProseTable}
	for _, r := range rows {
		row := exhibit.Prose{Kind: exhibit.TableRow}
		for j, s := range r {
			c := exhibit.Prose{Kind: exhibit.TableCell, Children: words(s)}
			if j > 0 {
				c.Align = "right"
			}
			row.Children = append(row.Children, c)
		}
		t.Children = append(t.Children, row)
	}
	return t
}

// overlays are the figures: spectra, which stand over periods.
func overlays(series []Overlay, d *ledger.Difference) []exhibit.Piece {
	revision := func(word, rev string) string {
		if rev == "" || d.Old.Revision == d.New.Revision {
			return word
		}
		return word + ", " + rev
	}
	var out []exhibit.Piece
	for _, s := range series {
		if _, what, _ := strings.Cut(s.ID, "."); !strings.HasPrefix(what, "PSA") || len(out) == mostOverlays || len(s.Old.X.SI) < 2 || len(s.New.X.SI) < 2 {
			continue
		}
		x, y := s.New.X.Unit, s.New.Y.Unit
		if x.Text == "" {
			x = quantity.SIUnit(s.New.X.Dim)
		}
		if y.Text == "" && s.New.Y.Dim.Is(quantity.Acceleration) {
			y = quantity.MustUnit("g")
		}
		f := exhibit.Figure{ID: "old-new-" + strings.Trim(chart.Prefix(s.ID), "-"), Number: len(out) + 1, Caption: s.ID + ", old and new",
			Alt: "The spectrum " + s.ID + " as it was, dashed, and as it is.",
			Panels: []exhibit.Panel{{X: exhibit.Axis{Label: "period T", Unit: x}, Y: exhibit.Axis{Label: "PSA", Unit: y}, Series: []exhibit.FigSerie{
				{ID: s.ID + " old", Label: revision("old", d.Old.Revision), X: s.Old.X.SI, Y: s.Old.Y.SI, Role: exhibit.Secondary, Dash: 1},
				{ID: s.ID, Label: revision("new", d.New.Revision), X: s.New.X.SI, Y: s.New.Y.SI, Role: exhibit.Data},
			}}}}
		out = append(out, exhibit.Piece{Block: &exhibit.Block{Kind: "spectrum", Name: s.ID, Anchor: "b-" + f.ID, Parts: []exhibit.Part{{Items: []exhibit.Item{{Figure: &f}}}}}})
	}
	return out
}
