package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io/fs"
	"math/rand/v2"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
	"sync"
	"testing"
	"testing/fstest"

	"quoin/render/ledger"
)

// plain is a document that draws nothing: built in no time.
const plain = `---
quoin: 1
title: Plain
---

` + "```calc structure frame\nstoreys: storeys.csv\ndamping: 5 %\n```\n\n```calc formula\nV = 0.1 * frame.weight as kN\ncheck V <= 1000 kN\n```\n"

const storeys = "level,height [m],weight [kN],stiffness [kN/mm]\nL1,4,2400,160\nRoof,3.6,1900,120\n"

// plainPackage is a copy of the package of plain, alone in a new folder.
func plainPackage(t testing.TB, args ...string) string {
	t.Helper()
	top := t.TempDir()
	if len(args) == 0 {
		built, err := plainBuilt()
		if err == nil {
			err = os.CopyFS(top, built)
		}
		if err != nil {
			t.Fatal(err)
		}
		return filepath.Join(top, "package.package")
	}
	if err := buildPlain(top, args...); err != nil {
		t.Fatal(err)
	}
	return filepath.Join(top, "package.package")
}

// plainBuilt is plain with its package, built once.
var plainBuilt = sync.OnceValues(func() (fs.FS, error) {
	top, err := os.MkdirTemp("", "plain")
	if err != nil {
		return nil, err
	}
	defer os.RemoveAll(top)
	if err := buildPlain(top); err != nil {
		return nil, err
	}
	kept := fstest.MapFS{}
	err = fs.WalkDir(os.DirFS(top), ".", func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		data, err := os.ReadFile(filepath.Join(top, filepath.FromSlash(path)))
		kept[path] = &fstest.MapFile{Data: data, Mode: 0o644}
		return err
	})
	return kept, err
})

func buildPlain(top string, args ...string) error {
	for name, text := range map[string]string{"package.md": plain, "storeys.csv": storeys} {
		if err := os.WriteFile(filepath.Join(top, name), []byte(text), 0o644); err != nil {
			return err
		}
	}
	var out, errs bytes.Buffer
	if code := run(append([]string{"build", "--no-cache", filepath.Join(top, "package.md")}, args...), nil, &out, &errs); code != exitBuilt {
		return fmt.Errorf("exit code %d: %s", code, &errs)
	}
	return nil
}

func write(t testing.TB, path, text string) {
	t.Helper()
	if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
}

func slurp(t testing.TB, path string) string {
	t.Helper()
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}

// verified runs verify and gives its verdict and all that it says.
func verified(t testing.TB, dir string) (v verdict, said string) {
	t.Helper()
	var out, errs bytes.Buffer
	code := run([]string{"verify", "--json", dir}, nil, &out, &errs)
	if err := json.Unmarshal(out.Bytes(), &v); err != nil || (code == exitBuilt) != v.Same {
		t.Fatalf("exit code %d, %v: %s%s", code, err, &out, &errs)
	}
	if v.Failure != "" {
		return v, v.Failure
	}
	return v, v.words()
}

// reseal makes the manifest that of what the folder holds, as somebody would who
// wants a change to go unseen.
func reseal(t testing.TB, dir string) {
	t.Helper()
	all, inputs := map[string][]byte{}, map[string][]byte{}
	for _, path := range filesOf(t, dir) {
		data := []byte(slurp(t, filepath.Join(dir, filepath.FromSlash(path))))
		all[path] = data
		if strings.HasPrefix(path, "inputs/") {
			inputs[path] = data
		}
	}
	tool := versionLine()
	if f, err := ledger.ReadBuild(inputs[ledger.BuildFile], ""); err == nil {
		tool = f.Tool
	}
	write(t, filepath.Join(dir, ledger.ManifestFile), string(ledger.Manifest(all, ledger.Digest(inputs, tool), tool)))
}

