// Package quantity holds values with physical dimension, the units they are
// written in, and how they are displayed. Numbers inside are SI (m, kg, s and
// what follows from them; angles are pure numbers); units matter only at the
// edges.
package quantity

import "math"

// Dim is a physical dimension as exponents of length, mass and time. Exponents
// may be broken numbers (h^1.39), so they compare within 1e-9.
type Dim [3]float64

// Dimensions met often.
var (
	None          = Dim{}
	Length        = Dim{1, 0, 0}
	Mass          = Dim{0, 1, 0}
	Time          = Dim{0, 0, 1}
	PerTime       = Dim{0, 0, -1}
	Velocity      = Dim{1, 0, -1}
	Acceleration  = Dim{1, 0, -2}
	Force         = Dim{1, 1, -2}
	Moment        = Dim{2, 1, -2}
	Stiffness     = Dim{0, 1, -2}
	Pressure      = Dim{-1, 1, -2}
	ForcePerArea3 = Dim{-2, 1, -2}
)

// Is tells whether two dimensions are the same.
func (d Dim) Is(e Dim) bool {
	for i := range d {
		if math.Abs(d[i]-e[i]) > 1e-9 {
			return false
		}
	}
	return true
}

// Times, Over and Power are the dimensions of a product, a quotient, a power.
func (d Dim) Times(e Dim) Dim { return Dim{d[0] + e[0], d[1] + e[1], d[2] + e[2]} }
func (d Dim) Over(e Dim) Dim  { return Dim{d[0] - e[0], d[1] - e[1], d[2] - e[2]} }
func (d Dim) Power(p float64) Dim {
	return Dim{d[0] * p, d[1] * p, d[2] * p}
}

// Name is the dimension in words ("a force"), for messages.
func (d Dim) Name() string {
	for _, n := range named {
		if n.dim.Is(d) {
			return n.name
		}
	}
	return "a quantity in " + SIUnit(d).Pretty()
}

var named = []struct {
	dim  Dim
	name string
}{
	{None, "a pure number"}, {Length, "a length"}, {Mass, "a mass"}, {Time, "a time"}, {PerTime, "a frequency"},
	{Velocity, "a velocity"}, {Acceleration, "an acceleration"}, {Force, "a force"}, {Moment, "a moment"},
	{Stiffness, "a stiffness (force per length)"}, {Pressure, "a pressure"}, {Dim{2, 0, 0}, "an area"}, {Dim{3, 0, 0}, "a volume"},
	{Dim{4, 0, 0}, "a second moment of area"}, {Dim{2, 1, 0}, "a rotational inertia"}, {ForcePerArea3, "a force per volume"}, {Dim{-3, 1, 0}, "a density"},
}

// Value is a number, a vector or rows of numbers, in SI, with one dimension.
// It is plain data.
type Value struct {
	Dim Dim `json:"dim"`
	// SI holds the numbers in SI units: one for a number, all items of a vector
	// (lowest level first), all rows one after another.
	SI []float64 `json:"si"`
	// Shape is Number, Vector or Rows.
	Shape Shape `json:"shape,omitempty"`
	// Width is the length of a row, for Rows.
	Width int `json:"width,omitempty"`
	// Unit is how the value likes to be shown; the zero Unit leaves it to the package's system.
	Unit Unit `json:"unit,omitzero"`
	// Labels name the items of a vector (level names), or are empty.
	Labels []string `json:"labels,omitempty"`
}

// Shape tells numbers, vectors and rows apart.
type Shape string

const (
	Number Shape = ""
	Vector Shape = "vector"
	Rows   Shape = "rows"
)

// Scalar is a single SI number shown in u.
func Scalar(si float64, u Unit) Value { return Value{Dim: u.Dim, SI: []float64{si}, Unit: u} }

// Pure is a pure number.
func Pure(x float64) Value { return Value{SI: []float64{x}} }

// List is a vector of SI numbers shown in u.
func List(si []float64, u Unit, labels []string) Value {
	return Value{Dim: u.Dim, SI: si, Shape: Vector, Unit: u, Labels: labels}
}

// Len is the number of items of a vector or rows; 1 for a number.
func (v Value) Len() int {
	if v.Shape == Rows {
		if v.Width == 0 {
			return 0
		}
		return len(v.SI) / v.Width
	}
	return len(v.SI)
}

// Item is item i of a vector (counted from 0), row i of rows, or the number itself.
func (v Value) Item(i int) Value {
	switch v.Shape {
	case Vector:
		return Value{Dim: v.Dim, SI: v.SI[i : i+1], Unit: v.Unit}
	case Rows:
		return Value{Dim: v.Dim, SI: v.SI[i*v.Width : (i+1)*v.Width], Shape: Vector, Unit: v.Unit, Labels: v.Labels}
	}
	return v
}

// Finite tells whether every number is finite.
func (v Value) Finite() bool {
	for _, x := range v.SI {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return false
		}
	}
	return true
}
