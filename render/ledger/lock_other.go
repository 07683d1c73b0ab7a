//go:build !unix || solaris || aix

package ledger

// lock cannot hold a folder here.
func lock(string) (release func(), free bool) { return func() {}, true }

// syncFolder cannot be done here: a folder is no file.
func syncFolder(string) error { return nil }
