package formula

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// world is a scope of invented values.
type world struct{}

type hinted struct{ text, hint string }

func (h hinted) Error() string { return h.text }
func (h hinted) Hint() string  { return h.hint }

func vector(unit string, labels []string, items ...float64) quantity.Value {
	u := quantity.MustUnit(unit)
	si := make([]float64, len(items))
	for i, x := range items {
		si[i] = u.To(x)
	}
	return quantity.List(si, u, labels)
}

func scalar(x float64, unit string) quantity.Value {
	u := quantity.MustUnit(unit)
	return quantity.Scalar(u.To(x), u)
}

var levels = []string{"L1", "L2", "Roof"}

var values = map[string]quantity.Value{
	"V":       scalar(120, "kN"),
	"h_n":     scalar(15.2, "m"),
	"k":       quantity.Pure(1.2),
	"n":       quantity.Pure(2),
	"neg":     quantity.Pure(-1),
	"zero":    quantity.Pure(0),
	"x_d":     scalar(1.234567, "m"),
	"mass":    scalar(20, "t"),
	"F.w":     vector("kN", levels, 300, 280, 200),
	"F.h":     vector("m", levels, 4, 7.5, 11),
	"d.drift": vector("mm", levels, 20, 31, 0),
	"q":       vector("", nil, 1, 4, 9),
	"pm":      vector("", nil, 4, -1, 9),
	"two":     vector("", nil, 1, 2),
	"other":   vector("m", []string{"a", "b", "c"}, 1, 2, 3),
	"m.T":     vector("s", nil, 0.8, 0.25, 0.14),
	"m.phi":   {SI: []float64{0.4, 0.7, 1, -0.9, 0.1, 1}, Shape: quantity.Rows, Width: 3, Labels: levels},
	"xs":      vector("s", nil, 0.1, 0.5, 1),
	"ys":      vector("g", nil, 1, 0.5, 0.2),
	"up_down": vector("", nil, 0, 2, 1),
	"none":    {Shape: quantity.Vector, SI: []float64{}},
}

func (world) Value(path string) (quantity.Value, string, error) {
	v, ok := values[path]
	if !ok {
		return v, "", hinted{path + " is not set", "set it in a formula line"}
	}
	return v, path, nil
}

func (world) Call(path string, args []quantity.Value) (quantity.Value, string, error) {
	switch {
	case path != "rs.PSA":
		return quantity.Value{}, "", errors.New(path + " is no function of a block")
	case len(args) == 0 || !args[0].Dim.Is(quantity.Time):
		return quantity.Value{}, "", errors.New("PSA is read at a period")
	}
	out := args[0]
	out.Dim, out.Unit, out.SI = quantity.Acceleration, quantity.MustUnit("g"), nil
	for _, t := range args[0].SI {
		out.SI = append(out.SI, quantity.Gravity*0.6/(1+t))
	}
	return out, "", nil
}

// shownValue is a value for the table: in its own unit or, in brackets, in SI.
func shownValue(v quantity.Value) string {
	u, mark := v.Unit, ""
	if u.Scale == 0 {
		u = quantity.SIUnit(v.Dim)
		if u.Text != "" {
			mark = " (no unit of its own)"
		}
	}
	var items []string
	for i, x := range v.SI {
		text := quantity.Plain(quantity.Rounded(u.From(x), 6))
		if v.Shape == quantity.Vector && i < len(v.Labels) {
			text = v.Labels[i] + ": " + text
		}
		items = append(items, text)
	}
	text := strings.Join(items, ", ")
	if v.Shape != quantity.Number {
		text = "[" + text + "]"
	}
	return strings.TrimSpace(text+" "+u.Text) + mark
}

func takenIn(n *expr.Node) string {
	var b strings.Builder
	n.Walk(func(n *expr.Node) {
		if n.Taken != nil {
			fmt.Fprintf(&b, "  %s takes %v\n", n.Text, n.Taken)
		}
		if n.Op == expr.Item && n.ID != "" {
			fmt.Fprintf(&b, "  id %s\n", n.ID)
		}
	})
	return b.String()
}

func TestValues(t *testing.T) {
	runTable(t, "testdata/values.txt", 100, func(input string) string {
		line, findings := ParseLine("y = "+input, nil)
		if len(findings) > 0 {
			return "unreadable\n" + told("y = "+input, findings)
		}
		v, findings := Evaluate(line.Tree, world{})
		if len(findings) > 0 {
			for i := range findings {
				findings[i].From -= len("y = ")
				findings[i].To -= len("y = ")
			}
			return told(input, findings)
		}
		if line.HasAs {
			var finding *Finding
			if v, finding = Shown(v, line); finding != nil {
				finding.From -= len("y = ")
				finding.To -= len("y = ")
				return told(input, []Finding{*finding})
			}
		}
		if !v.Finite() {
			t.Errorf("%s: not finite: %v", input, v.SI)
		}
		return "  " + shownValue(v) + "\n" + takenIn(line.Tree)
	})
}

func TestChecks(t *testing.T) {
	runTable(t, "testdata/checks.txt", 30, func(input string) string {
		line, findings := ParseLine(input, nil)
		if len(findings) > 0 {
			return "unreadable\n" + told(input, findings)
		}
		rows, relation, findings := EvaluateCheck(line.Tree, world{})
		if len(findings) > 0 {
			return told(input, findings)
		}
		var b strings.Builder
		for _, r := range rows {
			fmt.Fprintf(&b, "  %s %s %s", quantity.Plain(quantity.Rounded(r.Demand, 6)), relation, quantity.Plain(quantity.Rounded(r.Limit, 6)))
			if r.Tolerance != nil {
				fmt.Fprintf(&b, " within %s", quantity.Plain(quantity.Rounded(*r.Tolerance, 6)))
			}
			fmt.Fprintf(&b, " %s", strings.TrimPrefix(r.Dim.Name(), "a "))
			if r.Index > 0 {
				fmt.Fprintf(&b, ", item %d %s", r.Index, r.Item)
			}
			ratio := "null"
			if r.Ratio != nil {
				ratio = quantity.Plain(quantity.Rounded(*r.Ratio, 6))
			}
			fmt.Fprintf(&b, ": ratio %s, ok %v\n", ratio, r.OK)
		}
		return b.String()
	})
}
