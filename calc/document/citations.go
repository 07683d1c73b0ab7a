package document

import (
	"regexp"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/diag"
	"quoin/calc/quantity"
)

// keylike is a text in brackets that looks like the key of a source and a clause.
var keylike = regexp.MustCompile(`^[A-Z][A-Za-z]+( [0-9.]+)?$`)

// byNumber is a text in brackets that refers to an equation, a figure or a table by
// a plain number; [Table 12.8-2] is one of another book.
var byNumber = regexp.MustCompile(`^(Eq|Equation|Fig|Figure|Table)\.? \(?\d+\)?$`)

// brackets warns of texts in brackets that seem to cite what nobody names: those
// near to a key, and where the document has references those that look like one;
// and of references by number.
func (d *run) brackets() {
	for _, p := range d.parts {
		for _, b := range p.md.Brackets {
			if m := byNumber.FindStringSubmatch(b.Text); m != nil {
				what := referNouns[referShort[m[1]]]
				d.diags.Warnf("unknown-exhibit", b.Range, "[%s] refers by number: it is printed as written, and the numbers of a document change", b.Text).
					WithHint("refer to the %s by its name, not by its number: %s; write \\[ for a bracket as text", what, referSample[referShort[m[1]]])
				continue
			}
			word, _, _ := strings.Cut(b.Text, " ")
			near := d.nearSource(b.Text)
			if near == "" && !d.assumedLike(b.Text) && (len(d.ownKeys) == 0 || !keylike.MatchString(b.Text) || quantity.IsSymbol(word)) {
				continue
			}
			d.diags.Warnf("unknown-source", b.Range, "no reference is known as %q", b.Text).WithHint("%s", d.sourceHint(b.Text, `add it to a references block; write \[ for a bracket as text`))
		}
	}
}

// sourceHint names the source that was likely meant, or says what else to do.
func (d *run) sourceHint(text, otherwise string) string {
	if near := d.nearSource(text); near != "" {
		return "did you mean " + near + "?"
	}
	if d.assumedLike(text) {
		return "the assumptions of this document are " + strings.Join(d.assumed, ", ")
	}
	return otherwise
}

// nearSource is the key that a citation was likely to begin with, "" for none.
func (d *run) nearSource(text string) string {
	keys := append([]string{}, d.ownKeys...)
	for _, s := range cite.Sources {
		keys = append(keys, s.Key)
	}
	for end := len(text); end > 0; end = strings.LastIndexAny(text[:end], " ,") {
		if near := diag.Nearest(text[:end], keys); near != "" {
			return near
		}
	}
	return ""
}
