package main

import (
	"fmt"
	"runtime"
	"runtime/debug"
	"slices"
	"strings"

	"quoin/calc/exhibit"
)

// builtBy is the compiler and the system, which no package depends on.
func builtBy() string {
	return fmt.Sprintf("built by %s for %s/%s", runtime.Version(), runtime.GOOS, runtime.GOARCH)
}

// buildOf is how the program was built. The operating system and the version of the
// compiler are left out: the bytes of a package depend on the version of the program
// and on the architecture alone. --version names them.
func buildOf() exhibit.Build {
	b := exhibit.Build{Architecture: runtime.GOARCH}
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return b
	}
	for _, m := range info.Deps {
		if m.Replace != nil {
			m = m.Replace
		}
		b.Modules = append(b.Modules, strings.TrimSpace(m.Path+" "+m.Version))
	}
	slices.Sort(b.Modules)
	return b
}
