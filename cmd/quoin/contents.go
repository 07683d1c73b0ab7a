package main

import (
	"fmt"
	"strings"

	"quoin/calc/document"
)

// sought is one thing that a reviewer looks for in a package, and where it stands:
// in the heading of the page with this id, or in files beside the page.
type sought struct {
	What, Where, ID string
}

// contents is what a reviewer looks for, in the order of the sheets.
var contents = []sought{
	{"title, project, client, location, authority, calculation number, revision, status", "cover, and the head of every sheet", "sheet-1"},
	{"total of sheets; sheet n of m", "head of every sheet, on screen and in print", "sheet-1"},
	{"prepared, checked, approved; room for a seal", "cover; prepared and checked in every head", "sheet-1"},
	{"governing documents with edition", "cover", "sheet-1"},
	{"design criteria: risk and design category, site, spectral values, system, R, C_d, I_e, procedure, W, C_s, V; of EN 1998-1 a_g, ground, type, q", "cover, from the blocks that state them", "q-criteria"},
	{"what is open: draft, open assumptions, failed checks, inputs without a source, overridden values, uncommitted source", "cover and every head, in words", "sheet-1"},
	{"revisions with date, reason, prepared and checked", "cover", "sheet-1"},
	{"index by topic with sheet numbers", "contents", "q-contents"},
	{"checks: demand, limit, ratio, clause, worst first", "check summary; each check at its place", "q-checks"},
	{"warnings of the run", "after the check summary, with their sheets", "q-warnings"},
	{"purpose, scope, what is not covered; how lateral force is resisted; conclusions", "chapters, as the author writes them", ""},
	{"input echo as used, with units, defaults marked", "first part of every block", ""},
	{"symbols, substituted numbers, result, source of every equation", "body; equations are numbered", ""},
	{"assumptions with basis, status, by whom and when", "register of assumptions", "q-assumptions"},
	{"notation", "register of notation", "q-notation"},
	{"references with the clauses cited; what is cited from memory says so", "register of references", "q-references"},
	{"every input with value, unit and source; an input without a source says so and is a warning", "register of inputs", "q-inputs"},
	{"files read, with SHA-256", "register of inputs, second part", "q-files"},
	{"records: event, station, magnitude, distance, Vs30, step, peaks as recorded and as used, scale, processing, usable band", "register of records; what is missing reads: not given", "q-records"},
	{"program, version, build, modules; published cases behind each kind used; limits", "register of software", "q-software"},
	{"rules of rounding, order of vectors, units", "register of software", "q-software"},
	{"limitations: standing ones, and those triggered by what was used, with their sheets", "in short on the cover, in full at the end", "q-cautions"},
	{"computer output in bulk", "tables/ and results.json beside the page", ""},
	{"source and data files, how to verify and to build again", "inputs/, manifest.json and README.txt beside the page", ""},
}

const (
	contentsTitle = "What a reviewer looks for, and where it stands"
	contentsHead  = "Rows are in the order of the sheets. A register without entries is not printed."
	mustsHead     = "A package of status issued is not built while one of these is open:"
)

// contentsPage is the page of the documentation.
func contentsPage() string {
	var b strings.Builder
	fmt.Fprintf(&b, "# %s\n\n%s\n\n| looked for | stands in |\n|---|---|\n", contentsTitle, contentsHead)
	for _, r := range contents {
		fmt.Fprintf(&b, "| %s | %s |\n", r.What, r.Where)
	}
	fmt.Fprintf(&b, "\n## Issue\n\n%s\n\n", mustsHead)
	for _, m := range document.Musts() {
		fmt.Fprintf(&b, "- %s\n", m)
	}
	b.WriteString("- the source and every file read are committed\n")
	return b.String()
}
