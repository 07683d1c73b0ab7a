package chart

import (
	"encoding/json"
	"math"
	"strings"
)

// A long curve stands in the option as letters, not as numbers: a sixth of the bytes.
// Each of its two columns is whole numbers over a power of ten,
//
//	v[i] = k[i] / 10^p    (times 10^-p where p < 0)
//
// of which the first is written as it is, the others as what is left of them when
// they are foretold from those before: differences of an order of 1 to 3, over their
// common divisor. templates/bundle/packed.js reads them again; both must say the same.

// letters are the digits: printable, and none that JSON, HTML or a script reads.
const letters = "!#$%'()*+,-./0123456789:;=?@ABCDEFGHIJKLMNOPQRSTUVWXYZ[]^_`abcdefghijklmnopqrstuvwxyz{|}"

// again stands for the number before, so many times more as the number after it says.
const again = '~'

// First letters: below one they are the number, below two one more letter follows,
// below three two more; the last one is followed by the count of those that follow.
const (
	base  = 88 // letters
	one   = 36
	two   = 78
	three = base - 1
)

// few is how many points are written as numbers.
const few = 40

// packed is the data of a curve in letters.
type packed struct {
	Count int       `json:"n"`
	X     packedRow `json:"x"`
	Y     packedRow `json:"y"`
}

// packedRow is a column: p, the order of its differences, their divisor, the letters.
type packedRow struct {
	power, order int
	divisor      int64
	text         string
}

func (r packedRow) MarshalJSON() ([]byte, error) {
	return json.Marshal([]any{r.power, r.order, r.divisor, r.text})
}

// pack is the data as it stands in the option: letters where there are many points,
// else numbers, as where letters could not tell the small values of a logarithmic
// axis.
func pack(data points, xLog, yLog bool) any {
	if len(data) <= few {
		return data
	}
	x, y := make([]float64, len(data)), make([]float64, len(data))
	for i, p := range data {
		x[i], y[i] = p[0], p[1]
	}
	px, okX := powerOf(x, xLog, 6, 8)
	py, okY := powerOf(y, yLog, 6, 0)
	if !okX || !okY {
		return data
	}
	return packed{len(data), packRow(x, px), packRow(y, py)}
}

// powerOf is the power of ten that values are whole numbers over: that which leaves
// the largest of them the digits, on a logarithmic axis the smallest; or another, up
// to so many places, that tells all of them exactly.
func powerOf(values []float64, log bool, digits, places int) (power int, ok bool) {
	lo, hi := math.Inf(1), 0.0
	for _, v := range values {
		if a := math.Abs(v); a > 0 {
			lo, hi = math.Min(lo, a), math.Max(hi, a)
		}
	}
	if hi == 0 {
		return 0, true
	}
	from := hi
	if log {
		from = lo
	}
	power = digits - 1 - int(math.Floor(math.Log10(from)))
	most := 11 - int(math.Floor(math.Log10(hi))) // the largest has twelve digits
	for p := 0; p <= min(max(power, places), most); p++ {
		if exact(values, math.Pow10(p)) {
			return p, true
		}
	}
	return power, power <= most && power > -300 && power < 300
}

// exact tells whether all values are whole numbers over the scale, but for rounding.
func exact(values []float64, scale float64) bool {
	for _, v := range values {
		if k := v * scale; math.Abs(k-math.Round(k)) > 1e-12*math.Abs(k) {
			return false
		}
	}
	return true
}

// packRow writes a column in the order of differences that is shortest.
func packRow(values []float64, power int) packedRow {
	k := make([]int64, len(values))
	for i, v := range values {
		k[i] = int64(math.RoundToEven(scaled(v, power)))
	}
	best := packedRow{}
	for order := 1; order <= 3; order++ {
		left := differences(k, order)
		g := divisor(left[1:])
		for i := range left[1:] {
			left[1+i] /= g
		}
		if text := written64(left); order == 1 || len(text) < len(best.text) {
			best = packedRow{power, order, g, text}
		}
	}
	return best
}

// scaled is v times 10^power; beyond what a power of ten can be told exactly, in two steps.
func scaled(v float64, power int) float64 {
	if power < 0 {
		return v / math.Pow10(-power)
	}
	return v * math.Pow10(power)
}

// differences is k without what is foretold of it: item i from the order before it
// by the polynomial through them, as far as there are so many.
func differences(k []int64, order int) []int64 {
	out := append([]int64(nil), k...)
	for d := 1; d <= order; d++ {
		for i := len(out) - 1; i >= d; i-- {
			out[i] -= out[i-1]
		}
	}
	return out
}

// divisor is the greatest common divisor, 1 of nothing.
func divisor(list []int64) int64 {
	g := int64(0)
	for _, v := range list {
		for a, b := g, max(v, -v); ; a, b = b, a%b {
			if b == 0 {
				g = a
				break
			}
		}
		if g == 1 {
			break
		}
	}
	return max(g, 1)
}

// written64 is whole numbers in letters.
func written64(list []int64) string {
	var b strings.Builder
	for i := 0; i < len(list); i++ {
		same := 0
		for i > 0 && i+same < len(list) && list[i+same] == list[i-1] {
			same++
		}
		if same > 2 {
			b.WriteByte(again)
			spell(&b, uint64(same))
			i += same - 1
			continue
		}
		v := list[i]
		spell(&b, uint64(v<<1^v>>63)) // 0, -1, 1, -2, ... as 0, 1, 2, 3
	}
	return b.String()
}

// spell writes one number.
func spell(b *strings.Builder, v uint64) {
	const n = uint64(base)
	switch {
	case v < one:
		b.WriteByte(letters[v])
		return
	case v < one+(two-one)*n:
		v -= one
		b.WriteByte(letters[one+v/n])
		b.WriteByte(letters[v%n])
		return
	case v < one+(two-one)*n+(three-two)*n*n:
		v -= one + (two-one)*n
		b.WriteByte(letters[two+v/n/n])
		b.WriteByte(letters[v/n%n])
		b.WriteByte(letters[v%n])
		return
	}
	var digits []byte
	for ; v > 0; v /= n {
		digits = append(digits, letters[v%n])
	}
	b.WriteByte(letters[three])
	b.WriteByte(letters[len(digits)])
	for i := len(digits) - 1; i >= 0; i-- {
		b.WriteByte(digits[i])
	}
}
