package chart

import (
	"bytes"
	"crypto/sha256"
	"encoding/json"
	"encoding/xml"
	"flag"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"sync"
	"testing"

	"quoin/calc/exhibit"
)

var update = flag.Bool("update", false, "write the golden files anew")

// TestGolden compares the option of every kind of figure with its golden file, which
// shows the long rows of points as their ends and a digest.
func TestGolden(t *testing.T) {
	for _, f := range family() {
		t.Run(f.ID, func(t *testing.T) {
			option, height, err := Option(f)
			if err != nil {
				t.Fatal(err)
			}
			got := fmt.Sprintf("height %d px\n%s\n", height, readable(t, option))
			path := filepath.Join("testdata", f.ID+".golden")
			if *update {
				if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
					t.Fatal(err)
				}
				return
			}
			want, err := os.ReadFile(path)
			if err != nil {
				t.Fatal(err)
			}
			if got != string(want) {
				t.Errorf("option of %s differs from %s (run with -update to see what changes):\n%s", f.ID, path, firstDifference(got, string(want)))
			}
		})
	}
}

func readable(t *testing.T, option []byte) string {
	var tree any
	if err := json.Unmarshal(option, &tree); err != nil {
		t.Fatal(err)
	}
	var walk func(any) any
	walk = func(n any) any {
		switch n := n.(type) {
		case map[string]any:
			for k, v := range n {
				n[k] = walk(v)
			}
		case []any:
			if len(n) > 12 {
				text, _ := json.Marshal(n)
				return fmt.Sprintf("%d items from %v to %v, %x", len(n), n[0], n[len(n)-1], sha256.Sum256(text))[:90]
			}
			for i := range n {
				n[i] = walk(n[i])
			}
		case string:
			if len(n) > 200 {
				return fmt.Sprintf("%d letters from %s, %x", len(n), n[:20], sha256.Sum256([]byte(n)))[:90]
			}
		}
		return n
	}
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	e.SetIndent("", " ")
	if err := e.Encode(walk(tree)); err != nil {
		t.Fatal(err)
	}
	return strings.TrimSpace(b.String())
}

func firstDifference(got, want string) string {
	g, w := strings.Split(got, "\n"), strings.Split(want, "\n")
	for i := range min(len(g), len(w)) {
		if g[i] != w[i] {
			return fmt.Sprintf("line %d\n got %s\nwant %s", i+1, g[i], w[i])
		}
	}
	return fmt.Sprintf("%d lines, want %d", len(g), len(w))
}

// TestSameBytes draws every figure several times at once: pool and order leave no trace.
func TestSameBytes(t *testing.T) {
	figures := append(family()[2:], family()[0]) // not all the long ones
	draw := func() (out []string) {
		for _, f := range figures {
			option, _, err := Option(f)
			if err != nil {
				t.Error(err)
			}
			svg, err := Picture(f, Prefix(f.ID))
			if err != nil {
				t.Error(err)
			}
			out = append(out, string(option)+svg)
		}
		return out
	}
	var wait sync.WaitGroup
	all := make([][]string, 2)
	for i := range all {
		wait.Go(func() { all[i] = draw() })
	}
	wait.Wait()
	for i := range figures {
		if all[0][i] != all[1][i] {
			t.Errorf("%s: the bytes differ from one drawing to the next", figures[i].ID)
		}
	}
}

// element is one element of a picture.
type element struct {
	name  string
	attrs map[string]string
	text  string
}

