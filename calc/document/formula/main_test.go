package formula

import (
	"flag"
	"os"
	"testing"
)

// Drawn cases are the same on every run, unless a seed is given.
func TestMain(m *testing.M) {
	flag.Parse()
	if f := flag.Lookup("rapid.seed"); f.Value.String() == "0" {
		f.Value.Set("20")
	}
	os.Exit(m.Run())
}
