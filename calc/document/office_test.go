package document

import (
	"strings"
	"testing"
	"testing/fstest"

	"quoin/calc/exhibit"
)

const inOffice = "---\nquoin: 1\ntitle: t\noffice: office\n---\nText.\n"

// FuzzOffice: whatever the files of an office hold, they are read or refused, each
// refusal at a place; what is read has readable colours and plain words, and the
// cautions of the program stand first, as they are.
func FuzzOffice(f *testing.F) {
	f.Add("name: Ninth Weir\nhead_height: 20 mm\n", "ink: #102030\npaper: \"#ffffff\"\n", "prepared: Calculated\ncautions_added:\n  - First.\n  - Second.\n", `<svg xmlns="http://www.w3.org/2000/svg"><path d="M0 0h4"/></svg>`)
	f.Add("head_height: 1e9 km", "ink: [", "a: &b *b", `<svg onload="x()"/>`)
	f.Add("name: {", "tie: #1f5c49 # comment\nbad: '#96331c'", "seal: \"\"\ncautions_added: x", `<?xml version="1.0"?><svg><style>a</style></svg>`)
	f.Fuzz(func(t *testing.T, about, palette, wording, svg string) {
		if len(about)+len(palette)+len(wording)+len(svg) > 1<<15 {
			return
		}
		res := Run(Source{FS: fstest.MapFS{"package.md": {Data: []byte(inOffice)}, "office/office.yaml": {Data: []byte(about)}, "office/palette.yaml": {Data: []byte(palette)},
			"office/wording.yaml": {Data: []byte(wording)}, "office/a.svg": {Data: []byte(svg)}}, Main: "package.md"}, Options{})
		for _, d := range res.Diagnostics {
			if d.Code == "internal" || d.Range.File == "" || d.Summary == "" {
				t.Errorf("%+v", d)
			}
		}
		if (res.Package == nil) != res.Diagnostics.HasErrors() {
			t.Fatalf("package %v, errors %v", res.Package != nil, res.Diagnostics.HasErrors())
		}
		if res.Package == nil {
			return
		}
		o := res.Package.Office
		colours := map[string]string{}
		for _, w := range append(append([]exhibit.Wording{}, exhibit.Colours...), o.Palette...) {
			colours[w.Key] = w.Text
		}
		for _, token := range []string{"ink", "soft", "tie", "bad"} {
			if ratio, ok := exhibit.Contrast(colours[token], colours["paper"]); !ok || ratio < exhibit.Readable {
				t.Errorf("%s on paper: %v", token, ratio)
			}
		}
		for _, w := range o.Words {
			if w.Text == "" || strings.ContainsFunc(w.Text, unseen) {
				t.Errorf("the word %q", w.Text)
			}
		}
		for i, s := range standing {
			if got := res.Package.Cautions[i]; got.Key != s.key || s.key != "open" && got.Text != s.text {
				t.Errorf("caution %d is %q", i, got.Text)
			}
		}
		for _, file := range o.Files {
			if low := strings.ToLower(string(file.Data)); !strings.Contains(low, "<!") && (strings.Contains(low, "<script") || strings.Contains(low, "<style")) {
				t.Errorf("the drawing %q", file.Data)
			}
		}
	})
}

// TestOfficeFiles: all that is read of an office is an input of the package, and
// nothing else of its folder.
func TestOfficeFiles(t *testing.T) {
	fs := fstest.MapFS{"a/package.md": {Data: []byte(strings.Replace(inOffice, "office: office", "office: ../office/", 1))}, "office/head.html": {Data: []byte("x")}, "office/.hidden": {Data: []byte("x")},
		"office/README.md": {Data: []byte("x")}, "office/wording.yaml": {Data: []byte("\ufeffseal: Stamp\r\ncautions_added:\r\n- One.\r\n")}}
	res := Run(Source{FS: fs, Main: "a/package.md"}, Options{})
	if res.Package == nil {
		t.Fatal(res.Diagnostics)
	}
	var paths []string
	for _, in := range res.Package.Inputs {
		paths = append(paths, in.Path+" "+in.Role)
	}
	if got := strings.Join(paths, ", "); got != "a/package.md document, office/head.html office, office/wording.yaml office" {
		t.Error(got)
	}
	if o := res.Package.Office; o.Folder != "office" || len(o.Words) != 1 || o.Words[0].Text != "Stamp" {
		t.Errorf("%+v", o)
	}
	if c := res.Package.Cautions[len(standing)]; c.Key != "office" || c.Text != "One." {
		t.Errorf("%+v", res.Package.Cautions)
	}
	for path, want := range map[string]string{"/etc": "absolute", "../../x": "leads out", "..": "leads out", "a\\b": "forward slashes", "package.md": "no folder"} {
		fs["a/package.md"] = &fstest.MapFile{Data: []byte(strings.Replace(inOffice, "office: office", "office: '"+path+"'", 1))}
		if res := Run(Source{FS: fs, Main: "a/package.md"}, Options{}); res.Package != nil || !strings.Contains(res.Diagnostics[0].Summary, want) || res.Diagnostics[0].Range.Line != 4 || strings.Contains(res.Diagnostics[0].Hint, "--root DIR") != (want == "leads out") {
			t.Errorf("%s: %+v", path, res.Diagnostics)
		}
	}
}

func TestContrast(t *testing.T) {
	for _, tt := range []struct {
		a, b string
		want float64
	}{{"#000000", "#ffffff", 21}, {"#777777", "#ffffff", 4.478}, {"#767676", "#ffffff", 4.542}, {"#ffffff", "#0000ff", 8.592}} {
		if got, ok := exhibit.Contrast(tt.a, tt.b); !ok || got < tt.want-0.001 || got > tt.want+0.001 {
			t.Errorf("%s on %s: %v, want %v", tt.a, tt.b, got, tt.want)
		}
	}
	for _, bad := range []string{"", "#fff", "red", "#12345g", "#+12345", "1c1b19"} {
		if _, ok := exhibit.Contrast(bad, bad); ok {
			t.Errorf("%q is a colour", bad)
		}
	}
}
