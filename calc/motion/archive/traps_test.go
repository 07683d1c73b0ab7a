package archive

import (
	"fmt"
	"math"
	"runtime"
	"slices"
	"strings"
	"testing"
)

// at2 is a file of the AT2 family with these header lines and numbers.
func at2(quantity, count, numbers string) string {
	return "INVENTED DATABASE\nInvented Valley-01, 2/3/2031, Alderbrook, Upper Gate, NS\n" + quantity + "\n" + count + "\n" + numbers
}

const inG = "ACCELERATION TIME SERIES IN UNITS OF G"

// rows is a two-column file of n samples at 0.01 s.
func rows(n int) string {
	var b strings.Builder
	for i := range n {
		fmt.Fprintf(&b, "%.2f %.4f\n", float64(i)*0.01, math.Sin(float64(i)))
	}
	return b.String()
}

// lost leaves a line out, counted from 0.
func lost(text string, line int) string {
	lines := strings.SplitAfter(text, "\n")
	return strings.Join(slices.Delete(lines, line, line+1), "")
}

// Every trap that must end in a refusal, with where and with words that must be in the message.
func TestRefusals(t *testing.T) {
	g := Options{Unit: "g"}
	full := Options{Unit: "g", Step: 0.01}
	for _, c := range []struct {
		name, data string
		ask        Options
		line       int
		words      string
	}{
		{"empty", "", full, 0, "empty"},
		{"blank", "\n \r\n", full, 0, "empty"},
		{"only padding", "\x00\x00\x1a", full, 1, "binary"},
		{"header only", at2(inG, "NPTS= 4, DT= .01 SEC", ""), full, 0, "no numbers"},
		{"words only", "time and acceleration\nof a record\n", full, 2, "no numbers"},
		{"comments only", "# a\n% b\n", full, 0, "comments"},
		{"at2 cut off", at2(inG, "NPTS= 9, DT= .01 SEC", "1 2 3 4\n"), full, 0, "cut off: 4 samples of 9"},
		{"at2 count zero", at2(inG, "NPTS= 0, DT= .01 SEC", "1 2\n"), full, 4, "NPTS"},
		{"at2 count negative", at2(inG, "NPTS= -5, DT= .01 SEC", "1 2\n"), full, 4, "NPTS"},
		{"at2 count absurd", at2(inG, "NPTS= 999999999999999, DT= .01 SEC", "1 2\n"), full, 0, "cut off"},
		{"at2 step zero", at2(inG, "NPTS= 2, DT= 0.0 SEC", "1 2\n"), full, 4, "step of 0 s"},
		{"at2 step negative", at2(inG, "NPTS= 2, DT= -.01 SEC", "1 2\n"), full, 4, "step of -0.01 s"},
		{"at2 step absurd", at2(inG, "NPTS= 2, DT= 1e9 SEC", "1 2\n"), full, 4, "step of 1e+09 s"},
		{"at2 overflow of a field", at2(inG, "NPTS= 3, DT= .01 SEC", ".1 *** .2\n"), full, 5, "did not fit"},
		{"at2 header twice", at2(inG, "NPTS= 2, DT= .01 SEC", at2(inG, "NPTS= 2, DT= .01 SEC", "1 2\n")), full, 5, "not a number"},
		{"at2 joined files", at2(inG, "NPTS= 2, DT= .01 SEC", "1 2\n"+at2(inG, "NPTS= 2, DT= .01 SEC", "1 2\n")), full, 6, "not a number"},
		{"at2 velocity named .AT2", at2("VELOCITY TIME SERIES IN UNITS OF CM/S", "NPTS= 2, DT= .01 SEC", "1 2\n"), full, 3, "velocity, not acceleration"},
		{"at2 displacement", at2("DISPLACEMENT TIME SERIES IN UNITS OF CM", "NPTS= 2, DT= .01 SEC", "1 2\n"), full, 3, "displacement"},
		{"at2 without unit", at2("SOME TEXT", "NPTS= 2, DT= .01 SEC", ".1 .2\n"), Options{}, 0, "unit"},
		{"at2 velocity unit", at2("ACCELERATION TIME SERIES IN UNITS OF CM/S", "NPTS= 2, DT= .01 SEC", ".1 .2\n"), Options{}, 3, "not a unit of acceleration"},
		{"at2 of pairs", at2(inG, "NPTS= 4, DT= .01 SEC", "0 .1\n.01 .2\n.02 .3\n.03 .1\n"), full, 5, "pairs"},
		{"at2 without count", at2(inG, "SOME TEXT", ".1 .2\n"), full, 1, "no count and step"},
		{"web page", "<!DOCTYPE html>\n<html>log in</html>", full, 1, "web page"},
		{"zip", "PK\x03\x04....", full, 1, "zip"},
		{"gzip", "\x1f\x8b....", full, 1, "gzip"},
		{"unknown binary", "abc\x00\x01\x02 tail", full, 1, "binary"},
		{"no step", "0.1\n0.2\n0.1\n", g, 0, "time step"},
		{"no unit", rows(9), Options{}, 0, "unit"},
		{"lone capital G", "t [s],a (G)\n0,0.1\n0.1,0.2\n0.2,0.1\n", Options{}, 0, "unit"},
		{"two units", "# in cm/s2\n# in mm/s2\n" + rows(9), Options{}, 1, "either"},
		{"counts", "t [s],a [counts]\n0,1\n0.1,2\n0.2,1\n", Options{}, 1, "counts"},
		{"unit of velocity given", rows(9), Options{Unit: "m/s"}, 0, "not a unit of acceleration"},
		{"step given negative", rows(9), Options{Unit: "g", Step: -1}, 0, "step of -1 s"},
		{"only velocity", "t [s],v [cm/s]\n0,0.1\n0.1,0.2\n0.2,0.1\n", g, 2, "no column of acceleration"},
		{"channel not there", "t [s],NS [gal],EW [gal]\n0,0.1,1\n0.1,0.2,1\n0.2,0.1,1\n", Options{Channel: "UD"}, 0, "1 NS, 2 EW"},
		{"channel not chosen", "t [s],NS [gal],EW [gal]\n0,0.1,1\n0.1,0.2,1\n0.2,0.1,1\n", Options{}, 0, "1 NS, 2 EW"},
		{"channels of one name", "t [s],a [gal],b [gal],A [gal]\n0,0.1,1,2\n0.1,0.2,1,2\n0.2,0.1,1,2\n", Options{Channel: "a"}, 0, "channels 1, 3 are all named"},
		{"at2 two steps", at2(inG, "NPTS= 2, DT= .01 SEC, DT= .02 SEC", "1 2\n"), full, 4, "two values of DT, .01 and .02"},
		{"at2 two counts", at2(inG, "NPTS= 2, NPTS= 3, DT= .01 SEC", "1 2 3\n"), full, 4, "two values of NPTS, 2 and 3"},
		{"at2 two steps, one before the names", at2(inG, "2 .01 NPTS, DT, DT= .02", "1 2\n"), full, 4, "two values of DT, .01 and .02"},
		{"huge", "1e300\n2\n3\n", full, 1, "is the unit right?"},
		{"tiny step", "1\n2\n3\n", Options{Unit: "g", Step: 1e-300}, 1, "is the unit right?"},
		{"unknown format", rows(9), Options{Format: "AT3"}, 0, "AT2"},
		{"format that is not read", rows(9), Options{Format: "SAC"}, 0, "no format"},
		{"gap", string(load(t, "twocol_gap.txt")), g, 11, "a gap of 2 samples"},
		{"repeated time", "0.00 1\n0.01 2\n0.01 3\n0.02 1\n0.03 1\n0.04 1\n0.05 1\n0.06 1\n0.07 1\n0.08 1\n0.09 1\n0.10 2\n", g, 3, "line before"},
		{"time going back", "t a\n0.00 1\n0.01 2\n0.02 3\n0.01 1\n0.02 1\n", g, 5, "goes back"},
		{"changed step", "t a\n0.000 1\n0.010 2\n0.020 3\n0.030 1\n0.040 1\n0.052 1\n0.064 1\n0.076 1\n", g, 7, "step changes"},
		{"two files one after another", rows(20) + rows(20), g, 21, "goes back"},
		{"index or seconds", "1 0.1\n2 0.2\n3 0.1\n4 0.3\n", g, 1, "counts 1, 2, 3"},
		{"missing samples", string(load(t, "csv_missing.csv")), Options{}, 7, "missing"},
		{"missing at2 samples", at2(inG, "NPTS= 3, DT= .01 SEC", ".1 -999.0\n.2\n"), full, 5, "missing"},
		{"missing among large samples", "50\n-999\n-40\n10\n", full, 2, "missing"},
		{"spreadsheet error", "t,a\n0.00,0.1\n0.01,#N/A\n0.02,0.3\n0.03,0.2\n", g, 3, "not a number"},
		{"spreadsheet error in the first row", "0.00,#N/A\n0.01,0.1\n0.02,0.3\n0.03,0.2\n", g, 1, "not a number"},
		{"empty cell", "t,a,b\n0.00,0.1,1\n0.01,,1\n0.02,0.3,1\n0.03,0.2,1\n", g, 3, "missing"},
		{"infinite", "0.1\nInf\n0.2\n0.1\n", full, 2, "not a number"},
		{"not a number", "0.1\nNaN\n0.2\n0.1\n", full, 2, "not a number"},
		{"hexadecimal", "0.1\n0x1p-2\n0.2\n0.1\n", full, 2, "not a number"},
		{"underscore", "0.1\n1_000\n0.2\n0.1\n", full, 2, "not a number"},
		{"overflow of a column", "0.00 0.1\n0.01 ****\n0.02 0.2\n0.03 0.1\n", g, 2, "did not fit"},
		{"repeated header", "t,a\n0.00,0.1\n0.01,0.2\nt,a\n0.02,0.3\n0.03,0.2\n", g, 4, "not a number"},
		{"count line", "7995 0.005\n0.1\n0.2\n0.1\n0.3\n", full, 1, "count and step"},
		{"notes in the data", "0.1\n0.2\nnote\n0.1\n0.3\n", full, 3, "not a number"},
		{"thousands", "t;a\n0.00;1,234.5\n0.01;1,000.5\n0.02;1,100.5\n0.03;1.5\n", g, 4, "thousands"},
		{"decimal comma and point", "t;a;b\n0,00;1.5;1\n0,01;2.5;1\n0,02;1.5;1\n0,03;1.5;1\n", g, 4, "decimal comma"},
		{"gap in shortest numbers", "0 1\n0.005 2\n0.01 3\n0.02 1\n0.025 1\n0.03 2\n0.035 1\n0.04 0\n0.045 1\n", g, 4, "a gap of 1 samples"},
		{"ragged", "t,a\n0.00,0.1\n0.01,0.2\n0.02,0.2,7\n0.03,0.1\n0.04,0.1\n0.05,0.1\n0.06,0.1\n0.07,0.1\n", g, 4, "3 fields"},
		{"cut in a row", "0.00 0.1 1\n0.01 0.2 2\n0.02 0.2 3\n0.03\n", g, 4, "cut off"},
		{"two per line", "0.1 0.2\n0.3 -0.2\n0.1 0.2\n0.0 0.1\n", full, 1, "two channels or one"},
		{"text in some rows", "t,a,q\n0.00,0.1,ok\n0.01,0.2,7\n0.02,0.3,ok\n0.03,0.1,ok\n", g, 3, "text in others"},
		{"one sample", "0.1\n", full, 1, "two samples"},
		{"one row", "t,a\n0.00,0.1\n", g, 2, "one row alone"},
		{"not known, in the middle", "t,a\n0.00,0.1\n0.01,NaN\n0.02,0.2\n", g, 3, "not known"},
		{"not known, the most of it", "t,a\n0.00,0.1\n0.01,0.2\n0.02,0.2\n0.03,nan\n0.04,-inf\n0.05,n/a\n", g, 5, "not known"},
		{"not known, one column", "0.1\n0.2\nNaN\n0.1\n", full, 3, "not known"},
		{"at2 not known", at2(inG, "NPTS= 3, DT= .01 SEC", ".1 NaN .2\n"), full, 5, "not known"},
		{"word among numbers", "t,a\n0.00,0.1\n0.01,0.2\n0.02,hello\n0.03,0.2\n", g, 4, "not a number"},
		{"at rest", "t,a\n0.00,0\n0.01,0.0\n0.02,-0\n", g, 2, "is zero"},
		{"at2 at rest", at2(inG, "NPTS= 3, DT= .01 SEC", ".0 .0 .0\n"), full, 5, "is zero"},
		{"lost sample, coarse times", "t,a\n0.00,1\n0.01,2\n0.02,1\n0.04,1\n0.05,2\n0.06,1\n", g, 5, "a gap of 1 samples"},
		{"lost samples, coarse times", "t,a\n0.00,1\n0.01,2\n0.02,1\n0.05,1\n0.06,2\n", g, 5, "a gap of 2 samples"},
		{"lost sample, two digits a step", "t,a\n0.00,1\n0.02,2\n0.04,1\n0.08,1\n0.10,2\n0.12,1\n", g, 5, "a gap of 1 samples"},
		{"lost sample in a long record", lost(rows(400), 150), g, 151, "a gap of 1 samples"},
		{"DYNA", "EVENT_NAME: INVENTED\nEVENT_ID: X\n", full, 1, "DYNA"},
		{"K-NET", "Origin Time       2031/02/03 04:05:00\nLat. 39\nScale Factor      3920(gal)/6182761\n", full, 1, "K-NET"},
		{"COSMOS", "Corrected acceleration  (Format v01.20 with 13 text lines)\n", full, 1, "COSMOS"},
		{"SMC", "2 CORRECTED ACCELEROGRAM\n*\n", full, 1, "SMC"},
		{"CSMIP", "Corrected accelerogram\nx\n   24 points of accel data equally spaced at  .010 sec.\n", full, 1, "CSMIP"},
		{"CSMNC", "COMP. EW\nACCELERATION UNIT: CM/SEC/SEC\nNO. OF POINTS: 24 EQUALLY SPACED INTERVALS OF: 0.01 SEC\n", full, 1, "CSMNC"},
		{"miniSEED 2", "000001D STA    " + strings.Repeat(" ", 5) + "\x07\xef" + strings.Repeat("\x00", 40), full, 1, "miniSEED 2"},
		{"SAC", sac(), full, 1, "SAC binary"},
		{"PDF", "%PDF-1.7\n1 0 obj\n", full, 1, "PDF"},
		{"GeoNet", "Corrected accelerogram\nSite INV Invented\n", full, 1, "GeoNet"},
		{"AFAD", "NUMBER OF DATA : 24\nSAMPLING INTERVAL (sec) : 0.01\n", full, 1, "AFAD"},
		{"CWB", "#StationCode: INV\n#SampleRate(Hz): 200\n", full, 1, "CWB"},
		{"K-NET CSV", "#K-NET CSV\n", full, 1, "CSV"},
		{"miniSEED 3", "MS\x03\x00", full, 1, "miniSEED 3"},
		{"tar", strings.Repeat("x", 257) + "ustar\x0000", full, 1, "tar"},
		{"SAC text", strings.Repeat(strings.Repeat("      -12345.00", 5)+"\n", 14) + strings.Repeat(strings.Repeat("    -12345", 5)+"\n", 8), full, 1, "SAC alphanumeric"},
	} {
		t.Run(c.name, func(t *testing.T) {
			e := refusal(t, c.name, c.data, c.ask)
			if text := e.Error(); e.Line != c.line || !strings.Contains(text, c.words) {
				t.Errorf("got line %d: %q\nwant line %d and %q", e.Line, text, c.line, c.words)
			}
			if e.Line > 0 && (e.Column < 1 || e.Width < 1 || e.Column+e.Width > max(len([]rune(e.Excerpt)), 1)+1) {
				t.Errorf("columns %d to %d of %q", e.Column, e.Column+e.Width, e.Excerpt)
			}
		})
	}
}

