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
// scientific form "1.234×10⁻⁵". Minus is U+2212.
func Format(x float64, sig int) string {
	if x == 0 {
		return "0"
	}
	a := math.Abs(x)
	sign := ""
	if x < 0 {
		sign = "\u2212"
	}
	if a < 1e-3 || a >= 1e7 {
		text := strconv.FormatFloat(a, 'e', max(sig-1, 0), 64)
		m, e, _ := strings.Cut(text, "e")
		n, _ := strconv.Atoi(e)
		return sign + m + "×10" + raised(n)
	}
	text := strconv.FormatFloat(a, 'f', decimals(a, sig), 64)
	// Rounding may have carried into a new digit (9.9996 at 4): write it again.
	if v, _ := strconv.ParseFloat(text, 64); decimals(v, sig) != decimals(a, sig) {
		text = strconv.FormatFloat(a, 'f', decimals(v, sig), 64)
	}
	return sign + Grouped(text)
}

// decimals is how many digits after the point show sig significant ones.
func decimals(a float64, sig int) int {
	if a == 0 {
		return 0
	}
	return max(0, sig-1-int(math.Floor(math.Log10(a)*(1+1e-15))))
}

// Rounded is the number that Format shows, for proving that shown numbers agree.
func Rounded(x float64, sig int) float64 {
	a := math.Abs(x)
	if a == 0 || math.IsInf(a, 0) || math.IsNaN(a) {
		return x
	}
	var text string
	if a < 1e-3 || a >= 1e7 {
		text = strconv.FormatFloat(x, 'e', max(sig-1, 0), 64)
	} else {
		text = strconv.FormatFloat(x, 'f', decimals(a, sig), 64)
	}
	v, _ := strconv.ParseFloat(text, 64)
	return v
}

// Grouped puts narrow no-break spaces into the integer part of five or more digits.
func Grouped(text string) string {
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
func Plain(x float64) string { return strconv.FormatFloat(x, 'g', -1, 64) }
