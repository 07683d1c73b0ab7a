package cite

import (
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestSources: keys are unique, in order, and each is used somewhere in calc.
func TestSources(t *testing.T) {
	var code strings.Builder
	files := 0
	err := filepath.WalkDir("..", func(p string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() || !strings.HasSuffix(p, ".go") || strings.HasSuffix(p, "sources.go") {
			return err
		}
		files++
		data, err := os.ReadFile(p)
		code.Write(data)
		return err
	})
	if err != nil || files < 10 {
		t.Fatal(files, err)
	}
	for i, s := range Sources {
		if i > 0 && Sources[i-1].Key >= s.Key {
			t.Errorf("%q stands after %q", s.Key, Sources[i-1].Key)
		}
		if s.Text == "" || strings.ContainsAny(s.Key, "[]{}") {
			t.Errorf("%q: no text, or brackets in the key", s.Key)
		}
		if !strings.Contains(code.String(), s.Key) {
			t.Errorf("%q is cited nowhere", s.Key)
		}
	}
}

func TestParse(t *testing.T) {
	for _, c := range []struct {
		text, key, clause string
		ok                bool
	}{
		{"ASCE/SEI 7-22 Eq. 12.8-8", "ASCE/SEI 7-22", "Eq. 12.8-8", true},
		{"ASCE/SEI 7-22, 12.8.2", "ASCE/SEI 7-22", "12.8.2", true},
		{"ASCE/SEI 7-22", "ASCE/SEI 7-22", "", true},
		{"ASCE/SEI 7-222", "", "", false},
		{"GR table 3", "GR", "table 3", true},
		{"GR 2", "GR 2", "", true},
		{"sheet 4", "", "", false},
	} {
		got, ok := Parse(c.text, []string{"GR", "GR 2"})
		if ok != c.ok || got.Key != c.key || got.Clause != c.clause {
			t.Errorf("%q: %+v, %v", c.text, got, ok)
		}
	}
	if r, _ := Parse("ASCE/SEI 7-22 12.8", nil); !r.Memory {
		t.Error("a clause of a standard that was not read must say so")
	}
	if r, _ := Parse("GR table 3", []string{"GR"}); r.Memory {
		t.Error("the document's own reference is the author's to answer for")
	}
}
