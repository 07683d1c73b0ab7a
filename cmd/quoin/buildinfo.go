package main

import (
	"runtime"
	"runtime/debug"
	"slices"
	"strings"

	"quoin/calc/exhibit"
)

// buildOf is how the program was built. The operating system is left out: the bytes
// of a package depend on the architecture alone.
func buildOf() exhibit.Build {
	b := exhibit.Build{Language: runtime.Version(), Architecture: runtime.GOARCH}
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
