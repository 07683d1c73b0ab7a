package document

import (
	"strings"
	"testing"
	"testing/fstest"

	"quoin/calc/exhibit"
)

const checkedText = "---\nquoin: 1\ntitle: t\nprepared: MK 2031-03-02\nchecked: RV 2031-03-04\n---\n" +
	"```calc formula\nV = 3 kN  # [GR] load\nw = [1 kN, 2 kN]  # [GR] parts\n```\n" +
	"```calc checking\nby: RV\ndate: 2031-03-04\nscope: the load\nmethod: by hand\nwithin: 2 %\nvalues:\n  - {of: V, own: 3.03 kN}\n  - {of: \"w[2]\", own: 2.1 kN, by: AB}\n```\n" +
	"```calc comments\n- {id: C1, by: AB, text: a, response: b, where: V, status: closed}\n- {id: C2, by: AB, text: a, response: b, where: \"[Eq. V]\", status: answered}\n- {id: C3, by: AB, text: a, where: sheet S-2, status: open}\n```\n" +
	"```calc references\n- {key: GR, text: Ground report}\n```\n"

// TestChecking: the values of the checker are checks against those of the calculation,
// within the tolerance stated; what is not closed is open; a field that says where leads there.
func TestChecking(t *testing.T) {
	res := Run(Source{FS: fstest.MapFS{"p.md": {Data: []byte(checkedText)}}, Main: "p.md"}, Options{})
	if res.Package == nil {
		t.Fatal(res.Diagnostics)
	}
	p := res.Package
	want := []struct {
		demand, limit, tolerance float64
		ok                       bool
		by                       string
	}{{3000, 3030, 60.6, true, "RV"}, {2000, 2100, 42, false, "AB"}}
	if len(p.Checks) != len(want) {
		t.Fatalf("%d checks", len(p.Checks))
	}
	for i, w := range want {
		c := p.Checks[i]
		if c.Demand.Value != w.demand || c.Limit.Value != w.limit || c.OK != w.ok || c.Tolerance == nil || c.Tolerance.Value < w.tolerance-1e-9 || c.Tolerance.Value > w.tolerance+1e-9 || !strings.HasSuffix(c.Description, w.by) {
			t.Errorf("check %d: %+v", i, c)
		}
	}
	if r := p.Checking; len(r) != 1 || r[0].Values != 2 || r[0].Differing != 1 || r[0].Anchor == "" {
		t.Errorf("the record: %+v", r)
	}
	if open := exhibit.OpenComments(p.Comments); len(open) != 2 || open[0].ID != "C2" {
		t.Errorf("open: %+v", open)
	}
	var refer []string
	for _, c := range p.Chapters {
		for _, piece := range c.Pieces {
			if piece.Block == nil || piece.Block.Kind != "comments" {
				continue
			}
			for _, row := range piece.Block.Parts[0].Items[0].Table.Rows {
				refer = append(refer, row[4].Text+": "+row[4].Refer)
			}
		}
	}
	if got := strings.Join(refer, "; "); got != "V: value V; Eq. (1): eq V; sheet S-2: " {
		t.Errorf("where: %s", got)
	}
}

// TestOpenStatement: the statement says how many things are open, and the cover says it
// in short while there is one.
func TestOpenStatement(t *testing.T) {
	res := Run(Source{FS: fstest.MapFS{"p.md": {Data: []byte(checkedText)}}, Main: "p.md"}, Options{})
	for _, c := range res.Package.Cautions {
		if c.Key == "open" {
			if !strings.Contains(c.Text, "no open assumption, 2 open comments, 1 check NOT OK, a check signed by a second person") || !strings.HasPrefix(c.Short, "Not for construction") {
				t.Errorf("%q, %q", c.Text, c.Short)
			}
			return
		}
	}
	t.Error("no statement")
}
