package block

import (
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/calc/standard"
)

// figure draws the spectrum, corners named.
func (b *target) figure(r *Run, t *standard.Target) {
	grid := b.grid(r, t)
	y, err := t.Series(grid)
	if err != nil {
		r.Fail(b.Periods, "target-range", "%s", err)
		return
	}
	id := r.Curve("PSA", grid, seconds, y, inG)
	p := exhibit.Panel{X: exhibit.Axis{Label: "period T", Unit: seconds}, Y: exhibit.Axis{Label: axisSymbol(t), Unit: inG, Min: zero()},
		Series: []exhibit.FigSerie{{ID: id, Label: r.Name, X: grid, Y: y, Role: exhibit.Governing}}}
	for _, c := range t.Corners {
		if c.T <= grid[len(grid)-1] {
			p.Lines = append(p.Lines, exhibit.RefLine{Vertical: true, At: c.T, Label: plainSymbol(c.Symbol) + " " + quantity.Format(c.T, 3) + " s"})
		}
	}
	if t.MultiPeriod {
		p.Series = append(p.Series, b.twoPeriod(t, grid))
	}
	name := t.Basis + ", " + t.Spectrum + " spectrum"
	if t.Basis == tableBasis {
		name = "spectrum from " + b.Table.File.Text()
	}
	r.Figure(exhibit.Figure{ID: r.Name, Caption: Lines(&b.common, "Target "+r.Name+": "+name+", "+damped(t.Damping)+" damping"), Panels: []exhibit.Panel{p},
		Alt: "Pseudo-acceleration of the " + t.Spectrum + " spectrum against period."})
	if t.Symbol == "S_e" {
		b.displacement(r, t)
	}
}

// twoPeriod is the two-period spectrum of the same parameters, for comparison.
func (b *target) twoPeriod(t *standard.Target, grid []float64) exhibit.FigSerie {
	given := standard.Given{Numbers: map[string]float64{}, Texts: map[string]string{"spectrum": t.Spectrum}}
	for _, symbol := range []string{"S_DS", "S_D1", "T_L"} {
		p, _ := t.Parameter(symbol)
		given.Numbers[symbol] = p.Value
	}
	s := exhibit.FigSerie{ID: "two-period", Label: "two-period", Role: exhibit.Secondary, Dash: 1}
	if two, err := standard.Build(t.Basis, given); err == nil {
		if y, err := two.Series(grid); err == nil {
			s.X, s.Y = grid, y
		}
	}
	return s
}

// displacement draws the displacement spectrum over the range of the standard.
func (b *target) displacement(r *Run, t *standard.Target) {
	_, end := t.Range()
	if f, ok := t.Parameter("T_F"); ok {
		end = 1.2 * f.Value
	}
	u := unitsOf(r.System()).small
	grid := []float64{}
	for i := range 201 {
		grid = append(grid, round12(end*float64(i)/200))
	}
	p := exhibit.Panel{X: exhibit.Axis{Label: "period T", Unit: seconds}, Y: exhibit.Axis{Label: "S_De", Unit: u, Min: zero()}}
	p.Y.Label = plainSymbol(p.Y.Label)
	for _, c := range t.Corners {
		if c.T < end {
			grid = append(grid, c.T)
		}
		if c.T < end && c.Symbol != "T_B" {
			p.Lines = append(p.Lines, exhibit.RefLine{Vertical: true, At: c.T, Label: plainSymbol(c.Symbol) + " " + quantity.Format(c.T, 3) + " s"})
		}
	}
	slices.Sort(grid)
	grid = slices.Compact(grid)
	y := make([]float64, len(grid))
	for i, T := range grid {
		y[i], _ = t.SD(T)
	}
	p.Series = []exhibit.FigSerie{{ID: r.Curve("SD", grid, seconds, y, u), Label: r.Name, X: grid, Y: y, Role: exhibit.Governing}}
	r.Figure(exhibit.Figure{ID: r.Name + "-SD", Caption: "Elastic displacement spectrum of " + r.Name + ", " + damped(t.Damping) + " damping", Panels: []exhibit.Panel{p},
		Alt: "Displacement against period: it rises, stays, and comes down to the displacement of the ground."})
}

// plainSymbol is a symbol as plain text: T_0 is T₀, T_S is TS.
func plainSymbol(s string) string {
	base, sub, _ := strings.Cut(s, "_")
	sub = strings.Replace(sub, "beta", "β", 1)
	return base + strings.Map(func(r rune) rune {
		if r >= '0' && r <= '9' {
			return '₀' + r - '0'
		}
		return r
	}, sub)
}

// grid is the periods of the series: those asked for, or a fine grid with the
// corners, up to 4 s or a little past the last corner that lies below 6 s.
func (b *target) grid(r *Run, t *standard.Target) []float64 {
	if b.Periods.Given {
		return r.Product(b.Periods.Text()).(*Grid).T
	}
	from, to := t.Range()
	if t.Basis == tableBasis {
		grid := []float64{from}
		for _, br := range t.Branches {
			grid = append(grid, br.To)
		}
		return grid
	}
	last := to
	to = min(to, 4)
	for _, c := range t.Corners {
		if c.T < 6 && c.Symbol != "T_E" && c.Symbol != "T_beta" {
			to = min(last, max(to, 1.25*c.T))
		}
	}
	grid := []float64{}
	for i := range 201 {
		grid = append(grid, round12(from+(to-from)*float64(i)/200))
	}
	for _, c := range t.Corners {
		if c.T <= to {
			grid = append(grid, c.T)
		}
	}
	for _, br := range t.Branches { // where branches meet without a name
		if br.From <= to {
			grid = append(grid, br.From)
		}
	}
	slices.Sort(grid)
	return slices.Compact(grid)
}
