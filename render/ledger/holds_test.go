package ledger

import (
	"maps"
	"os"
	"path/filepath"
	"testing"
)

// TestHolds: a folder holds files where every byte is theirs and no file is missing
// or beside them but what file managers leave.
func TestHolds(t *testing.T) {
	files := map[string][]byte{"index.html": []byte("page"), "data/one.csv": []byte("1,2\n"), "empty": {}}
	dir := t.TempDir()
	put := func(name, text string) {
		path := filepath.Join(dir, filepath.FromSlash(name))
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	for name, data := range files {
		put(name, string(data))
	}
	put(litter[0], "x")
	if !Holds(dir, files) {
		t.Fatal("the very files are not held")
	}
	if Holds(filepath.Join(dir, "none"), files) {
		t.Error("a folder that is not there holds files")
	}
	for name, data := range map[string]string{"index.html": "pagE", "data/one.csv": "1,2\n3", "empty": "x"} {
		other := maps.Clone(files)
		other[name] = []byte(data)
		if Holds(dir, other) {
			t.Errorf("another %s is held", name)
		}
	}
	more := maps.Clone(files)
	more["data/two.csv"] = []byte("3,4\n")
	if Holds(dir, more) {
		t.Error("a missing file is held")
	}
	put("data/two.csv", "3,4\n")
	if Holds(dir, files) {
		t.Error("a file beside them is not seen")
	}
	if !Holds(dir, more) {
		t.Error("the file added is not held")
	}
	index := filepath.Join(dir, "index.html")
	if err := os.Rename(index, filepath.Join(t.TempDir(), "page")); err != nil {
		t.Fatal(err)
	}
	if os.Symlink(filepath.Join(dir, "data", "one.csv"), index) == nil && Holds(dir, map[string][]byte{"index.html": []byte("1,2\n"), "data/one.csv": []byte("1,2\n"), "data/two.csv": []byte("3,4\n"), "empty": {}}) {
		t.Error("a link is taken for a file")
	}
}
