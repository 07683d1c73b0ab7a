package document

import (
	"math"
	"strings"
	"testing"
	"testing/fstest"

	"quoin/calc/exhibit"
)

// three is the frame of three storeys of CIVL 7119/8119 in every way that its
// matrices can be written.
var three = map[string]struct {
	body  string
	files map[string]string
}{
	"rows":     {calc("structure s", "elevation: [12 ft, 24 ft, 36 ft]", "mass: {unit: kip*s^2/in, diagonal: [2, 1.5, 1]}", "stiffness: {unit: kip/in, rows: [[300, -120, 0], [-120, 180, -60], [0, -60, 60]]}"), nil},
	"own unit": {calc("structure s", "elevation: \"[12, 24, 36] * 1 ft\"", "mass: [2 kip*s^2/in, 1.5 kip*s^2/in, 1 kip*s^2/in]", "stiffness:", "  rows:", "    - [300 kip/in, -120 kip/in, 0 kip/in]", "    - [-120 kip/in, 180 kip/in, -60 kip/in]", "    - [0 kip/in, -60 kip/in, 60 kip/in]"), nil},
	"weights":  {calc("structure s", "elevation: [12 ft, 24 ft, 36 ft]", "weight: \"[2, 1.5, 1] * 1 kip*s^2/in * 9.80665 m/s^2\"", "stiffness: {unit: kip/in, triplets: [[1, 1, 300], [2, 1, -120], [2, 2, 180], [3, 2, -60], [3, 3, 60]]}"), nil},
	"weights file": {calc("structure s", "elevation: [12 ft, 24 ft, 36 ft]", "weight: {file: w.csv, columns: [steel, 3]}", "stiffness: {unit: kip/in, rows: [[300, -120, 0], [-120, 180, -60], [0, -60, 60]]}"),
		map[string]string{"w.csv": "level,steel [kip],rest [N]\nL1,772.1771653543307,0\nL2,193.04429133858268,1717407.5788698574\nL3,0,1717407.5788698574\n"}},
	"files": {calc("structure s", "elevation: [12 ft, 24 ft, 36 ft]", "mass: {unit: kip*s^2/in, file: M.csv}", "stiffness: {unit: kip/in, file: K.csv}"),
		map[string]string{"M.csv": "\xef\xbb\xbf# mass\r\n2;0;0\r\n0;1.5;0\r\n0;0;1\r\n", "K.csv": "300,-120,0\n-120,180,-60\n0,-60,60\n"}},
	"triplet files": {calc("structure s", "elevation: [12 ft, 24 ft, 36 ft]", "mass: {file: M.csv}", "stiffness: K.csv"),
		map[string]string{"M.csv": "Row,Column,Value [kip*s^2/in]\n1,1,2\n2,2,1.5\n3,3,1\n", "K.csv": "row\tcolumn\tvalue [kip/in]\n1\t1\t300\n1\t2\t-120\n2\t1\t-120\n2\t2\t180\n2\t3\t-60\n3\t3\t60\n"}},
	"storeys": {calc("structure s", "storeys:", "  - {level: L1, height: 12 ft, mass: 2 kip*s^2/in, stiffness: 180 kip/in}", "  - {level: L2, height: 12 ft, mass: 1.5 kip*s^2/in, stiffness: 120 kip/in}", "  - {level: L3, height: 12 ft, mass: 1 kip*s^2/in, stiffness: 60 kip/in}"), nil},
}

// TestMatrixForms: however it is written it is one structure, with the frequencies
// computed for it in the units of the source.
func TestMatrixForms(t *testing.T) {
	unit := 175126.83524647637 // kip*s^2/in in kg, kip/in in N/m
	for name, c := range three {
		p := ran(t, c.body+calc("modes m", "structure: s"), c.files)
		near(t, p, 1e-9, map[string][]float64{
			"s.m": {2 * unit, 1.5 * unit, unit}, "s.w": {2 * unit * 9.80665, 1.5 * unit * 9.80665, unit * 9.80665}, "s.mass": {4.5 * unit}, "s.weight": {4.5 * unit * 9.80665},
			"s.h": {3.6576, 7.3152, 10.9728}, "s.h_s": {3.6576, 3.6576, 3.6576}, "s.h_n": {10.9728},
		})
		// seven decimals were given
		near(t, p, 1.2e-6, map[string][]float64{"m.mass_ratio": {0.8136194, 0.1443884, 0.0419923}})
		w := value(t, p, "m.omega").Value.SI
		for i, want := range []float64{21.087884, 96.395946, 212.51617} {
			if math.Abs(w[i]*w[i]-want) > 6e-6 {
				t.Errorf("%s: w²[%d] = %v, want %v", name, i+1, w[i]*w[i], want)
			}
		}
		storeys := name == "storeys"
		for _, v := range p.Values {
			if v.ID == "s.k_s" && !storeys {
				t.Errorf("%s: a model by matrices has storey stiffnesses", name)
			}
		}
	}
}

