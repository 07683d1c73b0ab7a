package markdown

import (
	"bytes"
	"net/url"
	"path"
	"regexp"
	"slices"
	"strings"
	"unicode"

	"github.com/yuin/goldmark/ast"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
)

var (
	scheme  = regexp.MustCompile(`^[A-Za-z][A-Za-z0-9+.-]*:`)
	schemes = []string{"http:", "https:", "mailto:"}
)

// link converts a link; one that leads nowhere we allow loses its target.
func (w inlineWriter) link(n *ast.Link, text []exhibit.Prose) (exhibit.Prose, bool) {
	at := w.target(n, n.Destination)
	to := w.resolve(n.Destination, func() diag.Range { return at })
	p := exhibit.Prose{Kind: exhibit.Link, Title: w.title(n.Title, at), Children: text}
	if w.allowed(to, at) {
		p.Target = to
	}
	return p, true
}

func (w inlineWriter) autoLink(n *ast.AutoLink) (exhibit.Prose, bool) {
	start := max(n.Pos(), 0)
	label := string(n.Label(w.text))
	to := label
	if n.AutoLinkType == ast.AutoLinkEmail && !strings.HasPrefix(strings.ToLower(to), "mailto:") {
		to = "mailto:" + to
	}
	p := exhibit.Prose{Kind: exhibit.Link, Children: []exhibit.Prose{{Kind: exhibit.Text, Text: label}}}
	if w.allowed(to, w.span(start, start+len(label)+2)) {
		p.Target = to
	}
	return p, true
}

// title is the title of a link or image.
func (w inlineWriter) title(title []byte, at diag.Range) string {
	t := w.resolve(title, func() diag.Range { return at })
	w.braces(t, at)
	return t
}

// braces refuses live values where none can stand.
func (w inlineWriter) braces(s string, at diag.Range) bool {
	if strings.Contains(s, "{{") || strings.Contains(s, "}}") {
		w.list.Errorf("stray-braces", at, "a live value cannot stand in the target or title of a link")
		return true
	}
	return false
}

// allowed reports link targets other than http, https, mailto, #fragment and
// relative paths.
func (w inlineWriter) allowed(to string, at diag.Range) bool {
	const hint = "a link leads to http://, https://, mailto:, #heading or a path relative to this file"
	switch {
	case w.braces(to, at):
	case to == "":
		w.list.Errorf("link-target", at, "this link leads nowhere").WithHint(hint)
	case odd(to): // a browser may drop such characters and find a scheme
		w.list.Errorf("link-target", at, "this target holds a character that no address has").WithHint(hint)
	case scheme.MatchString(to):
		s := scheme.FindString(to)
		if slices.Contains(schemes, strings.ToLower(s)) {
			return true
		}
		w.list.Errorf("link-target", at, "links to %s are not allowed", short(s)).WithHint(hint)
	case strings.HasPrefix(to, "/"):
		w.list.Errorf("link-target", at, "a link to an absolute path leads nowhere on another machine").WithHint(hint)
	default:
		return true
	}
	return false
}

// odd tells whether an address has blanks at its ends, or holds a control
// character, a backslash or a character that reorders text.
func odd(to string) bool {
	return strings.ContainsFunc(to, func(r rune) bool {
		return unicode.IsControl(r) || r == '\\' || reorders(r) || r == '\uFFFD'
	}) || strings.TrimSpace(to) != to
}

// image converts an image and lists its file.
func (w inlineWriter) image(n *ast.Image, text []exhibit.Prose) (exhibit.Prose, bool) {
	at := w.target(n, n.Destination)
	title := w.title(n.Title, at)
	to := unescape(string(n.Destination))
	if w.braces(to, at) {
		return exhibit.Prose{}, false
	}
	file, ok := imagePath(to)
	if !ok {
		w.list.Errorf("image-path", at, "an image is a file beside or below this one").
			WithHint("write a path relative to this file, with / and without ..")
		return exhibit.Prose{}, false
	}
	w.file.Images = append(w.file.Images, ImageRef{Path: file, Range: at})
	return exhibit.Prose{Kind: exhibit.Image, Target: file, Title: title, Children: text}, true
}

// imagePath is the cleaned path of an image.
func imagePath(to string) (string, bool) {
	file, err := url.PathUnescape(to)
	if err != nil || file == "" || odd(file) || scheme.MatchString(file) || strings.HasPrefix(file, "/") ||
		strings.HasSuffix(file, "/") || strings.ContainsAny(file, "?#") || slices.Contains(strings.Split(file, "/"), "..") {
		return "", false
	}
	file = path.Clean(file)
	return file, file != "."
}

// target is the range of the destination of a link, or of its opening bracket
// where the destination stands elsewhere (reference links).
func (w inlineWriter) target(n ast.Node, destination []byte) diag.Range {
	start := max(n.Pos(), 0)
	from := start
	for c := n.LastChild(); c != nil; c = c.LastChild() {
		if t, ok := c.(*ast.Text); ok {
			from = max(from, t.Segment.Stop)
		}
	}
	window := w.text[from:min(len(w.text), from+len(destination)+80)]
	if i := bytes.Index(window, []byte("](")); i >= 0 && len(destination) > 0 {
		if j := bytes.Index(window[i:], destination); j >= 0 {
			return w.span(from+i+j, from+i+j+len(destination))
		}
	}
	return w.span(start, max(start+1, from))
}
