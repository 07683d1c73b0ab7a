package chart

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

var (
	moves   = regexp.MustCompile(`[MLlhvHVZ][^A-Za-z]*`)
	numeral = regexp.MustCompile(`-?(?:\d+\.?\d*|\.\d+)`)
)

// followed is the points that a path of straight lines goes through.
func followed(t interface{ Fatalf(string, ...any) }, d string) (out [][2]float64) {
	if rest := moves.ReplaceAllString(d, ""); rest != "" {
		t.Fatalf("a path of more than lines: %q in %q", rest, d)
	}
	x, y := 0.0, 0.0
	for _, m := range moves.FindAllString(d, -1) {
		var v []float64
		for _, text := range numeral.FindAllString(m[1:], -1) {
			f, err := strconv.ParseFloat(text, 64)
			if err != nil {
				t.Fatalf("%v", err)
			}
			v = append(v, f)
		}
		for i := 0; i < len(v); i++ {
			switch m[0] {
			case 'M', 'L':
				x, y = v[i], v[i+1]
				i++
			case 'l':
				x, y = x+v[i], y+v[i+1]
				i++
			case 'h':
				x += v[i]
			case 'v':
				y += v[i]
			default:
				t.Fatalf("numbers after %c", m[0])
			}
			out = append(out, [2]float64{x, y})
		}
	}
	return out
}

// TestStepped: a line in steps goes through its own points within half a tenth of a
// pixel, in their order; it begins and ends and turns where it did, and what is left
// out lies on it.
func TestStepped(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		grid := rapid.SampledFrom([]float64{1, 0.1, 0.0001}).Draw(t, "grid") // coarse: many points in line
		place := rapid.Custom(func(t *rapid.T) float64 {
			return math.Round(rapid.Float64Range(-20, 720).Draw(t, "v")/grid) * grid
		})
		n := rapid.IntRange(1, 60).Draw(t, "n")
		var want [][2]float64
		var line strings.Builder
		for i := range n {
			p := [2]float64{place.Draw(t, "x"), place.Draw(t, "y")}
			if i > 0 && rapid.Bool().Draw(t, "on") {
				p[rapid.IntRange(0, 1).Draw(t, "axis")] = want[i-1][0]
			}
			want = append(want, p)
			line.WriteString(map[bool]string{true: "M", false: "L"}[i == 0] + strconv.FormatFloat(p[0], 'f', -1, 64) + " " + strconv.FormatFloat(p[1], 'f', -1, 64))
		}
		if !strung.MatchString(line.String()) {
			t.Fatalf("not a line: %s", line.String())
		}
		d := stepped(line.String())
		got := followed(t, d)
		near := func(a, b [2]float64) bool { return math.Abs(a[0]-b[0]) < 0.0501 && math.Abs(a[1]-b[1]) < 0.0501 }
		if len(got) == 0 || !near(got[0], want[0]) || !near(got[len(got)-1], want[n-1]) {
			t.Fatalf("ends of %s: %v", d, want)
		}
		k := 0 // the last point of the path that was met
		for i := 1; i < n; i++ {
			if k+1 < len(got) && near(got[k+1], want[i]) {
				k++
				continue
			}
			if near(got[k], want[i]) {
				continue
			}
			if k+1 >= len(got) || !between(got[k], got[k+1], want[i]) {
				t.Fatalf("point %d, %v, is not on %s after %v", i, want[i], d, got[k])
			}
		}
		if k != len(got)-1 {
			t.Fatalf("%s goes where the line does not", d)
		}
	})
}

// between tells whether a point lies on the way from a to b, within half a tenth.
func between(a, b, p [2]float64) bool {
	ux, uy := b[0]-a[0], b[1]-a[1]
	long := ux*ux + uy*uy
	if long == 0 {
		return false
	}
	at := ((p[0]-a[0])*ux + (p[1]-a[1])*uy) / long
	off := math.Hypot(p[0]-a[0]-at*ux, p[1]-a[1]-at*uy)
	return at > -0.1 && at < 1.1 && off < 0.08
}

// TestLean: lines of one pen are one path where nothing stands between them; arcs,
// moved paths and areas stay what they are.
func TestLean(t *testing.T) {
	const pen = ` fill="none" stroke="#000"`
	path := func(d, rest string) string { return fmt.Sprintf(`<path d="%s"%s></path>`, d, rest) + "\n" }
	got := lean(path("M1 2L3.04 2", pen) + path("M1 5L1 9.96L4 3", pen) + "<g>\n" + path("M0 0L1 1L2 2L1 1", pen) + path("M0 0L4 4Z", ` fill="#000"`) + path("M0 0L5 5Z", ` fill="#000"`) +
		path("M0 0A1 1 0 0 1 3 4", pen) + path("M1.123 0L2 2", ` transform="scale(9)"`+pen) + path("M0.123 0L0.2 2", pen) + "</g>")
	want := `<path d="M1 2h2M1 5v5l3-7"` + pen + "/>\n<g>\n" + `<path d="M0 0l2 2-1-1"` + pen + "/>\n" + `<path d="M0 0l4 4Z" fill="#000"/>` + "\n" + `<path d="M0 0l5 5Z" fill="#000"/>` + "\n" +
		`<path d="M0 0A1 1 0 0 1 3 4"` + pen + "/>\n" + `<path d="M1.123 0L2 2" transform="scale(9)"` + pen + "/>\n" + `<path d="M.1 0l.1 2"` + pen + "/>\n</g>"
	if got != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
}

// TestInTenths: places are rounded to a tenth of a pixel and keep their sign.
func TestInTenths(t *testing.T) {
	for text, want := range map[string]string{"328.6875": "328.7", "0": "0", "-0.26": "-0.3", "-3.5": "-3.5", "26.25": "26.3", "306": "306", "293.0001": "293"} {
		if got := inTenths(text); got != want {
			t.Errorf("%s becomes %s, want %s", text, got, want)
		}
	}
}
