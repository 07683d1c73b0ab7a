package chart

import (
	"encoding/json"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
	"unicode/utf8"

	"pgregory.net/rapid"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// noise is n samples of a deterministic record with two spikes.
func noise(n int) (x, y []float64) {
	for i := range n {
		x = append(x, 0.01*float64(i))
		y = append(y, math.Sin(0.37*float64(i))*math.Exp(-math.Abs(float64(i)/float64(n)-0.3)))
	}
	y[n/3], y[n/2+1] = 7, -9
	return x, y
}

// TestThin: a long curve keeps its ends, its extremes in every column and what is
// ringed, in order, and of every point kept it keeps the place.
func TestThin(t *testing.T) {
	x, y := noise(500000)
	smallest := 0
	for i, v := range y {
		if v > 0 && (y[smallest] <= 0 || v < y[smallest]) {
			smallest = i
		}
	}
	for name, p := range map[string]exhibit.Panel{
		"plain":       {},
		"log x":       {X: exhibit.Axis{Log: true}},
		"log y":       {Y: exhibit.Axis{Log: true}},
		"both logs":   {X: exhibit.Axis{Log: true}, Y: exhibit.Axis{Log: true}},
		"limits of x": {X: exhibit.Axis{Min: new(10.0), Max: new(20.0)}},
	} {
		p.Points = []exhibit.RefPoint{{X: x[123456], Y: y[123456]}, {X: x[200000] + 0.004, Y: 1}}
		s := thin(p, exhibit.FigSerie{X: x, Y: y})
		if n := len(s.X); n != len(s.Y) || n > 4*columns+20 || n < columns {
			t.Errorf("%s: %d points over %d", name, len(s.Y), n)
		}
		at := map[float64]float64{}
		for i := range s.X {
			at[s.X[i]] = s.Y[i]
			if k := int(math.Round(s.X[i] / 0.01)); x[k] != s.X[i] || y[k] != s.Y[i] {
				t.Fatalf("%s: point %d is none of the curve", name, i)
			}
		}
		if !slices.IsSorted(s.X) {
			t.Errorf("%s: out of order", name)
		}
		for _, i := range []int{0, 499999, 123456, 200000, 200001, 500000 / 3} {
			if v, ok := at[x[i]]; !ok || v != y[i] {
				t.Errorf("%s: point %d is lost", name, i)
			}
		}
		if _, ok := at[x[250001]]; !ok && !p.Y.Log {
			t.Errorf("%s: the trough is lost", name)
		}
		if _, ok := at[x[smallest]]; !ok && p.Y.Log {
			t.Errorf("%s: the smallest positive value is lost", name)
		}
		// Where a column holds few points, all stay.
		for i := 1; i < 30 && p.X.Log; i++ {
			if _, ok := at[x[i]]; !ok {
				t.Errorf("%s: point %d, which has its own column, is lost", name, i)
			}
		}
		for i := 1001; i < 1999 && p.X.Min != nil; i++ {
			if _, ok := at[x[i]]; !ok {
				t.Fatalf("%s: point %d, which has its own column, is lost", name, i)
			}
		}
	}
	// Every column as drawn shows the extremes of the curve in it.
	s := thin(exhibit.Panel{}, exhibit.FigSerie{X: x, Y: y})
	column := columnOf(x, exhibit.Axis{})
	want, got := make([][2]float64, columns), make([][2]float64, columns)
	for i := range x {
		c := &want[column(i)]
		c[0], c[1] = math.Min(c[0], y[i]), math.Max(c[1], y[i])
	}
	for i := range s.X {
		c := &got[column(int(math.Round(s.X[i]/0.01)))]
		c[0], c[1] = math.Min(c[0], s.Y[i]), math.Max(c[1], s.Y[i])
	}
	if !slices.Equal(want, got) {
		t.Error("columns lost their extremes")
	}
	if short := thin(exhibit.Panel{}, exhibit.FigSerie{X: x[:crowded], Y: y[:crowded]}); len(short.X) != crowded {
		t.Error("a short curve was thinned")
	}
}

// TestThinOtherCurves: profiles run along y; loops along neither; one value stays one.
func TestThinOtherCurves(t *testing.T) {
	x, y := noise(50000)
	s := thin(exhibit.Panel{}, exhibit.FigSerie{X: y, Y: x})
	if n := len(s.X); n > 4*columns || !slices.Contains(s.X, 7) || !slices.Contains(s.X, -9) || !slices.IsSorted(s.Y) {
		t.Errorf("a profile: %d points", n)
	}
	for i := range x {
		x[i] = 3 * math.Sin(0.1*float64(i))
	}
	x[777] = 11
	s = thin(exhibit.Panel{Points: []exhibit.RefPoint{{X: x[4321], Y: y[4321]}}}, exhibit.FigSerie{X: x, Y: y})
	if n := len(s.X); n > 4*columns || !slices.Contains(s.X, 11) || !slices.Contains(s.Y, -9) || !slices.Contains(s.X, x[4321]) || s.X[0] != x[0] || s.Y[n-1] != y[len(y)-1] {
		t.Errorf("a loop: %d points", n)
	}
	same := make([]float64, 5000)
	if s = thin(exhibit.Panel{X: exhibit.Axis{Log: true}, Y: exhibit.Axis{Log: true}}, exhibit.FigSerie{X: same, Y: same}); len(s.X) == 0 {
		t.Error("a curve of one point vanished")
	}
}

// TestOptionOfALongRecord: limits of the axes are those of all points, and the ring
// stays on the curve.
func TestOptionOfALongRecord(t *testing.T) {
	x, y := noise(300000)
	f := exhibit.Figure{ID: "r", Panels: []exhibit.Panel{{X: exhibit.Axis{Label: "t", Unit: quantity.MustUnit("s")}, Y: exhibit.Axis{Label: "a", Symmetric: true},
		Series: []exhibit.FigSerie{{Label: "EW", X: x, Y: y}}, Points: []exhibit.RefPoint{{X: x[150001], Y: -9, Label: "PGA"}}}}}
	data, _, err := Option(f)
	if err != nil || len(data) > 200000 {
		t.Fatalf("%d bytes, %v", len(data), err)
	}
	var o struct {
		Thinned bool
		XAxis   []struct{ Min, Max float64 }
		YAxis   []struct{ Min, Max float64 }
		Series  []struct {
			ID   string
			Data json.RawMessage
		}
	}
	if err := json.Unmarshal(data, &o); err != nil {
		t.Fatal(err)
	}
	if !o.Thinned {
		t.Error("it is not said that points are left out")
	}
	if o.XAxis[0].Max != x[len(x)-1] || o.YAxis[0].Min > -9 {
		t.Errorf("limits %+v %+v", o.XAxis, o.YAxis)
	}
	found := false
	for _, s := range o.Series {
		if s.ID == "s0.0" {
			var p packedData
			if err := json.Unmarshal(s.Data, &p); err != nil {
				t.Fatal(err)
			}
			x, y := p.X.read(t, p.N), p.Y.read(t, p.N)
			for i := range x {
				found = found || x[i] == 1500.01 && y[i] == -9
			}
		}
	}
	if !found {
		t.Error("the ringed point is not on the curve")
	}
	if len(f.Panels[0].Series[0].X) != 300000 {
		t.Error("the figure itself was thinned")
	}
}

// TestLongNames: no name in a chart is longer than a chart has room for, whatever
// it names, and names that differ at their ends stay different.
func TestLongNames(t *testing.T) {
	long := strings.Repeat("Ж", 100000)
	one := 1.0
	axis := exhibit.Axis{Label: long + "x", Names: []exhibit.TickName{{At: 1, Name: long + "n"}}, Max: &one}
	panel := exhibit.Panel{Title: long, X: axis, Y: axis,
		Series: []exhibit.FigSerie{{Label: long + " east", X: []float64{0, 1}, Y: []float64{0, 1}}, {Label: long + " north", X: []float64{0, 1}, Y: []float64{1, 1}, Role: exhibit.Limit}},
		Lines:  []exhibit.RefLine{{At: 0.5, Label: long}, {At: 0.5, Vertical: true, Label: long}}, Points: []exhibit.RefPoint{{X: 1, Y: 1, Label: long}}}
	for _, beside := range []bool{false, true} {
		data, _, err := Option(exhibit.Figure{ID: "f", Beside: beside, Panels: []exhibit.Panel{panel, panel}})
		if err != nil || len(data) > 60000 {
			t.Fatalf("%d bytes, %v", len(data), err)
		}
		var o any
		if err := json.Unmarshal(data, &o); err != nil {
			t.Fatal(err)
		}
		longestText(t, o)
		if !strings.Contains(string(data), "…ЖЖЖЖЖЖЖЖЖЖЖЖЖЖ east") {
			t.Error("the end of a name is lost")
		}
	}
	if panel.Title != long || panel.X.Names[0].Name != long+"n" || panel.Series[0].Label != long+" east" {
		t.Error("the figure itself was changed")
	}
	if got := clip("Level 1\n"); got != "Level 1\n" {
		t.Errorf("a short name became %q", got)
	}
}

func longestText(t *testing.T, v any) {
	t.Helper()
	switch v := v.(type) {
	case string:
		if utf8.RuneCountInString(strings.ReplaceAll(v, "\n", "")) > longest+10 { // with its value
			t.Errorf("a text of %d characters", utf8.RuneCountInString(v))
		}
	case []any:
		for _, e := range v {
			longestText(t, e)
		}
	case map[string]any:
		for _, e := range v {
			longestText(t, e)
		}
	}
}

// TestThinProperty: what is kept of any curve are points of it in its order, with both
// ends; and beside every point that is left out, less than a column away, stand kept
// ones that are no lower and no higher: drawn, the line covers the same.
func TestThinProperty(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(crowded+1, 3*crowded).Draw(t, "n")
		random := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 1))
		walk, gap := rapid.Float64Range(0, 1).Draw(t, "walk"), rapid.Float64Range(0, 1).Draw(t, "gap")
		log := rapid.Bool().Draw(t, "log x")
		x, y := make([]float64, n), make([]float64, n)
		for i := range x {
			y[i] = random.NormFloat64()
			x[i] = 0.01
			if i > 0 {
				y[i] += walk * y[i-1]
				x[i] = x[i-1] + 0.01*(1-gap*random.Float64())
			}
		}
		axis := exhibit.Axis{Log: log}
		s := thin(exhibit.Panel{X: axis}, exhibit.FigSerie{X: x, Y: y})
		column := columnOf(x, axis)
		kept := make([][]float64, columns) // values by column
		k := 0
		for i := range x {
			if k < len(s.X) && s.X[k] == x[i] && s.Y[k] == y[i] {
				kept[column(i)] = append(kept[column(i)], y[i])
				k++
			}
		}
		if k != len(s.X) || s.X[0] != x[0] || s.X[k-1] != x[n-1] || k > 4*columns {
			t.Fatalf("%d points of %d kept, %d of them in order", len(s.X), n, k)
		}
		for i := range x {
			if c := kept[column(i)]; len(c) == 0 || y[i] < slices.Min(c) || y[i] > slices.Max(c) {
				t.Fatalf("point %d, %v, is beyond what is kept of its column: %v", i, y[i], c)
			}
		}
	})
}
