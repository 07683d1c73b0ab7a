package motion

import (
	"encoding/json"
	"math"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/published"
)

func TestPublished(t *testing.T) {
	for _, miss := range published.Misses(Published()) {
		t.Error(miss)
	}
}

func samplesOf(t *rapid.T) []float64 {
	return rapid.SliceOfN(rapid.Float64Range(-10, 10), 2, 40).Draw(t, "a")
}

// Every measure agrees with a brute sampling of the straight lines.
func TestMeasureAgainstSampling(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := &Record{A: samplesOf(t), Step: 0.1}
		m := Measure(r)
		const parts = 200
		h := r.Step / parts
		var v, d, pga, pgv, pgd, cav, energy float64
		for i := range r.A[:len(r.A)-1] {
			for j := range parts {
				at := func(x float64) float64 { return r.A[i] + (r.A[i+1]-r.A[i])*(float64(j)+x)/parts }
				a0, am, a1 := at(0), at(0.5), at(1)
				d += h*v + h*h*(2*a0+a1)/6
				v += h * (a0 + a1) / 2
				energy += h * (a0*a0 + 4*am*am + a1*a1) / 6
				cav += h * (math.Abs(a0) + math.Abs(a1)) / 2
				pga, pgv, pgd = math.Max(pga, math.Max(math.Abs(a0), math.Abs(a1))), math.Max(pgv, math.Abs(v)), math.Max(pgd, math.Abs(d))
			}
		}
		for _, c := range []struct {
			what           string
			got, want, tol float64
		}{
			{"PGA", m.PGA, pga, 1e-12}, {"PGV", m.PGV, pgv, 1e-4 * pga * r.Step}, {"PGD", m.PGD, pgd, 1e-4 * pga * r.Step * r.Duration()},
			{"CAV", m.CAV, cav, 1e-4 * pga * r.Duration()}, {"Arias", m.Arias, math.Pi / (2 * 9.80665) * energy, 1e-12 * (1 + energy)},
		} {
			if math.Abs(c.got-c.want) > c.tol {
				t.Fatalf("%s: got %v, sampled %v", c.what, c.got, c.want)
			}
		}
		if m.PGV < pgv*(1-1e-12) || m.PGD < pgd*(1-1e-12) {
			t.Fatalf("a sampled motion exceeds the peaks: %v > %v or %v > %v", pgv, m.PGV, pgd, m.PGD)
		}
		// the Husid times split the energy as they say
		for _, c := range [][2]float64{{m.T5, 0.05}, {m.T75, 0.75}, {m.T95, 0.95}} {
			if part := energyUntil(r, c[0]); m.Arias > 0 && math.Abs(part-c[1]*energy) > 1e-9*energy {
				t.Fatalf("at %v s the energy is %v of %v, want %v", c[0], part, energy, c[1])
			}
		}
	})
}

func energyUntil(r *Record, t float64) (e float64) {
	for i := range r.A[:len(r.A)-1] {
		x := math.Min(r.Step, t-r.Time(i))
		if x <= 0 {
			break
		}
		a0 := r.A[i]
		a1 := a0 + (r.A[i+1]-a0)*x/r.Step
		e += x / 3 * (a0*a0 + a0*a1 + a1*a1)
	}
	return e
}

// The times of peaks are where the motion has them.
func TestPeakTimes(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := &Record{A: samplesOf(t), Step: 0.1}
		m := Measure(r)
		v, d := Integrate(r)
		at := func(x float64) step {
			i := int(math.Min(x/r.Step+1e-9, float64(len(r.A)-2)))
			return step{a0: r.A[i], slope: (r.A[i+1] - r.A[i]) / r.Step, v0: v[i], d0: d[i]}
		}
		x := m.TimePGV - r.Step*math.Floor(math.Min(m.TimePGV/r.Step+1e-9, float64(len(r.A)-2)))
		if got := math.Abs(at(m.TimePGV).velocity(x)); math.Abs(got-m.PGV) > 1e-9*(1+m.PGV) {
			t.Fatalf("velocity at its peak time %v is %v, not %v", m.TimePGV, got, m.PGV)
		}
		x = m.TimePGD - r.Step*math.Floor(math.Min(m.TimePGD/r.Step+1e-9, float64(len(r.A)-2)))
		if got := math.Abs(at(m.TimePGD).displacement(x)); math.Abs(got-m.PGD) > 1e-9*(1+m.PGD) {
			t.Fatalf("displacement at its peak time %v is %v, not %v", m.TimePGD, got, m.PGD)
		}
	})
}

// Scaling: lengths and speeds follow the factor, energy its square, times stay.
func TestScaledMeasures(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := &Record{A: samplesOf(t), Step: 0.02}
		a, b := Measure(r), Measure(r.Scaled(-2))
		want := a
		want.PGA, want.PGV, want.PGD, want.CAV, want.Arias = 2*a.PGA, 2*a.PGV, 2*a.PGD, 2*a.CAV, 4*a.Arias
		if b != want {
			t.Fatalf("got %+v, want %+v", b, want)
		}
	})
}

