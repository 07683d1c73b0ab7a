package document

import (
	"fmt"
	"maps"
	"reflect"
	"regexp"
	"slices"
	"strings"
	"sync"
	"testing"
	"testing/fstest"

	"pgregory.net/rapid"

	"quoin/calc/diag"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
)

// shelf is a cache in memory that counts.
type shelf struct {
	mu         sync.Mutex
	kept       map[string][]byte
	given, put int
	lose       func(key string) bool // what it does not give
}

func (s *shelf) Get(key string) ([]byte, bool) {
	s.mu.Lock()
	defer s.mu.Unlock()
	data, ok := s.kept[key]
	if ok && s.lose != nil && s.lose(key) {
		return nil, false
	}
	if ok {
		s.given++
	}
	return slices.Clone(data), ok
}

func (s *shelf) Put(key string, data []byte) {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.kept == nil {
		s.kept = map[string][]byte{}
	}
	s.kept[key] = slices.Clone(data)
	s.put++
}

// pages is a document with its data files, to be edited.
type pages map[string]string

func kindsPages(t *testing.T) pages {
	a, _ := archive(t, "testdata/kinds.txtar")
	p := pages{}
	for _, f := range a.Files {
		if f.Name != "want" {
			p[f.Name] = string(f.Data)
		}
	}
	return p
}

func (p pages) run(c Cache) Result {
	m := fstest.MapFS{}
	for name, text := range p {
		m[name] = &fstest.MapFile{Data: []byte(text)}
	}
	return Run(Source{FS: m, Main: "package.md"}, Options{Cache: c})
}

// everything is all that a run gives, to the bit.
func everything(r Result) string {
	var files []string
	for _, name := range slices.Sorted(maps.Keys(r.Files)) {
		files = append(files, name, string(r.Files[name]))
	}
	return string(content(viewpoint{}, r.Package, r.Diagnostics, r.Checks, files))
}

// TestCacheIsComplete: the second run of a document that holds every kind takes
// every block and every function from the cache, and gives the same.
func TestCacheIsComplete(t *testing.T) {
	p := kindsPages(t)
	want := everything(p.run(nil))
	c := &shelf{}
	if everything(p.run(c)) != want {
		t.Error("a run that fills the cache differs")
	}
	if c.put == 0 || c.given > 0 {
		t.Fatalf("the first run kept %d and took %d", c.put, c.given)
	}
	c.put = 0
	if everything(p.run(c)) != want {
		t.Error("a run from the cache differs")
	}
	if c.put > 0 {
		t.Errorf("the second run computed %d things again", c.put)
	}
	// Text above moves every block; all are found all the same.
	p["package.md"] = strings.Replace(p["package.md"], "# One", "A line.\n\nAnd one more.\n\n# One", 1)
	p["more.md"] = "A line.\n\n" + p["more.md"]
	want = everything(p.run(nil))
	res := p.run(c)
	if everything(res) != want {
		t.Error("a run from the cache differs where the text above has grown")
	}
	unnamed := 0
	for _, ch := range res.Package.Chapters {
		for _, piece := range ch.Pieces {
			if b := piece.Block; b != nil && b.Name == "" && b.Kind != block.Formula {
				unnamed++
			}
		}
	}
	if c.put > 0 || unnamed == 0 {
		t.Errorf("text above made %d entries anew; there are %d blocks without a name", c.put, unnamed)
	}
}

