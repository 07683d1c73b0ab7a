package main

import (
	"bytes"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"
)

// TestPrint prints packages with a real browser and reads the PDF back: all that
// the page shows is on paper, on the sheet that says so.
func TestPrint(t *testing.T) {
	t.Setenv(browserVariable, tool(t, "chromium", "chromium", "chromium-browser"))
	for _, name := range []string{"pdftotext", "pdfinfo", "pdffonts"} {
		tool(t, "pdftoppm", name) // of the same package
	}
	t.Setenv("TMPDIR", t.TempDir())
	t.Run("example", func(t *testing.T) {
		dir := t.TempDir()
		page := readPage(t, exampleOf(t, "four-storey"))
		pdf := printed(t, module+"/examples/four-storey/package.md", dir)
		isPaper(t, pdf, "594.96 x 841.92 pts (A4)")
		if found := holdsPage(t, pdf, page); found["caption"] < 15 || found["equation"] < 30 {
			t.Errorf("too little to test on: %v", found)
		}
		drawn(t, pdf, page)
	})
	for name, size := range map[string]string{"equipment-frame": "612 x 792 pts (letter)", "three-records": "594.96 x 841.92 pts (A4)"} {
		t.Run(name, func(t *testing.T) {
			page := readPage(t, exampleOf(t, name))
			data, err := paper(os.Getenv(browserVariable), []byte(page))
			if err != nil {
				t.Fatal(err)
			}
			pdf := filepath.Join(t.TempDir(), "p.pdf")
			if err := os.WriteFile(pdf, data, 0o644); err != nil {
				t.Fatal(err)
			}
			if info := output(t, "pdfinfo", pdf); !strings.Contains(info, size+"\n") {
				t.Errorf("the paper is not %s:\n%s", size, info)
			}
			holdsPage(t, pdf, page)
			drawn(t, pdf, page)
		})
	}
	t.Run("letter", func(t *testing.T) {
		dir := t.TempDir()
		file := filepath.Join(dir, "p.md")
		if err := os.WriteFile(file, []byte("---\nquoin: 1\ntitle: On Letter\npaper: Letter\n---\n\n# One\n\n```calc formula\nV = 3 kN  # [ASCE/SEI 7-22 12.8] force\ncheck V <= 4 kN\n```\n"), 0o644); err != nil {
			t.Fatal(err)
		}
		page := pageOf(t, file, dir)
		pdf := printed(t, file, dir)
		isPaper(t, pdf, "612 x 792 pts (letter)")
		if found := holdsPage(t, pdf, page); found["equation"] == 0 {
			t.Errorf("too little to test on: %v", found)
		}
	})
	for _, size := range []string{"A4", "Letter"} {
		t.Run("sheets on "+size, func(t *testing.T) {
			dir := t.TempDir()
			file := filepath.Join(dir, "p.md")
			if err := os.WriteFile(file, []byte(tallAndWide(size)), 0o644); err != nil {
				t.Fatal(err)
			}
			page := pageOf(t, file, dir)
			pdf := printed(t, file, dir)
			holdsPage(t, pdf, page)
			sheetsLie(t, pdf, page)
		})
	}
	if left, err := os.ReadDir(os.TempDir()); err != nil || slices.ContainsFunc(left, func(e os.DirEntry) bool { return strings.HasPrefix(e.Name(), "quoin-print-") }) {
		t.Errorf("this is left behind: %v (%v)", left, err)
	}
}

// pageOf is the page of FILE, printed its PDF; neither may warn.
func pageOf(t *testing.T, file, dir string) string {
	t.Helper()
	quiet(t, "build", file, "-o", filepath.Join(dir, "p.package"))
	return readPage(t, filepath.Join(dir, "p.package"))
}

// readPage is the page of a written package.
func readPage(t *testing.T, dir string) string {
	t.Helper()
	text, err := os.ReadFile(filepath.Join(dir, "index.html"))
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}

func printed(t *testing.T, file, dir string) string {
	t.Helper()
	pdf := filepath.Join(dir, "p.pdf")
	quiet(t, "print", file, "-o", pdf)
	return pdf
}

func quiet(t *testing.T, args ...string) {
	t.Helper()
	var out, said strings.Builder
	if code := run(args, strings.NewReader(""), &out, &said); code != exitBuilt || said.Len() > 0 {
		t.Fatalf("quoin %s ends with %d:\n%s", args[0], code, &said)
	}
}

