package page_test

import (
	"bytes"
	"encoding/xml"
	"errors"
	"flag"
	"fmt"
	"html"
	"io"
	"os"
	"regexp"
	"strings"
	"testing"

	"quoin/calc/exhibit"
	"quoin/render/page"
)

// Properties are drawn from one seed, so that a run can be repeated.
func TestMain(m *testing.M) {
	flag.Parse()
	if f := flag.Lookup("rapid.seed"); f.Value.String() == f.DefValue {
		flag.Set("rapid.seed", "1")
	}
	os.Exit(m.Run())
}

func options() page.Options {
	return page.Options{
		Digest: strings.Repeat("7c1f09aa", 8),
		TeX: func(src string, display bool) (string, error) {
			return `<math><mtext>` + strings.NewReplacer("<", "&lt;", ">", "&gt;", "&", "&amp;").Replace(src) + `</mtext></math>`, nil
		},
		Picture: picture,
		Chart: func(f exhibit.Figure) ([]byte, int, error) {
			return []byte(`{"title":"\u003cscript>","n":1}`), 380, nil
		},
		Assets: page.Assets{PageScript: "document.documentElement.dataset.ready = 1 < 2 && '&' ? \"yes\" : 'no';", FontsCSS: "@font-face{font-family:Text;src:url(data:font/woff2;base64,AA==)}", TemmlCSS: ".tml>a{content:'<'}", Licences: "OFL <1.1> & co"},
	}
}

func render(t *testing.T, p *exhibit.Package, o page.Options) string {
	t.Helper()
	out, err := page.Render(p, o)
	if err != nil {
		t.Fatal(err)
	}
	return string(out)
}

// balanced fails on elements that do not close, once what HTML may leave out is put in.
func balanced(t *testing.T, text string) {
	t.Helper()
	text = regexp.MustCompile(`(?s)<(script|style)[^>]*>.*?</(script|style)>`).ReplaceAllString(text, "")
	text = regexp.MustCompile(`<(meta|br|hr|img)\b([^>]*)>`).ReplaceAllString(text, "<$1$2/>")
	text = regexp.MustCompile(` (data-chart|hidden)([ >])`).ReplaceAllString(text, ` $1=""$2`)
	d := xml.NewDecoder(strings.NewReader(strings.TrimPrefix(text, "<!doctype html>")))
	d.Entity = xml.HTMLEntity
	for {
		if _, err := d.Token(); err == io.EOF {
			return
		} else if err != nil {
			t.Fatalf("the page does not parse: %v", err)
		}
	}
}

func idsAndLinks(t *testing.T, text string) {
	t.Helper()
	ids := map[string]bool{}
	for _, m := range regexp.MustCompile(`\sid="([^"]*)"`).FindAllStringSubmatch(text, -1) {
		if ids[m[1]] || m[1] == "" {
			t.Errorf("id %q twice or empty", m[1])
		}
		ids[m[1]] = true
	}
	for _, m := range regexp.MustCompile(`href="#([^"]*)"`).FindAllStringSubmatch(text, -1) {
		if !ids[m[1]] {
			t.Errorf("link to #%s leads nowhere", m[1])
		}
	}
	if len(ids) < 20 {
		t.Errorf("only %d ids", len(ids))
	}
}

func sheetsAgree(t *testing.T, text string, open []string) int {
	t.Helper()
	heads := regexp.MustCompile(`(?s)<header class="head">.*?</header>`).FindAllString(text, -1)
	for i, h := range heads {
		if want := fmt.Sprintf(">Sheet %d of %d<", i+1, len(heads)); !strings.Contains(h, want) {
			t.Errorf("head %d lacks %q", i+1, want)
		}
		for _, s := range open {
			if !strings.Contains(h, ">"+s+"</b>") {
				t.Errorf("head %d hides %q", i+1, s)
			}
		}
	}
	if n := strings.Count(text, "<section class=\"sheet"); n != len(heads) {
		t.Errorf("%d sheets, %d heads", n, len(heads))
	}
	for _, m := range regexp.MustCompile(`@page s(\d+)\{@bottom-right\{content:"Sheet (\d+) of (\d+) `).FindAllStringSubmatch(text, -1) {
		if m[1] != m[2] || m[3] != fmt.Sprint(len(heads)) {
			t.Errorf("named page %v of %d sheets", m, len(heads))
		}
	}
	return len(heads)
}

