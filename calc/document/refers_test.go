package document

import (
	"strings"
	"testing"
	"testing/fstest"

	"quoin/calc/exhibit"
)

// TestRefers: references are printed with the numbers that things have, those below
// the text as well; a link does not hold one, and an escaped one is text.
func TestRefers(t *testing.T) {
	text := "---\nquoin: 1\ntitle: t\n---\n" +
		"See [Eq. W], [Equation V], [Table sizes], [Fig. m] and [Table m-modes]; \\[Eq. V] and [as [Eq. V] says](#sizes). [Table 12.2-1]\n\n" +
		"```calc formula\nV = 2 kN   # a force\nW = 2 * V   # another\n```\n\n```calc table sizes\nvalues:\n  - { value: V }\n```\n\n" +
		"```calc structure frame\nstoreys:\n  - { level: L1, height: 4 m, weight: 2400 kN, stiffness: 160 kN/mm }\n  - { level: Roof, height: 4 m, weight: 1900 kN, stiffness: 120 kN/mm }\ndamping: 5 %\n```\n\n```calc modes m\nstructure: frame\n```\n"
	res := Run(Source{FS: fstest.MapFS{"p.md": {Data: []byte(text)}}, Main: "p.md"}, Options{})
	if res.Package == nil {
		t.Fatal(res.Diagnostics)
	}
	for _, d := range res.Diagnostics {
		if d.Code == "unknown-exhibit" {
			t.Error(d.Summary)
		}
	}
	var shown []string
	eachProse(res.Package.Chapters[0].Pieces[0].Prose, exhibit.Place{}, func(n exhibit.Prose, _ exhibit.Place) {
		if n.Kind == exhibit.Refer {
			shown = append(shown, n.Text+": "+n.Target)
		}
	})
	const want = "Eq. (2): eq W; Eq. (1): eq V; Table 1: table sizes; Fig. 2: fig m; Table 3: table m-modes"
	if got := strings.Join(shown, "; "); got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
}
