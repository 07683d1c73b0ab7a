package formula

import (
	"slices"
	"strings"
	"unicode"

	"golang.org/x/text/unicode/norm"
)

// keywords are the words that are no names and no functions.
var keywords = []string{"pi", "as", "within", "and", "or", "not"}

// Reserved tells whether a normalised name is a word of the language.
func Reserved(name string) bool {
	_, ok := functions[name]
	return ok || slices.Contains(keywords, name)
}

// greek spells the letters out. Capitals follow from the small ones.
var greek = map[rune]string{
	'α': "alpha", 'β': "beta", 'γ': "gamma", 'δ': "delta", 'ε': "epsilon", 'ζ': "zeta", 'η': "eta", 'θ': "theta",
	'ι': "iota", 'κ': "kappa", 'λ': "lambda", 'μ': "mu", 'ν': "nu", 'ξ': "xi", 'ο': "omicron", 'π': "pi",
	'ρ': "rho", 'σ': "sigma", 'ς': "sigma", 'τ': "tau", 'υ': "upsilon", 'φ': "phi", 'χ': "chi", 'ψ': "psi", 'ω': "omega",
}

// Normal is the one spelling of a name: NFKC, Greek letters spelt out (ω as
// omega, Δ as Delta).
func Normal(name string) string {
	if ascii(name) {
		return name
	}
	var b strings.Builder
	for _, r := range norm.NFKC.String(name) {
		small, ok := greek[unicode.ToLower(r)]
		switch {
		case !ok:
			b.WriteRune(r)
		case unicode.IsUpper(r):
			b.WriteString(strings.ToUpper(small[:1]) + small[1:])
		default:
			b.WriteString(small)
		}
	}
	return b.String()
}

func ascii(s string) bool {
	for i := range len(s) {
		if s[i] >= 0x80 {
			return false
		}
	}
	return true
}

// ValidName tells whether a word, written or normalised, is made of Latin and
// Greek letters, digits and _, and starts with a letter.
func ValidName(name string) bool {
	first := true
	for _, r := range name {
		if !namePart(r) || first && !letter(r) {
			return false
		}
		first = false
	}
	return !first
}

// letter tells whether a rune, as written, is a letter of a name: one whose
// compatible form is a Latin letter or a Greek one that can be spelt out.
func letter(r rune) bool {
	if r < 0x80 {
		return r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z'
	}
	if !unicode.IsLetter(r) || raisedLetter(r) {
		return false
	}
	for _, c := range norm.NFKC.String(string(r)) {
		if strings.ContainsRune(twins, c) {
			return false
		}
		_, g := greek[unicode.ToLower(c)]
		if !g && !(unicode.IsLetter(c) && unicode.Is(unicode.Latin, c)) && !unicode.Is(unicode.Mn, c) {
			return false
		}
	}
	return true
}

// twins are the Greek letters that look like Latin ones: a name of them would
// read as another name.
const twins = "ΑΒΕΖΗΙΚΜΝΟΡΤΥΧοϲϹ"

// raisedLetter tells whether a letter is written raised, as in xⁿ, which is no
// name xn.
func raisedLetter(r rune) bool {
	lowered := r >= 'ᵢ' && r <= 'ᵪ' || r >= 'ₐ' && r <= 'ₜ' || r == 'ⱼ'
	return !lowered && (unicode.Is(unicode.Lm, r) || r == 'ª' || r == 'º')
}

// namePart tells whether a rune may stand in a name. Lowered digits may (V₁ is
// V1); raised ones may not, for x² would be read as the name x2. Accents that
// stand apart from their letter are part of the name.
func namePart(r rune) bool {
	if r < 0x80 {
		return letter(r) || r >= '0' && r <= '9' || r == '_'
	}
	return letter(r) || r >= '₀' && r <= '₉' || r >= '０' && r <= '９' || r >= 0x300 && r <= 0x36f
}

// foreign names the trouble with a letter of another script.
func foreign(r rune) string {
	if strings.ContainsRune(twins, r) {
		return "the letter " + string(r) + " is Greek and looks like a Latin one"
	}
	for _, s := range []struct {
		name  string
		table *unicode.RangeTable
	}{{"Cyrillic", unicode.Cyrillic}, {"Armenian", unicode.Armenian}, {"Greek", unicode.Greek}, {"Hebrew", unicode.Hebrew}, {"Cherokee", unicode.Cherokee}} {
		if unicode.Is(s.table, r) {
			return "the letter " + string(r) + " is " + s.name
		}
	}
	return "the letter " + string(r) + " is neither Latin nor Greek"
}
