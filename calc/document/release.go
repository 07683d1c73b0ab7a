package document

import (
	"slices"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
)

// must is one thing that a reviewer can send a package back for, as far as the
// document alone shows it. A package of status issued is not built while one is
// open. That its source is committed is seen to by who knows of commits.
type must struct {
	What string // in a few words
	open func(a *assembly, say sayer)
}

// sayer reports one thing that is open, at its place, and what closes it.
type sayer func(at diag.Range, summary, hint string)

// musts is all of them, in the order of the cover.
var musts = []must{
	{"the cover names project, client, location, subject and calculation number", fieldsOpen},
	{"the governing documents with their edition", func(a *assembly, say sayer) {
		if len(a.front.Basis.List) == 0 {
			say(a.front.Status.At, "the governing documents are not named", "basis: [ASCE/SEI 7-22]")
		}
	}},
	{"prepared, checked and approved, each by a person and with a date, and checked by another than prepared", signsOpen},
	{"a revision with date, reason and who prepared and checked it", revisionOpen},
	{"purpose and scope, and conclusions, under headings of their own", headingsOpen},
	{"a register of assumptions, none of them open", assumptionsOpen},
	{"no comment that is not closed", func(a *assembly, say sayer) {
		for _, c := range exhibit.OpenComments(a.p.Comments) {
			say(diag.Range{File: c.Place.File, Line: c.Place.Line}, "comment "+c.ID+" is "+c.Status, "status: closed, once who commented accepts the response")
		}
	}},
	{"the inputs of every block are printed", echoOpen},
	{"every input names its source", inputsOpen},
	{"every check names the clause or reference of its criterion", checksOpen},
	{"no value is overridden from outside", func(a *assembly, say sayer) {
		for _, o := range a.options.Overrides {
			say(a.front.Status.At, "the value of "+o.Name+" is overridden from outside the document", "write the value into the document")
		}
	}},
}

// Musts says in a few words what a package of status issued may not lack.
func Musts() []string {
	var out []string
	for _, m := range musts {
		out = append(out, m.What)
	}
	return out
}

// release reports all that is open in a package that says it is issued.
func (a *assembly) release() {
	if a.p.Meta.Status != "issued" {
		return
	}
	for _, m := range musts {
		m.open(a, func(at diag.Range, summary, hint string) {
			a.diags.Errorf("not-for-issue", at, "status is issued, but %s", summary).WithHint("%s", hint)
		})
	}
}

func fieldsOpen(a *assembly, say sayer) {
	f := a.front
	for _, x := range []struct {
		f    field.Field
		name string
	}{{f.Project, "project"}, {f.Client, "client"}, {f.Location, "location"}, {f.Subject, "subject"}, {f.Number, "number"}} {
		if strings.TrimSpace(x.f.Text()) == "" {
			say(a.at(x.f), "the front matter gives no "+x.name, x.name+": ...")
		}
	}
}

// at is the place of a field of the front matter; of the status where it is not given.
func (a *assembly) at(f field.Field) diag.Range {
	if f.Given {
		return f.At
	}
	return a.front.Status.At
}

func signsOpen(a *assembly, say sayer) {
	m := a.p.Meta
	for _, s := range []struct {
		sign exhibit.Sign
		f    signField
		what string
	}{{m.Prepared, a.front.Prepared, "prepared"}, {m.Checked, a.front.Checked, "checked"}, {m.Approved, a.front.Approved, "approved"}} {
		at := a.at(s.f.Line)
		switch {
		case len(exhibit.People(s.sign.Initials)) == 0:
			say(at, "nobody is named who "+s.what+" it", s.what+": the initials of a person, and the date: MK 2031-03-02")
		case s.sign.Date == "":
			say(at, s.what+" has no date", s.what+": "+s.sign.Initials+" 2031-03-02")
		}
	}
	for _, one := range exhibit.People(m.Prepared.Initials) {
		if slices.Contains(exhibit.People(m.Checked.Initials), one) {
			say(a.at(a.front.Checked.Line), "it was checked by who prepared it", "another person checks")
			return
		}
	}
}

func revisionOpen(a *assembly, say sayer) {
	n := len(a.front.Revisions)
	if n == 0 {
		say(a.front.Status.At, "there is no revision", "revisions: [{rev: 0, date: 2031-03-02, note: first issue, prepared: MK, checked: AB}]")
		return
	}
	r := a.front.Revisions[n-1]
	for _, x := range []struct {
		f    field.Field
		name string
	}{{r.Date, "date"}, {r.Note, "note"}, {r.Prepared, "prepared"}, {r.Checked, "checked"}} {
		if strings.TrimSpace(x.f.Text()) == "" {
			say(r.Rev.At, "revision "+r.Rev.Text()+" has no "+x.name, "each revision has rev, date, note, prepared and checked")
		}
	}
}

// headingsOpen looks for the words in any heading.
func headingsOpen(a *assembly, say sayer) {
	var all strings.Builder
	for _, c := range a.p.Chapters {
		heading(&all, c.Title)
		for _, p := range c.Pieces {
			for _, x := range p.Prose {
				if x.Kind == exhibit.Heading {
					heading(&all, x.Children)
				}
			}
		}
	}
	for _, want := range []string{"purpose", "scope", "conclusion"} {
		if !strings.Contains(all.String(), want) {
			say(a.front.Status.At, "no heading speaks of "+want, "# Purpose and scope  at the beginning, saying what is not covered too;  # Conclusions  at the end")
		}
	}
}

func heading(b *strings.Builder, words []exhibit.Prose) {
	for _, w := range words {
		b.WriteString(strings.ToLower(w.Text))
		heading(b, w.Children)
	}
	b.WriteString("\n")
}

func assumptionsOpen(a *assembly, say sayer) {
	if len(a.p.Assumptions) == 0 {
		say(a.front.Status.At, "there is no register of assumptions", "an assumptions block lists them, each verified, by whom and when")
	}
	for _, x := range a.p.Assumptions {
		at := diag.Range{File: x.Place.File, Line: x.Place.Line}
		for _, n := range a.nodes {
			if n.anchor == x.Anchor {
				at = n.at
			}
		}
		switch {
		case x.Status != "verified":
			say(at, "assumption "+x.ID+" is open", "status: verified, with by and when")
		case len(exhibit.People(x.By)) == 0 || x.When == "":
			say(at, "assumption "+x.ID+" is verified by nobody named, or without a date", "by: initials, when: 2031-03-02")
		}
	}
}

func echoOpen(a *assembly, say sayer) {
	for _, n := range a.nodes {
		if n.kind != blockNode || n.failed {
			continue
		}
		if c := block.Common(n.body); c.Show.Given && !slices.Contains(c.Show.Texts(), "echo") {
			say(c.Show.At, "the inputs of "+n.name+" are not printed", "leave show out, or name echo in it")
		}
	}
}

func checksOpen(a *assembly, say sayer) {
	for _, n := range a.nodes {
		if n.kind == checkNode && strings.TrimSpace(n.line.Source) == "" {
			say(n.at, "the check "+n.line.Text+" names no source for its criterion", "# [ASCE/SEI 7-22 12.12.1] what is checked")
		}
	}
}
