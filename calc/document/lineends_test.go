package document

import (
	"bytes"
	"encoding/json"
	"path"
	"path/filepath"
	"reflect"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"github.com/rogpeppe/go-internal/txtar"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
)

const byteOrderMark = "\uFEFF"

// savedAs is the ways in which the editors and spreadsheets of other systems save
// the same text.
var savedAs = []struct {
	name string
	save func(text string) string
}{
	{"CRLF", func(s string) string { return strings.ReplaceAll(s, "\n", "\r\n") }},
	{"mark", func(s string) string { return byteOrderMark + s }},
	{"mark and CRLF", func(s string) string { return byteOrderMark + strings.ReplaceAll(s, "\n", "\r\n") }},
}

// savedFiles is the files of an archive, saved another way; nil where one of them holds
// marks or line ends of its own.
func savedFiles(a *txtar.Archive, save func(string) string) fstest.MapFS {
	fs := fstest.MapFS{}
	for _, f := range a.Files {
		switch {
		case f.Name == "want":
			continue
		case bytes.ContainsAny(f.Data, "\r\uFEFF\x00"), !bytes.Equal(f.Data, bytes.ToValidUTF8(f.Data, nil)):
			return nil
		case !slices.Contains([]string{".md", ".csv", ".txt", ".at2"}, strings.ToLower(path.Ext(f.Name))), len(f.Data) == 0:
			fs[f.Name] = &fstest.MapFile{Data: f.Data}
		default:
			fs[f.Name] = &fstest.MapFile{Data: []byte(save(string(f.Data)))}
		}
	}
	return fs
}

// TestSavedElsewhere: marks and line ends of other systems in the document, its
// parts, its tables and its records change no value and no message, nor the place
// of one, nor the line and the caret shown with it.
func TestSavedElsewhere(t *testing.T) {
	names := []string{"testdata/kinds.txtar"}
	for _, folder := range []string{"diagnostics", "codes"} {
		found, _ := filepath.Glob("testdata/" + folder + "/*.txtar")
		if len(found) == 0 {
			t.Fatal("no archives found in " + folder)
		}
		names = append(names, found...)
	}
	messages := 0
	for _, name := range names {
		a, plain := archive(t, name)
		for _, way := range savedAs {
			fs := savedFiles(a, way.save)
			if fs == nil {
				continue
			}
			res := Run(Source{FS: fs, Main: "package.md"}, Options{})
			if got, want := text(res), text(plain); !bytes.Equal(got, want) {
				t.Errorf("%s with %s says\n%s\nwant\n%s", name, way.name, got, want)
			}
			if !reflect.DeepEqual(rangesOf(res.Diagnostics), rangesOf(plain.Diagnostics)) {
				t.Errorf("%s with %s: the places of messages differ", name, way.name)
			}
			messages += len(res.Diagnostics)
			if (res.Package == nil) != (plain.Package == nil) {
				t.Errorf("%s with %s: a package in one case only", name, way.name)
			} else if res.Package != nil && shownOf(t, res.Package) != shownOf(t, plain.Package) {
				t.Errorf("%s with %s makes another package", name, way.name)
			}
		}
	}
	if messages < 300 {
		t.Errorf("only %d messages compared", messages)
	}
}

func rangesOf(list diag.List) []diag.Range {
	var out []diag.Range
	for _, d := range list {
		out = append(out, d.Range)
	}
	return out
}

// shownOf is all of a package but the sizes and hashes of the files read.
func shownOf(t *testing.T, p *exhibit.Package) string {
	t.Helper()
	q := *p
	q.Inputs = nil
	data, err := json.Marshal(q)
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

// savedTables are data files with a fault in their first line, or with none.
var savedTables = []struct{ block, file, text string }{
	{"structure s\nstoreys: data.csv", "data.csv", "levels,height [m],weight [kN],stiffness [kN/mm]\nL1,4,1000,20\n"},
	{"structure s\nstoreys: data.csv", "data.csv", "level,height [mile],weight [kN],stiffness [kN/mm]\nL1,4,1000,20\n"},
	{"structure s\nstoreys: data.csv", "data.csv", "\"level\",height [m],weight [kN],stiffness [kN/mm]\nL1,x,1000,20\n"},
	{"structure s\nstoreys: data.csv", "data.csv", "L1,4,1000,20\n"},
	{"structure s\nstoreys: data.csv", "data.csv", "1,4,1000,20\n"},
	{"target t\ntable: data.csv\ndamping: 5 %", "data.csv", "T [s],PSA [gg]\n0,1\n1,1\n"},
	{"target t\ntable: data.csv\ndamping: 5 %", "data.csv", "0,1\n1,1\n"},
	{"target t\ntable: data.csv\ndamping: 5 %\ncolumns: [T, Sa]\nunits: [s, g]", "data.csv", "0,one\n1,1\n"},
	{"target t\ntable: data.csv\ndamping: 5 %", "data.csv", "# a remark\nT [s];PSA [g]\n0;1\n1;1;1\n"},
	{"record r\nfile: data.csv\nstep: 0.01 s\nunit: g", "data.csv", "nine\n0.1\n0.2\n"},
	{"record r\nfile: data.csv\nstep: 0.01 s\nunit: g", "data.csv", "0.1 x 3\n0.1\n0.2\n"},
	{"record r\nfile: data.csv", "data.csv", "t [s],a [cm/s^2]\n0,0\n0.01,*\n0.02,0\n"},
	{"record r\nfile: data.csv\nunit: g", "data.csv", "0,0\n0.01,0.1\n0.03,0\n"},
	{"record r\nfile: data.csv\nstep: 0.01 s\nunit: g", "data.csv", "0.1\n0.2\nNaN\n"},
}

// TestTablesSavedElsewhere: the same of faults in the first lines of tables and
// records, where a mark would move a column.
func TestTablesSavedElsewhere(t *testing.T) {
	for _, c := range savedTables {
		body := head + "\n```calc " + c.block + "\n```\n"
		run := func(save func(string) string) Result {
			return Run(Source{FS: fstest.MapFS{"package.md": {Data: []byte(body)}, c.file: {Data: []byte(save(c.text))}}, Main: "package.md"}, Options{})
		}
		plain := run(func(s string) string { return s })
		if len(plain.Diagnostics) == 0 {
			t.Errorf("%q has no fault", c.text)
		}
		for _, way := range savedAs {
			res := run(way.save)
			if !bytes.Equal(text(res), text(plain)) || !reflect.DeepEqual(rangesOf(res.Diagnostics), rangesOf(plain.Diagnostics)) {
				t.Errorf("%q with %s says\n%s\nwant\n%s", c.text, way.name, text(res), text(plain))
			}
		}
	}
}

// TestMarkAlone: a file that is a mark and nothing else is empty.
func TestMarkAlone(t *testing.T) {
	codes := func(main string) string {
		res := Run(Source{FS: fstest.MapFS{"package.md": {Data: []byte(main)}}, Main: "package.md"}, Options{})
		var out []string
		for _, d := range res.Diagnostics {
			out = append(out, d.Code+" "+d.Range.String())
		}
		return strings.Join(out, ", ")
	}
	if a, b := codes(""), codes(byteOrderMark); a != b || a == "" {
		t.Errorf("an empty file: %s; a mark alone: %s", a, b)
	}
}
