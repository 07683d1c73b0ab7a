package archive

import (
	"bytes"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
)

// TestSavedElsewhere: a byte order mark and the line ends of other systems change
// neither a record, with all that its header says, nor an error and its place; the
// same with a fault put into any of the lines.
func TestSavedElsewhere(t *testing.T) {
	files, err := filepath.Glob("testdata/*")
	if err != nil || len(files) < 10 {
		t.Fatal("no samples found", err)
	}
	asks := []Options{{}, {Unit: "g", Step: 0.01, Channel: "1"}}
	records, errs := 0, 0
	for _, name := range files {
		data, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		if bytes.IndexByte(data, 0) >= 0 {
			continue // a binary format has no lines
		}
		text := strings.ReplaceAll(strings.TrimPrefix(string(data), "\uFEFF"), "\r\n", "\n")
		lines := strings.Split(strings.TrimRight(text, "\n"), "\n")
		texts := []string{text}
		for _, i := range []int{0, 1, 2, 3, 4, 5, len(lines) / 2, len(lines) - 1} {
			if i < len(lines) {
				spoilt := append(append(append([]string{}, lines[:i]...), lines[i]+" ?1"), lines[i+1:]...)
				texts = append(texts, strings.Join(spoilt, "\n")+"\n")
			}
		}
		for k, text := range texts {
			for _, ask := range asks {
				plain, fault := Read(name, []byte(text), ask)
				if fault == nil {
					records++
				} else {
					errs++
				}
				for way, saved := range map[string]string{
					"a mark": "\uFEFF" + text, "CRLF": strings.ReplaceAll(text, "\n", "\r\n"), "a mark and CRLF": "\uFEFF" + strings.ReplaceAll(text, "\n", "\r\n"), "CR": strings.ReplaceAll(text, "\n", "\r"),
				} {
					r, err := Read(name, []byte(saved), ask)
					if !reflect.DeepEqual(err, fault) {
						t.Errorf("%s, fault %d, with %s: %#v, want %#v", name, k, way, err, fault)
					}
					if !reflect.DeepEqual(r, plain) {
						t.Errorf("%s, fault %d, with %s reads differently", name, k, way)
					}
				}
			}
		}
	}
	if records < 40 || errs < 80 {
		t.Errorf("%d records and %d errors compared", records, errs)
	}
}
