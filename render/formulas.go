package render

import (
	"quoin/calc/exhibit"
	"quoin/render/page"
	"quoin/render/script"
)

// Formulas sets the formulas of the prose that hold more than common commands and
// fills the templates of the office, and draws nothing, for a run that writes no page. What
// is refused is a [*Faults], as from [Package].
func Formulas(p *exhibit.Package, files map[string][]byte) error {
	r := &press{byKey: map[string]*job{}}
	walk(p, func(n exhibit.Prose) {
		// A block's own formulas stand in no file, and its tests set them.
		if n.Place.Line == 0 || script.Common(n.Text) {
			return
		}
		r.formula(n.Text, n.Kind == exhibit.MathBlock)
	})
	r.run(nil, func(*job) bool { return true })
	if err := r.faults(p, files); err != nil {
		return err
	}
	return ofOffice(page.CheckOffice(p))
}
