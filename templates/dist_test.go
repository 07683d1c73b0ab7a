package templates

import (
	"strings"
	"testing"
	"testing/fstest"
)

func TestBundle(t *testing.T) {
	for name, get := range map[string]func() (string, error){
		"page.js": PageScript, "press.js": PressScript, "fonts.css": FontsCSS, "temml.css": TemmlCSS, "licences.txt": Licences,
	} {
		text, err := get()
		if err != nil {
			t.Fatal(err)
		}
		if len(text) < 1000 {
			t.Errorf("%s has %d bytes", name, len(text))
		}
		if strings.HasSuffix(name, ".js") && (strings.Contains(text, "</script") || strings.Contains(text, "<!--")) {
			t.Errorf("%s would close the element it stands in", name)
		}
		if strings.HasSuffix(name, ".css") && (strings.Contains(text, "</style") || strings.Contains(text, "url(http") || strings.Contains(text, "@import")) {
			t.Errorf("%s reaches out", name)
		}
	}
	fonts, _ := FontsCSS()
	for _, want := range []string{`font-family:"Text";font-weight:400;font-style:normal`, `font-family:"Text";font-weight:400;font-style:italic`, `font-family:"Text";font-weight:700`, `font-family:"Label";font-weight:400`, `font-family:"Label";font-weight:600`, `font-family:"Math"`} {
		if !strings.Contains(fonts, want) {
			t.Errorf("no face %s", want)
		}
	}
	texts, _ := Licences()
	for _, want := range []string{"Apache License", "SIL OPEN FONT LICENSE", "BSD 3-Clause", "Temml", "Microsoft Corporation"} {
		if !strings.Contains(strings.ToLower(texts), strings.ToLower(want)) {
			t.Errorf("the licences lack %q", want)
		}
	}
}

// TestMissing: without the bundle the error names the command that makes it.
func TestMissing(t *testing.T) {
	if _, err := read(fstest.MapFS{}, "page.js"); err == nil || !strings.Contains(err.Error(), "make bundle") {
		t.Errorf("got %v", err)
	}
}
