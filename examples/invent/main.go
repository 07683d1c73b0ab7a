// Command invent makes the ground-acceleration records of the examples. They
// are invented: no earthquake caused them, the stations do not exist.
//
//	go run ./examples/invent -o examples
//
// writes the records of every example into its folder, in the formats in which
// records come: four header lines and values in g, columns in cm/s², bare values
// in m/s². The same seed gives the same files.
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
	dir := flag.String("o", "examples", "folder of the examples to write to")
	flag.Parse()
	if flag.NArg() > 0 {
		fmt.Fprintln(os.Stderr, "invent: takes flags only; see -help")
		os.Exit(2)
	}
	for _, f := range Records(*seed) {
		path := filepath.Join(*dir, filepath.FromSlash(f.Name))
		err := os.MkdirAll(filepath.Dir(path), 0o755)
		if err == nil {
			err = os.WriteFile(path, f.Bytes, 0o644)
		}
		if err != nil {
			fmt.Fprintln(os.Stderr, "invent:", err)
			os.Exit(1)
		}
	}
}

// File is one record file.
type File struct {
	Name  string // below the folder of the examples
	Bytes []byte
}

// Records invents the records of all examples.
func Records(seed uint64) []File {
	return append(fourStorey(seed), three(seed)...)
}

// fourStorey is both horizontal components at one station, as processed.
func fourStorey(seed uint64) []File {
	east := Motion{
		Seed: seed, Stream: 1, Step: 0.01, Samples: 2800, PGA: 0.340 * g,
		Soil: 2.2, SoilDamping: 0.55, Low: 0.15, High: 18, Rise: 3, Hold: 4.5, Decay: 0.3,
	}
	north := east
	north.Stream, north.PGA, north.Soil = 2, 0.281*g, 2.6
	e, n := east.Acceleration(), north.Acceleration()
	place := "Alder Quay (invented station)"
	return []File{
		{"four-storey/records/east.at2", at2(e, east.Step, "Invented event, 2/3/2031, "+place+", 90")},
		{"four-storey/records/north.csv", csv(east.Step, place+", invented event of 2031-02-03", []channel{{"NS", n}, {"EW", e}})},
	}
}

// three is one component at each of three stations, as instruments give them: with
// an offset and a slow trend.
func three(seed uint64) []File {
	ridge := Motion{
		Seed: seed, Stream: 11, Step: 0.005, Samples: 6000, PGA: 0.262 * g,
		Soil: 2.0, SoilDamping: 0.6, Low: 0.12, High: 22, Rise: 2.5, Hold: 6, Decay: 0.28,
		Offset: 0.004, Trend: -0.0002,
	}
	harbour := Motion{
		Seed: seed, Stream: 12, Step: 0.01, Samples: 3600, PGA: 0.214 * g,
		Soil: 1.5, SoilDamping: 0.6, Low: 0.1, High: 16, Rise: 4, Hold: 9, Decay: 0.2,
		Offset: -0.009, Trend: 0.0006,
	}
	cross := harbour
	cross.Stream, cross.PGA, cross.Soil = 13, 0.198*g, 1.7
	mill := Motion{
		Seed: seed, Stream: 14, Step: 0.01, Samples: 2600, PGA: 0.301 * g,
		Soil: 2.4, SoilDamping: 0.5, Low: 0.2, High: 20, Rise: 2, Hold: 5, Decay: 0.35,
		Offset: 0.012, Trend: 0.0004,
	}
	return []File{
		{"three-records/records/ridge.at2", at2(ridge.Recorded(), ridge.Step, "Invented event A, 5/11/2030, Ridge Farm (invented station), 20")},
		{"three-records/records/harbour.csv", csv(harbour.Step, "Low Harbour (invented station), invented event of 2030-09-17", []channel{{"H1", harbour.Recorded()}, {"H2", cross.Recorded()}})},
		{"three-records/records/mill.txt", values(mill.Recorded(), "Weir Mill (invented station), invented event of 2031-01-08", mill.Step)},
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
