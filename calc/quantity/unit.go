package quantity

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"quoin/calc/diag"
)

// Unit is a unit of measure as written. One of it is Scale SI units of Dim. The
// zero Unit is the pure number.
type Unit struct {
	Text  string  `json:"text,omitempty"`
	Scale float64 `json:"scale,omitempty"`
	Dim   Dim     `json:"dim,omitzero"`
}

// Gravity is the standard acceleration of free fall, in m/s² (ISO 80000-3).
const Gravity = 9.80665

const (
	inch  = 0.0254              // m, exact
	pound = 0.45359237          // kg, exact
	lbf   = pound * Gravity     // N
	psi   = lbf / (inch * inch) // Pa
	slug  = lbf / (12 * inch)   // kg
	psf   = lbf / (144 * inch * inch)
)

// symbols is every unit symbol of the language.
var symbols = map[string]Unit{
	"m": {"m", 1, Length}, "mm": {"mm", 1e-3, Length}, "cm": {"cm", 1e-2, Length}, "km": {"km", 1e3, Length},
	"in": {"in", inch, Length}, "ft": {"ft", 12 * inch, Length},
	"kg": {"kg", 1, Mass}, "t": {"t", 1e3, Mass}, "lbm": {"lbm", pound, Mass}, "slug": {"slug", slug, Mass},
	"s": {"s", 1, Time}, "ms": {"ms", 1e-3, Time},
	"Hz": {"Hz", 1, PerTime}, "kHz": {"kHz", 1e3, PerTime},
	"N": {"N", 1, Force}, "kN": {"kN", 1e3, Force}, "MN": {"MN", 1e6, Force},
	"lbf": {"lbf", lbf, Force}, "kip": {"kip", 1000 * lbf, Force},
	"Pa": {"Pa", 1, Pressure}, "kPa": {"kPa", 1e3, Pressure}, "MPa": {"MPa", 1e6, Pressure}, "GPa": {"GPa", 1e9, Pressure},
	"psi": {"psi", psi, Pressure}, "ksi": {"ksi", 1000 * psi, Pressure}, "psf": {"psf", psf, Pressure}, "ksf": {"ksf", 1000 * psf, Pressure},
	"g": {"g", Gravity, Acceleration}, "gal": {"gal", 1e-2, Acceleration}, "Gal": {"Gal", 1e-2, Acceleration},
	"rad": {"rad", 1, None}, "deg": {"deg", math.Pi / 180, None}, "%": {"%", 0.01, None},
}

// refused are words that look like units and are not, with what to write.
var refused = map[string]string{
	"lb": "write lbf for a force or lbm for a mass", "lbs": "write lbf for a force or lbm for a mass",
	"kips": "write kip", "ton": "write t for 1000 kg, or the force in kN or kip", "tons": "write t for 1000 kg, or the force in kN or kip",
	"tonne": "write t", "h": "write the time in s", "hr": "write the time in s", "min": "write the time in s", "d": "write the time in s",
	"sec": "write s", "mi": "write km or ft", "kgf": "write the force in N or kN", "tf": "write the force in kN",
	"G": "write g for the acceleration of free fall", "feet": "write ft", "inch": "write in", "foot": "write ft", "inches": "write in", "kgs": "write kg", "seconds": "write s", "second": "write s", "meter": "write m", "metre": "write m", "meters": "write m", "metres": "write m",
	"pcf": "write lbf/ft^3", "plf": "write lbf/ft", "klf": "write kip/ft", "kcf": "write kip/ft^3", "bar": "write kPa or MPa", "°": "write deg", "degrees": "write deg", "percent": "write %", "rpm": "write Hz",
	"tonnes": "write t", "k": "write kip", "k/in": "write kip/in", "k/ft": "write kip/ft", "sq": "write ft^2 or m^2 for an area", "sqft": "write ft^2", "'": "write ft", "″": "write in", "′": "write ft",
	"KN": "write kN", "kn": "write kN", "Kip": "write kip", "hz": "write Hz", "K": "write kip",
}

// Symbols is every unit symbol, sorted.
func Symbols() []string {
	out := make([]string, 0, len(symbols))
	for s := range symbols {
		out = append(out, s)
	}
	slices.Sort(out)
	return out
}

// IsSymbol tells whether a word is a unit symbol.
func IsSymbol(word string) bool { _, ok := symbols[word]; return ok }

// UnitError says what is wrong with a written unit. Offset counts bytes.
type UnitError struct {
	Text, Word, Hint string
	Power            string // the power at fault, if it is one: "^99"
	Offset           int
}

