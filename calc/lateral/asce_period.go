package lateral

import (
	"math"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/quantity"
)

// System is a row of a table of coefficients for the approximate period:
// T_a = C_t h_n^x, in s.
type System struct {
	Name     string
	CtM, CtF float64 // with h_n in m and in ft; CtF 0 where the standard has no such form
	X        float64
}

// asceSystems is Table 12.8-2 of ASCE/SEI 7-16 and 7-22, the names as in a document.
var asceSystems = []System{
	{"steel moment frame", 0.0724, 0.028, 0.8},
	{"concrete moment frame", 0.0466, 0.016, 0.9},
	{"eccentrically braced frame", 0.0731, 0.03, 0.75},
	{"buckling-restrained braced frame", 0.0731, 0.03, 0.75},
	{"other", 0.0488, 0.02, 0.75},
}

// Systems lists the rows of the table of a basis.
func Systems(basis string) []System {
	if basis == enBasis {
		return enSystems
	}
	return asceSystems
}

// systemOf finds a row by its name.
func systemOf(list []System, name string) (System, error) {
	asked := strings.ToLower(strings.Join(strings.Fields(name), " "))
	var names []string
	for _, s := range list {
		if s.Name == asked {
			return s, nil
		}
		names = append(names, s.Name)
	}
	hint := "one of: " + strings.Join(names, ", ")
	var ends []string // rows that the words asked for end: "moment frame" is no guess of one
	for _, name := range names {
		if strings.HasSuffix(name, " "+asked) {
			ends = append(ends, name)
		}
	}
	if len(ends) > 1 {
		hint = strings.Join(ends, " or ") + "? It is " + hint
	} else if near := diag.Nearest(asked, names); near != "" {
		hint = "did you mean " + near + "? It is " + hint
	}
	return System{}, problem("system", hint, "there is no row %q in the table of C_t", name)
}

// CuRow is a row of Table 12.8-1: the coefficient for the upper limit on the
// computed period.
type CuRow struct{ SD1, Cu float64 }

var cuTable = []CuRow{{0.1, 1.7}, {0.15, 1.6}, {0.2, 1.5}, {0.3, 1.4}, {0.4, 1.4}}

// CuRows are the rows that C_u is found from: the first row for S_D1 up to it, the
// last from it on, else the two that S_D1 lies between.
func CuRows(sd1 float64) []CuRow {
	last := len(cuTable) - 1
	switch {
	case sd1 <= cuTable[0].SD1:
		return cuTable[:1]
	case sd1 >= cuTable[last].SD1:
		return cuTable[last:]
	}
	i := 1
	for sd1 > cuTable[i].SD1 {
		i++
	}
	return cuTable[i-1 : i+1]
}

// upperLimit is C_u for S_D1 >= 0, linear between the rows of Table 12.8-1.
func upperLimit(sd1 float64) float64 {
	rows := CuRows(sd1)
	if len(rows) == 1 {
		return rows[0].Cu
	}
	a, b := rows[0], rows[1]
	return a.Cu + (b.Cu-a.Cu)*(sd1-a.SD1)/(b.SD1-a.SD1)
}

// approximate is T_a = ct h_n^x in s, for hn in m and h_n measured in a unit.
func approximate(ct, x, hn float64, unit string) float64 {
	return ct * math.Pow(quantity.MustUnit(unit).From(hn), x)
}

// period finds T_a, its upper limit, and the period used (12.8.2).
func (in ASCE) period(s *Static) error {
	if err := in.approximate(s); err != nil {
		return err
	}
	s.Cu = upperLimit(s.SD1)
	s.Cap = s.Cu * s.Ta
	s.Stated = in.T
	switch {
	case in.T == 0:
		s.T, s.TWhy = s.Ta, "no computed period is stated: the approximate period is used"
	case in.T > s.Cap:
		s.T, s.TWhy = s.Cap, "the computed period exceeds the upper limit, which governs"
	default:
		s.T, s.TWhy = in.T, "the computed period lies within the upper limit"
		if in.T < s.Ta {
			s.TWhy += "; it is below the approximate period, which would be permitted"
		}
	}
	return nil
}

// approximate finds T_a by the rule that the author chose.
func (in ASCE) approximate(s *Static) error {
	s.HeightUnit = in.HeightUnit
	if s.HeightUnit == "" {
		s.HeightUnit = "m"
	}
	if s.HeightUnit != "m" && s.HeightUnit != "ft" {
		return problem("h_n_in", "write m or ft", "%q is not a choice", in.HeightUnit)
	}
	switch {
	case len(in.Walls) > 0 || in.BaseArea != 0:
		return in.walls(s)
	case in.ByStoreys:
		return in.storeys(s)
	}
	if err := in.coefficients(s); err != nil {
		return err
	}
	s.PeriodRule, s.Ta = "C_t", approximate(s.Ct, s.X, s.Hn, s.HeightUnit)
	if !(s.Ta > 0) || math.IsInf(s.Ta*cuTable[0].Cu, 0) {
		return problem("C_t", "", "C_t = %v and x = %v give no period for h_n = %.6g %s", s.Ct, s.X, quantity.MustUnit(s.HeightUnit).From(s.Hn), s.HeightUnit)
	}
	return nil
}

// coefficients settles C_t and x: of the table, or the author's.
func (in ASCE) coefficients(s *Static) error {
	byHand := in.Ct != 0 || in.X != 0
	switch {
	case in.System != "" && byHand:
		return problem("system", "", "give either a system or C_t and x")
	case in.System != "":
		row, err := systemOf(asceSystems, in.System)
		if err != nil {
			return err
		}
		s.System, s.Ct, s.X = row.Name, row.CtM, row.X
		if s.HeightUnit == "ft" {
			s.Ct = row.CtF
		}
		return nil
	case !byHand:
		return problem("system", "one of: "+names(asceSystems), "is missing: give the system of Table 12.8-2, or C_t and x, or walls")
	}
	for _, n := range []struct {
		symbol string
		value  float64
	}{{"C_t", in.Ct}, {"x", in.X}} {
		if !(n.value > 0) || math.IsInf(n.value, 0) {
			return problem(n.symbol, "", "C_t and x must both be given, greater than zero")
		}
	}
	if in.X > 2 {
		return problem("x", "the exponents of Table 12.8-2 are 0.75, 0.8 and 0.9", "%v is no exponent of a period", in.X)
	}
	s.Ct, s.X = in.Ct, in.X
	return nil
}

// OtherUnit tells whether C_t and x are a row of Table 12.8-2 for h_n in another
// unit than the one named: "ft" for "m" and the other way round.
func OtherUnit(ct, x float64, unit string) (other string, wrong bool) {
	for _, row := range asceSystems {
		if unit == "m" && ct == row.CtF && x == row.X {
			return "ft", true
		}
		if unit == "ft" && ct == row.CtM && x == row.X {
			return "m", true
		}
	}
	return "", false
}

func names(list []System) string {
	var out []string
	for _, s := range list {
		out = append(out, s.Name)
	}
	return strings.Join(out, ", ")
}
