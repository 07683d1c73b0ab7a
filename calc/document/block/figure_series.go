package block

import (
	"cmp"
	"math"
	"slices"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/calc/standard"
)

// series are the curves of an entry that names a series.
func (b *figure) series(r *Run, s *seriesFields) []drawn {
	found := r.Curves(s.Of.Text())
	if len(found) == 0 {
		noSeries(r, s.Of, s.Of.List[0])
		return nil
	}
	out := make([]drawn, len(found))
	for i, c := range found {
		block, what, _ := strings.Cut(c.ID, ".")
		d := drawn{Curve: c, label: seriesLabel(c.ID), role: exhibit.Data, from: s.Of}
		if t := targetOf(r, c.ID); t != nil {
			d.role = exhibit.Governing
			b.extend(t, &d.Curve)
		}
		what, _, _ = strings.Cut(what, "@")
		d.name = what
		if r.KindOf(block) == "record" {
			d.name = cmp.Or(histories[what], what)
		}
		out[i] = d
	}
	return out
}

// histories are the series of a record, in words.
var histories = map[string]string{"a": "acceleration a", "v": "velocity v", "d": "displacement d",
	"husid": "share of the Arias intensity", "fourier": "Fourier amplitude of a"}

// noSeries reports a series that a block does not have.
func noSeries(r *Run, f field.Field, it field.Item) {
	f.At = it.At
	block, _, _ := strings.Cut(it.Text, ".")
	var have []string
	for _, c := range r.Curves(block) {
		have = append(have, c.ID)
		if short, _, ok := strings.Cut(c.ID, "@"); ok && !slices.Contains(have, short) {
			have = append(have, short)
		}
	}
	e := r.Fail(f, "no-series", "there is no series %s", it.Text)
	_, what, _ := strings.Cut(it.Text, ".")
	_, exported := r.exported(block, what)
	switch near := diag.Nearest(it.Text, have); {
	case exported:
		e.WithHint("it is a vector: write x and y, or  profile: %s", it.Text)
	case near != "":
		e.WithHint("did you mean %s?", near)
	case len(have) > 0:
		e.WithHint("%s has %s", block, strings.Join(have, ", "))
	default:
		e.WithHint("a series is named as BLOCK.WHAT, with @ and the damping for one of several: east_rs.PSA@5%%")
	}
}

// exported is a value of a kind of block.
func (r *Run) exported(block, name string) (Export, bool) {
	k, _ := Lookup(r.KindOf(block))
	return k.Export(name)
}

// targetOf is the target whose PSA a series is, or nil.
func targetOf(r *Run, id string) *standard.Target {
	block, what, _ := strings.Cut(id, ".")
	if what != "PSA" || r.KindOf(block) != "target" {
		return nil
	}
	return r.Product(block).(*standard.Target)
}

// seriesLabel names a curve by block and damping: east_rs 5 %.
func seriesLabel(id string) string {
	block, rest, _ := strings.Cut(id, ".")
	if _, q, ok := strings.Cut(rest, "@"); ok {
		return block + " " + strings.Replace(q, "%", " %", 1)
	}
	return block
}

// extend carries the curve of a standard's spectrum on to the ends of the axis,
// where the axis ends beyond the series, and makes it fine enough for a log axis.
func (b *figure) extend(t *standard.Target, c *exhibit.Curve) {
	low, high := t.Range()
	from, to := c.X.SI[0], c.X.SI[len(c.X.SI)-1]
	if b.To.Given && b.To.Value.Dim.Is(quantity.Time) && b.To.SI() > to && b.To.SI() <= high {
		to = b.To.SI()
	}
	log := b.XAxis.Text() == "log" || b.tripartite()
	if to == c.X.SI[len(c.X.SI)-1] && !log {
		return
	}
	grid := slices.Clone(c.X.SI)
	for i := 1; i <= 100; i++ {
		grid = append(grid, from+(to-from)*float64(i)/100)
	}
	if log {
		start := math.Max(from, to/1000)
		if b.From.Given && b.From.Value.Dim.Is(quantity.Time) && b.From.SI() >= low && b.From.SI() > 0 {
			start = b.From.SI()
		}
		for i := range 200 {
			grid = append(grid, start*math.Pow(to/start, float64(i)/200))
		}
	}
	for _, corner := range t.Corners {
		grid = append(grid, corner.T)
	}
	least := from
	// Shorter periods are not drawn by custom: the spectrum is flat there.
	if log && !b.From.Given {
		least = math.Max(from, 0.01)
	}
	grid = slices.DeleteFunc(grid, func(T float64) bool { return T < least || T > to })
	slices.Sort(grid)
	grid = slices.Compact(grid)
	if y, err := t.Series(grid); err == nil {
		c.X.SI, c.Y.SI = grid, y
	}
}
