package main

import (
	"context"
	"encoding/json"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
	"time"
)

// sight is what testdata/browser/page.mjs saw, by mode.
type sight struct {
	Live struct {
		Early, Late []struct {
			ID      string
			Below   float64 // px below the window
			Started bool
		}
		Policy                                           string
		Sheets, Inner                                    int
		Headings                                         []int
		Broken, Files, Schemes, Twice, Strange, Handlers []string
		Fonts                                            map[string]struct {
			Loaded     bool
			Own, Other int // letters drawn in the page's face, and in others
		}
		Texts       []string
		Rules       ruleSight
		Homes       homeSight
		Figures     []figureSight
		Paper, Back struct{ Figures, Twins, Lives, Tools int }
		Widths      []widthSight
		Heard       heard
	}
	Glance glanceSight
	Open   struct {
		Strange, Handlers, Schemes, Texts []string
		Widths                            []widthSight
		Heard                             heard
	}
	Plain struct {
		Figures, Equations, Tables, Images, Values int
		Unseen, Dead, Texts                        []string
		Widths                                     []widthSight
		Heard                                      heard
	}
}

// ruleSight is what the rules of accessibility find.
type ruleSight struct {
	Passed  int
	Targets bool
	Broken  []struct {
		Rule, Help string
		Count      int
		At         []string
	}
}

type widthSight struct {
	Width, Scroll, Inner, Wide int
	Beyond, Stuck, Cut         []string
	Head                       float64
}

// heard is what a page asks for, says and refuses.
type heard struct{ Requests, Data, Console, Errors, Dialogs, Violations []string }

type figureSight struct {
	ID, Label string
	Twin      int
	Tip       struct {
		Words       string
		Curves      int
		Rows, Wrong []string
	}
	Cursor struct {
		Wrong                  []string
		Rows, Steps            int
		Back, Said, Gone, Hint bool
		Others, Led            int // charts of the block along the same axis
	}
	Saved *struct {
		Names               []string
		Whole, Alone        bool
		Faces, Rows, Points int
	}
	Keys  struct{ Reached, Want []string }
	Scale *struct {
		Changed, Back bool
		Named         string
	}
	Curves *struct {
		Expanded   string
		Names      []string
		Gone, Back int
		Closed     bool
	}
	Zoom *struct {
		Pressed                                                  string
		Higher, Nearer, Reset, Moved, Farther, Keys, Whole, Back bool
	}
}

// TestPage opens written packages in a browser: the example, and one whose every
// text tries to be more than text.
func TestPage(t *testing.T) {
	chromium := tool(t, "chromium", "chromium", "chromium-browser")
	tool(t, "node", "node")
	if _, err := os.Stat(module + "/node_modules/playwright-core"); err != nil {
		absent(t, "no node_modules/playwright-core: make modules installs it")
	}
	t.Run("example", func(t *testing.T) {
		t.Parallel()
		s, printed := look(t, chromium, exampleOf(t, "four-storey"), "live", "glance", "plain")
		s.holds(t)
		for name, f := range s.Live.Fonts {
			if f.Other > 0 {
				t.Errorf("%d letters that should stand in the face %s stand in another", f.Other, name)
			}
		}
		if len(s.Live.Figures) < 10 || s.Plain.Equations < 50 || s.Live.Widths[1].Wide < 5 {
			t.Errorf("too little is shown to test on: %d figures, %d equations, %d wide tables", len(s.Live.Figures), s.Plain.Equations, s.Live.Widths[1].Wide)
		}
		sheetsPrinted(t, printed, s.Live.Sheets, false)
	})
	for name := range failing {
		if name == "four-storey" {
			continue
		}
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			s, _ := look(t, chromium, exampleOf(t, name), "glance", "plain")
			s.Glance.holds(t)
			s.plain(t, s.Plain.Figures)
			none(t, "links that lead nowhere", s.Glance.Broken)
			none(t, "ids that stand twice", s.Glance.Twice)
			if !slices.Equal(s.Glance.Texts, s.Plain.Texts) {
				t.Errorf("scripts change what can be read: %d texts with them, %d without", len(s.Glance.Texts), len(s.Plain.Texts))
			}
			for mode, h := range map[string]heard{"with scripts": s.Glance.Heard, "without scripts": s.Plain.Heard} {
				h.holds(t, mode)
			}
		})
	}
	t.Run("hostile", func(t *testing.T) {
		t.Parallel()
		dir, err := buildShared(hostile(t), "hostile")
		if err != nil {
			t.Fatal(err)
		}
		s, printed := look(t, chromium, dir, "live", "plain")
		s.holds(t)
		if i := slices.IndexFunc(s.Live.Texts, func(x string) bool { return len(x) >= 10_000 }); i < 0 || !strings.Contains(s.Live.Texts[i], `</title></style></script><script>alert("title")</script>`) {
			t.Error("the long title is not shown in full")
		}
		for _, want := range []string{"<script>alert(30)</script>", `</td></tr></table><script>alert(20)</script> assumed`, `description </span><script>alert(22)</script> & `} {
			if !slices.ContainsFunc(s.Live.Texts, func(x string) bool { return strings.Contains(x, want) }) {
				t.Errorf("the text %q is not shown as it was written", want)
			}
		}
		if s.Plain.Images != 1 || s.Live.Widths[1].Wide == 0 {
			t.Errorf("%d pictures and %d wide tables are too few to test on", s.Plain.Images, s.Live.Widths[1].Wide)
		}
		sheetsPrinted(t, printed, s.Live.Sheets, true)
	})
}

