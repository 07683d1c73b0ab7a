package oscillator

import (
	"fmt"
	"math"
	"math/rand/v2"
	"runtime"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// noise is a seeded record of n samples within [-1, 1], from rest to rest.
func noise(seed uint64, n int) []float64 {
	r := rand.New(rand.NewPCG(seed, 1))
	a := make([]float64, n)
	for i := 1; i+1 < n; i++ {
		a[i] = 2*r.Float64() - 1
	}
	return a
}

var dampings = []float64{0, 0.001, 0.02, 0.05, 0.2, 0.7, 0.95, 0.999999, 1}

// The peaks over continuous time agree with the refined matrix exponential, from
// rigid to soft oscillators, within the error of that route: the fourth derivative of u
// between kinks of the load, times h⁴/384, is up to 1e-8 of the peak here.
func TestAgainstExponential(t *testing.T) {
	a := noise(7, 60)
	const dt = 0.01
	for _, z := range dampings {
		for _, T := range []float64{0.1 * dt, 0.3 * dt, 0.77 * dt, dt, 1.5 * dt, 2 * dt, 2.0945 * dt, 3 * dt, 5 * dt, 6.3 * dt, 20 * dt, 0.5, 3, 40, 1000} {
			if got := Check(a, dt, Oscillator{T, z}); !(got < 2e-8) {
				t.Errorf("T %v z %v: the two routes differ by %.2g", T, z, got)
			}
		}
	}
}

// All three maxima agree with densely sampled closed-form motion between the samples; the
// times are where they are reached.
func TestPeaksAgainstSampling(t *testing.T) {
	a := noise(3, 12)
	a[0], a[11] = 0.4, -0.7 // starts and ends with a jump
	const dt = 0.02
	for _, z := range dampings {
		for _, T := range []float64{0.01 * dt, 0.1 * dt, 0.5 * dt, dt, 2 * dt, 4 * dt, 10 * dt, 2, 300} {
			o := Oscillator{T, z}
			got := Run(a, dt, []Oscillator{o})[0]
			w := 2 * math.Pi / T
			m := max(50, int(math.Ceil(w*dt/0.02))) // the sampled peak misses 1-cos(0.01) = 5e-5
			var want Peaks
			fine := make([]float64, 0, (len(a)+2)*m)
			for i := 0; i+1 < len(a); i++ {
				for j := range m {
					fine = append(fine, a[i]+(a[i+1]-a[i])*float64(j)/float64(m))
				}
			}
			fine = append(fine, a[len(a)-1])
			u, v, at := History(fine, dt/float64(m), o)
			for i := range u {
				want.U, want.V, want.A = max(want.U, math.Abs(u[i])), max(want.V, math.Abs(v[i])), max(want.A, math.Abs(at[i]))
			}
			n := len(u) - 1
			h := T / 400
			u, v, at = free(u[n], v[n], h, 800, o)
			for i := range u {
				want.U, want.V, want.A = max(want.U, math.Abs(u[i])), max(want.V, math.Abs(v[i])), max(want.A, math.Abs(at[i]))
			}
			for _, c := range []struct {
				what      string
				got, want float64
			}{{"u", got.U, want.U}, {"v", got.V, want.V}, {"a", got.A, want.A}} {
				if !(c.got >= c.want*(1-1e-11) && c.got <= c.want*(1+2e-4)) {
					t.Errorf("T/dt %v z %v max %s: %.9g, sampled %.9g", T/dt, z, c.what, c.got, c.want)
				}
			}
		}
	}
}

// free is the textbook free vibration.
func free(u0, v0, h float64, n int, o Oscillator) (u, v, at []float64) {
	w := 2 * math.Pi / o.Period
	wd := w * math.Sqrt(1-o.Damping*o.Damping)
	for i := range n {
		x := float64(i) * h
		e := math.Exp(-o.Damping * w * x)
		s, c := x, 1.0
		if wd > 0 {
			s, c = math.Sin(wd*x)/wd, math.Cos(wd*x)
		}
		ux := e * (u0*(c+o.Damping*w*s) + v0*s)
		vx := e * (v0*(c-o.Damping*w*s) - w*w*u0*s)
		u, v, at = append(u, ux), append(v, vx), append(at, -2*o.Damping*w*vx-w*w*ux)
	}
	return u, v, at
}

// The time of a peak is where the motion has it.
func TestPeakTimes(t *testing.T) {
	a := noise(11, 50)
	for _, z := range dampings {
		for _, T := range []float64{0.013, 0.05, 0.31, 4} {
			o := Oscillator{T, z}
			p := Run(a, 0.01, []Oscillator{o})[0]
			for what, c := range map[string]struct{ size, at float64 }{"u": {p.U, p.TU}, "v": {p.V, p.TV}, "a": {p.A, p.TA}} {
				n := int(math.Floor(c.at / 0.01))
				var s state
				u, v, _ := History(a, 0.01, o)
				i := min(n, len(a)-1)
				s.u, s.v = u[i], v[i]
				if i < len(a)-1 {
					s.p, s.slope = -a[i], -(a[i+1]-a[i])/0.01
				}
				b := search{omega: 2 * math.Pi / T, z: z, motion: s}
				m := s
				if x := c.at - float64(i)*0.01; x > 0 {
					m = b.after(x)
				}
				got := map[string]float64{"u": m.u, "v": m.v, "a": b.omega * (b.omega*m.u + 2*z*m.v)}[what]
				if math.Abs(math.Abs(got)-c.size) > 1e-9*c.size {
					t.Errorf("T %v z %v: max %s is %v, but at its time %v the motion is %v", T, z, what, c.size, c.at, got)
				}
			}
		}
	}
}

// A record sampled twice as finely along its own straight lines is the same record.
func TestRefinement(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := rapid.SliceOfN(rapid.Float64Range(-10, 10), 2, 30).Draw(t, "a")
		o := Oscillator{math.Pow(10, rapid.Float64Range(-3, 3).Draw(t, "log T")), rapid.Float64Range(0, 1).Draw(t, "z")}
		const dt = 0.02
		var fine []float64
		for i := range a[:len(a)-1] {
			fine = append(fine, a[i], (a[i]+a[i+1])/2)
		}
		fine = append(fine, a[len(a)-1])
		near(t, "refined", Run(fine, dt/2, []Oscillator{o})[0], Run(a, dt, []Oscillator{o})[0], 1e-8)
	})
}