// parse reads an SVG strictly and refuses what a picture must not have.
func parse(t *testing.T, svg string) []element {
	t.Helper()
	allowed := map[string]bool{"svg": true, "title": true, "desc": true, "g": true, "path": true, "text": true, "tspan": true, "defs": true, "clipPath": true}
	var out []element
	var open []int
	ids := map[string]bool{}
	d := xml.NewDecoder(strings.NewReader(svg))
	for {
		token, err := d.Token()
		if err == io.EOF {
			return out
		}
		if err != nil {
			t.Fatalf("not well-formed: %v\n%.300s", err, svg)
		}
		switch k := token.(type) {
		case xml.StartElement:
			e := element{name: k.Name.Local, attrs: map[string]string{}}
			if !allowed[e.name] {
				t.Errorf("element <%s> in a picture", e.name)
			}
			for _, a := range k.Attr {
				e.attrs[a.Name.Local] = a.Value
				if strings.HasPrefix(a.Name.Local, "on") || a.Name.Local == "href" || a.Name.Local == "class" && e.name != "svg" || strings.HasPrefix(a.Name.Local, "ecmeta") {
					t.Errorf("attribute %s in <%s>", a.Name.Local, e.name)
				}
				if strings.Contains(a.Value, "NaN") || strings.Contains(a.Value, "Infinity") || strings.Contains(a.Value, "undefined") {
					t.Errorf("%s=%q in <%s>", a.Name.Local, a.Value, e.name)
				}
				if a.Name.Local == "id" {
					if ids[a.Value] {
						t.Errorf("id %s twice", a.Value)
					}
					ids[a.Value] = true
				}
			}
			open = append(open, len(out))
			out = append(out, e)
		case xml.EndElement:
			open = open[:len(open)-1]
		case xml.CharData:
			if len(open) > 0 {
				out[open[len(open)-1]].text += string(k)
			}
		}
	}
}

func texts(es []element) (out []string) {
	for _, e := range es {
		if e.name == "text" {
			out = append(out, e.text)
		}
	}
	return out
}

// TestPictures checks every kind at both widths: well-formed XML, no foreign element,
// no NaN, alone-standing ids, every name written.
func TestPictures(t *testing.T) {
	for _, f := range family() {
		option, height, err := Option(f)
		if err != nil {
			t.Fatal(err)
		}
		both, err := Pictures(f, option, height, Prefix(f.ID))
		if err != nil {
			t.Fatal(err)
		}
		parse(t, "<svg>"+both+"</svg>") // ids differ between the two
		for _, svg := range strings.SplitAfter(both, "</svg>")[:2] {
			es := parse(t, svg)
			if es[0].attrs["role"] != "img" || es[1].text != f.Caption || es[2].text != f.Alt {
				t.Errorf("%s: the picture does not say what it is", f.ID)
			}
			said := strings.Join(texts(es), " ")
			for _, p := range f.Panels {
				for _, s := range p.Series {
					if f.Beside && len(p.Series) == 1 {
						continue
					}
					for _, word := range strings.Fields(s.Label) {
						if !strings.Contains(strings.ReplaceAll(said, "\u00a0", " "), word) {
							t.Errorf("%s: the curve %q is not named", f.ID, s.Label)
						}
					}
				}
			}
		}
	}
}

// TestTicks looks at the numbers on the axes of a logarithmic spectrum.
func TestTicks(t *testing.T) {
	svg, err := Picture(spectrum(), "p")
	if err != nil {
		t.Fatal(err)
	}
	said := "|" + strings.Join(texts(parse(t, svg)), "|") + "|"
	for _, want := range []string{"0.05", "0.1", "0.2", "0.5", "1", "2", "4", "1.4", "period T, s", "PSA, g", "T₁ 0.642 s", "T = 0.700 s"} {
		if !strings.Contains(said, "|"+want+"|") {
			t.Errorf("%q is not written; there are %s", want, said)
		}
	}
	svg, err = Picture(history(), "p")
	if err != nil {
		t.Fatal(err)
	}
	if said := strings.Join(texts(parse(t, svg)), "|"); !strings.Contains(said, "−0.2") || strings.Contains(said, "-") {
		t.Errorf("minus signs: %s", said)
	}
}