func output(t *testing.T, name string, args ...string) string {
	t.Helper()
	out, err := exec.Command(name, args...).Output()
	if err != nil {
		t.Fatalf("%s: %v", name, err)
	}
	return string(out)
}

// isPaper sees to what the PDF is as a whole: its paper, tags, outline and faces,
// and that it leads to no file of this machine.
func isPaper(t *testing.T, pdf, size string) {
	t.Helper()
	info := output(t, "pdfinfo", pdf)
	for _, want := range []string{`(?m)^Creator: +` + regexp.QuoteMeta(versionLine()) + "$", `(?m)^Tagged: +yes$`, `(?m)^JavaScript: +no$`, `(?m)^Encrypted: +no$`, `(?m)^Page size: +` + regexp.QuoteMeta(size) + "$"} {
		if !regexp.MustCompile(want).MatchString(info) {
			t.Errorf("not %s:\n%s", want, info)
		}
	}
	data, err := os.ReadFile(pdf)
	if err != nil {
		t.Fatal(err)
	}
	for _, m := range regexp.MustCompile(`Date \(D:(\d+)`).FindAllSubmatch(data, -1) {
		if day := "20310302000000"; string(m[1]) != day {
			t.Errorf("it has the date %s, the package %s", m[1], day)
		}
	}
	if !bytes.Contains(data, []byte("/Outlines ")) {
		t.Error("there is no outline")
	}
	if i := bytes.Index(data, []byte("(file:")); i >= 0 {
		t.Errorf("it leads to %.80q", data[i:])
	}
	fonts := output(t, "pdffonts", pdf)
	for _, want := range []string{"STIXTwoText-Regular", "STIXTwoMath-Regular", "IBMPlexSansCond-Regular"} {
		if !strings.Contains(fonts, want) {
			t.Errorf("the face %s is not in it", want)
		}
	}
	for line := range strings.Lines(fonts) {
		if f := strings.Fields(line); strings.Contains(line, "Identity-H") && !strings.Contains(line, "Identity-H       yes") {
			t.Errorf("the face %s is not embedded", f[0])
		}
	}
}

var (
	sheetStart = regexp.MustCompile(`<section class="sheet[^"]*" id="sheet-\d+"`)
	captionOf  = regexp.MustCompile(`<b>((?:Figure|Table) \d+)</b>`)
	numberOf   = regexp.MustCompile(`<(?:span|a) class="eqno"[^>]*>\s*(\([^<]+\))`)
	markup     = regexp.MustCompile(`<[^>]*>`)
)

// holdsPage sees that page n of the PDF is sheet n of the page, and has all its
// figures, tables and numbers of equations.
func holdsPage(t *testing.T, pdf, page string) (found map[string]int) {
	t.Helper()
	starts := sheetStart.FindAllStringIndex(page, -1)
	pages := strings.Split(strings.TrimSuffix(output(t, "pdftotext", "-layout", pdf, "-"), "\f"), "\f")
	if len(pages) != len(starts) || len(pages) < 2 {
		t.Fatalf("%d pages of %d sheets", len(pages), len(starts))
	}
	found = map[string]int{}
	for i, text := range pages {
		end := len(page)
		if i+1 < len(starts) {
			end = starts[i+1][0]
		}
		words := strings.Join(strings.Fields(text), " ")
		// In the head and at the foot.
		if want := fmt.Sprintf("Sheet %d of %d", i+1, len(starts)); strings.Count(words, want) != 2 || !strings.HasSuffix(words, fmt.Sprintf("%s · printed page %d", want, i+1)) {
			t.Errorf("page %d does not say %q twice:\n%.300s", i+1, want, text)
		}
		for what, re := range map[string]*regexp.Regexp{"caption": captionOf, "equation": numberOf} {
			for _, m := range re.FindAllStringSubmatch(page[starts[i][0]:end], -1) {
				found[what]++
				if !strings.Contains(words, strings.TrimSpace(markup.ReplaceAllString(m[1], ""))) {
					t.Errorf("page %d lacks %s", i+1, m[1])
				}
			}
		}
	}
	return found
}