// Several turning points in one step: the same straight lines in sixteen times as many
// steps, where a step holds one at most.
func TestCoarseSteps(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 8))
	for range 6000 {
		a := []float64{r.NormFloat64(), r.NormFloat64(), r.NormFloat64(), r.NormFloat64(), 0}
		o := Oscillator{2 * math.Pi / (0.5 + 2.5*r.Float64()), r.Float64()}
		if r.IntN(4) == 0 {
			o.Period /= 6
		}
		var fine []float64
		for i := range a[:4] {
			for k := range 16 {
				fine = append(fine, a[i]+(a[i+1]-a[i])*float64(k)/16)
			}
		}
		got, want := Run(a, 1, []Oscillator{o})[0], Run(append(fine, 0), 1.0/16, []Oscillator{o})[0]
		for _, x := range [][2]float64{{got.U, want.U}, {got.V, want.V}, {got.A, want.A}} {
			if math.Abs(x[0]-x[1]) > 1e-11*x[1] {
				t.Fatalf("%v under %v: %+v, in finer steps %+v", o, a, got, want)
			}
		}
	}
}

// kinds are records by the way their peaks lie: scattered, at every step alike, growing.
var kinds = map[string]func(r *rand.Rand, i, n int) float64{
	"noise":       func(r *rand.Rand, i, n int) float64 { return r.NormFloat64() },
	"alternating": func(r *rand.Rand, i, n int) float64 { return float64(1 - 2*(i%2)) },
	"by turns":    func(r *rand.Rand, i, n int) float64 { return float64(1-2*(i%2)) * r.Float64() },
	"growing":     func(r *rand.Rand, i, n int) float64 { return float64(1-2*(i%2)) * float64(i) / float64(n) },
	"ramped":      func(r *rand.Rand, i, n int) float64 { return float64(1-2*(i%2)) * min(1, 5*float64(i)/float64(n)) },
	"sine":        func(r *rand.Rand, i, n int) float64 { return math.Sin(0.31 * float64(i)) },
	"constant":    func(r *rand.Rand, i, n int) float64 { return 1 },
	"late":        func(r *rand.Rand, i, n int) float64 { return float64(i / (n - 2)) },
}

