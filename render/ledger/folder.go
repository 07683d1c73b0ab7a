package ledger

import (
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"maps"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"time"
)

// How a folder is replaced as a whole. The new package is written beside the old
// one, as .NAME.new-DIGITS, and brought to the disk; then the two change places
// in one step where the system can do that, and the old one is removed. Where it
// cannot, the old one is first renamed to .NAME.old-DIGITS. Whenever this is cut
// short, the next Repair puts the old package back if NAME is missing, and
// removes what is left over: NAME is always a whole package, old or new.

const (
	newMark = ".new-"
	oldMark = ".old-"
)

// errNoExchange says that the system or the filesystem cannot exchange two folders in one step.
var errNoExchange = errors.New("no exchange")

// exchange makes two folders change places in one step, or returns errNoExchange.
// It is a variable so that tests can walk the other way.
var exchange = systemExchange

// Write makes dir the folder of the files, by slash path, in place of the
// package that is there. It fails and leaves everything as it was where dir is
// something else than a package: see Replaceable. The last folder of dir's path
// must exist but for dir itself.
func Write(dir string, files map[string][]byte) error {
	dir, err := resolve(dir)
	if err != nil {
		return err
	}
	if err := repair(dir); err != nil {
		return err
	}
	if err := replaceable(dir); err != nil {
		return err
	}
	fresh, release, err := fill(dir, files)
	if err != nil {
		return err
	}
	defer release()
	if err := swap(fresh, dir); err != nil {
		return errors.Join(err, os.RemoveAll(fresh))
	}
	return syncFolder(filepath.Dir(dir))
}

// Holds tells whether dir holds exactly these files, byte by byte, and nothing else
// but what file managers leave; then there is nothing to write.
func Holds(dir string, files map[string][]byte) bool {
	dir, err := resolve(dir)
	if err != nil {
		return false
	}
	found := 0
	err = filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() || slices.Contains(litter, d.Name()) {
			return err
		}
		rel, err := filepath.Rel(dir, path)
		if err != nil {
			return err
		}
		want, ok := files[filepath.ToSlash(rel)]
		info, err := d.Info()
		if !ok || err != nil || !info.Mode().IsRegular() || info.Size() != int64(len(want)) {
			return errDiffers
		}
		if got, err := os.ReadFile(path); err != nil || !bytes.Equal(got, want) {
			return errDiffers
		}
		found++
		return nil
	})
	return err == nil && found == len(files)
}

var errDiffers = errors.New("differs")

// Repair brings dir back to a whole package after an interruption, and removes
// the leftovers. It is harmless at any other time.
func Repair(dir string) error {
	dir, err := resolve(dir)
	if err != nil {
		return err
	}
	return repair(dir)
}

// Replaceable tells whether dir may be written: it does not exist, or it is a
// package that holds nothing else than what its manifest lists.
func Replaceable(dir string) error {
	dir, err := resolve(dir)
	if err != nil {
		return err
	}
	return replaceable(dir)
}

// resolve follows links, so that a link to a package stays a link.
func resolve(dir string) (string, error) {
	dir, err := filepath.Abs(dir)
	if err != nil {
		return "", err
	}
	if _, err := os.Lstat(dir); err == nil {
		return filepath.EvalSymlinks(dir)
	}
	parent, err := filepath.EvalSymlinks(filepath.Dir(dir))
	if errors.Is(err, fs.ErrNotExist) {
		return "", fmt.Errorf("there is no folder %s to hold the package; make it first", filepath.Dir(dir))
	}
	if err != nil {
		return "", err
	}
	return filepath.Join(parent, filepath.Base(dir)), nil
}

// Occupied is the error of a folder that holds something else than a package.
type Occupied struct{ err error }

func (e *Occupied) Error() string { return e.err.Error() }
func (e *Occupied) Unwrap() error { return e.err }

func occupied(format string, args ...any) error {
	return &Occupied{fmt.Errorf(format, args...)}
}

