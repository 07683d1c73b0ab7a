package document

import (
	"slices"
	"strings"
	"testing"
	"testing/fstest"
)

// TestRests: what is computed, over however many steps, from what cites an open
// assumption rests on it, and nothing else does; a verified one is no flag, but the
// register names what rests on it.
func TestRests(t *testing.T) {
	const text = "---\nquoin: 1\ntitle: t\n---\nBy [A1].\n\n" +
		"```calc assumptions\n- { id: A1, text: stiffness, status: open }\n- { id: A2, text: site, status: verified, by: MK }\n- { id: A10, text: load, status: open }\n- { id: A11, text: idle, status: open }\n```\n\n" +
		"```calc formula\nP = 2 kN   # [A10] a load\nQ = 3 kN   # [GR; A2] a load\nR = P + Q   # their sum\nS = 2 * Q\ncheck R <= 9 kN  # [GR; A1] held\ncheck S <= 9 kN  # [GR] held too\n```\n\n" +
		"```calc structure frame\nstoreys:\n  - { level: L1, height: 4 m, weight: 2400 kN, stiffness: 160 kN/mm }\n  - { level: Roof, height: 4 m, weight: 1900 kN, stiffness: 120 kN/mm }\ndamping: 5 %\ncite: [GR, A1, A2]\n```\n\n" +
		"```calc modes m\nstructure: frame\n```\n\n```calc formula\nT = m.T[1]\nU = 2 s  # [GR] given\n```\n\n```calc references\n- { key: GR, text: Ground report }\n```\n"
	res := Run(Source{FS: fstest.MapFS{"p.md": {Data: []byte(text)}}, Main: "p.md"}, Options{})
	if res.Package == nil {
		t.Fatal(res.Diagnostics)
	}
	p := res.Package
	got := map[string]string{}
	for _, c := range p.Chapters {
		for _, piece := range c.Pieces {
			if b := piece.Block; b != nil {
				if b.Name != "" {
					got[b.Name] = strings.Join(b.Rests, " ")
				}
				for _, part := range b.Parts {
					for _, it := range part.Items {
						if it.Equation != nil && it.Equation.ID != "" && b.Kind == "formula" {
							got[it.Equation.ID] = strings.Join(it.Equation.Rests, " ")
						}
					}
				}
			}
		}
	}
	for _, c := range p.Checks {
		got[c.Name] = strings.Join(c.Rests, " ")
	}
	for name, want := range map[string]string{"P": "A10", "Q": "", "R": "A10", "S": "", "R <= 9 kN": "A1 A10", "S <= 9 kN": "", "frame": "A1", "m": "A1", "T": "A1", "U": ""} {
		if have, ok := got[name]; !ok || have != want {
			t.Errorf("%s rests on %q, want %q", name, have, want)
		}
	}
	for _, e := range p.Checks {
		if e.Ref == nil || e.Ref.Key != "GR" || e.Ref.Clause != "" {
			t.Errorf("%s has the source %v", e.Name, e.Ref)
		}
	}
	var names []string
	for _, as := range p.Assumptions {
		var of []string
		for _, o := range as.Dependents {
			of = append(of, o.Name)
		}
		slices.Sort(of)
		names = append(names, as.ID+": "+strings.Trim(strings.Join(of, " "), " "))
	}
	if want := []string{"A1: T frame m", "A2: Q R S T frame m", "A10: P R", "A11: "}; !slices.Equal(names, want) {
		t.Errorf("%q\nwant %q", names, want)
	}
	var open []string
	for _, c := range p.Cautions {
		if c.Key == "open-assumption" {
			open = c.Blocks
		}
	}
	for _, x := range p.Chapters[0].Pieces {
		if b := x.Block; b != nil && (b.Name == "frame" || b.Name == "m") && !slices.Contains(open, b.Anchor) {
			t.Errorf("the caution does not name %s: %v", b.Name, open)
		}
	}
}
