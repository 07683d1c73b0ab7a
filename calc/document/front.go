package document

import (
	"regexp"
	"strings"
	"time"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/document/markdown"
	"quoin/calc/exhibit"
)

// frontMatter is the YAML at the head of the main file.
type frontMatter struct {
	Quoin        field.Field   `name:"quoin" is:"text" need:"yes" doc:"1: marks a calculation package"`
	Title        field.Field   `name:"title" is:"text" need:"yes" doc:"the title of the calculation"`
	Number       field.Field   `name:"number" is:"text" doc:"calculation number"`
	Project      field.Field   `name:"project" is:"text" doc:"project"`
	Client       field.Field   `name:"client" is:"text" doc:"client or owner"`
	Contract     field.Field   `name:"contract" is:"text" doc:"contract number of the owner"`
	Discipline   field.Field   `name:"discipline" is:"text" doc:"discipline: structural, process, ..."`
	Subject      field.Field   `name:"subject" is:"text" doc:"what is calculated, in a line"`
	Location     field.Field   `name:"location" is:"text" doc:"place of the project"`
	Authority    field.Field   `name:"authority" is:"text" doc:"the authority having jurisdiction, for the cover"`
	System       field.Field   `name:"system" is:"text" doc:"the system that resists lateral force, in words, for the criteria on the cover"`
	Units        field.Field   `name:"units" is:"choice" of:"SI|US" default:"SI" doc:"the units results are shown in"`
	Basis        field.Field   `name:"basis" is:"text" many:"yes" doc:"governing documents with edition"`
	Prepared     signField     `name:"prepared" doc:"initials and date"`
	Checked      signField     `name:"checked" doc:"initials and date of a second person"`
	Approved     signField     `name:"approved" doc:"initials and date"`
	Independence field.Field   `name:"independence" is:"text" doc:"how independent the check is: the class of it, or in words"`
	Supersedes   field.Field   `name:"supersedes" is:"text" doc:"the calculation and revision that this one replaces"`
	SupersededBy field.Field   `name:"superseded_by" is:"text" doc:"the calculation and revision that replaces this one, with status superseded or void"`
	Revisions    []revisionRow `name:"revisions" doc:"the revision table, oldest first"`
	Status       field.Field   `name:"status" is:"choice" of:"draft|for check|issued|superseded|void" default:"draft" doc:"state of the document"`
	Paper        field.Field   `name:"paper" is:"choice" of:"A4|Letter" default:"A4" doc:"size of the printed sheets"`
	Office       field.Field   `name:"office" is:"file" doc:"a folder with the cover, head, palette and wording of an office (quoin blocks office)"`
	Inputs       field.Field   `name:"inputs" is:"file" many:"yes" doc:"YAML or CSV files of named values, each with its source; the values are names of the document"`
	Parts        field.Field   `name:"parts" is:"file" many:"yes" doc:"further markdown files, as chapters"`
}

// FrontMatter lists the fields of the front matter, for the reference.
func FrontMatter() []field.Row { return field.Rows(&frontMatter{}, nil) }

// signField is written as "RT 2031-03-02" or as a mapping.
type signField struct {
	Line     field.Field `name:"sign" is:"text" short:"yes" doc:"initials, then the date as YYYY-MM-DD"`
	Initials field.Field `name:"initials" is:"text" doc:"initials"`
	Date     field.Field `name:"date" is:"text" doc:"YYYY-MM-DD"`
}

type revisionRow struct {
	Rev      field.Field `name:"rev" is:"text" need:"yes" doc:"letter or number of the revision"`
	Date     field.Field `name:"date" is:"text" doc:"YYYY-MM-DD"`
	Note     field.Field `name:"note" is:"text" doc:"reason of the revision"`
	Sheets   field.Field `name:"sheets" is:"text" doc:"the sheets it changes"`
	Prepared field.Field `name:"prepared" is:"text" doc:"initials"`
	Checked  field.Field `name:"checked" is:"text" doc:"initials"`
	Approved field.Field `name:"approved" is:"text" doc:"initials"`
}

