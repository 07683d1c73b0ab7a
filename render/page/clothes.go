package page

import (
	"fmt"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"quoin/calc/exhibit"
)

// word is a standard word, or that of the office in its place.
func (b *book) word(key string) string {
	if o := b.p.Office; o != nil {
		for _, w := range o.Words {
			if w.Key == key {
				return w.Text
			}
		}
	}
	for _, w := range exhibit.Words {
		if w.Key == key {
			return w.Text
		}
	}
	panic("page: there is no standard word " + key)
}

// verb is a standard word before initials.
func (b *book) verb(key string) string {
	word := b.word(key)
	first, n := utf8.DecodeRuneInString(word)
	if second, _ := utf8.DecodeRuneInString(word[n:]); unicode.IsUpper(second) {
		return word
	}
	return string(unicode.ToLower(first)) + word[n:]
}

// ownCover is the cover as the office has it, nil for the program's own. Parts that
// it does not place follow in their usual order.
func (b *book) ownCover() (out []item) {
	if b.own.cover == nil {
		return nil
	}
	data := b.coverData()
	pieces := b.fill(b.own.cover, data, 162, 10)
	if pieces == nil {
		return nil
	}
	b.own.unsaid = b.unsaid(data, pieces)
	placed := map[string]bool{}
	for _, f := range pieces {
		if f.part == "" {
			out = append(out, item{name: "own", data: f.text, high: f.high})
			continue
		}
		placed[f.part] = true
		out = append(out, b.part(f.part)...)
	}
	for _, name := range parts {
		if !placed[name] {
			out = append(out, b.part(name)...)
		}
	}
	out[0].anchors = append(out[0].anchors, "q-cover")
	return out
}

// unsaid is the facts of the program's own cover that the pieces of an office do not
// show. A fact that is a part of a longer one, as a place in the name of a project, is
// not shown by that: the longer are looked for first and taken out.
func (b *book) unsaid(c Cover, pieces []filled) (out []coverRow) {
	type fact struct {
		label, text string
		shown       bool
	}
	m := b.p.Meta
	facts := []*fact{{label: "Subject", text: c.Subject}, {label: b.word("client"), text: c.Client}, {label: "Contract", text: clip(m.Contract, titleChars)},
		{label: b.word("location"), text: c.Location}, {label: b.word("discipline"), text: clip(m.Discipline, titleChars)}, {label: b.word("authority"), text: c.Authority}}
	plain := func(s string) string { return strings.ToLower(strings.Join(strings.Fields(s), " ")) }
	seen := ""
	for _, f := range pieces {
		seen += f.seen + "\n"
	}
	seen = plain(seen)
	all := append(slices.Clone(facts), &fact{text: c.Title}, &fact{text: c.Project}, &fact{text: c.Number}, &fact{text: c.Office})
	slices.SortStableFunc(all, func(x, y *fact) int { return utf8.RuneCountInString(y.text) - utf8.RuneCountInString(x.text) })
	for _, f := range all {
		if text := plain(f.text); text != "" {
			seen, f.shown = without(seen, text)
		}
	}
	for _, f := range facts {
		if !f.shown && strings.TrimSpace(f.text) != "" {
			out = append(out, coverRow{Label: f.label, Lines: []coverLine{{Text: f.text}}})
		}
	}
	return out
}

// without takes out of a text what stands there as words of its own, and tells
// whether it did.
func without(s, words string) (rest string, found bool) {
	letter := func(r rune) bool { return unicode.IsLetter(r) || unicode.IsDigit(r) }
	var b strings.Builder
	for {
		i := strings.Index(s, words)
		if i < 0 {
			break
		}
		before, _ := utf8.DecodeLastRuneInString(s[:i])
		after, _ := utf8.DecodeRuneInString(s[i+len(words):])
		if letter(before) || letter(after) {
			_, n := utf8.DecodeRuneInString(s[i:])
			b.WriteString(s[:i+n])
			s = s[i+n:]
			continue
		}
		b.WriteString(s[:i] + "\n")
		s, found = s[i+len(words):], true
	}
	return b.String() + s, found
}

// ownHeadHigh is how high the head of the office is with the line of state below it,
// mm, in print.
func (b *book) ownHeadHigh() (float64, bool) {
	if b.own.head == nil || !b.own.head.sound {
		return 0, false
	}
	text, high := b.ownHead(999, 999)
	if text == "" {
		return 0, false
	}
	if stated := b.p.Office.HeadHeight; stated > 0 {
		h := b.head()
		long := 0.0
		for _, t := range []string{h.Number + "  " + h.Title, h.Project + " · " + h.Location} {
			long += 4.5 * (lines(t, headChars) - 1)
		}
		high = stated + long
	}
	return high + 15, true
}

// ownCSS dresses what the templates of an office write, and gives the page its
// palette on screen. Paper stays black on white; of the palette it takes what leads
// elsewhere, where that can be read on it.
func ownCSS(o *exhibit.Office) string {
	if o == nil {
		return ""
	}
	var b strings.Builder
	b.WriteString(`
.head.own { grid-template-columns: minmax(0, 1fr) max-content; }
.head.own > .ours { grid-column: 1 / -1; min-width: 0; color: var(--ink); padding-bottom: 5px; margin-bottom: 3px; border-bottom: 1px solid var(--rule); }
.head.own .st, .head.own .sh { grid-row: auto; }
.ours { overflow-wrap: anywhere; }
.ours * { min-width: 0; max-width: 100%; }
.ours :is(p, h1, ul, ol, dl, dd, table, hr) { margin: 0; }
.ours img { width: auto; object-fit: contain; }
@media screen and (max-width: 760px) { .head.own .st { grid-column: 1; } .ours div { grid-template-columns: minmax(0, 1fr) !important; flex-wrap: wrap; } }
`)
	if len(o.Palette) == 0 {
		return b.String()
	}
	colours := map[string]string{}
	for _, list := range [][]exhibit.Wording{exhibit.Colours, o.Palette} {
		for _, w := range list {
			colours[w.Key] = w.Text
		}
	}
	b.WriteString("@media screen {\n:root {")
	for _, w := range o.Palette {
		fmt.Fprintf(&b, " --%s: %s;", w.Key, w.Text)
	}
	b.WriteString(" }\n")
	// Charts and pictures are drawn in the program's own colours; a rule is stronger
	// than the attributes they are drawn with.
	drawn := []exhibit.Wording{{Key: "#8b857a", Text: "color-mix(in srgb, var(--soft) 72%, var(--paper))"}, {Key: "#e3ded2", Text: "color-mix(in srgb, var(--rule) 52%, var(--paper))"},
		{Key: "#b5ad9c", Text: "var(--rule)"}, {Key: "#fff", Text: "var(--paper)"}}
	for _, w := range exhibit.Colours {
		drawn = append(drawn, exhibit.Wording{Key: w.Text, Text: "var(--" + w.Key + ")"})
	}
	for _, w := range drawn {
		fmt.Fprintf(&b, "svg [fill=%q] { fill: %s; }\nsvg [stroke=%q] { stroke: %s; }\n", w.Key, w.Text, w.Key, w.Text)
	}
	b.WriteString("}\n")
	if ratio, _ := exhibit.Contrast(colours["tie"], "#ffffff"); ratio >= exhibit.Readable {
		fmt.Fprintf(&b, "@media print {\n:root { --tie: %s; }\nsvg [fill=\"#1d5a6c\"] { fill: var(--tie); }\nsvg [stroke=\"#1d5a6c\"] { stroke: var(--tie); }\n}\n", colours["tie"])
	}
	return b.String()
}
