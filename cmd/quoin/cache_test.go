package main

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"
)

// testCache is a cache in a new folder, for a program of that name.
func testCache(t *testing.T, folder, program string) *diskCache {
	t.Helper()
	return &diskCache{folder: folder, self: func() []byte { return []byte(program) }}
}

// entries are the files of a cache.
func entries(t *testing.T, folder string) []string {
	t.Helper()
	out := filesOf(t, folder)
	for i, name := range out {
		out[i] = filepath.Join(folder, filepath.FromSlash(name))
	}
	return out
}

// TestCacheKeeps: what is put is given, to the same program and under the same key only.
func TestCacheKeeps(t *testing.T) {
	dir := t.TempDir()
	c := testCache(t, dir, "one")
	for key, data := range map[string]string{"a": "first", "b": "", "": "none", "../../x": "y"} {
		if _, ok := c.Get(key); ok {
			t.Errorf("%q is there before it is put", key)
		}
		c.Put(key, []byte(data))
		if got, ok := testCache(t, dir, "one").Get(key); !ok || string(got) != data {
			t.Errorf("%q: got %q, %t", key, got, ok)
		}
		if _, ok := testCache(t, dir, "other").Get(key); ok {
			t.Errorf("%q is given to another program", key)
		}
	}
	if _, ok := testCache(t, dir, "").Get("onea"); ok {
		t.Error("the program and the key run into each other")
	}
	if (&diskCache{folder: dir, self: func() []byte { return nil }}).Put("x", nil); len(entries(t, dir)) != 4 {
		t.Errorf("an unknown program keeps something: %v", entries(t, dir))
	}
}

// TestCacheRefusesSpoilt: an entry of which any byte is another, one cut short and
// one that belongs elsewhere are none, and make way for a good one.
func TestCacheRefusesSpoilt(t *testing.T) {
	dir := t.TempDir()
	c := testCache(t, dir, "p")
	c.Put("k", []byte("data"))
	path := entries(t, dir)[0]
	good, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	spoilt := [][]byte{nil, good[:10], good[:len(good)-1], append(slices.Clone(good), 0)}
	for i := range good {
		b := slices.Clone(good)
		b[i] ^= 1
		spoilt = append(spoilt, b)
	}
	for _, b := range spoilt {
		if err := os.WriteFile(path, b, 0o600); err != nil {
			t.Fatal(err)
		}
		if got, ok := c.Get("k"); ok {
			t.Fatalf("%x is given as %q", b, got)
		}
		if c.Put("k", []byte("data")); len(entries(t, dir)) != 1 {
			t.Fatal("a spoilt entry stands in the way")
		}
	}
	other := filepath.Join(dir, c.name("other")[:2], c.name("other")[2:])
	os.MkdirAll(filepath.Dir(other), 0o700)
	if err := os.WriteFile(other, good, 0o600); err != nil {
		t.Fatal(err)
	}
	if got, ok := c.Get("other"); ok {
		t.Errorf("the entry of another key is given: %q", got)
	}
}

