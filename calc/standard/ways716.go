package standard

import (
	"fmt"

	"quoin/calc/quantity"
)

// ways716 is how 11.4.8 of ASCE/SEI 7-16 is met: its conditions, as they stand
// for the site, and what the author states.
//
// A site-specific study is asked for
//
//	for site class F (ground response analysis, 21.1)
//	for isolated structures and structures with damping systems where S_1 >= 0.6
//	for site class E where S_S >= 1.0
//	for site classes D and E where S_1 >= 0.2
//
// with these exceptions:
//
//	1  class E, S_S >= 1.0: F_a is that of class C
//	2  class D, S_1 >= 0.2: C_s is Eq. 12.8-2 up to 1.5 T_S and 1.5 times
//	   Eq. 12.8-3 or 12.8-4 beyond. Supplement 3 words it otherwise: S_M1 is
//	   raised by half for every use.
//	3  class E, S_1 >= 0.2: T <= T_S and the equivalent lateral force procedure
type ways716 struct {
	site       site716
	study      bool
	claimed    bool // an exception, in the words of the standard as first printed
	supplement bool // exception 2 in the words of Supplement 3
	exception  int
	conditions []Condition
	warnings   []Warning
}

const (
	applies      = "applies"
	notHere      = "does not apply"
	notEvaluated = "not evaluated"
	claimedState = "claimed"
)

func (s site716) ways(in Given, p *problems) ways716 {
	how := in.Texts["site_specific"]
	w := ways716{site: s, study: how == "study", claimed: how == "exception", supplement: how == "supplement 3"}
	ref := of716("11.4.8")
	ss, hasSS := in.number("S_S")
	s1, hasS1 := in.number("S_1")
	var asked []string
	condition := func(known, holds bool, text, value string) bool {
		state := notHere
		switch {
		case !known:
			state = notEvaluated
		case holds:
			state = applies
			asked = append(asked, value)
		}
		w.conditions = append(w.conditions, Condition{text, state, ref})
		return known && holds
	}
	known := s.word != ""
	stiff := known && s.class != "D" && s.class != "E" // no condition on S_S or S_1
	isF := condition(known, s.class == "F", "site class F: a ground response analysis (21.1)", "site class F")
	shortE := condition(known && s.class != "E" || s.class == "E" && hasSS, s.class == "E" && ss >= 1, "site class E with S_S ≥ 1.0", "site class E with S_S = "+quantity.Short(ss))
	longDE := condition(stiff || known && hasS1, !stiff && s1 >= 0.2, "site class D or E with S_1 ≥ 0.2", "site class "+s.class+" with S_1 = "+quantity.Short(s1))
	w.conditions = append(w.conditions, Condition{"isolated structures and structures with damping systems on sites with S_1 ≥ 0.6: for the author to see", notEvaluated, ref})
	warn := func(code, format string, args ...any) {
		w.warnings = append(w.warnings, Warning{code, fmt.Sprintf(format, args...), ref})
	}
	claim := func(number int, text string) {
		w.exception = number
		w.conditions = append(w.conditions, Condition{fmt.Sprintf("exception %d: %s", number, text), claimedState, ref})
		warn("site-exception", "exception %d to 11.4.8 is claimed: %s", number, text)
	}
	direct := false
	for _, symbol := range []string{"S_MS", "S_M1", "S_DS", "S_D1"} {
		_, has := in.number(symbol)
		direct = direct || has
	}
	switch {
	case isF && !w.study:
		p.fail("site", "give S_DS and S_D1 of the study and write  site_specific: study", "site class F needs a site-specific ground response analysis (11.4.8, 21.1)")
	case w.study && !direct:
		p.fail("site_specific", "give S_DS and S_D1 of the study", "a study gives S_DS and S_D1 (21.4), and they are missing")
	case w.study:
		w.conditions = append(w.conditions, Condition{"a site-specific study: the values given come from it (21.4)", claimedState, ref})
	case (w.claimed || w.supplement) && !shortE && !longDE:
		p.fail("site_specific", "leave it away", "no condition of 11.4.8 applies to what is given, so there is no exception to claim")
	case w.supplement && s.class != "D":
		p.fail("site_specific", "write exception, or give the values of a study", "the rule of Supplement 3 that is known here is for site class D")
	case w.supplement && direct:
		p.fail("site_specific", "give S_S, S_1 and the site class, or state the raised value with  site_specific: study", "Supplement 3 raises S_M1 from F_v S_1, and S_M1 or S_D1 is given here directly")
	case w.supplement:
		w.conditions = append(w.conditions, Condition{"exception 2 in the words of Supplement 3: S_M1 is raised by 50 % for every use", claimedState, ref})
		warn("site-exception", "exception 2 to 11.4.8 is claimed as Supplement 3 words it: S_M1, and with it S_D1 and the spectrum, is raised by 50 %%")
	case w.claimed:
		if shortE {
			claim(1, "site class E with S_S ≥ 1.0 takes F_a of site class C")
		}
		switch {
		case longDE && s.class == "E":
			claim(3, "site class E with S_1 ≥ 0.2 holds only for T ≤ T_S and design by the equivalent lateral force procedure")
		case longDE:
			claim(2, "site class D with S_1 ≥ 0.2: C_s is that of Eq. 12.8-2 for T ≤ 1.5 T_S and 1.5 times that of Eq. 12.8-3 or 12.8-4 beyond. The spectrum itself is not raised; Supplement 3 raises S_M1 by 50 % for every use instead")
		}
	case len(asked) > 0:
		for _, what := range asked {
			warn("site-specific", "11.4.8 asks for a site-specific ground motion study (%s), and neither a study nor an exception is stated", what)
		}
	case !known || !stiff && !hasS1:
		warn("site-specific", "the conditions of 11.4.8 on site class, S_S and S_1 could not be evaluated: the site class or S_1 is not stated")
	}
	return w
}