// TestCacheHolds: what a block gave is not taken where something it read has changed.
func TestCacheHolds(t *testing.T) {
	p := kindsPages(t)
	c := &shelf{}
	p.run(c)
	for _, edit := range []struct{ file, old, new string }{
		{"package.md", "scale: 1.5", "scale: 1.5000000000000002"}, {"package.md", "units: [s, m/s^2]", "units: [s, g]"},
		{"package.md", "number: T-1", "number: T-1\nunits: US"}, {"more.md", "R: 5", "R: 6"}, {"package.md", "4 m", "4.1 m"}, {"package.md", "structure frame", "structure  frame"},
		{"package.md", "target design", "target  design"}, // it warns, at its first line
	} {
		if !strings.Contains(p[edit.file], edit.old) {
			t.Fatalf("%s does not hold %q", edit.file, edit.old)
		}
		q := maps.Clone(p)
		q[edit.file] = strings.Replace(q[edit.file], edit.old, edit.new, 1)
		if everything(q.run(c)) != everything(q.run(nil)) {
			t.Errorf("%q for %q in %s: the cache makes a difference", edit.new, edit.old, edit.file)
		}
	}
	// Another function of the same block, of the same arguments, and the same of others;
	// another name of the same length, so that no place is another; and another series
	// under the same name, which a figure draws.
	for _, edit := range [][2]string{{"rs.PSA(grid.T", "rs.SA(grid.T"}, {"rs.PSA(grid.T, 5 %", "rs.PSA(grid.T, 2 %"}, {"push", "pusk"},
		{"amplitude: 0.2 g", "amplitude: 0.3 g"}} {
		q := maps.Clone(p)
		for name := range q {
			q[name] = strings.ReplaceAll(q[name], edit[0], edit[1])
		}
		if maps.Equal(p, q) {
			t.Fatalf("nothing says %q", edit[0])
		}
		if everything(q.run(c)) != everything(q.run(nil)) {
			t.Errorf("%q for %q: the cache makes a difference", edit[1], edit[0])
		}
	}
	// A file alone, at each of its digits.
	for _, name := range []string{"east.csv", "storeys.csv", "table.csv"} {
		places := regexp.MustCompile(`\d`).FindAllStringIndex(p[name], -1)
		for _, at := range places[max(0, len(places)-6):] {
			q := maps.Clone(p)
			q[name] = q[name][:at[0]] + string('0'+('9'-q[name][at[0]])) + q[name][at[1]:]
			if everything(q.run(c)) != everything(q.run(nil)) {
				t.Errorf("%s changed at %d: the cache makes a difference", name, at[0])
			}
		}
	}
}

// TestCacheProperty edits a document at random, again and again, with one cache
// that forgets some of what it holds: it never makes a difference.
func TestCacheProperty(t *testing.T) {
	start := kindsPages(t)
	number := regexp.MustCompile(`\d+(?:\.\d+)?`)
	word := regexp.MustCompile(`\b[a-z_]{1,6}\b`)
	sound := 0
	rapid.Check(t, func(t *rapid.T) {
		p, c := maps.Clone(start), &shelf{}
		names := slices.Sorted(maps.Keys(p))
		c.lose = func(key string) bool { return strings.HasPrefix(key, "7") }
		p.run(c)
		for step := range rapid.IntRange(1, 3).Draw(t, "steps") {
			name := rapid.SampledFrom(names).Draw(t, fmt.Sprint("file ", step))
			before := p[name]
			switch rapid.IntRange(0, 6).Draw(t, "edit") {
			case 0, 1: // another number
				if at := pick(t, number.FindAllStringIndex(before, -1)); at != nil {
					p[name] = before[:at[0]] + rapid.SampledFrom([]string{"0", "1", "2", "2.5", "7", "1e-3", "10", "x"}).Draw(t, "number") + before[at[1]:]
				}
			case 2: // another name for the same thing
				if at := pick(t, word.FindAllStringIndex(start["more.md"]+start["package.md"], -1)); at != nil {
					old := (start["more.md"] + start["package.md"])[at[0]:at[1]]
					for _, n := range names {
						p[n] = regexp.MustCompile(`\b`+old+`\b`).ReplaceAllString(p[n], old+"q")
					}
				}
			case 3: // chapters in another order
				parts := strings.Split(before, "\n```\n\n")
				if len(parts) > 3 {
					i := rapid.IntRange(1, len(parts)-3).Draw(t, "part")
					parts[i], parts[i+1] = parts[i+1], parts[i]
					p[name] = strings.Join(parts, "\n```\n\n")
				}
			case 4: // more text
				if i := strings.Index(before, "\n```calc"); i >= 0 {
					p[name] = before[:i] + "\nOne more line.\n" + before[i:]
				}
			case 5: // a comment in a block
				p[name] = strings.Replace(before, "\n```\n", "\n# x\n```\n", 1)
			case 6: // back to where it was
				p[name] = start[name]
			}
			res, want := p.run(c), p.run(nil)
			if everything(res) != everything(want) {
				t.Fatalf("the cache makes a difference:\n%s\nwithout:\n%s", text(res), text(want))
			}
			if want.Package != nil {
				sound++
			}
		}
	})
	if sound == 0 {
		t.Error("no edit left a sound document: nothing was tried")
	}
}

func pick(t *rapid.T, all [][]int) []int {
	if len(all) == 0 {
		return nil
	}
	return rapid.SampledFrom(all).Draw(t, "place")
}

