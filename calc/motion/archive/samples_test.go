package archive

import (
	"errors"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// shape is the invented motion that most samples hold, in cm/s².
var shape = []float64{0, 1.25, -3.5, 7.125, -12.75, 20.5, -31, 44.25, -52.375, 38, -27.5, 18.875, -11.25, 6.5, -4, 2.75, -1.5, 0.875, -0.5, 0.25, -0.125, 0.0625, -0.03125, 0}

// sample is one file of testdata and what reading it must give.
type sample struct {
	file  string
	ask   Options
	step  float64
	unit  string  // as in the file
	scale float64 // of the channel against shape; 0 is 1
	tol   float64 // m/s²: half the last printed digit
	warn  []string
	meta  string // event|date|station|component|filter
}

const (
	at2Meta    = "Invented Valley-01|2/3/2031|Alderbrook Pump Station|45|"
	at2OldMeta = "INVENTED VALLEY 02/03/31 04:05||ALDERBROOK PUMP STATION|045|FILTER POINTS: HP=0.2 Hz LP=30.0 Hz"
)

var samples = []sample{
	{file: "at2_new.AT2", step: 0.01, unit: "G", tol: 5e-8, meta: at2Meta},
	{file: "at2_filter.AT2", step: 0.01, unit: "G", tol: 5e-8, meta: at2Meta + "4 POLE @    26.00000 HZ,  -5 POLE @      .40000"},
	{file: "at2_cut.AT2", step: 0.01, unit: "G", tol: 5e-8, meta: at2Meta},
	{file: "at2_old.AT2", step: 0.01, unit: "G", tol: 5e-8, meta: at2OldMeta},
	{file: "at2_nptsdt.AT2", step: 0.01, unit: "G", tol: 5e-8, meta: at2OldMeta},
	{file: "onecol.txt", ask: Options{Step: 0.01, Unit: "g"}, step: 0.01, unit: "g", tol: 5e-6},
	{file: "onecol_dexp.txt", step: 0.01, unit: "cm/s2", tol: 1e-12},
	{file: "twocol_tab.txt", ask: Options{Unit: "cm/s^2"}, step: 0.01, unit: "cm/s^2", tol: 1e-12},
	{file: "twocol_rounded.txt", ask: Options{Unit: "gal"}, step: 0.0078125, unit: "gal", tol: 1e-12, warn: []string{"step-rounded"}},
	{file: "csv_bom_crlf.csv", step: 0.01, unit: "cm/s2", tol: 1e-12},
	{file: "csv_semicolon.csv", step: 0.01, unit: "cm/s²", tol: 5.1e-8},
	{file: "csv_3ch.csv", ask: Options{Channel: "NS"}, step: 0.01, unit: "gal", tol: 1e-12},
	{file: "csv_3ch.csv", ask: Options{Channel: "2"}, step: 0.01, unit: "gal", scale: -0.5, tol: 5e-9},
	{file: "csv_3ch.csv", ask: Options{Channel: "ud"}, step: 0.01, unit: "gal", scale: 0.25, tol: 5.1e-9},
}

func TestSamples(t *testing.T) {
	for _, s := range samples {
		t.Run(s.file+" "+s.ask.Channel, func(t *testing.T) {
			data := load(t, s.file)
			r, err := Read(s.file, data, s.ask)
			if err != nil {
				t.Fatal(err)
			}
			if r.Step != s.step || len(r.A) != len(shape) || r.Origin.FileSamples != len(shape) {
				t.Errorf("step %v, %d samples (%d in the file); want %v, %d", r.Step, len(r.A), r.Origin.FileSamples, s.step, len(shape))
			}
			scale := s.scale
			if scale == 0 {
				scale = 1
			}
			for i, a := range r.A {
				if want := scale * shape[i] / 100; math.Abs(a-want) > s.tol*9.80665 {
					t.Errorf("sample %d: got %v m/s², want %v", i+1, a, want)
				}
			}
			o := r.Origin
			if o.UnitInFile != s.unit {
				t.Errorf("unit %q, want %q", o.UnitInFile, s.unit)
			}
			if got := strings.Join([]string{o.Event, o.Date, o.Station, o.Component, o.Filter}, "|"); s.meta != "" && got != s.meta {
				t.Errorf("metadata\n got %s\nwant %s", got, s.meta)
			}
			var codes []string
			for _, w := range o.Warnings {
				codes = append(codes, w.Code)
			}
			if strings.Join(codes, " ") != strings.Join(s.warn, " ") {
				t.Errorf("warnings %v, want %v", o.Warnings, s.warn)
			}
		})
	}
}

// Line ends, marks and padding change nothing.
func TestBytes(t *testing.T) {
	for _, s := range samples {
		data := string(load(t, s.file))
		data = strings.ReplaceAll(strings.TrimPrefix(data, "\uFEFF"), "\r\n", "\n")
		plain, err := Read(s.file, []byte(data), s.ask)
		if err != nil {
			t.Fatal(s.file, err)
		}
		wide := []byte{0xFF, 0xFE}
		for _, r := range data {
			wide = append(wide, byte(r), byte(r>>8))
		}
		for name, text := range map[string]string{
			"CRLF":        strings.ReplaceAll(data, "\n", "\r\n"),
			"lone CR":     strings.ReplaceAll(data, "\n", "\r"),
			"BOM":         "\uFEFF" + data,
			"no end":      strings.TrimRight(data, "\n"),
			"Ctrl-Z":      data + "\x1a",
			"NUL padding": data + "\x00\x00\x00",
			"blank lines": data + "\n\n  \n",
			"form feed":   data + "\f",
			"UTF-16":      string(wide),
		} {
			r, err := Read(s.file, []byte(text), s.ask)
			if err != nil {
				t.Errorf("%s with %s: %v", s.file, name, err)
				continue
			}
			if len(r.A) != len(plain.A) || r.Step != plain.Step || r.A[8] != plain.A[8] {
				t.Errorf("%s with %s reads differently", s.file, name)
			}
		}
	}
}

func load(t testing.TB, name string) []byte {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// refusal reads what must be refused and returns the error.
func refusal(t *testing.T, name, data string, ask Options) *Error {
	t.Helper()
	r, err := Read(name, []byte(data), ask)
	if err == nil {
		t.Fatalf("%s was read: %d samples, %+v", name, len(r.A), r.Origin)
	}
	var e *Error
	if !errors.As(err, &e) {
		t.Fatalf("%s: the error is a %T", name, err)
	}
	return e
}