func (f *frontMatter) decode(name string, md *markdown.File) diag.List {
	var lines []field.Line
	for i, t := range strings.Split(strings.TrimSuffix(md.Front, "\n"), "\n") {
		lines = append(lines, field.Line{Text: strings.TrimSuffix(t, "\r"), Line: md.FrontLine + i, Column: 1})
	}
	at := diag.Range{File: name, Line: 1, Column: 1, EndLine: 1, EndColumn: 4}
	n, diags := field.Parse(name, lines, at)
	if diags.HasErrors() {
		return diags
	}
	diags = append(diags, field.Decode(n, f, "the front matter", nil)...)
	if f.Quoin.Given && f.Quoin.Text() != "1" {
		diags.Errorf("front-matter-version", f.Quoin.At, "quoin must be 1, the version of the document language").
			WithHint("this program reads version 1 only")
	}
	return diags
}

var isoDate = regexp.MustCompile(`^\d{4}-\d{2}-\d{2}$`)

// date checks a date and gives it back.
func date(f field.Field, diags *diag.List) string {
	t := f.Text()
	if t == "" {
		return ""
	}
	if _, err := time.Parse(time.DateOnly, t); err != nil || !isoDate.MatchString(t) {
		diags.Errorf("date", f.At, "%s is not a date", t).WithHint("write it as YYYY-MM-DD")
	}
	return t
}

// signature is a person, by initials or a short name, and a date that may be
// missing.
var signature = regexp.MustCompile(`^(?:\p{Latin}[.'’]?[ -]?){1,40}(?:[ ,]+\S*\d\S*)?$`)

func (s signField) sign(diags *diag.List) exhibit.Sign {
	if !s.Line.Given {
		return exhibit.Sign{Initials: s.Initials.Text(), Date: date(s.Date, diags)}
	}
	if t := s.Line.Text(); t != "" && (!signature.MatchString(t) || exhibit.Nobody(t)) {
		diags.Errorf("signature", s.Line.At, "%q is no initials and date", s.Line.Text()).WithHint("write the initials of one person, then the date: MK 2031-03-02; leave it blank until it is done")
		return exhibit.Sign{}
	}
	words := strings.FieldsFunc(s.Line.Text(), func(r rune) bool { return r == ' ' || r == ',' })
	if len(words) > 1 {
		if last := words[len(words)-1]; strings.ContainsAny(last, "0123456789") {
			return exhibit.Sign{Initials: strings.Join(words[:len(words)-1], " "), Date: date(field.Field{At: s.Line.At, List: []field.Item{{Text: last}}}, diags)}
		}
	}
	return exhibit.Sign{Initials: strings.Join(words, " ")}
}

func (f *frontMatter) meta(diags *diag.List) exhibit.Meta {
	m := exhibit.Meta{
		Title: f.Title.Text(), Number: f.Number.Text(), Project: f.Project.Text(), Client: f.Client.Text(),
		Subject: f.Subject.Text(), Location: f.Location.Text(), Authority: f.Authority.Text(), System: f.System.Text(), Basis: f.Basis.Texts(),
		Prepared: f.Prepared.sign(diags), Checked: f.Checked.sign(diags), Approved: f.Approved.sign(diags),
		Status: f.Status.Text(), Paper: f.Paper.Text(), Contract: f.Contract.Text(), Discipline: f.Discipline.Text(), Independence: f.Independence.Text(),
		Supersedes: f.Supersedes.Text(), SupersededBy: f.SupersededBy.Text(),
	}
	replaced := m.Status == "superseded" || m.Status == "void"
	switch {
	case m.Status == "superseded" && strings.TrimSpace(m.SupersededBy) == "":
		diags.Warnf("superseded-by", f.Status.At, "the package is superseded, by what is not said").WithHint("superseded_by: number and revision of what replaces it")
	case !replaced && m.SupersededBy != "":
		diags.Warnf("superseded-by", f.SupersededBy.At, "the package is replaced by %s, and its status is %s", m.SupersededBy, m.Status).WithHint("status: superseded")
	}
	for _, r := range f.Revisions {
		m.Revision = append(m.Revision, exhibit.Revision{Rev: r.Rev.Text(), Date: date(r.Date, diags), Note: r.Note.Text(), Sheets: r.Sheets.Text(), Prepared: r.Prepared.Text(), Checked: r.Checked.Text(), Approved: r.Approved.Text()})
	}
	return m
}
