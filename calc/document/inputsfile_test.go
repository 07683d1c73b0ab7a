package document

import (
	"slices"
	"strings"
	"testing"

	"quoin/calc/exhibit"
)

const withInputs = "---\nquoin: 1\ntitle: T\nunits: US\ninputs: [site.yaml, data/loads.csv]\n---\n"

var inputFilesOf = map[string]string{
	"site.yaml":      "# of the site\nS_DS: {value: 0.92, source: \"[GR]\", description: design value}\nk: [300 kip/in, 280 kip/in]\n",
	"data/loads.csv": "name,value,unit,source,description\nW,310,kip,[GR],weight of the roof\nω,\"2 * 3\",,,a number\n",
}

var readsInputs = calc("references", `- {key: GR, text: "Ground report"}`) + calc("formula", "V = S_DS * W as kip   # [GR] base shear", "k_sum = sum(k)   # [GR] s", "two = 2 * omega  # [GR] t")

// TestInputsFiles: values of both kinds of file are names of the document, with
// place, source and description, and stand in the register of inputs; the files are
// inputs of the package.
func TestInputsFiles(t *testing.T) {
	p := book(t, withInputs+readsInputs, inputFilesOf)
	near(t, p, 1e-15, map[string][]float64{"S_DS": {0.92}, "W": {310 * 4448.2216152605}, "V": {0.92 * 310 * 4448.2216152605}, "two": {12}, "k_sum": {580 * 4448.2216152605 / 0.0254}})
	if e := value(t, p, "W"); e.Place != (exhibit.Place{File: "data/loads.csv", Line: 2}) || e.Doc != "weight of the roof" {
		t.Errorf("W stands at %v, %q", e.Place, e.Doc)
	}
	if len(p.Given) < 2 || p.Given[0].Name != "site.yaml" || p.Given[1].Name != "data/loads.csv" {
		t.Fatalf("the register of inputs: %+v", p.Given)
	}
	rows := p.Given[0].Rows
	if len(rows) != 2 || rows[0].Source == nil || rows[0].Source.Ref == nil || rows[0].Source.Ref.Key != "GR" || rows[0].Place.Line != 2 || rows[0].Anchor == "" || rows[1].Source != nil {
		t.Errorf("the rows of site.yaml: %+v", rows)
	}
	if n := exhibit.Missing(p.Given); n != 2 {
		t.Errorf("%d inputs without a source, want k and omega", n)
	}
	if !slices.ContainsFunc(p.Inputs, func(i exhibit.Input) bool {
		return i.Path == "data/loads.csv" && i.Role == "values" && len(i.SHA256) == 64
	}) {
		t.Errorf("the files read: %+v", p.Inputs)
	}
}

// TestInputSet: an input set from outside is marked, and what rests on it knows it.
func TestInputSet(t *testing.T) {
	p := book(t, withInputs+readsInputs+calc("periods g", "from: 0.1 s", "to: 1 s", "count: 5")+calc("formula", "n = len(g.T)   # [GR] n"), inputFilesOf,
		exhibit.Override{Name: "W", Text: "200 kip"}, exhibit.Override{Name: "g.count", Text: "7"})
	near(t, p, 1e-15, map[string][]float64{"V": {0.92 * 200 * 4448.2216152605}, "n": {7}})
	for id, want := range map[string]string{"W": "", "V": "W", "n": "g.count", "g.T": "g.count", "two": ""} {
		e := value(t, p, id)
		if got := strings.Join(e.Moved, " "); got != want || e.Overridden != (id == "W") {
			t.Errorf("%s: overridden %v, rests on %q, want %q", id, e.Overridden, got, want)
		}
	}
	if o := p.Provenance.Overrides[0]; o.Was != "310 kip" {
		t.Errorf("it replaced %q", o.Was)
	}
	set := ""
	for _, c := range p.Chapters {
		for _, piece := range c.Pieces {
			if piece.Block != nil && piece.Block.Name == "g" {
				for _, r := range piece.Block.Parts[0].Items[0].Echo.Rows {
					if r.Overridden {
						set += r.Field
					}
				}
			}
		}
	}
	if set != "count" {
		t.Errorf("the echo marks %q", set)
	}
}
