package document

import (
	"encoding/json"
	"fmt"
	"math"
	"runtime"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"quoin/calc/exhibit"
)

// swaying is a frame under static forces, with two vary blocks and a check that
// comes out otherwise within the range of one.
var swaying = calc("references", `- {key: GR, text: "Ground report"}`) +
	calc("structure frame", "storeys:", "  - { level: L1, height: 4 m, weight: 2400 kN, stiffness: 160 kN/mm }", "  - { level: Roof, height: 3.6 m, weight: 1900 kN, stiffness: 120 kN/mm }", "damping: 5 %") +
	calc("modes m", "structure: frame") +
	calc("target design", "basis: ASCE/SEI 7-22", "S_DS: 0.92", "S_D1: 0.55", "S_1: 0.45", "T_L: 8 s") +
	calc("static elf", "structure: frame", "target: design", "R: R_x", "I_e: 1.0", "system: concrete moment frame", `T: "m.T[1]"`) +
	calc("formula", "R_x = 8   # [GR] factor", "V_half = elf.V / 2   # [GR] half", "check elf.V <= 800 kN   # [GR] enough", "root = sqrt(R_x - 5)   # [GR] no result below 5")

var varied = calc("vary v", "names: [{name: R_x, from: 4, to: 8, count: 5}]", "of: [elf.V, V_half]") +
	calc("vary w", "names:", "  - {name: design.S_DS, values: [0.7, 1.1]}", "  - {name: R_x, values: [6, 4]}", "of: [{value: elf.V, label: base shear, unit: MN}]") +
	calc("vary x", "names: [{name: R_x, values: [3, 6, 7]}]", "of: [root]") +
	calc("formula", "most = v.most / v.base   # [GR] r", "all = sum(x.y) + v.y[1] / v.y[5]   # [GR] a")

// TestVary: every case is what --set gives, what a case fails at is told and counts
// for nothing, and the document's own values stay as they are.
func TestVary(t *testing.T) {
	p := ran(t, swaying+varied, nil)
	plainly := ran(t, swaying, nil)
	for _, e := range plainly.Values {
		if got := value(t, p, e.ID).Value.SI; !slices.Equal(got, e.Value.SI) {
			t.Errorf("%s is %v, without vary blocks %v", e.ID, got, e.Value.SI)
		}
	}
	y := value(t, p, "v.y").Value.SI
	for i, R := range []string{"4", "5", "6", "7", "8"} {
		if R == "4" {
			continue // root has no value there, so that nothing is built
		}
		set := ran(t, swaying, nil, exhibit.Override{Name: "R_x", Text: R})
		if want := value(t, set, "elf.V").Value.SI[0]; y[i] != want || want == 0 {
			t.Errorf("R_x = %s gives %v, set from outside %v", R, y[i], want)
		}
	}
	if x := value(t, p, "x.x").Value.SI; !slices.Equal(x, []float64{6, 7}) {
		t.Errorf("x has results at %v, want 6 and 7", x)
	}
	near(t, p, 1e-12, map[string][]float64{"x.failed": {1}, "x.count": {3}, "x.y": {1, math.Sqrt2}, "v.base": value(t, plainly, "elf.V").Value.SI, "most": {2}})
	text, _ := json.Marshal(p.Chapters)
	for _, want := range []string{"no result", "What-if results, no design values", "Check elf.V \\u003c= 800 kN: OK as the document stands, NOT OK with R_x = 4", "No result with R_x = 3"} {
		if !strings.Contains(string(text), want) {
			t.Errorf("the package does not say %q", want)
		}
	}
	if !slices.ContainsFunc(p.Cautions, func(c exhibit.Caution) bool { return c.Key == "what-if" }) {
		t.Error("no caution")
	}
	for _, id := range []string{"v.elf.V", "v.V_half", "w.base shear@R_x", "w.base shear@design.S_DS", "x.root"} {
		if !slices.ContainsFunc(p.Series, func(c exhibit.Curve) bool { return c.ID == id }) {
			t.Errorf("no series %s", id)
		}
	}
}

// TestVarySame: the same package on one core and on eight.
func TestVarySame(t *testing.T) {
	one := ""
	for _, cores := range []int{1, 8, 3} {
		old := runtime.GOMAXPROCS(cores)
		text, err := json.Marshal(ran(t, swaying+varied, nil))
		runtime.GOMAXPROCS(old)
		if err != nil {
			t.Fatal(err)
		}
		if one == "" {
			one = string(text)
		} else if one != string(text) {
			t.Errorf("another package on %d cores", cores)
		}
	}
}

// TestVaryCached: a vary block is taken from the cache where nothing that it rests
// on is different, and computed where something is, though its own fields and the
// values that it reads are the same.
func TestVaryCached(t *testing.T) {
	c := &shelf{kept: map[string][]byte{}}
	run := func(body string) string {
		res := Run(Source{FS: fstest.MapFS{"package.md": {Data: []byte(head + body)}}, Main: "package.md"}, Options{Cache: c})
		if res.Package == nil {
			t.Fatal(text(res))
		}
		return fmt.Sprint(value(t, res.Package, "v.y").Value.SI)
	}
	swaying := strings.Replace(swaying, "check elf.V <= 800 kN   # [GR] enough", "", 1) // which would tell by itself
	first := run(swaying + varied)
	if again := run("\nText.\n" + swaying + varied); again != first {
		t.Errorf("from the cache %s, computed %s", again, first)
	}
	fixed := strings.Replace(swaying, "R: R_x", "R: 8", 1)
	changed := run(fixed + varied)
	if changed == first {
		t.Error("R_x moves elf.V no longer, but the old curve is shown")
	}
}
