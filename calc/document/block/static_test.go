package block

import (
	"math"
	"slices"
	"strings"
	"testing"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/lateral"
	"quoin/calc/modal"
	"quoin/calc/quantity"
	"quoin/calc/standard"
	"quoin/calc/structure"
)

// products is a document that holds nothing but the products of blocks.
type products map[string]any

func (products) System() quantity.System                     { return quantity.SI }
func (p products) Product(name string) any                   { return p[name] }
func (products) Read(string, string) ([]byte, string, error) { panic("block: no files") }
func (products) Curves(string) []exhibit.Curve               { return nil }
func (products) KindOf(string) string                        { return "" }
func (products) Setting(string) (quantity.Value, bool)       { panic("block: no settings") }
func (products) WhatIf([][]exhibit.Override) []Outcome       { panic("block: no cases") }
func (products) Line(string) (*expr.Node, string)            { return nil, "" }

// said is a field with a text, asked one with a number; each stands on its own line.
func said(line int, text string) field.Field {
	at := diag.Range{File: "package.md", Line: line, Column: 1, EndLine: line, EndColumn: 2}
	return field.Field{Given: true, At: at, List: []field.Item{{Text: text, At: at}}}
}

func asked(line int, si float64, unit string) field.Field {
	f := said(line, "")
	f.Value = quantity.Scalar(si, quantity.MustUnit(unit))
	return f
}

// european runs a static block over five storeys of 3 m and 100 t, and a plateau of
// 2.5 m/s² up to 0.6 s.
func european(t *testing.T, change func(*static, *standard.Target)) *Run {
	t.Helper()
	storeys := make([]structure.Storey, 5)
	for i := range storeys {
		storeys[i] = structure.Storey{Level: string(rune('A' + i)), Height: 3, Mass: 100e3, Stiffness: 100e6}
	}
	m, err := structure.Shear(storeys, 0)
	if err != nil {
		t.Fatal(err)
	}
	modes, err := modal.Solve(m, 1)
	if err != nil {
		t.Fatal(err)
	}
	target := &standard.Target{Basis: "EN 1998-1:2004", Spectrum: "design", Damping: 0.05, Q: 4, Parameters: []standard.Parameter{{Symbol: "T_C", Value: 0.6, Unit: "s"}},
		Branches: []standard.Branch{{Name: "plateau", To: 0.6, A0: 2.5}, {Name: "constant velocity", From: 0.6, B1: 1.5}}}
	b := &static{Structure: said(2, "s"), Target: said(3, "d"), Direction: said(4, "x"), Torsion: said(5, "none")}
	change(b, target)
	r := &Run{Env: products{"s": m, "d": target, "m": modes}, Name: "f", Kind: staticKind, Place: diag.Range{File: "package.md", Line: 1, Column: 4, EndLine: 1, EndColumn: 12}}
	b.Run(r)
	return r
}

// staticValue finds a value of a run.
func staticValue(t *testing.T, r *Run, name string) []float64 {
	t.Helper()
	for _, v := range r.Values {
		if v.Name == name {
			return v.Value.SI
		}
	}
	t.Fatalf("no value %s: %v", name, r.Diags)
	return nil
}

// TestStaticEuropean: F_b = S_d m lambda, shared by height or by the first mode.
func TestStaticEuropean(t *testing.T) {
	r := european(t, func(b *static, _ *standard.Target) { b.Ct = asked(6, 0.075, "") })
	T := 0.075 * math.Pow(15, 0.75)
	for name, want := range map[string][]float64{"T": {T}, "T_a": {T}, "S_d": {2.5}, "lambda": {0.85}, "V": {2.5 * 500e3 * 0.85}, "C_v": {1. / 15, 2. / 15, 3. / 15, 4. / 15, 5. / 15}} {
		for i, x := range staticValue(t, r, name) {
			if math.Abs(x-want[i]) > 1e-12*want[i] {
				t.Errorf("%s[%d] = %v, want %v", name, i+1, x, want[i])
			}
		}
	}
	for _, v := range r.Values {
		switch v.Name {
		case "C_s", "C_u", "k", "diaphragm_force", "C_s_min":
			t.Errorf("%s belongs to another standard", v.Name)
		}
	}
	if len(r.Diags) > 0 || len(r.Warnings) != 2 || !strings.Contains(r.Warnings[1], "is not shown") || !strings.Contains(r.Warnings[0], "Accidental torsion is not included") {
		t.Errorf("diagnostics %v, footnotes %v", r.Diags, r.Warnings)
	}
	equations := 0
	for _, it := range r.Method {
		if it.Equation != nil && it.Equation.Result != nil {
			equations++
		}
	}
	if equations != 5 {
		t.Errorf("%d equations with numbers, want those of T_1, its limit, S_d, lambda and F_b", equations)
	}

	shaped := european(t, func(b *static, _ *standard.Target) {
		b.T, b.Modes, b.Lambda = asked(6, 0.7, "s"), said(7, "m"), asked(8, 0.8, "")
	})
	phi := shaped.Product("m").(*modal.Modes).Phi[0]
	sum := 0.0
	for _, x := range phi {
		sum += x
	}
	for i, f := range staticValue(t, shaped, "F") {
		if want := 1.5 / 0.7 * 500e3 * 0.8 * phi[i] / sum; math.Abs(f-want) > 1e-9*want {
			t.Errorf("F[%d] = %v, want %v", i+1, f, want)
		}
	}
	if len(shaped.Diags) != 1 || shaped.Diags[0].Code != "lambda" || shaped.Diags[0].Range.Line != 8 {
		t.Errorf("lambda below its rule: %v", shaped.Diags)
	}
}