func TestWindow(t *testing.T) {
	r := &Record{A: []float64{0, 1, 2, 3, 4, 5}, Step: 0.1, Origin: Origin{Station: "X"}}
	for _, c := range []struct {
		from, to float64
		want     []float64
	}{
		{0, 0.5, []float64{0, 1, 2, 3, 4, 5}},
		{0.1, 0.3, []float64{1, 2, 3}},
		{0.1 + 5e-8, 0.3 - 5e-8, []float64{1, 2, 3}}, // within a millionth of a step
		{0.1 + 1e-5, 0.35, []float64{2, 3}},          // snapped inwards
		{-5e-8, 0.5 + 5e-8, []float64{0, 1, 2, 3, 4, 5}},
	} {
		w, err := r.Window(c.from, c.to)
		if err != nil || !reflect.DeepEqual(w.A, c.want) || w.Step != r.Step || w.Origin.Station != "X" {
			t.Errorf("%v to %v: %+v, %v; want %v", c.from, c.to, w, err, c.want)
		}
	}
	for _, c := range [][2]float64{{-0.1, 0.3}, {0, 0.6}, {0.3, 0.3}, {0.4, 0.1}, {0.31, 0.39}, {math.NaN(), 1}, {0, math.Inf(1)}} {
		if w, err := r.Window(c[0], c[1]); err == nil {
			t.Errorf("%v to %v gives %v", c[0], c[1], w.A)
		}
	}
	w, _ := r.Window(0.1, 0.3)
	if w.A[0] = 9; r.A[1] != 1 {
		t.Error("a window shares the samples of its record")
	}
}

func TestNew(t *testing.T) {
	for name, r := range map[string]Record{
		"one sample": {A: []float64{1}, Step: 1}, "step 0": {A: []float64{1, 2}}, "NaN": {A: []float64{1, math.NaN()}, Step: 1},
		"infinite": {A: []float64{math.Inf(1), 1}, Step: 1}, "infinite step": {A: []float64{1, 2}, Step: math.Inf(1)},
	} {
		if _, err := New(r.A, r.Step); err == nil {
			t.Errorf("%s was taken", name)
		}
	}
	r, err := New([]float64{1, 2, 3}, 0.5)
	if err != nil || r.Samples() != 3 || r.Duration() != 1 || r.Time(2) != 1 {
		t.Errorf("%+v %v", r, err)
	}
}

func TestEncoding(t *testing.T) {
	r := Record{A: []float64{0, 0.1, 1e-300}, Step: 0.01, Origin: Origin{Format: "AT2", Header: []string{"a"}, FileSamples: 3, Warnings: []Warning{{Code: "size", Line: 2, Text: "x"}}}}
	data, err := json.Marshal(r)
	if err != nil {
		t.Fatal(err)
	}
	var back Record
	if err := json.Unmarshal(data, &back); err != nil || !reflect.DeepEqual(r, back) {
		t.Errorf("%v %+v", err, back)
	}
}

// Every form: described, sampled from its parameters, its peak as asked for, and refused
// with the nearest step when a corner falls between samples.
func TestForms(t *testing.T) {
	for _, f := range Forms {
		t.Run(f.Kind, func(t *testing.T) {
			p := FormParameters{Amplitude: -2, Step: 0.01}
			for _, takes := range f.Takes {
				switch takes {
				case "period":
					p.Period = 0.4
				case "cycles|duration", "duration":
					p.Duration = 1.2
				case "rise":
					p.Rise = 0.2
				}
			}
			r, err := Form(f.Kind, p)
			if err != nil {
				t.Fatal(err)
			}
			m := Measure(r)
			if math.Abs(m.PGA-2) > 1e-14 || len(r.A) != 121 || math.Abs(r.Step-0.01) > 1e-15 || r.Origin.Format != "form "+f.Kind || f.Doc == "" {
				t.Errorf("peak %v, %d samples at %v, %q", m.PGA, len(r.A), r.Step, r.Origin.Format)
			}
			if end, jumps := math.Abs(r.A[120]), f.Kind == "pulse" || f.Kind == "ramp"; (end > 1e-14) == !jumps {
				t.Errorf("it ends at %v", end)
			}
			if start, jumps := math.Abs(r.A[0]), f.Kind == "pulse" || f.Kind == "blast"; (start > 1e-14) == !jumps {
				t.Errorf("it starts at %v", start)
			}
			p.Step = 0.011
			_, err = Form(f.Kind, p)
			if err == nil || !strings.Contains(err.Error(), "nearest step") {
				t.Errorf("a step that does not fit: %v", err)
			}
			for _, bad := range []func(p *FormParameters){
				func(p *FormParameters) { p.Amplitude = 0 }, func(p *FormParameters) { p.Step = 0 }, func(p *FormParameters) { p.Duration = 0 },
				func(p *FormParameters) { p.Step = -0.01 }, func(p *FormParameters) { p.Amplitude = math.NaN() }, func(p *FormParameters) { p.Step = 1e-12 },
				func(p *FormParameters) { p.Rise, p.Period = 9, 9 }, func(p *FormParameters) { p.Duration = math.Inf(1) },
			} {
				q := p
				q.Step = 0.01
				if bad(&q); true {
					if r, err := Form(f.Kind, q); err == nil {
						t.Errorf("%+v gives %d samples", q, len(r.A))
					}
				}
			}
		})
	}
	if _, err := Form("square", FormParameters{}); err == nil || !strings.Contains(err.Error(), "half_sine") {
		t.Errorf("unknown form: %v", err)
	}
	if _, err := Form("sine", FormParameters{Amplitude: 1, Period: 1, Cycles: 1, Duration: 1, Step: 0.1}); err == nil {
		t.Error("a sine took cycles and duration")
	}
	r, err := Form("sine", FormParameters{Amplitude: 1, Period: 1, Cycles: 2.5, Step: 0.25})
	if want := []float64{0, 1, 0, -1, 0, 1, 0, -1, 0, 1, 0}; err != nil || !reflect.DeepEqual(abs0(r.A), want) {
		t.Errorf("%v %v", r, err)
	}
	r, err = Form("triangle", FormParameters{Amplitude: 4, Duration: 0.8, Step: 0.1})
	if want := []float64{0, 1, 2, 3, 4, 3, 2, 1, 0}; err != nil || !near(r.A, want) {
		t.Errorf("%v %v", r, err)
	}
	r, err = Form("smooth", FormParameters{Amplitude: 1, Duration: 1, Step: 0.25})
	if want := []float64{0, 0.5, -1, 0.5, 0}; err != nil || !near(r.A, want) {
		t.Errorf("%v %v", r, err)
	}
	r, err = Form("versine", FormParameters{Amplitude: 1, Duration: 1, Step: 0.25})
	if want := []float64{0, 0.5, 1, 0.5, 0}; err != nil || !near(r.A, want) {
		t.Errorf("%v %v", r, err)
	}
}

