package main

import (
	"bytes"
	"errors"
	"flag"
	"io"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strconv"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

func TestMain(m *testing.M) {
	if os.Getenv("QUOIN_CACHE") == "" {
		os.Setenv("QUOIN_CACHE", os.DevNull) // no test leaves anything in the user's cache
	}
	testscript.Main(tidy{m}, map[string]func(){"quoin": main})
}

// With -update the scripts take over what the program now says; read the difference.
var update = flag.Bool("update", false, "write what the program says into the scripts")

const scripts = module + "/testdata/script"

// TestScripts runs the command line as its user does: testdata/script/*.txtar.
func TestScripts(t *testing.T) {
	found, err := filepath.Glob(scripts + "/*.txtar")
	if err != nil || len(found) == 0 {
		t.Fatalf("no scripts found in %s: %v", scripts, err)
	}
	cache := t.TempDir() // of all scripts, which run side by side
	testscript.Run(t, testscript.Params{Files: found, RequireExplicitExec: true, RequireUniqueNames: true, UpdateScripts: *update,
		Setup: func(e *testscript.Env) error {
			// A git of the machine that runs the tests must not reach in.
			e.Setenv("GIT_CONFIG_GLOBAL", os.DevNull)
			e.Setenv("GIT_CONFIG_NOSYSTEM", "1")
			e.Setenv("QUOIN_CACHE", cache)
			e.Setenv("QUOIN_CHROMIUM", "")
			e.Setenv("ARCH", runtime.GOARCH)
			// The folder of the program alone: a PATH on which nothing else is found.
			e.Setenv("BARE", filepath.SplitList(e.Getenv("PATH"))[0])
			for _, who := range []string{"AUTHOR", "COMMITTER"} {
				e.Setenv("GIT_"+who+"_NAME", "AB")
				e.Setenv("GIT_"+who+"_EMAIL", "ab@example.org")
				e.Setenv("GIT_"+who+"_DATE", "2026-01-20T12:00:00Z")
			}
			return nil
		},
		Cmds: map[string]func(ts *testscript.TestScript, neg bool, args []string){"exits": exits, "same": same}})
}

// exits CODE COMMAND ARG... runs a command that must end with CODE.
func exits(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: exits CODE COMMAND ARG...")
	}
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	err = ts.Exec(args[1], args[2:]...)
	got := 0
	var exit *exec.ExitError
	if errors.As(err, &exit) {
		got = exit.ExitCode()
	} else if err != nil {
		ts.Fatalf("%v", err)
	}
	if got != want {
		ts.Fatalf("exit code %d, want %d", got, want)
	}
}

// same DIR DIR compares two folders byte by byte.
func same(ts *testscript.TestScript, neg bool, args []string) {
	if len(args) != 2 {
		ts.Fatalf("usage: same DIR DIR")
	}
	a, b := folder(ts, args[0]), folder(ts, args[1])
	var differ []string
	for name := range a {
		if !bytes.Equal(a[name], b[name]) {
			differ = append(differ, name)
		}
	}
	for name := range b {
		if a[name] == nil {
			differ = append(differ, name)
		}
	}
	switch {
	case len(a) == 0:
		ts.Fatalf("%s is empty", args[0])
	case !neg && len(differ) > 0:
		ts.Fatalf("these differ: %s", strings.Join(differ, ", "))
	case neg && len(differ) == 0:
		ts.Fatalf("%s and %s are the same", args[0], args[1])
	}
}

func folder(ts *testscript.TestScript, dir string) map[string][]byte {
	out := map[string][]byte{}
	root := os.DirFS(ts.MkAbs(dir))
	ts.Check(fs.WalkDir(root, ".", func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		out[path], err = fs.ReadFile(root, path)
		return err
	}))
	return out
}

// broken panics when written to.
type broken struct{}

func (broken) Write([]byte) (int, error) { panic("broken pen") }

// A fault of the program is one line that says where, and exit code 1.
func TestInternalError(t *testing.T) {
	var stderr strings.Builder
	code := run([]string{"--version"}, strings.NewReader(""), broken{}, &stderr)
	got := stderr.String()
	if code != exitErrors || strings.Count(got, "\n") != 1 || !strings.HasPrefix(got, "quoin: internal error, nothing was written: broken pen (cmd/quoin.broken.Write, script_test.go:") {
		t.Errorf("exit code %d, %q", code, got)
	}
}

// Nothing is shown where nobody watches.
func TestNoProgressWhenPiped(t *testing.T) {
	for name, w := range map[string]io.Writer{"a buffer": &strings.Builder{}, "a file": file(t)} {
		a := &app{stderr: w}
		if a.progress().stage("x") != nil {
			t.Errorf("%s is taken for a terminal", name)
		}
	}
}

func file(t *testing.T) *os.File {
	f, err := os.Create(filepath.Join(t.TempDir(), "f"))
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { f.Close() })
	return f
}
