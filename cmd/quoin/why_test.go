package main

import (
	"bytes"
	"encoding/json"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// asked builds a document with --why for names, and gives what is said of each.
func asked(t *testing.T, file string, names ...string) map[string]*because {
	t.Helper()
	args := []string{"build", "--json", file}
	for _, n := range names {
		args = append(args, "--why", n)
	}
	var out, errs bytes.Buffer
	if code := run(args, nil, &out, &errs); code != exitBuilt {
		t.Fatalf("exit code %d: %s%s", code, &out, &errs)
	}
	var o struct{ Why []*because }
	if err := json.Unmarshal(out.Bytes(), &o); err != nil {
		t.Fatal(err)
	}
	got := map[string]*because{}
	for _, b := range o.Why {
		got[b.Name] = b
	}
	if len(got) != len(names) {
		t.Fatalf("asked for %v, told %d: %s", names, len(got), &errs)
	}
	return got
}

// computed are the blocks that did not come from the cache.
func computed(all map[string]*because) (out []string) {
	for name, b := range all {
		if b.Kind != "" && !b.Cached {
			out = append(out, name)
		}
	}
	slices.Sort(out)
	return out
}

// TestWhyOnlyDescendants edits the first example: prose makes nothing anew, a record,
// a field and a formula line exactly what follows from them.
func TestWhyOnlyDescendants(t *testing.T) {
	root := t.TempDir()
	t.Setenv("QUOIN_CACHE", filepath.Join(t.TempDir(), "kept"))
	if err := os.CopyFS(root, os.DirFS(filepath.Dir(example))); err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(root, "package.md")
	edit := func(name, old, new string) {
		path := filepath.Join(root, filepath.FromSlash(name))
		text := slurp(t, path)
		if !strings.Contains(text, old) {
			t.Fatalf("%s does not hold %q", name, old)
		}
		write(t, path, strings.Replace(text, old, new, 1))
	}
	names := []string{"register", "east", "north", "grid", "east_rs", "north_rs", "design", "comparison", "frame", "m", "elf", "response", "shears", "d", "sources",
		"Sa_east", "Sa_design", "R", "T_R"}
	first := asked(t, file, names...)
	if got := computed(first); len(got) != 15 || first["elf"].Known {
		t.Fatalf("the first build computed %v", got)
	}
	if got := computed(asked(t, file, names...)); got != nil {
		t.Errorf("nothing has changed and %v is computed", got)
	}
	edit("package.md", "\nThe frame is", "\nNew words.\n\nThe frame is")
	after := asked(t, file, names...)
	if got := computed(after); got != nil {
		t.Errorf("prose makes %v anew", got)
	}
	for name, b := range after {
		if len(b.Changed) > 0 || !b.Known || b.Moved {
			t.Errorf("prose: %s: %+v", name, b)
		}
	}

	records, err := filepath.Glob(filepath.Join(root, "records", "*"))
	if err != nil || len(records) < 2 {
		t.Fatalf("records: %v, %v", records, err)
	}
	var record string
	for _, r := range asked(t, file, "east")["east"].Reads {
		if r.What == "file" {
			record = r.Name
		}
	}
	text := slurp(t, filepath.Join(root, filepath.FromSlash(record)))
	at := strings.LastIndexAny(text, "123456789")
	write(t, filepath.Join(root, filepath.FromSlash(record)), text[:at]+string('0'+('9'-text[at]+'0')%10)+text[at+1:])
	after = asked(t, file, names...)
	if got := computed(after); !slices.Equal(got, []string{"comparison", "east", "east_rs"}) {
		t.Errorf("a record makes %v anew", got)
	}
	if c := after["east"].Changed; len(c) != 1 || c[0].What != "file" || c[0].Name != record || c[0].By != byChanged {
		t.Errorf("east: %+v", c)
	}
	if c := after["east_rs"].Changed; len(c) != 1 || c[0].What != "block" || c[0].Name != "east" {
		t.Errorf("east_rs: %+v", c)
	}
	if b := after["Sa_design"]; len(b.Changed) > 0 || b.Moved {
		t.Errorf("Sa_design: %+v", b)
	}

	edit("package.md", "R   = 8 ", "R   = 6 ")
	after = asked(t, file, names...)
	if got := computed(after); !slices.Equal(got, []string{"d", "elf", "response", "shears"}) {
		t.Errorf("R makes %v anew", got)
	}
	c := after["elf"].Changed
	if len(c) != 1 || c[0].What != "field" || c[0].Name != "R" || !slices.Contains(c[0].Through, "R") {
		t.Errorf("elf: %+v", c)
	}
	if b := after["R"]; !b.Moved || len(b.Changed) != 1 || b.Changed[0].Name != "expression" {
		t.Errorf("R: %+v", b)
	}
	edit("package.md", "R   = 6 ", "R   = 8 ")
	after = asked(t, file, names...)
	if got := computed(after); got != nil || len(after["elf"].Changed) != 1 {
		t.Errorf("back to what it was, %v is computed; elf: %+v", got, after["elf"].Changed)
	}
}
