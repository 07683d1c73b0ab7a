package block

import (
	"math"
	"slices"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// operand is one side of a ratio: a series that can be read between its points.
type operand struct {
	exhibit.Curve
	from, to float64
	corners  []float64
	damping  string // "" where it has none
	at       func(x float64) (float64, error)
}

// operand reads one item of a ratio: a target exactly, a series linearly.
func (r *Run) operand(f field.Field, it field.Item) (o operand, ok bool) {
	found := r.Curves(it.Text)
	at := f
	at.At = it.At
	switch {
	case len(found) == 0:
		noSeries(r, f, it)
		return o, false
	case len(found) > 1:
		var ids []string
		for _, c := range found {
			ids = append(ids, c.ID)
		}
		r.Fail(at, "figure-ratio", "%s stands for %d series; name one", it.Text, len(found)).WithHint("there are %s", strings.Join(ids, ", "))
		return o, false
	}
	c := found[0]
	o = operand{Curve: c, from: c.X.SI[0], to: c.X.SI[len(c.X.SI)-1], at: func(x float64) (float64, error) { return linear(c.X.SI, c.Y.SI, x), nil }}
	if _, q, qualified := strings.Cut(c.ID, "@"); qualified {
		o.damping = q
	}
	if t := targetOf(r, c.ID); t != nil {
		o.from, o.to = t.Range()
		o.damping = qualifier(t.Damping)
		o.at = t.PSA
		for _, corner := range t.Corners {
			o.corners = append(o.corners, corner.T)
		}
	}
	return o, true
}

// linear reads y at x, within the ends of xs, which rise.
func linear(xs, ys []float64, x float64) float64 {
	i, found := slices.BinarySearch(xs, x)
	if found {
		return ys[i]
	}
	t := (x - xs[i-1]) / (xs[i] - xs[i-1])
	return ys[i-1] + t*(ys[i]-ys[i-1])
}

// ratio is the curve of one series over another on the x that both have.
func (b *figure) ratio(r *Run, s *seriesFields) []drawn {
	over, ok1 := r.operand(s.Ratio, s.Ratio.List[0])
	under, ok2 := r.operand(s.Ratio, s.Ratio.List[1])
	if !ok1 || !ok2 {
		return nil
	}
	second := s.Ratio
	second.At = s.Ratio.List[1].At
	if !over.X.Dim.Is(under.X.Dim) || !over.Y.Dim.Is(under.Y.Dim) {
		r.Fail(second, "dimension", "%s is %s over %s, %s is %s over %s: they have no ratio", under.ID, under.Y.Dim.Name(), under.X.Dim.Name(), over.ID, over.Y.Dim.Name(), over.X.Dim.Name())
		return nil
	}
	lo, hi := math.Max(over.from, under.from), math.Min(over.to, under.to)
	if b.From.Given && b.From.Value.Dim.Is(over.X.Dim) {
		lo = math.Max(lo, b.From.SI())
	}
	if b.To.Given && b.To.Value.Dim.Is(over.X.Dim) {
		hi = math.Min(hi, b.To.SI())
	}
	ends := []float64{lo}
	if !math.IsInf(hi, 0) {
		ends = append(ends, hi)
	}
	grid := slices.Concat(over.X.SI, under.X.SI, over.corners, under.corners, ends)
	grid = slices.DeleteFunc(grid, func(x float64) bool { return x < lo || x > hi })
	slices.Sort(grid)
	grid = slices.Compact(grid)
	if len(grid) < 2 {
		unit := over.X.Unit
		end := func(x float64) string {
			return strings.TrimSpace(quantity.Format(unit.From(x), 3) + " " + unit.Pretty())
		}
		r.Fail(second, "ratio-range", "%s and %s have no common range: %s to %s and %s to %s", over.ID, under.ID,
			end(over.from), end(math.Min(over.to, over.X.SI[len(over.X.SI)-1])), end(under.from), end(math.Min(under.to, under.X.SI[len(under.X.SI)-1]))).
			WithHint("a ratio is never read beyond the ends of a series")
		return nil
	}
	if over.damping != "" && under.damping != "" && over.damping != under.damping {
		text := "the ratio of " + over.ID + " to " + under.ID + " compares " + over.damping + " with " + under.damping + " damping"
		r.Warnings = append(r.Warnings, text)
		r.Diags.Warnf("ratio-damping", s.Ratio.List[0].At, "%s", text)
	}
	y := make([]float64, len(grid))
	for i, x := range grid {
		a, err := over.at(x)
		c, err2 := under.at(x)
		if err == nil {
			err = err2
		}
		if err != nil {
			r.Fail(second, "ratio-range", "%s", err)
			return nil
		}
		if y[i] = a / c; c == 0 || math.IsInf(y[i], 0) {
			unit := under.X.Unit
			r.Fail(second, "ratio-zero", "%s is zero at %s", under.ID, strings.TrimSpace(quantity.Format(unit.From(x), 3)+" "+unit.Pretty())).WithHint("leave that stretch out by from and to")
			return nil
		}
	}
	name := ""
	_, what, _ := strings.Cut(over.ID, ".")
	if what, _, _ = strings.Cut(what, "@"); what != "" {
		name = "ratio of " + what
	}
	c := exhibit.Curve{X: quantity.List(grid, over.X.Unit, nil), Y: quantity.List(y, pure, nil)}
	return []drawn{{Curve: c, name: name, label: seriesLabel(over.ID) + " / " + seriesLabel(under.ID), role: exhibit.Data, from: second}}
}
