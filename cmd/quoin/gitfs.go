package main

import (
	"bytes"
	"errors"
	"io"
	"io/fs"
	"path"
	"strconv"
	"strings"
	"time"
)

// gitFS is the files of one commit, read through git's objects: the work tree is not
// looked at. Links are followed inside it.
type gitFS struct {
	folder string // git runs here
	tree   map[string]gitBlob
	dirs   map[string]bool
}

type gitBlob struct {
	object string
	size   int64
	link   bool
}

// newGitFS reads the tree of a commit.
func newGitFS(folder, commit string) (*gitFS, error) {
	out, ok := git(folder, "ls-tree", "-r", "-l", "-z", "--full-tree", commit)
	if !ok {
		return nil, errors.New(gitNoTree)
	}
	g := &gitFS{folder: folder, tree: map[string]gitBlob{}, dirs: map[string]bool{".": true}}
	for line := range strings.SplitSeq(string(out), "\x00") {
		about, name, ok := strings.Cut(line, "\t")
		f := strings.Fields(about) // mode, type, object, size
		if !ok || len(f) != 4 || f[1] != "blob" {
			continue // a repository inside this one
		}
		size, _ := strconv.ParseInt(f[3], 10, 64)
		g.tree[name] = gitBlob{f[2], size, f[0] == "120000"}
		for d := path.Dir(name); !g.dirs[d]; d = path.Dir(d) {
			g.dirs[d] = true
		}
	}
	return g, nil
}

// Open opens a file, or a folder that cannot be listed.
func (g *gitFS) Open(name string) (fs.File, error) {
	if !fs.ValidPath(name) {
		return nil, &fs.PathError{Op: "open", Path: name, Err: fs.ErrInvalid}
	}
	real, err := g.resolve(name)
	if err != nil {
		return nil, &fs.PathError{Op: "open", Path: name, Err: err}
	}
	if g.dirs[real] {
		return &gitFile{name: path.Base(name), dir: true}, nil
	}
	return &gitFile{name: path.Base(name), fs: g, entry: g.tree[real]}, nil
}

// mostLinks is how many links one path may go through.
const mostLinks = 32

// resolve follows the links in a path.
func (g *gitFS) resolve(name string) (string, error) {
	for range mostLinks {
		at := "" // the first part of the path that is a link
		for end := 0; end >= 0 && at == ""; {
			next := strings.IndexByte(name[end:], '/')
			part := name
			if next >= 0 {
				part, end = name[:end+next], end+next+1
			} else {
				end = -1
			}
			if g.tree[part].link {
				at = part
			}
		}
		if at == "" {
			if _, ok := g.tree[name]; !ok && !g.dirs[name] {
				return "", fs.ErrNotExist
			}
			return name, nil
		}
		target, ok := git(g.folder, "cat-file", "blob", g.tree[at].object)
		full := path.Join(path.Dir(at), string(target))
		if !ok || path.IsAbs(string(target)) || !fs.ValidPath(full) {
			return "", errors.New(gitLinkOut)
		}
		name = path.Join(full, strings.TrimPrefix(name[len(at):], "/"))
	}
	return "", errors.New(gitLinkLoop)
}

// gitFile is an open file of a commit; its bytes are read when asked for.
type gitFile struct {
	name  string
	fs    *gitFS
	entry gitBlob
	dir   bool
	read  *bytes.Reader
}

func (f *gitFile) Stat() (fs.FileInfo, error) { return gitInfo{f}, nil }
func (f *gitFile) Close() error               { return nil }

func (f *gitFile) Read(p []byte) (int, error) {
	if f.dir {
		return 0, &fs.PathError{Op: "read", Path: f.name, Err: errors.New(isFolder)}
	}
	if f.read == nil {
		data, ok := git(f.fs.folder, "cat-file", "blob", f.entry.object)
		if !ok {
			return 0, &fs.PathError{Op: "read", Path: f.name, Err: errors.New(gitNoObject)}
		}
		if bytes.HasPrefix(data, []byte("version https://git-lfs")) {
			return 0, &fs.PathError{Op: "read", Path: f.name, Err: errors.New(gitElsewhere)}
		}
		f.read = bytes.NewReader(data)
	}
	return f.read.Read(p)
}

var _ io.Reader = (*gitFile)(nil)

type gitInfo struct{ f *gitFile }

func (i gitInfo) Name() string       { return i.f.name }
func (i gitInfo) Size() int64        { return i.f.entry.size }
func (i gitInfo) ModTime() time.Time { return time.Time{} }
func (i gitInfo) IsDir() bool        { return i.f.dir }
func (i gitInfo) Sys() any           { return nil }
func (i gitInfo) Mode() fs.FileMode {
	if i.f.dir {
		return fs.ModeDir | 0o755
	}
	return 0o644
}
