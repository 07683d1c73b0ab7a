package archive

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"

	"quoin/calc/motion"
)

// The AT2 family: header lines (mostly four) with archive, event and station,
// quantity and unit, count and step; then numbers, several in a line, to the end.

var (
	at2Quantity = regexp.MustCompile(`(?i)TIME\s+(?:SERIES|HISTORY)\s+IN\s+UNITS\s+OF\s*`)
	at2Names    = regexp.MustCompile(`(?i)\b(NPTS|DT)\b`)
	at2Filter   = regexp.MustCompile(`(?i)(\d+\s+POLE\s+@.*|-?\d+\s+POLE\s+@.*|FILTER\s+POINTS.*)`)
	at2Date     = regexp.MustCompile(`^\s*\d{1,4}[/-]\d{1,2}[/-]\d{1,4}`)
	at2Number   = regexp.MustCompile(`[-+]?(?:\d+\.?\d*|\.\d+)(?:[EeDd][-+]?\d+)?`)
)

// at2Head is how many lines are searched for the header.
const at2Head = 10

func isAT2(f *file) bool {
	for _, line := range f.head[:min(len(f.head), at2Head)] {
		if !comment(line) && (at2Quantity.MatchString(line) || len(names(line)) == 2) {
			return true
		}
	}
	return false
}

// names is which of NPTS and DT a line names, in order, each once.
func names(line string) (out []string) {
	for _, m := range at2Names.FindAllString(line, -1) {
		if m = strings.ToUpper(m); len(out) == 0 || out[0] != m && len(out) < 2 {
			out = append(out, m)
		}
	}
	return out
}

func readAT2(f *file) (*content, error) {
	c := &content{origin: motion.Origin{StepSource: "header"}}
	t := trace{}
	count, countLine := 0, 0
	for i, line := range f.head[:min(len(f.head), at2Head)] {
		n := i + 1
		if m := at2Filter.FindString(line); m != "" {
			c.origin.Filter = strings.TrimSpace(m)
		}
		if loc := at2Quantity.FindStringIndex(line); loc != nil {
			before, after := strings.ToUpper(line[:loc[0]]), line[loc[1]:]
			for _, other := range []string{"VELOCITY", "DISPLACEMENT"} {
				if strings.Contains(before, other) {
					return nil, f.at(n, "the file holds "+strings.ToLower(other)+", not acceleration", "take the acceleration file of the record")
				}
			}
			t.unit, t.unitLine = at2Unit(after), n
		}
		numbers, ok, err := at2Count(f, n, line)
		if err != nil {
			return nil, err
		}
		if !ok && i > 0 && t.unitLine > 0 {
			numbers, ok = barePair(line)
		}
		if ok {
			count, c.step, countLine, c.stepLine = int(numbers[0]), numbers[1], n, n
			if !(c.step > 0 && c.step <= maxStep) {
				return nil, f.at(n, fmt.Sprintf("a step of %v s cannot be that of a record", c.step), "")
			}
			break
		}
	}
	if countLine == 0 {
		return nil, f.at(1, "no count and step (NPTS, DT) in the first ten lines", "the header is damaged; as bare numbers the file can be read with format values, step and unit")
	}
	c.origin.Header = f.head[:countLine]
	at2Origin(&c.origin, f.head[:countLine])
	t.component = c.origin.Component
	if t.name = t.component; t.name == "" {
		t.name = "acceleration"
	}
	if err := t.fill(f, countLine+1); err != nil {
		return nil, err
	}
	c.origin.FileSamples = len(t.values)
	if len(t.values) < count {
		return nil, fail(fmt.Sprintf("the file is cut off: %d samples of %d", len(t.values), count), "take the record from its source again")
	}
	if extra := len(t.values) - count; extra > 0 {
		if extra == count && rising(every(t.values, 2)) {
			return nil, f.at(t.lineOf(0), "the numbers look like pairs of time and acceleration, not like a row of samples", "read the file with format columns")
		}
		text := fmt.Sprintf("the first %d of %d samples are used, as the header counts", count, len(t.values))
		if extra%count == 0 {
			text += fmt.Sprintf("; the file may hold %d components one after another", extra/count+1)
		}
		c.origin.Warnings = append(c.origin.Warnings, motion.Warning{Code: "sample-count", Line: countLine, Text: text})
		t.values, t.lines = t.values[:count], t.lines[:count]
	}
	c.traces = []trace{t}
	return c, nil
}

