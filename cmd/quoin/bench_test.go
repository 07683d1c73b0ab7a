package main

import (
	"fmt"
	"io"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

const example = module + "/examples/four-storey/package.md"

// built builds a document by the command line, which must succeed.
func built(b *testing.B, args ...string) {
	b.Helper()
	if code := run(append([]string{"build"}, args...), nil, io.Discard, io.Discard); code != exitBuilt {
		b.Fatalf("exit code %d", code)
	}
}

// BenchmarkBuildCold builds the first example with an empty cache into no folder.
func BenchmarkBuildCold(b *testing.B) {
	for b.Loop() {
		b.Setenv("QUOIN_CACHE", b.TempDir())
		built(b, example, "-o", filepath.Join(b.TempDir(), "out"))
	}
}

// BenchmarkBuildChanged builds it with one block changed each time, and a line of
// prose above all of them.
func BenchmarkBuildChanged(b *testing.B) {
	b.Setenv("QUOIN_CACHE", b.TempDir())
	root := b.TempDir()
	if err := os.CopyFS(root, os.DirFS(filepath.Dir(example))); err != nil {
		b.Fatal(err)
	}
	file, out := filepath.Join(root, "package.md"), filepath.Join(root, "out")
	text, err := os.ReadFile(file)
	if err != nil {
		b.Fatal(err)
	}
	if !strings.Contains(string(text), "S_DS: ") {
		b.Fatal("the example has no S_DS to change")
	}
	for i := 0; b.Loop(); i++ {
		changed := strings.Replace(string(text), "S_DS: ", fmt.Sprintf("S_DS: 1.%d * ", i), 1)
		if err := os.WriteFile(file, []byte(changed), 0o644); err != nil {
			b.Fatal(err)
		}
		built(b, file, "-o", out)
	}
}

// BenchmarkBuildUnchanged builds it again, nothing changed.
func BenchmarkBuildUnchanged(b *testing.B) {
	b.Setenv("QUOIN_CACHE", b.TempDir())
	out := filepath.Join(b.TempDir(), "out")
	built(b, example, "-o", out)
	for b.Loop() {
		built(b, example, "-o", out)
	}
}

// BenchmarkHeavyCold builds the large package with an empty cache.
func BenchmarkHeavyCold(b *testing.B) {
	file := heavy(b, b.TempDir())
	out := filepath.Join(b.TempDir(), "out")
	for b.Loop() {
		b.Setenv("QUOIN_CACHE", b.TempDir())
		built(b, file, "-o", out)
	}
	weigh(b, out)
}

// BenchmarkHeavyChanged builds it with one chart changed each time.
func BenchmarkHeavyChanged(b *testing.B) {
	b.Setenv("QUOIN_CACHE", b.TempDir())
	file := heavy(b, b.TempDir())
	out := filepath.Join(filepath.Dir(file), "out")
	text, err := os.ReadFile(file)
	if err != nil {
		b.Fatal(err)
	}
	end := regexp.MustCompile(`(?m)^to: 4 s$`).FindIndex(text)
	if end == nil {
		b.Fatal("no chart to change")
	}
	built(b, file, "-o", out)
	for i := 0; b.Loop(); i++ {
		changed := fmt.Sprintf("%sto: 3.%03d s%s", text[:end[0]], 1+i%999, text[end[1]:])
		if err := os.WriteFile(file, []byte(changed), 0o644); err != nil {
			b.Fatal(err)
		}
		built(b, file, "-o", out)
	}
	weigh(b, out)
}

// BenchmarkHeavyUnchanged builds it again, nothing changed.
func BenchmarkHeavyUnchanged(b *testing.B) {
	b.Setenv("QUOIN_CACHE", b.TempDir())
	file := heavy(b, b.TempDir())
	out := filepath.Join(b.TempDir(), "out")
	built(b, file, "-o", out)
	for b.Loop() {
		built(b, file, "-o", out)
	}
	weigh(b, out)
}

// weigh reports the bytes of the page.
func weigh(b *testing.B, out string) {
	b.Helper()
	info, err := os.Stat(filepath.Join(out, "index.html"))
	if err != nil {
		b.Fatal(err)
	}
	b.ReportMetric(float64(info.Size()), "page-bytes")
}

// many is the first example in n folders, each of another name and number, so that no
// two give the same package; all in one git work tree where git is here.
func many(tb testing.TB, n int) (root string) {
	root = tb.TempDir()
	for i := range n {
		dir := filepath.Join(root, fmt.Sprintf("frame-%03d", i))
		if err := os.CopyFS(dir, os.DirFS(filepath.Dir(example))); err != nil {
			tb.Fatal(err)
		}
		os.RemoveAll(filepath.Join(dir, "package.package"))
		file := filepath.Join(dir, "package.md")
		text, err := os.ReadFile(file)
		if err == nil {
			err = os.WriteFile(file, []byte(strings.Replace(string(text), "\ntitle: ", fmt.Sprintf("\ntitle: %d ", i), 1)), 0o644)
		}
		if err != nil {
			tb.Fatal(err)
		}
	}
	for _, args := range [][]string{{"init", "-q"}, {"add", "-A"}, {"-c", "user.name=AB", "-c", "user.email=ab@example.org", "commit", "-q", "-m", "one"}} {
		git(root, args...)
	}
	return root
}

// BenchmarkMany200Unchanged builds 200 packages of the size of the first example, none
// of them changed: it is to take less than 5 s on two cores.
func BenchmarkMany200Unchanged(b *testing.B) {
	b.Setenv("QUOIN_CACHE", b.TempDir())
	root := many(b, 200)
	built(b, root)
	for b.Loop() {
		built(b, root)
	}
}
