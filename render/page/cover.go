package page

import (
	"slices"
	"strconv"
	"strings"

	"quoin/calc/exhibit"
)

// Cover is the data of the cover: of the program's own, and of cover.html of an
// office. What follows it, the boxes to sign, the caution and the revisions, are items
// of their own: what does not fit goes on to a further sheet.
type Cover struct {
	Office    string   `doc:"name of the office, of office.yaml; may be empty"`
	Status    string   `doc:"status in capitals"`
	Unsafe    bool     `doc:"whether the status is neither for check nor issued"`
	Title     string   `doc:"title of the calculation"`
	Subject   string   `doc:"what is calculated, in a line; may be empty"`
	Number    string   `doc:"calculation number, or: not given"`
	Project   string   `doc:"project, or: not given"`
	Client    string   `doc:"client or owner; may be empty"`
	Location  string   `doc:"place of the project; may be empty"`
	Authority string   `doc:"authority having jurisdiction; may be empty"`
	Basis     []string `doc:"governing documents; a list, which may be empty"`
	Revision  string   `doc:"letter of the revision; may be empty"`
	Date      string   `doc:"date of the revision or the commit; may be empty"`
	Note      string   `doc:"reason of the revision; may be empty"`
	Prepared  string   `doc:"initials and date, or a line"`
	Checked   string   `doc:"initials and date, or a line, or: not checked: same person"`
	Approved  string   `doc:"initials and date, or a line"`
	Facts     []Fact   `doc:"the rows that say what this is: a list, each with .Label and .Text"`

	rows []coverRow // what is open and where it stands: always drawn
}

// Fact is a row of the cover.
type Fact struct {
	Label string `doc:"what it is, in the wording of the office"`
	Text  string `doc:"as in the front matter"`
}

// State is the rows that no office can leave out, for the program's own templates.
func (c Cover) State() []coverRow { return c.rows }

// coverRow is a row of what the cover says. Rest lines more stand at To.
type coverRow struct {
	Label   string
	Lines   []coverLine
	Rest    int
	To      string
	Listed  string   // where all are listed
	Anchors []string // what they are about, whose sheets are named
	Digest  bool
}

// coverLine is a text, and what is open.
type coverLine struct{ Text, Open string }

// titleChars is what a title may hold before it is cut: more is no title.
const titleChars = 200

// signView is the boxes to sign.
type signView struct {
	Prepared, Checked, Approved string
	SamePerson                  bool
}

// coverData is what the cover shows.
func (b *book) coverData() Cover {
	m := b.p.Meta
	status := strings.ToLower(strings.TrimSpace(m.Status))
	r := current(b.p)
	signs := b.signs()
	v := Cover{Status: clip(strings.ToUpper(or(m.Status, "status not given")), 60), Title: clip(m.Title, titleChars), Subject: clip(m.Subject, titleChars),
		Unsafe: status != "issued" && status != "for check", rows: b.coverRows(),
		Number: clip(or(m.Number, "not given"), titleChars), Project: clip(or(m.Project, "not given"), titleChars), Client: clip(m.Client, titleChars),
		Location: clip(m.Location, titleChars), Authority: clip(m.Authority, titleChars), Basis: m.Basis,
		Revision: r.Rev, Date: or(r.Date, b.p.Provenance.CommitDate), Note: clip(r.Note, titleChars),
		Prepared: signs.Prepared, Checked: signs.Checked, Approved: signs.Approved}
	if signs.SamePerson {
		v.Checked = "not checked: same person"
	}
	if b.p.Office != nil {
		v.Office = b.p.Office.Name
	}
	for _, f := range []struct{ key, text string }{{"calculation", v.Number}, {"project", v.Project}, {"client", joined(v.Client, "contract ", clip(m.Contract, titleChars))}, {"location", v.Location}, {"discipline", clip(m.Discipline, titleChars)}, {"authority", v.Authority}} {
		if strings.TrimSpace(f.text) != "" {
			v.Facts = append(v.Facts, Fact{b.word(f.key), f.text})
		}
	}
	return v
}

func (b *book) cover() []item {
	v := b.coverData()
	high := 14 + 9.2*lines(v.Title, 39)
	if v.Subject != "" {
		high += 5.2 * lines(v.Subject, 96)
	}
	for _, f := range v.Facts {
		high += coverRow{Lines: []coverLine{{Text: f.Text}}}.high()
	}
	for _, r := range v.rows {
		high += r.high()
	}
	out := []item{{name: "cover", data: v, high: high, anchors: []string{"q-cover"}}}
	for _, name := range parts[1:] {
		out = append(out, b.part(name)...)
	}
	return out
}

// part is a part of the cover that the program draws.
func (b *book) part(name string) []item {
	switch name {
	case "state":
		rows := slices.Concat([]coverRow{{Label: "Status", Lines: []coverLine{b.statusLine()}}}, b.own.unsaid, b.coverRows())
		it := item{name: "cover-state", data: rows, high: 4}
		for _, r := range rows {
			it.high += r.high()
		}
		return []item{it}
	case "criteria":
		return b.criteria()
	case "sign":
		return []item{b.sign()}
	case "caution":
		always, _ := b.shortCaution()
		return always
	case "revisions":
		return b.revisions()
	}
	panic("page: the cover has no part " + name)
}