func (e *UnitError) Error() string {
	if e.Power != "" {
		return fmt.Sprintf("%q is no power that a unit can have", e.Power)
	}
	if e.Word == "" {
		return fmt.Sprintf("%q is not a unit", e.Text)
	}
	return fmt.Sprintf("%q is not a unit", e.Word)
}

// MustUnit is ParseUnit for units in the program text.
func MustUnit(text string) Unit {
	u, err := ParseUnit(text)
	if err != nil {
		panic("quantity: " + err.Error())
	}
	return u
}

// ParseUnit reads a unit: symbols with powers, joined by *, · or / and read from
// left to right ("kN*m", "m/s^2", "kip*s^2/in", "cm/s²"). "" and "1" are the pure number.
func ParseUnit(text string) (Unit, error) {
	s := strings.TrimSpace(text)
	if s == "" || s == "1" {
		return Unit{}, nil
	}
	lead := strings.Index(text, s)
	out := Unit{Text: canonical(s), Scale: 1}
	over := false
	for i := 0; i < len(s); {
		j := i
		for j < len(s) && !strings.HasPrefix(s[j:], "*") && !strings.HasPrefix(s[j:], "/") && !strings.HasPrefix(s[j:], "·") && s[j] != '^' && !isSuperscript(s[j:]) {
			j++
		}
		word := strings.TrimSpace(s[i:j])
		fail := &UnitError{Text: s, Word: word, Offset: lead + i}
		u, ok := symbols[word]
		if !ok && word == "1" && i == 0 {
			u, ok = Unit{Scale: 1}, true
		}
		if !ok {
			fail.Hint = hint(word)
			return Unit{}, fail
		}
		power := 1.0
		if j < len(s) && s[j] == '^' {
			k := j + 1
			for k < len(s) && strings.IndexByte("+-.0123456789", s[k]) >= 0 {
				k++
			}
			p, err := strconv.ParseFloat(s[j+1:k], 64)
			if err != nil {
				fail.Hint, fail.Power = powerHint, s[j:max(k, j+1)]
				return Unit{}, fail
			}
			power, j = p, k
			fail.Power = s[i+len(word) : k]
		} else if p, n := superscript(s[j:]); n > 0 {
			power, j = p, j+n
			fail.Power = s[j-n : j]
		}
		if math.Abs(power) > 12 {
			fail.Hint = powerHint
			return Unit{}, fail
		}
		fail.Power = ""
		if over {
			out.Scale /= math.Pow(u.Scale, power)
			out.Dim = out.Dim.Over(u.Dim.Power(power))
		} else {
			out.Scale *= math.Pow(u.Scale, power)
			out.Dim = out.Dim.Times(u.Dim.Power(power))
		}
		if out.Scale < 1e-150 || out.Scale > 1e150 {
			fail.Hint = "the unit is too large or too small"
			return Unit{}, fail
		}
		if j >= len(s) {
			return out, nil
		}
		switch {
		case s[j] == '*':
			over, i = false, j+1
		case s[j] == '/':
			over, i = true, j+1
		case strings.HasPrefix(s[j:], "·"):
			over, i = false, j+len("·")
		default:
			fail.Word = s[j:]
			return Unit{}, fail
		}
	}
	return Unit{}, &UnitError{Text: s, Offset: lead}
}

const powerHint = "after ^ stands a number from -12 to 12, such as m^2 or s^-1"

// hint says what to write instead of a word that is no unit, or "".
func hint(word string) string {
	if h := refused[word]; h != "" {
		return h
	}
	if base := strings.TrimRight(word, "0123456789"); base != word && IsSymbol(base) {
		return "write " + base + "^" + word[len(base):]
	}
	for _, length := range []string{"mm", "cm", "m", "ft", "in"} {
		force, ok := strings.CutSuffix(word, length)
		force = strings.TrimRight(force, "-.")
		if u := symbols[force]; ok && u.Dim == Force {
			return "write " + force + "*" + length
		}
	}
	if n := diag.Nearest(word, Symbols()); n != "" {
		return "did you mean " + n + "?"
	}
	return ""
}

var superscripts = map[rune]string{'⁰': "0", '¹': "1", '²': "2", '³': "3", '⁴': "4", '⁵': "5", '⁶': "6", '⁷': "7", '⁸': "8", '⁹': "9", '⁻': "-"}

func isSuperscript(s string) bool { _, n := superscript(s); return n > 0 }

func superscript(s string) (power float64, n int) {
	digits := ""
	for i, r := range s {
		d, ok := superscripts[r]
		if !ok {
			break
		}
		digits += d
		n = i + len(string(r))
	}
	p, err := strconv.ParseFloat(digits, 64)
	if err != nil {
		return 0, 0
	}
	return p, n
}

