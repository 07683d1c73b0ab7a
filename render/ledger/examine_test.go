package ledger

import (
	"bytes"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
)

// TestExamine: a package as it was written has no fault, and one change gives the
// fault that it is, of the file that it is in.
func TestExamine(t *testing.T) {
	write := func() string {
		files := map[string][]byte{"index.html": []byte("page"), "inputs/a.md": []byte("text\n"), "tables/t.csv": []byte("1,2\n")}
		const tool = "quoin 1"
		files[ManifestFile] = Manifest(files, Digest(map[string][]byte{"inputs/a.md": files["inputs/a.md"]}, tool), tool)
		dir := filepath.Join(t.TempDir(), "p")
		if err := Write(dir, files); err != nil {
			t.Fatal(err)
		}
		return dir
	}
	manifest := func(dir string, edit func([]byte) []byte) error {
		path := filepath.Join(dir, ManifestFile)
		text, err := os.ReadFile(path)
		if err != nil {
			return err
		}
		return os.WriteFile(path, edit(text), 0o644)
	}
	for _, c := range []struct {
		name, fault string
		change      func(dir string) error
	}{
		{"nothing", "", func(string) error { return nil }},
		{"one bit", "tables/t.csv does not have the SHA-256", func(dir string) error {
			return os.WriteFile(filepath.Join(dir, "tables/t.csv"), []byte("1,3\n"), 0o644)
		}},
		{"a byte more", "tables/t.csv has 5 bytes", func(dir string) error {
			return os.WriteFile(filepath.Join(dir, "tables/t.csv"), []byte("1,2\n\n"), 0o644)
		}},
		{"a file gone", "index.html is missing", func(dir string) error { return os.Remove(filepath.Join(dir, "index.html")) }},
		{"a file more", "tables/u.csv is no part", func(dir string) error {
			return os.WriteFile(filepath.Join(dir, "tables/u.csv"), nil, 0o644)
		}},
		{"a folder more", "extra is a folder", func(dir string) error { return os.Mkdir(filepath.Join(dir, "extra"), 0o755) }},
		{"a link to the same bytes", "index.html is a link", func(dir string) error {
			path := filepath.Join(dir, "index.html")
			if err := os.Rename(path, filepath.Join(filepath.Dir(dir), "page")); err != nil {
				return err
			}
			return os.Symlink("../page", path)
		}},
		{"another digest", ManifestFile + " gives a package digest", func(dir string) error {
			return manifest(dir, func(b []byte) []byte {
				m, err := ReadManifest(b)
				if err != nil {
					t.Fatal(err)
				}
				m.Digest = strings.Repeat("0", 64)
				return m.text()
			})
		}},
		{"a blank in the manifest", ManifestFile + " is not as the program writes it", func(dir string) error {
			return manifest(dir, func(b []byte) []byte { return bytes.Replace(b, []byte("\n"), []byte(" \n"), 1) })
		}},
	} {
		t.Run(c.name, func(t *testing.T) {
			dir := write()
			if err := c.change(dir); err != nil {
				if runtime.GOOS == "windows" { // where making links needs a privilege
					t.Skip(err)
				}
				t.Fatal(err)
			}
			root, err := os.OpenRoot(dir)
			if err != nil {
				t.Fatal(err)
			}
			defer root.Close()
			x, err := Examine(root)
			if err != nil {
				t.Fatal(err)
			}
			var got []string
			for _, f := range x.Faults {
				got = append(got, f.Path+" "+f.What)
			}
			if c.fault == "" && len(got) > 0 || c.fault != "" && (len(got) != 1 || !strings.HasPrefix(got[0], c.fault)) {
				t.Errorf("faults %q, want %q", got, c.fault)
			}
		})
	}
}
