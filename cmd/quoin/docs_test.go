package main

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/fstest"

	"github.com/rogpeppe/go-internal/txtar"

	"quoin/calc/diag"
	"quoin/calc/document"
	"quoin/calc/document/block"
	"quoin/calc/document/field"
	"quoin/calc/quantity"
)

// TestDocs holds the pages of the reference to the code; with -update they are
// written anew.
func TestDocs(t *testing.T) {
	for name, want := range map[string]string{"blocks.md": referencePage(), "diagnostics.md": diagnosticsPage(t), "contents.md": contentsPage()} {
		path := filepath.Join("docs", name)
		if *update {
			if err := os.WriteFile(path, []byte(want), 0o644); err != nil {
				t.Fatal(err)
			}
			continue
		}
		got, err := os.ReadFile(path)
		if err != nil || string(got) != want {
			t.Errorf("%s is not what the code says (%v): go test ./cmd/quoin -run Docs -update", path, err)
		}
	}
}

// TestReferenceIsWhole: no field, value, function or unit is left out of the
// reference, and nothing in it is without an explanation.
func TestReferenceIsWhole(t *testing.T) {
	for _, k := range block.Kinds {
		top, ok := lookupTopic(k.Name)
		if !ok {
			t.Errorf("no topic %s", k.Name)
			continue
		}
		text := topicText(top)
		for _, s := range field.Specs(k.New()) {
			leaf := s.Name[strings.LastIndex(s.Name, ".")+1:]
			common := strings.Contains(topicText(everyBlockTopic()), "  "+leaf+" ")
			if !common && !strings.Contains(text, " "+leaf+" ") && !strings.Contains(text, " "+leaf+"\n") {
				t.Errorf("%s: the field %s is not in the reference", k.Name, s.Name)
			}
		}
		for _, m := range k.Members() {
			if !strings.Contains(text, "  "+m) {
				t.Errorf("%s: the value %s is not in the reference", k.Name, m)
			}
		}
	}
	units := 0
	for _, top := range topics() {
		if top.Doc == "" || top.Form == "" || len(top.Sections) == 0 {
			t.Errorf("the topic %s says too little", top.Name)
		}
		for _, s := range top.Sections {
			for _, r := range s.Rows {
				if r.Name == "" || r.Doc == "" {
					t.Errorf("%s, %s: %q has no explanation", top.Name, s.Title, r.Name)
				}
			}
			if top.Name == "units" {
				units += len(s.Rows)
			}
		}
	}
	if n := len(quantity.Symbols()); units != n {
		t.Errorf("the reference shows %d units of %d", units, n)
	}
}

// diagnosticsPage explains every code, with what the terminal shows for its case.
func diagnosticsPage(t *testing.T) string {
	t.Helper()
	var b strings.Builder
	b.WriteString("# " + diagTitle + "\n\n" + diagHead + "\n")
	for _, c := range diag.Codes {
		fmt.Fprintf(&b, "\n## %s\n\n%s\n\n**Remedy.** %s\n", c.Code, c.Cause, c.Remedy)
		if example := provoked(t, c.Code); example != "" {
			fmt.Fprintf(&b, "\n````text\n%s````\n", example)
		}
	}
	return b.String()
}

// provoked runs the case of a code and gives the first message that carries it,
// "" for codes that have no document.
func provoked(t *testing.T, code string) string {
	t.Helper()
	a, err := txtar.ParseFile(filepath.Join(module, "calc/document/testdata/codes", code+".txtar"))
	if os.IsNotExist(err) {
		return ""
	}
	if err != nil {
		t.Fatal(err)
	}
	files := fstest.MapFS{}
	for _, f := range a.Files {
		files[f.Name] = &fstest.MapFile{Data: f.Data}
	}
	res := document.Run(document.Source{FS: files, Main: "package.md"}, document.Options{})
	for _, d := range res.Diagnostics {
		if d.Code == code {
			var out bytes.Buffer
			diag.Write(&out, diag.List{d}, func(file string, line int) (string, bool) {
				lines := strings.Split(string(files[file].Data), "\n")
				return lines[line-1], true
			})
			return out.String()
		}
	}
	t.Errorf("the case of %s does not provoke it", code)
	return ""
}
