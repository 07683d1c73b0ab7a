package block

import (
	"cmp"
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/motion"
	"quoin/calc/quantity"
)

// bands tells whether the figure shows usable bands.
func (b *figure) bands() bool { return b.Series[0].Band.Given }

// band is the usable band of a record as a bar in its row, with the corners of its
// filter as a thin line. Short of a filter it begins at the Nyquist period, two steps:
// nothing shorter is in the samples.
func (b *figure) band(r *Run, s *seriesFields, row int) []drawn {
	rec := r.Product(s.Band.Text()).(*motion.Record)
	long := rec.Origin.UsablePeriod
	if long == 0 {
		r.Fail(s.Band, "figure-band", "the longest usable period of %s is not known: no filter was applied here, and none is stated", s.Band.Text()).
			WithHint("state it in the record block as its source does: usable_period: 8 s")
		return nil
	}
	short := max(rec.Origin.ShortestPeriod, 2*rec.Step)
	y := float64(len(b.Series) - row)
	between := func(from, to float64) exhibit.Curve {
		return exhibit.Curve{X: quantity.List([]float64{from, to}, seconds, nil), Y: quantity.List([]float64{y, y}, pure, nil)}
	}
	out := []drawn{{Curve: between(short, long), role: exhibit.Bar, from: s.Band,
		label: quantity.Format(short, 3) + " to " + quantity.Format(long, 3) + " s"}}
	if low, high := rec.Origin.Corners[0], rec.Origin.Corners[1]; low > 0 || high > 0 {
		ends := [2]float64{short, long}
		if high > 0 {
			ends[0] = 1 / high
		}
		if low > 0 {
			ends[1] = 1 / low
		}
		out = append(out, drawn{Curve: between(ends[0], ends[1]), role: exhibit.Data, dots: true, from: s.Band})
	}
	return out
}

// rows names the rows of bands, the first on top.
func (b *figure) rows(p *exhibit.Panel) {
	n := len(b.Series)
	low, high := -0.6, float64(n)-0.4
	p.Y = exhibit.Axis{Label: cmp.Or(b.YLabel.Text(), "record"), Min: &low, Max: &high}
	for i, s := range b.Series {
		p.Y.Names = append(p.Y.Names, exhibit.TickName{At: float64(n - 1 - i), Name: cmp.Or(s.Label.Text(), s.Band.Text())})
	}
	p.X.Log = b.XAxis.Text() != "linear" || !b.XAxis.Given
	from, to := p.Series[0].X[0], p.Series[0].X[1]
	for _, s := range p.Series {
		from, to = min(from, s.X[0]), max(to, s.X[1])
	}
	from, to = below(from), above(to)
	p.X.Min, p.X.Max = &from, &to // until the document says otherwise
}

// bases says after a caption by what standard, and at what damping, the targets of a
// figure stand, and at what damping its spectra, where neither it nor the names of the
// curves say so.
func (b *figure) bases(r *Run, caption string, names []string) string {
	said := caption + " " + strings.Join(names, " ")
	var out []string
	add := func(text string) {
		if text != "" && !slices.Contains(out, text) {
			out = append(out, text)
		}
	}
	for i := range b.Series {
		s := &b.Series[i]
		for _, it := range append(slices.Clone(s.Of.List), s.Ratio.List...) {
			for _, c := range r.Curves(it.Text) {
				name, rest, _ := strings.Cut(c.ID, ".")
				if t := targetOf(r, c.ID); t != nil {
					if text := name + " by " + t.Basis + ", " + damped(t.Damping) + " damping"; t.Basis != tableBasis && !strings.Contains(said, t.Basis) {
						add(text)
					}
					continue
				}
				if _, q, ok := strings.Cut(rest, "@"); ok && !strings.Contains(said, strings.Replace(q, "%", " %", 1)) && !strings.Contains(said, q) {
					add(name + " at " + strings.Replace(q, "%", " %", 1) + " damping")
				}
			}
		}
	}
	if len(out) == 0 {
		return ""
	}
	return "; " + strings.Join(out, "; ")
}
