package main

import (
	"fmt"
	"strings"
	"unicode"

	"quoin/calc/exhibit"
)

// All that the program says to people stands in this file, but for the
// diagnostics of a document, which package diag lays out.
//
//   - Results go to stdout, everything else to stderr.
//   - A message is one line, lower case, without a full stop, and begins with the
//     file it is about where there is one; "hint:" says what to try.
//   - File names are as seen from the current folder.
//   - No colours, no symbols: the words carry the meaning.
//   - "OK" and "NOT OK" are the only verdicts on a check. The program never says
//     that a building is safe or that a package was checked.

const (
	rootShort = "turn a markdown file into a seismic calculation package"
	rootLong  = `Quoin turns a markdown file with calc blocks into a seismic calculation package:
a folder with a page that opens from disk, its tables, its inputs and a manifest.`

	buildUse   = "build FILE..."
	buildShort = "run the document and write its package"
	buildLong  = `Run the document FILE and write its package, by default the folder STEM.package
beside it. An existing package is replaced as a whole; any other folder is left
alone. Nothing outside the root is read: the folder given with --root, else the
git work tree that holds FILE, else FILE's own folder.

What was computed and drawn before by this very program from the same inputs is
taken from a cache: the folder that QUOIN_CACHE names, else quoin in the user's
cache folder. It may be deleted at any time, and never changes a byte of a package.
It is not used where it would lie inside the package.

Exit codes: 0 built, 1 errors, 2 wrong usage, 3 built, but with --strict a check
is not met.`
	buildExample = `  quoin build package.md
  quoin build package.md -o issue-b --set R=5 --strict`

	checkUse   = "check FILE..."
	checkShort = "run the document and write nothing"
	checkLong  = `Run the document FILE and say what is wrong with it and how its checks come out.
Nothing is drawn and nothing is written.

Exit codes: 0 no errors, 1 errors, 2 wrong usage, 3 no errors, but with --strict a
check is not met.`
	checkExample = `  quoin check package.md`

	printUse   = "print FILE..."
	printShort = "run the document and print its page to a PDF"
	printLong  = `Run the document FILE as build does and print the page to a PDF, by default
STEM.pdf beside it, through a Chromium, Chrome or Edge found on this machine:
tagged, with an outline of its headings, sheets numbered. The browser runs without
a window, a network or your profile. QUOIN_CHROMIUM names one, by path or by name.
A PDF that is there is replaced when the new one is whole; any other file is left
alone. No folder of a package is written.

Exit codes: 0 printed, 1 errors, 2 wrong usage, 3 printed, but with --strict a
check is not met.`
	printExample = `  quoin print package.md
  quoin print package.md -o issue-b.pdf --strict`

	blocksUse   = "blocks [KIND...]"
	blocksShort = "show the block kinds, their fields and values, and the rest of the language"
	blocksLong  = `Without an argument, list the block kinds and the other parts of the language. With
one, show it in full: its fields with what they take, the values that others use,
its functions. The text is made from the program itself.`
	blocksExample = `  quoin blocks
  quoin blocks record
  quoin blocks formula units`

	newUse   = "new DIR"
	newShort = "make a package to start from"
	newLong  = `Make the folder DIR with a small package of an invented building: a document, a file
of storeys, and a .gitignore for what is built. It builds as it stands; replace it
piece by piece. A folder that holds anything is left alone.`
	newExample = `  quoin new tower
  quoin new tower --units US`

	flagOut    = "write the package to the folder `DIR`"
	flagPDF    = "write the PDF to `FILE`"
	flagRoot   = "read nothing outside `DIR`"
	flagSet    = "replace a value of the document, as in `name=value`; may be repeated"
	flagStrict = "exit with 3 when a check is not met"
	flagCache  = "compute and draw everything anew, and keep nothing"
	flagUnits  = "the units of the new package, `SI` or US"
	flagAsData = "write the reference as JSON"
	flagJSON   = "write diagnostics and checks to stdout as JSON, one object for each FILE"

	progressRun   = "computing"
	progressDraw  = "drawing"
	progressPrint = "printing"
)

func versionLine() string { return "quoin " + version }

func usageError(err error) string {
	return fmt.Sprintf("quoin: %s\nhint: quoin --help lists the commands, quoin COMMAND --help their flags\n", err)
}

var (
	errNoDir   = fmt.Errorf("name a folder to make, as in: quoin new tower")
	errOneDir  = fmt.Errorf("name one folder; a name with blanks stands in quotes")
	errUnits   = fmt.Errorf("--units is SI or US")
	errNoFile  = fmt.Errorf("name a FILE, as in: quoin build package.md")
	errOneFile = fmt.Errorf("-o takes one FILE at a time")
)

func errTopic(given, near string) error {
	if near != "" {
		return fmt.Errorf("there is no block kind %q; did you mean %s?", given, near)
	}
	return fmt.Errorf("there is no block kind %q; quoin blocks lists them", given)
}

func errSet(given string) error {
	return fmt.Errorf("--set %q is not of the form name=value", given)
}

func internalError(fault, place string) string {
	return fmt.Sprintf("quoin: internal error, nothing was written: %s (%s, %s); please report this with the file that led to it\n", fault, place, versionLine())
}

func fileError(file, text string) string { return fmt.Sprintf("%s: error: %s\n", file, text) }

