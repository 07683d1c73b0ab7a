package standard

import (
	"fmt"
	"slices"

	"quoin/calc/cite"
	"quoin/calc/quantity"
)

// asce722 is the design spectrum of ASCE/SEI 7-22: multi-period (11.4.5.1) where
// the ordinates of the site are given, else two-period (11.4.5.2). MCE_R is 1.5
// times the design spectrum (11.4.6).
var asce722 = Standard{
	Basis:      "ASCE/SEI 7-22",
	Doc:        "design spectrum of 11.4.5: multi-period from the 22 ordinates of the site, or two-period from S_MS, S_M1 or S_DS, S_D1, and T_L; 5 % damping",
	Ref:        cite.To("ASCE/SEI 7-22", "11.4.5"),
	Spectra:    []string{"design", "MCE_R"},
	Parameters: params722,
	Derived:    derived722,
	Gaps: map[string]string{
		"spectrum: vertical":       vertical722,
		"spectrum: MCE_R vertical": vertical722,
	},
	Fixed: "chapter 11 of ASCE/SEI 7-22 gives spectra at 5 % and no rule for another ratio",
	build: build722,
}

const vertical722 = "the vertical spectrum of ASCE/SEI 7-22 11.9 is not here: its coefficients changed from those of 7-16 and could not be confirmed; read it from a table"

// sites722 are the site classes of ASCE/SEI 7-22 Table 20.2-1, each with the
// range of its shear wave velocity, ft/s; E has no lower limit, A no upper one.
var sites722 = []struct {
	class    string
	from, to float64
}{{"A", 5000, 0}, {"B", 3000, 5000}, {"BC", 2100, 3000}, {"C", 1450, 2100}, {"CD", 1000, 1450}, {"D", 700, 1000}, {"DE", 500, 700}, {"E", 0, 500}}

const foot = 0.3048 // m

// siteOf722 is the site class of a shear wave velocity, m/s; a velocity on a limit is
// of the softer class.
func siteOf722(v float64) string {
	for _, s := range sites722 {
		if above(v, s.from*foot) {
			return s.class
		}
	}
	return "E"
}

var params722 = []ParameterDoc{
	{Symbol: "S_S", Kind: Number, Doc: "mapped MCE_R acceleration at short periods, in g (for the design category)", Zero: true, Ref: of722("11.4.2")},
	{Symbol: "S_1", Kind: Number, Doc: "mapped MCE_R acceleration at 1 s, in g (for the design category and base shear)", Zero: true, Ref: of722("11.4.2")},
	{Symbol: "site", Kind: Text, Doc: "site class that the values hold for", Ref: of722("Table 20.2-1"),
		Choices: []string{"A", "B", "BC", "C", "CD", "D", "DE", "E", "F", "default"}},
	{Symbol: "vs30", Kind: Number, Dim: quantity.Velocity, Unit: "m/s", Doc: "mean shear wave velocity of the upper 30 m, in place of or beside the site class", Ref: of722("20.4")},
	{Symbol: "risk", Kind: Text, Doc: "risk category", Choices: riskCategories, Ref: of722("Table 1.5-1")},
	{Symbol: "ordinates_of", Kind: Text, Doc: "which spectrum the ordinates are of", Choices: []string{"MCE_R", "design"}, Ref: of722("11.4.5.1")},
	{Symbol: "T", Kind: Numbers, Dim: quantity.Time, Unit: "s", Doc: "the 22 periods of the multi-period spectrum", Zero: true, Ref: of722("11.4.5.1")},
	{Symbol: "PSA", Kind: Numbers, Dim: quantity.Acceleration, Unit: "g", Doc: "its ordinates", Ref: of722("11.4.5.1")},
	{Symbol: "S_MS", Kind: Number, Doc: "MCE_R acceleration at short periods, in g, for the site class", Ref: of722("11.4.4")},
	{Symbol: "S_M1", Kind: Number, Doc: "MCE_R acceleration at 1 s, in g, for the site class", Ref: of722("11.4.4")},
	{Symbol: "S_DS", Kind: Number, Doc: "design acceleration at short periods, in g", Ref: of722("Eq. 11.4-1")},
	{Symbol: "S_D1", Kind: Number, Doc: "design acceleration at 1 s, in g", Ref: of722("Eq. 11.4-2")},
	{Symbol: "T_L", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "long-period transition period", Required: true, Ref: of722("11.4.5")},
}

