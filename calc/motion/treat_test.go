package motion

import (
	"encoding/json"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// far is the largest difference of two rows, and math.Inf where their lengths differ.
func far(a, b []float64) float64 {
	if len(a) != len(b) {
		return math.Inf(1)
	}
	worst := 0.0
	for i := range a {
		worst = max(worst, math.Abs(a[i]-b[i]))
	}
	return worst
}

func apply(t testing.TB, step Treatment, r *Record) *Record {
	t.Helper()
	before := slices.Clone(r.A)
	out, residual, err := step.Apply(r)
	if err != nil {
		t.Fatalf("%s: %s", step, err)
	}
	if !slices.Equal(before, r.A) {
		t.Errorf("%s changed the record it was given", step)
	}
	if !(residual.Value <= residual.Limit) {
		t.Errorf("%s: %s %.3g", step, residual.What, residual.Value)
	}
	if err := out.Validate(); err != nil {
		t.Errorf("%s: %s", step, err)
	}
	return out
}

// TestAgainstScipy: every treatment against testdata/scipy/treat.py.
func TestAgainstScipy(t *testing.T) {
	data, err := os.ReadFile("../../testdata/scipy/treat.json")
	if err != nil {
		t.Fatal(err)
	}
	type result struct {
		Order         int
		Fit           string
		From, To, Pad float64
		Length, Step  float64
		A, Fine       []float64
	}
	var ref struct {
		Step     float64
		A        []float64
		Baseline []result
		Taper    result
		Bandpass []result
		Resample []result
		Burst    result
	}
	if err := json.Unmarshal(data, &ref); err != nil {
		t.Fatal(err)
	}
	if len(ref.Baseline) != 9 || len(ref.Bandpass) != 5 || len(ref.Resample) != 5 {
		t.Fatal("the reference is not complete")
	}
	r := &Record{A: ref.A, Step: ref.Step}
	for _, c := range ref.Baseline {
		p := Baseline{c.Order, c.Fit}
		if d := far(apply(t, p, r).A, c.A); d > 1e-10 {
			t.Errorf("%s: off by %.3g m/s²", p, d)
		}
	}
	if d := far(apply(t, Taper{ref.Taper.Length, ref.Taper.Length}, r).A, ref.Taper.A); d > 1e-14 {
		t.Errorf("taper: off by %.3g m/s²", d)
	}
	for _, c := range ref.Bandpass {
		p := Bandpass{From: c.From, To: c.To, Order: c.Order, Pad: c.Pad}
		// The quotients of polynomials that scipy runs lose digits at low corners.
		if d := far(apply(t, p, r).A, c.A); d > 1e-9 {
			t.Errorf("%s: off by %.3g m/s²", p, d)
		}
	}
	for _, c := range ref.Resample {
		if d := far(apply(t, Resample{c.Step}, r).A, c.A); d > 1e-13 {
			t.Errorf("step %v: off by %.3g m/s²", c.Step, d)
		}
	}
	// the stop band lies 120 dB down, and so does the difference from the Fourier method
	fine := apply(t, Resample{ref.Burst.Step}, &Record{A: ref.Burst.A, Step: ref.Step})
	if d := far(fine.A, ref.Burst.Fine); d > 2e-6 {
		t.Errorf("resampled by the Fourier method: off by %.3g", d)
	}
}

// drawRecord draws a record of noise.
func drawRecord(t *rapid.T) *Record {
	n := rapid.IntRange(40, 400).Draw(t, "samples")
	g := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 1))
	a := make([]float64, n)
	for i := range a {
		a[i] = g.NormFloat64()
	}
	return &Record{A: a, Step: rapid.SampledFrom([]float64{0.0025, 0.005, 0.01, 1.0 / 128, 0.02}).Draw(t, "step")}
}

// drawTreatment draws a treatment that fits a record.
func drawTreatment(t *rapid.T, r *Record) Treatment {
	nyquist := 1 / (2 * r.Step)
	switch rapid.IntRange(0, 3).Draw(t, "treatment") {
	case 0:
		return Baseline{rapid.IntRange(0, MaxBaselineOrder).Draw(t, "order"), rapid.SampledFrom(BaselineFits).Draw(t, "fit")}
	case 1:
		half := r.Duration() / 2
		return Taper{rapid.Float64Range(0, half).Draw(t, "start"), rapid.Float64Range(0, half).Draw(t, "end")}
	case 2:
		return drawFilter(t, r, rapid.Float64Range(0, 2).Draw(t, "pad"))
	}
	return Resample{rapid.Float64Range(0.2, 3).Draw(t, "ratio") / (2 * nyquist)}
}