// Leaving out blocks and steps changes nothing: a search of every step finds the same peaks.
func TestBlocks(t *testing.T) {
	r := rand.New(rand.NewPCG(12, 12))
	for name, kind := range kinds {
		for _, n := range []int{2, 3, stride, stride + 1, stride + 2, 400, 3000} {
			if name == "late" && n < 4 {
				continue
			}
			a := make([]float64, n)
			for i := range a {
				a[i] = kind(r, i, n)
			}
			const dt = 0.01
			g := survey(a, dt)
			for range 12 {
				o := Oscillator{dt * math.Pow(10, 0.33+3.5*r.Float64()), []float64{0, 0.02, 0.05, 0.3, 1, r.Float64()}[r.IntN(6)]}
				s := newStepper(o, dt)
				b := &search{omega: s.omega, z: s.z}
				x, y := s.everywhere(g, b)
				c := &search{omega: s.omega, z: s.z}
				if x1, y1 := s.blockwise(g, make([]passed, len(g.blocks)), c); x1 != x || y1 != y {
					t.Fatalf("%s, %d samples, %+v: the passes end apart", name, n, o)
				}
				for _, v := range [][2]float64{{c.u.size, b.u.size}, {c.v.size, b.v.size}, {c.a.size, b.a.size}} {
					if math.Abs(v[0]-v[1]) > 2e-13*v[1] {
						t.Errorf("%s, %d samples, %+v: by blocks %v, by steps %v (%.2g)", name, n, o, v[0], v[1], v[0]/v[1]-1)
					}
				}
			}
		}
	}
}

// The size of a block is that of its worst state: all that it bounds at its bound, with
// the signs that add up.
func TestSize(t *testing.T) {
	r := rand.New(rand.NewPCG(14, 14))
	for range 100 {
		w, z := math.Pow(10, 4*r.Float64()-2), r.Float64()
		ag, slope, v, a := r.Float64(), r.Float64(), r.Float64(), r.Float64()
		q := ag + a                      // q = u'' = -ag - (2 z w u' + w² u)
		rate := -slope - 2*z*w*q - w*w*v // q' = -ag' - 2 z w q - w² u'
		want := math.Abs(q) + math.Abs(rate)/w
		if got := (&stepper{omega: w, z: z}).size(block{ag, slope}, v, a); math.Abs(got-want) > 1e-14*want {
			t.Fatalf("size %v, want %v", got, want)
		}
	}
	g := survey([]float64{1, -3, 2, 2, 7, 0}, 0.5)
	if len(g.blocks) != 1 || g.blocks[0] != (block{7, 14}) {
		t.Errorf("%+v", g.blocks)
	}
}

// A largest value that falls on a sample has the time of the sample: under a constant
// acceleration an undamped oscillator swings to twice the static displacement at T/2, with the
// largest velocity at T/4, and so in every period.
func TestPeakAtSample(t *testing.T) {
	a := slices.Repeat([]float64{1}, 2401) // whole periods, so that nothing moves afterwards
	for _, n := range []float64{8, 40, 160, 400, 1200} {
		T := n / 64
		p := Run(a, 1.0/64, []Oscillator{{T, 0}})[0]
		w := 2 * math.Pi / T
		for what, x := range map[string][2]float64{"u": {p.U, 2 / (w * w)}, "v": {p.V, 1 / w}, "a": {p.A, 2}} {
			if math.Abs(x[0]/x[1]-1) > 1e-11 {
				t.Errorf("T %v: max %s %v, want %v", T, what, x[0], x[1])
			}
		}
		for what, x := range map[string][3]float64{"u": {p.TU, T / 2, T}, "v": {p.TV, T / 4, T / 2}, "a": {p.TA, T / 2, T}} {
			times := (x[0] - x[1]) / x[2]
			if times < -1e-5 || math.Abs(times-math.Round(times)) > 1e-5 {
				t.Errorf("T %v: max %s at %v s, want %v and every %v s", T, what, x[0], x[1], x[2])
			}
		}
	}
}

