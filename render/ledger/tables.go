package ledger

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// Tables is tables/ID.csv for every table and every figure of the package: RFC
// 4180 with LF, decimal points, a head of "name [unit]". A number is the shortest
// decimal that, read in the unit of its column, gives the same SI number again.
// Texts that a spreadsheet would run as a formula begin with an apostrophe.
func Tables(p *exhibit.Package) (map[string][]byte, error) {
	out := map[string][]byte{}
	names := TablePaths(p)
	var err error
	eachExhibit(p, func(i int, t *exhibit.Table, f *exhibit.Figure) {
		if err != nil {
			return
		}
		var rows [][]string
		if t != nil {
			rows, err = tableRows(t)
		} else {
			rows, err = figureRows(f)
		}
		if err == nil {
			out[names[i]], err = encodeCSV(rows)
		}
	})
	if err != nil {
		return nil, err
	}
	return out, nil
}

// TablePaths is the path in the package of the data of every table and figure,
// in order of the document: tables/ID.csv with the characters that a file name
// cannot hold replaced, and a number added where two would meet.
func TablePaths(p *exhibit.Package) []string {
	var out []string
	used := map[string]bool{}
	eachExhibit(p, func(_ int, t *exhibit.Table, f *exhibit.Figure) {
		id := ""
		if t != nil {
			id = t.ID
		} else {
			id = f.ID
		}
		// Two names that differ in case only are one file on many machines.
		out = append(out, "tables/"+exhibit.UniqueStem(id, used)+".csv")
	})
	return out
}

// eachExhibit visits the tables and figures in order of the document.
func eachExhibit(p *exhibit.Package, visit func(i int, t *exhibit.Table, f *exhibit.Figure)) {
	n := 0
	for _, c := range p.Chapters {
		for _, piece := range c.Pieces {
			if piece.Block == nil {
				continue
			}
			for _, part := range piece.Block.Parts {
				for _, item := range part.Items {
					if item.Table != nil || item.Figure != nil {
						visit(n, item.Table, item.Figure)
						n++
					}
				}
			}
		}
	}
}

// tableRows is a table with its head. A column without a unit takes the one that
// all its numbers have; numbers of several units carry them in the cell, unless
// a column "unit" follows that gives them. Marked cells bring their footnotes in
// a last column.
func tableRows(t *exhibit.Table) ([][]string, error) {
	unit := make([]quantity.Unit, len(t.Columns))
	var h heads
	marked := false
	for j, c := range t.Columns {
		unit[j] = c.Unit
		if c.Unit == (quantity.Unit{}) {
			unit[j] = commonUnit(t, j)
		}
		h.add(c.Head, unit[j])
	}
	for _, row := range t.Rows {
		for _, c := range row {
			marked = marked || len(c.Mark) > 0
		}
	}
	if marked {
		h.add("notes", quantity.Unit{})
	}
	rows := [][]string{h.texts}
	for i, cells := range t.Rows {
		if len(cells) != len(t.Columns) {
			return nil, fmt.Errorf("ledger: table %s: row %d has %d cells for %d columns", t.ID, i+1, len(cells), len(t.Columns))
		}
		row := make([]string, 0, len(h.texts))
		var notes []string
		for j, c := range cells {
			given := j+1 < len(cells) && t.Columns[j+1].Head == "unit" && cells[j+1].Text != ""
			text, err := cell(c, unit[j], given, fmt.Sprintf("table %s, row %d", t.ID, i+1))
			if err != nil {
				return nil, err
			}
			row = append(row, text)
			for _, m := range c.Mark {
				if m >= 1 && m <= len(t.Notes) && !slices.Contains(notes, t.Notes[m-1]) {
					notes = append(notes, t.Notes[m-1])
				}
			}
		}
		if marked {
			row = append(row, safe(strings.Join(notes, " ")))
		}
		rows = append(rows, row)
	}
	return rows, nil
}

// commonUnit is the unit of all numbers of a column, if it is one.
func commonUnit(t *exhibit.Table, j int) quantity.Unit {
	var out quantity.Unit
	first := true
	for _, row := range t.Rows {
		if j >= len(row) {
			continue
		}
		for _, n := range row[j].Numbers {
			if !first && n.Unit != out {
				return quantity.Unit{}
			}
			out, first = n.Unit, false
		}
	}
	return out
}

// cell is the text of a cell; given says that another cell gives the unit of
// numbers that are not in the unit of the column.
func cell(c exhibit.Cell, unit quantity.Unit, given bool, what string) (string, error) {
	if len(c.Numbers) == 0 {
		if c.Text == "" && c.Symbol != nil {
			return safe(cmp.Or(c.Symbol.ID, c.Symbol.Text)), nil
		}
		return safe(c.Text), nil
	}
	var parts []string
	bare := true
	for _, n := range c.Numbers {
		x, err := finite(what, n.Value)
		if err != nil {
			return "", err
		}
		if n.Unit != (quantity.Unit{}) && (unit == quantity.Unit{} || !n.Unit.Dim.Is(unit.Dim)) {
			text := number(x, n.Unit)
			if !given && n.Unit.Text != "" {
				text, bare = text+" "+n.Unit.Text, false
			}
			parts = append(parts, text)
			continue
		}
		parts = append(parts, number(x, unit))
	}
	text := strings.Join(parts, "; ")
	if !bare || len(parts) > 1 {
		text = safe(text)
	}
	return text, nil
}
