package document

import (
	"strings"
	"testing"
	"testing/fstest"
)

// TestHints: other words for a field or a unit are told in the words of the language.
func TestHints(t *testing.T) {
	for body, want := range map[string]string{
		calc("target t", "basis: EN 1998-1:2004", "soil: B"):          "write ground",
		calc("target t", "basis: ASCE/SEI 7-22", "site_class: D"):     "write site",
		calc("target t", "basis: ASCE/SEI 7-22", "risk category: II"): "write risk",
		calc("record r", "file: a.csv", "filter: 0.1 Hz"):             "write treat: bandpass",
		calc("formula f", "m = 620 tonnes"):                           "write t",
		calc("formula f", "x = 210 k/in"):                             "write kip",
		calc("formula f", "A = 1200 sq ft"):                           "ft^2",
	} {
		res := Run(Source{FS: fstest.MapFS{"package.md": {Data: []byte(head + body)}}, Main: "package.md"}, Options{})
		if !strings.Contains(string(text(res)), "hint: "+want) && !(want == "ft^2" && strings.Contains(string(text(res)), want)) {
			t.Errorf("%s: said is\n%s", body, string(text(res)))
		}
	}
}
