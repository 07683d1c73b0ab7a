package main

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
)

// source is one FILE of the command line.
type source struct {
	given string // as written on the command line
	root  string // absolute, links followed: nothing outside it is read
	main  string // slash path of FILE below root
	here  string // the current folder, absolute, links followed
}

// locate finds the root of FILE: the folder asked for, else the git work tree
// that holds it, else its own folder.
func locate(file, root string) (source, error) {
	s := source{given: file}
	info, err := os.Stat(file)
	if err != nil {
		return s, reason(err)
	}
	if info.IsDir() {
		return s, errors.New(isFolder)
	}
	// FILE itself may be a link: os.Root judges it. Its folder is followed.
	folder, err := real(filepath.Dir(file))
	if err != nil {
		return s, reason(err)
	}
	switch {
	case root != "":
		if s.root, err = real(root); err != nil {
			return s, err
		}
	default:
		s.root = workTree(folder)
	}
	if s.here, err = real("."); err != nil {
		return s, reason(err)
	}
	rel, err := filepath.Rel(s.root, filepath.Join(folder, filepath.Base(file)))
	if err != nil || !filepath.IsLocal(rel) {
		return s, errors.New(notInRoot + " " + s.root)
	}
	s.main = filepath.ToSlash(rel)
	return s, nil
}

// real is an absolute path with links followed.
func real(path string) (string, error) {
	path, err := filepath.Abs(path)
	if err != nil {
		return "", err
	}
	return filepath.EvalSymlinks(path)
}

// inside tells whether path is dir or lies below it, links followed as far as the
// paths exist.
func inside(path, dir string) bool {
	rel, err := filepath.Rel(settled(dir), settled(path))
	return err == nil && filepath.IsLocal(rel)
}

// settled is an absolute path with the links of what exists of it followed.
func settled(path string) string {
	if full, err := real(path); err == nil {
		return full
	}
	path, err := filepath.Abs(path)
	if parent := filepath.Dir(path); err == nil && parent != path {
		return filepath.Join(settled(parent), filepath.Base(path))
	}
	return path
}

// reason is an error of the file system without the path, which the message
// begins with anyway.
func reason(err error) error {
	var p *os.PathError
	if errors.As(err, &p) {
		return p.Err
	}
	return err
}

// workTree is the lowest folder at or above folder that holds .git, else folder.
func workTree(folder string) string {
	if top, ok := gitTop(folder); ok {
		return top
	}
	return folder
}

// gitTop is the lowest folder at or above folder that holds .git.
func gitTop(folder string) (top string, ok bool) {
	for d := folder; ; d = filepath.Dir(d) {
		if _, err := os.Lstat(filepath.Join(d, ".git")); err == nil {
			return d, true
		}
		if d == filepath.Dir(d) {
			return "", false
		}
	}
}

// seen is a path below the root as seen from the current folder.
func (s source) seen(path string) string {
	if path == s.main && !filepath.IsAbs(s.given) {
		return filepath.ToSlash(filepath.Clean(s.given))
	}
	rel, err := filepath.Rel(s.here, filepath.Join(s.root, filepath.FromSlash(path)))
	if err != nil {
		return path
	}
	return filepath.ToSlash(rel)
}

// folder is where the package goes by default: STEM.package beside FILE.
func (s source) folder() string { return s.beside(".package") }

// beside is STEM and an ending, beside FILE.
func (s source) beside(ending string) string {
	base := filepath.Base(s.given)
	stem := strings.TrimSuffix(base, filepath.Ext(base))
	return filepath.Join(filepath.Dir(s.given), stem+ending)
}