func drawFilter(t *rapid.T, r *Record, pad float64) Bandpass {
	nyquist := 1 / (2 * r.Step)
	p := Bandpass{Order: rapid.IntRange(1, 8).Draw(t, "order"), Pad: pad, CornerGain: rapid.SampledFrom([]float64{0, 0.5, HalfPower}).Draw(t, "gain")}
	kind := rapid.IntRange(0, 2).Draw(t, "kind")
	if kind != 1 {
		p.From = nyquist * rapid.Float64Range(0.002, 0.4).Draw(t, "from")
	}
	if kind != 0 {
		p.To = nyquist * rapid.Float64Range(0.45, 0.97).Draw(t, "to")
	}
	return p
}

// TestTreatments: every treatment is linear, leaves its argument alone, agrees with
// its own check and says what it did.
func TestTreatments(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		x := drawRecord(rt)
		y := x.Scaled(1)
		for i := range y.A {
			y.A[i] = math.Sin(float64(i*i)) + 0.3
		}
		p := drawTreatment(rt, x)
		both := x.Scaled(2)
		for i := range both.A {
			both.A[i] -= 3 * y.A[i]
		}
		fx, fy, f := apply(t, p, x), apply(t, p, y), apply(t, p, both)
		for i := range f.A {
			if want := 2*fx.A[i] - 3*fy.A[i]; math.Abs(f.A[i]-want) > 1e-10 {
				rt.Fatalf("%s: sample %d of a sum is %v, the sum is %v", p, i, f.A[i], want)
			}
		}
		if got := f.Origin.Treatment; len(got) != 1 || got[0] != p.String() || strings.ContainsAny(got[0], "\n") {
			rt.Fatalf("treatment said to be %q", got)
		}
	})
}

// TestBaselineTwice: what a baseline leaves has no baseline, and a polynomial of
// its order leaves nothing.
func TestBaselineTwice(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		r := drawRecord(rt)
		p := Baseline{rapid.IntRange(0, MaxBaselineOrder).Draw(rt, "order"), rapid.SampledFrom(BaselineFits).Draw(rt, "fit")}
		once := apply(t, p, r)
		if d := far(apply(t, p, once).A, once.A); d > 1e-9 {
			rt.Fatalf("%s: a second time takes off %.3g", p, d)
		}
		poly := r.Scaled(1)
		for i := range poly.A {
			x, y := float64(i)/float64(len(r.A)), 0.0
			for k := range p.Order + 1 {
				y = y*x + math.Cos(float64(k))
			}
			poly.A[i] = y
		}
		if d := far(apply(t, p, poly).A, make([]float64, len(r.A))); d > 1e-9 {
			rt.Fatalf("%s: %.3g of a polynomial is left", p, d)
		}
	})
}

// TestMeanAndVelocity: an unweighted mean leaves a final velocity, of half a step of
// the end samples; a fit to the velocity leaves it orthogonal.
func TestMeanAndVelocity(t *testing.T) {
	r := &Record{A: []float64{1, 2, 4, 3, 5}, Step: 1}
	out := apply(t, Baseline{0, "acceleration"}, r)
	if want := []float64{-2, -1, 1, 0, 2}; far(out.A, want) > 1e-14 {
		t.Errorf("less the mean: %v, want %v", out.A, want)
	}
	if v, _ := Integrate(out); math.Abs(v[4]-0) > 1e-14 {
		t.Errorf("final velocity %v, want -(a_first + a_last)/2 = 0", v[4])
	}
	// velocity of r: 0 1.5 4.5 8 12; on t: sum(v t)/sum(t²) = 82.5/30 = 2.75
	out = apply(t, Baseline{0, "velocity"}, r)
	if want := []float64{-1.75, -0.75, 1.25, 0.25, 2.25}; far(out.A, want) > 1e-13 {
		t.Errorf("fitted to the velocity: %v, want %v", out.A, want)
	}
}

