package exhibit

import (
	"cmp"
	"strings"
	"unicode/utf8"
)

// Naturally orders names as people count: a1, a2, a10.
func Naturally(a, b string) int {
	for a != "" && b != "" {
		da, db := leading(a), leading(b)
		if da == "" || db == "" {
			x, n := utf8.DecodeRuneInString(a)
			y, m := utf8.DecodeRuneInString(b)
			if x != y {
				return cmp.Compare(x, y)
			}
			a, b = a[n:], b[m:]
			continue
		}
		na, nb := strings.TrimLeft(da, "0"), strings.TrimLeft(db, "0")
		if c := cmp.Or(cmp.Compare(len(na), len(nb)), cmp.Compare(na, nb), cmp.Compare(len(da), len(db))); c != 0 {
			return c
		}
		a, b = a[len(da):], b[len(db):]
	}
	return cmp.Compare(len(a), len(b))
}

// leading is the digits a text begins with.
func leading(text string) string {
	return text[:len(text)-len(strings.TrimLeft(text, "0123456789"))]
}
