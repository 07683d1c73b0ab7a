package live

import (
	"errors"
	"flag"
	"fmt"
	"math"
	"os"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

var kN, mm = quantity.MustUnit("kN"), quantity.MustUnit("mm")

// values is the package that the tests look into.
var values = map[string]quantity.Value{
	"V":       quantity.Scalar(1.2345e6, kN),
	"D":       quantity.Scalar(-0.0123456, mm),
	"M":       quantity.Scalar(12e3, quantity.MustUnit("kN*m")),
	"bare":    {Dim: quantity.Force, SI: []float64{2500}},
	"ratio":   quantity.Pure(0.05),
	"rate":    quantity.Scalar(5, quantity.MustUnit("1/s")),
	"big":     quantity.Scalar(1.2345678e8, kN),
	"m.T":     quantity.List([]float64{1.25, 0.4}, quantity.MustUnit("s"), nil),
	"m.phi":   {SI: []float64{1, 0.5, 1, -2}, Shape: quantity.Rows, Width: 2},
	"none":    {Shape: quantity.Vector},
	"bad":     quantity.Pure(math.NaN()),
	"omega_1": quantity.Pure(7),
	"V1":      quantity.Pure(8),
}

func lookup(path string) (quantity.Value, string, error) {
	v, ok := values[path]
	if !ok {
		return v, "", &Error{Summary: "there is no value " + path, Hint: "look again"}
	}
	return v, "id:" + path, nil
}

// shown writes what a pipeline gives: numbers with their units, or a text.
func shown(l exhibit.Live) string {
	var out []string
	for _, n := range l.Numbers {
		out = append(out, strings.TrimSpace(n.Text()+" "+n.Unit.Pretty()))
	}
	return l.ID + " " + strings.Join(out, "; ") + l.Text
}

func run(text string) (exhibit.Live, error) {
	p, err := Parse(text)
	if err != nil {
		return exhibit.Live{}, err
	}
	return p.Run(lookup)
}

func TestRun(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{`.V`, "id:V 1234 kN"}, // 1234.5 at four digits, half to even of the binary number
		{` .V | as "kip" | sig 3 `, "id:V 278 kip"},
		{`as "kip" .V`, "id:V 277.5 kip"},
		{`sig 2 .V`, "id:V 1234 kN"},
		{`.V | sig 6 | as "MN"`, "id:V 1.23450 MN"},
		{`.V|as "N"`, "id:V 1\u202f234\u202f500 N"},
		{".V\n | as `MN`", "id:V 1.234 MN"},
		{`.D`, "id:D −12.35 mm"},
		{`.D | as "in" | sig 3`, "id:D −0.486 in"},
		{`.bare`, "id:bare 2500"}, // no unit: the caller's
		{`.ratio | as "%"`, "id:ratio 5.000 %"},
		{`.m.T`, "id:m.T 1.250 s; 0.4000 s"},
		{`.m.T | item 2`, "id:m.T 0.4000 s"},
		{`item 1 .m.T | as "ms"`, "id:m.T 1250 ms"},
		{`.m.phi | item 2`, "id:m.phi 1.000; −2.000"},
		{`.m.phi | item 2 | item 2 | sig 2`, "id:m.phi −2.0"},
		{`.ω_1`, "id:omega_1 7.000"},
		{`.V₁`, "id:V1 8.000"},
		{`.V | upper`, "id:V 1234 KN"},
		{`.V | lower`, "id:V 1234 kn"},
		{`.V | title`, "id:V 1234 KN"},
		{`.V | sig 6 | replace "kN" "kilonewtons" | trim`, "id:V 1234.50 kilonewtons"},
		{`.big | replace " " "~"`, "id:big 123\u202f457~kN"},
		{`.big | replace "\u202f" ""`, "id:big 123457 kN"},
		{`.M | trim`, "id:M 12.00 kN·m"},
		{`.V | trimSuffix " kN"`, "id:V 1234"},
		{`.V | trimPrefix "x"`, "id:V 1234 kN"},
		{`.V | trunc 4`, "id:V 1234"},
		{`.V | replace " kN" " kilonewtons each" | abbrev 14`, "id:V 1234 kilone..."},
		{`.m.T | trim`, "id:m.T 1.250, 0.4000 s"},
		{`.bare | trim`, "id:bare 2500 N"},
		{`.rate | trim`, "id:rate 5.000 1/s"},
	} {
		l, err := run(c.text)
		if got := shown(l); err != nil || got != c.want {
			t.Errorf("%q: got %q %v, want %q", c.text, got, err, c.want)
		}
	}
}

