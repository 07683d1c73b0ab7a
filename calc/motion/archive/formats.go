package archive

import (
	"bytes"
	"encoding/binary"
	"regexp"
	"slices"
	"strings"
)

// Format is one kind of file. A format without a reader is recognised to be refused
// by name.
type Format struct {
	Name string
	Doc  string
	Read bool // whether it is read

	detect func(*file) bool
	read   func(*file) (*content, error)
	hint   string
}

const (
	convert = "not read yet: convert it to two columns, time in s and acceleration with its unit"
	unpack  = "unpack it and give the record itself"
)

// Formats is every format in the order of recognition: the first that recognises a
// file has it. The last recognises everything; "values" is only read when asked for.
var Formats = []Format{
	{Name: "zip", Doc: "a zip archive", detect: starts("PK\x03\x04"), hint: unpack},
	{Name: "gzip", Doc: "a gzip file", detect: starts("\x1f\x8b"), hint: unpack},
	{Name: "tar", Doc: "a tar archive", detect: func(f *file) bool { return len(f.data) > 262 && string(f.data[257:262]) == "ustar" }, hint: unpack},
	{Name: "web page", Doc: "a web page, not a record", detect: isHTML, hint: "a log-in or error page was saved instead of the record; fetch it again"},
	{Name: "PDF", Doc: "a PDF document", detect: starts("%PDF"), hint: "take the numbers of the record, not its picture"},
	{Name: "miniSEED 3", Doc: "a miniSEED 3 file", detect: starts("MS\x03"), hint: convert},
	{Name: "miniSEED 2", Doc: "a miniSEED 2 file", detect: isMiniSEED, hint: convert},
	{Name: "SAC", Doc: "a SAC binary file", detect: isSAC, hint: convert},
	{Name: "binary", Doc: "a binary file of unknown kind", detect: isBinary, hint: convert},
	{Name: "DYNA", Doc: "a DYNA text file (ESM, ITACA, AFAD)", detect: firstLine(`^EVENT_NAME:`), hint: convert},
	{Name: "K-NET", Doc: "a K-NET or KiK-net text file", detect: all(firstLine(`^Origin Time`), within(20, `^Scale Factor`)), hint: convert},
	{Name: "K-NET CSV", Doc: "a K-NET or KiK-net CSV file", detect: firstLine(`^#(K-NET|KiK-net) CSV`), hint: convert},
	{Name: "COSMOS", Doc: "a COSMOS file", detect: firstLine(`\(Format v\d+\.\d+ with \d+ text lines\)`), hint: convert},
	{Name: "SMC", Doc: "an SMC file", detect: firstLine(`^[0-6] (UNCORRECTED ACCELEROGRAM|CORRECTED ACCELEROGRAM|VELOCITY|DISPLACEMENT|RESPONSE SPECTRA)`), hint: convert},
	{Name: "GeoNet", Doc: "a GeoNet volume file", detect: all(firstLine(`^(Unc|C)orrected accelerogram`), within(2, `^Site `)), hint: convert},
	{Name: "CSMIP", Doc: "a CSMIP or RENADIC volume 2 file", detect: anywhere(`(?i)^\s*\d+\s+points of accel\w* data equally spaced at`), hint: convert},
	{Name: "AT2", Doc: "count and step in a header (NPTS, DT), then numbers: .AT2 files", Read: true, detect: isAT2, read: readAT2},
	{Name: "CSMNC", Doc: "a CSMNC file", detect: all(within(20, `NO\. OF POINTS:`), within(20, `EQUALLY SPACED INTERVALS OF:`), within(20, `UNIT:`)), hint: convert},
	{Name: "AFAD", Doc: "an AFAD text file of the old layout", detect: all(within(25, `NUMBER OF DATA`), within(25, `SAMPLING INTERVAL`)), hint: convert},
	{Name: "CWB", Doc: "a CWB text file", detect: within(50, `^#(StationCode:|SampleRate)`), hint: convert},
	{Name: "SAC text", Doc: "a SAC alphanumeric file", detect: isSACText, hint: convert},
	{Name: "values", Doc: "bare numbers of one channel, row by row, however many in a line", Read: true, read: readValues},
	{Name: "columns", Doc: "plain columns and CSV: time and channels, or one channel", Read: true, detect: func(*file) bool { return true }, read: readAny},
}

