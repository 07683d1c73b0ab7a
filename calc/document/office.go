package document

import (
	"errors"
	"fmt"
	"io/fs"
	"math"
	"net/http"
	"path"
	"slices"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
)

// Limits of the folder of an office.
const (
	largestOfficeText    = 64 << 10
	largestOfficePicture = 512 << 10
	mostOfficePictures   = 24
	mostOfficeCautions   = 12
)

// officeTexts are the files that the folder of an office may hold besides pictures.
var officeTexts = []string{"cover.html", "head.html", "office.yaml", "palette.yaml", "wording.yaml"}

var officePictures = []string{".svg", ".png", ".jpg", ".jpeg", ".gif", ".webp"}

// officeFields is office.yaml.
type officeFields struct {
	Name       field.Field `name:"name" is:"text" doc:"the name of the office, which its templates can show"`
	HeadHeight field.Field `name:"head_height" is:"length" show:"mm" doc:"how high head.html is in print with lines of usual length, 8 mm to 60 mm; estimated if not given"`
}

// OfficeFields lists the fields of office.yaml, for the reference.
func OfficeFields() []field.Row { return field.Rows(&officeFields{}, nil) }

// clothes reads the folder of an office and the cautions that it adds.
type clothes struct {
	*run
	dir      string
	at       diag.Range // of the field in the front matter
	office   *exhibit.Office
	cautions []string
}

// dress reads the folder that the front matter names.
func (d *run) dress(f field.Field) {
	if !f.Given || f.Text() == "" {
		return
	}
	dir, err := below(path.Dir(d.src.Main), f.Text())
	var found []fs.DirEntry
	if err == nil {
		if info, stat := fs.Stat(d.src.FS, dir); stat != nil || !info.IsDir() {
			err = fmt.Errorf("there is no folder %s", dir)
		} else if found, stat = fs.ReadDir(d.src.FS, dir); stat != nil {
			err = fmt.Errorf("%s cannot be read: %s", dir, cause(stat))
		}
	}
	if err != nil {
		hint := "the folder of an office is named relative to " + path.Base(d.src.Main)
		if errors.Is(err, errOutside) {
			hint = "give a folder above both, --root DIR, or keep both in one git repository, which is the root by itself"
		}
		d.diags.Errorf("unreadable", f.At, "%s", err).WithHint("%s", hint)
		return
	}
	c := &clothes{run: d, dir: dir, at: f.At, office: &exhibit.Office{Folder: dir}}
	taken := 0
	for _, e := range found {
		name := e.Name()
		if strings.HasPrefix(name, ".") || name == "README.md" || name == "README.txt" {
			continue
		}
		picture := slices.Contains(officePictures, strings.ToLower(path.Ext(name)))
		if e.IsDir() || !picture && !slices.Contains(officeTexts, name) {
			hint := "it may hold " + strings.Join(officeTexts, ", ") + ", and pictures"
			if near := diag.Nearest(name, officeTexts); near != "" {
				hint = "did you mean " + near + "?"
			}
			d.diags.Errorf("office-file", f.At, "the folder of the office holds %s, which is no part of one", path.Join(f.Text(), name)).WithHint("%s", hint)
			continue
		}
		if taken++; taken > mostOfficePictures+len(officeTexts) {
			d.diags.Errorf("office-large", f.At, "the folder of the office holds more than %d pictures", mostOfficePictures).WithHint("keep those that its templates show")
			return
		}
		c.file(name, picture)
	}
	if taken == 0 && !d.diags.HasErrors() {
		d.diags.Errorf("office-file", f.At, "the folder %s holds nothing of an office", dir).WithHint("it may hold %s, and pictures", strings.Join(officeTexts, ", "))
	}
	d.office, d.officeCautions = c.office, c.cautions
}

// file takes in one file of the folder.
func (c *clothes) file(name string, picture bool) {
	full := path.Join(c.dir, name)
	most := int64(largestOfficeText)
	if picture {
		most = largestOfficePicture
	}
	if info, err := fs.Stat(c.src.FS, full); err == nil && info.Size() > most {
		c.diags.Errorf("office-large", c.at, "%s is larger than %d KiB", full, most>>10).WithHint("text and pictures of an office stand in every page; make it smaller")
		return
	}
	data, err := c.files.read(full, "office")
	if err != nil {
		c.diags.Errorf("unreadable", c.at, "%s", err)
		return
	}
	whole := diag.Range{File: full}
	if picture {
		c.picture(name, full, data)
		return
	}
	text := strings.ReplaceAll(strings.TrimPrefix(string(data), "\ufeff"), "\r\n", "\n")
	if !utf8.ValidString(text) {
		c.diags.Errorf("office-file", whole, "%s is no UTF-8 text", full).WithHint("save it as UTF-8")
		return
	}
	line, column := 1, 0
	for _, r := range text {
		column++
		if r == '\n' {
			line, column = line+1, 0
		} else if unseen(r) && !(r == '\t' && strings.HasSuffix(name, ".html")) {
			c.diags.Errorf("control-character", diag.Range{File: full, Line: line, Column: column, EndLine: line, EndColumn: column + 1}, "the text holds the character U+%04X, which cannot be seen", r).WithHint("delete it")
			return
		}
	}
	switch name {
	case "cover.html", "head.html":
		c.office.Files = append(c.office.Files, exhibit.OfficeFile{Name: name, Path: full, MediaType: "text/html", Data: []byte(text)})
	case "office.yaml":
		c.about(full, text)
	case "palette.yaml":
		c.palette(full, text)
	case "wording.yaml":
		c.wording(full, text)
	}
}

