// Package archive reads files of recorded ground acceleration.
//
// A file is recognised by what it says, not by its name. What it does not say is
// never guessed: a missing unit, a missing step or an open choice of channel is
// an error that asks for it, and a sample is never dropped nor filled in. What the
// caller states wins over the file, with a warning on the record where they differ.
//
// Formats that are not read are recognised all the same, to be refused by name.
package archive

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"quoin/calc/motion"
	"quoin/calc/quantity"
)

// Options is what the caller knows about a file. The zero value asks the file for everything.
type Options struct {
	Format  string  // a name in Formats; "" or "auto" recognises it
	Channel string  // a channel by a name that only one has, or by number counted from 1
	Step    float64 // s; 0 takes it from the file
	Unit    string  // "g", "cm/s^2", "gal", "m/s^2", "mm/s^2"; "" takes it from the file
}

// Channel is one row of acceleration in a file.
type Channel struct {
	Number  int // from 1, over the acceleration channels
	Name    string
	Unit    string // as written in the file; "" where it states none
	Samples int
	Line    int // of the first sample
}

// MaxSize is the largest file that is read, in bytes.
const MaxSize = 256 << 20

// Read reads one channel of a record file. The name of the file only serves in
// messages. Every error is an *Error.
func Read(name string, data []byte, ask Options) (*motion.Record, error) {
	c, err := open(name, data, ask)
	if err != nil {
		return nil, err
	}
	t, err := c.choose(ask.Channel)
	if err != nil {
		return nil, err
	}
	return c.record(t, ask)
}

// Channels lists the acceleration channels of a file, so that one can be chosen.
// Unit, step and channel of ask do not matter.
func Channels(name string, data []byte, ask Options) ([]Channel, error) {
	c, err := open(name, data, ask)
	if err != nil {
		return nil, err
	}
	out := make([]Channel, len(c.traces))
	for i, t := range c.traces {
		out[i] = Channel{Number: i + 1, Name: t.name, Unit: t.unit, Samples: len(t.values), Line: t.lineOf(0)}
	}
	return out, nil
}

// content is what a format finds in a file.
type content struct {
	file     *file
	origin   motion.Origin
	step     float64 // 0 if not stated
	fuzz     float64 // by how much the step may be off, from the rounding of the times
	stepLine int
	traces   []trace
}

// trace is one channel in the unit of the file.
type trace struct {
	name, component string
	unit            string // as written
	unitLine        int
	values          []float64
	lines           []int32 // line of each value
}

func (t trace) lineOf(i int) int { return int(t.lines[i]) }

// open recognises and parses a file.
func open(name string, data []byte, ask Options) (*content, error) {
	f, err := newFile(name, data)
	if err != nil {
		return nil, err
	}
	format, err := f.format(ask.Format)
	if err != nil {
		return nil, err
	}
	c, err := format.read(f)
	if err != nil {
		return nil, err
	}
	c.file, c.origin.Format = f, format.Name
	return c, nil
}

// format is the one asked for, or the first that recognises the file.
func (f *file) format(name string) (Format, error) {
	if name != "" && !strings.EqualFold(name, "auto") {
		for _, format := range Formats {
			if strings.EqualFold(format.Name, name) && format.read != nil {
				return format, nil
			}
		}
		var names []string
		for _, format := range Formats {
			if format.read != nil {
				names = append(names, format.Name)
			}
		}
		return Format{}, &Error{Summary: "no format " + strconv.Quote(name) + " is read", Hint: "formats: auto, " + strings.Join(names, ", "), Format: true}
	}
	for _, format := range Formats {
		if format.detect == nil || !format.detect(f) {
			continue
		}
		if format.read == nil {
			return Format{}, f.at(1, "this is "+format.Doc, format.hint)
		}
		return format, nil
	}
	panic("archive: the last format recognises everything")
}

