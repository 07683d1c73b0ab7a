// Package render turns a computed package into the files of its folder. It knows
// nothing of earthquakes and touches no disk.
package render

import (
	"maps"

	"quoin/calc/exhibit"
	"quoin/render/ledger"
)

// Options are what is no part of the package.
type Options struct {
	// Progress, if set, is told of every picture drawn, one at a time.
	Progress func(done, total int, what string)
	// Cache, if set, keeps pictures and equations for the next time.
	Cache Cache
	body  bool // of the page, the chapters alone
}

// Cache keeps bytes by key from one run of this very program to the next. What it
// gives is what was put under the key, or nothing; it may lose anything at any
// time. It is used from several goroutines.
type Cache interface {
	Get(key string) ([]byte, bool)
	Put(key string, data []byte)
}

// Package is every file of the folder of p, by slash path: the page, the
// results, the tables, the inputs it was built from, a README and the manifest. files is
// every file that was read, by path relative to the root. The same package and
// files give the same bytes, with a cache and without. What is wrong with the
// formulas of the prose is a [*Faults].
func Package(p *exhibit.Package, files map[string][]byte, o Options) (map[string][]byte, error) {
	inputs, err := ledger.Inputs(files, p)
	if err != nil {
		return nil, err
	}
	digest := ledger.Digest(inputs, p.Provenance.Tool)
	// The numbers are written while the page is made.
	var out map[string][]byte
	var results, text []byte
	var faults [3]error
	inParallel(2, func(i int) {
		if i == 0 {
			text, faults[2] = index(p, files, digest, o)
			return
		}
		if out, faults[0] = ledger.Tables(p); faults[0] == nil {
			results, faults[1] = ledger.Results(p)
		}
	})
	for _, err := range faults {
		if err != nil {
			return nil, err
		}
	}
	out["results.json"], out["index.html"] = results, text
	maps.Copy(out, inputs)
	out[ledger.ResultsText] = ledger.FrozenOf(p).Text()
	out[ledger.ReadmeFile] = ledger.Readme(p, digest)
	out[ledger.ManifestFile] = ledger.Manifest(out, digest, p.Provenance.Tool)
	return out, nil
}