// unseen tells what no text of an office may hold: controls, marks that hide or
// reorder, and characters without a meaning of their own.
func unseen(r rune) bool { return unicode.IsControl(r) || unicode.In(r, unicode.Cf, unicode.Co) }

func (c *clothes) yaml(full, text string) field.Node {
	var lines []field.Line
	for i, t := range strings.Split(strings.TrimSuffix(text, "\n"), "\n") {
		lines = append(lines, field.Line{Text: t, Line: i + 1, Column: 1})
	}
	n, list := field.Parse(full, lines, diag.Range{File: full, Line: 1, Column: 1, EndLine: 1, EndColumn: 2})
	c.diags = append(c.diags, list...)
	if list.HasErrors() {
		return field.Node{IsMap: true}
	}
	if !n.IsMap {
		c.diags.Errorf("shape", n.At, "%s is a mapping: lines of  name: value", path.Base(full))
	}
	return n
}

func (c *clothes) about(full, text string) {
	n := c.yaml(full, text)
	var f officeFields
	list := field.Decode(n, &f, "office.yaml", nil)
	if !list.HasErrors() {
		list = append(list, field.ResolveLiterals(&f)...)
	}
	c.diags = append(c.diags, list...)
	c.office.Name = f.Name.Text()
	if f.HeadHeight.Given && !list.HasErrors() {
		c.office.HeadHeight = math.Round(f.HeadHeight.SI()*1e5) / 100
		if h := c.office.HeadHeight; !(h >= 8 && h <= 60) {
			c.diags.Errorf("bounds", f.HeadHeight.At, "head_height must be between 8 mm and 60 mm").WithHint("state how high head.html is in print")
		}
	}
}

// known finds an entry of a list by its key, or says that there is none.
func (c *clothes) known(p field.Pair, list []exhibit.Wording, what string, more ...string) bool {
	var keys []string
	for _, w := range list {
		keys = append(keys, w.Key)
	}
	keys = append(keys, more...)
	if slices.Contains(keys, p.Key) {
		return true
	}
	hint := "it has " + strings.Join(keys, ", ")
	if near := diag.Nearest(p.Key, keys); near != "" {
		hint = "did you mean " + near + "?"
	}
	c.diags.Errorf("unknown-field", p.KeyAt, "%s has no entry %s", what, p.Key).WithHint("%s", hint)
	return false
}

// palette reads colours. A colour may stand without quotes, although # begins a
// comment in YAML: nothing else could be meant.
func (c *clothes) palette(full, text string) {
	const number = '＃' // stands for # while YAML is read, a character too
	lines := strings.Split(text, "\n")
	for i, l := range lines {
		if key, value, ok := strings.Cut(l, ":"); ok && strings.HasPrefix(strings.TrimLeft(value, " "), "#") {
			lines[i] = key + ":" + strings.Replace(value, "#", string(number), 1)
		}
	}
	places := map[string]diag.Range{}
	sound := true
	for _, p := range c.yaml(full, strings.Join(lines, "\n")).Pairs {
		if !c.known(p, exhibit.Colours, "a palette") {
			continue
		}
		value, _, _ := strings.Cut(strings.ToLower(p.Value.Text), " #")
		value = strings.TrimSpace(strings.Replace(value, string(number), "#", 1))
		if _, ok := exhibit.Contrast(value, value); !ok {
			at := p.Value.At
			if value == "" {
				at = p.KeyAt
			}
			c.diags.Errorf("palette", at, "%s is no colour", p.Key).WithHint("write six hexadecimal digits: %s: \"#1d5a6c\"", p.Key)
			sound = false
			continue
		}
		places[p.Key] = p.Value.At
		c.office.Palette = append(c.office.Palette, exhibit.Wording{Key: p.Key, Text: value})
	}
	if sound {
		c.contrast(places)
	}
}