// choose is the channel asked for.
func (c *content) choose(ask string) (trace, error) {
	var names, same []string
	named := 0
	for i, t := range c.traces {
		if ask != "" && (strings.EqualFold(ask, t.name) || strings.EqualFold(ask, t.component)) {
			named, same = i, append(same, strconv.Itoa(i+1))
		}
		names = append(names, fmt.Sprintf("%d %s", i+1, t.name))
	}
	if len(same) == 1 {
		return c.traces[named], nil
	}
	if n, err := strconv.Atoi(ask); err == nil && n >= 1 && n <= len(c.traces) {
		return c.traces[n-1], nil
	}
	list := "channels: " + strings.Join(names, ", ")
	if len(same) > 1 {
		return trace{}, ofChannel(fmt.Sprintf("the channels %s are all named %q; choose by number", strings.Join(same, ", "), ask), list)
	}
	if ask != "" {
		return trace{}, ofChannel("the file has no channel "+strconv.Quote(ask), list)
	}
	if len(c.traces) > 1 {
		return trace{}, fail(fmt.Sprintf("the file has %d channels; choose one", len(c.traces)), list)
	}
	return c.traces[0], nil
}

// record is a channel in SI, with step and unit settled and all checks made.
func (c *content) record(t trace, ask Options) (*motion.Record, error) {
	o := c.origin
	warn := func(code string, line int, format string, args ...any) {
		o.Warnings = append(o.Warnings, motion.Warning{Code: code, Line: line, Text: fmt.Sprintf(format, args...)})
	}
	step := c.step
	switch {
	case ask.Step != 0:
		if !(ask.Step > 0) || math.IsInf(ask.Step, 0) {
			return nil, fail(fmt.Sprintf("a step of %v s", ask.Step), "give the time between samples in seconds")
		}
		if step > 0 && math.Abs(step-ask.Step) > math.Max(1e-6*step, c.fuzz) {
			warn("step-contradicts", c.stepLine, "the step given, %v s, is used; the file says %v s", ask.Step, step)
		}
		step, o.StepSource = ask.Step, "given"
	case step == 0:
		return nil, fail("the file does not say its time step", "give the step")
	}
	scale, stated := unitScale(t.unit)
	o.UnitInFile = t.unit
	switch {
	case ask.Unit != "":
		s, err := askedUnit(ask.Unit)
		if err != nil {
			return nil, err
		}
		if stated && math.Abs(scale-s) > 1e-9*s {
			warn("unit-contradicts", t.unitLine, "the unit given, %s, is used; the file says %s", ask.Unit, t.unit)
		}
		scale = s
		if !stated {
			o.UnitInFile = ask.Unit
		}
	case t.unit == "":
		return nil, fail("the file does not say the unit of its acceleration", `give the unit, such as "g", "cm/s^2" or "m/s^2"`)
	case !stated:
		return nil, c.file.at(t.unitLine, t.unit+" is not a unit of acceleration that can be taken as it stands", "give the unit")
	}
	if err := c.missing(t); err != nil {
		return nil, err
	}
	a := make([]float64, len(t.values))
	peak := 0.0
	for i, x := range t.values {
		a[i] = x * scale
		peak = math.Max(peak, math.Abs(a[i]))
	}
	r, err := motion.New(a, step)
	if err != nil {
		return nil, c.file.at(t.lineOf(0), err.Error(), "")
	}
	if peak == 0 {
		return nil, c.file.at(t.lineOf(0), "every sample of the channel is zero", "another channel, or a file that was never filled?")
	}
	if g := peak / quantity.Gravity; g > 3 {
		warn("unlikely-size", 0, "the largest acceleration is %.3g g: was another unit meant than %s (gal or counts read as g, g read twice)?", g, o.UnitInFile)
	} else if g < 1e-4 {
		warn("unlikely-size", 0, "the largest acceleration is %.3g g: was another unit meant than %s (g read as m/s² or gal)?", g, o.UnitInFile)
	}
	o.Channel, o.Component = t.name, t.component
	r.Origin = o
	return r, nil
}

// missing refuses values that stand for "not known": exact -999 and the like that stand
// out ten times above all others.
func (c *content) missing(t trace) error {
	marks := []float64{-999, -9999, 999999}
	others := 0.0
	var at []int
	for i, x := range t.values {
		if slices.Contains(marks, x) {
			at = append(at, i)
		} else {
			others = math.Max(others, math.Abs(x))
		}
	}
	if len(at) == 0 || others*10 >= 999 {
		return nil
	}
	var lines []string
	for _, i := range at[:min(len(at), 5)] {
		lines = append(lines, strconv.Itoa(t.lineOf(i)))
	}
	if len(at) > 5 {
		lines = append(lines, "...")
	}
	return c.file.at(t.lineOf(at[0]), fmt.Sprintf("%d missing samples (%v) in lines %s", len(at), t.values[at[0]], strings.Join(lines, ", ")),
		"a sample cannot be left out nor set to zero; repair the record at its source")
}
