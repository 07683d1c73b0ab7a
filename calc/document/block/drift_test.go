package block

import (
	"encoding/json"
	"math"
	"strings"
	"testing"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/lateral"
	"quoin/calc/modal"
	"quoin/calc/quantity"
)

// oneAnalysis is a document with one analysis in it.
type oneAnalysis struct{ product any }

func (oneAnalysis) System() quantity.System                      { return quantity.US }
func (m oneAnalysis) Product(string) any                         { return m.product }
func (oneAnalysis) Read(string, string) ([]byte, string, error)  { panic("no files") }
func (oneAnalysis) Curves(string) []exhibit.Curve                { return nil }
func (oneAnalysis) KindOf(string) string                         { return "static" }
func (oneAnalysis) Setting(string) (quantity.Value, bool)        { panic("block: no settings") }
func (oneAnalysis) WhatIf([][]exhibit.Override) []Outcome        { panic("block: no cases") }
func (oneAnalysis) Line(string) (*expr.Node, string)             { return nil, "" }
func (oneAnalysis) Value(string) (quantity.Value, string, error) { panic("no values") }
func (oneAnalysis) Call(string, []quantity.Value) (quantity.Value, string, error) {
	panic("no functions")
}

// judged runs a drift block named d with these lines over an analysis.
func judged(t *testing.T, product any, lines ...string) *Run {
	t.Helper()
	var text []field.Line
	for i, l := range append(lines, "from: elf") {
		text = append(text, field.Line{Text: l, Line: i + 2, Column: 1})
	}
	place := diag.Range{File: "p.md", Line: 1, Column: 4, EndLine: 1, EndColumn: 8}
	yaml, diags := field.Parse("p.md", text, place)
	yaml.At = place // as document has it
	b := &drift{}
	diags = append(diags, field.Decode(yaml, b, "the drift block", nil)...)
	said := &Checks{Place: place}
	b.Check(said)
	diags = append(append(diags, said.Diags...), field.Resolve(b, oneAnalysis{})...)
	r := &Run{Env: oneAnalysis{product}, Name: "d", Kind: driftKind, Place: place}
	if r.Diags = diags; !diags.HasErrors() {
		r.EchoFields(b)
		b.Run(r)
	}
	return r
}

// sixStoreys is a steel moment frame of six storeys at 13 ft under its equivalent
// lateral forces: shears in kip, stiffnesses in kip/in, lowest first.
func sixStoreys(basis string) *lateral.Static {
	const kip, inch = 4448.2216152605, 0.0254
	s := &lateral.Static{Basis: basis, R: 8, Ie: 1}
	if strings.HasPrefix(basis, "EN") {
		s.R, s.Ie, s.Q = 0, 0, 4
	}
	shear := []float64{228.646270155, 221.740817, 204.940049, 175.425810, 131.405739, 71.382391}
	u := 0.0
	for i, k := range []float64{350, 330, 300, 250, 200, 150} {
		s.Levels = append(s.Levels, "L"+string(rune('1'+i)))
		s.H, s.Hs = append(s.H, float64(i+1)*156*inch), append(s.Hs, 156*inch)
		s.W = append(s.W, []float64{700, 650, 650, 650, 650, 600}[i]*kip)
		s.DriftShear = append(s.DriftShear, shear[i]*kip)
		s.Drift = append(s.Drift, shear[i]/k*inch)
		u += shear[i] / k * inch
		s.Displacement = append(s.Displacement, u)
	}
	return s
}

const driftLoads = `P: "[3900 kip, 3200 kip, 2550 kip, 1900 kip, 1250 kip, 600 kip]"`

func driftValue(t *testing.T, r *Run, name string) []float64 {
	t.Helper()
	for _, v := range r.Values {
		if v.Name == name {
			return v.Value.SI
		}
	}
	t.Fatalf("no value %s: %v", name, r.Diags)
	return nil
}

