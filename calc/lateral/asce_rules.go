package lateral

import (
	"fmt"
	"math"

	"quoin/calc/quantity"
	"quoin/calc/standard"
)

// Wall is a shear wall of concrete or masonry in the direction of the forces, at
// the base; m.
type Wall struct{ Length, Thickness float64 }

// Bounds of the approximate periods of 12.8.2.1, in the unit that h_n is measured
// in: ft as the standard has them, m as it has them in brackets.
var (
	leastStorey  = map[string]float64{"ft": 10, "m": 3}
	highestWalls = map[string]float64{"ft": 120, "m": 36.6}
	wallFactor   = map[string]float64{"ft": 0.0019, "m": 0.0019 / 0.3048} // C_q; 7-16 prints 0.00058 m, which is 0.0019 times 0.3048 in place of over it
)

const mostStoreys = 12 // of moment frames

// condition adds what the standard asks and how it stands.
func (s *Static) condition(text, state, clause string) {
	s.Conditions = append(s.Conditions, standard.Condition{Text: text, State: state, Ref: clausesOf(s.Basis).ref(clause)})
}

// storeys is T_a = 0.1 N s (12.8.2.1), for up to 12 storeys above the base of an
// average height of 10 ft (3 m) or more, that moment frames of steel or concrete
// alone resist.
func (in ASCE) storeys(s *Static) error {
	row, err := systemOf(asceSystems, in.System)
	switch {
	case in.Ct != 0 || in.X != 0:
		return problem("period", "leave out one of the two", "T_a is stated by storeys, and by C_t and x")
	case in.System == "":
		return problem("system", "system: steel moment frame, or concrete moment frame", "is missing: T_a = 0.1 N holds where moment frames alone resist the forces")
	case err != nil:
		return err
	case row.Name != "steel moment frame" && row.Name != "concrete moment frame":
		return problem("system", "leave period out: T_a is then found by C_t and x", "T_a = 0.1 N holds for steel and concrete moment frames alone, not for: %s", row.Name)
	}
	n, c := len(s.Levels), clausesOf(s.Basis)
	unit := quantity.MustUnit(s.HeightUnit)
	mean, least := unit.From(s.Hn)/float64(n), leastStorey[s.HeightUnit]
	if n > mostStoreys {
		return problem("period", "leave period out: T_a is then found by C_t and x", "T_a = 0.1 N holds up to %d storeys above the base; the structure has %d", mostStoreys, n)
	}
	if mean < least*(1-1e-12) {
		return problem("period", "leave period out: T_a is then found by C_t and x", "T_a = 0.1 N holds for storeys of %v %s on average or more; here it is %.4g %s", least, s.HeightUnit, mean, s.HeightUnit)
	}
	s.System, s.PeriodRule, s.Ta = row.Name, "storeys", 0.1*float64(n)
	s.condition("T_a = 0.1 N: moment frames of steel or concrete alone resist the forces", "stated by the author: "+row.Name, c.Storeys)
	s.condition("T_a = 0.1 N: no more than 12 storeys above the base", "met: "+quantity.Short(float64(n)), c.Storeys)
	s.condition("T_a = 0.1 N: an average storey height of at least "+quantity.Short(least)+" "+s.HeightUnit, "met: "+quantity.Short(mean)+" "+s.HeightUnit, c.Storeys)
	return nil
}

// walls is T_a of structures with shear walls of masonry or concrete up to 120 ft
// (36.6 m) high (12.8.2.1):
//
//	T_a = C_q h_n/sqrt(C_w),  C_w = 100/A_B sum(A_i/(1 + 0.83 (h_n/D_i)²))
//
// A_B the area of the structure at its base, A_i the web area and D_i the length of wall i.
func (in ASCE) walls(s *Static) error {
	c := clausesOf(s.Basis)
	switch {
	case in.ByStoreys || in.System != "" || in.Ct != 0 || in.X != 0:
		return problem("walls", "leave out system, period, C_t and x, or the walls", "T_a is stated by walls and in another way")
	case len(in.Walls) == 0:
		return problem("walls", "walls: [{length: 6 m, thickness: 200 mm}]", "are missing: the area at the base is given")
	case !(in.BaseArea > 0) || math.IsInf(in.BaseArea, 0):
		return problem("base_area", "the area of the structure at its base", "must be given with walls, greater than zero")
	}
	sum, area := 0.0, 0.0
	for i, w := range in.Walls {
		if !(w.Length > 0) || !(w.Thickness > 0) || math.IsInf(w.Length*w.Thickness, 0) {
			return problem(fmt.Sprintf("walls[%d]", i+1), "", "wall %d needs a length and a thickness greater than zero", i+1)
		}
		if w.Thickness > w.Length {
			return problem(fmt.Sprintf("walls[%d]", i+1), "the length is along the forces", "wall %d is thicker than long", i+1)
		}
		area += w.Length * w.Thickness
		sum += w.Length * w.Thickness / (1 + 0.83*(s.Hn/w.Length)*(s.Hn/w.Length))
	}
	if area > in.BaseArea {
		return problem("base_area", "the area of the whole structure at its base", "the walls cover %.4g m², more than the base of %.4g m²", area, in.BaseArea)
	}
	unit := quantity.MustUnit(s.HeightUnit)
	hn, highest := unit.From(s.Hn), highestWalls[s.HeightUnit]
	if beyond(hn, highest) {
		return problem("walls", "give system: other in place of the walls", "T_a by walls holds up to h_n = %v %s; it is %.5g %s", highest, s.HeightUnit, hn, s.HeightUnit)
	}
	s.PeriodRule, s.Walls, s.BaseArea, s.Cq, s.Cw = "walls", in.Walls, in.BaseArea, wallFactor[s.HeightUnit], 100/in.BaseArea*sum
	s.Ta = s.Cq * hn / math.Sqrt(s.Cw)
	if !(s.Ta > 0) || math.IsInf(s.Ta, 0) {
		return problem("walls", "are their units right?", "the walls give no finite period")
	}
	s.condition("T_a by walls: shear walls of masonry or concrete", "stated by the author", c.Walls)
	s.condition("T_a by walls: h_n of no more than "+quantity.Short(highest)+" "+s.HeightUnit, "met: "+quantity.Short(hn)+" "+s.HeightUnit, c.Walls)
	return nil
}

