package ledger

import (
	"cmp"
	"math"
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// Difference is what is not the same in two sets of results.
type Difference struct {
	Old, New  Head
	Tolerance float64
	Compared  int // numbers held against each other

	Checks      []exhibit.Moved // those that flipped first, then by their new ratio
	Inputs      []exhibit.Moved // by id
	Files       []exhibit.Moved // read by the documents: by their bytes
	Values      []exhibit.Moved // without those that are inputs, the furthest moved first
	Series      []exhibit.Moved // likewise
	Assumptions []exhibit.Moved
	Blocks      []exhibit.Moved // added, gone or of another kind
}

// Differs tells whether results differ. Bytes of files and blocks that show but compute nothing do
// not count by themselves.
func (d *Difference) Differs() bool { return len(d.Results()) > 0 }

// Results is all that has moved among the results, in order of weight: checks that
// flipped, are new or gone, inputs, assumptions, values, the other checks, series.
func (d *Difference) Results() []exhibit.Moved {
	var grave, other []exhibit.Moved
	for _, m := range d.Checks {
		if rank(m) < lightest {
			grave = append(grave, m)
		} else {
			other = append(other, m)
		}
	}
	return slices.Concat(grave, d.Inputs, d.Assumptions, d.Values, other, d.Series)
}

// Flipped are the checks that are met and were not, or the other way round.
func (d *Difference) Flipped() []exhibit.Moved {
	var out []exhibit.Moved
	for _, m := range d.Checks {
		if m.Flipped {
			out = append(out, m)
		}
	}
	return out
}

// Compare tells what is not the same in now as it was in old. A number is the same
// within tolerance of itself; see faint and nothing for zeros. Numbers are compared whatever unit they
// are shown in.
func Compare(old, now *Frozen, tolerance float64) *Difference {
	return compare(old.Head, now.Head, old.Sections, now.Sections, tolerance)
}

func compare(was, is Head, old, now [][]Row, tolerance float64) *Difference {
	d := &Difference{Old: was, New: is, Tolerance: tolerance}
	c := comparison{d: d, tolerance: tolerance}
	d.Inputs = c.part(exhibit.MovedInput, old[inputsPart], now[inputsPart])
	inputs := map[string]bool{}
	for _, m := range d.Inputs {
		inputs[m.ID] = true
	}
	d.Files = c.part(exhibit.MovedFile, old[filesPart], now[filesPart])
	d.Values = slices.DeleteFunc(c.part(exhibit.MovedValue, old[valuesPart], now[valuesPart]), func(m exhibit.Moved) bool { return inputs[m.ID] })
	d.Series = c.part(exhibit.MovedSeries, old[seriesPart], now[seriesPart])
	d.Checks = c.part(exhibit.MovedCheck, old[checksPart], now[checksPart])
	d.Assumptions = c.part(exhibit.MovedAssumption, old[assumptionsPart], now[assumptionsPart])
	d.Blocks = c.part(exhibit.MovedBlock, old[blocksPart], now[blocksPart])
	furthest(d.Values)
	furthest(d.Series)
	ratios := map[string]float64{}
	for _, r := range now[checksPart] {
		ratios[r.key()] = r.ratio()
	}
	slices.SortStableFunc(d.Checks, func(a, b exhibit.Moved) int {
		return cmp.Or(rank(a)-rank(b), cmp.Compare(ratios[b.ID+"\x00"+b.Index], ratios[a.ID+"\x00"+a.Index]))
	})
	return d
}

// lightest is the rank of a check that moved and still says the same.
const lightest = 3

// rank puts checks that are met no longer first, then those now met, then the new and
// the gone, then the rest.
func rank(m exhibit.Moved) int {
	switch {
	case m.Flipped && strings.HasPrefix(m.New, "NOT OK"):
		return 0
	case m.Flipped:
		return 1
	case m.Old == "" || m.New == "":
		return 2
	}
	return lightest
}

// ratio is the ratio of a check; of one that has none, above all others if it is not
// met and below them if it is.
func (r Row) ratio() float64 {
	for _, t := range r.Terms {
		if t.Name == "ratio" {
			return t.X
		}
	}
	if len(r.Terms) > 0 && r.Terms[0].Text == "OK" {
		return math.Inf(-1)
	}
	return math.Inf(1)
}

// furthest sorts what moved by how far: first what was zero and is not, last what is
// new or gone.
func furthest(list []exhibit.Moved) {
	by := func(m exhibit.Moved) float64 {
		switch {
		case m.Old == "" || m.New == "":
			return -1
		case m.By == nil:
			return math.Inf(1)
		}
		return math.Abs(*m.By)
	}
	slices.SortStableFunc(list, func(a, b exhibit.Moved) int { return cmp.Compare(by(b), by(a)) })
}

type comparison struct {
	d         *Difference
	tolerance float64
}

// part compares the rows of a section.
func (c *comparison) part(what string, old, now []Row) []exhibit.Moved {
	var out []exhibit.Moved
	was, is, scale := byKey(old), byKey(now), scales(old, now)
	for _, r := range merged(now, old) {
		o, before := was[r.key()]
		n, after := is[r.key()]
		m := exhibit.Moved{What: what, ID: r.ID, Index: r.Index, Label: r.Label}
		if before && after {
			moved := false
			if len(o.Terms) != len(n.Terms) {
				moved = true
			} else {
				for i := range o.Terms {
					if n.Terms[i].Number {
						c.d.Compared++
					}
					moved = moved || !alike(o.Terms[i], n.Terms[i], c.tolerance, scale[r.ID])
				}
			}
			if !moved {
				continue
			}
			m.Flipped = what == exhibit.MovedCheck && o.Terms[0].Text != n.Terms[0].Text
			m.By = by(o, n)
			if t := o.Terms[0]; len(o.Terms) == 1 && t.Number {
				if x, unit, ok := t.si(); ok {
					if t.Unit == "" {
						unit = quantity.Unit{}
					}
					m.Was = &exhibit.Number{Value: x, Unit: unit}
				}
			}
		}
		var a, b *Row
		if before {
			a = &o
		}
		if after {
			b = &n
		}
		m.Old, m.New = shownApart(what, a, b)
		out = append(out, m)
	}
	return out
}

// by is how far the numbers of a row have moved, as a part of what they were: the
// furthest of several.
func by(old, now Row) *float64 {
	if len(old.Terms) != len(now.Terms) {
		return nil
	}
	var out *float64
	for i, a := range old.Terms {
		b := now.Terms[i]
		if !a.Number || !b.Number {
			continue
		}
		x, ua, _ := a.si()
		y, ub, _ := b.si()
		d := (y - x) / math.Abs(x)
		if !ua.Dim.Is(ub.Dim) || x == 0 && y != 0 || math.IsInf(d, 0) {
			return nil
		}
		if x != 0 && (out == nil || math.Abs(d) > math.Abs(*out)) {
			out = &d
		}
	}
	return out
}

// shownApart is two rows in words, numbers with as many digits as tell them apart.
func shownApart(what string, old, now *Row) (was, is string) {
	if what == exhibit.MovedSeries && old != nil && now != nil && len(old.Terms) == 3 && len(now.Terms) == 3 && old.Terms[0].X == now.Terms[0].X {
		old, now = &Row{Terms: old.Terms[1:]}, &Row{Terms: now.Terms[1:]}
	}
	for digits := quantity.Digits; ; digits++ {
		was, is = old.shown(what, digits), now.shown(what, digits)
		if was != is || digits > 12 {
			return was, is
		}
	}
}

// shown is what a row says, in words; nothing of none.
func (r *Row) shown(what string, digits int) string {
	if r == nil {
		return ""
	}
	terms := r.Terms
	switch what {
	case exhibit.MovedFile:
		return terms[len(terms)-1].Text[:min(len(terms[len(terms)-1].Text), len("sha256:")+12)]
	case exhibit.MovedCheck:
		if len(terms) == 4 { // verdict, demand, limit, ratio
			return terms[0].Text + ", " + terms[3].shown(digits) + " (" + terms[1].shown(digits) + ", " + terms[2].shown(digits) + ")"
		}
	case exhibit.MovedAssumption:
		if len(terms) == 2 {
			return terms[0].Text + ": " + terms[1].Text
		}
	}
	var parts []string
	for _, t := range terms {
		parts = append(parts, t.shown(digits))
	}
	return strings.Join(parts, ", ")
}

func (t Term) shown(digits int) string {
	if !t.Number {
		return t.Text
	}
	x := quantity.Rounded(t.X, 10)
	if x == math.Trunc(x) { // a whole number needs no digits behind the point
		digits = min(digits, max(1, quantity.Exact(x)))
	}
	s := quantity.Format(x, digits)
	if t.Name != "" {
		s = t.Name + " " + s
	}
	if u := (quantity.Unit{Text: t.Unit}).Pretty(); u != "" {
		s += " " + u
	}
	return s
}
