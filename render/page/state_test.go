package page

import (
	"reflect"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

func TestOpenState(t *testing.T) {
	clean := func() *exhibit.Package {
		return &exhibit.Package{Provenance: exhibit.Provenance{Commit: "1a2b"}, Meta: exhibit.Meta{Status: "issued",
			Prepared: exhibit.Sign{Initials: "RT"}, Checked: exhibit.Sign{Initials: "KM"}, Approved: exhibit.Sign{Initials: "LB"}}}
	}
	for _, tt := range []struct {
		spoil func(*exhibit.Package)
		want  []string
	}{
		{func(*exhibit.Package) {}, nil},
		{func(p *exhibit.Package) { p.Meta.Status = "Draft" }, []string{"draft"}},
		{func(p *exhibit.Package) { p.Meta.Status = "" }, []string{"status not given"}},
		{func(p *exhibit.Package) { p.Meta.Status = "superseded" }, []string{"superseded"}},
		{func(p *exhibit.Package) { p.Meta.Status = "for check"; p.Meta.Checked = exhibit.Sign{} }, nil},
		{func(p *exhibit.Package) { p.Meta.Checked = exhibit.Sign{} }, []string{"not checked"}},
		{func(p *exhibit.Package) { p.Meta.Checked.Initials = " rt" }, []string{"not checked: same person"}},
		{func(p *exhibit.Package) { p.Meta.Checked.Initials = "R.T." }, []string{"not checked: same person"}},
		{func(p *exhibit.Package) { p.Meta.Checked.Initials = "KM, r t" }, []string{"not checked: same person"}},
		{func(p *exhibit.Package) { p.Meta.Checked.Initials = "2026-03-02" }, []string{"not checked"}},
		{func(p *exhibit.Package) { p.Meta.Checked.Initials = "KM pending" }, []string{"not checked"}},
		{func(p *exhibit.Package) { p.Meta.Approved.Initials = "-" }, []string{"not approved"}},
		{func(p *exhibit.Package) { p.Meta.Prepared.Initials = "?" }, []string{"not prepared by anyone named"}},
		{func(p *exhibit.Package) { p.Meta.Approved = exhibit.Sign{} }, []string{"not approved"}},
		{func(p *exhibit.Package) { p.Assumptions = []exhibit.Assumption{{Status: "open"}, {Status: "verified"}} }, []string{"1 open assumption"}},
		{func(p *exhibit.Package) { p.Assumptions = make([]exhibit.Assumption, 2) }, []string{"2 open assumptions"}},
		{func(p *exhibit.Package) { p.Checks = []exhibit.Check{{OK: true}, {OK: false}} }, []string{"1 check NOT OK"}},
		{func(p *exhibit.Package) { p.Checks = make([]exhibit.Check, 3) }, []string{"3 checks NOT OK"}},
		{func(p *exhibit.Package) { p.Provenance.Dirty = true }, []string{"source not committed"}},
		{func(p *exhibit.Package) { p.Provenance.Commit = "" }, []string{"source not under version control"}},
		{func(p *exhibit.Package) {
			p.Provenance.Overrides = []exhibit.Override{{Name: "a"}, {Name: "b"}, {Name: "c"}, {Name: "d"}, {Name: "e"}, {Name: "f"}}
		}, []string{"NOT FOR ISSUE: values overridden: a, b, c, d and 2 more"}},
		{func(p *exhibit.Package) { p.Provenance.Overrides = []exhibit.Override{{Name: "a"}, {Name: "b"}} }, []string{"NOT FOR ISSUE: values overridden: a, b"}},
	} {
		p := clean()
		tt.spoil(p)
		if got := OpenState(p); !slices.Equal(got, tt.want) {
			t.Errorf("got %q, want %q", got, tt.want)
		}
	}
}

func TestPeople(t *testing.T) {
	for _, tt := range []struct {
		prepared, checked, want string
	}{
		{"MK", "M.K.", "not checked: same person"}, {"MK", "M K", "not checked: same person"}, {"M.K", "mk", "not checked: same person"},
		{"MK", "ＭＫ", "not checked: same person"}, {"MK", "MK, RT", "not checked: same person"}, {"MK, RT", "RT", "not checked: same person"}, {"MK & RT", "r.t.", "not checked: same person"},
		{"MK", "RT", "RT"}, {"MK", "M. Kay", "M. Kay"}, {"MK", "K.M.", "K.M."}, {"", "RT", "RT (preparer not given)"}, {"tbd", "RT", "RT (preparer not given)"},
		{"MK", "", "——"}, {"MK", "-", "——"}, {"MK", "?", "——"}, {"MK", "2026-03-02", "——"}, {"MK", "Pending", "——"}, {"MK", "TBD 2026-03-02", "——"},
		{"MK", "none", "——"}, {"MK", "N/A", "——"}, {"MK", "n.a.", "——"}, {"MK", "NA", "——"}, {"MK", "not yet", "——"}, {"MK", "(tbc)", "——"}, {"MK", "—none—", "——"},
	} {
		if got := checkedText(tt.prepared, tt.checked); got != tt.want {
			t.Errorf("prepared %q, checked %q: %q, want %q", tt.prepared, tt.checked, got, tt.want)
		}
	}
}

// TestNotation: a symbol stands once, at its first meaning; a single value is
// shown with its digits, of others the unit.
func TestNotation(t *testing.T) {
	three := quantity.Scalar(3, quantity.Unit{})
	third := quantity.Scalar(1.0/3, quantity.Unit{})
	metre := quantity.MustUnit("m")
	name, literal := &expr.Node{Op: expr.Name, Text: "x"}, &expr.Node{Op: expr.Literal, Text: "15.24", Unit: "m"}
	meaning := func(text string, unit quantity.Unit, ids ...string) exhibit.Meaning {
		m := exhibit.Meaning{Text: text, Unit: unit}
		for _, id := range ids {
			block, _, dotted := strings.Cut(id, ".")
			if !dotted {
				block = ""
			}
			m.Places = append(m.Places, exhibit.SymbolPlace{ID: id, Block: block})
		}
		return m
	}
	b := newBook(&exhibit.Package{System: quantity.SI,
		Values: []exhibit.Entry{{ID: "a1", Value: three, Tree: name}, {ID: "m.a1", Value: third}, {ID: "a2", Value: quantity.Scalar(7, metre), Tree: name}, {ID: "a2b", Value: quantity.Scalar(15.24, metre), Tree: literal},
			{ID: "v.a3", Value: quantity.List([]float64{1, 2}, metre, nil)}},
		Notation: []exhibit.Symbol{
			{Name: "a1", Meanings: []exhibit.Meaning{meaning("count", quantity.Unit{}, "a1"), meaning("part", quantity.Unit{}, "m.a1")}},
			{Name: "a2", Meanings: []exhibit.Meaning{meaning("", metre, "a2")}}, {Name: "a2b", Meanings: []exhibit.Meaning{meaning("", metre, "a2b")}},
			{Name: "a3", Meanings: []exhibit.Meaning{meaning("heights", metre, "v.a3")}},
			{Name: "a4", Meanings: []exhibit.Meaning{meaning("length", metre, "p.a4", "q.a4", "r.a4", "s.a4", "t.a4", "u.a4", "v.a4", "w.a4")}},
		}}, Options{})
	var got []string
	for _, rows := range b.notation() {
		for i, r := range rows {
			places := ""
			for _, p := range r.Places {
				places += p.Block + " "
			}
			got = append(got, r.Meaning+"|"+r.Value+"|"+strings.TrimSpace(places))
			if r.First != (i == 0) {
				t.Errorf("row %d of %s: first is %v", i, r.Meaning, r.First)
			}
		}
	}
	if want := "count|3|; part|0.3333|m; |7.000\u202fm|; |15.24\u202fm|; heights|2 values, m|v; length|m|p q r s t u and 2 more"; strings.Join(got, "; ") != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

func TestUnitColumn(t *testing.T) {
	b := newBook(&exhibit.Package{System: quantity.SI}, Options{})
	second, metre := quantity.MustUnit("s"), quantity.MustUnit("m")
	num := func(x float64, u quantity.Unit) exhibit.Cell {
		return exhibit.Cell{Numbers: []exhibit.Number{{Value: x, Unit: u, Digits: 2}}}
	}
	b.table(&exhibit.Table{}, "")
	it := b.table(&exhibit.Table{Columns: []exhibit.Column{{Head: "measure"}, {Head: "value"}, {Head: "unit"}, {Head: "at"}},
		Rows: [][]exhibit.Cell{{{Text: "a"}, num(2, second), {Text: "s"}, num(3, metre)}, {{Text: "b"}, num(4, metre), {}, num(3, metre)}}}, "")
	rows := reflect.ValueOf(it[0].data).FieldByName("Rows").Interface().([][]cellView)
	got := []string{rows[0][1].Numbers, rows[0][3].Numbers, rows[1][1].Numbers}
	if want := []string{"2.0", "3.0\u202fm", "4.0\u202fm"}; !slices.Equal(got, want) {
		t.Errorf("got %q, want %q", got, want)
	}
}

func TestOutline(t *testing.T) {
	o := outline{number: "2"}
	var got []string
	for _, level := range []int{3, 5, 5, 4, 3, 2, 6} {
		_, n := o.step(level)
		got = append(got, n)
	}
	if want := "2.1 2.1.1 2.1.2 2.1.3 2.2 2.3 2.3.1"; strings.Join(got, " ") != want {
		t.Errorf("got %v, want %s", got, want)
	}
}

func TestCSSString(t *testing.T) {
	if got, want := cssString("a\"}</style>\n·"), `"a\22 \7D \3C \2F style\3E \A \B7 "`; got != want {
		t.Errorf("got %s, want %s", got, want)
	}
}

func TestPack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		const most = 100.0
		head := &item{name: "again", high: 5}
		var items []item
		for range rapid.IntRange(1, 60).Draw(t, "n") {
			it := item{high: rapid.Float64Range(1, 140).Draw(t, "high"), keep: rapid.IntRange(0, 4).Draw(t, "keep") == 0, fresh: rapid.IntRange(0, 9).Draw(t, "fresh") == 0}
			if it.keep {
				it.high = min(it.high, 20)
			}
			if rapid.Bool().Draw(t, "block") {
				it.again = head
			}
			items = append(items, it)
		}
		sheets := pack(items, rooms{most, most})
		var flat []item
		for _, sheet := range sheets {
			s, used := sheet.items, 0.0
			for i, it := range s {
				used += it.high
				if it.name != "again" {
					flat = append(flat, it)
				} else if i != 0 {
					t.Fatal("a block goes on in the middle of a sheet")
				}
				if it.fresh && i > 1 {
					t.Fatal("what starts a sheet stands inside one")
				}
			}
			before := used - s[len(s)-1].high // the last item, and what is kept with it
			for i := len(s) - 2; i >= 0 && s[i].keep; i-- {
				before -= s[i].high
			}
			if used > most && before > most/2 {
				t.Fatalf("a sheet of %.0f mm, %.0f mm of it before what does not fit", used, before)
			}
			if last := s[len(s)-1]; last.keep && len(flat) < len(items) && !items[len(flat)].fresh {
				t.Fatal("a heading ends a sheet")
			}
		}
		if len(flat) != len(items) {
			t.Fatalf("%d items of %d", len(flat), len(items))
		}
		for i := range flat {
			if flat[i].high != items[i].high {
				t.Fatal("out of order")
			}
		}
	})
}
