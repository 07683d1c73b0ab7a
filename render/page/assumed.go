package page

import (
	"slices"
	"strings"

	"quoin/calc/exhibit"
)

// restText is what stands with a result that rests on open assumptions, as a text.
func restText(ids []string) string {
	if len(ids) == 0 {
		return ""
	}
	return " rests on " + strings.Join(ids, ", ") + ", open"
}

// assumptionID is the anchor of an assumption in the register; one that shares its
// id with a reference has none.
func (b *book) assumptionID(id string) string {
	if a := b.refs[id]; strings.HasPrefix(a, "q-assumption-") {
		return a
	}
	return ""
}

// run is a run of sheets.
type run struct{ From, To int }

// rested is the sheets of what rests on an assumption, and of the prose that cites it.
func (b *book) rested(a exhibit.Assumption) []run {
	anchors := slices.Clone(b.cited[a.ID])
	for _, o := range a.Dependents {
		anchors = append(anchors, or(b.known(b.origins[o.Name]), o.Anchor))
	}
	return runs(b.sheetsOf(anchors))
}

// runs puts sheets that follow one another together, from three on.
func runs(sheets []int) []run {
	var out []run
	for _, s := range sheets {
		if n := len(out); n > 0 && s == out[n-1].To+1 {
			out[n-1].To = s
			continue
		}
		out = append(out, run{s, s})
	}
	var apart []run
	for _, r := range out {
		if r.To == r.From+1 {
			apart = append(apart, run{r.From, r.From}, run{r.To, r.To})
			continue
		}
		apart = append(apart, r)
	}
	return apart
}
