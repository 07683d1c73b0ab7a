package standard

import (
	"math"
	"slices"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/quantity"
)

// en1998 is EN 1998-1:2004 3.2.2: elastic and design spectra of types 1 and 2 on
// grounds A to E, horizontal and vertical, with the recommended values of the
// standard or national ones in their place.
var en1998 = Standard{
	Basis:      "EN 1998-1:2004",
	Doc:        "elastic and design spectra of 3.2.2, horizontal and vertical, from type, ground and a_g; recommended values unless national ones are given",
	Ref:        cite.To("EN 1998-1:2004", "3.2.2"),
	Spectra:    []string{"elastic", "design", "vertical", "vertical design"},
	Parameters: paramsEN,
	Derived:    derivedEN,
	Gaps: map[string]string{
		"ground: S1": specialGround, "ground: S2": specialGround,
	},
	Damping: "xi",
	build:   buildEN,
}

const specialGround = "ground types S1 and S2 need a special study of the seismic action (3.1.2(4)); give its spectrum as a table"

func ofEN(clause string) cite.Ref { return cite.To("EN 1998-1:2004", clause) }

var paramsEN = []ParameterDoc{
	{Symbol: "type", Kind: Text, Doc: "type of spectrum: 2 where no earthquake above M_s 5.5 contributes most to the hazard, else 1", Choices: []string{"1", "2"}, Ref: ofEN("3.2.2.2(2)")},
	{Symbol: "ground", Kind: Text, Doc: "ground type", Choices: []string{"A", "B", "C", "D", "E"}, Ref: ofEN("Table 3.1")},
	{Symbol: "a_gR", Kind: Number, Dim: quantity.Acceleration, Unit: "g", Doc: "reference peak ground acceleration on ground A", Ref: ofEN("3.2.1(2)")},
	{Symbol: "importance", Kind: Text, Doc: "importance class", Choices: riskCategories, Ref: ofEN("Table 4.3")},
	{Symbol: "gamma_I", Kind: Number, Doc: "importance factor", Ref: ofEN("4.2.5(5)")},
	{Symbol: "a_g", Kind: Number, Dim: quantity.Acceleration, Unit: "g", Doc: "design ground acceleration on ground A; it holds gamma_I already", Ref: ofEN("3.2.1(3)")},
	{Symbol: "S", Kind: Number, Doc: "soil factor", Ref: ofEN("Tables 3.2, 3.3")},
	{Symbol: "T_B", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "start of the constant acceleration branch", Ref: ofEN("Tables 3.2, 3.3")},
	{Symbol: "T_C", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "end of the constant acceleration branch", Ref: ofEN("Tables 3.2, 3.3")},
	{Symbol: "T_D", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "start of the constant displacement branch", Ref: ofEN("Tables 3.2, 3.3")},
	{Symbol: "T_E", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "end of the constant displacement branch", Ref: ofEN("Table A.1")},
	{Symbol: "T_F", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "start of the ground displacement", Ref: ofEN("Table A.1")},
	{Symbol: "vertical_ratio", Kind: Number, Doc: "a_vg/a_g, vertical over horizontal design ground acceleration", Ref: ofEN("Table 3.4")},
	{Symbol: "xi", Kind: Number, Unit: "%", Doc: "viscous damping ratio", Zero: true, Ref: ofEN("3.2.2.2(3)")},
	{Symbol: "q", Kind: Number, Doc: "behaviour factor", Ref: ofEN("3.2.2.5(3)")},
	{Symbol: "beta", Kind: Number, Doc: "factor of the lower bound of the design spectrum", Ref: ofEN("3.2.2.5(4)")},
}

var derivedEN = []ParameterDoc{
	{Symbol: "a_vg", Kind: Number, Dim: quantity.Acceleration, Unit: "g", Doc: "vertical design ground acceleration", Ref: ofEN("3.2.2.3")},
	{Symbol: "eta", Kind: Number, Doc: "damping correction factor", Ref: ofEN("Eq. 3.6")},
	{Symbol: "d_g", Kind: Number, Dim: quantity.Length, Unit: "mm", Doc: "design ground displacement", Ref: ofEN("Eq. 3.12")},
	{Symbol: "T_beta", Kind: Number, Dim: quantity.Time, Unit: "s", Doc: "period from which the lower bound β a_g (a_vg of vertical spectra) governs", Ref: ofEN("3.2.2.5(4)")},
}

