package main

import (
	"bytes"
	"cmp"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"quoin/calc/diag"
	"quoin/calc/document"
	"quoin/calc/exhibit"
	"quoin/render/ledger"
)

// freezeCommand is quoin freeze.
func (a *app) freezeCommand() *cobra.Command {
	c := &cobra.Command{Use: freezeUse, Short: freezeShort, Long: freezeLong, Example: freezeExample,
		Args: func(c *cobra.Command, files []string) error {
			if len(a.flags.set) > 0 {
				return errFreezeSet
			}
			return a.arguments(c, files)
		},
		RunE: func(_ *cobra.Command, files []string) error { return a.each(files, job{(*app).freeze, false, false}) }}
	c.Flags().StringVar(&a.flags.root, "root", "", flagRoot)
	c.Flags().StringArrayVar(&a.flags.set, "set", nil, flagNoSet)
	c.Flags().BoolVar(&a.flags.noCache, "no-cache", false, flagCache)
	c.Flags().BoolVar(&a.flags.json, "json", false, flagJSON)
	return c
}

// frozenEnding is that of the file of frozen results beside a document.
const frozenEnding = ".frozen"

// frozenFile is where the frozen results of a document lie, below the root.
func frozenFile(main string) string { return strings.TrimSuffix(main, path.Ext(main)) + frozenEnding }

// freeze runs FILE and writes its frozen results beside it.
func (a *app) freeze(file string) int {
	src, err := locate(file, a.flags.root)
	if err != nil {
		return a.fail(file, err)
	}
	target := src.beside(frozenEnding)
	if info, err := os.Stat(target); err == nil && !info.Mode().IsRegular() {
		return a.fail(file, errors.New(target+" "+frozenNoFile))
	}
	bar := a.progress()
	defer bar.done()
	res, err := a.compute(src, bar)
	bar.done()
	if err != nil {
		return a.fail(file, err)
	}
	if res.Package == nil {
		return a.report(src, res, written{})
	}
	var former *ledger.Frozen
	before := res.Files[frozenFile(src.main)]
	if before != nil {
		former, _ = ledger.ParseFrozen("", before) // read already, without a fault
	}
	now := ledger.Freeze(ledger.FrozenOf(res.Package), former)
	text := now.Text()
	unchanged := bytes.Equal(text, before)
	if !unchanged {
		if err := replaceFile(target, text); err != nil {
			return a.fail(file, err)
		}
	}
	list, _ := seenFromHere(src, res)
	if a.flags.json {
		a.writeJSON(outcome{File: src.given, Diagnostics: list, Frozen: res.Package.Frozen, FrozenAs: target, Unchanged: unchanged})
		return exitBuilt
	}
	a.writeDiagnostics(src, list, res.Files)
	fmt.Fprint(a.stdout, frozenSummary(src.given, target, now, former, res.Package.Frozen, unchanged))
	return exitBuilt
}

// thaw tells a run how its results stand to the frozen ones beside the document;
// where these cannot be read there is no package.
func (a *app) thaw(root fs.FS, main string, res *document.Result) {
	if res.Package == nil {
		return
	}
	file := frozenFile(main)
	data, err := fs.ReadFile(root, file)
	var list diag.List
	var frozen *ledger.Frozen
	switch {
	case errors.Is(err, fs.ErrNotExist):
		if !a.flags.frozen {
			return
		}
		list.Errorf("frozen-missing", diag.Range{File: main}, frozenMissing, path.Base(file)).WithHint(frozenMissingHint, path.Base(main))
	case err != nil:
		list.Errorf("unreadable", diag.Range{File: file}, "the frozen results cannot be read: %s", reason(err))
	default:
		res.Files[file] = data
		frozen, list = ledger.ParseFrozen(file, data)
	}
	if len(list) > 0 {
		res.Diagnostics, res.Package = append(res.Diagnostics, list...), nil
		return
	}
	p := res.Package
	p.Inputs = append(p.Inputs, exhibit.Input{Path: file, SHA256: ledger.Sum(data), Bytes: len(data), Role: ledger.FrozenRole})
	slices.SortStableFunc(p.Inputs[1:], func(a, b exhibit.Input) int { return cmp.Compare(a.Path, b.Path) })
	p.Frozen = ledger.Stand(p, frozen, file)
}
