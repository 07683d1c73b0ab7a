package document

import (
	"math"
	"testing"
)

// TestCombineByHand holds every exported value of a combine block to the
// two-storey building solved by hand: periods from the quadratic, shapes from
// the first equation of motion, the plateau of the spectrum at both, and the
// complete quadratic combination written out for two modes of equal damping
// (Der Kiureghian 1981, from memory).
func TestCombineByHand(t *testing.T) {
	_, res := runKinds(t, Options{})
	m1, m2, k1, k2, h1, h2 := 2000e3/9.80665, 150e3, 200e6, 120e6, 4.0, 3.0
	b := m1*k2 + m2*(k1+k2)
	root := math.Sqrt(b*b - 4*m1*m2*k1*k2)
	w := [2]float64{math.Sqrt((b - root) / (2 * m1 * m2)), math.Sqrt((b + root) / (2 * m1 * m2))}
	psa := 1.0 * 9.80665 // S_DS = 2/3 of 1.5, both periods on the plateau
	const reduction = 5.0
	modal := map[string][2][]float64{}
	add := func(name string, mode int, v ...float64) {
		rows := modal[name]
		rows[mode] = v
		modal[name] = rows
	}
	for i := range w {
		if T := 2 * math.Pi / w[i]; T < 0.2*0.6 || T > 0.6 {
			t.Fatalf("T = %v lies off the plateau", T)
		}
		phi1 := k2 / (k1 + k2 - w[i]*w[i]*m1) // with phi2 = 1
		gamma := (m1*phi1 + m2) / (m1*phi1*phi1 + m2)
		a := gamma * psa / reduction
		f1, f2 := m1*phi1*a, m2*a
		u1, u2 := phi1*a/(w[i]*w[i]), a/(w[i]*w[i])
		add("storey_force", i, f1, f2)
		add("storey_shear", i, f1+f2, f2)
		add("base_shear", i, f1+f2)
		add("base_shear_unscaled", i, f1+f2)
		add("overturning", i, f1*h1+f2*(h1+h2), f2*h2)
		add("displacement", i, u1, u2)
		add("drift", i, u1, u2-u1)
		add("drift_ratio", i, u1/h1, (u2-u1)/h2)
	}
	x, z := w[0]/w[1], 0.05
	rho := 8 * z * z * (1 + x) * math.Pow(x, 1.5) / (math.Pow(1-x*x, 2) + 4*z*z*x*math.Pow(1+x, 2))
	for name, rows := range modal {
		got := value(t, res.Package, "r."+name).Value.SI
		if len(got) != len(rows[0]) {
			t.Errorf("r.%s has %d items, want %d", name, len(got), len(rows[0]))
			continue
		}
		for i := range got {
			p, q := rows[0][i], rows[1][i]
			want := math.Sqrt(p*p + q*q + 2*rho*p*q)
			if math.Abs(got[i]/want-1) > 1e-10 {
				t.Errorf("r.%s[%d] = %v, want %v", name, i+1, got[i], want)
			}
		}
	}
	if got := value(t, res.Package, "r.scale_factor").Value.SI[0]; got != 1 {
		t.Errorf("scale_factor = %v without scale_to", got)
	}
}
