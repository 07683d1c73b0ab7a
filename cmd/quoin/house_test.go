package main

import (
	"bytes"
	"encoding/json"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// ladder is the order of the house. A line is read from left to right, low to
// high: what stands on the right may import what stands on its left, and what
// that may import. Names parted by a comma stand side by side and do not know
// each other. A name in capitals is a landing, not a package.
//
// It is policy. A change that does not fit it is put in another place; the
// ladder is not edited to make a build pass.
const ladder = `
calc/diag < calc/quantity < calc/expr
calc/cite < calc/published
calc/expr, calc/published < WORDS

WORDS < calc/motion < calc/motion/archive, calc/oscillator
calc/oscillator < calc/spectrum
WORDS < calc/structure < calc/modal
WORDS < calc/standard
calc/structure, calc/standard < calc/lateral
calc/motion/archive, calc/spectrum, calc/modal, calc/lateral < ENGINES

calc/cite, calc/expr < calc/exhibit

calc/exhibit < calc/document/formula, calc/document/markdown
calc/document/formula < calc/document/field, calc/document/live
ENGINES, calc/document/field < calc/document/block
calc/document/block, calc/document/live, calc/document/markdown < calc/document

templates < render/script
calc/exhibit, render/script < render/chart, render/equation, render/ledger
render/chart, render/equation < render/page
render/page, render/ledger < render

calc/document, render < cmd/quoin
examples/invent
`

// climb reads the ladder: for every name, all that it may import.
func climb(t *testing.T) map[string]map[string]bool {
	t.Helper()
	below := map[string]map[string]bool{}
	for line := range strings.Lines(ladder) {
		var lower []string
		for step := range strings.SplitSeq(line, "<") {
			var names []string
			for n := range strings.SplitSeq(step, ",") {
				if n = strings.TrimSpace(n); n == "" {
					continue
				}
				if below[n] == nil {
					below[n] = map[string]bool{}
				}
				for _, l := range lower {
					below[n][l] = true
				}
				names = append(names, n)
			}
			lower = names
		}
	}
	for range below { // long enough for the longest way up
		for _, set := range below {
			for l := range set {
				for m := range below[l] {
					set[m] = true
				}
			}
		}
	}
	for n, set := range below {
		if set[n] {
			t.Fatalf("the ladder goes round in a circle at %s", n)
		}
	}
	return below
}

// module is the folder of the module, as seen from this package.
const module = "../.."

func TestLadder(t *testing.T) {
	below := climb(t)
	cmd := exec.Command("go", "list", "-json=ImportPath,Imports,TestImports,XTestImports", "./...")
	cmd.Dir, cmd.Stderr = module, os.Stderr
	out, err := cmd.Output()
	if err != nil {
		t.Fatal(err)
	}
	seen := map[string]bool{}
	for d := json.NewDecoder(bytes.NewReader(out)); d.More(); {
		var p struct {
			ImportPath                         string
			Imports, TestImports, XTestImports []string
		}
		if err := d.Decode(&p); err != nil {
			t.Fatal(err)
		}
		name := strings.TrimPrefix(p.ImportPath, "quoin/")
		seen[name] = true
		if below[name] == nil {
			t.Errorf("%s is on no rung: give it a place on the ladder", name)
			continue
		}
		for _, i := range p.Imports {
			if l, ours := strings.CutPrefix(i, "quoin/"); ours && !below[name][l] {
				t.Errorf("%s imports %s, which does not stand below it", name, l)
			}
		}
		for _, i := range slices.Concat(p.Imports, p.TestImports, p.XTestImports) {
			if strings.HasPrefix(name, "calc/") && (strings.HasPrefix(i, "quoin/render") || strings.HasPrefix(i, "quoin/templates") || i == "html/template") {
				t.Errorf("%s imports %s: calc knows nothing of HTML", name, i)
			}
			if l, ours := strings.CutPrefix(i, "quoin/calc/"); ours && strings.HasPrefix(name, "render") &&
				!slices.Contains([]string{"exhibit", "expr", "quantity", "diag", "cite"}, l) {
				t.Errorf("%s imports calc/%s: render knows nothing of earthquakes", name, l)
			}
		}
	}
	if len(seen) == 0 {
		t.Fatal("no packages found")
	}
	for n := range below {
		if n != strings.ToUpper(n) && !seen[n] {
			t.Errorf("the ladder names %s, which is no package", n)
		}
	}
}

// largest is the size that no file of the tree goes beyond, in bytes.
const largest = 600_000

// made are the folders that are not the project's own text.
var made = []string{".git", "node_modules", "bin", "dist"}

func TestTree(t *testing.T) {
	files := 0
	err := filepath.WalkDir(module, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() {
			if slices.Contains(made, d.Name()) || strings.HasSuffix(d.Name(), ".package") {
				return fs.SkipDir
			}
			return nil
		}
		files++
		info, err := d.Info()
		if err != nil {
			return err
		}
		if info.Size() > largest && !strings.HasSuffix(path, ".test") {
			t.Errorf("%s has %d bytes: no file of the tree is larger than %d", path, info.Size(), largest)
		}
		if !strings.HasSuffix(path, "_test.go") {
			return nil
		}
		text, err := os.ReadFile(path)
		// In two halves, so that this file does not name it itself.
		if bytes.Contains(text, []byte("/"+"shared/")) {
			t.Errorf("%s reads from outside the module: a test stands on the module alone", path)
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	if files == 0 {
		t.Fatal("no files found")
	}
}
