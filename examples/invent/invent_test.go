package main

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// The files kept with the example are what the generator writes.
func TestRecordsAreKept(t *testing.T) {
	for _, f := range Records(Seed) {
		kept, err := os.ReadFile(filepath.Join("..", filepath.FromSlash(f.Name)))
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(kept, f.Bytes) {
			t.Errorf("%s is not what seed %d gives: run go run ./examples/invent", f.Name, Seed)
		}
		if !strings.Contains(strings.SplitN(string(f.Bytes), "\n", 2)[0], "INVENTED") {
			t.Errorf("%s does not say in its first line that it is invented", f.Name)
		}
	}
	kept, other := Records(Seed), Records(Seed+1)
	for i, f := range kept {
		if bytes.Equal(other[i].Bytes, f.Bytes) {
			t.Errorf("%s: another seed gives the same record", f.Name)
		}
	}
}

// read gives back the columns of numbers of a file, headers skipped.
func read(t *testing.T, text string, header int, separator string) [][]float64 {
	t.Helper()
	var rows [][]float64
	for _, line := range strings.Split(strings.TrimSpace(text), "\n")[header:] {
		var row []float64
		for _, field := range strings.Fields(strings.ReplaceAll(line, separator, " ")) {
			var x float64
			if _, err := fmt.Sscan(field, &x); err != nil {
				t.Fatal(err)
			}
			row = append(row, x)
		}
		rows = append(rows, row)
	}
	return rows
}

// What stands in the files is plausible motion: the peak that was asked for, at
// rest at the end, no drift, energy and duration of a strong shaking.
func TestPlausible(t *testing.T) {
	files := fourStorey(Seed)
	var east, ns, ew []float64
	for _, row := range read(t, string(files[0].Bytes), 4, ",") {
		for _, x := range row {
			east = append(east, x*g)
		}
	}
	for i, row := range read(t, string(files[1].Bytes), 3, ",") {
		if len(row) != 3 || math.Abs(row[0]-0.01*float64(i)) > 1e-9 {
			t.Fatalf("row %d: %v", i+1, row)
		}
		ns, ew = append(ns, row[1]/100), append(ew, row[2]/100)
	}
	for _, c := range []struct {
		name string
		a    []float64
		pga  float64
	}{{"east", east, 0.340}, {"NS", ns, 0.281}, {"EW", ew, 0.340}} {
		if len(c.a) != 2800 {
			t.Fatalf("%s: %d samples", c.name, len(c.a))
		}
		if pga := largest(c.a) / g; math.Abs(pga-c.pga) > 1e-6 {
			t.Errorf("%s: PGA %v g, want %v", c.name, pga, c.pga)
		}
		v, d := final(c.a, 0.01)
		if math.Abs(v) > 1e-4 || math.Abs(d) > 1e-3 {
			t.Errorf("%s ends at %v m/s and %v m", c.name, v, d)
		}
		arias, pgv, pgd := measures(c.a, 0.01)
		t.Logf("%s: Arias %.3f m/s, PGV %.3f m/s, PGD %.3f m", c.name, arias, pgv, pgd)
		if arias < 0.6 || arias > 2 || pgv < 0.15 || pgv > 0.6 || pgd < 0.03 || pgd > 0.4 {
			t.Errorf("%s: Arias %v m/s, PGV %v m/s, PGD %v m", c.name, arias, pgv, pgd)
		}
	}
	for i := range east {
		if math.Abs(east[i]-ew[i]) > 0.5e-5+0.5e-6*g+1e-12 {
			t.Fatalf("sample %d: east.at2 has %v, the EW column %v", i+1, east[i], ew[i])
		}
	}
}

// The three records are strong shaking under an instrument's offset and trend, which
// leave it moving at its end.
func TestThree(t *testing.T) {
	files := three(Seed)
	column := func(file, header, i int, separator string, unit float64) (a []float64) {
		for _, row := range read(t, string(files[file].Bytes), header, separator) {
			if i >= 0 {
				row = row[i : i+1]
			}
			for _, x := range row {
				a = append(a, x*unit)
			}
		}
		return a
	}
	for _, c := range []struct {
		name          string
		a             []float64
		step          float64
		samples       int
		pga           float64
		offset, trend float64
	}{
		{"ridge", column(0, 4, -1, ",", g), 0.005, 6000, 0.262, 0.004, -0.0002},
		{"harbour H1", column(1, 3, 1, ",", 0.01), 0.01, 3600, 0.214, -0.009, 0.0006},
		{"harbour H2", column(1, 3, 2, ",", 0.01), 0.01, 3600, 0.198, -0.009, 0.0006},
		{"mill", column(2, 3, -1, ",", 1), 0.01, 2600, 0.301, 0.012, 0.0004},
	} {
		if len(c.a) != c.samples {
			t.Fatalf("%s: %d samples, want %d", c.name, len(c.a), c.samples)
		}
		if v, _ := final(c.a, c.step); math.Abs(v) < 0.02 {
			t.Errorf("%s comes to rest at %v m/s: the instrument does not show", c.name, v)
		}
		for i := range c.a {
			c.a[i] -= c.offset + c.trend*float64(i)*c.step
		}
		if pga := largest(c.a) / g; math.Abs(pga-c.pga) > 1e-5 {
			t.Errorf("%s: PGA %v g, want %v", c.name, pga, c.pga)
		}
		if v, d := final(c.a, c.step); math.Abs(v) > 1e-3 || math.Abs(d) > 1e-2 {
			t.Errorf("%s: without the instrument it ends at %v m/s and %v m", c.name, v, d)
		}
		arias, pgv, pgd := measures(c.a, c.step)
		t.Logf("%s: Arias %.3f m/s, PGV %.3f m/s, PGD %.3f m", c.name, arias, pgv, pgd)
		if arias < 0.5 || arias > 2 || pgv < 0.15 || pgv > 0.6 || pgd < 0.03 || pgd > 0.4 {
			t.Errorf("%s: Arias %v m/s, PGV %v m/s, PGD %v m", c.name, arias, pgv, pgd)
		}
	}
}

func measures(a []float64, h float64) (arias, pgv, pgd float64) {
	v, d := 0.0, 0.0
	for i := 1; i < len(a); i++ {
		d += h*v + h*h*(2*a[i-1]+a[i])/6
		v += h * (a[i-1] + a[i]) / 2
		arias += h * (a[i-1]*a[i-1] + a[i-1]*a[i] + a[i]*a[i]) / 3
		pgv, pgd = max(pgv, math.Abs(v)), max(pgd, math.Abs(d))
	}
	return arias * math.Pi / (2 * g), pgv, pgd
}

func TestDecimal(t *testing.T) {
	for _, c := range []struct {
		x      float64
		places int
		want   string
	}{{-1e-9, 3, "0.000"}, {0.0005001, 3, "0.001"}, {-12.3456, 2, "-12.35"}, {0, 6, "0.000000"}} {
		if got := decimal(c.x, c.places); got != c.want {
			t.Errorf("decimal(%v, %d) = %q, want %q", c.x, c.places, got, c.want)
		}
	}
}
