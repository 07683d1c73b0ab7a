package block

import "quoin/calc/quantity"

// Units that blocks show results in, whatever the system.
var (
	inG     = quantity.MustUnit("g")
	seconds = quantity.MustUnit("s")
	percent = quantity.MustUnit("%")
	hertz   = quantity.MustUnit("Hz")
	pure    = quantity.Unit{}
	perTime = quantity.MustUnit("1/s")
)

// system gives the units of results in a unit system.
type system struct {
	force, moment, stiffness, mass, length, small, velocity quantity.Unit
}

func unitsOf(s quantity.System) system {
	return system{small: s.Small(), force: s.Preferred(quantity.Force), moment: s.Preferred(quantity.Moment), stiffness: s.Preferred(quantity.Stiffness),
		mass: s.Preferred(quantity.Mass), length: s.Preferred(quantity.Length), velocity: s.Preferred(quantity.Velocity)}
}

// damped is a damping ratio as a label: "5 %".
func damped(z float64) string { return quantity.Plain(round12(z*100)) + " %" }

// qualifier is a damping ratio in the id of a series: "5%".
func qualifier(z float64) string { return quantity.Plain(round12(z*100)) + "%" }
