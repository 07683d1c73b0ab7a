package main

import (
	"strings"
	"testing"
)

// homeSight is how the numbers of a page lead home.
type homeSight struct {
	Links, Steps int
	Wrong, Twice []string
	Tried        []struct {
		Where                             string
		Hover, Focus                      *cardSight
		Held, Left, Within, Escaped, Back bool
	}
	Trail *cardSight
	Rules ruleSight
}

// cardSight is the card of a number.
type cardSight struct {
	Words, Name string
	Inside      bool
	Items       int
}

// holds is what is true of the numbers of every page.
func (h *homeSight) holds(t *testing.T) {
	t.Helper()
	if len(h.Wrong) > 0 || len(h.Twice) > 0 {
		t.Errorf("numbers that do not lead home:\n\t%s\ntold twice: %q", strings.Join(h.Wrong, "\n\t"), h.Twice)
	}
	if h.Links < 10 || h.Steps < 5 || len(h.Tried) < 3 {
		t.Errorf("too few numbers lead home to test on: %d, to %d values; tried %d", h.Links, h.Steps, len(h.Tried))
	}
	for _, u := range h.Tried {
		if u.Hover == nil || u.Focus == nil || u.Hover.Words != u.Focus.Words || !u.Hover.Inside || !strings.Contains(u.Hover.Words, ".md:") || u.Hover.Name == "" {
			t.Errorf("%s: its card by pointer %+v, by key %+v", u.Where, u.Hover, u.Focus)
		}
		if !u.Held || !u.Left || !u.Within || !u.Escaped || !u.Back {
			t.Errorf("%s: the card stays under the pointer: %t, goes: %t, is reached by Tab: %t, goes by Escape: %t, to its number: %t", u.Where, u.Held, u.Left, u.Within, u.Escaped, u.Back)
		}
	}
	if h.Trail != nil && (h.Trail.Items == 0 || !strings.Contains(h.Trail.Words, "Depends on ")) {
		t.Errorf("a trail of nothing: %+v", *h.Trail)
	}
}
