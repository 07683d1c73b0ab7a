package archive

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// maxStep is the largest step that a file may state, s.
const maxStep = 10

// printed is to which digit the numbers of a column are written: to a place (the
// finest of the column, as 0, 0.005 and 0.01 may stand together), or with an exponent and
// so many digits, relative to the number.
type printed struct {
	place, relative float64
	fixed           bool
}

// note takes in one number as written.
func (p *printed) note(field string, x, place float64) {
	switch {
	case strings.ContainsAny(field, "eEdDqQ"):
		if x != 0 {
			p.relative = math.Max(p.relative, place/math.Abs(x))
		}
	case !p.fixed || place < p.place:
		p.place, p.fixed = place, true
	}
}

// at is one unit of the last printed digit of the number x.
func (p printed) at(x float64) float64 { return math.Max(p.place, p.relative*math.Abs(x)) }

// whole tells whether all numbers are written without decimals.
func (p printed) whole() bool { return p.fixed && p.place >= 1 && p.relative == 0 }

// evenStep is the step of a column of times, taken from its ends. Times are even if
// each lies within one unit of its last printed digit, or within a ten-thousandth
// of the step, of where it should be, and so do the steps. Where that unit is more than half of
// the step it excuses nothing: a lost sample would look like rounding. Otherwise bad is the
// first that does not, and why says what happens there.
func evenStep(t []float64, p printed) (step float64, bad int, why string) {
	n := len(t) - 1
	step = (t[n] - t[0]) / float64(n)
	even := step > 0
	off := func(i int) float64 {
		unit := p.at(t[i]) * (1 + 1e-9)
		if unit > step/2 {
			unit = 0
		}
		return math.Max(unit, 1e-4*step)
	}
	for i := 1; i <= n; i++ {
		even = even && t[i] > t[i-1] && math.Abs(t[i]-(t[0]+float64(i)*step)) <= off(i) && math.Abs(t[i]-t[i-1]-step) <= off(i)
	}
	if even {
		return step, -1, ""
	}
	usual := median(t)
	for i := 1; i <= n; i++ {
		switch d := t[i] - t[i-1]; {
		case d == 0:
			return step, i, "the time is that of the line before"
		case d < 0:
			return step, i, "the time goes back"
		case math.Abs(d-usual) > math.Max(off(i), 1e-3*usual):
			if r := d / usual; r > 1.5 && math.Abs(r-math.Round(r)) < 0.1 {
				return step, i, fmt.Sprintf("a gap of %.0f samples before this time", math.Round(r)-1)
			}
			return step, i, fmt.Sprintf("the step changes from %.6g s to %.6g s", usual, d)
		}
	}
	return step, n, "the times are uneven"
}

// printedStep is the step behind printed times whose mean step is given. Where the
// times fit that to a millionth, it is the step but for binary noise. Where they
// are rounded, it is one over the only whole number of samples a second that
// explains all of them, if there is just one, else the mean step.
func printedStep(t []float64, mean float64, p printed) (step float64, rounded bool) {
	place, most, n := p.at(t[len(t)-1]), math.Max(math.Abs(t[0]), math.Abs(t[len(t)-1])), float64(len(t)-1)
	spread := func(step float64) float64 {
		lo, hi := t[0], t[0]
		for i, x := range t {
			x -= float64(i) * step
			lo, hi = math.Min(lo, x), math.Max(hi, x)
		}
		return hi - lo
	}
	if spread(mean) <= 1e-6*mean {
		return shortest(mean, 1e-12*mean+1e-15*most/n), false
	}
	fits := 0
	for d := -3.0; d <= 3; d++ {
		if rate := math.Round(1/mean) + d; rate >= 1 && spread(1/rate) <= place*(1+1e-9) {
			fits++
			step = 1 / rate
		}
	}
	if fits != 1 {
		step = shortest(mean, 1e-12*mean)
	}
	return step, true
}

// shortest is the number of fewest digits within a tolerance of x > 0.
func shortest(x, within float64) float64 {
	for digits := 1; digits < 17; digits++ {
		s, _ := strconv.ParseFloat(strconv.FormatFloat(x, 'e', digits-1, 64), 64)
		if math.Abs(s-x) <= within {
			return s
		}
	}
	return x
}

// median is the middle one of the first differences, sampled.
func median(t []float64) float64 {
	d := make([]float64, 0, 1001)
	for i := 1; i < len(t); i += 1 + len(t)/1000 {
		d = append(d, t[i]-t[i-1])
	}
	slices.Sort(d)
	return d[len(d)/2]
}

// rising tells whether a column mostly grows, as times do and accelerations do not.
func rising(t []float64) bool {
	up := 0
	for i := 1; i < len(t); i++ {
		if t[i] > t[i-1] {
			up++
		}
	}
	return len(t) > 2 && float64(up) >= 0.9*float64(len(t)-1)
}

// clock reads a time of day in s, with or without a date before it:
// "2031/02/03 04:05:09.01". The date does not count.
func clock(field string) (seconds, place float64, ok bool) {
	field = strings.TrimSpace(field)
	if i := strings.LastIndexAny(field, " T"); i >= 0 {
		field = field[i+1:]
	}
	parts := strings.Split(field, ":")
	if len(parts) != 3 {
		return 0, 0, false
	}
	h, err1 := strconv.Atoi(parts[0])
	m, err2 := strconv.Atoi(parts[1])
	s, place, ok := number(parts[2])
	if err1 != nil || err2 != nil || !ok || h < 0 || h > 24 || m < 0 || m > 59 || s < 0 || s >= 61 {
		return 0, 0, false
	}
	return float64(h*3600+m*60) + s, place, true
}