// contrast holds the colours of text to that of paper.
func (c *clothes) contrast(places map[string]diag.Range) {
	colour := func(token string) string {
		for _, list := range [][]exhibit.Wording{c.office.Palette, exhibit.Colours} {
			for _, w := range list {
				if w.Key == token {
					return w.Text
				}
			}
		}
		panic("document: there is no colour " + token)
	}
	for _, token := range []string{"ink", "soft", "tie", "bad"} {
		ratio, _ := exhibit.Contrast(colour(token), colour("paper"))
		at, own := places[token]
		if !own {
			at, own = places["paper"]
		}
		if ratio < exhibit.Readable && own {
			c.diags.Errorf("palette-contrast", at, "%s %s on paper %s has a contrast of %s to 1; text needs %g", token, colour(token), colour("paper"),
				strconv.FormatFloat(math.Floor(ratio*100)/100, 'f', 2, 64), exhibit.Readable).WithHint("let %s and paper differ more", token)
		}
	}
}

// wording reads the words of an office and the cautions it adds.
func (c *clothes) wording(full, text string) {
	said := map[string]string{} // by the word in small letters, the key it means
	for _, w := range exhibit.Words {
		said[strings.ToLower(w.Text)] = w.Key
	}
	for _, p := range c.yaml(full, text).Pairs {
		if !c.known(p, exhibit.Words, "wording.yaml", "cautions_added") {
			continue
		}
		if p.Key == "cautions_added" {
			c.added(p)
			continue
		}
		word := strings.TrimSpace(p.Value.Text)
		switch n := utf8.RuneCountInString(word); {
		case !p.Value.Scalar() || n == 0 || n > 40 || !strings.ContainsFunc(word, unicode.IsLetter):
			at := p.Value.At
			if n == 0 {
				at = p.KeyAt
			}
			c.diags.Errorf("wording", at, "%s must be a word or a few, of up to 40 characters", p.Key).WithHint("leave the line out for the word of the program")
		case claims(p.Key, word) != "":
			c.diags.Errorf("wording", p.Value.At, "%q says that something is %s", word, claims(p.Key, word)).WithHint("that is said by status and initials alone")
		case said[strings.ToLower(word)] != "" && said[strings.ToLower(word)] != p.Key:
			c.diags.Errorf("wording", p.Value.At, "%q stands for %s already", word, said[strings.ToLower(word)]).WithHint("two things of a package cannot have one name")
		default:
			said[strings.ToLower(word)] = p.Key
			c.office.Words = append(c.office.Words, exhibit.Wording{Key: p.Key, Text: word})
		}
	}
}

// claims is what a word claims that only status and initials may say, "" if nothing.
func claims(key, word string) string {
	for _, c := range []struct{ word, keys string }{{"checked", "checked"}, {"approved", "approved"}, {"verified", "checked approved"}, {"issued", ""}} {
		if strings.Contains(strings.ToLower(word), c.word) && !slices.Contains(strings.Fields(c.keys), key) {
			return c.word
		}
	}
	return ""
}

// added takes the cautions that an office adds to those of the program.
func (c *clothes) added(p field.Pair) {
	items := p.Value.Items
	if p.Value.Scalar() {
		items = []field.Node{p.Value}
	}
	for _, it := range items {
		text := strings.Join(strings.Fields(it.Text), " ")
		n := utf8.RuneCountInString(text)
		switch at := it.At; {
		case !it.Scalar() || n == 0 || n > 600:
			if at.Line == 0 || n == 0 && it.Scalar() {
				at = p.KeyAt
			}
			c.diags.Errorf("wording", at, "a caution is a text of up to 600 characters").WithHint("cautions_added is a list of sentences, printed after those of the program")
			return
		case len(c.cautions) == mostOfficeCautions:
			c.diags.Errorf("wording", at, "an office adds up to %d cautions", mostOfficeCautions).WithHint("keep those that hold for every calculation")
			return
		}
		c.cautions = append(c.cautions, text)
	}
}

// picture takes in a picture that templates may show.
func (c *clothes) picture(name, full string, data []byte) {
	kind := http.DetectContentType(data)
	if strings.EqualFold(path.Ext(name), ".svg") {
		kind = "image/svg+xml"
		if at, fault := inertSVG(data); fault != "" {
			at.File = full
			c.diags.Errorf("office-picture", at, "%s", fault).WithHint("a picture of an office holds shapes and text alone: no script, no style sheet, nothing from elsewhere")
			return
		}
	}
	if whole := pictures[kind]; whole == nil || !whole(data) {
		c.diags.Errorf("office-picture", diag.Range{File: full}, "%s is no whole picture that a page can show", full).WithHint("PNG, JPEG, GIF, WebP and SVG pictures can be shown")
		return
	}
	c.office.Files = append(c.office.Files, exhibit.OfficeFile{Name: name, Path: full, MediaType: kind, Data: data})
}
