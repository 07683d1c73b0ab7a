package page

import (
	"fmt"
	"strings"

	"quoin/calc/exhibit"
)

// Hash is the hash of a policy.
var Hash = hash

// Estimates is the height of every item, by sheet, for comparing with a browser.
func Estimates(p *exhibit.Package, o Options) string {
	b := newBook(p, o)
	var out strings.Builder
	for _, s := range pack(b.items(), b.room()) {
		total := 0.0
		for _, it := range s {
			fmt.Fprintf(&out, "%s %.1f | ", it.name, it.high)
			total += it.high
		}
		fmt.Fprintf(&out, " TOTAL %.0f of %.0f\n", total, b.room())
	}
	return out.String()
}
