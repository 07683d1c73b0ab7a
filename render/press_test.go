package render

import (
	"slices"
	"testing"

	"quoin/render/page"
)

// TestForeseen: what the page asks for is what was foreseen, no more and no less, so
// that it is laid out once.
func TestForeseen(t *testing.T) {
	p := sample()
	r := &press{byKey: map[string]*job{}, options: map[string]option{}}
	r.foresee(p)
	foreseen := len(r.jobs)
	if foreseen < 3 {
		t.Fatalf("%d things foreseen", foreseen)
	}
	if err := r.make(p, files, Options{}); err != nil {
		t.Fatal(err)
	}
	asked := &press{byKey: map[string]*job{}, options: map[string]option{}}
	if _, err := page.Render(p, page.Options{Chart: asked.chart, Picture: asked.picture, TeX: asked.formula}); err != nil {
		t.Fatal(err)
	}
	keys := func(r *press) (out []string) {
		for _, j := range r.jobs {
			out = append(out, j.key)
		}
		slices.Sort(out)
		return out
	}
	if got, want := keys(r), keys(asked); !slices.Equal(got, want) {
		t.Errorf("foreseen %.200q, asked for %.200q", got, want)
	}
	for _, j := range r.jobs {
		if !j.made || j.err != nil || j.text == "" {
			t.Errorf("%s: made %t, %v", j.name, j.made, j.err)
		}
	}
}
