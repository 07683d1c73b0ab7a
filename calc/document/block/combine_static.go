package block

import (
	"slices"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/expr"
	"quoin/calc/lateral"
	"quoin/calc/modal"
	"quoin/calc/standard"
)

// statics are the static forces that a tree is made of.
func (r *Run) statics(tree *expr.Node) []*lateral.Static {
	var out []*lateral.Static
	for _, name := range r.staticNames(tree) {
		if s, ok := r.Product(name).(*lateral.Static); ok {
			out = append(out, s)
		}
	}
	return out
}

// limb is the symbol of the limb of C_s that governs what forces are scaled to: that
// of the static block which scale_to is made of, or the one that its value tells.
func (b *combine) limb(r *Run, modes *modal.Modes, in demand) string {
	symbol := ""
	for _, s := range r.statics(b.ScaleTo.Tree) {
		if symbol = s.Governing(); symbol == lateral.LeastSymbol {
			return symbol
		}
	}
	if symbol == "" && in.target != nil && lateral.IsLeast(in.target, b.ScaleTo.SI(), modes.Model.Weight, b.R.SI(), in.ie) {
		return lateral.LeastSymbol
	}
	return symbol
}

// unraised warns of a spectrum that exception 2 to ASCE/SEI 7-16 11.4.8 leaves as it
// is and raises C_s alone.
func (b *combine) unraised(r *Run, c *modal.Combined) {
	if !c.Unraised {
		return
	}
	const left = "displacements and drifts are of the unraised spectrum, up to 1.5 times too small"
	all := r.statics(b.ScaleTo.Tree)
	switch raised := func(s *lateral.Static) bool { return s.Exception == 2 }; {
	case !b.ScaleTo.Given:
		r.WarnAt(b.Target, "exception-raise", "exception 2 to 11.4.8 raises C_s by half and not the spectrum of %s: base shear and forces here are up to 1.5 times too small until scaled to the base shear of the static procedure with the raised C_s (scale_to: NAME.V); %s", b.Target.Text(), left)
	case len(all) > 0 && !slices.ContainsFunc(all, func(s *lateral.Static) bool { return !raised(s) }):
		r.WarnAt(b.Target, "exception-raise", "exception 2 to 11.4.8 raises C_s by half and not the spectrum of %s: forces are scaled to the raised base shear, %s", b.Target.Text(), left)
	default:
		r.WarnAt(b.ScaleTo, "exception-raise", "exception 2 to 11.4.8 raises C_s by half and not the spectrum of %s: see that scale_to is the base shear of the static procedure with the raised C_s; %s", b.Target.Text(), left)
	}
}

// importance is I_e: as given, or by the risk category of the target where the
// response is reduced; never below that category in silence.
func (b *combine) importance(r *Run) float64 {
	least, risk, known := 1.0, "", false
	if b.Target.Given {
		least, risk, known = lateral.Importance(r.Product(b.Target.Text()).(*standard.Target))
	}
	switch {
	case b.Ie.Given && known && b.R.Given && b.Ie.SI() < least:
		r.WarnAt(b.Ie, "importance", "I_e = %s is below the %s of risk category %s of %s", short(b.Ie.SI()), short(least), risk, b.Target.Text())
	case !b.Ie.Given && known && b.R.Given:
		r.Used("I_e", "I_e", inUnits(least, pure), "by the risk category of the target, "+risk)
		return least
	case !b.Ie.Given:
		r.assumed("I_e", 1)
		return 1
	}
	return b.Ie.SI()
}

// unscaled warns of forces of a reduced modal analysis that no static base shear
// holds up.
func (b *combine) unscaled(r *Run, c *modal.Combined) {
	if b.R.Given && !b.ScaleTo.Given && !c.Unraised && strings.HasPrefix(c.Basis, "ASCE/SEI 7") {
		ref := cite.To(c.Basis, "12.9.1.4")
		r.WarnAt(b.R, "unscaled", "forces are not scaled: %s asks that the modal base shear be no less than 100 %% of the static one (scale_to: NAME.V of a static block)", ref.String())
		r.Refs = append(r.Refs, ref)
	}
}