// at2Count reads count and step from the line that names both. A name followed by =
// or directly by a number means that number; names after the numbers pair with
// them in order.
func at2Count(f *file, n int, line string) (out [2]float64, ok bool, err error) {
	order := names(line)
	if len(order) != 2 {
		return out, false, nil
	}
	bad := func(what string) error {
		return f.at(n, "the "+what+" cannot be read from the header", "NPTS wants a whole number above 0, DT a number")
	}
	texts := map[string]string{}
	first := at2Names.FindStringIndex(line)
	if m := at2Number.FindAllString(line[:first[0]], -1); len(m) >= 2 {
		texts[order[0]], texts[order[1]] = m[len(m)-2], m[len(m)-1]
	}
	for _, loc := range at2Names.FindAllStringIndex(line, -1) {
		name := strings.ToUpper(line[loc[0]:loc[1]])
		rest := strings.TrimLeft(line[loc[1]:], " \t=:")
		if m := at2Number.FindStringIndex(rest); m == nil || m[0] != 0 {
			continue
		} else if text := rest[:m[1]]; texts[name] == "" {
			texts[name] = text
		} else if !sameNumber(texts[name], text) {
			return out, false, f.at(n, fmt.Sprintf("the header says two values of %s, %s and %s", name, texts[name], text), "the header is damaged; take the record from its source again")
		}
	}
	count, err := strconv.ParseFloat(texts["NPTS"], 64)
	if err != nil || count < 1 || count != math.Floor(count) || count > 1e15 {
		return out, false, bad("count NPTS")
	}
	step, _, read := number(texts["DT"])
	if !read {
		return out, false, bad("step DT")
	}
	return [2]float64{count, step}, true, nil
}

func sameNumber(a, b string) bool {
	x, _, ok1 := number(a)
	y, _, ok2 := number(b)
	return ok1 && ok2 && x == y
}

// barePair reads "24 0.0100": a whole number and a step below 1.
func barePair(line string) (out [2]float64, ok bool) {
	fields := strings.Fields(strings.ReplaceAll(line, ",", " "))
	if len(fields) != 2 || strings.Contains(fields[0], ".") {
		return out, false
	}
	count, _, ok1 := number(fields[0])
	step, _, ok2 := number(fields[1])
	return [2]float64{count, step}, ok1 && ok2 && count >= 1 && count == math.Floor(count) && step > 0 && step < 1
}

// at2Unit is the unit at the start of the text after "IN UNITS OF".
func at2Unit(text string) string {
	text = strings.TrimSpace(text)
	word, _, _ := strings.Cut(text, " ")
	word = strings.Trim(word, ".,;:()")
	if word == "" {
		return ""
	}
	return word
}

// at2Origin reads "event, date, station, component"; a station may hold commas.
func at2Origin(o *motion.Origin, head []string) {
	if len(head) < 3 {
		return
	}
	fields := strings.Split(head[1], ",")
	for i := range fields {
		fields[i] = strings.TrimSpace(fields[i])
	}
	if len(fields) < 3 {
		return
	}
	o.Event, o.Component = fields[0], fields[len(fields)-1]
	fields = fields[1 : len(fields)-1]
	if at2Date.MatchString(fields[0]) {
		o.Date, fields = fields[0], fields[1:]
	}
	o.Station = strings.Join(fields, ", ")
}

// every is the first value and each k-th after it.
func every(values []float64, k int) (out []float64) {
	for i := 0; i < len(values); i += k {
		out = append(out, values[i])
	}
	return out
}

// fill reads all numbers from a line on, row by row.
func (t *trace) fill(f *file, from int) error {
	for n, line := range f.lines(from) {
		var err error
		tokens(line, func(offset int, token string) bool {
			x, _, ok := number(token)
			if !ok {
				err = f.unreadable(n, line, offset, token)
				return false
			}
			t.values = append(t.values, x)
			t.lines = append(t.lines, int32(n))
			return true
		})
		if err != nil {
			return err
		}
	}
	if len(t.values) == 0 {
		return fail("the file holds no numbers after its header", "")
	}
	return nil
}
