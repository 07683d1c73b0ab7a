package document

import (
	"strings"
	"testing"
	"testing/fstest"

	"quoin/calc/exhibit"
)

// book2 runs a document that may have faults.
func book2(main string, files map[string]string) (fstest.MapFS, Result) {
	fs := fstest.MapFS{"package.md": {Data: []byte(main)}}
	for name, text := range files {
		fs[name] = &fstest.MapFile{Data: []byte(text)}
	}
	return fs, Run(Source{FS: fs, Main: "package.md"}, Options{})
}

// grid is a table as text: heads, then rows; a number with its id.
func grid(t *exhibit.Table) []string {
	var out []string
	line := ""
	for _, c := range t.Columns {
		line += strings.TrimSpace(c.Head+" "+c.Unit.Text) + "|"
	}
	out = append(out, line)
	for _, row := range t.Rows {
		line = ""
		for _, c := range row {
			line += c.Text
			for _, n := range c.Numbers {
				line += n.Text()
				if n.ID != "" {
					line += " " + n.ID
				}
			}
			line += "|"
		}
		out = append(out, line)
	}
	return out
}

func hold(t *testing.T, p *exhibit.Package, id string, want ...string) {
	t.Helper()
	got := grid(table(t, p, id))
	if strings.Join(got, "\n") != strings.Join(want, "\n") {
		t.Errorf("table %s is\n%s\nwant\n%s", id, strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
}

// TestTables: vectors by level stand highest on top unless asked, values lead to
// the registry, sums are those of the column in its decimals.
func TestTables(t *testing.T) {
	p := ran(t, tower+calc("formula", "V = 12.5 kN  # a shear", "v = [1 m, 2 m]")+
		calc("table a", "columns:", "  - frame.w", "  - { value: 1.2 * frame.w, head: F_x, unit: kip, digits: 5 }", "  - { value: frame.h_s, head: storey height }", "sum: [frame.w, 2]")+
		calc("table b", "columns: [frame.h]", "order: lowest first", "caption: Heights")+
		calc("table c", "columns: [v]", "labels: [first, second]")+
		calc("table d", "columns: [v]")+
		calc("table e", "values:", "  - V", "  - { value: frame.weight, label: all of it, unit: kip, digits: 6 }", "  - 2 * V", "  - \"frame.h[2]\""), nil)
	hold(t, p, "a", "level|frame.w kN|F_x kip|storey height m|",
		"L2|80.00 frame.w[2]|21.582|3.000 frame.h_s[2]|", "L1|100.0 frame.w[1]|26.977|4.000 frame.h_s[1]|", "sum|180.00|48.559||")
	hold(t, p, "b", "level|frame.h m|", "L1|4.000 frame.h[1]|", "L2|7.000 frame.h[2]|")
	hold(t, p, "c", "|v m|", "first|1.000 v[1]|", "second|2.000 v[2]|")
	hold(t, p, "d", "item|v m|", "1|1.000 v[1]|", "2|2.000 v[2]|")
	hold(t, p, "e", "quantity|symbol|value|unit|", "a shear||12.50 V|kN|", "all of it||40.4656 frame.weight|kip|", "||25.00|kN|", "elevation of each level above the base||7.000 frame.h[2]|m|")
	for id, want := range map[string]string{"a": "Values by level, highest on top", "b": "Heights: values by level, lowest on top", "c": "Values by item"} {
		if got := table(t, p, id).Caption; got != want {
			t.Errorf("caption of %s: %q, want %q", id, got, want)
		}
	}
	if c := table(t, p, "a").Columns; c[1].Symbol == nil || !c[1].Bare || c[2].Symbol == nil || c[3].Symbol != nil {
		t.Error("heads: an expression and a symbol are typeset, words are not")
	}
}

// TestFileTable: a file is shown with the digits it is written with, texts beside
// numbers, and becomes an input with its hash.
func TestFileTable(t *testing.T) {
	p := ran(t, calc("table loads", "file: loads.csv", "sum: load")+calc("table part", "file: loads.csv", "select: [load, name]"),
		map[string]string{"loads.csv": "\ufeffname;load [kN];note\r\nroof;12.50;a\r\nfloor;0.040;7\r\n"})
	hold(t, p, "loads", "name|load kN|note|", "roof|12.50|a|", "floor|0.040|7|", "sum|12.540||")
	hold(t, p, "part", "load kN|name|", "12.50|roof|", "0.040|floor|")
	in := p.Inputs[len(p.Inputs)-1]
	if in.Path != "loads.csv" || in.Role != "table" || len(in.SHA256) != 64 {
		t.Errorf("input %v", in)
	}
	_, res := book2(head+calc("table loads", "file: loads.csv"), map[string]string{"loads.csv": "name,load [kN]\nroof,12.5O\n"})
	if len(res.Diagnostics) != 1 || res.Diagnostics[0].Code != "table-number" || res.Diagnostics[0].Range.File != "loads.csv" || res.Diagnostics[0].Range.Line != 2 || res.Diagnostics[0].Range.Column != 6 {
		t.Errorf("a letter among digits: %v", res.Diagnostics)
	}
	for _, file := range []string{"name,load [kN]\n\u202eroof,12.5\n", "name,load [kN]\nroof\u0001,12.5\n"} {
		_, res = book2(head+calc("table loads", "file: loads.csv"), map[string]string{"loads.csv": file})
		if len(res.Diagnostics) != 1 || res.Diagnostics[0].Code != "hidden-character" || res.Diagnostics[0].Range.File != "loads.csv" || res.Diagnostics[0].Range.Line != 2 || res.Diagnostics[0].Range.Column != 1 {
			t.Errorf("%q: %v", file, res.Diagnostics)
		}
	}
}
