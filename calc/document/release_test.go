package document

import (
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
)

// ready is a package with all that may not be open when it is issued.
const ready = `---
quoin: 1
title: T
number: C-1
project: P
client: Q
subject: S
location: L
basis: [ASCE/SEI 7-22]
status: issued
prepared: MK 2031-03-02
checked: AB 2031-03-03
approved: CD 2031-03-04
revisions:
  - {rev: "0", date: 2031-03-04, note: first, prepared: MK, checked: AB}
---

# Purpose and scope

` + "```calc structure frame\ncite: D\nstoreys:\n  - {level: L1, height: 4 m, weight: 100 kN, stiffness: 10 MN/m}\n```\n\n" +
	"```calc assumptions\n- {id: A1, text: fixed base, status: verified, by: MK, when: 2031-03-02}\n```\n\n" +
	"```calc references\n- {key: D, text: drawings}\n```\n\n```calc formula\nV = 3 kN  # [D] load\ncheck V <= 4 kN  # [ASCE/SEI 7-22 12.8] limit\n```\n\n# **Conclusions**\n"

// TestRelease: a package that lacks nothing is issued; with any one thing taken
// away it is not, and says which; as a draft it may lack all of them.
func TestRelease(t *testing.T) {
	build := func(text string, o Options) []string {
		res := Run(Source{FS: fstest.MapFS{"p.md": {Data: []byte(text)}}, Main: "p.md"}, o)
		var said []string
		for _, d := range res.Diagnostics {
			if d.Code != "not-for-issue" {
				t.Fatalf("%s: %s", d.Range, d.Summary)
			}
			said = append(said, strings.TrimPrefix(d.Summary, "status is issued, but "))
		}
		if (res.Package == nil) != (len(said) > 0) {
			t.Fatal("errors and a package, or neither")
		}
		return said
	}
	if said := build(ready, Options{}); said != nil {
		t.Fatalf("nothing is open, yet %q", said)
	}
	for _, c := range []struct{ old, new, want string }{
		{"number: C-1\n", "", "the front matter gives no number"},
		{"project: P\n", "project:\n", "the front matter gives no project"},
		{"client: Q\n", "", "the front matter gives no client"},
		{"subject: S\n", "", "the front matter gives no subject"},
		{"location: L\n", "", "the front matter gives no location"},
		{"basis: [ASCE/SEI 7-22]\n", "", "the governing documents are not named"},
		{"prepared: MK 2031-03-02\n", "", "nobody is named who prepared it"},
		{"prepared: MK 2031-03-02\n", "prepared: MK\n", "prepared has no date"},
		{"checked: AB 2031-03-03\n", "", "nobody is named who checked it"},
		{"checked: AB 2031-03-03\n", "checked: m.k. 2031-03-03\n", "it was checked by who prepared it"},
		{"approved: CD 2031-03-04\n", "", "nobody is named who approved it"},
		{"revisions:\n  - {rev: \"0\", date: 2031-03-04, note: first, prepared: MK, checked: AB}\n", "", "there is no revision"},
		{", note: first", "", "revision 0 has no note"},
		{"Purpose and scope", "Aim and scope", "no heading speaks of purpose"},
		{"Purpose and scope", "Purpose", "no heading speaks of scope"},
		{"**Conclusions**", "The end", "no heading speaks of conclusion"},
		{"status: verified, by: MK, when: 2031-03-02", "status: open", "assumption A1 is open"},
		{", when: 2031-03-02", "", "assumption A1 is verified by nobody named, or without a date"},
		{"- {id: A1, text: fixed base, status: verified, by: MK, when: 2031-03-02}\n", "", ""},
		{"storeys:\n", "show: [method, results]\nstoreys:\n", "the inputs of frame are not printed"},
		{"# [ASCE/SEI 7-22 12.8] limit", "# limit", "the check V <= 4 kN names no source for its criterion"},
	} {
		text := strings.Replace(ready, c.old, c.new, 1)
		if text == ready {
			t.Fatalf("%q is not there", c.old)
		}
		if c.want == "" {
			text = strings.Replace(text, "```calc assumptions\n```\n", "", 1)
			c.want = "there is no register of assumptions"
		}
		if said := build(text, Options{}); !slices.Equal(said, []string{c.want}) {
			t.Errorf("without %q: %q, want %q", c.old, said, c.want)
		}
		if said := build(strings.Replace(text, "status: issued", "status: for check", 1), Options{}); said != nil {
			t.Errorf("for check, without %q: %q", c.old, said)
		}
	}
	over := Options{Overrides: []exhibit.Override{{Name: "V", Text: "3.5 kN"}}}
	if said := build(ready, over); !slices.Equal(said, []string{"the value of V is overridden from outside the document"}) {
		t.Errorf("overridden: %q", said)
	}
}

// TestReleaseTable: the file of a table is an input, which names its source or is not
// issued.
func TestReleaseTable(t *testing.T) {
	for cite, want := range map[string]string{"": "status is issued, but no source is named for file of table", "cite: D\n": ""} {
		text := strings.Replace(ready, "```calc assumptions\n", "```calc table\nfile: loads.csv\n"+cite+"```\n\n```calc assumptions\n", 1)
		res := Run(Source{FS: fstest.MapFS{"p.md": {Data: []byte(text)}, "loads.csv": {Data: []byte("level,weight [kN]\nL1,100\n")}}, Main: "p.md"}, Options{})
		said := ""
		for _, d := range res.Diagnostics {
			if d.Severity == diag.Error {
				said += d.Summary
			}
		}
		if said != want || (res.Package != nil) != (want == "") {
			t.Errorf("%q: %q, want %q", cite, said, want)
		}
	}
}
