package lateral

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"quoin/calc/quantity"
	"quoin/calc/standard"
)

// groundMotion is what 12.8.1.1 takes from a design spectrum; spectral values in g.
type groundMotion struct {
	sds, sd1, s1, tl float64
	cap              float64 // S_DS of the plateau by 12.8.1.3; 0: sds
	s1Known          bool
	exception        int
	clauses          Clauses
	multi            *standard.Target // set for a multi-period spectrum: C_s by its ordinates
}

func (g groundMotion) ts() float64 { return g.sd1 / g.sds }

// short is the S_DS of the plateau.
func (g groundMotion) short() float64 {
	if g.cap > 0 {
		return g.cap
	}
	return g.sds
}

// ground reads a target and refuses what the procedure may not use.
func ground(t *standard.Target) (groundMotion, error) {
	refuse := func(hint, format string, args ...any) (groundMotion, error) {
		return groundMotion{}, problem("target", hint, format, args...)
	}
	switch {
	case t.Basis == "table":
		return refuse("make a target with  basis: ASCE/SEI 7-22  and S_DS, S_D1, T_L", "a table of ordinates does not say S_DS, S_D1 and T_L, which the procedure needs")
	case t.Basis != clauses722.Key && t.Basis != clauses716.Key:
		return refuse("use a target of ASCE/SEI 7-22 or 7-16", "the procedure of ASCE/SEI 7 takes no spectrum of %s", t.Basis)
	case t.Vertical:
		return refuse("use the horizontal design spectrum", "the spectrum is one of vertical motion")
	case t.Spectrum != "design":
		return refuse("write  spectrum: design  in the target", "the procedure takes the design spectrum, not %s", t.Spectrum)
	case t.Damping < 0.05-1e-9 || t.Damping > 0.05+1e-9:
		return refuse("", "the procedure takes the spectrum at 5 %% damping, not at %s %%", quantity.Format(100*t.Damping, 3))
	}
	g := groundMotion{exception: t.Exception, clauses: clausesOf(t.Basis)}
	var all []error
	for _, p := range []struct {
		symbol string
		to     *float64
	}{{"S_DS", &g.sds}, {"S_D1", &g.sd1}, {"T_L", &g.tl}} {
		v, ok := t.Parameter(p.symbol)
		if !ok || !(v.Value > 0) {
			all = append(all, problem("target", "", "the target states no %s", p.symbol))
			continue
		}
		*p.to = v.Value
	}
	if s1, ok := t.Parameter("S_1"); ok {
		g.s1, g.s1Known = s1.Value, true
	}
	if g.clauses.Spectrum != "" && t.MultiPeriod {
		g.multi = t
	}
	return g, errors.Join(all...)
}

// falling is the ordinate of a spectrum at T, m/s², the rising branch left out:
// below the period of its largest ordinate it is that ordinate (7-22 12.8.1.1).
// Ordinates are linear between the ends of branches below the peak.
func falling(t *standard.Target, T float64) (float64, error) {
	y, err := t.PSA(T)
	if err != nil {
		return 0, err
	}
	peak, at := 0.0, 0.0
	for _, b := range t.Branches {
		ends := []float64{b.From, b.To}
		if b.To == 0 {
			ends = ends[:1]
		}
		for _, end := range ends {
			if a := b.At(end); a > peak {
				peak, at = a, end
			}
		}
	}
	if T < at {
		return peak, nil
	}
	return y, nil
}

