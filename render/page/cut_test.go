package page

import (
	"reflect"
	"strconv"
	"strings"
	"testing"

	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// TestCut: what is too high for a sheet is cut; nothing is lost or said twice but a
// table's head, a list goes on counting, and a term stays with what describes it.
func TestCut(t *testing.T) {
	const most = 120.0
	text := func(s string) exhibit.Prose { return exhibit.Prose{Kind: exhibit.Text, Text: s} }
	of := func(kind exhibit.ProseKind, c ...exhibit.Prose) exhibit.Prose {
		return exhibit.Prose{Kind: kind, Children: c}
	}
	var list, terms, rows, words []exhibit.Prose
	var listing []string
	for i := range 200 {
		n := strconv.Itoa(i)
		list = append(list, of(exhibit.ListItem, text("item "+n)))
		terms = append(terms, of(exhibit.Term, text("term "+n)), of(exhibit.Description, text("said "+n)))
		rows = append(rows, of(exhibit.TableRow, of(exhibit.TableCell, text("row "+n))))
		words = append(words, text(strings.Repeat("word ", 9)+n+" "), of(exhibit.Strong, text("strong "+n)), text(", and so on. "))
		listing = append(listing, "line "+n)
	}
	long := of(exhibit.ListItem, of(exhibit.Paragraph, words...))
	b := newBook(plainPackage("A4", 0), Options{})
	for _, n := range []exhibit.Prose{of(exhibit.BulletList, list...), of(exhibit.OrderedList, list...), of(exhibit.DefinitionList, terms...), of(exhibit.ProseTable, rows...), {Kind: exhibit.CodeBlock, Text: strings.Join(listing, "\n")},
		of(exhibit.Paragraph, words...), of(exhibit.Quote, of(exhibit.Paragraph, words...)), of(exhibit.OrderedList, list[0], long, list[1])} {
		var parts []exhibit.Prose
		for _, s := range pack(b.nodes(n), rooms{most, most}) {
			if high := total(s.items); high > most {
				t.Errorf("%s: a sheet is %v mm high", n.Kind, high)
			}
			for _, it := range s.items {
				parts = append(parts, it.data.(exhibit.Prose))
			}
		}
		if len(parts) < 4 {
			t.Errorf("%s: %d parts", n.Kind, len(parts))
		}
		next, all := 1, ""
		for i, p := range parts {
			if n.Kind == exhibit.OrderedList {
				if got := max(p.Level, 1); got != next-min(1, p.Children[0].Level) {
					t.Errorf("part %d counts from %d, want %d", i, got, next)
				}
				next += len(p.Children) - p.Children[0].Level
			}
			if n.Kind == exhibit.DefinitionList && p.Children[len(p.Children)-1].Kind == exhibit.Term {
				t.Errorf("part %d ends with a term", i)
			}
			if n.Kind == exhibit.ProseTable && i > 0 {
				if plain(p.Children[:1]) != "row 0" {
					t.Errorf("part %d has the head %q", i, plain(p.Children[:1]))
				}
				p.Children = p.Children[1:]
			}
			all += plain([]exhibit.Prose{p})
		}
		bare := strings.NewReplacer("\n", "", " ", "")
		if want := plain([]exhibit.Prose{n}); bare.Replace(all) != bare.Replace(want) {
			t.Errorf("%s: cut says\n%s\nnot\n%s", n.Kind, all, want)
		}
	}
	if it := b.nodes(of(exhibit.BulletList, list[:5]...))[0]; it.cut != nil {
		t.Errorf("a short list is cut")
	}
}

// TestLongVector: the items of a long vector go on in further items that fit, from
// the highest level down; an equation that no sheet holds is set smaller on paper.
func TestLongVector(t *testing.T) {
	b := newBook(&exhibit.Package{System: quantity.SI}, Options{})
	var si []float64
	var labels []string
	for i := range 300 {
		si, labels = append(si, float64(i)), append(labels, "L"+strconv.Itoa(i+1))
	}
	v := quantity.List(si, quantity.MustUnit("m"), labels)
	name := &expr.Node{Op: expr.Name, Text: "h", Value: &v}
	out := b.equation(&exhibit.Equation{ID: "h", Symbol: name, Tree: name, Result: &v}, "")
	next := 300
	for i, it := range out {
		if it.high > b.room() {
			t.Errorf("item %d is %v mm high", i, it.high)
		}
		for _, c := range it.data.(equationView).Columns {
			for _, l := range c {
				if l.Label != "L"+strconv.Itoa(next) {
					t.Fatalf("%s where L%d belongs", l.Label, next)
				}
				next--
			}
		}
	}
	if next != 0 || len(out) < 3 {
		t.Errorf("%d items, %d labels missing", len(out), next)
	}
	sum := &expr.Node{Op: expr.Name, Text: "a_long_name_of_a_value", Value: &quantity.Value{SI: []float64{1}}}
	tree := sum
	for range 400 {
		tree = &expr.Node{Op: expr.Add, Args: []*expr.Node{tree, sum}}
	}
	one := quantity.Pure(1)
	it := b.equation(&exhibit.Equation{Symbol: name, Tree: tree, Result: &one}, "")[0]
	if shrink := it.data.(equationView).Shrink; shrink == "" || it.high > b.room() {
		t.Errorf("shrink %q, %v mm high", shrink, it.high)
	}
}

// TestLongList: a long vector without levels is shown by its ends and extremes, each
// with its number, and says of how many.
func TestLongList(t *testing.T) {
	b := newBook(&exhibit.Package{System: quantity.SI}, Options{})
	si := make([]float64, longest+1)
	for i := range si {
		si[i] = float64((i*i + 5) % 37)
	}
	v := quantity.List(si, quantity.MustUnit("m"), nil)
	name := &expr.Node{Op: expr.Name, Text: "h", Value: &v}
	out := b.equation(&exhibit.Equation{ID: "h", Symbol: name, Tree: name, Result: &v}, "")
	view := out[0].data.(equationView)
	if len(out) != 1 || view.Over != "of 49" || len(view.Columns) != 1 {
		t.Fatalf("%d items, over %q", len(out), view.Over)
	}
	least, most := 0, 0
	for i := range si {
		if si[i] < si[least] {
			least = i
		}
		if si[i] > si[most] {
			most = i
		}
	}
	show := func(i int) string { return quantity.Format(si[i], quantity.Digits) }
	want := []labelled{{Label: "1", Text: show(0)}, {Label: "2", Text: show(1)}, {Label: "3", Text: show(2)}, {Label: "⋮", Text: ""}, {Label: "49", Text: show(48)}, {Label: "least, " + strconv.Itoa(least+1), Text: show(least)}, {Label: "largest, " + strconv.Itoa(most+1), Text: show(most)}}
	if !reflect.DeepEqual(view.Columns[0], want) {
		t.Errorf("%v\nwant\n%v", view.Columns[0], want)
	}
	short := quantity.List(si[:longest], quantity.MustUnit("m"), nil)
	shown := 0
	for _, it := range b.equation(&exhibit.Equation{ID: "h", Symbol: name, Tree: name, Result: &short}, "") {
		for _, c := range it.data.(equationView).Columns {
			shown += len(c)
		}
	}
	if shown != longest {
		t.Errorf("%d of %d items are shown", shown, longest)
	}
}

// TestWideEcho: a formula too wide for one of the two columns of an echo takes both.
func TestWideEcho(t *testing.T) {
	b := newBook(&exhibit.Package{System: quantity.SI}, Options{})
	short := &expr.Node{Op: expr.Name, Text: "V"}
	long := short
	for range 20 {
		long = &expr.Node{Op: expr.Add, Args: []*expr.Node{long, short}}
	}
	row := func(n *expr.Node) exhibit.EchoRow {
		return exhibit.EchoRow{Field: "columns", Label: "shear", Value: exhibit.Cell{Symbol: n}}
	}
	narrow := b.echo(&exhibit.Echo{Rows: []exhibit.EchoRow{row(short), row(short)}}, "")[0]
	wide := b.echo(&exhibit.Echo{Rows: []exhibit.EchoRow{row(short), row(long)}}, "")[0]
	if wide.high <= narrow.high {
		t.Errorf("%v mm for a wide row of its own, %v mm for two side by side", wide.high, narrow.high)
	}
	for _, c := range []struct {
		it   item
		want int
	}{{narrow, 0}, {wide, 1}} {
		var page strings.Builder
		if err := b.tmpl.ExecuteTemplate(&page, "echo", c.it.data); err != nil {
			t.Fatal(err)
		}
		if got := strings.Count(page.String(), `class="wide"`); got != c.want {
			t.Errorf("%d wide rows, want %d", got, c.want)
		}
	}
}
