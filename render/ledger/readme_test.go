package ledger

import (
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"testing"

	"quoin/calc/exhibit"
)

// TestReadme: what it names is there, and hostile words stay on their line and
// within their quotes.
func TestReadme(t *testing.T) {
	p := &exhibit.Package{Meta: exhibit.Meta{Title: "Frame\nTO READ IT", Number: "C-1", Status: "draft", Revision: []exhibit.Revision{{Rev: "A", Date: "2031-01-02"}, {Rev: "B", Date: "2031-02-03"}}},
		Provenance: exhibit.Provenance{Tool: "quoin 0.1.0", Source: "a b/it's.md", Overrides: []exhibit.Override{{Name: "V", Text: "3 kN; rm -r ~"}}}}
	text := string(Readme(p, "abc123"))
	for _, want := range []string{"C-1 Frame TO READ IT\n", "Revision  B 2031-02-03\n", "Status    draft\n", "\n    abc123\n", `quoin build --root . 'a b/it'\''s.md' --set 'V=3 kN; rm -r ~'` + "\n"} {
		if !strings.Contains(text, want) {
			t.Errorf("it lacks %q:\n%s", want, text)
		}
	}
	for _, not := range []string{"commit", "Client"} {
		if strings.Contains(text, not) {
			t.Errorf("it says %q of nothing", not)
		}
	}
	p.Provenance.Commit, p.Provenance.CommitDate, p.Provenance.Dirty = "1a2b3c4", "2031-02-03", true
	if text := string(Readme(p, "")); !strings.Contains(text, "the commit 1a2b3c4 of 2031-02-03, with changes that were not committed;") {
		t.Error(text)
	}
}

// TestReadmeCommands: the commands it prints do what it says, on a whole package
// and on one with a bit changed.
func TestReadmeCommands(t *testing.T) {
	if runtime.GOOS != "linux" {
		t.Skip("sha256sum and sh are those of Linux")
	}
	p := &exhibit.Package{Provenance: exhibit.Provenance{Tool: "quoin 0.1.0", Source: "p.md"}}
	inputs, err := Inputs(map[string][]byte{"p.md": []byte("# it\n"), "data/a b.csv": []byte("1,2\n")}, p)
	if err != nil {
		t.Fatal(err)
	}
	digest := Digest(inputs, p.Provenance.Tool)
	files := map[string][]byte{"index.html": []byte("<p>it</p>"), ReadmeFile: Readme(p, digest)}
	for path, data := range inputs {
		files[path] = data
	}
	files[ManifestFile] = Manifest(files, digest, p.Provenance.Tool)
	dir := filepath.Join(t.TempDir(), "p.package")
	if err := Write(dir, files); err != nil {
		t.Fatal(err)
	}
	sh := func(command string) (string, error) {
		c := exec.Command("sh", "-c", command)
		c.Dir = dir
		out, err := c.CombinedOutput()
		return string(out), err
	}
	out, err := sh(VerifyFiles)
	if err != nil || strings.Count(out, ": OK\n") != len(files)-1 {
		t.Errorf("of %d files: %v\n%s", len(files)-1, err, out)
	}
	if out, err := sh(verifyDigest(p.Provenance.Tool)); err != nil || !strings.HasPrefix(out, digest) {
		t.Errorf("digest %s, the command gives %s (%v)", digest, out, err)
	}
	if err := os.WriteFile(filepath.Join(dir, "inputs/p.md"), []byte("# It\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	if out, err := sh(VerifyFiles); err == nil || !strings.Contains(out, "inputs/p.md: FAILED") {
		t.Errorf("a changed file passes: %v\n%s", err, out)
	}
	if out, _ := sh(verifyDigest(p.Provenance.Tool)); strings.HasPrefix(out, digest) {
		t.Error("the digest of changed inputs is the same")
	}
}