// TestNoStoreyStiffness: what a model by matrices cannot give is said where it is asked for.
func TestNoStoreyStiffness(t *testing.T) {
	body := three["rows"].body + calc("formula f", "k = s.k_s")
	res := Run(Source{FS: fstest.MapFS{"package.md": {Data: []byte(head + body)}}, Main: "package.md"}, Options{})
	if res.Package != nil || !strings.Contains(string(text(res)), "s gives no k_s with the fields it has") {
		t.Errorf("%s", text(res))
	}
}

// TestImportedModes: the printed modes of the frame by table, by rows and as the
// frame itself solves; the response of all three by one spectrum.
func TestImportedModes(t *testing.T) {
	target := calc("target d", "table: t.csv", "damping: 5 %") + calc("combine c", "modes: m", "target: d", "R: 4")
	files := map[string]string{"t.csv": "T [s],PSA [g]\n0,1\n5,1\n", "m.csv": "T [s],low,mid,top\n1.368,0.302,0.649,1\n0.640,0.679,0.607,-1\n0.431,2.44,-2.542,1\n"}
	fields := []string{"mass: \"[2, 1.5, 1] * 1 kip*s^2/in\"", "elevation: \"[12, 24, 36] * 1 ft\""}
	table := ran(t, calc("modes m", append([]string{"table: m.csv"}, fields...)...)+target, files)
	rows := ran(t, calc("modes m", append([]string{"periods: [1.368 s, 0.640 s, 0.431 s]", "shapes: [[0.302, 0.649, 1], [-0.679, -0.607, 1], \"[2.44, -2.542, 1]\"]"}, fields...)...)+target, files)
	solved := ran(t, three["rows"].body+calc("modes m", "structure: s")+target, files)
	for _, id := range []string{"m.T", "m.gamma", "m.mass_sum", "m.phi", "c.base_shear", "c.storey_shear", "c.overturning", "c.displacement", "c.drift", "c.drift_ratio"} {
		near(t, rows, 1e-12, map[string][]float64{id: value(t, table, id).Value.SI})
		near(t, rows, 4e-3, map[string][]float64{id: value(t, solved, id).Value.SI})
	}
	for _, p := range []*exhibit.Package{table, rows} {
		found := false
		for _, c := range p.Cautions {
			found = found || strings.Contains(c.Text, "imported and not computed here")
		}
		if !found {
			t.Error("the package does not say that its modes were imported")
		}
	}
	if labels := value(t, table, "c.drift").Value.Labels; strings.Join(labels, " ") != "low mid top" {
		t.Errorf("levels %v, want the heads of the table", labels)
	}
	two := ran(t, calc("modes m", append([]string{"table: m.csv", "count: 2", "levels: [a, b, c]"}, fields...)...), files)
	near(t, two, 0, map[string][]float64{"m.T": {1.368, 0.640}})
	if labels := value(t, two, "m.phi").Value.Labels; strings.Join(labels, " ") != "a b c" {
		t.Errorf("levels %v, want those of the document", labels)
	}
}

