package document

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"quoin/calc/exhibit"
)

// accelerations of a record block, as used.
func accelerations(t *testing.T, p *exhibit.Package, id string) []float64 {
	t.Helper()
	for _, c := range p.Series {
		if c.ID == id+".a" {
			return c.Y.SI
		}
	}
	t.Fatalf("no series %s.a", id)
	return nil
}

// TestTreatByHand: the sawtooth 0, 3, -3, 0 at 0, 1, 2, 3 s, treated. The record is cut
// first and scaled last; steps run in the order written, and may be repeated.
func TestTreatByHand(t *testing.T) {
	h := math.Sqrt2 / 2
	for name, c := range map[string]struct {
		lines []string
		want  []float64
	}{
		"line":            {[]string{"treat: [baseline]"}, []float64{-0.9, 2.7, -2.7, 0.9}}, // slope -3/5
		"line, scaled":    {[]string{"scale: -2", "treat:", "  - baseline: { order: 1 }"}, []float64{1.8, -5.4, 5.4, -1.8}},
		"cut first":       {[]string{"from: 1 s", "treat:", "  - baseline: 0", "  - taper: { start: 1 s }"}, []float64{0, -3, 0}},
		"taper then mean": {[]string{"from: 1 s", "treat:", "  - taper: { start: 1 s }", "  - baseline: 0"}, []float64{1, -2, 1}},
		"taper":           {[]string{"treat:", "  - taper: 1.5 s"}, []float64{0, 3 * 0.75, -3 * 0.75, 0}}, // (1 - cos 120°)/2
		"taper twice":     {[]string{"treat:", "  - taper: 1.5 s", "  - taper: { end: 1.5 s }"}, []float64{0, 3 * 0.75, -3 * 0.75 * 0.75, 0}},
		"taper at start":  {[]string{"treat:", "  - taper:", "      start: 2 s"}, []float64{0, 3 * h * h, -3, 0}},
		// v is 0 1.5 1.5 0, fitted by c t: c = (1.5 + 3)/14
		"velocity":   {[]string{"treat:", "  - baseline: { order: 0, fit: velocity }"}, []float64{-4.5 / 14, 3 - 4.5/14, -3 - 4.5/14, -4.5 / 14}},
		"given step": {[]string{"step: 2 s", "treat:", "  - taper: 3 s"}, []float64{0, 2.25, -2.25, 0}},
	} {
		t.Run(name, func(t *testing.T) {
			p := ran(t, calc("record r", append([]string{"file: r.csv"}, c.lines...)...), map[string]string{"r.csv": sawtooth})
			got := accelerations(t, p, "r")
			if len(got) != len(c.want) {
				t.Fatalf("%v, want %v", got, c.want)
			}
			for i := range got {
				if math.Abs(got[i]-c.want[i]) > 1e-13 {
					t.Errorf("%v, want %v", got, c.want)
					break
				}
			}
		})
	}
}

// waves is a record of 401 samples at 0.01 s.
func waves() string {
	var b strings.Builder
	b.WriteString("t [s],a [g]\n")
	for i := range 401 {
		x := float64(i) / 100
		fmt.Fprintf(&b, "%.2f,%.6f\n", x, 0.05*x*(4-x)*(math.Sin(9*x)+0.5*math.Cos(40*x)))
	}
	return b.String()
}

// TestTreatShown: a filter is echoed, drawn before and after with its spectrum and
// gain, and tabulated; its corners become the usable band, the shorter of two governing, and
// spectra beyond it say so.
func TestTreatShown(t *testing.T) {
	files := map[string]string{"r.csv": waves()}
	body := func(usable string) string {
		return calc("record r", "file: r.csv", usable, "treat:", "  - taper: 0.2 s", "  - bandpass: { from: 0.5 Hz, to: 20 Hz }", "  - resample: 0.005 s") +
			calc("periods g", "values: [0.02 s, 0.1 s, 1.55 s, 1.7 s]") + calc("spectrum rs", "record: r", "periods: g")
	}
	p := ran(t, body(""), files)
	rows := table(t, p, "r-treat").Rows
	if len(rows) != 4 || rows[2][1].Text != "bandpass" {
		t.Fatalf("the table of steps is %v", rows)
	}
	for i, samples := range []float64{401, 401, 401 + 2*1200, 2*(400+2*1200) + 1} {
		if got := rows[i][2].Numbers[0].Value; got != samples {
			t.Errorf("row %d has %v samples, want %v", i+1, got, samples)
		}
	}
	if last := rows[3][3].Numbers[0].Value; last != value(t, p, "r.pga").Value.SI[0] {
		t.Errorf("the last row has a PGA of %v, the record %v", last, value(t, p, "r.pga").Value.SI)
	}
	f := figureOf(t, p, "r-treat-2")
	for i := range f.Panels {
		before, after := f.Panels[i].Series[0], f.Panels[i].Series[1]
		if before.Role != exhibit.Secondary || after.Role != exhibit.Data || len(before.X) != 401 || len(after.X) != 2801 || before.X[0] != after.X[1200] {
			t.Errorf("panel %d: %d samples from %v s before, %d after", i+1, len(before.X), before.X[0], len(after.X))
		}
	}
	fourier := figureOf(t, p, "r-treat-2-fourier")
	if lines := fourier.Panels[0].Lines; len(lines) != 2 || lines[0].At != 0.5 || lines[1].At != 20 {
		t.Errorf("corners are marked at %v", lines)
	}
	gain := fourier.Panels[1].Series[0]
	for i, x := range gain.X {
		if want := 1 / (1 + math.Pow(math.Tan(math.Pi*0.005)/math.Tan(math.Pi*x/100), 8)) / (1 + math.Pow(math.Tan(math.Pi*x/100)/math.Tan(math.Pi*0.2), 8)); math.Abs(gain.Y[i]-want) > 1e-12 {
			t.Errorf("gain at %v Hz is %v, want %v", x, gain.Y[i], want)
		}
	}
	warned := func(p *exhibit.Package) (out []string) {
		for _, w := range p.Warnings {
			if w.Code == "usable-period" {
				out = append(out, w.Summary)
			}
		}
		return out
	}
	if w := warned(p); len(w) != 2 || !strings.Contains(w[0]+w[1], "below 0.0625 s") || !strings.Contains(w[0]+w[1], "beyond 1.60 s") {
		t.Errorf("warnings of the usable band: %q", w)
	}
	if w := warned(ran(t, body("usable_period: 1.5 s"), files)); len(w) != 2 || !strings.Contains(w[0]+w[1], "beyond 1.50 s") {
		t.Errorf("a shorter period given: %q", w)
	}
	if w := warned(ran(t, body("usable_period: 3 s"), files)); len(w) != 3 || !slices.ContainsFunc(w, func(s string) bool {
		return strings.Contains(s, "limits the usable periods to 1.6 s, less than the 3 s given")
	}) {
		t.Errorf("a longer period given: %q", w)
	}
	if long, short := value(t, p, "r.usable_period").Value.SI[0], value(t, p, "r.shortest_period").Value.SI[0]; math.Abs(long-1.6) > 1e-12 || math.Abs(short-0.0625) > 1e-12 {
		t.Errorf("usable from %v to %v s, want 0.0625 to 1.6 s", short, long)
	}
	checks := 0
	items(p, func(b *exhibit.Block, _ string, it exhibit.Item) {
		if b.Name == "r" && strings.HasPrefix(it.Text, "Cross-checks") {
			checks = strings.Count(it.Text, "step ")
		}
	})
	if checks != 2 {
		t.Errorf("%d steps are cross-checked, want the filter and the resampling", checks)
	}
}
