package formula

import (
	"regexp"
	"strings"

	"quoin/calc/expr"
)

var compares = regexp.MustCompile(` *(<=|>=|==|<|>) *`)

// normal is the text of a check with one blank for any run of them and around
// what compares.
func normal(text string) string {
	return strings.TrimSpace(compares.ReplaceAllString(strings.Join(strings.Fields(text), " "), " $1 "))
}

// Key is the same for two trees that say the same, however they are spaced.
func Key(n *expr.Node) string {
	if n == nil {
		return ""
	}
	var b strings.Builder
	b.WriteString(string(n.Op) + " " + n.Text + " " + n.Unit)
	for _, a := range n.Args {
		b.WriteString("(" + Key(a) + ")")
	}
	return b.String()
}