// TestDriftOfStatic: the six storeys by both editions, with every check, and the
// registers that the page is made from.
func TestDriftOfStatic(t *testing.T) {
	for _, basis := range []string{"ASCE/SEI 7-22", "ASCE/SEI 7-16"} {
		r := judged(t, sixStoreys(basis), "C_d: 5.5", "system: other", "risk: II", driftLoads)
		if len(r.Diags) > 0 {
			t.Fatal(r.Diags)
		}
		delta := []float64{3.59301282, 3.69568028, 3.75723423, 3.85936783, 3.61365783, 2.61735433}
		theta := []float64{.07142857, .06216006, .05448718, .04871795, .04006410, .02564103}
		for i := range delta {
			if got := driftValue(t, r, "drift")[i] / 0.0254; math.Abs(got-delta[i]) > 2e-8 {
				t.Errorf("storey %d drifts %v in, want %v", i+1, got, delta[i])
			}
			if got := driftValue(t, r, "theta")[i]; math.Abs(got-theta[i]) > 2e-8 {
				t.Errorf("storey %d: theta %v, want %v", i+1, got, theta[i])
			}
			if got := driftValue(t, r, "drift_limit")[i]; math.Abs(got-3.12*0.0254) > 1e-15 {
				t.Errorf("storey %d: limit %v", i+1, got)
			}
		}
		var ids []string
		failed := 0
		for i, c := range r.Checks {
			ids = append(ids, c.ID)
			if c.Item != []string{"L1", "L2", "L3", "L4", "L5", "L6"}[i%6] || c.Ref == nil || !c.Ref.Memory || c.Ref.Key != basis {
				t.Errorf("%s stands for %q by %v", c.ID, c.Item, c.Ref)
			}
			if !c.OK {
				failed++
			}
		}
		if len(ids) != 12 || ids[0] != "d.drift <= d.drift_limit [1]" || ids[11] != "d.theta <= d.theta_limit [6]" || failed != 5 {
			t.Errorf("%d fail of %q", failed, ids)
		}
		if text := r.Results[len(r.Results)-1].Text; strings.Count(text, ";") != 1 || !strings.HasPrefix(text, crosschecks) || len(r.Warnings) > 0 {
			t.Errorf("%q, warnings %q", text, r.Warnings)
		}
		if _, err := json.Marshal(r.Made); err != nil {
			t.Error(err)
		}
	}
}

// TestDriftEuropean: q and nu by default, the reduced drift against its limit.
func TestDriftEuropean(t *testing.T) {
	r := judged(t, sixStoreys("EN 1998-1:2004"), "importance_class: III", "finishes: ductile", driftLoads)
	if r.Diags.HasErrors() {
		t.Fatal(r.Diags)
	}
	first := driftValue(t, r, "drift_first_order")[0]
	if want := 4 * 228.646270155 / 350 * 0.0254; math.Abs(first/want-1) > 1e-12 {
		t.Errorf("d_r = %v, want %v", first, want)
	}
	theta := driftValue(t, r, "theta")[0]
	if want := 4 * 3900.0 / (350 * 156); math.Abs(theta/want-1) > 1e-12 {
		t.Errorf("theta = %v, want %v", theta, want)
	}
	c := r.Checks[0]
	if want := 0.4 * first / (1 - theta); c.ID != "d.nu * d.drift <= d.drift_limit [1]" || math.Abs(c.Demand.Value/want-1) > 1e-12 || math.Abs(c.Limit.Value-0.0075*156*0.0254) > 1e-15 {
		t.Errorf("%s: %v against %v", c.ID, c.Demand, c.Limit)
	}
	if len(r.Warnings) != 2 || !strings.Contains(r.Warnings[0], "0.10 at L4 (0.195), L5 (0.160), L6 (0.103)") || !strings.Contains(r.Warnings[1], "at L1 (0.286), L2 (0.249), L3 (0.218): a second-order analysis") {
		t.Errorf("warnings %q", r.Warnings)
	}
	if own := judged(t, sixStoreys("EN 1998-1:2004"), "q_d: 2", "nu: 0.45", "limit: 0.01", driftLoads); math.Abs(driftValue(t, own, "theta")[0]/theta-0.5) > 1e-12 || driftValue(t, own, "nu")[0] != 0.45 ||
		math.Abs(driftValue(t, own, "drift_limit")[0]-0.01*156*0.0254) > 1e-15 {
		t.Errorf("with q_d, nu and limit of its own: %v", own.Values)
	}
}

