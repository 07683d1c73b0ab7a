package document

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"testing/fstest"

	"quoin/calc/exhibit"
)

// TestDriftByHand holds the drift block of testdata/kinds.txtar to the shear
// building it stands on: theta is P/(k h), whatever C_d and R are.
func TestDriftByHand(t *testing.T) {
	_, res := runKinds(t, Options{})
	p := res.Package
	const g = 9.80665
	w := []float64{2000e3, 150e3 * g}
	P, k, h := []float64{w[0] + w[1], w[1]}, []float64{200e6, 120e6}, []float64{4, 3}
	elastic := value(t, p, "r.drift").Value.SI
	want := map[string][]float64{"dr.drift_elastic": elastic}
	for i, e := range elastic {
		for id, x := range map[string]float64{
			"dr.drift": 4.5 * e, "dr.drift_first_order": 4.5 * e, "dr.drift_ratio": 4.5 * e / h[i], "dr.drift_limit": 0.015 / 1.3 * h[i],
			"dr.theta": P[i] / (k[i] * h[i]), "dr.theta_limit": math.Min(0.5/([]float64{0.9, 0.5}[i]*4.5), 0.25), "dr.second_order": 1,
		} {
			want[id] = append(want[id], x)
		}
	}
	near(t, p, 1e-9, want)
}

// shaky is a storey of theta 0.2 (P is 1600 kN) on flat ground motion.
var shaky = calc("structure s", "storeys: [{level: L1, height: 4 m, weight: 1000 kN, stiffness: 2 kN/mm}]", "damping: 5 %") +
	calc("modes m", "structure: s") + calc("target t", "table: t.csv", "damping: 5 %") + calc("combine c", "modes: m", "target: t", "R: 5")

var flat = map[string]string{"t.csv": "T [s],PSA [g]\n0,0.3\n9,0.3\n"}

// TestSecondOrder: drifts are amplified where theta exceeds 0.10, and the factor
// is there for the forces.
func TestSecondOrder(t *testing.T) {
	p := ran(t, shaky+calc("drift d", "from: c", "basis: ASCE/SEI 7-22", "C_d: 2", "I_e: 1", "system: masonry", "risk: IV", "P: 1600 kN"), flat)
	e := 0.3 * 1000e3 / 5 / 2e6
	near(t, p, 1e-9, map[string][]float64{"d.theta": {0.2}, "d.theta_limit": {0.25}, "d.second_order": {1.25}, "d.drift_first_order": {2 * e}, "d.drift": {2.5 * e}, "d.drift_limit": {0.028}})
	if !warned(p, "second-order-factor") {
		t.Error("nothing is said of second-order effects")
	}
}

// TestChecksOfBlocks: the checks of a block stand in the package, on its page and
// in the result of the run, whatever parts are shown; in the order of the document.
func TestChecksOfBlocks(t *testing.T) {
	body := calc("formula a", "check 1 <= 2") + shaky +
		calc("drift d", "show: echo", "from: c", "basis: ASCE/SEI 7-22", "C_d: 5", "I_e: 1", "limit: 0.05", "P: 1600 kN") + calc("formula b", "check d.theta <= 0.3", "check 2 <= 3")
	fs := fstest.MapFS{"package.md": {Data: []byte(head + body)}, "t.csv": {Data: []byte(flat["t.csv"])}}
	res := Run(Source{FS: fs, Main: "package.md"}, Options{})
	if res.Package == nil {
		t.Fatalf("errors:\n%s", text(res))
	}
	want := []string{"1 <= 2", "d.drift <= d.drift_limit [1]", "d.theta <= d.theta_limit [1]", "d.theta <= 0.3 [1]", "2 <= 3"}
	line := strings.Count((head + body)[:strings.Index(head+body, "calc drift")], "\n") + 1
	for name, list := range map[string][]exhibit.Check{"package": res.Package.Checks, "result": res.Checks} {
		var ids []string
		for _, c := range list {
			ids = append(ids, c.ID)
			if strings.HasPrefix(c.ID, "d.theta <= d") && (c.OK || math.Abs(*c.Ratio-2) > 1e-9 || c.Item != "L1" || c.Place.Line != line || c.Anchor != "b-d" || c.Ref == nil || c.Tree == nil) {
				t.Errorf("%s: %+v", name, c)
			}
		}
		if fmt.Sprint(ids) != fmt.Sprint(want) {
			t.Errorf("%s: %q, want %q", name, ids, want)
		}
	}
	shown := 0
	items(res.Package, func(b *exhibit.Block, part string, it exhibit.Item) {
		if b.Name == "d" && it.Checks != nil && part == "checks" {
			shown += len(it.Checks)
		}
		if b.Name == "d" && (it.Table != nil || it.Figure != nil) {
			t.Error("results are shown that should not be")
		}
	})
	if shown != 2 {
		t.Errorf("%d checks are shown with the block", shown)
	}
	cited := false
	for _, r := range res.Package.References {
		for _, c := range r.Clauses {
			cited = cited || c == "12.8.7"
		}
	}
	if !cited {
		t.Error("the clause of a check is in no register")
	}
}

// TestCheckOfBlockTwice: a check line that a block makes already is an error where
// it stands.
func TestCheckOfBlockTwice(t *testing.T) {
	body := shaky + calc("drift d", "from: c", "basis: ASCE/SEI 7-22", "C_d: 2", "I_e: 1", "limit: 0.05", "P: 1600 kN") + calc("formula a", "check  d.theta <=  d.theta_limit # mine")
	fs := fstest.MapFS{"package.md": {Data: []byte(head + body)}, "t.csv": {Data: []byte(flat["t.csv"])}}
	res := Run(Source{FS: fs, Main: "package.md"}, Options{})
	at := strings.Count(head+body, "\n") - 1
	var said []string
	for _, d := range res.Diagnostics {
		said = append(said, fmt.Sprintf("%s %d:%d", d.Code, d.Range.Line, d.Range.Column))
	}
	if res.Package != nil || fmt.Sprint(said) != fmt.Sprintf("[second-order-factor %d:4 check-twice %d:1]", at-10, at) {
		t.Errorf("%q, the line is %d", said, at)
	}
}

// TestScaledDrifts: drifts and theta of a combination that was scaled to a base
// shear, with drifts as they are and scaled along.
func TestScaledDrifts(t *testing.T) {
	body := one + calc("combine c", "modes: m", "target: d", "R: 4", "scale_to: 1000 kN")
	common := []string{"from: c", "basis: ASCE/SEI 7-22", "C_d: 3", "I_e: 1", "limit: 0.02", "P: 1000 kN"}
	k := 4 * math.Pi * math.Pi / 0.25 * 100e3
	p := ran(t, body+calc("drift a", append(common, "scale_drifts: no")...)+calc("drift b", append(common, "scale_drifts: yes")...), nil)
	unscaled := value(t, p, "c.base_shear_unscaled").Value.SI[0]
	near(t, p, 1e-9, map[string][]float64{"a.theta": {1000e3 / (k * 4)}, "b.theta": {1000e3 / (k * 4)}, "a.drift": {3 * unscaled / k}, "b.drift": {3 * 1000e3 / k}})
}
