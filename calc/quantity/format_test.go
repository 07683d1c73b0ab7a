package quantity

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestFormat(t *testing.T) {
	for _, c := range []struct {
		x    float64
		sig  int
		want string
	}{
		// significant digits, trailing zeros stay
		{15.2, 4, "15.20"}, {1, 4, "1.000"}, {0.0466, 3, "0.0466"}, {0.5, 4, "0.5000"}, {100, 3, "100"}, {1.005, 3, "1.00"}, {2.5, 1, "2"}, {0.05, 4, "0.05000"},
		// the integer part is never rounded away
		{1234, 3, "1234"}, {1234.5, 3, "1234"}, {1235.5, 3, "1236"}, {99999.7, 4, "100\u202f000"}, {123.4, 1, "123"},
		// rounding that carries into a new digit
		{9.9996, 4, "10.00"}, {99.996, 4, "100.0"}, {999.96, 4, "1000"}, {9999.6, 4, "10\u202f000"}, {0.99996, 4, "1.000"}, {0.099999, 4, "0.1000"}, {9.9994, 4, "9.999"},
		// groups from five digits on
		{9999, 4, "9999"}, {10000, 4, "10\u202f000"}, {1234567, 4, "1\u202f234\u202f567"}, {12345.678, 7, "12\u202f345.68"}, {-12345, 4, "\u221212\u202f345"},
		// powers of ten stand in the right digit
		{0.001, 4, "0.001000"}, {0.01, 4, "0.01000"}, {0.1, 4, "0.1000"}, {10, 4, "10.00"}, {1000, 4, "1000"}, {1e6, 4, "1\u202f000\u202f000"},
		// scientific form
		{0.0009999, 4, "9.999×10⁻⁴"}, {0.00099996, 4, "0.001000"}, {1.234e-5, 4, "1.234×10⁻⁵"}, {9999999, 4, "9\u202f999\u202f999"}, {9999999.4, 4, "9\u202f999\u202f999"}, {9999999.7, 4, "1.000×10⁷"}, {1e7, 4, "1.000×10⁷"},
		{-1.5e12, 2, "\u22121.5×10¹²"}, {1e-300, 4, "1.000×10⁻³⁰⁰"}, {9.9999e9, 4, "1.000×10¹⁰"}, {5e-324, 4, "4.941×10⁻³²⁴"},
		// zero and the sign
		{0, 4, "0"}, {math.Copysign(0, -1), 4, "0"}, {-0.4, 0, "\u22120.4"}, {-0.4, 1, "\u22120.4"}, {-1.2, 4, "\u22121.200"},
		// what no engine should give is shown for what it is
		{math.NaN(), 4, "not a number"}, {math.Inf(1), 4, "∞"}, {math.Inf(-1), 4, "\u2212∞"},
	} {
		if got := Format(c.x, c.sig); got != c.want {
			t.Errorf("Format(%v, %d) = %q, want %q", c.x, c.sig, got, c.want)
		}
	}
}

// read takes a formatted number back.
func read(t interface{ Fatalf(string, ...any) }, s string) float64 {
	s = strings.NewReplacer("\u2212", "-", "\u202f", "", "×10", "e", "⁻", "-").Replace(s)
	for i, d := range []string{"⁰", "¹", "²", "³", "⁴", "⁵", "⁶", "⁷", "⁸", "⁹"} {
		s = strings.ReplaceAll(s, d, strconv.Itoa(i))
	}
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatalf("%q: %v", s, err)
	}
	return x
}

func TestFormatIsWhatRoundedSays(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.Float64Range(-10, 10).Draw(t, "x") * math.Pow(10, float64(rapid.IntRange(-12, 12).Draw(t, "power")))
		sig := rapid.IntRange(1, 17).Draw(t, "digits")
		text, r := Format(x, sig), Rounded(x, sig)
		if got := read(t, text); got != r {
			t.Fatalf("%v at %d is shown as %s but Rounded says %v", x, sig, text, r)
		}
		if x == 0 {
			return
		}
		if rel := math.Abs(r-x) / math.Abs(x); rel > 0.5*math.Pow(10, float64(1-sig))*(1+1e-12)+3e-16 {
			t.Fatalf("%v at %d digits is shown as %s, off by %g", x, sig, text, rel)
		}
		if Rounded(r, sig) != r || Format(r, sig) != text {
			t.Fatalf("%v at %d: rounding twice is not rounding once: %s, %s", x, sig, text, Format(r, sig))
		}
		if math.Signbit(x) != strings.HasPrefix(text, "\u2212") || strings.Trim(text, "\u22120.") == "" {
			t.Fatalf("%v is shown as %s", x, text)
		}
		if -r != Rounded(-x, sig) {
			t.Fatalf("%v and its negative round differently", x)
		}
	})
}

func TestRoundedLeavesWhatIsNoNumber(t *testing.T) {
	if !math.IsNaN(Rounded(math.NaN(), 4)) || !math.IsInf(Rounded(math.Inf(-1), 4), -1) || Rounded(0, 4) != 0 {
		t.Error("NaN, infinities and zero are not rounded")
	}
}

func TestGrouped(t *testing.T) {
	for in, want := range map[string]string{"1234": "1234", "12345": "12\u202f345", "123456.789": "123\u202f456.789", "-1234": "-1234", "-123456": "-123\u202f456", "": "", "0.12345": "0.12345"} {
		if got := Grouped(in); got != want {
			t.Errorf("Grouped(%q) = %q, want %q", in, got, want)
		}
	}
}

func TestPlain(t *testing.T) {
	zero := 0.0
	for want, x := range map[string]float64{"0": -zero, "0.1": 0.1, "1e+21": 1e21, "-2.5": -2.5} {
		if got := Plain(x); got != want {
			t.Errorf("Plain(%v) = %q, want %q", x, got, want)
		}
	}
	if got := Plain(math.Copysign(0, -1)); got != "0" {
		t.Errorf("negative zero is written %q", got)
	}
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.Float64().Draw(t, "x")
		if y, err := strconv.ParseFloat(Plain(x), 64); err != nil || y != x {
			t.Fatalf("%v is written %s", x, Plain(x))
		}
	})
}

// TestExact: the digits that show a given number as it is.
func TestExact(t *testing.T) {
	for _, c := range []struct {
		x    float64
		want string
	}{
		{8, "8"}, {5.5, "5.5"}, {0.0466, "0.0466"}, {0.92, "0.92"}, {100, "100"}, {-2, "\u22122"}, {0, "0"}, {2.0 / 3, "0.666666666666667"}, {5.0000001, "5.0000001"}, {1000.1234, "1000.1234"}, {0.07 * 100, "7"},
	} {
		if got := Format(c.x, Exact(c.x)); got != c.want {
			t.Errorf("%v is shown as %q, want %q", c.x, got, c.want)
		}
	}
}

// TestShort: a number that few digits show exactly has no more.
func TestShort(t *testing.T) {
	for x, want := range map[float64]string{8: "8", 0.05: "0.05", 2.0 / 3: "0.6667", 1234567: "1\u202f234\u202f567", 0: "0", 1.25: "1.25"} {
		if got := Short(x); got != want {
			t.Errorf("%v is short %q, want %q", x, got, want)
		}
	}
}