// tool is the path of a program; without it the test cannot run.
func tool(t *testing.T, need string, names ...string) string {
	t.Helper()
	for _, name := range names {
		if path, err := exec.LookPath(name); err == nil {
			return path
		}
	}
	absent(t, "no "+need+": bash .ci/need "+need+" installs it")
	return ""
}

// absent skips the test, but never where everything must be there.
func absent(t *testing.T, why string) {
	t.Helper()
	if os.Getenv("CI") != "" {
		t.Fatal(why)
	}
	t.Skip(why)
}

// hostile is the hostile package in a folder of its own, its title made long.
func hostile(t *testing.T) string {
	dir := t.TempDir()
	if err := os.CopyFS(dir, os.DirFS(module+"/testdata/browser/hostile")); err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(dir, "package.md")
	text, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	long := strings.Replace(string(text), "LONG", strings.Repeat("long title ", 10_000/11+1), 1)
	if err := os.WriteFile(file, []byte(long), 0o644); err != nil || len(long) < 10_000 {
		t.Fatal(err)
	}
	return file
}

// look looks at the page of a written package. The second result is the page on
// paper, of the mode live.
func look(t *testing.T, chromium, dir string, modes ...string) (sight, string) {
	t.Helper()
	aside := t.TempDir()
	ctx, cancel := context.WithTimeout(t.Context(), 8*time.Minute)
	defer cancel()
	cmd := exec.CommandContext(ctx, "node", append([]string{module + "/testdata/browser/page.mjs", filepath.Join(dir, "index.html"), aside}, modes...)...)
	cmd.Env = append(os.Environ(), "CHROMIUM="+chromium)
	cmd.Cancel = func() error { return cmd.Process.Signal(os.Interrupt) } // it takes the browser along
	cmd.WaitDelay = 10 * time.Second
	var failed strings.Builder
	cmd.Stderr = &failed
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("the browser: %v\n%s", err, &failed)
	}
	var s sight
	if err := json.Unmarshal(out, &s); err != nil {
		t.Fatal(err)
	}
	for _, file := range append(s.Live.Files, s.Glance.Files...) {
		if _, err := os.Stat(filepath.Join(dir, filepath.FromSlash(file))); err != nil {
			t.Errorf("a link leads to %s, which is not in the package", file)
		}
	}
	return s, filepath.Join(aside, "page.pdf")
}

// policyOf is design section 4: nothing from anywhere, the one script and the one
// style element by their hashes, style attributes free; data: pictures and faces.
var policyOf = regexp.MustCompile(`^default-src 'none'; script-src 'sha256-[A-Za-z0-9+/=]{44}'; style-src-elem 'sha256-[A-Za-z0-9+/=]{44}'; ` +
	`style-src-attr 'unsafe-inline'; img-src data:; font-src data:; base-uri 'none'; form-action 'none'$`)

// falseAlarms are accessibility rules that are not broken though they say so, and why.
var falseAlarms = map[string]string{}

// none fails where a list of faults is not empty.
func none(t *testing.T, what string, list []string) {
	t.Helper()
	if len(list) > 0 {
		t.Errorf("%s:\n\t%s", what, strings.Join(list, "\n\t"))
	}
}

