package page

import (
	"strings"
	"testing"

	"quoin/calc/exhibit"
)

// TestRegistersOfInputs: an input without a source says so in the register and on
// the cover; a missing fact of a record reads not given; hostile text is inert.
func TestRegistersOfInputs(t *testing.T) {
	p := &exhibit.Package{}
	evil := `<script>x</script>{{.}}`
	p.Given = []exhibit.Given{{Origin: exhibit.Origin{Name: evil}, Kind: "formula", Rows: []exhibit.GivenValue{
		{Label: "with", Source: &exhibit.Source{Text: evil}}, {Label: "without"}}}}
	p.Motions = []exhibit.Motion{{Origin: exhibit.Origin{Name: "r"}, File: "r.at2", Event: evil}}
	p.Criteria = []exhibit.Criterion{{Group: exhibit.CriteriaGroups[0], Label: evil, Value: exhibit.Cell{Text: evil}}}
	page, err := Render(p, Options{})
	if err != nil {
		t.Fatal(err)
	}
	text := string(page)
	for _, want := range []string{"2 given", "1 without a source", ">no source<", "not given", "Design criteria", `id="q-records"`} {
		if !strings.Contains(text, want) {
			t.Errorf("the page lacks %q", want)
		}
	}
	if strings.Contains(text, "<script>x") {
		t.Error("markup came through")
	}
	p.Given[0].Rows = p.Given[0].Rows[:1]
	page, _ = Render(p, Options{})
	if strings.Contains(string(page), "without a source") {
		t.Error("every input has a source, and the cover says otherwise")
	}
}
