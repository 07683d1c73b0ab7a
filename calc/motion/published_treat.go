package motion

import (
	"fmt"
	"math"

	"quoin/calc/cite"
	"quoin/calc/published"
)

// treatments are the published cases of conditioning.
func treatments() []published.Case {
	return []published.Case{butterworthGains(), twoPasses(), prewarpedLow(), prewarpedHigh(), sectionQuality(), zeroPads(), detrended(), offset()}
}

// measuredGain is the gain of a filter at a frequency as it works: the ratio of the Fourier
// sums after and before it on one unit sample; one pass is the root of two.
func measuredGain(p Bandpass, f, step float64) (float64, error) {
	impulse := &Record{A: make([]float64, 3), Step: step}
	impulse.A[1] = 1
	corner := max(p.From, p.To)
	if p.From > 0 {
		corner = p.From
	}
	p.Pad = math.Ceil(20*float64(p.Order)/(corner*step)) * step // until it has died away
	out, _, err := p.Apply(impulse)
	if err != nil {
		return 0, err
	}
	lead := int(math.Round(out.Origin.Lead / step))
	y := transform(out.A, step, lead, f) / transform(impulse.A, step, 0, f)
	return real(y), nil
}

var butterworthTable = []struct {
	order  int
	one    [4]string // at f/fc of 0.5, 0.8, 1.25, 2
	factor string    // on the corner, for -3 dB in two passes
}{
	{2, [4]string{".970142500", ".842271401", ".539053696", ".242535625"}, ".8022432629"},
	{4, [4]string{".998052578", ".925381774", ".379036374", ".0623782862"}, ".8956803352"},
	{6, [4]string{".999877952", ".967315480", ".253575949", ".0156230930"}, ".929184649"},
	{8, [4]string{".999992371", ".986216555", ".165459682", ".0039062202"}, ".9464038965"},
}

// butterworthGains are the magnitudes of the analog filter, low-pass at f/fc and high-pass
// at fc/f alike, read off the digital filter where the warped frequencies have that ratio.
func butterworthGains() published.Case {
	c := published.Case{ID: "butterworth-magnitudes", Title: "Magnitude of Butterworth filters of order 2 to 8", Source: cite.To("Butterworth 1930", ""), Origin: published.Computed,
		Inputs: []published.Input{{Name: "f/fc", Value: 0.5}, {Name: "f/fc", Value: 0.8}, {Name: "f/fc", Value: 1.25}, {Name: "f/fc", Value: 2}}}
	ratios := []float64{0.5, 0.8, 1.25, 2}
	for _, row := range butterworthTable {
		for i, text := range row.one {
			c.Wants = append(c.Wants, published.Rounded(fmt.Sprintf("order %d at %v fc", row.order, ratios[i]), text, ""))
		}
		c.Wants = append(c.Wants, published.Rounded(fmt.Sprintf("order %d at fc", row.order), ".707106781", ""))
	}
	c.Compute = func() (out []float64, err error) {
		const step, corner = 0.01, 10.0
		for _, row := range butterworthTable {
			for _, x := range append(ratios, 1) {
				f := math.Atan(x*math.Tan(math.Pi*corner*step)) / (math.Pi * step)
				low, err := measuredGain(Bandpass{To: corner, Order: row.order}, f, step)
				if err != nil {
					return nil, err
				}
				f = math.Atan(math.Tan(math.Pi*corner*step)/x) / (math.Pi * step)
				high, err := measuredGain(Bandpass{From: corner, Order: row.order}, f, step)
				if err != nil {
					return nil, err
				}
				if math.Abs(low-high) > 1e-11 {
					return nil, fmt.Errorf("order %d: low-pass %v, high-pass %v", row.order, low, high)
				}
				out = append(out, math.Sqrt(low))
			}
		}
		return out, nil
	}
	return c
}

