package page

import (
	"slices"
	"strings"

	"quoin/calc/exhibit"
)

// A part of prose no higher than this stays in one piece, mm; a paragraph is cut
// only where it is higher than tallest.
const wholeProse = 60

// goesOn marks an item of a list that goes on from the sheet before: it has no
// number of its own.
const goesOn = 1

// nodes is a node of prose as items: one that is cut where it goes on on another
// sheet; a table that is too wide for a sheet upright lies across, in several
// parts where even that is too narrow.
func (b *book) nodes(n exhibit.Prose) []item {
	if n.Kind == exhibit.ProseTable {
		columns := proseGrid(n).columns()
		if needs(columns) > b.measure(false) {
			var out []item
			for _, s := range stretches(columns, b.measure(true)) {
				part := n
				part.Children = nil
				for _, row := range n.Children {
					row.Children = taken(row.Children, s)
					part.Children = append(part.Children, row)
				}
				out = append(out, b.node(part, true))
			}
			return out
		}
	}
	return []item{b.node(n, false)}
}

func (b *book) node(n exhibit.Prose, wide bool) item {
	measure := b.measure(wide)
	it := item{name: "node", data: n, high: proseHigh(n, measure), wide: wide, anchors: b.inner(n)}
	most := float64(wholeProse)
	if n.Kind == exhibit.Paragraph {
		most = tallest
	}
	if it.high > most {
		it.cut = func(room float64) (first, rest []item) {
			f, r, ok := cut(n, room, measure)
			if !ok {
				return nil, nil
			}
			return []item{b.node(f, wide)}, []item{b.node(r, wide)}
		}
	}
	return it
}

// cut parts a node of prose into what stands in so much room, mm, and the rest: a
// list between its items, a table between its rows with the head repeated, a listing
// between its lines, a paragraph between its words.
func cut(n exhibit.Prose, room, measure float64) (first, rest exhibit.Prose, ok bool) {
	first, rest = n, n
	switch n.Kind {
	case exhibit.BulletList, exhibit.OrderedList, exhibit.DefinitionList, exhibit.Quote, exhibit.ListItem, exhibit.Description:
		if inline(n) {
			return cutWords(n, room-1.2, measure-listIndent)
		}
		used := listAround
		for i, c := range n.Children {
			high := itemHigh(c, measure-listIndent)
			if used+high <= room {
				used += high
				continue
			}
			var over []exhibit.Prose // of c, goes on
			first.Children = slices.Clone(n.Children[:i])
			if high > tallest {
				if f, r, cuts := cut(c, room-used, measure-listIndent); cuts {
					if r.Kind == exhibit.ListItem {
						r.Level = goesOn
					}
					first.Children, over, i = append(first.Children, f), []exhibit.Prose{r}, i+1
				}
			}
			if k := len(first.Children); k > 0 && first.Children[k-1].Kind == exhibit.Term { // stays with what describes it
				first.Children, i = first.Children[:k-1], i-1
			}
			rest.Children = append(over, n.Children[i:]...)
			if n.Kind == exhibit.OrderedList {
				rest.Level = max(n.Level, 1) + i - len(over)
			}
			return first, rest, len(first.Children) > 0
		}
	case exhibit.ProseTable:
		heights := proseGrid(n).heights(spread(proseGrid(n).columns(), measure))
		if k := fit(heights[1:], room-tableAround-heights[0], 2); k > 0 && k+1 < len(n.Children) {
			first.Children = n.Children[:k+1]
			rest.Children = append(slices.Clone(n.Children[:1]), n.Children[k+1:]...)
			return first, rest, true
		}
	case exhibit.CodeBlock:
		rows := strings.Split(n.Text, "\n")
		heights := make([]float64, len(rows))
		for i, r := range rows {
			heights[i] = codeHigh(r, measure)
		}
		if k := fit(heights, room-codeAround, 3); k > 0 && k < len(rows) {
			first.Text, rest.Text = strings.Join(rows[:k], "\n"), strings.Join(rows[k:], "\n")
			return first, rest, true
		}
	case exhibit.Paragraph:
		return cutWords(n, room-paragraphAround, measure)
	}
	return n, n, false
}

// inline tells a node that holds words from one that holds paragraphs and the like.
func inline(n exhibit.Prose) bool {
	return !slices.ContainsFunc(n.Children, func(c exhibit.Prose) bool {
		switch c.Kind {
		case exhibit.Paragraph, exhibit.BulletList, exhibit.OrderedList, exhibit.CodeBlock, exhibit.MathBlock, exhibit.ProseTable, exhibit.Quote, exhibit.DefinitionList,
			exhibit.ListItem, exhibit.Term, exhibit.Description:
			return true
		}
		return false
	})
}

// cutWords cuts a paragraph between two words of its own text, so that three lines
// or more stand on either side.
func cutWords(n exhibit.Prose, room, measure float64) (first, rest exhibit.Prose, ok bool) {
	const few = 3
	first, rest = n, n
	across := min(prose40, measure/proseSize)
	most := min(float64(int(room/lineHigh)), textFace.lines(printed(n), across)-few)
	if most < few {
		return n, n, false
	}
	before := ""
	for i, c := range n.Children {
		text := printed(c)
		if textFace.lines(before+text, across) <= most {
			before += text
			continue
		}
		first.Children, rest.Children = slices.Clone(n.Children[:i]), slices.Clone(n.Children[i:])
		if c.Kind == exhibit.Text {
			at := 0
			for k, r := range c.Text {
				if r == ' ' || r == '\n' {
					if textFace.lines(before+c.Text[:k], across) > most {
						break
					}
					at = k
				}
			}
			if at > 0 {
				head, tail := c, c
				head.Text, tail.Text = c.Text[:at], strings.TrimLeft(c.Text[at:], " \n")
				first.Children, rest.Children[0] = append(first.Children, head), tail
			}
		}
		return first, rest, len(first.Children) > 0
	}
	return n, n, false
}
