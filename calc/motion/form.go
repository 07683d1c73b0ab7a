package motion

import (
	"fmt"
	"math"
	"slices"
	"strings"
)

// FormParameters describe a closed form. Which of them a form takes is listed
// with it in [Forms]; the others stay zero.
type FormParameters struct {
	Amplitude float64 // peak ground acceleration of the form, m/s²; may be negative
	Period    float64 // of a sine, s
	Cycles    float64 // of a sine
	Duration  float64 // s
	Rise      float64 // time to reach the amplitude, s
	Step      float64 // sampling step, s; always needed
}

// FormDoc is one closed form: its name, what it is, and what it takes.
type FormDoc struct {
	Kind  string
	Doc   string
	Takes []string // parameters that must be given, besides step; "a|b" is one of the two

	corners func(p FormParameters) []float64 // times that must fall on samples; the last is the end
	value   func(p FormParameters, t float64) float64
}

// Forms is every closed form. All are sampled at the step and, like every record,
// linear between samples: pulse, ramp, triangle and blast are therefore exact,
// the others as good as their step. The ground acceleration is zero after the end.
var Forms = []FormDoc{
	{Kind: "sine", Doc: "A sin(2 pi t/period), from rest", Takes: []string{"amplitude", "period", "cycles|duration"},
		corners: func(p FormParameters) []float64 { return []float64{p.length()} },
		value:   func(p FormParameters, t float64) float64 { return p.Amplitude * sinpi(2*t/p.Period) }},
	{Kind: "half_sine", Doc: "A sin(pi t/duration): one half wave", Takes: []string{"amplitude", "duration"},
		corners: atEnd,
		value:   func(p FormParameters, t float64) float64 { return p.Amplitude * sinpi(t/p.Duration) }},
	{Kind: "pulse", Doc: "A throughout the duration, zero after it", Takes: []string{"amplitude", "duration"},
		corners: atEnd,
		value:   func(p FormParameters, t float64) float64 { return p.Amplitude }},
	{Kind: "ramp", Doc: "linear from 0 to A at the rise time, then A until the duration", Takes: []string{"amplitude", "rise", "duration"},
		corners: func(p FormParameters) []float64 { return []float64{p.Rise, p.Duration} },
		value:   func(p FormParameters, t float64) float64 { return p.Amplitude * math.Min(t/p.Rise, 1) }},
	{Kind: "triangle", Doc: "linear from 0 to A at half the duration and back to 0", Takes: []string{"amplitude", "duration"},
		corners: func(p FormParameters) []float64 { return []float64{p.Duration / 2, p.Duration} },
		value:   func(p FormParameters, t float64) float64 { return p.Amplitude * (1 - math.Abs(2*t/p.Duration-1)) }},
	{Kind: "blast", Doc: "A at once, falling linearly to 0 at the duration", Takes: []string{"amplitude", "duration"},
		corners: atEnd,
		value:   func(p FormParameters, t float64) float64 { return p.Amplitude * (1 - t/p.Duration) }},
	{Kind: "versine", Doc: "A (1 - cos(2 pi t/duration))/2", Takes: []string{"amplitude", "duration"},
		corners: atEnd,
		value: func(p FormParameters, t float64) float64 {
			s := sinpi(t / p.Duration)
			return p.Amplitude * s * s
		}},
	{Kind: "smooth", Doc: "A (cos 2wt - cos 4wt)/2, w = pi/duration: a ground displacement D sin⁴(wt) with A = 4 D w², at rest again at the end", Takes: []string{"amplitude", "duration"},
		corners: atEnd,
		value: func(p FormParameters, t float64) float64 {
			// cos 2x - cos 4x = 2 sin 3x sin x; the peak, -A, is at mid-duration
			return p.Amplitude * sinpi(3*t/p.Duration) * sinpi(t/p.Duration)
		}},
}

func atEnd(p FormParameters) []float64 { return []float64{p.Duration} }

// length is the duration of a sine.
func (p FormParameters) length() float64 {
	if p.Cycles > 0 {
		return p.Cycles * p.Period
	}
	return p.Duration
}

