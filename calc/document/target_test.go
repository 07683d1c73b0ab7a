package document

import (
	"math"
	"strings"
	"testing"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

const ordinates722 = "T [s],S_a [g]\n0,0.675\n0.01,0.675\n0.02,0.69\n0.03,0.735\n0.05,0.90\n0.075,1.125\n0.1,1.32\n0.15,1.53\n0.2,1.65\n0.25,1.71\n0.3,1.725\n0.4,1.68\n0.5,1.575\n" +
	"0.75,1.275\n1,1.05\n1.5,0.75\n2,0.57\n3,0.375\n4,0.27\n5,0.21\n7.5,0.1275\n10,0.075\n"

// TestTargets writes a target of each standard as an engineer would, and reads
// its values from the registry.
func TestTargets(t *testing.T) {
	const g = quantity.Gravity
	p := ran(t, calc("target mp", "basis: ASCE/SEI 7-22", "ordinates: mp.csv", "ordinates_of: MCE_R", "site: D", "risk: IV", "S_1: 0.7", "T_L: 12 s")+
		calc("target d16", "basis: ASCE/SEI 7-16", "S_S: 0.85", "S_1: 0.32", "site: D", "site_specific: exception", "risk: III", "T_L: 6 s")+
		calc("target v16", "basis: ASCE/SEI 7-16", "spectrum: vertical", "S_S: 0.85", "S_1: 0.1", "site: C", "T_L: 6 s")+
		calc("target el", "basis: EN 1998-1:2004", "type: 1", "ground: B", "a_gR: 2.4525 m/s^2", "gamma_I: 1.0", "damping: 2 %")+
		calc("target de", "basis: EN 1998-1:2004", "spectrum: design", "type: 1", "ground: B", "a_g: 2.4525 m/s^2", "q: 3")+
		calc("target ve", "basis: EN 1998-1:2004", "spectrum: vertical", "type: 2", "a_g: 2 m/s^2")+
		calc("formula", "a = mp.PSA(0.35 s)", "b = mp.PSA(15 s)", "c = el.PSA(0.68 s)", "d = el.SD(12 s)", "e = de.PSA(0.68 s)", "f = de.PSA(3 s)", "h = ve.PSA(0.2 s)", "k = d16.PSA(8 s)", "n = v16.PSA(0.1 s)"),
		map[string]string{"mp.csv": ordinates722})
	sqrt := math.Sqrt(10.0 / 7)
	near(t, p, 1e-9, map[string][]float64{
		"mp.S_DS": {1.035}, "mp.S_D1": {0.7}, "mp.S_MS": {1.5525}, "mp.I_e": {1.5}, "a": {1.135 * g}, "b": {0.05 * 10 * 12 / 225 * g},
		"d16.F_a": {1.16}, "d16.F_v": {1.98}, "d16.S_M1": {0.6336}, "d16.T_S": {0.4224 / (0.986 / 1.5)}, "d16.I_e": {1.25}, "k": {0.0396 * g},
		"v16.C_v": {1.1 + 0.02*0.2}, "n": {2.0 / 3 * 0.8 * 1.104 * 1.02 * g},
		"el.eta": {sqrt}, "el.damping": {0.02}, "el.S": {1.2}, "el.T_E": {5}, "el.d_g": {0.073575}, "el.a_g": {2.4525},
		"c": {2.4525 * 1.2 * 2.5 * sqrt * 0.5 / 0.68}, "d": {0.073575},
		"de.T_beta": {math.Sqrt(5)}, "de.beta": {0.2}, "e": {2.4525 * 1.2 * 2.5 / 3 * 0.5 / 0.68}, "f": {0.4905},
		"ve.a_vg": {0.9}, "h": {0.9 * 3 * 0.15 / 0.2},
	})
	// what the standard asks stands on the page
	rows := table(t, p, "d16-conditions").Rows
	said := ""
	for _, row := range rows {
		said += row[0].Text + ": " + row[1].Text + "\n"
	}
	for _, want := range []string{"risk category III: D", "site class F: a ground response analysis (21.1): does not apply", "site class D or E with S_1 ≥ 0.2: applies", "exception 2: ", "claimed"} {
		if !strings.Contains(said, want) {
			t.Errorf("the conditions do not say %q:\n%s", want, said)
		}
	}
	if c := table(t, p, "mp-conditions").Rows[0]; c[1].Text != "D" {
		t.Errorf("the category is %q", c[1].Text)
	}
	// every target computes itself again
	checked := 0
	items(p, func(b *exhibit.Block, _ string, it exhibit.Item) {
		if b.Kind == "target" && strings.HasPrefix(it.Text, "Cross-checks") {
			checked++
			if !strings.Contains(it.Text, "less than 10⁻¹⁵") && !strings.Contains(it.Text, "×10⁻¹") {
				t.Errorf("%s: %s", b.Name, it.Text)
			}
		}
	})
	if checked != 6 {
		t.Errorf("%d targets of 6 are checked", checked)
	}
	for name, want := range map[string]string{"mp": "Sa", "el": "Se", "de": "Sd", "v16": "Sav", "ve": "Sve"} {
		if got := figureOf(t, p, name).Panels[0].Y.Label; got != want {
			t.Errorf("the figure of %s shows %q, want %q", name, got, want)
		}
	}
	found := map[string]bool{}
	for _, c := range p.Cautions {
		found[c.Key] = true
	}
	if !found["site-exception"] || found["two-period"] {
		t.Errorf("cautions: %v", found)
	}
}

// TestOrdinatesGiven: MCE_R ordinates stand beside the design ones, which are two thirds
// of them; ordinates of a design spectrum stand alone.
func TestOrdinatesGiven(t *testing.T) {
	files := map[string]string{"mp.csv": ordinates722}
	target := func(of string) string {
		return calc("target mp", "basis: ASCE/SEI 7-22", "ordinates: mp.csv", "ordinates_of: "+of, "site: D", "T_L: 12 s")
	}
	rows := table(t, ran(t, target("MCE_R"), files), "mp-rows")
	if len(rows.Columns) != 3 || rows.Columns[1].Head != "SaM, as given" && !strings.HasPrefix(rows.Columns[1].Head, "SaM") {
		t.Fatalf("columns %v", rows.Columns)
	}
	for i, T := range []float64{0, 0.01, 0.02, 0.03, 0.05, 0.075, 0.1, 0.15, 0.2, 0.25, 0.3, 0.4, 0.5, 0.75, 1, 1.5, 2, 3, 4, 5, 7.5, 10} {
		row := rows.Rows[i]
		at, mce, sa := row[0].Numbers[0].Value, row[1].Numbers[0].Value, row[2].Numbers[0].Value
		if at != T || math.Abs(sa/mce*1.5-1) > 1e-12 {
			t.Errorf("at %v s: %v of %v", at, sa, mce)
		}
	}
	if mce := rows.Rows[9][1].Numbers[0].Value; math.Abs(mce/quantity.Gravity-1.71) > 1e-12 { // at 0.25 s
		t.Errorf("at 0.25 s %v m/s² stand as given", mce)
	}
	if n := len(rows.Rows); n > 22 && len(rows.Rows[22][1].Numbers) > 0 {
		t.Errorf("a row beyond the ordinates holds one")
	}
	if rows := table(t, ran(t, target("design"), files), "mp-rows"); len(rows.Columns) != 2 {
		t.Errorf("columns %v", rows.Columns)
	}
}

// TestMultiPeriodBasis: with the ordinates of the site, the mapped values and the site
// coefficients do not apply, and the static block says so.
func TestMultiPeriodBasis(t *testing.T) {
	p := ran(t, tower+calc("target mp", "basis: ASCE/SEI 7-22", "ordinates: mp.csv", "ordinates_of: MCE_R", "site: D", "S_1: 0.7", "T_L: 12 s")+
		calc("static f", "structure: frame", "target: mp", "R: 8", "I_e: 1", "system: concrete moment frame"), map[string]string{"mp.csv": ordinates722})
	said := map[string]string{}
	for _, row := range table(t, p, "f-basis").Rows {
		said[row[0].Text] = row[1].Text
	}
	for _, symbol := range []string{"S_S", "F_a", "F_v"} {
		if said[symbol] != "does not apply" {
			t.Errorf("%s: %q in %v", symbol, said[symbol], said)
		}
	}
	if said["S_1"] == "does not apply" {
		t.Error("S_1 is given and said not to apply")
	}
}
