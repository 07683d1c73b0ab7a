package exhibit

import (
	"slices"
	"strings"
	"unicode"

	"golang.org/x/text/cases"
	"golang.org/x/text/unicode/norm"
)

// nobody is what people write where a name should stand. Its words make a
// signature void wherever they stand in it.
var nobody = []string{"pending", "tbd", "tba", "tbc", "none", "nobody", "unknown", "unchecked", "not", "yet", "later", "nil", "null", "todo", "open", "blank", "n/a", "n.a."}

// answers are no persons where they stand alone; with a date beside, they are
// taken for initials.
var answers = []string{"no", "yes", "ok", "na"}

// Nobody tells whether a signature as written names no person.
func Nobody(text string) bool {
	return len(People(text)) == 0 || slices.Contains(answers, strings.ToLower(strings.TrimSpace(text)))
}

// People are the persons a text names: for each its letters alone, without regard
// to case, points and blanks, so that "M.K." and "m k" are one. None if it holds no
// letter or says that there is none.
func People(text string) []string {
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
