package block

import (
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/exhibit"
)

var assumptionsKind = Kind{
	Name: "assumptions", Doc: "a list of assumptions, each verified or open", Makes: "assumptions", Nameless: true, List: true,
	New:     func() Body { return &assumptions{} },
	Exports: []Export{{"open", "number of open assumptions", ""}, {"count", "number of assumptions", ""}},
}

type assumptions struct {
	common
	Items []assumption `name:"items" doc:"the assumptions"`
}

type assumption struct {
	ID     field.Field `name:"id" is:"text" need:"yes" doc:"a short id, A1"`
	Text   field.Field `name:"text" is:"text" need:"yes" doc:"what is assumed"`
	Basis  field.Field `name:"basis" is:"text" doc:"what it rests on"`
	Status field.Field `name:"status" is:"choice" of:"verified|open" need:"yes" doc:"verified or open"`
	By     field.Field `name:"by" is:"text" doc:"who verifies it: initials"`
	When   field.Field `name:"when" is:"text" doc:"when, or by when"`
}

// Run makes the register's rows.
func (b *assumptions) Run(r *Run) {
	seen := map[string]bool{}
	open := 0
	t := exhibit.Table{ID: r.Stem(), Caption: Lines(&b.common, "Assumptions"),
		Columns: []exhibit.Column{Words("id"), Words("assumption"), Words("basis"), Words("status"), Words("by"), Words("when")}}
	for _, a := range b.Items {
		if seen[a.ID.Text()] {
			r.Fail(a.ID, "assumption-twice", "the id %s stands twice", a.ID.Text())
		}
		seen[a.ID.Text()] = true
		if a.Status.Text() == "verified" && !a.By.Given {
			r.Fail(a.Status, "verified-by", "assumption %s is verified by no one", a.ID.Text()).WithHint("add  by: INITIALS, or leave it open")
		}
		if a.Status.Text() == "open" {
			open++
		}
		as := exhibit.Assumption{ID: a.ID.Text(), Text: a.Text.Text(), Basis: a.Basis.Text(), Status: a.Status.Text(), By: a.By.Text(), When: a.When.Text(),
			Place: exhibit.Place{File: a.ID.At.File, Line: a.ID.At.Line}}
		r.Assumptions = append(r.Assumptions, as)
		t.Rows = append(t.Rows, []exhibit.Cell{{Text: as.ID}, {Text: as.Text}, {Text: as.Basis}, {Text: strings.ToUpper(as.Status[:1]) + as.Status[1:], Strong: as.Status == "open"}, {Text: as.By}, {Text: as.When}})
	}
	r.Number("open", float64(open), pure)
	r.Number("count", float64(len(b.Items)), pure)
	if len(b.Items) > 0 {
		r.Table(t)
	}
}

var referencesKind = Kind{
	Name: "references", Doc: "a list of references, cited in prose and formulas as [key]", Makes: "references", Nameless: true, List: true,
	New: func() Body { return &references{} },
}

type references struct {
	common
	Items []reference `name:"items" doc:"the references"`
}

type reference struct {
	Key  field.Field `name:"key" is:"text" need:"yes" doc:"the key it is cited by"`
	Text field.Field `name:"text" is:"text" need:"yes" doc:"the full reference"`
}

// Run makes the register's rows.
func (b *references) Run(r *Run) {
	seen := map[string]bool{}
	for _, ref := range b.Items {
		key := ref.Key.Text()
		if seen[key] {
			r.Fail(ref.Key, "reference-twice", "the key %s stands twice", key)
		}
		seen[key] = true
		if strings.ContainsAny(key, "[]{}") {
			r.Fail(ref.Key, "reference-key", "a key has no brackets")
		}
		r.References = append(r.References, exhibit.Reference{Key: key, Text: ref.Text.Text(), User: true})
	}
	t := exhibit.Table{ID: r.Stem(), Caption: Lines(&b.common, "References of this document"), Columns: []exhibit.Column{Words("key"), Words("reference")}}
	for _, ref := range r.References {
		t.Rows = append(t.Rows, []exhibit.Cell{{Text: ref.Key}, {Text: ref.Text}})
	}
	if len(t.Rows) > 0 {
		r.Table(t)
	}
}
