package main

import (
	"bytes"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
	"time"
)

// TestGitStuck: a git that gives no answer is asked once for all packages of a work
// tree, and each is built with the warning that its commit is not known.
func TestGitStuck(t *testing.T) {
	if runtime.GOOS == "windows" {
		t.Skip("a script stands for git")
	}
	dir := t.TempDir()
	bin, asked := filepath.Join(dir, "bin"), filepath.Join(dir, "asked")
	write := func(path, text string, mode os.FileMode) {
		t.Helper()
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(text), mode); err != nil {
			t.Fatal(err)
		}
	}
	write(filepath.Join(bin, "git"), "#!/bin/sh\necho asked >>'"+asked+"'\nexec sleep 30\n", 0o755)
	work := filepath.Join(dir, "work")
	if err := os.MkdirAll(filepath.Join(work, ".git"), 0o755); err != nil {
		t.Fatal(err)
	}
	for _, name := range []string{"a", "b", "c"} {
		write(filepath.Join(work, name+".md"), "---\nquoin: 1\ntitle: "+name+"\n---\n", 0o644)
	}
	t.Setenv("PATH", bin+string(filepath.ListSeparator)+os.Getenv("PATH"))
	defer func(was time.Duration) { gitPatience = was }(gitPatience)
	gitPatience = 500 * time.Millisecond
	var out, said bytes.Buffer
	a := &app{stdout: &out, stderr: &said, flags: flags{noCache: true}}
	if err := a.each([]string{work}, job{(*app).check, true, false}); err != nil || a.code != exitBuilt {
		t.Fatalf("error %v, code %d\n%s", err, a.code, said.String())
	}
	if n := strings.Count(said.String(), "its commit is not known: git gave no answer within 500ms\n"); n != 3 {
		t.Errorf("%d warnings for three packages:\n%s", n, said.String())
	}
	if got, _ := os.ReadFile(asked); string(got) != "asked\n" {
		t.Errorf("git was asked %q", got)
	}
	// Nor is it asked again for every page of a live one.
	src, err := locate(filepath.Join(work, "a.md"), "")
	if err != nil {
		t.Fatal(err)
	}
	w := newWatch(a, src, "0")
	for range 3 {
		if res, err := w.run(); err != nil || res.Package == nil {
			t.Fatalf("error %v\n%v", err, res.Diagnostics)
		}
	}
	if got, _ := os.ReadFile(asked); string(got) != "asked\nasked\n" {
		t.Errorf("with a live page, git was asked %q", got)
	}
}