func TestSample(t *testing.T) {
	p := sample()
	text := render(t, p, options())
	balanced(t, text)
	idsAndLinks(t, text)
	if n := sheetsAgree(t, text, page.OpenState(p)); n < 6 {
		t.Errorf("%d sheets", n)
	}
	for _, want := range []string{
		`<html lang="en">`, "DEMONSTRATION · INVENTED DATA", "1 check NOT OK", "1 NOT OK: storey drift, x, at the centre of mass, level 2, ratio 1.04",
		`href="#eq-V" data-v="`, ` title="V = C_s × W, in kN · design base shear · line 118">1586` + "\u202fkN</a>",
		`<a class="v" href="#east"`, `href="inputs/records/east.txt"`, `href="https://example.org/a?b=c"`, "from memory, confirm", "(default)",
		`<figure id="fig-east-rs" data-chart data-height="380"><div class="twin"><svg`, `<script type="application/json">{"title":"\u003cscript>","n":1}</script>`,
		`href="tables/forces.csv"`, `<th scope="col"`, `<b class="open">value overridden</b>`, `<td class="r"><b>157.1</b></td>`, ">11.4<", `<td class="r p3">11.4</td>`, `width="83.3"`, "1710\u202fkN ± 20.0\u202fkN", "<dd><div>5 OK", ">0.0762<",
		`src="data:image/png;base64,iVA="`, "spectra.md 8",
		"(underlined: governs)", "(✓: governs)", `<span class="nb">12.8-8</span>`, "<dt>What governs</dt>", `<td class="r sheet-of">`, `<p class="warning"><a href="#east">`,
		"<h3 id=\"records\"><span class=\"n\">1.1</span>", "<h4 id=\"processing\"><span class=\"n\">1.1.1</span>", `start="3"`,
	} {
		if !strings.Contains(text, want) {
			t.Errorf("the page lacks %s", want)
		}
	}
	for _, bad := range []string{"javascript:", "#nowhere", "ZgotmplZ", "NaN"} {
		if strings.Contains(text, bad) {
			t.Errorf("the page holds %s", bad)
		}
	}
	if strings.Count(text, "<h1") != 1 {
		t.Error("one h1")
	}
	if again := render(t, sample(), options()); again != text {
		t.Error("other bytes the second time")
	}
}

func TestPolicyMatchesBytes(t *testing.T) {
	text := render(t, sample(), options())
	style := regexp.MustCompile(`(?s)<style>(.*?)</style>`).FindAllStringSubmatch(text, -1)
	script := regexp.MustCompile(`(?s)<script>(.*?)</script>`).FindAllStringSubmatch(text, -1)
	if len(style) != 1 || len(script) != 1 {
		t.Fatalf("%d style, %d script elements", len(style), len(script))
	}
	for _, body := range []string{style[0][1], script[0][1]} {
		if !strings.Contains(html.UnescapeString(text[:2000]), "'"+page.Hash(body)+"'") {
			t.Errorf("no hash in the policy for %.60q", body)
		}
	}
}

func TestHostileText(t *testing.T) {
	p := sample()
	poison(p, hostile)
	text := render(t, p, options())
	balanced(t, text)
	idsAndLinks(t, text)
	sheetsAgree(t, text, nil)
	for _, bad := range []string{"<script>alert", "</style> <!--", "<!-- &"} {
		if strings.Contains(text, bad) {
			t.Errorf("the page holds %q", bad)
		}
	}
	if strings.Count(text, "&lt;script&gt;alert(1)") < 20 || !strings.Contains(text, "{{ .Secret }}") {
		t.Error("hostile text is not shown as text")
	}
	if n := strings.Count(text, "</style>"); n != 1 {
		t.Errorf("%d ends of style", n)
	}
}