// tallest is the height of Table 12.6-1, 160 ft; m.
const tallest = 160 * 0.3048

// permit tells whether 12.6 lets the forces be found by this procedure. The rows of
// Table 12.6-1 of 7-16 are held to both editions; the later one is no stricter.
// Regularity is the author's word, and without it nothing is shown in design
// categories D to F. Light-frame construction is left aside.
func (in ASCE) permit(s *Static) {
	text := func(symbol string) string { p, _ := in.Target.Parameter(symbol); return p.Text }
	s.Rho = in.Rho
	clause := "Table 12.6-1"
	if s.Basis == clauses722.Key {
		clause = "12.6"
	}
	asks := func(text, state string) { s.condition(text, state, clause) }
	yes := func(ok bool, state string) string {
		if ok {
			return "met: " + state
		}
		return "not met: " + state
	}
	category, risk := text("category"), text("risk")
	switch category {
	case "":
		asks("seismic design category", "not stated: the target does not say enough to find it")
	default:
		asks("seismic design category A, B or C: any structure", yes(category < "D", category))
	}
	n := len(s.Levels)
	low := n <= 2 && (risk == "I" || risk == "II")
	height := quantity.Short(quantity.MustUnit(s.HeightUnit).From(s.Hn)) + " " + s.HeightUnit
	short := !beyond(s.Hn, tallest)
	limit := 3.5 * s.SD1 / s.SDS
	quick := s.T < limit
	period := quantity.Short(s.T) + " s against " + quantity.Short(limit) + " s"
	said := map[string]string{"": "not stated by the author", "yes": "stated by the author: none", "listed": "stated by the author: only those that the table lists", "no": "stated by the author: others than those that the table lists"}[in.Regular]
	category = map[bool]string{true: "D", false: category}[category == ""]
	if category >= "D" {
		if risk == "" {
			asks("or: risk category I or II and no more than 2 storeys above the base", "not shown: the risk category is not stated")
		} else {
			asks("or: risk category I or II and no more than 2 storeys above the base", yes(low, risk+", "+quantity.Short(float64(n))))
		}
		asks("or: no irregularity of 12.3.2, and either h_n up to 160 ft (48.8 m) or T below 3.5 T_S; or only horizontal irregularities of types 2 to 5 and vertical ones of types 4, 5a, 5b, and h_n up to 160 ft", "each below")
		asks("irregularities", said)
		asks("h_n up to 160 ft (48.8 m)", yes(short, height))
		asks("T below 3.5 T_S", yes(quick, period))
	}
	known := text("category") != ""
	switch {
	case known && category < "D", low, in.Regular == "yes" && (short || quick), in.Regular == "listed" && short:
		s.Permitted = "permitted"
	case in.Regular == "" && (short || quick), !known:
		s.Permitted = "not shown"
	default:
		s.Permitted = "not permitted"
		s.Warnings = append(s.Warnings, Warning{"procedure", "the equivalent lateral force procedure is not permitted in design category " + category +
			" (h_n = " + height + ", T = " + period + ", irregularities " + said + "), unless the structure is of light-frame construction; its base shear may serve to scale a modal analysis", clausesOf(s.Basis).ref(clause)})
	}
}

// capped takes the S_DS of 12.8.1.3 into C_s: 1.0, not less than 70 % of S_DS, where
// all that the clause asks is known to hold.
func (in ASCE) capped(s *Static, g *groundMotion) error {
	text := func(symbol string) string { p, _ := in.Target.Parameter(symbol); return p.Text }
	site, risk := text("site"), text("risk")
	stated := func(x string) string { return map[bool]string{true: "not stated", false: x}[x == ""] }
	regular := map[string]string{"yes": "none, stated by the author", "listed": "some", "no": "some"}[in.Regular]
	rho := map[bool]string{true: "not stated", false: quantity.Short(in.Rho)}[in.Rho == 0]
	var missing string
	for _, c := range []struct {
		text, state string
		met         bool
	}{
		{"no irregularity of 12.3.2", stated(regular), in.Regular == "yes"},
		{"no more than five storeys", quantity.Short(float64(len(s.Levels))), len(s.Levels) <= 5},
		{"T of no more than 0.5 s", quantity.Short(s.T) + " s", !beyond(s.T, 0.5)},
		{"redundancy factor of 1.0", rho, in.Rho == 1},
		{"site class neither E nor F, and determined", stated(site), site != "" && site != "E" && site != "F" && site != "default"},
		{"risk category I or II", stated(risk), risk == "I" || risk == "II"},
		{"two-period spectrum (as the clause is used here)", map[bool]string{true: "two-period", false: "multi-period"}[g.multi == nil], g.multi == nil},
	} {
		if !c.met {
			missing += "; " + c.text + ": " + c.state
			continue
		}
		s.condition("S_DS of 12.8.1.3: "+c.text, "met: "+c.state, "12.8.1.3")
	}
	if missing != "" {
		return problem("S_DS_cap", "state regular: yes and rho: 1 where they hold, and site and risk in the target; else leave it out", "12.8.1.3 is not met%s", missing)
	}
	if g.sds > 1 {
		g.cap = max(1, 0.7*g.sds)
	}
	return nil
}
