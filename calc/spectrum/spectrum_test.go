package spectrum

import (
	"encoding/json"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"reflect"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/motion"
)

func noise(n int, step float64) *motion.Record {
	r := rand.New(rand.NewPCG(4, 2))
	a := make([]float64, n)
	for i := 1; i+1 < n; i++ {
		a[i] = 2*r.Float64() - 1
	}
	return &motion.Record{A: a, Step: step}
}

// The spectrum of a seeded record against scipy (testdata/scipy/sdof.py), from half
// a step to a hundred seconds, undamped to critical.
func TestAgainstScipy(t *testing.T) {
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", "scipy", "sdof.json"))
	if err != nil {
		t.Fatal(err)
	}
	var ref struct {
		Step             float64
		A                []float64
		Periods, Damping []float64
		SD, SV, SA       [][]float64
	}
	if err := json.Unmarshal(data, &ref); err != nil {
		t.Fatal(err)
	}
	s, err := New(&motion.Record{A: ref.A, Step: ref.Step}, ref.Periods, ref.Damping)
	if err != nil {
		t.Fatal(err)
	}
	if len(ref.A) < 100 || len(ref.Periods)*len(ref.Damping) < 50 {
		t.Fatal("the reference is thin")
	}
	for i, z := range ref.Damping {
		for j, T := range ref.Periods {
			for name, x := range map[string][2]float64{"SD": {s.SD[i][j], ref.SD[i][j]}, "SV": {s.SV[i][j], ref.SV[i][j]}, "SA": {s.SA[i][j], ref.SA[i][j]}} {
				if d := math.Abs(x[0]/x[1] - 1); d > 1e-8 {
					t.Errorf("z %v T %v: %s %.12g, scipy %.12g (%.1g)", z, T, name, x[0], x[1], d)
				}
			}
		}
	}
}

func TestDefinitions(t *testing.T) {
	s, err := New(noise(300, 0.01), []float64{0, 0.05, 0.3, 2}, []float64{0, 0.05})
	if err != nil {
		t.Fatal(err)
	}
	for i, z := range s.Damping {
		for j, T := range s.Periods {
			o, err := s.At(T, z)
			if err != nil || o != (Ordinates{s.SD[i][j], s.SV[i][j], s.SA[i][j], s.PSV[i][j], s.PSA[i][j]}) {
				t.Errorf("At(%v, %v) = %+v, %v", T, z, o, err)
			}
			if T == 0 {
				if o != (Ordinates{PSA: s.PGA, SA: s.PGA}) {
					t.Errorf("at period 0: %+v", o)
				}
				continue
			}
			w := 2 * math.Pi / T
			if math.Abs(o.PSV/(w*o.SD)-1) > 1e-15 || math.Abs(o.PSA/(w*w*o.SD)-1) > 1e-15 || o.PSA > o.SA*(1+1e-9) && z == 0 {
				t.Errorf("T %v: %+v", T, o)
			}
			if z == 0 && math.Abs(o.PSA/o.SA-1) > 1e-12 {
				t.Errorf("undamped PSA %v and SA %v differ", o.PSA, o.SA)
			}
		}
		v, T := s.MaxPSA(i)
		if v != slices.Max(s.PSA[i]) || s.PSA[i][slices.Index(s.Periods, T)] != v {
			t.Errorf("largest PSA %v at %v", v, T)
		}
	}
	if r := s.Residual(); !(r < 1e-7) {
		t.Errorf("residual %g", r)
	}
	data, err := json.Marshal(s)
	if err != nil {
		t.Fatal(err)
	}
	var back Spectrum
	if err := json.Unmarshal(data, &back); err != nil || !reflect.DeepEqual(*s, back) {
		t.Errorf("a spectrum does not survive its encoding: %v", err)
	}
}

// A spoilt spectrum has a residual of its own computation only; the residual of a
// good one is far below what a wrong coefficient gives. See oscillator.Check.
func TestResidualOfForms(t *testing.T) {
	r, err := motion.Form("triangle", motion.FormParameters{Amplitude: 3, Duration: 0.4, Step: 0.01})
	if err != nil {
		t.Fatal(err)
	}
	s, err := New(r, []float64{0.001, 0.02, 0.1, 1, 10}, []float64{0, 0.05, 1})
	if err != nil {
		t.Fatal(err)
	}
	if got := s.Residual(); !(got < 1e-8) {
		t.Errorf("residual %g", got)
	}
}

// A one-sided pulse moves no oscillator beyond twice its static displacement. (That damping
// lowers SD is no law: after a triangle of ten whole periods it raises it.)
func TestPulseBounds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r, err := motion.Form(rapid.SampledFrom([]string{"triangle", "pulse", "half_sine", "versine", "blast"}).Draw(t, "kind"),
			motion.FormParameters{Amplitude: 2, Duration: 1, Step: 0.05})
		if err != nil {
			t.Fatal(err)
		}
		T := math.Pow(10, rapid.Float64Range(-2, 2).Draw(t, "log T"))
		for _, z := range []float64{0, 0.02, 0.05, 0.2, 0.5, 1} {
			o, err := At(r, T, z)
			if err != nil {
				t.Fatal(err)
			}
			if !(o.PSA > 0) || o.PSA > 4*(1+1e-12) {
				t.Fatalf("T %v z %v: %+v", T, z, o)
			}
		}
	})
}