// TestCacheTrim: beyond the limit the entries used longest ago go, and files half
// written long ago; what is not ours stays.
func TestCacheTrim(t *testing.T) {
	dir := t.TempDir()
	c := testCache(t, dir, "p")
	now := time.Now()
	for i := range 10 {
		key := fmt.Sprint(i)
		c.Put(key, make([]byte, 1000-32))
		when := now.Add(-time.Duration(100-i) * time.Hour)
		if err := os.Chtimes(c.path(c.name(key)), when, when); err != nil {
			t.Fatal(err)
		}
	}
	if _, ok := c.Get("0"); !ok { // used now
		t.Fatal("lost")
	}
	aside := filepath.Dir(c.path(c.name("1")))
	for name, age := range map[string]time.Duration{"new-123": 2 * time.Hour, "new-124": time.Minute, "new-x": 1000 * time.Hour, "notes.txt": 1000 * time.Hour} {
		path := filepath.Join(aside, name)
		if err := os.WriteFile(path, make([]byte, 5000), 0o600); err != nil {
			t.Fatal(err)
		}
		os.Chtimes(path, now.Add(-age), now.Add(-age))
	}
	c.trim(10_000)
	for i := range 10 {
		if _, ok := c.Get(fmt.Sprint(i)); !ok {
			t.Errorf("%d is gone though there is room", i)
		}
	}
	for i := range 10 {
		when := now.Add(-time.Duration(100-i) * time.Hour)
		if i == 0 {
			when = now
		}
		os.Chtimes(c.path(c.name(fmt.Sprint(i))), when, when)
	}
	c.trim(9_999) // to 7499: seven stay
	for i := range 10 {
		if _, ok := c.Get(fmt.Sprint(i)); ok != (i == 0 || i > 3) {
			t.Errorf("%d is there: %t", i, ok)
		}
	}
	for name, want := range map[string]bool{"new-123": false, "new-124": true, "new-x": true, "notes.txt": true} {
		if _, err := os.Stat(filepath.Join(aside, name)); (err == nil) != want {
			t.Errorf("%s is there: %t", name, err == nil)
		}
	}
}

// TestCacheTogether: many at once, in one program and in two, see whole entries.
func TestCacheTogether(t *testing.T) {
	dir := t.TempDir()
	var group sync.WaitGroup
	for range 4 {
		c := testCache(t, dir, "p")
		group.Go(func() {
			for i := range 200 {
				key := fmt.Sprint(i % 7)
				want := strings.Repeat(key, 5000)
				if got, ok := c.Get(key); ok && string(got) != want {
					t.Errorf("%s: half an entry", key)
				}
				c.Put(key, []byte(want))
				if i%50 == 0 {
					c.trim(20_000)
				}
			}
		})
	}
	group.Wait()
}

const small = `---
quoin: 1
title: Small
---

Let $x = 1$ be.

` + "```calc periods g\nfrom: 0.1 s\nto: 2 s\ncount: 20\n```\n\n```calc target d\nbasis: ASCE/SEI 7-22\nS_DS: 1.0\nS_D1: 0.6\nT_L: 8 s\nperiods: g\n```\n\n```calc formula\nV = 3 kN\nPSA = d.PSA(1 s)\n```\n"

// say builds a document and gives what is said on stdout.
func say(t *testing.T, args ...string) string {
	t.Helper()
	var out, errs bytes.Buffer
	if code := run(append([]string{"build"}, args...), nil, &out, &errs); code != exitBuilt {
		t.Fatalf("exit code %d: %s", code, &errs)
	}
	first, _, _ := strings.Cut(out.String(), "\n")
	return first
}

// folderOf is all files of a folder.
func folderOf(t *testing.T, dir string) string {
	t.Helper()
	var b strings.Builder
	for _, path := range entries(t, dir) {
		data, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		rel, _ := filepath.Rel(dir, path)
		fmt.Fprintf(&b, "%s %d\n%s\n", rel, len(data), data)
	}
	return b.String()
}

