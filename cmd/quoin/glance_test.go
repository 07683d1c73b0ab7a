package main

import (
	"fmt"
	"testing"
)

// glanceSight is the page at the sizes and in the states that it is met in.
type glanceSight struct {
	Files, Texts, Broken, Twice []string
	Sizes                       []struct {
		widthSight
		Ratio int
		Rules ruleSight
	}
	States []struct {
		State                string
		Width, Scroll, Inner int
		Rules                ruleSight
	}
	Focus struct {
		Count         int
		Plain, Hidden []string
	}
	Heard heard
}

// holds is what is true of every page at every size and in every state: the rules
// of accessibility, among them targets of 24 px, find nothing; nothing makes the
// page scroll across; what has the focus shows it and is not hidden.
func (g *glanceSight) holds(t *testing.T) {
	t.Helper()
	if len(g.Sizes) != 3 || len(g.States) < 4 || g.Focus.Count < 100 {
		t.Errorf("too little to test on: %d sizes, %d states, %d places of focus", len(g.Sizes), len(g.States), g.Focus.Count)
	}
	for _, s := range g.Sizes {
		at := fmt.Sprintf("at %d px of %d device pixels", s.Width, s.Ratio)
		s.Rules.holds(t, at, 20)
		if !s.Rules.Targets {
			t.Errorf("%s, no target was measured", at)
		}
		if s.Scroll > s.Inner || s.Inner != s.Width {
			t.Errorf("%s, the page is %d px wide", at, s.Scroll)
		}
		none(t, at+", these tables do not scroll in a box", s.Stuck)
		none(t, at+", these are cut off", s.Cut)
	}
	for _, s := range g.States {
		at := fmt.Sprintf("with %s at %d px", s.State, s.Width)
		s.Rules.holds(t, at, 5)
		if s.Scroll > s.Inner {
			t.Errorf("%s, the page is %d px wide", at, s.Scroll)
		}
	}
	none(t, "these show no ring when they have the focus", g.Focus.Plain)
	none(t, "these are hidden when they have the focus", g.Focus.Hidden)
}

// holds is what is true wherever the rules are run, with enough to look at.
func (r *ruleSight) holds(t *testing.T, at string, enough int) {
	t.Helper()
	for _, v := range r.Broken {
		if falseAlarms[v.Rule] == "" {
			none(t, fmt.Sprintf("%s, %s (%s), %d times", at, v.Rule, v.Help, v.Count), v.At)
		}
	}
	if r.Passed < enough {
		t.Errorf("%s, only %d rules had something to look at", at, r.Passed)
	}
}