// TestResidualByHand: the frame with its first mode only and the missing mass:
// static forces M e ZPA with e by the published case, the shear they add, the
// displacement K u = f solved by hand.
func TestResidualByHand(t *testing.T) {
	const g, zpa, divisor = 9.80665, 0.3, 4.0
	files := map[string]string{"t.csv": "T [s],PSA [g]\n0,0.3\n1,0.9\n5,0.9\n"}
	body := three["rows"].body + calc("modes m", "structure: s", "count: 1") + calc("target d", "table: t.csv", "damping: 5 %") +
		calc("combine bare", "modes: m", "target: d", "R: 4") + calc("combine c", "modes: m", "target: d", "R: 4", "residual: missing mass") +
		calc("combine stated", "modes: m", "target: d", "R: 4", "residual: missing mass", "zpa: 0.6 g") +
		calc("combine whole", "modes: m", "target: d", "R: 4", "residual: missing mass", "rule: absolute") +
		calc("combine up", "modes: m", "target: d", "R: 4", "residual: missing mass", "scale_to: 5000 kip")
	p := ran(t, body, files)
	unit := 175126.83524647637
	force := []float64{1.14212448 * unit * zpa * g / divisor, 0.11761814 * unit * zpa * g / divisor, -0.42102973 * unit * zpa * g / divisor}
	v := []float64{force[0] + force[1] + force[2], force[1] + force[2], force[2]}
	drift := []float64{v[0] / 180 / unit, v[1] / 120 / unit, v[2] / 60 / unit}
	bare := func(name string) []float64 { return value(t, p, "bare."+name).Value.SI }
	srss := func(a, b []float64, f float64) []float64 {
		out := make([]float64, len(a))
		for i := range a {
			out[i] = math.Hypot(a[i], f*b[i])
		}
		return out
	}
	near(t, p, 1e-7, map[string][]float64{
		"c.base_shear": srss(bare("base_shear"), v[:1], 1), "c.storey_force": srss(bare("storey_force"), force, 1), "c.storey_shear": srss(bare("storey_shear"), v, 1), "c.drift": srss(bare("drift"), drift, 1),
		"stated.storey_shear": srss(bare("storey_shear"), v, 2), "whole.base_shear": {bare("base_shear")[0] + v[0]},
		"up.base_shear": {5000 * 4448.2216152605}, "up.base_shear_unscaled": srss(bare("base_shear"), v[:1], 1), "up.drift": srss(bare("drift"), drift, 1),
	})
	if !warned(p, "residual-amplified") || !warned(p, "mass-sum") {
		t.Error("no warning of amplified modes, or of missing mass without a residual")
	}

	record := calc("record r", "file: r.csv") + calc("periods g", "values: 0.5 s") + calc("spectrum rs", "record: r", "periods: g", "damping: 5 %")
	p = ran(t, three["rows"].body+calc("modes m", "structure: s", "count: 1")+record+calc("combine c", "modes: m", "spectrum: rs", "residual: missing mass")+calc("combine z", "modes: m", "spectrum: rs", "residual: missing mass", "zpa: 3 m/s^2"), map[string]string{"r.csv": sawtooth})
	near(t, p, 1e-12, map[string][]float64{"c.base_shear": value(t, p, "z.base_shear").Value.SI}) // its peak is 3 m/s²
}

// FuzzMatrixFile: no file of a matrix ends the program, and what is refused says where.
func FuzzMatrixFile(f *testing.F) {
	for _, s := range []string{"300,-120\n-120,120\n", "row,column,value [kN/m]\n1,1,300\n1,2,-1\n2,2,4\n", "1;2\n", "1e999,0\n0,1", "\"1\",2\n3,4", "row,column,value\n1.5,2,3\n1,1\n", "nan,1\n1,nan", "# x\n\n1\t0\n0\t1", "row,column,value [kN]\n"} {
		f.Add(s)
	}
	body := head + calc("structure s", "elevation: [3 m, 6 m]", "mass: [100 t, 100 t]", "stiffness: {unit: kN/m, file: K.csv}") + calc("modes m", "structure: s")
	f.Fuzz(func(t *testing.T, data string) {
		if len(data) > 1<<12 {
			return
		}
		res := Run(Source{FS: fstest.MapFS{"package.md": {Data: []byte(body)}, "K.csv": {Data: []byte(data)}}, Main: "package.md"}, Options{})
		for _, d := range res.Diagnostics {
			if d.Code == "internal" || d.Range.Line < 1 || d.Range.Column < 1 {
				t.Errorf("%q: %+v", data, d)
			}
		}
		if res.Package == nil && !res.Diagnostics.HasErrors() {
			t.Errorf("%q: neither a package nor an error", data)
		}
		if res.Package != nil {
			for _, v := range res.Package.Values {
				for _, x := range v.Value.SI {
					if math.IsNaN(x) || math.IsInf(x, 0) {
						t.Errorf("%q: %s = %v", data, v.ID, x)
					}
				}
			}
		}
	})
}
