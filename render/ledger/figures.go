package ledger

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// figureRows is a figure with its head: what a curve stands over, left out where
// it is that of the curve before, then the curve. So curves over the same x stand
// side by side in one table, and others in pairs of columns. Panels that lie
// beside each other are profiles: their curves stand over y.
func figureRows(f *exhibit.Figure) ([][]string, error) {
	var h heads
	var columns [][]string
	longest := 0
	add := func(name string, unit quantity.Unit, si []float64) error {
		column := make([]string, len(si))
		for i, x := range si {
			x, err := finite(fmt.Sprintf("figure %s, %s", f.ID, name), x)
			if err != nil {
				return err
			}
			column[i] = number(x, unit)
		}
		longest = max(longest, len(si))
		h.add(name, unit)
		columns = append(columns, column)
		return nil
	}
	var last side // what the curve before stands over
	for _, p := range f.Panels {
		title := ""
		if len(f.Panels) > 1 && p.Title != "" {
			name, _, _ := strings.Cut(p.Title, ":") // what follows a colon are values, which change
			title = name + ": "
		}
		common := true
		for _, s := range p.Series {
			common = common && slices.Equal(over(f, p, s).si, over(f, p, p.Series[0]).si)
		}
		for _, s := range p.Series {
			if len(s.X) != len(s.Y) {
				return nil, fmt.Errorf("ledger: figure %s: curve %s has %d values of x and %d of y", f.ID, s.Label, len(s.X), len(s.Y))
			}
			name := title
			if s.Label != "" {
				name += s.Label + ": "
			}
			base, value := over(f, p, s), side{p.Y.Label, p.Y.Unit, s.Y}
			if f.Beside {
				value = side{p.X.Label, p.X.Unit, s.X}
			}
			if len(columns) == 0 || base.label != last.label || base.unit != last.unit || !slices.Equal(base.si, last.si) {
				last = base
				if !common {
					base.label = name + base.label
				}
				if err := add(base.label, base.unit, base.si); err != nil {
					return nil, err
				}
			}
			if err := add(name+value.label, value.unit, value.si); err != nil {
				return nil, err
			}
		}
	}
	rows := [][]string{h.texts}
	for i := range longest {
		row := make([]string, len(columns))
		for j, c := range columns {
			if i < len(c) {
				row[j] = c[i]
			}
		}
		rows = append(rows, row)
	}
	return rows, nil
}

// side is one coordinate of a curve.
type side struct {
	label string
	unit  quantity.Unit
	si    []float64
}

// over is what a curve stands over.
func over(f *exhibit.Figure, p exhibit.Panel, s exhibit.FigSerie) side {
	if f.Beside {
		return side{p.Y.Label, p.Y.Unit, s.Y}
	}
	return side{p.X.Label, p.X.Unit, s.X}
}
