package formula

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// function is a function of the language. least and most count arguments (most
// 0: any number); form shows a call.
type function struct {
	form, doc   string
	least, most int
	// pure is a real function of pure numbers, taken item by item; domain says
	// in words where it is defined, and within tells whether x is.
	pure   func(x float64) float64
	domain string
	within func(x float64) bool
	// apply is any other function of evaluated arguments.
	apply func(e *evaluator, n *expr.Node, args []quantity.Value) (quantity.Value, bool)
	// whole: the function looks at a vector as a whole.
	whole bool
}

// Doc is a function as the reference shows it.
type Doc struct{ Form, Text string }

// Functions is every function of the language, by name.
func Functions() []Doc {
	out := make([]Doc, len(functionNames))
	for i, name := range functionNames {
		out[i] = Doc{functions[name].form, functions[name].doc}
	}
	return out
}

// takes is the number of arguments in words.
func (f function) takes() string {
	switch {
	case f.most == 0:
		return fmt.Sprintf("%d or more arguments", f.least)
	case f.most == 1:
		return "1 argument"
	}
	return fmt.Sprintf("%d arguments", f.most)
}

var functions map[string]function

var functionNames []string

func init() {
	functions = map[string]function{
		"abs":   {form: "abs(x)", doc: "the value without its sign", least: 1, most: 1, apply: absolute},
		"sqrt":  {form: "sqrt(x)", doc: "the square root; the unit takes the root too", least: 1, most: 1, apply: root},
		"exp":   {form: "exp(x)", doc: "e to the power x, of a pure number", least: 1, most: 1, pure: math.Exp},
		"log":   {form: "log(x)", doc: "the natural logarithm of a positive pure number", least: 1, most: 1, pure: math.Log, domain: "a positive number", within: positive},
		"log10": {form: "log10(x)", doc: "the logarithm to the base 10 of a positive pure number", least: 1, most: 1, pure: math.Log10, domain: "a positive number", within: positive},
		"sin":   {form: "sin(x)", doc: "the sine of an angle", least: 1, most: 1, pure: math.Sin},
		"cos":   {form: "cos(x)", doc: "the cosine of an angle", least: 1, most: 1, pure: math.Cos},
		"tan":   {form: "tan(x)", doc: "the tangent of an angle", least: 1, most: 1, pure: math.Tan, domain: "an angle other than a quarter turn", within: func(x float64) bool { return math.Abs(math.Cos(x)) > 1e-15 }},
		"asin":  {form: "asin(x)", doc: "the angle with this sine, in rad", least: 1, most: 1, pure: math.Asin, domain: "a number from -1 to 1", within: sine},
		"acos":  {form: "acos(x)", doc: "the angle with this cosine, in rad", least: 1, most: 1, pure: math.Acos, domain: "a number from -1 to 1", within: sine},
		"atan":  {form: "atan(x)", doc: "the angle with this tangent, in rad", least: 1, most: 1, pure: math.Atan},
		"floor": {form: "floor(x)", doc: "the largest whole number up to x; x within 1e-12 of itself of a whole number counts as that one", least: 1, most: 1, pure: floor},
		"ceil":  {form: "ceil(x)", doc: "the smallest whole number from x on, by the same rule", least: 1, most: 1, pure: ceil},
		"round": {form: "round(x)", doc: "the nearest whole number; halves away from zero", least: 1, most: 1, pure: math.Round},

		"sum":    {form: "sum(v)", doc: "the sum of the items of a vector", least: 1, most: 1, apply: sum, whole: true},
		"cumsum": {form: "cumsum(v)", doc: "the running sum of a vector from its first item, a vector", least: 1, most: 1, apply: cumsum, whole: true},
		"len":    {form: "len(v)", doc: "the number of items of a vector", least: 1, most: 1, apply: length, whole: true},
		"max":    {form: "max(v) or max(a, b)", doc: "the largest item of a vector; with more arguments the largest of them, item by item", least: 1, apply: extreme(func(a, b float64) bool { return a > b })},
		"min":    {form: "min(v) or min(a, b)", doc: "the smallest, by the same rule", least: 1, apply: extreme(func(a, b float64) bool { return a < b })},
		"interp": {form: "interp(x, xs, ys)", doc: "the value at x on the straight lines through the points (xs, ys), never beyond their ends", least: 3, most: 3, apply: interpolate},
		"num":    {form: "num(x, unit)", doc: "the pure number of x in a unit, for empirical formulas", least: 1, most: 1, apply: count},
		"if":     {form: "if(a < b, x, y)", doc: "x where the condition holds, else y; conditions are joined by and, or, not", least: 3, most: 3}, // evaluated lazily, see conditional
	}
	for name := range functions {
		functionNames = append(functionNames, name)
	}
	slices.Sort(functionNames)
}

