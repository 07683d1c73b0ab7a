package ledger

import (
	"fmt"
	"strings"

	"quoin/calc/exhibit"
)

// ReadmeFile tells whoever opens the folder, many years on perhaps, what it is.
const ReadmeFile = "README.txt"

// Readme is README.txt: what the package is, how to read it, how to see that it is
// as it was written, and how to build it again. Lines end with LF and are at most
// 100 characters but for names and commands.
func Readme(p *exhibit.Package, digest string) []byte {
	var b strings.Builder
	line := func(format string, args ...any) { fmt.Fprintf(&b, format+"\n", args...) }
	m := p.Meta
	title := m.Title
	if m.Number != "" {
		title = m.Number + " " + title
	}
	line("%s", oneLine(title))
	for _, row := range []struct{ name, text string }{{"Project", m.Project}, {"Client", m.Client}, {"Subject", m.Subject}, {"Location", m.Location}, {"Revision", currentRevision(m)}, {"Status", m.Status}} {
		if text := oneLine(row.text); text != "" {
			line("%-9s %s", row.name, text)
		}
	}
	line("")
	line("This folder is a calculation package written by %s.", p.Provenance.Tool)
	line("The licensed engineer in responsible charge answers for it; the page states its limits.")
	line("")
	line("TO READ IT")
	line("  index.html     the package: open it in any browser, from disk. It asks for nothing outside itself")
	line("                 and reads and prints without scripts. Its fonts and scripts are inside; their")
	line("                 licences stand after the last sheet, on the screen.")
	line("  results.json   every value, series and check, in SI units at full precision (UTF-8, JSON).")
	line("  results.txt    the same in the units shown, a line a value, for comparing.")
	line("  tables/        every table and the data of every figure (UTF-8, CSV: comma, decimal point,")
	line("                 units in the head row).")
	line("  inputs/        all it was built from: the document and the files it names, and build.json.")
	line("  manifest.json  the SHA-256 of every other file.")
	line("")
	line("TO SEE THAT IT IS AS IT WAS WRITTEN")
	line("  With %s, in this folder; it holds every file to the manifest, builds the", p.Provenance.Tool)
	line("  package again from inputs/, in memory, and says what differs:")
	line("    quoin verify .")
	line("  Without it:")
	line("  In this folder, with a POSIX shell; each file must be reported OK:")
	line("    %s", VerifyFiles)
	line("  The package digest, which is printed on its cover:")
	line("    %s", digest)
	line("  is the SHA-256 of the hashes of inputs/ and the name of the program:")
	line("    %s", verifyDigest(p.Provenance.Tool))
	line("")
	line("TO BUILD IT AGAIN")
	line("  With %s, from a copy of inputs/ in a folder that is in no git repository:", p.Provenance.Tool)
	line("    quoin build --root . %s%s", shellWord(p.Provenance.Source), overridden(p.Provenance.Overrides))
	if p.Provenance.Commit != "" {
		line("  It was built from the commit %s of %s%s; that is part of the page.", p.Provenance.Commit, p.Provenance.CommitDate, map[bool]string{true: ", with changes that were not committed"}[p.Provenance.Dirty])
	}
	return []byte(b.String())
}

// VerifyFiles is the shell command that holds the files of a package to its manifest.
const VerifyFiles = `sed -n 's/.*"path":"\([^"]*\)","sha256":"\([0-9a-f]*\)".*/\2  \1/p' manifest.json | sha256sum -c`

// verifyDigest is the shell command that makes the package digest again; see Digest.
func verifyDigest(tool string) string {
	return `( find inputs -type f | LC_ALL=C sort | xargs -d '\n' sha256sum; echo ` + shellWord("tool "+tool) + ` ) | sha256sum`
}

func oneLine(s string) string { return strings.Join(strings.Fields(s), " ") }

func currentRevision(m exhibit.Meta) string {
	if len(m.Revision) == 0 {
		return ""
	}
	r := m.Revision[len(m.Revision)-1]
	return strings.TrimSpace(r.Rev + " " + r.Date)
}

func overridden(all []exhibit.Override) string {
	var b strings.Builder
	for _, o := range all {
		b.WriteString(" --set " + shellWord(o.Name+"="+o.Text))
	}
	return b.String()
}

// shellWord is a text as one word of a POSIX shell.
func shellWord(s string) string {
	if s != "" && !strings.ContainsFunc(s, func(r rune) bool {
		return !(r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9' || strings.ContainsRune("_./-+=", r))
	}) {
		return s
	}
	return "'" + strings.ReplaceAll(s, "'", `'\''`) + "'"
}
