package main

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"quoin/calc/diag"
	"quoin/calc/document"
	"quoin/calc/exhibit"
	"quoin/render"
	"quoin/render/ledger"
)

// compareCommand is quoin compare.
func (a *app) compareCommand() *cobra.Command {
	c := &cobra.Command{Use: compareUse, Short: compareShort, Long: compareLong, Example: compareExample, Args: cobra.ArbitraryArgs,
		RunE: func(_ *cobra.Command, args []string) error {
			if len(args) != 2 {
				return errTwo
			}
			tolerance, err := toleranceOf(a.flags.tolerance)
			if err != nil {
				return err
			}
			if a.flags.out != "" && !strings.EqualFold(filepath.Ext(a.flags.out), ".html") {
				return errNoHTML
			}
			if !a.flags.noCache {
				a.cache = openCache()
				defer a.cache.Close()
			}
			a.code = a.compare(args[0], args[1], tolerance)
			return nil
		}}
	c.Flags().StringVarP(&a.flags.out, "out", "o", "", flagSheet)
	c.Flags().StringVar(&a.flags.tolerance, "tolerance", "1e-6", flagTolerance)
	c.Flags().BoolVar(&a.flags.same, "same", false, flagSame)
	c.Flags().StringVar(&a.flags.root, "root", "", flagRoot)
	c.Flags().BoolVar(&a.flags.noCache, "no-cache", false, flagCache)
	c.Flags().BoolVar(&a.flags.json, "json", false, flagCompareJSON)
	return c
}

// toleranceOf reads a tolerance: 1e-6, or 0.1 %.
func toleranceOf(text string) (float64, error) {
	number, percent := strings.CutSuffix(strings.TrimSpace(text), "%")
	x, err := strconv.ParseFloat(strings.TrimSpace(number), 64)
	if percent {
		x /= 100
	}
	if err != nil || !(x >= 0 && x < 1) {
		return 0, errTolerance(text)
	}
	return x, nil
}

// side is one of the two things compared.
type side struct {
	given  string
	frozen *ledger.Frozen
	curves map[string]exhibit.Curve // none of frozen results
}

// refused is a side that cannot be taken: with messages of its document, or a reason.
type refused struct {
	list   diag.List
	source func(file string, line int) (string, bool)
	err    error
}

// compare tells what is not the same in two things.
func (a *app) compare(old, now string, tolerance float64) int {
	var sides [2]side
	for i, given := range []string{old, now} {
		s, r := a.side(given)
		if r != nil {
			if r.err != nil {
				return a.fail(given, r.err)
			}
			if a.flags.json {
				a.writeJSON(outcome{File: given, Diagnostics: r.list})
			} else {
				diag.Write(a.stderr, r.list, r.source)
			}
			return exitErrors
		}
		sides[i] = s
	}
	d := ledger.Compare(sides[0].frozen, sides[1].frozen, tolerance)
	if a.flags.out != "" {
		if err := a.changeSheet(d, sides); err != nil {
			return a.fail(a.flags.out, err)
		}
	}
	if a.flags.json {
		e := json.NewEncoder(a.stdout)
		e.SetEscapeHTML(false)
		if err := e.Encode(comparedAsData(old, now, d)); err != nil {
			panic(err)
		}
	} else {
		fmt.Fprint(a.stdout, comparedText(old, now, d))
		if a.flags.out != "" {
			fmt.Fprintf(a.stdout, "change sheet: %s\n", filepath.ToSlash(a.flags.out))
		}
	}
	if a.flags.same && d.Differs() {
		return exitFrozen
	}
	return exitBuilt
}

// comparison is what --json writes.
type comparison struct {
	Old         comparedHead    `json:"old"`
	New         comparedHead    `json:"new"`
	Tolerance   float64         `json:"tolerance"`
	Compared    int             `json:"compared"`
	Differs     bool            `json:"differs"`
	Checks      []exhibit.Moved `json:"checks"`
	Inputs      []exhibit.Moved `json:"inputs"`
	Files       []exhibit.Moved `json:"files"`
	Values      []exhibit.Moved `json:"values"`
	Series      []exhibit.Moved `json:"series"`
	Assumptions []exhibit.Moved `json:"assumptions"`
	Blocks      []exhibit.Moved `json:"blocks"`
}