// TestFilterSymmetric: the filter has no phase. A symmetric motion stays so, and the
// answer to the reversed motion is the reversed answer.
func TestFilterSymmetric(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		r := drawRecord(rt)
		p := drawFilter(rt, r, rapid.Float64Range(0, 1).Draw(rt, "pad"))
		back := r.Scaled(1)
		slices.Reverse(back.A)
		fx, fb := apply(t, p, r), apply(t, p, back)
		slices.Reverse(fb.A)
		if d := far(fx.A, fb.A); d > 1e-10 {
			rt.Fatalf("%s: backward and forward differ by %.3g", p, d)
		}
	})
}

// TestFilterOnSine: long sine bursts come out with the gain of their frequency and in
// phase, at the corner with half of their amplitude (0.707 where that is asked).
func TestFilterOnSine(t *testing.T) {
	for _, c := range []struct {
		p       Bandpass
		f, gain float64
	}{
		{Bandpass{From: 0.5, Order: 4}, 0.5, 0.5},
		{Bandpass{From: 0.5, Order: 3}, 0.5, 0.5},
		{Bandpass{To: 10, Order: 4}, 10, 0.5},
		{Bandpass{To: 10, Order: 1}, 10, 0.5},
		{Bandpass{From: 0.5, Order: 4, CornerGain: HalfPower}, 0.5, math.Sqrt2 / 2},
		{Bandpass{To: 10, Order: 6, CornerGain: HalfPower}, 10, math.Sqrt2 / 2},
		{Bandpass{To: 10, Order: 4}, 5, math.Pow(0.998409898, 2)},
		{Bandpass{To: 10, Order: 4}, 15, math.Pow(0.1631482542, 2)},
		{Bandpass{From: 0.5, To: 10, Order: 4}, 2, 1 / (1 + math.Pow(math.Tan(math.Pi*0.005)/math.Tan(math.Pi*0.02), 8)) / (1 + math.Pow(math.Tan(math.Pi*0.02)/math.Tan(math.Pi*0.1), 8))},
	} {
		const step = 0.01
		r := &Record{A: make([]float64, 40001), Step: step}
		for i := range r.A {
			r.A[i] = math.Sin(2 * math.Pi * c.f * r.Time(i))
		}
		out := apply(t, c.p, r)
		if g := c.p.Gain(c.f, step); math.Abs(g-c.gain) > 2e-9 {
			t.Errorf("%s at %v Hz: gain %.10g, want %.10g", c.p, c.f, g, c.gain)
		}
		for i := 18000; i < 22000; i++ { // the middle has forgotten the ends
			if want := c.gain * r.A[i]; math.Abs(out.A[i]-want) > 2e-9 {
				t.Fatalf("%s at %v Hz: sample %d is %.10g, want %.10g", c.p, c.f, i, out.A[i], want)
			}
		}
	}
}

// TestPads: by default 1.5 times the order of both passes over the corner, shared by
// the ends; with them the filtered motion comes to rest, without them it does not. The usable band
// and the lead travel with the record.
func TestPads(t *testing.T) {
	r := &Record{A: make([]float64, 3001), Step: 0.01}
	for i := range r.A {
		x := r.Time(i)
		r.A[i] = x * math.Exp(-x/3) * math.Sin(9*x+0.2*x*x)
	}
	r.Origin.UsablePeriod = 9
	kept := apply(t, Bandpass{From: 0.1, To: 25, Order: 4, Pad: -1}, r)
	if len(kept.A) != 3001+2*6000 || math.Abs(kept.Origin.Lead-60) > 1e-9 {
		t.Errorf("%d samples, lead %v s; want 60 s at each end", len(kept.A), kept.Origin.Lead)
	}
	if o := kept.Origin; o.UsablePeriod != 8 || o.ShortestPeriod != 0.05 {
		t.Errorf("usable from %v to %v s, want 0.05 to 8", o.ShortestPeriod, o.UsablePeriod)
	}
	stripped := apply(t, Bandpass{From: 0.1, To: 25, Order: 4, Pad: 0}, r)
	if far(stripped.A, kept.A[6000:9001]) != 0 {
		t.Error("the pads change what lies between them")
	}
	if got := apply(t, Bandpass{From: 0.01, Order: 1, Pad: 0}, r).Origin.UsablePeriod; got != 9 {
		t.Errorf("usable to %v s, want the 9 s stated, which are shorter", got)
	}
	v, d := Integrate(kept)
	m := Measure(kept)
	if end := len(v) - 1; math.Abs(v[end]) > 1e-6*m.PGV || math.Abs(d[end]) > 1e-5*m.PGD {
		t.Errorf("with pads v ends at %.2g of %.2g m/s, d at %.2g of %.2g m", v[end], m.PGV, d[end], m.PGD)
	}
	_, d = Integrate(stripped)
	if math.Abs(d[len(d)-1]) < 1e-3*m.PGD {
		t.Error("without pads the displacement ends at rest as well: the test shows nothing")
	}
}