func TestErrors(t *testing.T) {
	r := noise(30, 0.01)
	for name, f := range map[string]func() error{
		"no periods":       func() error { _, err := New(r, nil, []float64{0}); return err },
		"no damping":       func() error { _, err := New(r, []float64{1}, nil); return err },
		"falling":          func() error { _, err := New(r, []float64{2, 1}, []float64{0}); return err },
		"negative period":  func() error { _, err := At(r, -1, 0); return err },
		"NaN period":       func() error { _, err := At(r, math.NaN(), 0); return err },
		"infinite period":  func() error { _, err := At(r, math.Inf(1), 0); return err },
		"long period":      func() error { _, err := At(r, 1.001e6, 0); return err },
		"huge samples":     func() error { _, err := At(&motion.Record{A: []float64{0, 1e300}, Step: 0.01}, 1, 0); return err },
		"tiny period":      func() error { _, err := At(r, 1e-12, 0); return err },
		"damping above 1":  func() error { _, err := At(r, 1, 1.01); return err },
		"damping below 0":  func() error { _, err := At(r, 1, -0.01); return err },
		"NaN damping":      func() error { _, err := At(r, 1, math.NaN()); return err },
		"bad record":       func() error { _, err := At(&motion.Record{A: []float64{1, math.NaN()}, Step: 1}, 1, 0); return err },
		"Housner damping":  func() error { _, err := Housner(r, 2); return err },
		"factor damping":   func() error { _, err := NewmarkHall(0.3, false); return err },
		"eta damping":      func() error { _, err := Eta(math.NaN()); return err },
		"B damping":        func() error { _, err := DampedB(-1); return err },
		"isolated damping": func() error { _, err := IsolatedB(1.5); return err },
	} {
		if f() == nil {
			t.Errorf("%s: no error", name)
		}
	}
}

// The largest accelerations at the shortest and the longest steps and periods give numbers, and so
// does the cross-check; PSA stays within what a resonance can give.
func TestLimits(t *testing.T) {
	for _, step := range []float64{1e-6, 1e3} {
		for _, second := range []float64{1e6, -1e6, 1e-300} {
			r := &motion.Record{Step: step, A: []float64{1e6, second, 1e6, second}}
			for _, z := range []float64{0, 0.05, 1} {
				periods := []float64{0, 1e-6 * step, 0.1 * step, 2 * step, 1e6}
				s, err := New(r, periods, []float64{z})
				if err != nil {
					t.Fatal(err)
				}
				for _, x := range slices.Concat(s.PSA[0], s.SA[0], s.SV[0], s.SD[0]) {
					if !(x >= 0 && x < math.MaxFloat64) {
						t.Fatalf("step %v, second %v, z %v: %v", step, second, z, x)
					}
				}
				if x := s.Residual(); !(x < 1e-6) {
					t.Errorf("step %v, second %v, z %v: residual %v", step, second, z, x)
				}
			}
		}
	}
}

// A long record at a short period is left out of the cross-check, not checked for minutes or
// given up with a panic.
func TestResidualOfLongRecord(t *testing.T) {
	r := noise(400_000, 0.01)
	s := &Spectrum{Record: r, Periods: []float64{0.001, 0.0011}, Damping: []float64{0.05}, PSA: [][]float64{{1, 1}}}
	if x := s.Residual(); x != 0 {
		t.Errorf("residual %v", x)
	}
	bad := &Spectrum{Record: &motion.Record{Step: 0.01, A: []float64{0, 1e308, -1e308, 1e308}}, Periods: []float64{1e6}, Damping: []float64{0}, PSA: [][]float64{{1}}}
	if x := bad.Residual(); math.IsNaN(x) {
		t.Errorf("residual %v", x)
	}
}

// Of equal ordinates the shortest period has the largest; the periods are the spectrum's own.
func TestMaxPSA(t *testing.T) {
	s := &Spectrum{Periods: []float64{1, 2, 3, 4}, PSA: [][]float64{{1, 5, 5, 2}}}
	if v, T := s.MaxPSA(0); v != 5 || T != 2 {
		t.Errorf("%v at %v", v, T)
	}
	periods, damping := []float64{1, 2}, []float64{0.05}
	s, err := New(noise(30, 0.01), periods, damping)
	if err != nil {
		t.Fatal(err)
	}
	if periods[1], damping[0] = 7, 7; s.Periods[1] != 2 || s.Damping[0] != 0.05 {
		t.Error("the spectrum shares what it was given")
	}
}

