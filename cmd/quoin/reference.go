package main

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"quoin/calc/document"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/document/live"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/calc/standard"
	"quoin/render/page"
)

// topic is a page of the reference: a block kind, or another part of the
// language. It is made from the code, so that it cannot fall behind.
type topic struct {
	Name     string    `json:"name"`
	Doc      string    `json:"doc"` // one line
	Form     string    `json:"form,omitempty"`
	Sections []section `json:"sections"`
}

// section is a list of what belongs together.
type section struct {
	Title string   `json:"title"`
	Intro string   `json:"intro,omitempty"`
	Heads []string `json:"-"` // of the columns on the page: name, type, doc
	Rows  []row    `json:"rows"`
}

// row explains one word.
type row struct {
	Name  string `json:"name"`
	Depth int    `json:"depth,omitempty"` // 1 stands below the row before
	Type  string `json:"type,omitempty"`
	Doc   string `json:"doc"`
}

// topics is the whole reference: the kinds first.
func topics() []topic {
	out := []topic{formulaTopic()}
	for _, k := range block.Kinds {
		out = append(out, kindTopic(k))
	}
	return append(out, everyBlockTopic(), frontTopic(), proseTopic(), officeTopic(), unitsTopic())
}

// kinds is how many of the topics are block kinds.
func kinds() int { return 1 + len(block.Kinds) }

func lookupTopic(name string) (topic, bool) {
	all := topics()
	i := slices.IndexFunc(all, func(t topic) bool { return strings.EqualFold(t.Name, name) })
	if i < 0 {
		return topic{}, false
	}
	return all[i], true
}

func topicNames() (out []string) {
	for _, t := range topics() {
		out = append(out, t.Name)
	}
	return out
}

// kindTopic is the reference of a block kind.
func kindTopic(k block.Kind) topic {
	t := topic{Name: k.Name, Doc: k.Doc, Form: "```calc " + k.Name + " NAME"}
	if k.Nameless {
		t.Form = "```calc " + k.Name
	}
	body := k.New()
	t.Sections = []section{{Title: refFields, Heads: headsFields, Rows: fieldRows(field.Rows(body, block.Common(body)))}}
	if k.Name == "target" {
		t.Sections = append(t.Sections, basisSections()...)
	}
	var values []row
	for _, e := range k.Exports {
		values = append(values, row{Name: e.Name, Type: inUnit(e.Unit), Doc: e.Doc})
	}
	if len(values) > 0 {
		t.Sections = append(t.Sections, section{Title: refValues, Heads: headsValues, Rows: values})
	}
	var functions []row
	for _, f := range k.Functions {
		functions = append(functions, row{Name: f.Usage, Type: f.Unit.Dim.Name(), Doc: f.Doc})
	}
	if len(functions) > 0 {
		t.Sections = append(t.Sections, section{Title: refFunctions, Heads: headsValues, Rows: functions})
	}
	return t
}

// inUnit is the kind of quantity that an SI unit measures.
func inUnit(text string) string {
	if text == block.AsAsked {
		return text
	}
	u, err := quantity.ParseUnit(text)
	if err != nil {
		panic("quoin: an exported value in " + text)
	}
	return u.Dim.Name()
}

func fieldRows(list []field.Row) (out []row) {
	for _, l := range list {
		kind := l.Type(makers)
		if b := l.Bounds(); b != "" {
			kind += "; " + b
		}
		switch {
		case l.Need:
			kind += "; needed"
		case l.Default != "":
			kind += "; " + l.Default + " if not given"
		}
		out = append(out, row{Name: l.Name, Depth: l.Depth, Type: kind, Doc: l.Doc})
	}
	return out
}

// makers are the kinds whose blocks make a product.
func makers(product string) (out []string) {
	for _, k := range block.Kinds {
		if k.Makes == product {
			out = append(out, k.Name)
		}
	}
	return out
}

// basisSections is what each standard takes.
func basisSections() (out []section) {
	for _, s := range standard.Standards {
		if len(s.Spectra) == 0 {
			continue // a table: its fields are among the block's own
		}
		sec := section{Title: s.Basis, Intro: s.Doc, Heads: headsFields}
		sec.Rows = append(sec.Rows, row{Name: "spectrum", Type: "one of " + strings.Join(s.Spectra, ", ") + "; " + s.Spectra[0] + " if not given", Doc: refSpectrum})
		for _, p := range s.Parameters {
			kind := p.Dim.Name()
			switch {
			case len(p.Choices) > 0:
				kind = "one of " + strings.Join(p.Choices, ", ")
			case p.Kind == standard.Text:
				kind = "a text"
			case p.Kind == standard.Numbers:
				kind = "a column: " + kind
			}
			if p.Required {
				kind += "; needed"
			}
			sec.Rows = append(sec.Rows, row{Name: p.Symbol, Type: kind, Doc: p.Doc})
		}
		out = append(out, sec)
	}
	return out
}

