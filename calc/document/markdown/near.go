package markdown

import (
	"strings"
	"unicode"

	"golang.org/x/text/unicode/norm"

	"quoin/calc/diag"
)

// A fence that is meant as a block and does not begin with the word calc would be
// a listing, and its checks lost without a word. So what comes near is an error.

// lookalikes are letters that are read as those of calc, or as letters of a kind.
var lookalikes = strings.NewReplacer(
	"а", "a", "ɑ", "a", "α", "a", "с", "c", "ϲ", "c", "ⅽ", "c", "ϲ", "c", "ӏ", "l", "ⅼ", "l", "ɩ", "l", "ι", "l", "1", "l", "|", "l", "і", "l",
	"о", "o", "ο", "o", "0", "o", "е", "e", "р", "p", "х", "x", "у", "y", "ѕ", "s", "ԁ", "d", "м", "m")

// plainWord is a word as a reader takes it: without characters that do not show,
// without accents, in small letters, lookalikes as what they look like.
func plainWord(s string) string {
	s = strings.Map(func(r rune) rune {
		if unicode.In(r, unicode.Mn, unicode.Me, unicode.Cf, unicode.Cc) || hides(r) {
			return -1
		}
		return r
	}, norm.NFKD.String(s))
	return lookalikes.Replace(strings.ToLower(s))
}

// meansBlock tells whether an info string that is no calc fence was meant as one.
func meansBlock(words []word, kind func(string) bool) bool {
	if len(words) == 0 {
		return false
	}
	known := func(s string) bool { return kind(s) || kind(plainWord(s)) }
	first := strings.Trim(plainWord(words[0].text), "{}[]():=.,;_-/*\"'<>")
	second := len(words) > 1 && known(words[1].text)
	if strings.HasPrefix(first, "calc") || diag.Distance(first, "calc") <= 1 || kind(first) {
		return true
	}
	if second && (diag.Distance(first, "calc") <= 2 || strings.Contains(first, "calc")) {
		return true
	}
	// Both in one word: cacl-formula.
	if head, tail, ok := cutAny(first, ":=.,;_-/"); ok {
		return known(tail) && diag.Distance(head, "calc") <= 2
	}
	return false
}

func cutAny(s, chars string) (before, after string, found bool) {
	i := strings.IndexAny(s, chars)
	if i < 0 {
		return s, "", false
	}
	return s[:i], strings.TrimLeft(s[i:], chars), true
}