// floor and ceil take what the arithmetic of doubles leaves beside a whole number
// for that number, as checks do: floor(0.3 / 0.1) is 3.
func floor(x float64) float64 {
	if whole := math.Round(x); math.Abs(x-whole) <= min(rounding*math.Max(1, math.Abs(x)), 1e-6) {
		return whole
	}
	return math.Floor(x)
}

func ceil(x float64) float64 { return -floor(-x) }

func positive(x float64) bool { return x > 0 }
func sine(x float64) bool     { return math.Abs(x) <= 1 }

// applyPure takes a real function item by item.
func (e *evaluator) applyPure(n *expr.Node, f function, x quantity.Value) (quantity.Value, bool) {
	if !x.Dim.Is(quantity.None) {
		hint := "num(x, unit) is the number of x in a unit"
		return e.failHint("dimension", n.Args[0], hint, "%s needs a pure number, not %s", n.Text, x.Dim.Name())
	}
	out := like(x, quantity.None, quantity.Unit{})
	for i, v := range x.SI {
		if f.within != nil && !f.within(v) {
			if e.idle(i, len(x.SI)) {
				continue
			}
			return e.fail("domain", n.Args[0], "%s needs %s, not %s%s", n.Text, f.domain, show(v, x), at(i, x))
		}
		out.SI[i] = f.pure(v)
	}
	return out, true
}

func absolute(e *evaluator, n *expr.Node, args []quantity.Value) (quantity.Value, bool) {
	out := like(args[0], args[0].Dim, args[0].Unit)
	for i, v := range args[0].SI {
		out.SI[i] = math.Abs(v)
	}
	return out, true
}

func root(e *evaluator, n *expr.Node, args []quantity.Value) (quantity.Value, bool) {
	x := args[0]
	out := like(x, x.Dim.Power(0.5), quantity.Unit{})
	for i, v := range x.SI {
		if v < 0 {
			if e.idle(i, len(x.SI)) {
				continue
			}
			return e.fail("domain", n.Args[0], "the square root of %s%s is not a real number", show(v, x), at(i, x))
		}
		out.SI[i] = math.Sqrt(v)
	}
	return out, true
}

// sum adds the items of a vector in their order.
func sum(e *evaluator, n *expr.Node, args []quantity.Value) (quantity.Value, bool) {
	v := args[0]
	if v.Shape == quantity.Rows {
		return e.failRows(n.Args[0])
	}
	total := 0.0
	for _, x := range v.SI {
		total += x
	}
	return quantity.Value{Dim: v.Dim, SI: []float64{total}, Unit: v.Unit}, true
}

// cumsum is the running sum from the first item.
func cumsum(e *evaluator, n *expr.Node, args []quantity.Value) (quantity.Value, bool) {
	v := args[0]
	switch v.Shape {
	case quantity.Rows:
		return e.failRows(n.Args[0])
	case quantity.Number:
		return e.fail("shape", n.Args[0], "cumsum needs a vector")
	}
	out := like(v, v.Dim, v.Unit)
	total := 0.0
	for i, x := range v.SI {
		total += x
		out.SI[i] = total
	}
	return out, true
}

// length is the number of items of a vector, or of rows.
func length(e *evaluator, n *expr.Node, args []quantity.Value) (quantity.Value, bool) {
	if args[0].Shape == quantity.Number {
		return e.fail("shape", n.Args[0], "len needs a vector")
	}
	return quantity.Pure(float64(args[0].Len())), true
}

// count is num(x, unit): the pure number of x in the unit.
func count(e *evaluator, n *expr.Node, args []quantity.Value) (quantity.Value, bool) {
	x := args[0]
	u, err := quantity.ParseUnit(n.Unit)
	if err != nil {
		return e.fail("unknown-unit", n, "%v", err)
	}
	if !x.Dim.Is(u.Dim) {
		return e.failHint("dimension", n.Args[0], "name a unit of the same dimension", "num cannot count %s in %s", x.Dim.Name(), cmp.Or(u.Pretty(), "1"))
	}
	out := like(x, quantity.None, quantity.Unit{})
	for i, v := range x.SI {
		out.SI[i] = u.From(v)
	}
	return out, true
}

