package document

import (
	"bytes"
	"flag"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/fstest"

	"github.com/rogpeppe/go-internal/txtar"

	"quoin/calc/diag"
)

var update = flag.Bool("update", false, "write what is found as what is wanted")

// archive runs the package.md of an archive of files.
func archive(t *testing.T, name string) (*txtar.Archive, Result) {
	t.Helper()
	a, err := txtar.ParseFile(name)
	if err != nil {
		t.Fatal(err)
	}
	return a, Run(Source{FS: filesOf(a), Main: "package.md"}, Options{})
}

func filesOf(a *txtar.Archive) fs.FS {
	m := fstest.MapFS{}
	for _, f := range a.Files {
		if f.Name != "want" {
			m[f.Name] = &fstest.MapFile{Data: f.Data}
		}
	}
	return m
}

// text lays the diagnostics of a run out as the terminal shows them.
func text(res Result) []byte {
	var b bytes.Buffer
	diag.Write(&b, res.Diagnostics, func(file string, line int) (string, bool) {
		lines := strings.Split(string(res.Files[file]), "\n")
		if line > len(lines) {
			return "", false
		}
		return lines[line-1], true
	})
	return b.Bytes()
}

// TestDiagnostics runs every archive: a document with faults, and what is said
// about it, to the column.
func TestDiagnostics(t *testing.T) {
	names, _ := filepath.Glob("testdata/diagnostics/*.txtar")
	if len(names) == 0 {
		t.Fatal("no archives found")
	}
	for _, name := range names {
		t.Run(strings.TrimSuffix(filepath.Base(name), ".txtar"), func(t *testing.T) {
			a, res := archive(t, name)
			got := text(res)
			if res.Package != nil && res.Diagnostics.HasErrors() {
				t.Error("a package in spite of errors")
			}
			for i := range a.Files {
				if a.Files[i].Name != "want" {
					continue
				}
				if *update {
					a.Files[i].Data = got
					if err := os.WriteFile(name, txtar.Format(a), 0o644); err != nil {
						t.Fatal(err)
					}
				} else if !bytes.Equal(got, a.Files[i].Data) {
					t.Errorf("got\n%s\nwant\n%s", got, a.Files[i].Data)
				}
				return
			}
			t.Fatal("no file want in the archive")
		})
	}
}