// statusLine is the status, marked where nothing may rest on it.
func (b *book) statusLine() coverLine {
	v := strings.ToLower(strings.TrimSpace(b.p.Meta.Status))
	text := clip(strings.ToUpper(or(b.p.Meta.Status, "status not given")), 60)
	if v == "issued" || v == "for check" {
		return coverLine{Text: text}
	}
	return coverLine{Open: text}
}

// revisions is the revision table, and the lists that the rows of the cover cut.
func (b *book) revisions() (out []item) {
	m := b.p.Meta
	out = append(out, chunked("revisions", captioned, m.Revision, func(r exhibit.Revision) float64 {
		return 2.1 + 4.8*max(lines(r.Note, 42), lines(r.Sheets, 12), lines(checkedText(r.Prepared, r.Checked), 14), lines(r.Prepared, 10), lines(r.Date, 12), lines(r.Rev, 6))
	}, nil)...)
	_, further := b.shortCaution()
	out = append(out, further...)
	if len(b.p.Provenance.Overrides) > listed {
		all := b.p.Provenance.Overrides
		more := chunked("overrides", headRow, all, func(o exhibit.Override) float64 {
			return 2.1 + 4.8*max(lines(o.Name, 28), lines(o.Text, 30), lines(o.Was, 30))
		}, func(o exhibit.Override) []string {
			if o == all[0] {
				return []string{"q-overrides"}
			}
			return nil
		})
		out = append(out, more...)
	}
	if len(m.Basis) > listed {
		for i, s := range m.Basis {
			it := item{name: "basis", data: s, high: 1.4 + lineHigh*lines(s, lineChars)}
			if i == 0 {
				it.name, it.high, it.anchors = "basis-first", it.high+10, []string{"q-basis"}
			}
			out = append(out, it)
		}
	}
	return out
}

func (r coverRow) high() float64 {
	high := 1.0
	for _, l := range r.Lines {
		chars := 78
		if r.Digest {
			chars = 88
		}
		text := l.Text + l.Open
		if r.Listed != "" {
			text += strings.Repeat("sheet 12, ", 1+len(r.Anchors))
		}
		high += 4.5 * lines(text, chars)
	}
	if r.Rest > 0 {
		high += 4.5
	}
	return high
}

// coverRows is what the package rests on and what is open in it; a row lists a few things
// and says where the rest stands.
func (b *book) coverRows() []coverRow {
	m := b.p.Meta
	var out []coverRow
	add := func(label string, list ...coverLine) *coverRow {
		out = append(out, coverRow{Label: label, Lines: list})
		return &out[len(out)-1]
	}
	given := func(label, text string) {
		if strings.TrimSpace(text) != "" {
			add(label, coverLine{Text: clip(text, titleChars)})
		}
	}
	basis := add(b.word("basis"))
	for i, s := range m.Basis {
		if i < listed {
			basis.Lines = append(basis.Lines, coverLine{Text: clip(s, titleChars)})
		}
	}
	basis.Rest, basis.To = len(m.Basis)-len(basis.Lines), "q-basis"
	if len(m.Basis) == 0 {
		basis.Lines = []coverLine{{Open: "not given"}}
	}
	r := current(b.p)
	revision := or(r.Rev, "none")
	if r.Date != "" {
		revision += ", " + r.Date
	}
	if r.Note != "" {
		revision += ": " + r.Note
	}
	given("Revision", revision)
	given("Supersedes", m.Supersedes)
	if m.SupersededBy != "" {
		add("Superseded by", coverLine{Open: clip(m.SupersededBy, titleChars)})
	}
	given("Source", sourceText(b.p))
	if line, ok := b.frozenLine(); ok {
		add("Frozen results", line)
	}
	if b.revised.any() {
		b.revised.row(add("Changes", coverLine{Text: b.revised.legend()}))
	}
	if values, open := b.inputTally(); values != "" {
		add("Inputs", coverLine{Text: values, Open: open}).Listed = "q-inputs"
	}
	checks := checkTally(b.p)
	row := add("Checks", coverLine{Text: strconv.Itoa(checks.OK) + " OK", Open: checks.Failed})
	row.Rest, row.To = checks.Rest, "q-checks"
	row = add("Warnings", coverLine{Text: "none"})
	if list := b.warnings(); len(list) > 0 {
		row.Lines[0].Text, row.Listed = strconv.Itoa(len(list)), "q-warnings"
		for _, w := range list[:min(len(list), 2*listed)] {
			row.Anchors = append(row.Anchors, w.To)
		}
	}
	assumptions := assumptionTally(b.p)
	row = add("Assumptions", coverLine{Text: strconv.Itoa(assumptions.OK) + " verified", Open: assumptions.Failed})
	row.Rest, row.To = assumptions.Rest, "q-assumptions"
	if t := commentTally(b.p); t.Any {
		row = add("Comments", coverLine{Text: strconv.Itoa(t.OK) + " closed", Open: t.Failed})
		row.Rest, row.To = t.Rest, b.p.Comments[0].Anchor
	}
	add("To be confirmed", b.unconfirmed())
	row = add("Check", coverLine{Text: "independence: " + clip(or(m.Independence, "not declared"), titleChars)})
	for _, c := range b.p.Checking {
		text := "; record of " + clip(c.By, 40)
		if c.Values > 0 {
			text += ", values computed by the checker: " + strconv.Itoa(c.Values)
		}
		row.Lines[0].Text += text
		row.Listed = c.Anchor
	}
	if list := b.p.Provenance.Overrides; len(list) > 0 {
		row = add("Overridden")
		for _, o := range list[:min(len(list), listed)] {
			text := o.Name + " = " + o.Text
			if o.Was != "" {
				text += " (in the source: " + o.Was + ")"
			}
			row.Lines = append(row.Lines, coverLine{Open: clip(text, 140)})
		}
		row.Rest, row.To = len(list)-len(row.Lines), "q-overrides"
	}
	other := b.o.State
	for _, s := range b.open { // what the rows above do not say
		if strings.HasPrefix(s, "not ") && !samePerson(m.Prepared.Initials, m.Checked.Initials) {
			other = append(other[:len(other):len(other)], s)
		}
	}
	if len(other) > 0 {
		add("Open", coverLine{Open: strings.Join(other, " · ")})
	}
	add("Package digest", coverLine{Text: or(grouped(b.o.Digest), "none")}).Digest = true
	return out
}