// TestDriftScaled: drifts and shears are scaled together or not at all.
func TestDriftScaled(t *testing.T) {
	s := sixStoreys("ASCE/SEI 7-22")
	c := &modal.Combined{Basis: s.Basis, R: 8, Ie: 1.25, Divisor: 6.4, Levels: s.Levels, H: s.H, Hs: s.Hs, ScaleFactor: 1.25, PSA: []float64{228.646270155 * 6.4 / 3900 * quantity.Gravity}, MassRatio: []float64{1},
		Drift: modal.Response{Combined: s.Drift, Modal: [][]float64{s.Drift}}, Displacement: modal.Response{Combined: s.Displacement}}
	scaled := make([]float64, 6)
	for i, v := range s.DriftShear {
		scaled[i] = 1.25 * v
	}
	c.StoreyShear = modal.Response{Combined: scaled, Modal: [][]float64{scaled}}
	c.BaseShear = modal.Response{Combined: scaled[:1], Modal: [][]float64{scaled[:1]}}
	common := []string{"C_d: 5.5", "limit: 0.02", driftLoads}
	open, no, yes := judged(t, c, common...), judged(t, c, append(common, "scale_drifts: no")...), judged(t, c, append(common, "scale_drifts: yes")...)
	for _, r := range []*Run{open, no, yes} {
		if r.Diags.HasErrors() {
			t.Fatal(r.Diags)
		}
		for i, theta := range driftValue(t, r, "theta") {
			if want := []float64{.07142857, .06216006, .05448718, .04871795, .04006410, .02564103}[i]; math.Abs(theta-want) > 2e-8 {
				t.Errorf("theta %v, want %v", theta, want)
			}
		}
	}
	if a, b := driftValue(t, no, "drift")[0], driftValue(t, yes, "drift")[0]; math.Abs(b/a-1.25) > 1e-12 || math.Abs(a-5.5/1.25*s.Drift[0]) > 1e-15 {
		t.Errorf("drifts %v, scaled %v", a, b)
	}
	if len(open.Warnings) != 1 || !strings.Contains(open.Warnings[0], "scaled by 1.25") || len(no.Warnings)+len(yes.Warnings) != 0 {
		t.Errorf("warnings %q, %q, %q", open.Warnings, no.Warnings, yes.Warnings)
	}
}

// combinedSix is the response of the six storeys, scaled by 1.25 to a base shear
// whose C_s a limb governs.
func combinedSix(limb string) *modal.Combined {
	s := sixStoreys("ASCE/SEI 7-22")
	c := &modal.Combined{Basis: s.Basis, R: 8, Ie: 1, Divisor: 8, Levels: s.Levels, H: s.H, Hs: s.Hs, ScaleFactor: 1.25, Limb: limb,
		Drift: modal.Response{Combined: s.Drift, Modal: [][]float64{s.Drift}}, Displacement: modal.Response{Combined: s.Displacement}}
	scaled := make([]float64, 6)
	for i, v := range s.DriftShear {
		scaled[i] = 1.25 * v
		c.LevelMass = append(c.LevelMass, s.W[i]/quantity.Gravity)
	}
	c.StoreyShear = modal.Response{Combined: scaled, Modal: [][]float64{scaled}}
	return c
}

