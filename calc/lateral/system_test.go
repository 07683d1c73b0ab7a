package lateral

import (
	"errors"
	"strings"
	"testing"

	"quoin/calc/standard"
)

// TestSystemOfTwo: words that several rows end in are no guess of one of them.
func TestSystemOfTwo(t *testing.T) {
	_, err := systemOf(asceSystems, "Moment frame")
	var e *standard.ParameterError
	if !errors.As(err, &e) || !strings.Contains(e.Hint, "steel moment frame or concrete moment frame?") {
		t.Errorf("%v: %+v", err, e)
	}
}