// TestTargetDampingWithRounding: 5 % that is the result of a calculation is 5 %.
func TestTargetDampingWithRounding(t *testing.T) {
	b := &target{Basis: said(2, "ASCE/SEI 7-22"), Damping: asked(3, 0.05*(1+1e-12), "")}
	std, _ := standard.Lookup("ASCE/SEI 7-22")
	for z, want := range map[float64]bool{0.05 * (1 + 1e-12): true, 0.0501: false} {
		b.Damping = asked(3, z, "")
		r := &Run{Env: products{}, Kind: targetKind}
		if got := b.damping(r, std, standard.Given{}, nil); got != want {
			t.Errorf("damping %v: %v, %v", z, got, r.Diags)
		}
	}
}

// TestStaticForcesAreOneSeries: level and force, so that the data of the figure are two
// columns.
func TestStaticForcesAreOneSeries(t *testing.T) {
	r := european(t, func(b *static, _ *standard.Target) { b.Ct = asked(6, 0.075, "") })
	for _, it := range r.Results {
		if it.Figure == nil || it.Figure.ID != "f" {
			continue
		}
		series, want := it.Figure.Panels[0].Series, r.Made.(*lateral.Static)
		if len(series) != 1 || !slices.Equal(series[0].X, want.F) || !slices.Equal(series[0].Y, want.H) {
			t.Errorf("the forces are drawn as %v", series)
		}
		return
	}
	t.Fatal("no figure")
}

// TestStaticPlaces: what is wrong is told at the field, or at the block where the
// field is not given.
func TestStaticPlaces(t *testing.T) {
	for name, c := range map[string]struct {
		line   int
		code   string
		change func(*static, *standard.Target)
	}{
		"T beyond":   {6, "static", func(b *static, _ *standard.Target) { b.T = asked(6, 2.5, "s") }},
		"no T":       {1, "static", func(*static, *standard.Target) {}},
		"system":     {6, "static", func(b *static, _ *standard.Target) { b.System = said(6, "brick") }},
		"elastic":    {3, "static", func(b *static, t *standard.Target) { b.T, t.Q = asked(6, 0.5, "s"), 0 }},
		"R":          {6, "static-field", func(b *static, _ *standard.Target) { b.R = asked(6, 8, "") }},
		"direction":  {6, "direction", func(b *static, _ *standard.Target) { b.Direction = said(6, "y") }},
		"h_n":        {6, "static", func(b *static, _ *standard.Target) { b.T, b.Hn = asked(7, 0.5, "s"), asked(6, 20, "m") }},
		"other land": {3, "static", func(b *static, t *standard.Target) { b.R, b.Ie, t.Basis = asked(6, 8, ""), asked(7, 1, ""), "table" }},
		"R missing":  {1, "missing-field", func(b *static, t *standard.Target) { t.Basis = "ASCE/SEI 7-22" }},
	} {
		r := european(t, c.change)
		if len(r.Diags) != 1 || r.Diags[0].Code != c.code || r.Diags[0].Range.Line != c.line || r.Made != nil {
			t.Errorf("%s: %v, want one of %s at line %d", name, r.Diags, c.code, c.line)
		}
	}
}

// TestStaticEquations: the equations printed give the values of the engine, with an
// importance factor and exception 2 to 11.4.8 in them.
func TestStaticEquations(t *testing.T) {
	for _, exception := range []int{0, 2} {
		r := european(t, func(b *static, target *standard.Target) {
			target.Basis, target.Exception, target.Q = "ASCE/SEI 7-16", exception, 0
			target.Parameters = []standard.Parameter{{Symbol: "S_DS", Value: 1}, {Symbol: "S_D1", Value: 0.6}, {Symbol: "S_1", Value: 0.7}, {Symbol: "T_L", Value: 8}}
			b.R, b.Ie, b.Ct, b.X = asked(6, 8, ""), asked(7, 1.5, ""), asked(8, 0.1, ""), asked(9, 0.9, "")
		})
		factor := map[int]float64{0: 1, 2: 1.5}[exception]
		want := factor * 0.6 / (0.1 * math.Pow(15, 0.9)) / (8 / 1.5)
		if got := staticValue(t, r, "C_s")[0]; math.Abs(got-want) > 1e-12*want || len(r.Diags) > 0 {
			t.Errorf("exception %d: C_s = %v, want %v; %v", exception, got, want, r.Diags)
		}
	}
}
