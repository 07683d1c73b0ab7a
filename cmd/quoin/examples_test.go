package main

import (
	"bytes"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// failing is how many checks of each example are not met. Where there are any,
// the text of the example says that it is so on purpose.
var failing = map[string]int{
	"equipment-frame": 1,
	"four-storey":     0,
	"three-records":   0,
}

// TestExamples checks every package of examples: no errors, and the failing checks
// that it is meant to have.
func TestExamples(t *testing.T) {
	found, err := filepath.Glob(module + "/examples/*/package.md")
	if err != nil || len(found) < len(failing) {
		t.Fatalf("%d examples found: %v", len(found), err)
	}
	for _, file := range found {
		name := filepath.Base(filepath.Dir(file))
		t.Run(name, func(t *testing.T) {
			want, ok := failing[name]
			if !ok {
				t.Fatal("how many checks fail on purpose is not said: see failing")
			}
			var out, messages bytes.Buffer
			if code := run([]string{"check", "--json", file}, nil, &out, &messages); code != exitBuilt {
				t.Fatalf("exit code %d\n%s%s", code, out.Bytes(), messages.Bytes())
			}
			var got outcome
			if err := json.Unmarshal(out.Bytes(), &got); err != nil || len(got.Checks) == 0 {
				t.Fatalf("no checks: %v\n%s", err, out.Bytes())
			}
			failed := 0
			for _, c := range got.Checks {
				if !c.OK {
					failed++
				}
			}
			if failed != want {
				t.Errorf("%d checks fail, want %d\n%s", failed, want, out.Bytes())
			}
			source, err := os.ReadFile(file)
			if err != nil {
				t.Fatal(err)
			}
			if want > 0 && !strings.Contains(string(source), "deliberately") {
				t.Error("the text does not say that a check fails on purpose")
			}
		})
	}
}