// tallAndWide is a package of what no sheet holds in one piece.
func tallAndWide(size string) string {
	var b strings.Builder
	fmt.Fprintf(&b, "---\nquoin: 1\ntitle: Tall and wide\npaper: %s\n---\n\n# Prose\n\n%s\n\n", size, strings.Repeat("words that go on and on, ", 500))
	for i := range 90 {
		fmt.Fprintf(&b, "%d. item %d %s\n", i+1, i+1, strings.Repeat("of a list ", i%30))
	}
	fmt.Fprintf(&b, "\n```\n%s```\n\n", strings.Repeat("a line of a listing "+strings.Repeat("x", 90)+"\n", 60))
	for _, columns := range []int{20, 45} {
		row := func(cell string) { b.WriteString("|" + strings.Repeat(" "+cell+" |", columns) + "\n") }
		row("head")
		row("---")
		for range 40 {
			row("1234.5")
		}
		b.WriteString("\n")
	}
	b.WriteString("# Vectors\n\n```calc structure tower\nstoreys:\n")
	for i := range 60 {
		fmt.Fprintf(&b, "  - { level: L%d, height: 3.5 m, weight: %d kN, stiffness: 900 kN/mm }\n", i+1, 2000+i)
	}
	b.WriteString("damping: 5 %\ncite: [ASCE/SEI 7-22]\n```\n\n```calc table loads\ncolumns:\n")
	for i := range 12 {
		fmt.Fprintf(&b, "  - { value: tower.w * %d, head: weight of the level %d times, unit: kN }\n", 1000+i, 1000+i)
	}
	b.WriteString("```\n\n```calc formula\nq = tower.w / 2 + tower.w / 3  # a vector\ncheck q <= 1 MN  # [ASCE/SEI 7-22 12.8] of every level, in words that take more than a line of the table\nV = sum(q)")
	for i := range 70 {
		fmt.Fprintf(&b, " + %d kN * 1.%02d", i, i)
	}
	b.WriteString("  # a long sum\n```\n")
	return b.String()
}

// sheetsLie sees that sheets across are printed so, each on a page of its own, and
// that no word leaves its page or enters the margins but the foot.
func sheetsLie(t *testing.T, pdf, page string) {
	t.Helper()
	sheets := sheetStart.FindAllString(page, -1)
	wide := 0
	for i, m := range regexp.MustCompile(`(?s)<page width="([0-9.]+)" height="([0-9.]+)">(.*?)</page>`).FindAllStringSubmatch(output(t, "pdftotext", "-bbox", pdf, "-"), -1) {
		width, high := number(t, m[1]), number(t, m[2])
		lies := strings.Contains(sheets[i], " across ")
		if lies {
			wide++
		}
		if lies != (width > high) {
			t.Errorf("page %d is %v by %v points: %s", i+1, width, high, sheets[i])
		}
		for _, w := range regexp.MustCompile(`xMin="([0-9.-]+)" yMin="([0-9.-]+)" xMax="([0-9.-]+)" yMax="([0-9.-]+)">([^<]*)`).FindAllStringSubmatch(m[3], -1) {
			if number(t, w[1]) < 26 || number(t, w[3]) > width-36 || number(t, w[4]) > high-12 {
				t.Errorf("page %d: %q stands at %s to %s, %s of %v by %v", i+1, w[5], w[1], w[3], w[4], width, high)
			}
		}
	}
	if wide < 4 || wide > len(sheets)-8 {
		t.Errorf("%d sheets of %d lie across", wide, len(sheets))
	}
	if !strings.Contains(page, "continued") {
		t.Error("nothing goes on")
	}
}