// The cubic through both ends of a step lies within its bound, and the motion within h⁴/384 times
// the largest fourth derivative of the cubic; both are reached nearly.
func TestReach(t *testing.T) {
	r := rand.New(rand.NewPCG(13, 13))
	for range 20000 {
		f0, f1, d0, d1 := r.NormFloat64(), r.NormFloat64(), 3*r.NormFloat64(), 3*r.NormFloat64()
		most := 0.0
		for k := range 201 {
			x := float64(k) / 200
			most = max(most, math.Abs((1+2*x)*(1-x)*(1-x)*f0+x*(1-x)*(1-x)*d0+x*x*(3-2*x)*f1-x*x*(1-x)*d1))
		}
		if c := crest(f0, f1, d0, d1); c < most-1e-14 || c > most+3e-4 || reach(f0, f1, d0, d1) < c-1e-14 {
			t.Fatalf("%v %v %v %v: sampled %v, crest %v, reach %v", f0, f1, d0, d1, most, c, reach(f0, f1, d0, d1))
		}
	}
	if x := reach(0, 0, 4, -4); x != 1 || crest(0, 0, 4, -4) != 1 {
		t.Errorf("the reach of a parabola of height 1 is %v", x)
	}
}

// Scaling the record scales the peaks; stretching record and period in time
// stretches u by c², v by c and leaves the acceleration; zeros before the record
// only delay it.
func TestSymmetries(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := rapid.SliceOfN(rapid.Float64Range(-10, 10), 3, 30).Draw(t, "a")
		a[0] = 0
		o := Oscillator{math.Pow(10, rapid.Float64Range(-3, 2).Draw(t, "log T")), rapid.Float64Range(0, 1).Draw(t, "z")}
		c := math.Pow(10, rapid.Float64Range(-2, 2).Draw(t, "log c"))
		const dt = 0.01
		p := Run(a, dt, []Oscillator{o})[0]

		scaled := make([]float64, len(a))
		for i := range a {
			scaled[i] = -c * a[i]
		}
		near(t, "scaled", Run(scaled, dt, []Oscillator{o})[0], Peaks{U: c * p.U, V: c * p.V, A: c * p.A}, 1e-9)

		near(t, "stretched", Run(a, c*dt, []Oscillator{{c * o.Period, o.Damping}})[0], Peaks{U: c * c * p.U, V: c * p.V, A: p.A}, 1e-8)

		late := Run(append(make([]float64, 7), a...), dt, []Oscillator{o})[0]
		near(t, "late", late, p, 1e-9)
	})
}

// The response is the sum of the responses to the parts.
func TestSuperposition(t *testing.T) {
	a, b := noise(1, 200), noise(2, 200)
	sum := make([]float64, 200)
	for i := range a {
		sum[i] = 2*a[i] - 3*b[i]
	}
	for _, o := range []Oscillator{{0.004, 0.05}, {0.2, 0}, {3, 0.3}, {0.5, 1}} {
		ua, va, aa := History(a, 0.01, o)
		ub, vb, ab := History(b, 0.01, o)
		us, vs, as := History(sum, 0.01, o)
		for i := range sum {
			for _, d := range []float64{(us[i] - 2*ua[i] + 3*ub[i]) / (o.Period * o.Period), (vs[i] - 2*va[i] + 3*vb[i]) / o.Period, as[i] - 2*aa[i] + 3*ab[i]} {
				if math.Abs(d) > 1e-12 {
					t.Fatalf("%v sample %d: off by %g", o, i, d)
				}
			}
		}
	}
}

