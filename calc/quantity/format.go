package quantity

import (
	"math"
	"strconv"
	"strings"
)

// Digits is the number of significant digits shown when nothing else is asked.
const Digits = 4

// Format writes a number for a reader. The rule, stated in every package: at
// least sig significant digits; the integer part is never rounded away; trailing
// zeros stay (they are significant); five or more integer digits are grouped by
// threes with a narrow no-break space; below 0.001 or from ten million on,
// scientific form "1.234×10⁻⁵". Minus is U+2212, and zero has no sign.
func Format(x float64, sig int) string {
	switch {
	case x == 0:
		return "0"
	case math.IsNaN(x):
		return "not a number"
	}
	sign := ""
	if x < 0 {
		sign = "\u2212"
	}
	if math.IsInf(x, 0) {
		return sign + "∞"
	}
	text, power := decimal(math.Abs(x), sig)
	if power != 0 {
		return sign + text + "×10" + raised(power)
	}
	return sign + Grouped(text)
}

// decimal rounds a positive number to what is shown: a decimal text, times ten
// to the power where that is not 0. The rounded number decides the form, so
// that 0.00099999 is shown as 0.001000 is.
func decimal(a float64, sig int) (text string, power int) {
	sig = max(sig, 1)
	text = strconv.FormatFloat(a, 'e', sig-1, 64)
	mantissa, e, _ := strings.Cut(text, "e")
	exponent, _ := strconv.Atoi(e)
	if a < 1e7 {
		exponent = min(exponent, 6)
	}
	if exponent < -3 || exponent > 6 {
		return mantissa, exponent
	}
	text = strconv.FormatFloat(a, 'f', max(0, sig-1-exponent), 64)
	if len(text) == 8 && strings.IndexByte(text, '.') < 0 { // 9999999.7: the integer part has carried
		return decimal(1e7, sig)
	}
	return text, 0
}

// Short is a number in a sentence: Digits significant digits, or fewer where they
// show it exactly: 8, 0.05, 0.6667.
func Short(x float64) string { return Format(x, min(Digits, Exact(x))) }

// Rounded is the number that Format shows, for proving that shown numbers agree.
func Rounded(x float64, sig int) float64 {
	if x == 0 || math.IsInf(x, 0) || math.IsNaN(x) {
		return x
	}
	text, power := decimal(math.Abs(x), sig)
	v, _ := strconv.ParseFloat(text+"e"+strconv.Itoa(power), 64)
	return math.Copysign(v, x)
}

// Grouped puts narrow no-break spaces into the integer part of five or more digits.
func Grouped(text string) string {
	if rest, ok := strings.CutPrefix(text, "-"); ok {
		return "-" + Grouped(rest)
	}
	whole, frac, dot := strings.Cut(text, ".")
	if len(whole) >= 5 {
		var b strings.Builder
		for i, r := range whole {
			if i > 0 && (len(whole)-i)%3 == 0 {
				b.WriteRune('\u202f')
			}
			b.WriteRune(r)
		}
		whole = b.String()
	}
	if dot {
		return whole + "." + frac
	}
	return whole
}

func raised(n int) string {
	return strings.Map(func(r rune) rune {
		if r == '-' {
			return '⁻'
		}
		return []rune("⁰¹²³⁴⁵⁶⁷⁸⁹")[r-'0']
	}, strconv.Itoa(n))
}

// Plain is the shortest decimal that reads back as x: for tables and data files.
// Zero has no sign.
func Plain(x float64) string { return strconv.FormatFloat(x+0, 'g', -1, 64) }

// Exact is the least number of significant digits with which Format shows x
// itself and nothing rounded: a given 8 is shown as 8, a given 1000.1234 with all
// its digits. It is at most 15.
func Exact(x float64) int {
	for d := 1; d < 15; d++ {
		if math.Abs(Rounded(x, d)-x) <= 1e-15*math.Abs(x) {
			return d
		}
	}
	return 15
}
