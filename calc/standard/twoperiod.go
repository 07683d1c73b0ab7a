package standard

import (
	"fmt"

	"quoin/calc/cite"
	"quoin/calc/quantity"
)

// agree is how close two values of one quantity must lie, relative, when both
// are given: values rounded to three digits pass.
const agree = 0.005

// unlikely is a spectral acceleration, in g, above which another unit than g is
// the likely reason.
const unlikely = 4

// pair is S_M and S_D = 2/3 S_M of one period, S_D governing when both are
// given. ok is false where neither is.
func (in Given) pair(p *problems, mce, des string) (m, d found, ok bool) {
	sm, hasM := in.number(mce)
	sd, hasD := in.number(des)
	m, d = found{value: sm}, found{value: sd}
	switch {
	case !hasM && !hasD:
		return m, d, false
	case !hasM:
		m = found{value: 1.5 * sd, formula: "1.5 * " + des}
	case !hasD:
		d = found{value: 2 * sm / 3, formula: "2 / 3 * " + mce}
	case !near(2*sm/3, sd, agree):
		p.fail(des, "give one of the two", "%s does not agree with 2/3 %s = %s", quantity.Short(sd), mce, quantity.Short(2*sm/3))
	}
	return m, d, true
}

// cornersOf adds T_0 and T_S to what is found.
func cornersOf(all map[string]found) (t0, ts float64) {
	ts = all["S_D1"].value / all["S_DS"].value
	t0 = 0.2 * ts
	all["T_0"] = found{value: t0, formula: "0.2 * S_D1 / S_DS * 1 s"}
	all["T_S"] = found{value: ts, formula: "S_D1 / S_DS * 1 s"}
	return t0, ts
}

// twoPeriod is the two-period spectrum of ASCE/SEI 7, times factor:
//
//	S_a = S_DS (0.4 + 0.6 T/T_0)   T < T_0 = 0.2 S_D1/S_DS
//	S_a = S_DS                     T_0 <= T <= T_S = S_D1/S_DS
//	S_a = S_D1/T                   T_S < T <= T_L
//	S_a = S_D1 T_L/T²              T > T_L
//
// times is the factor as the formulas of the branches show it: "1.5 * ", or
// nothing.
func twoPeriod(sds, sd1, tl, factor float64, times string, clauses [4]cite.Ref) []Branch {
	ts := sd1 / sds
	t0 := 0.2 * ts
	scale := factor * quantity.Gravity
	return meeting([]Branch{
		{Name: "rise", From: 0, To: t0, A0: 0.4 * sds * scale, A1: 0.6 * sds / t0 * scale, Formula: times + "S_DS * (0.4 + 0.6 * T / T_0)", Ref: clauses[0]},
		{Name: "plateau", From: t0, To: ts, A0: sds * scale, Formula: times + "S_DS", Ref: clauses[1]},
		{Name: "constant velocity", From: ts, To: tl, B1: sd1 * scale, Formula: times + "S_D1 * 1 s / T", Ref: clauses[2]},
		{Name: "constant displacement", From: tl, B2: sd1 * tl * scale, Formula: times + "S_D1 * T_L * 1 s / T^2", Ref: clauses[3]},
	})
}

// late refuses a T_L below T_S.
func late(p *problems, in Given, ts float64) {
	if tl, ok := in.number("T_L"); ok && !(tl >= ts) {
		p.fail("T_L", "", "%s s lies below T_S = S_D1/S_DS = %s s", quantity.Short(tl), quantity.Short(ts))
	}
}

// large warns of values that are hardly in g.
func large(sds, sd1 float64) []Warning {
	if sds <= unlikely && sd1 <= unlikely {
		return nil
	}
	return []Warning{{"large-value", fmt.Sprintf("S_DS = %s or S_D1 = %s is very large for a value in g: was it given in another unit?", quantity.Short(sds), quantity.Short(sd1)), cite.Ref{}}}
}

// falling warns where the value at 1 s, as stated, lies above that at short periods:
// hardly any site has such a spectrum, and the two may be exchanged. Values derived from
// others are not doubted here.
func falling(in Given, all map[string]found) []Warning {
	for _, x := range [][2]string{{"S_DS", "S_D1"}, {"S_MS", "S_M1"}} {
		_, short := in.number(x[0])
		_, long := in.number(x[1])
		if s, l := all[x[0]].value, all[x[1]].value; short && long && s > 0 && l > s {
			return []Warning{{"short-below-long", fmt.Sprintf("%s = %s is less than %s = %s: hardly any site has more at 1 s than at short periods; are the two exchanged?", x[0], quantity.Short(s), x[1], quantity.Short(l)), cite.Ref{}}}
		}
	}
	return nil
}
