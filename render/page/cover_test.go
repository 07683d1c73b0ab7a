package page

import (
	"fmt"
	"regexp"
	"strings"
	"testing"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// plainPackage is a package with as many things on its cover as asked.
func plainPackage(paper string, many int) *exhibit.Package {
	p := &exhibit.Package{System: quantity.SI, Provenance: exhibit.Provenance{Source: "package.md", Commit: "1a2b", Dirty: true}}
	p.Meta = exhibit.Meta{Title: strings.TrimSpace(strings.Repeat("Tower ", min(many, 40)+1)), Status: "issued", Paper: paper}
	one := &exhibit.Block{Kind: "formula", Name: "b", Anchor: "b", Place: exhibit.Place{File: "package.md", Line: 5}}
	for i := range many {
		n := fmt.Sprint(i)
		p.Meta.Basis = append(p.Meta.Basis, "Basis "+n)
		p.Meta.Revision = append(p.Meta.Revision, exhibit.Revision{Rev: "R" + n, Note: strings.Repeat("reason ", 12), Prepared: "MK", Checked: "m.k."})
		p.Provenance.Overrides = append(p.Provenance.Overrides, exhibit.Override{Name: "value_" + n, Text: n + " m", Was: "1 m"})
		r := 1.05 + float64(i)
		p.Checks = append(p.Checks, exhibit.Check{ID: "c" + n, Name: "c" + n, Anchor: "b", Relation: "<=", Ratio: &r})
		p.Warnings = append(p.Warnings, diag.Diagnostic{Severity: diag.Warning, Summary: "doubt " + n, Range: diag.Range{File: "package.md", Line: 6}})
	}
	one.Parts = []exhibit.Part{{Items: []exhibit.Item{{Checks: p.Checks}}}}
	if many == 0 {
		one.Parts = nil
	}
	p.Cautions = []exhibit.Caution{{Key: "aid", Text: strings.Repeat("caution ", 30)}}
	p.Chapters = []exhibit.Chapter{{Title: []exhibit.Prose{{Kind: exhibit.Text, Text: "One"}}, Anchor: "one", Pieces: []exhibit.Piece{{Block: one}}}}
	return p
}

// TestCoverIsPacked: what the cover says is cut into sheets as the body is.
func TestCoverIsPacked(t *testing.T) {
	for _, paper := range []string{"A4", "Letter"} {
		for _, many := range []int{0, 1, 3, 5, 8, 20, 60} {
			p := plainPackage(paper, many)
			b := newBook(p, Options{Digest: strings.Repeat("0", 64)})
			sheets := pack(b.items(), b.rooms())
			signs := 0
			for i, sheet := range sheets {
				s := sheet.items
				for _, it := range s {
					if it.name == "sign" {
						signs++
						if many <= 8 && i != 0 {
							t.Errorf("%s, %d: the boxes to sign are on sheet %d", paper, many, i+1)
						}
					}
				}
				if high := total(s); high > b.room() {
					t.Errorf("%s, %d: sheet %d is %.0f mm of %.0f, %s", paper, many, i+1, high, b.room(), s[0].name)
				}
				if s[0].name == "contents" && len(s) < 4 {
					t.Errorf("%s, %d: contents alone", paper, many)
				}
			}
			if signs != 1 {
				t.Errorf("signed %d times", signs)
			}
			out, err := Render(p, Options{Digest: strings.Repeat("0", 64)})
			if err != nil {
				t.Fatal(err)
			}
			text := string(out)
			for i := range many { // nothing is left out
				for _, want := range []string{fmt.Sprintf("Basis %d<", i), fmt.Sprintf(">R%d<", i), fmt.Sprintf("value_%d", i), fmt.Sprintf("doubt %d<", i)} {
					if !strings.Contains(text, want) {
						t.Errorf("%s, %d: no %s", paper, many, want)
					}
				}
			}
			rest := regexp.MustCompile(`\+ (\d+) more</b>, <a href="#sheet-\d+">sheet \d+</a>`).FindAllStringSubmatch(text, -1)
			if want := 3; many > listed && len(rest) != want { // basis, checks, overrides
				t.Errorf("%s, %d: %v", paper, many, rest)
			}
		}
	}
}

// TestSummaryLeads: each check of the summary names the sheet of its row, and bars
// of ratios that differ differ.
func TestSummaryLeads(t *testing.T) {
	p := plainPackage("A4", 8)
	out, err := Render(p, Options{})
	if err != nil {
		t.Fatal(err)
	}
	text := string(out)
	rows := regexp.MustCompile(`<td class="r sheet-of"><a href="#(q-check-\d+)"><span class="sr">sheet </span>(\d+)</a>`).FindAllStringSubmatch(text, -1)
	if len(rows) != 8 {
		t.Fatalf("%d rows", len(rows))
	}
	for _, r := range rows {
		before, _, ok := strings.Cut(text, `<tr id="`+r[1]+`">`)
		if !ok || strings.Count(before, "<section class=\"sheet") != int(r[2][0]-'0') {
			t.Errorf("%s is not on sheet %s", r[1], r[2])
		}
	}
	if strings.Count(text, `width="84"`) != 2 || strings.Count(text, `d="M0 3H90V0L100 6L90 12V9H0Z"`) != 14 {
		t.Error("a bar of 1.05 in the block and the summary, arrows for the others")
	}
	if !strings.Contains(text, "<div>8, <a href=\"#sheet-") || strings.Count(text, `<p class="warning"><a href="#b">sheet `) != 8 {
		t.Error("warnings do not lead to their block")
	}
}

// TestLicencesAreNoSheet: they stand after the last sheet, on the screen alone.
func TestLicencesAreNoSheet(t *testing.T) {
	p := plainPackage("A4", 1)
	with, err := Render(p, Options{Assets: Assets{Licences: "OFL"}})
	if err != nil {
		t.Fatal(err)
	}
	without, _ := Render(p, Options{})
	sheets := func(b []byte) int { return strings.Count(string(b), `<header class="head">`) }
	last := strings.LastIndex(string(with), `<section class="sheet`)
	if at := strings.Index(string(with), `<section class="licences sheet" id="q-licences"`); at < last || sheets(with) != sheets(without) {
		t.Errorf("licences at %d, the last sheet at %d; %d sheets, %d without", at, last, sheets(with), sheets(without))
	}
}

// TestCapitalsAreWide: a title in capitals takes more lines.
func TestCapitalsAreWide(t *testing.T) {
	p := plainPackage("A4", 0)
	p.Meta.Title = strings.Repeat("tower on the quay ", 2)
	small := newBook(p, Options{}).cover()[0].high
	p.Meta.Title = strings.ToUpper(p.Meta.Title)
	if large := newBook(p, Options{}).cover()[0].high; large < small+9 {
		t.Errorf("%.1f mm in capitals, %.1f without", large, small)
	}
}

// TestLongHead: a second line of the title in the head takes room from the sheet.
func TestLongHead(t *testing.T) {
	p := plainPackage("A4", 1)
	short := newBook(p, Options{}).room()
	p.Meta.Title = strings.Repeat("x", 150)
	if long := newBook(p, Options{}).room(); long > short-4 {
		t.Errorf("%.1f mm with a long title, %.1f with a short one", long, short)
	}
}
