package main

import (
	"embed"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"github.com/spf13/cobra"
)

// starter holds the files of a new package: one folder a system of units, and
// one of what both have.
//
//go:embed starter
var starter embed.FS

// renamed are files of the starter that go by another name in a package.
var renamed = map[string]string{"gitignore": ".gitignore"}

// new makes a package to start from in an empty or new folder.
func (a *app) new(_ *cobra.Command, args []string) error {
	units := strings.ToUpper(a.flags.units)
	switch {
	case len(args) > 1:
		return errOneDir
	case len(args) == 0 || args[0] == "":
		return errNoDir
	case units != "SI" && units != "US":
		return errUnits
	}
	dir := args[0]
	if err := makeStarter(dir, units); err != nil {
		fmt.Fprint(a.stderr, fileError(printable(dir), reason(err).Error()))
		a.code = exitErrors
		return nil
	}
	fmt.Fprint(a.stdout, started(filepath.ToSlash(dir)))
	return nil
}

// makeStarter writes the files. Nothing that exists is overwritten.
func makeStarter(dir, units string) error {
	switch list, err := os.ReadDir(dir); {
	case err == nil && len(list) > 0:
		return errors.New(notEmpty)
	case err != nil && !nameable(dir):
		return errors.New(badName)
	case err != nil && isLink(dir):
		return errors.New(deadLink)
	case err != nil && !errors.Is(err, fs.ErrNotExist):
		if info, e := os.Stat(dir); e == nil && !info.IsDir() {
			return errors.New(isFile)
		}
		return err
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return err
	}
	for _, from := range []string{"starter/both", "starter/" + units} {
		list, err := starter.ReadDir(from)
		if err != nil {
			return err
		}
		for _, f := range list {
			name := f.Name()
			data, err := starter.ReadFile(from + "/" + name)
			if err != nil {
				return err
			}
			if renamed[name] != "" {
				name = renamed[name]
			}
			if err := writeNew(filepath.Join(dir, name), data); err != nil {
				return err
			}
		}
	}
	return nil
}

// nameable tells whether the folders of dir that are not there yet have names that
// every system can hold: a package is made to be handed over.
func nameable(dir string) bool {
	for dir = filepath.Clean(dir); ; dir = filepath.Dir(dir) {
		if _, err := os.Lstat(dir); err == nil || dir == filepath.Dir(dir) {
			return true
		}
		name := filepath.Base(dir)
		stem, _, _ := strings.Cut(strings.ToUpper(name), ".")
		if strings.ContainsFunc(name, func(c rune) bool { return !unicode.IsPrint(c) || strings.ContainsRune(`<>:"|?*\`, c) }) ||
			strings.TrimRight(name, ". ") != name || slices.Contains(devices, stem) {
			return false
		}
	}
}

// devices are names that one system keeps for itself.
var devices = strings.Fields("CON PRN AUX NUL COM1 COM2 COM3 COM4 COM5 COM6 COM7 COM8 COM9 LPT1 LPT2 LPT3 LPT4 LPT5 LPT6 LPT7 LPT8 LPT9")

func isLink(path string) bool {
	info, err := os.Lstat(path)
	return err == nil && info.Mode()&fs.ModeSymlink != 0
}

// printable is a name in one line: quoted, where it holds what cannot be seen.
func printable(name string) string {
	if strings.ContainsFunc(name, func(c rune) bool { return !unicode.IsPrint(c) }) || !utf8.ValidString(name) {
		return strconv.Quote(name)
	}
	return name
}

// writeNew writes a file that is not there yet.
func writeNew(path string, data []byte) error {
	f, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return err
	}
	_, err = f.Write(data)
	return errors.Join(err, f.Close())
}
