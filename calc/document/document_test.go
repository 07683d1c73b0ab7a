package document

import (
	"encoding/json"
	"math"
	"os"
	"reflect"
	"runtime"
	"testing"

	"quoin/calc/document/block"
	"quoin/calc/exhibit"
)

// runKinds runs the document that holds every kind and gives the run itself too.
func runKinds(t *testing.T, o Options) (*run, Result) {
	t.Helper()
	a, res := archive(t, "testdata/kinds.txtar")
	if res.Diagnostics.HasErrors() {
		t.Fatalf("errors:\n%s", text(res))
	}
	d := &run{src: Source{FS: filesOf(a), Main: "package.md"}, options: o, files: newFiles(filesOf(a)), names: map[string]*node{}, checked: map[string]*node{}}
	d.read()
	d.declare()
	d.link()
	d.execute()
	res = Run(Source{FS: filesOf(a), Main: "package.md"}, o)
	return d, res
}

// TestProductsRoundTrip holds every kind to products that survive encoding.
func TestProductsRoundTrip(t *testing.T) {
	d, _ := runKinds(t, Options{})
	seen := map[string]bool{}
	for _, n := range d.nodes {
		if n.kind != blockNode {
			continue
		}
		seen[n.def.Name] = true
		if n.def.Product == nil {
			if n.result.Made != nil {
				t.Errorf("%s makes a product that its kind does not name", n.def.Name)
			}
			continue
		}
		data, err := json.Marshal(n.result.Made)
		if err != nil {
			t.Errorf("%s: %v", n.name, err)
			continue
		}
		back := n.def.Product()
		if err := json.Unmarshal(data, back); err != nil {
			t.Errorf("%s: %v", n.name, err)
			continue
		}
		if again, _ := json.Marshal(back); string(again) != string(data) {
			t.Errorf("%s: the product changes when encoded and decoded", n.name)
		}
		if reflect.TypeOf(back) != reflect.TypeOf(n.result.Made) {
			t.Errorf("%s: product %T, the kind says %T", n.name, n.result.Made, back)
		}
	}
	for _, k := range block.Kinds {
		if !seen[k.Name] {
			t.Errorf("no block of kind %s in testdata/kinds.txtar: add one", k.Name)
		}
	}
}

// TestPackageRoundTrips: exhibits are plain data.
func TestPackageRoundTrips(t *testing.T) {
	_, res := runKinds(t, Options{})
	data, err := json.Marshal(res.Package)
	if err != nil {
		t.Fatal(err)
	}
	var back exhibit.Package
	if err := json.Unmarshal(data, &back); err != nil {
		t.Fatal(err)
	}
	if again, _ := json.Marshal(back); string(again) != string(data) {
		t.Error("the package changes when encoded and decoded")
	}
	if len(res.Package.Values) == 0 || len(res.Package.Series) == 0 || len(res.Package.Checks) == 0 {
		t.Error("the package is empty")
	}
}

// TestRunsRepeat: Run is re-entrant, and the order in which nodes run leaves no trace.
func TestRunsRepeat(t *testing.T) {
	_, first := runKinds(t, Options{})
	want, _ := json.Marshal(first.Package)
	defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(0))
	for _, procs := range []int{1, 2, 8} {
		runtime.GOMAXPROCS(procs)
		done := make(chan []byte, 4)
		for range cap(done) {
			go func() {
				a, _ := archive(t, "testdata/kinds.txtar")
				res := Run(Source{FS: filesOf(a), Main: "package.md"}, Options{})
				data, _ := json.Marshal(res.Package)
				done <- data
			}()
		}
		for range cap(done) {
			if string(<-done) != string(want) {
				t.Fatalf("with %d processors the package differs", procs)
			}
		}
	}
}

// TestRegistry: every value has an origin; what it depends on is known.
func TestRegistry(t *testing.T) {
	_, res := runKinds(t, Options{})
	p := res.Package
	known := map[string]bool{}
	for i, e := range p.Values {
		known[e.ID] = true
		if i > 0 && p.Values[i-1].ID >= e.ID {
			t.Errorf("%s is out of order", e.ID)
		}
		if e.Place.Line == 0 || e.Place.File == "" || e.Anchor == "" {
			t.Errorf("%s has no place", e.ID)
		}
	}
	for _, c := range p.Chapters {
		for _, pc := range c.Pieces {
			if pc.Block != nil && pc.Block.Name != "" {
				known[pc.Block.Name] = true
			}
		}
	}
	for _, e := range p.Values {
		for _, dep := range e.Depends {
			if !known[dep] {
				t.Errorf("%s depends on %s, which is not there", e.ID, dep)
			}
		}
	}
	if got := value(t, p, "V").Place; got.File != "more.md" {
		t.Errorf("V is placed in %s", got.File)
	}
	if got := value(t, p, "V").Depends; !reflect.DeepEqual(got, []string{"r.storey_force"}) {
		t.Errorf("V depends on %v", got)
	}
}

