package main

import (
	"math"
	"math/rand/v2"
)

// Motion says how a record is invented: noise, coloured as by soil that sways
// at one frequency, held between two corner frequencies, under an envelope that
// rises, holds and decays; then brought to rest at its end and scaled.
type Motion struct {
	Seed, Stream uint64
	Step         float64 // s
	Samples      int
	PGA          float64 // m/s²
	Soil         float64 // frequency of the soil, Hz
	SoilDamping  float64 // its damping ratio
	Low, High    float64 // corner frequencies, Hz
	Rise, Hold   float64 // s
	Decay        float64 // 1/s

	Offset, Trend float64 // of the instrument, m/s² and m/s³
}

// Recorded is the acceleration as an instrument gives it, with its offset and trend.
func (m Motion) Recorded() []float64 {
	a := m.Acceleration()
	for i := range a {
		a[i] += m.Offset + m.Trend*float64(i)*m.Step
	}
	return a
}

// Acceleration is the record in m/s², one value a step.
func (m Motion) Acceleration() []float64 {
	a := noise(m.Seed, m.Stream, m.Samples)
	a = m.soil(a)
	for range 2 {
		a = lowpass(a, m.High*m.Step)
	}
	for i := range a {
		a[i] *= m.envelope(float64(i) * m.Step)
	}
	for range 2 {
		a = highpass(a, m.Low*m.Step)
	}
	rest(a, m.Step)
	scale := m.PGA / largest(a)
	for i := range a {
		a[i] *= scale
	}
	return a
}

// noise is close to Gaussian white noise of unit variance: the sum of twelve
// uniform numbers less six, exact in binary arithmetic on every machine.
func noise(seed, stream uint64, n int) []float64 {
	rng := rand.New(rand.NewPCG(seed, stream))
	a := make([]float64, n)
	for i := range a {
		sum := 0
		for range 12 {
			sum += int(rng.Uint64() >> 40)
		}
		a[i] = float64(sum)/(1<<24) - 6
	}
	return a
}

// soil is the absolute acceleration of a damped oscillator on top of a: the
// spectrum of Kanai and Tajimi. Steps of the average-acceleration method.
func (m Motion) soil(a []float64) []float64 {
	w, h := 2*math.Pi*m.Soil, m.Step
	c, k := 2*m.SoilDamping*w, w*w
	out := make([]float64, len(a))
	var u, v, acc float64
	for i := range a {
		// predict with half of the old acceleration, solve for the new one
		du, dv := u+h*v+h*h/4*acc, v+h/2*acc
		acc = (-a[i] - c*dv - k*du) / (1 + c*h/2 + k*h*h/4)
		u, v = du+h*h/4*acc, dv+h/2*acc
		out[i] = -c*v - k*u
	}
	return out
}

// envelope rises as a square, holds, and decays exponentially.
func (m Motion) envelope(t float64) float64 {
	end := float64(m.Samples-1) * m.Step
	switch {
	case t < m.Rise:
		return t / m.Rise * t / m.Rise
	case t < m.Rise+m.Hold:
		return 1
	}
	left := (end - t) / 2 // the last 2 s fade out wholly
	return math.Exp(-m.Decay*(t-m.Rise-m.Hold)) * min(1, left)
}

// lowpass and highpass are Butterworth filters of order 2; f is the corner as a
// fraction of the sampling rate (bilinear transform, pre-warped).
func lowpass(a []float64, f float64) []float64 {
	k := math.Tan(math.Pi * f)
	return filter(a, k*k, 2*k*k, k*k, k)
}

func highpass(a []float64, f float64) []float64 {
	return filter(a, 1, -2, 1, math.Tan(math.Pi*f))
}

func filter(a []float64, b0, b1, b2, k float64) []float64 {
	d := 1 + math.Sqrt2*k + k*k
	a1, a2 := 2*(k*k-1)/d, (1-math.Sqrt2*k+k*k)/d
	out := make([]float64, len(a))
	var x1, x2, y1, y2 float64
	for i, x := range a {
		y := (b0*x+b1*x1+b2*x2)/d - a1*y1 - a2*y2
		x2, x1, y2, y1 = x1, x, y1, y
		out[i] = y
	}
	return out
}

// rest takes from a the two smooth waves that leave velocity and displacement
// zero at the end; both vanish at the ends of the record.
func rest(a []float64, step float64) {
	n := len(a)
	one, two := make([]float64, n), make([]float64, n)
	for i := range n {
		x := math.Pi * float64(i) / float64(n-1)
		bell := math.Sin(x) * math.Sin(x)
		one[i], two[i] = bell, bell*math.Cos(x)
	}
	va, da := final(a, step)
	v1, d1 := final(one, step)
	v2, d2 := final(two, step)
	det := v1*d2 - v2*d1
	p, q := (va*d2-v2*da)/det, (v1*da-va*d1)/det
	for i := range a {
		a[i] -= p*one[i] + q*two[i]
	}
}

// final is velocity and displacement at the end, from rest, with acceleration
// linear between samples.
func final(a []float64, h float64) (v, d float64) {
	for i := 1; i < len(a); i++ {
		d += h*v + h*h*(2*a[i-1]+a[i])/6
		v += h * (a[i-1] + a[i]) / 2
	}
	return v, d
}
