package page

import (
	"fmt"
	"html"
	"regexp"
	"slices"
	"strings"

	"quoin/calc/diag"
)

// A fragment is markup of an office: a strict part of HTML, in which every element
// is closed, every attribute is quoted, and nothing stands that could act, lead
// elsewhere or hide what is printed. What is not known is refused, so that a reader
// of pages cannot understand it in another way than this one does.

// element is one element of a fragment, or a text.
type element struct {
	tag      string // "" for a text
	text     string // as seen
	style    map[string]string
	children []*element
	parent   *element
	at       int // offset in the source
	aside    float64
}

const phrasing = "span b strong em i small sub sup br img"

// within says what stands in an element: texts are allowed where # is named.
var within = map[string]string{
	"":    "# div p h1 ul ol dl table hr " + phrasing,
	"div": "# div p h1 ul ol dl table hr " + phrasing,
	"p":   "# " + phrasing, "h1": "# " + phrasing, "dt": "# " + phrasing,
	"span": "# " + phrasing, "b": "# " + phrasing, "strong": "# " + phrasing, "em": "# " + phrasing, "i": "# " + phrasing, "small": "# " + phrasing, "sub": "# " + phrasing, "sup": "# " + phrasing,
	"ul": "li", "ol": "li", "li": "# p ul ol " + phrasing,
	"dl": "dt dd", "dd": "# p ul ol " + phrasing,
	"table": "thead tbody", "thead": "tr", "tbody": "tr", "tr": "th td", "th": "# p " + phrasing, "td": "# p ul ol " + phrasing,
	"br": "", "hr": "", "img": "",
}

// Elements are the elements that a template of an office may hold.
func Elements() []string {
	var out []string
	for tag := range within {
		if tag != "" {
			out = append(out, tag)
		}
	}
	slices.Sort(out)
	return out
}

// attributes are what elements may bear, besides style.
var attributes = map[string][]string{"img": {"src", "alt"}, "th": {"scope", "colspan"}, "td": {"colspan"}}

var empty = []string{"br", "hr", "img"}

const (
	size   = `(?:\d{1,3}(?:\.\d{1,2})?(?:mm|pt|px|em)|0)`
	token  = `var\(--(?:ink|soft|tie|bad)\)`
	anyInk = `var\(--(?:ink|soft|rule|tie|bad|paper)\)`
	border = `(?:0|none|` + size + ` (?:solid|double|dotted|dashed) ` + anyInk + `)`
	track  = `(?:[1-9]fr|auto|(?:1\d|[2-9]\d)mm)`
)

// Property is what an attribute style may set.
type Property struct{ Names, Form, Doc string }

// Properties are what an attribute style may set, and to what. None of them can
// hide a text, cover one by another or put it beside the sheet.
var Properties = []Property{
	{"color", token, "var(--ink), var(--soft), var(--tie) or var(--bad): the colours of text in the palette"},
	{"border border-top border-right border-bottom border-left", border, "0, or a width, a kind of line and a colour of the palette: 1.5pt solid var(--tie)"},
	{"font-size", `(?:[7-9]|[1-4]\d)(?:\.\d)?pt`, "7pt to 49pt"},
	{"font-weight", `400|600|700|normal|bold`, "400, 600, 700, normal or bold"},
	{"font-style", `normal|italic`, "normal or italic"},
	{"font-family", `var\(--label\)`, "var(--label), the narrow face of captions"},
	{"letter-spacing", `0|0?\.[0-2]\d?em`, "0 to 0.29em"},
	{"line-height", `1(?:\.\d\d?)?|2`, "1 to 2"},
	{"text-align", `left|right|center`, "left, right or center"},
	{"text-transform", `none|uppercase|capitalize`, "none, uppercase or capitalize"},
	{"display", `block|inline|inline-block|flex|grid`, "block, inline, inline-block, flex or grid"},
	{"grid-template-columns", track + `(?: ` + track + `){0,5}`, "up to six of auto, 1fr to 9fr and 10mm to 99mm"},
	{"align-items justify-content", `start|end|center|baseline|stretch|space-between`, "start, end, center, baseline, stretch or space-between"},
	{"flex-wrap", `wrap`, "wrap"},
	{"gap column-gap row-gap", size, "a length"},
	{"margin padding", size + `(?: ` + size + `){0,3}`, "one to four lengths, none below 0; at the sides together at most 60 mm"},
	{"margin-top margin-right margin-bottom margin-left padding-top padding-right padding-bottom padding-left", size, "a length, likewise"},
	{"width max-width", `(?:[1-9]|[1-9]\d|1[0-5]\d)mm|[3-9]\d%|100%`, "of a picture 1mm to 159mm, of anything else from 20mm; 30% to 100%"},
	{"height", `[1-9]mm|[1-5]\dmm`, "of a picture, 1mm to 59mm"},
}

