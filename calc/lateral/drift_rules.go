package lateral

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/cite"
)

// driftRule is how one standard judges drifts.
type driftRule struct {
	basis      string
	clauses    DriftClauses
	needs      func(in DriftInput) []driftNeed
	factor     func(in DriftInput) float64                                    // design drift over elastic drift
	theta      func(in DriftInput, p, elastic, shear, height float64) float64 // stability coefficient
	thetaLimit func(in DriftInput, storey int) float64
	beta       bool    // thetaLimit reads beta
	inelastic  bool    // theta is of the design drift, not of the elastic one
	approx     float64 // theta up to which 1/(1 - theta) may stand for second-order analysis; 0: up to the limit
	damage     bool    // drifts are multiplied by nu, limits not divided by rho
}

type driftNeed struct {
	symbol string
	value  float64
	hint   string
}

func (r driftRule) nu(in DriftInput) float64 {
	if r.damage {
		return in.Nu
	}
	return 1
}

func (r driftRule) rho(in DriftInput) float64 {
	if r.damage {
		return 1
	}
	return in.Rho
}

// driftRules is every standard that drifts are judged by, in the order of reading.
var driftRules = []driftRule{
	{
		basis: "ASCE/SEI 7-22",
		clauses: DriftClauses{
			Drift: cite.To("ASCE/SEI 7-22", "12.8.6"), Theta: cite.To("ASCE/SEI 7-22", "12.8.7"), ThetaLimit: cite.To("ASCE/SEI 7-22", "12.8.7"),
			SecondOrder: cite.To("ASCE/SEI 7-22", "12.8.7"), Limit: cite.To("ASCE/SEI 7-22", "Table 12.12-1"), Combined: cite.To("ASCE/SEI 7-22", "12.9.1.4"),
		},
		needs: asceNeeds, beta: true, factor: asceFactor, thetaLimit: asceThetaLimit,
		// written with the elastic drift
		theta: func(_ DriftInput, p, elastic, shear, height float64) float64 { return p * elastic / (shear * height) },
	},
	{
		basis: "ASCE/SEI 7-16",
		clauses: DriftClauses{
			Drift: cite.To("ASCE/SEI 7-16", "Eq. 12.8-15"), Theta: cite.To("ASCE/SEI 7-16", "Eq. 12.8-16"), ThetaLimit: cite.To("ASCE/SEI 7-16", "Eq. 12.8-17"),
			SecondOrder: cite.To("ASCE/SEI 7-16", "12.8.7"), Limit: cite.To("ASCE/SEI 7-16", "Table 12.12-1"), Combined: cite.To("ASCE/SEI 7-16", "12.9.1.4.2"),
		},
		needs: asceNeeds, beta: true, factor: asceFactor, thetaLimit: asceThetaLimit,
		// written with the design drift Delta = C_d elastic / I_e: both cancel
		theta: func(in DriftInput, p, elastic, shear, height float64) float64 {
			return p * (in.Cd * elastic / in.Ie) * in.Ie / (shear * height * in.Cd)
		},
	},
	{
		basis: "EN 1998-1:2004",
		clauses: DriftClauses{
			Drift: cite.To("EN 1998-1:2004", "Eq. (4.23)"), Theta: cite.To("EN 1998-1:2004", "Eq. (4.28)"), ThetaLimit: cite.To("EN 1998-1:2004", "4.4.2.2(4)"),
			SecondOrder: cite.To("EN 1998-1:2004", "4.4.2.2(3)"), Limit: cite.To("EN 1998-1:2004", "4.4.3.2(1)"), Combined: cite.To("EN 1998-1:2004", "4.3.3.3"),
		},
		needs: func(in DriftInput) []driftNeed {
			return []driftNeed{{"q_d", in.Qd, "q_d is the behaviour factor q unless otherwise stated"}, {"nu", in.Nu, "0.5 for importance classes I and II, 0.4 for III and IV"}}
		},
		factor: func(in DriftInput) float64 { return in.Qd },
		theta: func(in DriftInput, p, elastic, shear, height float64) float64 {
			return p * in.Qd * elastic / (shear * height)
		},
		thetaLimit: func(DriftInput, int) float64 { return 0.30 },
		inelastic:  true, approx: 0.20, damage: true,
	},
}

func asceNeeds(in DriftInput) []driftNeed {
	return []driftNeed{{"C_d", in.Cd, "C_d stands beside R for the system"}, {"I_e", in.Ie, ""}, {"rho", in.Rho, ""}}
}

func asceFactor(in DriftInput) float64 { return in.Cd / in.Ie }

// asceThetaLimit is 0.5/(beta C_d), at most 0.25.
func asceThetaLimit(in DriftInput, storey int) float64 {
	return min(0.5/(at(in.Beta, storey)*in.Cd), 0.25)
}

// DriftBases lists the standards that drifts can be judged by.
func DriftBases() []string {
	var out []string
	for _, r := range driftRules {
		out = append(out, r.basis)
	}
	return out
}

// DriftClausesOf is where the rules of a basis stand; it panics on an unknown one.
func DriftClausesOf(basis string) DriftClauses {
	r, ok := driftRuleOf(basis)
	if !ok {
		panic("lateral: no drift rules for " + basis)
	}
	return r.clauses
}

func driftRuleOf(basis string) (driftRule, bool) {
	i := slices.IndexFunc(driftRules, func(r driftRule) bool { return r.basis == basis })
	if i < 0 {
		return driftRule{}, false
	}
	return driftRules[i], true
}

// warn says which storeys need second-order effects, which are unstable, and
// which carry less than their seismic weight.
func (d *Drift) warn(in DriftInput, rule driftRule) {
	var second, analysis, unstable []string
	for i, theta := range d.Theta {
		switch name := fmt.Sprintf("%s (%.3f)", d.Levels[i], theta); {
		case beyond(theta, d.ThetaLimit[i]):
			unstable = append(unstable, name)
		case rule.approx > 0 && beyond(theta, rule.approx):
			analysis = append(analysis, name)
		case beyond(theta, DriftThreshold):
			second = append(second, name)
		}
	}
	add := func(code, format string, storeys []string, ref cite.Ref) {
		if len(storeys) > 0 {
			d.Warnings = append(d.Warnings, Warning{Code: code, Text: fmt.Sprintf(format, strings.Join(storeys, ", ")), Ref: ref})
		}
	}
	add("second-order-factor", "theta exceeds 0.10 at %s: drifts are multiplied by 1/(1 - theta) there, and so must member forces be", second, rule.clauses.SecondOrder)
	add("second-order-analysis", "theta lies between 0.20 and 0.30 at %s: a second-order analysis is required; the factor 1/(1 - theta) shown is an estimate that the clause does not allow here", analysis, rule.clauses.ThetaLimit)
	add("unstable", "theta exceeds its limit at %s: potentially unstable, redesign; amplified drifts are not valid there", unstable, rule.clauses.ThetaLimit)
	if len(d.Theta) == 0 {
		return
	}
	var light, heavy []string
	for i, w := range in.Weight {
		if w > in.P[i]*(1+1e-6) {
			light = append(light, d.Levels[i])
		}
		if in.P[i] > heaviest*w {
			heavy = append(heavy, d.Levels[i])
		}
	}
	add("gravity-load", "P is less than the seismic weight at and above %s: it is the whole vertical load, summed from the top", light, rule.clauses.Theta)
	add("heavy-load", "P is more than ten times the seismic weight at and above %s: is its unit right?", heavy, rule.clauses.Theta)
}

// heaviest is how many times the seismic weight a vertical load is when it looks
// like a wrong unit.
const heaviest = 10
