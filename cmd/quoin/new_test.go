package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestNewName: a name that hides characters is refused in one line; names that
// systems can hold, and folders that are there already, are taken as they are.
func TestNewName(t *testing.T) {
	t.Chdir(t.TempDir())
	for _, name := range []string{"a\nb", "a\x1b[2Jb", "x/nul.txt/y", "dot.", "blank ", "a:b", "back\\slash", "é\u200b"} {
		var out, stderr strings.Builder
		code := run([]string{"new", name}, strings.NewReader(""), &out, &stderr)
		if filepath.Separator == '\\' && strings.ContainsAny(name, `\:`) {
			continue
		}
		if got := stderr.String(); code != exitErrors || strings.Count(got, "\n") != 1 || strings.ContainsAny(strings.TrimSpace(got), "\x1b\u200b") || out.String() != "" {
			t.Errorf("%q: exit code %d, %q", name, code, got)
		}
	}
	if left, err := os.ReadDir("."); err != nil || len(left) > 0 {
		t.Errorf("left behind: %v, %v", left, err)
	}
	for _, name := range []string{"tower", "Turm 2", "été", "console", "a.b"} {
		if !nameable(name) {
			t.Errorf("%q is refused", name)
		}
	}
	for path, want := range map[string]string{"a/b.md": "a/b.md", "a b": "'a b'", "it's": `'it'\''s'`, "-x": "'-x'", "$(x)": "'$(x)'", "é": "é"} {
		if got := asWord(path); got != want {
			t.Errorf("%s is written %s, want %s", path, got, want)
		}
	}
}