var properties = func() map[string]*regexp.Regexp {
	out := map[string]*regexp.Regexp{}
	for _, p := range Properties {
		for _, name := range strings.Fields(p.Names) {
			out[name] = regexp.MustCompile(`^(?:` + p.Form + `)$`)
		}
	}
	return out
}()

// most of a fragment: deep are elements in each other, wide the parts of one.
const (
	deepest      = 24
	mostElements = 4000
	mostAside    = 60 // mm, of margins and padding at the sides in each other
)

// fault is what is wrong with a fragment, from byte to byte.
type fault struct {
	from, to   int
	text, hint string
}

// reader reads a fragment. In a source, actions are what is no text of the template,
// parts among them; branch tells which run of the template an offset belongs to.
type reader struct {
	src     string
	actions [][2]int     // from, to
	parts   map[int]bool // offsets of parts, true once seen at the top
	branch  func(at int) int
	picture func(action string) bool // whether it shows a picture
	pos     int
	count   int
	faults  []fault
}

func (r *reader) fail(from, to int, hint, format string, args ...any) {
	if len(r.faults) < 20 {
		r.faults = append(r.faults, fault{from, max(to, from+1), fmt.Sprintf(format, args...), hint})
	}
}

// action is the action that begins at an offset, if one does: where it ends.
func (r *reader) action(at int) (end int, ok bool) {
	i, ok := slices.BinarySearchFunc(r.actions, at, func(a [2]int, at int) int { return a[0] - at })
	if !ok {
		return 0, false
	}
	return r.actions[i][1], true
}

var (
	opening = regexp.MustCompile(`^<([A-Za-z][A-Za-z0-9:-]*)`)
	closing = regexp.MustCompile(`^</([A-Za-z][A-Za-z0-9:-]*)\s*>`)
	assign  = regexp.MustCompile(`^([^\s=>"'/<]+)\s*=\s*`)
	bare    = regexp.MustCompile(`^[^\s=>"'/<]+`)
)

// read gives the fragment as a tree. Where there are faults it is of no use.
func (r *reader) read() *element {
	top := &element{}
	at := top
	for r.pos < len(r.src) {
		if end, ok := r.action(r.pos); ok {
			for p := range r.parts {
				r.parts[p] = r.parts[p] || at.parent == nil && p >= r.pos && p < end
			}
			r.pos = end
			continue
		}
		if r.src[r.pos] != '<' {
			r.text(at)
			continue
		}
		if m := closing.FindStringSubmatch(r.src[r.pos:]); m != nil {
			tag := strings.ToLower(m[1])
			switch {
			case at.tag != tag || at.parent == nil:
				hint := "close what was opened last first"
				if at.tag != "" {
					hint = "</" + at.tag + "> is to be closed first"
				}
				r.fail(r.pos, r.pos+len(m[0]), hint, "</%s> closes nothing here", tag)
				return top
			case r.branch != nil && r.branch(at.at) != r.branch(r.pos):
				r.fail(r.pos, r.pos+len(m[0]), "open and close an element in the same branch", "<%s> is opened in another branch of the template than it is closed in", tag)
			}
			r.pos += len(m[0])
			at = at.parent
			continue
		}
		m := opening.FindStringSubmatch(r.src[r.pos:])
		if m == nil {
			hint := "write &lt; for the sign itself"
			if strings.HasPrefix(r.src[r.pos:], "<!") {
				hint = "write a comment as {{/* ... */}}"
			}
			r.fail(r.pos, r.pos+1, hint, "this is the beginning of no element")
			r.pos++
			continue
		}
		e := r.open(at, strings.ToLower(m[1]), len(m[0]))
		if e == nil {
			return top
		}
		at.children = append(at.children, e)
		if !slices.Contains(empty, e.tag) {
			at = e
		}
	}
	for ; at.parent != nil; at = at.parent {
		r.fail(at.at, at.at+1+len(at.tag), "close it with </"+at.tag+">", "<%s> is not closed", at.tag)
	}
	return top
}

