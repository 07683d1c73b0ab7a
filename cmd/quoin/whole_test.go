package main

import (
	"bytes"
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
	"testing"
	"time"

	"quoin/render/ledger"
)

// program is quoin as a program of its own: this test under another name.
func program(t *testing.T) string {
	t.Helper()
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(t.TempDir(), "quoin")
	if err := os.Symlink(self, path); err != nil {
		if runtime.GOOS == "windows" { // where making links needs a privilege
			t.Skip(err)
		}
		t.Fatal(err)
	}
	return path
}

// TestStandsIsNeverWrong: whatever is edited in the document, its data and the folder
// of the package, a build that may leave what stands gives the folder that one gives
// which lays all of it out.
func TestStandsIsNeverWrong(t *testing.T) {
	top := t.TempDir()
	t.Setenv("QUOIN_CACHE", filepath.Join(t.TempDir(), "kept"))
	file, out, fresh := filepath.Join(top, "package.md"), filepath.Join(top, "out"), filepath.Join(top, "fresh")
	write(t, file, plain)
	write(t, filepath.Join(top, "storeys.csv"), storeys)
	r := rand.New(rand.NewPCG(3, 5))
	unchanged := 0
	for i := range 24 {
		switch r.IntN(5) {
		case 0:
			write(t, file, strings.Replace(plain, "0.1 *", fmt.Sprintf("0.1%d *", r.IntN(3)), 1))
		case 1:
			write(t, filepath.Join(top, "storeys.csv"), strings.Replace(storeys, "2400", fmt.Sprint(2400+r.IntN(2)), 1))
		case 2, 3: // a byte of the package, the manifest among them
			if names := filesOf(t, top); slices.Contains(names, "out/index.html") {
				names = slices.DeleteFunc(names, func(n string) bool { return !strings.HasPrefix(n, "out/") })
				path := filepath.Join(top, filepath.FromSlash(names[r.IntN(len(names))]))
				text := []byte(slurp(t, path))
				at := r.IntN(len(text))
				if strings.HasSuffix(path, ledger.ManifestFile) {
					at = bytes.IndexByte(text, ' ') // still a manifest
				}
				text[at] = ' ' + (text[at]+1)%64
				if strings.HasSuffix(path, ledger.ManifestFile) {
					text[at] = '\t'
				}
				write(t, path, string(text))
			}
		}
		said := say(t, file, "-o", out)
		say(t, file, "-o", fresh, "--no-cache")
		if strings.Contains(said, ": unchanged: ") {
			unchanged++
		}
		if folderOf(t, out) != folderOf(t, fresh) {
			t.Fatalf("edit %d: %s, and the folder is not what would be written", i, said)
		}
	}
	if unchanged == 0 || unchanged == 24 {
		t.Errorf("%d builds of 24 left what stands: nothing was tried", unchanged)
	}
}

