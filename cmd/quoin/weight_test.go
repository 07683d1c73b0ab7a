package main

import (
	"context"
	"encoding/json"
	"fmt"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// What a large package holds, and what a page may weigh: it is mailed, and opens at once.
const (
	heavyCharts    = 30
	heavyEquations = 60
	heavyRows      = 300
	pageLimit      = 3_000_000 // bytes of index.html
)

// heavy writes a large package into dir and gives its document: ten records of 8000
// samples, each with its histories, its spectrum and a comparison, sixty formula
// lines, and a table of three hundred rows. The same each time.
func heavy(tb testing.TB, dir string) string {
	tb.Helper()
	write := func(name, text string) {
		tb.Helper()
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			tb.Fatal(err)
		}
	}
	var doc strings.Builder
	say := func(format string, args ...any) { fmt.Fprintf(&doc, format+"\n", args...) }
	block := func(head string, lines ...string) {
		say("```calc %s\n%s\n```\n", head, strings.Join(lines, "\n"))
	}
	say("---\nquoin: 1\ntitle: A large package\nnumber: L-1\nunits: SI\nprepared: MK 2031-03-02\nstatus: draft\nbasis: [ASCE/SEI 7-22]\n---\n")
	say("# Demand\n")
	block("periods grid", "from: 0.05 s", "to: 5 s", "count: 200", "spacing: log")
	block("target design", "basis: ASCE/SEI 7-22", "S_DS: 0.92", "S_D1: 0.55", "S_1: 0.45", "T_L: 8 s", "show: method")
	say("# Motions\n")
	random := rand.New(rand.NewPCG(1, 2))
	for i := range heavyCharts / 3 {
		var csv strings.Builder
		csv.WriteString("t [s],a [m/s^2]\n")
		a, b := 0.0, 0.0
		for k := range 8000 {
			t := 0.005 * float64(k)
			a, b = 1.86*a-0.9*b+random.NormFloat64(), a // a resonance near 2 Hz to 8 Hz
			fmt.Fprintf(&csv, "%.3f,%.5f\n", t, 0.08*a*t*math.Exp(-t/float64(5+i)))
		}
		write(fmt.Sprintf("r%d.csv", i), csv.String())
		block(fmt.Sprintf("record r%d", i), fmt.Sprintf("file: r%d.csv", i), "channel: a", "source: invented")
		block(fmt.Sprintf("spectrum s%d", i), fmt.Sprintf("record: r%d", i), "periods: grid", "damping: [2 %, 5 %, 10 %]")
		block("figure", "series:", fmt.Sprintf("  - s%d.PSA@5%%", i), "  - { of: design.PSA, label: design }", "from: 0 s", "to: 4 s")
	}
	say("# Results\n")
	var lines []string
	for i := range heavyEquations {
		lines = append(lines, fmt.Sprintf("V_%d = (%d kN + %d kN) * sqrt(1 + s%d.PSA(1 s) / 1 g)^2 as kN   # [ASCE/SEI 7-22] part %d", i, 100+i, 3*i, i%(heavyCharts/3), i))
	}
	block("formula", lines...)
	rows := "member,x [m],N [kN],V [kN],M [kN*m],ratio\n"
	for i := range heavyRows {
		rows += fmt.Sprintf("B%d,%.2f,%.1f,%.1f,%.1f,%.3f\n", 100+i, 0.35*float64(i), 900*random.Float64(), 120*random.Float64(), 300*random.Float64(), random.Float64())
	}
	write("members.csv", rows)
	block("table members", "file: members.csv", "caption: Forces of the members")
	write("package.md", doc.String())
	return filepath.Join(dir, "package.md")
}

// TestWeight: the page of the large package holds all of it in its limit of bytes; in a
// browser no chart is started that is not in sight. When it was painted first is logged.
func TestWeight(t *testing.T) {
	dir := t.TempDir()
	file, out := heavy(t, dir), filepath.Join(dir, "out")
	if code := run([]string{"build", file, "-o", out}, nil, io.Discard, io.Discard); code != exitBuilt {
		t.Fatalf("exit code %d", code)
	}
	page := filepath.Join(out, "index.html")
	text, err := os.ReadFile(page)
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("%d bytes", len(text))
	if len(text) >= pageLimit {
		t.Errorf("index.html has %d bytes, not below %d", len(text), pageLimit)
	}
	for what, least := range map[string]int{"<figure ": heavyCharts, `id="eq-V_`: heavyEquations, "<td class=\"\">B": heavyRows} {
		if n := strings.Count(string(text), what); n < least {
			t.Errorf("%d times %s, not %d", n, what, least)
		}
	}
	t.Run("browser", func(t *testing.T) { opens(t, page) })
}

// opens opens a page and leaves it alone.
func opens(t *testing.T, page string) {
	chromium := tool(t, "chromium", "chromium", "chromium-browser")
	tool(t, "node", "node")
	if _, err := os.Stat(module + "/node_modules/playwright-core"); err != nil {
		absent(t, "no node_modules/playwright-core: make modules installs it")
	}
	ctx, cancel := context.WithTimeout(t.Context(), 3*time.Minute)
	defer cancel()
	cmd := exec.CommandContext(ctx, "node", module+"/testdata/browser/opens.mjs", page)
	cmd.Env = append(os.Environ(), "CHROMIUM="+chromium)
	cmd.Cancel = func() error { return cmd.Process.Signal(os.Interrupt) } // it takes the browser along
	cmd.WaitDelay = 10 * time.Second
	said, err := cmd.Output()
	if err != nil {
		t.Fatalf("the browser: %v", err)
	}
	type figure struct {
		ID      string
		Below   float64 // px below the window
		Started bool
	}
	var s struct {
		Paint, Ready float64 // ms from the start of loading
		Still, Last  []figure
	}
	if err := json.Unmarshal(said, &s); err != nil {
		t.Fatal(err)
	}
	t.Logf("first contentful paint after %.0f ms, page ready after %.0f ms", s.Paint, s.Ready)
	if s.Paint <= 0 || len(s.Still) != heavyCharts {
		t.Errorf("paint at %g ms, %d charts", s.Paint, len(s.Still))
	}
	for _, f := range s.Still {
		if f.Started && f.Below > 0 {
			t.Errorf("%s is started %g px below the window", f.ID, f.Below)
		}
	}
	// Carried to the last chart at once, the reader starts what is there and nothing on the way.
	started := 0
	for _, f := range s.Last {
		if f.Started {
			started++
		}
	}
	if n := len(s.Last); !s.Last[n-1].Started || started > 4 {
		t.Errorf("at the last chart %d are started, the last %t", started, s.Last[n-1].Started)
	}
}
