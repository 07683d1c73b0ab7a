package page

import (
	"strconv"
	"strings"

	"quoin/calc/exhibit"
)

// notGiven stands where a fact of a record is missing: never a blank.
const notGiven = "not given"

// motionView is a record in the register of records: what it is, and what was made
// of it.
type motionView struct {
	Name, Anchor string
	Facts        []motionFact
}

type motionFact struct {
	Label, Text string
	Missing     bool
	ID          string // of the value shown
	Wide        bool
}

// motions is the register of records, one after the other.
func (b *book) motions() []item {
	var out []item
	for _, m := range b.p.Motions {
		v := motionView{Name: m.Name, Anchor: m.Anchor, Facts: motionFacts(m)}
		high := 9.0
		used := 0
		for _, f := range v.Facts {
			switch {
			case f.Wide:
				high += 1.2 + 4.5*lines(f.Label+f.Text, 98)
				used = 0
			default:
				if used%3 == 0 {
					high += 5.7 * lines(f.Label+f.Text, 34)
				}
				used++
			}
		}
		out = append(out, item{name: "motion", data: v, high: high})
	}
	return out
}

// motionFacts is every fact of one component that a reviewer asks for.
func motionFacts(m exhibit.Motion) (out []motionFact) {
	text := func(label, s string) {
		s = clip(strings.TrimSpace(s), 600)
		out = append(out, motionFact{Label: label, Text: or(s, notGiven), Missing: s == ""})
	}
	number := func(label string, n *exhibit.Number, after string) {
		f := motionFact{Label: label, Text: notGiven, Missing: n == nil}
		if n != nil {
			f.Text, f.ID = numbersText([]exhibit.Number{*n})+after, n.ID
		}
		out = append(out, f)
	}
	of := func(label string, n exhibit.Number) { number(label, &n, "") }
	wide := func(label, s string) {
		text(label, s)
		out[len(out)-1].Wide = true
	}
	form := m.File == ""
	if !form {
		text("event", m.Event)
		text("date", m.Date)
		text("magnitude", m.Magnitude)
		text("mechanism", m.Mechanism)
		text("station", m.Station)
		text("component", m.Component)
		number("azimuth", m.Azimuth, "°")
		is := ""
		if m.Distance != nil {
			is = " (" + or(m.DistanceIs, "to what: not given") + ")"
		}
		number("distance", m.Distance, is)
		is = ""
		if m.Vs30 != nil {
			is = " (" + or(m.Vs30Is, "measured or inferred: not given") + ")"
		}
		number("Vs30", m.Vs30, is)
	}
	of("step", m.Step)
	text("samples", samplesText(m))
	of("duration", m.Duration)
	if !form {
		text("unit in file", m.UnitInFile)
		of("PGA as recorded", m.FilePGA)
	}
	of("PGA as used", m.PGA)
	of("PGV", m.PGV)
	of("PGD", m.PGD)
	of("Arias intensity", m.Arias)
	of("duration, 5 to 95 %", m.D5to95)
	of("scale", m.Scale)
	number("usable from", m.ShortestPeriod, "")
	number("usable to", m.LongestPeriod, "")
	if form {
		wide("form", m.Format)
	} else {
		wide("processing of the agency", m.FileProcessing)
	}
	wide("processing here", or(strings.Join(m.Processing, "; "), "none"))
	if !form {
		wide("source", m.Source)
		wide("file", m.File+", format "+or(m.Format, notGiven)+"; its SHA-256 stands in the register of inputs")
	}
	return out
}

func samplesText(m exhibit.Motion) string {
	s := strconv.Itoa(m.Samples)
	if m.FileSamples != m.Samples {
		s += ", " + strconv.Itoa(m.FileSamples) + " read"
	}
	return s
}