// ground is a row of Tables 3.2, 3.3, 3.4 and A.1: recommended values.
type ground struct {
	s, tb, tc, td float64
}

var groundsEN = map[string]map[string]ground{
	"1": {"A": {1.0, 0.15, 0.4, 2.0}, "B": {1.2, 0.15, 0.5, 2.0}, "C": {1.15, 0.20, 0.6, 2.0}, "D": {1.35, 0.20, 0.8, 2.0}, "E": {1.4, 0.15, 0.5, 2.0}},
	"2": {"A": {1.0, 0.05, 0.25, 1.2}, "B": {1.35, 0.05, 0.25, 1.2}, "C": {1.5, 0.10, 0.25, 1.2}, "D": {1.8, 0.10, 0.30, 1.2}, "E": {1.6, 0.05, 0.25, 1.2}},
}

var (
	verticalEN = ground{1, 0.05, 0.15, 1.0}                                           // both types
	ratioEN    = map[string]float64{"1": 0.90, "2": 0.45}                             // a_vg/a_g
	longEN     = map[string]float64{"A": 4.5, "B": 5.0, "C": 6.0, "D": 6.0, "E": 6.0} // T_E; T_F is 10 s
	gammaEN    = map[string]float64{"I": 0.8, "II": 1.0, "III": 1.2, "IV": 1.4}       // recommended
	wordsEN    = map[string]string{"elastic": "S_e", "design": "S_d", "vertical": "S_ve", "vertical design": "S_vd"}
)

// site1998 is everything that a spectrum of EN 1998-1 is made of.
type site1998 struct {
	Given
	problems
	all      map[string]found
	spectrum string
	vertical bool
	design   bool
}

func buildEN(in Given) (*Target, error) {
	b := &site1998{Given: in, all: map[string]found{}, spectrum: "elastic"}
	if word := in.Texts["spectrum"]; word != "" {
		b.spectrum = word
	}
	b.vertical = b.spectrum == "vertical" || b.spectrum == "vertical design"
	b.design = b.spectrum == "design" || b.spectrum == "vertical design"
	b.unused()
	b.acceleration()
	b.ground()
	b.damping()
	if err := b.err(); err != nil {
		return nil, err
	}
	t := &Target{Basis: "EN 1998-1:2004", Spectrum: b.spectrum, Symbol: wordsEN[b.spectrum], Damping: b.value("xi"), Vertical: b.vertical}
	if b.design {
		t.Q = b.value("q")
		t.Branches = b.designBranches(t)
	} else {
		t.Branches = b.elasticBranches()
	}
	if err := b.err(); err != nil {
		return nil, err
	}
	for _, symbol := range []string{"T_B", "T_C", "T_D", "T_beta", "T_E", "T_F"} {
		if f, ok := b.all[symbol]; ok {
			t.Corners = append(t.Corners, Corner{symbol, f.value})
		}
	}
	slices.SortStableFunc(t.Corners, func(a, c Corner) int { return int(math.Copysign(1, a.T-c.T)) })
	t.Parameters = register(slices.Concat(paramsEN, derivedEN), in, b.all)
	t.Warnings, t.Notes = b.warnings(), b.notes()
	return t, nil
}

func (b *site1998) value(symbol string) float64 { return b.all[symbol].value }

// unused refuses what the spectrum asked for does not read.
func (b *site1998) unused() {
	for _, x := range []struct {
		symbols []string
		read    bool
		why     string
	}{
		{[]string{"q", "beta"}, b.design, "belongs to the spectra  design  and  vertical design"},
		{[]string{"vertical_ratio"}, b.vertical, "belongs to the vertical spectra"},
		{[]string{"S"}, !b.vertical, "is not read by the vertical spectra, which take 1.0"},
		{[]string{"T_E", "T_F"}, b.spectrum == "elastic", "belongs to the elastic spectrum, beyond 4 s"},
	} {
		for _, s := range x.symbols {
			if _, given := b.number(s); given && !x.read {
				b.fail(s, "leave it away, or ask for that spectrum", "%s", x.why)
			}
		}
	}
}

