package oscillator

import (
	"flag"
	"os"
	"testing"
)

// Properties are drawn from one fixed seed, so that a failure stays.
func TestMain(m *testing.M) {
	flag.Parse()
	if f := flag.Lookup("rapid.seed"); f.Value.String() == f.DefValue {
		flag.Set("rapid.seed", "1")
	}
	flag.Set("rapid.nofailfile", "true")
	os.Exit(m.Run())
}
