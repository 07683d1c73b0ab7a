package document

import (
	"maps"
	"slices"
)

// Fingerprint stands for all that a package shows and for the files it was made
// from, to the bit: two results with one fingerprint are drawn as the same bytes. It
// is "" where there is no package.
func (r Result) Fingerprint() string {
	if r.Package == nil {
		return ""
	}
	names := slices.Sorted(maps.Keys(r.Files))
	sums := make([]string, len(names))
	for i, name := range names {
		sums[i] = hashed(r.Files[name])
	}
	return hashed(content(viewpoint{}, "package", r.Package, names, sums))
}
