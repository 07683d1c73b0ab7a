package page

import (
	"html/template"
	"strconv"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
	"quoin/render/equation"
)

// The columns of an equation line in print, em of its mathematics.
const (
	symbolRoom    = 14
	numberRoom    = 18
	wholeRoom     = 40
	besideRoom    = 31 // beside a result
	longest       = 48 // items that a vector without levels shows in full
	across        = 4  // columns of a long vector
	tallestColumn = 24
	em            = 3.7 // mm
)

type equationView struct {
	ID, Label, Description, Value, Unit, Over string
	Governs                                   string // how what governs is marked
	Lead                                      string // where the equals signs of the block stand, em
	Shrink                                    string // on paper, where a sheet would not hold it
	Symbols, Numbers, Matrix                  template.HTML
	From, Rests                               []string // what its numbers come from; the open assumptions behind it
	Columns                                   [][]labelled
	Source                                    any
	Number, Use                               int
	Wide, Method, Overridden, TopDown         bool
	Was                                       *wasView
}

type labelled struct {
	Label, Text string
	Was         *wasView
}

// equation is an equation as items: one, and further ones for a vector that is
// longer than one can show.
func (b *book) equation(e *exhibit.Equation, label string) []item {
	v := equationView{Label: label, Description: e.Description, Number: e.Number, Overridden: e.Overridden, Rests: e.Rests, Method: e.Result == nil}
	v.Source = sourceOf(e.Ref, e.RefText)
	v.ID = b.exhibits[e]
	if e.Tree != nil {
		v.From = b.leavesOf(e.Tree)
	}
	if v.ID != "" {
		v.Use = b.use(e.Of(b.within))
	}
	rows := 1.6
	if e.TeX != "" {
		v.Symbols, v.Wide = b.mustTeX(e.TeX, e.Place), true
		rows = 2.6
	} else {
		rows = b.formula(&v, e)
	}
	if e.Result != nil {
		v.Was = b.was(e.Of(b.within))
		if r := *e.Result; r.Shape == quantity.Number && len(r.SI) == 1 {
			v.Was = b.wasNumber(b.shownAs(e, 0, e.Of(b.within)), false)
		}
		tall := b.result(&v, e)
		if len(v.Columns) > 0 && !strings.HasPrefix(v.Over, "of ") {
			v.Was = nil // its items say it
		}
		tall += 0.8 * v.Was.high(20)
		if len(v.Columns) > 1 {
			rows += tall
		} else {
			rows = max(rows, tall)
		}
	}
	high := rows*em + 4.5*lines(e.Description+strings.Repeat("(00), ", min(len(v.From), mostFrom))+restText(e.Rests), 90) + 4
	if e.Ref != nil { // in the margin, in narrow lines
		margin := lines(e.Ref.Key, 14) + lines(e.Ref.Clause, 14)
		if e.Ref.Memory {
			margin += 2
		}
		high = max(high, 3.3*margin+4.5)
	}
	rest := v.Columns
	if len(rest) > across {
		v.Columns, rest = rest[:across], rest[across:]
	} else {
		rest = nil
	}
	if most := b.room() - 15; high > most {
		v.Shrink, high = strconv.FormatFloat(most/high, 'f', 2, 64), most
	}
	out := []item{{name: "equation", data: v, high: high, anchors: []string{v.ID}}}
	for len(rest) > 0 {
		n := min(across, len(rest))
		out = append(out, item{name: "equation", data: equationView{Over: v.Over, Unit: v.Unit, TopDown: v.TopDown, Columns: rest[:n]}, high: 8 + em*1.55*float64(len(rest[0])+1)})
		rest = rest[n:]
	}
	return out
}

// formula sets the symbols and the numbers of a line and says how high it is, em.
func (b *book) formula(v *equationView, e *exhibit.Equation) float64 {
	down := equation.Levels(e.Tree)
	free := equation.Setter{System: b.p.System, TopDown: down, Lead: b.lead}
	tree := e.Tree
	_, constant := constantTree(tree)
	if echoed(e) { // "h = 15 m": the result says it all
		set := free.Symbols(e.Symbol)
		v.Symbols = template.HTML(set.XML)
		return set.Height
	}
	symbols := free.Equation(e.Symbol, tree)
	numbers := free.Numbers(tree)
	plain := constant || e.Result == nil
	switch underlined, ticked := equation.Marks(tree); {
	case underlined && ticked:
		v.Governs = "underlined, ✓: governs"
	case underlined:
		v.Governs = "underlined: governs"
	case ticked:
		v.Governs = "✓: governs"
	}
	v.Wide = symbols.Width > symbolRoom && !(plain && symbols.Width <= symbolRoom+numberRoom) || !plain && numbers.Width > numberRoom
	if v.Wide {
		narrow := equation.Setter{System: b.p.System, Width: wholeRoom, Lead: b.lead}
		if e.Symbol != nil && b.lead > 0 {
			v.Lead = strconv.FormatFloat(b.lead, 'f', 2, 64)
		}
		symbols, numbers = narrow.Equation(e.Symbol, tree), equation.Setter{System: b.p.System, Width: besideRoom, TopDown: down}.Numbers(tree)
	}
	v.Symbols = template.HTML(symbols.XML)
	if plain {
		return symbols.Height
	}
	v.Numbers = template.HTML(numbers.XML)
	if v.Wide {
		return symbols.Height + numbers.Height + 0.8
	}
	return max(symbols.Height, numbers.Height)
}

