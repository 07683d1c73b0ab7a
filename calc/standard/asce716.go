package standard

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/quantity"
)

// asce716 is the design spectrum of ASCE/SEI 7-16 11.4.6: from S_S, S_1 and the
// site class by Tables 11.4-1 and 11.4-2 (row E with the values of Supplement 1),
// or from S_MS, S_M1 or S_DS, S_D1; MCE_R of 11.4.7 is 1.5 times it. Vertical
// spectra are those of 11.9.
var asce716 = Standard{
	Basis:      "ASCE/SEI 7-16",
	Doc:        "design spectrum of 11.4.6 from S_S, S_1 and site class, or from S_MS, S_M1 or S_DS, S_D1, and T_L; vertical spectrum of 11.9; 5 % damping",
	Ref:        cite.To("ASCE/SEI 7-16", "11.4"),
	Spectra:    []string{"design", "MCE_R", "vertical", "MCE_R vertical"},
	Parameters: params716,
	Derived:    derived716,
	Gaps: map[string]string{
		"site: BC": newClasses, "site: CD": newClasses, "site: DE": newClasses,
	},
	Fixed: "chapter 11 of ASCE/SEI 7-16 gives spectra at 5 % and no rule for another ratio",
	build: build716,
}

const newClasses = "this is a site class of ASCE/SEI 7-22; 7-16 has A to F"

var params716 = []ParameterDoc{
	{Symbol: "S_S", Kind: Number, Doc: "mapped MCE_R acceleration at short periods, in g", Zero: true, Ref: of716("11.4.2")},
	{Symbol: "S_1", Kind: Number, Doc: "mapped MCE_R acceleration at 1 s, in g", Zero: true, Ref: of716("11.4.2")},
	{Symbol: "site", Kind: Text, Doc: "site class; default: not determined, B estimated: rock without measured shear wave velocity", Ref: of716("11.4.3"),
		Choices: []string{"A", "B", "B estimated", "C", "D", "E", "F", "default"}},
	{Symbol: "site_specific", Kind: Text, Doc: "how 11.4.8 is met: a study that the values given come from, an exception, or Supplement 3", Ref: of716("11.4.8"),
		Choices: []string{"study", "exception", "supplement 3"}},
	{Symbol: "risk", Kind: Text, Doc: "risk category", Choices: riskCategories, Ref: of716("Table 1.5-1")},
	{Symbol: "F_a", Kind: Number, Doc: "short-period site coefficient", Ref: of716("Table 11.4-1")},
	{Symbol: "F_v", Kind: Number, Doc: "long-period site coefficient", Ref: of716("Table 11.4-2")},
	{Symbol: "S_MS", Kind: Number, Doc: "MCE_R acceleration at short periods, in g, for the site class", Ref: of716("Eq. 11.4-1")},
	{Symbol: "S_M1", Kind: Number, Doc: "MCE_R acceleration at 1 s, in g, for the site class", Ref: of716("Eq. 11.4-2")},
	{Symbol: "S_DS", Kind: Number, Doc: "design acceleration at short periods, in g", Ref: of716("Eq. 11.4-3")},
	{Symbol: "S_D1", Kind: Number, Doc: "design acceleration at 1 s, in g", Ref: of716("Eq. 11.4-4")},
	{Symbol: "T_L", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "long-period transition period", Required: true, Ref: of716("11.4.6")},
}

var derived716 = append([]ParameterDoc{
	{Symbol: "T_0", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "start of the plateau", Ref: of716("11.4.6")},
	{Symbol: "T_S", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "end of the plateau", Ref: of716("11.4.6")},
	{Symbol: "C_v", Kind: Number, Doc: "vertical coefficient", Ref: of716("Table 11.9-1")},
}, riskDocs("ASCE/SEI 7-16")...)

func of716(clause string) cite.Ref { return cite.To("ASCE/SEI 7-16", clause) }