// coefficient finds C_s at period T and every limb of it:
//
//	C_s = S_DS/(R/I_e)
//	      not above S_D1/(T R/I_e) for T <= T_L, S_D1 T_L/(T² R/I_e) beyond
//	      not below 0.044 S_DS I_e >= 0.01
//	      not below 0.5 S_1/(R/I_e) where S_1 >= 0.6
//
// With exception 2 to 11.4.8 of 7-16 the first holds up to 1.5 T_S and the
// second, times 1.5, beyond. With a multi-period spectrum C_s = S_a/(R/I_e) in
// place of the first two; sa is then its ordinate, m/s².
func (g groundMotion) coefficient(T, r, ie float64) (limbs []Limb, cs, sa float64, err error) {
	c, d := g.clauses, r/ie
	add := func(symbol, name, clause string, value float64, applies bool, why string) {
		if !applies {
			value = 0
		}
		limbs = append(limbs, Limb{Symbol: symbol, Name: name, Value: value, Applies: applies, Why: why, Ref: c.ref(clause)})
	}
	period := func(x float64) string { return quantity.Short(x) + " s" }

	if c.Spectrum != "" {
		why, value := "the target is the two-period spectrum", 0.0
		if g.multi != nil {
			if sa, err = falling(g.multi, T); err != nil {
				return nil, 0, 0, problem("target", "", "%s", err)
			}
			why, value = "the target is the multi-period spectrum; its rising branch is not used", sa/quantity.Gravity/d
		}
		add("C_s_spectrum", "ordinate of the spectrum", c.Spectrum, value, g.multi != nil, why)
	}

	stretch, plateauEnds := 1.0, 0.0
	if g.exception == 2 {
		stretch, plateauEnds = 1.5, 1.5*g.ts()
	}
	velocity := stretch * g.sd1 / (T * d)
	displaced := stretch * g.sd1 * g.tl / (T * T * d)
	capped := beyond(T, plateauEnds)
	short, long := capped && !beyond(T, g.tl), capped && beyond(T, g.tl)
	plateauWhy := "always an upper limit"
	velocityWhy := fmt.Sprintf("T = %s is up to T_L = %s", period(T), period(g.tl))
	displacedWhy := fmt.Sprintf("T = %s is beyond T_L = %s", period(T), period(g.tl))
	if long {
		velocityWhy = displacedWhy
	} else if short {
		displacedWhy = velocityWhy
	}
	if g.exception == 2 {
		span := fmt.Sprintf("1.5 T_S = %s (exception 2 to 11.4.8)", period(plateauEnds))
		if capped {
			plateauWhy = "beyond " + span + " 1.5 times the next limit is taken"
			velocityWhy += "; 1.5 times, beyond " + span
			displacedWhy += "; 1.5 times, beyond " + span
		} else {
			plateauWhy = fmt.Sprintf("T = %s is up to %s", period(T), span)
			velocityWhy = plateauWhy
			displacedWhy = plateauWhy
		}
	}
	plateau := g.exception != 2 || !capped
	if g.multi != nil {
		plateau, short, long = false, false, false
		plateauWhy = "the ordinate of the multi-period spectrum is used"
		velocityWhy, displacedWhy = plateauWhy, plateauWhy
	}
	if g.cap > 0 {
		plateauWhy += "; with the S_DS of 12.8.1.3"
	}
	add("C_s_plateau", "upper limit at short periods", c.Plateau, g.short()/d, plateau, plateauWhy)
	add("C_s_max", "upper limit up to T_L", c.Velocity, velocity, short, velocityWhy)
	add("C_s_max", "upper limit beyond T_L", c.Displaced, displaced, long, displacedWhy)

	add("C_s_min", "least value", c.Minimum, max(0.044*g.sds*ie, 0.01), true, "always a lower limit; not below 0.01")
	why := "the target states no S_1"
	if g.s1Known {
		if why = fmt.Sprintf("S_1 = %s is below 0.6", quantity.Short(g.s1)); g.s1 >= leastS1 {
			why = strings.Replace(why, "below", "at least", 1)
		}
	}
	add(LeastSymbol, "least value for S_1 of 0.6 or more", c.Least, 0.5*g.s1/d, g.s1Known && g.s1 >= leastS1, why)
	limbs[len(limbs)-1].Unknown = !g.s1Known
	for _, l := range limbs {
		if math.IsInf(l.Value, 0) || math.IsNaN(l.Value) {
			return nil, 0, 0, problem("T", "is its unit right?", "a period of %v s gives no finite C_s", T)
		}
	}
	return limbs, govern(limbs), sa, nil
}

// LeastSymbol is that of the limb 0.5 S_1/(R/I_e), from S_1 = leastS1 on. Where it
// governs the base shear that a modal combination is scaled to, drifts are scaled
// too (7-16 12.9.1.4.2).
const (
	LeastSymbol = "C_s_min_1"
	leastS1     = 0.6
)

// Governing is the symbol of the limb that governs C_s; "" where there is none.
func (s *Static) Governing() string {
	for _, l := range s.Limbs {
		if l.Governs {
			return l.Symbol
		}
	}
	return ""
}

// IsLeast tells whether a base shear v, N, is 0.5 S_1/(R/I_e) times a weight, N, as
// far as a number written with four digits tells.
func IsLeast(t *standard.Target, v, weight, r, ie float64) bool {
	s1, ok := t.Parameter("S_1")
	return ok && s1.Value >= leastS1 && math.Abs(v/(0.5*s1.Value/(r/ie)*weight)-1) < 1e-3
}

// govern marks the limb that sets C_s and returns it: the least upper limit,
// unless a lower limit is greater. Of equal ones the first counts.
func govern(limbs []Limb) float64 {
	at := -1
	for i, l := range limbs {
		switch {
		case !l.Applies:
		case at < 0:
			at = i
		case l.Lower() && l.Value > limbs[at].Value, !l.Lower() && l.Value < limbs[at].Value:
			at = i
		}
	}
	limbs[at].Governs = true
	return limbs[at].Value
}

// Lower tells whether a limb is a lower limit; these come last.
func (l Limb) Lower() bool { return strings.HasPrefix(l.Symbol, "C_s_min") }
