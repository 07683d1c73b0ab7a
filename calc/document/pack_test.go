package document

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
)

type packed struct {
	F    float64
	P, Q *float64
	X, Y []float64
	M    map[string][]float64
	S    []string
	N    [][]int
	B    bool
	U    uint8
	At   diag.Range
	In   []exhibit.Place
	Next *packed
}

// TestPackExactly: every bit, nil apart from empty, a pointer to zero apart from
// none, and numbers that are one in memory.
func TestPackExactly(t *testing.T) {
	zero := 0.0
	long := []float64{1, math.Copysign(0, -1), math.NaN(), math.Inf(1), 5e-324}
	for _, v := range []packed{
		{},
		{F: math.Copysign(0, -1), P: &zero, X: []float64{}, M: map[string][]float64{}, S: []string{}, N: [][]int{nil, {}, {math.MinInt, math.MaxInt}}, B: true, U: 255},
		{X: long, Y: long, M: map[string][]float64{"a": long, "b": nil, "c": long[:2], "": long[1:]}, S: []string{"", "\xff"}},
		{X: long[:3], Y: long, Next: &packed{X: long[:3], Y: long[:1]}},
		{At: diag.Range{File: "f", Line: 10, Column: 2, EndLine: 12, EndColumn: 3}, In: []exhibit.Place{{File: "f"}, {File: "g", Line: 7}, {File: "f", Line: 1}}},
	} {
		here := viewpoint{"f", 10}
		data := pack(here, v)
		var back packed
		if err := unpack(data, here, &back); err != nil {
			t.Fatalf("%+v: %v", v, err)
		}
		if string(content(here, back)) != string(content(here, v)) || (back.X == nil) != (v.X == nil) || (back.P == nil) != (v.P == nil) || (back.M == nil) != (v.M == nil) {
			t.Errorf("%+v comes back as %+v", v, back)
		}
		if len(v.X) == len(long) && &back.X[0] != &back.Y[0] {
			t.Error("what was one in memory is two")
		}
		for n := range data {
			if err := unpack(data[:n], here, &packed{}); err == nil {
				t.Fatalf("%d of %d bytes are taken for the whole", n, len(data))
			}
		}
	}
	at := packed{At: diag.Range{File: "f", Line: 10, EndLine: 12}, In: []exhibit.Place{{File: "f"}, {File: "g", Line: 7}, {File: "f", Line: 1}}}
	var back packed
	if err := unpack(pack(viewpoint{"f", 10}, at), viewpoint{"f", 15}, &back); err != nil {
		t.Fatal(err)
	}
	if back.At.Line != 15 || back.At.EndLine != 17 || back.In[0].Line != 0 || back.In[1].Line != 7 || back.In[2].Line != 6 {
		t.Errorf("seen from five lines on: %+v", back)
	}
}

// FuzzUnpack: no bytes end the program or make it take much memory, and what comes
// out of them is packed and unpacked the same.
func FuzzUnpack(f *testing.F) {
	x := []float64{1, 2}
	f.Add(pack(viewpoint{}, packed{X: x, Y: x, M: map[string][]float64{"a": x}, S: []string{"s"}, P: &x[0], Next: &packed{}}))
	f.Add([]byte{})
	f.Fuzz(func(t *testing.T, data []byte) {
		var v, again packed
		if len(data) > 1<<16 || unpack(data, viewpoint{}, &v) != nil {
			return
		}
		if err := unpack(pack(viewpoint{}, v), viewpoint{}, &again); err != nil || string(content(viewpoint{}, again)) != string(content(viewpoint{}, v)) {
			t.Errorf("%x comes back as %+v, %v", data, again, err)
		}
	})
}

// TestContentTells: two values with the same content are the same.
func TestContentTells(t *testing.T) {
	texts := rapid.SliceOfN(rapid.SampledFrom([]string{"", "a", "b", "ab", "\x00", "\x01a"}), 0, 4)
	rapid.Check(t, func(t *rapid.T) {
		a, b := texts.Draw(t, "a"), texts.Draw(t, "b")
		same := len(a) == len(b)
		for i := range a {
			same = same && a[i] == b[i]
		}
		if got := string(content(viewpoint{}, a, "x")) == string(content(viewpoint{}, b, "x")); got != same && (a == nil) == (b == nil) {
			t.Fatalf("%q and %q: the same content is %t", a, b, got)
		}
	})
}
