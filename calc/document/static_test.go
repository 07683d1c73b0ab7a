package document

import (
	"math"
	"slices"
	"strings"
	"testing"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// usual is a package in US units: six storeys of 13 ft, a spectrum, a first mode.
const usual = "---\nquoin: 1\ntitle: T\nunits: US\n---\n"

var sixStoreys = calc("structure s", "storeys:",
	"- {level: L1, height: 13 ft, weight: 700 kip, stiffness: 350 kip/in}", "- {level: L2, height: 13 ft, weight: 650 kip, stiffness: 330 kip/in}",
	"- {level: L3, height: 13 ft, weight: 650 kip, stiffness: 300 kip/in}", "- {level: L4, height: 13 ft, weight: 650 kip, stiffness: 250 kip/in}",
	"- {level: L5, height: 13 ft, weight: 650 kip, stiffness: 200 kip/in}", "- {level: L6, height: 13 ft, weight: 600 kip, stiffness: 150 kip/in}") +
	calc("target d", "basis: ASCE/SEI 7-22", "S_DS: 1", "S_D1: 0.6", "S_1: 0.5", "T_L: 8 s", "risk: II")

// chain is the static procedure for the six storeys, lowest first, SI.
type chain struct{ v, share, force, shear, moment, u, drift, diaphragm []float64 }

// byHand finds it for C_s and k by sums from the definitions.
func byHand(cs, k float64) (h chain) {
	kip, inch, foot := quantity.MustUnit("kip").Scale, 0.0254, 0.3048
	w := []float64{700, 650, 650, 650, 650, 600}
	stiff := []float64{350, 330, 300, 250, 200, 150}
	total, product := 0.0, 0.0
	for i := range w {
		total += w[i] * kip
		product += w[i] * math.Pow(13*float64(i+1), k)
	}
	h.v = []float64{cs * total}
	for i := range w {
		h.share = append(h.share, w[i]*math.Pow(13*float64(i+1), k)/product)
		h.force = append(h.force, h.share[i]*h.v[0])
	}
	below := 0.0
	for i := range w {
		shear, moment, weight := 0.0, 0.0, 0.0
		for j := i; j < len(w); j++ {
			shear += h.force[j]
			moment += h.force[j] * 13 * foot * float64(j+1-i)
			weight += w[j] * kip
		}
		h.shear, h.moment = append(h.shear, shear), append(h.moment, moment)
		h.drift = append(h.drift, shear/(stiff[i]*kip/inch))
		below += h.drift[i]
		h.u = append(h.u, below)
		h.diaphragm = append(h.diaphragm, min(max(shear/weight*w[i]*kip, 0.2*w[i]*kip), 0.4*w[i]*kip))
	}
	return h
}

// TestStaticByHand: the whole chain, in a package in US units.
func TestStaticByHand(t *testing.T) {
	ta := 0.028 * math.Pow(78, 0.8)
	T := 1.4 * ta
	cs := 0.6 / (T * 8)
	k := 1 + (T-0.5)/2
	h := byHand(cs, k)
	p := book(t, usual+sixStoreys+calc("modes m", "structure: s")+
		calc("static f", "structure: s", "target: d", "R: 8", "system: steel moment frame", "T: m.T[1]")+
		calc("static long", "structure: s", "target: d", "R: 8", "I_e: 1", "C_t: 0.028", "x: 0.8", "T: 2.2 s", "drift_period: computed")+
		calc("static si", "structure: s", "target: d", "R: 8", "I_e: 1", "system: steel moment frame", "h_n_in: m", "h_n: 20 m")+
		calc("combine c", "modes: m", "target: d", "R: 8", "scale_to: f.V"), nil)
	near(t, p, 1e-12, map[string][]float64{
		"f.T_a": {ta}, "f.C_u": {1.4}, "f.T": {T}, "f.C_s": {cs}, "f.C_s_plateau": {0.125}, "f.C_s_max": {cs}, "f.C_s_min": {0.044}, "f.k": {k}, "f.V": h.v,
		"f.C_v": h.share, "f.F": h.force, "f.storey_shear": h.shear, "f.overturning": h.moment, "f.diaphragm_force": h.diaphragm, "f.drift_shear": h.shear,
		"c.base_shear": {max(h.v[0], value(t, p, "c.base_shear_unscaled").Value.SI[0])},
	})
	near(t, p, 1e-9, map[string][]float64{"f.displacement": h.u, "f.drift": h.drift})

	// drifts by a period of 2.2 s: the least value, which is kept, governs there
	free := byHand(0.044, 1+(2.2-0.5)/2)
	near(t, p, 1e-9, map[string][]float64{"long.V": h.v, "long.drift_shear": free.shear, "long.drift": free.drift, "long.displacement": free.u})
	near(t, p, 1e-12, map[string][]float64{"si.T_a": {0.0724 * math.Pow(20, 0.8)}, "si.T": {0.0724 * math.Pow(20, 0.8)}})
	for _, e := range p.Values {
		if e.ID == "f.C_s_min_1" || e.ID == "f.S_d" || e.ID == "f.lambda" {
			t.Errorf("%s is exported where it does not apply", e.ID)
		}
	}
}

// TestStaticShown: limbs that govern, that do not apply and that could not be
// checked say so; so do forces without torsion.
func TestStaticShown(t *testing.T) {
	p := book(t, usual+sixStoreys+calc("static f", "structure: s", "target: d", "R: 8", "system: steel moment frame")+
		calc("target e", "basis: ASCE/SEI 7-22", "S_DS: 1", "S_D1: 0.6", "T_L: 8 s")+calc("static g", "structure: s", "target: e", "R: 8", "I_e: 1", "system: other", "show: results"), nil)
	said := func(id string) (out []string) {
		for _, row := range table(t, p, id).Rows {
			word := row[3].Text
			if len(row[2].Numbers) > 0 {
				word += " " + row[2].Numbers[0].Text()
			}
			if row[0].Strong != strings.HasPrefix(word, "governs") {
				t.Errorf("%s: %s is %s, in bold: %v", id, row[0].Text, word, row[0].Strong)
			}
			if row[4].Text == "" {
				t.Errorf("%s: %s gives no reason", id, row[0].Text)
			}
			out = append(out, row[0].Text+": "+word)
		}
		return out
	}
	want := []string{"Eq. 12.8-2: no", "Eq. 12.8-3: yes 0.1250", "Eq. 12.8-4: governs 0.08208", "Eq. 12.8-5: no", "Eq. 12.8-6: yes 0.04400", "Eq. 12.8-7: no"}
	if got := said("f-coefficient"); !slices.Equal(got, want) {
		t.Errorf("limbs\n%q, want\n%q", got, want)
	}
	if last := said("g-coefficient"); last[len(last)-1] != "Eq. 12.8-7: not checked" || !warned(p, "minimum-unchecked") {
		t.Errorf("without S_1: %q", last)
	}
	if !strings.Contains(table(t, p, "g-forces").Caption, "accidental torsion not included") || triggeredBy(p)["accidental-torsion"] != "b-f b-g" {
		t.Error("accidental torsion is passed in silence")
	}
	footnotes := 0
	equations := map[string]float64{}
	items(p, func(b *exhibit.Block, part string, it exhibit.Item) {
		if e := it.Equation; e != nil && e.Result != nil && b.Name == "f" {
			equations[e.Symbol.Text] = e.Result.SI[0]
		}
	})
	for _, c := range p.Chapters {
		for _, piece := range c.Pieces {
			if b := piece.Block; b != nil && b.Kind == "static" && slices.Contains(b.Warnings, "Accidental torsion is not included: the model is planar.") {
				footnotes++
			}
		}
	}
	if footnotes != 2 {
		t.Errorf("%d of 2 static blocks say that accidental torsion is not included", footnotes)
	}
	for _, name := range []string{"T_a", "C_u", "T", "C_s_plateau", "C_s_max", "C_s_min", "C_s", "V", "k"} {
		if got, ok := equations[name]; !ok || math.Abs(got/value(t, p, "f."+name).Value.SI[0]-1) > 1e-12 {
			t.Errorf("the equation of %s gives %v (%v)", name, got, ok)
		}
	}
	rows := table(t, p, "f-forces").Rows
	if len(rows) != 7 || rows[0][0].Text != "L6" || rows[6][0].Text != "total" {
		t.Error("the table of forces does not run from the top down to its sums")
	}
	if panels := figureOf(t, p, "f-response").Panels; len(panels) != 3 || len(panels[0].Series) != 4 {
		t.Error("the diaphragm forces are not drawn between their bounds")
	}
}
