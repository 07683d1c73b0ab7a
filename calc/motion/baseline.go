package motion

import (
	"fmt"
	"math"
	"slices"
)

// Baseline takes a polynomial of time off the acceleration. Its coefficients are
// those of the least sum of squares, over the samples, of what is left of the
// acceleration, of the velocity or of the displacement; the last two are integrated
// from rest, so that the polynomial is fitted from rest as well:
//
//	a' = a - sum of c_k t^k, k = 0 ... Order
//	v' = v - sum of c_k t^(k+1)/(k+1)
//	d' = d - sum of c_k t^(k+2)/((k+1)(k+2))
//
// What is left is orthogonal to the polynomials it was fitted by, and a second
// application takes nothing more off. The final velocity need not be zero.
type Baseline struct {
	Order int    // of the polynomial taken off the acceleration, 0 to MaxBaselineOrder
	Fit   string // "acceleration", "velocity" or "displacement"
}

// MaxBaselineOrder bounds the order: beyond it a polynomial bends like the motion itself.
const MaxBaselineOrder = 10

// BaselineFits are the quantities that a baseline may be fitted to.
var BaselineFits = []string{"acceleration", "velocity", "displacement"}

func (p Baseline) String() string {
	what := fmt.Sprintf("polynomial of order %d", p.Order)
	switch p.Order {
	case 0:
		what = "constant"
	case 1:
		what = "straight line"
	}
	return fmt.Sprintf("%s taken off the acceleration, by least squares on the %s", what, p.Fit)
}

// Apply corrects the baseline of a record. It panics on an unknown fit.
func (p Baseline) Apply(r *Record) (*Record, Residual, error) {
	if !slices.Contains(BaselineFits, p.Fit) {
		panic("motion: a baseline fitted to " + p.Fit)
	}
	if p.Order < 0 || p.Order > MaxBaselineOrder {
		return nil, Residual{}, misfit("order", "", "the order of a baseline is a whole number from 0 to %d, not %d", MaxBaselineOrder, p.Order)
	}
	if len(r.A) < p.Order+3 {
		return nil, Residual{}, misfit("order", "", "a baseline of order %d needs %d samples or more, the record has %d", p.Order, p.Order+3, len(r.A))
	}
	columns := make([]column, 0, p.Order+1)
	for k := range p.Order + 1 {
		c := p.column(r.Step, legendre(k, len(r.A)))
		for range 2 { // Gram-Schmidt, twice for full orthogonality
			for _, done := range columns {
				c.takeOff(done, dot(c.y, done.y))
			}
		}
		c.scale(1 / math.Sqrt(dot(c.y, c.y)))
		columns = append(columns, c)
	}
	left := p.column(r.Step, slices.Clone(r.A))
	size := math.Sqrt(dot(left.y, left.y))
	for range 2 {
		for _, c := range columns {
			left.takeOff(c, dot(left.y, c.y))
		}
	}
	out := r.with(left.a, p)
	return out, Residual{What: "what is left of the " + p.Fit + " is orthogonal to the powers of time within", Value: p.orthogonality(out, size), Limit: 1e-8}, nil
}

// orthogonality is the largest cosine between what is left, integrated anew, and
// the powers of time, relative to the size before.
func (p Baseline) orthogonality(r *Record, size float64) float64 {
	if size == 0 {
		return 0
	}
	left := p.column(r.Step, slices.Clone(r.A))
	worst := 0.0
	for k := range p.Order + 1 {
		power := make([]float64, len(r.A))
		for i := range power {
			power[i] = math.Pow(float64(i)/float64(len(r.A)-1), float64(k))
		}
		c := p.column(r.Step, power)
		worst = max(worst, math.Abs(dot(left.y, c.y))/(size*math.Sqrt(dot(c.y, c.y))))
	}
	return worst
}

// column is an acceleration with the quantity that is fitted, which is the
// acceleration itself or an integral of it.
type column struct{ a, y []float64 }

func (p Baseline) column(step float64, a []float64) column {
	switch v, d := Integrate(&Record{A: a, Step: step}); p.Fit {
	case "velocity":
		return column{a, v}
	case "displacement":
		return column{a, d}
	}
	return column{a, slices.Clone(a)}
}

func (c column) takeOff(d column, f float64) {
	for i := range c.a {
		c.a[i] -= f * d.a[i]
		c.y[i] -= f * d.y[i]
	}
}

func (c column) scale(f float64) {
	for i := range c.a {
		c.a[i] *= f
		c.y[i] *= f
	}
}

func dot(x, y []float64) float64 {
	sum := 0.0
	for i := range x {
		sum += x[i] * y[i]
	}
	return sum
}

// legendre is the Legendre polynomial of degree k at n even places from -1 to 1.
func legendre(k, n int) []float64 {
	out := make([]float64, n)
	for i := range out {
		x := 2*float64(i)/float64(n-1) - 1
		before, p := 0.0, 1.0
		for j := 1; j <= k; j++ {
			before, p = p, (float64(2*j-1)*x*p-float64(j-1)*before)/float64(j)
		}
		out[i] = p
	}
	return out
}
