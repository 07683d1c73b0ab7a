package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"quoin/calc/diag"
	"quoin/render/page"
)

// print runs FILE and prints its page to a PDF. What can be known before the work
// is said before it: that there is a browser, and that the PDF can be written.
func (a *app) print(file string) int {
	src, err := locate(file, a.flags.root)
	if err != nil {
		return a.fail(file, err)
	}
	target := a.flags.out
	if target == "" {
		target = src.beside(".pdf")
	}
	name, err := findBrowser()
	if err == nil {
		err = pdfReady(target)
	}
	if err != nil {
		return a.fail(file, err)
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
	if err == nil {
		if show := bar.stage(progressPrint); show != nil {
			show(0, 1, filepath.Base(target))
		}
		err = printPage(name, files["index.html"], target, date(res.Package.Meta, res.Package.Provenance), func(pages int) {
			sheets := page.Sheets(files["index.html"])
			at := diag.Range{File: src.main}
			switch {
			case pages > sheets:
				res.Diagnostics.Warnf("sheet-spills", at, "%s", spills(sheets, pages)).WithHint("%s", spillsHint)
			case pages < sheets:
				res.Diagnostics.Warnf("sheet-spills", at, "%s", uncounted(sheets, pages)).WithHint("%s", uncountedHint)
			}
		})
	}
	bar.done()
	return a.outcome(src, res, err, written{pdf: target})
}

// printPage prints a page to target, which stays as it was where that fails.
// counted is told how many pages came out.
func printPage(browser string, html []byte, target string, day string, counted func(pages int)) error {
	data, err := paper(browser, html)
	if err != nil {
		return err
	}
	setDates(data, day)
	counted(countPages(data))
	return replaceFile(target, data)
}

// pdfReady tells whether target can be written: it is a PDF or not there, and
// its folder takes a new file.
func pdfReady(target string) error {
	switch info, err := os.Stat(target); {
	case errors.Is(err, fs.ErrNotExist):
	case err != nil:
		return fmt.Errorf("%s: %w", target, reason(err))
	case info.IsDir():
		return errors.New(target + " " + pdfFolder)
	case !info.Mode().IsRegular() || info.Size() > 0 && !startsAsPDF(target):
		return errors.New(target + " " + pdfForeign)
	}
	f, err := fresh(target)
	if err != nil {
		return err
	}
	return errors.Join(f.Close(), os.Remove(f.Name()))
}

func startsAsPDF(path string) bool {
	f, err := os.Open(path)
	if err != nil {
		return false
	}
	defer f.Close()
	head := make([]byte, len(pdfMark))
	n, _ := f.Read(head)
	return string(head[:n]) == pdfMark
}

// fresh is a new file beside target, which is to take its place.
func fresh(target string) (*os.File, error) {
	f, err := os.CreateTemp(filepath.Dir(target), "."+filepath.Base(target)+".new-*")
	if err != nil {
		return nil, fmt.Errorf("%s: %s: %w", target, pdfUnwritable, reason(err))
	}
	return f, nil
}

// replaceFile puts data in the place of target in one step. A link stays a link.
// The mode is 644 whatever the umask: a PDF is made to be handed over.
func replaceFile(target string, data []byte) error {
	if real, err := filepath.EvalSymlinks(target); err == nil {
		target = real
	}
	f, err := fresh(target)
	if err != nil {
		return err
	}
	_, err = f.Write(data)
	err = errors.Join(err, f.Chmod(0o644), f.Sync(), f.Close())
	if err == nil {
		err = os.Rename(f.Name(), target)
	}
	if err != nil {
		os.Remove(f.Name())
		return fmt.Errorf("%s: %s: %w", target, pdfUnwritable, err)
	}
	return nil
}
