package main

import (
	"encoding/json"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
)

// allowed are the messages of the validator that stand, each with its reason.
// Every other message is a fault of the page.
var allowed = []struct {
	message *regexp.Regexp
	extract *regexp.Regexp // what it is about
	why     string
}{
	{regexp.MustCompile(`^Inline script violates Content Security Policy`), regexp.MustCompile(`<script( type="application/json")?>`),
		"the validator reads no hashes: the script runs by its own, and a block of data is no script; no browser refuses either (TestPage)"},
	{regexp.MustCompile(`^Inline style violates Content Security Policy`), regexp.MustCompile(`<style>@font-`),
		"the policy allows it by its hash in style-src-elem, which the validator does not read; no browser refuses it (TestPage)"},
	{regexp.MustCompile(`^Resource violates Content Security Policy .*: image “data:`), regexp.MustCompile(`<img src="data:image/`),
		"img-src is data: and allows it; browsers show the picture (TestPage)"},
	{regexp.MustCompile(`^CSS: “math-shift”: Property “math-shift” doesn't exist`), regexp.MustCompile(`th-shift:compact`),
		"a property of MathML Core, in the typesetter's own style: browsers set exponents under a bar lower by it"},
	{regexp.MustCompile(`^Text run is not in Unicode Normalization Form C`), regexp.MustCompile(`e?\x{301}\x{301}`),
		"accents in a heap, in the hostile package alone: a text stands as its author wrote it"},
}

// TestValid runs the validator over the pages of all examples and the hostile one.
func TestValid(t *testing.T) {
	java := tool(t, "java", "java")
	jar := module + "/node_modules/vnu-jar/build/dist/vnu.jar"
	if _, err := os.Stat(jar); err != nil {
		absent(t, "no node_modules/vnu-jar: make modules installs it")
	}
	var dirs []string
	for name := range failing {
		dirs = append(dirs, exampleOf(t, name))
	}
	dir, err := buildShared(hostile(t), "hostile-valid")
	if err != nil {
		t.Fatal(err)
	}
	dirs = append(dirs, dir)
	args := []string{"-jar", jar, "--format", "json", "--stdout", "--exit-zero-always"}
	aside := t.TempDir() // its own names of files are plain
	for _, dir := range dirs {
		text, err := os.ReadFile(filepath.Join(dir, "index.html"))
		if err != nil {
			t.Fatal(err)
		}
		file := filepath.Join(aside, filepath.Base(dir)+".html")
		if err := os.WriteFile(file, text, 0o644); err != nil {
			t.Fatal(err)
		}
		args = append(args, file)
	}
	out, err := exec.Command(java, args...).Output()
	if err != nil {
		t.Fatal(err)
	}
	var report struct {
		Messages []struct {
			URL, Type, Message, Extract string
			LastLine                    int
		}
	}
	if err := json.Unmarshal(out, &report); err != nil {
		t.Fatal(err)
	}
	met := make([]int, len(allowed))
	said := map[string]int{}
	for _, m := range report.Messages {
		i := slices.IndexFunc(allowed, func(a struct {
			message, extract *regexp.Regexp
			why              string
		}) bool {
			return a.message.MatchString(m.Message) && a.extract.MatchString(m.Extract)
		})
		if i >= 0 {
			met[i]++
			continue
		}
		if said[m.Message]++; said[m.Message] <= 3 {
			t.Errorf("%s:%d: %s\n\t%s", filepath.Base(m.URL), m.LastLine, m.Message, strings.TrimSpace(m.Extract))
		}
	}
	for i, n := range met {
		if n == 0 {
			t.Errorf("%s is allowed and never said: strike it out", allowed[i].message)
		}
	}
}