func replaceable(dir string) error {
	info, err := os.Lstat(dir)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return err
	}
	if !info.IsDir() {
		return occupied("%s is a file, not the folder of a package", dir)
	}
	text, err := os.ReadFile(filepath.Join(dir, ManifestFile))
	if errors.Is(err, fs.ErrNotExist) {
		return occupied("%s exists and is not a package: it holds no %s", dir, ManifestFile)
	}
	if err != nil {
		return err
	}
	manifest, err := ReadManifest(text)
	if err != nil {
		return occupied("%s exists and is not a package: %w", dir, err)
	}
	ours := map[string]bool{ManifestFile: true}
	for _, f := range manifest.Files {
		ours[f.Path] = true
	}
	return filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() || slices.Contains(litter, d.Name()) {
			return err
		}
		rel, err := filepath.Rel(dir, path)
		if err == nil && !ours[filepath.ToSlash(rel)] {
			err = occupied("%s holds a file that is no part of the package: %s", dir, rel)
		}
		return err
	})
}

// litter is what file managers leave in folders.
var litter = []string{".DS_Store", "Thumbs.db", "desktop.ini"}

// fill writes the new folder beside dir and brings it to the disk. release gives
// up the lock that keeps other runs from taking it for a leftover.
func fill(dir string, files map[string][]byte) (fresh string, release func(), err error) {
	fresh, err = os.MkdirTemp(filepath.Dir(dir), "."+filepath.Base(dir)+newMark)
	if err != nil {
		return "", nil, err
	}
	release, _ = lock(fresh)
	defer func() {
		if err != nil {
			release()
			err = errors.Join(err, os.RemoveAll(fresh))
		}
	}()
	folders := map[string]bool{fresh: true}
	for _, name := range slices.Sorted(maps.Keys(files)) {
		if !fs.ValidPath(name) || name == "." {
			panic("ledger: bad path in a package: " + name)
		}
		path := filepath.Join(fresh, filepath.FromSlash(name))
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			return "", nil, err
		}
		for d := filepath.Dir(path); !folders[d]; d = filepath.Dir(d) {
			folders[d] = true
		}
		if err := writeFile(path, files[name]); err != nil {
			return "", nil, err
		}
	}
	for d := range folders {
		// Whatever the umask.
		if err := os.Chmod(d, 0o755); err != nil {
			return "", nil, err
		}
		if err := syncFolder(d); err != nil {
			return "", nil, err
		}
	}
	return fresh, release, nil
}

func writeFile(path string, data []byte) error {
	f, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o644)
	if err != nil {
		return err
	}
	_, err = f.Write(data)
	return errors.Join(err, f.Chmod(0o644), f.Sync(), f.Close())
}

// swap puts fresh in the place of dir.
func swap(fresh, dir string) error {
	if _, err := os.Lstat(dir); errors.Is(err, fs.ErrNotExist) {
		return os.Rename(fresh, dir)
	}
	err := exchange(fresh, dir)
	if err == nil {
		return os.RemoveAll(fresh)
	}
	if !errors.Is(err, errNoExchange) {
		return err
	}
	mark := strings.LastIndex(fresh, newMark)
	old := fresh[:mark] + oldMark + fresh[mark+len(newMark):]
	if err := os.Rename(dir, old); err != nil {
		return err
	}
	if err := os.Rename(fresh, dir); err != nil {
		return errors.Join(err, os.Rename(old, dir))
	}
	return os.RemoveAll(old)
}

// repair puts an old package back where dir is missing, and removes leftovers
// that no running program holds.
func repair(dir string) error {
	parent, base := filepath.Dir(dir), filepath.Base(dir)
	entries, err := os.ReadDir(parent)
	if err != nil {
		return err
	}
	_, err = os.Lstat(dir)
	missing := errors.Is(err, fs.ErrNotExist)
	for _, e := range entries {
		if !e.IsDir() {
			continue
		}
		path := filepath.Join(parent, e.Name())
		old := leftover(e.Name(), base, oldMark)
		if !old && !leftover(e.Name(), base, newMark) {
			continue
		}
		release, free := lock(path)
		if !free {
			continue
		}
		if old && missing {
			err, missing = os.Rename(path, dir), false
		} else {
			err = os.RemoveAll(path)
		}
		release()
		if err != nil {
			return err
		}
	}
	return nil
}

// forsaken tells, where no lock can, whether the run that made a folder is gone: an
// old package stands aside for a moment only, a new one is written within the hour.
func forsaken(folder string) bool {
	if strings.Contains(filepath.Base(folder), oldMark) {
		return true
	}
	info, err := os.Stat(folder)
	return err != nil || time.Since(info.ModTime()) > time.Hour
}

// leftover tells whether a name is .BASE, the mark and digits.
func leftover(name, base, mark string) bool {
	digits, ok := strings.CutPrefix(name, "."+base+mark)
	return ok && digits != "" && strings.Trim(digits, "0123456789") == ""
}