// holds is what is true of every page that is open: it asks for nothing but itself.
func (h heard) holds(t *testing.T, mode string) {
	t.Helper()
	none(t, mode+", it asks for", h.Requests)
	none(t, mode+", it says", h.Console)
	none(t, mode+", it throws", h.Errors)
	none(t, mode+", it shows a dialog", h.Dialogs)
	none(t, mode+", its policy refuses", h.Violations)
	for _, d := range h.Data {
		if !strings.HasPrefix(d, "font/woff2;") && !strings.HasPrefix(d, "image/") {
			t.Errorf("%s, it loads data: %s", mode, d)
		}
	}
}

// plain is what is true without scripts of a page of n figures: all are seen, and
// nothing that would need a script.
func (s *sight) plain(t *testing.T, n int) {
	t.Helper()
	none(t, "without scripts these are not seen", s.Plain.Unseen)
	none(t, "without scripts these do nothing", s.Plain.Dead)
	if p := s.Plain; p.Figures != n || n == 0 || p.Equations == 0 || p.Tables == 0 || p.Values == 0 {
		t.Errorf("without scripts: %d figures of %d, %d tables of their values, %d equations, %d tables", p.Figures, n, p.Values, p.Equations, p.Tables)
	}
}

// holds is what is true of every page.
func (s *sight) holds(t *testing.T) {
	t.Helper()
	none := func(what string, list []string) { t.Helper(); none(t, what, list) }
	for mode, h := range map[string]heard{"with scripts": s.Live.Heard, "without scripts": s.Plain.Heard} {
		h.holds(t, mode)
	}
	if len(s.Glance.Sizes) > 0 {
		s.Glance.holds(t)
		s.Glance.Heard.holds(t, "at other sizes")
	}

	o := &s.Live
	if !policyOf.MatchString(o.Policy) {
		t.Errorf("the policy is %s", o.Policy)
	}
	none("links that lead nowhere", o.Broken)
	none("ids that stand twice", o.Twice)
	none("elements that no page holds", o.Strange)
	none("handlers in attributes", o.Handlers)
	for _, scheme := range o.Schemes {
		if !slices.Contains([]string{"https:", "http:", "mailto:"}, scheme) {
			t.Errorf("a link has the scheme %s", scheme)
		}
	}
	if o.Inner == 0 || len(o.Files) == 0 {
		t.Error("no links to test on")
	}
	for i, level := range o.Headings {
		if i == 0 && level != 1 || i > 0 && (level == 1 || level > o.Headings[i-1]+1) {
			t.Errorf("headings are out of order at the %d. of %v", i+1, o.Headings)
			break
		}
	}
	for i, f := range o.Early {
		if f.Started && f.Below > 0 {
			t.Errorf("%s starts %g px below the window", f.ID, f.Below)
		}
		if !o.Late[i].Started {
			t.Errorf("%s does not start when scrolled to", f.ID)
		}
	}
	for _, name := range []string{"Text", "Label", "Math"} {
		if f := o.Fonts[name]; !f.Loaded || f.Own < 50 {
			t.Errorf("the face %s is not used: %+v", name, f)
		}
	}
	for _, v := range slices.Concat(o.Rules.Broken, o.Homes.Rules.Broken) {
		if falseAlarms[v.Rule] == "" {
			none(fmt.Sprintf("%s (%s), %d times", v.Rule, v.Help, v.Count), v.At)
		}
	}
	o.Homes.holds(t)
	if o.Rules.Passed < 20 {
		t.Errorf("only %d accessibility rules had something to look at", o.Rules.Passed)
	}

	for _, f := range o.Figures {
		f.holds(t)
	}
	n := len(o.Figures)
	if p := o.Paper; n == 0 || n != len(o.Early) || p.Figures != n || p.Twins != n || p.Lives != 0 || p.Tools != 0 {
		t.Errorf("on paper, of %d figures: %+v", n, p)
	}
	if b := o.Back; b.Twins != 0 || b.Lives != n {
		t.Errorf("back on the screen, of %d figures: %+v", n, b)
	}

	s.plain(t, n)
	if len(o.Texts) < 100 || !slices.Equal(o.Texts, s.Plain.Texts) {
		t.Errorf("scripts change what can be read: %d texts with them, %d without", len(o.Texts), len(s.Plain.Texts))
	}

	for mode, widths := range map[string][]widthSight{"with scripts": o.Widths, "without scripts": s.Plain.Widths} {
		if len(widths) != 2 {
			t.Fatalf("%s, not seen at both widths", mode)
		}
		for _, w := range widths {
			at := fmt.Sprintf("%s at %d px", mode, w.Width)
			if w.Scroll > w.Inner || w.Inner != w.Width {
				t.Errorf("%s, the page is %d px wide in a window of %d px", at, w.Scroll, w.Inner)
			}
			none(at+", these go beyond the window", w.Beyond)
			none(at+", these tables do not scroll in a box", w.Stuck)
			none(at+", these are cut off", w.Cut)
			if w.Head > 422 {
				t.Errorf("%s, a head takes %g px, more than half a window", at, w.Head)
			}
		}
	}
}

