package document

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/formula"
	"quoin/calc/document/markdown"
	"quoin/calc/exhibit"
)

// An equation is referred to by the name of its value, [Eq. V] or [Eq. elf.V]; a
// figure or a table by its own name, which is that of its CSV file, [Table elf-forces],
// or by that of its block where that has but one.

// referred is what an equation, a figure or a table is referred to by.
type referred struct {
	what, name string
	block      string // the block it stands in
	number     int
}

// referring is a reference in the prose and what it names.
type referring struct {
	prose *exhibit.Prose
	to    markdown.Refer
}

// referWords is how a reference is printed.
var referWords = map[string]string{"eq": "Eq. (%d)", "fig": "Fig. %d", "table": "Table %d"}

// referNouns is what a message calls it.
var referNouns = map[string]string{"eq": "equation", "fig": "figure", "table": "table"}

// referShort is what the words of a reference by number mean, and referSample how
// one by name is written.
var (
	referShort  = map[string]string{"Eq": "eq", "Equation": "eq", "Fig": "fig", "Figure": "fig", "Table": "table"}
	referSample = map[string]string{"eq": "[Eq. V]", "fig": "[Fig. spectra]", "table": "[Table storeys]"}
)

// referrals is all that can be referred to, in order.
func (a *assembly) referrals() (out []referred) {
	for _, c := range a.p.Chapters {
		for _, piece := range c.Pieces {
			if piece.Block == nil {
				continue
			}
			for _, part := range piece.Block.Parts {
				for _, it := range part.Items {
					r := referred{block: piece.Block.Name}
					switch {
					case it.Equation != nil:
						r.what, r.name, r.number = "eq", it.Equation.Of(piece.Block.Name), it.Equation.Number
					case it.Figure != nil:
						r.what, r.name, r.number = "fig", it.Figure.ID, it.Figure.Number
					case it.Table != nil:
						r.what, r.name, r.number = "table", it.Table.ID, it.Table.Number
					}
					if r.name != "" {
						out = append(out, r)
					}
				}
			}
		}
	}
	return out
}

// refers gives the references in the prose their numbers. All of them are known
// only once everything is counted.
func (a *assembly) refers() {
	all := a.referrals()
	for _, r := range a.referring {
		r.prose.Text, r.prose.Target = a.refer(r.to, all)
		r.prose.Level = 0
	}
}

// refer is how a reference is printed and what it leads to. One that leads nowhere
// is printed as written.
func (a *assembly) refer(ref markdown.Refer, all []referred) (text, target string) {
	name := ref.Name
	if ref.What == "eq" {
		name = formula.Normal(name)
	}
	var found, own []referred
	var names []string
	for _, r := range all {
		if r.what != ref.What {
			continue
		}
		names = append(names, r.name)
		if r.name == name {
			found = append(found, r)
		}
		if r.what != "eq" && r.block == formula.Normal(name) {
			own = append(own, r)
		}
	}
	if len(found) == 0 && len(own) == 1 {
		found = own
	}
	if len(found) > 0 {
		return fmt.Sprintf(referWords[ref.What], found[0].number), ref.What + " " + found[0].name
	}
	noun := referNouns[ref.What]
	hint := `write \[ for a bracket as text`
	switch near := diag.Nearest(name, names); {
	case len(own) > 1:
		var of []string
		for _, r := range own {
			of = append(of, r.name)
		}
		slices.Sort(of)
		a.diags.Warnf("unknown-exhibit", ref.Range, "the block %s has %d %ss", ref.Name, len(own), noun).WithHint("name one of them: %s", strings.Join(of, ", "))
		return "[" + ref.Text + "]", ""
	case near != "":
		hint = "did you mean " + near + "?"
	case ref.What == "eq":
		hint = `an equation is known by the name of its value; ` + hint
	default:
		hint = "a " + noun + " is known by the name of its block, or of its file in tables/; " + hint
	}
	a.diags.Warnf("unknown-exhibit", ref.Range, "there is no %s %s", noun, ref.Name).WithHint("%s", hint)
	return "[" + ref.Text + "]", ""
}
