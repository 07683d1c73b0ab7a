package quantity

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// Factors as published in NIST SP 811, appendix B (exact, or to the digits
// printed), computed anew from the international foot (0.3048 m) and pound
// (0.45359237 kg) of 1959 and the standard acceleration of free fall.
func TestFactors(t *testing.T) {
	for _, c := range []struct {
		unit string
		si   float64
		rel  float64 // 0: exact to the last bit but two
		dim  Dim
	}{
		{"in", 0.0254, 0, Length}, {"ft", 0.3048, 0, Length}, {"mm", 0.001, 0, Length}, {"cm", 0.01, 0, Length}, {"km", 1000, 0, Length}, {"m", 1, 0, Length},
		{"lbm", 0.45359237, 0, Mass}, {"t", 1000, 0, Mass}, {"kg", 1, 0, Mass}, {"slug", 14.593902937206364, 1e-14, Mass}, {"slug", 14.59390, 5e-7, Mass},
		{"s", 1, 0, Time}, {"ms", 0.001, 0, Time}, {"Hz", 1, 0, PerTime}, {"kHz", 1000, 0, PerTime}, {"1/s", 1, 0, PerTime}, {"rad/s", 1, 0, PerTime},
		{"N", 1, 0, Force}, {"kN", 1000, 0, Force}, {"MN", 1e6, 0, Force}, {"lbf", 4.4482216152605, 0, Force}, {"kip", 4448.2216152605, 0, Force},
		{"Pa", 1, 0, Pressure}, {"kPa", 1000, 0, Pressure}, {"MPa", 1e6, 0, Pressure}, {"GPa", 1e9, 0, Pressure},
		{"psi", 6894.757293168, 1e-12, Pressure}, {"ksi", 6894757.293168, 1e-12, Pressure}, {"psf", 47.88025898, 1e-9, Pressure}, {"ksf", 47880.25898, 1e-9, Pressure},
		{"g", 9.80665, 0, Acceleration}, {"gal", 0.01, 0, Acceleration}, {"Gal", 0.01, 0, Acceleration}, {"cm/s^2", 0.01, 0, Acceleration},
		{"rad", 1, 0, None}, {"deg", 0.017453292519943295, 0, None}, {"%", 0.01, 0, None},
		{"kip/in", 175126.8, 3e-7, Stiffness}, {"lbf/ft", 14.59390, 5e-7, Stiffness}, {"lbf*ft", 1.355818, 3e-7, Moment}, {"kip*ft", 1355.818, 3e-7, Moment}, {"lbf*in", 0.1129848, 3e-7, Moment},
		{"lbm/ft^3", 16.01846, 3e-7, Dim{-3, 1, 0}}, {"lbf/ft^3", 157.0875, 3e-7, ForcePerArea3}, {"in^2", 6.4516e-4, 0, Dim{2, 0, 0}}, {"ft^2", 0.09290304, 0, Dim{2, 0, 0}}, {"in^4", 4.162314e-7, 1.2e-7, Dim{4, 0, 0}},
		{"kip*s^2/in", 175126.8, 3e-7, Mass}, {"lbf*s^2/in", 175.1268, 3e-7, Mass}, {"in/s^2", 0.0254, 0, Acceleration}, {"ft/s^2", 0.3048, 0, Acceleration},
	} {
		u, err := ParseUnit(c.unit)
		if err != nil {
			t.Error(err)
			continue
		}
		rel := max(c.rel, 4e-16)
		if d := math.Abs(u.Scale/c.si - 1); d > rel {
			t.Errorf("1 %s is %.17g SI, want %.17g within %g, off by %g", c.unit, u.Scale, c.si, rel, d)
		}
		if !u.Dim.Is(c.dim) {
			t.Errorf("%s has the dimension %v, want %v", c.unit, u.Dim, c.dim)
		}
	}
}

