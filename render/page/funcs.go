package page

import (
	"encoding/base64"
	"fmt"
	"html/template"
	"path"
	"slices"
	"strconv"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/render/equation"
)

// funcs is what the templates can ask. Sheets and links are known once packed,
// which is before any template runs.
func (b *book) funcs() template.FuncMap {
	return template.FuncMap{
		"sheet":      func(anchor string) int { return b.sheets[anchor] },
		"sheets":     b.sheetsOf,
		"known":      b.known,
		"origin":     b.origin,
		"href":       b.href,
		"home":       b.home,
		"from":       b.from,
		"refer":      b.refer,
		"reference":  func(key string) string { return b.known(b.refs[key]) },
		"source":     b.source,
		"assumption": b.assumptionID,
		"rested":     b.rested,
		"math":       func(n *expr.Node) template.HTML { return template.HTML(equation.Symbols(n)) },
		"tex":        b.tex,
		"image":      imageOf,
		"live":       b.live,
		"footref":    b.footref,
		"checked":    checkedText,
		"words":      wordsOf,
		"word":       b.word,
		"worded":     b.worded,
		"evidenced":  evidenced,
		"person":     personText,
		"affected":   b.affected,
		"align": func(a string) string {
			return map[string]string{"right": "r", "center": "c"}[a]
		},
	}
}

// known is the anchor if something on a sheet bears it, else "".
func (b *book) known(anchor string) string {
	if b.sheets[anchor] == 0 {
		return ""
	}
	return anchor
}

// origin is the anchor of where a value is shown, or "".
func (b *book) origin(id string) string {
	stem, _, _ := strings.Cut(id, "[")
	for _, name := range []string{id, stem} {
		if a := b.known(b.origins[name]); a != "" {
			return a
		}
		if e, ok := b.entries[name]; ok {
			if a := b.known(e.Anchor); a != "" {
				return a
			}
		}
	}
	return ""
}

func (b *book) sheetsOf(anchors []string) []int {
	var out []int
	for _, a := range anchors {
		if s := b.sheets[a]; s > 0 {
			out = append(out, s)
		}
	}
	slices.Sort(out)
	return slices.Compact(out)
}

// href is where a link of the prose leads: a place of this page, a file that was
// read, or an address outside. Anything else is no link.
func (b *book) href(target string) string {
	if anchor, ok := strings.CutPrefix(target, "#"); ok {
		if b.known(anchor) != "" {
			return target
		}
		return ""
	}
	for _, scheme := range []string{"https://", "http://", "mailto:"} {
		if strings.HasPrefix(strings.ToLower(target), scheme) {
			return target
		}
	}
	file := path.Join(path.Dir(b.p.Provenance.Source), target)
	for _, in := range b.p.Inputs {
		if in.Path == file || in.Path == target {
			return "inputs/" + in.Path
		}
	}
	return ""
}

// source is a reference as the margin shows it.
func (b *book) source(s any) sourceView {
	switch r := s.(type) {
	case *cite.Ref:
		return b.source(*r)
	case cite.Ref:
		return sourceView{wordsOf(r.String()), b.known(b.refs[r.Key]), r.Memory}
	case string:
		return sourceView{Words: wordsOf(r)}
	}
	return sourceView{}
}

func (b *book) tex(src string, display bool) (template.HTML, error) {
	if b.o.TeX == nil {
		panic("page: an equation in TeX and no Options.TeX")
	}
	text, err := b.o.TeX(src, display)
	if err != nil {
		return "", fmt.Errorf("equation %q: %w", clip(src, 60), err)
	}
	return template.HTML(text), nil
}

func (b *book) mustTeX(src string, at exhibit.Place) template.HTML {
	text, err := b.tex(src, true)
	b.fail(err, "%s:%d", at.File, at.Line)
	return text
}

// fail keeps the first error of making the page.
func (b *book) fail(err error, format string, args ...any) {
	if err != nil && b.err == nil {
		b.err = fmt.Errorf("page: "+format+": %w", append(args, err)...)
	}
}

type imageView struct {
	Source     template.URL
	Alt, Title string
}

// pictures that stand in the page as data.
var pictures = []string{"image/png", "image/jpeg", "image/gif", "image/webp", "image/svg+xml"}

func imageOf(n exhibit.Prose) *imageView {
	v := &imageView{Alt: or(plain(n.Children), n.Text), Title: n.Title}
	if slices.Contains(pictures, n.MediaType) {
		v.Source = template.URL("data:" + n.MediaType + ";base64," + base64.StdEncoding.EncodeToString(n.Data))
	}
	return v
}

type liveView struct {
	Text, Title string
	Home        *homeView
	Was         *wasView
}

func (b *book) live(l *exhibit.Live) *liveView {
	if l == nil {
		return nil
	}
	v := &liveView{Text: l.Text, Title: b.story(l.ID), Home: b.home(l.ID), Was: b.was(l.ID)}
	if len(l.Numbers) == 1 && v.Was != nil {
		n := l.Numbers[0]
		n.ID = b.itemOf(l.ID, n.Value)
		v.Was = b.wasNumber(n, false)
	}
	if len(l.Numbers) > 0 {
		v.Text = numbersText(l.Numbers)
	}
	return v
}

// story is where a value comes from, in one line.
func (b *book) story(id string) string {
	parts := []string{id}
	stem, _, _ := strings.Cut(id, "[")
	e, ok := b.entries[id]
	if !ok {
		e, ok = b.entries[stem]
	}
	if !ok {
		return id
	}
	if e.Tree != nil {
		parts[0] += " = " + clip(equation.Setter{System: b.p.System}.Symbols(e.Tree).Text, 160)
	}
	if u := e.Value.Unit.Pretty(); u != "" {
		parts[0] += ", in " + u
	}
	if e.Doc != "" {
		parts = append(parts, e.Doc)
	}
	if at := b.place(e.Place); at != "" {
		parts = append(parts, at)
	}
	return strings.Join(parts, " · ")
}

// numbersText is numbers with their unit, said once.
func numbersText(list []exhibit.Number) string {
	texts := make([]string, len(list))
	for i, n := range list {
		texts[i] = n.Text()
		if same := i+1 < len(list) && list[i+1].Unit.Text == n.Unit.Text; !same && n.Unit.Text != "" && n.Unit.Text != "1" {
			texts[i] += "\u202f" + n.Unit.Pretty()
		}
	}
	return strings.Join(texts, ", ")
}

type footrefView struct {
	ID, To string
	Index  int
}

func (b *book) footref(index int) footrefView {
	v := footrefView{Index: index}
	if b.notes[index] {
		v.To = footnoteID(index)
	}
	if !b.marked[index] {
		b.marked[index], v.ID = true, footnoteBack(index)
	}
	return v
}

// plain is prose as text.
func plain(nodes []exhibit.Prose) string {
	var b strings.Builder
	for _, n := range nodes {
		b.WriteString(n.Text)
		if n.Live != nil {
			b.WriteString(n.Live.Text)
			if len(n.Live.Numbers) > 0 {
				b.WriteString(numbersText(n.Live.Numbers))
			}
		}
		if n.Kind == exhibit.FootnoteRef {
			b.WriteString(strconv.Itoa(n.Level))
		}
		b.WriteString(plain(n.Children))
	}
	return b.String()
}