func sac() string {
	b := []byte(strings.Repeat("\x00", 632))
	b[304] = 6
	return string(b)
}

// What looks odd and must be read all the same.
func TestReadable(t *testing.T) {
	full := Options{Unit: "g", Step: 0.01}
	for _, c := range []struct {
		name, data string
		ask        Options
		want       []float64 // in the unit of the file
		step       float64
		warn       string // codes
	}{
		{"touching columns", at2(inG, "NPTS= 4, DT= .01 SEC", " .1E-01-.2E-01-3.5E-02\n-.1\n"), Options{}, []float64{.01, -.02, -.035, -.1}, .01, ""},
		{"D and Q exponents", "1.0D-1\n-2.5d-01\n+.5Q-1\n3.E-2\n", full, []float64{.1, -.25, .05, .03}, .01, ""},
		{"bare pair", at2(inG, "  4 0.02", ".1 .2 .3 .1\n"), Options{}, []float64{.1, .2, .3, .1}, .02, ""},
		{"step said twice", at2(inG, "NPTS= 3, DT= .010 SEC, DT= .01", ".1 .2 .3\n"), Options{}, []float64{.1, .2, .3}, .01, ""},
		{"one of two of a name by number", "t [s],a [g],a [g]\n0.00,.1,1\n0.01,.2,1\n0.02,.3,1\n", Options{Channel: "1"}, []float64{.1, .2, .3}, .01, ""},
		{"DT first", at2(inG, "DT= .005, NPTS= 3", ".1 .2 .3\n"), Options{}, []float64{.1, .2, .3}, .005, ""},
		{"DT, NPTS after the numbers", at2(inG, " .005 3 DT, NPTS", ".1 .2 .3\n"), Options{}, []float64{.1, .2, .3}, .005, ""},
		{"names without signs", at2(inG, "NPTS 3 DT .005", ".1 .2 .3\n"), Options{}, []float64{.1, .2, .3}, .005, ""},
		{"count too small", at2(inG, "NPTS= 3, DT= .01 SEC", ".1 .2 .3 0 0\n"), Options{}, []float64{.1, .2, .3}, .01, "sample-count"},
		{"three components", at2(inG, "NPTS= 2, DT= .01 SEC", ".1 .2 .3 .4 .5 .6\n"), Options{}, []float64{.1, .2}, .01, "sample-count"},
		{"unit contradicts", at2(inG, "NPTS= 2, DT= .01 SEC", ".1 .2\n"), Options{Unit: "m/s^2"}, []float64{.1, .2}, .01, "unit-contradicts"},
		{"step contradicts", at2(inG, "NPTS= 2, DT= .01 SEC", ".1 .2\n"), Options{Step: .02}, []float64{.1, .2}, .02, "step-contradicts"},
		{"step agrees", "0.00 .1\n0.01 .2\n0.02 .1\n0.03 .3\n", Options{Unit: "g", Step: .01}, []float64{.1, .2, .1, .3}, .01, ""},
		{"decimal step kept", at2(inG, "NPTS= 2, DT= .00244SEC", ".1 .2\n"), Options{}, []float64{.1, .2}, .00244, ""},
		{"Latin-1 station", "INVENTED\nValley, 2/3/2031, Br\xfccke, NS\n" + inG + "\nNPTS= 2, DT= .01\n.1 .2\n", Options{}, []float64{.1, .2}, .01, ""},
		{"wrapped", "a record in g\n.1 .2 .3\n.4 .5 .6\n.7\n", full, []float64{.1, .2, .3, .4, .5, .6, .7}, .01, "wrapped"},
		{"wrapped by two, asked for", ".1 .2\n.3 -.4\n.5\n", Options{Unit: "g", Step: .01, Format: "values"}, []float64{.1, .2, .3, -.4, .5}, .01, ""},
		{"acceleration first", ".1 0\n.2 .01\n-.1 .02\n.3 .03\n.1 .04\n", Options{Unit: "g"}, []float64{.1, .2, -.1, .3, .1}, .01, ""},
		{"time not from zero", ".1 -.02\n.2 -.01\n-.1 0\n.3 .01\n.1 .02\n", Options{Unit: "g"}, []float64{.1, .2, -.1, .3, .1}, .01, ""},
		{"clock", "time,a [g]\n2031/02/03 04:05:59.99,.1\n2031/02/03 04:06:00.00,.2\n2031/02/03 04:06:00.01,.1\n2031/02/03 04:06:00.02,.1\n", Options{}, []float64{.1, .2, .1, .1}, .01, ""},
		{"times with exponents", "9.9990E+01 .1\n9.9995E+01 .2\n1.0000E+02 .1\n1.0000E+02 .3\n", Options{Unit: "g", Step: .005, Format: "values"}, []float64{99.99, .1, 99.995, .2, 100, .1, 100, .3}, .005, "unlikely-size"},
		{"seven digits and an exponent", "9.999000E+01 .1\n9.999500E+01 .2\n1.000000E+02 .1\n1.000050E+02 .3\n", Options{Unit: "g"}, []float64{.1, .2, .1, .3}, .005, ""},
		{"shortest times", "0 1\n0.005 2\n0.01 3\n0.015 1\n0.02 1\n0.025 2\n", Options{Unit: "gal"}, []float64{1, 2, 3, 1, 1, 2}, .005, ""},
		{"milliseconds", "t [ms];a [g]\n0;0.1\n5;0.2\n10;0.1\n15;0.3\n", Options{}, []float64{.1, .2, .1, .3}, .005, ""},
		{"index beside time", "1 0.00 .1\n2 0.01 .2\n3 0.02 .1\n4 0.03 .3\n", Options{Unit: "g"}, []float64{.1, .2, .1, .3}, .01, ""},
		{"index named", "n,t,a [g]\n1,0.00,.1\n2,0.01,.2\n3,0.02,.1\n", Options{}, []float64{.1, .2, .1}, .01, ""},
		{"trailing separators", "t,a [g],\n0.00,.1,\n0.01,.2,\n0.02,.1,\n", Options{}, []float64{.1, .2, .1}, .01, ""},
		{"quoted fields", "\"t\",\"a [g]\"\n\"0.00\",\"0.1\"\n\"0.01\",\"0.2\"\n\"0.02\",\"0.1\"\n", Options{}, []float64{.1, .2, .1}, .01, ""},
		{"names in a comment", "# t [s]  NS [g]\n0.00 .1\n0.01 .2\n0.02 .1\n", Options{}, []float64{.1, .2, .1}, .01, ""},
		{"velocity beside", "t [s],v [cm/s],a [gal]\n0.00,9,10\n0.01,9,20\n0.02,9,10\n", Options{}, []float64{10, 20, 10}, .01, ""},
		{"rate in the header", "sampling rate: 200 Hz, in gal\n10\n20\n10\n", Options{}, []float64{10, 20, 10}, .005, ""},
		{"lost header", ".1 .2 .3 .4 .5\n.1 .2 .3 .4 .5\n", full, []float64{.1, .2, .3, .4, .5, .1, .2, .3, .4, .5}, .01, "wrapped"},
		{"too large", "10\n20\n-10\n15\n", full, []float64{10, 20, -10, 15}, .01, "unlikely-size"},
		{"too small", "1e-5\n2e-5\n-1e-5\n1e-5\n", full, []float64{1e-5, 2e-5, -1e-5, 1e-5}, .01, "unlikely-size"},
		{"a true -999", "-999\n900\n-800\n100\n", Options{Unit: "mm/s^2", Step: .01}, []float64{-999, 900, -800, 100}, .01, ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			r, err := Read(c.name, []byte(c.data), c.ask)
			if err != nil {
				t.Fatal(err)
			}
			scale, ok := unitScale(r.Origin.UnitInFile)
			if c.ask.Unit != "" {
				scale, ok = unitScale(c.ask.Unit)
			}
			if !ok || math.Abs(r.Step-c.step) > 1e-15 || len(r.A) != len(c.want) {
				t.Fatalf("unit %q, step %v, %d samples", r.Origin.UnitInFile, r.Step, len(r.A))
			}
			for i, w := range c.want {
				if math.Abs(r.A[i]-w*scale) > 1e-14*scale {
					t.Errorf("sample %d: %v m/s², want %v", i+1, r.A[i], w*scale)
				}
			}
			var codes []string
			for _, w := range r.Origin.Warnings {
				codes = append(codes, w.Code)
			}
			if got := strings.Join(codes, " "); got != c.warn {
				t.Errorf("warnings %q, want %q: %v", got, c.warn, r.Origin.Warnings)
			}
		})
	}
}

