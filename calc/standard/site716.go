package standard

import (
	"fmt"
	"math"

	"quoin/calc/cite"
	"quoin/calc/quantity"
)

// siteTable is a table of ASCE/SEI 7-16 by site class: straight lines between
// columns, the end values beyond them. NaN: the table has no value.
type siteTable struct {
	symbol, over string // what it gives, and over which parameter
	clause       string
	columns      []float64
	rows         map[string][]float64
}

var none = math.NaN()

// tableFa is Table 11.4-1. Row E has no values from S_S = 1.0.
var tableFa = siteTable{"F_a", "S_S", "Table 11.4-1", []float64{0.25, 0.50, 0.75, 1.00, 1.25, 1.50}, map[string][]float64{
	"A": {0.8, 0.8, 0.8, 0.8, 0.8, 0.8},
	"B": {0.9, 0.9, 0.9, 0.9, 0.9, 0.9},
	"C": {1.3, 1.3, 1.2, 1.2, 1.2, 1.2},
	"D": {1.6, 1.4, 1.2, 1.1, 1.0, 1.0},
	"E": {2.4, 1.7, 1.3, none, none, none},
}}

// tableFv is Table 11.4-2; row E from S_1 = 0.2 is that of Supplement 1.
var tableFv = siteTable{"F_v", "S_1", "Table 11.4-2", []float64{0.1, 0.2, 0.3, 0.4, 0.5, 0.6}, map[string][]float64{
	"A": {0.8, 0.8, 0.8, 0.8, 0.8, 0.8},
	"B": {0.8, 0.8, 0.8, 0.8, 0.8, 0.8},
	"C": {1.5, 1.5, 1.5, 1.5, 1.5, 1.4},
	"D": {2.4, 2.2, 2.0, 1.9, 1.8, 1.7},
	"E": {4.2, 3.3, 2.8, 2.4, 2.2, 2.0},
}}

// tableCv is Table 11.9-1, over S_MS.
var tableCv = siteTable{"C_v", "S_MS", "Table 11.9-1", []float64{0.2, 0.3, 0.6, 1.0, 2.0}, map[string][]float64{
	"A": {0.7, 0.8, 0.9, 0.9, 0.9},
	"B": {0.7, 0.8, 0.9, 0.9, 0.9},
	"C": {0.7, 0.8, 1.0, 1.1, 1.3},
	"D": {0.7, 0.9, 1.1, 1.3, 1.5},
	"E": {0.7, 0.9, 1.1, 1.3, 1.5},
	"F": {0.7, 0.9, 1.1, 1.3, 1.5},
}}

// at is the value of a class at x, with the interpolation as a formula where
// there is one. ok is false where the table has none. Between the last value of a
// row and a column without one, the last value holds.
func (t siteTable) at(class string, x float64) (f found, ok bool) {
	row, ok := t.rows[class]
	if !ok {
		return f, false
	}
	f.ref = of716(t.clause)
	f.doc = fmt.Sprintf("%s for site class %s at %s = %s", tableWords[t.symbol], class, t.over, quantity.Short(x))
	n := len(row) - 1
	switch {
	case x <= t.columns[0]:
		f.value = row[0]
		return f, true
	case x >= t.columns[n]:
		f.value = row[n]
		return f, !math.IsNaN(row[n])
	}
	i := 1
	for x > t.columns[i] {
		i++
	}
	a, b, y, z := t.columns[i-1], t.columns[i], row[i-1], row[i]
	switch {
	case math.IsNaN(y) || math.IsNaN(z) && x == b:
		return f, false
	case math.IsNaN(z), y == z:
		f.value = y
	case x == b:
		f.value = z
	default:
		f.value = y + (x-a)/(b-a)*(z-y)
		f.formula = fmt.Sprintf("%s + (%s - %s) * (%s - %s) / (%s - %s)", quantity.Short(y), quantity.Short(z), quantity.Short(y), t.over, quantity.Short(a), quantity.Short(b), quantity.Short(a))
	}
	return f, true
}

var tableWords = map[string]string{"F_a": "short-period site coefficient", "F_v": "long-period site coefficient", "C_v": "vertical coefficient"}

// site716 is the site as the tables are read for it.
type site716 struct {
	word     string // as given; "" if not
	class    string // the row of the tables
	floor    bool   // the class is not determined: F_a >= 1.2
	rock     bool   // class B without measured velocity: F_a = F_v = 1
	accepted bool   // an exception or a study is stated
}

func siteOf(in Given) site716 {
	word := in.Texts["site"]
	s := site716{word: word, class: word, accepted: in.Texts["site_specific"] != ""}
	switch word {
	case "default":
		s.class, s.floor = "D", true
	case "B estimated":
		s.class, s.rock = "B", true
	}
	return s
}

// coefficient is F_a or F_v of the site at x: by the table, by 11.4.4 for a class
// that is not determined or not measured, or of class C under exception 1.
func (s site716) coefficient(t siteTable, x float64, claimed bool) (f found, ok bool) {
	if s.rock {
		return found{value: 1, doc: tableWords[t.symbol] + " for site class B without measured shear wave velocity", ref: cite.To("2018 IBC", "1613.2.2")}, true
	}
	if t.symbol == "F_a" && s.class == "E" && x >= 1 && claimed {
		f, ok = t.at("C", x)
		f.doc += ", taken for class E under exception 1 of 11.4.8"
		return f, ok
	}
	f, ok = t.at(s.class, x)
	if ok && t.symbol == "F_a" && s.floor {
		f.doc += ", the class not being determined: not less than 1.2"
		f.ref = cite.To("2018 IBC", "1613.2.3")
		if f.value < 1.2 {
			inner := f.formula
			if inner == "" {
				inner = quantity.Short(f.value)
			}
			f.value, f.formula = 1.2, "max("+inner+", 1.2)"
		}
	}
	return f, ok
}
