package exhibit

import (
	"math"
	"strconv"
	"strings"
)

// Office is what an engineering office puts in place of the look and the standard
// wording of its packages: the files of its folder, as read. Templates are filled
// where pages are made.
type Office struct {
	Folder     string       `json:"folder"`      // below the root
	Name       string       `json:"name"`        // in words; may be ""
	HeadHeight float64      `json:"head_height"` // of its head in print, mm; 0: to be estimated
	Palette    []Wording    `json:"palette"`     // token and #rrggbb, of those given
	Words      []Wording    `json:"words"`       // of those given
	Files      []OfficeFile `json:"files"`       // templates and pictures, by name
}

// OfficeFile is a template or a picture.
type OfficeFile struct {
	Name      string `json:"name"` // in the folder
	Path      string `json:"path"` // below the root
	MediaType string `json:"media_type"`
	Data      []byte `json:"data"`
}

// File is the file of that name, or nil.
func (o *Office) File(name string) *OfficeFile {
	if o != nil {
		for i := range o.Files {
			if o.Files[i].Name == name {
				return &o.Files[i]
			}
		}
	}
	return nil
}

// Wording is a word of an office: what it is for, what stands there, and what
// that means.
type Wording struct {
	Key  string `json:"key"`
	Text string `json:"text"`
	Doc  string `json:"-"`
}

// Colours are the tokens of a palette with those of the program itself.
var Colours = []Wording{
	{"ink", "#1c1b19", "text and curves"},
	{"soft", "#625e56", "captions, sources, axes' numbers"},
	{"rule", "#c9c3b6", "thin lines; grids are a lighter one"},
	{"paper", "#fffdf8", "the sheets"},
	{"desk", "#e7e3da", "what lies around the sheets"},
	{"tie", "#1d5a6c", "what leads elsewhere, and curves that govern"},
	{"bad", "#9c2f1b", "open state, limits, checks NOT OK"},
}

// Words are the standard wording that an office may put in its own words. Status,
// open state, verdicts, cautions and sheet numbers are not among them.
var Words = []Wording{
	{"prepared", "Prepared", "the box to sign, and in the head"},
	{"checked", "Checked", "likewise"},
	{"approved", "Approved", "likewise"},
	{"seal", "Seal", "the box for the seal"},
	{"calculation", "Calculation", "before the number on the cover"},
	{"project", "Project", "on the cover"},
	{"client", "Client", "on the cover"},
	{"discipline", "Discipline", "on the cover"},
	{"location", "Location", "on the cover"},
	{"authority", "Authority", "on the cover"},
	{"basis", "Governing basis", "on the cover"},
	{"criteria", "Design criteria", "heading on the cover"},
	{"revisions", "Revisions", "caption of the revision table"},
	{"contents", "Contents", "heading"},
	{"check_summary", "Check summary", "heading"},
	{"notes", "Notes", "heading of a register"},
	{"assumptions", "Assumptions", "heading of a register"},
	{"notation", "Notation", "heading of a register"},
	{"references", "References", "heading of a register"},
	{"inputs", "Inputs", "heading of a register"},
	{"records", "Records used", "heading of a register"},
	{"software", "Software", "heading of a register"},
}

// Readable is the contrast that text must have (WCAG 2.2, 1.4.3).
const Readable = 4.5

// Contrast is the contrast of two colours #rrggbb of sRGB, from 1 to 21 (WCAG 2.2);
// false where one of them is no such colour.
func Contrast(a, b string) (float64, bool) {
	x, ok := luminance(a)
	y, also := luminance(b)
	return (max(x, y) + 0.05) / (min(x, y) + 0.05), ok && also
}

// luminance is the relative luminance of a colour.
func luminance(colour string) (float64, bool) {
	n, err := strconv.ParseUint(strings.TrimPrefix(colour, "#"), 16, 32)
	if err != nil || len(colour) != 7 || colour[0] != '#' {
		return 0, false
	}
	sum := 0.0
	for i, weight := range []float64{0.0722, 0.7152, 0.2126} { // blue, green, red
		x := float64(n>>(8*i)&0xff) / 255
		if x <= 0.04045 {
			x /= 12.92
		} else {
			x = math.Pow((x+0.055)/1.055, 2.4)
		}
		sum += weight * x
	}
	return sum, true
}
