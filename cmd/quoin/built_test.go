package main

import (
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
)

// shared is a folder of all tests, made when one asks for it and gone with the
// last. Its name holds what the names of folders hold: blanks, signs of addresses,
// letters of other scripts.
var shared = sync.OnceValues(func() (string, error) {
	top, err := os.MkdirTemp("", "quoin-tests-")
	if err != nil {
		return "", err
	}
	dir := filepath.Join(top, "50 % of #1, 100%25 Ω & 図面")
	return dir, os.Mkdir(dir, 0o755)
})

// tidy removes the shared folder after the tests.
type tidy struct{ *testing.M }

func (m tidy) Run() int {
	code := m.M.Run()
	if dir, err := shared(); err == nil {
		os.RemoveAll(filepath.Dir(dir))
	}
	return code
}

// examples are the packages of examples, by name, each built once for all tests.
var examples = map[string]func() (string, error){}

func init() {
	for name := range failing {
		examples[name] = sync.OnceValues(func() (string, error) { return buildShared(module+"/examples/"+name+"/package.md", name) })
	}
}

// exampleOf is the folder of an example, written as its user writes it.
func exampleOf(t *testing.T, name string) string {
	t.Helper()
	dir, err := examples[name]()
	if err != nil {
		t.Fatal(err)
	}
	return dir
}

type failedBuild string

func (f failedBuild) Error() string { return string(f) }

// buildShared builds FILE into the shared folder.
func buildShared(file, name string) (string, error) {
	dir, err := shared()
	if err != nil {
		return "", err
	}
	dir = filepath.Join(dir, name+".package")
	var said strings.Builder
	if code := run([]string{"build", file, "-o", dir}, strings.NewReader(""), &said, &said); code != exitBuilt {
		return "", failedBuild("build fails:\n" + said.String())
	}
	return dir, nil
}