func fileWarning(file, text string) string { return fmt.Sprintf("%s: warning: %s\n", file, text) }

const (
	cacheInPackage = "QUOIN_CACHE names a folder inside the package, which holds nothing but the package; no cache is used"
	moveAway       = "move it away, or build to another folder with -o"
)

const (
	isFolder  = "this is a folder; name the markdown file in it"
	notInRoot = "this file lies outside the root"
)

const (
	notEmpty = "this folder holds something already; name a new or an empty one"
	isFile   = "this is a file; name a folder"
	deadLink = "this is a link that leads nowhere; name a folder"
	badName  = "not every system can hold a folder of this name: leave out control characters, any of < > : \" | ? * \\, a dot or a blank at the end, and the names of devices"
)

// started says what to do with a new package.
func started(dir string) string {
	file, page := asWord(dir+"/package.md"), asWord(dir+"/package.package/index.html")
	return fmt.Sprintf(`%[1]s: written, an invented building to start from
next:
  quoin check %[1]s
  quoin build %[1]s   and open %[2]s
  quoin blocks   shows all that a document can hold
put your own data in the place of the invented: the front matter first, then storeys.csv
`, file, page)
}

// asWord is a path as a shell reads it back.
func asWord(path string) string {
	if strings.ContainsFunc(path, func(c rune) bool {
		return !unicode.IsLetter(c) && !unicode.IsDigit(c) && !strings.ContainsRune("/._-+=@%,~", c)
	}) || strings.HasPrefix(path, "-") {
		return "'" + strings.ReplaceAll(path, "'", `'\''`) + "'"
	}
	return path
}

// summary is what a run comes to: where the package is, and how the checks came
// out, the worst first.
func summary(file, page string, unchanged bool, checks []exhibit.Check) string {
	var b strings.Builder
	switch {
	case page == "":
		fmt.Fprintf(&b, "%s: no errors\n", file)
	case unchanged:
		fmt.Fprintf(&b, "%s: unchanged: %s\n", file, page)
	default:
		fmt.Fprintf(&b, "%s: written to %s\n", file, page)
	}
	failed := exhibit.Failed(checks)
	switch {
	case len(checks) == 0:
		b.WriteString("checks: none\n")
	case len(failed) == 0:
		fmt.Fprintf(&b, "checks: %d OK\n", len(checks))
	default:
		fmt.Fprintf(&b, "checks: %d OK, %d NOT OK\n", len(checks)-len(failed), len(failed))
	}
	for _, c := range exhibit.WorstFirst(failed) {
		b.WriteString("  NOT OK  " + checkLine(c) + "\n")
	}
	if rest := exhibit.WorstFirst(checks); len(failed) == 0 && len(rest) > 0 {
		b.WriteString("  closest " + checkLine(rest[0]) + "\n")
	}
	return b.String()
}

// checkLine is one check: its text, its numbers, its place.
func checkLine(c exhibit.Check) string {
	ratio := "no ratio"
	if c.Ratio != nil {
		ratio = "ratio " + c.RatioText()
	}
	name := c.ID
	if strings.Trim(c.Item, "0123456789") != "" { // a level, not only an index
		name = c.Name + " at " + c.Item
	}
	return fmt.Sprintf("%s: demand %s, limit %s, %s (%s:%d)", name, shown(c.Demand), shown(c.Limit), ratio, c.Place.File, c.Place.Line)
}

func shown(n exhibit.Number) string {
	if u := n.Unit.Pretty(); u != "" {
		return n.Text() + " " + u
	}
	return n.Text()
}

// What keeps a package from being issued and only git knows.
const (
	issuedDirty     = "status is issued, but the sources differ from the commit"
	issuedDirtyHint = "commit them first: what is issued must be found again"
)

// Of printing. The browser's own words come last.
const (
	pdfFolder     = "is a folder; name a file with -o"
	pdfForeign    = "exists and is no PDF; it is left as it is"
	pdfUnwritable = "cannot be written"

	browserNamed       = "%s names %q, which is no program that can be run"
	browserInterrupted = "interrupted; nothing was written"
	browserSlow        = "the browser %s did not finish within %s and was ended"
	browserFailed      = "the browser %s failed (%v); its last words: %s"
	browserSilent      = "the browser %s wrote no PDF; its last words: %s; a browser in a box of its own, such as a snap, may not see the temporary folder %s: let TMPDIR name one in your home"
	browserSpoilt      = "the browser %s wrote what is not a whole PDF; its last words: %s"
	browserMute        = "none"

	spillsHint    = "the foot of each page names its sheet and its page: look where the page runs ahead, and shorten or split what stands there"
	uncountedHint = "open it and see that each sheet is there"
)

// noBrowser says what was looked for, and how to name another.
func noBrowser(names, places []string, variable string) string {
	text := "no browser to print with was found; looked for " + strings.Join(names, ", ") + " on PATH"
	if len(places) > 0 {
		text += " and for " + strings.Join(places, ", ")
	}
	return text + "; install Chromium, or let " + variable + " name a browser of its family"
}

func spills(sheets, pages int) string {
	return fmt.Sprintf("%d sheets came out on %d pages: a sheet spills over onto a second one", sheets, pages)
}

func uncounted(sheets, pages int) string {
	return fmt.Sprintf("of %d sheets only %d pages were found in the PDF", sheets, pages)
}
