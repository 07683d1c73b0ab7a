package main

import (
	"encoding/json"
	"html"
	"maps"
	"os"
	"path/filepath"
	"reflect"
	"regexp"
	"slices"
	"strings"
	"testing"

	"quoin/calc/document"
	"quoin/calc/exhibit"
	"quoin/render"
)

// wild are texts that try to be more than text.
var wild = map[string]string{
	"markup":    `<script>alert(1)</script><img src=x onerror=alert(2)></style></title></textarea>--><!-- ]]><![CDATA[<svg onload=alert(3)>` + `" onclick="alert(4)" ' onfocus='alert(5) & &lt;b&gt; {{ .Title }} {{"{{"}} ${1+1} %s {a|b} \") } @import url(//example.org/a); /* \A javascript:alert(6) =cmd|' /C calc'!A1`,
	"letters":   "e\u0301\u0301\u0301\u0301\u0301\u0301 \u0915\u094d\u0937 \U0001F468\u200D\U0001F469\u200D\U0001F467 \u202Eabc\u202C \u2067x\u2069 a\u200Bb\u00ADc\uFEFF \u2028 \u2029 \x01\x7f\ufffd",
	"unbroken":  strings.Repeat("Wm", 5_000),
	"backslash": `\"\\\u003c/script\u003e\x3cscript\x3e \00003c ' "` + "\n}\n@page{size:1px} \t",
}

// structural are the fields of type string that hold no text of anybody's: names of
// places in the page, and words of closed lists that the calculation itself writes.
var structural = map[string]string{
	"Prose.Anchor": "an id made of letters, digits and hyphens", "Chapter.Anchor": "as above", "Block.Anchor": "as above", "Entry.Anchor": "as above",
	"Check.Anchor": "as above", "Comment.Anchor": "as above", "Checking.Anchor": "as above", "Comment.Status": "of a list", "Moved.What": "of a list", "Assumption.Anchor": "as above", "SymbolPlace.Anchor": "as above", "Origin.Anchor": "as above",
	"Caution.Blocks": "anchors", "Caution.Key": "a key of the list of cautions", "Prose.Align": "left, right or center", "Prose.MediaType": "of a list",
	"Prose.Target": "an address, held to http, https and mailto: see TestTargets", "Meta.Paper": "A4 or Letter", "Meta.Status": "of a list",
	"Criterion.Group": "of CriteriaGroups", "Check.Relation": "an operator", "Part.Name": "inputs, method or results",
	"Number.ID": "a name by the grammar of names", "Equation.ID": "as above", "Equation.TeX": "written by the kinds of blocks", "Entry.ID": "as above", "Entry.Depends": "as above", "Live.ID": "as above",
	"GivenValue.ID": "as above", "SymbolPlace.ID": "as above", "FigSerie.ID": "as above", "Curve.ID": "as above", "Node.ID": "as above",
	"Check.ID": "the text of a condition that was parsed", "Node.Text": "a name, a number or an operator by the grammar", "Node.Unit": "a unit of the table", "Unit.Text": "as above",
	"Figure.ID": "the stem of a file, a name", "Table.ID": "as above", "Symbol.TeX": "typeset by the list of commands", "Symbol.Name": "a name by the grammar",
	"Input.Path":    "a key of the files; names with hidden signs are refused",
	"Office.Folder": "a path below the root", "OfficeFile.Name": "the name of a file read", "OfficeFile.Path": "a path below the root", "OfficeFile.MediaType": "of a list",
	"Wording.Key": "a key of the list of words", "Wording.Text": "words of at most 40 letters, held to them where an office is read", "Wording.Doc": "for the reference, in no package",
}

// fill puts text(field) in every string below v that is no structure, and counts the fields.
func fill(v reflect.Value, name string, text func(field string) string, met map[string]int) {
	switch v.Kind() {
	case reflect.Pointer:
		if !v.IsNil() {
			fill(v.Elem(), name, text, met)
		}
	case reflect.Slice:
		if v.Type().Elem() == reflect.TypeFor[string]() && v.Len() == 0 && structural[name] == "" {
			v.Set(reflect.MakeSlice(v.Type(), 1, 1))
		}
		for i := range v.Len() {
			fill(v.Index(i), name, text, met)
		}
	case reflect.Struct:
		formula := v.Type() == reflect.TypeFor[exhibit.Prose]() && strings.HasPrefix(v.FieldByName("Kind").String(), "math")
		for i := range v.NumField() {
			f := v.Type().Field(i)
			if f.PkgPath != "" || formula && f.Name == "Text" {
				continue
			}
			fill(v.Field(i), v.Type().Name()+"."+f.Name, text, met)
		}
	case reflect.String:
		if v.Type() != reflect.TypeFor[string]() { // a word of a closed list has a type of its own
			return
		}
		met[name]++
		if structural[name] == "" {
			v.SetString(text(name))
		}
	}
}

