package document

import (
	"math"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

const head = "---\nquoin: 1\ntitle: T\n---\n"

// ran runs a document of these blocks with further files, which must be sound.
func ran(t *testing.T, body string, files map[string]string, set ...exhibit.Override) *exhibit.Package {
	t.Helper()
	return book(t, head+body, files, set...)
}

// book is ran for a main file with its front matter.
func book(t *testing.T, main string, files map[string]string, set ...exhibit.Override) *exhibit.Package {
	t.Helper()
	fs := fstest.MapFS{"package.md": {Data: []byte(main)}}
	for name, text := range files {
		fs[name] = &fstest.MapFile{Data: []byte(text)}
	}
	res := Run(Source{FS: fs, Main: "package.md"}, Options{Overrides: set})
	if res.Package == nil {
		t.Fatalf("errors:\n%s", text(res))
	}
	return res.Package
}

// calc is a block.
func calc(opens string, lines ...string) string {
	return "\n```calc " + opens + "\n" + strings.Join(lines, "\n") + "\n```\n"
}

// near holds values of the registry to what they should be, SI, within a
// relative tolerance.
func near(t *testing.T, p *exhibit.Package, tolerance float64, want map[string][]float64) {
	t.Helper()
	for id, w := range want {
		got := value(t, p, id).Value.SI
		if len(got) != len(w) {
			t.Errorf("%s = %v, want %v", id, got, w)
			continue
		}
		for i := range w {
			if math.Abs(got[i]-w[i]) > tolerance*math.Max(math.Abs(w[i]), 1e-300) {
				t.Errorf("%s[%d] = %.15g, want %.15g: off by %.3g, at most %.3g", id, i+1, got[i], w[i], got[i]/w[i]-1, tolerance)
			}
		}
	}
}

// sawtooth is 0, 3, -3, 0 m/s² at 0, 1, 2, 3 s: every measure of it follows by hand.
const sawtooth = "t [s],a [m/s^2]\n0,0\n1,3\n2,-3\n3,0\n"

// TestRecordByHand: with a linear between samples, v is 1.5 at 1 s and largest,
// 2.25, at 1.5 s; it stays positive, so d is largest at the end, twice its 1.5 at
// the middle by symmetry. The integral of a² is 3 over each second.
func TestRecordByHand(t *testing.T) {
	p := ran(t, calc("record r", "file: r.csv"), map[string]string{"r.csv": sawtooth})
	at75, at95 := 3-math.Cbrt(0.75), 3-math.Cbrt(0.15)
	near(t, p, 1e-12, map[string][]float64{
		"r.pga": {3}, "r.pgv": {2.25}, "r.pgd": {3}, "r.step": {1}, "r.samples": {4}, "r.duration": {3},
		"r.arias": {math.Pi / (2 * 9.80665) * 9}, "r.cav": {4.5},
		"r.d5_75": {at75 - math.Cbrt(0.15)}, "r.d5_95": {at95 - math.Cbrt(0.15)},
	})
	series(t, p, "r.a", []float64{0, 3, -3, 0})
	series(t, p, "r.v", []float64{0, 1.5, 1.5, 0})
	series(t, p, "r.d", []float64{0, 0.5, 2.5, 3})
	if !warned(p, "displacement-drift") {
		t.Error("a displacement that is largest at the end is not warned of")
	}

	cut := ran(t, calc("record r", "file: r.csv", "from: 1 s", "to: 2 s", "scale: -2"), map[string]string{"r.csv": sawtooth})
	series(t, cut, "r.a", []float64{-6, 6})
	near(t, cut, 1e-12, map[string][]float64{"r.duration": {1}, "r.samples": {2}, "r.pga": {6}})

	// A whole cycle of 2 Hz by its frequency and by its period are one. Straight
	// lines between samples lose (ω dt)²/12 = 1.3e-5 of the velocity.
	for _, words := range []string{"frequency: 2 Hz", "period: 0.5 s"} {
		sine := ran(t, calc("record s", "form: sine", "amplitude: 0.1 g", words, "cycles: 1", "step: 0.001 s"), nil)
		near(t, sine, 2e-5, map[string][]float64{"s.duration": {0.5}, "s.pga": {0.980665}, "s.pgv": {0.980665 / (2 * math.Pi)}})
	}
}

func series(t *testing.T, p *exhibit.Package, id string, want []float64) {
	t.Helper()
	for _, c := range p.Series {
		if c.ID == id {
			if !slices.EqualFunc(c.Y.SI, want, func(a, b float64) bool { return math.Abs(a-b) < 1e-12 }) {
				t.Errorf("%s = %v, want %v", id, c.Y.SI, want)
			}
			return
		}
	}
	t.Errorf("no series %s", id)
}

func warned(p *exhibit.Package, code string) bool {
	for _, d := range p.Warnings {
		if d.Code == code {
			return true
		}
	}
	return false
}

// TestHousner: the integral of PSV at 5 % damping from 0.1 to 2.5 s by trapezoids
// of 0.01 s, over the ordinates of a spectrum block.
func TestHousner(t *testing.T) {
	p := ran(t, calc("record s", "form: half_sine", "amplitude: 0.2 g", "duration: 0.5 s", "step: 0.01 s")+
		calc("periods g", "from: 0.1 s", "to: 2.5 s", "count: 241", "spacing: linear")+
		calc("spectrum rs", "record: s", "periods: g"), nil)
	for _, c := range p.Series {
		if c.ID != "rs.PSV@5%" {
			continue
		}
		sum := 0.0
		for i := 1; i < len(c.X.SI); i++ {
			sum += (c.X.SI[i] - c.X.SI[i-1]) * (c.Y.SI[i] + c.Y.SI[i-1]) / 2
		}
		near(t, p, 1e-9, map[string][]float64{"s.housner": {sum}})
		return
	}
	t.Error("no series rs.PSV@5%")
}

// TestSpectrumFunctions: every ordinate is what its name says, in the functions
// and in the series: PSV = ω SD, PSA = ω² SD; heavy damping holds SV and SA apart
// from them (the largest ω² u comes where u̇ = 0, so SA is not less than PSA).
func TestSpectrumFunctions(t *testing.T) {
	p := ran(t, calc("record r", "file: r.csv")+
		calc("periods g", "values: [0.5 s, 2 s]", "include: 1 s")+
		calc("spectrum rs", "record: r", "periods: g", "damping: [40 %, 5 %]")+
		calc("formula f", "psa = rs.PSA(1 s)", "psv = rs.PSV(1 s)", "sd = rs.SD(1 s)", "sv = rs.SV(1 s)", "sa = rs.SA(1 s)", "light = rs.PSA(1 s, 5 %)", "all = rs.PSA(g.T, 5 %)", "off = rs.PSA(0.8 s)"),
		map[string]string{"r.csv": sawtooth})
	get := func(id string) float64 { return value(t, p, id).Value.SI[0] }
	w := 2 * math.Pi
	near(t, p, 1e-12, map[string][]float64{"g.T": {0.5, 1, 2}, "psv": {w * get("sd")}, "psa": {w * w * get("sd")}})
	if !(get("sa") > 1.01*get("psa")) || math.Abs(get("light")/get("psa")-1) < 1e-2 || math.Abs(get("sv")/get("psv")-1) < 1e-3 || get("off") == get("psa") {
		t.Errorf("PSA %v, SA %v, PSV %v, SV %v, PSA at 5 %% %v", get("psa"), get("sa"), get("psv"), get("sv"), get("light"))
	}
	for what, name := range map[string]string{"PSA": "psa", "PSV": "psv", "SD": "sd", "SV": "sv", "SA": "sa"} {
		for _, c := range p.Series {
			if c.ID == "rs."+what+"@40%" && math.Abs(c.Y.SI[1]/get(name)-1) > 1e-12 {
				t.Errorf("%s at 1 s is %v, the function gives %v", c.ID, c.Y.SI[1], get(name))
			}
		}
	}
	var most, at float64
	for _, c := range p.Series {
		if c.ID == "rs.PSA@40%" {
			most = slices.Max(c.Y.SI)
			at = c.X.SI[slices.Index(c.Y.SI, most)]
		}
	}
	near(t, p, 1e-12, map[string][]float64{"rs.max_PSA": {most}, "rs.T_at_max": {at}, "light": {value(t, p, "all").Value.SI[1]}})
}

// TestGrids: equal ratios by default, equal steps if asked, values as given.
func TestGrids(t *testing.T) {
	p := ran(t, calc("periods a", "from: 0.1 s", "to: 1.6 s", "count: 5")+
		calc("periods b", "from: 0.1 s", "to: 0.5 s", "count: 5", "spacing: linear", "include: 0.45 s")+
		calc("periods c", "values: [2 s, 0.5 s]", "include: [1 s, 2 s]"), nil)
	near(t, p, 1e-14, map[string][]float64{"a.T": {0.1, 0.2, 0.4, 0.8, 1.6}, "b.T": {0.1, 0.2, 0.3, 0.4, 0.45, 0.5}, "c.T": {0.5, 1, 2}})
}

// TestStructureAndModesByHand: the two-storey building of testdata/kinds.txtar.
func TestStructureAndModesByHand(t *testing.T) {
	_, res := runKinds(t, Options{})
	const g = 9.80665
	m1, m2, k1, k2 := 2000e3/g, 150e3, 200e6, 120e6
	b := m1*k2 + m2*(k1+k2)
	root := math.Sqrt(b*b - 4*m1*m2*k1*k2)
	want := map[string][]float64{
		"frame.weight": {2000e3 + 150e3*g}, "frame.mass": {m1 + m2}, "frame.h_n": {7}, "frame.w": {2000e3, 150e3 * g}, "frame.m": {m1, m2},
		"frame.h": {4, 7}, "frame.h_s": {4, 3}, "frame.k_s": {k1, k2}, "frame.damping": {0.05},
		"same.m": {200e3, 150e3}, "same.k_s": {k1, k2}, "same.h": {4, 7},
		"reg.open": {1}, "reg.count": {2},
	}
	sum := 0.0
	for _, w2 := range []float64{(b - root) / (2 * m1 * m2), (b + root) / (2 * m1 * m2)} {
		p1, p2 := k2/(k1+k2-w2*m1), 1.0
		if math.Abs(p1) > 1 {
			p1, p2 = 1, 1/p1
		}
		l, m := m1*p1+m2*p2, m1*p1*p1+m2*p2*p2
		ratio := l * l / m / (m1 + m2)
		sum += ratio
		for id, x := range map[string][]float64{"m.T": {2 * math.Pi / math.Sqrt(w2)}, "m.omega": {math.Sqrt(w2)}, "m.gamma": {l / m}, "m.mass_ratio": {ratio}, "m.mass_sum": {sum}, "m.phi": {p1, p2}} {
			want[id] = append(want[id], x...)
		}
	}
	near(t, res.Package, 1e-10, want)
	if phi := value(t, res.Package, "m.phi").Value; phi.Shape != quantity.Rows || phi.Width != 2 {
		t.Errorf("phi is %v of width %d", phi.Shape, phi.Width)
	}

	p := ran(t, calc("structure s", "storeys: s.csv"), map[string]string{"s.csv": "level,height [m],weight [kN],stiffness [kN/mm]\nL1,4,980.665,100\n"})
	near(t, p, 1e-12, map[string][]float64{"s.w": {980665}, "s.mass": {100e3}, "s.k_s": {100e6}})
}

// one is a building of one storey, 0.5 s, and a spectrum that is flat there.
var one = calc("structure s", "storeys: [{level: L1, height: 4 m, mass: 100 t, stiffness: 4 * pi^2 / 0.25 * 100 kN/m}]", "damping: 5 %") +
	calc("modes m", "structure: s") + calc("target d", "basis: ASCE/SEI 7-22", "S_DS: 1.2", "S_D1: 0.9", "T_L: 6 s")

// TestCombineOneStorey: a single mass has the force m S_DS g I_e / R.
func TestCombineOneStorey(t *testing.T) {
	const g = 9.80665
	v := 100e3 * 1.2 * g * 1.25 / 4
	u := 1.2 * g * 1.25 / 4 * 0.25 / (4 * math.Pi * math.Pi)
	p := ran(t, one+calc("combine c", "modes: m", "target: d", "R: 4", "I_e: 1.25")+
		calc("combine up", "modes: m", "target: d", "R: 4", "I_e: 1.25", "scale_to: 500 kN")+
		calc("combine down", "modes: m", "target: d", "R: 4", "I_e: 1.25", "scale_to: 300 kN"), nil)
	near(t, p, 1e-12, map[string][]float64{
		"m.T": {0.5}, "d.T_0": {0.15}, "d.T_S": {0.75}, "d.damping": {0.05}, "d.S_DS": {1.2}, "d.S_D1": {0.9}, "d.T_L": {6},
		"c.base_shear": {v}, "c.base_shear_unscaled": {v}, "c.scale_factor": {1}, "c.overturning": {4 * v}, "c.storey_force": {v}, "c.storey_shear": {v},
		"c.displacement": {u}, "c.drift": {u}, "c.drift_ratio": {u / 4},
		"up.base_shear": {500e3}, "up.base_shear_unscaled": {v}, "up.scale_factor": {500e3 / v}, "up.storey_force": {500e3}, "up.overturning": {2000e3}, "up.drift": {u},
		"down.base_shear": {v}, "down.scale_factor": {1},
	})
}

// TestCombineDamping: a spectrum is read at the damping given, else that of the
// structure, else its own first.
func TestCombineDamping(t *testing.T) {
	records := calc("record r", "file: r.csv") + calc("periods g", "values: 0.5 s") + calc("spectrum rs", "record: r", "periods: g", "damping: [2 %, 10 %]")
	bare := strings.Replace(one, "damping: 5 %", "", 1)
	lines := calc("formula f", "a2 = rs.PSA(0.5 s, 2 %)", "a5 = rs.PSA(0.5 s, 5 %)", "a10 = rs.PSA(0.5 s, 10 %)")
	for _, c := range []struct{ building, given, want string }{{one, "", "a5"}, {bare, "", "a2"}, {one, "damping: 10 %", "a10"}, {bare, "damping: 5 %", "a5"}} {
		p := ran(t, c.building+records+lines+calc("combine c", "modes: m", "spectrum: rs", c.given), map[string]string{"r.csv": sawtooth})
		near(t, p, 1e-9, map[string][]float64{"c.base_shear": {100e3 * value(t, p, c.want).Value.SI[0]}})
	}
}

// TestTargetTable: columns by number, units from the document or the head.
func TestTargetTable(t *testing.T) {
	for head, fields := range map[string]string{"T [s],PSA [g]": "", "x,y": "units: [s, g]", "Sa [g],T [s]": "columns: [T, Sa]", "z,T [s],Sa [g]": "columns: [2, 3]"} {
		row := func(T, a string) string {
			switch head[0] {
			case 'S':
				return a + "," + T + "\n"
			case 'z':
				return "7," + T + "," + a + "\n"
			}
			return T + "," + a + "\n"
		}
		p := ran(t, calc("target d", "table: t.csv", fields, "damping: 5 %")+calc("formula f", "a = d.PSA(1.5 s)"), map[string]string{"t.csv": head + "\n" + row("0", "0.4") + row("1", "1") + row("3", "0.2")})
		near(t, p, 1e-12, map[string][]float64{"a": {0.8 * 9.80665}, "d.damping": {0.05}})
	}
}

// TestRefused: what a block does not compute, by the code of its error.
func TestRefused(t *testing.T) {
	undamped := strings.Replace(one, "damping: 5 %", "damping: 0 %", 1)
	rs := calc("record r", "file: r.csv") + calc("periods g", "values: 0.5 s") + calc("spectrum rs", "record: r", "periods: g", "damping: 0 %")
	for name, c := range map[string]struct{ body, code string }{
		"CQC without damping":       {undamped + rs + calc("combine c", "modes: m", "spectrum: rs"), "damping"},
		"SRSS without damping":      {undamped + rs + calc("combine c", "modes: m", "spectrum: rs", "rule: SRSS"), ""},
		"a target at 2 %":           {one + calc("combine c", "modes: m", "target: d", "damping: 2 %"), "target-damping"},
		"a standard at 2 %":         {calc("target d", "basis: ASCE/SEI 7-22", "S_DS: 1.2", "S_D1: 0.9", "T_L: 6 s", "damping: 2 %"), "target-damping"},
		"a standard at 5 %":         {calc("target d", "basis: ASCE/SEI 7-22", "S_DS: 1.2", "S_D1: 0.9", "T_L: 6 s", "damping: 5 %"), ""},
		"direction y":               {one + calc("combine c", "modes: m", "target: d", "direction: y"), "direction"},
		"units twice":               {calc("target d", "table: u.csv", "units: [s, g]", "damping: 5 %"), "table-units"},
		"scale of zero":             {calc("record r", "file: r.csv", "scale: 0"), "bounds"},
		"a period of zero":          {calc("record s", "form: sine", "amplitude: 1 g", "period: 0 s", "cycles: 1", "step: 0.01 s"), "bounds"},
		"a damping of 101 %":        {calc("record r", "file: r.csv") + calc("periods g", "values: 0.5 s") + calc("spectrum rs", "record: r", "periods: g", "damping: 101 %"), "bounds"},
		"verified by no one":        {calc("assumptions a", "- {id: A, text: x, status: verified}"), "verified-by"},
		"an assumption twice":       {calc("assumptions a", "- {id: A, text: x, status: open}", "- {id: A, text: y, status: open}"), "assumption-twice"},
		"more modes than levels":    {one + calc("modes more", "structure: s", "count: 2"), "bounds"},
		"more values than a grid's": {calc("periods g", "from: 0.1 s", "to: 1 s", "count: 20001"), "bounds"},
	} {
		fs := fstest.MapFS{"package.md": {Data: []byte(head + c.body)}, "r.csv": {Data: []byte(sawtooth)}, "u.csv": {Data: []byte("T [s],a [m/s^2]\n0,1\n1,1\n")}}
		res := Run(Source{FS: fs, Main: "package.md"}, Options{})
		var got []string
		for _, d := range res.Diagnostics {
			if d.Severity == diag.Error {
				got = append(got, d.Code)
			}
		}
		if strings.Join(got, " ") != c.code || (res.Package == nil) != (c.code != "") {
			t.Errorf("%s: errors %v, want %q\n%s", name, got, c.code, text(res))
		}
	}
}

// TestCheckOnce: a check that differs in blanks only stands there already.
func TestCheckOnce(t *testing.T) {
	_, res := book2(head+calc("formula", "a = 3", "check a <= 4", "check a<=4", "check a < 4"), nil)
	if len(res.Diagnostics) != 1 || res.Diagnostics[0].Code != "check-twice" || res.Diagnostics[0].Range.Line != 9 {
		t.Errorf("%v", res.Diagnostics)
	}
	p := ran(t, calc("formula", "a = 3", "check a<=4"), nil)
	if p.Checks[0].ID != "a <= 4" {
		t.Errorf("the id of a check is %q", p.Checks[0].ID)
	}
}
