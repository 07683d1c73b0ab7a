package page_test

import (
	"errors"
	"fmt"
	"regexp"
	"strings"
	"testing"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
	"quoin/render/page"
)

const (
	soundHead  = `<p>{{.Project}} {{.Number}} {{.Date}} {{.Prepared}} {{.Checked}}</p>`
	soundCover = `<h1>{{.Title}}</h1><p>{{.Project}}, {{.Number}}</p>`
)

var drawing = []byte(`<svg xmlns="http://www.w3.org/2000/svg"><path d="M0 0h4"/></svg>`)

// dressed is the sample in the clothes of an office.
func dressed(head, cover string) *exhibit.Package {
	p := sample()
	p.Office = &exhibit.Office{Folder: "office", Name: "Ninth Weir", Files: []exhibit.OfficeFile{{Name: "logo.svg", Path: "office/logo.svg", MediaType: "image/svg+xml", Data: drawing}}}
	for name, text := range map[string]string{"head.html": head, "cover.html": cover} {
		if text != "" {
			p.Office.Files = append(p.Office.Files, exhibit.OfficeFile{Name: name, Path: "office/" + name, MediaType: "text/html", Data: []byte(text)})
		}
	}
	return p
}

// refused is what a template is refused for, nothing where it is not.
func refused(t *testing.T, p *exhibit.Package) diag.List {
	t.Helper()
	err := page.CheckOffice(p)
	_, drawn := page.Render(p, options())
	if (err == nil) != (drawn == nil) {
		t.Fatalf("checked: %v; drawn: %v", err, drawn)
	}
	var f *page.OfficeFaults
	if err != nil && !errors.As(err, &f) {
		t.Fatal(err)
	}
	if f == nil {
		return nil
	}
	return f.List
}

