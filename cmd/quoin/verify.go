package main

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io/fs"
	"maps"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"quoin/calc/document"
	"quoin/calc/exhibit"
	"quoin/render"
	"quoin/render/ledger"
)

// verdict is what is found of a written package: what --json writes for a DIR.
type verdict struct {
	Folder   string        `json:"folder"`
	Failure  string        `json:"failure,omitempty"` // where it is no package at all
	Tool     string        `json:"tool"`              // that wrote it
	Verified string        `json:"verified_by"`       // this program
	Files    int           `json:"files"`             // that the manifest lists
	Faults   []ledger.Flaw `json:"faults"`            // held to the manifest
	Compared string        `json:"compared"`          // "bytes", "values" or "": see Why
	Why      string        `json:"why,omitempty"`     // why not bytes, or nothing
	Differ   []ledger.Flaw `json:"differ"`            // built again: files, or values by id
	Largest  float64       `json:"largest"`           // difference of a number, of itself
	Notes    []ledger.Flaw `json:"notes,omitempty"`   // left by file managers
	Same     bool          `json:"same"`
}

// What was compared.
const (
	comparedBytes  = "bytes"
	comparedValues = "values"
)

// verifyEach verifies every DIR.
func (a *app) verifyEach(_ *cobra.Command, dirs []string) error {
	if len(dirs) == 0 {
		return errNoVerify
	}
	for _, dir := range dirs {
		a.code = worse(a.code, a.verify(dir))
	}
	return nil
}

// verify holds one written package to its manifest and to what its own inputs give.
// It writes nothing, takes nothing from the cache, and reads nothing but the folder.
func (a *app) verify(dir string) int {
	v := verdict{Folder: dir, Verified: versionLine()}
	root, err := os.OpenRoot(dir)
	if err == nil {
		defer root.Close()
		err = v.examine(root)
	}
	if err != nil {
		v.Failure = within(err)
	}
	v.Same = v.Failure == "" && len(v.Faults) == 0 && v.Compared != "" && len(v.Differ) == 0
	if a.flags.json {
		v.Faults, v.Differ = append([]ledger.Flaw{}, v.Faults...), append([]ledger.Flaw{}, v.Differ...)
		e := json.NewEncoder(a.stdout)
		e.SetEscapeHTML(false)
		if err := e.Encode(v); err != nil {
			panic(err)
		}
	} else if v.Failure != "" {
		fmt.Fprint(a.stderr, fileError(dir, v.Failure))
	} else {
		fmt.Fprint(a.stdout, v.words())
	}
	if !v.Same {
		return exitErrors
	}
	return exitBuilt
}

// within is an error of the file system with the path inside the folder.
func within(err error) string {
	var p *os.PathError
	if errors.As(err, &p) && !filepath.IsAbs(p.Path) && filepath.IsLocal(p.Path) && p.Path != "." && p.Op != "open root" {
		return p.Path + ": " + p.Err.Error()
	}
	return reason(err).Error()
}

// examine holds the folder to its manifest, and what its inputs give to the folder.
func (v *verdict) examine(root *os.Root) error {
	x, err := ledger.Examine(root)
	if err != nil {
		return err
	}
	v.Tool, v.Files, v.Faults, v.Notes = x.Manifest.Tool, len(x.Manifest.Files), x.Faults, x.Litter
	for _, f := range x.Faults {
		if strings.HasPrefix(f.Path+"/", "inputs/") {
			v.Why = inputsDiffer
			return nil
		}
	}
	if err := v.rebuild(root, x.Manifest); err != nil {
		v.Why = err.Error()
	}
	return nil
}

// rebuild builds the package again in memory and compares.
func (v *verdict) rebuild(root *os.Root, m ledger.ManifestFacts) error {
	inputs, err := root.OpenRoot("inputs")
	if err != nil {
		return errors.New(noInputs)
	}
	defer inputs.Close()
	// Of build.json it is known that it has the hash of the manifest, if it is listed.
	if !slices.ContainsFunc(m.Files, func(f ledger.ManifestEntry) bool { return f.Path == ledger.BuildFile }) {
		return errors.New(noInputs)
	}
	text, err := ledger.ReadRegular(root, ledger.BuildFile, readLimit)
	if err != nil {
		return reason(err)
	}
	facts, err := ledger.ReadBuild(text, versionLine())
	if err != nil {
		return err
	}
	files, err := again(inputs.FS(), facts)
	if err != nil {
		return err
	}
	switch {
	case m.Tool != facts.Tool:
		return fmt.Errorf("%s says that %s wrote it, %s that %s did", ledger.ManifestFile, m.Tool, ledger.BuildFile, facts.Tool)
	case facts.Tool != versionLine():
		v.Why = otherTool(facts.Tool)
		return v.values(root, files)
	case facts.Architecture != runtime.GOARCH:
		v.Why = otherArchitecture(facts.Architecture)
		return v.values(root, files)
	}
	v.Compared = comparedBytes
	v.bytes(root, m, files)
	return nil
}

