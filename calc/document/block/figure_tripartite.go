package block

import (
	"cmp"
	"math"
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/calc/spectrum"
)

// tripartite tells whether the figure shows PSV over T with diagonals of PSA and SD.
func (b *figure) tripartite() bool { return b.Axes.Text() == "tripartite" }

// pseudoVelocity turns the curves of a tripartite figure into pseudo-velocities;
// the period of zero, where PSV and SD vanish, has no place there.
func (b *figure) pseudoVelocity(r *Run, all []drawn) bool {
	unit := r.System().Preferred(quantity.Velocity)
	for i := range all {
		d := &all[i]
		_, what, _ := strings.Cut(d.ID, ".")
		what, _, _ = strings.Cut(what, "@")
		turn, ok := map[string]func(y, T float64) float64{
			"PSA": spectrum.FromPSA, "SD": spectrum.FromSD, "PSV": func(y, _ float64) float64 { return y },
		}[what]
		if !ok || !d.X.Dim.Is(quantity.Time) {
			r.Fail(d.from, "figure-tripartite", "tripartite axes take the PSA, PSV or SD of spectra and targets; this is %s", cmp.Or(d.ID, d.label)).
				WithHint("- east_rs.PSV")
			return false
		}
		var x, y []float64
		for k, T := range d.X.SI {
			if T > 0 && d.Y.SI[k] > 0 {
				x, y = append(x, T), append(y, turn(d.Y.SI[k], T))
			}
		}
		if len(x) == 0 {
			r.Fail(d.from, "log-axis", "%s has no values greater than zero; a log axis cannot show it", d.ID)
			return false
		}
		d.X, d.Y, d.name = quantity.List(x, d.X.Unit, nil), quantity.List(y, unit, nil), "PSV"
	}
	return true
}

// diagonals closes the axes of a tripartite panel and draws the lines of equal PSA,
// in g, and of equal SD, in the small unit of the system, at 1, 2, 5 of each decade.
func (b *figure) diagonals(r *Run, p *exhibit.Panel) {
	var xs, ys []float64
	for _, s := range p.Series {
		for i, x := range s.X {
			if (p.X.Min == nil || x >= *p.X.Min) && (p.X.Max == nil || x <= *p.X.Max) {
				xs, ys = append(xs, x), append(ys, s.Y[i])
			}
		}
	}
	if len(xs) == 0 {
		return // said elsewhere
	}
	close := func(a *exhibit.Axis, lo, hi float64) {
		if hi <= lo*1.001 {
			lo, hi = lo/2, hi*2
		}
		if a.Min == nil || *a.Min <= 0 {
			a.Min = &lo
		}
		if a.Max == nil {
			a.Max = &hi
		}
	}
	close(&p.X, slices.Min(xs), slices.Max(xs))
	u := p.Y.Unit
	close(&p.Y, u.To(below(u.From(slices.Min(ys)))), u.To(above(u.From(slices.Max(ys)))))

	psa, sd := spectrum.Diagonals(*p.X.Min, *p.X.Max, *p.Y.Min, *p.Y.Max)
	T, small := math.Sqrt(*p.X.Min**p.X.Max), r.System().Small()
	for _, v := range decadeSteps(inG.From(psa[0]), inG.From(psa[1])) {
		p.Diagonals = append(p.Diagonals, exhibit.Diagonal{X: T, Y: spectrum.FromPSA(inG.To(v), T), Rise: 1, Label: quantity.Plain(v) + " g"})
	}
	for _, v := range decadeSteps(small.From(sd[0]), small.From(sd[1])) {
		p.Diagonals = append(p.Diagonals, exhibit.Diagonal{X: T, Y: spectrum.FromSD(small.To(v), T), Rise: -1, Label: quantity.Plain(v) + " " + small.Pretty()})
	}
	p.Title = "rising lines: PSA, g; falling lines: SD, " + small.Pretty()
}

// decadeSteps is 1, 2 and 5 of each decade strictly between lo and hi, lo > 0.
func decadeSteps(lo, hi float64) []float64 {
	var out []float64
	for e := math.Floor(math.Log10(lo)); e <= math.Log10(hi); e++ {
		for _, m := range []float64{1, 2, 5} {
			if v := round12(m * math.Pow(10, e)); v > lo*1.02 && v < hi/1.02 {
				out = append(out, v)
			}
		}
	}
	return out
}

// below and above are the nearest of 1, 2, 5 times a power of ten, x > 0.
func below(x float64) float64 {
	decade := math.Pow(10, math.Floor(math.Log10(x)+1e-9))
	for _, m := range []float64{5, 2} {
		if m*decade <= x*(1+1e-9) {
			return m * decade
		}
	}
	return decade
}

func above(x float64) float64 {
	decade := math.Pow(10, math.Floor(math.Log10(x)+1e-9))
	for _, m := range []float64{1, 2, 5} {
		if m*decade >= x*(1-1e-9) {
			return m * decade
		}
	}
	return 10 * decade
}
