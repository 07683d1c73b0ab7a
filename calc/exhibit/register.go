package exhibit

import (
	"quoin/calc/cite"
	"quoin/calc/expr"
)

// Criterion is a line of the design criteria: what a calculation is held to.
type Criterion struct {
	Group  string     `json:"group"` // one of CriteriaGroups
	Label  string     `json:"label"` // in words; it tells a criterion apart within its group
	Symbol *expr.Node `json:"symbol,omitempty"`
	Value  Cell       `json:"value"`
	Open   bool       `json:"open,omitempty"` // the value says what is missing
	Blocks []Origin   `json:"blocks"`         // that state it
}

// CriteriaGroups are the groups of criteria, in the order of the cover.
var CriteriaGroups = []string{"site and spectrum", "system and factors", "procedure"}

// Origin is a block that something comes from.
type Origin struct {
	Name   string `json:"name"`
	Anchor string `json:"anchor"`
}

// Given is what a block or a formula block takes from outside the document, and
// where it was taken from.
type Given struct {
	Origin
	Kind    string       `json:"kind"`
	Place   Place        `json:"place"`
	Rows    []GivenValue `json:"rows"`
	Sources []Source     `json:"sources"` // of all rows; none: each row has its own, or there is no source
}

// GivenValue is one value of a Given.
type GivenValue struct {
	Label  string     `json:"label"`
	Symbol *expr.Node `json:"symbol,omitempty"`
	Value  Cell       `json:"value"`
	ID     string     `json:"id,omitempty"` // in the registry
	Source *Source    `json:"source,omitempty"`
	Place  Place      `json:"place"`
	Anchor string     `json:"anchor,omitempty"` // of the row, where the value stands nowhere else
}

// Source is where an input was taken from: a reference, or words.
type Source struct {
	Ref  *cite.Ref `json:"ref,omitempty"`
	Text string    `json:"text,omitempty"`
}

// Missing are the values of inputs that name no source.
func Missing(all []Given) int {
	n := 0
	for _, g := range all {
		for _, r := range g.Rows {
			if len(g.Sources) == 0 && r.Source == nil {
				n++
			}
		}
	}
	return n
}

// Motion is a ground motion as it was recorded and as it is used. Texts that are
// empty and numbers that are nil were not given.
type Motion struct {
	Origin
	Event, Date, Mechanism, Magnitude     string
	Station, Component                    string
	Distance, Vs30, Azimuth               *Number
	DistanceIs, Vs30Is                    string
	File, Format, UnitInFile              string
	Source                                string
	FileSamples, Samples                  int
	Step, Duration                        Number
	FilePGA, PGA, PGV, PGD, Arias, D5to95 Number // FilePGA: before any step taken here
	Scale                                 Number
	FileProcessing                        string   // by the agency, as the file says
	Processing                            []string // taken here, in order
	ShortestPeriod, LongestPeriod         *Number
}

// Software is the program that computed the package, and what stands behind it.
type Software struct {
	Build
	Kinds []Method `json:"kinds"` // block kinds used
}

// Method is a block kind that the package uses, with the evidence behind it.
type Method struct {
	Kind   string   `json:"kind"`
	Blocks []Origin `json:"blocks"`
	Cases  int      `json:"cases"` // published cases of its engines
	Values int      `json:"values"`
	Read   int      `json:"read"` // cases whose source was read; the others are from memory or computed from a formula
	Limits string   `json:"limits"`
}

// Comment is a comment on the calculation and the response to it.
type Comment struct {
	ID       string `json:"id"`
	By       string `json:"by"`
	Date     string `json:"date,omitempty"`
	Text     string `json:"text"`
	Response string `json:"response,omitempty"`
	Where    string `json:"where,omitempty"` // as written
	Status   string `json:"status"`          // open, answered or closed
	Anchor   string `json:"anchor"`
	Place    Place  `json:"place"`
}

// Checking is the record of one who checked.
type Checking struct {
	By        string `json:"by"`
	Date      string `json:"date"`
	Scope     string `json:"scope"`
	Method    string `json:"method"`
	Values    int    `json:"values"`    // computed by the checker
	Differing int    `json:"differing"` // by more than the tolerance
	Anchor    string `json:"anchor"`
}

// OpenComments are those that are not closed.
func OpenComments(list []Comment) (out []Comment) {
	for _, c := range list {
		if c.Status != "closed" {
			out = append(out, c)
		}
	}
	return out
}
