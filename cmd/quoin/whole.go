package main

import (
	"os"

	"quoin/calc/document"
	"quoin/render/ledger"
)

// A package that stands as it would be written is not laid out again. What the page,
// the tables and the rest hold follows from the result of the run and from the files
// read; so an entry of the cache, known by the fingerprint of these, holds the
// SHA-256 of the manifest that came of them. Where the folder has that manifest, and
// every byte of every file that the manifest lists, and nothing else, it is what
// would be written. The run itself is never left out: provenance, messages and checks
// are those of today.

// wholeKey is the key of the manifest of a result; "" where nothing is kept. Whatever
// else draw lets into a package belongs in here.
func (a *app) wholeKey(res document.Result) string {
	if a.cache == nil {
		return ""
	}
	return "whole " + res.Fingerprint()
}

// stands tells whether dir holds what would be written.
func (a *app) stands(key, dir string) bool {
	if key == "" {
		return false
	}
	if _, err := os.Lstat(dir); err != nil {
		return false
	}
	sum, ok := a.cache.Get(key)
	return ok && ledger.Stands(dir, string(sum))
}

// keep notes the manifest that came of a result.
func (a *app) keep(key string, files map[string][]byte) {
	if key != "" {
		a.cache.Put(key, []byte(ledger.Sum(files[ledger.ManifestFile])))
	}
}