// widestLead is the widest symbol, em, that the equals signs of a block go by.
const widestLead = 7

// leadOf is where the equals signs of a block's equations stand, em: behind the widest symbol.
func leadOf(k *exhibit.Block) float64 {
	lead := 0.0
	for _, part := range k.Parts {
		for _, it := range part.Items {
			if e := it.Equation; e != nil && e.Symbol != nil && e.Tree != nil && !echoed(e) {
				if w := (equation.Setter{}).Symbols(e.Symbol).Width; w <= widestLead {
					lead = max(lead, w)
				}
			}
		}
	}
	return lead
}

// echoed tells an equation that gives a number as it is: "h = 15 m", of which the
// result says all.
func echoed(e *exhibit.Equation) bool {
	given, _ := constantTree(e.Tree)
	return given && e.Symbol != nil && sameUnit(e.Tree, e.Result)
}

// constantTree tells a single number or list as given from what is computed, and
// what has nothing to substitute.
func constantTree(n *expr.Node) (given, constant bool) {
	constant = true
	n.Walk(func(m *expr.Node) { constant = constant && (m.Op == expr.Literal || !m.Leaf()) })
	given = n.Op == expr.Literal || n.Op == expr.Neg && n.Args[0].Op == expr.Literal
	if n.Op == expr.List {
		given = true
		for _, a := range n.Args {
			g, _ := constantTree(a)
			given = given && g
		}
	}
	return given, constant
}

// sameUnit tells whether a given number is shown in the unit it was given in.
func sameUnit(n *expr.Node, result *quantity.Value) bool {
	same := true
	n.Walk(func(m *expr.Node) {
		if m.Op == expr.Literal && result != nil {
			u, err := quantity.ParseUnit(m.Unit)
			same = same && err == nil && u.Text == result.Unit.Text
		}
	})
	return same
}

// result sets the value of a line; vectors are tables of label and value.
func (b *book) result(v *equationView, e *exhibit.Equation) float64 {
	unit := e.Result.Unit
	if unit.Scale == 0 {
		unit = b.p.System.Preferred(e.Result.Dim)
	}
	digits := e.Digits
	if digits == 0 {
		digits = quantity.Digits
	}
	v.Unit = unit.Pretty()
	text := func(si float64) string { return quantity.Format(unit.From(si), digits) }
	switch r := *e.Result; {
	case r.Shape == quantity.Rows:
		v.Matrix = template.HTML(equation.Value(r, unit, digits))
		return 1.45 * float64(r.Len())
	case r.Shape == quantity.Vector:
		v.Over = "item"
		if len(r.Labels) == len(r.SI) && len(r.SI) > 0 {
			v.Over = "level"
		}
		if v.Over == "item" && len(r.SI) > longest {
			v.Over = "of " + strconv.Itoa(len(r.SI))
			v.Columns = [][]labelled{summary(r.SI, text)}
			return 1.55 * float64(len(v.Columns[0])+1)
		}
		tall := 12
		if len(r.SI) > 2*tall {
			tall = min((len(r.SI)+across-1)/across, tallestColumn)
		}
		v.TopDown = v.Over == "level" && equation.Levels(e.Tree)
		for k := range r.SI {
			i := k
			if v.TopDown {
				i = len(r.SI) - 1 - k
			}
			if k%tall == 0 {
				v.Columns = append(v.Columns, nil)
			}
			label := strconv.Itoa(i + 1)
			if v.Over == "level" {
				label = r.Labels[i]
			}
			last := len(v.Columns) - 1
			v.Columns[last] = append(v.Columns[last], labelled{label, text(r.SI[i]), b.wasNumber(b.shownAs(e, i, e.Of(b.within)+"["+strconv.Itoa(i+1)+"]"), true)})
		}
		return 1.55 * float64(min(len(r.SI), tall)+1)
	case len(r.SI) > 0:
		v.Value = text(r.SI[0])
	}
	return 1.6
}

// shownAs is a number of a result as it is shown.
func (b *book) shownAs(e *exhibit.Equation, i int, id string) exhibit.Number {
	unit := e.Result.Unit
	if unit.Scale == 0 {
		unit = b.p.System.Preferred(e.Result.Dim)
	}
	return exhibit.Number{Value: e.Result.SI[i], Unit: unit, Digits: e.Digits, ID: id}
}

// summary is a long vector in a few rows: its first items and the last, the least
// and the largest. All of it stands in results.json.
func summary(si []float64, text func(float64) string) (rows []labelled) {
	row := func(words string, i int) {
		rows = append(rows, labelled{Label: words + strconv.Itoa(i+1), Text: text(si[i])})
	}
	for i := range 3 {
		row("", i)
	}
	rows = append(rows, labelled{Label: "⋮"})
	row("", len(si)-1)
	least, most := 0, 0
	for i, x := range si {
		if x < si[least] {
			least = i
		}
		if x > si[most] {
			most = i
		}
	}
	row("least, ", least)
	row("largest, ", most)
	return rows
}