// named are all fields of type string of a type, as fill names them.
func named(t reflect.Type, name string, seen map[reflect.Type]bool, out map[string]bool) {
	switch t.Kind() {
	case reflect.Pointer, reflect.Slice:
		named(t.Elem(), name, seen, out)
	case reflect.Struct:
		if seen[t] {
			return
		}
		seen[t] = true
		for i := range t.NumField() {
			if f := t.Field(i); f.PkgPath == "" {
				named(f.Type, t.Name()+"."+f.Name, seen, out)
			}
		}
	case reflect.String:
		if t == reflect.TypeFor[string]() {
			out[name] = true
		}
	}
}

// wildSample is the hostile package, computed, with at least one of everything that is listed.
func wildSample(t *testing.T) document.Result {
	t.Helper()
	file := hostile(t)
	res := document.Run(document.Source{FS: os.DirFS(filepath.Dir(file)), Main: filepath.Base(file)}, document.Options{})
	if res.Package == nil {
		t.Fatal(res.Diagnostics)
	}
	p := res.Package
	p.Office = &exhibit.Office{Name: "x"}
	for _, w := range exhibit.Words {
		p.Office.Words = append(p.Office.Words, exhibit.Wording{Key: w.Key, Text: "x"})
	}
	p.Comments = append(p.Comments, exhibit.Comment{Status: "open", Anchor: "b-wild"})
	p.Checking = append(p.Checking, exhibit.Checking{Anchor: "b-wild"})
	p.Frozen = &exhibit.Frozen{}
	for _, what := range []string{exhibit.MovedCheck, exhibit.MovedInput, exhibit.MovedFile, exhibit.MovedAssumption, exhibit.MovedValue, exhibit.MovedSeries, exhibit.MovedBlock} {
		m := exhibit.Moved{What: what, ID: "x", Old: "x", New: "x", Label: "x"}
		p.Frozen.Moved, p.Frozen.Files, p.Frozen.Marks = append(p.Frozen.Moved, m), append(p.Frozen.Files, m), append(p.Frozen.Marks, m)
	}
	p.Provenance.Overrides = append(p.Provenance.Overrides, exhibit.Override{Name: "x"})
	p.Criteria = append(p.Criteria, exhibit.Criterion{Group: exhibit.CriteriaGroups[0], Label: "x", Value: exhibit.Cell{Text: "x"}})
	for i := range p.Chapters {
		for j := range p.Chapters[i].Pieces {
			if b := p.Chapters[i].Pieces[j].Block; b != nil {
				for k := range b.Parts {
					for _, it := range b.Parts[k].Items {
						if it.Figure == nil {
							continue
						}
						f := &it.Figure.Panels[0]
						f.Lines = append(f.Lines, exhibit.RefLine{Vertical: true, At: f.Series[0].X[1], Label: "x"})
						f.Points = append(f.Points, exhibit.RefPoint{X: f.Series[0].X[1], Y: f.Series[0].Y[1], Label: "x"})
						if f.X.Log && f.Y.Log {
							f.Diagonals = append(f.Diagonals, exhibit.Diagonal{X: f.Series[0].X[1], Y: f.Series[0].Y[1], Rise: 1, Label: "x"})
						}
					}
					b.Parts[k].Items = append(b.Parts[k].Items, exhibit.Item{Text: "x"})
				}
			}
		}
	}
	return res
}

// TestInert puts every wild text into every field of text of a package at once. The
// page has the same elements with the same attributes as with a plain word, every text
// is there as it is or not at all. What a browser makes of such a page is tested by the
// hostile one of TestPage.
func TestInert(t *testing.T) {
	all := map[string]bool{}
	named(reflect.TypeFor[exhibit.Package](), "", map[reflect.Type]bool{}, all)
	for name := range structural {
		if !all[name] {
			t.Errorf("%s is called structure and is no field", name)
		}
	}
	met := map[string]int{}
	page := func(t *testing.T, text func(string) string) map[string][]byte {
		t.Helper()
		res := wildSample(t)
		fill(reflect.ValueOf(res.Package).Elem(), "", text, met)
		out, err := render.Package(res.Package, res.Files, render.Options{})
		if err != nil {
			t.Fatal(err)
		}
		return out
	}
	plain := shape(t, page(t, func(string) string { return "word" })["index.html"])
	example, err := os.ReadFile(filepath.Join(exampleOf(t, "four-storey"), "index.html"))
	if err != nil {
		t.Fatal(err)
	}
	maps.Copy(plain, shape(t, example)) // what a wide or a tall text asks for
	for name := range all {
		if met[name] == 0 && structural[name] == "" {
			t.Errorf("%s is a field of text that the sample does not fill", name)
		}
	}
	if len(plain) < 100 || len(met) < 100 {
		t.Errorf("too little to test on: %d shapes, %d fields", len(plain), len(met))
	}
	for kind, evil := range wild {
		t.Run(kind, func(t *testing.T) {
			used := map[string]bool{}
			out := page(t, func(field string) string {
				if kind == "unbroken" && used[field] {
					return "word" // once in every field is wide enough
				}
				used[field] = true
				return "[" + field + "]" + evil + "[end]"
			})
			text := out["index.html"]
			for s := range shape(t, text) {
				if !plain[s] {
					t.Errorf("text makes markup: %s", s)
				}
			}
			if kind != "letters" && kind != "backslash" { // signs that no document brings are put in another form
				shown := html.UnescapeString(string(text))
				n := 0
				for name := range all {
					if strings.Contains(shown, "["+name+"]"+evil+"[end]") {
						n++
					}
				}
				if n < 60 {
					t.Errorf("only %d fields are shown as they are", n)
				}
			}
		})
	}
}

