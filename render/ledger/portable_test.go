package ledger

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// TestInputsPortable: a package holds no file that some system cannot, nor two that
// are one on many; and says which and why.
func TestInputsPortable(t *testing.T) {
	for path, why := range map[string]string{
		"records/con.at2": "for themselves", "AUX": "for themselves", "lpt1.x.csv": "for themselves", "nul/a.csv": "for themselves", "prn .csv": "for themselves",
		"a:b.csv": `":"`, "what?.csv": `"?"`, `a\b`: `"\\"`, "a\tb": `"\t"`, "a<b>": `"<>"`,
		"a.": "full stop", "a /b.csv": "blank", "x./b.csv": "full stop",
		"console.csv": "", "com10.csv": "", "com.csv": "", "a.con": "", "données/été 1.csv": "", ".hidden": "", "a..b": "", "auxiliary/nullity.csv": "",
	} {
		_, err := Inputs(map[string][]byte{path: nil, "package.md": nil}, sample())
		switch {
		case why == "" && err != nil:
			t.Errorf("%q: %v", path, err)
		case why != "" && (err == nil || !strings.Contains(err.Error(), why) || !strings.Contains(err.Error(), path)):
			t.Errorf("%q: %v, want %q", path, err, why)
		}
	}
	for _, two := range [][2]string{{"a.csv", "A.csv"}, {"data/a.csv", "Data/a.csv"}, {"Été.csv", "été.csv"}} {
		_, err := Inputs(map[string][]byte{two[0]: nil, two[1]: nil}, sample())
		if err == nil || !strings.Contains(err.Error(), two[0]) || !strings.Contains(err.Error(), two[1]) {
			t.Errorf("%v: %v", two, err)
		}
	}
	if _, err := Inputs(map[string][]byte{"Build.JSON": nil}, sample()); err == nil {
		t.Error("an input takes the place of build.json where case does not count")
	}
}

// TestForsaken: without locks, age tells what is left over.
func TestForsaken(t *testing.T) {
	top := t.TempDir()
	for name, want := range map[string]bool{".p.new-1": false, ".p.new-2": true, ".p.old-1": true} {
		dir := filepath.Join(top, name)
		if err := os.Mkdir(dir, 0o755); err != nil {
			t.Fatal(err)
		}
		if strings.HasSuffix(name, "2") {
			then := time.Now().Add(-2 * time.Hour)
			if err := os.Chtimes(dir, then, then); err != nil {
				t.Fatal(err)
			}
		}
		if got := forsaken(dir); got != want {
			t.Errorf("%s: %t, want %t", name, got, want)
		}
	}
}
