package block

import (
	"bytes"
	"cmp"
	"errors"
	"fmt"
	"regexp"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/document/formula"
	"quoin/calc/quantity"
)

// sheet is a table read from a data file: columns with a name and, where the
// head states it, a unit.
type sheet struct {
	path    string
	columns []column
}

// column is one column of a sheet.
type column struct {
	name  string
	unit  *quantity.Unit
	cells []cell
	at    diag.Range
}

type cell struct {
	text string
	at   diag.Range
}

// readSheet reads a CSV file named by a field: comma, semicolon or tab between
// columns, a head row "name [unit]", lines beginning with # left out. Every
// problem is reported where it stands in the file.
//
// A file without a head is read where the document declares its columns: names
// are those, in order, or numbers from 1 where only units are declared.
func (r *Run) readSheet(f field.Field, names, units field.Field) *sheet {
	data, full, err := r.Read(f.Text(), "table")
	if err != nil {
		r.Fail(f, "unreadable", "%s", err)
		return nil
	}
	data = bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	if !utf8.Valid(data) {
		r.Fail(f, "invalid-utf8", "%s is not UTF-8 text", full)
		return nil
	}
	s := &sheet{path: full}
	sep := ""
	for i, text := range strings.Split(strings.ReplaceAll(string(data), "\r\n", "\n"), "\n") {
		if t := strings.TrimSpace(text); t == "" || strings.HasPrefix(t, "#") {
			continue
		}
		if sep == "" {
			sep = separator(text)
		}
		cells, problem := split(text, sep, full, i+1)
		if problem != "" {
			r.Diags.Errorf("table", lineRange(full, i+1, text), "%s", problem)
			return nil
		}
		for _, c := range cells {
			if !r.seen(c.text, c.at) {
				return nil
			}
		}
		if s.columns == nil && numeric(cells) {
			switch {
			case len(names.List) == len(cells) && !numbered(names):
				for j, c := range cells {
					s.columns = append(s.columns, column{name: names.List[j].Text, at: c.at})
				}
			case units.Given:
				for j, c := range cells {
					s.columns = append(s.columns, column{name: strconv.Itoa(j + 1), at: c.at})
				}
			default:
				r.Diags.Errorf("table-head", lineRange(full, i+1, text), "the first row holds numbers; a head row is missing").WithHint("begin the file with a row of heads, name [unit], or declare the columns and units in the document")
				return nil
			}
		}
		if s.columns == nil {
			for _, c := range cells {
				col, err := head(c)
				if err != nil {
					r.Diags.Errorf("table-head", c.at, "%s", err).WithHint("%s", cmp.Or(unitHint(err), headForm))
					return nil
				}
				if old := s.find(col.name); old != nil {
					r.Diags.Errorf("table-head", c.at, "a column %s stands there already", col.name)
					return nil
				}
				s.columns = append(s.columns, col)
			}
			continue
		}
		for len(cells) > len(s.columns) && cells[len(cells)-1].text == "" {
			cells = cells[:len(cells)-1]
		}
		if len(cells) != len(s.columns) {
			r.Diags.Errorf("table", lineRange(full, i+1, text), "this row has %d cells, the head has %d", len(cells), len(s.columns))
			return nil
		}
		for j, c := range cells {
			s.columns[j].cells = append(s.columns[j].cells, c)
		}
	}
	if len(s.columns) == 0 || len(s.columns[0].cells) == 0 {
		r.Fail(f, "table", "%s has no rows", full).WithHint("a table has a head row  name [unit]  and rows of numbers")
		return nil
	}
	return s
}

// numbered tells whether columns are declared by number, not by name.
func numbered(names field.Field) bool {
	for _, n := range names.List {
		if _, err := strconv.Atoi(n.Text); err == nil {
			return true
		}
	}
	return false
}

// numeric tells whether every cell of a row is a number.
func numeric(cells []cell) bool {
	for _, c := range cells {
		if _, err := strconv.ParseFloat(c.text, 64); err != nil {
			return false
		}
	}
	return true
}

func separator(head string) string {
	for _, s := range []string{";", "\t", ","} {
		if strings.Contains(head, s) {
			return s
		}
	}
	return ","
}

// mostCells bounds a row.
const mostCells = 4096

// split cuts a line into cells, quoted ones included, each with its place.
func split(text, sep, file string, line int) ([]cell, string) {
	var out []cell
	start, counted, column := 0, 0, 1 // column is that of the byte counted
	for start <= len(text) {
		if len(out) == mostCells {
			return nil, fmt.Sprintf("this row has more than the %d cells that a row may have", mostCells)
		}
		rest := text[start:]
		lead := len(rest) - len(strings.TrimLeft(rest, " "))
		var value string
		var end int
		if strings.HasPrefix(rest[lead:], `"`) {
			var b strings.Builder
			i := lead + 1
			closed := false
			for i < len(rest) {
				if rest[i] == '"' {
					if i+1 < len(rest) && rest[i+1] == '"' {
						b.WriteByte('"')
						i += 2
						continue
					}
					closed = true
					i++
					break
				}
				b.WriteByte(rest[i])
				i++
			}
			if !closed {
				return nil, "a quoted cell is not closed"
			}
			value = b.String()
			end = strings.Index(rest[i:], sep)
			if strings.TrimSpace(strings.SplitN(rest[i:], sep, 2)[0]) != "" {
				return nil, "text stands after a quoted cell"
			}
			if end >= 0 {
				end += i
			}
		} else {
			end = strings.Index(rest, sep)
			value = rest
			if end >= 0 {
				value = rest[:end]
			}
			value = strings.TrimSpace(value)
		}
		from := start + lead
		column += utf8.RuneCountInString(text[counted:from])
		counted = from
		c := cell{text: value, at: diag.Range{File: file, Line: line, Column: column, EndLine: line}}
		c.at.EndColumn = c.at.Column + max(utf8.RuneCountInString(value), 1)
		out = append(out, c)
		if end < 0 {
			break
		}
		start += end + len(sep)
	}
	return out, ""
}