var (
	aTag       = regexp.MustCompile(`<(/?[a-zA-Z][a-zA-Z0-9]*)((?:\s+[a-zA-Z][a-zA-Z0-9:-]*(?:="[^"<>]*")?)*)\s*/?>`)
	anAttr     = regexp.MustCompile(`([a-zA-Z][a-zA-Z0-9:-]*)(?:="[^"<>]*")?`)
	rawElement = regexp.MustCompile(`(?s)<(script)([^>]*)>(.*?)</script>|<(style)([^>]*)>(.*?)</style>`)
)

// shape is the elements of a page with their attributes. Every < begins one of them, outside of scripts and styles,
// and what those hold is data or the program's own.
func shape(t *testing.T, page []byte) map[string]bool {
	t.Helper()
	out := map[string]bool{}
	own := 0
	rest := rawElement.ReplaceAllStringFunc(string(page), func(s string) string {
		m := rawElement.FindStringSubmatch(s)
		if m[1] == "" {
			m = m[3:]
		}
		switch {
		case strings.Contains(m[2], "application/json"):
			if strings.ContainsAny(m[3], "<>\u2028\u2029") || !json.Valid([]byte(m[3])) {
				t.Errorf("no plain data: %.200s", m[3])
			}
		default:
			own++
			if i := strings.Index(m[3], "alert("); i >= 0 {
				t.Errorf("a text stands in the page's own %s: %.80s", m[1], m[3][i:])
			}
		}
		return "<" + m[1] + m[2] + ">"
	})
	if own != 2 {
		t.Errorf("%d scripts and styles that are no data, want one of each", own)
	}
	rest = strings.Replace(rest, "<!doctype html>", "", 1)
	left := aTag.ReplaceAllStringFunc(rest, func(s string) string {
		m := aTag.FindStringSubmatch(s)
		tag := strings.ToLower(m[1])
		out[tag] = true
		for _, a := range anAttr.FindAllStringSubmatch(m[2], -1) {
			out[tag+" "+a[1]] = true
		}
		return ""
	})
	if i := strings.IndexByte(left, '<'); i >= 0 {
		t.Errorf("this is no element: %.120s", left[i:])
	}
	return out
}

// TestTargets: an address leads to the web, to the mail or into the page, or it is no link.
func TestTargets(t *testing.T) {
	res := wildSample(t)
	evil := []string{"javascript:alert(1)", "JaVaScRiPt:alert(1)", "java\tscript:alert(1)", " javascript:alert(1)", "data:text/html,<script>alert(1)</script>", "vbscript:x", "file:///etc/passwd", "\x01javascript:alert(1)", "//example.org/x", "https://example.org/\" onclick=\"alert(1)"}
	var nodes []exhibit.Prose
	for _, e := range evil {
		nodes = append(nodes, exhibit.Prose{Kind: exhibit.Paragraph, Children: []exhibit.Prose{{Kind: exhibit.Link, Target: e, Children: []exhibit.Prose{{Kind: exhibit.Text, Text: "target"}}}}})
	}
	res.Package.Chapters = append(res.Package.Chapters, exhibit.Chapter{Pieces: []exhibit.Piece{{Prose: nodes}}})
	out, err := render.Package(res.Package, res.Files, render.Options{})
	if err != nil {
		t.Fatal(err)
	}
	shape(t, out["index.html"])
	var hrefs []string
	for _, m := range regexp.MustCompile(`<a [^>]*?href="([^"]*)"`).FindAllStringSubmatch(string(out["index.html"]), -1) {
		hrefs = append(hrefs, html.UnescapeString(m[1]))
	}
	for _, h := range hrefs {
		if i := strings.IndexByte(h, ':'); i >= 0 && !slices.Contains([]string{"https", "http", "mailto"}, h[:i]) && !strings.HasPrefix(h, "#") {
			t.Errorf("a link to %q", h)
		}
		if strings.HasPrefix(h, "//") {
			t.Errorf("a link to %q", h)
		}
	}
	if n := strings.Count(string(out["index.html"]), ">target<"); n < len(evil) {
		t.Errorf("%d of %d texts of links are shown", n, len(evil))
	}
}