// TestLowCorner: far below the sampling rate the filter loses no digits: 10 mHz at 200 Hz,
// against the analytic gain through the check in Apply, and a step that must decay to zero.
func TestLowCorner(t *testing.T) {
	r := &Record{A: make([]float64, 2000), Step: 0.005}
	for i := range r.A {
		r.A[i] = 1
	}
	out, residual, err := Bandpass{From: 0.01, Order: 4, Pad: 0}.Apply(r)
	if err != nil || residual.Value > 1e-9 {
		t.Fatalf("residual %.3g, %v", residual.Value, err)
	}
	if d := far(out.A, r.A); d > 2 || d == 0 {
		t.Errorf("ten seconds at a corner of a hundred change by %.3g", d)
	}
}

// TestResampleSine: a sine within the band is exact between its samples, and what
// lies above the new Nyquist frequency is removed, not folded.
func TestResampleSine(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		const step, n = 0.01, 2001
		to := step * rapid.SampledFrom([]float64{0.1, 0.25, 1.0 / 3, 0.5, 0.64, 0.8, 1, 1.25, 1.6, 2, 2.5, 4, math.Sqrt2, 1 / math.Sqrt2}).Draw(rt, "ratio")
		band := min(fineBand/(2*step), CoarseBand/(2*to))
		f, phase := band*rapid.Float64Range(0, 1).Draw(rt, "f"), rapid.Float64Range(0, 6).Draw(rt, "phase")
		high := rapid.Bool().Draw(rt, "above") && to > 1.1*step
		want := 1.0
		if high {
			f, want = 1/(2*to)+(1/(2*step)-1/(2*to))*rapid.Float64Range(0, 1).Draw(rt, "part"), 0
		}
		r := &Record{A: make([]float64, n), Step: step}
		for i := range r.A {
			r.A[i] = math.Sin(2*math.Pi*f*r.Time(i) + phase)
		}
		out := apply(t, Resample{to}, r)
		margin := 70*max(step, to*1.061) + to
		for i := range out.A {
			if x := out.Time(i); x > margin && x < r.Duration()-margin {
				if d := math.Abs(out.A[i] - want*math.Sin(2*math.Pi*f*x+phase)); d > 5e-6 {
					rt.Fatalf("%v Hz from %v to %v s: off by %.3g at %v s", f, step, to, d, x)
				}
			}
		}
	})
}

// TestResampleKeeps: at a whole part of the step the old samples are among the new,
// and the ends are where they were.
func TestResampleKeeps(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		r := drawRecord(rt)
		k := rapid.IntRange(1, 7).Draw(rt, "parts")
		out := apply(t, Resample{r.Step / float64(k)}, r)
		if len(out.A) != (len(r.A)-1)*k+1 {
			rt.Fatalf("%d samples of %d in %d parts", len(out.A), len(r.A), k)
		}
		for i, a := range r.A {
			if math.Abs(out.A[i*k]-a) > 1e-13 {
				rt.Fatalf("sample %d was %v and is %v", i, a, out.A[i*k])
			}
		}
	})
}

// TestMisfits: parameters that do not fit the record are named, in words.
func TestMisfits(t *testing.T) {
	r := &Record{A: make([]float64, 100), Step: 0.01}
	for _, c := range []struct {
		p         Treatment
		parameter string
		words     string
	}{
		{Baseline{-1, "acceleration"}, "order", "whole number from 0 to 10"},
		{Baseline{11, "velocity"}, "order", "not 11"},
		{Taper{0.6, 0.5}, "start", "longer than the record"},
		{Taper{0, 2}, "end", "longer than the record"},
		{Bandpass{Order: 4}, "from", "needs a corner"},
		{Bandpass{From: 0.1, To: 50, Order: 4}, "to", "Nyquist frequency of 50 Hz"},
		{Bandpass{From: 60, Order: 4}, "from", "Nyquist"},
		{Bandpass{From: 10, To: 10, Order: 4}, "from", "not below the upper corner"},
		{Bandpass{From: 1, Order: 13}, "order", "from 1 to 12"},
		{Bandpass{From: 1e-3, Order: 4, Pad: -1}, "pad", "1048576 samples"},
		{Bandpass{From: 1e-6, Order: 4, Pad: 0}, "from", "too low"},
		{Resample{1e-7}, "step", "cannot be that of a record"},
		{Resample{1}, "step", "fewer than two samples"},
	} {
		out, _, err := c.p.Apply(r)
		m, ok := err.(*Misfit)
		if !ok || m.Parameter != c.parameter || !strings.Contains(m.Text, c.words) || out != nil {
			t.Errorf("%s: %v, want %s about %s", c.p, err, c.words, c.parameter)
		}
	}
	for name, f := range map[string]func(){
		"fit":    func() { Baseline{0, "jerk"}.Apply(r) },
		"taper":  func() { Taper{-1, 0}.Apply(r) },
		"corner": func() { Bandpass{From: -1, Order: 2}.Apply(r) },
		"step":   func() { Resample{0}.Apply(r) },
	} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("a wrong %s does not panic", name)
				}
			}()
			f()
		}()
	}
}

