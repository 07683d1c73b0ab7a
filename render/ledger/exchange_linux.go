package ledger

import (
	"errors"

	"golang.org/x/sys/unix"
)

// systemExchange is renameat2 with RENAME_EXCHANGE.
func systemExchange(a, b string) error {
	err := unix.Renameat2(unix.AT_FDCWD, a, unix.AT_FDCWD, b, unix.RENAME_EXCHANGE)
	if errors.Is(err, unix.ENOSYS) || errors.Is(err, unix.EINVAL) || errors.Is(err, unix.EOPNOTSUPP) {
		return errNoExchange
	}
	return err
}
