package render

import (
	"quoin/calc/exhibit"
	"quoin/render/script"
)

// Formulas sets the formulas of the prose that hold more than common commands and
// draws nothing, for a run that writes no page. What the typesetter refuses is a
// [*Faults], as from [Package].
func Formulas(p *exhibit.Package, files map[string][]byte) error {
	r := &press{byKey: map[string]*job{}}
	walk(p, func(n exhibit.Prose) {
		// A block's own formulas stand in no file, and its tests set them.
		if n.Place.Line == 0 || script.Common(n.Text) {
			return
		}
		display := n.Kind == exhibit.MathBlock
		r.ask(formulaKey(n.Text, display), equation, func() (string, error) { return script.TeX(n.Text, display) })
	})
	r.run(nil, func(*job) bool { return true })
	return r.faults(p, files)
}