func (r *reader) text(at *element) {
	start := r.pos
	for r.pos < len(r.src) && r.src[r.pos] != '<' {
		if _, ok := r.action(r.pos); ok {
			break
		}
		r.pos++
	}
	text := r.src[start:r.pos]
	if strings.TrimSpace(text) != "" && !strings.HasPrefix(within[at.tag], "#") {
		lead := len(text) - len(strings.TrimLeft(text, " \t\n"))
		r.fail(start+lead, start+lead+1, "it may hold "+or(within[at.tag], "nothing"), "a text cannot stand right in <%s>", at.tag)
	}
	at.children = append(at.children, &element{text: html.UnescapeString(text), at: start, parent: at})
}

// open reads the beginning of an element, n bytes of which are its name.
func (r *reader) open(parent *element, tag string, n int) *element {
	e := &element{tag: tag, parent: parent, at: r.pos, style: map[string]string{}, aside: parent.aside}
	start := r.pos
	r.pos += n
	depth := 0
	for p := parent; p != nil; p = p.parent {
		depth++
	}
	r.count++
	_, known := within[tag]
	switch {
	case !known:
		hint := "the elements of an office are " + strings.Join(Elements(), ", ")
		if tag == "style" || tag == "script" {
			hint = "set styles by an attribute style; a page of an office has no scripts"
		}
		r.fail(start, r.pos, hint, "<%s> has no place in a template of an office", clip(tag, 30))
	case !slices.Contains(strings.Fields(within[parent.tag]), tag):
		where := "<" + parent.tag + ">"
		if parent.tag == "" {
			where = "the template by itself"
		}
		r.fail(start, r.pos, "it may hold "+strings.TrimPrefix(within[parent.tag], "# "), "<%s> cannot stand in %s", tag, where)
	case depth > deepest:
		r.fail(start, r.pos, "lift the innermost ones out", "elements stand more than %d deep in each other", deepest)
		return nil
	case r.count > mostElements:
		r.fail(start, r.pos, "shorten it", "there are more than %d elements", mostElements)
		return nil
	}
	given := map[string]bool{}
	for {
		r.pos += len(r.src[r.pos:]) - len(strings.TrimLeft(r.src[r.pos:], " \t\n"))
		rest := r.src[r.pos:]
		switch {
		case strings.HasPrefix(rest, ">"):
			r.pos++
			r.finish(e, given, start)
			return e
		case strings.HasPrefix(rest, "/>"):
			if known && !slices.Contains(empty, tag) {
				r.fail(r.pos, r.pos+2, "close it with </"+tag+">", "<%s/> would not be closed by this", tag)
			}
			r.pos += 2
			r.finish(e, given, start)
			return e
		case rest == "":
			r.fail(start, start+n, "close it with >", "the tag <%s does not end", tag)
			return nil
		}
		if end, ok := r.action(r.pos); ok {
			r.fail(r.pos, end, "choose between whole elements", "an action cannot stand within a tag")
			r.pos = end
			continue
		}
		from := r.pos
		m := assign.FindStringSubmatch(rest)
		if m == nil {
			word := bare.FindString(rest)
			if word == "" {
				word = rest[:1]
			}
			r.pos += len(word)
			r.attribute(e, given, strings.ToLower(word), "", from, from, r.pos)
			continue
		}
		r.pos += len(m[0])
		if r.pos >= len(r.src) || r.src[r.pos] != '"' {
			r.fail(from, r.pos, `write it in double quotes: `+m[1]+`="..."`, "the value of %s does not stand in double quotes", clip(m[1], 30))
			return nil
		}
		r.pos++
		valueAt := r.pos
		for r.pos < len(r.src) && r.src[r.pos] != '"' {
			if end, ok := r.action(r.pos); ok {
				r.pos = end
			} else {
				r.pos++
			}
		}
		if r.pos >= len(r.src) {
			r.fail(from, valueAt, "close it with a double quote", "the value of %s does not end", clip(m[1], 30))
			return nil
		}
		r.pos++
		r.attribute(e, given, strings.ToLower(m[1]), r.src[valueAt:r.pos-1], from, valueAt, r.pos-1)
	}
}

