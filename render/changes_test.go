package render

import (
	"bytes"
	"strings"
	"testing"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/render/ledger"
)

// TestChanges: a change sheet holds what moved and, of the spectra that moved, the old
// over the new; two of the same say so.
func TestChanges(t *testing.T) {
	s, a := quantity.MustUnit("s"), quantity.MustUnit("g")
	state := func(rev string, v float64) (*ledger.Frozen, exhibit.Curve) {
		c := exhibit.Curve{ID: "rs.PSA@5%", X: quantity.List([]float64{0.1, 0.2, 0.3}, s, nil), Y: quantity.List([]float64{v, 2 * v, v}, a, nil)}
		p := &exhibit.Package{System: quantity.SI, Meta: exhibit.Meta{Title: "Tower", Revision: []exhibit.Revision{{Rev: rev}}}, Provenance: exhibit.Provenance{Source: "p.md"},
			Values: []exhibit.Entry{{ID: "V", Value: quantity.Scalar(v, a), Depends: []string{"x"}}}, Series: []exhibit.Curve{c}}
		return ledger.FrozenOf(p), c
	}
	old, before := state("A", 1)
	now, after := state("B", 1.25)
	d := ledger.Compare(old, now, ledger.Tolerance)
	html, err := Changes(d, [2]string{"v1:p.md", "p.md"}, "quoin 9", []Overlay{{"rs.PSA@5%", before, after}}, Options{})
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"Changes of Tower", "Changes since revision A", "v1:p.md", "25.0 %", "rs.PSA@5%, old and new", "old, A", "new, B", "<svg"} {
		if !bytes.Contains(html, []byte(want)) {
			t.Errorf("the sheet lacks %q", want)
		}
	}
	if strings.Contains(string(html), "tables/") || strings.Contains(string(html), "Check summary") {
		t.Error("the sheet speaks of parts of a package")
	}
	same, err := Changes(ledger.Compare(old, old, ledger.Tolerance), [2]string{"a", "b"}, "quoin 9", nil, Options{})
	if err != nil || !bytes.Contains(same, []byte("All results are the same.")) || bytes.Contains(same, []byte("q-changes")) {
		t.Errorf("two of the same: %v", err)
	}
}
