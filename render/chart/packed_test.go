package chart

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"strings"
	"testing"

	"github.com/dop251/goja"
	"pgregory.net/rapid"

	"quoin/render/script"
)

// packedData is the data of a curve as it stands in an option.
type packedData struct {
	N    int
	X, Y packedColumn
}

type packedColumn struct {
	power, order int
	divisor      int64
	text         string
}

func (c *packedColumn) UnmarshalJSON(data []byte) error {
	return json.Unmarshal(data, &[]any{&c.power, &c.order, &c.divisor, &c.text})
}

// read gives the n values of a column: sums of the order, over a power of ten.
func (c packedColumn) read(t interface{ Fatalf(string, ...any) }, n int) []float64 {
	var k []int64
	text := c.text
	digit := func() int64 {
		i := strings.IndexByte(letters, text[0])
		if i < 0 {
			t.Fatalf("%q is no letter", text[0])
		}
		text = text[1:]
		return int64(i)
	}
	number := func() int64 {
		switch f := digit(); {
		case f < one:
			return f
		case f < two:
			return one + (f-one)*base + digit()
		case f < three:
			v := (f-two)*base + digit()
			return one + (two-one)*base + v*base + digit()
		}
		v := int64(0)
		for left := digit(); left > 0; left-- {
			v = v*base + digit()
		}
		return v
	}
	for len(text) > 0 {
		if text[0] == again {
			text = text[1:]
			for left := number(); left > 0; left-- {
				k = append(k, k[len(k)-1])
			}
			continue
		}
		v := number()
		k = append(k, v>>1^-(v&1))
	}
	if len(k) != n {
		t.Fatalf("%d values, not %d", len(k), n)
	}
	for i := 1; i < n; i++ {
		k[i] *= c.divisor
	}
	for d := c.order; d >= 1; d-- {
		for i := d; i < n; i++ {
			k[i] += k[i-1]
		}
	}
	out := make([]float64, n)
	for i, v := range k {
		if out[i] = float64(v) / math.Pow10(c.power); c.power < 0 {
			out[i] = float64(v) * math.Pow10(-c.power)
		}
	}
	return out
}

// page is the reader of the page's script, in a runtime of its own.
func page(tb testing.TB) func(option string) [][]float64 {
	tb.Helper()
	text, err := os.ReadFile("../../templates/bundle/packed.js")
	if err != nil {
		tb.Fatal(err)
	}
	vm := goja.New()
	if _, err := vm.RunString(strings.ReplaceAll(string(text), "export ", "") +
		"\nfunction lists(text) { return JSON.stringify(unpack(JSON.parse(text)).series.map((s) => Array.from(s.data))) }"); err != nil {
		tb.Fatal(err)
	}
	lists, _ := goja.AssertFunction(vm.Get("lists"))
	return func(option string) (out [][]float64) {
		v, err := lists(goja.Undefined(), vm.ToValue(option))
		if err != nil {
			tb.Fatal(err)
		}
		if err := json.Unmarshal([]byte(v.String()), &out); err != nil {
			tb.Fatal(err)
		}
		return out
	}
}