// TestPlaces: on logarithmic axes equal ratios are equally far apart, and the numbers
// stand where the curve says so; a value in its unit stands at its number.
func TestPlaces(t *testing.T) {
	f := exhibit.Figure{ID: "places", Panels: []exhibit.Panel{{
		X:      exhibit.Axis{Unit: unit("ms"), Log: true},
		Y:      exhibit.Axis{Unit: unit("kN"), Log: true, Min: ptr(1e3), Max: ptr(1e5)},
		Series: []exhibit.FigSerie{{X: []float64{0.1, 1, 10}, Y: []float64{1e3, 1e4, 1e5}, Role: exhibit.Governing}},
	}}}
	svg, err := Picture(f, "p")
	if err != nil {
		t.Fatal(err)
	}
	var curve [][2]float64
	ticks := map[string][]float64{} // text: x, y
	for _, e := range parse(t, svg) {
		if e.attrs["stroke-width"] == "2.8" {
			curve = followed(t, e.attrs["d"])
		}
		if m := regexp.MustCompile(`translate\((\S+) (\S+)\)`).FindStringSubmatch(e.attrs["transform"]); m != nil && e.name == "text" {
			x, _ := strconv.ParseFloat(m[1], 64)
			y, _ := strconv.ParseFloat(m[2], 64)
			ticks[e.text] = append(ticks[e.text], x, y)
		}
	}
	if len(curve) != 3 {
		t.Fatalf("%d points drawn of 3 in %s", len(curve), svg)
	}
	var x, y [3]float64
	for i, at := range curve {
		x[i], y[i] = at[0], at[1]
	}
	if math.Abs(x[1]-(x[0]+x[2])/2) > 0.2 || math.Abs(y[1]-(y[0]+y[2])/2) > 0.2 || x[2]-x[0] < 500 || y[0]-y[2] < 200 {
		t.Errorf("the curve runs %v, %v", x, y)
	}
	if at := ticks["1000"]; len(at) != 2 || math.Abs(at[0]-x[1]) > 1 {
		t.Errorf("1000 ms stands at %v, the curve at %g", at, x[1])
	}
	if at := ticks["10"]; len(at) != 2 || math.Abs(at[1]-y[1]) > 1 {
		t.Errorf("10 kN stands at %v, the curve at %g", at, y[1])
	}
}

// TestPeakKept: the longest curve of a thinned history reaches the ringed peak.
func TestPeakKept(t *testing.T) {
	svg, err := Picture(history(), "p")
	if err != nil {
		t.Fatal(err)
	}
	curve, ring := "", math.NaN()
	for _, e := range parse(t, svg) {
		if len(e.attrs["d"]) > len(curve) {
			curve = e.attrs["d"]
		}
		if m := regexp.MustCompile(`^matrix\(3\.5,0,0,3\.5,[\d.]+,([\d.]+)\)`).FindStringSubmatch(e.attrs["transform"]); m != nil {
			ring, _ = strconv.ParseFloat(m[1], 64)
		}
	}
	lowest := math.Inf(-1) // y runs downward, the peak is negative
	points := followed(t, curve)
	for _, at := range points {
		lowest = math.Max(lowest, at[1])
	}
	if !(math.Abs(lowest-ring) < 0.1) {
		t.Errorf("the curve goes down to %g px, the ring is at %g px", lowest, ring)
	}
	if len(points) > 4000 || len(points) < 300 {
		t.Errorf("%d points drawn of 8000", len(points))
	}
}

// TestHostile puts hostile text everywhere: it must come out as text.
func TestHostile(t *testing.T) {
	for _, bad := range []string{
		`</script><script>alert(1)</script>`, `"><img src=x onerror=alert(1)>`, `{a|b}{b0}{c}`, "fn:tip", "fn:name", "__proto__", "constructor",
		"line\u2028end\u2029", `]]><!-- & &lt; -->`, "a\x00b\x1b[31m", "\u202egnp", `zr0-c1 class="x"`, "'+alert(1)+'", "\xff\xfe", strings.Repeat("W", 300),
	} {
		f := drifts()
		f.Caption, f.Alt = bad, bad
		f.Panels[0].Title = bad
		f.Panels[0].X.Label, f.Panels[0].Y.Label = bad, bad
		f.Panels[0].Y.Names = []exhibit.TickName{{At: 0, Name: bad}, {At: 15.2, Name: bad}}
		for i := range f.Panels[0].Series {
			f.Panels[0].Series[i].Label = bad
		}
		f.Panels[0].Points[0].Label = bad
		f.Panels[0].Lines = []exhibit.RefLine{{Vertical: true, At: 0.01, Label: bad}, {At: 3, Label: bad}}
		g := spectrum()
		for i := range g.Panels[0].Series {
			g.Panels[0].Series[i].Label = bad
		}
		for _, f := range []exhibit.Figure{f, g} {
			option, _, err := Option(f)
			if err != nil {
				t.Fatal(err)
			}
			if bytes.ContainsAny(option, "<>&\u2028\u2029\x00\x1b") {
				t.Errorf("%q: the option holds characters that HTML reads", bad)
			}
			svg, err := Picture(f, "p")
			if err != nil {
				t.Fatalf("%q: %v", bad, err)
			}
			es := parse(t, svg)
			want := strings.ReplaceAll(clean(bad), " ", "")
			said := strings.NewReplacer(" ", "", "\n", "").Replace(strings.Join(texts(es), ""))
			if len(want) < 100 && !strings.Contains(said, want) {
				t.Errorf("%q is not written as it is: %.400s", bad, said)
			}
		}
	}
}