// TestOfficeRefuses: each thing that a template may not do, where it stands, and
// what is said of it.
func TestOfficeRefuses(t *testing.T) {
	for _, tt := range []struct{ cover, want string }{
		// What cannot be read or filled.
		{"{{.Titel}}", `1:3-1:9 office-template: there is no .Titel here; did you mean .Title?`},
		{"<p>a</p>\n<p>{{.Client | uper}}</p>", `2:16-2:20 office-template: a template of an office has no function uper; did you mean upper?`},
		{"<p>a</p>\n<p>{{.Client</p>", `2:4-2:17 office-template: the template cannot be filled: bad character`},
		{"{{if .Client}}<p>x</p>", `1:1-1:23 office-template: the template cannot be filled: unexpected EOF`},
		{`{{env "HOME"}}`, `1:3-1:6 office-template: a template of an office has no function env`},
		{`{{now}}`, `1:3-1:6 office-template: a template of an office has no function now`},
		{`{{randAlpha 4}}`, `1:3-1:12 office-template: a template of an office has no function randAlpha`},
		{`{{range until 9}}x{{end}}`, `1:9-1:14 office-template: a template of an office has no function until`},
		{`{{printf "%9999999d" 1}}`, `1:3-1:9 office-template: a template of an office has no function printf`},
		{`{{html .Title}}`, `1:3-1:7 office-template: a template of an office has no function html`},
		{`{{call .Title}}`, `1:3-1:7 office-template: a template of an office has no function call`},
		{`{{counted .Basis}}`, `1:3-1:10 office-template: a template of an office has no function counted`},
		{"\n" + `{{define "a"}}{{template "a"}}{{end}}{{template "a"}}`, `2:1-2:3 office-template: the template defines another`},
		{`{{template "cover.html" .}}`, `1:12-1:24 office-template: a template of an office has no other templates`},
		{`{{range .Facts}}{{.Lable}}{{end}}`, `1:19-1:25 office-template: there is no .Lable here; did you mean .Label?`},
		{`{{.Title.Length}}`, `1:9-1:16 office-template: there is no .Length here`},
		{`{{.State}}`, `1:3-1:9 office-template: there is no .State here`},
		{`{{range 999999999}}x{{end}}`, `1:9-1:28 office-template: the template cannot be filled: range takes a list`},
		{`{{trunc -3 .Title}}`, `office-template: the template cannot be filled: trunc: the number of characters is from 4`},
		{`<img src="{{picture "lgo.svg"}}" alt="x" style="height: 9mm">`, `1:13-1:62 office-template: the template cannot be filled: picture: the folder has no picture lgo.svg; did you mean logo.svg?`},
		// Parts.
		{`{{part "sing"}}`, `1:3-1:7 office-template: the cover has no part sing; did you mean sign?`},
		{`{{part "sign"}}{{part "sign"}}`, `1:18-1:22 office-template: the part sign is placed twice`},
		{`{{if .Client}}{{part "sign"}}{{end}}`, `1:17-1:21 office-template: a part stands in no branch`},
		{`<div style="color: var(--soft)">{{part "state"}}</div>`, `1:35-1:39 office-markup: a part stands by itself`},
		{`<img alt="{{part "state"}}" style="height: 9mm" src="{{picture "logo.svg"}}">`, `1:13-1:17 office-markup: a part stands by itself`},
		{`<p>{{part "sign" | upper}}</p>`, `1:6-1:10 office-template: part is no value`},
		// Markup.
		{`<script>alert(1)</script>`, `1:1-1:8 office-markup: <script> has no place`},
		{"<p>a</p>\n  <style>.st{display:none}</style>", `2:3-2:9 office-markup: <style> has no place`},
		{`<p onclick="x()">a</p>`, `1:4-1:11 office-markup: <p> of a template has no attribute onclick`},
		{`<p ONCLICK=x>a</p>`, `1:4-1:12 office-markup: the value of ONCLICK does not stand in double quotes`},
		{`<p class="sr">a</p>`, `1:4-1:9 office-markup: <p> of a template has no attribute class`},
		{`<p hidden>a</p>`, `1:4-1:10 office-markup: <p> of a template has no attribute hidden`},
		{`<a href="https://example.invalid">a</a>`, `1:1-1:3 office-markup: <a> has no place`},
		{`<img src="https://example.invalid/x.png" alt="a" style="height: 9mm">`, `1:11-1:40 office-markup: a picture must come from the folder of the office`},
		{`<img src="data:image/png;base64,AA==" alt="a" style="height: 9mm">`, `1:11-1:37 office-markup: a picture must come from the folder of the office`},
		{`<img src="{{picture "logo.svg"}}" style="height: 9mm">`, `1:1-1:5 office-markup: a picture needs src and alt`},
		{`<img src="{{picture "logo.svg"}}" alt="">`, `1:1-1:5 office-markup: a picture needs a height`},
		{`<p style="background: url(https://example.invalid/x)">a</p>`, `1:11-1:53 office-markup: a style of a template cannot set background`},
		{`<p style="color: red">a</p>`, `1:11-1:21 office-markup: color cannot be red`},
		{`<p style="colour: var(--tie)">a</p>`, `1:11-1:29 office-markup: a style of a template cannot set colour; did you mean color?`},
		{`<p style="font-size: {{.Number}}">a</p>`, `1:11-1:33 office-markup: a style cannot hold an action`},
		{`<p {{.Number}}>a</p>`, `1:4-1:15 office-markup: an action cannot stand within a tag`},
		{`<!-- {{.Number}} -->`, `1:1-1:2 office-markup: this is the beginning of no element`},
		{`<p>a < b</p>`, `1:6-1:7 office-markup: this is the beginning of no element`},
		{`<p>a`, `1:1-1:3 office-markup: <p> is not closed`},
		{`<p>a</div>`, `1:5-1:11 office-markup: </div> closes nothing here`},
		{`</section>`, `1:1-1:11 office-markup: </section> closes nothing here`},
		{`<p><div>a</div></p>`, `1:4-1:8 office-markup: <div> cannot stand in <p>`},
		{`<table>a</table>`, `1:8-1:9 office-markup: a text cannot stand right in <table>`},
		{`{{if .Client}}<b>{{end}}x{{if .Client}}</b>{{end}}`, `1:40-1:44 office-markup: <b> is opened in another branch`},
		{`<div/>`, `1:5-1:7 office-markup: <div/> would not be closed by this`},
		{strings.Repeat("<div>", 40) + strings.Repeat("</div>", 40), `office-markup: elements stand more than 24 deep`},
	} {
		list := refused(t, dressed("", soundCover+"\n"+tt.cover))
		said := ""
		for _, d := range list {
			said += fmt.Sprintf("%d:%d-%d:%d %s: %s; %s\n", d.Range.Line-1, d.Range.Column, d.Range.EndLine-1, d.Range.EndColumn, d.Code, d.Summary, d.Hint)
			if d.Range.File != "office/cover.html" || d.Range.Line < 1 || d.Hint == "" {
				t.Errorf("%s: %+v has no place or no hint", tt.cover, d)
			}
		}
		if !strings.Contains(said, tt.want) {
			t.Errorf("%s\ngot  %swant %s", tt.cover, said, tt.want)
		}
	}
	// What each template must show, all of it said at once.
	for head, want := range map[string]string{
		`<p>{{.Number}}</p>`: "1:1 does not show project, date, prepared and checked",
		`<p>{{.Project}} {{.Number}} {{.Date}} {{.Prepared}}</p>`:                                  "1:1 does not show checked",
		"<p>{{.Project}} {{.Date}} {{.Prepared}} {{.Checked}}</p>\n{{if false}}{{.Number}}{{end}}": "2:15 does not show number",
	} {
		list := refused(t, dressed(head, ""))
		if len(list) == 0 || list[0].Code != "office-omits" || !strings.Contains(fmt.Sprintf("%d:%d %s", list[0].Range.Line, list[0].Range.Column, list[0].Summary), want[4:]) || !strings.HasPrefix(want, fmt.Sprintf("%d:%d", list[0].Range.Line, list[0].Range.Column)) {
			t.Errorf("%s: %+v, want %s", head, list, want)
		}
	}
}

