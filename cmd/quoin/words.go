package main

import (
	"errors"
	"fmt"
	"runtime"
	"slices"
	"strings"
	"unicode"

	"quoin/calc/diag"
	"quoin/calc/document"
	"quoin/calc/exhibit"
	"quoin/render/ledger"
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

	buildUse   = "build FILE|DIR..."
	buildShort = "run the document and write its package"
	buildLong  = `Run the document FILE and write its package, by default the folder STEM.package
beside it. An existing package is replaced as a whole; any other folder is left
alone. Nothing outside the root is read: the folder given with --root, else the
git work tree that holds FILE, else FILE's own folder.

DIR stands for every document in it and below whose front matter holds "quoin:";
hidden folders, node_modules and written packages are left out. Several documents
are built at once, on all cores; what is said comes in the order of their paths, and
of a DIR a line for each, with a summary. The exit code is the worst.

What was computed and drawn before by this very program from the same inputs is
taken from a cache: the folder that QUOIN_CACHE names, else quoin in the user's
cache folder. It may be deleted at any time, and never changes a byte of a package.
It is not used where it would lie inside the package.

Exit codes: 0 built, 1 errors, 2 wrong usage, 3 built, but with --strict a check
is not met.`
	buildExample = `  quoin build package.md
  quoin build package.md -o issue-b --set R=5 --strict
  quoin build . --strict`

	checkUse   = "check FILE|DIR..."
	checkShort = "run the document and write nothing"
	checkLong  = `Run the document FILE and say what is wrong with it and how its checks come out.
Nothing is drawn and nothing is written. DIR stands for every document in it and
below, as for build.

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

	verifyUse   = "verify DIR..."
	verifyShort = "hold a written package to its manifest and build it again from its inputs"
	verifyLong  = `Look whether the folder DIR is the package that was written: every file that its
manifest lists is there with its SHA-256, and no other; and its own inputs/, with what
inputs/build.json says, give the same files again, byte by byte. What differs is named,
file by file. Where another version of the program wrote the package, or one for
another processor, the values, series and checks of results.json are compared instead,
to 1e-9, and that is said.

Nothing is written, nothing is taken from the cache, and nothing outside DIR is read.

Exit codes: 0 the package is as it was written and its inputs give it again; 1 it is
not, or it could not be built again, or DIR is no package; 2 wrong usage.`
	verifyExample = `  quoin verify package.package
  quoin verify --json issue-a issue-b`

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

	flagOut     = "write the package to the folder `DIR`"
	flagPDF     = "write the PDF to `FILE`"
	flagRoot    = "read nothing outside `DIR`"
	flagSet     = "replace a value of the document, as in `name=value`; may be repeated"
	flagWhy     = "say why the block, formula line or check `NAME` was computed or not, and what it read; may be repeated"
	flagStrict  = "exit with 3 when a check is not met"
	flagCache   = "compute and draw everything anew, and keep nothing"
	flagUnits   = "the units of the new package, `SI` or US"
	flagAsData  = "write the reference as JSON"
	flagVerdict = "write what was found to stdout as JSON, one object for each DIR"
	flagJSON    = "write diagnostics and checks to stdout as JSON, one object for each FILE"

	progressRun   = "computing"
	progressDraw  = "drawing"
	progressPrint = "printing"
	progressMany  = "packages"
)

func versionLine() string { return "quoin " + version }

func usageError(err error) string {
	return fmt.Sprintf("quoin: %s\nhint: quoin --help lists the commands, quoin COMMAND --help their flags\n", err)
}

var (
	errNoDir   = fmt.Errorf("name a folder to make, as in: quoin new tower")
	errOneDir  = fmt.Errorf("name one folder; a name with blanks stands in quotes")
	errUnits   = fmt.Errorf("--units is SI or US")
	errNoFile  = fmt.Errorf("name a FILE or a DIR, as in: quoin build package.md")
	errOneFile = fmt.Errorf("-o takes one FILE at a time")
)

func errTopic(given, near string) error {
	if near != "" {
		return fmt.Errorf("there is no block kind %q; did you mean %s?", given, near)
	}
	return fmt.Errorf("there is no block kind %q; quoin blocks lists them", given)
}

func errClash(dir, other string) error {
	return fmt.Errorf("its package would be %s, as that of %s is; rename one, or build it alone with -o", dir, other)
}

// tallyLine is one of many packages.
func tallyLine(file string, t tally) string {
	switch {
	case !t.run:
		return fmt.Sprintf("%s: %s\n", file, counted(t.errors, "error", "errors"))
	case t.unchanged:
		file += ": unchanged"
	case t.written:
		file += ": written"
	default:
		file += ": no errors"
	}
	return file + "; checks: " + checksOf(t.ok, t.failed) + "\n"
}

// manySummary is what many packages come to.
func manySummary(all []tally) string {
	var sum tally
	failed, written, unchanged := 0, 0, 0
	for _, t := range all {
		sum.ok, sum.failed = sum.ok+t.ok, sum.failed+t.failed
		if !t.run {
			failed++
		}
		if t.written {
			written++
		}
		if t.unchanged {
			unchanged++
		}
	}
	parts := []string{}
	for _, p := range []struct {
		n    int
		what string
	}{{written, "written"}, {unchanged, "unchanged"}, {failed, "with errors"}} {
		if p.n > 0 {
			parts = append(parts, fmt.Sprintf("%d %s", p.n, p.what))
		}
	}
	if len(parts) == 0 {
		parts = append(parts, "no errors")
	}
	return fmt.Sprintf("%s: %s; checks: %s\n", counted(len(all), "package", "packages"), strings.Join(parts, ", "), checksOf(sum.ok, sum.failed))
}

func counted(n int, one, many string) string {
	if n == 1 {
		many = one
	}
	return fmt.Sprintf("%d %s", n, many)
}

func checksOf(ok, failed int) string {
	switch {
	case ok+failed == 0:
		return "none"
	case failed == 0:
		return fmt.Sprintf("%d OK", ok)
	}
	return fmt.Sprintf("%d OK, %d NOT OK", ok, failed)
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
	noPackage = "there is no package in this folder or below: no markdown file whose front matter holds quoin: 1"
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
	fmt.Fprintf(&b, "checks: %s\n", checksOf(len(checks)-len(failed), len(failed)))
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

// What only git knows.
const (
	gitMissing    = "git was not found on this machine"
	gitHint       = "make git work on this folder: what is issued must be found again"
	issuedUnknown = "status is issued, but git cannot tell whether the sources are committed"

	issuedDirty     = "status is issued, but the sources differ from the commit"
	issuedDirtyHint = "commit them first: what is issued must be found again"
)

func gitCannotTell(why string) string {
	return "this file lies in a git work tree, but its commit is not known: " + why
}

// Of --why.
func whyNothing(name string, names []string) string {
	text := fmt.Sprintf("--why %s: no block, formula line or check is called that", name)
	if near := diag.Nearest(name, names); near != "" {
		text += "; did you mean " + near + "?"
	}
	return text
}

// whyWords is why a block, a line or a check gave what it gave.
func whyWords(b *because, file string) string {
	var out strings.Builder
	what := "formula line"
	switch {
	case b.Check:
		what = "check"
	case b.Kind != "":
		what = b.Kind + " block"
	}
	fmt.Fprintf(&out, "%s (%s, %s:%d): ", b.Name, what, file, b.Place.Line)
	switch {
	case b.Failed:
		out.WriteString("did not run to its end, for an error in it or in what it reads")
	case b.Kind == "":
		out.WriteString("evaluated, as every line in every build")
	case b.Cached && len(b.Changed) > 0:
		out.WriteString("taken from the cache: the same was computed before the last build")
	case b.Cached:
		out.WriteString("taken from the cache: nothing that it reads has changed")
	default:
		out.WriteString("computed")
	}
	out.WriteByte('\n')
	switch {
	case !b.Known:
		out.WriteString("  no earlier build by this program is known to the cache\n")
	case b.New:
		out.WriteString("  it was not in the last build\n")
	case len(b.Changed) == 0 && b.Kind != "" && !b.Cached:
		out.WriteString("  nothing that it reads has changed since the last build; the cache holds it no more\n")
	case len(b.Changed) == 0 && !b.Cached:
		out.WriteString("  nothing that it reads has changed since the last build\n")
	}
	for _, c := range b.Changed {
		fmt.Fprintf(&out, "  %s\n", changeWords(c))
	}
	if b.Known && !b.New && !b.Failed && len(b.Changed) > 0 {
		if b.Moved {
			out.WriteString("  what it gives is not what it gave in the last build\n")
		} else {
			out.WriteString("  what it gives is what it gave in the last build\n")
		}
	}
	var same []string
	for _, r := range b.Reads {
		if !slices.Contains([]string{document.ReadPlace, document.ReadUnits, document.ReadKind}, r.What) && !slices.ContainsFunc(b.Changed, func(c change) bool { return c.What == r.What && c.Name == r.Name }) {
			if name := r.What + " " + r.Name; (r.Text != "" || r.What != document.ReadField) && !slices.Contains(same, name) {
				same = append(same, name)
			}
		}
	}
	if len(same) > 0 {
		verb := "reads"
		if len(b.Changed) > 0 {
			verb = "unchanged"
		}
		fmt.Fprintf(&out, "  %s: %s\n", verb, strings.Join(same, ", "))
	}
	return out.String()
}

func changeWords(c change) string {
	if c.What == document.ReadPlace {
		return "changed: where its fields stand"
	}
	text := fmt.Sprintf("%s: %s %s", c.By, c.What, c.Name)
	switch {
	case c.By == byChanged && c.Was != c.Text:
		text += fmt.Sprintf(", was %s, is %s", orNothing(c.Was), orNothing(c.Text))
	case c.By == byNew && c.Text != "":
		text += ", " + c.Text
	}
	if len(c.Through) > 0 {
		text += ", through " + strings.Join(c.Through, ", ")
	}
	return text
}

func orNothing(s string) string {
	if s == "" {
		return "nothing"
	}
	return s
}

// Of verifying.
var errNoVerify = errors.New("name the folder of a written package, as in: quoin verify package.package")

const (
	inputsDiffer  = "it was not built again: its inputs are not those that it was written from"
	noInputs      = "it was not built again: its inputs are not complete"
	resultsDiffer = "the values were not compared: results.json is not the one that was written"
)

func otherTool(tool string) string {
	return fmt.Sprintf("it was written by %s and built again by %s, so that bytes may differ", tool, versionLine())
}

func otherArchitecture(arch string) string {
	return fmt.Sprintf("it was written on %s and built again on %s, so that last digits may differ", arch, runtime.GOARCH)
}

// resultsApart is how far results that differ are apart.
func resultsApart(largest float64, differ []ledger.Fault) string {
	if len(differ) == 0 {
		return fmt.Sprintf("; its numbers agree to %.1g", max(largest, 1e-16))
	}
	return fmt.Sprintf("; first: %s %s", differ[0].Path, differ[0].What)
}

// words is a verdict in full.
func (v *verdict) words() string {
	var b strings.Builder
	list := func(faults []ledger.Fault) {
		for i, f := range faults {
			if i == 50 {
				fmt.Fprintf(&b, "  and %d more\n", len(faults)-i)
				break
			}
			fmt.Fprintf(&b, "  %s %s\n", asWord(f.Path), f.What)
		}
	}
	if len(v.Faults) == 0 {
		fmt.Fprintf(&b, "%s: as its manifest says: %s\n", v.Folder, counted(v.Files+1, "file", "files"))
	} else {
		fmt.Fprintf(&b, "%s: NOT as its manifest says:\n", v.Folder)
	}
	list(v.Faults)
	switch {
	case v.Compared == "":
		fmt.Fprintf(&b, "%s: %s\n", v.Folder, v.Why)
	case v.Compared == comparedBytes && len(v.Differ) == 0:
		fmt.Fprintf(&b, "%s: built again from its inputs: every file comes out the same, byte by byte\n", v.Folder)
	case v.Compared == comparedBytes:
		fmt.Fprintf(&b, "%s: built again from its inputs, byte by byte: NOT the same:\n", v.Folder)
	case len(v.Differ) == 0:
		fmt.Fprintf(&b, "%s: %s; the values, series and checks of results.json were compared and agree to %g, the largest difference is %.1g\n", v.Folder, v.Why, ledger.Agreement, v.Largest)
	default:
		fmt.Fprintf(&b, "%s: %s; the values, series and checks of results.json were compared and do NOT agree to %g:\n", v.Folder, v.Why, ledger.Agreement)
	}
	list(v.Differ)
	if len(v.Notes) > 0 {
		b.WriteString("note:\n")
	}
	list(v.Notes)
	return b.String()
}

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
