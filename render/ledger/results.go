package ledger

import (
	"cmp"
	"encoding/json"
	"fmt"
	"slices"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// Value is a row of "values" in results.json. Value is a float64, a []float64
// or a [][]float64, in the SI unit Unit ("" for a pure number). File is set
// where the value does not come from the main file.
type Value struct {
	ID    string `json:"id"`
	Value any    `json:"value"`
	Unit  string `json:"unit"`
	Line  int    `json:"line"`
	File  string `json:"file,omitempty"`
}

// Series is a row of "series": y over x, of equal length.
type Series struct {
	ID string `json:"id"`
	X  Axis   `json:"x"`
	Y  Axis   `json:"y"`
}

// Axis is one side of a series, in the SI unit Unit.
type Axis struct {
	Unit   string    `json:"unit"`
	Values []float64 `json:"values"`
}

// Check is a row of "checks". Demand, Limit and Tolerance (of a check of
// equality only) are in the SI unit Unit. Ratio is nil where the limit is zero
// or negative.
type Check struct {
	ID        string   `json:"id"`
	Demand    float64  `json:"demand"`
	Limit     float64  `json:"limit"`
	Tolerance *float64 `json:"tolerance,omitempty"`
	Unit      string   `json:"unit"`
	Relation  string   `json:"relation"`
	Ratio     *float64 `json:"ratio"`
	OK        bool     `json:"ok"`
	Line      int      `json:"line"`
	File      string   `json:"file,omitempty"`
}

// Warning is a row of "warnings".
type Warning struct {
	Code string `json:"code"`
	Text string `json:"text"`
	Line int    `json:"line"`
	File string `json:"file,omitempty"`
}

// packageFacts is the "package" member.
type packageFacts struct {
	Number     string             `json:"number"`
	Title      string             `json:"title"`
	Project    string             `json:"project"`
	Revision   string             `json:"revision"`
	Date       string             `json:"date"`
	Status     string             `json:"status"`
	Units      quantity.System    `json:"units"`
	Source     string             `json:"source"`
	Commit     string             `json:"commit"`
	CommitDate string             `json:"commit_date"`
	Dirty      bool               `json:"dirty"`
	Overrides  []exhibit.Override `json:"overrides"`
}

// toolFacts is the "tool" member.
type toolFacts struct {
	Name    string `json:"name"`
	Version string `json:"version"`
}

// tool splits "quoin 0.1.0".
func tool(text string) toolFacts {
	name, version, _ := strings.Cut(text, " ")
	return toolFacts{name, version}
}

// Results is results.json: every value, series, check and warning of the
// package in SI units, each list sorted by id. It fails on a number that is not
// finite, on an id used twice, and on a value whose shape does not fit.
func Results(p *exhibit.Package) ([]byte, error) {
	main := p.Provenance.Source
	values, err := valueRows(p.Values, main)
	if err != nil {
		return nil, err
	}
	series, err := seriesRows(p.Series)
	if err != nil {
		return nil, err
	}
	checks, err := Checks(p.Checks, main)
	if err != nil {
		return nil, err
	}

	var o object
	o.member("schema", must(Schema))
	o.member("package", must(facts(p)))
	o.member("tool", must(tool(p.Provenance.Tool)))
	if f := p.Frozen; f != nil {
		o.member("frozen", must(frozenFacts{f.File, f.Revision, f.Current, f.Agrees(), len(f.Moved)}))
	}
	for _, list := range []struct {
		name string
		rows func() ([]byte, error)
	}{
		{"values", func() ([]byte, error) { return lines(values) }},
		{"series", func() ([]byte, error) { return lines(series) }},
		{"checks", func() ([]byte, error) { return lines(checks) }},
		{"warnings", func() ([]byte, error) { return lines(warningRows(p.Warnings, main)) }},
	} {
		text, err := list.rows()
		if err != nil {
			return nil, err
		}
		o.member(list.name, text)
	}
	return o.bytes(), nil
}

func facts(p *exhibit.Package) packageFacts {
	f := packageFacts{
		Number: p.Meta.Number, Title: p.Meta.Title, Project: p.Meta.Project, Status: p.Meta.Status, Units: p.System,
		Source: p.Provenance.Source, Commit: p.Provenance.Commit, CommitDate: p.Provenance.CommitDate, Dirty: p.Provenance.Dirty,
		Overrides: append([]exhibit.Override{}, p.Provenance.Overrides...),
	}
	if n := len(p.Meta.Revision); n > 0 {
		f.Revision, f.Date = p.Meta.Revision[n-1].Rev, p.Meta.Revision[n-1].Date
	}
	return f
}

// elsewhere names a file only where it is not the main one.
func elsewhere(file, main string) string {
	if file == main {
		return ""
	}
	return file
}

func valueRows(entries []exhibit.Entry, main string) ([]Value, error) {
	out := make([]Value, 0, len(entries))
	for _, e := range entries {
		v, err := plain("value "+e.ID, e.Value)
		if err != nil {
			return nil, err
		}
		out = append(out, Value{e.ID, v, quantity.SIUnit(e.Value.Dim).Text, e.Place.Line, elsewhere(e.Place.File, main)})
	}
	return sorted("value", out, func(v Value) string { return v.ID })
}

// plain is a value as nested lists.
func plain(what string, v quantity.Value) (any, error) {
	si := make([]float64, len(v.SI))
	for i, x := range v.SI {
		var err error
		if si[i], err = finite(what, x); err != nil {
			return nil, err
		}
	}
	switch v.Shape {
	case quantity.Number:
		if len(si) == 1 {
			return si[0], nil
		}
	case quantity.Vector:
		return si, nil
	case quantity.Rows:
		if v.Width > 0 && len(si)%v.Width == 0 {
			rows := make([][]float64, 0, len(si)/v.Width)
			for row := range slices.Chunk(si, v.Width) {
				rows = append(rows, row)
			}
			return rows, nil
		}
		if len(si) == 0 {
			return [][]float64{}, nil
		}
	}
	return nil, fmt.Errorf("ledger: %s: %d numbers do not make a %q of width %d", what, len(si), v.Shape, v.Width)
}

func seriesRows(curves []exhibit.Curve) ([]Series, error) {
	out := make([]Series, 0, len(curves))
	for _, c := range curves {
		if len(c.X.SI) != len(c.Y.SI) {
			return nil, fmt.Errorf("ledger: series %s: %d values of x and %d of y", c.ID, len(c.X.SI), len(c.Y.SI))
		}
		x, err := axis("series "+c.ID, c.X)
		if err != nil {
			return nil, err
		}
		y, err := axis("series "+c.ID, c.Y)
		if err != nil {
			return nil, err
		}
		out = append(out, Series{c.ID, x, y})
	}
	return sorted("series", out, func(s Series) string { return s.ID })
}

func axis(what string, v quantity.Value) (Axis, error) {
	v.Shape = quantity.Vector
	list, err := plain(what, v)
	if err != nil {
		return Axis{}, err
	}
	return Axis{quantity.SIUnit(v.Dim).Text, list.([]float64)}, nil
}

// Checks is the rows of "checks" for the checks of a package whose main file is
// main, sorted by id; a check written twice gives two rows, in order of place.
func Checks(checks []exhibit.Check, main string) ([]Check, error) {
	out := make([]Check, 0, len(checks))
	for _, c := range checks {
		what := "check " + c.ID
		row := Check{ID: c.ID, Unit: quantity.SIUnit(c.Demand.Unit.Dim).Text, Relation: c.Relation, OK: c.OK,
			Line: c.Place.Line, File: elsewhere(c.Place.File, main)}
		var err error
		if row.Demand, err = finite(what, c.Demand.Value); err != nil {
			return nil, err
		}
		if row.Limit, err = finite(what, c.Limit.Value); err != nil {
			return nil, err
		}
		if c.Ratio != nil {
			r, err := finite(what, *c.Ratio)
			if err != nil {
				return nil, err
			}
			row.Ratio = &r
		}
		if c.Tolerance != nil {
			t, err := finite(what, c.Tolerance.Value)
			if err != nil {
				return nil, err
			}
			row.Tolerance = &t
		}
		out = append(out, row)
	}
	slices.SortStableFunc(out, func(a, b Check) int {
		return cmp.Or(cmp.Compare(a.ID, b.ID), cmp.Compare(a.File, b.File), cmp.Compare(a.Line, b.Line))
	})
	return out, nil
}

func warningRows(list diag.List, main string) []Warning {
	out := make([]Warning, 0, len(list))
	for _, d := range list {
		out = append(out, Warning{d.Code, d.Summary, d.Range.Line, elsewhere(d.Range.File, main)})
	}
	return out
}

// sorted puts rows in order of id and refuses an id used twice.
func sorted[T any](what string, rows []T, id func(T) string) ([]T, error) {
	slices.SortStableFunc(rows, func(a, b T) int { return cmp.Compare(id(a), id(b)) })
	for i := 1; i < len(rows); i++ {
		if id(rows[i]) == id(rows[i-1]) {
			return nil, fmt.Errorf("ledger: two of the %s rows have the id %s", what, id(rows[i]))
		}
	}
	return rows, nil
}

// Curves are the series of a results.json, by id.
func Curves(results []byte) (map[string]exhibit.Curve, error) {
	var r struct {
		Series []Series `json:"series"`
	}
	if err := json.Unmarshal(results, &r); err != nil {
		return nil, fmt.Errorf("results.json cannot be read: %w", err)
	}
	out := map[string]exhibit.Curve{}
	for _, s := range r.Series {
		if len(s.X.Values) != len(s.Y.Values) {
			return nil, fmt.Errorf("results.json: the series %s has unequal sides", s.ID)
		}
		side := func(a Axis) (quantity.Value, error) {
			v := quantity.Value{SI: a.Values, Shape: quantity.Vector}
			if a.Unit != "" {
				u, err := quantity.ParseUnit(a.Unit)
				if err != nil {
					return v, err
				}
				v.Dim = u.Dim
			}
			return v, nil
		}
		x, err := side(s.X)
		if err != nil {
			return nil, err
		}
		y, err := side(s.Y)
		if err != nil {
			return nil, err
		}
		out[s.ID] = exhibit.Curve{ID: s.ID, X: x, Y: y}
	}
	return out, nil
}
