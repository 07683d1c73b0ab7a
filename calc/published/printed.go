package published

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Printed is a wanted value as its source prints it: the tolerance is half a
// unit of the last printed digit, so it cannot be chosen. It panics on a text
// that is no plain decimal number.
func Printed(name, text, unit string) Want {
	value, err := strconv.ParseFloat(text, 64)
	if err != nil || strings.ContainsAny(text, "eExX_n") {
		panic("published: not a plain decimal number: " + text)
	}
	decimals := 0
	if _, after, ok := strings.Cut(text, "."); ok {
		decimals = len(after)
	}
	half, _ := strconv.ParseFloat(fmt.Sprintf("5.000001e-%d", decimals+1), 64)
	return Want{Name: name, Value: value, Unit: unit, Tol: half, Why: "half of the last printed digit"}
}

// Rounded is a wanted value that was computed from a formula and handed on with
// the digits of text: rounded perhaps twice, so one unit of the last digit is
// allowed. A text of fewer than five significant digits is an exact value (1,
// 0.44, 16) and is held to 1e-9 of itself. It panics on a text that is no plain
// decimal number.
func Rounded(name, text, unit string) Want {
	w := Printed(name, text, unit)
	w.Tol, w.Why = 2*w.Tol, "one unit of the last digit given"
	if digits := strings.TrimLeft(strings.Map(digitOnly, text), "0"); len(digits) < 5 {
		w.Tol, w.Why = 1e-9*max(math.Abs(w.Value), 1e-3), "an exact value, to rounding of the arithmetic"
	}
	return w
}

func digitOnly(r rune) rune {
	if r >= '0' && r <= '9' {
		return r
	}
	return -1
}
