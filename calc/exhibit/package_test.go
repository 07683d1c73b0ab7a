package exhibit

import (
	"strings"
	"testing"
)

// TestRatioText: a ratio above 1 never reads as 1.00, and no digit is made up.
func TestRatioText(t *testing.T) {
	for x, want := range map[float64]string{1: "1.00", 1.00001: "1.00001", 0.997: "1.00", 1.004: "1.004", 1.0391: "1.04", 0: "0.00", 1 + 1e-11: "just above 1", -0.5: "\u22120.50"} {
		if got := (Check{Ratio: &x}).RatioText(); got != want {
			t.Errorf("%v: got %s, want %s", x, got, want)
		}
	}
	if got := (Check{}).RatioText(); got != "none" {
		t.Errorf("no ratio reads %q", got)
	}
}

// TestWorstFirst: equal ratios, and checks without one.
func TestWorstFirst(t *testing.T) {
	r := func(x float64) *float64 { return &x }
	list := WorstFirst([]Check{{ID: "free", OK: true}, {ID: "half", Ratio: r(0.5), OK: true}, {ID: "below", Ratio: r(-1), OK: true}, {ID: "over", Ratio: r(1.2)}, {ID: "none", OK: false}, {ID: "strict", Ratio: r(1)}, {ID: "even", Ratio: r(1), OK: true}})
	var got []string
	for _, c := range list {
		got = append(got, c.ID)
	}
	if want := "none over strict even half below free"; strings.Join(got, " ") != want {
		t.Errorf("got %v, want %s", got, want)
	}
}

// TestFailed: those not met, in the order they stand in.
func TestFailed(t *testing.T) {
	if got := Failed([]Check{{ID: "a"}, {ID: "b", OK: true}, {ID: "c"}}); len(got) != 2 || got[0].ID != "a" || got[1].ID != "c" {
		t.Errorf("got %v", got)
	}
}
