package standard

import (
	"fmt"
	"math"
	"strings"

	"quoin/calc/quantity"
)

// periods722 are the 22 periods of the multi-period spectrum of ASCE/SEI 7-22
// 11.4.5.1, s.
var periods722 = []float64{0, 0.01, 0.02, 0.03, 0.05, 0.075, 0.1, 0.15, 0.2, 0.25, 0.3, 0.4, 0.5, 0.75, 1, 1.5, 2, 3, 4, 5, 7.5, 10}

// ordinates722 is the design spectrum at the 22 periods, in g, from what is
// given: 2/3 of MCE_R ordinates.
func ordinates722(in Given, p *problems) []float64 {
	T, psa := in.Columns["T"], in.Columns["PSA"]
	if len(T) != len(psa) {
		p.fail("PSA", "", "has %d rows where T has %d", len(psa), len(T))
		return nil
	}
	for i := 1; i < len(T); i++ {
		if !(T[i] > T[i-1]) {
			p.fail("T", "", "row %d (%v s) does not follow row %d (%v s): periods must increase", i+1, T[i], i, T[i-1])
			return nil
		}
	}
	has := func(list []float64, x float64) bool {
		for _, y := range list {
			if near(x, y, 1e-9) {
				return true
			}
		}
		return false
	}
	only := func(list, other []float64) string {
		var words []string
		for _, x := range list {
			if !has(other, x) {
				words = append(words, quantity.Plain(x))
			}
		}
		return strings.Join(words, ", ")
	}
	missing, extra := only(periods722, T), only(T, periods722)
	var said []string
	if missing != "" {
		said = append(said, "missing: "+missing+" s")
	}
	if extra != "" {
		said = append(said, "not among them: "+extra+" s")
	}
	if said != nil {
		p.fail("T", "a spectrum at other periods is read with  table: FILE", "the multi-period spectrum has 22 periods from 0 to 10 s; %s", strings.Join(said, "; "))
		return nil
	}
	factor := 1.0
	switch in.Texts["ordinates_of"] {
	case "MCE_R":
		factor = 2.0 / 3
	case "design":
	default:
		p.fail("ordinates_of", "write MCE_R or design", "is missing: say which spectrum the ordinates are of")
		return nil
	}
	sa := make([]float64, len(psa))
	for i := range psa {
		sa[i] = factor * psa[i] / quantity.Gravity
	}
	return sa
}

// window is where T S_a is searched for S_D1: from 1 s to its end, s; 0: not
// known.
type window struct {
	to  float64
	why string
}

// siteWindow follows from the shear wave velocity or the site class: 1 s to 2 s
// on ground faster than 1450 ft/s, else to 5 s. It holds the two to each other.
func siteWindow(in Given, p *problems) window {
	site, hasSite := in.Texts["site"]
	v, hasV := in.number("vs30")
	slowest := map[string]float64{}
	for _, s := range sites722 {
		slowest[s.class] = s.from * foot
	}
	from, ranked := slowest[site]
	if of := siteOf722(v); hasV && ranked && of != site {
		p.fail("vs30", "give one of the two", "%s m/s is of site class %s, not %s", quantity.Short(v), of, site)
	}
	switch {
	case hasV && above(v, 1450*foot):
		return window{2, "v_s30 above 442 m/s"}
	case hasV:
		return window{5, "v_s30 up to 442 m/s"}
	case !hasSite:
		return window{}
	case site == "F":
		return window{5, "site class F"}
	case site == "default":
		return window{5, "the default site class, which stands for C, CD and D: the longer range"}
	case from >= 1450*foot:
		return window{2, "site class " + site}
	}
	return window{5, "site class " + site}
}

