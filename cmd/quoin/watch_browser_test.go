package main

import (
	"context"
	"encoding/json"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// TestWatchInBrowser: the live page keeps its place when something is added above
// it, and after the messages of a broken source; its own policy lets its script run.
func TestWatchInBrowser(t *testing.T) {
	chromium := tool(t, "chromium", "chromium", "chromium-browser")
	tool(t, "node", "node")
	if _, err := os.Stat(module + "/node_modules/playwright-core"); err != nil {
		absent(t, "no node_modules/playwright-core: make modules installs it")
	}
	root, err := real(t.TempDir())
	if err != nil {
		t.Fatal(err)
	}
	if err := os.CopyFS(root, os.DirFS(filepath.Dir(example))); err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(root, "package.md")
	u := follow(t, file)
	ctx, cancel := context.WithTimeout(t.Context(), 5*time.Minute)
	defer cancel()
	cmd := exec.CommandContext(ctx, "node", module+"/testdata/browser/preview.mjs", u.server.address(), file)
	cmd.Env = append(os.Environ(), "CHROMIUM="+chromium)
	cmd.Cancel = func() error { return cmd.Process.Signal(os.Interrupt) }
	cmd.WaitDelay = 10 * time.Second
	var failed strings.Builder
	cmd.Stderr = &failed
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("the browser: %v\n%s", err, &failed)
	}
	var s struct {
		Start, After, Again, Charts int
		Messages, Last              string
		Said                        []string
	}
	if err := json.Unmarshal(out, &s); err != nil {
		t.Fatal(err)
	}
	for what, y := range map[string]int{"after a save": s.After, "after messages": s.Again} {
		if y < s.Start-3 || y > s.Start+3 {
			t.Errorf("%s the block stands at %d px, before at %d", what, y, s.Start)
		}
	}
	if s.Start < 60 || s.Start > 200 || s.Charts == 0 {
		t.Errorf("too little to test on: the block at %d px, %d charts", s.Start, s.Charts)
	}
	if !strings.Contains(s.Messages, "error: there is no block kind struktur") || !strings.HasSuffix(s.Last, "/last") {
		t.Errorf("the messages are %q, the last page is at %s", s.Messages, s.Last)
	}
	if len(s.Said) > 0 {
		t.Errorf("the page says %q", s.Said)
	}
}