// canonical writes a unit in one way: no blanks, * for products, ^ for powers.
func canonical(s string) string {
	var b strings.Builder
	up := false
	for _, r := range s {
		d, sup := superscripts[r]
		switch {
		case r == ' ':
			continue
		case r == '·':
			b.WriteByte('*')
		case sup:
			if !up {
				b.WriteByte('^')
			}
			b.WriteString(d)
		default:
			b.WriteRune(r)
		}
		up = sup
	}
	return b.String()
}

// Pretty is the unit as printed: "kN·m", "m/s²", "m^0.9".
func (u Unit) Pretty() string {
	var b strings.Builder
	for i := 0; i < len(u.Text); i++ {
		switch c := u.Text[i]; c {
		case '*':
			b.WriteRune('·')
		case '^':
			j := i + 1
			for j < len(u.Text) && strings.IndexByte("+-.0123456789", u.Text[j]) >= 0 {
				j++
			}
			if n, err := strconv.Atoi(u.Text[i+1 : j]); err == nil {
				b.WriteString(raised(n))
			} else {
				b.WriteString(u.Text[i:j]) // a broken power stays: m^0.9
			}
			i = j - 1
		default:
			b.WriteByte(c)
		}
	}
	return b.String()
}

// From is the number in this unit of an SI number.
func (u Unit) From(si float64) float64 {
	if u.Scale == 0 {
		return si
	}
	return si / u.Scale
}

// To is the SI number of x units.
func (u Unit) To(x float64) float64 {
	if u.Scale == 0 {
		return x
	}
	return x * u.Scale
}

// SIUnit is the coherent SI unit of a dimension: "N", "m/s^2", "N*m", "" for a pure number.
func SIUnit(d Dim) Unit {
	for _, n := range coherent {
		if n.Dim.Is(d) {
			return n
		}
	}
	var up, down []string
	for i, sym := range [...]string{"kg", "m", "s"} {
		e := Dim{d[1], d[0], d[2]}[i]
		switch {
		case math.Abs(e) < 1e-9:
		case e > 0:
			up = append(up, sym+power(e))
		default:
			down = append(down, sym+power(-e))
		}
	}
	text := strings.Join(up, "*")
	if text == "" {
		text = "1"
	}
	if len(down) > 0 {
		text += "/" + strings.Join(down, "/")
	}
	return Unit{Text: text, Scale: 1, Dim: d}
}

func power(e float64) string {
	if math.Abs(e-1) < 1e-9 {
		return ""
	}
	return "^" + strconv.FormatFloat(math.Round(e*1e9)/1e9, 'g', -1, 64)
}

var coherent = []Unit{
	{}, {"m", 1, Length}, {"kg", 1, Mass}, {"s", 1, Time}, {"1/s", 1, PerTime}, {"m/s", 1, Velocity}, {"m/s^2", 1, Acceleration},
	{"N", 1, Force}, {"N*m", 1, Moment}, {"N/m", 1, Stiffness}, {"Pa", 1, Pressure},
	{"N/m^3", 1, ForcePerArea3}, {"kg*m^2", 1, Dim{2, 1, 0}}, {"kg/m^3", 1, Dim{-3, 1, 0}}, {"m^2", 1, Dim{2, 0, 0}}, {"m^3", 1, Dim{3, 0, 0}},
}

// System is the unit system a package is shown in.
type System string

const (
	SI System = "SI"
	US System = "US"
)

// Preferred is the unit that a result of this dimension is shown in when the
// author did not say: common practice of structural offices.
func (s System) Preferred(d Dim) Unit {
	list := preferredSI
	if s == US {
		list = preferredUS
	}
	for _, u := range list {
		if u.Dim.Is(d) {
			return u
		}
	}
	return SIUnit(d)
}

var (
	preferredSI = units("m", "t", "s", "1/s", "m/s", "m/s^2", "kN", "kN*m", "kN/m", "kPa", "kN/m^3")
	preferredUS = units("ft", "kip*s^2/in", "s", "1/s", "in/s", "in/s^2", "kip", "kip*ft", "kip/in", "ksf", "kip/ft^3")
)

func units(texts ...string) []Unit {
	out := make([]Unit, len(texts))
	for i, t := range texts {
		out[i] = MustUnit(t)
	}
	return out
}

// Small is the unit of small lengths (displacements, drifts): mm or in.
func (s System) Small() Unit {
	if s == US {
		return symbols["in"]
	}
	return symbols["mm"]
}