// parameters derives S_DS and S_D1 from the ordinates sa of the design spectrum:
//
//	S_DS = 0.9 max S_a             0.2 s <= T <= 5 s
//	S_D1 = 0.9 max T S_a >= S_a(1 s)   1 s <= T <= 2 s or 5 s
//
// the maxima among the 22 periods. Values given stand if they agree.
func (w window) parameters(in Given, sa []float64, all map[string]found, p *problems) {
	if w.to == 0 {
		p.fail("site", "", "is missing: give site or vs30; the range of periods for S_D1 depends on it")
		return
	}
	var top, atTop, product, atProduct, one float64
	for i, T := range periods722 {
		if T >= 0.2 && T <= 5 && sa[i] > top {
			top, atTop = sa[i], T
		}
		if T >= 1 && T <= w.to && T*sa[i] > product {
			product, atProduct = T*sa[i], T
		}
		if T == 1 {
			one = sa[i]
		}
	}
	sds := found{value: 0.9 * top, formula: "0.9 * " + written(top), ref: of722("21.4"),
		doc: fmt.Sprintf("0.9 times the largest design ordinate from 0.2 s to 5 s, which is at %v s", atTop)}
	sd1 := found{value: math.Max(0.9*product, one), formula: "max(0.9 * " + written(product) + ", " + written(one) + ")", ref: of722("21.4"),
		doc: fmt.Sprintf("0.9 times the largest T S_a from 1 s to %v s (%s), which is at %v s; not less than S_a at 1 s", w.to, w.why, atProduct)}
	for _, x := range []struct {
		mce, des string
		found    found
	}{{"S_MS", "S_DS", sds}, {"S_M1", "S_D1", sd1}} {
		d := x.found
		m, g, given := in.pair(p, x.mce, x.des)
		if !given {
			all[x.des], all[x.mce] = d, found{value: 1.5 * d.value, formula: "1.5 * " + x.des}
			continue
		}
		if !near(g.value, d.value, agree) {
			symbol := x.des
			if _, ok := in.number(x.des); !ok {
				symbol = x.mce
			}
			p.fail(symbol, "leave it away, or see whether the ordinates are of this site", "%s = %s does not agree with the ordinates, which give %s", x.des, quantity.Short(g.value), quantity.Short(d.value))
		}
		all[x.des], all[x.mce] = g, m
	}
}

// multiPeriod is the spectrum through the design ordinates sa (g), times factor:
// linear between the 22 periods; beyond 10 s as 1/T up to T_L and as T_L/T² past
// it. Where T_L lies below 10 s, as 1/T² from 10 s.
func multiPeriod(sa []float64, tl, factor float64) []Branch {
	ref := of722("11.4.5.1")
	var out []Branch
	for i := 1; i < len(sa); i++ {
		a, b := periods722[i-1], periods722[i]
		y, z := factor*sa[i-1], factor*sa[i]
		slope := (z - y) / (b - a)
		out = append(out, Branch{
			Name: fmt.Sprintf("%v s to %v s", a, b), From: a, To: b,
			A0: (y - slope*a) * quantity.Gravity, A1: slope * quantity.Gravity, Ref: ref,
			Formula: fmt.Sprintf("interp(T, [%s s, %s s], [%s, %s])", written(a), written(b), written(y), written(z)),
		})
	}
	last := factor * sa[len(sa)-1]
	tl = max(tl, 10)
	s10 := written(last)
	out = append(out,
		Branch{Name: "constant velocity", From: 10, To: tl, B1: 10 * last * quantity.Gravity, Ref: ref, Formula: s10 + " * 10 s / T"},
		Branch{Name: "constant displacement", From: tl, B2: 10 * tl * last * quantity.Gravity, Ref: ref, Formula: s10 + " * 10 s * " + written(tl) + " s / T^2"})
	return meeting(out)
}

// Ordinates are the MCE_R ordinates at the 22 periods as they were given, m/s², of a
// multi-period design spectrum made of them; nil of every other target.
func (t *Target) Ordinates() []float64 {
	if !t.MultiPeriod || t.Spectrum != "design" || t.Given.Texts["ordinates_of"] != "MCE_R" {
		return nil
	}
	return t.Given.Columns["PSA"]
}
