package main

import (
	"bytes"
	"crypto/sha1"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"hash"
	"os"
	"path"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"time"
)

// What a package says of git: the commit that the work tree of FILE stands on, its
// date, and whether every byte that was read is in that commit. The bytes themselves
// are held to the commit, not to the index: it makes no difference what is staged,
// ignored or not refreshed, and no filter that a repository names is run.

// workTrees asks git about each work tree once. It is for one command: a commit made
// meanwhile is not seen.
type workTrees struct {
	mu  sync.Mutex
	got map[string]func() *repository
}

// repository is one work tree at one commit.
type repository struct {
	top          string // absolute, links followed
	commit, date string // "": there is no commit yet
	why          string // why git cannot tell; "" where it can
	silent       bool   // git gave no answer at all
	entries      map[string]gitEntry

	mu   sync.Mutex
	subs map[string]*repository
}

// gitEntry is a file, a link or a submodule of a commit.
type gitEntry struct{ mode, id string }

const (
	modeLink   = "120000"
	modeModule = "160000"
)

// of is the repository whose work tree holds a folder; nil outside git. A nil
// *workTrees asks anew.
func (t *workTrees) of(folder string) *repository {
	top, ok := gitTop(folder)
	switch {
	case !ok:
		return nil
	case t == nil:
		return readRepository(top, "HEAD")
	}
	t.mu.Lock()
	if t.got == nil {
		t.got = map[string]func() *repository{}
	}
	ask := t.got[top]
	if ask == nil {
		ask = sync.OnceValue(func() *repository { return readRepository(top, "HEAD") })
		t.got[top] = ask
	}
	t.mu.Unlock()
	return ask()
}

// readRepository reads what a commit of a repository holds.
func readRepository(top, what string) *repository {
	r := &repository{top: top, entries: map[string]gitEntry{}}
	id, err := askGit(top, "rev-parse", "--quiet", "--verify", what)
	if exit := exitError(0); errors.As(err, &exit) && exit == 1 {
		return r // no commit yet
	}
	var head, list []byte
	if err == nil {
		r.commit = strings.TrimSpace(string(id))
		head, err = askGit(top, "cat-file", "commit", r.commit)
	}
	if err == nil {
		list, err = askGit(top, "ls-tree", "-r", "-z", "--full-tree", r.commit)
	}
	if err != nil {
		return &repository{top: top, why: err.Error(), silent: errors.As(err, new(gitSilent))}
	}
	r.date = committed(head)
	for line := range strings.SplitSeq(string(list), "\x00") {
		// MODE TYPE ID<tab>PATH
		if facts, name, ok := strings.Cut(line, "\t"); ok {
			if f := strings.Fields(facts); len(f) == 3 {
				r.entries[name] = gitEntry{f[0], f[2]}
			}
		}
	}
	return r
}

// committed is the date of a commit, where it was made: "2026-01-20".
func committed(commit []byte) string {
	for line := range strings.SplitSeq(string(commit), "\n") {
		if line == "" {
			break
		}
		rest, ok := strings.CutPrefix(line, "committer ")
		f := strings.Fields(rest)
		if !ok || len(f) < 2 {
			continue
		}
		seconds, err := strconv.ParseInt(f[len(f)-2], 10, 64)
		zone, err2 := strconv.Atoi(f[len(f)-1]) // +0130
		if err != nil || err2 != nil {
			return ""
		}
		return time.Unix(seconds, 0).In(time.FixedZone("", (zone/100*60+zone%100)*60)).Format(time.DateOnly)
	}
	return ""
}

// provenance is the commit and its date; "" outside git and where git cannot tell.
func (r *repository) provenance() (id, date, why string) {
	if r == nil {
		return "", "", ""
	}
	return r.commit, r.date, r.why
}

// dirty tells whether any of the files read, by path below root, is not in the commit
// with these very bytes. Outside git nothing is dirty, and nothing is known to be
// where git cannot tell.
func (r *repository) dirty(root string, files map[string][]byte) bool {
	if r == nil || r.why != "" {
		return false
	}
	for name, data := range files {
		rel, err := filepath.Rel(r.top, filepath.Join(root, filepath.FromSlash(name)))
		if err != nil || !filepath.IsLocal(rel) || !r.holds(filepath.ToSlash(rel), data) {
			return true
		}
	}
	return false
}

// holds tells whether the commit has a file of these bytes at a path below the top,
// following links and submodules that are themselves of the commit.
func (r *repository) holds(rel string, data []byte) bool {
	for range 64 {
		at, rest, e, ok := r.find(rel)
		if !ok {
			return false
		}
		switch e.mode {
		case modeLink:
			to, err := os.Readlink(filepath.Join(r.top, filepath.FromSlash(at)))
			if err != nil || !e.is([]byte(filepath.ToSlash(to))) || filepath.IsAbs(to) {
				return false
			}
			if rel = path.Join(path.Dir(at), filepath.ToSlash(to), rest); !filepath.IsLocal(rel) {
				return false
			}
		case modeModule:
			sub := r.sub(at, e.id)
			return sub.why == "" && sub.holds(rest, data)
		default:
			// A checkout may have given text the line ends of the system.
			return rest == "" && (e.is(data) || bytes.Contains(data, []byte("\r\n")) && e.is(bytes.ReplaceAll(data, []byte("\r\n"), []byte("\n"))))
		}
	}
	return false
}

// find is the entry at a path, or at the part of it that is a link or a submodule.
func (r *repository) find(rel string) (at, rest string, e gitEntry, ok bool) {
	for i := 0; i <= len(rel); i++ {
		if i < len(rel) && rel[i] != '/' {
			continue
		}
		if e, ok = r.entries[rel[:i]]; ok {
			return rel[:i], strings.TrimPrefix(rel[i:], "/"), e, true
		}
	}
	return "", "", gitEntry{}, false
}

// sub is a submodule at the commit that this one names.
func (r *repository) sub(at, id string) *repository {
	r.mu.Lock()
	defer r.mu.Unlock()
	if r.subs == nil {
		r.subs = map[string]*repository{}
	}
	if r.subs[at] == nil {
		r.subs[at] = readRepository(filepath.Join(r.top, filepath.FromSlash(at)), id)
	}
	return r.subs[at]
}

// is tells whether an entry is a blob of these bytes.
func (e gitEntry) is(data []byte) bool {
	var h hash.Hash = sha1.New()
	if len(e.id) == 2*sha256.Size {
		h = sha256.New()
	}
	fmt.Fprintf(h, "blob %d\x00", len(data))
	h.Write(data)
	return hex.EncodeToString(h.Sum(nil)) == e.id
}