// TestCacheSpoilt: bytes that are no entry are computed over, whatever they are.
func TestCacheSpoilt(t *testing.T) {
	p := kindsPages(t)
	c := &shelf{}
	p.run(c)
	want := everything(p.run(nil))
	good := maps.Clone(c.kept)
	for _, spoil := range []func([]byte) []byte{
		func([]byte) []byte { return nil },
		func(b []byte) []byte { return b[:len(b)/2] },
		func(b []byte) []byte { return append(slices.Clone(b), 0) },
		func([]byte) []byte { return []byte("\xff\xff\xff\xff\xff\xff\xff\xff\xff\x01") },
	} {
		for key, data := range good {
			c.kept[key] = spoil(data)
		}
		if everything(p.run(c)) != want {
			t.Error("a spoilt cache makes a difference")
		}
	}
}

// TestKindsPack: the fields and the product of every kind are plain data, so that
// all of them are kept; and so is what a block gives.
func TestKindsPack(t *testing.T) {
	for _, k := range block.Kinds {
		if body := reflect.TypeOf(k.New()); !packable(body) {
			t.Errorf("the fields of %s are no plain data: results of the kind are never kept", k.Name)
		}
		if k.Product != nil && !packable(reflect.TypeOf(k.Product())) {
			t.Errorf("the product of %s is no plain data: results of the kind are never kept", k.Name)
		}
	}
	for _, typ := range []reflect.Type{reflect.TypeFor[block.Result](), reflect.TypeFor[exhibit.Package](), reflect.TypeFor[field.Field]()} {
		if !packable(typ) {
			t.Errorf("%s is no plain data", typ)
		}
	}
}

// TestCachePlace: a block that moves to another file says there what it says; one that
// moves within its line is none of before.
func TestCachePlace(t *testing.T) {
	warns := calc("target d", "basis: EN 1998-1:2004", "type: 1", "ground: C", "a_g: 0.2 g", "S: 3", "cite: [EN 1998-1:2004 3.2.2.2]")
	p := pages{"package.md": "---\nquoin: 1\ntitle: t\nparts: [more.md]\n---\n\n# A\n\n" + warns, "more.md": "# B\n\nWords.\n"}
	c := &shelf{}
	if r := p.run(c); len(r.Diagnostics) != 1 || r.Diagnostics[0].Range.File != "package.md" {
		t.Fatalf("%v", r.Diagnostics)
	}
	p["package.md"] = strings.Replace(p["package.md"], warns, "Words.\n", 1)
	p["more.md"] += "\n" + warns
	if r := p.run(c); everything(r) != everything(p.run(nil)) || r.Diagnostics[0].Range.File != "more.md" {
		t.Errorf("moved to another file: %v", r.Diagnostics)
	}
	c.put = 0
	p["more.md"] = strings.Replace(p["more.md"], "S: 3", "S:   3", 1)
	if r := p.run(c); everything(r) != everything(p.run(nil)) || c.put == 0 {
		t.Errorf("moved within its line, %d entries were made anew: %v", c.put, r.Diagnostics)
	}
}

// TestRemember: what is not sound is not kept: a run with an error, one that wrote into
// its own fields, one whose product is not that of its kind.
func TestRemember(t *testing.T) {
	kind, _ := block.Lookup("periods")
	for name, spoil := range map[string]func(n *node, said *diag.List){
		"": func(*node, *diag.List) {},
		"an error": func(_ *node, said *diag.List) {
			said.Errorf("periods", diag.Range{File: "package.md", Line: 3, Column: 1, EndLine: 3, EndColumn: 2}, "none")
		},
		"its own fields": func(n *node, _ *diag.List) {
			reflect.ValueOf(n.body).Elem().FieldByName("Count").FieldByName("Given").SetBool(true)
		},
		"another product": func(n *node, _ *diag.List) { n.result.Made = &struct{ X float64 }{1} },
		"no product":      func(n *node, _ *diag.List) { n.result.Made = nil },
	} {
		c := &shelf{}
		d := &run{options: Options{Cache: c}}
		n := &node{kind: blockNode, def: kind, body: kind.New(), part: &part{name: "package.md"}, name: "p", at: diag.Range{File: "package.md", Line: 3}}
		n.result.Made = kind.Product()
		asking := d.asking(n)
		var said diag.List
		spoil(n, &said)
		d.remember(n, &witness{scope: scope{d, n}}, asking, said)
		if kept := c.put > 0; kept != (name == "") {
			t.Errorf("with %q, %d entries were kept", name, c.put)
		}
	}
}
