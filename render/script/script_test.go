package script

import (
	"encoding/xml"
	"errors"
	"io"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/dop251/goja"
)

func TestTeX(t *testing.T) {
	for src, want := range map[string]string{
		`\frac{a}{b}`:            `<mfrac><mi>a</mi><mi>b</mi></mfrac>`,
		`V = C_s W`:              `<msub><mi>C</mi><mi>s</mi></msub>`,
		`\text{<b>x</b>}`:        `&lt;b&gt;`,
		`\ddot u + 2\zeta\omega`: `<mi>ζ</mi>`,
		`\sum_{i=1}^{n} w_i`:     `<munderover>`,
	} {
		got, err := TeX(src, true)
		if err != nil || !strings.Contains(got, want) || !strings.HasPrefix(got, "<math") || !strings.Contains(got, `display="block"`) {
			t.Errorf("%s: %s, %v; want %s", src, got, err, want)
		}
		wellFormed(t, got)
	}
	if got, err := TeX(`x`, false); err != nil || strings.Contains(got, "block") {
		t.Errorf("in a line: %s, %v", got, err)
	}
}

func wellFormed(t *testing.T, text string) {
	t.Helper()
	d := xml.NewDecoder(strings.NewReader(text))
	for {
		_, err := d.Token()
		if err == io.EOF {
			return
		}
		if err != nil {
			t.Errorf("%v in %s", err, text)
			return
		}
	}
}

// TestTeXFaults: faulty or untrusted TeX is an error in one line without stack or
// typesetter's name, and the next formula is set as ever.
func TestTeXFaults(t *testing.T) {
	for src, want := range map[string]string{
		`\sqrt{`:                           "at the end",
		`\nosuch`:                          `\nosuch, at character 1`,
		`a^b^c`:                            "Double superscript, at character 4",
		`\href{javascript:alert(1)}{x}`:    "at character 1",
		`\includegraphics{x}`:              "not allowed",
		`\class{x}{y}`:                     "not allowed",
		`\def\a{\a\a}\a`:                   "expands without end",
		strings.Repeat("x", texLength+1):   "20001 characters",
		strings.Repeat("{", texLength-1):   "",
		strings.Repeat(`\sqrt{`, 3000):     "",
		strings.Repeat(`\frac{1}{`, 2000):  "",
		strings.Repeat(`\left(`, 3000):     "",
		`<script>alert(1)</script>&`:       "at character",
		`\begin{matrix} a & b \end{array}`: "",
	} {
		got, err := TeX(src, true)
		if err == nil {
			t.Errorf("%.40s: no error but %.200s", src, got)
			continue
		}
		text := err.Error()
		if !strings.Contains(text, want) || strings.ContainsAny(text, "\n\r") || strings.Contains(text, "press.js") || strings.Contains(strings.ToLower(text), "temml") {
			t.Errorf("%.40s: %q, want %q", src, text, want)
		}
		if good, err := TeX("x", false); err != nil || !strings.Contains(good, "<mi>x</mi>") {
			t.Fatalf("after %.40s: %s, %v", src, good, err)
		}
	}
}

// TestRunaway: a call that never ends is stopped, and its machine is not used again.
func TestRunaway(t *testing.T) {
	if _, err := TeX("x", false); err != nil {
		t.Fatal(err)
	}
	for range cap(idle) + 1 {
		_, err := call(20*time.Millisecond, func(m *machine) goja.Callable {
			v, err := m.vm.RunString("(function () { for (;;) {} })")
			if err != nil {
				t.Fatal(err)
			}
			f, _ := goja.AssertFunction(v)
			return f
		})
		if !errors.Is(err, errTooLong) {
			t.Fatalf("got %v", err)
		}
	}
	if got, err := TeX("y", false); err != nil || !strings.Contains(got, "<mi>y</mi>") {
		t.Errorf("after it: %s, %v", got, err)
	}
}

const bare = `{"animation":false,"grid":[{"top":10,"height":80,"right":10}],
"xAxis":[{"type":"value","min":0,"max":1,"axisLabel":{},"nameTextStyle":{}}],"yAxis":[{"type":"log","min":1,"max":100,"axisLabel":{}}],
"series":[{"type":"line","id":"s0.0","clip":true,"symbol":"none","data":[[0,1],[1,100]]}]}`

func TestSVG(t *testing.T) {
	first, err := SVG([]byte(bare), 300, 120, "p")
	if err != nil {
		t.Fatal(err)
	}
	wellFormed(t, first)
	for _, not := range []string{"zr", "class=", "ecmeta", "pointer-events", "xml:space", "<style", "NaN"} {
		if strings.Contains(first, not) {
			t.Errorf("%s is left in %s", not, first)
		}
	}
	if !strings.Contains(first, `id="p-0"`) || !strings.Contains(first, `url(#p-0)`) {
		t.Errorf("ids do not begin with the prefix: %s", first)
	}
	var wait sync.WaitGroup
	for range 8 {
		wait.Go(func() {
			if again, err := SVG([]byte(bare), 300, 120, "p"); err != nil || again != first {
				t.Errorf("another drawing differs: %v", err)
			}
		})
	}
	wait.Wait()
	if _, err := SVG([]byte(`{"grid":`), 300, 120, "p"); err == nil || !strings.Contains(err.Error(), "cannot be drawn") {
		t.Errorf("broken JSON: %v", err)
	}
}

func TestTidyKeepsText(t *testing.T) {
	got := tidy(`<g class="zr0-cls-1" pointer-events="none"><text>zr0-c1 class="x"</text></g><path id="zr7-c12" clip-path="url(#zr7-c12)"/>`, "q")
	if want := `<g><text>zr0-c1 class="x"</text></g><path id="q-0" clip-path="url(#q-0)"/>`; got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
}

func BenchmarkTeX(b *testing.B) {
	for b.Loop() {
		if _, err := TeX(`C_s = \frac{S_{D1}}{T \left(\frac{R}{I_e}\right)}`, true); err != nil {
			b.Fatal(err)
		}
	}
}
