// Package oscillator is the kernel of response spectra: linear oscillators with
// one degree of freedom on a shaking base,
//
//	u'' + 2 z w u' + w² u = -ag(t),   w = 2 pi/T,
//
// u relative to the ground, from rest, ag linear between samples and zero after
// the last one. Maxima are over continuous time, the free vibration after the
// record included; nothing depends on where the samples happen to lie.
//
// Each step is crossed with the exact recurrence for a piecewise-linear input
// [Nigam & Jennings 1969]; see coefficient.go for its coefficients, kernel.go for
// the stepping, blocks.go for where peaks between samples are looked for and peak.go for how.
package oscillator

import (
	"fmt"
	"math"
	"runtime"
	"sync"
	"sync/atomic"
)

// Oscillator is one oscillator: period T > 0 in s, damping ratio 0 <= z <= 1.
type Oscillator struct {
	Period  float64 `json:"period"`
	Damping float64 `json:"damping"`
}

// Peaks are the largest absolute values and when they are reached first.
type Peaks struct {
	U float64 `json:"u"` // relative displacement, m
	V float64 `json:"v"` // relative velocity, m/s
	A float64 `json:"a"` // total acceleration, m/s²

	TU float64 `json:"t_u"` // s from the first sample
	TV float64 `json:"t_v"`
	TA float64 `json:"t_a"`
}

// check panics on a call that makes no sense.
func check(a []float64, dt float64, oscillators ...Oscillator) {
	if !(dt > 0) || math.IsInf(dt, 0) {
		panic(fmt.Sprintf("oscillator: step %v s", dt))
	}
	if len(a) == 0 {
		panic("oscillator: no samples")
	}
	for i, x := range a {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			panic(fmt.Sprintf("oscillator: sample %d is %v", i, x))
		}
	}
	for _, o := range oscillators {
		if !(o.Period > 0) || math.IsInf(o.Period, 0) {
			panic(fmt.Sprintf("oscillator: period %v s", o.Period))
		}
		if !(o.Damping >= 0 && o.Damping <= 1) {
			panic(fmt.Sprintf("oscillator: damping %v", o.Damping))
		}
	}
}

// Run returns the peaks of every oscillator under the ground acceleration a
// (m/s², at step dt in s). The oscillators are shared among GOMAXPROCS
// goroutines; the result does not depend on how many there are.
//
// It panics for a step or a period that is not positive, a damping outside
// [0, 1], no samples, and samples that are not finite.
func Run(a []float64, dt float64, oscillators []Oscillator) []Peaks {
	check(a, dt, oscillators...)
	out := make([]Peaks, len(oscillators))
	g := survey(a, dt)
	var next atomic.Int64
	var wait sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), len(oscillators)) {
		wait.Go(func() {
			work := make([]passed, len(g.blocks))
			for {
				i := int(next.Add(1)) - 1
				if i >= len(oscillators) {
					return
				}
				out[i] = newStepper(oscillators[i], dt).peaks(g, work)
			}
		})
	}
	wait.Wait()
	return out
}

// History returns relative displacement (m), relative velocity (m/s) and total
// acceleration (m/s²) at the samples. It panics as Run does.
func History(a []float64, dt float64, o Oscillator) (u, v, at []float64) {
	check(a, dt, o)
	u, v, at = make([]float64, len(a)), make([]float64, len(a)), make([]float64, len(a))
	s := newStepper(o, dt)
	var x, y float64
	for i := 1; i < len(a); i++ {
		x, y = s.step(x, y, a[i-1], a[i])
		// The stepper is driven by +ag: its state is that of -u.
		u[i], v[i], at[i] = 0-s.su*x, 0-s.sv*y, s.sa*s.total(x, y)
	}
	return u, v, at
}
