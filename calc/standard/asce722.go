package standard

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"quoin/calc/cite"
	"quoin/calc/quantity"
)

// asce722 is the two-period spectrum of ASCE/SEI 7-22 11.4.5.2:
//
//	S_a = S_DS (0.4 + 0.6 T/T_0)   T < T_0 = 0.2 S_D1/S_DS
//	S_a = S_DS                     T_0 <= T <= T_S = S_D1/S_DS
//	S_a = S_D1/T                   T_S < T <= T_L
//	S_a = S_D1 T_L/T²              T > T_L
//
// MCE_R is 1.5 times the design spectrum.
var asce722 = Standard{
	Basis:      "ASCE/SEI 7-22",
	Doc:        "two-period design spectrum of 11.4.5.2 from S_MS, S_M1 or S_DS, S_D1, and T_L; 5 % damping",
	Ref:        cite.To("ASCE/SEI 7-22", "11.4.5.2"),
	Spectra:    []string{"design", "MCE_R"},
	Parameters: params722,
	build:      build722,
}

var params722 = []ParameterDoc{
	{Symbol: "S_S", Kind: Number, Doc: "mapped MCE_R acceleration at short periods, in g (echoed only)", Zero: true, Ref: of722("11.4.2")},
	{Symbol: "S_1", Kind: Number, Doc: "mapped MCE_R acceleration at 1 s, in g (echoed only)", Zero: true, Ref: of722("11.4.2")},
	{Symbol: "site", Kind: Text, Doc: "site class that the values hold for (echoed only)", Ref: of722("Table 20.2-1"),
		Choices: []string{"A", "B", "BC", "C", "CD", "D", "DE", "E", "F", "default"}},
	{Symbol: "risk", Kind: Text, Doc: "risk category (echoed only)", Choices: []string{"I", "II", "III", "IV"}, Ref: of722("Table 1.5-1")},
	{Symbol: "S_MS", Kind: Number, Doc: "MCE_R acceleration at short periods, in g, for the site class", Ref: of722("11.4.4")},
	{Symbol: "S_M1", Kind: Number, Doc: "MCE_R acceleration at 1 s, in g, for the site class", Ref: of722("11.4.4")},
	{Symbol: "S_DS", Kind: Number, Doc: "design acceleration at short periods, in g: 2/3 S_MS", Ref: of722("Eq. 11.4-1")},
	{Symbol: "S_D1", Kind: Number, Doc: "design acceleration at 1 s, in g: 2/3 S_M1", Ref: of722("Eq. 11.4-2")},
	{Symbol: "T_L", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "long-period transition period", Required: true, Ref: of722("11.4.5.2")},
}

func of722(clause string) cite.Ref { return cite.To("ASCE/SEI 7-22", clause) }

// agree is how close S_D and 2/3 S_M must lie, relative, when both are given:
// values rounded to three digits pass.
const agree = 0.005

func build722(in Given) (*Target, error) {
	v := in.Numbers
	var all []error
	// design gives S_D and S_M of one pair; S_D governs when both are given.
	design := func(mce, des string) (m, d float64) {
		m, hasM := v[mce]
		d, hasD := v[des]
		switch {
		case !hasM && !hasD:
			all = append(all, &ParameterError{Symbol: des, Problem: fmt.Sprintf("is missing: give %s or %s", des, mce)})
		case !hasM:
			m = 1.5 * d
		case !hasD:
			d = 2 * m / 3
		case math.Abs(2*m/3/d-1) > agree:
			all = append(all, &ParameterError{Symbol: des, Problem: fmt.Sprintf("%s does not agree with 2/3 %s = %s", quantity.Format(d, 4), mce, quantity.Format(2*m/3, 4)), Hint: "give one of the two"})
		}
		return m, d
	}
	sms, sds := design("S_MS", "S_DS")
	sm1, sd1 := design("S_M1", "S_D1")
	tl, ts := v["T_L"], sd1/sds
	t0 := 0.2 * ts
	if len(all) == 0 && !(tl >= ts) {
		all = append(all, &ParameterError{Symbol: "T_L", Problem: fmt.Sprintf("%s s lies below T_S = S_D1/S_DS = %s s", quantity.Format(tl, 4), quantity.Format(ts, 4))})
	}
	if err := errors.Join(all...); err != nil {
		return nil, err
	}
	t := &Target{Basis: "ASCE/SEI 7-22", Spectrum: "design", Damping: 0.05}
	for _, p := range params722 {
		value, given := v[p.Symbol]
		text, isText := in.Texts[p.Symbol]
		switch p.Symbol {
		case "S_MS":
			value = sms
		case "S_M1":
			value = sm1
		case "S_DS":
			value = sds
		case "S_D1":
			value = sd1
		default:
			if !given && !isText {
				continue
			}
		}
		t.Parameters = append(t.Parameters, Parameter{Symbol: p.Symbol, Value: value, Unit: p.Unit, Text: text, Doc: p.Doc, Given: given || isText, Ref: p.Ref})
	}
	t.Parameters = append(t.Parameters,
		Parameter{Symbol: "T_0", Value: t0, Unit: "s", Doc: "start of the plateau", Ref: of722("11.4.5.2")},
		Parameter{Symbol: "T_S", Value: ts, Unit: "s", Doc: "end of the plateau", Ref: of722("11.4.5.2")})

	scale := quantity.Gravity
	if in.Texts["spectrum"] == "MCE_R" {
		scale *= 1.5
		t.Spectrum = "MCE_R"
	}
	ref := of722("11.4.5.2")
	t.Branches = []Branch{
		{Name: "rise", From: 0, To: t0, A0: 0.4 * sds * scale, A1: 0.6 * sds / t0 * scale, Ref: ref},
		{Name: "plateau", From: t0, To: ts, A0: sds * scale, Ref: ref},
		{Name: "constant velocity", From: ts, To: tl, B1: sd1 * scale, Ref: ref},
		{Name: "constant displacement", From: tl, B2: sd1 * tl * scale, Ref: ref},
	}
	if ts == tl { // the plateau ends where displacement becomes constant
		t.Branches = slices.Delete(t.Branches, 2, 3)
	}
	t.Corners = []Corner{{"T_0", t0}, {"T_S", ts}, {"T_L", tl}}
	t.Warnings = warn722(in, sds, sd1)
	return t, nil
}

// unlikely is a spectral acceleration, in g, above which another unit than g is
// the likely reason.
const unlikely = 4

func warn722(in Given, sds, sd1 float64) []Warning {
	all := []Warning{{
		Code: "two-period",
		Text: "this is the two-period spectrum; methods of analysis other than the equivalent lateral force procedure take the multi-period spectrum of the site",
		Ref:  cite.To("ASCE/SEI article on 7-22 ground motions", ""),
	}}
	if in.Texts["site"] == "F" {
		all = append(all, Warning{"site-class-F", "site class F needs a site-specific ground motion procedure", of722("11.4.7")})
	}
	if sds > unlikely || sd1 > unlikely {
		all = append(all, Warning{"large-value", fmt.Sprintf("S_DS = %v or S_D1 = %v is very large for a value in g: was it given in another unit?", sds, sd1), cite.Ref{}})
	}
	return all
}
