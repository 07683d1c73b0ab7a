package block

import (
	"strconv"

	"quoin/calc/quantity"
)

// round12 drops the noise of binary fractions: 0.07*100 is 7.
func round12(x float64) float64 {
	v, _ := strconv.ParseFloat(strconv.FormatFloat(x, 'g', 12, 64), 64)
	return v
}

// short is a number in a sentence: 8, 0.05, 0.6667.
func short(x float64) string {
	return quantity.Short(x)
}
