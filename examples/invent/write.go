package main

import (
	"bytes"
	"fmt"
	"math"
	"strings"
)

// at2 is one component in g: four header lines, then five values a line in
// fields of 15, six decimals.
func at2(a []float64, step float64, line2 string) []byte {
	var b bytes.Buffer
	b.WriteString("INVENTED MOTION FOR DEMONSTRATION, NOT A RECORDED EARTHQUAKE\n")
	b.WriteString(line2 + "\n")
	b.WriteString("ACCELERATION TIME SERIES IN UNITS OF G\n")
	fmt.Fprintf(&b, "NPTS=  %5d, DT=   %.4f SEC,\n", len(a), step)
	for i, x := range a {
		fmt.Fprintf(&b, "%15s", decimal(x/g, 6))
		if i%5 == 4 || i == len(a)-1 {
			b.WriteByte('\n')
		}
	}
	return b.Bytes()
}

type channel struct {
	name string
	a    []float64 // m/s²
}

// csv is a time column and one column a component, in cm/s², three decimals.
func csv(step float64, place string, channels []channel) []byte {
	var b bytes.Buffer
	b.WriteString("# INVENTED motion for demonstration, not a recorded earthquake\n")
	b.WriteString("# " + place + "\n")
	b.WriteString("t [s]")
	for _, c := range channels {
		fmt.Fprintf(&b, ",%s [cm/s^2]", c.name)
	}
	b.WriteByte('\n')
	for i := range channels[0].a {
		fmt.Fprintf(&b, "%.2f", float64(i)*step)
		for _, c := range channels {
			b.WriteString("," + decimal(100*c.a[i], 3))
		}
		b.WriteByte('\n')
	}
	return b.Bytes()
}

// values is one component in m/s², row by row, eight values a line, five decimals.
// Unit and step stand in words only: who uses the file states them.
func values(a []float64, place string, step float64) []byte {
	var b bytes.Buffer
	b.WriteString("# INVENTED motion for demonstration, not a recorded earthquake\n")
	fmt.Fprintf(&b, "# %s\n", place)
	fmt.Fprintf(&b, "# %.0f values a second in metres per second squared\n", 1/step)
	for i, x := range a {
		fmt.Fprintf(&b, "%10s", decimal(x, 5))
		if i%8 == 7 || i == len(a)-1 {
			b.WriteByte('\n')
		}
	}
	return b.Bytes()
}

// decimal rounds to so few digits that last bits, which differ between
// machines, do not show; there is no negative zero.
func decimal(x float64, places int) string {
	scale := math.Pow10(places)
	text := fmt.Sprintf("%.*f", places, math.Round(x*scale)/scale)
	if strings.Trim(text, "-0.") == "" {
		return strings.TrimPrefix(text, "-")
	}
	return text
}
