package main

import (
	"fmt"
	"strings"
	"testing"
	"time"
	"unicode"

	"quoin/calc/document"
	"quoin/calc/exhibit"
)

// TestNamesArePrintable: no name that a run says on the terminal drives it, breaks its
// line or reverses it.
func TestNamesArePrintable(t *testing.T) {
	bad := "a\x1b[2J\n\u202eb.md"
	check := exhibit.Check{ID: bad, Name: bad, Item: bad, Place: exhibit.Place{File: bad, Line: 1}}
	why := &because{Known: true, Changed: []change{{Reading: document.Reading{What: "file", Name: bad, Text: bad}, Was: bad, By: byChanged}}}
	why.Name, why.Reads = bad, []document.Reading{{What: "value", Name: bad, Text: bad}}
	for what, c := range map[string]struct {
		text  string
		lines int
	}{
		"summary":   {summary(bad, bad, false, []exhibit.Check{check}), 3},
		"unchanged": {summary(bad, bad, true, nil), 2},
		"no page":   {summary(bad, "", false, nil), 2},
		"tally":     {tallyLine(bad, tally{run: true, written: true}), 1},
		"errors":    {tallyLine(bad, tally{errors: 2}), 1},
		"why":       {whyWords(why, bad), 4},
		"watching":  {watching(bad, "http://localhost"), 1},
		"shown":     {shownAgain(bad, nil, time.Second), 1},
		"frozen":    {frozenStanding(&exhibit.Frozen{Revision: bad}, bad, exhibit.Meta{}), 2},
		"frozen as": {frozenStanding(&exhibit.Frozen{Current: true, Revision: bad, Moved: []exhibit.Moved{{ID: bad}}}, bad, exhibit.Meta{}), 2},
	} {
		text := strings.ReplaceAll(c.text, "\n", "")
		if n := strings.Count(c.text, "\n"); n != c.lines || strings.ContainsFunc(text, func(r rune) bool { return unicode.IsControl(r) || unicode.Is(unicode.Cf, r) }) {
			t.Errorf("%s: %d lines, want %d, of %q", what, n, c.lines, c.text)
		}
	}
	if said := whyNothing(bad, nil); strings.ContainsAny(said, "\x1b\n\u202e") {
		t.Errorf("--why: %q", said)
	}
}

// TestWhyCutsNames: a name as long as a file is not said back whole.
func TestWhyCutsNames(t *testing.T) {
	for n, want := range map[int]string{200: strings.Repeat("ü", 200), 201: strings.Repeat("ü", 200) + "..."} {
		if said, whole := whyNothing(strings.Repeat("ü", n), nil), fmt.Sprintf("--why %s: no block", want); !strings.HasPrefix(said, whole) {
			t.Errorf("of %d characters: %q", n, said)
		}
	}
}
