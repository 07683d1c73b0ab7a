package exhibit

import (
	"strings"
	"testing"
)

// TestUniqueStem: names are told apart whatever their length, none is longer than
// a stem may be, and a stem of a stem is the same.
func TestUniqueStem(t *testing.T) {
	long := strings.Repeat("a", 140)
	used := map[string]bool{}
	seen := map[string]bool{}
	for i := range 12 {
		for _, id := range []string{long, long[:100], long[:99], "." + long, "Short", "short", "con"} {
			s := UniqueStem(id, used)
			if len(s) > 100 || FileStem(s) != s {
				t.Errorf("%d: stem %q of %d letters, again %q", i, s, len(s), FileStem(s))
			}
			if seen[strings.ToLower(s)] {
				t.Errorf("%q stands twice", s)
			}
			seen[strings.ToLower(s)] = true
		}
	}
	if got := UniqueStem("short", used); got != "short-25" {
		t.Errorf("got %q", got)
	}
}

// TestNobody: who is nobody, with a date or without.
func TestNobody(t *testing.T) {
	for text, want := range map[string]bool{"MK": false, "M. Kay": false, "NO 2031-03-02": false, "pending": true, "pending 2031-03-02": true, "tbd": true, "not yet": true, "No": true, "ok": true, "yes": true, "n/a": true, "na": true, "": true, "?": true, "todo": true, "unchecked": true} {
		if got := Nobody(text); got != want {
			t.Errorf("%q: nobody is %v", text, got)
		}
	}
}
