package archive

import (
	"fmt"
	"slices"
	"strings"

	"quoin/calc/motion"
)

// table is the body of a file of columns.
type table struct {
	f          *file
	separator  byte // ';', '\t', ',' or ' ' for blanks
	comma      bool // the decimal sign is a comma
	width      int  // fields in a row
	numeric    []bool
	first      int // line of the first row
	names      []string
	namesLine  int
	timeColumn int // -1 for none

	values  [][]float64 // by column; nil for columns of text
	printed []printed   // by column
	lines   []int32
}

// sampled is how many lines are looked at to find out how a file is written.
const sampled = 200

// newTable finds separator, width, decimal sign, first row and names.
func newTable(f *file) (*table, error) {
	t := &table{f: f, timeColumn: -1}
	type numbered struct {
		n    int
		text string
	}
	var lines []numbered
	more := false
	for n, line := range f.lines(1) {
		if len(lines) == sampled {
			more = true
			break
		}
		if strings.TrimSpace(line) != "" && !comment(line) {
			lines = append(lines, numbered{n, line})
		}
	}
	if len(lines) == 0 {
		return nil, fail("the file holds nothing but comments", "")
	}
	late := lines[len(lines)/2:] // past the header; the last line may be shorter
	if !more && len(late) > 1 {
		late = late[:len(late)-1]
	}
	for _, sep := range []byte{';', '\t', ',', ' '} {
		t.separator = sep
		texts := make([]string, len(late))
		for i, l := range late {
			texts[i] = l.text
		}
		if t.width = t.usualWidth(texts); t.width > 1 || sep == ' ' {
			break
		}
	}
	point := false
	for _, l := range late {
		point = point || strings.Contains(l.text, ".")
	}
	t.comma = !point && (t.separator == ';' || t.separator == '\t')
	t.numeric = make([]bool, t.width)
	any := false
	rows := make([][]string, 0, len(lines)-len(lines)/2)
	for _, l := range lines[len(lines)/2:] {
		rows = append(rows, t.fields(l.text))
	}
	for i, field := range t.fields(late[len(late)-1].text) {
		if i < t.width {
			t.numeric[i] = t.numbers(rows, i, field)
			any = any || t.numeric[i]
			if !t.numeric[i] && numberLike(field) {
				l := late[len(late)-1]
				return nil, t.bad(l.n, l.text, t.fields(l.text))
			}
		}
	}
	if !any {
		l := late[len(late)-1]
		return nil, f.at(l.n, "no numbers in this line", "the file is not a record of plain columns")
	}
	for i, l := range lines {
		switch row, err := t.isRow(l.n, l.text); {
		case err != nil:
			return nil, err
		case row:
			t.first = l.n
			if i > 0 {
				t.findNames(lines[i-1].n, lines[i-1].text)
			}
		case i >= headLines:
			return nil, f.at(l.n, "no row of numbers in the first fifty lines", "")
		}
		if t.first > 0 {
			break
		}
	}
	if t.first == 0 {
		return nil, f.at(lines[0].n, "no row of numbers", "the file is not a record of plain columns")
	}
	for n := t.first - 1; n >= 1 && t.names == nil; n-- { // names may stand in a comment
		if line := strings.TrimSpace(f.head[min(n, len(f.head))-1]); line != "" {
			if n <= len(f.head) && comment(line) && t.width > 1 {
				t.findNames(n, strings.TrimLeft(line, "#%!/* "))
				if !slices.ContainsFunc(t.names, func(s string) bool { name, _ := named(s); return isTime(name) || isIndex(name) }) {
					t.names = nil
				}
			}
			break
		}
	}
	return t, nil
}

// usualWidth is the number of fields that three lines in four have, or 0; for
// blanks it is that of most lines.
func (t *table) usualWidth(lines []string) (width int) {
	count := map[int]int{}
	for _, line := range lines {
		n := len(t.fields(line))
		if count[n]++; count[n] > count[width] || count[n] == count[width] && n > width {
			width = n
		}
	}
	if t.separator != ' ' && 4*count[width] < 3*len(lines) {
		return 0
	}
	return width
}

// isRow tells a row of numbers from a header line. Numbers that do not make a row are an
// error: a header of numbers cannot be told from data.
func (t *table) isRow(n int, line string) (bool, error) {
	fields := t.fields(line)
	good, all := 0, true
	for i, field := range fields {
		_, _, ok := t.number(field)
		all = all && ok
		if ok && i < t.width && t.numeric[i] {
			good++
		}
	}
	want := 0
	lead := -1
	for i, numeric := range t.numeric {
		if numeric {
			want++
			if lead < 0 {
				lead = i
			}
		}
	}
	if len(fields) == t.width {
		if good == want {
			return true, nil
		}
		if _, _, ok := t.number(fields[lead]); ok && good > 0 { // starts as a row does
			return false, t.bad(n, line, fields)
		}
		return false, nil
	}
	if all {
		return false, t.f.at(n, fmt.Sprintf("%d numbers in this line, %d in those below", len(fields), t.width),
			"if these are count and step, take the line out and give the step")
	}
	return false, nil
}