func near(t *rapid.T, what string, got, want Peaks, tol float64) {
	t.Helper()
	for _, x := range [][2]float64{{got.U, want.U}, {got.V, want.V}, {got.A, want.A}} {
		if math.Abs(x[0]-x[1]) > tol*x[1] {
			t.Fatalf("%s: got %+v, want %+v", what, got, want)
		}
	}
}

// Rows do not depend on the number of goroutines or on their company.
func TestDeterministic(t *testing.T) {
	a := noise(5, 500)
	var many []Oscillator
	for i := range 50 {
		many = append(many, Oscillator{0.01 * float64(i+1), 0.05})
	}
	want := Run(a, 0.01, many)
	defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(1))
	if !slices.Equal(Run(a, 0.01, many), want) {
		t.Error("one goroutine gives another result")
	}
	for i, o := range many {
		if Run(a, 0.01, []Oscillator{o})[0] != want[i] {
			t.Errorf("oscillator %d alone gives another result", i)
		}
	}
}

// The first pass holds exactly the maxima of the history: the contract of the kernel.
func TestKernel(t *testing.T) {
	a := noise(9, 2000)
	for _, z := range dampings {
		s := newStepper(Oscillator{0.4, z}, 0.01)
		_, _, mx, my, mq := s.maxima(a, 0, 0)
		u, v, at := History(a, 0.01, Oscillator{0.4, z})
		if mx*s.su != largest(u) || my*s.sv != largest(v) || mq*s.sa != largest(at) {
			t.Errorf("z %v: kernel %v %v %v, history %v %v %v", z, mx*s.su, my*s.sv, mq*s.sa, largest(u), largest(v), largest(at))
		}
	}
}

func largest(x []float64) (m float64) {
	for _, x := range x {
		m = max(m, math.Abs(x))
	}
	return m
}

// The series and the closed form of the coefficients meet; both keep the identities
// between the coefficients.
func TestRespond(t *testing.T) {
	for _, z := range dampings {
		below, above := respond(1, z, math.Nextafter(1, 0)), respond(1, z, 1)
		for i, d := range []float64{below.g - above.g, below.g1 - above.g1, below.u - above.u, below.w - above.w} {
			if math.Abs(d) > 3e-15 {
				t.Errorf("z %v: coefficient %d jumps by %g at w t = 1", z, i, d)
			}
		}
		for _, x := range []float64{1e-6, 1e-3, 0.3, 0.999, 1, 5, 50} {
			r := respond(1, z, x)
			// from the equation of motion, integrated: g1 + 2 z g + u = 1 and g + 2 z u + w = x
			if d := math.Abs(r.g1 + 2*z*r.g + r.u - 1); d > 1e-15*5 {
				t.Errorf("z %v x %v: momentum off by %g", z, x, d)
			}
			if d := math.Abs(r.g + 2*z*r.u + r.w - x); d > 5e-16*max(5, x) {
				t.Errorf("z %v x %v: impulse off by %g", z, x, d)
			}
		}
	}
	// h -> 0: g = h, u = h²/2, w = h³/6
	if r := respond(2, 0.05, 1e-9); math.Abs(r.u/0.5e-18-1) > 1e-9 || math.Abs(r.w*6e27-1) > 1e-9 {
		t.Errorf("short step: %+v", r)
	}
}

func TestPanics(t *testing.T) {
	good := []float64{0, 1, 0}
	for name, f := range map[string]func(){
		"NaN":        func() { Run([]float64{0, math.NaN()}, 0.01, nil) },
		"infinite":   func() { Run([]float64{0, math.Inf(1)}, 0.01, nil) },
		"no samples": func() { Run(nil, 0.01, nil) },
		"step 0":     func() { Run(good, 0, nil) },
		"period 0":   func() { Run(good, 0.01, []Oscillator{{0, 0.05}}) },
		"period NaN": func() { Run(good, 0.01, []Oscillator{{math.NaN(), 0.05}}) },
		"damping -1": func() { Run(good, 0.01, []Oscillator{{1, -0.01}}) },
		"damping 2":  func() { History(good, 0.01, Oscillator{1, 1.01}) },
	} {
		func() {
			defer func() {
				if r := recover(); r == nil || fmt.Sprint(r)[:11] != "oscillator:" {
					t.Errorf("%s: panic %v", name, r)
				}
			}()
			f()
		}()
	}
	if p := Run([]float64{0, 0, 0}, 0.01, []Oscillator{{1, 0.05}})[0]; p != (Peaks{}) {
		t.Errorf("no motion gives %+v", p)
	}
}

