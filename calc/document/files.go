package document

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io/fs"
	"path"
	"slices"
	"strings"
	"sync"

	"quoin/calc/exhibit"
)

// largest is the size up to which a file is read.
const largest = 256 << 20

// files reads below the root, each file once, and remembers what was read.
type files struct {
	root fs.FS
	mu   sync.Mutex
	got  map[string]readFile
}

type readFile struct {
	data []byte
	sum  string // SHA-256 in hexadecimal
	role string // what it is read as; "" while it is none of the inputs
	err  error
}

func newFiles(root fs.FS) *files { return &files{root: root, got: map[string]readFile{}} }

var errOutside = errors.New("leads out of the root; only files below it are read")

// below joins a path named in a document to the folder of the file that names
// it, and refuses what leads out of the root.
func below(dir, name string) (string, error) {
	if strings.Contains(name, "\\") {
		return "", fmt.Errorf("write the path %q with forward slashes", name)
	}
	if path.IsAbs(name) || len(name) > 1 && name[1] == ':' {
		return "", fmt.Errorf("%s is an absolute path; only files of the package's root are read", name)
	}
	full := path.Join(dir, name)
	if !fs.ValidPath(full) || full == "." {
		return "", fmt.Errorf("%s %w", name, errOutside)
	}
	return full, nil
}

// read gives the bytes of a file below the root. Of several roles a file has the
// last in the alphabet, whoever comes first: a record that is linked as well is a
// record, no attachment.
func (f *files) read(full, role string) ([]byte, error) {
	r := f.get(full, role)
	return r.data, r.err
}

// sum is the SHA-256 of a file that does not become an input by that.
func (f *files) sum(full string) (string, error) {
	r := f.get(full, "")
	return r.sum, r.err
}

func (f *files) get(full, role string) readFile {
	f.mu.Lock()
	defer f.mu.Unlock()
	r, ok := f.got[full]
	if !ok {
		if r.data, r.err = f.open(full); r.err == nil {
			sum := sha256.Sum256(r.data)
			r.sum = hex.EncodeToString(sum[:])
		}
	}
	r.role = max(r.role, role)
	f.got[full] = r
	return r
}

func (f *files) open(full string) ([]byte, error) {
	if !fs.ValidPath(full) {
		return nil, fmt.Errorf("%s leads out of the root", full)
	}
	info, err := fs.Stat(f.root, full)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return nil, fmt.Errorf("there is no file %s", full)
	case err != nil:
		return nil, fmt.Errorf("%s cannot be read: %s", full, cause(err))
	case info.IsDir():
		return nil, fmt.Errorf("%s is a folder", full)
	case !info.Mode().IsRegular():
		return nil, fmt.Errorf("%s is not a regular file", full)
	case info.Size() > largest:
		return nil, fmt.Errorf("%s is larger than %d MiB", full, largest>>20)
	}
	data, err := fs.ReadFile(f.root, full)
	if err != nil {
		return nil, fmt.Errorf("%s cannot be read: %s", full, cause(err))
	}
	return data, nil
}

// cause is the reason of a file error without the path and the call.
func cause(err error) string {
	var pe *fs.PathError
	if errors.As(err, &pe) {
		return pe.Err.Error()
	}
	return err.Error()
}

func (f *files) contents() map[string][]byte {
	out := map[string][]byte{}
	for p, r := range f.got {
		if r.err == nil && r.role != "" {
			out[p] = r.data
		}
	}
	return out
}

// inputs lists the files read, the main one first.
func (f *files) inputs(main string) []exhibit.Input {
	var out []exhibit.Input
	for p, r := range f.got {
		if r.err == nil && r.role != "" {
			out = append(out, exhibit.Input{Path: p, SHA256: r.sum, Bytes: len(r.data), Role: r.role})
		}
	}
	slices.SortFunc(out, func(a, b exhibit.Input) int {
		if (a.Path == main) != (b.Path == main) {
			if a.Path == main {
				return -1
			}
			return 1
		}
		return strings.Compare(a.Path, b.Path)
	})
	return out
}