// Every symbol stands in the table above.
func TestEverySymbolHasItsFactorChecked(t *testing.T) {
	if n := len(Symbols()); n != 33 {
		t.Errorf("%d symbols; give each its published factor in TestFactors and count it here", n)
	}
}

func TestWrittenUnits(t *testing.T) {
	for _, c := range []struct{ text, canonical, pretty string }{
		{"kN*m", "kN*m", "kN·m"}, {"kN·m", "kN*m", "kN·m"}, {" kN * m ", "kN*m", "kN·m"}, {"m/s²", "m/s^2", "m/s²"}, {"m/s^2", "m/s^2", "m/s²"},
		{"kip*s^2/in", "kip*s^2/in", "kip·s²/in"}, {"s^-1", "s^-1", "s⁻¹"}, {"s⁻¹", "s^-1", "s⁻¹"}, {"m^0.9", "m^0.9", "m^0.9"}, {"1/s", "1/s", "1/s"},
		{"m²·s⁻²", "m^2*s^-2", "m²·s⁻²"}, {"m^12", "m^12", "m¹²"}, {"", "", ""}, {"1", "", ""}, {"%", "%", "%"},
	} {
		u, err := ParseUnit(c.text)
		if err != nil {
			t.Error(err)
			continue
		}
		if u.Text != c.canonical || u.Pretty() != c.pretty {
			t.Errorf("%q is written %q and printed %q, want %q and %q", c.text, u.Text, u.Pretty(), c.canonical, c.pretty)
		}
	}
	// From left to right: a / b * c is (a / b) * c.
	if u := MustUnit("kN/m*s"); !u.Dim.Is(Dim{0, 1, -1}) {
		t.Errorf("kN/m*s has the dimension %v", u.Dim)
	}
}

func TestWhatIsNoUnit(t *testing.T) {
	for _, c := range []struct {
		text, word string
		offset     int
		hint       string // part of it
	}{
		{"KN", "KN", 0, "kN"}, {"lb", "lb", 0, "lbf for a force or lbm"}, {"ton", "ton", 0, "t for 1000 kg"}, {"h", "h", 0, "in s"}, {"min", "min", 0, "in s"}, {"d", "d", 0, "in s"},
		{"kN*h", "h", 3, "in s"}, {"kN·hr", "hr", 4, "in s"}, {"mpa", "mpa", 0, "MPa"}, {"kNm", "kNm", 0, "kN*m"}, {"kip-ft", "kip-ft", 0, "kip*ft"}, {"m2", "m2", 0, "m^2"},
		{"x", "x", 0, ""}, {"kips", "kips", 0, "kip"}, {"pcf", "pcf", 0, "lbf/ft^3"}, {"m^", "m", 0, "number"}, {"m^99", "m", 0, "-12 to 12"}, {"m²³", "m", 0, "-12 to 12"}, {"kN*", "", 0, ""}, {"*m", "", 0, ""},
		{"m^2^3", "^3", 0, ""}, {" foo", "foo", 1, ""}, {"m/1", "1", 2, ""}, {"km^12*km^12*km^12*km^12*km^12", "km", 24, "too large"},
	} {
		_, err := ParseUnit(c.text)
		e, ok := err.(*UnitError)
		if !ok {
			t.Errorf("%q is read as a unit", c.text)
			continue
		}
		if e.Word != c.word || e.Offset != c.offset || !strings.Contains(e.Hint, c.hint) || c.hint == "" && e.Hint != "" {
			t.Errorf("%q: word %q at %d, hint %q; want %q at %d, %q", c.text, e.Word, e.Offset, e.Hint, c.word, c.offset, c.hint)
		}
		// A power is blamed for itself, not its unit.
		power := map[string]string{"m^": "^", "m^99": "^99", "m²³": "²³"}[c.text]
		if said := strings.Contains(e.Error(), "is not a unit"); e.Power != power || said != (power == "") {
			t.Errorf("%q: message %q", c.text, e.Error())
		}
	}
}

