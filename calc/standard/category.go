package standard

import (
	"fmt"
	"slices"

	"quoin/calc/cite"
)

var riskCategories = []string{"I", "II", "III", "IV"}

// Importance is the importance factor of a risk category, ASCE/SEI 7 Table 1.5-2.
func Importance(category string) (ie float64, ok bool) {
	ie, ok = importance[category]
	return ie, ok
}

// Importance is the risk category (ASCE/SEI 7) or the importance class (EN 1998-1)
// that a target states, "I" to "IV"; "" where it states none.
func (t *Target) Importance() string {
	for _, symbol := range []string{"risk", "importance"} {
		if p, ok := t.Parameter(symbol); ok {
			return p.Text
		}
	}
	return ""
}

// importance is I_e of ASCE/SEI 7 Table 1.5-2, by risk category.
var importance = map[string]float64{"I": 1, "II": 1, "III": 1.25, "IV": 1.5}

// categoryRow holds values of S_DS and S_D1 below which a category stands, in
// Tables 11.6-1 and 11.6-2 of ASCE/SEI 7.
type categoryRow struct {
	sds, sd1 float64
	usual    string // risk categories I to III
	four     string // risk category IV
}

var categoryRows = []categoryRow{
	{0.167, 0.067, "A", "A"},
	{0.33, 0.133, "B", "C"},
	{0.50, 0.20, "C", "D"},
}

// designCategory is the seismic design category of ASCE/SEI 7-16 and 7-22 11.6,
// the worse of the two tables, and what its reader must know. S_S and S_1 may be
// missing.
//
//	S_S <= 0.15 and S_1 <= 0.04    A (11.4)
//	S_1 >= 0.75                    E in risk categories I to III, F in IV
//	else                           Tables 11.6-1 and 11.6-2
//
// The relief of 11.6 for short periods (Table 11.6-1 alone) is not taken.
func designCategory(in Given, sds, sd1 float64, edition string) (found, []Warning) {
	risk := in.Texts["risk"]
	ss, hasSS := in.number("S_S")
	s1, hasS1 := in.number("S_1")
	to := func(clause string) cite.Ref { return cite.To(edition, clause) }
	if hasSS && hasS1 && ss <= 0.15 && s1 <= 0.04 {
		return found{text: "A", doc: "seismic design category: S_S ≤ 0.15 and S_1 ≤ 0.04", ref: to("11.4")}, nil
	}
	if hasS1 && s1 >= 0.75 {
		word := map[bool]string{false: "E", true: "F"}[risk == "IV"]
		return found{text: word, doc: "seismic design category: S_1 ≥ 0.75, risk category " + risk, ref: to("11.6")}, nil
	}
	pick := func(below func(categoryRow) bool) string {
		i := slices.IndexFunc(categoryRows, below)
		switch {
		case i < 0:
			return "D"
		case risk == "IV":
			return categoryRows[i].four
		}
		return categoryRows[i].usual
	}
	short := pick(func(r categoryRow) bool { return sds < r.sds })
	long := pick(func(r categoryRow) bool { return sd1 < r.sd1 })
	word := max(short, long)
	out := found{text: word, ref: to("Tables 11.6-1, 11.6-2"),
		doc: fmt.Sprintf("seismic design category: %s by S_DS, %s by S_D1, risk category %s", short, long, risk)}
	if word == "D" && !hasS1 {
		return out, []Warning{{"design-category", "the seismic design category is D by the tables; with S_1 ≥ 0.75 it would be " +
			map[bool]string{false: "E", true: "F"}[risk == "IV"] + ", and S_1 is not stated", to("11.6")}}
	}
	return out, nil
}

// byRisk adds what follows from the risk category, where it is given.
func byRisk(in Given, all map[string]found, edition string) []Warning {
	risk, ok := in.Texts["risk"]
	if !ok {
		return nil
	}
	all["I_e"] = found{value: importance[risk], doc: "importance factor of risk category " + risk}
	category, warnings := designCategory(in, all["S_DS"].value, all["S_D1"].value, edition)
	all["category"] = category
	return warnings
}

// reliefNote says what the design category leaves out.
func reliefNote(in Given) []string {
	if _, ok := in.Texts["risk"]; !ok {
		return nil
	}
	return []string{"The seismic design category is the worse of the two tables; the relief of 11.6 for short periods is not taken."}
}

// riskDocs are the parameters that follow from the risk category.
func riskDocs(edition string) []ParameterDoc {
	return []ParameterDoc{
		{Symbol: "I_e", Kind: Number, Doc: "importance factor, by risk category", Ref: cite.To(edition, "Table 1.5-2")},
		{Symbol: "category", Kind: Text, Doc: "seismic design category", Ref: cite.To(edition, "11.6")},
	}
}