var derived722 = append([]ParameterDoc{
	{Symbol: "T_0", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "start of the plateau", Ref: of722("11.4.5.2")},
	{Symbol: "T_S", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "end of the plateau", Ref: of722("11.4.5.2")},
}, riskDocs("ASCE/SEI 7-22")...)

func of722(clause string) cite.Ref { return cite.To("ASCE/SEI 7-22", clause) }

func build722(in Given) (*Target, error) {
	var p problems
	t := &Target{Basis: "ASCE/SEI 7-22", Spectrum: "design", Symbol: "S_a", Damping: 0.05}
	factor, times := 1.0, ""
	if in.Texts["spectrum"] == "MCE_R" {
		t.Spectrum, t.Symbol, factor, times = "MCE_R", "S_aM", 1.5, "1.5 * "
	}
	all := map[string]found{}
	window := siteWindow(in, &p)
	t.MultiPeriod = in.Columns["T"] != nil || in.Columns["PSA"] != nil
	var sa []float64
	if t.MultiPeriod {
		sa = ordinates722(in, &p)
		if len(p.all) == 0 {
			window.parameters(in, sa, all, &p)
		}
	} else {
		if _, ok := in.Texts["ordinates_of"]; ok {
			p.fail("ordinates_of", "give the file of ordinates, or leave this field away", "there are no ordinates")
		}
		for _, x := range [][2]string{{"S_MS", "S_DS"}, {"S_M1", "S_D1"}} {
			m, d, ok := in.pair(&p, x[0], x[1])
			if !ok {
				p.fail(x[1], "", "is missing: give %s or %s, or the ordinates of the multi-period spectrum", x[1], x[0])
			}
			all[x[0]], all[x[1]] = m, d
		}
	}
	if err := p.err(); err != nil {
		return nil, err
	}
	t0, ts := cornersOf(all)
	tl, sds, sd1 := in.Numbers["T_L"], all["S_DS"].value, all["S_D1"].value
	if t.MultiPeriod {
		t.Branches = multiPeriod(sa, tl, factor)
		if tl > 10 {
			t.Corners = []Corner{{"T_L", tl}}
		}
	} else {
		late(&p, in, ts)
		clause := of722("11.4.5.2")
		t.Branches = twoPeriod(sds, sd1, tl, factor, times, [4]cite.Ref{clause, clause, clause, clause})
		t.Corners = []Corner{{"T_0", t0}, {"T_S", ts}, {"T_L", tl}}
	}
	t.Warnings = slices.Concat(warn722(in, t.MultiPeriod), large(sds, sd1), falling(in, all), byRisk(in, all, t.Basis))
	if t.MultiPeriod {
		t.Notes = []string{"The maxima behind S_DS and S_D1 are those at the 22 periods, not between them."}
	}
	t.Notes = append(t.Notes, reliefNote(in)...)
	t.Parameters = register(slices.Concat(params722, derived722), in, all)
	return t, p.err()
}

func warn722(in Given, multi bool) []Warning {
	var all []Warning
	if !multi {
		all = append(all, Warning{
			Code: "two-period",
			Text: "this is the two-period spectrum; methods of analysis other than the equivalent lateral force procedure take the multi-period spectrum of the site",
			Ref:  cite.To("ASCE/SEI article on 7-22 ground motions", ""),
		})
	} else if tl := in.Numbers["T_L"]; tl < 10 {
		all = append(all, Warning{"long-period", fmt.Sprintf("T_L = %s s lies below 10 s: beyond 10 s the ordinates fall with (10 s/T)² from the last one, without the step down that 10 T_L/T² would make there", quantity.Short(tl)), of722("11.4.5.1")})
	}
	if in.Texts["site"] == "F" {
		all = append(all, Warning{"site-class-f", "site class F needs a site-specific ground motion procedure", of722("11.4.7")})
	}
	return all
}