// A file of many samples, one on a single line of megabytes, and a header that
// counts absurdly cost memory in proportion to the file alone.
func TestLarge(t *testing.T) {
	ask := Options{Unit: "g", Step: 0.01}
	for name, c := range map[string]struct {
		text string
		n    int
	}{
		"one line":     {strings.Repeat("0.125 -0.25 ", 500_000), 1_000_000},
		"million rows": {strings.Repeat("0.1\n-.2\n", 500_000), 1_000_000},
	} {
		var before, after runtime.MemStats
		runtime.ReadMemStats(&before)
		r, err := Read(name, []byte(c.text), ask)
		if err != nil {
			t.Fatal(name, err)
		}
		runtime.ReadMemStats(&after)
		if len(r.A) != c.n {
			t.Errorf("%s: %d samples, want %d", name, len(r.A), c.n)
		}
		if got, most := after.TotalAlloc-before.TotalAlloc, uint64(40*len(c.text)+1000*c.n); got > most {
			t.Errorf("%s: %d MB allocated for a file of %d MB", name, got>>20, len(c.text)>>20)
		}
	}
	if _, err := Read("huge", make([]byte, MaxSize+1), ask); err == nil {
		t.Error("a file above the limit was read")
	}
}

// Every format that is read has samples; every format has a name, words and a test.
func TestFormats(t *testing.T) {
	seen := map[string]bool{}
	for _, s := range samples {
		r, err := Read(s.file, load(t, s.file), s.ask)
		if err != nil {
			t.Fatal(err)
		}
		seen[r.Origin.Format] = true
		ask := s.ask
		ask.Format = r.Origin.Format
		if again, err := Read(s.file, load(t, s.file), ask); err != nil || !slices.Equal(again.A, r.A) {
			t.Errorf("%s reads differently when its format %s is stated: %v", s.file, ask.Format, err)
		}
		ask.Format = "values" // must not panic; several columns give a long row or a refusal
		Read(s.file, load(t, s.file), ask)
	}
	var names []string
	for _, f := range Formats {
		if f.Name == "" || f.Doc == "" || f.Read != (f.read != nil) || slices.Contains(names, f.Name) {
			t.Errorf("format %+v is not well described", f)
		}
		if names = append(names, f.Name); f.Read && f.detect != nil && !seen[f.Name] {
			t.Errorf("no sample of format %s", f.Name)
		}
		if !f.Read && f.hint == "" {
			t.Errorf("format %s is refused without a word on what to do", f.Name)
		}
	}
	if len(seen) == 0 {
		t.Error("no samples")
	}
}

