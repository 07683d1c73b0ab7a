package document

import (
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"

	"quoin/calc/diag"
)

// elsewhere names the codes that no document alone provokes, and the test in
// which they are provoked instead; the code stands there.
var elsewhere = map[string]string{
	"cross-check":     "block/run_test.go",                 // no sound input makes an engine differ from itself
	"internal":        "fuzz_test.go",                      // a fault of the program: the fuzz targets look for it
	"markdown-fault":  "markdown/sound_test.go",            // as above
	"sheet-spills":    "../../testdata/script/print.txtar", // of paper
	"office-markup":   "../../render/page/office_test.go",  // of the page
	"office-omits":    "../../render/page/office_test.go",
	"office-template": "../../render/page/office_test.go",
	"override":        "../../testdata/script/codes.txtar",  // of the option --set
	"frozen-broken":   "../../testdata/script/freeze.txtar", // of the file beside the document
	"frozen-missing":  "../../testdata/script/freeze.txtar",
	"frozen-version":  "../../testdata/script/freeze.txtar",
}

var numbered = regexp.MustCompile(`-\d+$`)

// TestCodeCases runs the case of every code: a document that provokes it, and
// all that is said about it, to the column. The file is named after the code,
// CODE-2.txtar and so on where there are several.
func TestCodeCases(t *testing.T) {
	names, _ := filepath.Glob("testdata/codes/*.txtar")
	if len(names) == 0 {
		t.Fatal("no cases found")
	}
	provoked := map[string]bool{}
	for _, name := range names {
		t.Run(strings.TrimSuffix(filepath.Base(name), ".txtar"), func(t *testing.T) {
			a, err := txtar.ParseFile(name)
			if err != nil {
				t.Fatal(err)
			}
			code := numbered.ReplaceAllString(filepath.Base(t.Name()), "")
			if !slices.ContainsFunc(diag.Codes, func(c diag.Code) bool { return c.Code == code }) {
				t.Errorf("%s is in no list: see diag.Codes", code)
			}
			provoked[code] = true
			last := &a.Files[len(a.Files)-1]
			if last.Name != "want" {
				t.Fatal("the last file of the archive is want")
			}
			res := Run(Source{FS: filesOf(a), Main: "package.md"}, Options{})
			got := ""
			for _, d := range res.Diagnostics {
				r := d.Range
				got += fmt.Sprintf("%s:%d:%d-%d:%d %s %s\n", r.File, r.Line, r.Column, r.EndLine, r.EndColumn, d.Severity, d.Code)
			}
			if !slices.ContainsFunc(res.Diagnostics, func(d diag.Diagnostic) bool { return d.Code == code }) {
				t.Errorf("nothing gives the code; said is\n%s", text(res))
			}
			if *update {
				last.Data = []byte(got)
				if err := os.WriteFile(name, txtar.Format(a), 0o644); err != nil {
					t.Fatal(err)
				}
			} else if got != string(last.Data) {
				t.Errorf("got\n%s\nwant\n%s\nsaid is\n%s", got, last.Data, text(res))
			}
		})
	}
	for _, c := range diag.Codes {
		if path := elsewhere[c.Code]; path != "" {
			data, err := os.ReadFile(path)
			if err != nil || !strings.Contains(string(data), c.Code) {
				t.Errorf("%s is not provoked in %s: %v", c.Code, path, err)
			}
		} else if !provoked[c.Code] {
			t.Errorf("no case provokes %s: write testdata/codes/%s.txtar", c.Code, c.Code)
		}
	}
}
