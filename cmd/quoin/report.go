package main

import (
	"encoding/json"
	"fmt"
	"path/filepath"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document"
	"quoin/calc/exhibit"
	"quoin/render/ledger"
)

// outcome is what --json writes for a FILE. Places are as seen from the current
// folder; numbers are SI.
type outcome struct {
	File        string          `json:"file"`
	Failure     string          `json:"failure,omitempty"` // where FILE could not be run or written at all
	Diagnostics diag.List       `json:"diagnostics"`
	Checks      []ledger.Check  `json:"checks"`
	Built       string          `json:"built"`               // the folder of the package, or ""
	Printed     string          `json:"printed,omitempty"`   // the PDF
	Frozen      *exhibit.Frozen `json:"frozen,omitempty"`    // how the results stand to the frozen ones
	FrozenAs    string          `json:"frozen_as,omitempty"` // the file that freeze wrote
	Unchanged   bool            `json:"unchanged,omitempty"` // it held the very same already; nothing was written
	Why         []*because      `json:"why,omitempty"`       // what --why asked for
}

// written is what a run wrote: the folder of the package or the PDF, or neither;
// unchanged says that the folder held the very same already.
type written struct {
	dir, pdf  string
	unchanged bool
	because   []*because
}

// report says what a run came to: diagnostics to stderr, the summary to stdout;
// with --json all of it as data.
func (a *app) report(src source, res document.Result, w written) int {
	list, checks := seenFromHere(src, res)
	if a.tally != nil {
		a.tally.count(res, w)
	}
	if a.flags.json {
		rows, err := ledger.Checks(checks, "")
		if err != nil {
			return a.fail(src.given, err)
		}
		a.writeJSON(outcome{File: src.given, Diagnostics: list, Checks: rows, Built: filepath.ToSlash(w.dir), Printed: filepath.ToSlash(w.pdf), Unchanged: w.unchanged, Why: w.because, Frozen: frozenOf(res)})
	} else {
		a.writeDiagnostics(src, list, res.Files)
	}
	if !a.flags.json {
		for _, b := range w.because {
			fmt.Fprint(a.stdout, whyWords(b, src.seen(b.Place.File)))
		}
	}
	if a.many && !a.flags.json {
		fmt.Fprint(a.stdout, tallyLine(src.given, *a.tally))
	}
	if res.Package == nil {
		return exitErrors
	}
	if !a.flags.json && !a.many {
		page := filepath.ToSlash(w.pdf)
		if w.dir != "" {
			page = filepath.ToSlash(filepath.Join(w.dir, "index.html"))
		}
		fmt.Fprint(a.stdout, summary(src.given, page, w.unchanged, checks))
		fmt.Fprint(a.stdout, frozenStanding(res.Package.Frozen, src.given, res.Package.Meta))
	}
	if f := res.Package.Frozen; a.flags.frozen && f != nil && !f.Agrees() {
		return exitFrozen
	}
	if a.flags.strict && len(exhibit.Failed(checks)) > 0 {
		return exitStrict
	}
	return exitBuilt
}

// seenFromHere gives diagnostics and checks the places that an editor started
// in the current folder can open.
func seenFromHere(src source, res document.Result) (diag.List, []exhibit.Check) {
	list := append(diag.List{}, res.Diagnostics...)
	for i := range list {
		// A message on a --set is about no file.
		if file := &list[i].Range.File; *file == src.main || res.Files[*file] != nil {
			*file = src.seen(*file)
		}
	}
	checks := append([]exhibit.Check{}, res.Checks...)
	for i := range checks {
		checks[i].Place.File = src.seen(checks[i].Place.File)
	}
	return list.Sort(), checks
}

func (a *app) writeDiagnostics(src source, list diag.List, files map[string][]byte) {
	text := map[string][]string{}
	for path, data := range files {
		text[src.seen(path)] = strings.Split(string(data), "\n")
	}
	diag.Write(a.stderr, list, func(file string, line int) (string, bool) {
		if line < 1 || line > len(text[file]) {
			return "", false
		}
		return text[file][line-1], true
	})
}

func (a *app) writeJSON(o outcome) {
	if o.Diagnostics == nil {
		o.Diagnostics = diag.List{}
	}
	if o.Checks == nil {
		o.Checks = []ledger.Check{}
	}
	e := json.NewEncoder(a.stdout)
	e.SetEscapeHTML(false)
	if err := e.Encode(o); err != nil {
		panic(err)
	}
}

// frozenOf is how a run stands to frozen results; nil where there are none.
func frozenOf(res document.Result) *exhibit.Frozen {
	if res.Package == nil {
		return nil
	}
	return res.Package.Frozen
}
