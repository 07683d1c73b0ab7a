package main

import (
	"fmt"
	"strings"

	"quoin/calc/document"
)

// sought is one thing that a reviewer looks for in a package, and where it stands:
// in the heading of the page with this id, or in files beside the page. Who gives it:
// the program, the document, a person with a pen; what becomes of a package without
// it is said in the last column.
type sought struct {
	What, Where, ID, Without string
}

const (
	notIssued = "not issued"
	always    = "always there"
)

// contents is what a reviewer looks for, in the order of the sheets.
var contents = []sought{
	{"title, project, client, contract number, location, authority, discipline, subject, calculation number, revision, status", "cover; the head of every sheet but for client, authority, discipline and subject", "sheet-1", notIssued + " without project, client, location, subject, number; discipline, authority and contract stand where given"},
	{"total of sheets; sheet n of m", "head of every sheet, on screen and in print; at the foot in print", "sheet-1", always},
	{"prepared, checked, approved with dates; room for a seal", "cover; prepared and checked in every head", "sheet-1", "a blank line for ink; " + notIssued},
	{"checker is not the preparer", "cover and every head", "sheet-1", "reads \"not checked: same person\"; " + notIssued},
	{"independence of the check", "cover, from `independence`", "sheet-1", "reads \"not declared\""},
	{"who is responsible", "caution of the cover; limitations", "q-cautions", always},
	{"status: draft, for check, issued, superseded, void", "cover and every head, in words", "sheet-1", "reads \"draft\""},
	{"superseded or void: pointer to what replaces it, and back", "cover and every head, from `superseded_by`; cover, from `supersedes`", "", "a warning (superseded-by)"},
	{"what is open: draft, open assumptions, comments not closed, failed checks, inputs without a source, overridden values, uncommitted source", "cover and every head, in words", "sheet-1", always},
	{"whether anything is to be confirmed: open assumptions, comments not closed, inputs without a source, publications cited from memory", "cover", "sheet-1", always},
	{"governing documents with edition", "cover", "sheet-1", "reads \"not given\"; " + notIssued},
	{"design criteria: risk and design category, site, spectral values, system, R, C_d, I_e, procedure, W, C_s, V; of EN 1998-1 a_g, ground, type, q", "cover, from the blocks that state them", "q-criteria", "the criteria that no block states are left out"},
	{"revisions with date, reason, sheets, prepared, checked and approved", "cover", "sheet-1", notIssued + " without date, reason, prepared and checked"},
	{"index by topic with sheet numbers", "contents", "q-contents", always},
	{"checks: demand, relation, limit, ratio, OK or NOT OK in words, clause", "check summary, worst first: a row a check, its worst item, and every item that is NOT OK; all rows at their place", "q-checks", "the summary says that nothing is compared; " + notIssued + " where a check names no criterion"},
	{"warnings of the run", "after the check summary, with their sheets", "q-warnings", always},
	{"purpose, scope, what is not covered; conclusions", "chapters, as the author writes them", "", notIssued + " without headings that name them"},
	{"how lateral force is resisted", "cover, from `system`; a chapter", "", "the author's"},
	{"plans, sketches, load path, marks of elements; what goes to which drawing", "figures and tables of the author, as pictures", "", "the author's"},
	{"loads, combinations, materials", "blocks and tables of the author; seismic weights in the structure", "", "the author's"},
	{"input echo as used, with units, defaults marked", "first part of every block", "", notIssued + " where `show` leaves it out"},
	{"symbols, substituted numbers, result, source of every equation", "body; equations are numbered", "", always},
	{"units: one system, checked through every line", "body", "", "a mismatch is an error: nothing is built"},
	{"method, its source and its limits", "second part of every block; register of software", "q-software", always},
	{"independent check of computed results", "last sentence of every computing block, with the residual", "", always},
	{"which case governs", "marked in equations (underlined or ✓), tables (bold) and the check summary", "", always},
	{"assumptions with basis, status, by whom and when, and the sheets that rest on each", "register of assumptions; results that rest on an open one say so where they stand", "q-assumptions", notIssued + " with one open or none listed"},
	{"notation", "register of notation", "q-notation", always},
	{"references with the clauses cited; what is cited from memory says so", "register of references", "q-references", always},
	{"every input with value, unit and source", "register of inputs", "q-inputs", "reads \"no source\", a warning (no-source); " + notIssued},
	{"files read, with SHA-256", "register of inputs, second part", "q-files", always},
	{"records: event, station, magnitude, distance, Vs30, step, peaks as recorded and as used, scale, processing, usable band", "register of records", "q-records", "reads \"not given\""},
	{"program, version, build, modules; published cases behind each kind used; limits", "register of software", "q-software", always},
	{"why the program suits this problem", "a sentence of the author", "", "the register of software says that it is for the author to state"},
	{"rules of rounding, tolerance and convergence, order of vectors, units", "register of software", "q-software", always},
	{"limitations: standing ones, and those triggered by what was used, with their sheets", "in short on the cover, in full at the end", "q-cautions", always},
	{"computer output in bulk", "tables/ and results.json beside the page; summary and key results in the body", "", always},
	{"source and data files, how to verify and to build again; digest of the inputs", "inputs/, manifest.json and README.txt beside the page; digest on the cover", "", always},
	{"tables and lists that are larger than a sheet", "cut between rows with the head repeated; too wide: set smaller, then on a sheet across, then in parts with the first column repeated", "", always},
	{"record of the checker: scope, method, values of the checker's own with the difference, date", "a `checking` block, each value a check of the summary; named on the cover", "", "by a person: the cover names no record"},
	{"comments, responses, and where each was resolved", "a `comments` block; those not closed on the cover and in every head", "", "by people; " + notIssued + " with one not closed"},
	{"marks on a check set; peer review and the criteria agreed for it", "on paper or in documents of their own, named in the references", "", "by people: the program has no form for them"},
}

const (
	contentsTitle = "What a reviewer looks for, and where it stands"
	contentsHead  = "Rows are in the order of the sheets. A register without entries is not printed."
	mustsHead     = "A package of status issued is not built while one of these is open:"
)

// contentsPage is the page of the documentation.
func contentsPage() string {
	var b strings.Builder
	fmt.Fprintf(&b, "# %s\n\n%s\n\n| looked for | stands in | a package without it |\n|---|---|---|\n", contentsTitle, contentsHead)
	for _, r := range contents {
		fmt.Fprintf(&b, "| %s | %s | %s |\n", r.What, r.Where, r.Without)
	}
	fmt.Fprintf(&b, "\n## Issue\n\n%s\n\n", mustsHead)
	for _, m := range document.Musts() {
		fmt.Fprintf(&b, "- %s\n", m)
	}
	b.WriteString("- the source and every file read are committed\n")
	return b.String()
}