// filesOf are the files of a folder, by slash path.
func filesOf(t testing.TB, dir string) (out []string) {
	t.Helper()
	err := fs.WalkDir(os.DirFS(dir), ".", func(path string, d fs.DirEntry, err error) error {
		if err == nil && !d.IsDir() {
			out = append(out, path)
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// TestVerifySame: what was built is found as it was written, with a set value too,
// and what file managers leave is told and no fault.
func TestVerifySame(t *testing.T) {
	for _, args := range [][]string{nil, {"--set", "V=1.2 MN"}, {"--set", "frame.damping=2 %"}} {
		dir := plainPackage(t, args...)
		v, said := verified(t, dir)
		if !v.Same || v.Compared != comparedBytes || strings.Count(said, "\n") != 2 {
			t.Errorf("%v: %s", args, said)
		}
		write(t, filepath.Join(dir, "tables", ".DS_Store"), "x")
		if v, said := verified(t, dir); !v.Same || len(v.Notes) != 1 || !strings.Contains(said, "tables/.DS_Store") {
			t.Errorf("%v: %s", args, said)
		}
	}
}

// TestVerifyFindsEveryBit flips one bit at several places of every file.
func TestVerifyFindsEveryBit(t *testing.T) {
	dir := plainPackage(t)
	r := rand.New(rand.NewPCG(7, 11))
	files := filesOf(t, dir)
	if !slices.Contains(files, "README.txt") || !slices.Contains(files, "manifest.json") || !slices.Contains(files, "inputs/storeys.csv") {
		t.Fatalf("the package holds %v", files)
	}
	for _, name := range files {
		path := filepath.Join(dir, filepath.FromSlash(name))
		good := slurp(t, path)
		places := []int{0, len(good) - 1}
		for range 6 {
			places = append(places, r.IntN(len(good)))
		}
		for _, at := range places {
			bad := []byte(good)
			bad[at] ^= 1 << r.IntN(8)
			write(t, path, string(bad))
			if v, said := verified(t, dir); v.Same || v.Failure == "" && !strings.Contains(said, name) {
				t.Errorf("%s: byte %d is %q instead of %q and not found:\n%s", name, at, bad[at], good[at], said)
			}
		}
		write(t, path, good)
	}
	if v, said := verified(t, dir); !v.Same {
		t.Errorf("all is put back: %s", said)
	}
}

// TestVerifyFinds: whatever is done to a package is found, by name, and verify neither
// writes nor reads outside.
func TestVerifyFinds(t *testing.T) {
	secret := filepath.Join(t.TempDir(), "secret.md")
	write(t, secret, "---\nquoin: 1\ntitle: Not for you\n---\n")
	at := func(dir, name string) string { return filepath.Join(dir, filepath.FromSlash(name)) }
	edit := func(t *testing.T, dir, name, old, new string) {
		text := slurp(t, at(dir, name))
		if !strings.Contains(text, old) {
			t.Fatalf("%s does not hold %q", name, old)
		}
		write(t, at(dir, name), strings.Replace(text, old, new, 1))
	}
	link := func(t *testing.T, to, path string) {
		if err := os.RemoveAll(path); err != nil {
			t.Fatal(err)
		}
		if err := os.Symlink(to, path); err != nil {
			if runtime.GOOS == "windows" { // where making links needs a privilege
				t.Skip(err)
			}
			t.Fatal(err)
		}
	}
	sum := ledger.Sum([]byte(slurp(t, secret)))
	for _, c := range []struct {
		name  string
		spoil func(t *testing.T, dir string)
		says  string
	}{
		{"a file more", func(t *testing.T, dir string) { write(t, at(dir, "tables/x.csv"), "1") }, "tables/x.csv is no part of the package"},
		{"an input more", func(t *testing.T, dir string) { write(t, at(dir, "inputs/x.csv"), "1") }, "inputs/x.csv is no part of the package"},
		{"a hidden file", func(t *testing.T, dir string) { write(t, at(dir, ".x"), "1") }, ".x is no part of the package"},
		{"a folder more", func(t *testing.T, dir string) { os.Mkdir(at(dir, "empty"), 0o755) }, "empty is a folder that is no part"},
		{"a folder of files more", func(t *testing.T, dir string) { write(t, at(dir, "more/a"), "1") }, "more is a folder that is no part"},
		{"a file gone", func(t *testing.T, dir string) { os.Remove(at(dir, "results.json")) }, "results.json is missing"},
		{"the page gone", func(t *testing.T, dir string) { os.Remove(at(dir, "index.html")) }, "index.html is missing"},
		{"inputs gone", func(t *testing.T, dir string) { os.RemoveAll(at(dir, "inputs")) }, "inputs/package.md is missing"},
		{"a file renamed", func(t *testing.T, dir string) { os.Rename(at(dir, "README.txt"), at(dir, "READ.txt")) }, "README.txt is missing"},
		{"a file cut short", func(t *testing.T, dir string) { os.Truncate(at(dir, "index.html"), 1000) }, "index.html has 1000 bytes"},
		{"a file emptied", func(t *testing.T, dir string) { os.Truncate(at(dir, "inputs/storeys.csv"), 0) }, "inputs/storeys.csv has 0 bytes"},
		{"a file longer", func(t *testing.T, dir string) { appendTo(at(dir, "README.txt"), "\n") }, "README.txt has "},
		{"two files swapped", func(t *testing.T, dir string) {
			a, b := slurp(t, at(dir, "results.json")), slurp(t, at(dir, "README.txt"))
			write(t, at(dir, "results.json"), b)
			write(t, at(dir, "README.txt"), a)
		}, "results.json has "},
		{"a file in other case", func(t *testing.T, dir string) { write(t, at(dir, "INDEX.html"), slurp(t, at(dir, "index.html"))) }, ""},
		{"a link for a file", func(t *testing.T, dir string) {
			write(t, filepath.Join(dir, "..", "aside"), slurp(t, at(dir, "index.html")))
			link(t, filepath.Join("..", "aside"), at(dir, "index.html"))
		}, "index.html is a link or a device"},
		{"a link inside", func(t *testing.T, dir string) { link(t, "results.json", at(dir, "README.txt")) }, "README.txt is a link or a device"},
		{"a link for a folder", func(t *testing.T, dir string) {
			os.Rename(at(dir, "inputs"), filepath.Join(dir, "..", "moved"))
			link(t, filepath.Join("..", "moved"), at(dir, "inputs"))
		}, "inputs is no part of the package"},
		{"a link for the manifest", func(t *testing.T, dir string) {
			os.Rename(at(dir, "manifest.json"), filepath.Join(dir, "..", "m"))
			link(t, filepath.Join("..", "m"), at(dir, "manifest.json"))
		}, "is no regular file"},
		{"a manifest of a link out", func(t *testing.T, dir string) {
			link(t, secret, at(dir, "inputs/package.md"))
			edit(t, dir, "manifest.json", ledger.Sum([]byte(plain)), sum)
		}, "inputs/package.md is a link or a device"},
		{"no manifest", func(t *testing.T, dir string) { os.Remove(at(dir, "manifest.json")) }, "this is no package: it holds no manifest.json"},
		{"a manifest of another", func(t *testing.T, dir string) { write(t, at(dir, "manifest.json"), `{"name":"x"}`) }, "is not that of a package"},
		{"a later manifest", func(t *testing.T, dir string) { edit(t, dir, "manifest.json", `"schema": 1`, `"schema": 2`) }, "is of schema 2"},
		{"a key set twice", func(t *testing.T, dir string) {
			edit(t, dir, "manifest.json", `"tool": "`, "\"tool\": \"quoin 9\",\n\"tool\": \"")
		}, "manifest.json is not as the program writes it: line 4"},
		{"a path set twice in a row", func(t *testing.T, dir string) {
			edit(t, dir, "manifest.json", `{"path":"index.html",`, `{"path":"evil.html","path":"index.html",`)
		}, "manifest.json is not as the program writes it"},
		{"more behind the manifest", func(t *testing.T, dir string) { appendTo(at(dir, "manifest.json"), "{}") }, "manifest.json is not as the program writes it"},
		{"a file listed twice", func(t *testing.T, dir string) {
			m := slurp(t, at(dir, "manifest.json"))
			row := m[strings.Index(m, `  {"path":"index.html"`):]
			row = row[:strings.Index(row, "\n")+1]
			edit(t, dir, "manifest.json", row, row+row)
		}, "names both index.html and index.html"},
		{"case twins in the manifest", func(t *testing.T, dir string) {
			write(t, at(dir, "INDEX.html"), "x")
			reseal(t, dir)
		}, "names both INDEX.html and index.html"},
		{"a path that leads out", func(t *testing.T, dir string) {
			write(t, filepath.Join(dir, "..", "x"), "1")
			edit(t, dir, "manifest.json", `"path":"README.txt"`, `"path":"../x"`)
		}, `names "../x", which is no file of the package`},
		{"a path from the top", func(t *testing.T, dir string) {
			edit(t, dir, "manifest.json", `"path":"README.txt"`, `"path":"/etc/passwd"`)
		}, `names "/etc/passwd"`},
		{"a path through the inputs", func(t *testing.T, dir string) {
			edit(t, dir, "manifest.json", `"path":"inputs/storeys.csv"`, `"path":"inputs/../../x"`)
		}, `names "inputs/../../x"`},
		{"a size that is not", func(t *testing.T, dir string) {
			edit(t, dir, "manifest.json", fmt.Sprintf(`"bytes":%d`, len(plain)), `"bytes":-1`)
		}, "inputs/package.md has "},
		{"a size beyond all", func(t *testing.T, dir string) {
			if err := os.Truncate(at(dir, "README.txt"), 2<<30); err != nil { // it takes no room
				t.Fatal(err)
			}
			edit(t, dir, "manifest.json", `"bytes":`+fmt.Sprint(readmeSize(t, dir)), `"bytes":2147483648`)
		}, "README.txt is larger than 1024 MiB"},

		// With a manifest made to fit, the inputs tell.
		{"a value changed and sealed", func(t *testing.T, dir string) {
			edit(t, dir, "results.json", `"value":430000`, `"value":420000`)
			reseal(t, dir)
		}, "results.json comes out otherwise; first: value V differs by 0.023"},
		{"the page changed and sealed", func(t *testing.T, dir string) {
			edit(t, dir, "index.html", "<title>", "<title>Better ")
			reseal(t, dir)
		}, "index.html comes out otherwise, from line "},
		{"an input changed and sealed", func(t *testing.T, dir string) {
			edit(t, dir, "inputs/storeys.csv", "2400", "2300")
			reseal(t, dir)
		}, "results.json comes out otherwise; first: "},
		{"a file added and sealed", func(t *testing.T, dir string) {
			write(t, at(dir, "tables/more.csv"), "1")
			reseal(t, dir)
		}, "tables/more.csv does not come out of the inputs"},
		{"an input added and sealed", func(t *testing.T, dir string) {
			write(t, at(dir, "inputs/more.csv"), "1")
			reseal(t, dir)
		}, "inputs/more.csv does not come out of the inputs"},
		{"a file taken away and sealed", func(t *testing.T, dir string) {
			os.Remove(at(dir, "README.txt"))
			reseal(t, dir)
		}, "README.txt comes out and is not in the package"},
		{"another commit", func(t *testing.T, dir string) {
			edit(t, dir, "inputs/build.json", `"commit": ""`, `"commit": "0123456789012345678901234567890123456789"`)
			reseal(t, dir)
		}, "index.html comes out otherwise"},
		{"a set value that was none", func(t *testing.T, dir string) {
			edit(t, dir, "inputs/build.json", `"overrides": []`, "\"overrides\": [\n    {\n      \"name\": \"V\",\n      \"text\": \"1 kN\",\n      \"was\": \"0\"\n    }\n  ]")
			reseal(t, dir)
		}, "inputs/build.json comes out otherwise"},
		{"a document elsewhere", func(t *testing.T, dir string) {
			edit(t, dir, "inputs/build.json", `"main": "package.md"`, `"main": "`+filepath.ToSlash(secret)+`"`)
			reseal(t, dir)
		}, "leads out of the root"},
		{"a document above", func(t *testing.T, dir string) {
			edit(t, dir, "inputs/build.json", `"main": "package.md"`, `"main": "../../package.md"`)
			reseal(t, dir)
		}, "leads out of the root"},
		{"a data file above", func(t *testing.T, dir string) {
			edit(t, dir, "inputs/package.md", "storeys: storeys.csv", "storeys: ../../storeys.csv")
			reseal(t, dir)
		}, "leads out of the root"},
		{"a digest of nothing", func(t *testing.T, dir string) {
			m, err := ledger.ReadManifest([]byte(slurp(t, at(dir, "manifest.json"))))
			if err != nil {
				t.Fatal(err)
			}
			edit(t, dir, "manifest.json", m.Digest, strings.Repeat("0", 64))
		}, "gives a package digest that is not that of its inputs"},
	} {
		t.Run(c.name, func(t *testing.T) {
			t.Parallel()
			dir := plainPackage(t)
			c.spoil(t, dir)
			top := filepath.Dir(dir)
			before := tree(t, top)
			v, said := verified(t, dir)
			if v.Same || !strings.Contains(said, c.says) {
				t.Errorf("it says\n%s\nwant %q", said, c.says)
			}
			if strings.Contains(said, "Not for you") {
				t.Errorf("it tells what stands elsewhere:\n%s", said)
			}
			if after := tree(t, top); after != before {
				t.Errorf("verify wrote something:\n%s\nbefore:\n%s", after, before)
			}
		})
	}
}

// readmeSize is the size that the manifest gives of README.txt.
func readmeSize(t *testing.T, dir string) int {
	m, err := ledger.ReadManifest([]byte(slurp(t, filepath.Join(dir, ledger.ManifestFile))))
	if err != nil {
		t.Fatal(err)
	}
	return m.Files[0].Bytes
}

// tree is every name, size, mode and time of a folder.
func tree(t *testing.T, dir string) string {
	t.Helper()
	var b strings.Builder
	err := filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		info, err := d.Info()
		if err == nil {
			fmt.Fprintln(&b, path, info.Size(), info.Mode(), info.ModTime().UnixNano())
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// TestVerifyElsewhere: what another version wrote, or a program for another processor,
// is compared by its values, and that is said.
func TestVerifyElsewhere(t *testing.T) {
	edit := func(dir, name, old, new string) {
		path := filepath.Join(dir, filepath.FromSlash(name))
		write(t, path, strings.Replace(slurp(t, path), old, new, 1))
		reseal(t, dir)
	}
	for _, c := range []struct{ old, new, says string }{
		{`"architecture": "` + runtime.GOARCH + `"`, `"architecture": "other"`, "written on other and built again on " + runtime.GOARCH},
		{`"tool": "` + versionLine() + `"`, `"tool": "quoin 0.0.9"`, "written by quoin 0.0.9 and built again by " + versionLine()},
		{`"commit": ""`, `"later": 1, "tool": "quoin 9", "commit": ""`, ""},
	} {
		dir := plainPackage(t)
		edit(dir, "inputs/build.json", c.old, c.new)
		v, said := verified(t, dir)
		if c.says == "" { // build.json says two things
			if v.Same {
				t.Error(said)
			}
			continue
		}
		if !v.Same || v.Compared != comparedValues || !strings.Contains(said, c.says) || !strings.Contains(said, "agree to 1e-09") {
			t.Errorf("%s", said)
		}
		edit(dir, "results.json", `"value":430000`, `"value":430000.0001`)
		if v, said := verified(t, dir); !v.Same || v.Largest < 1e-10 || v.Largest > 1e-9 {
			t.Errorf("a difference of 2e-10: %s", said)
		}
		edit(dir, "results.json", `"value":430000.0001`, `"value":430000.001`)
		if v, said := verified(t, dir); v.Same || !strings.Contains(said, "do NOT agree") || !strings.Contains(said, "value V") {
			t.Errorf("a difference of 2e-9: %s", said)
		}
		edit(dir, "results.json", `"value":430000.001`, `"value":430000`)
		edit(dir, "results.json", `"ok":true`, `"ok":false`)
		if v, said := verified(t, dir); v.Same || !strings.Contains(said, "is true, was false") {
			t.Errorf("a check turned over: %s", said)
		}
	}
}

// TestVerdictLegible: a name in a package cannot drive the terminal, nor write a line of the verdict.
func TestVerdictLegible(t *testing.T) {
	evil := "a\x1b[2J\u202e\nP: as its manifest says"
	v := verdict{Folder: "P" + evil, Why: evil, Faults: []ledger.Flaw{{Path: evil, What: "is " + evil}}, Differ: []ledger.Flaw{{Path: evil, What: "is " + evil}}}
	for _, compared := range []string{"", comparedBytes, comparedValues} {
		v.Compared = compared
		said := v.words() + fileError(evil, evil)
		if strings.ContainsAny(said, "\x1b\u202e") || strings.Contains(v.words(), "\nP: as its") {
			t.Errorf("%q: %q", compared, said)
		}
	}
}