func everyBlockTopic() topic {
	return topic{Name: "every-block", Doc: refEvery, Form: "```calc KIND NAME",
		Sections: []section{{Title: refFields, Heads: headsFields, Rows: fieldRows(field.Rows(block.Common(block.Kinds[0].New()), nil))}}}
}

func frontTopic() topic {
	return topic{Name: "front-matter", Doc: refFront, Form: "---",
		Sections: []section{{Title: refFields, Heads: headsFields, Rows: fieldRows(document.FrontMatter())}}}
}

func formulaTopic() topic {
	t := topic{Name: block.Formula, Doc: refFormula, Form: "```calc formula", Sections: []section{
		{Title: refLines, Heads: headsForms, Rows: formulaLines},
		{Title: refOperators, Intro: refBinding, Heads: headsForms, Rows: formulaOperators},
	}}
	var functions []row
	for _, f := range formula.Functions() {
		functions = append(functions, row{Name: f.Form, Doc: f.Text})
	}
	t.Sections = append(t.Sections, section{Title: refFunctions, Heads: headsForms, Rows: functions})
	return t
}

func proseTopic() topic {
	var rows []row
	for _, f := range live.Functions() {
		rows = append(rows, row{Name: f.Usage, Doc: f.Text})
	}
	return topic{Name: "prose", Doc: refProse, Form: "{{ .NAME }}", Sections: []section{{Title: refFunctions, Heads: headsForms, Rows: rows}, {Title: refRefers, Heads: headsForms, Rows: refers}}}
}

// officeTopic is what the folder of an office holds, and what its templates have.
func officeTopic() topic {
	words := func(list []exhibit.Wording) (out []row) {
		for _, w := range list {
			out = append(out, row{Name: w.Key, Type: w.Text, Doc: w.Doc})
		}
		return out
	}
	t := topic{Name: "office", Doc: refOffice, Form: "office: FOLDER", Sections: []section{
		{Title: refOfficeFiles, Heads: headsForms, Rows: officeFiles},
		{Title: "office.yaml", Heads: headsFields, Rows: fieldRows(document.OfficeFields())},
		{Title: "palette.yaml", Intro: refPalette, Heads: headsOwn, Rows: words(exhibit.Colours)},
		{Title: "wording.yaml", Intro: refWording, Heads: headsOwn, Rows: words(exhibit.Words)},
	}}
	for _, d := range page.OfficeData() {
		sec := section{Title: d.File, Intro: d.Doc, Heads: headsForms}
		for _, f := range d.Fields {
			sec.Rows = append(sec.Rows, row{Name: "{{." + f.Name + "}}", Doc: f.Doc})
		}
		t.Sections = append(t.Sections, sec)
	}
	var places, functions, styles []row
	for _, p := range page.Parts {
		places = append(places, row{Name: fmt.Sprintf("{{part %q}}", p[0]), Doc: p[1]})
	}
	for _, f := range page.OwnFunctions {
		functions = append(functions, row{Name: f.Usage, Doc: f.Doc})
	}
	for _, p := range page.Properties {
		styles = append(styles, row{Name: p.Names, Doc: p.Doc})
	}
	elements := "elements: " + strings.Join(page.Elements(), ", ") + "; attributes: style, src and alt of a picture, scope and colspan of cells; the rows of a <table> stand in <tbody>, those of its head in <thead>"
	return topic{Name: t.Name, Doc: t.Doc, Form: t.Form, Sections: append(t.Sections,
		section{Title: refParts, Intro: refPartsIntro, Heads: headsForms, Rows: places},
		section{Title: refFunctions, Heads: headsForms, Rows: functions},
		section{Title: refStyles, Intro: elements, Heads: headsForms, Rows: styles})}
}

// unitsTopic lists the units by what they measure, the small before the large.
func unitsTopic() topic {
	t := topic{Name: "units", Doc: refUnits, Form: "3 kN*m, 2 cm/s^2"}
	dims := []quantity.Dim{quantity.Length, quantity.Mass, quantity.Time, quantity.PerTime, quantity.Force, quantity.Pressure, quantity.Acceleration, quantity.None}
	for _, d := range dims {
		sec := section{Title: d.Name(), Heads: headsUnits}
		var units []quantity.Unit
		for _, symbol := range quantity.Symbols() {
			if u := quantity.MustUnit(symbol); u.Dim.Is(d) {
				units = append(units, u)
			}
		}
		slices.SortStableFunc(units, func(a, b quantity.Unit) int { return cmp.Compare(a.Scale, b.Scale) })
		for _, u := range units {
			sec.Rows = append(sec.Rows, row{Name: u.Text, Doc: strings.TrimSpace(fmt.Sprintf("%.15g %s", u.Scale, quantity.SIUnit(d).Pretty()))})
		}
		t.Sections = append(t.Sections, sec)
	}
	return t
}
