package page

import (
	"fmt"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// softwareView is the register of software.
type softwareView struct {
	Tool, Units, Built, Modules, Evidence string
	Digits, Longest                       int
}

// software is the program and the evidence behind what it computed.
func (b *book) software() []item {
	p := b.p
	v := softwareView{Tool: or(p.Provenance.Tool, "not named"), Units: "Shown in SI units unless written otherwise", Digits: quantity.Digits, Longest: longest}
	if p.System == quantity.US {
		v.Units = "Shown in US customary units unless written otherwise"
	}
	s := p.Software
	v.Built = s.Architecture
	v.Modules = strings.Join(s.Modules, ", ")
	v.Evidence = evidence(s)
	high := 22 + 5*(lines(v.Evidence, 78)+lines(v.Modules, 78)+1)
	out := []item{{name: "software", data: v, high: high}, {name: "software-rules", data: v, high: 108}}
	return append(out, chunked("methods", headRow, s.Kinds, func(m exhibit.Method) float64 {
		names := 0
		for _, o := range m.Blocks {
			names += len(o.Name) + 5
		}
		return rowHigh(max(lines(m.Limits, 41), lines(strings.Repeat("x", names), 20), 2))
	}, nil)...)
}

// evidence is what was verified, and what was not.
func evidence(s exhibit.Software) string {
	cases := false
	for _, m := range s.Kinds {
		cases = cases || m.Cases > 0
	}
	text := "Every computing block checks itself by an independent calculation and prints the residual with its results. "
	if cases {
		text += "The table below counts the published cases behind each kind of block used here: worked examples, printed tables and closed forms with their published results, which the tests of the program hold (in its source: go test ./...). They were not run again when this package was built. "
	}
	return text + "That these methods, in this version, suit this problem is for the author to state; results are verified by independent means."
}

// evidenced is how many of the cases were read in their source, in words.
func evidenced(m exhibit.Method) string {
	if m.Cases == 0 {
		return "none"
	}
	return fmt.Sprintf("%d cases, %d values; %d read in the source", m.Cases, m.Values, m.Read)
}