func lineRange(file string, line int, text string) diag.Range {
	return diag.Range{File: file, Line: line, Column: 1, EndLine: line, EndColumn: max(utf8.RuneCountInString(text), 1) + 1}
}

// seen refuses a text of a data file that holds a character which hides or
// reorders what a reader sees, as the document's own texts are.
func (r *Run) seen(text string, at diag.Range) bool {
	for _, c := range text {
		if c != '\t' && (unicode.IsControl(c) || unicode.In(c, unicode.Cf, unicode.Zl, unicode.Zp)) {
			r.Diags.Errorf("hidden-character", at, "the text holds the character U+%04X, which cannot be seen", c).WithHint("leave it out: it can make a reader see another text or number")
			return false
		}
	}
	return true
}

// head reads "name [unit]" or "name (unit)".
func head(c cell) (column, error) {
	col := column{name: c.text, at: c.at}
	for _, pair := range []string{"[]", "()"} {
		open, end := strings.Index(c.text, pair[:1]), strings.LastIndex(c.text, pair[1:])
		if open >= 0 && end > open {
			u, err := quantity.ParseUnit(c.text[open+1 : end])
			if err != nil {
				return col, err
			}
			col.name, col.unit = strings.TrimSpace(c.text[:open]), &u
			break
		}
	}
	return col, nil
}

// headForm is how a head is written.
const headForm = "a head is written  name [unit]"

// unitHint is what to write instead of what is no unit, or "".
func unitHint(err error) string {
	var e *quantity.UnitError
	if errors.As(err, &e) {
		return e.Hint
	}
	return ""
}

// quoted is a cell in a message, cut where it is long.
func quoted(text string) string {
	if r := []rune(text); len(r) > 40 {
		return strconv.Quote(string(r[:40])) + "…"
	}
	return strconv.Quote(text)
}

// begun tells whether a cell begins as a number does.
func begun(text string) bool {
	text = strings.TrimLeft(text, "+-−.")
	return text != "" && text[0] >= '0' && text[0] <= '9'
}

// unpadded is a row without the empty cells at its end.
func unpadded(row []cell) []cell {
	for len(row) > 1 && row[len(row)-1].text == "" {
		row = row[:len(row)-1]
	}
	return row
}

var decimalComma = regexp.MustCompile(`^[+-]?\d+,\d+$`)

// numberHint says what may be wrong with a cell that is no number, or "". Sep is
// what parts the cells, where only numbers are looked for.
func numberHint(text, sep string) string {
	_, err := strconv.ParseFloat(text, 64)
	words := strings.Fields(text)
	switch {
	case errors.Is(err, strconv.ErrRange):
		return "it is larger than any number that can be held here"
	case decimalComma.MatchString(text):
		return "decimals have a point"
	case sep == "" || len(words) < 2:
		return ""
	case quantity.IsSymbol(strings.FieldsFunc(words[1], func(c rune) bool { return strings.ContainsRune("/*^·", c) })[0]):
		return "the cells hold numbers alone; their unit is stated once, by the field unit"
	}
	return "between numbers stands a comma, a semicolon or a tab"
}

// find returns the column of a name, or nil.
func (s *sheet) find(name string) *column {
	for i := range s.columns {
		if strings.EqualFold(s.columns[i].name, name) {
			return &s.columns[i]
		}
	}
	return nil
}

// pick returns the column of a name or a number from 1, or nil.
func (s *sheet) pick(name string) *column {
	if c := s.find(name); c != nil {
		return c
	}
	if k, err := strconv.Atoi(name); err == nil && k >= 1 && k <= len(s.columns) {
		return &s.columns[k-1]
	}
	return nil
}

// numbers reads a column of quantities of one dimension, SI.
func (r *Run) numbers(c *column, dim quantity.Dim) ([]float64, quantity.Unit, bool) {
	unit := quantity.Unit{}
	if c.unit != nil {
		unit = *c.unit
		if !unit.Dim.Is(dim) {
			r.Diags.Errorf("dimension", c.at, "the column %s must be %s, its unit %s is %s", c.name, dim.Name(), unit.Pretty(), unit.Dim.Name())
			return nil, unit, false
		}
	}
	out := make([]float64, len(c.cells))
	for i, cl := range c.cells {
		tree, findings := formula.ParseExpr(cl.text, nil)
		var v quantity.Value
		if tree != nil && len(findings) == 0 && len(formula.Deps(tree)) == 0 {
			v, findings = formula.Evaluate(tree, nil)
		}
		switch {
		case tree == nil || len(findings) > 0 || len(v.SI) != 1:
			r.Diags.Errorf("table-number", cl.at, "%s is not a number", quoted(cl.text)).WithHint("%s", numberHint(cl.text, ""))
			return nil, unit, false
		case v.Unit.Text == "" && c.unit != nil:
			out[i] = unit.To(v.SI[0])
		case v.Dim.Is(dim):
			out[i] = v.SI[0]
			if unit.Text == "" {
				unit = v.Unit
			}
		default:
			r.Diags.Errorf("dimension", cl.at, "%s must be %s", cl.text, dim.Name()).WithHint("state the unit in the head of the column: %s [%s]", c.name, r.System().Preferred(dim).Text)
			return nil, unit, false
		}
	}
	return out, unit, true
}

// names lists the columns, for messages.
func (s *sheet) names() string {
	var out []string
	for _, c := range s.columns {
		out = append(out, c.name)
	}
	return fmt.Sprintf("the columns are %s", strings.Join(out, ", "))
}