// mustStand is what every sheet and the cover say whatever an office writes.
func mustStand(t *testing.T, text string) {
	t.Helper()
	sheets := strings.Split(text, `<section class="sheet`)[1:]
	for i, s := range sheets[:page.Sheets([]byte(text))] {
		state := fmt.Sprintf("Sheet %d of %d", i+1, page.Sheets([]byte(text)))
		strip := regexp.MustCompile(`(?s)</div>\n<div class="st">(.*?)</div>\n<div class="sh">(.*?)</div>\n</header>\n<p class="demo">DEMONSTRATION · INVENTED DATA</p>`).FindStringSubmatch(s)
		if strip == nil || strip[2] != state {
			t.Fatalf("sheet %d has no line of state: %.600s", i+1, s)
		}
		for _, want := range page.OpenState(sample()) {
			if !strings.Contains(strip[1], `<b class="open">`+want+`</b>`) {
				t.Errorf("sheet %d does not say %q: %s", i+1, want, strip[1])
			}
		}
	}
	if !strings.Contains(text, `<dt>Status</dt><dd><div><b class="open">DRAFT</b>`) && !strings.Contains(text, `<p class="status open">DRAFT</p>`) {
		t.Error("the cover does not say the status")
	}
	for _, want := range []string{"<dt>Checks</dt>", "<dt>Assumptions</dt>", "<dt>Package digest</dt>", `<div class="sign">`, `<aside class="caution"`} {
		if strings.Count(text, want) == 0 {
			t.Errorf("the page lacks %s", want)
		}
	}
}

// invented is the sample marked as invented data.
func invented(p *exhibit.Package) *exhibit.Package {
	if !strings.Contains(fmt.Sprint(p.Cautions), "demonstration") {
		p.Cautions = append(p.Cautions, exhibit.Caution{Key: "demonstration", Text: "Invented data."})
	}
	return p
}

