package document

import (
	"fmt"
	"regexp"
	"slices"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/document/markdown"
	"quoin/calc/exhibit"
)

// checkers holds who checked to who prepared: no part is checked by one person alone.
func (a *assembly) checkers() {
	prepared := exhibit.People(a.p.Meta.Prepared.Initials)
	for _, n := range a.nodes {
		body, ok := n.body.(interface{ Checkers() []field.Field })
		if !ok || n.kind != blockNode {
			continue
		}
		for _, f := range body.Checkers() {
			who := exhibit.People(f.Text())
			switch {
			case len(who) == 0:
				a.diags.Errorf("checker", f.At, "%q names nobody who checked", f.Text()).WithHint("the initials of the checker: by: RV")
			case slices.ContainsFunc(who, func(one string) bool { return slices.Contains(prepared, one) }):
				a.diags.Errorf("checker", f.At, "%s prepared the calculation and cannot check it", f.Text()).WithHint("another person checks")
			}
		}
	}
}

// referred to in a field: [Eq. V], with or without brackets.
var whereTo = regexp.MustCompile(`^\[?(Eq\.|Fig\.|Table) (\pL[\pL\pN_.-]*)\]?$`)

// wheres makes links of the fields that say where something stands, by the rules
// of the prose; the name of a value leads to where it is computed.
func (a *assembly) wheres() {
	all := a.referrals()
	for _, n := range a.nodes {
		body, ok := n.body.(interface{ Wheres() []field.Field })
		if !ok || n.kind != blockNode || n.failed {
			continue
		}
		to := map[string]exhibit.Cell{}
		for _, f := range body.Wheres() {
			text := strings.TrimSpace(f.Text())
			c := exhibit.Cell{Text: text}
			if m := whereTo.FindStringSubmatch(text); m != nil {
				what := map[string]string{"Eq.": "eq", "Fig.": "fig", "Table": "table"}[m[1]]
				c.Text, c.Refer = a.refer(markdown.Refer{What: what, Name: m[2], Text: m[1] + " " + m[2], Range: f.At}, all)
			} else if name := formula.Normal(text); slices.ContainsFunc(a.p.Values, func(e exhibit.Entry) bool { return e.ID == name }) {
				c.Refer = "value " + name
			}
			to[f.Text()] = c
		}
		for _, it := range n.result.Results {
			if it.Table == nil {
				continue
			}
			for _, row := range it.Table.Rows {
				for i := range row {
					if c, ok := to[row[i].Refer]; ok && row[i].Refer != "" {
						row[i].Text, row[i].Refer = c.Text, c.Refer
					}
				}
			}
		}
	}
}

// openText is the standing statement about what is open: in short for the cover, and
// in full.
func (a *assembly) openText() (short, full string) {
	count := func(n int, one, many string) string {
		switch n {
		case 0:
			return "no " + one
		case 1:
			return "1 " + one
		}
		return fmt.Sprintf("%d %s", n, many)
	}
	assumptions := 0
	for _, x := range a.p.Assumptions {
		if x.Status == "open" {
			assumptions++
		}
	}
	comments, failed := len(exhibit.OpenComments(a.p.Comments)), len(exhibit.Failed(a.p.Checks))
	open := []string{count(assumptions, "open assumption", "open assumptions"), count(comments, "open comment", "open comments"), count(failed, "check NOT OK", "checks NOT OK")}
	checked := exhibit.People(a.p.Meta.Checked.Initials)
	second := len(checked) > 0 && !slices.ContainsFunc(exhibit.People(a.p.Meta.Prepared.Initials), func(one string) bool { return slices.Contains(checked, one) })
	if second {
		open = append(open, "a check signed by a second person; what it covered is the checker's record")
	} else {
		open = append(open, "every sheet unchecked by a second person")
	}
	full = "What is open is listed on the cover and in the registers: " + strings.Join(open, ", ") + ". While anything of this is open, the package is not for construction."
	if assumptions+comments+failed > 0 || !second {
		var what []string
		for _, text := range open[:3] {
			if !strings.HasPrefix(text, "no ") {
				what = append(what, text)
			}
		}
		if !second {
			what = append(what, "no sheet checked by a second person")
		}
		short = "Not for construction: " + strings.Join(what, ", ") + "."
	}
	return short, full
}
