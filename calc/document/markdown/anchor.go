package markdown

import (
	"strconv"
	"strings"
	"unicode"

	"golang.org/x/text/unicode/norm"

	"quoin/calc/exhibit"
)

// longestAnchor is how many characters of a heading its anchor keeps.
const longestAnchor = 64

// anchors counts the anchors given so far.
type anchors map[string]int

// unique makes an anchor of a text: letters and digits of any script, lower
// case, hyphens between words; a number tells equal ones apart.
func (a anchors) unique(text string) string {
	base := slug(text)
	name := base
	for a[name] > 0 {
		a[base]++
		name = base + "-" + strconv.Itoa(a[base])
	}
	a[name] = 1
	return name
}

func slug(text string) string {
	var b strings.Builder
	count, gap := 0, false
	for _, r := range norm.NFC.String(text) {
		if !unicode.IsLetter(r) && !unicode.IsDigit(r) && !unicode.IsMark(r) {
			gap = count > 0
			continue
		}
		if count >= longestAnchor {
			break
		}
		if gap {
			b.WriteByte('-')
		}
		b.WriteRune(unicode.ToLower(r))
		count, gap = count+1, false
	}
	if count == 0 {
		return "section"
	}
	return b.String()
}

// plainText is the text of prose; a live value stands as its name, so that an
// anchor does not change with a result or its unit.
func (c *converter) plainText(prose []exhibit.Prose) string {
	var b strings.Builder
	for _, p := range prose {
		switch p.Kind {
		case exhibit.Value:
			for _, word := range strings.Fields(c.file.Lives[p.Level].Text) {
				if strings.HasPrefix(word, ".") {
					b.WriteString(" " + word + " ")
				}
			}
		case exhibit.Break:
			b.WriteByte(' ')
		default:
			b.WriteString(p.Text + c.plainText(p.Children))
		}
	}
	return b.String()
}