// TestSameBytesAnywhere: nothing of where and how the program is started gets into a
// package.
func TestSameBytesAnywhere(t *testing.T) {
	quoin := program(t)
	top := t.TempDir()
	file := filepath.Join(top, "calc", "package.md")
	write(t, file, small+"\n# Frame\n"+plain[strings.Index(plain, "\n\n"):strings.Index(plain, "```calc formula")])
	write(t, filepath.Join(top, "calc", "storeys.csv"), storeys)
	other := filepath.Join(top, "another home ß")
	if err := os.Mkdir(other, 0o755); err != nil {
		t.Fatal(err)
	}
	want := ""
	for i, c := range []struct {
		dir, file string
		env       []string
		umask     string
	}{
		{top, file, nil, "022"},
		{other, "../calc/package.md", []string{"HOME=" + other, "TMPDIR=" + other, "XDG_CACHE_HOME=" + other}, "022"},
		{filepath.Join(top, "calc"), "package.md", []string{"TZ=Pacific/Kiritimati", "LANG=tr_TR.UTF-8", "LC_ALL=tr_TR.UTF-8"}, "077"},
		{top, "calc/package.md", []string{"GOMAXPROCS=1", "GOGC=20"}, "000"},
		{top, "calc/package.md", []string{"GOMAXPROCS=7", "QUOIN_CACHE=" + filepath.Join(top, "kept")}, "022"},
		{top, "calc/package.md", []string{"TZ=America/St_Johns", "QUOIN_CACHE=" + filepath.Join(top, "kept")}, "027"},
		{top, "calc/package.md", []string{"QUOIN_CACHE=" + filepath.Join(top, "calc", "kept")}, "022"},
	} {
		out := filepath.Join(top, fmt.Sprint("out", i))
		cmd := exec.Command(quoin, "build", c.file, "-o", out)
		if runtime.GOOS != "windows" {
			cmd = exec.Command("sh", append([]string{"-c", `umask "$0"; exec "$@"`, c.umask}, cmd.Args...)...)
		}
		cmd.Dir, cmd.Env = c.dir, append(os.Environ(), c.env...)
		if said, err := cmd.CombinedOutput(); err != nil {
			t.Fatalf("%v: %v\n%s", c.env, err, said)
		}
		if got := folderOf(t, out); want == "" {
			want = got
		} else if got != want {
			t.Errorf("%+v: the package differs", c)
		}
		if v, said := verified(t, out); !v.Same {
			t.Error(said)
		}
	}
}

// TestKilled ends builds at random moments, now and then two at once: the folder is
// the old package or the new one, whole, and nothing is left beside it in the end.
func TestKilled(t *testing.T) {
	quoin := program(t)
	top := t.TempDir()
	file, out := filepath.Join(top, "package.md"), filepath.Join(top, "package.package")
	write(t, filepath.Join(top, "storeys.csv"), storeys)
	variant := func(i int) { write(t, file, strings.Replace(plain, "0.1 *", fmt.Sprintf("0.1%02d *", i), 1)) }
	start := func() *exec.Cmd {
		cmd := exec.Command(quoin, "build", file)
		if err := cmd.Start(); err != nil {
			t.Fatal(err)
		}
		return cmd
	}
	variant(0)
	begun := time.Now()
	if err := start().Wait(); err != nil {
		t.Fatal(err)
	}
	took := time.Since(begun)
	r := rand.New(rand.NewPCG(1, 9))
	was, news, ended := 0, 0, 0
	for i := 1; i <= 50; i++ {
		variant(i)
		all := []*exec.Cmd{start()}
		if i%5 == 0 {
			all = append(all, start())
		}
		time.Sleep(took/2 + time.Duration(r.Int64N(int64(took*3/4))))
		for _, cmd := range all {
			cmd.Process.Kill()
			// The next one is ended nearer to the moment at which folders change places.
			if cmd.Wait() != nil {
				ended++
				took = took * 5 / 4
			} else {
				took = took * 4 / 5
			}
		}
		root, err := os.OpenRoot(out)
		if err != nil {
			t.Fatalf("kill %d: %v", i, err)
		}
		x, err := ledger.Examine(root)
		root.Close()
		if err != nil || len(x.Faults) > 0 {
			t.Fatalf("kill %d: %v, %+v", i, err, x)
		}
		text := slurp(t, filepath.Join(out, "inputs", "package.md"))
		switch {
		case strings.Contains(text, fmt.Sprintf("0.1%02d *", i)):
			was, news = i, news+1
		case !strings.Contains(text, fmt.Sprintf("0.1%02d *", was)) && !(was == 0 && strings.Contains(text, "0.100 *")):
			t.Fatalf("kill %d: neither old nor new:\n%s", i, text)
		}
	}
	t.Logf("%d of 60 were ended, %d packages became new", ended, news)
	// Two at once, to their end.
	variant(51)
	one, two := start(), start()
	if err := one.Wait(); err != nil {
		t.Error(err)
	}
	if err := two.Wait(); err != nil {
		t.Error(err)
	}
	say(t, file)
	entries, err := os.ReadDir(top)
	if err != nil || len(entries) != 3 {
		t.Errorf("left beside the package: %v, %v", entries, err)
	}
	if v, said := verified(t, out); !v.Same {
		t.Error(said)
	}
}
