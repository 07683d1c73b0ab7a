package ledger

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"slices"
	"strings"
)

// How a written package is held to its manifest. Nothing is written, no link is
// followed, and through os.Root nothing outside the folder is read, whatever the
// manifest names and whatever changes meanwhile.

// Flaw is one thing that is not as the package was written.
type Flaw struct {
	Path string `json:"path"` // slash path below the folder of the package
	What string `json:"what"`
}

// Exam is what the folder of a package was found to hold.
type Exam struct {
	Manifest ManifestFacts
	Sum      string // SHA-256 of manifest.json, in hexadecimal
	Faults   []Flaw // by path; none: every file is there with its bytes, and none more
	Litter   []Flaw // what file managers left; no part of the package
}

const (
	// manifestLimit is the size up to which a manifest is read.
	manifestLimit = 64 << 20
	// fileLimit is the size up to which a file of a package is read.
	fileLimit = 1 << 30
	// entriesLimit is how many files and folders a package may hold.
	entriesLimit = 200_000
)

// Examine holds the folder to its manifest. An error says that it is no package, or
// cannot be read.
func Examine(root *os.Root) (*Exam, error) {
	text, err := ReadRegular(root, ManifestFile, manifestLimit)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, fmt.Errorf("this is no package: it holds no %s", ManifestFile)
	}
	if err != nil {
		return nil, err
	}
	x := &Exam{Sum: hash(text)}
	if x.Manifest, err = ReadManifest(text); err != nil {
		return nil, err
	}
	if x.Manifest.Schema != Schema {
		return nil, fmt.Errorf("%s is of schema %d; this program knows %d", ManifestFile, x.Manifest.Schema, Schema)
	}
	listed := x.list(text)
	if err := x.walk(root, listed); err != nil {
		return nil, err
	}
	for p := range listed {
		x.fault(p, "is missing")
	}
	x.digest()
	byPath := func(a, b Flaw) int { return strings.Compare(a.Path+"\x00"+a.What, b.Path+"\x00"+b.What) }
	slices.SortFunc(x.Faults, byPath)
	slices.SortFunc(x.Litter, byPath)
	return x, nil
}

func (x *Exam) fault(path, format string, args ...any) {
	x.Faults = append(x.Faults, Flaw{path, fmt.Sprintf(format, args...)})
}

// list is what the manifest names. A manifest that is not byte by byte as this
// program writes it says so: that finds keys set twice, blanks and all that a
// reader of JSON passes over.
func (x *Exam) list(text []byte) map[string]ManifestEntry {
	m := x.Manifest
	if want := m.text(); !bytes.Equal(text, want) {
		x.fault(ManifestFile, "is not as the program writes it: line %d is not", DiffersAt(text, want))
	}
	listed, folded := map[string]ManifestEntry{}, map[string]string{}
	last := ""
	for _, f := range m.Files {
		low := strings.ToLower(f.Path)
		switch _, err := hex.DecodeString(f.SHA256); {
		case !fs.ValidPath(f.Path) || f.Path == "." || f.Path == ManifestFile:
			x.fault(ManifestFile, "names %q, which is no file of the package", f.Path)
			continue
		case folded[low] != "":
			x.fault(ManifestFile, "names both %s and %s, which are one file on many machines", folded[low], f.Path)
			continue
		case f.Path <= last:
			x.fault(ManifestFile, "does not name its files in order: %s", f.Path)
		case err != nil || len(f.SHA256) != 2*sha256.Size || strings.ToLower(f.SHA256) != f.SHA256:
			x.fault(ManifestFile, "gives no SHA-256 of %s", f.Path)
		}
		last = f.Path
		folded[low] = f.Path
		listed[f.Path] = f
	}
	return listed
}

// walk looks at all that the folder holds, and takes what it finds off the list.
func (x *Exam) walk(root *os.Root, listed map[string]ManifestEntry) error {
	folders := map[string]bool{".": true}
	for p := range listed {
		for d := path.Dir(p); !folders[d]; d = path.Dir(d) {
			folders[d] = true
		}
	}
	seen := 0
	return fs.WalkDir(root.FS(), ".", func(p string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if seen++; seen > entriesLimit {
			return fmt.Errorf("the folder holds more than %d files", entriesLimit)
		}
		want, ours := listed[p]
		delete(listed, p)
		switch {
		case p == ManifestFile:
		case d.IsDir() && ours:
			x.fault(p, "is a folder, not a file")
		case d.IsDir():
			if !folders[p] {
				x.fault(p, "is a folder that is no part of the package")
				return fs.SkipDir
			}
		case !ours && slices.Contains(litter, d.Name()) && d.Type().IsRegular():
			x.Litter = append(x.Litter, Flaw{p, "was left by a file manager and is no part of the package"})
		case !ours:
			x.fault(p, "is no part of the package")
		case !d.Type().IsRegular():
			x.fault(p, "is a link or a device, not a file")
		default:
			return x.compare(root, p, want)
		}
		return nil
	})
}