// TestZeroRecord: nothing becomes nothing, not NaN.
func TestZeroRecord(t *testing.T) {
	r := &Record{A: make([]float64, 200), Step: 0.01}
	for _, p := range []Treatment{Baseline{2, "displacement"}, Taper{1, 0.5}, Bandpass{From: 1, To: 20, Order: 4, Pad: 0}, Resample{0.01}} {
		if out := apply(t, p, r); far(out.A, r.A) != 0 {
			t.Errorf("%s makes %v of nothing", p, out.A[:3])
		}
	}
	if _, y := Amplitude(r); slices.Max(y) != 0 {
		t.Error("nothing has a spectrum")
	}
}

// TestAmplitude: the bands hold the energy of the record (Parseval), and a sine
// burst of amplitude A lasting D has A D/2 at its frequency.
func TestAmplitude(t *testing.T) {
	r, err := Form("sine", FormParameters{Amplitude: 2, Period: 0.5, Cycles: 16, Step: 0.005})
	if err != nil {
		t.Fatal(err)
	}
	f, y := Amplitude(r)
	at := 0
	for i := range f {
		if y[i] > y[at] {
			at = i
		}
	}
	if math.Abs(math.Log2(f[at]/2)) > 0.1 || y[at] > 8 || y[at] < 4 {
		t.Errorf("the largest amplitude is %v m/s at %v Hz, want somewhat less than 8 at 2 Hz", y[at], f[at])
	}
	g := rand.New(rand.NewPCG(5, 1))
	noise := &Record{A: make([]float64, 1<<14), Step: 0.005}
	energy, sum := 0.0, 0.0
	for i := range noise.A {
		noise.A[i] = g.NormFloat64()
		sum += noise.A[i] * noise.A[i] * noise.Step
	}
	f, y = Amplitude(noise)
	for i := range f {
		energy += 2 * y[i] * y[i] * f[i] * (math.Exp2(0.5/perOctave) - math.Exp2(-0.5/perOctave))
	}
	// the last band is cut at the Nyquist frequency: a part of a twelfth of an octave, 6 % of the whole
	if math.Abs(energy/sum-1) > 0.06 {
		t.Errorf("the bands hold %v of the energy %v", energy, sum)
	}
}

func BenchmarkTreat(b *testing.B) {
	r := &Record{A: make([]float64, 20000), Step: 0.005}
	for i := range r.A {
		r.A[i] = math.Sin(float64(i)*0.3) * math.Exp(-float64(i)*2e-4)
	}
	for _, p := range []Treatment{Baseline{3, "acceleration"}, Baseline{3, "displacement"}, Taper{2, 5}, Bandpass{From: 0.1, To: 25, Order: 4, Pad: -1}, Resample{0.0025}, Resample{0.02}} {
		name, _, _ := strings.Cut(p.String(), ",")
		b.Run(strings.ReplaceAll(name, " ", "-"), func(b *testing.B) {
			for b.Loop() {
				apply(b, p, r)
			}
		})
	}
}

// TestTaperEnds: each end has its own length.
func TestTaperEnds(t *testing.T) {
	r := &Record{A: []float64{1, 1, 1, 1, 1, 1, 1}, Step: 1}
	if got, want := apply(t, Taper{Start: 2, End: 3}, r).A, []float64{0, 0.5, 1, 1, 0.75, 0.25, 0}; far(got, want) > 1e-15 {
		t.Errorf("%v, want %v", got, want)
	}
}
