package block

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

var varyKind = Kind{
	Name:     "vary",
	Doc:      "how results move when values are changed: one over a range (response), or several one at a time (tornado). What-if results; the document's own values stay as they are",
	Makes:    "variation",
	Nameless: false,
	New:      func() Body { return &vary{} },
	Exports: []Export{
		{"x", "the values taken, of one name, where there was a result", AsAsked}, {"y", "the first result at these", AsAsked},
		{"base", "the first result as the document stands", AsAsked}, {"least", "the least of the first result, the base among them", AsAsked}, {"most", "the greatest of the first result, the base among them", AsAsked},
		{"count", "how many runs were made", ""}, {"failed", "how many of them gave no result", ""},
	},
}

type vary struct {
	common
	Names []varyFields `name:"names" must:"filled" doc:"what is varied: {name, values} or {name, from, to, count}; one name gives a response, several are varied one at a time"`
	Of    []ofFields   `name:"of" must:"filled" doc:"the results looked at, each one number: elf.V, \"m.T[1]\", max(d.drift_ratio), a formula name, or {value, label, unit}"`
}

type ofFields struct {
	Value field.Field `name:"value" is:"any" short:"yes" need:"yes" doc:"a number: a name or an expression"`
	Label field.Field `name:"label" is:"text" doc:"what it is called in tables and figures; the expression, if not given"`
	Unit  field.Field `name:"unit" is:"text" doc:"unit it is shown in"`
}

type varyFields struct {
	Name   field.Field `name:"name" is:"text" need:"yes" doc:"a formula name, an input, or a field of a block: R, frame.damping, east.scale"`
	Values field.Field `name:"values" is:"any" many:"yes" doc:"the values it takes in turn"`
	From   field.Field `name:"from" is:"any" doc:"in place of values: the first of a range"`
	To     field.Field `name:"to" is:"any" doc:"the last of the range"`
	Count  field.Field `name:"count" is:"number" must:"whole positive" doc:"how many values from first to last, evenly; two, if not given"`
}

// Varies is a body that asks for further runs of the document.
type Varies interface {
	Varied() []field.Item // the names varied
	Asked() []field.Item  // the expressions looked at
}

// Outcome is what one case comes to: the values asked for, or why there are none.
type Outcome struct {
	Values []float64 // SI
	Failed string
	Checks []Verdict
}

// Verdict is how a check came out.
type Verdict struct {
	Check string
	OK    bool
}

// Varied are the names varied.
func (b *vary) Varied() []field.Item {
	var out []field.Item
	for _, n := range b.Names {
		out = append(out, n.Name.List...)
	}
	return out
}

// Asked are the results looked at.
func (b *vary) Asked() []field.Item {
	var out []field.Item
	for _, f := range b.Of {
		out = append(out, f.Value.List...)
	}
	return out
}

// AsAsked stands for the unit of an export that has that of what it is taken from.
const AsAsked = "any, as what it is taken from"

// mostRuns and mostResults bound a block.
const (
	mostRuns    = 200
	mostNames   = 12
	mostResults = 4
)

// Check sees that every name has values or a range.
func (b *vary) Check(c *Checks) {
	if len(b.Names) == 0 {
		c.Diags.Errorf("missing-field", c.Place, "the vary block needs the field names").WithHint("names: [{name: R, from: 4, to: 8, count: 9}]")
	}
	if len(b.Of) == 0 {
		c.Diags.Errorf("missing-field", c.Place, "the vary block needs the field of").WithHint("of: [elf.V]")
	}
	if len(b.Of) > mostResults {
		c.Fail(b.Of[mostResults].Value, "vary-limit", "%d results are asked for; a block shows %d", len(b.Of), mostResults).WithHint("take another vary block for the others")
	}
	if len(b.Names) > mostNames {
		c.Fail(b.Names[mostNames].Name, "vary-limit", "%d names are varied; a block takes %d", len(b.Names), mostNames)
	}
	for i, n := range b.Names {
		for _, old := range b.Names[:i] {
			if n.Name.Given && n.Name.Text() == old.Name.Text() {
				c.Fail(n.Name, "vary-input", "%s is varied twice", n.Name.Text())
			}
		}
		switch {
		case n.Values.Given && (n.From.Given || n.To.Given || n.Count.Given):
			c.Fail(n.Values, "vary-input", "%s has values and a range; keep one", n.Name.Text())
		case !n.Values.Given && !(n.From.Given && n.To.Given):
			c.Fail(n.Name, "vary-input", "%s needs values, or from and to", n.Name.Text()).WithHint("{name: %s, from: ..., to: ..., count: 9}", n.Name.Text())
		}
	}
}

// varied is one name with what it takes.
type varied struct {
	name   string
	base   quantity.Value
	values []float64 // SI
	unit   quantity.Unit
	first  int // its first case
}