// TestRefused: what cannot be drawn is an error that names the figure.
func TestRefused(t *testing.T) {
	change := map[string]func(*exhibit.Figure){
		"no panel":        func(f *exhibit.Figure) { f.Panels = nil },
		"without a serie": func(f *exhibit.Figure) { f.Panels[0].Series = nil },
		"3 values over 2": func(f *exhibit.Figure) {
			f.Panels[0].Series = []exhibit.FigSerie{{X: []float64{1, 2}, Y: []float64{1, 2, 3}}}
		},
		"0 values over 0": func(f *exhibit.Figure) { f.Panels[0].Series = []exhibit.FigSerie{{}} },
		"y 2":             func(f *exhibit.Figure) { f.Panels[0].Series[0].Y[1] = math.NaN() },
		"x 3":             func(f *exhibit.Figure) { f.Panels[0].Series[0].X[2] = math.Inf(1) },
		"cannot end at":   func(f *exhibit.Figure) { f.Panels[0].X.Min = ptr(0) }, // logarithmic
		"runs from":       func(f *exhibit.Figure) { f.Panels[0].Y.Min, f.Panels[0].Y.Max = ptr(2), ptr(1) },
		"the line":        func(f *exhibit.Figure) { f.Panels[0].Lines[0].At = math.NaN() },
		"the point":       func(f *exhibit.Figure) { f.Panels[0].Points = []exhibit.RefPoint{{X: math.NaN()}} },
	}
	for want, spoil := range change {
		f := spectrum()
		spoil(&f)
		if _, _, err := Option(f); err == nil || !strings.Contains(err.Error(), want) || !strings.Contains(err.Error(), f.ID) {
			t.Errorf("want an error with %q, got %v", want, err)
		}
	}
}

// TestDegenerate: constant, single and zero data draw without NaN, and values that differ
// by rounding alone do not count ticks for ever.
func TestDegenerate(t *testing.T) {
	for _, y := range [][]float64{{0}, {3}, {0, 0}, {-2, -2}, {1e-12, 2e-12}, {1e12, -1e12}, {1, 1 + 0x1p-52}, {1e15, 1e15 + 1}} {
		for _, a := range []exhibit.Axis{{}, {Symmetric: true}, {Log: true}} {
			x := []float64{1, 2}[:len(y)]
			f := exhibit.Figure{ID: "d", Panels: []exhibit.Panel{{Y: a, Series: []exhibit.FigSerie{{X: x, Y: y, Label: "c", Role: exhibit.Data}}}}}
			svg, err := Picture(f, "d")
			if err != nil {
				t.Fatalf("%v %+v: %v", y, a, err)
			}
			parse(t, svg)
		}
	}
}

func BenchmarkPictureHistory(b *testing.B)  { benchmarkPicture(b, history()) }
func BenchmarkPictureSpectrum(b *testing.B) { benchmarkPicture(b, spectrum()) }

func benchmarkPicture(b *testing.B, f exhibit.Figure) {
	if _, err := Picture(f, "p"); err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		Picture(f, "p")
	}
}

func BenchmarkOptionHistory(b *testing.B) {
	f := history()
	for b.Loop() {
		Option(f)
	}
}
