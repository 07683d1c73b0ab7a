package document

import (
	"strings"
	"testing"

	"quoin/calc/exhibit"
)

// TestImportanceOfTheTarget: the risk category and the importance class of the
// target reach I_e of a modal combination and the limits of drifts, through every
// analysis.
func TestImportanceOfTheTarget(t *testing.T) {
	body := calc("structure s", "storeys: [{level: L1, height: 4 m, weight: 900 kN, stiffness: 20 kN/mm}]", "damping: 5 %") + calc("modes m", "structure: s") +
		calc("target d", "basis: ASCE/SEI 7-22", "S_1: 0.4", "S_DS: 0.9", "S_D1: 0.5", "T_L: 8 s", "risk: IV") +
		calc("target e", "basis: EN 1998-1:2004", "type: 1", "ground: B", "a_gR: 0.2 g", "importance: III", "spectrum: design", "q: 3") +
		calc("static a", "structure: s", "target: d", "R: 8", "system: other", "regular: yes") +
		calc("combine b", "modes: m", "target: d", "R: 8", "scale_to: a.V") + calc("combine plain", "modes: m", "target: d") +
		calc("combine c", "modes: m", "target: e") +
		calc("drift da", "from: a", "C_d: 5", "system: other", "P: 1000 kN") +
		calc("drift db", "from: b", "C_d: 5", "system: other", "P: 1000 kN") +
		calc("drift dc", "from: c", "finishes: brittle", "P: 1000 kN")
	p := ran(t, body, nil)
	near(t, p, 1e-9, map[string][]float64{"da.drift_limit": {0.010 * 4}, "db.drift_limit": {0.010 * 4}, "dc.nu": {0.4},
		"b.base_shear_unscaled": {value(t, p, "plain.base_shear").Value.SI[0] * 1.5 / 8}})
	said := map[string]string{}
	items(p, func(b *exhibit.Block, _ string, it exhibit.Item) {
		if it.Echo == nil {
			return
		}
		for _, row := range it.Echo.Rows {
			said[b.Name+"."+row.Field] = row.From
		}
	})
	for field, want := range map[string]string{"b.I_e": "by the risk category of the target, IV", "da.risk": "of the target of a", "dc.importance_class": "of the target of c"} {
		if !strings.Contains(said[field], want) {
			t.Errorf("%s comes from %q, want %q", field, said[field], want)
		}
	}
}