// attribute judges one attribute.
func (r *reader) attribute(e *element, given map[string]bool, name, value string, from, valueAt, end int) {
	allowed := append([]string{"style"}, attributes[e.tag]...)
	if _, known := within[e.tag]; !known {
		return // the element is refused already
	}
	if given[name] || !slices.Contains(allowed, name) {
		hint := "<" + e.tag + "> takes " + strings.Join(allowed, ", ")
		if near := diag.Nearest(name, allowed); near != "" && near != name {
			hint = "did you mean " + near + "?"
		}
		what := "has no attribute"
		if given[name] {
			what = "has twice the attribute"
		}
		r.fail(from, from+len(name), hint, "<%s> of a template %s %s", e.tag, what, clip(name, 30))
		return
	}
	given[name] = true
	has := slices.ContainsFunc(r.actions, func(a [2]int) bool { return a[0] >= valueAt && a[0] < end })
	switch name {
	case "style":
		if has {
			r.fail(valueAt, end, "write the style out", "a style cannot hold an action")
			return
		}
		r.style(e, value, valueAt)
	case "src":
		sound := r.actions == nil && strings.HasPrefix(value, "data:image/") // filled in by picture
		if r.picture != nil {
			sound = r.picture(value)
		}
		if !sound {
			r.fail(valueAt, end, `write src="{{picture "logo.svg"}}" with a picture of the folder`, "a picture must come from the folder of the office")
		}
	case "alt":
	default:
		if !regexp.MustCompile(`^(?:[1-9]|1\d|row|col)$`).MatchString(value) {
			r.fail(valueAt, end, "write scope=\"row\" or colspan=\"2\"", "%s cannot be this", name)
		}
	}
}

// style judges the declarations of an attribute.
func (r *reader) style(e *element, value string, at int) {
	for part := range strings.SplitSeq(value, ";") {
		from := at + len(part) - len(strings.TrimLeft(part, " \t\n"))
		to := from + len(strings.TrimSpace(part))
		at += len(part) + 1
		if from >= to {
			continue
		}
		name, set, _ := strings.Cut(part, ":")
		name, set = strings.TrimSpace(name), strings.Join(strings.Fields(set), " ")
		form, known := properties[name]
		switch {
		case !known:
			var names []string
			for n := range properties {
				names = append(names, n)
			}
			slices.Sort(names)
			hint := "quoin blocks office lists what a style may set"
			if near := diag.Nearest(name, names); near != "" {
				hint = "did you mean " + near + "?"
			}
			r.fail(from, to, hint, "a style of a template cannot set %s", clip(name, 40))
		case !form.MatchString(set):
			r.fail(from, to, "it takes "+takes(name), "%s cannot be %s", name, clip(or(set, "nothing"), 60))
		case e.style[name] != "":
			r.fail(from, to, "leave one of them out", "%s is set twice", name)
		case name == "height" && e.tag != "img":
			r.fail(from, to, "leave it out: an element is as high as what it holds", "only a picture has a height of its own")
		case (name == "width" || name == "max-width") && e.tag != "img" && strings.HasSuffix(set, "mm") && length(set, 0) < 20:
			r.fail(from, to, "make it at least 20mm", "%s is too narrow for a text", set)
		default:
			e.style[name] = set
		}
	}
}

func takes(name string) string {
	for _, p := range Properties {
		if slices.Contains(strings.Fields(p.Names), name) {
			return p.Doc
		}
	}
	return ""
}

// finish judges the element as a whole.
func (r *reader) finish(e *element, given map[string]bool, start int) {
	if e.tag == "img" && (!given["src"] || !given["alt"]) {
		r.fail(start, start+4, `write <img src="{{picture "logo.svg"}}" alt="..."> with what it shows in words`, "a picture needs src and alt")
	}
	if e.tag == "img" && e.style["height"] == "" && given["src"] {
		r.fail(start, start+4, `add style="height: 14mm"`, "a picture needs a height")
	}
	m, p := e.box("margin"), e.box("padding")
	if e.aside += m[1] + m[3] + p[1] + p[3]; e.aside > mostAside {
		r.fail(start, start+1+len(e.tag), "give less room at the sides", "margins and padding at the sides come to more than %d mm", mostAside)
	}
}

// seen is the text of a fragment that a reader sees, blanks made one.
func (e *element) seen() string {
	var b strings.Builder
	var walk func(*element)
	walk = func(e *element) {
		b.WriteString(e.text)
		for _, c := range e.children {
			walk(c)
		}
		if e.tag != "" && !slices.Contains(strings.Fields(phrasing), e.tag) || e.tag == "br" {
			b.WriteByte('\n')
		}
	}
	walk(e)
	return strings.Join(strings.Fields(b.String()), " ")
}