// poison puts a text wherever a person could write one.
func poison(p *exhibit.Package, with string) {
	m := &p.Meta
	for _, s := range []*string{&m.Title, &m.Number, &m.Project, &m.Client, &m.Subject, &m.Location, &m.Status, &m.Prepared.Initials, &m.Checked.Date, &m.Approved.Initials,
		&m.Revision[0].Note, &m.Revision[1].Rev, &m.Revision[1].Date, &p.Provenance.Source, &p.Provenance.Commit, &p.Provenance.Tool, &p.Provenance.Overrides[0].Name, &p.Provenance.Overrides[0].Text,
		&p.Assumptions[0].Text, &p.Assumptions[0].ID, &p.Assumptions[1].Status, &p.References[0].Text, &p.References[0].Clauses[0], &p.Inputs[1].Path, &p.Cautions[0].Text,
		&p.Checks[0].Description, &p.Checks[0].Item, &p.Checks[0].Relation, &p.Values[0].Doc, &p.Values[0].ID} {
		*s = with
	}
	m.Basis[0] = with
	m.Title += strings.Repeat("x", 10000)
	var prose func(list []exhibit.Prose)
	prose = func(list []exhibit.Prose) {
		for i := range list {
			n := &list[i]
			if n.Text != "" {
				n.Text = with
			}
			n.Title, n.Align, n.Anchor, n.Target = with, with, with, with
			prose(n.Children)
		}
	}
	for i := range p.Chapters {
		c := &p.Chapters[i]
		c.Anchor = with
		prose(c.Title)
		for _, piece := range c.Pieces {
			prose(piece.Prose)
			b := piece.Block
			if b == nil {
				continue
			}
			b.Kind, b.Name, b.Caption, b.Note, b.Anchor, b.Place.File, b.Warnings = with, with, with, with, with, with, []string{with}
			for j := range b.Parts {
				b.Parts[j].Name = with
				for _, it := range b.Parts[j].Items {
					poisonItem(it, with)
				}
			}
		}
	}
}

func poisonItem(it exhibit.Item, with string) {
	if e := it.Equation; e != nil {
		e.Description, e.RefText, e.ID = with, with, with
		e.Ref = nil
		if e.Tree != nil && len(e.Tree.Args) > 0 {
			e.Tree.Args[0].Text, e.Tree.Args[0].Unit = with, with
		}
	}
	if e := it.Echo; e != nil {
		for i := range e.Rows {
			e.Rows[i].Label, e.Rows[i].Field, e.Rows[i].Written, e.Rows[i].Value.Text = with, with, with, with
		}
	}
	if t := it.Table; t != nil {
		t.Caption, t.ID, t.Columns[0].Head, t.Rows[0][0].Text, t.Notes[0] = with, with, with, with, with
	}
	if f := it.Figure; f != nil {
		f.Caption, f.Alt = with, with
	}
}

func TestBadAssets(t *testing.T) {
	for _, spoil := range []func(*page.Options){
		func(o *page.Options) { o.Assets.PageScript = "x = '</SCRIPT>'" },
		func(o *page.Options) { o.Assets.FontsCSS = "</style>" },
		func(o *page.Options) {
			o.Chart = func(exhibit.Figure) ([]byte, int, error) { return []byte(`"</script>"`), 1, nil }
		},
		func(o *page.Options) {
			o.Picture = func(exhibit.Figure, string) (string, error) { return "", errors.New("no ink") }
		},
		func(o *page.Options) {
			o.TeX = func(string, bool) (string, error) { return "", errors.New("no such macro") }
		},
	} {
		o := options()
		spoil(&o)
		if out, err := page.Render(sample(), o); err == nil || out != nil {
			t.Error("a page in spite of a bad part")
		}
	}
}

func TestEmptyPackage(t *testing.T) {
	text := render(t, &exhibit.Package{}, page.Options{})
	balanced(t, text)
	if !strings.Contains(text, "script-src &#39;none&#39;") && !strings.Contains(text, "script-src 'none'") {
		t.Error("a page without a script allows scripts")
	}
	sheetsAgree(t, text, []string{"status not given", "source not under version control"})
}

func TestLongTable(t *testing.T) {
	p := sample()
	table := p.Chapters[2].Pieces[2].Block.Parts[0].Items[0].Table
	for len(table.Rows) < 300 {
		table.Rows = append(table.Rows, table.Rows[0])
	}
	text := render(t, p, options())
	sheetsAgree(t, text, nil)
	if !bytes.Contains([]byte(text), []byte("Conclusions")) || strings.Count(text, "<thead>") == 0 {
		t.Error("the table cut off what follows")
	}
}

func BenchmarkRender(b *testing.B) {
	p, o := sample(), options()
	for b.Loop() {
		if _, err := page.Render(p, o); err != nil {
			b.Fatal(err)
		}
	}
}