// Form samples a closed form. It returns an error for an unknown kind, for a
// parameter that is missing or does not belong to the form, and when a corner of
// the form does not fall on a sample; the error then names the nearest step that fits.
func Form(kind string, p FormParameters) (*Record, error) {
	i := slices.IndexFunc(Forms, func(f FormDoc) bool { return f.Kind == kind })
	if i < 0 {
		names := make([]string, len(Forms))
		for i, f := range Forms {
			names[i] = f.Kind
		}
		return nil, fmt.Errorf("no form %q; there are %s", kind, strings.Join(names, ", "))
	}
	f := Forms[i]
	if err := f.check(p); err != nil {
		return nil, err
	}
	corners := f.corners(p)
	steps, err := f.fit(corners, p.Step)
	if err != nil {
		return nil, err
	}
	end := corners[len(corners)-1]
	a := make([]float64, steps+1)
	for i := range a {
		a[i] = f.value(p, end*float64(i)/float64(steps))
	}
	r := &Record{A: a, Step: end / float64(steps), Origin: Origin{Format: "form " + kind}}
	if err := r.Validate(); err != nil {
		return nil, err
	}
	return r, nil
}

// maxSteps bounds a form: a mistyped step must not fill the memory.
const maxSteps = 1 << 20

// fit is the number of steps to the end, every corner on a sample.
func (f FormDoc) fit(corners []float64, h float64) (int, error) {
	end := corners[len(corners)-1]
	if end/h > maxSteps {
		return 0, fmt.Errorf("the form %s has more than %d steps of %v s", f.Kind, maxSteps, h)
	}
	fits := func(h float64) bool {
		for _, c := range corners {
			n := c / h
			if n < 0.5 || math.Abs(n-math.Round(n)) > snap {
				return false
			}
		}
		return true
	}
	if fits(h) {
		return int(math.Round(end / h)), nil
	}
	n := math.Max(1, math.Round(end/h))
	for d := 0.0; d < 10000; d++ {
		for _, k := range []float64{n + d, n - d} {
			if k >= 1 && fits(end/k) {
				return 0, fmt.Errorf("a corner of the form %s falls between samples at step %v s; the nearest step that fits is %.12g s", f.Kind, h, end/k)
			}
		}
	}
	return 0, fmt.Errorf("a corner of the form %s falls between samples at step %v s, and no step near it fits", f.Kind, h)
}

// check refuses missing, superfluous and senseless parameters.
func (f FormDoc) check(p FormParameters) error {
	given := []struct {
		name  string
		value float64
	}{{"amplitude", p.Amplitude}, {"period", p.Period}, {"cycles", p.Cycles}, {"duration", p.Duration}, {"rise", p.Rise}, {"step", p.Step}}
	takes := "|" + strings.Join(f.Takes, "|") + "|step|"
	for _, g := range given {
		switch {
		case math.IsNaN(g.value) || math.IsInf(g.value, 0):
			return fmt.Errorf("the %s of the form %s is not a finite number", g.name, f.Kind)
		case g.value != 0 && !strings.Contains(takes, "|"+g.name+"|"):
			return fmt.Errorf("the form %s takes no %s", f.Kind, g.name)
		case g.name != "amplitude" && g.value < 0:
			return fmt.Errorf("the %s of the form %s must be positive", g.name, f.Kind)
		}
	}
	for _, need := range append(slices.Clone(f.Takes), "step") {
		n := 0
		for _, g := range given {
			if g.value != 0 && strings.Contains("|"+need+"|", "|"+g.name+"|") {
				n++
			}
		}
		if n == 0 {
			return fmt.Errorf("the form %s needs %s", f.Kind, strings.ReplaceAll(need, "|", " or "))
		}
		if n > 1 {
			return fmt.Errorf("the form %s takes one of %s, not both", f.Kind, strings.ReplaceAll(need, "|", " and "))
		}
	}
	if p.Rise > p.Duration && slices.Contains(f.Takes, "rise") {
		return fmt.Errorf("the form %s rises for %v s, longer than its duration of %v s", f.Kind, p.Rise, p.Duration)
	}
	return nil
}

// sinpi is sin(pi x), exactly zero at whole x.
func sinpi(x float64) float64 {
	x = math.Mod(x, 2)
	switch {
	case x > 1:
		return -sinpi(x - 1)
	case x > 0.5:
		return sinpi(1 - x)
	}
	return math.Sin(math.Pi * x)
}
