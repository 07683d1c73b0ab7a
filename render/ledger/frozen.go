package ledger

import (
	"cmp"
	"math"
	"path"
	"slices"
	"strconv"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// Tolerance is how far a number may move, as a part of itself, and still count as
// the same: far above the differences of machines, far below any of engineering.
const Tolerance = 1e-6

// FrozenRole is the role of a file of frozen results among the inputs.
const FrozenRole = "frozen results"

// ResultsText is the file of a package that holds its results as [Frozen].
const ResultsText = "results.txt"

// Frozen is the results of a package as they are kept for later and compared: rows
// of an id and what stands there, numbers in the unit in which the package shows
// them. It is plain data, and has a text of its own (Text, ParseFrozen).
type Frozen struct {
	Head
	Sections [][]Row // by the order of sections; rows sorted by id
	// Was is the results of the revision Since, which this one's changes are told
	// against; nil for the first one frozen.
	Since string
	Was   [][]Row
}

// Head says what was frozen.
type Head struct {
	Document  string // base name of the main file
	Number    string
	Title     string
	Revision  string
	Date      string
	Status    string
	Tool      string
	System    quantity.System
	Tolerance float64
}

// sections are the parts of frozen results.
var sections = []string{"files", "inputs", "values", "series", "checks", "assumptions", "blocks"}

const (
	filesPart = iota
	inputsPart
	valuesPart
	seriesPart
	checksPart
	assumptionsPart
	blocksPart
)

// Row is one thing: a value, an item of a vector, a check, a file.
type Row struct {
	ID    string
	Index string // of an item: "2", or "1,2" in rows; of a check written twice, the second: "2"
	Label string // of an item: its level
	Terms []Term
}

// Term is a number in a unit, with or without a name, or a text.
type Term struct {
	Name   string
	Number bool
	X      float64
	Unit   string
	Text   string
}

func (r Row) key() string { return r.ID + "\x00" + r.Index }

func text(s string) Term { return Term{Text: s} }

func num(name string, x float64, unit string) Term {
	return Term{Name: name, Number: true, X: x + 0, Unit: unit}
}

// FrozenOf is the results of a package. Of a series it keeps how many points it has,
// its greatest ordinate without sign and the root of the mean of their squares.
func FrozenOf(p *exhibit.Package) *Frozen {
	f := &Frozen{Sections: make([][]Row, len(sections)), Head: Head{Document: path.Base(p.Provenance.Source), Number: p.Meta.Number, Title: p.Meta.Title,
		Status: p.Meta.Status, Tool: p.Provenance.Tool, System: p.System, Tolerance: Tolerance}}
	if n := len(p.Meta.Revision); n > 0 {
		f.Revision, f.Date = p.Meta.Revision[n-1].Rev, p.Meta.Revision[n-1].Date
	}
	add := func(part int, rows ...Row) { f.Sections[part] = append(f.Sections[part], rows...) }
	for _, in := range p.Inputs {
		if in.Role != FrozenRole {
			add(filesPart, Row{ID: beside(in.Path, p.Provenance.Source), Terms: []Term{text(in.Role), text("sha256:" + in.SHA256)}})
		}
	}
	for _, s := range p.Settings {
		add(inputsPart, settingRows(s)...)
	}
	for _, e := range p.Values {
		part := valuesPart
		if e.Tree != nil && len(e.Depends) == 0 {
			part = inputsPart
		}
		add(part, itemRows(e, p.System)...)
	}
	for _, c := range p.Series {
		add(seriesPart, seriesRow(c, p.System))
	}
	seen := map[string]int{}
	for _, c := range p.Checks {
		add(checksPart, checkRow(c, seen))
	}
	for _, a := range p.Assumptions {
		add(assumptionsPart, Row{ID: a.ID, Terms: []Term{text(cmp.Or(a.Status, "open")), text(oneLine(a.Text))}})
	}
	for _, c := range p.Chapters {
		for _, piece := range c.Pieces {
			if b := piece.Block; b != nil && b.Name != "" {
				add(blocksPart, Row{ID: b.Name, Terms: []Term{text(b.Kind)}})
			}
		}
	}
	for _, rows := range f.Sections {
		slices.SortStableFunc(rows, func(a, b Row) int { return cmp.Compare(a.ID, b.ID) })
	}
	return f
}

// beside is a file as seen from the folder of the main one.
func beside(file, main string) string { return strings.TrimPrefix(file, path.Dir(main)+"/") }

func settingRows(s exhibit.Setting) []Row {
	if len(s.Value.Numbers) == 0 {
		return []Row{{ID: s.ID, Terms: []Term{text(oneLine(s.Value.Text))}}}
	}
	var out []Row
	for i, n := range s.Value.Numbers {
		r := Row{ID: s.ID, Terms: []Term{num("", n.Unit.From(n.Value), n.Unit.Text)}}
		if len(s.Value.Numbers) > 1 {
			r.Index = strconv.Itoa(i + 1)
		}
		out = append(out, r)
	}
	return out
}

func itemRows(e exhibit.Entry, system quantity.System) []Row {
	v := e.Value
	unit := shownIn(v, system)
	var out []Row
	for i, x := range v.SI {
		r := Row{ID: e.ID, Terms: []Term{num("", unit.From(x), unit.Text)}}
		column := i
		switch {
		case v.Shape == quantity.Vector:
			r.Index = strconv.Itoa(i + 1)
		case v.Shape == quantity.Rows && v.Width > 0:
			column = i % v.Width
			r.Index = strconv.Itoa(i/v.Width+1) + "," + strconv.Itoa(column+1)
		}
		if r.Index != "" && column < len(v.Labels) {
			r.Label = oneLine(v.Labels[column])
		}
		out = append(out, r)
	}
	return out
}

// shownIn is the unit in which a package shows a value.
func shownIn(v quantity.Value, system quantity.System) quantity.Unit {
	if v.Unit.Text != "" {
		return v.Unit
	}
	return system.Preferred(v.Dim)
}

func seriesRow(c exhibit.Curve, system quantity.System) Row {
	unit := shownIn(c.Y, system)
	greatest, squares := 0.0, 0.0
	for _, y := range c.Y.SI {
		y = unit.From(y)
		greatest = max(greatest, math.Abs(y))
		squares += y * y
	}
	return Row{ID: c.ID, Terms: []Term{num("points", float64(len(c.Y.SI)), ""), num("greatest", greatest, unit.Text),
		num("rms", math.Sqrt(squares/float64(max(1, len(c.Y.SI)))), unit.Text)}}
}

func checkRow(c exhibit.Check, seen map[string]int) Row {
	r := Row{ID: c.ID}
	if seen[c.ID]++; seen[c.ID] > 1 {
		r.Index = strconv.Itoa(seen[c.ID])
	}
	if strings.Trim(c.Item, "0123456789") != "" {
		r.Label = oneLine(c.Item)
	}
	verdict := "NOT OK"
	if c.OK {
		verdict = "OK"
	}
	side := func(name string, n exhibit.Number) Term {
		unit := n.Unit.Text
		if unit == "1" {
			unit = ""
		}
		return num(name, n.Unit.From(n.Value), unit)
	}
	r.Terms = []Term{text(verdict), side("demand", c.Demand), side("limit", c.Limit)}
	if c.Ratio != nil {
		r.Terms = append(r.Terms, num("ratio", *c.Ratio, ""))
	} else {
		r.Terms = append(r.Terms, text("no ratio"))
	}
	return r
}

// Freeze is what is written over former (nil: nothing yet): now, but where a number
// has not moved beyond the tolerance, as it was written before, so that no line moves
// without cause. What was frozen of another revision becomes what changes are told
// against; it stays that until a further revision is frozen.
func Freeze(now, former *Frozen) *Frozen {
	out := &Frozen{Head: now.Head}
	if former == nil {
		out.Sections = now.Sections
		return out
	}
	out.Sections = keep(now.Sections, former.Sections, now.Tolerance)
	out.Since, out.Was = former.Base(now.Revision)
	return out
}

// Base is what results of a revision are told against: the frozen ones where they
// are of another revision, else those before.
func (f *Frozen) Base(revision string) (since string, rows [][]Row) {
	if f.Revision != revision {
		return f.Revision, f.Sections
	}
	return f.Since, f.Was
}

// keep is now with the numbers of before where these are the same.
func keep(now, before [][]Row, tolerance float64) [][]Row {
	out := make([][]Row, len(now))
	for part, rows := range now {
		old, scale := byKey(before[part]), scales(rows, before[part])
		for _, r := range rows {
			was, ok := old[r.key()]
			if ok && len(was.Terms) == len(r.Terms) {
				r.Terms = slices.Clone(r.Terms)
				for i, t := range r.Terms {
					if w := was.Terms[i]; t.Number && w.Name == t.Name && w.Unit == t.Unit && alike(w, t, tolerance, scale[r.ID]) {
						r.Terms[i].X = w.X
					}
				}
			}
			out[part] = append(out[part], r)
		}
	}
	return out
}

func byKey(rows []Row) map[string]Row {
	out := make(map[string]Row, len(rows))
	for _, r := range rows {
		out[r.key()] = r
	}
	return out
}
