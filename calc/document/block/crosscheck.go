package block

import (
	"math"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// Crosscheck shows the residual of an independent calculation, and warns where
// it is larger than it may be. The cross-checks of a block make one paragraph.
func (r *Run) Crosscheck(what string, residual, limit float64) {
	if math.IsNaN(residual) || math.IsInf(residual, 0) {
		r.Diags.Errorf("cross-check", r.Place, "the cross-check of %s has no finite result; its values cannot be used", r.Name).WithHint("are the numbers given of a sensible size?")
		return
	}
	said := what + " " + tiny(residual)
	if k := len(r.Results) - 1; k >= 0 && strings.HasPrefix(r.Results[k].Text, crosschecks) {
		r.Results[k].Text = strings.TrimSuffix(r.Results[k].Text, ".") + "; " + said + "."
	} else {
		r.Results = append(r.Results, exhibit.Item{Text: crosschecks + said + "."})
	}
	if !(residual <= limit) {
		r.Warn("cross-check", "the cross-check fails: %s %s, more than %s", what, tiny(residual), tiny(limit))
	}
}

const crosschecks = "Cross-checks (relative): "

func tiny(x float64) string {
	if math.Abs(x) < 1e-15 {
		return "less than 10⁻¹⁵"
	}
	return quantity.Format(x, 2)
}
