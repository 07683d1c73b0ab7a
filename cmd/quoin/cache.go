package main

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"runtime/debug"
	"slices"
	"sync"
	"sync/atomic"
	"time"
)

// The cache on the disk: one file an entry, whose name is the SHA-256 of this
// executable and the key, and which begins with the SHA-256 of that name and the
// data. A file that does not is no entry. Whatever goes wrong, the program computes
// without it and says nothing: the cache saves time and decides nothing.

const (
	// cacheLimit is how many bytes the entries may take; beyond it the ones used
	// longest ago go, until a quarter is free.
	cacheLimit = 256 << 20
	// entryLimit is the largest entry.
	entryLimit = cacheLimit / 8
	// touched is how old the time of an entry may be before a use renews it.
	touched = time.Hour
	// abandoned is the age at which a file half written belongs to nobody.
	abandoned = time.Hour
)

// diskCache is one folder of entries, for one executable.
type diskCache struct {
	folder string
	self   func() []byte // identity of this program; nil where it is not known
	wrote  atomic.Bool
	off    atomic.Bool // nothing can be written here
}

// openCache is the cache of the user: the folder that QUOIN_CACHE names, else quoin
// in the system's folder for such things; nil where there is none.
func openCache() *diskCache {
	folder := os.Getenv("QUOIN_CACHE")
	if folder == "" {
		user, err := os.UserCacheDir()
		if err != nil {
			return nil
		}
		folder = filepath.Join(user, "quoin")
	}
	folder, err := filepath.Abs(folder)
	if err != nil {
		return nil
	}
	c := &diskCache{folder: folder, self: thisProgram}
	go c.self() // takes as long as reading the document
	return c
}

// thisProgram is the SHA-256 of the running executable and of how it says it was
// built: two programs that could compute differently never share an entry.
var thisProgram = sync.OnceValue(func() []byte {
	f, err := os.Open("/proc/self/exe") // the file that runs, even where another took its name
	if err != nil {                     // most systems have no such file
		path, err := os.Executable()
		if err != nil {
			return nil
		}
		if f, err = os.Open(path); err != nil {
			return nil
		}
	}
	defer f.Close()
	h := sha256.New()
	if _, err := io.Copy(h, f); err != nil {
		return nil
	}
	if info, ok := debug.ReadBuildInfo(); ok {
		io.WriteString(h, info.String())
	}
	return h.Sum(nil)
})

// name is the name of the entry of a key; "" where this program is not known.
func (c *diskCache) name(key string) string {
	self := c.self()
	if self == nil {
		return ""
	}
	sum := sha256.Sum256([]byte(key))
	sum = sha256.Sum256(append(slices.Clone(self), sum[:]...))
	return hex.EncodeToString(sum[:])
}

func (c *diskCache) path(name string) string { return filepath.Join(c.folder, name[:2], name[2:]) }

// seal is the sum that an entry begins with.
func seal(name string, data []byte) []byte {
	h := sha256.New()
	io.WriteString(h, name)
	h.Write(data)
	return h.Sum(nil)
}

// Get is what was put under a key.
func (c *diskCache) Get(key string) ([]byte, bool) {
	name := c.name(key)
	if name == "" {
		return nil, false
	}
	path := c.path(name)
	info, err := os.Lstat(path)
	if err != nil || !info.Mode().IsRegular() || info.Size() > entryLimit+sha256.Size {
		return nil, false
	}
	entry, err := os.ReadFile(path)
	if err != nil || len(entry) < sha256.Size {
		return nil, false
	}
	data := entry[sha256.Size:]
	if !bytes.Equal(entry[:sha256.Size], seal(name, data)) {
		os.Remove(path)
		return nil, false
	}
	if now := time.Now(); now.Sub(info.ModTime()).Abs() > touched {
		os.Chtimes(path, now, now)
	}
	return data, true
}

// Put keeps data under a key. Another program sees all of it or nothing.
func (c *diskCache) Put(key string, data []byte) {
	name := c.name(key)
	if name == "" || len(data) > entryLimit || c.off.Load() {
		return
	}
	path := c.path(name)
	fresh, err := c.write(filepath.Dir(path), seal(name, data), data)
	if err != nil {
		c.off.Store(true) // no folder, no room, no right: not asked again
		return
	}
	c.wrote.Store(true)
	if os.Rename(fresh, path) != nil {
		os.Remove(fresh) // some systems replace no file that is being read
	}
}

// half is the mark of a file that is being written.
const half = "new-"

// write makes a new file in dir, with a name of its own.
func (c *diskCache) write(dir string, parts ...[]byte) (name string, err error) {
	if err := os.MkdirAll(dir, 0o700); err != nil {
		return "", err
	}
	f, err := os.CreateTemp(dir, half)
	if err != nil {
		return "", err
	}
	for _, p := range parts {
		if err == nil {
			_, err = f.Write(p)
		}
	}
	if err = errors.Join(err, f.Close()); err != nil {
		os.Remove(f.Name())
	}
	return f.Name(), err
}

// Close brings the cache back below its limit, if this program added to it.
func (c *diskCache) Close() {
	if c != nil && c.wrote.Load() {
		c.trim(cacheLimit)
	}
}

// trim removes the entries used longest ago where all are larger than limit, and
// files half written long ago.
func (c *diskCache) trim(limit int64) {
	type entry struct {
		path string
		size int64
		used time.Time
	}
	var all []entry
	var total int64
	now := time.Now()
	filepath.WalkDir(c.folder, func(path string, d fs.DirEntry, err error) error {
		if err != nil || !d.Type().IsRegular() || !c.ours(path) {
			return nil // what cannot be read or is not ours stays
		}
		info, err := d.Info()
		if err != nil {
			return nil
		}
		if e := (entry{path, info.Size(), info.ModTime()}); len(d.Name()) != 62 {
			if now.Sub(e.used) > abandoned {
				os.Remove(path)
			}
		} else {
			all = append(all, e)
			total += e.size
		}
		return nil
	})
	if total <= limit {
		return
	}
	slices.SortFunc(all, func(a, b entry) int { return a.used.Compare(b.used) })
	for _, e := range all {
		if total <= limit*3/4 {
			break
		}
		if os.Remove(e.path) == nil {
			total -= e.size
		}
	}
}

// ours tells an entry, or the half of one, from a file of somebody else's: its
// folder is two hexadecimal digits, its name the other 62, or that of a file half
// written.
func (c *diskCache) ours(path string) bool {
	dir, base := filepath.Split(path)
	pair := filepath.Base(dir)
	if filepath.Dir(filepath.Clean(dir)) != c.folder || len(pair) != 2 {
		return false
	}
	if _, err := hex.DecodeString(pair); err != nil {
		return false
	}
	if rest, ok := bytes.CutPrefix([]byte(base), []byte(half)); ok {
		return len(rest) > 0 && len(bytes.Trim(rest, "0123456789")) == 0
	}
	_, err := hex.DecodeString(base)
	return err == nil && len(base) == 62
}