// TestPacked: what is written in letters is read alike here and by the page's script,
// in its order, as far from the value as half of its last digit, and of six digits of the largest.
func TestPacked(t *testing.T) {
	script := page(t)
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(few+1, 300).Draw(t, "n")
		log := [2]bool{rapid.Bool().Draw(t, "log x"), rapid.Bool().Draw(t, "log y")}
		size := rapid.Float64Range(-9, 9).Draw(t, "size")
		x, y := 0.0, 0.0
		step := rapid.SampledFrom([]float64{0, 0.01, 0.005, 1. / 256, 1. / 300, 7}).Draw(t, "step")
		wild := rapid.Float64Range(0, 1).Draw(t, "wild")
		data := make(points, n)
		for i := range data {
			if y += rapid.Float64Range(-1, 1).Draw(t, "y"); rapid.Float64Range(0, 1).Draw(t, "again") < wild {
				y = 3
			}
			if x = float64(i) * step; step == 0 {
				x = math.Pow(10, rapid.Float64Range(-2, 1).Draw(t, "x"))
			}
			data[i] = [2]float64{x, y * math.Pow(10, size)}
			for k := range 2 {
				if log[k] {
					data[i][k] = math.Abs(data[i][k]) + math.Pow(10, size-3)
				}
			}
		}
		text, err := json.Marshal(pack(data, log[0], log[1]))
		if err != nil {
			t.Fatal(err)
		}
		if strings.ContainsAny(string(text), "<>&\\'\u2028") && strings.ContainsAny(string(text), "<>&\\") {
			t.Fatalf("letters that something reads: %s", text)
		}
		got := script(`{"series":[{"type":"line","data":` + string(text) + `}]}`)[0]
		if len(got) != 2*n {
			t.Fatalf("%d numbers of %d points", len(got), n)
		}
		if text[0] == '[' { // in numbers: five digits of each
			for i, p := range data {
				for k := range 2 {
					if v := got[2*i+k]; math.Abs(v-p[k]) > 5.001e-5*math.Abs(p[k]) {
						t.Fatalf("point %d is %v, was %v", i, v, p[k])
					}
				}
			}
			return
		}
		var p packedData
		if err := json.Unmarshal(text, &p); err != nil {
			t.Fatal(err)
		}
		for k, c := range []packedColumn{p.X, p.Y} {
			largest := 0.0
			for _, q := range data {
				largest = math.Max(largest, math.Abs(q[k]))
			}
			for i, v := range c.read(t, n) {
				if v != got[2*i+k] {
					t.Fatalf("column %d: value %d is %v here and %v in the page", k, i, v, got[2*i+k])
				}
				if want := data[i][k]; math.Abs(v-want) > 5.001e-6*largest || log[k] && math.Abs(v-want) > 5.001e-6*want || math.Abs(v-want) > 0.501*math.Pow(10, -float64(c.power)) {
					t.Fatalf("column %d: value %d is %v, was %v of %v", k, i, v, want, largest)
				}
			}
		}
	})
}

// TestPackedTimes: times on a grid are told exactly, in a few letters; a value is the
// decimal number that it is written as, not one beside it.
func TestPackedTimes(t *testing.T) {
	for _, step := range []float64{0.01, 0.005, 0.02, 0.0025, 1. / 256, 0.001} {
		data := make(points, 3000)
		for i := range data {
			data[i] = [2]float64{float64(i) * step, math.Sin(float64(i))}
		}
		p := pack(data, false, false).(packed)
		if len(p.X.text) > 12 {
			t.Errorf("step %g: %d letters", step, len(p.X.text))
		}
		for i, v := range (packedColumn{p.X.power, p.X.order, p.X.divisor, p.X.text}).read(t, len(data)) {
			if want := float64(i) * step; math.Abs(v-want) > 1e-12*want {
				t.Fatalf("step %g: time %d is %v", step, i, v)
			}
		}
		for _, v := range (packedColumn{p.Y.power, p.Y.order, p.Y.divisor, p.Y.text}).read(t, len(data)) {
			if text := fmt.Sprintf("%.6f", v); fmt.Sprint(v) != "0" && len(fmt.Sprint(math.Abs(v))) > len(text) {
				t.Fatalf("%v has more digits than it was given", v)
			}
		}
	}
}

// TestPackedSize: a record in letters takes a quarter of the numbers.
func TestPackedSize(t *testing.T) {
	x, y := noise(4000)
	data := make(points, len(x))
	for i := range x {
		data[i] = [2]float64{x[i], y[i]}
	}
	before, _ := json.Marshal(data)
	after, _ := json.Marshal(pack(data, false, false))
	if 4*len(after) > len(before) {
		t.Errorf("%d bytes of %d", len(after), len(before))
	}
}

// TestPackedPicture: drawn of letters and of numbers, a picture is the same.
func TestPackedPicture(t *testing.T) {
	draw := func(data any) string {
		text, err := json.Marshal(data)
		if err != nil {
			t.Fatal(err)
		}
		svg, err := script.SVG([]byte(`{"animation":false,"grid":[{"top":10,"height":80,"right":10}],
"xAxis":[{"type":"value","min":0,"max":2,"axisLabel":{},"nameTextStyle":{}}],"yAxis":[{"type":"value","min":-2,"max":2,"axisLabel":{}}],
"series":[{"type":"line","id":"s0.0","clip":true,"symbol":"none","data":`+string(text)+`}]}`), 300, 120, "p")
		if err != nil {
			t.Fatal(err)
		}
		return svg
	}
	var data points
	for i := range 200 {
		data = append(data, [2]float64{float64(i) / 100, math.Round(1e4*math.Sin(float64(i)/9)) / 1e4})
	}
	if _, ok := pack(data, false, false).(packed); !ok {
		t.Fatal("not in letters")
	}
	if a, b := draw(data), draw(pack(data, false, false)); a != b || strings.Count(a, "L") < 100 {
		t.Errorf("in numbers\n%s\nin letters\n%s", a, b)
	}
}
