package markdown

import (
	"encoding/json"
	"reflect"
	"strings"
	"testing"

	"quoin/calc/diag"
	"quoin/calc/exhibit"
)

// sound checks what is true of every file, right or wrong.
func sound(t *testing.T, source []byte, file *File, list diag.List) {
	t.Helper()
	lines := strings.Split(strings.ReplaceAll(strings.TrimPrefix(string(source), "\ufeff"), "\r\n", "\n"), "\n")
	inside := func(what string, r diag.Range) {
		if r.Line < 1 || r.EndLine < r.Line || r.EndLine > len(lines) || r.Column < 1 || r.EndLine == r.Line && r.EndColumn < r.Column ||
			r.EndColumn > 1+len([]rune(lines[r.EndLine-1])) {
			t.Errorf("%s: the range %+v is not in the file (%d lines)", what, r, len(lines))
		}
	}
	for _, d := range list {
		if d.Code == "markdown-fault" {
			t.Errorf("fault: %s", d.Summary)
			continue
		}
		inside(d.Code, d.Range)
		if d.Code == "" || d.Summary == "" || strings.HasSuffix(d.Summary, ".") || strings.ContainsRune(d.Summary, '\n') {
			t.Errorf("ill-formed message %+v", d)
		}
	}
	if list.HasErrors() && (reflect.DeepEqual(file, &File{}) || reflect.DeepEqual(file, &File{FrontFault: true})) {
		return
	}
	lives, fences := 0, 0
	var walk func(list []exhibit.Prose)
	walk = func(list []exhibit.Prose) {
		for _, p := range list {
			if p.Kind == exhibit.Value {
				if p.Level != lives {
					t.Fatalf("value %d is out of order: want %d", p.Level, lives)
				}
				lives++
			}
			walk(p.Children)
		}
	}
	for _, s := range file.Sections {
		walk(s.Title)
		for _, p := range s.Pieces {
			if p.Fence >= 0 {
				if p.Prose != nil || p.Fence != fences {
					t.Fatalf("fence %d is out of order: want %d", p.Fence, fences)
				}
				fences++
			}
			walk(p.Prose)
		}
	}
	for _, f := range file.Footnotes {
		walk(f.Body)
	}
	if lives != len(file.Lives) || fences != len(file.Fences) {
		t.Errorf("the prose shows %d values and %d fences of %d and %d", lives, fences, len(file.Lives), len(file.Fences))
	}
	for _, l := range file.Lives {
		inside("value", l.Range)
		all := ""
		for i, p := range l.Parts {
			all += p.Text
			if text := strings.TrimSuffix(p.Text, "\n"); !strings.HasPrefix(from(lines, p.Line, p.Column), text) {
				t.Errorf("part %d of %q does not stand at %d:%d", i, l.Text, p.Line, p.Column)
			}
		}
		if all != l.Text {
			t.Errorf("parts %+v make %q, not %q", l.Parts, all, l.Text)
		}
	}
	for _, f := range file.Fences {
		inside("fence", f.Place)
		inside("kind", f.KindRange)
		if f.Kind == "" || !strings.HasPrefix(from(lines, f.KindRange.Line, f.KindRange.Column), f.Kind) {
			t.Errorf("kind %q does not stand at %v", f.Kind, f.KindRange)
		}
		if f.Name != "" && !strings.HasPrefix(from(lines, f.NameRange.Line, f.NameRange.Column), f.Name) {
			t.Errorf("name %q does not stand at %v", f.Name, f.NameRange)
		}
		for _, l := range f.Body {
			if text := strings.TrimLeft(l.Text, " \t"); !strings.HasSuffix(lines[l.Line-1], text) || l.Line <= f.Place.Line || l.Line >= f.EndLine {
				t.Errorf("line %+v of fence %v-%d is not line %q", l, f.Place, f.EndLine, lines[l.Line-1])
			}
		}
	}
	if data, err := json.Marshal(file); err != nil {
		t.Errorf("the file is no plain data: %v", err)
	} else if err := json.Unmarshal(data, &File{}); err != nil {
		t.Errorf("the file does not come back from its encoding: %v", err)
	}
}

// from is a source line from a column on.
func from(lines []string, line, column int) string {
	if line < 1 || line > len(lines) || column < 1 {
		return ""
	}
	r := []rune(lines[line-1])
	return string(r[min(column-1, len(r)):])
}
