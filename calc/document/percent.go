package document

import (
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// percentLimit warns of a ratio that is shown in per cent and held to a pure number
// of 1 or more while it lies below a hundredth of it: drift_ratio <= 2, meant 2 %.
func (n *node) percentLimit() {
	if n.diags.HasErrors() || n.line.Tree.Op == expr.Within || len(n.line.Tree.Args) != 2 {
		return
	}
	percent := quantity.MustUnit("%").Text
	shown := false
	for _, side := range n.line.Tree.Args {
		shown = shown || side.Value != nil && side.Value.Unit.Text == percent
	}
	limits, demands := false, true
	for _, r := range n.rows {
		limits = limits || r.Limit >= 1
		demands = demands && r.Dim.Is(quantity.None) && r.Demand < 0.01*r.Limit
	}
	if shown && limits && demands {
		n.diags.Warnf("percent-limit", n.lineSpot(len("check "), len("check ")+len(n.line.Text)), "the ratio is shown in per cent and held to a limit without its sign, which it is far below").
			WithHint("a limit of 2 %% is written  2 %%")
	}
}

// constantCheck warns of a check that reads no value of the document: its answer is
// written down with it, and it counts among the checks that are OK.
func (n *node) constantCheck() {
	if n.diags.HasErrors() || len(n.deps) > 0 {
		return
	}
	n.diags.Warnf("check-constant", n.lineSpot(n.line.Tree.From, n.line.Tree.To), "the check reads no value of the document: it compares constants, and nothing that is calculated can change it").
		WithHint("name what is checked: check d.drift_ratio <= 2 %%")
}