// TestOfficeCannotHide: ways to keep open state, sheet number or what the head must
// say out of sight. Each is refused, or the page says it all nevertheless.
func TestOfficeCannotHide(t *testing.T) {
	wrap := func(style string) string { return `<div style="` + style + `">` + soundHead + `</div>` }
	for name, head := range map[string]string{
		"display none": wrap("display: none"), "visibility": wrap("visibility: hidden"), "opacity": wrap("opacity: 0"), "no font": wrap("font-size: 0"),
		"font of a hair": wrap("font-size: 0.1pt"), "paper on paper": wrap("color: var(--paper)"), "transparent": wrap("color: transparent"), "rule on paper": wrap("color: var(--rule)"),
		"off the sheet": wrap("position: absolute; left: -999px"), "pushed off": wrap("margin-left: -90mm"), "pushed far": wrap("padding-left: 900mm"),
		"indent": wrap("text-indent: -999px"), "clip": wrap("clip-path: inset(50%)"), "no height": wrap("height: 0; overflow: hidden"), "no width": wrap("width: 1mm"),
		"scaled": wrap("transform: scale(0)"), "letters over each other": wrap("letter-spacing: -1em"), "lines over each other": wrap("line-height: 0"),
		"filter": wrap("filter: blur(9px)"), "zoom": wrap("zoom: 0.01"), "content": wrap("content-visibility: hidden"), "custom property": wrap("--ink: #fff"), "important": wrap("color: var(--ink) !important"),
		"escape": wrap(`d\69splay: none`), "comment in style": wrap("color: var(--ink); /**/display:none"), "animation": wrap("animation: x 1s"), "order": wrap("order: 9"), "one word a line": wrap("width: 10mm"),
		"nested margins":  strings.Repeat(`<div style="padding: 0 25mm">`, 6) + soundHead + strings.Repeat("</div>", 6),
		"a cover over it": soundHead + `<div style="position: fixed; inset: 0; background: #fff">x</div>`,
		"hidden":          `<div hidden>` + soundHead + `</div>`, "details": `<details><summary>x</summary>` + soundHead + `</details>`, "template": `<template>` + soundHead + `</template>`,
		"comment": `<!-- ` + soundHead + ` -->`, "noscript": `<noscript>` + soundHead + `</noscript>`, "textarea": `<textarea>` + soundHead + `</textarea>`,
		"attribute": `<img src="{{picture "logo.svg"}}" alt="{{.Project}} {{.Number}} {{.Date}} {{.Prepared}} {{.Checked}}" style="height: 9mm">`,
		"class":     `<div class="sr">` + soundHead + `</div>`, "svg": `<svg><defs>` + soundHead + `</defs></svg>`, "style element": `<style>.st, .demo { display: none }</style>` + soundHead,
		"end of head": soundHead + `</div></header><header hidden><div>`, "open comment": soundHead + `<!--`, "open attribute": soundHead + `<p style="`, "open tag": soundHead + `<p `, "plaintext": soundHead + `<plaintext>`,
		"only elsewhere": `{{if eq .Sheet 1}}` + soundHead + `{{end}}`, "never": `{{if false}}` + soundHead + `{{end}}<p>x</p>`, "cut": `<p>{{.Project | trunc 4}} {{.Number}} {{.Date}} {{.Prepared}} {{.Checked}}</p>`,
		"reworded": `<p>{{.Project}} {{.Number}} {{.Date}} {{.Prepared}} {{.Checked | replace "checked" ""}}</p>`, "dir": `<bdo dir="rtl">` + soundHead + `</bdo>`,
	} {
		if list := refused(t, invented(dressed(head, ""))); len(list) == 0 {
			t.Errorf("%s is not refused", name)
		}
	}
	// What is sound says everything, wherever the parts stand, and also where the office
	// shows none of it.
	for name, cover := range map[string]string{"no parts": soundCover, "parts": soundCover + `{{part "revisions"}}{{part "state"}}<p>between</p>{{part "caution"}}`, "its own head": ""} {
		out := render(t, invented(dressed(soundHead, cover)), options())
		mustStand(t, out)
		balanced(t, out)
		idsAndLinks(t, out)
		if name == "parts" && !(strings.Index(out, `class="tbl revs"`) < strings.Index(out, "<dt>Status</dt>") && strings.Index(out, "<p>between</p>") < strings.Index(out, `<aside class="caution"`)) {
			t.Error("the parts do not stand where the office places them")
		}
	}
}