func starts(magic string) func(*file) bool {
	return func(f *file) bool { return bytes.HasPrefix(f.data, []byte(magic)) }
}

func all(tests ...func(*file) bool) func(*file) bool {
	return func(f *file) bool {
		return !slices.ContainsFunc(tests, func(t func(*file) bool) bool { return !t(f) })
	}
}

// firstLine tests the first line that is not blank.
func firstLine(pattern string) func(*file) bool {
	re := regexp.MustCompile(pattern)
	return func(f *file) bool {
		for _, line := range f.head {
			if strings.TrimSpace(line) != "" {
				return re.MatchString(line[:min(len(line), 500)])
			}
		}
		return false
	}
}

// within tests the first n lines, one by one.
func within(n int, pattern string) func(*file) bool {
	re := regexp.MustCompile(pattern)
	return func(f *file) bool {
		return slices.ContainsFunc(f.head[:min(n, len(f.head))], func(line string) bool { return re.MatchString(line[:min(len(line), 500)]) })
	}
}

// anywhere tests the whole header region.
func anywhere(pattern string) func(*file) bool { return within(headLines, pattern) }

func isHTML(f *file) bool {
	text := strings.ToLower(strings.TrimSpace(f.text[:min(len(f.text), 500)]))
	for _, p := range []string{"<!doctype", "<html", "<head", "<body", "<?xml", "<!--"} {
		if strings.HasPrefix(text, p) {
			return true
		}
	}
	return false
}

func isMiniSEED(f *file) bool {
	d := f.data
	if len(d) < 48 || strings.Trim(string(d[:6]), "0123456789 ") != "" || strings.IndexByte("DRQM", d[6]) < 0 || d[7] != ' ' && d[7] != 0 {
		return false
	}
	year := func(o binary.ByteOrder) bool { y := o.Uint16(d[20:]); return y >= 1900 && y <= 2100 }
	return year(binary.BigEndian) || year(binary.LittleEndian)
}

func isSAC(f *file) bool {
	if len(f.data) < 632 {
		return false
	}
	for _, o := range []binary.ByteOrder{binary.LittleEndian, binary.BigEndian} {
		version, npts := o.Uint32(f.data[304:]), uint64(o.Uint32(f.data[316:]))
		if (version == 6 || version == 7) && uint64(len(f.data)) >= 632+4*npts {
			return true
		}
	}
	return false
}

// isBinary finds NULs early in what is not UTF-16.
func isBinary(f *file) bool {
	wide := bytes.HasPrefix(f.data, []byte{0xFF, 0xFE}) || bytes.HasPrefix(f.data, []byte{0xFE, 0xFF})
	text := bytes.TrimRight(f.data[:min(len(f.data), 4096)], "\x00\x1a\r\n ")
	return !wide && (len(text) == 0 || bytes.IndexByte(text, 0) >= 0)
}

// isSACText: fourteen lines of five fields of width 15, then eight of five integers of
// width 10.
func isSACText(f *file) bool {
	if len(f.head) < 22 {
		return false
	}
	for i, line := range f.head[:22] {
		width := 15
		if i >= 14 {
			width = 10
		}
		line = strings.TrimRight(line, " ")
		if len(line) != 5*width {
			return false
		}
		for k := range 5 {
			field := line[k*width : (k+1)*width]
			if _, _, ok := number(field); !ok || i >= 14 && strings.Contains(field, ".") {
				return false
			}
		}
	}
	return true
}