// takes reads the values of a name.
func (b *vary) takes(r *Run, n *varyFields) (v varied, ok bool) {
	v.name = n.Name.Text()
	if v.base, ok = r.Setting(v.name); !ok || len(v.base.SI) != 1 {
		r.Fail(n.Name, "vary-name", "%s has no single value in the document that could be varied", v.name).WithHint("give it one number; a vector is varied by a formula name that it is multiplied with")
		return v, false
	}
	v.unit = v.base.Unit
	for _, f := range []*field.Field{&n.Values, &n.From, &n.To} {
		if f.Given && !f.Value.Dim.Is(v.base.Dim) {
			r.Fail(*f, "dimension", "%s is %s, this is %s", v.name, v.base.Dim.Name(), f.Value.Dim.Name())
			return v, false
		}
		if f.Given && f.Value.Unit.Text != "" {
			v.unit = f.Value.Unit
		}
	}
	if n.Values.Given {
		v.values = slices.Clone(n.Values.Value.SI)
		return v, true
	}
	count := 2
	if n.Count.Given {
		count = int(math.Min(n.Count.SI(), 1e6))
	}
	from, to := n.From.SI(), n.To.SI()
	if count < 2 || from == to {
		r.Fail(n.To, "vary-input", "a range has two values or more, from one to another")
		return v, false
	}
	if count > mostRuns {
		r.Fail(n.Count, "vary-limit", "%d values; a block makes %d runs at most", count, mostRuns)
		return v, false
	}
	for i := range count {
		t := float64(i) / float64(count-1)
		v.values = append(v.values, round12(from*(1-t)+to*t))
	}
	v.values[0], v.values[count-1] = from, to
	return v, true
}

// set is a value as --set takes it, to the last bit.
func (v varied) set(si float64) []exhibit.Override {
	text := quantity.Plain(si)
	if u := quantity.SIUnit(v.base.Dim); u.Text != "" {
		text += " " + u.Text
	}
	return []exhibit.Override{{Name: v.name, Text: text}}
}

// at is a value in words: "R = 8".
func (v varied) at(si float64) string { return v.name + " = " + v.shown(si) }

func (v varied) shown(si float64) string {
	text := short(v.unit.From(si))
	if p := v.unit.Pretty(); p != "" {
		text += " " + p
	}
	return text
}

// Run makes all cases, and shows them.
func (b *vary) Run(r *Run) {
	w := whatIf{vary: b}
	var cases [][]exhibit.Override
	for i := range b.Names {
		v, ok := b.takes(r, &b.Names[i])
		if !ok {
			return
		}
		v.first = len(cases)
		for _, x := range v.values {
			cases = append(cases, v.set(x))
		}
		w.names = append(w.names, v)
	}
	if len(cases) > mostRuns {
		r.Fail(b.Names[len(b.Names)-1].Name, "vary-limit", "%d runs; a block makes %d at most", len(cases), mostRuns)
		return
	}
	runs := len(cases)
	for _, v := range w.names { // once more as the document has it: the check of the whole
		cases = append(cases, v.set(v.base.SI[0]))
	}
	for _, f := range b.Of {
		v := f.Value.Value
		u, ok := axisUnit(r, f.Unit, v)
		if !ok {
			return
		}
		w.base, w.units = append(w.base, v.SI[0]), append(w.units, u)
	}
	all := r.WhatIf(cases)
	w.out = all[:runs]
	if !w.again(r, all[runs:]) {
		return
	}
	r.Caution("what-if")
	r.Explain("Each value is set in turn, as if it stood in the document, and all that follows from it is computed again; everything else stays as it is. " +
		"Values set where the document has them give its own results again.")
	w.exports(r)
	if len(w.names) == 1 {
		w.response(r)
	} else {
		w.tornado(r)
	}
	w.failures(r)
}

// again holds the runs with the document's own values to its results.
func (w *whatIf) again(r *Run, own []Outcome) bool {
	worst := 0.0
	for i, o := range own {
		if o.Failed != "" {
			r.Fail(w.Names[i].Name, "vary-name", "%s cannot be set to its own value: %s", w.names[i].name, o.Failed)
			return false
		}
		for j, y := range o.Values {
			if y != w.base[j] {
				worst = math.Max(worst, math.Abs(y-w.base[j])/math.Max(math.Abs(w.base[j]), math.Abs(y)))
			}
		}
	}
	w.own = own
	r.Crosscheck("the document's own values set again, against its results", worst, 1e-9)
	return true
}

// flips says of every check that comes out otherwise than in the document where it
// does.
func (w *whatIf) flips() []string {
	var out []string
	for _, v := range w.names {
		base := w.own[slices.IndexFunc(w.names, func(x varied) bool { return x.name == v.name })]
		for _, c := range base.Checks {
			var at []string
			for i, x := range v.values {
				for _, d := range w.out[v.first+i].Checks {
					if d.Check == c.Check && d.OK != c.OK {
						at = append(at, v.shown(x))
					}
				}
			}
			if len(at) == 0 {
				continue
			}
			now, then := "OK", "NOT OK"
			if !c.OK {
				now, then = then, now
			}
			if n := len(at); n > 6 {
				at = append(at[:6], fmt.Sprintf("and %d more", n-6))
			}
			out = append(out, fmt.Sprintf("Check %s: %s as the document stands, %s with %s = %s.", c.Check, now, then, v.name, strings.Join(at, ", ")))
		}
	}
	if len(out) == 0 {
		out = append(out, "No check that follows from what is varied comes out otherwise than in the document.")
	}
	return out
}

// failures warns of cases without a result, and of names that move nothing.
func (w *whatIf) failures(r *Run) {
	for i, v := range w.names {
		moved, failed := false, 0
		first := ""
		for k, x := range v.values {
			o := w.out[v.first+k]
			if o.Failed != "" {
				if failed++; first == "" {
					first = v.at(x) + ": " + o.Failed
				}
				continue
			}
			moved = moved || !slices.Equal(o.Values, w.base)
		}
		if failed > 0 {
			r.WarnAt(w.Names[i].Name, "vary-no-result", "%s of %d gave no result; %s", counted(failed, "run"), len(v.values), first)
		}
		if !moved && failed < len(v.values) {
			r.WarnAt(w.Names[i].Name, "vary-idle", "%s moves none of the results", v.name)
		}
	}
}
