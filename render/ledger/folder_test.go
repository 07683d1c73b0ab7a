package ledger

import (
	"maps"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
)

// whole is a package of a few files, with its manifest.
func whole(text string) map[string][]byte {
	files := map[string][]byte{"index.html": []byte(text), "tables/a.csv": []byte("1\n"), "inputs/x/y.md": []byte("y")}
	files[ManifestFile] = Manifest(files, "d", "t")
	return files
}

func read(t *testing.T, dir string) map[string]string {
	t.Helper()
	out := map[string]string{}
	err := filepath.Walk(dir, func(path string, info os.FileInfo, err error) error {
		if err != nil || info.IsDir() {
			return err
		}
		b, err := os.ReadFile(path)
		rel, _ := filepath.Rel(dir, path)
		out[filepath.ToSlash(rel)] = string(b)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func same(t *testing.T, dir string, want map[string][]byte) {
	t.Helper()
	texts := map[string]string{}
	for k, v := range want {
		texts[k] = string(v)
	}
	if got := read(t, dir); !maps.Equal(got, texts) {
		t.Errorf("%s holds %v, want %v", dir, got, texts)
	}
}

// alone checks that nothing but the named entries lies in a folder.
func alone(t *testing.T, dir string, names ...string) {
	t.Helper()
	entries, _ := os.ReadDir(dir)
	var got []string
	for _, e := range entries {
		got = append(got, e.Name())
	}
	if strings.Join(got, " ") != strings.Join(names, " ") {
		t.Errorf("the folder holds %q, want %q", got, names)
	}
}

// bothWays runs a test with the one-step exchange and without it.
func bothWays(t *testing.T, f func(t *testing.T)) {
	t.Run("system", f)
	t.Run("two renames", func(t *testing.T) {
		was := exchange
		exchange = func(string, string) error { return errNoExchange }
		defer func() { exchange = was }()
		f(t)
	})
}

func TestWriteReplaces(t *testing.T) {
	bothWays(t, func(t *testing.T) {
		top := t.TempDir()
		dir := filepath.Join(top, "p.package")
		for _, text := range []string{"one", "two", "three"} {
			if err := Write(dir, whole(text)); err != nil {
				t.Fatal(err)
			}
			same(t, dir, whole(text))
			alone(t, top, "p.package")
		}
		// What is no longer in the package goes.
		less := whole("four")
		delete(less, "tables/a.csv")
		less[ManifestFile] = Manifest(less, "d", "t")
		if err := Write(dir, less); err != nil {
			t.Fatal(err)
		}
		same(t, dir, less)
	})
}

func TestWriteRefuses(t *testing.T) {
	for name, prepare := range map[string]func(dir string) error{
		"a file":             func(dir string) error { return os.WriteFile(dir, []byte("x"), 0o600) },
		"an empty folder":    func(dir string) error { return os.Mkdir(dir, 0o700) },
		"another folder":     func(dir string) error { return tree(dir, map[string]string{"x": "1"}) },
		"another's manifest": func(dir string) error { return tree(dir, map[string]string{"manifest.json": `{"name": "x"}`}) },
		"a broken manifest":  func(dir string) error { return tree(dir, map[string]string{"manifest.json": `{`}) },
		"a package with a stranger": func(dir string) error {
			if err := Write(dir, whole("one")); err != nil {
				return err
			}
			return os.WriteFile(filepath.Join(dir, "tables", "mine.xlsx"), []byte("x"), 0o600)
		},
	} {
		t.Run(name, func(t *testing.T) {
			top := t.TempDir()
			dir := filepath.Join(top, "p")
			if err := prepare(dir); err != nil {
				t.Fatal(err)
			}
			before := read(t, dir)
			if err := Write(dir, whole("two")); err == nil {
				t.Error("it is replaced")
			}
			if after := read(t, dir); !maps.Equal(before, after) {
				t.Errorf("it changed from %v to %v", before, after)
			}
			alone(t, top, "p")
		})
	}
	if err := Write(filepath.Join(t.TempDir(), "no", "p"), whole("one")); err == nil {
		t.Error("a folder is written where its parent is missing")
	}
}

func tree(dir string, files map[string]string) error {
	for name, text := range files {
		path := filepath.Join(dir, name)
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			return err
		}
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			return err
		}
	}
	return nil
}

// A run that is cut short at any of its steps leaves a whole package, old or new,
// once the next one has started.
func TestRepair(t *testing.T) {
	bothWays(t, func(t *testing.T) {
		for step := range 4 {
			top := t.TempDir()
			dir := filepath.Join(top, "p")
			if err := Write(dir, whole("old")); err != nil {
				t.Fatal(err)
			}
			fresh, release, err := fill(dir, whole("new"))
			if err != nil {
				t.Fatal(err)
			}
			old := strings.Replace(fresh, newMark, oldMark, 1)
			rename := func(from, to string) {
				if err := os.Rename(from, to); err != nil {
					t.Fatal(err)
				}
			}
			want := whole("old")
			switch step {
			case 0: // cut short while writing
				os.Remove(filepath.Join(fresh, ManifestFile))
			case 1: // written, not yet in place
			case 2: // the old one is aside, the new one not yet in place
				rename(dir, old)
			case 3: // in place, the old one not yet removed
				rename(dir, old)
				rename(fresh, dir)
				want = whole("new")
			}
			release() // as the end of the program does
			if err := Repair(dir); err != nil {
				t.Fatal(err)
			}
			same(t, dir, want)
			alone(t, top, "p")
			if err := Write(dir, whole("next")); err != nil {
				t.Fatal(err)
			}
			same(t, dir, whole("next"))
		}
	})
}

// What another run is writing at this moment is no leftover.
func TestRepairSparesTheLiving(t *testing.T) {
	if runtime.GOOS == "windows" {
		t.Skip("folders cannot be locked there")
	}
	top := t.TempDir()
	dir := filepath.Join(top, "p")
	fresh, release, err := fill(dir, whole("new"))
	if err != nil {
		t.Fatal(err)
	}
	defer release()
	if err := Repair(dir); err != nil {
		t.Fatal(err)
	}
	same(t, fresh, whole("new"))
	// Nor is what only looks like one.
	for _, n := range []string{".p.new-x1", ".p.new-", ".pp.new-1", "p.new-1"} {
		if err := os.Mkdir(filepath.Join(top, n), 0o755); err != nil {
			t.Fatal(err)
		}
	}
	release()
	if err := Repair(dir); err != nil {
		t.Fatal(err)
	}
	alone(t, top, ".p.new-", ".p.new-x1", ".pp.new-1", "p.new-1")
}

func TestWriteThroughLink(t *testing.T) {
	top := t.TempDir()
	if err := Write(filepath.Join(top, "real"), whole("one")); err != nil {
		t.Fatal(err)
	}
	link := filepath.Join(top, "link")
	if err := os.Symlink("real", link); err != nil {
		if runtime.GOOS != "windows" { // where making links needs a privilege
			t.Fatal(err)
		}
		t.Skip(err)
	}
	if err := Write(link, whole("two")); err != nil {
		t.Fatal(err)
	}
	same(t, filepath.Join(top, "real"), whole("two"))
	if info, err := os.Lstat(link); err != nil || info.Mode()&os.ModeSymlink == 0 {
		t.Error("the link is gone")
	}
}

// Where the new folder cannot take its place, the old one comes back.
func TestSwapPutsBack(t *testing.T) {
	was := exchange
	exchange = func(string, string) error { return errNoExchange }
	defer func() { exchange = was }()
	top := t.TempDir()
	dir := filepath.Join(top, "p")
	if err := Write(dir, whole("old")); err != nil {
		t.Fatal(err)
	}
	if err := swap(filepath.Join(top, ".p.new-1"), dir); err == nil {
		t.Error("a folder that is missing took its place")
	}
	same(t, dir, whole("old"))
	alone(t, top, "p")
}
