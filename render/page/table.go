package page

import (
	"fmt"
	"strconv"
	"strings"

	"quoin/calc/exhibit"
	"quoin/render/equation"
)

type tableView struct {
	Label, ID, Caption, CSV, Aria string
	Number                        int
	Tight                         bool // set smaller, to stay upright
	Heads                         []columnHead
	Rows                          [][]cellView
	Notes                         []string
}

// wholeTable is how high a table may be, mm, to stay in one piece where a sheet
// holds it.
const wholeTable = 75

// table is a table as items: one that is cut between its rows, or several where
// even a sheet across cannot hold its columns side by side.
func (b *book) table(t *exhibit.Table, label string) []item {
	v := tableView{Label: label, ID: b.exhibits[t], Caption: t.Caption, CSV: "tables/" + t.ID + ".csv", Number: t.Number, Notes: t.Notes}
	for _, c := range t.Columns {
		head := c.Head
		if c.Bare && c.Symbol != nil {
			head = ""
		}
		v.Heads = append(v.Heads, columnHead{head, c.Symbol, c.Unit.Pretty(), c.Right})
	}
	v.Rows = b.tableCells(t, v.Heads)
	columns := v.grid().columns()
	if needs(columns) > b.measure(false) {
		v.Tight = true
		columns = v.grid().columns()
	}
	wide := needs(columns) > b.measure(false)
	if v.Tight = v.Tight && !wide; wide {
		columns = v.grid().columns()
	}
	parts := stretches(columns, b.measure(wide))
	if !wide {
		parts = parts[:1]
	}
	var out []item
	for i, s := range parts {
		p := v
		p.Heads = taken(v.Heads, s)
		p.Rows = make([][]cellView, len(v.Rows))
		for r, row := range v.Rows {
			p.Rows[r] = taken(row, s)
		}
		if len(parts) > 1 {
			p.Caption = fmt.Sprintf("%s, columns %s of %d", v.Caption, span(s.from+1, s.to), len(columns))
			if s.from == 0 {
				p.Caption = fmt.Sprintf("%s, columns %s of %d", v.Caption, span(1, s.to), len(columns))
			}
		}
		if i > 0 {
			p.ID, p.Label = "", ""
		}
		if i < len(parts)-1 {
			p.Notes = nil
		}
		out = append(out, p.item(b.measure(wide), wide))
	}
	return out
}

func span(from, to int) string {
	if from == to {
		return strconv.Itoa(from)
	}
	return strconv.Itoa(from) + " to " + strconv.Itoa(to)
}

// item is a table, or what is left of it, on a sheet so wide.
func (v tableView) item(measure float64, wide bool) item {
	g := v.grid()
	heights := g.heights(spread(g.columns(), measure))
	notes := 0.0
	for _, n := range v.Notes {
		notes += 0.4 + 13*point/4*3*1.45*textFace.lines(n, measure/(13*point/4*3)-4)
	}
	if notes > 0 {
		notes += 1.6
	}
	const captionSize = 9.2 * point
	top := 6.4 + 1.3 + captionSize*1.45*textFace.lines(fmt.Sprintf("Table %d %s csv", v.Number, v.Caption), measure/captionSize) + heights[0]
	v.Aria = fmt.Sprintf("Table %d, %s", v.Number, v.Caption)
	it := item{name: "table", data: v, high: top + notes, wide: wide}
	if v.ID != "" {
		it.anchors = []string{v.ID}
	}
	for _, h := range heights[1:] {
		it.high += h
	}
	it.cut = func(room float64) (first, rest []item) {
		if it.high <= wholeTable {
			return nil, nil
		}
		n := fit(heights[1:], room-top, 2)
		if n == len(v.Rows) { // but for its notes
			n = max(0, n-2)
		}
		if n == 0 {
			return nil, nil
		}
		head, tail := v, v
		head.Rows, head.Notes = v.Rows[:n], nil
		tail.Rows, tail.ID, tail.Label, tail.Caption = v.Rows[n:], "", "", strings.TrimSuffix(v.Caption, continued)+continued
		return []item{head.item(measure, wide)}, []item{tail.item(measure, wide)}
	}
	return it
}

// continued is what the caption of a table says that goes on.
const continued = ", continued"

// tableCells is the cells of a table as set, and which columns stand at the right.
func (b *book) tableCells(t *exhibit.Table, heads []columnHead) [][]cellView {
	rows := make([][]cellView, len(t.Rows))
	for r, row := range t.Rows {
		cells := make([]cellView, len(row))
		for i, c := range row {
			if i >= len(t.Columns) {
				cells[i] = b.cell(c, nil)
				continue
			}
			cells[i] = b.cell(c, &t.Columns[i].Unit)
			if i+1 < len(row) && i+1 < len(t.Columns) && t.Columns[i+1].Head == "unit" && row[i+1].Text != "" {
				cells[i].Numbers = bareText(c.Numbers)
			}
			cells[i].Right = t.Columns[i].Right || len(c.Numbers) > 0
		}
		rows[r] = cells
	}
	for i := range t.Columns {
		alignPoints(rows, i)
		for _, r := range rows {
			if i < len(r) && r[i].Right {
				heads[i].Right = true
			}
		}
	}
	return rows
}

// grid is what the cells of a table hold.
func (v tableView) grid() grid {
	head := make([]slot, len(v.Heads))
	for i, h := range v.Heads {
		text := h.Head
		if h.Unit != "" {
			text += ", " + h.Unit
		}
		head[i] = slot{text: text, head: true, right: h.Right, tight: v.Tight}
		if h.Symbol != nil {
			head[i].symbol = 1.1 * (equation.Setter{}).Symbols(h.Symbol).Width
		}
	}
	out := grid{head}
	for _, row := range v.Rows {
		slots := make([]slot, len(row))
		for i, c := range row {
			slots[i] = slot{text: c.Text + c.Numbers, below: c.Was.printed(), right: c.Right, tight: v.Tight}
			if c.Symbol != nil {
				slots[i].symbol = 1.04 * (equation.Setter{}).Symbols(c.Symbol).Width
			}
			if c.Whole {
				slots[i].text = strings.ReplaceAll(c.Text, "-", "\u2011")
			}
			if n, err := strconv.Atoi(strings.TrimSuffix(c.Pad, "p")); err == nil {
				slots[i].pad = 0.495 * float64(n)
			}
		}
		out = append(out, slots)
	}
	return out
}