func number(t *testing.T, text string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

var (
	figureCaption = regexp.MustCompile(`<figcaption><span><b>Figure (\d+)</b>`)
	wordBox       = regexp.MustCompile(`<word xMin="([\d.]+)" yMin="([\d.]+)" xMax="([\d.]+)" yMax="([\d.]+)">([^<]*)</word>`)
)

// dots is the size of the raster on which ink is looked for: half a dot a point.
const dots = 36

// drawn sees that above every caption of a figure there is a picture on paper: along
// the height of a band there is ink that is no letter, as there is beside an axis and
// not between rows of a table or lines of text.
func drawn(t *testing.T, pdf, page string) {
	t.Helper()
	aside := t.TempDir()
	output(t, "pdftoppm", "-r", fmt.Sprint(dots), "-gray", pdf, filepath.Join(aside, "p"))
	pictures, err := filepath.Glob(filepath.Join(aside, "*.pgm"))
	texts := strings.Split(output(t, "pdftotext", "-bbox", pdf, "-"), "<page ")[1:]
	if err != nil || len(pictures) != len(texts) {
		t.Fatalf("%d pictures of %d pages: %v", len(pictures), len(texts), err)
	}
	seen := map[string]bool{}
	for i, text := range texts {
		picture := readGray(t, pictures[i])
		words := wordBox.FindAllStringSubmatch(text, -1)
		scale := dots / 72.0
		box := func(m []string) (at [4]int) {
			for k := range at {
				var v float64
				fmt.Sscan(m[1+k], &v)
				at[k] = int(v * scale)
			}
			return at
		}
		letters := func(x, y int) bool {
			return slices.ContainsFunc(words, func(m []string) bool {
				b := box(m)
				return x >= b[0]-1 && x <= b[2]+1 && y >= b[1]-1 && y <= b[3]+1
			})
		}
		for k := range words[:max(len(words)-1, 0)] {
			number := words[k+1][5]
			if words[k][5] != "Figure" || seen[number] {
				continue
			}
			caption := box(words[k])
			rows, inked := 0, 0
			for y := caption[1] - 55; y < caption[1]-15; y++ {
				rows++
				for x := caption[0]; y >= 0 && x < picture.wide-10; x++ {
					if picture.at(x, y) < 225 && !letters(x, y) {
						inked++
						break
					}
				}
			}
			seen[number] = inked*10 >= rows*8
		}
	}
	captions := figureCaption.FindAllStringSubmatch(page, -1)
	if len(captions) < 5 {
		t.Errorf("only %d figures to test on", len(captions))
	}
	for _, m := range captions {
		if !seen[m[1]] {
			t.Errorf("above the caption of figure %s there is nothing drawn", m[1])
		}
	}
}

// gray is a picture of grey dots, 0 black.
type gray struct {
	wide, high int
	dots       []byte
}

func (g gray) at(x, y int) byte {
	if y >= g.high || x >= g.wide {
		return 255
	}
	return g.dots[y*g.wide+x]
}

func readGray(t *testing.T, file string) gray {
	t.Helper()
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	var g gray
	var most int
	if _, err := fmt.Sscanf(string(data[:min(len(data), 40)]), "P5\n%d %d\n%d\n", &g.wide, &g.high, &most); err != nil || len(data) < g.wide*g.high || most != 255 {
		t.Fatalf("%s is no picture: %v", file, err)
	}
	g.dots = data[len(data)-g.wide*g.high:]
	return g
}

// A browser that does not end is ended, with all that it started.
func TestPrintTimeLimit(t *testing.T) {
	sh := tool(t, "sh", "sh")
	dir := t.TempDir()
	slow := filepath.Join(dir, "slow")
	if err := os.WriteFile(slow, []byte("#!"+sh+"\nsleep 60 &\necho $! > "+dir+"/pid\nwait\n"), 0o755); err != nil {
		t.Fatal(err)
	}
	before := browserTime
	t.Cleanup(func() { browserTime = before })
	browserTime = time.Second
	start := time.Now()
	_, err := paper(slow, []byte("<p>"))
	if err == nil || !strings.Contains(err.Error(), "did not finish within 1s") || time.Since(start) > 30*time.Second {
		t.Errorf("after %s: %v", time.Since(start), err)
	}
	pid, err := os.ReadFile(dir + "/pid")
	if err != nil {
		t.Fatal(err)
	}
	for range 100 {
		if exec.Command(sh, "-c", "kill -0 "+strings.TrimSpace(string(pid))).Run() != nil {
			return
		}
		time.Sleep(20 * time.Millisecond)
	}
	t.Error("what it started goes on")
}

func TestBrowserPlaces(t *testing.T) {
	env := func(name string) string {
		return map[string]string{"HOME": "/Users/mk", "ProgramFiles": `C:\Program Files`, "LocalAppData": `C:\Users\mk\AppData\Local`}[name]
	}
	for system, want := range map[string]string{
		"darwin":  "/Users/mk/Applications/Google Chrome.app/Contents/MacOS/Google Chrome",
		"windows": `C:\Program Files\Microsoft\Edge\Application\msedge.exe`,
	} {
		if got := browserPlaces(system, env); !slices.Contains(got, want) || len(got) != 6 {
			t.Errorf("%s: %q", system, got)
		}
	}
	if got := browserPlaces("linux", env); len(got) > 0 {
		t.Errorf("linux: %q", got)
	}
}

func TestFileURL(t *testing.T) {
	for path, want := range map[string]string{"/tmp/a b/100%/ü#?.html": "file:///tmp/a%20b/100%25/%C3%BC%23%3F.html", "C:/a/b.html": "file:///C:/a/b.html"} {
		if got := fileURL(path); got != want {
			t.Errorf("%s: %s, want %s", path, got, want)
		}
	}
}