// twoPasses is the gain forward and backward, and the shift of the corner that makes it -3 dB.
func twoPasses() published.Case {
	c := published.Case{ID: "butterworth-two-passes", Title: "Forward and backward: gain of both passes, and the corner for -3 dB", Source: cite.To("Butterworth 1930", ""), Origin: published.Computed,
		Inputs: []published.Input{{Name: "order", Value: 4}},
		Wants: []published.Want{published.Rounded("order 4 at 0.5 fc", ".996108949", ""), published.Rounded("order 4 at 0.8 fc", ".856331427", ""), published.Rounded("order 4 at 1.25 fc", ".143668573", ""), published.Rounded("order 4 at 2 fc", ".00389105058", ""),
			published.Rounded("order 4 at fc", "-6.020599913", "dB"), published.Rounded("order 4 at fc, corner shifted", "-3.010299957", "dB")}}
	for _, row := range butterworthTable {
		c.Wants = append(c.Wants, published.Rounded(fmt.Sprintf("factor on the corner, order %d", row.order), row.factor, ""))
	}
	c.Compute = func() (out []float64, err error) {
		const step, corner = 0.01, 10.0
		for _, x := range []float64{0.5, 0.8, 1.25, 2} {
			g, err := measuredGain(Bandpass{To: corner, Order: 4}, math.Atan(x*math.Tan(math.Pi*corner*step))/(math.Pi*step), step)
			if err != nil {
				return nil, err
			}
			out = append(out, g)
		}
		for _, gain := range []float64{0.5, HalfPower} {
			g, err := measuredGain(Bandpass{To: corner, Order: 4, CornerGain: gain}, corner, step)
			if err != nil {
				return nil, err
			}
			out = append(out, 20*math.Log10(g))
		}
		for _, row := range butterworthTable {
			out = append(out, TwoPassShift(row.order))
		}
		return out, nil
	}
	return c
}

func prewarpedLow() published.Case {
	c := published.Case{ID: "bilinear-low-pass", Title: "Prewarped low-pass of order 4, 10 Hz at 100 samples a second, one pass", Source: cite.To("Butterworth 1930", "bilinear transform"), Origin: published.Computed,
		Inputs: []published.Input{{Name: "corner", Value: 10, Unit: "Hz"}, {Name: "sampling rate", Value: 100, Unit: "Hz"}, {Name: "order", Value: 4}}}
	at := []float64{1, 5, 10, 15, 20, 30}
	for i, text := range []string{".9999999962", ".998409898", ".7071067812", ".1631482542", ".03996803835", ".003105605039"} {
		c.Wants = append(c.Wants, published.Rounded(fmt.Sprintf("%v Hz", at[i]), text, ""))
	}
	c.Compute = func() ([]float64, error) { return onePass(Bandpass{To: 10, Order: 4}, 0.01, at) }
	return c
}

func prewarpedHigh() published.Case {
	c := published.Case{ID: "bilinear-high-pass", Title: "Prewarped high-pass of order 4, 0.1 Hz at 200 samples a second, one pass", Source: cite.To("Butterworth 1930", "bilinear transform"), Origin: published.Computed,
		Inputs: []published.Input{{Name: "corner", Value: 0.1, Unit: "Hz"}, {Name: "sampling rate", Value: 200, Unit: "Hz"}, {Name: "order", Value: 4}}}
	at := []float64{0.05, 0.08, 0.125, 0.2, 1}
	for i, text := range []string{".06237813284", ".37903599", ".9253820196", ".9980526168", ".999999995"} {
		c.Wants = append(c.Wants, published.Rounded(fmt.Sprintf("%v Hz", at[i]), text, ""))
	}
	c.Compute = func() ([]float64, error) { return onePass(Bandpass{From: 0.1, Order: 4}, 0.005, at) }
	return c
}

func onePass(p Bandpass, step float64, at []float64) (out []float64, err error) {
	for _, f := range at {
		g, err := measuredGain(p, f, step)
		if err != nil {
			return nil, err
		}
		out = append(out, math.Sqrt(g))
	}
	return out, nil
}

func sectionQuality() published.Case {
	return published.Case{ID: "butterworth-sections", Title: "Quality factors of the sections of a Butterworth filter of order 4", Source: cite.To("Butterworth 1930", ""), Origin: published.Computed,
		Inputs:  []published.Input{{Name: "order", Value: 4}},
		Wants:   []published.Want{published.Rounded("Q of the first section", ".5411961001", ""), published.Rounded("Q of the second section", "1.306562965", "")},
		Compute: func() ([]float64, error) { return SectionQ(4), nil }}
}