// TestUnchanged: a build that changes nothing leaves every file as it is; one that
// was tampered with, taken away or added to is put right or refused.
func TestUnchanged(t *testing.T) {
	dir := t.TempDir()
	t.Setenv("QUOIN_CACHE", filepath.Join(dir, "kept"))
	file, out := filepath.Join(dir, "package.md"), filepath.Join(dir, "out")
	if err := os.WriteFile(file, []byte(small), 0o644); err != nil {
		t.Fatal(err)
	}
	index := filepath.Join(out, "index.html")
	stat := func() os.FileInfo {
		info, err := os.Stat(index)
		if err != nil {
			t.Fatal(err)
		}
		return info
	}
	if got := say(t, file, "-o", out); got != file+": written to "+index {
		t.Fatalf("said %q", got)
	}
	before, all := stat(), folderOf(t, out)
	if got := say(t, file, "-o", out); got != file+": unchanged: "+index || !os.SameFile(before, stat()) || !stat().ModTime().Equal(before.ModTime()) {
		t.Errorf("said %q; the same file: %t", got, os.SameFile(before, stat()))
	}
	for what, spoil := range map[string]func() error{
		"a byte of a table": func() error {
			tables, _ := filepath.Glob(filepath.Join(out, "tables", "*"))
			text, err := os.ReadFile(tables[0])
			text[len(text)-2] ^= 1
			os.WriteFile(tables[0], text, 0o644)
			return err
		},
		"the manifest": func() error { return appendTo(filepath.Join(out, "manifest.json"), "\n") },
		"a file gone":  func() error { return os.Remove(filepath.Join(out, "results.json")) },
		"an input":     func() error { return appendTo(filepath.Join(out, "inputs", "package.md"), "x") },
		"a file that is a link": func() error {
			if err := os.Rename(index, filepath.Join(dir, "aside.html")); err != nil {
				return err
			}
			return os.Symlink(filepath.Join(dir, "aside.html"), index)
		},
	} {
		if err := spoil(); err != nil {
			t.Fatal(err)
		}
		if got := say(t, file, "-o", out); !strings.Contains(got, "written to") || folderOf(t, out) != all {
			t.Errorf("%s: said %q; put right: %t", what, got, folderOf(t, out) == all)
		}
	}
	// Without a cache, and with one that cannot be, the same bytes.
	for i, cache := range []string{filepath.Join(dir, "none"), os.DevNull} {
		t.Setenv("QUOIN_CACHE", cache)
		args := []string{file, "-o", filepath.Join(dir, fmt.Sprint(i))}
		if i == 0 {
			args = append(args, "--no-cache")
		}
		say(t, args...)
		if folderOf(t, filepath.Join(dir, fmt.Sprint(i))) != all {
			t.Errorf("with QUOIN_CACHE=%s the package differs", cache)
		}
	}
	if _, err := os.Stat(filepath.Join(dir, "none")); err == nil {
		t.Error("--no-cache keeps something")
	}
}

// TestNoHome: where the system names no folder for caches there is none.
func TestNoHome(t *testing.T) {
	for _, name := range []string{"QUOIN_CACHE", "HOME", "XDG_CACHE_HOME", "LocalAppData"} {
		t.Setenv(name, "")
	}
	if c := openCache(); c != nil {
		t.Errorf("a cache in %s", c.folder)
	}
	(*diskCache)(nil).Close()
}

func appendTo(path, text string) error {
	f, err := os.OpenFile(path, os.O_APPEND|os.O_WRONLY, 0)
	if err != nil {
		return err
	}
	if _, err = f.WriteString(text); err != nil {
		return err
	}
	return f.Close()
}

// TestCachedEditsAreTheSame builds a document as it is edited, with one cache: the
// whole package is, byte for byte, that of a build without.
func TestCachedEditsAreTheSame(t *testing.T) {
	dir := t.TempDir()
	t.Setenv("QUOIN_CACHE", filepath.Join(dir, "kept"))
	text := small
	file := filepath.Join(dir, "package.md")
	for i, edit := range [][2]string{{"", ""}, {"Let", "One.\n\nLet"}, {"S_D1: 0.6", "S_D1: 0.61"}, {"x = 1", "x = 2"}, {"target d", "target e"}, {"d.PSA", "e.PSA"}, {"```calc periods", "Two.\n\n```calc periods"}, {"title: Small", "title: Small\nunits: US"}, {"count: 20", "count: 21"}} {
		text = strings.Replace(text, edit[0], edit[1], 1)
		if i == 4 { // both names at once
			continue
		}
		if err := os.WriteFile(file, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		with, without := filepath.Join(dir, fmt.Sprint("with", i)), filepath.Join(dir, fmt.Sprint("without", i))
		say(t, file, "-o", with)
		say(t, file, "-o", without, "--no-cache")
		if folderOf(t, with) != folderOf(t, without) {
			t.Errorf("after %q the cache makes a difference", edit[1])
		}
	}
}