func build716(in Given) (*Target, error) {
	var p problems
	word := in.Texts["spectrum"]
	t := &Target{Basis: "ASCE/SEI 7-16", Spectrum: "design", Symbol: "S_a", Damping: 0.05, Vertical: strings.HasSuffix(word, "vertical")}
	factor, times := 1.0, ""
	if strings.HasPrefix(word, "MCE_R") {
		t.Symbol, factor, times = "S_aM", 1.5, "1.5 * "
	}
	if word != "" {
		t.Spectrum = word
	}
	site := siteOf(in)
	ways := site.ways(in, &p)
	t.Conditions, t.Exception = ways.conditions, ways.exception
	all := map[string]found{}
	t.Warnings = slices.Concat(ways.warnings, ways.raise(in, all, &p))
	if err := p.err(); err != nil {
		return nil, err
	}
	t0, ts := cornersOf(all)
	late(&p, in, ts)
	sds, sd1, tl := all["S_DS"].value, all["S_D1"].value, in.Numbers["T_L"]
	clauses := [4]cite.Ref{of716("Eq. 11.4-5"), of716("11.4.6"), of716("Eq. 11.4-6"), of716("Eq. 11.4-7")}
	if t.Vertical {
		t.Symbol = map[bool]string{false: "S_av", true: "S_aMv"}[factor > 1]
		cv, ok := tableCv.at(site.class, all["S_MS"].value)
		if !ok {
			p.fail("site", "", "is missing: the vertical coefficient depends on it")
			return nil, p.err()
		}
		all["C_v"] = cv
		half := twoPeriod(sds, sd1, tl, 0.5*factor, "0.5 * "+times, clauses)
		for i := range half {
			half[i].Name = "half of the horizontal"
			half[i].Ref = of716("11.9.2")
		}
		t.Branches = upper(vertical716(cv.value, all["S_MS"].value, factor), half)
	} else {
		t.Branches = twoPeriod(sds, sd1, tl, factor, times, clauses)
		t.Corners = []Corner{{"T_0", t0}, {"T_S", ts}, {"T_L", tl}}
	}
	t.Warnings = slices.Concat(t.Warnings, large(sds, sd1), byRisk(in, all, t.Basis))
	t.Notes = reliefNote(in)
	t.Parameters = register(slices.Concat(params716, derived716), in, all)
	return t, p.err()
}

// raise finds S_MS, S_M1, S_DS and S_D1: those given, or F_a S_S and F_v S_1.
func (w ways716) raise(in Given, all map[string]found, p *problems) (warnings []Warning) {
	for _, x := range []struct {
		mapped, mce, des string
		table            siteTable
	}{{"S_S", "S_MS", "S_DS", tableFa}, {"S_1", "S_M1", "S_D1", tableFv}} {
		m, d, direct := in.pair(p, x.mce, x.des)
		f, s, ok := w.coefficients(in, x.table, x.mapped, direct, p)
		if !direct && !ok {
			continue // said already
		}
		byTable := s * f.value
		formula := x.table.symbol + " * " + x.mapped
		if w.supplement && x.table.symbol == "F_v" {
			byTable, formula = 1.5*byTable, "1.5 * "+formula
		}
		switch {
		case !direct:
			all[x.table.symbol] = f
			m = found{value: byTable, formula: formula}
			if w.supplement && x.table.symbol == "F_v" {
				m.doc = "MCE_R acceleration at 1 s, in g, raised by half as exception 2 of 11.4.8 asks since Supplement 3"
			}
			d = found{value: 2 * byTable / 3, formula: "2 / 3 * " + x.mce}
			if x.table.symbol == "F_v" && !(s > 0) {
				p.fail("S_1", "", "must be greater than zero for a spectrum from it")
			} else if !(s > 0) {
				p.fail("S_S", "", "must be greater than zero for a spectrum from it")
			}
		case ok && !w.study && !near(m.value, byTable, agree):
			warnings = append(warnings, Warning{"site-coefficient", fmt.Sprintf("%s = %s follows from what is given; %s, the site class and %s would give %s",
				x.mce, quantity.Short(m.value), x.mapped, x.table.clause, quantity.Short(byTable)), of716(x.table.clause)})
		}
		all[x.mce], all[x.des] = m, d
	}
	if m, long := all["S_MS"], all["S_M1"]; m.value > 0 && m.value < long.value {
		warnings = append(warnings, Warning{"short-below-long", fmt.Sprintf("S_MS = %s is less than S_M1 = %s; the 2018 IBC takes S_MS not less than S_M1 except for the design category, which is not done here: where that code governs, give S_MS",
			quantity.Short(m.value), quantity.Short(long.value)), cite.To("2018 IBC", "1613.2.3")})
	}
	return warnings
}

