package document

import (
	"path/filepath"
	"testing"
	"testing/fstest"

	"github.com/rogpeppe/go-internal/txtar"
)

// FuzzRun: whatever the main file holds, a run ends with a package or with
// errors, each at a place, and never with a fault of the program itself.
func FuzzRun(f *testing.F) {
	names, _ := filepath.Glob("testdata/*/*.txtar")
	more, _ := filepath.Glob("testdata/*.txtar")
	for _, name := range append(names, more...) {
		a, err := txtar.ParseFile(name)
		if err != nil {
			f.Fatal(err)
		}
		for _, file := range a.Files {
			if file.Name == "package.md" {
				f.Add(file.Data)
			}
		}
	}
	f.Add([]byte("---\nquoin: 1\ntitle: t\n---\n```calc record a\nform: sine\namplitude: 1 g\nperiod: 1 s\ncycles: 2\nstep: 0.1 s\n```\n"))
	f.Fuzz(func(t *testing.T, main []byte) {
		if len(main) > 1<<16 {
			return
		}
		res := Run(Source{FS: fstest.MapFS{"package.md": {Data: main}}, Main: "package.md"}, Options{})
		if (res.Package == nil) != res.Diagnostics.HasErrors() {
			t.Errorf("package %v, errors %v", res.Package != nil, res.Diagnostics.HasErrors())
		}
		for _, d := range res.Diagnostics {
			if d.Code == "internal" {
				t.Errorf("%s: %s", d.Range, d.Summary)
			}
			if d.Range.File == "" || d.Summary == "" {
				t.Errorf("a message without a place or a text: %+v", d)
			}
		}
	})
}