// holds is what is true of every chart.
func (f *figureSight) holds(t *testing.T) {
	t.Helper()
	if f.Label == "" || f.Twin != 0 {
		t.Errorf("%s: described as %q, static picture beside the chart: %t", f.ID, f.Label, f.Twin != 0)
	}
	if len(f.Tip.Rows) != min(f.Tip.Curves, 8) || len(f.Tip.Rows) == 0 || len(f.Tip.Wrong) > 0 {
		t.Errorf("%s: at the pointer, %q, %d of %d curves: %q %s", f.ID, f.Tip.Words, len(f.Tip.Rows), f.Tip.Curves, f.Tip.Rows, strings.Join(f.Tip.Wrong, "; "))
	}
	if c := f.Cursor; len(c.Wrong) > 0 || c.Rows == 0 || c.Steps < 2 || !c.Back || !c.Said || !c.Gone || !c.Hint || c.Led != c.Others {
		t.Errorf("%s: values by key: %+v", f.ID, c)
	}
	if s := f.Saved; s == nil || !s.Whole || !s.Alone || s.Faces == 0 || s.Rows != s.Points || len(s.Names) != 2 || !strings.HasSuffix(s.Names[0], ".svg") || !strings.HasSuffix(s.Names[1], ".csv") {
		t.Errorf("%s: kept as files: %+v", f.ID, s)
	}
	if !slices.Equal(f.Keys.Reached, f.Keys.Want) || len(f.Keys.Want) == 0 {
		t.Errorf("%s: Tab reaches %q, there are %q", f.ID, f.Keys.Reached, f.Keys.Want)
	}
	if s := f.Scale; s != nil && (!s.Changed || !s.Back || s.Named != "log") {
		t.Errorf("%s: linear and log: %+v", f.ID, *s)
	}
	if c := f.Curves; c != nil && (c.Expanded != "true" || !c.Closed || len(c.Names) < 2 || c.Gone != len(c.Names) || c.Back != len(c.Names)) {
		t.Errorf("%s: curves: %+v", f.ID, *c)
	}
	if z := f.Zoom; z != nil && (z.Pressed != "true" || !z.Higher || !z.Nearer || !z.Reset || !z.Moved || !z.Farther || !z.Keys || !z.Whole || !z.Back) {
		t.Errorf("%s: zoom: %+v", f.ID, *z)
	}
	has := func(button string) bool { return slices.Contains(f.Keys.Want, button) }
	if has("linear") != (f.Scale != nil) || has("curves") != (f.Curves != nil) || has("zoom") != (f.Zoom != nil) {
		t.Errorf("%s: of the buttons %q not all were tried", f.ID, f.Keys.Want)
	}
}

var sheetNumber = regexp.MustCompile(`Sheet\s+(\d+)\s+of\s+(\d+)\s+·\s+printed page\s+(\d+)`)

// sheetsPrinted sees that every printed page says which sheet it is of. Where no
// sheet is larger than paper there is one page a sheet.
func sheetsPrinted(t *testing.T, pdf string, sheets int, spills bool) {
	t.Helper()
	pdftotext := tool(t, "pdftoppm", "pdftotext") // of the same package
	out, err := exec.Command(pdftotext, "-layout", pdf, "-").Output()
	if err != nil {
		t.Fatal(err)
	}
	pages := strings.Split(strings.TrimSuffix(string(out), "\f"), "\f")
	if len(pages) < sheets || !spills && len(pages) != sheets {
		t.Errorf("%d printed pages of %d sheets", len(pages), sheets)
	}
	before := 0
	for i, text := range pages {
		var sheet, of, page int
		if m := sheetNumber.FindStringSubmatch(text); m != nil {
			fmt.Sscan(strings.Join(m[1:], " "), &sheet, &of, &page)
		}
		if of != sheets || page != i+1 || sheet < before || sheet > before+1 || !spills && sheet != i+1 {
			t.Errorf("printed page %d says sheet %d of %d, printed page %d; there are %d sheets", i+1, sheet, of, page, sheets)
		}
		before = sheet
	}
	if before != sheets {
		t.Errorf("the last printed page is of sheet %d of %d", before, sheets)
	}
}