// acceleration finds a_g, and a_vg of a vertical spectrum.
func (b *site1998) acceleration() {
	ag, hasAg := b.number("a_g")
	agr, hasAgR := b.number("a_gR")
	gamma, hasGamma := b.number("gamma_I")
	class, hasClass := b.Texts["importance"]
	switch {
	case hasAg && hasAgR:
		b.fail("a_gR", "give one of the two", "a_g = gamma_I a_gR is given already")
	case hasAg && hasGamma:
		b.fail("gamma_I", "give a_gR with gamma_I, or a_g alone", "a_g holds gamma_I already")
	case hasAg:
		b.all["a_g"] = found{value: ag}
	case !hasAgR:
		b.fail("a_g", "", "is missing: give a_g, or a_gR and gamma_I or the importance class")
	case !hasGamma && !hasClass:
		b.fail("gamma_I", "", "is missing: give gamma_I or the importance class, or a_g, which holds it")
	default:
		b.all["gamma_I"] = found{value: gammaEN[class], doc: "importance factor of class " + class + " (recommended value)"}
		if hasGamma {
			b.all["gamma_I"] = found{value: gamma, doc: "importance factor, as given"}
		}
		b.all["a_g"] = found{value: b.value("gamma_I") * agr, formula: "gamma_I * a_gR", doc: "design ground acceleration on ground A"}
	}
	if !b.vertical {
		return
	}
	b.national("vertical_ratio", ratioEN[b.Texts["type"]], b.Texts["type"] != "", "type")
	b.all["a_vg"] = found{value: b.value("vertical_ratio") * b.value("a_g"), formula: "vertical_ratio * a_g"}
}

// national takes a value as given, else the recommended one, else asks for field.
func (b *site1998) national(symbol string, recommended float64, known bool, field string) {
	doc := ""
	for _, d := range paramsEN {
		if d.Symbol == symbol {
			doc = d.Doc
		}
	}
	value, given := b.number(symbol)
	switch {
	case given && known && value != recommended:
		b.all[symbol] = found{value: value, doc: doc + " (national value; recommended: " + quantity.Short(recommended) + ")"}
	case given && known:
		b.all[symbol] = found{value: value, doc: doc + " (recommended value)"}
	case given:
		b.all[symbol] = found{value: value, doc: doc + " (national value)"}
	case known:
		b.all[symbol] = found{value: recommended, doc: doc + " (recommended value)"}
	default:
		b.fail(symbol, "", "is missing: give %s, or %s for the recommended value", symbol, field)
	}
}

// ground finds S and the corner periods.
func (b *site1998) ground() {
	row, known := groundsEN[b.Texts["type"]][b.Texts["ground"]]
	field := "type and ground"
	var missing []string
	for _, symbol := range []string{"S", "T_B", "T_C", "T_D"} {
		if _, ok := b.number(symbol); !ok {
			missing = append(missing, symbol)
		}
	}
	switch {
	case b.vertical:
		row, known = verticalEN, true
	case !known && len(missing) > 0:
		for _, word := range []string{"type", "ground"} {
			if b.Texts[word] == "" {
				b.fail(word, "", "is missing: give it for the recommended values, or national values of %s", strings.Join(missing, ", "))
			}
		}
		return
	default:
		b.national("S", row.s, known, field)
	}
	for _, x := range []struct {
		symbol string
		value  float64
	}{{"T_B", row.tb}, {"T_C", row.tc}, {"T_D", row.td}} {
		b.national(x.symbol, x.value, known, field)
		if f, ok := b.all[x.symbol]; ok {
			f.ref = ofEN(map[string]string{"1": "Table 3.2", "2": "Table 3.3"}[b.Texts["type"]])
			if b.vertical {
				f.ref = ofEN("Table 3.4")
			}
			b.all[x.symbol] = f
		}
	}
	te, known := longEN[b.Texts["ground"]]
	_, hasE := b.number("T_E")
	_, hasF := b.number("T_F")
	if b.spectrum == "elastic" && (known || hasE || hasF) {
		b.national("T_E", te, known, "ground")
		b.national("T_F", 10, true, "")
	}
	tb, tc, td := b.value("T_B"), b.value("T_C"), b.value("T_D")
	switch {
	case len(b.problems.all) > 0:
		return
	case tc < tb:
		b.fail("T_C", "", "%s s lies below T_B = %s s", quantity.Short(tc), quantity.Short(tb))
	case td < tc:
		b.fail("T_D", "", "%s s lies below T_C = %s s", quantity.Short(td), quantity.Short(tc))
	}
	if e, ok := b.all["T_E"]; ok {
		if e.value < td {
			b.fail("T_E", "", "%s s lies below T_D = %s s", quantity.Short(e.value), quantity.Short(td))
		}
		if f := b.value("T_F"); !(f > e.value) {
			b.fail("T_F", "", "%s s does not lie above T_E = %s s", quantity.Short(f), quantity.Short(e.value))
		}
	} else if !b.design && td >= 4 {
		b.fail("T_D", "", "%s s: the spectrum ends at 4 s, and T_D lies below", quantity.Short(td))
	}
}