// numbers tells whether a column holds numbers: more of them than of words, where NaN
// and the like are neither. In between, the last row decides.
func (t *table) numbers(rows [][]string, i int, last string) bool {
	count, words, gaps := 0, 0, 0
	for _, row := range rows {
		if len(row) != t.width {
			continue
		}
		if _, _, ok := t.number(row[i]); ok {
			count++
		} else if gap(row[i]) {
			gaps++
		} else {
			words++
		}
	}
	if count == words {
		_, _, ok := t.number(last)
		return ok || count == 0 && gaps > 0 && last != ""
	}
	return count > words
}

// bad is the error about the first unreadable numeric field of a row.
func (t *table) bad(n int, line string, fields []string) error {
	offset := 0
	for i, field := range fields {
		if k := strings.Index(line[offset:], field); k >= 0 {
			offset += k
		}
		if _, _, ok := t.number(field); !ok && i < t.width && (t.numeric[i] || numberLike(field)) {
			return t.f.unreadable(n, line, offset, field)
		}
		offset = min(offset+len(field), len(line))
	}
	return t.f.at(n, "this is not a row of numbers", "")
}

// fields splits a line. An empty field at the end comes from a trailing separator.
func (t *table) fields(line string) (out []string) {
	if t.separator == ' ' {
		whole := line
		if strings.Contains(line, ",") { // a comma does not part what blanks part
			whole = strings.ReplaceAll(line, ",", "\x00")
		}
		out = make([]string, 0, t.width)
		tokens(whole, func(offset int, token string) bool {
			out = append(out, line[offset:offset+len(token)])
			return true
		})
		return out
	}
	out = strings.Split(line, string(t.separator))
	if strings.Contains(line, `"`) {
		out = quoted(line, t.separator)
	}
	for i := range out {
		out[i] = strings.TrimSpace(out[i])
	}
	if n := len(out); n > 1 && out[n-1] == "" {
		out = out[:n-1]
	}
	return out
}

// quoted splits at separators outside of quotation marks.
func quoted(line string, separator byte) (out []string) {
	var b strings.Builder
	inside := false
	for i := 0; i < len(line); i++ {
		switch c := line[i]; {
		case c == '"' && inside && i+1 < len(line) && line[i+1] == '"':
			b.WriteByte('"')
			i++
		case c == '"':
			inside = !inside
		case c == separator && !inside:
			out = append(out, b.String())
			b.Reset()
		default:
			b.WriteByte(c)
		}
	}
	return append(out, b.String())
}

// number reads a field as a number or a time of day.
func (t *table) number(field string) (value, place float64, ok bool) {
	if t.comma && strings.Count(field, ",") == 1 {
		field = strings.Replace(field, ",", ".", 1)
	}
	if value, place, ok = number(field); ok {
		return value, place, true
	}
	if strings.Contains(field, ":") {
		return clock(field)
	}
	return 0, 0, false
}

// findNames takes the headings of the columns from the line above the first row.
func (t *table) findNames(n int, line string) {
	fields := t.fields(line)
	if t.separator == ' ' {
		fields = nil
		for _, w := range strings.Fields(line) { // "NS [gal]" is one heading
			if k := len(fields) - 1; k >= 0 && strings.IndexByte("([{", w[0]) >= 0 {
				fields[k] += " " + w
			} else {
				fields = append(fields, w)
			}
		}
		if t.width == 1 {
			fields = []string{strings.TrimSpace(line)}
			if _, unit := named(line); unit == "" {
				return
			}
		}
	}
	if len(fields) == t.width {
		t.names, t.namesLine = fields, n
	}
}

// fill reads all rows.
func (t *table) fill() error {
	t.values = make([][]float64, t.width)
	t.printed = make([]printed, t.width)
	short := 0 // the line of a row that is too short; only the last may be
	for n, line := range t.f.lines(t.first) {
		if strings.TrimSpace(line) == "" {
			continue
		}
		if short > 0 {
			return t.f.at(short, fmt.Sprintf("fewer fields in this line than %d in those before", t.width), "a cut or joined file?")
		}
		fields := t.fields(line)
		if len(fields) != t.width {
			if len(fields) < t.width && t.separator == ' ' {
				for _, field := range fields {
					if _, _, ok := t.number(field); !ok {
						return t.f.at(n, "this is not a row of numbers", "two files joined, or notes among the numbers?")
					}
				}
				short = n
				continue
			}
			return t.f.at(n, fmt.Sprintf("%d fields in this line, %d in those before", len(fields), t.width), "a cut or joined file?")
		}
		for i, field := range fields {
			x, place, ok := t.number(field)
			if ok != t.numeric[i] {
				if t.numeric[i] {
					return t.bad(n, line, fields)
				}
				return t.mixed(i)
			}
			if ok {
				t.values[i] = append(t.values[i], x)
				t.printed[i].note(field, x, place)
			} else if numberLike(field) {
				return t.bad(n, line, fields)
			}
		}
		t.lines = append(t.lines, int32(n))
	}
	if short > 0 && !t.wraps() {
		return t.f.at(short, fmt.Sprintf("fewer fields in the last line than %d in those before", t.width), "the file is cut off")
	}
	return nil
}

