package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"quoin/calc/document"
	"quoin/render"
)

// TestContentsStand: what the page of contents says of a package stands in the
// examples, each place in at least one of them.
func TestContentsStand(t *testing.T) {
	pages, _ := filepath.Glob(filepath.Join(module, "examples", "*", "package.md"))
	if len(pages) == 0 {
		t.Fatal("no examples")
	}
	var all strings.Builder
	for _, name := range pages {
		res := document.Run(document.Source{FS: os.DirFS(filepath.Dir(name)), Main: "package.md"}, document.Options{})
		if res.Package == nil {
			t.Fatalf("%s: %v", name, res.Diagnostics)
		}
		files, err := render.Package(res.Package, res.Files, render.Options{})
		if err != nil {
			t.Fatal(err)
		}
		all.Write(files["index.html"])
	}
	for _, r := range contents {
		if r.ID != "" && !strings.Contains(all.String(), `id="`+r.ID+`"`) {
			t.Errorf("%s: no example has %s", r.What, r.ID)
		}
	}
}
