package block

import (
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/exhibit"
)

var commentsKind = Kind{
	Name: "comments", Doc: "a list of comments on the calculation and the responses to them", Makes: "comments", Nameless: true, List: true,
	New:     func() Body { return &comments{} },
	Exports: []Export{{"open", "number of comments not closed", ""}, {"count", "number of comments", ""}},
}

type comments struct {
	common
	Items []remark `name:"items" doc:"the comments"`
}

type remark struct {
	ID       field.Field `name:"id" is:"text" need:"yes" doc:"a short id, C1"`
	By       field.Field `name:"by" is:"text" need:"yes" doc:"who comments: initials, or the office"`
	Date     field.Field `name:"date" is:"text" doc:"YYYY-MM-DD"`
	Text     field.Field `name:"text" is:"text" need:"yes" doc:"the comment"`
	Response field.Field `name:"response" is:"text" doc:"how it was resolved"`
	Where    field.Field `name:"where" is:"text" doc:"where it was resolved: quoted, \"[Eq. V]\", \"[Fig. NAME]\" or \"[Table NAME]\"; the name of a value; or in words"`
	Status   field.Field `name:"status" is:"choice" of:"open|answered|closed" need:"yes" doc:"open; answered, by who wrote the calculation; closed, by who commented"`
}

// Wheres are the fields that say where something stands, for the document to find.
func (b *comments) Wheres() (out []field.Field) {
	for _, c := range b.Items {
		out = append(out, c.Where)
	}
	return out
}

// Run makes the register's rows.
func (b *comments) Run(r *Run) {
	seen := map[string]bool{}
	open := 0
	t := exhibit.Table{ID: r.Stem(), Caption: Lines(&b.common, "Comments and responses"),
		Columns: []exhibit.Column{Words("id"), Words("by, date"), Words("comment"), Words("response"), Words("where"), Words("status")}}
	for _, c := range b.Items {
		id, status := c.ID.Text(), c.Status.Text()
		if seen[id] {
			r.Fail(c.ID, "comment-twice", "the id %s stands twice", id)
		}
		seen[id] = true
		if status != "open" && strings.TrimSpace(c.Response.Text()) == "" {
			r.Fail(c.Status, "comment-response", "comment %s is %s without a response", id, status).WithHint("add  response: how it was resolved, or leave it open")
		}
		if status != "closed" {
			open++
		}
		by := c.By.Text()
		if c.Date.Text() != "" {
			by += ", " + c.Date.Text()
		}
		r.Comments = append(r.Comments, exhibit.Comment{ID: id, By: c.By.Text(), Date: c.Date.Text(), Text: c.Text.Text(), Response: c.Response.Text(), Where: c.Where.Text(), Status: status,
			Place: exhibit.Place{File: c.ID.At.File, Line: c.ID.At.Line}})
		t.Rows = append(t.Rows, []exhibit.Cell{{Text: id}, {Text: by}, {Text: c.Text.Text()}, {Text: c.Response.Text()}, {Text: c.Where.Text(), Refer: c.Where.Text()},
			{Text: strings.ToUpper(status[:1]) + status[1:], Strong: status != "closed"}})
	}
	r.Number("open", float64(open), pure)
	r.Number("count", float64(len(b.Items)), pure)
	if len(b.Items) > 0 {
		r.Table(t)
	}
}
