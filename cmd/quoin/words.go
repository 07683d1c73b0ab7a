package main

import (
	"errors"
	"fmt"
	"runtime"
	"slices"
	"strings"
	"time"
	"unicode"

	"quoin/calc/diag"
	"quoin/calc/document"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/render"
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
is not met, 4 built, but with --frozen results differ from the frozen ones.`
	buildExample = `  quoin build package.md
  quoin build package.md -o issue-b --set R=5 --strict
  quoin build . --strict`

	checkUse   = "check FILE|DIR..."
	checkShort = "run the document and write nothing"
	checkLong  = `Run the document FILE and say what is wrong with it and how its checks come out.
Nothing is drawn and nothing is written. DIR stands for every document in it and
below, as for build.

Exit codes: 0 no errors, 1 errors, 2 wrong usage, 3 no errors, but with --strict a
check is not met, 4 no errors, but with --frozen results differ from the frozen ones.`
	checkExample = `  quoin check package.md`

	watchUse   = "watch FILE"
	watchShort = "show a live page of the document, made again on every save"
	watchLong  = `Run the document FILE, serve its page on this machine alone and print its address;
open it in a browser. The page is made again whenever FILE, a part or a data file of
it is saved, and keeps its place. While the source has errors they stand in place of
the page, and the last page that could be made is one link away.

The page is a preview: nothing is written beside FILE, static pictures are not drawn,
and a formula in dollar signs stands as written for a moment when it is new. Ctrl-C
ends it. Nobody can read it who does not have the address, which is another one each
time.

Exit codes: 0 ended, 1 FILE cannot be watched, 2 wrong usage.`
	watchExample = `  quoin watch package.md
  quoin watch package.md --set R=5 --port 8100`
	flagPort   = "port of this machine to serve on; any that is free, if not given"
	watchState = "live preview"
	watchEnded = "ended\n"
	watchBlind = "the system tells no changes of files any more"

	printUse   = "print FILE..."
	printShort = "run the document and print its page to a PDF"
	printLong  = `Run the document FILE as build does and print the page to a PDF, by default
STEM.pdf beside it, through a Chromium, Chrome or Edge found on this machine:
tagged, with an outline of its headings, sheets numbered. The browser runs without
a window, a network or your profile. QUOIN_CHROMIUM names one, by path or by name.
A PDF that is there is replaced when the new one is whole; any other file is left
alone. No folder of a package is written.

Exit codes: 0 printed, 1 errors, 2 wrong usage, 3 printed, but with --strict a
check is not met, 4 printed, but with --frozen results differ from the frozen ones.`
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

	freezeUse   = "freeze FILE..."
	freezeShort = "write the results of the document beside it, for version control"
	freezeLong  = `Run the document FILE and write its results to STEM.frozen beside it: a line a value
with its unit, and the checks, the assumptions, the blocks and the hashes of the files
read. Commit it: its difference reads as what moved. From then on build, check and
print say whether the results still agree with it, within one part in a million.

Where a value has not moved, its line stays as it is. Results frozen of another
revision than the document is at now become what changes are told against and
marked in the page, until a further revision is frozen.

Exit codes: 0 frozen, 1 errors, 2 wrong usage.`
	freezeExample = `  quoin freeze package.md
  git add package.md package.frozen`

	compareUse   = "compare OLD NEW"
	compareShort = "tell what changed between two packages, documents, frozen results or revisions"
	compareLong  = `Tell what is not the same in NEW as it was in OLD: checks that flipped, inputs,
files with other bytes, assumptions, results beyond a tolerance, the furthest moved
first, and blocks. Each of the two is

  a folder that build wrote       as it was written
  a file STEM.frozen              as it was frozen
  a document                      run now, with the files around it
  REVISION:PATH                   any of these in a commit, by tag, branch or number,
                                  PATH from the top of the repository or from here

Of a commit all files are read through git; the work tree is not touched. The
numbers are in the units in which each shows them, and compared whatever these are.

Exit codes: 0 compared, 1 errors, 2 wrong usage, 4 with --same, where results differ.`
	compareExample = `  quoin compare package.frozen package.md
  quoin compare v1:package.md package.md -o changes.html
  quoin compare HEAD~3:calc/package.md HEAD:calc/package.md --tolerance '0.1 %'
  quoin compare issue-a issue-b --json`

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

	flagOut         = "write the package to the folder `DIR`"
	flagPDF         = "write the PDF to `FILE`"
	flagRoot        = "read nothing outside `DIR`"
	flagSet         = "replace a value of the document, as in `name=value`; may be repeated"
	flagWhy         = "say why the block, formula line or check `NAME` was computed or not, and what it read; may be repeated"
	flagStrict      = "exit with 3 when a check is not met"
	flagCache       = "compute and draw everything anew, and keep nothing"
	flagUnits       = "the units of the new package, `SI` or US"
	flagAsData      = "write the reference as JSON"
	flagVerdict     = "write what was found to stdout as JSON, one object for each DIR"
	flagJSON        = "write diagnostics and checks to stdout as JSON, one object for each FILE"
	flagFrozen      = "exit with 4 when results differ from the frozen ones; without these it is an error"
	flagNoSet       = "refused: what is frozen is the document as it stands"
	flagSheet       = "write a change sheet to `FILE.html`"
	flagTolerance   = "how far a number may move, as a part of itself, and count as the same; `1e-6` or '0.1 %'"
	flagSame        = "exit with 4 when results differ"
	flagCompareJSON = "write what changed to stdout as JSON"

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
	errNoDir     = fmt.Errorf("name a folder to make, as in: quoin new tower")
	errOneDir    = fmt.Errorf("name one folder; a name with blanks stands in quotes")
	errUnits     = fmt.Errorf("--units is SI or US")
	errNoFile    = fmt.Errorf("name a FILE or a DIR, as in: quoin build package.md")
	errOneFile   = fmt.Errorf("-o takes one FILE at a time")
	errTwo       = fmt.Errorf("name two things to compare, the old one first, as in: quoin compare v1:package.md package.md")
	errNoHTML    = fmt.Errorf("-o takes the name of a change sheet, FILE.html")
	errFreezeSet = fmt.Errorf("freeze takes no --set: what is frozen are the results of the document as it stands")
)

func errTopic(given, near string) error {
	if near != "" {
		return fmt.Errorf("there is no block kind %q; did you mean %s?", given, near)
	}
	return fmt.Errorf("there is no block kind %q; quoin blocks lists them", given)
}

var (
	errWatchOne = fmt.Errorf("name one FILE; each has a page of its own")
	errPort     = fmt.Errorf("--port is a number from 1 to 65535")
)

// watching says where the live page is.
func watching(file, address string) string {
	return fmt.Sprintf("%s: live page at %s (Ctrl-C ends it)\n", diag.Printable(file), address)
}

// shownAgain says what the document came to this time.
func shownAgain(file string, checks []exhibit.Check, took time.Duration) string {
	failed := len(exhibit.Failed(checks))
	return fmt.Sprintf("%s: shown after %d ms; checks: %d OK, %d NOT OK\n", diag.Printable(file), took.Milliseconds(), len(checks)-failed, failed)
}

// notShown is the title of the page of messages.
func notShown(file string, list diag.List) string {
	n := 0
	for _, d := range list {
		if d.Severity == diag.Error {
			n++
		}
	}
	if n == 1 {
		return file + ": 1 error"
	}
	if n == 0 {
		return file + ": not shown"
	}
	return fmt.Sprintf("%s: %d errors", file, n)
}

func errClash(dir, other string) error {
	return fmt.Errorf("its package would be %s, as that of %s is; rename one, or build it alone with -o", dir, other)
}

// tallyLine is one of many packages.
func tallyLine(file string, t tally) string {
	file = diag.Printable(file)
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
	if t.moved {
		file += "; results differ from the frozen ones"
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

func errTolerance(given string) error {
	return fmt.Errorf("--tolerance %q is no number from 0 to 1, such as 1e-6 or '0.1 %%'", given)
}

func errSet(given string) error {
	return fmt.Errorf("--set %q is not of the form name=value", given)
}

func internalError(fault, place string) string {
	return fmt.Sprintf("quoin: internal error, nothing was written: %s (%s, %s); please report this with the file that led to it\n", fault, place, versionLine())
}

func fileError(file, text string) string {
	return fmt.Sprintf("%s: error: %s\n", diag.Printable(file), legible(text))
}

func fileWarning(file, text string) string {
	return fmt.Sprintf("%s: warning: %s\n", diag.Printable(file), legible(text))
}

// legible is text of several lines without what would drive a terminal.
func legible(text string) string {
	lines := strings.Split(text, "\n")
	for i := range lines {
		lines[i] = diag.Printable(lines[i])
	}
	return strings.Join(lines, "\n")
}

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
	file, page = diag.Printable(file), diag.Printable(page)
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
	return diag.Printable(fmt.Sprintf("%s: demand %s, limit %s, %s (%s:%d)", name, shown(c.Demand), shown(c.Limit), ratio, c.Place.File, c.Place.Line))
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

// longestName is how many characters of a name are said back.
const longestName = 200

// brief is a name on one line, cut if it is longer than any name is.
func brief(name string) string {
	if c := []rune(name); len(c) > longestName {
		name = string(c[:longestName]) + "..."
	}
	return diag.Printable(name)
}

// Of --why.
func whyNothing(name string, names []string) string {
	name = brief(name)
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
	fmt.Fprintf(&out, "%s (%s, %s:%d): ", brief(b.Name), what, diag.Printable(file), b.Place.Line)
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
		fmt.Fprintf(&out, "  %s\n", diag.Printable(changeWords(c)))
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
		fmt.Fprintf(&out, "  %s: %s\n", verb, diag.Printable(strings.Join(same, ", ")))
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
func resultsApart(largest float64, differ []ledger.Flaw) string {
	if len(differ) == 0 {
		return fmt.Sprintf("; its numbers agree to %.1g", max(largest, 1e-16))
	}
	return fmt.Sprintf("; first: %s %s", diag.Printable(differ[0].Path), differ[0].What)
}

// words is a verdict in full.
func (v *verdict) words() string {
	var b strings.Builder
	folder, why := diag.Printable(v.Folder), diag.Printable(v.Why)
	list := func(faults []ledger.Flaw) {
		for i, f := range faults {
			if i == 50 {
				fmt.Fprintf(&b, "  and %d more\n", len(faults)-i)
				break
			}
			fmt.Fprintf(&b, "  %s %s\n", asWord(diag.Printable(f.Path)), diag.Printable(f.What)) // names are those of whoever made the folder
		}
	}
	if len(v.Faults) == 0 {
		fmt.Fprintf(&b, "%s: as its manifest says: %s\n", folder, counted(v.Files+1, "file", "files"))
	} else {
		fmt.Fprintf(&b, "%s: NOT as its manifest says:\n", folder)
	}
	list(v.Faults)
	switch {
	case v.Compared == "":
		fmt.Fprintf(&b, "%s: %s\n", folder, why)
	case v.Compared == comparedBytes && len(v.Differ) == 0:
		fmt.Fprintf(&b, "%s: built again from its inputs: every file comes out the same, byte by byte\n", folder)
	case v.Compared == comparedBytes:
		fmt.Fprintf(&b, "%s: built again from its inputs, byte by byte: NOT the same:\n", folder)
	case len(v.Differ) == 0:
		fmt.Fprintf(&b, "%s: %s; the values, series and checks of results.json were compared and agree to %g, the largest difference is %.1g\n", folder, why, ledger.Agreement, v.Largest)
	default:
		fmt.Fprintf(&b, "%s: %s; the values, series and checks of results.json were compared and do NOT agree to %g:\n", folder, why, ledger.Agreement)
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

// Of frozen results.
const (
	frozenNoFile      = "is no file; what is frozen goes there"
	frozenMissing     = "there are no frozen results %s beside this document"
	frozenMissingHint = "quoin freeze %s writes them"
	frozenListed      = 8 // of what moved, on the terminal
)

// ofRevision is whose results are meant.
func ofRevision(rev string) string {
	if rev == "" {
		return "a document without a revision"
	}
	return "revision " + diag.Printable(rev)
}

// revisionNow is the revision a document is at.
func revisionNow(m exhibit.Meta) string {
	if n := len(m.Revision); n > 0 {
		return m.Revision[n-1].Rev
	}
	return ""
}

// frozenStanding is how results stand to the frozen ones; nothing without any.
func frozenStanding(f *exhibit.Frozen, file string, m exhibit.Meta) string {
	if f == nil {
		return ""
	}
	var b strings.Builder
	switch {
	case f.Agrees():
		fmt.Fprintf(&b, "frozen: agrees with the frozen results of %s\n", ofRevision(f.Revision))
	case f.Current:
		fmt.Fprintf(&b, "frozen: results differ from the frozen ones of %s: %s\n", ofRevision(f.Revision), movedCounts(f.Moved))
	default:
		fmt.Fprintf(&b, "frozen: changed since %s: %s\n", ofRevision(f.Revision), movedCounts(f.Moved))
	}
	b.WriteString(movedLines(f.Moved, frozenListed))
	var files []string
	for _, m := range f.Files {
		files = append(files, m.ID)
	}
	if len(files) > 0 && !f.Agrees() {
		fmt.Fprintf(&b, "  files with other bytes: %s\n", diag.Printable(strings.Join(files, ", ")))
	}
	if !f.Current {
		fmt.Fprintf(&b, "  %s is not frozen yet: quoin freeze %s\n", ofRevision(revisionNow(m)), asWord(diag.Printable(file)))
	}
	return b.String()
}

// frozenSummary is what freeze did.
func frozenSummary(file, target string, now, former *ledger.Frozen, moved *exhibit.Frozen, unchanged bool) string {
	var b strings.Builder
	file, target = diag.Printable(file), diag.Printable(target)
	verb := "frozen in " + target
	if unchanged {
		verb = "unchanged: " + target
	}
	fmt.Fprintf(&b, "%s: %s, %s\n", file, verb, ofRevision(now.Revision))
	switch {
	case former == nil:
	case moved.Agrees():
		fmt.Fprintf(&b, "nothing moved since it was frozen at %s\n", ofRevision(former.Revision))
	default:
		fmt.Fprintf(&b, "moved since it was frozen at %s: %s\n", ofRevision(former.Revision), movedCounts(moved.Moved))
		b.WriteString(movedLines(moved.Moved, frozenListed))
	}
	return b.String()
}

// movedCounts counts what moved: "1 check, of which 1 flipped; 2 inputs; 30 values".
func movedCounts(list []exhibit.Moved) string {
	count, flipped := map[string]int{}, 0
	for _, m := range list {
		count[m.What]++
		if m.Flipped {
			flipped++
		}
	}
	var parts []string
	for _, what := range []string{exhibit.MovedCheck, exhibit.MovedInput, exhibit.MovedValue, exhibit.MovedSeries, exhibit.MovedAssumption} {
		n := count[what]
		if n == 0 {
			continue
		}
		text := plural(n, what)
		if what == exhibit.MovedCheck && flipped > 0 {
			text += fmt.Sprintf(" (%d flipped)", flipped)
		}
		parts = append(parts, text)
	}
	return strings.Join(parts, ", ")
}

func plural(n int, what string) string {
	if n == 1 || what == exhibit.MovedSeries {
		return fmt.Sprintf("%d %s", n, what)
	}
	return fmt.Sprintf("%d %ss", n, what)
}

// movedLines are lines about the first of what moved, and how many more there are.
func movedLines(list []exhibit.Moved, most int) string {
	var b strings.Builder
	for i, m := range list {
		if i == most {
			fmt.Fprintf(&b, "  and %d more\n", len(list)-most)
			break
		}
		b.WriteString("  " + diag.Printable(movedLine(m)) + "\n")
	}
	return b.String()
}

// movedLine is one thing that moved: what it is, and was.
func movedLine(m exhibit.Moved) string {
	name := movedName(m)
	switch {
	case m.Old == "":
		return name + ": new, " + m.New
	case m.New == "":
		return name + ": gone, was " + m.Old
	}
	text := name + ": " + m.New + ", was " + m.Old
	if m.Flipped {
		text = "flipped: " + text
	}
	if m.By != nil && m.What != exhibit.MovedCheck {
		text += " (" + render.Part(*m.By) + ")"
	}
	return text
}

// movedName is the name of what moved, of an item its level or its number.
func movedName(m exhibit.Moved) string {
	switch {
	case m.Label != "" && m.What == exhibit.MovedCheck:
		return m.ID + " at " + m.Label
	case m.Index != "" && m.Label != "":
		return m.ID + "[" + m.Index + "] at " + m.Label
	case m.Index != "":
		return m.ID + "[" + m.Index + "]"
	}
	return m.ID
}

// Of things that are compared.
const (
	notWritten    = "this folder is no package that quoin wrote"
	oldPackage    = "this package was written by an earlier program, without results.txt; build it again"
	sheetForeign  = "exists and is no change sheet; it is left as it is"
	gitNone       = "there is no such file, and no git repository here in which it could be a revision"
	gitNoRevision = "there is no revision %s in this repository"
	gitShallow    = "there is no revision %s in this repository, which holds a part of the history only: git fetch --unshallow brings the rest"
	gitNoFile     = "revision %s has no file %s"
	gitNoTree     = "git cannot list the files of this revision"
	gitNoObject   = "git does not hold the bytes of this file"
	gitElsewhere  = "the commit holds a pointer to this file only: its bytes are kept outside git"
	gitLinkOut    = "this is a link that leads out of the repository"
	gitLinkLoop   = "links of this path lead round in a circle"
)

// comparedText is what changed, in words.
func comparedText(old, now string, d *ledger.Difference) string {
	var b strings.Builder
	fmt.Fprintf(&b, "old: %s\nnew: %s\n", comparedName(old, d.Old), comparedName(now, d.New))
	if !d.Differs() {
		fmt.Fprintf(&b, "results: the same, %d numbers within %s\n", d.Compared, quantity.Plain(d.Tolerance))
	} else {
		fmt.Fprintf(&b, "results differ: %s; %d numbers compared, tolerance %s\n", movedCounts(d.Results()), d.Compared, quantity.Plain(d.Tolerance))
	}
	for _, part := range []struct {
		title string
		list  []exhibit.Moved
	}{{"checks", d.Checks}, {"inputs", d.Inputs}, {"files with other bytes", d.Files}, {"assumptions", d.Assumptions}, {"values", d.Values}, {"series", d.Series}, {"blocks", d.Blocks}} {
		if len(part.list) > 0 {
			fmt.Fprintf(&b, "%s:\n%s", part.title, movedLines(part.list, len(part.list)))
		}
	}
	return b.String()
}

func comparedName(given string, h ledger.Head) string {
	text := given
	if h.Revision != "" {
		text += ", revision " + h.Revision
		if h.Date != "" {
			text += " of " + h.Date
		}
	}
	return text
}