// TestDriftFollowsTheLimb: where 0.5 S_1/(R/I_e) governs the base shear that forces
// were scaled to, drifts are scaled; where another limb does, they are not.
func TestDriftFollowsTheLimb(t *testing.T) {
	for limb, factor := range map[string]float64{lateral.LeastSymbol: 1.25, "C_s_max": 1, "": 1} {
		c := combinedSix(limb)
		r := judged(t, c, "C_d: 5.5", "limit: 0.02", driftLoads)
		if r.Diags.HasErrors() {
			t.Fatal(r.Diags)
		}
		if got, want := driftValue(t, r, "drift")[0], 5.5*c.Drift.Combined[0]*factor; math.Abs(got/want-1) > 1e-12 {
			t.Errorf("limb %q: drift %v, want %v", limb, got, want)
		}
		if said := len(r.Diags) == 1 && r.Diags[0].Code == "drift-scaling"; said != (limb == "") {
			t.Errorf("limb %q: %v", limb, r.Diags)
		}
	}
	if r := judged(t, combinedSix(lateral.LeastSymbol), "C_d: 5.5", "limit: 0.02", "scale_drifts: no"); len(r.Diags) != 1 || r.Diags[0].Code != "drift-unscaled" || r.Diags[0].Range.Line != 4 {
		t.Errorf("scale_drifts: no against the limb: %v", r.Diags)
	}
	if r := judged(t, combinedSix("C_s_max"), "C_d: 5.5", "limit: 0.02", driftLoads, "scale_drifts: yes"); len(r.Diags) > 0 {
		t.Errorf("scaling on the safe side: %v", r.Diags)
	}
}

// TestDriftLightAbove: a combination carries its masses, so that a load too light at
// an upper storey alone is told.
func TestDriftLightAbove(t *testing.T) {
	r := judged(t, combinedSix("C_s_max"), "C_d: 5.5", "limit: 0.02", `P: "[4000 kip, 3300 kip, 2600 kip, 1950 kip, 1200 kip, 600 kip]"`)
	if len(r.Diags) != 1 || r.Diags[0].Code != "gravity-load" || !strings.Contains(r.Diags[0].Summary, "above L5:") {
		t.Errorf("P below the weight at L5: %v", r.Diags)
	}
}

// TestDriftRefuses: each wrong field is told where it stands.
func TestDriftRefuses(t *testing.T) {
	asce, en := sixStoreys("ASCE/SEI 7-22"), sixStoreys("EN 1998-1:2004")
	unknown := sixStoreys("")
	unknown.Ie = 0
	for _, c := range []struct {
		name    string
		product any
		lines   []string
		code    string
		line    int // of the field, counted from the first; 0: the block
	}{
		{"C_d missing", asce, []string{"limit: 0.02"}, "missing-field", 0},
		{"I_e differs", asce, []string{"C_d: 5", "limit: 0.02", "I_e: 1.5"}, "drift-input", 3},
		{"q_d of another standard", asce, []string{"C_d: 5", "limit: 0.02", "q_d: 3"}, "drift-field", 3},
		{"C_d of another standard", en, []string{"C_d: 5", "nu: 0.5", "finishes: none"}, "drift-field", 1},
		{"no limit", asce, []string{"C_d: 5", "system: other"}, "missing-field", 0},
		{"no finishes", en, []string{"nu: 0.5"}, "missing-field", 0},
		{"no nu", en, []string{"finishes: none"}, "missing-field", 0},
		{"limit twice", asce, []string{"C_d: 5", "limit: 0.02", "system: other", "risk: I"}, "drift-field", 3},
		{"nu twice", en, []string{"nu: 0.5", "limit: 0.01", "importance_class: I"}, "drift-field", 3},
		{"edge", asce, []string{"C_d: 5", "limit: 0.02", "at: edge"}, "drift-edge", 3},
		{"direction", asce, []string{"C_d: 5", "limit: 0.02", "direction: y"}, "direction", 3},
		{"six storeys of four", asce, []string{"C_d: 5", "risk: I", "system: tolerant finishes"}, "drift-input", 3},
		{"basis differs", asce, []string{"C_d: 5", "limit: 0.02", "basis: EN 1998-1:2004"}, "drift-basis", 3},
		{"no basis", unknown, []string{"C_d: 5", "limit: 0.02"}, "drift-basis", 3},
		{"no I_e", unknown, []string{"C_d: 5", "limit: 0.02", "basis: ASCE/SEI 7-16"}, "missing-field", 0},
		{"scaling of a static block", asce, []string{"C_d: 5", "limit: 0.02", "scale_drifts: yes"}, "drift-field", 3},
		{"rho below 1", asce, []string{"C_d: 5", "limit: 0.02", "rho: 0.9"}, "drift-input", 3},
		{"loads of five", asce, []string{"C_d: 5", "limit: 0.02", `P: "[5 kip, 4 kip, 3 kip, 2 kip, 1 kip]"`}, "drift-input", 3},
	} {
		r := judged(t, c.product, c.lines...)
		line := 1
		if c.line > 0 {
			line = c.line + 1
		}
		if len(r.Diags) != 1 || r.Diags[0].Code != c.code || r.Diags[0].Range.Line != line || r.Made != nil {
			t.Errorf("%s: %v, want %s at line %d", c.name, r.Diags, c.code, line)
		}
	}
	one := judged(t, asce, "C_d: 5", "limit: 0.02", "P:", "  - 3900 kip", "  - 3200 kip", "  - 2550 kip", "  - 2600 kip", "  - 1250 kip", "  - 600 kip")
	if len(one.Diags) != 1 || one.Diags[0].Range.Line != 8 || one.Diags[0].Range.Column != 5 {
		t.Errorf("a load larger than the one below it: %v", one.Diags)
	}
}

