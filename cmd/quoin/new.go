package main

import (
	"embed"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

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
	case len(args) != 1 || args[0] == "":
		return errNoDir
	case units != "SI" && units != "US":
		return errUnits
	}
	dir := args[0]
	if err := makeStarter(dir, units); err != nil {
		fmt.Fprint(a.stderr, fileError(dir, reason(err).Error()))
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

// writeNew writes a file that is not there yet.
func writeNew(path string, data []byte) error {
	f, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return err
	}
	_, err = f.Write(data)
	return errors.Join(err, f.Close())
}