// coefficients are F and S of one end of the spectrum. What is missing is an
// error unless the ordinate is given directly.
func (w ways716) coefficients(in Given, t siteTable, mapped string, direct bool, p *problems) (f found, s float64, ok bool) {
	s, hasS := in.number(mapped)
	given, hasF := in.number(t.symbol)
	des := map[string]string{"F_a": "S_DS", "F_v": "S_D1"}[t.symbol]
	mce := strings.Replace(des, "D", "M", 1)
	if direct && hasF {
		p.fail(t.symbol, "give one of the two", "has no use where %s or %s is given", mce, des)
	}
	if !hasS {
		if !direct {
			p.fail(mapped, "", "is missing: give %s and the site class, or %s or %s", mapped, mce, des)
		}
		return f, 0, false
	}
	if w.site.word == "" && !hasF {
		if !direct {
			p.fail("site", "write  site: default  where it is not determined", "is missing: the site coefficients depend on it")
		}
		return f, 0, false
	}
	if w.site.word != "" {
		f, ok = w.site.coefficient(t, s, w.claimed)
	}
	if hasF {
		if ok && !near(f.value, given, agree) {
			f.doc = fmt.Sprintf("%s as given; %s has %s", tableWords[t.symbol], t.clause, quantity.Short(f.value))
		} else {
			f.doc = tableWords[t.symbol] + " as given"
		}
		f.value, f.formula = given, ""
		return f, s, true
	}
	if !ok && !direct && w.site.class != "F" { // F is refused as a whole
		p.fail("site", "give S_DS and S_D1 from a study with  site_specific: study, or claim exception 1 with  site_specific: exception", "%s has no value for site class %s at %s = %s; 11.4.8 asks for a site-specific study", t.clause, w.site.word, mapped, quantity.Short(s))
	}
	return f, s, ok
}

// vertical716 is the vertical spectrum of 11.9.2, up to 2 s, without its lower
// bound; factor 1.5 gives the MCE_R one, 1 the design one.
//
//	S_aMv = 0.3 C_v S_MS                            T <= 0.025 s
//	      = 20 C_v S_MS (T - 0.025) + 0.3 C_v S_MS  to 0.05 s
//	      = 0.8 C_v S_MS                            to 0.15 s
//	      = 0.8 C_v S_MS (0.15/T)^0.75              to 2 s
func vertical716(cv, sms, factor float64) []Branch {
	times := map[bool]string{false: "2 / 3 * ", true: ""}[factor > 1]
	a := factor / 1.5 * cv * sms * quantity.Gravity
	tail := 0.8 * math.Pow(0.15, 0.75) // the ordinate at 1 s over a
	return []Branch{
		{Name: "short periods", To: 0.025, A0: 0.3 * a, Formula: times + "0.3 * C_v * S_MS", Ref: of716("Eq. 11.9-1")},
		{Name: "rise", From: 0.025, To: 0.05, A0: (0.3 - 0.5) * a, A1: 20 * a, Formula: times + "(20 * C_v * S_MS * (T - 0.025 s) / 1 s + 0.3 * C_v * S_MS)", Ref: of716("Eq. 11.9-2")},
		{Name: "plateau", From: 0.05, To: 0.15, A0: 0.8 * a, Formula: times + "0.8 * C_v * S_MS", Ref: of716("Eq. 11.9-3")},
		{Name: "fall", From: 0.15, To: 2, C: tail * a, Power: -0.75, Formula: times + "0.8 * C_v * S_MS * (0.15 s / T)^0.75", Ref: of716("Eq. 11.9-4")},
	}
}
