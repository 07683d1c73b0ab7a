package page

import (
	"fmt"
	"strings"

	"quoin/calc/exhibit"
)

// OpenState is everything that keeps a package from being relied on, in words,
// for the cover and the head of every sheet. An empty list means nothing is open.
func OpenState(p *exhibit.Package) []string {
	var out []string
	say := func(yes bool, format string, args ...any) {
		if yes {
			out = append(out, fmt.Sprintf(format, args...))
		}
	}
	status := strings.ToLower(strings.TrimSpace(p.Meta.Status))
	say(status == "", "status not given")
	by := strings.TrimSpace(p.Meta.SupersededBy)
	say(status == "draft" || (status == "superseded" || status == "void") && by == "", "%s", status)
	say(status == "superseded" && by != "", "superseded by %s", clip(by, 60))
	say(status == "void" && by != "", "void, see %s", clip(by, 60))
	open := openAssumptions(p)
	say(len(open) == 1, "1 open assumption")
	say(len(open) > 1, "%d open assumptions", len(open))
	comments := exhibit.OpenComments(p.Comments)
	say(len(comments) == 1, "1 open comment")
	say(len(comments) > 1, "%d open comments", len(comments))
	failed := exhibit.Failed(p.Checks)
	say(len(failed) == 1, "1 check NOT OK")
	say(len(failed) > 1, "%d checks NOT OK", len(failed))
	say(p.Provenance.Commit == "", "source not under version control")
	say(p.Provenance.Commit != "" && p.Provenance.Dirty, "source not committed")
	if len(p.Provenance.Overrides) > 0 {
		names := make([]string, len(p.Provenance.Overrides))
		for i, o := range p.Provenance.Overrides {
			names[i] = o.Name
		}
		more := ""
		if n := len(names) - listed; n > 0 {
			names, more = names[:listed], fmt.Sprintf(" and %d more", n)
		}
		say(true, "NOT FOR ISSUE: values overridden: %s%s", strings.Join(names, ", "), more)
	}
	if f := p.Frozen; f != nil {
		say(f.Current && !f.Agrees(), "results differ from the frozen ones%s", ofRevision(f.Revision))
	}
	say(samePerson(p.Meta.Prepared.Initials, p.Meta.Checked.Initials), "not checked: same person")
	if status == "issued" {
		say(!named(p.Meta.Prepared), "not prepared by anyone named")
		say(!named(p.Meta.Checked), "not checked")
		say(!named(p.Meta.Approved), "not approved")
	}
	return out
}

// tally counts what is in order and puts the rest in words.
type tally struct {
	OK     int
	Failed string // "" or "2 NOT OK: drift, level 2, ratio 1.04; ..."
	Rest   int    // how many more it does not name
	Any    bool
}

func openAssumptions(p *exhibit.Package) []exhibit.Assumption {
	var out []exhibit.Assumption
	for _, a := range p.Assumptions {
		if a.Status != "verified" {
			out = append(out, a)
		}
	}
	return out
}

// listed is how many names a tally gives before it counts the rest.
const listed = 4

func few(count int, what string, names []string) (text string, rest int) {
	if count == 0 {
		return "", 0
	}
	rest = max(0, len(names)-listed)
	return fmt.Sprintf("%d %s: %s", count, what, strings.Join(names[:len(names)-rest], "; ")), rest
}

func checkTally(p *exhibit.Package) tally {
	failed := exhibit.Failed(p.Checks)
	var names []string
	for _, c := range exhibit.WorstFirst(failed) {
		name := checkName(c)
		if c.Item != "" {
			name += ", " + c.Item
		}
		names = append(names, clip(name, 80)+", ratio "+c.RatioText())
	}
	t := tally{OK: len(p.Checks) - len(failed), Any: len(p.Checks) > 0}
	t.Failed, t.Rest = few(len(failed), "NOT OK", names)
	return t
}

func assumptionTally(p *exhibit.Package) tally {
	open := openAssumptions(p)
	var names []string
	for _, a := range open {
		names = append(names, strings.TrimSpace(a.ID+" "+clip(a.Text, 80)))
	}
	t := tally{OK: len(p.Assumptions) - len(open), Any: len(p.Assumptions) > 0}
	t.Failed, t.Rest = few(len(open), "open", names)
	return t
}

