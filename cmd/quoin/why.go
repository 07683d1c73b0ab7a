package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"path/filepath"
	"slices"
	"strings"

	"quoin/calc/document"
)

// Every build that has a cache leaves in it what each block, line and check read and
// gave, so that the next one can say what has changed since: --why.

// because is why a block, a line or a check gave what it gave.
type because struct {
	document.Step
	// Changed is what it read that is not what it was in the last build.
	Changed []change `json:"changed"`
	Known   bool     `json:"known"`        // there was a build before, of this program
	New     bool     `json:"new"`          // and this was not in it
	Moved   bool     `json:"gave_another"` // what it gave is not what it gave then
}

// change is one thing read, then and now; an empty sum: it was not read.
type change struct {
	document.Reading
	Was string `json:"was,omitempty"` // its text then
	By  string `json:"by"`            // changed, read now, read no more
}

const (
	byChanged = "changed"
	byNew     = "read now"
	byGone    = "read no more"
)

// lastKey is the key of the steps of the last build of FILE.
func lastKey(src source) string {
	return "steps " + filepath.Join(src.root, filepath.FromSlash(src.main))
}

// last takes up the steps of the last build and leaves those of this one. Nothing is
// known where there is no cache.
func (a *app) last(src source, steps []document.Step) (before []document.Step, known bool) {
	if a.cache == nil {
		return nil, false
	}
	was, known := a.cache.Get(lastKey(src))
	if known && json.Unmarshal(was, &before) != nil {
		before, known = nil, false
	}
	if now, err := json.Marshal(steps); err == nil && !bytes.Equal(now, was) {
		a.cache.Put(lastKey(src), now)
	}
	return before, known
}

// why explains the step of a name, or a check by its text; nil where there is none.
func why(name string, steps, before []document.Step, known bool) *because {
	at := stepOf(steps, name)
	if at == nil {
		return nil
	}
	b := &because{Step: *at, Known: known, Changed: []change{}}
	was := stepOf(before, at.Name)
	if was == nil {
		b.New = known
		return b
	}
	b.Moved = was.Gave != at.Gave
	for _, r := range at.Reads {
		old := reading(was.Reads, r)
		switch {
		case old == nil:
			b.Changed = append(b.Changed, change{Reading: r, By: byNew})
		case old.Sum != r.Sum:
			b.Changed = append(b.Changed, change{Reading: r, Was: old.Text, By: byChanged})
		}
	}
	for _, r := range was.Reads {
		if reading(at.Reads, r) == nil {
			b.Changed = append(b.Changed, change{Reading: r, Was: r.Text, By: byGone})
		}
	}
	// Whatever changes changes this too.
	if len(b.Changed) > 1 {
		b.Changed = slices.DeleteFunc(b.Changed, func(c change) bool { return c.What == document.ReadPlace })
	}
	return b
}

// stepOf is the step of a name.
func stepOf(steps []document.Step, name string) *document.Step {
	plain := strings.Join(strings.Fields(name), "")
	for i, s := range steps {
		if s.Name == name || s.Check && strings.Join(strings.Fields(s.Name), "") == plain {
			return &steps[i]
		}
	}
	return nil
}

// reading is what was read under the same name.
func reading(all []document.Reading, r document.Reading) *document.Reading {
	for i, s := range all {
		if s.What == r.What && s.Name == r.Name {
			return &all[i]
		}
	}
	return nil
}

// explain takes note of the steps of a build, and explains those that --why names.
// What is named and not there is a warning.
func (a *app) explain(src source, res document.Result) (out []*because) {
	before, known := a.last(src, res.Steps)
	for _, name := range a.flags.why {
		if b := why(name, res.Steps, before, known); b != nil {
			out = append(out, b)
		} else {
			fmt.Fprint(a.stderr, fileWarning(src.given, whyNothing(name, stepNames(res.Steps))))
		}
	}
	return out
}

// stepNames are the names of all steps.
func stepNames(steps []document.Step) (out []string) {
	for _, s := range steps {
		out = append(out, s.Name)
	}
	return out
}
