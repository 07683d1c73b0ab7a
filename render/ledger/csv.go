package ledger

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"strconv"
	"strings"
	"unicode"

	"quoin/calc/quantity"
)

// heads is the head of a table: "name [unit]", a name used before is numbered.
type heads struct {
	texts []string
	used  map[string]bool
}

func (h *heads) add(name string, u quantity.Unit) {
	text := name
	for n := 2; h.used[text]; n++ {
		text = fmt.Sprintf("%s (%d)", name, n)
	}
	if h.used == nil {
		h.used = map[string]bool{}
	}
	h.used[text] = true
	if u.Text != "" {
		text += " [" + u.Text + "]"
	}
	h.texts = append(h.texts, safe(text))
}

// number is the shortest decimal that read in u gives si again, or where the
// conversion cannot give it back, the shortest for si in u.
func number(si float64, u quantity.Unit) string {
	x := u.From(si)
	for _, digits := range []int{15, 16} {
		short, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', digits, 64), 64)
		if err == nil && u.To(short) == si {
			return quantity.Plain(short)
		}
	}
	return quantity.Plain(x)
}

// safe keeps a spreadsheet from running a text as a formula. A number and a
// lone sign stay as they are.
func safe(text string) string {
	trimmed := strings.TrimLeftFunc(text, func(r rune) bool { return unicode.IsSpace(r) || unicode.IsControl(r) || r == '\ufeff' })
	if len(trimmed) < 2 {
		return text
	}
	if _, err := strconv.ParseFloat(trimmed, 64); err == nil {
		return text
	}
	if strings.IndexAny(trimmed, "=+-@＝＋－＠") == 0 {
		return "'" + text
	}
	return text
}

func encodeCSV(rows [][]string) ([]byte, error) {
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	for _, row := range rows {
		if len(row) == 1 && row[0] == "" {
			// A line with one empty field would read back as no line at all.
			w.Flush()
			b.WriteString("\"\"\n")
			continue
		}
		if err := w.Write(row); err != nil {
			return nil, fmt.Errorf("ledger: %w", err)
		}
	}
	w.Flush()
	return b.Bytes(), w.Error()
}