// TestDriftOfOwnLimit: a limit that the author gives is none of the standard's.
func TestDriftOfOwnLimit(t *testing.T) {
	for _, c := range []struct {
		basis string
		lines []string
		table string // clause of the limit
	}{
		{"ASCE/SEI 7-22", []string{"C_d: 5.5", "limit: 0.02"}, "12.12"},
		{"EN 1998-1:2004", []string{"nu: 0.5", "limit: 0.01"}, "4.4.3.2"},
		{"ASCE/SEI 7-22", []string{"C_d: 5.5", "system: other", "risk: II"}, ""},
	} {
		r := judged(t, sixStoreys(c.basis), c.lines...)
		stated := c.table != ""
		if r.Checks[0].RefText == "as stated" != stated || (r.Checks[0].Ref == nil) != stated {
			t.Errorf("%q: the check cites %v, %q", c.lines, r.Checks[0].Ref, r.Checks[0].RefText)
		}
		last := r.Method[len(r.Method)-1].Equation
		if (last.Ref == nil) != stated || last.RefText == "as stated" != stated {
			t.Errorf("%q: the equation cites %v, %q", c.lines, last.Ref, last.RefText)
		}
		for _, ref := range r.Refs {
			if stated && strings.Contains(ref.Clause, c.table) {
				t.Errorf("%q: %s is cited", c.lines, ref)
			}
		}
	}
}

// TestDriftWords: captions name the block, and the words for a figure speak of
// stability where there is one.
func TestDriftWords(t *testing.T) {
	for _, loads := range []bool{false, true} {
		lines := []string{"C_d: 5.5", "limit: 0.02"}
		if loads {
			lines = append(lines, driftLoads)
		}
		r := judged(t, sixStoreys("ASCE/SEI 7-22"), lines...)
		for _, it := range r.Results {
			caption := ""
			if it.Figure != nil {
				caption = it.Figure.Caption
				if strings.Contains(it.Figure.Alt, "stability") != loads {
					t.Errorf("loads %v: %q", loads, it.Figure.Alt)
				}
			} else if it.Table != nil {
				caption = it.Table.Caption
			}
			if caption != "" && !strings.Contains(caption, "of elf by d") {
				t.Errorf("%q does not name the block", caption)
			}
		}
	}
}
