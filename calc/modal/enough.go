package modal

import (
	"fmt"
	"math"
	"strings"

	"quoin/calc/cite"
)

// MassNeeded is the fraction of the mass that the modes together should move
// (ASCE/SEI 7-22 12.9.1.1, EN 1998-1 4.3.3.3.1(3); from memory).
const MassNeeded = 0.90

// massOne is the fraction from which on no mode may be left out, where the sum
// falls short (EN 1998-1 4.3.3.3.1(3), from memory).
const massOne = 0.05

// shortPeriod, s, and fewModes are the alternative of EN 1998-1 4.3.3.3.1(5): at
// least fewModes sqrt(n) modes of n storeys, the last with a period no longer
// than shortPeriod (from memory).
const (
	shortPeriod = 0.20
	fewModes    = 3.0
)

// leftOut is the largest mass ratio of a mode left out; -1 when not known.
func (s *Modes) leftOut() float64 {
	if s.Imported {
		return -1
	}
	largest := 0.0
	for _, o := range s.Left {
		largest = max(largest, o.MassRatio)
	}
	return largest
}

// Enough is a rule for the number of modes, applied.
type Enough struct {
	Met  bool
	Text string   // what was asked for and what there is
	Ref  cite.Ref // its clause; zero where the basis has none
}

// Reduced states the standard of the spectrum and the factors that the response is
// reduced by, and judges the modes used by the rule of that standard.
func (c *Combined) Reduced(basis string, r, ie, q float64) {
	c.Basis, c.R, c.Ie, c.Q = basis, r, ie, q
	c.judge()
}

// Enough tells whether the modes used are enough by the rule of c.Basis.
func (c *Combined) Enough() Enough {
	held := fmt.Sprintf("%s %.1f %% of the mass", modesHold(len(c.T)), 100*c.MassSum)
	european := strings.HasPrefix(c.Basis, "EN 1998-1")
	e := Enough{Met: c.MassSum >= MassNeeded-1e-12}
	switch {
	case european:
		e.Ref = cite.To("EN 1998-1:2004", "4.3.3.3.1(3)")
	case strings.HasPrefix(c.Basis, "ASCE/SEI"):
		e.Ref = cite.To(c.Basis, "12.9.1.1")
	}
	switch {
	case c.Residual != nil:
		e.Met, e.Text = true, fmt.Sprintf("%s; the residual holds the other %.1f %%", held, 100*math.Max(0, c.Residual.Mass))
	case e.Met:
		e.Text = fmt.Sprintf("%s, at least %.0f %% is asked for", held, 100*MassNeeded)
	case european && c.LeftOut >= 0 && c.LeftOut <= massOne:
		e.Met, e.Text = true, fmt.Sprintf("%s, less than %.0f %%, but no mode left out holds more than %.1f %% (%.0f %% is the limit)", held, 100*MassNeeded, 100*c.LeftOut, 100*massOne)
	case european:
		n, k, last := len(c.Levels), len(c.T), c.T[len(c.T)-1]
		left := "modes left out may hold more than 5 %"
		if c.LeftOut >= 0 {
			left = fmt.Sprintf("a mode left out holds %.1f %%, more than 5 %%", 100*c.LeftOut)
		}
		alternative := "nor is"
		if float64(k) >= fewModes*math.Sqrt(float64(n)) && last <= shortPeriod {
			alternative = "met is"
		}
		e.Text = fmt.Sprintf("%s, less than %.0f %%, and %s: use more modes or the residual; %s the alternative for where neither can be reached, k >= 3 sqrt(n) = %.2f modes (here %d) with T_k <= 0.20 s (here %.3g s), 4.3.3.3.1(5)",
			held, 100*MassNeeded, left, alternative, fewModes*math.Sqrt(float64(n)), k, last)
	default:
		e.Text = fmt.Sprintf("%s; at least %.0f %% is asked for: use more modes, or the residual for the mass that is missing", held, 100*MassNeeded)
	}
	return e
}

func modesHold(n int) string {
	if n == 1 {
		return "the one mode used moves"
	}
	return fmt.Sprintf("the %d modes used move", n)
}

// judge says what limits the result.
func (c *Combined) judge() {
	c.Warnings = nil
	warn := func(code, format string, args ...any) {
		c.Warnings = append(c.Warnings, Warning{code, fmt.Sprintf(format, args...)})
	}
	if e := c.Enough(); !e.Met {
		warn("mass-sum", "%s", e.Text)
	}
	if res := c.Residual; res != nil && res.Amplified > 0 {
		warn("residual-amplified", "the residual takes as rigid what is not: the spectrum amplifies %d of the modes left out, to as much as %.2f times the zero-period acceleration at T = %.3g s: use %d modes, or a zpa that holds for them",
			res.Amplified, res.Peak/res.ZPA, res.PeakT, len(c.T)+res.Last)
	}
	if res := c.Residual; res != nil && res.Unjudged > 0 {
		warn("residual-unjudged", "whether the residual takes as rigid what is not could not be judged: the spectrum has no ordinate at the periods of %d of the modes left out", res.Unjudged)
	}
	if c.Rule != SRSS {
		return
	}
	for i := 1; i < len(c.T); i++ {
		if apart := c.T[i-1]/c.T[i] - 1; apart <= closeModes {
			warn("close-modes", "modes %d and %d are %.1f %% apart in frequency; SRSS neglects their correlation: use CQC", i, i+1, 100*apart)
		}
	}
}