func zeroPads() published.Case {
	const why = "an exact value"
	return published.Case{ID: "zero-pads", Title: "Zero pads of a filter, both ends together", Source: cite.To("Converse & Brady 1992", ""), Origin: published.Memory,
		Inputs: []published.Input{{Name: "corner", Value: 0.1, Unit: "Hz"}},
		Wants:  []published.Want{{Name: "order 4", Value: 60, Unit: "s", Tol: 1e-12, Why: why}, {Name: "order 8: two passes of 4", Value: 120, Unit: "s", Tol: 1e-12, Why: why}, {Name: "kept at each end by a filter of order 4", Value: 60, Unit: "s", Tol: 1e-12, Why: why}},
		Compute: func() ([]float64, error) {
			return []float64{PadTotal(4, 0.1), PadTotal(8, 0.1), Bandpass{From: 0.1, To: 25, Order: 4, Pad: -1}.PadLength()}, nil
		}}
}

// detrended is a cubic with a sine on it, less the cubic that fits it best.
func detrended() published.Case {
	const why = "rounding of sums over 501 samples"
	return published.Case{ID: "polynomial-detrend", Title: "A polynomial baseline: removes its own kind, is orthogonal to it, takes nothing twice", Source: cite.To("Boore & Bommer 2005", ""), Origin: published.Computed,
		Inputs: []published.Input{{Name: "order", Value: 3}, {Name: "samples", Value: 501}},
		Wants: []published.Want{{Name: "largest sample left of a cubic", Unit: "m/s²", Tol: 1e-12, Why: why}, {Name: "largest change by a second application", Unit: "m/s²", Tol: 1e-12, Why: why},
			{Name: "largest cosine of what is left with 1, t, t², t³", Tol: 1e-12, Why: why}},
		Compute: func() ([]float64, error) {
			cubic, wave := make([]float64, 501), make([]float64, 501)
			for i := range cubic {
				t := float64(i) * 0.01
				cubic[i] = 1 - 2*t + 0.5*t*t - 0.3*t*t*t
				wave[i] = cubic[i] + math.Sin(7*t)
			}
			p := Baseline{Order: 3, Fit: "acceleration"}
			none, _, err := p.Apply(&Record{A: cubic, Step: 0.01})
			if err != nil {
				return nil, err
			}
			once, residual, err := p.Apply(&Record{A: wave, Step: 0.01})
			if err != nil {
				return nil, err
			}
			twice, _, err := p.Apply(once)
			if err != nil {
				return nil, err
			}
			left, moved := 0.0, 0.0
			for i := range none.A {
				left = max(left, math.Abs(none.A[i]))
				moved = max(moved, math.Abs(twice.A[i]-once.A[i]))
			}
			return []float64{left, moved, residual.Value}, nil
		}}
}

// offset is an acceleration that is wrong by a constant.
func offset() published.Case {
	return published.Case{ID: "acceleration-offset", Title: "What a constant error of the acceleration does", Source: cite.To("Boore & Bommer 2005", ""), Origin: published.Computed,
		Inputs: []published.Input{{Name: "c", Value: 0.01, Unit: "m/s²"}, {Name: "t", Value: 40, Unit: "s"}},
		Wants: []published.Want{{Name: "velocity, c t", Value: 0.4, Unit: "m/s", Tol: 1e-12, Why: "rounding of 4000 sums"}, {Name: "displacement, c t²/2", Value: 8, Unit: "m", Tol: 1e-10, Why: "rounding of 4000 sums"},
			{Name: "displacement after a constant baseline", Value: 0, Unit: "m", Tol: 1e-12, Why: "rounding of 4000 sums"}},
		Compute: func() ([]float64, error) {
			r := &Record{A: make([]float64, 4001), Step: 0.01}
			for i := range r.A {
				r.A[i] = 0.01
			}
			v, d := Integrate(r)
			out, _, err := Baseline{Order: 0, Fit: "acceleration"}.Apply(r)
			if err != nil {
				return nil, err
			}
			_, left := Integrate(out)
			return []float64{v[4000], d[4000], left[4000]}, nil
		}}
}
