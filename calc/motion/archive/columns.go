package archive

import (
	"fmt"
	"regexp"
	"slices"
	"strings"

	"quoin/calc/motion"
)

// Plain columns: header lines, perhaps a row of names, then rows of a constant
// number of fields. One column is a time where it rises evenly; the others
// are channels. Without a time and without names, rows are one wrapped channel.

func readColumns(f *file) (*content, error) {
	t, err := newTable(f)
	if err != nil {
		return nil, err
	}
	if err := t.fill(); err != nil {
		return nil, err
	}
	c := &content{origin: motion.Origin{Header: f.head[:min(len(f.head), t.first-1)], FileSamples: len(t.lines)}}
	if err := t.time(c); err != nil {
		return nil, err
	}
	header := t.header(c)
	if c.step == 0 && t.timeColumn < 0 {
		switch free := t.channels(); {
		case len(free) == 1 || t.names != nil:
		case t.width == 2:
			return nil, f.at(t.first, "two numbers in a line may be two channels or one channel wrapped; the first column is no time (it does not rise evenly)",
				"read the file with format values (row by row), or name the columns in a line above the numbers")
		default:
			return nil, errWrapped
		}
	}
	for _, i := range t.channels() {
		name, unit := fmt.Sprintf("column %d", i+1), ""
		line := t.first
		if t.names != nil {
			if name, unit = named(t.names[i]); name == "" {
				name = fmt.Sprintf("column %d", i+1)
			}
			line = t.namesLine
		}
		if _, ok := unitScale(unit); unit != "" && !ok && strings.Contains("cm/s m/s mm/s in/s ft/s cm/sec m/sec in/sec cm m mm in ft", unitKey(unit)) {
			continue // velocity or displacement
		}
		if unit == "" {
			unit, line = header.unit, header.line
		}
		c.traces = append(c.traces, trace{name: name, component: name, unit: unit, unitLine: line, values: t.values[i], lines: t.lines})
	}
	if len(c.traces) == 0 {
		return nil, f.at(t.first, "the file has no column of acceleration", "velocities and displacements are not read")
	}
	return c, nil
}

// errWrapped says that columns without time and names are one row of values.
var errWrapped = fail("the rows are one wrapped channel", "")

// readAny reads what no other format claims: columns, or values wrapped in rows.
func readAny(f *file) (*content, error) {
	c, err := readColumns(f)
	if err == error(errWrapped) {
		c, err = readValues(f)
		if err == nil {
			c.origin.Warnings = append(c.origin.Warnings, motion.Warning{Code: "wrapped", Line: c.traces[0].lineOf(0),
				Text: "several numbers in a line without a time and without names were read row by row as one channel"})
		}
	}
	return c, err
}

// readValues reads bare numbers row by row as one channel, however many a line holds.
func readValues(f *file) (*content, error) {
	first := 0
	for n, line := range f.lines(1) {
		if n > headLines {
			break
		}
		if !comment(line) && strings.TrimSpace(line) != "" && allNumbers(line) {
			first = n
			break
		}
	}
	if first == 0 {
		return nil, fail("no line of numbers in the first fifty lines", "")
	}
	c := &content{origin: motion.Origin{Header: f.head[:first-1]}}
	header := headerFacts(f.head[:first-1])
	c.step, c.stepLine = header.step, header.stepLine
	if c.step > 0 {
		c.origin.StepSource = "header"
	}
	t := trace{name: "acceleration", unit: header.unit, unitLine: header.line}
	if err := t.fill(f, first); err != nil {
		return nil, err
	}
	c.origin.FileSamples = len(t.values)
	c.traces = []trace{t}
	return c, nil
}

func allNumbers(line string) bool {
	all := true
	tokens(line, func(_ int, token string) bool {
		_, _, ok := number(token)
		all = all && ok
		return all
	})
	return all
}

// comment tells lines that only people read.
func comment(line string) bool {
	line = strings.TrimSpace(line)
	for _, p := range []string{"#", "%", "!", "//", "*"} {
		if strings.HasPrefix(line, p) && strings.Trim(line, "*") != "" && !strings.HasPrefix(line, "#N/A") {
			return true
		}
	}
	return false
}

// facts is what header lines say in passing.
type facts struct {
	unit     string
	line     int
	step     float64
	stepLine int
}

var (
	statedStep = regexp.MustCompile(`(?i)(?:\bdt|\bdelta[ _]?t|\btime[ _]?step|\bsampling[ _](?:interval|period|step)|\bstep)\s*(?:\(s\)|\[s\])?\s*[:=]?\s*([0-9.]+(?:[EeDd][+-]?\d+)?)\s*(ms|msec|s|sec|seconds)?\b`)
	statedRate = regexp.MustCompile(`(?i)(?:\bsampling[ _]?(?:rate|frequency)|\bsample[ _]?rate|\bsps)\s*(?:\(hz\)|\[hz\])?\s*[:=]?\s*([0-9.]+)`)
)

// headerFacts looks for a unit and a step in header lines. Two units that differ are
// none: the caller must say.
func headerFacts(head []string) (out facts) {
	for i, line := range head {
		if u := unitIn(line); u != "" {
			a, _ := unitScale(out.unit)
			b, _ := unitScale(u)
			if out.unit != "" && a != b {
				out.unit = "either " + out.unit + " or " + u + " (the header says both)"
			} else if out.unit == "" {
				out.unit, out.line = u, i+1
			}
		}
		if out.step > 0 {
			continue
		}
		if m := statedStep.FindStringSubmatch(line); m != nil {
			if x, _, ok := number(m[1]); ok && x > 0 {
				if s := timeScale(m[2]); s > 0 {
					x *= s
				}
				out.step, out.stepLine = x, i+1
			}
		} else if m := statedRate.FindStringSubmatch(line); m != nil {
			if x, _, ok := number(m[1]); ok && x > 0 {
				out.step, out.stepLine = 1/x, i+1
			}
		}
		if out.step > maxStep {
			out.step = 0
		}
	}
	return out
}

// header takes unit and step from the lines above the numbers.
func (t *table) header(c *content) facts {
	head := c.origin.Header
	if t.names != nil && t.width > 1 { // the row of names speaks for its columns alone
		head = slices.Clone(head)
		head[t.namesLine-1] = ""
	}
	h := headerFacts(head)
	if c.step == 0 && h.step > 0 {
		c.step, c.stepLine, c.origin.StepSource = h.step, h.stepLine, "header"
	}
	return h
}