type comparedHead struct {
	Given    string `json:"given"`
	Document string `json:"document"`
	Number   string `json:"number"`
	Title    string `json:"title"`
	Revision string `json:"revision"`
	Date     string `json:"date"`
	Status   string `json:"status"`
	Tool     string `json:"tool"`
}

func comparedAsData(old, now string, d *ledger.Difference) comparison {
	head := func(given string, h ledger.Head) comparedHead {
		return comparedHead{given, h.Document, h.Number, h.Title, h.Revision, h.Date, h.Status, h.Tool}
	}
	some := func(list []exhibit.Moved) []exhibit.Moved { return append([]exhibit.Moved{}, list...) }
	return comparison{head(old, d.Old), head(now, d.New), d.Tolerance, d.Compared, d.Differs(),
		some(d.Checks), some(d.Inputs), some(d.Files), some(d.Values), some(d.Series), some(d.Assumptions), some(d.Blocks)}
}

// side takes what is named: a package, frozen results, a document, or one of these in
// a commit, as REVISION:PATH.
func (a *app) side(given string) (side, *refused) {
	info, err := os.Stat(given)
	rev, file, inGit := strings.Cut(given, ":")
	switch {
	case err == nil && info.IsDir():
		root, err := os.OpenRoot(given)
		if err != nil {
			return side{}, &refused{err: reason(err)}
		}
		defer root.Close()
		return packageSide(given, root.FS(), ".")
	case err == nil && filepath.Ext(given) == frozenEnding:
		root, err := os.OpenRoot(filepath.Dir(given))
		if err != nil {
			return side{}, &refused{err: reason(err)}
		}
		defer root.Close()
		return frozenSide(given, root.FS(), filepath.Base(given))
	case err == nil:
		src, err := locate(given, a.flags.root)
		if err != nil {
			return side{}, &refused{err: err}
		}
		root, err := os.OpenRoot(src.root)
		if err != nil {
			return side{}, &refused{err: reason(err)}
		}
		defer root.Close()
		return a.documentSide(given, root.FS(), src.main, src.seen)
	case inGit && rev != "":
		return a.gitSide(given, rev, file)
	}
	return side{}, &refused{err: reason(err)}
}

// gitSide takes a file or a folder of a commit.
func (a *app) gitSide(given, rev, file string) (side, *refused) {
	commit, err := commitOf(".", rev)
	if err != nil {
		return side{}, &refused{err: err}
	}
	tree, err := newGitFS(".", commit)
	if err != nil {
		return side{}, &refused{err: err}
	}
	prefix, _ := git(".", "rev-parse", "--show-prefix")
	here := path.Join(strings.TrimSpace(string(prefix)), file)
	name := path.Clean(file)
	if strings.HasPrefix(file, "./") || strings.HasPrefix(file, "../") {
		name = here
	} else if _, err := fs.Stat(tree, name); err != nil {
		if _, err := fs.Stat(tree, here); err == nil {
			name = here // as seen from the current folder
		}
	}
	info, err := fs.Stat(tree, name)
	switch {
	case err != nil && (errors.Is(err, fs.ErrNotExist) || errors.Is(err, fs.ErrInvalid)):
		return side{}, &refused{err: fmt.Errorf(gitNoFile, rev, file)}
	case err != nil:
		return side{}, &refused{err: reason(err)}
	case info.IsDir():
		return packageSide(given, tree, name)
	case path.Ext(name) == frozenEnding:
		return frozenSide(given, tree, name)
	}
	return a.documentSide(given, tree, name, func(p string) string { return rev + ":" + p })
}

// commitOf is the commit that a revision names.
func commitOf(folder, rev string) (string, error) {
	if _, ok := git(folder, "rev-parse", "--git-dir"); !ok {
		return "", errors.New(gitNone)
	}
	out, ok := git(folder, "rev-parse", "--verify", "--quiet", "--end-of-options", rev+"^{commit}")
	if ok {
		return strings.TrimSpace(string(out)), nil
	}
	if shallow, _ := git(folder, "rev-parse", "--is-shallow-repository"); strings.TrimSpace(string(shallow)) == "true" {
		return "", fmt.Errorf(gitShallow, rev)
	}
	return "", fmt.Errorf(gitNoRevision, rev)
}