func BenchmarkRun(b *testing.B) {
	a := noise(1, 20_000)
	var o []Oscillator
	for i := range 200 {
		for _, z := range []float64{0.02, 0.05, 0.10} {
			o = append(o, Oscillator{0.02 * math.Pow(500, float64(i)/199), z})
		}
	}
	for b.Loop() {
		Run(a, 0.005, o)
	}
	b.ReportMetric(float64(len(a)*len(o))*float64(b.N)/b.Elapsed().Seconds(), "steps/s")
}

// benchmarkKind is an intensity of Housner, 241 periods, of 20,000 samples.
func benchmarkKind(b *testing.B, kind string) {
	r := rand.New(rand.NewPCG(1, 1))
	a := make([]float64, 20_000)
	for i := range a {
		a[i] = kinds[kind](r, i, len(a))
	}
	var o []Oscillator
	for i := range 241 {
		o = append(o, Oscillator{0.1 + 0.01*float64(i), 0.05})
	}
	for b.Loop() {
		Run(a, 0.01, o)
	}
}

func BenchmarkNoise(b *testing.B)       { benchmarkKind(b, "noise") }
func BenchmarkAlternating(b *testing.B) { benchmarkKind(b, "alternating") }
func BenchmarkGrowing(b *testing.B)     { benchmarkKind(b, "growing") }
func BenchmarkRamped(b *testing.B)      { benchmarkKind(b, "ramped") }

func BenchmarkMaxima(b *testing.B) {
	a := noise(1, 20_000)
	s := newStepper(Oscillator{0.5, 0.05}, 0.005)
	for b.Loop() {
		s.maxima(a, 0, 0)
	}
	b.ReportMetric(float64(len(a))*float64(b.N)/b.Elapsed().Seconds(), "steps/s")
}

// A rigid oscillator is the dear case: T = dt/10.
func BenchmarkRigid(b *testing.B) {
	a := noise(1, 20_000)
	for b.Loop() {
		Run(a, 0.005, []Oscillator{{0.0005, 0.05}})
	}
}

// The bound never denies what the motion reaches within the step.
func TestBound(t *testing.T) {
	r := rand.New(rand.NewPCG(6, 6))
	for range 4000 {
		w, z := math.Pow(10, 2*r.Float64()-0.5), r.Float64()
		b := search{omega: w, z: z}
		b.motion = state{u: r.NormFloat64() / (w * w), v: 0.3 * r.NormFloat64() / w, p: r.NormFloat64(), slope: 3 * r.NormFloat64()}
		if r.IntN(2) == 0 { // no transient: the particular solution alone
			b.motion.v = b.motion.slope / (w * w)
			b.motion.u = b.motion.p/(w*w) - 2*z*b.motion.slope/(w*w*w)
		}
		var u, v, a float64
		for k := range 101 {
			m := b.after(float64(k) / 100)
			u, v, a = max(u, math.Abs(m.u)), max(v, math.Abs(m.v)), max(a, math.Abs(w*w*m.u+2*z*w*m.v))
		}
		e := b.after(1)
		for i := range 3 {
			b.u.size, b.v.size, b.a.size = 1e9, 1e9, 1e9
			*[]*float64{&b.u.size, &b.v.size, &b.a.size}[i] = []float64{u, v, a}[i] * (1 - 1e-9)
			if !b.bound(b.motion, 1, e.u, e.v) {
				t.Fatalf("w %v z %v %+v: maximum %d is denied", w, z, b.motion, i)
			}
		}
	}
}
