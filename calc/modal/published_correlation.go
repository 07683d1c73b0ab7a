package modal

import (
	"fmt"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/published"
)

// correlationTable: damping of the lower mode, of the higher; pairs of
// x = w_low/w_high and coefficient.
const correlationTable = `
0.02 0.02 | 0.3 0.000824645 0.5 0.003007365 0.6 0.005774826 0.7 0.012098580 0.8 0.030815752 0.85 0.056811493 0.9 0.125699664 0.95 0.377985136 0.98 0.796707320 1 1
0.05 0.05 | 0.3 0.005127688 0.5 0.018486452 0.6 0.034996838 0.7 0.071032386 0.8 0.165634665 0.85 0.273290769 0.9 0.473027683 0.95 0.791406378 0.98 0.960735298 1 1
0.10 0.10 | 0.3 0.020143030 0.5 0.069837707 0.6 0.126292935 0.7 0.233564115 0.8 0.441692440 0.85 0.599788589 0.9 0.781523998 0.95 0.937963115 0.98 0.989848489 1 1
0.20 0.20 | 0.3 0.075180677 0.5 0.228559768 0.6 0.363092189 0.7 0.545753774 0.8 0.757187040 0.85 0.855219061 0.9 0.933768933 0.95 0.983495305 0.98 0.997404584 1 1
0.02 0.05 | 0.5 0.009449838 0.8 0.083974894 0.9 0.282396370 0.95 0.594127625 1 0.903507903
0.05 0.02 | 0.5 0.007087379 0.8 0.076340813 0.9 0.269937707 0.95 0.581211807 1 0.903507903
0.05 0.10 | 0.5 0.042553192 0.8 0.301682366 0.9 0.641451264 0.95 0.851075756 1 0.942809042
0.10 0.05 | 0.5 0.034042553 0.8 0.280133626 0.9 0.619332255 0.95 0.836650743 1 0.942809042
0.05 0.20 | 0.5 0.101015254 0.8 0.472304787 0.9 0.700316931 0.95 0.779407917 1 0.8
0.02 0.10 | 0.5 0.024076868 0.8 0.178119002 0.9 0.435184663 0.95 0.640909815 1 0.745355992`

func correlationCases() []published.Case {
	source := cite.To("Der Kiureghian 1981", "")
	var cases []published.Case
	for _, line := range strings.Split(strings.TrimSpace(correlationTable), "\n") {
		left, right, _ := strings.Cut(line, "|")
		var low, high float64
		fmt.Sscan(left, &low, &high)
		c := published.Case{
			ID:     fmt.Sprintf("cqc-%g-%g", 100*low, 100*high),
			Title:  fmt.Sprintf("CQC coefficient, damping %g %% of the lower and %g %% of the higher mode", 100*low, 100*high),
			Source: source, Origin: published.Computed,
			Inputs: []published.Input{{Name: "zeta_low", Value: low}, {Name: "zeta_high", Value: high}},
		}
		var xs []float64
		for pairs := strings.Fields(right); len(pairs) > 0; pairs = pairs[2:] {
			var x float64
			fmt.Sscan(pairs[0], &x)
			xs = append(xs, x)
			w := published.Rounded("rho, x = "+pairs[0], pairs[1], "")
			if len(pairs[1]) < 4 {
				w.Tol, w.Why = 1e-14, "exact"
			}
			c.Wants = append(c.Wants, w, w)
			c.Wants[len(c.Wants)-1].Name += ", higher mode first"
		}
		c.Compute = func() ([]float64, error) {
			var out []float64
			for _, x := range xs {
				out = append(out, Correlation(10*x, 10, low, high), Correlation(10, 10*x, high, low))
			}
			return out, nil
		}
		cases = append(cases, c)
	}
	return append(cases, published.Case{
		ID: "cqc-two-modes", Title: "Two modes of response 10 and -6 (or 6), 5 % damping",
		Source: source, Origin: published.Computed,
		Inputs: []published.Input{{Name: "R_1", Value: 10}, {Name: "R_2", Value: -6}, {Name: "zeta", Value: 0.05}},
		Wants: []published.Want{
			published.Rounded("SRSS", "11.6619038", ""), published.Rounded("absolute", "16", ""),
			published.Rounded("CQC, x = 0.9", "8.90149864", ""), published.Rounded("CQC, x = 0.9, same sign", "13.8839231", ""),
			published.Rounded("CQC, x = 0.95", "6.40556278", ""), published.Rounded("CQC, x = 0.95, same sign", "15.1976566", "")},
		Compute: func() ([]float64, error) {
			opposed, same := []float64{10, -6}, []float64{10, 6}
			near := Rho([]float64{9, 10}, []float64{0.05, 0.05})
			nearer := Rho([]float64{9.5, 10}, []float64{0.05, 0.05})
			return []float64{squares(opposed), absolute(opposed),
				quadratic(near, opposed), quadratic(near, same), quadratic(nearer, opposed), quadratic(nearer, same)}, nil
		},
	})
}