// packageSide takes the folder of a package, as it was written.
func packageSide(given string, root fs.FS, dir string) (side, *refused) {
	manifest, err := fs.ReadFile(root, path.Join(dir, ledger.ManifestFile))
	if err == nil {
		_, err = ledger.ReadManifest(manifest)
	}
	if err != nil {
		return side{}, &refused{err: errors.New(notWritten)}
	}
	s, r := frozenSide(given, root, path.Join(dir, ledger.ResultsText))
	if r != nil {
		if errors.Is(r.err, fs.ErrNotExist) {
			r.err = errors.New(oldPackage)
		}
		return side{}, r
	}
	data, err := fs.ReadFile(root, path.Join(dir, "results.json"))
	if err == nil {
		s.curves, err = ledger.Curves(data)
	}
	if err != nil {
		return side{}, &refused{err: err}
	}
	return s, nil
}

// frozenSide takes frozen results.
func frozenSide(given string, root fs.FS, name string) (side, *refused) {
	data, err := fs.ReadFile(root, name)
	if err != nil {
		return side{}, &refused{err: reason(err)}
	}
	f, list := ledger.ParseFrozen(given, data)
	if len(list) > 0 {
		return side{}, &refused{list: list, source: linesOf(map[string][]byte{given: data})}
	}
	return side{given: given, frozen: f}, nil
}

// documentSide runs a document.
func (a *app) documentSide(given string, root fs.FS, main string, seen func(string) string) (side, *refused) {
	o := document.Options{Provenance: exhibit.Provenance{Tool: versionLine(), Source: main, Build: buildOf()}}
	if a.cache != nil {
		o.Cache = a.cache
	}
	res := document.Run(document.Source{FS: root, Main: main}, o)
	if res.Package == nil {
		list := append(diag.List{}, res.Diagnostics...)
		texts := map[string][]byte{}
		for i := range list {
			if file := &list[i].Range.File; *file == main || res.Files[*file] != nil {
				data := res.Files[*file]
				*file = seen(*file)
				texts[*file] = data
			}
		}
		return side{}, &refused{list: list.Sort(), source: linesOf(texts)}
	}
	s := side{given: given, frozen: ledger.FrozenOf(res.Package), curves: map[string]exhibit.Curve{}}
	for _, c := range res.Package.Series {
		s.curves[c.ID] = c
	}
	return s, nil
}

// linesOf gives the lines of texts, for messages about them.
func linesOf(texts map[string][]byte) func(file string, line int) (string, bool) {
	return func(file string, line int) (string, bool) {
		lines := strings.Split(string(texts[file]), "\n")
		if line < 1 || line > len(lines) {
			return "", false
		}
		return lines[line-1], true
	}
}

// changeSheet writes the change sheet. A file that is none is left alone.
func (a *app) changeSheet(d *ledger.Difference, sides [2]side) error {
	target := a.flags.out
	switch info, err := os.Stat(target); {
	case err == nil && !info.Mode().IsRegular():
		return errors.New(sheetForeign)
	case err == nil && info.Size() > 0:
		data, err := os.ReadFile(target)
		if err != nil {
			return reason(err)
		}
		if !bytes.Contains(data[:min(len(data), 4096)], []byte(`name="generator" content="quoin `)) {
			return errors.New(sheetForeign)
		}
	}
	var pairs []render.Overlay
	for _, m := range d.Series {
		before, ok := sides[0].curves[m.ID]
		after, also := sides[1].curves[m.ID]
		if ok && also {
			pairs = append(pairs, render.Overlay{ID: m.ID, Old: before, New: after})
		}
	}
	o := render.Options{}
	if a.cache != nil {
		o.Cache = a.cache
	}
	page, err := render.Changes(d, [2]string{sides[0].given, sides[1].given}, versionLine(), pairs, o)
	if err != nil {
		return err
	}
	return replaceFile(target, page)
}