// TestOfficeFacts: what the program's own cover says of the package stands on that of
// an office as well; the program draws what the office does not show, and only that.
func TestOfficeFacts(t *testing.T) {
	rows := func(cover string) (out []string) {
		p := invented(dressed("", cover))
		p.Meta.Location = "Harrow Quay" // as in the name of the project
		text := render(t, p, options())
		text = text[strings.Index(text, "<dt>Status</dt>"):]
		text = text[:strings.Index(text, "<dt>Governing basis</dt>")]
		for _, m := range regexp.MustCompile(`(?s)<dt>(.*?)</dt><dd>(.*?)</dd>`).FindAllStringSubmatch(text, -1)[1:] {
			out = append(out, m[1]+": "+regexp.MustCompile(`<[^>]*>`).ReplaceAllString(m[2], ""))
		}
		return out
	}
	const subject, contract = "Subject: Base shear, storey forces, drift and stability under design earthquake motion", "Contract: HQ-26-114"
	for cover, want := range map[string][]string{
		soundCover: {subject, "Client: Harrow Quay Trust", contract, "Location: Harrow Quay", "Discipline: structural", "Authority: Harrow Quay building office"},
		soundCover + `<p>{{.Subject | upper}}</p><p>{{.Authority}}</p><p>{{.Client}}</p>`:                                        {contract, "Location: Harrow Quay", "Discipline: structural"},
		soundCover + `<p>{{.Subject}}</p><table><tbody>{{range .Facts}}<tr><td>{{.Text}}</td></tr>{{end}}</tbody></table>`:       nil,
		soundCover + `<p>{{.Subject}}</p><img src="{{picture "logo.svg"}}" alt="{{.Client}} {{.Location}}" style="height: 9mm">`: {"Client: Harrow Quay Trust", contract, "Location: Harrow Quay", "Discipline: structural", "Authority: Harrow Quay building office"},
	} {
		if got := rows(cover); fmt.Sprint(got) != fmt.Sprint(want) {
			t.Errorf("%s\ngot  %q\nwant %q", cover, got, want)
		}
	}
}

// TestOfficeBombs: templates that would write or repeat without end are stopped.
func TestOfficeBombs(t *testing.T) {
	for name, cover := range map[string]string{
		"ranges in ranges": strings.Repeat(`{{range $.Facts}}`, 12) + "x" + strings.Repeat("{{end}}", 12),
		"a long list":      `{{range splitList "" (replace "e" "eeeeeeeeeeeeeeeeeeeeeeeeeeeeeeeeeeeeeee" (replace "e" "eeeeeeeeeeeeeeeeeeee" .Title))}}{{range $.Facts}}{{range $.Facts}}{{range $.Facts}}x{{end}}{{end}}{{end}}{{end}}`,
		"doubling":         `{{$x := .Title}}` + strings.Repeat(`{{$x = join "" (list $x $x)}}`, 40) + `{{$x}}`,
		"growing":          `{{$x := .Title}}` + strings.Repeat(`{{$x = replace "e" "eeeeeeeeee" $x}}`, 12) + `{{$x}}`,
		"output":           `{{$x := .Title | replace "e" "` + strings.Repeat("e", 900) + `"}}{{range $.Facts}}{{range $.Facts}}{{range $.Facts}}{{range $.Facts}}<p>{{$x}}</p>{{end}}{{end}}{{end}}{{end}}`,
		"elements":         strings.Repeat("<br>", 9000),
		"no list":          "{{range .}}{{end}}",
	} {
		if list := refused(t, dressed("", soundCover+cover)); len(list) == 0 {
			t.Errorf("%s is not stopped", name)
		}
	}
}

// TestOfficeHostileData: what the front matter holds comes out inert.
func TestOfficeHostileData(t *testing.T) {
	for _, bad := range []string{hostile, `"><img src=x onerror=alert(1)>`, "\u202e\u2066bidi", strings.Repeat("name ", 2000), `{{part "state"}}{{.Title}}`, `javascript:alert(1)`, `</div></header><script>`} {
		cover := soundCover + `<img src="{{picture "logo.svg"}}" alt="{{.Client}}" style="height: 9mm"><p>{{.Client}} {{.Subject}} {{range .Basis}}{{.}}{{end}}</p>{{range .Facts}}<p>{{.Text}}</p>{{end}}`
		p := invented(dressed(soundHead+`<p>{{.Title}} {{.Location}}</p>`, cover))
		plainly := render(t, p, options())
		m := &p.Meta
		for _, s := range []*string{&m.Title, &m.Number, &m.Project, &m.Client, &m.Subject, &m.Location, &m.Authority} {
			*s = bad
		}
		m.Basis, m.Revision[1].Date, m.Prepared.Date, p.Office.Name = []string{bad}, bad, bad, bad
		out := render(t, p, options())
		mustStand(t, out)
		balanced(t, out)
		for _, of := range []string{"<script", "<img ", " onerror=", "</style"} {
			if got, want := strings.Count(strings.ToLower(out), of), strings.Count(strings.ToLower(plainly), of); of != " onerror=" && got != want {
				t.Errorf("%.40q: %d of %s, want %d", bad, got, of, want)
			}
		}
		if policy := regexp.MustCompile(`content="default-src &#39;none&#39;; script-src &#39;sha256-[^ ]*&#39;; style-src-elem &#39;sha256-[^ ]*&#39;; style-src-attr &#39;unsafe-inline&#39;; img-src data:; font-src data:;`); !policy.MatchString(out) {
			t.Error("the policy has changed")
		}
	}
}

