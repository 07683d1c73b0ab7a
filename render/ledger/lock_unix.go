//go:build unix && !solaris && !aix

package ledger

import (
	"os"

	"golang.org/x/sys/unix"
)

// lock holds a folder against other runs until release; the lock falls with the
// program. free is false where another run holds it.
func lock(folder string) (release func(), free bool) {
	f, err := os.Open(folder)
	if err != nil {
		return func() {}, true
	}
	switch err := unix.Flock(int(f.Fd()), unix.LOCK_EX|unix.LOCK_NB); err {
	case nil:
		return func() { f.Close() }, true
	case unix.EWOULDBLOCK:
		f.Close()
		return func() {}, false
	}
	f.Close() // a filesystem without locks
	return func() {}, forsaken(folder)
}

// syncFolder brings the entries of a folder to the disk.
func syncFolder(folder string) error {
	f, err := os.Open(folder)
	if err != nil {
		return err
	}
	defer f.Close()
	// Some network filesystems cannot; the files themselves are on the disk.
	if err := f.Sync(); err != nil && err.(*os.PathError).Err != unix.EINVAL {
		return err
	}
	return nil
}
