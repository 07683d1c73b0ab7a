// Command invent makes the ground-acceleration records of the examples. They
// are invented: no earthquake caused them, the station does not exist.
//
//	go run ./examples/invent -o examples/four-storey/records
//
// writes east.at2 (one component, in g) and north.csv (two components, in
// cm/s²). The same seed gives the same files.
package main

import (
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
)

// Seed is that of the records kept with the examples.
const Seed = 7

func main() {
	seed := flag.Uint64("seed", Seed, "number that the records follow from")
	dir := flag.String("o", "examples/four-storey/records", "folder to write to")
	flag.Parse()
	if flag.NArg() > 0 {
		fmt.Fprintln(os.Stderr, "invent: takes flags only; see -help")
		os.Exit(2)
	}
	files := Records(*seed)
	if err := os.MkdirAll(*dir, 0o755); err != nil {
		fmt.Fprintln(os.Stderr, "invent:", err)
		os.Exit(1)
	}
	for _, f := range files {
		if err := os.WriteFile(filepath.Join(*dir, f.Name), f.Bytes, 0o644); err != nil {
			fmt.Fprintln(os.Stderr, "invent:", err)
			os.Exit(1)
		}
	}
}

// File is one record file.
type File struct {
	Name  string
	Bytes []byte
}

// Records invents both horizontal components at one station.
func Records(seed uint64) []File {
	east := Motion{
		Seed: seed, Stream: 1, Step: 0.01, Samples: 2800, PGA: 0.340 * g,
		Soil: 2.2, SoilDamping: 0.55, Low: 0.15, High: 18, Rise: 3, Hold: 4.5, Decay: 0.3,
	}
	north := east
	north.Stream, north.PGA, north.Soil = 2, 0.281*g, 2.6
	e, n := east.Acceleration(), north.Acceleration()
	return []File{
		{"east.at2", at2(e, east.Step)},
		{"north.csv", csv(east.Step, []channel{{"NS", n}, {"EW", e}})},
	}
}

const g = 9.80665 // m/s²

// largest is the greatest magnitude.
func largest(a []float64) float64 {
	top := 0.0
	for _, x := range a {
		top = max(top, math.Abs(x))
	}
	return top
}
