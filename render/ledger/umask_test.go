//go:build unix

package ledger

import (
	"os"
	"path/filepath"
	"syscall"
	"testing"
)

// Modes do not depend on the umask.
func TestModes(t *testing.T) {
	defer syscall.Umask(syscall.Umask(0o077))
	dir := filepath.Join(t.TempDir(), "p")
	if err := Write(dir, whole("one")); err != nil {
		t.Fatal(err)
	}
	for name, want := range map[string]os.FileMode{".": 0o755, "tables": 0o755, "inputs/x": 0o755, "index.html": 0o644, "inputs/x/y.md": 0o644} {
		info, err := os.Stat(filepath.Join(dir, name))
		if err != nil || info.Mode().Perm() != want {
			t.Errorf("%s: %v, %v; want %v", name, info.Mode(), err, want)
		}
	}
}