// again is the files that the inputs of a package give.
func again(inputs fs.FS, facts ledger.BuildFacts) (map[string][]byte, error) {
	from := exhibit.Provenance{Tool: versionLine(), Source: facts.Main, Build: buildOf(), Commit: facts.Commit, CommitDate: facts.CommitDate}
	o := document.Options{Provenance: from}
	for _, set := range facts.Overrides {
		o.Overrides = append(o.Overrides, exhibit.Override{Name: set.Name, Text: set.Text})
	}
	res := document.Run(document.Source{FS: inputs, Main: facts.Main}, o)
	(&app{}).thaw(inputs, facts.Main, &res)
	if res.Package == nil {
		for _, d := range res.Diagnostics.Sort() {
			return nil, fmt.Errorf("%s:%d: %s", d.Range.File, d.Range.Line, d.Summary)
		}
		return nil, errors.New(noInputs)
	}
	if res.Package.Meta.Status == issued && facts.Dirty {
		return nil, errors.New(issuedDirty)
	}
	res.Package.Provenance.Dirty = facts.Dirty
	return render.Package(res.Package, res.Files, render.Options{})
}

// bytes compares what was built again with the folder, whose files have, but for the
// faults known already, the hashes of the manifest.
func (v *verdict) bytes(root *os.Root, m ledger.ManifestFacts, files map[string][]byte) {
	sums := map[string]string{ledger.ManifestFile: ""}
	for _, f := range m.Files {
		sums[f.Path] = f.SHA256
	}
	for _, name := range slices.Sorted(maps.Keys(files)) {
		sum, ok := sums[name]
		delete(sums, name)
		switch data := files[name]; {
		case !ok:
			v.Differ = append(v.Differ, ledger.Flaw{Path: name, What: "comes out and is not in the package"})
		case name == ledger.ManifestFile:
			if text, err := ledger.ReadRegular(root, name, readLimit); err != nil || !bytes.Equal(text, data) {
				v.Differ = append(v.Differ, ledger.Flaw{Path: name, What: "comes out otherwise"})
			}
		case ledger.Sum(data) != sum:
			v.Differ = append(v.Differ, ledger.Flaw{Path: name, What: "comes out otherwise" + v.more(root, name, data)})
		}
	}
	for _, name := range slices.Sorted(maps.Keys(sums)) {
		v.Differ = append(v.Differ, ledger.Flaw{Path: name, What: "does not come out of the inputs"})
	}
}

// more is where a file that differs begins to, and of results how far.
func (v *verdict) more(root *os.Root, name string, data []byte) string {
	text, err := ledger.ReadRegular(root, name, readLimit)
	if err != nil {
		return ""
	}
	if name == resultsFile {
		if largest, differ, err := ledger.Agree(text, data, ledger.Agreement); err == nil {
			v.Largest = largest
			return resultsApart(largest, differ)
		}
	}
	return fmt.Sprintf(", from line %d on", ledger.DiffersAt(text, data))
}

const (
	resultsFile = "results.json"
	// readLimit is the size up to which a file is read to say in what it differs.
	readLimit = 256 << 20
)

// values compares values, series and checks: all that can be the same where another
// program or another processor wrote the package.
func (v *verdict) values(root *os.Root, files map[string][]byte) error {
	for _, f := range v.Faults {
		if f.Path == resultsFile {
			return errors.New(resultsDiffer)
		}
	}
	text, err := ledger.ReadRegular(root, resultsFile, readLimit)
	if err != nil {
		return errors.New(resultsDiffer)
	}
	v.Largest, v.Differ, err = ledger.Agree(text, files[resultsFile], ledger.Agreement)
	if err == nil {
		v.Compared = comparedValues
	}
	return err
}
