package page

import (
	"strings"

	"quoin/calc/exhibit"
)

// cutHigh is how high a stretch of a cut list, table or listing is, mm.
const cutHigh = 50

// cut parts a node of prose that is too high to stand in one piece: a list
// between its items, a table between its rows with the head repeated, a listing
// between its lines. Others stay whole.
func cut(n exhibit.Prose) []exhibit.Prose {
	if proseHigh(n) <= tallest {
		return []exhibit.Prose{n}
	}
	switch n.Kind {
	case exhibit.BulletList, exhibit.OrderedList, exhibit.DefinitionList, exhibit.Quote:
		return parted(n, n.Children, nil)
	case exhibit.ProseTable:
		if len(n.Children) > 1 {
			return parted(n, n.Children[1:], n.Children[:1])
		}
	case exhibit.CodeBlock:
		var out []exhibit.Prose
		rows := strings.Split(n.Text, "\n")
		const most = 20
		for i := 0; i < len(rows); i += most {
			part := n
			part.Text = strings.Join(rows[i:min(i+most, len(rows))], "\n")
			out = append(out, part)
		}
		return out
	}
	return []exhibit.Prose{n}
}

// parted makes nodes like n of a few children each, head before them.
func parted(n exhibit.Prose, children, head []exhibit.Prose) []exhibit.Prose {
	var out []exhibit.Prose
	for i := 0; i < len(children); {
		part := n
		part.Children = append([]exhibit.Prose{}, head...)
		if n.Kind == exhibit.OrderedList {
			part.Level = max(n.Level, 1) + i
		}
		for first := i; i < len(children); i++ {
			term := children[i].Kind == exhibit.Term // stays with what describes it
			part.Children = append(part.Children, children[i])
			if i > first && !term && proseHigh(part) >= cutHigh {
				i++
				break
			}
		}
		out = append(out, part)
	}
	return out
}
