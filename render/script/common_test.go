package script

import (
	"strings"
	"testing"
)

// TestCommon: the typesetter knows every common command, and what is not common
// is not called so.
func TestCommon(t *testing.T) {
	delimiter := map[string]string{`\left`: `\left( a \right)`, `\right`: `\left( a \right)`}
	for c := range common {
		src := "a " + c + " b"
		if d := delimiter[c]; d != "" {
			src = d
		}
		if _, err := TeX(src, true); err != nil {
			t.Errorf("%s: %v", src, err)
		}
		if !Common(src) {
			t.Errorf("%s is not common", src)
		}
	}
	for c, n := range wraps {
		src := c + strings.Repeat("{a}", n)
		if _, err := TeX(src, false); err != nil || !Common(src) {
			t.Errorf("%s: %v", src, err)
		}
	}
	for _, src := range []string{`\zz`, `\alphas`, `\begin{matrix}a\end{matrix}`, `a \? b`, `\Fract{1}{2}`, `a & b`, `#`} {
		if Common(src) {
			t.Errorf("%s is called common", src)
		}
	}
	if len(common) < 80 {
		t.Errorf("%d common commands", len(common))
	}
}