// compare holds one file to its line of the manifest.
func (x *Exam) compare(root *os.Root, p string, want ManifestEntry) error {
	f, info, err := openRegular(root, p)
	if err != nil {
		return err
	}
	defer f.Close()
	switch {
	case info.Size() != int64(want.Bytes):
		x.fault(p, "has %d bytes, not the %d of the manifest", info.Size(), want.Bytes)
	case info.Size() > fileLimit:
		x.fault(p, "is larger than %d MiB and was not read", fileLimit>>20)
	default:
		h := sha256.New()
		if _, err := io.Copy(h, io.LimitReader(f, fileLimit)); err != nil {
			return err
		}
		if hex.EncodeToString(h.Sum(nil)) != want.SHA256 {
			x.fault(p, "does not have the SHA-256 of the manifest")
		}
	}
	return nil
}

// digest holds the package digest to the hashes of inputs/.
func (x *Exam) digest() {
	h := sha256.New()
	for _, f := range x.Manifest.Files {
		if strings.HasPrefix(f.Path, "inputs/") {
			fmt.Fprintf(h, "%s  %s\n", f.SHA256, f.Path)
		}
	}
	fmt.Fprintf(h, "tool %s\n", x.Manifest.Tool)
	if hex.EncodeToString(h.Sum(nil)) != x.Manifest.Digest {
		x.fault(ManifestFile, "gives a package digest that is not that of its inputs")
	}
}

// IsPackage tells whether a folder holds a manifest of ours.
func IsPackage(dir string) bool {
	path := filepath.Join(dir, ManifestFile)
	if info, err := os.Lstat(path); err != nil || !info.Mode().IsRegular() || info.Size() > manifestLimit {
		return false
	}
	text, err := os.ReadFile(path)
	if err != nil {
		return false
	}
	_, err = ReadManifest(text)
	return err == nil
}

// Stands tells whether dir is a package whose manifest has this SHA-256 and which
// holds every byte of it, and nothing else but what file managers leave.
func Stands(dir, manifest string) bool {
	root, err := os.OpenRoot(dir)
	if err != nil {
		return false
	}
	defer root.Close()
	text, err := ReadRegular(root, ManifestFile, manifestLimit)
	if err != nil || hash(text) != manifest {
		return false // without reading the rest
	}
	x, err := Examine(root)
	return err == nil && x.Sum == manifest && len(x.Faults) == 0
}

// openRegular opens a file that is one: no link, no device.
func openRegular(root *os.Root, p string) (*os.File, fs.FileInfo, error) {
	info, err := root.Lstat(p)
	if err == nil && !info.Mode().IsRegular() {
		err = &fs.PathError{Op: "open", Path: p, Err: errors.New("is no regular file")}
	}
	if err != nil {
		return nil, nil, err
	}
	f, err := root.Open(p)
	if err != nil {
		return nil, nil, err
	}
	now, err := f.Stat()
	if err == nil && !os.SameFile(info, now) {
		err = &fs.PathError{Op: "open", Path: p, Err: errors.New("is being replaced")}
	}
	if err != nil {
		f.Close()
		return nil, nil, err
	}
	return f, now, nil
}

// ReadRegular is the bytes of a file of at most limit; no link is followed.
func ReadRegular(root *os.Root, p string, limit int64) ([]byte, error) {
	f, info, err := openRegular(root, p)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	if info.Size() > limit {
		return nil, fmt.Errorf("%s is larger than %d MiB", p, limit>>20)
	}
	return io.ReadAll(io.LimitReader(f, limit))
}

// DiffersAt is the first line, counted from 1, in which two texts differ.
func DiffersAt(a, b []byte) int {
	n := 0
	for n < len(a) && n < len(b) && a[n] == b[n] {
		n++
	}
	return 1 + bytes.Count(a[:n], []byte{'\n'})
}