// TestOfficePalette: the palette is for the screen; without an office nothing changes.
func TestOfficePalette(t *testing.T) {
	p := dressed("", "")
	p.Office.Palette = []exhibit.Wording{{Key: "tie", Text: "#1f5c49"}, {Key: "paper", Text: "#fcfdfa"}}
	p.Office.Words = []exhibit.Wording{{Key: "prepared", Text: "Calculated"}, {Key: "references", Text: "Sources"}}
	out := render(t, p, options())
	for _, want := range []string{"@media screen {\n:root { --tie: #1f5c49; --paper: #fcfdfa; }", `svg [stroke="#1d5a6c"] { stroke: var(--tie); }`, "<span>Calculated</span>", "calculated RT", "Sources</h2>"} {
		if !strings.Contains(out, want) {
			t.Errorf("the page lacks %s", want)
		}
	}
	if got, _, _ := strings.Cut(out, "@media screen {\n:root"); !strings.Contains(got, "--paper: #fff; --rule") {
		t.Error("paper is no longer white")
	}
	p.Office = nil
	if plainly := render(t, p, options()); strings.Contains(plainly, "ours") || plainly != render(t, sample(), options()) {
		t.Error("a page without an office has changed")
	}
}

// FuzzOffice: whatever the templates hold, a page comes out that says it all and
// acts in no way, or errors with places.
func FuzzOffice(f *testing.F) {
	for _, head := range []string{soundHead, soundHead + `<p style="color: var(--tie)">x</p>`, `{{range .Open}}<b>{{.}}</b>{{end}}` + soundHead, `<img src="{{picture "logo.svg"}}" alt="" style="height: 9mm">` + soundHead, soundHead + "{{- /* a */ -}} <br/> &lt;script&gt;",
		soundHead + `<table><tbody><tr><td>{{with .Location}}{{.}}{{else}}x{{end}}</td></tr></tbody></table>`} {
		f.Add(head, soundCover+`{{part "sign"}}`)
	}
	f.Add(soundHead+`<div style="display: grid; grid-template-columns: 18mm 1fr auto; gap: 1mm"><div>a</div>b<p>c</p></div>`, soundCover+`{{range $i, $f := .Facts}}{{if $i}}{{$f.Label | upper}}{{end}}{{end}}`)
	f.Add(soundHead+"<scr{{/**/}}ipt>", soundCover+"<{{.Title}}>")
	bare := func(p *exhibit.Package) *exhibit.Package {
		p.Chapters, p.Values, p.Footnotes, p.Notation, p.References = nil, nil, nil, nil, nil
		return invented(p)
	}
	first, err := page.Render(bare(sample()), options())
	if err != nil {
		f.Fatal(err)
	}
	plainly := strings.ToLower(string(first))
	f.Fuzz(func(t *testing.T, head, cover string) {
		if len(head)+len(cover) > 1<<14 {
			return
		}
		p := bare(dressed(head, cover))
		var found *page.OfficeFaults
		made, err := page.Render(p, options())
		if err != nil && !errors.As(err, &found) {
			t.Fatal(err)
		}
		var list diag.List
		if found != nil {
			list = found.List
		}
		for _, d := range list {
			if d.Range.File == "" || d.Summary == "" || d.Code == "" {
				t.Errorf("a message without a place or a text: %+v", d)
			}
		}
		if len(list) > 0 {
			return
		}
		out := string(made)
		if head != "" && cover != "" {
			mustStand(t, out)
		}
		for _, of := range []string{"<script", "<style", "<iframe", "<link", "<svg", "<form", "<html", "<body"} {
			if got, want := strings.Count(strings.ToLower(out), of), strings.Count(plainly, of); got != want {
				t.Errorf("%d of %s, want %d", got, of, want)
			}
		}
		if m := regexp.MustCompile(`(?i)<[a-z]+ [^>"]*(?:"[^"]*"[^>"]*)*\bon[a-z]+\s*=`).FindString(strings.SplitN(out, "<main>", 2)[1]); m != "" {
			t.Errorf("a handler: %s", m)
		}
	})
}
