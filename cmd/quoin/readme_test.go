package main

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"quoin/calc/document/block"
	"quoin/calc/document/field"
)

// TestReadmeExample builds the package that the README shows.
func TestReadmeExample(t *testing.T) {
	readme, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	_, rest, ok := strings.Cut(string(readme), "````markdown\n")
	text, _, closed := strings.Cut(rest, "\n````\n")
	if !ok || !closed {
		t.Fatal("the README shows no package")
	}
	file := filepath.Join(t.TempDir(), "package.md")
	if err := os.WriteFile(file, []byte(text+"\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	var out, errs bytes.Buffer
	if code := run([]string{"check", "--strict", file}, nil, &out, &errs); code != 0 || errs.Len() > 0 {
		t.Errorf("exit %d\n%s%s", code, &out, &errs)
	}
}

// TestReadmeNamesAll: every kind stands in the README, which leads to the
// reference for the rest, and every field has a line of its own.
func TestReadmeNamesAll(t *testing.T) {
	readme, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	for _, k := range block.Kinds {
		if !strings.Contains(string(readme), "| `"+k.Name+"` |") {
			t.Errorf("the README's table has no kind %s", k.Name)
		}
		for _, s := range field.Specs(k.New()) {
			if s.Doc == "" {
				t.Errorf("the field %s of %s has no doc", s.Name, k.Name)
			}
		}
	}
}
