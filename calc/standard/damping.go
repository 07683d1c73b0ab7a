package standard

import (
	"fmt"
	"maps"
	"math"

	"quoin/calc/quantity"
)

// AtDamping is the spectrum at another damping ratio, by the rule of its own
// standard; an error where the standard has none. The ratio it holds for gives
// the spectrum itself.
func (t *Target) AtDamping(z float64) (*Target, error) {
	if math.Abs(z-t.Damping) <= 1e-9 {
		return t, nil
	}
	refuse := func(why string) (*Target, error) {
		return nil, fmt.Errorf("the spectrum holds for %s %% damping and not for %s %%: %s",
			quantity.Format(100*t.Damping, 4), quantity.Format(100*z, 4), why)
	}
	s, ok := Lookup(t.Basis)
	switch {
	case !ok:
		panic("standard: a target of no standard: " + t.Basis)
	case s.Damping == "":
		return refuse(s.Fixed)
	case t.Q > 0:
		return refuse("the behaviour factor q covers damping other than 5 % already (" + s.Basis + " 3.2.2.5)")
	case !(z >= 0 && z < 1):
		return refuse("a damping ratio lies from 0 to below 1")
	}
	given := t.Given
	given.Numbers = maps.Clone(given.Numbers)
	given.Numbers[s.Damping] = z
	return s.Build(given)
}