func TestChannels(t *testing.T) {
	got, err := Channels("x", load(t, "csv_3ch.csv"), Options{})
	if err != nil || len(got) != 3 || got[1] != (Channel{Number: 2, Name: "EW", Unit: "gal", Samples: 24, Line: 2}) {
		t.Errorf("%+v, %v", got, err)
	}
}

func FuzzRead(f *testing.F) {
	for _, s := range samples {
		f.Add(load(f, s.file), s.ask.Channel)
	}
	f.Add([]byte("1 2\n3 4\n"), "1")
	f.Add([]byte("t;a\n0,1;1,5\n0,2;2,5\n"), "")
	f.Add([]byte("NPTS= 2, DT= .1\n"+inG+"\n1 2"), "")
	f.Fuzz(func(t *testing.T, data []byte, channel string) {
		for _, format := range []string{"", "AT2", "columns", "values"} {
			r, err := Read("fuzz", data, Options{Format: format, Channel: channel})
			if err != nil {
				e, ok := err.(*Error)
				if !ok || e.Summary == "" || e.Line < 0 || e.Line > 0 && e.Column < 1 {
					t.Fatalf("error %#v", err)
				}
				r, err = Read("fuzz", data, Options{Format: format, Channel: channel, Unit: "g", Step: 0.01})
			}
			if err == nil && r.Validate() != nil {
				t.Fatalf("an invalid record was read: %v", r.Validate())
			}
		}
	})
}
