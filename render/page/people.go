package page

import (
	"slices"
	"strings"
	"unicode"

	"golang.org/x/text/cases"
	"golang.org/x/text/unicode/norm"

	"quoin/calc/exhibit"
)

// nobody is what people write where a name should stand. Its words make a
// signature void wherever they stand in it.
var nobody = []string{"pending", "tbd", "tba", "tbc", "none", "nobody", "unknown", "unchecked", "not", "yet", "later", "nil", "null", "todo", "open", "blank", "n/a", "n.a."}

// people are the persons a text names: for each its letters alone, without regard
// to case, points and blanks, so that "M.K." and "m k" are one. None if it holds no
// letter or says that there is none.
func people(text string) []string {
	folded := cases.Fold().String(norm.NFKC.String(text))
	for _, w := range strings.FieldsFunc(folded, func(r rune) bool { return unicode.IsSpace(r) || strings.ContainsRune(",;()[]:!?", r) }) {
		if slices.Contains(nobody, strings.Trim(w, "-–—'\"")) || slices.Contains(nobody, strings.Trim(w, "-–—.'\"")) {
			return nil
		}
	}
	var out []string
	for _, person := range strings.FieldsFunc(strings.ReplaceAll(folded, " and ", ","), func(r rune) bool { return strings.ContainsRune(",;/&+|", r) }) {
		letters := strings.Map(func(r rune) rune {
			if unicode.IsLetter(r) {
				return r
			}
			return -1
		}, person)
		if letters != "" && letters != "na" {
			out = append(out, letters)
		}
	}
	return out
}

// named tells whether a signature names a person.
func named(s exhibit.Sign) bool { return len(people(s.Initials)) > 0 }

// samePerson tells whether a preparer is among the checkers.
func samePerson(prepared, checked string) bool {
	by := people(checked)
	return slices.ContainsFunc(people(prepared), func(p string) bool { return slices.Contains(by, p) })
}

// checkedText is the checker of a row: never one who checks their own work.
func checkedText(prepared, checked string) string {
	switch {
	case len(people(checked)) == 0:
		return "——"
	case samePerson(prepared, checked):
		return "not checked: same person"
	case len(people(prepared)) == 0:
		return checked + " (preparer not given)"
	}
	return checked
}

// personText is one who prepared, or a line for ink.
func personText(initials string) string {
	if len(people(initials)) == 0 {
		return "——"
	}
	return initials
}

// signText is a signature, or a line for ink.
func signText(verb string, s exhibit.Sign) string {
	if !named(s) {
		return verb + " ——"
	}
	return strings.TrimSpace(verb + " " + s.Initials + " " + s.Date)
}
