package main

import (
	"errors"
	"fmt"
	"os"
	"slices"

	"quoin/calc/diag"
	"quoin/calc/document"
	"quoin/calc/exhibit"
	"quoin/render"
	"quoin/render/ledger"
)

// build runs FILE and writes its package.
func (a *app) build(file string) int {
	src, err := locate(file, a.flags.root)
	if err != nil {
		return a.fail(file, err)
	}
	dir := a.folder(src)
	a.keepOut(file, dir)
	// Before the work, not after it.
	for _, ready := range []func(string) error{ledger.Repair, ledger.Replaceable} {
		if err := ready(dir); err != nil {
			return a.fail(file, err)
		}
	}
	bar := a.progress()
	defer bar.done()
	res, err := a.compute(src, bar)
	if err != nil {
		return a.fail(file, err)
	}
	if res.Package == nil {
		bar.done()
		return a.report(src, res, written{})
	}
	files, err := a.draw(res, bar)
	unchanged := err == nil && ledger.Holds(dir, files)
	if err == nil && !unchanged {
		err = ledger.Write(dir, files)
	}
	bar.done()
	return a.outcome(src, res, err, written{dir: dir, unchanged: unchanged})
}

// folder is where the package of src goes.
func (a *app) folder(src source) string {
	if a.flags.out != "" {
		return a.flags.out
	}
	return src.folder()
}

// keepOut goes on without the cache where it lies in the folder of the package,
// which holds nothing but the package.
func (a *app) keepOut(file, dir string) {
	if a.cache != nil && inside(a.cache.folder, dir) {
		fmt.Fprint(a.stderr, fileWarning(file, cacheInPackage))
		a.cache = nil
	}
}

// check runs FILE, draws nothing and writes nothing.
func (a *app) check(file string) int {
	src, err := locate(file, a.flags.root)
	if err != nil {
		return a.fail(file, err)
	}
	a.keepOut(file, a.folder(src))
	bar := a.progress()
	defer bar.done()
	res, err := a.compute(src, bar)
	if err == nil && res.Package != nil {
		err = render.Formulas(res.Package, res.Files)
	}
	bar.done()
	return a.outcome(src, res, err, written{})
}

// draw makes the files of the package of a run.
func (a *app) draw(res document.Result, bar *progress) (map[string][]byte, error) {
	o := render.Options{Progress: bar.stage(progressDraw)}
	if a.cache != nil {
		o.Cache = a.cache
	}
	return render.Package(res.Package, res.Files, o)
}

// outcome reports a run, what the typesetter refuses among its messages.
func (a *app) outcome(src source, res document.Result, err error, w written) int {
	var faults *render.Faults
	switch {
	case errors.As(err, &faults):
		res.Package, res.Diagnostics = nil, append(res.Diagnostics, faults.List...)
		w = written{}
	case err != nil:
		return a.fail(src.given, err)
	}
	return a.report(src, res, w)
}

// compute runs the document with what is known of where it came from.
func (a *app) compute(src source, bar *progress) (document.Result, error) {
	root, err := os.OpenRoot(src.root)
	if err != nil {
		return document.Result{}, err
	}
	defer root.Close()
	from := exhibit.Provenance{Tool: versionLine(), Source: src.main, Build: buildOf()}
	from.Commit, from.CommitDate = commit(src.root)
	o := document.Options{Overrides: slices.Clone(a.flags.overrides), Provenance: from, Progress: bar.stage(progressRun)}
	if a.cache != nil {
		o.Cache = a.cache
	}
	res := document.Run(document.Source{FS: root.FS(), Main: src.main}, o)
	if res.Package != nil {
		// Only now is it known which files were read.
		var read []string
		for path := range res.Files {
			read = append(read, path) // git takes slashes on every system
		}
		res.Package.Provenance.Dirty = dirty(src.root, read)
		if res.Package.Provenance.Dirty && res.Package.Meta.Status == "issued" {
			res.Diagnostics.Errorf("not-for-issue", diag.Range{File: src.main}, "%s", issuedDirty).WithHint("%s", issuedDirtyHint)
			res.Package = nil
		}
	}
	return res, nil
}

// fail says why FILE could not be run or written.
func (a *app) fail(file string, err error) int {
	var taken *ledger.Occupied
	if errors.As(err, &taken) {
		err = errors.New(err.Error() + "; " + moveAway)
	}
	if a.flags.json {
		a.writeJSON(outcome{File: file, Failure: err.Error()})
	}
	fmt.Fprint(a.stderr, fileError(file, err.Error()))
	return exitErrors
}