// mixed is the error about a column that holds numbers and text: at the first cell of
// the rarer kind.
func (t *table) mixed(i int) error {
	var numbers, texts int
	var number, text *Error
	for n, line := range t.f.lines(t.first) {
		fields := t.fields(line)
		if len(fields) != t.width {
			continue
		}
		offset := 0
		for _, before := range fields[:i] {
			offset += max(strings.Index(line[offset:], before), 0) + len(before)
		}
		offset += max(strings.Index(line[offset:], fields[i]), 0)
		if _, _, ok := t.number(fields[i]); ok {
			if numbers++; number == nil {
				number = t.f.unreadable(n, line, offset, fields[i])
				number.Summary, number.Hint = fmt.Sprintf("column %d holds numbers in some rows and text in others", i+1), ""
			}
		} else if texts++; text == nil {
			text = t.f.unreadable(n, line, offset, fields[i])
		}
	}
	if number != nil && numbers < texts {
		return number
	}
	return text
}

// wraps tells whether the last row may be shorter: no names, no time.
func (t *table) wraps() bool {
	return t.names == nil && t.width > 1 && !rising(t.values[0])
}

// time finds the column of times and takes the step from it.
func (t *table) time(c *content) error {
	if t.width == 1 {
		return nil
	}
	free := t.channels()
	if t.names != nil {
		for _, i := range free {
			if name, _ := named(t.names[i]); isIndex(name) {
				t.values[i] = nil
			}
		}
		for _, i := range free {
			if name, _ := named(t.names[i]); isTime(name) && t.values[i] != nil {
				return t.take(c, i)
			}
		}
		free = t.channels()
	}
	for k, i := range free {
		if k > 1 {
			break // acceleration first and time second happens; more does not
		}
		if !rising(t.values[i]) {
			continue
		}
		if step, bad, _ := evenStep(t.values[i], t.printed[i]); bad < 0 && step == 1 && t.printed[i].whole() {
			if k+1 < len(free) && len(free) > 2 && rising(t.values[free[k+1]]) {
				t.values[i] = nil // 1, 2, 3, ... beside a time
				continue
			}
			return t.f.at(t.first, fmt.Sprintf("column %d counts 1, 2, 3: numbers of the samples or seconds?", i+1),
				"take the column out and give the step, or name it in a line above the numbers (t [s], or n)")
		}
		return t.take(c, i)
	}
	return nil
}

// take makes a column the time.
func (t *table) take(c *content, i int) error {
	times := t.values[i]
	scale := 1.0
	if t.names != nil {
		if _, unit := named(t.names[i]); timeScale(unit) > 0 {
			scale = timeScale(unit)
		}
	}
	if len(times) < 2 {
		return t.f.at(t.first, "one row alone has no time step", "a record needs two samples or more")
	}
	step, bad, why := evenStep(times, t.printed[i])
	if bad >= 0 {
		return t.f.at(int(t.lines[bad]), why, "an uneven record cannot be used; repair it or resample it at its source")
	}
	step, rounded := printedStep(times, step, t.printed[i])
	if step *= scale; rounded {
		c.origin.Warnings = append(c.origin.Warnings, motion.Warning{Code: "step-rounded", Line: t.first,
			Text: fmt.Sprintf("the times are rounded; the step is taken as %.9g s", step)})
	}
	if step > maxStep {
		return t.f.at(t.first, fmt.Sprintf("a step of %v s cannot be that of a record", step), "")
	}
	c.step, c.stepLine, c.fuzz = step, t.first, 2*t.printed[i].at(times[len(times)-1])*scale/float64(len(times)-1)
	c.origin.StepSource = "time column"
	t.timeColumn, t.values[i] = i, nil
	return nil
}

// channels is the columns that may be acceleration.
func (t *table) channels() (out []int) {
	for i, v := range t.values {
		if v != nil && i != t.timeColumn {
			out = append(out, i)
		}
	}
	return out
}

func isTime(name string) bool {
	switch strings.ToLower(name) {
	case "t", "time", "times", "zeit", "temps", "tiempo", "tempo", "elapsed", "elapsed time":
		return true
	}
	return false
}

func isIndex(name string) bool {
	switch strings.ToLower(name) {
	case "n", "no", "no.", "nr", "#", "i", "k", "index", "idx", "sample", "point", "row":
		return true
	}
	return false
}