// extreme is max or min: of a vector with one argument, item by item with more.
// Among equals the first governs.
func extreme(better func(a, b float64) bool) func(*evaluator, *expr.Node, []quantity.Value) (quantity.Value, bool) {
	return func(e *evaluator, n *expr.Node, args []quantity.Value) (quantity.Value, bool) {
		if len(args) == 1 {
			v := args[0]
			if v.Shape == quantity.Rows {
				return e.failRows(n.Args[0])
			}
			if len(v.SI) == 0 {
				return e.fail("length", n.Args[0], "%s of a vector without items", n.Text)
			}
			k := 0
			for i := range v.SI {
				if better(v.SI[i], v.SI[k]) {
					k = i
				}
			}
			e.take(n, []int{k + 1})
			return quantity.Value{Dim: v.Dim, SI: []float64{v.SI[k]}, Unit: v.Unit}, true
		}
		out := args[0]
		var taken []int
		for k, b := range args[1:] {
			if !out.Dim.Is(b.Dim) {
				return e.failHint("dimension", n.Args[k+1], zeroHint(n.Args[0], args[0], n.Args[k+1], b), "%s cannot compare %s with %s", n.Text, out.Dim.Name(), b.Dim.Name())
			}
			shape, ok := e.shape(n, out, b)
			if !ok {
				return quantity.Value{}, false
			}
			was := taken
			taken = make([]int, len(shape.SI))
			for i := range shape.SI {
				x, y := item(out, i), item(b, i)
				taken[i] = 1
				if len(was) > 0 {
					taken[i] = was[min(i, len(was)-1)]
				}
				shape.SI[i] = x
				if better(y, x) {
					shape.SI[i], taken[i] = y, k+2
				}
			}
			shape.Dim, shape.Unit = out.Dim, args[0].Unit
			out = shape
		}
		e.take(n, taken)
		return out, true
	}
}

// interpolate is interp(x, xs, ys): linear between the points, never beyond.
func interpolate(e *evaluator, n *expr.Node, args []quantity.Value) (quantity.Value, bool) {
	x, xs, ys := args[0], args[1], args[2]
	if !x.Dim.Is(xs.Dim) {
		return e.fail("dimension", n.Args[0], "interp looks up %s among points that are %s", x.Dim.Name(), xs.Dim.Name())
	}
	if xs.Shape != quantity.Vector || len(xs.SI) == 0 {
		return e.fail("shape", n.Args[1], "interp needs a vector of points")
	}
	if ys.Shape != quantity.Vector || len(ys.SI) != len(xs.SI) {
		return e.fail("length", n.Args[2], "interp needs as many values as points: %d points, %s", len(xs.SI), size(ys))
	}
	for i := 1; i < len(xs.SI); i++ {
		if xs.SI[i] <= xs.SI[i-1] {
			return e.fail("domain", n.Args[1], "the points of interp must increase; item %d is %s after %s", i+1, show(xs.SI[i], xs), show(xs.SI[i-1], xs))
		}
	}
	out := like(x, ys.Dim, ys.Unit)
	last := len(xs.SI) - 1
	for i, v := range x.SI {
		// What the arithmetic of doubles leaves at an end does not count.
		if slack := rounding * max(math.Abs(xs.SI[0]), math.Abs(xs.SI[last])); v >= xs.SI[0]-slack && v <= xs.SI[last]+slack {
			v = min(max(v, xs.SI[0]), xs.SI[last])
		}
		if v < xs.SI[0] || v > xs.SI[last] {
			if e.idle(i, len(x.SI)) {
				continue
			}
			return e.failHint("domain", n.Args[0], "interp does not extrapolate", "%s%s lies outside the points, which run from %s to %s", show(v, x), at(i, x), show(xs.SI[0], xs), show(xs.SI[last], xs))
		}
		j, _ := slices.BinarySearch(xs.SI, v)
		if xs.SI[j] == v {
			out.SI[i] = ys.SI[j]
			continue
		}
		t := (v - xs.SI[j-1]) / (xs.SI[j] - xs.SI[j-1])
		out.SI[i] = ys.SI[j-1] + t*(ys.SI[j]-ys.SI[j-1])
	}
	return out, true
}