// commentTally counts the comments by what has become of them.
func commentTally(p *exhibit.Package) tally {
	open := exhibit.OpenComments(p.Comments)
	var names []string
	for _, c := range open {
		text := strings.TrimSpace(c.ID + " " + clip(c.Text, 80))
		if c.Status == "answered" {
			text += " (answered)"
		}
		names = append(names, text)
	}
	t := tally{OK: len(p.Comments) - len(open), Any: len(p.Comments) > 0}
	t.Failed, t.Rest = few(len(open), "open", names)
	return t
}

// clip shortens a text to n characters at most.
func clip(text string, n int) string {
	r := []rune(text)
	if len(r) <= n {
		return text
	}
	return strings.TrimSpace(string(r[:n-1])) + "…"
}

// current is the revision the package is at.
func current(p *exhibit.Package) exhibit.Revision {
	if n := len(p.Meta.Revision); n > 0 {
		return p.Meta.Revision[n-1]
	}
	return exhibit.Revision{}
}

// sourceText is where the package came from, in words.
func sourceText(p *exhibit.Package) string {
	v := p.Provenance
	if v.Commit == "" {
		return v.Source + ", not under version control"
	}
	text := v.Source + " at commit " + clip(v.Commit, 13)
	if v.CommitDate != "" {
		text += " of " + v.CommitDate
	}
	if v.Dirty {
		return text + ", with changes that are not committed"
	}
	return text
}

// Head is the data of the head of a sheet: of the program's own, and of head.html of
// an office.
type Head struct {
	Office        string   `doc:"name of the office, of office.yaml; may be empty"`
	Number        string   `doc:"calculation number, or: no number"`
	Title         string   `doc:"title of the calculation"`
	Project       string   `doc:"project, or: project not given"`
	Location      string   `doc:"place of the project; may be empty"`
	Revision      string   `doc:"Rev B, or: no revision"`
	Date          string   `doc:"date of the revision or the commit, or: no date"`
	Status        string   `doc:"status, empty where Open begins with it"`
	Open          []string `doc:"all that is open, in words; a list"`
	Prepared      string   `doc:"prepared MK 2031-03-02; a line where nobody is named"`
	Checked       string   `doc:"checked RV 2031-03-04; a line where nobody is named, or: not checked: same person"`
	Demonstration string   `doc:"the mark of invented data; may be empty"`
	Sheet         int      `doc:"number of the sheet"`
	Sheets        int      `doc:"how many sheets there are"`
}

func (b *book) head() Head {
	m := b.p.Meta
	h := Head{Project: or(m.Project, "project not given"), Number: or(m.Number, "no number"), Title: m.Title, Location: m.Location,
		Status: or(m.Status, "no status"), Open: b.open, Prepared: signText(b.verb("prepared"), m.Prepared), Checked: signText(b.verb("checked"), m.Checked)}
	if b.p.Office != nil {
		h.Office = b.p.Office.Name
	}
	if samePerson(m.Prepared.Initials, m.Checked.Initials) {
		h.Checked = "not checked: same person"
	}
	r := current(b.p)
	h.Revision = "no revision"
	if r.Rev != "" {
		h.Revision = "Rev " + r.Rev
	}
	h.Date = or(or(r.Date, b.p.Provenance.CommitDate), "no date")
	if m.Contract != "" {
		h.Location = strings.TrimPrefix(h.Location+" · contract "+clip(m.Contract, 40), " · ")
	}
	// The status is said once: in ink where it is no open state.
	if len(h.Open) > 0 && (strings.HasPrefix(h.Open[0], "superseded by ") || strings.HasPrefix(h.Open[0], "void, see ") || h.Open[0] == strings.ToLower(strings.TrimSpace(m.Status)) || h.Open[0] == "status not given") {
		h.Status = ""
	}
	for _, c := range b.p.Cautions {
		if c.Key == "demonstration" {
			h.Demonstration = "DEMONSTRATION · INVENTED DATA"
		}
	}
	return h
}

func or(a, b string) string {
	if strings.TrimSpace(a) == "" {
		return b
	}
	return a
}
