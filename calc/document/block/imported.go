package block

import (
	"errors"
	"strconv"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/modal"
	"quoin/calc/quantity"
)

// Check sees that the modes come from one place, and whole.
func (b *modes) Check(c *Checks) {
	switch {
	case b.Structure.Given && b.elsewhere():
		c.Fail(b.Structure, "modes-form", "the modes are given twice: by a structure and from elsewhere").WithHint("give a structure; or a table of periods and shapes with mass and elevation")
		return
	case !b.Structure.Given && !b.elsewhere():
		c.Diags.Errorf("missing-field", c.Place, "the modes block needs the field structure, or modes from elsewhere").WithHint("structure: NAME;  or  table, or periods and shapes, with mass and elevation")
		return
	case b.Structure.Given:
		return
	}
	need := func(given bool, fields, hint string) {
		if !given {
			c.Diags.Errorf("missing-field", c.Place, "modes from elsewhere need the field %s", fields).WithHint("%s", hint)
		}
	}
	if b.Table.Given && (b.Periods.Given || len(b.Shapes) > 0) {
		c.Fail(b.Table, "modes-form", "periods and shapes are given twice: by a table and in the document").WithHint("give one of the two")
	} else if !b.Table.Given {
		need(b.Periods.Given, "periods, or table", "periods: [0.8 s, 0.3 s]")
		need(len(b.Shapes) > 0, "shapes, or table", "one row a mode, lowest level first:  shapes: [[0.6, 1], [-1, 0.6]]")
	}
	need(b.Elevation.Given, "elevation", "the elevation of each level above the base, lowest first:  elevation: [4 m, 7.5 m]")
	need(b.Mass.Given || b.Weight.Given, "mass, or weight", "the mass at each level, lowest first:  mass: [200 t, 180 t]")
	if b.Mass.Given && b.Weight.Given {
		c.Fail(b.Weight, "weight-and-mass", "the modes have both weights and masses").WithHint("give one; the other follows by g = 9.80665 m/s²")
	}
}

// source says where imported modes come from.
func (b *modes) source() string {
	if b.Table.Given {
		return "the file " + b.Table.Text()
	}
	return "the rows written in this document"
}

// imported takes modes from elsewhere; nil where there is a fault.
func (b *modes) imported(r *Run) *modal.Modes {
	t := modal.Table{Elevation: b.Elevation.Value.SI, Mass: b.Mass.Value.SI, Periods: b.Periods.Value.SI}
	places := map[string]*grid{"elevation": vector(b.Elevation), "mass": vector(b.Mass), "periods": vector(b.Periods), "levels": vector(b.Levels), "shapes": {}}
	if b.Weight.Given {
		places["mass"] = vector(b.Weight)
		for _, w := range b.Weight.Value.SI {
			t.Mass = append(t.Mass, w/quantity.Gravity)
		}
	}
	if b.Table.Given {
		if !b.fromTable(r, &t, places) {
			return nil
		}
	} else {
		g := places["shapes"]
		g.whole = spanOf(b.Shapes)
		if len(t.Elevation) > 1 && flat(b.Shapes) {
			r.Diags.Errorf("modes-table", g.whole, "these are numbers, not rows: shapes has a row a mode").WithHint("a row stands in brackets of its own:  shapes: [[0.6, 1], [-1, 0.6]]")
			return nil
		}
		for _, row := range b.Shapes {
			if !row.Cells.Value.Dim.Is(quantity.None) {
				r.Fail(row.Cells, "dimension", "a shape is of pure numbers, this is %s", row.Cells.Value.Dim.Name())
				return nil
			}
			t.Shapes = append(t.Shapes, row.Cells.Value.SI)
			var at []diag.Range
			if len(row.Cells.List) == len(row.Cells.Value.SI) {
				for _, it := range row.Cells.List {
					at = append(at, it.At)
				}
			} else {
				at = append(at, row.Cells.At)
			}
			g.at = append(g.at, at)
		}
	}
	if b.Levels.Given {
		t.Levels = b.Levels.Texts()
	}
	if b.Count.Given {
		count := int(b.Count.SI())
		if count > len(t.Periods) || count > len(t.Shapes) {
			r.Fail(b.Count, "bounds", "count is %d, %d modes are given", count, min(len(t.Periods), len(t.Shapes)))
			return nil
		}
		t.Periods, t.Shapes = t.Periods[:count], t.Shapes[:count]
	}
	s, err := modal.Import(t)
	if err == nil {
		b.given(r, t, s.Model.Levels)
		return s
	}
	for _, e := range unjoin(err) {
		var te *modal.TableError
		if !errors.As(e, &te) {
			r.Fail(b.Periods, "modes", "%s", e)
			continue
		}
		d := r.Diags.Errorf(te.Code, places[te.In].spot(te.Row, te.Column), "%s", te.Text)
		if te.Hint != "" {
			d.WithHint("%s", te.Hint)
		}
	}
	return nil
}

// fromTable reads periods and shapes: a column T, then a column a level.
func (b *modes) fromTable(r *Run, t *modal.Table, places map[string]*grid) bool {
	s := r.readSheet(b.Table, field.Field{}, field.Field{})
	if s == nil {
		return false
	}
	first := &s.columns[0]
	if name := strings.ToLower(first.name); name != "t" && name != "period" {
		r.Diags.Errorf("table-columns", first.at, "the first column of a table of modes is T [s], this is %s", first.name).WithHint("a row a mode, longest period first:  T [s], then a column a level, lowest first")
		return false
	}
	periods, _, ok := r.numbers(first, quantity.Time)
	if !ok {
		return false
	}
	t.Periods, places["periods"] = periods, &grid{whole: first.at}
	for _, c := range first.cells {
		places["periods"].at = append(places["periods"].at, []diag.Range{c.at})
	}
	g := &grid{whole: b.Table.At}
	t.Shapes, g.at = make([][]float64, len(periods)), make([][]diag.Range, len(periods))
	for k := 1; k < len(s.columns); k++ {
		c := &s.columns[k]
		x, _, ok := r.numbers(c, quantity.None)
		if !ok {
			return false
		}
		t.Levels = append(t.Levels, c.name)
		for i := range x {
			t.Shapes[i], g.at[i] = append(t.Shapes[i], x[i]), append(g.at[i], c.cells[i].at)
		}
	}
	places["shapes"] = g
	r.Used("modes", "modes of the table", plain(strconv.Itoa(len(periods))), "")
	return true
}

// given echoes the shapes as they were given, before they are scaled.
func (b *modes) given(r *Run, t modal.Table, levels []string) {
	e := exhibit.Table{ID: r.Name + "-given", Caption: "Mode shapes as given, from " + b.source() + ", highest level on top", Columns: []exhibit.Column{Words("level")}}
	shown := t.Shapes[:min(len(t.Shapes), widest)]
	if len(shown) < len(t.Shapes) {
		e.Caption = "The first " + strconv.Itoa(widest) + " mode shapes as given, from " + b.source() + ", highest level on top"
	}
	for i := range shown {
		e.Columns = append(e.Columns, Col("mode "+strconv.Itoa(i+1), pure))
	}
	for l := len(levels) - 1; l >= 0; l-- {
		row := []exhibit.Cell{{Text: levels[l]}}
		for _, shape := range shown {
			row = append(row, inUnits(shape[l], pure))
		}
		e.Rows = append(e.Rows, row)
	}
	r.Inputs = append(r.Inputs, exhibit.Item{Table: &e})
}
