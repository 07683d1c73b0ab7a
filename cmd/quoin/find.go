package main

import (
	"bufio"
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"quoin/render/ledger"
)

// target is a FILE to run, or why it is none.
type target struct {
	file string
	err  error
}

// find is every FILE meant by the arguments: a folder stands for the packages in it
// and below, in order of their paths, and many tells that there was one. A FILE named
// before, by whatever path, is left out.
func find(args []string) (all []target, many bool) {
	seen := map[string]bool{}
	add := func(file string, err error) {
		full := filepath.Join(settled(filepath.Dir(file)), filepath.Base(file))
		if !seen[full] {
			seen[full] = true
			all = append(all, target{file, err})
		}
	}
	for _, arg := range args {
		info, err := os.Stat(arg)
		if err != nil || !info.IsDir() { // what is wrong with a FILE is said when its turn comes
			add(arg, nil)
			continue
		}
		many = true
		below, err := packages(arg)
		if err == nil && len(below) == 0 {
			err = errors.New(noPackage)
		}
		if err != nil {
			add(arg, reason(err))
		}
		for _, file := range below {
			add(file, nil)
		}
	}
	return all, many
}

// packages are the documents in dir and below. Not looked into: hidden folders, folders
// of modules from elsewhere, written packages, and links.
func packages(dir string) (found []string, err error) {
	err = filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		switch {
		case err != nil && path != dir && errors.Is(err, fs.ErrPermission):
			return nil // what we may not look into holds nothing of ours
		case err != nil:
			return err
		case d.IsDir():
			if path != dir && (strings.HasPrefix(d.Name(), ".") || slices.Contains(foreign, d.Name())) || isWritten(path) {
				return fs.SkipDir
			}
		case d.Type().IsRegular() && slices.Contains(endings, strings.ToLower(filepath.Ext(path))) && marked(path):
			found = append(found, path)
		}
		return nil
	})
	return found, err
}

// isWritten tells whether a folder is a written package, whole or damaged: the copies of
// documents in it are no documents to run.
func isWritten(dir string) bool {
	if strings.HasSuffix(filepath.Base(dir), ".package") {
		for _, name := range []string{ledger.ManifestFile, "index.html"} {
			if _, err := os.Lstat(filepath.Join(dir, name)); err == nil {
				return true
			}
		}
	}
	return ledger.IsPackage(dir)
}

var (
	endings = []string{".md", ".markdown"}
	foreign = []string{"node_modules"}
)

// marked tells whether the front matter of a file holds the mark of a package,
// "quoin:", whatever stands behind it. Parts have no front matter.
func marked(path string) bool {
	f, err := os.Open(path)
	if err != nil {
		return false
	}
	defer f.Close()
	lines := bufio.NewScanner(io.LimitReader(f, 64<<10))
	for n := 0; lines.Scan(); n++ {
		line := strings.TrimRight(lines.Text(), " \t\r")
		switch {
		case n == 0:
			if strings.TrimPrefix(line, "\ufeff") != "---" {
				return false
			}
		case line == "---":
			return false
		case strings.HasPrefix(line, "quoin:"):
			return true
		}
	}
	return false
}

// refuseClashes keeps two packages from going to one folder. Names that differ in case
// only are one folder on many machines.
func refuseClashes(all []target) {
	first := map[string]int{}
	for i, t := range all {
		if t.err != nil {
			continue
		}
		folder := source{given: t.file}.folder()
		key := strings.ToLower(settled(folder))
		j, met := first[key]
		if !met {
			first[key] = i
			continue
		}
		all[i].err = errClash(folder, all[j].file)
		if all[j].err == nil {
			all[j].err = errClash(folder, t.file)
		}
	}
}
