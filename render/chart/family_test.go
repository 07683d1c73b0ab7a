package chart

import (
	"math"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// family is one figure of every kind that packages show, with invented numbers.
func family() []exhibit.Figure {
	return []exhibit.Figure{history(), stacked(), spectrum(), dampings(), shapes(), shears(), drifts(), suite(), plain(), tripartite()}
}

func unit(s string) quantity.Unit { return quantity.MustUnit(s) }

func ptr(v float64) *float64 { return &v }

// shaking is a made-up motion: sines of unlike periods under an envelope.
func shaking(n int, dt, scale, phase float64) (t, a []float64) {
	for i := range n {
		s := float64(i) * dt
		e := math.Pow(s/4, 2) * math.Exp(2-s/2)
		v := 0.0
		for k := 1; k <= 9; k++ {
			w := 2 * math.Pi * (0.4 + 0.77*float64(k))
			v += math.Sin(w*s+phase*float64(k*k)) / math.Sqrt(float64(k))
		}
		t, a = append(t, s), append(a, scale*e*v/4)
	}
	return t, a
}

func peak(t, a []float64) (x, y float64) {
	for i := range a {
		if math.Abs(a[i]) > math.Abs(y) {
			x, y = t[i], a[i]
		}
	}
	return x, y
}

func history() exhibit.Figure {
	t, a := shaking(8000, 0.005, 3, 1)
	x, y := peak(t, a)
	g := unit("g")
	return exhibit.Figure{ID: "east", Caption: "Acceleration of east, as used", Alt: "A history with one burst early on.", Panels: []exhibit.Panel{{
		X:      exhibit.Axis{Label: "time t", Unit: unit("s")},
		Y:      exhibit.Axis{Label: "acceleration", Unit: g, Symmetric: true},
		Series: []exhibit.FigSerie{{ID: "east.a", X: t, Y: a, Role: exhibit.Data}},
		Points: []exhibit.RefPoint{{X: x, Y: y, Label: quantity.Format(g.From(y), 3) + " g at " + quantity.Format(x, 3) + " s"}},
	}}}
}

func stacked() exhibit.Figure {
	f := exhibit.Figure{ID: "east_avd", Caption: "Acceleration, velocity and displacement of east", Alt: "Three histories one under another."}
	for i, what := range []string{"acceleration", "velocity", "displacement"} {
		t, a := shaking(2400, 0.01, []float64{3, 0.3, 0.05}[i], float64(i+1))
		x, y := peak(t, a)
		u := unit([]string{"g", "m/s", "mm"}[i])
		f.Panels = append(f.Panels, exhibit.Panel{
			X: exhibit.Axis{Label: "time t", Unit: unit("s")}, Y: exhibit.Axis{Label: what, Unit: u, Symmetric: true},
			Series: []exhibit.FigSerie{{X: t, Y: a, Role: exhibit.Data}},
			Points: []exhibit.RefPoint{{X: x, Y: y, Label: quantity.Format(u.From(y), 3) + " " + u.Pretty()}},
		})
	}
	return f
}

// periods is a geometric row of periods.
func periods(from, to float64, n int) []float64 {
	out := make([]float64, n)
	for i := range out {
		out[i] = from * math.Pow(to/from, float64(i)/float64(n-1))
	}
	return out
}

func ordinates(T []float64, level, wobble float64) []float64 {
	out := make([]float64, len(T))
	for i, t := range T {
		base := 0.4 + 0.6*math.Min(1, t/0.12)
		if t > 0.6 {
			base = 0.6 / t
		}
		out[i] = quantity.Gravity * level * base * (1 + wobble*math.Sin(9*math.Log(t)+3*math.Sin(5*t)))
	}
	return out
}

func spectrum() exhibit.Figure {
	T := periods(0.05, 4, 160)
	return exhibit.Figure{ID: "east_rs.PSA", Caption: "Spectrum of east with the design target", Alt: "The spectrum lies about the target.", Panels: []exhibit.Panel{{
		X: exhibit.Axis{Label: "period T", Unit: unit("s"), Log: true}, Y: exhibit.Axis{Label: "PSA", Unit: unit("g")},
		Series: []exhibit.FigSerie{
			{Label: "2 %", X: T, Y: ordinates(T, 0.85, 0.45), Role: exhibit.Data, Dash: 2},
			{Label: "5 %", X: T, Y: ordinates(T, 0.8, 0.25), Role: exhibit.Data},
			{Label: "10 %", X: T, Y: ordinates(T, 0.75, 0.12), Role: exhibit.Data, Dash: 1},
			{Label: "design target, 5 %", X: T, Y: ordinates(T, 0.92, 0), Role: exhibit.Governing},
		},
		Lines: []exhibit.RefLine{{Vertical: true, At: 0.642, Label: "T₁"}, {Vertical: true, At: 0.7, Label: "T = 0.700 s"}},
	}}}
}

// dampings is the same with both axes logarithmic, in all six dashes.
func dampings() exhibit.Figure {
	T := periods(0.02, 10, 200)
	p := exhibit.Panel{X: exhibit.Axis{Label: "period T", Unit: unit("s"), Log: true}, Y: exhibit.Axis{Label: "pseudo-velocity", Unit: unit("cm/s"), Log: true}}
	for i, z := range []string{"0.5 %", "2 %", "5 %", "10 %", "15 %", "20 %"} {
		y := ordinates(T, 0.9/(1+0.35*float64(i)), 0.3/(1+float64(i)))
		for k := range y {
			y[k] *= T[k] / 2 / math.Pi
		}
		p.Series = append(p.Series, exhibit.FigSerie{Label: z, X: T, Y: y, Role: exhibit.Data, Dash: i})
	}
	return exhibit.Figure{ID: "dampings", Caption: "Pseudo-velocity at six dampings", Alt: "Six curves.", Panels: []exhibit.Panel{p}}
}

var levels = []exhibit.TickName{{At: 0, Name: "base"}, {At: 4.2, Name: "level 2"}, {At: 7.8, Name: "level 3"}, {At: 11.4, Name: "level 4"}, {At: 15.2, Name: "roof"}}

func elevations() []float64 { return []float64{0, 4.2, 7.8, 11.4, 15.2} }

func shapes() exhibit.Figure {
	f := exhibit.Figure{ID: "modes", Caption: "The first four mode shapes", Alt: "Four shapes side by side.", Beside: true}
	for n := 1; n <= 4; n++ {
		var x []float64
		for _, h := range elevations() {
			x = append(x, math.Sin((float64(n)-0.5)*math.Pi*h/15.2))
		}
		f.Panels = append(f.Panels, exhibit.Panel{
			Title: "Mode " + string(rune('0'+n)) + ", " + quantity.Format(0.642/float64(2*n-1), 3) + " s",
			X:     exhibit.Axis{Label: "shape", Symmetric: true}, Y: exhibit.Axis{Label: "elevation", Unit: unit("m"), Names: levels},
			Series: []exhibit.FigSerie{{Label: "mode", X: x, Y: elevations(), Role: exhibit.Data, Dots: true}},
		})
	}
	return f
}

func shears() exhibit.Figure {
	y := exhibit.Axis{Label: "elevation", Unit: unit("m"), Names: levels}
	return exhibit.Figure{ID: "shears", Caption: "Storey shear and overturning moment", Alt: "Both grow downward.", Beside: true, Panels: []exhibit.Panel{
		{Title: "Storey shear", X: exhibit.Axis{Label: "shear V", Unit: unit("kN")}, Y: y, Series: []exhibit.FigSerie{
			{Label: "equivalent static", X: []float64{1586e3, 1586e3, 1410e3, 1064e3, 580e3}, Y: elevations(), Role: exhibit.Data, Step: true},
			{Label: "modal, CQC", X: []float64{1480e3, 1480e3, 1250e3, 990e3, 600e3}, Y: elevations(), Role: exhibit.Governing, Step: true},
		}},
		{Title: "Overturning", X: exhibit.Axis{Label: "moment M", Unit: unit("MN*m")}, Y: y, Series: []exhibit.FigSerie{
			{Label: "equivalent static", X: []float64{17.8e6, 11.1e6, 6.0e6, 2.2e6, 0}, Y: elevations(), Role: exhibit.Data},
			{Label: "modal, CQC", X: []float64{16.2e6, 10.4e6, 5.7e6, 2.3e6, 0}, Y: elevations(), Role: exhibit.Governing},
		}},
	}}
}

func drifts() exhibit.Figure {
	y := exhibit.Axis{Label: "elevation", Unit: unit("m"), Names: levels}
	return exhibit.Figure{ID: "drift", Caption: "Storey drift ratio against its limit", Alt: "Storey 2 exceeds the limit.", Panels: []exhibit.Panel{{
		X: exhibit.Axis{Label: "drift ratio", Unit: unit("%")}, Y: y, Series: []exhibit.FigSerie{
			{Label: "x direction", X: []float64{0.014, 0.014, 0.0208, 0.0185, 0.011}, Y: elevations(), Role: exhibit.Data, Step: true},
			{Label: "y direction", X: []float64{0.012, 0.012, 0.0172, 0.0161, 0.009}, Y: elevations(), Role: exhibit.Data, Step: true, Dash: 1},
			{Label: "limit 2.0 %", X: []float64{0.02, 0.02}, Y: []float64{0, 15.2}, Role: exhibit.Limit},
		},
		Points: []exhibit.RefPoint{{X: 0.0208, Y: 7.8, Label: "2.08 %, storey 2"}},
	}}}
}

// suite is many thin curves, their mean and a target.
func suite() exhibit.Figure {
	T := periods(0.05, 5, 120)
	p := exhibit.Panel{X: exhibit.Axis{Label: "period T", Unit: unit("s"), Log: true}, Y: exhibit.Axis{Label: "PSA", Unit: unit("g")}}
	for i := range 11 {
		p.Series = append(p.Series, exhibit.FigSerie{X: T, Y: ordinates(T, 0.6+0.06*float64(i), 0.1+0.03*float64(i)), Role: exhibit.Secondary})
	}
	p.Series = append(p.Series, exhibit.FigSerie{Label: "mean of 11 records", X: T, Y: ordinates(T, 0.9, 0.1), Role: exhibit.Data},
		exhibit.FigSerie{Label: "target", X: T, Y: ordinates(T, 0.92, 0), Role: exhibit.Governing})
	p.Lines = []exhibit.RefLine{{Vertical: true, At: 0.13, Label: "0.2 T₁ 0.13 s"}, {Vertical: true, At: 1.3, Label: "2 T₁ 1.3 s"}, {At: 0.4 * quantity.Gravity, Label: "PGA"}}
	return exhibit.Figure{ID: "suite", Caption: "Scaled suite and target", Alt: "The mean lies about the target.", Panels: []exhibit.Panel{p}}
}

// plain is a linear figure with one curve and large numbers.
func plain() exhibit.Figure {
	return exhibit.Figure{ID: "plain", Caption: "Base shear as the weight changes", Alt: "A straight line.", Panels: []exhibit.Panel{{
		X: exhibit.Axis{Label: "weight W", Unit: unit("kN")}, Y: exhibit.Axis{Label: "base shear V", Unit: unit("kN")},
		Series: []exhibit.FigSerie{{Label: "V", X: []float64{8e6, 12e6, 16e6, 20e6}, Y: []float64{0.86e6, 12.8e6, 17.1e6, 21.4e6}, Role: exhibit.Data, Dots: true}},
	}}}
}

// tripartite is a spectrum on log axes with slanting grid lines; the numbers are those
// of one unit of acceleration and of length.
func tripartite() exhibit.Figure {
	T := periods(0.05, 5, 60)
	v := make([]float64, len(T))
	for i := range T {
		v[i] = 0.8 * T[i] / (0.4 + T[i])
	}
	p := exhibit.Panel{Title: "rising lines: PSA; falling lines: SD", X: exhibit.Axis{Label: "period T", Unit: unit("s"), Log: true, Min: ptr(0.05), Max: ptr(5)},
		Y: exhibit.Axis{Label: "PSV", Unit: unit("m/s"), Log: true, Min: ptr(0.01), Max: ptr(2)}, Series: []exhibit.FigSerie{{Label: "rs", X: T, Y: v, Role: exhibit.Data}}}
	for _, k := range []float64{0.1, 1, 10} {
		p.Diagonals = append(p.Diagonals, exhibit.Diagonal{X: 1, Y: 1.5608 * k, Rise: 1, Label: quantity.Plain(k) + " g"}, exhibit.Diagonal{X: 1, Y: 0.62832 * k, Rise: -1, Label: quantity.Plain(100*k) + " mm"})
	}
	return exhibit.Figure{ID: "tripartite", Caption: "Tripartite spectrum", Alt: "Pseudo-velocity against period.", Panels: []exhibit.Panel{p}}
}
