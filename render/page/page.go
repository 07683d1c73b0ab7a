// Package page writes a calculation package as one self-contained HTML page, cut
// into numbered sheets. All text goes through the templates; what comes in as
// markup (equations, pictures) is made by the program itself.
package page

import (
	"bytes"
	"crypto/sha256"
	"encoding/base64"
	"fmt"
	"html/template"
	"strings"

	"quoin/calc/exhibit"
	"quoin/templates"
)

// Options is what a page needs besides the package.
type Options struct {
	Digest string   // package digest, hex
	State  []string // further open states ("results differ from the frozen ones")
	// TeX turns an equation of the prose into a math element.
	TeX func(src string, display bool) (string, error)
	// Picture draws a figure as a static SVG element whose ids begin with prefix.
	Picture func(f exhibit.Figure, prefix string) (string, error)
	// Chart is the option of the interactive chart as JSON that is safe inside a
	// script element, and its height in pixels. Nil: pictures only.
	Chart  func(f exhibit.Figure) (option []byte, height int, err error)
	Assets Assets
	// Connect lets the page's script ask the address the page came from: a preview.
	Connect bool
	// Body leaves out all but the chapters, and what stands for files of a package.
	Body bool
}

// Assets is the bundle: the program's own files, taken over byte for byte.
type Assets struct {
	PageScript, FontsCSS, TemmlCSS, Licences string
}

// Render writes the page. The same package and options give the same bytes.
func Render(p *exhibit.Package, o Options) ([]byte, error) {
	b := newBook(p, o)
	b.dress()
	sheets := pack(b.items(), b.rooms())
	if b.err != nil {
		return nil, b.err
	}
	b.number(sheets)
	if err := b.affect(sheets); err != nil {
		return nil, err
	}
	style := strings.Join([]string{o.Assets.FontsCSS, o.Assets.TemmlCSS, templates.PageCSS, sheetCSS(p, b.open, sheets)}, "\n") + ownCSS(p.Office)
	if err := embeddable(style, "</style", "style"); err != nil {
		return nil, err
	}
	if err := embeddable(o.Assets.PageScript, "</script", "script"); err != nil {
		return nil, err
	}
	view := struct {
		Title, Policy, Tool string
		Licences            string
		Style               template.CSS
		Script              template.JS
		Sheets              []sheetView
		Trail               []stepView
	}{Title: documentTitle(p), Policy: policy(style, o.Assets.PageScript) + connecting(o.Connect), Tool: p.Provenance.Tool, Licences: o.Assets.Licences,
		Style: template.CSS(style), Script: template.JS(o.Assets.PageScript)}
	for i, s := range sheets {
		v := sheetView{N: i + 1, Of: len(sheets), Cover: i == 0, Wide: s.wide, Head: b.head()}
		v.Head.Sheet, v.Head.Sheets = v.N, v.Of
		v.Own, _ = b.ownHead(v.N, v.Of)
		b.trail.here = i + 1
		for _, it := range s.items {
			text, err := b.execute(it)
			if err != nil {
				return nil, err
			}
			v.Items = append(v.Items, text)
		}
		view.Sheets = append(view.Sheets, v)
	}
	if err := b.faults(); err != nil {
		return nil, err
	}
	view.Trail = b.steps()
	var out bytes.Buffer
	if err := b.tmpl.ExecuteTemplate(&out, "page", view); err != nil {
		return nil, fmt.Errorf("page: %w", err)
	}
	return out.Bytes(), nil
}

// sheetView is one sheet as the template sees it.
type sheetView struct {
	N, Of int
	Cover bool
	Wide  bool // lies across
	Head  Head
	Own   template.HTML // the head of an office, "" for the program's own
	Items []template.HTML
}

// execute fills the template of an item.
func (b *book) execute(it item) (template.HTML, error) {
	var out bytes.Buffer
	if err := b.tmpl.ExecuteTemplate(&out, it.name, it.data); err != nil {
		return "", fmt.Errorf("page: %w", err)
	}
	return template.HTML(out.String()), nil
}

// policy allows the one style element and the one script of the page, and style
// attributes, which charts and pictures set.
func policy(style, script string) string {
	source := "'none'"
	if script != "" {
		source = "'" + hash(script) + "'"
	}
	return "default-src 'none'; script-src " + source + "; style-src-elem '" + hash(style) +
		"'; style-src-attr 'unsafe-inline'; img-src data:; font-src data:; base-uri 'none'; form-action 'none'"
}

// connecting is what the policy of a preview allows besides.
func connecting(yes bool) string {
	if yes {
		return "; connect-src 'self'"
	}
	return ""
}

func hash(text string) string {
	sum := sha256.Sum256([]byte(text))
	return "sha256-" + base64.StdEncoding.EncodeToString(sum[:])
}

// embeddable refuses an asset that would end its own element.
func embeddable(text, end, what string) error {
	if strings.Contains(strings.ToLower(text), end) {
		return fmt.Errorf("page: the %s holds %q", what, end)
	}
	if what == "script" && strings.Contains(text, "<!--") {
		return fmt.Errorf("page: the script holds %q", "<!--")
	}
	return nil
}

func documentTitle(p *exhibit.Package) string {
	parts := []string{}
	for _, s := range []string{p.Meta.Number, current(p).Rev, p.Meta.Title} {
		if s = strings.TrimSpace(s); s != "" {
			parts = append(parts, s)
		}
	}
	if len(parts) == 0 {
		return "Calculation"
	}
	return strings.Join(parts, " · ")
}