// joined is two texts, the second with what it is.
func joined(a, what, b string) string {
	switch {
	case strings.TrimSpace(b) == "":
		return a
	case strings.TrimSpace(a) == "":
		return what + b
	}
	return a + ", " + what + b
}

// unconfirmed says whether the package holds what is yet to be confirmed.
func (b *book) unconfirmed() coverLine {
	var parts []string
	say := func(n int, one, many string) {
		switch {
		case n == 1:
			parts = append(parts, "1 "+one)
		case n > 1:
			parts = append(parts, strconv.Itoa(n)+" "+many)
		}
	}
	memory := 0
	for _, r := range b.p.References {
		if r.Memory {
			memory++
		}
	}
	say(len(openAssumptions(b.p)), "open assumption", "open assumptions")
	say(len(exhibit.OpenComments(b.p.Comments)), "open comment", "open comments")
	say(exhibit.Missing(b.p.Given), "input without a source", "inputs without a source")
	say(memory, "publication cited from memory", "publications cited from memory")
	if len(parts) == 0 {
		return coverLine{Text: "nothing"}
	}
	return coverLine{Text: "yes: " + strings.Join(parts, ", ")}
}

// sign is the boxes to sign.
func (b *book) sign() item {
	v := b.signs()
	tall := max(lines(v.Prepared, 16), lines(v.Checked, 16), lines(v.Approved, 16))
	if v.SamePerson {
		tall = max(tall, 2)
	}
	return item{name: "sign", data: v, high: 25.5 + 5*tall}
}

// signs is who signed.
func (b *book) signs() signView {
	m := b.p.Meta
	text := func(s exhibit.Sign) string {
		if !named(s) {
			return "——"
		}
		return clip(strings.TrimSpace(s.Initials+" "+s.Date), 60)
	}
	return signView{text(m.Prepared), text(m.Checked), text(m.Approved), samePerson(m.Prepared.Initials, m.Checked.Initials)}
}

// shortView is what every reader must know: a few statements, and what was
// triggered in a few words, with the sheets. All stands in full at the end.
type shortView struct {
	Texts     []string
	Triggered []exhibit.Caution
}

// shortCaution is the caution of the cover: what is always said, for its first sheet,
// and what was triggered.
func (b *book) shortCaution() (always, used []item) {
	var v shortView
	high, words := 11.5, ""
	for _, c := range b.p.Cautions {
		switch {
		case c.Key == "demonstration" || c.Key == "office":
			v.Texts = append(v.Texts, c.Text)
		case len(c.Blocks) == 0 && c.Short != "":
			v.Texts = append(v.Texts, c.Short)
		case len(c.Blocks) > 0 && c.Short != "":
			v.Triggered = append(v.Triggered, c)
			words += c.Short + " (" + strings.Repeat("12, ", len(c.Blocks)) + "); "
		}
	}
	if len(v.Texts) > 0 {
		text := strings.Join(v.Texts, " ") + " All limits and cautions: sheet 00."
		always = []item{{name: "short-caution", data: shortView{Texts: v.Texts}, high: high + 4.7*lines(text, 99)}}
	}
	if words != "" {
		used = []item{{name: "short-caution", data: shortView{Triggered: v.Triggered}, high: high + 4.7*lines("By sheet: "+words, 93)}}
	}
	return always, used
}

// grouped sets a digest in groups of four.
func grouped(hex string) string {
	var out []string
	for len(hex) > 4 {
		out, hex = append(out, hex[:4]), hex[4:]
	}
	return strings.Join(append(out, hex), " ")
}