// TestNumbers looks at one result in full: SI inside, the unit asked for beside it.
func TestNumbers(t *testing.T) {
	l, err := run(`.V | as "kip" | sig 3`)
	if err != nil || len(l.Numbers) != 1 {
		t.Fatalf("got %+v, %v", l, err)
	}
	if n := l.Numbers[0]; n.Value != 1.2345e6 || n.Unit != quantity.MustUnit("kip") || n.Digits != 3 || n.ID != "id:V" || l.ID != "id:V" {
		t.Errorf("got %+v", l)
	}
	if l, _ := run(`.bare`); l.Numbers[0].Unit != (quantity.Unit{}) || l.Numbers[0].Digits != 0 {
		t.Errorf("a value without a unit got one: %+v", l)
	}
	p, err := Parse(`.a.θ_m.x₂ | item 1`)
	if err != nil || fmt.Sprint(p.Names) != "[a.theta_m.x2]" {
		t.Errorf("names %v, %v", p, err)
	}
}

// TestMain fixes the seed of the properties.
func TestMain(m *testing.M) {
	flag.Parse()
	if err := flag.Set("rapid.seed", "1"); err != nil {
		panic(err)
	}
	os.Exit(m.Run())
}

// marked puts [ ] around the place of an error.
func marked(text string, err error) string {
	var e *Error
	if !errors.As(err, &e) {
		return fmt.Sprint(err)
	}
	return text[:e.Offset] + "[" + text[e.Offset:e.Offset+e.Length] + "]" + text[e.Offset+e.Length:] + ": " + e.Summary
}

func TestErrors(t *testing.T) {
	for _, c := range errorCases {
		_, err := run(c.text)
		if got := marked(c.text, err); got != c.want {
			t.Errorf("%q\n got %s\nwant %s", c.text, got, c.want)
		}
	}
}

func TestFunctions(t *testing.T) {
	if len(Functions()) < 3 {
		t.Fatal("no functions")
	}
	for _, f := range Functions() {
		inside := strings.TrimSuffix(strings.TrimPrefix(f.Usage, "{{"), "}}")
		if l, err := run(inside); err != nil || shown(l) == "" {
			t.Errorf("the usage of %s, %s, does not run: %v", f.Name, f.Usage, err)
		}
		if f.Text == "" || strings.HasSuffix(f.Text, ".") {
			t.Errorf("%s: doc %q", f.Name, f.Text)
		}
	}
}

// TestUnitsOnlyChangeTheLook draws values and units: the SI number never moves.
func TestUnitsOnlyChangeTheLook(t *testing.T) {
	units := []string{"N", "kN", "MN", "lbf", "kip"}
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.Float64Range(-1e9, 1e9).Draw(t, "x")
		unit := rapid.SampledFrom(units).Draw(t, "unit")
		digits := rapid.IntRange(1, 15).Draw(t, "digits")
		p, err := Parse(fmt.Sprintf(`.V | as %q | sig %d`, unit, digits))
		if err != nil {
			t.Fatal(err)
		}
		at := func(string) (quantity.Value, string, error) { return quantity.Scalar(x, kN), "V", nil }
		l, err := p.Run(at)
		if err != nil || len(l.Numbers) != 1 || l.Numbers[0].Value != x || l.Numbers[0].Unit.Text != unit || l.Numbers[0].Digits != digits {
			t.Fatalf("got %+v, %v", l, err)
		}
		// As text it reads the same, whatever string function had it.
		p, err = Parse(fmt.Sprintf(`.V | as %q | sig %d | trim`, unit, digits))
		if err != nil {
			t.Fatal(err)
		}
		s, err := p.Run(at)
		if want := l.Numbers[0].Text() + " " + unit; err != nil || s.Text != want {
			t.Fatalf("text %q, %v, want %q", s.Text, err, want)
		}
	})
}

func FuzzParse(f *testing.F) {
	for _, c := range errorCases {
		f.Add(c.text)
	}
	for _, s := range Functions() {
		f.Add(strings.Trim(s.Usage, "{}"))
	}
	f.Add(`.ω.x₂ | replace "a" "\u202e" | item 2`)
	f.Fuzz(func(t *testing.T, text string) {
		p, err := Parse(text)
		if err != nil {
			at(t, text, err)
			return
		}
		if len(p.Names) != 1 || p.Names[0] == "" {
			t.Fatalf("names %q", p.Names)
		}
		for _, v := range values {
			l, err := p.Run(func(string) (quantity.Value, string, error) { return v, "id", nil })
			if err != nil {
				at(t, text, err)
			} else if len(l.Numbers) == 0 && l.Text == "" {
				t.Fatal("nothing is shown, and no error")
			}
		}
	})
}

func at(t *testing.T, text string, err error) {
	t.Helper()
	var e *Error
	if !errors.As(err, &e) || e.Summary == "" || e.Offset < 0 || e.Length < 0 || e.Offset+e.Length > len(text) {
		t.Fatalf("ill-formed error %#v", err)
	}
}
