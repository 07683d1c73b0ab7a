package standard

import (
	"fmt"
	"math"

	"quoin/calc/cite"
	"quoin/calc/quantity"
)

// elasticBranches are the branches of the elastic spectrum:
//
//	S_e = a_g S [1 + T/T_B (2.5 eta - 1)]   T <= T_B        (3.2)
//	    = 2.5 eta a_g S                     T_B to T_C      (3.3)
//	    = 2.5 eta a_g S T_C/T               T_C to T_D      (3.4)
//	    = 2.5 eta a_g S T_C T_D/T²          T_D to 4 s      (3.5)
//
// With S = 1, a_vg in place of a_g and 3.0 in place of 2.5 they are the vertical
// spectrum, (3.8) to (3.11), which ends at 4 s. The horizontal one goes on where
// T_E is known, as the displacement spectrum of Annex A does: the last branch to
// T_E, then S_e = S_De (2π/T)². The constants 0.025 and 1/(4π²) differ, so the
// standard steps down by 1.3 % at T_E.
func (b *site1998) elasticBranches() []Branch {
	amplitude, ground, clauses := 2.5, "a_g * S", [4]string{"Eq. 3.2", "Eq. 3.3", "Eq. 3.4", "Eq. 3.5"}
	a := b.value("a_g") * b.value("S")
	if b.vertical {
		amplitude, ground, clauses = 3, "a_vg", [4]string{"Eq. 3.8", "Eq. 3.9", "Eq. 3.10", "Eq. 3.11"}
		a = b.value("a_vg")
	} else {
		b.all["d_g"] = b.displacement()
	}
	top := fmt.Sprintf("%v * eta", amplitude)
	out := b.four(a, amplitude*b.value("eta"), 1, ground, top, "1", clauses)
	last := &out[len(out)-1]
	last.To = 4
	te, ok := b.all["T_E"]
	if !ok {
		return meeting(out)
	}
	last.To = te.value
	// S_De in m and m/s over T in s, times (2π)²
	tf, square := b.value("T_F"), 4*math.Pi*math.Pi
	dg := b.value("d_g")
	slope := dg * (1 - 2.5*b.value("eta")) / (tf - te.value)
	annex := ofEN("Eqs. A.1, A.2")
	return append(meeting(out),
		Branch{Name: "towards the ground displacement", From: te.value, To: tf, Step: true, Ref: annex,
			B1: square * slope, B2: square * (2.5*b.value("eta")*dg - slope*te.value),
			Formula: "(2 * pi / T)^2 * 0.025 * a_g * S * T_C * T_D * (2.5 * eta + (T - T_E) / (T_F - T_E) * (1 - 2.5 * eta))"},
		Branch{Name: "ground displacement", From: tf, B2: square * dg, Ref: annex, Formula: "(2 * pi / T)^2 * d_g"})
}

// displacement is d_g = 0.025 a_g S T_C T_D, (3.12), m.
func (b *site1998) displacement() found {
	return found{value: 0.025 * b.value("a_g") * b.value("S") * b.value("T_C") * b.value("T_D"), formula: "0.025 * a_g * S * T_C * T_D"}
}

// designBranches are the branches of the design spectrum:
//
//	S_d = a_g S [2/3 + T/T_B (2.5/q - 2/3)]          T <= T_B    (3.13)
//	    = a_g S 2.5/q                                T_B to T_C  (3.14)
//	    = a_g S 2.5/q T_C/T        >= beta a_g       T_C to T_D  (3.15)
//	    = a_g S 2.5/q T_C T_D/T²   >= beta a_g       T > T_D     (3.16)
//
// The lower bound takes a_g, not a_g S. The vertical one has a_vg for a_g and
// S = 1 (3.2.2.5(5)). Where the bound governs, a branch of its own begins, at
// T_beta.
func (b *site1998) designBranches(t *Target) []Branch {
	ag, s, q, beta := b.value("a_g"), b.value("S"), b.value("q"), b.value("beta")
	ground, bound := "a_g * S", "beta * a_g"
	if b.vertical {
		ag, s, ground, bound = b.value("a_vg"), 1, "a_vg", "beta * a_vg"
	} else {
		b.all["d_g"] = b.displacement()
	}
	if beta*ag > 2.5/q*ag*s {
		b.fail("q", "see q and beta", "the lower bound beta = %s lies above the whole spectrum, 2.5 S/q = %s", quantity.Short(beta), quantity.Short(2.5*s/q))
		return nil
	}
	main := b.four(ag*s, 2.5/q, 2.0/3, ground, "2.5 / q", "2 / 3", [4]string{"Eq. 3.13", "Eq. 3.14", "Eq. 3.15", "Eq. 3.16"})
	floor := []Branch{{Name: "lower bound", From: b.value("T_C"), A0: beta * ag, Formula: bound, Ref: ofEN("3.2.2.5(4)")}}
	out := upper(meeting(main), floor)
	// where 2.5/q S T_C/T, or past T_D that times T_D/T, is down to beta
	ratio := 2.5 * s / (q * beta)
	soil := map[bool]string{false: " * S", true: ""}[b.vertical]
	tc, td := b.value("T_C"), b.value("T_D")
	from := found{value: ratio * tc, formula: "2.5" + soil + " * T_C / (q * beta)"}
	if from.value > td {
		from = found{value: math.Sqrt(ratio * tc * td), formula: "sqrt(2.5" + soil + " * T_C * T_D / (q * beta))"}
	}
	b.all["T_beta"] = from
	return out
}

// four are the branches that all spectra of EN 1998-1 have: start at zero
// period, top on the plateau, both over a (m/s²). The words are those of the
// formulas.
func (b *site1998) four(a, top, start float64, ground, topText, startText string, clauses [4]string) []Branch {
	tb, tc, td := b.value("T_B"), b.value("T_C"), b.value("T_D")
	ref := func(i int) cite.Ref { return ofEN(clauses[i]) }
	plateau := ground + " * " + topText
	return []Branch{
		{Name: "rise", To: tb, A0: a * start, A1: a * (top - start) / tb, Ref: ref(0),
			Formula: fmt.Sprintf("%s * (%s + T / T_B * (%s - %s))", ground, startText, topText, startText)},
		{Name: "plateau", From: tb, To: tc, A0: a * top, Ref: ref(1), Formula: plateau},
		{Name: "constant velocity", From: tc, To: td, B1: a * top * tc, Ref: ref(2), Formula: plateau + " * T_C / T"},
		{Name: "constant displacement", From: td, B2: a * top * tc * td, Ref: ref(3), Formula: plateau + " * T_C * T_D / T^2"},
	}
}
