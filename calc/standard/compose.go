package standard

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strconv"

	"quoin/calc/cite"
)

// problems collects what is wrong with parameters.
type problems struct{ all []error }

func (p *problems) fail(symbol, hint, format string, args ...any) {
	p.all = append(p.all, &ParameterError{Symbol: symbol, Problem: fmt.Sprintf(format, args...), Hint: hint})
}

func (p *problems) err() error { return errors.Join(p.all...) }

// found is a number or a word that the standard adds to what is given. Where doc
// or ref is empty, those of the parameter stand.
type found struct {
	value         float64
	text, formula string
	doc           string
	ref           cite.Ref
}

// register is the parameters of a target: of all that the standard knows, in its
// order, those that are given or found. A number found stands in place of the
// one given.
func register(docs []ParameterDoc, in Given, all map[string]found) []Parameter {
	var out []Parameter
	for _, d := range docs {
		p := Parameter{Symbol: d.Symbol, Unit: d.Unit, Doc: d.Doc, Ref: d.Ref}
		number, isNumber := in.Numbers[d.Symbol]
		text, isText := in.Texts[d.Symbol]
		p.Value, p.Text, p.Given = number, text, isNumber || isText
		f, ok := all[d.Symbol]
		if ok {
			p.Value, p.Text, p.Formula = f.value, f.text, f.formula
			if f.doc != "" {
				p.Doc = f.doc
			}
			if f.ref.Key != "" {
				p.Ref = f.ref
			}
		}
		if p.Given || ok {
			out = append(out, p)
		}
	}
	return out
}

// upper is the larger of two spectra over the range of the first: branches of
// the one or the other that meet at corners and where the two cross. Between two
// corners they must cross once at most. Where the second does not reach, the
// first stands.
func upper(a, b []Branch) []Branch {
	const far = 1e9 // s: where a search without end stops
	from, to := a[0].From, a[len(a)-1].To
	cuts := []float64{}
	for _, br := range slices.Concat(a, b) {
		cuts = append(cuts, br.From, br.To)
	}
	cuts = slices.DeleteFunc(cuts, func(T float64) bool { return T < from || to > 0 && T > to || T == 0 && from > 0 })
	if to == 0 {
		cuts = append(cuts, far)
	}
	slices.Sort(cuts)
	cuts = slices.Compact(cuts)
	at := func(list []Branch, T float64) (Branch, bool) {
		i := slices.IndexFunc(list, func(x Branch) bool { return x.From <= T && (x.To == 0 || T <= x.To) })
		if i < 0 {
			return Branch{}, false
		}
		return list[i], true
	}
	var out []Branch
	add := func(br Branch, formula string, from, to float64) {
		br.From, br.To, br.Formula = from, to, formula
		if k := len(out) - 1; k >= 0 && out[k].Name == br.Name && out[k].Formula == br.Formula {
			out[k].To = to
			return
		}
		out = append(out, br)
	}
	for i := 1; i < len(cuts); i++ {
		lo, hi := cuts[i-1], cuts[i]
		middle := lo + (hi-lo)/2
		one, _ := at(a, middle)
		two, both := at(b, middle)
		if !both {
			add(one, one.Formula, lo, hi)
			continue
		}
		formula := "max(" + one.Formula + ", " + two.Formula + ")"
		over := func(T float64) bool { return two.At(T) > one.At(T) }
		inside := min(hi-lo, 1) * 1e-9
		first, last := over(lo+inside), over(hi-inside)
		pick := map[bool]Branch{false: one, true: two}
		if first == last {
			add(pick[first], formula, lo, hi)
			continue
		}
		low, high := lo, hi
		for range 200 {
			if T := low + (high-low)/2; over(T) == first {
				low = T
			} else {
				high = T
			}
		}
		add(pick[first], formula, lo, high)
		add(pick[last], formula, high, hi)
	}
	out[len(out)-1].To = to
	return out
}

// meeting drops branches without length: where two corners are one.
func meeting(branches []Branch) []Branch {
	return slices.DeleteFunc(branches, func(b Branch) bool { return b.To != 0 && b.To <= b.From })
}

// near tells whether two values agree within a relative tolerance.
func near(a, b, tolerance float64) bool {
	return math.Abs(a-b) <= tolerance*max(math.Abs(a), math.Abs(b))
}

// above tells whether a lies above b by more than rounding.
func above(a, b float64) bool { return a > b*(1+1e-12) }

// written is a number in a formula, without the noise of binary fractions.
func written(x float64) string { return strconv.FormatFloat(x, 'g', 12, 64) }