func value(t *testing.T, p *exhibit.Package, id string) exhibit.Entry {
	t.Helper()
	for _, e := range p.Values {
		if e.ID == id {
			return e
		}
	}
	t.Fatalf("no value %s", id)
	return exhibit.Entry{}
}

// TestTwoStoreys holds the chain to a hand calculation: a two-storey building
// whose periods follow from a quadratic, read on the plateau of the spectrum.
func TestTwoStoreys(t *testing.T) {
	_, res := runKinds(t, Options{})
	p := res.Package
	m1, m2 := 2000e3/9.80665, 150e3
	k1, k2 := 200e6, 120e6
	// w⁴ m1 m2 - w² (m1 k2 + m2 (k1 + k2)) + k1 k2 = 0
	b := m1*k2 + m2*(k1+k2)
	root := math.Sqrt(b*b - 4*m1*m2*k1*k2)
	for i, w2 := range []float64{(b - root) / (2 * m1 * m2), (b + root) / (2 * m1 * m2)} {
		want := 2 * math.Pi / math.Sqrt(w2)
		if got := value(t, p, "m.T").Value.SI[i]; math.Abs(got/want-1) > 1e-12 {
			t.Errorf("T[%d] = %v, want %v", i+1, got, want)
		}
	}
	if got := value(t, p, "design.S_DS").Value.SI[0]; math.Abs(got-1) > 1e-15 {
		t.Errorf("S_DS = %v, want 1 (2/3 of 1.5)", got)
	}
	// The largest |a| of east.csv, scaled by 1.5, in m/s².
	if got := value(t, p, "east.pga").Value.SI[0]; math.Abs(got-0.15) > 1e-15 {
		t.Errorf("east.pga = %v, want 0.15", got)
	}
	if got := value(t, p, "east.samples").Value.SI[0]; got != 3 {
		t.Errorf("east.samples = %v, want 3 (from 0.01 s)", got)
	}
	if n := len(value(t, p, "p").Value.SI); n != 7 {
		t.Errorf("p has %d items, want the 5 of the grid and 2 included", n)
	}
}

// TestOverrides: a name and a block's field set from outside; all that follows follows.
func TestOverrides(t *testing.T) {
	_, plain := runKinds(t, Options{})
	_, set := runKinds(t, Options{Overrides: []exhibit.Override{{Name: "r.R", Text: "10"}, {Name: "V", Text: "7 MN"}}})
	before, after := value(t, plain.Package, "r.base_shear").Value.SI[0], value(t, set.Package, "r.base_shear").Value.SI[0]
	if math.Abs(before/after-2) > 1e-12 {
		t.Errorf("R doubled, base shear from %v to %v", before, after)
	}
	if got := value(t, set.Package, "V").Value.SI[0]; got != 7e6 {
		t.Errorf("V = %v, want 7 MN", got)
	}
	o := set.Package.Provenance.Overrides
	if o[0].Was != "5" || o[1].Was != "sum(r.storey_force)" {
		t.Errorf("replaced %q and %q", o[0].Was, o[1].Was)
	}
	// Both ends of a dependency set at once.
	_, both := runKinds(t, Options{Overrides: []exhibit.Override{{Name: "V", Text: "2 * p[1] * 1 t"}, {Name: "p", Text: "[1 g, 2 g, 3 g, 4 g, 5 g, 6 g, 7 g]"}}})
	if got := value(t, both.Package, "V").Value.SI[0]; math.Abs(got-2*9.80665*1000) > 1e-9 {
		t.Errorf("V = %v N, want 2 g of 1 t", got)
	}
	a, _ := archive(t, "testdata/kinds.txtar")
	bad := Run(Source{FS: filesOf(a), Main: "package.md"}, Options{Overrides: []exhibit.Override{{Name: "W", Text: "1"}, {Name: "V", Text: "7 m"}, {Name: "frame.damping", Text: "x +"}}})
	if n := len(bad.Diagnostics); bad.Package != nil || n < 3 {
		t.Errorf("%d diagnostics for three faulty overrides:\n%s", n, text(bad))
	}
}

// TestCautions: the standing statements are always there, the triggered ones
// name their blocks.
func TestCautions(t *testing.T) {
	_, res := runKinds(t, Options{})
	keys := map[string][]string{}
	for _, c := range res.Package.Cautions {
		keys[c.Key] = c.Blocks
	}
	for _, s := range standing {
		if _, ok := keys[s.key]; !ok {
			t.Errorf("the standing caution %s is missing", s.key)
		}
	}
	for _, k := range []string{"reduced", "fixed-base", "planar", "combined", "open-assumption", "table-target"} {
		if len(keys[k]) == 0 {
			t.Errorf("the caution %s names no block", k)
		}
	}
}

// BenchmarkExample runs the first example: what check costs, and what a live
// preview would.
func BenchmarkExample(b *testing.B) {
	root, err := os.OpenRoot("../../examples/four-storey")
	if err != nil {
		b.Fatal(err)
	}
	defer root.Close()
	for b.Loop() {
		if res := Run(Source{FS: root.FS(), Main: "package.md"}, Options{}); res.Package == nil {
			b.Fatalf("errors:\n%s", text(res))
		}
	}
}