// Housner's integral of a real spectrum hardly moves when the grid is refined.
func TestHousner(t *testing.T) {
	r := noise(400, 0.01)
	got, err := Housner(r, 0.05)
	if err != nil {
		t.Fatal(err)
	}
	want := 0.0
	const n = 2400
	for i := range n { // midpoints of a ten times finer grid
		o, err := At(r, 0.1+(float64(i)+0.5)*2.4/n, 0.05)
		if err != nil {
			t.Fatal(err)
		}
		want += o.PSV * 2.4 / n
	}
	if math.Abs(got/want-1) > 2e-3 {
		t.Errorf("%v on the grid of 0.01 s, %v on one of 0.001 s", got, want)
	}
}

func TestGrid(t *testing.T) {
	for _, c := range []struct {
		from, to float64
		count    int
		linear   bool
		include  []float64
		want     []float64
	}{
		{0.1, 10, 3, false, nil, []float64{0.1, 1, 10}},
		{0, 1, 5, true, nil, []float64{0, 0.25, 0.5, 0.75, 1}},
		{0.1, 10, 3, false, []float64{0, 0.5, 1, 1, 20}, []float64{0, 0.1, 0.5, 1, 10, 20}},
		{2, 2, 1, false, nil, []float64{2}},
		{0.1, 10, 3, false, []float64{1 + 5e-10, 10.00001}, []float64{0.1, 1 + 5e-10, 10, 10.00001}}, // near is one, less near is two
	} {
		got, err := Grid(c.from, c.to, c.count, c.linear, c.include)
		if err != nil || len(got) != len(c.want) {
			t.Errorf("%+v: %v, %v", c, got, err)
			continue
		}
		for i := range got {
			if math.Abs(got[i]-c.want[i]) > 1e-15*10 {
				t.Errorf("%+v: %v", c, got)
			}
		}
	}
	for _, c := range []struct {
		from, to float64
		count    int
		linear   bool
		include  []float64
	}{
		{0, 1, 5, false, nil}, {1, 0.1, 5, false, nil}, {-1, 1, 5, true, nil}, {0.1, 1, 0, false, nil}, {0.1, 1, 1, false, nil}, {1, 1, 2, false, nil},
		{0.1, 1, 1 << 30, false, nil}, {0.1, math.Inf(1), 5, false, nil}, {math.NaN(), 1, 5, false, nil}, {0.1, 1, 5, false, []float64{-1}}, {0.1, 1, 5, false, []float64{math.NaN()}},
	} {
		if got, err := Grid(c.from, c.to, c.count, c.linear, c.include); err == nil {
			t.Errorf("%+v gives %v", c, got)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		from := rapid.Float64Range(0.001, 1).Draw(t, "from")
		g, err := Grid(from, from+rapid.Float64Range(0.01, 10).Draw(t, "more"), rapid.IntRange(2, 300).Draw(t, "count"), rapid.Bool().Draw(t, "linear"),
			rapid.SliceOf(rapid.Float64Range(0, 20)).Draw(t, "include"))
		if err != nil {
			t.Fatal(err)
		}
		for i := 1; i < len(g); i++ {
			if !(g[i] > g[i-1]) {
				t.Fatalf("periods %v and %v do not rise", g[i-1], g[i])
			}
		}
	})
}

func TestWarnings(t *testing.T) {
	codes := func(r *motion.Record, periods ...float64) string {
		s, err := New(r, periods, []float64{0.05})
		if err != nil {
			t.Fatal(err)
		}
		var out []string
		for _, w := range s.Warnings {
			out = append(out, w.Code)
		}
		return strings.Join(out, " ")
	}
	rest := func() *motion.Record { // a versine taken for a record, at rest at both ends
		r, _ := motion.Form("smooth", motion.FormParameters{Amplitude: 1, Duration: 4, Step: 0.01})
		r.Origin.Format = "AT2"
		return r
	}
	started := func(a float64) *motion.Record { // at rest but for the first sample
		r := rest()
		r.A[0] = a
		return r
	}
	cut := rest()
	cut.A = cut.A[60:]
	drift, _ := motion.Form("versine", motion.FormParameters{Amplitude: 1, Duration: 4, Step: 0.01})
	form, _ := motion.Form("pulse", motion.FormParameters{Amplitude: 1, Duration: 4, Step: 0.01})
	drift.Origin.Format = ""
	for _, c := range []struct{ got, want string }{
		{codes(rest(), 0.1, 1), ""},
		{codes(rest(), 0), ""},
		{codes(rest(), 0, 0.099, 1), "period-coarse"},
		{codes(rest(), 0.019, 1), "period-unresolved"},
		{codes(rest(), 0.1, 4.5), "record-short"},
		{codes(cut, 0.1, 1), "record-cut velocity-drift"},
		{codes(drift, 0.1, 1), "velocity-drift"},
		{codes(started(0.11), 0.1, 1), "record-cut"},
		{codes(started(0.09), 0.1, 1), ""},
		{codes(form, 0.1, 1), ""},
	} {
		if c.got != c.want {
			t.Errorf("warnings %q, want %q", c.got, c.want)
		}
	}
}

func BenchmarkNew(b *testing.B) {
	r := noise(20_000, 0.005)
	periods, _ := Grid(0.02, 10, 200, false, nil)
	for b.Loop() {
		if _, err := New(r, periods, []float64{0.05}); err != nil {
			b.Fatal(err)
		}
	}
}