// damping finds xi and eta, and q and beta of a design spectrum.
func (b *site1998) damping() {
	xi, given := b.number("xi")
	if !given {
		xi = 0.05
	}
	b.all["xi"] = found{value: xi}
	if !given {
		b.all["xi"] = found{value: xi, doc: "viscous damping ratio, the reference value"}
	}
	if xi >= 1 {
		b.fail("xi", "write  5 %%", "must be a ratio below 1, not %v", xi)
	}
	if !b.design {
		b.all["eta"] = found{value: max(math.Sqrt(10/(5+100*xi)), 0.55), formula: "max(sqrt(10 / (5 + num(xi, %))), 0.55)"}
		return
	}
	if math.Abs(xi-0.05) > 1e-9 {
		b.fail("xi", "leave it away, or ask for the elastic spectrum", "the behaviour factor q of a design spectrum covers damping other than 5 %% already (3.2.2.5)")
	}
	if q, ok := b.number("q"); !ok {
		b.fail("q", "", "is missing: a design spectrum is divided by the behaviour factor q")
	} else {
		b.all["q"] = found{value: q}
	}
	b.national("beta", 0.2, true, "")
}

func (b *site1998) warnings() []Warning {
	var all []Warning
	if q := b.value("q"); b.vertical && q > 1.5 {
		all = append(all, Warning{"vertical-q", "q = " + quantity.Short(q) + " in a vertical design spectrum: values above 1.5 must be justified by analysis", ofEN("3.2.2.5(6)")})
	} else if q > 0 && q < 1 {
		all = append(all, Warning{"low-q", "q = " + quantity.Short(q) + " lies below 1: the design spectrum is larger than the elastic one", ofEN("3.2.2.5")})
	}
	for _, x := range []struct {
		symbol   string
		low, top float64
		why      string
	}{
		{"S", 1, 2, "soil factors are commonly between 1.0, that of rock, and 2.0"},
		{"vertical_ratio", 0.3, 1.2, "a_vg/a_g is commonly between 0.3 and 1.2, recommended are 0.90 and 0.45"},
	} {
		if v, typed := b.number(x.symbol); typed && (v < x.low || v > x.top) {
			all = append(all, Warning{"unusual-value", x.symbol + " = " + quantity.Short(v) + " is unusual: " + x.why + " (common practice, no limit of the standard); confirm it", cite.Ref{}})
		}
	}
	if ag := b.value("a_g") / quantity.Gravity; ag > 1.5 {
		all = append(all, Warning{"large-value", "a_g = " + quantity.Short(ag) + " g is very large: was it given in another unit?", cite.Ref{}})
	}
	return all
}

func (b *site1998) notes() []string {
	var all []string
	if _, ok := b.number("a_g"); ok {
		all = append(all, "a_g is taken as the design ground acceleration: it holds the importance factor already.")
	}
	if _, ok := b.all["T_E"]; ok {
		all = append(all, "Beyond 4 s the ordinates are those of the displacement spectrum, S_e = S_De (2π/T)²: constant displacement up to T_E, then Annex A. The constant 0.025 of d_g is rounded from 1/(4π²), so the standard itself steps down by 1.3 % at T_E.")
	}
	return all
}
