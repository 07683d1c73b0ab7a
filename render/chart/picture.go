package chart

import (
	"fmt"
	"html"
	"regexp"
	"strings"

	"quoin/calc/exhibit"
	"quoin/render/script"
)

// Picture is the static picture of a figure: an SVG 700 px wide that fits itself to
// its column. Ids inside it begin with prefix (a letter, then letters, digits, - and _).
func Picture(f exhibit.Figure, prefix string) (svg string, err error) {
	option, height, err := Option(f)
	if err != nil {
		return "", err
	}
	return picture(f, option, height, prefix, Wide, "")
}

// Pictures is the static picture twice: class "wide" for a column and for paper,
// class "narrow" for a phone. The stylesheet shows one of them. Option and height
// are those that [Option] gives; of the figure itself only the words are used.
func Pictures(f exhibit.Figure, option []byte, height int, prefix string) (svg string, err error) {
	wide, err := picture(f, option, height, prefix, Wide, "wide")
	if err != nil {
		return "", err
	}
	narrow, err := picture(f, option, height, prefix+"-n", Narrow, "narrow")
	return wide + "\n" + narrow, err
}

var (
	validPrefix = regexp.MustCompile(`^[A-Za-z][A-Za-z0-9_-]*$`)
	unsafe      = regexp.MustCompile(`[^A-Za-z0-9]+`)
	root        = regexp.MustCompile(`^<svg [^>]*>`)
	inTag       = regexp.MustCompile(`<[^>]*>`)
	fonts       = regexp.MustCompile(`font-size:12.5px;font-family:[^;"]*;|font-weight:400;| style=""| text-anchor="start"`)
	moved       = regexp.MustCompile(` transform="translate\((-?[\d.]+) (-?[\d.]+)\)"`)
	unseen      = regexp.MustCompile(`\n?<rect [^>]* fill="none"></rect>|\n?<path d="[^"]*"(?:(?: transform="[^"]*")? fill="none"| transform="matrix\(0\.005,[^"]*"[^>]*|[^>]* fill-opacity="0"[^>]*)></path>`)
)

// Prefix makes a prefix for Picture of a figure's id.
func Prefix(id string) string { return "c-" + strings.Trim(unsafe.ReplaceAllString(id, "-"), "-") }

func picture(f exhibit.Figure, option []byte, height int, prefix string, width int, class string) (string, error) {
	if !validPrefix.MatchString(prefix) {
		panic("chart: " + prefix + " is no prefix for ids")
	}
	text, err := script.SVG(option, width, height, prefix)
	if err != nil {
		return "", fmt.Errorf("figure %q: %w", f.ID, err)
	}
	body := strings.TrimSuffix(root.ReplaceAllString(text, ""), "</svg>")
	// The fonts are said once, at the root; what holds anyway and boxes without ink say
	// nothing; places are in tenths of a pixel.
	body = inTag.ReplaceAllStringFunc(body, func(t string) string {
		t = strings.ReplaceAll(fonts.ReplaceAllString(t, ""), ` style=""`, "")
		if m := moved.FindStringSubmatchIndex(t); m != nil && strings.HasPrefix(t, "<text ") {
			t = t[:m[2]] + inTenths(t[m[2]:m[3]]) + " " + inTenths(t[m[4]:m[5]]) + t[m[5]:]
		}
		return t
	})
	body = lean(unseen.ReplaceAllString(body, ""))
	title := clean(f.Caption)
	if title == "" {
		title = clean(f.Alt)
	}
	var b strings.Builder
	b.WriteString(`<svg xmlns="http://www.w3.org/2000/svg"`)
	if class != "" {
		fmt.Fprintf(&b, ` class="%s"`, class)
	}
	fmt.Fprintf(&b, ` viewBox="0 0 %d %d" width="100%%" font-family="`+face+`" font-size="%g" role="img" aria-labelledby="%s-t %s-d">`, width, height, size, prefix, prefix)
	fmt.Fprintf(&b, `<title id="%s-t">%s</title><desc id="%s-d">%s</desc>`, prefix, html.EscapeString(title), prefix, html.EscapeString(clean(f.Alt)))
	b.WriteString(body)
	b.WriteString("</svg>")
	return b.String(), nil
}