// A unit of some symbols with powers.
func anyUnit(t *rapid.T) Unit {
	text := rapid.SampledFrom(Symbols()).Draw(t, "symbol")
	for range rapid.IntRange(0, 3).Draw(t, "more") {
		text += rapid.SampledFrom([]string{"*", "/", "·"}).Draw(t, "sign") + rapid.SampledFrom(Symbols()).Draw(t, "symbol") +
			rapid.SampledFrom([]string{"", "^2", "²", "^-1", "^0.5"}).Draw(t, "power")
	}
	return MustUnit(text)
}

func TestConversionRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		u := anyUnit(t)
		x := rapid.Float64Range(-1e9, 1e9).Draw(t, "x")
		if y := u.From(u.To(x)); math.Abs(y-x) > 4e-16*math.Abs(x) {
			t.Fatalf("%g %s comes back as %g", x, u.Text, y)
		}
		for _, again := range []string{u.Text, u.Pretty()} {
			if w := MustUnit(again); w.Scale != u.Scale || !w.Dim.Is(u.Dim) {
				t.Fatalf("%s written as %q is %v", u.Text, again, w)
			}
		}
		si := SIUnit(u.Dim)
		if si.Text == "" {
			return
		}
		if w, err := ParseUnit(si.Text); err != nil || w.Scale != 1 || !w.Dim.Is(u.Dim) {
			t.Fatalf("the SI unit of %s is %s: %v, %v", u.Text, si.Text, w, err)
		}
	})
}

func TestPreferredUnitsFit(t *testing.T) {
	for _, s := range []System{SI, US} {
		for _, d := range []Dim{None, Length, Mass, Time, PerTime, Velocity, Acceleration, Force, Moment, Stiffness, Pressure, ForcePerArea3, {7, -2, 3}} {
			if u := s.Preferred(d); !u.Dim.Is(d) {
				t.Errorf("%s: %s for %s", s, u.Text, d.Name())
			}
		}
		if !s.Small().Dim.Is(Length) {
			t.Errorf("%s: small lengths in %s", s, s.Small().Text)
		}
	}
	if SI.Preferred(Force).Text != "kN" || US.Preferred(Force).Text != "kip" || SI.Preferred(None).Text != "" {
		t.Error("forces are shown in kN and kip, pure numbers without a unit")
	}
}

func TestDimensionsInWords(t *testing.T) {
	for d, want := range map[Dim]string{None: "a pure number", Force: "a force", {0.9, 0, 0}: "a quantity in m^0.9", {0, 1, -3}: "a quantity in kg/s³", {0, 0, -2}: "a quantity in 1/s²"} {
		if got := d.Name(); got != want {
			t.Errorf("%v is %q, want %q", d, got, want)
		}
	}
	if !Force.Times(Length).Is(Moment) || !Force.Over(Length).Is(Stiffness) || !Length.Power(3).Is(Dim{3, 0, 0}) || Force.Is(Mass) {
		t.Error("products, quotients or powers of dimensions")
	}
	if !Length.Power(0.1).Power(10).Is(Length) {
		t.Error("broken exponents do not come back")
	}
}

func TestItems(t *testing.T) {
	rows := Value{SI: []float64{1, 2, 3, 4, 5, 6}, Shape: Rows, Width: 3, Labels: []string{"a", "b", "c"}}
	if rows.Len() != 2 || rows.Item(1).SI[0] != 4 || rows.Item(1).Shape != Vector || rows.Item(1).Labels[2] != "c" || rows.Item(1).Item(2).SI[0] != 6 {
		t.Errorf("rows: %v", rows.Item(1))
	}
	v := Scalar(3, MustUnit("m"))
	if v.Len() != 1 || v.Item(0).SI[0] != 3 || !v.Finite() || Pure(math.Inf(1)).Finite() || Pure(math.NaN()).Finite() {
		t.Error("numbers")
	}
}
