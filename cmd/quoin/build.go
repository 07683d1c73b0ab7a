package main

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
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
	a.trace = true
	res, err := a.compute(src, bar)
	if err != nil {
		return a.fail(file, err)
	}
	w := written{because: a.explain(src, res)}
	if res.Package == nil {
		bar.done()
		return a.report(src, res, w)
	}
	w.dir = dir
	w.unchanged, err = a.put(res, dir, bar)
	bar.done()
	return a.outcome(src, res, err, w)
}

// put makes dir the package of a run; unchanged says that it was so already.
func (a *app) put(res document.Result, dir string, bar *progress) (unchanged bool, err error) {
	key := a.wholeKey(res)
	if a.stands(key, dir) {
		return true, nil
	}
	files, err := a.draw(res, bar)
	if err != nil {
		return false, err
	}
	if unchanged = ledger.Holds(dir, files); !unchanged {
		err = ledger.Write(dir, files)
	}
	if err == nil {
		a.keep(key, files)
	}
	return unchanged, err
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
	tree := a.trees.of(filepath.Dir(filepath.Join(src.root, filepath.FromSlash(src.main))))
	from := exhibit.Provenance{Tool: versionLine(), Source: src.main, Build: buildOf()}
	var why string
	from.Commit, from.CommitDate, why = tree.provenance()
	if why != "" {
		fmt.Fprint(a.stderr, fileWarning(src.given, gitCannotTell(why)))
	}
	o := document.Options{Overrides: slices.Clone(a.flags.overrides), Provenance: from, Progress: bar.stage(progressRun), Trace: a.trace}
	if a.cache != nil {
		o.Cache = a.cache
	}
	res := document.Run(document.Source{FS: root.FS(), Main: src.main}, o)
	a.thaw(root.FS(), src.main, &res)
	if res.Package != nil {
		// Only now is it known which files were read.
		res.Package.Provenance.Dirty = tree.dirty(src.root, res.Files)
		if res.Package.Meta.Status == issued && (res.Package.Provenance.Dirty || why != "") {
			text, hint := issuedDirty, issuedDirtyHint
			if why != "" {
				text, hint = issuedUnknown, gitHint
			}
			res.Diagnostics.Errorf("not-for-issue", diag.Range{File: src.main}, "%s", text).WithHint("%s", hint)
			res.Package = nil
		}
	}
	return res, nil
}

// issued is the status of a package that is sent out.
const issued = "issued"

// fail says why FILE could not be run or written.
func (a *app) fail(file string, err error) int {
	var taken *ledger.Occupied
	if errors.As(err, &taken) {
		err = errors.New(err.Error() + "; " + moveAway)
	}
	if a.flags.json {
		a.writeJSON(outcome{File: file, Failure: err.Error()})
	}
	if a.tally != nil {
		a.tally.errors++
		if a.many && !a.flags.json {
			fmt.Fprint(a.stdout, tallyLine(file, *a.tally))
		}
	}
	fmt.Fprint(a.stderr, fileError(file, err.Error()))
	return exitErrors
}