// abs0 turns -0 into 0.
func abs0(x []float64) []float64 {
	out := make([]float64, len(x))
	for i := range x {
		out[i] = x[i] + 0
	}
	return out
}

func near(a, b []float64) bool {
	for i := range a {
		if math.Abs(a[i]-b[i]) > 1e-15 {
			return false
		}
	}
	return len(a) == len(b)
}

func BenchmarkMeasure(b *testing.B) {
	r, err := Form("sine", FormParameters{Amplitude: 1, Period: 1, Cycles: 100, Step: 0.005})
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		Measure(r)
	}
}

// A record on the limits is taken, and all that is measured of it is finite; beyond them it is refused in words
// that ask for the unit.
func TestLimits(t *testing.T) {
	for _, step := range []float64{1e-6, 1e3} {
		r, err := New([]float64{1e6, -1e6, 1e6, 1e-300}, step)
		if err != nil {
			t.Fatal(err)
		}
		m := Measure(r)
		for _, x := range []float64{m.PGA, m.PGV, m.PGD, m.Arias, m.CAV, m.T5, m.D5to75, m.D5to95} {
			if !(x > 0) || math.IsInf(x, 0) {
				t.Errorf("step %v: %+v", step, m)
			}
		}
	}
	ok := &Record{A: []float64{0, 1}, Step: 0.01}
	for name, f := range map[string]func() error{
		"acceleration": func() error { _, err := New([]float64{0, -1.001e6}, 0.01); return err },
		"scaled":       func() error { return ok.Scaled(1.001e6).Validate() },
		"short step":   func() error { _, err := New([]float64{0, 1}, 0.999e-6); return err },
		"long step":    func() error { _, err := New([]float64{0, 1}, 1.001e3); return err },
		"form": func() error {
			r, err := Form("pulse", FormParameters{Amplitude: 2e6, Duration: 1, Step: 0.5})
			if r != nil {
				t.Error("a form that is refused comes with a record")
			}
			return err
		},
	} {
		if err := f(); err == nil || !strings.Contains(err.Error(), "is the unit right?") {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// The Husid curve never falls, ends at one, and passes 5, 75 and 95 % where the
// significant durations begin and end.
func TestHusid(t *testing.T) {
	for i, v := range Husid(&Record{Step: 0.01, A: make([]float64, 5)}) {
		if v != 0 {
			t.Fatal("no acceleration:", i, v)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		r := &Record{Step: 0.01, A: rapid.SliceOfN(rapid.Float64Range(-5, 5), 3, 60).Draw(t, "a")}
		r.A[1] = 1 // so that something comes in
		h, m := Husid(r), Measure(r)
		for i, v := range h {
			if i > 0 && v < h[i-1] || i == 0 && v != 0 || i == len(h)-1 && math.Abs(v-1) > 1e-12 {
				t.Fatal(i, v)
			}
			if at := r.Time(i); at < m.T5-1e-9 && v > 0.05+1e-9 || at > m.T95+1e-9 && v < 0.95-1e-9 || at < m.T75-1e-9 && v > 0.75+1e-9 {
				t.Fatal(i, v, m)
			}
		}
	})
}
