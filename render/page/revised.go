package page

import (
	"fmt"
	"html/template"
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
)

// What changed since an earlier revision is marked where it stands: a bar in the
// margin, a triangle with the letter of the revision, and what it was. All of it
// stands once more in a list, the sheets of which are named. Figures are not marked.

// changesID is the anchor of the list of changes.
const changesID = "q-changes"

// revised is what changed, by what it is.
type revised struct {
	letter, since string
	marks         []exhibit.Moved
	values        map[string][]exhibit.Moved // by id: values and inputs
	checks        map[string]exhibit.Moved   // by id and, from the second of an id on, its number
	sheets        []int                      // that hold a mark, once all are packed
}

func newRevised(p *exhibit.Package) revised {
	r := revised{letter: current(p).Rev, values: map[string][]exhibit.Moved{}, checks: map[string]exhibit.Moved{}}
	if p.Frozen == nil {
		return r
	}
	r.since, r.marks = p.Frozen.Since, p.Frozen.Marks
	for _, m := range r.marks {
		switch m.What {
		case exhibit.MovedValue, exhibit.MovedInput:
			r.values[m.ID] = append(r.values[m.ID], m)
		case exhibit.MovedCheck:
			r.checks[m.ID+"\x00"+m.Index] = m
		}
	}
	return r
}

func (r *revised) any() bool { return len(r.marks) > 0 }

// ofRevision is " of revision A", or nothing.
func ofRevision(rev string) string {
	if rev == "" {
		return ""
	}
	return " of revision " + rev
}

func (r *revised) sinceText() string {
	if r.since == "" {
		return "since results were frozen without a revision"
	}
	return "since revision " + r.since
}

func (r *revised) title() string {
	if r.since == "" {
		return "Changes"
	}
	return "Changes " + r.sinceText()
}

// sign is the triangle with the letter of the revision.
func (r *revised) sign() string { return "▲" + r.letter }

// legend says what the marks mean, and how many things changed.
func (r *revised) legend() string {
	count, flipped := map[string]int{}, 0
	for _, m := range r.marks {
		count[m.What]++
		if m.Flipped {
			flipped++
		}
	}
	var parts []string
	for _, w := range []struct{ what, one, many string }{{exhibit.MovedCheck, "check", "checks"}, {exhibit.MovedInput, "input", "inputs"}, {exhibit.MovedValue, "value", "values"},
		{exhibit.MovedSeries, "series", "series"}, {exhibit.MovedAssumption, "assumption", "assumptions"}} {
		if n := count[w.what]; n > 0 {
			text := fmt.Sprintf("%d %s", n, w.many)
			if n == 1 {
				text = "1 " + w.one
			}
			if w.what == exhibit.MovedCheck && flipped > 0 {
				text += fmt.Sprintf(" (%d flipped)", flipped)
			}
			parts = append(parts, text)
		}
	}
	return r.sign() + " marks what changed " + r.sinceText() + ": " + strings.Join(parts, ", ")
}

// row completes the row of the cover.
func (r *revised) row(c *coverRow) { c.Listed = changesID }

// wasView is what something was before the revision it is marked with.
type wasView struct{ Sign, Was, Since string }

// printed is how a mark reads.
func (w *wasView) printed() string {
	if w == nil {
		return ""
	}
	return " " + w.Sign + " " + w.Was
}

// told is how a card tells it.
func (w *wasView) told() string {
	if w == nil {
		return ""
	}
	return w.Sign + " " + w.Was + " " + w.Since
}

// high is how many lines a mark takes below its number in print, where a line of
// numbers holds so many characters.
func (w *wasView) high(chars int) float64 {
	if w == nil {
		return 0
	}
	return 0.8 * lines(w.printed(), max(1, chars*5/4))
}

func (r *revised) view(was string) *wasView { return &wasView{r.sign(), was, r.sinceText()} }

// mostWas is how many items of a whole a mark names.
const mostWas = 3

// was is what a value, or an item of one, was; nil where it has not changed.
func (b *book) was(id string) *wasView {
	stem, index, item := strings.Cut(id, "[")
	list := b.revised.values[stem]
	if len(list) == 0 {
		return nil
	}
	index = strings.NewReplacer("]", "", "[", ",", " ", "").Replace(index)
	var parts []string
	more := 0
	for _, m := range list {
		switch {
		case item && m.Index != index && m.Index != "":
			continue
		case len(parts) == mostWas:
			more++
			continue
		}
		text := "new"
		if m.Old != "" {
			text = "was " + m.Old
		}
		if !item && m.Index != "" {
			text = "[" + m.Index + "] " + text
		}
		if !slices.Contains(parts, text) { // an input and the value it gives
			parts = append(parts, text)
		}
	}
	if len(parts) == 0 {
		return nil
	}
	text := strings.Join(parts, ", ")
	if more > 0 {
		text += fmt.Sprintf(" and %d more", more)
	}
	return b.revised.view(text)
}

// wasNumber is what a number was, in the unit in which it is shown; bare without it.
func (b *book) wasNumber(n exhibit.Number, bare bool) *wasView {
	w := b.was(n.ID)
	stem, index, _ := strings.Cut(strings.NewReplacer("][", ",", "]", "").Replace(n.ID), "[")
	for _, m := range b.revised.values[stem] {
		if m.Index != index || m.Was == nil || !m.Was.Unit.Dim.Is(n.Unit.Dim) {
			continue
		}
		old, d := n, or0(n.Digits, quantity.Digits)
		old.Value, old.Digits = m.Was.Value, min(d, quantity.Exact(quantity.Rounded(n.Unit.From(m.Was.Value), 8)))
		for old.Digits < 12 && old.Text() == n.Text() {
			old.Digits++
		}
		w.Was = "was " + old.Text()
		if u := n.Unit.Pretty(); u != "" && !bare {
			w.Was += "\u202f" + u
		}
		break
	}
	return w
}

// itemOf is the id of the one item of a vector that has a value; else the id.
func (b *book) itemOf(id string, value float64) string {
	e, ok := b.entries[id]
	if !ok || e.Value.Shape != quantity.Vector {
		return id
	}
	at := slices.Index(e.Value.SI, value)
	if at < 0 || slices.Contains(e.Value.SI[at+1:], value) {
		return id
	}
	return fmt.Sprintf("%s[%d]", id, at+1)
}

func or0(a, b int) int {
	if a == 0 {
		return b
	}
	return a
}

// wasInput is what a field of the block being made was.
func (b *book) wasInput(field string) *wasView {
	return b.was(b.within + "." + field)
}

// wasCheck is what a check was.
func (b *book) wasCheck(c exhibit.Check) *wasView {
	m, ok := b.revised.checks[c.ID+"\x00"]
	switch {
	case !ok:
		return nil
	case m.Old == "":
		return b.revised.view("new")
	}
	return b.revised.view("was " + m.Old)
}

// affect finds the sheets that hold a mark.
func (b *book) affect(sheets []leaf) error {
	if !b.revised.any() {
		return nil
	}
	for i, s := range sheets {
		b.trail.here = i + 1
		for _, it := range s.items {
			text, err := b.execute(it)
			if err != nil {
				return err
			}
			if strings.Contains(string(text), `class="rv"`) {
				b.revised.sheets = append(b.revised.sheets, i+1)
				break
			}
		}
	}
	// What was made so far is made once more.
	b.marked, b.trail.uses, b.trail.order = map[int]bool{}, map[string]int{}, nil
	return nil
}

// affected is the sheets that a revision changed, for the current one.
func (b *book) affected(rev string) template.HTML {
	if !b.revised.any() || rev != b.revised.letter || len(b.revised.sheets) == 0 {
		return ""
	}
	var links []string
	for _, n := range b.revised.sheets {
		links = append(links, fmt.Sprintf(`<a href="#sheet-%d">%d</a>`, n, n))
	}
	word := "sheets "
	if len(links) == 1 {
		word = "sheet "
	}
	return template.HTML(template.HTMLEscapeString(b.revised.sign()) + " on " + word + strings.Join(links, ", "))
}

// frozenLine is the cover's row about frozen results.
func (b *book) frozenLine() (coverLine, bool) {
	f := b.p.Frozen
	switch {
	case f == nil:
		return coverLine{}, false
	case f.Current && f.Agrees():
		return coverLine{Text: "the results agree with those frozen" + ofRevision(f.Revision)}, true
	case f.Current:
		return coverLine{Open: "the results differ from those frozen" + ofRevision(f.Revision)}, true
	}
	text := "those" + ofRevision(f.Revision) + "; "
	if b.revised.letter == "" {
		return coverLine{Text: text + "this package names no revision"}, true
	}
	return coverLine{Text: text + "revision " + b.revised.letter + " is not frozen yet"}, true
}

// changeView is a row of the list of changes.
type changeView struct {
	Name, Item, Was, Is, By string
	ID, To                  string // of a value, or an anchor
	Flipped                 bool
}

// changes is the list of all that changed.
func (b *book) changes() []item {
	if !b.revised.any() {
		return nil
	}
	out := []item{{name: "changes-head", data: b.revised.title(), high: headingHigh, keep: true, anchors: []string{changesID}}}
	for _, g := range []struct{ what, title string }{{exhibit.MovedCheck, "Checks"}, {exhibit.MovedInput, "Inputs"}, {exhibit.MovedFile, "Files read, by their bytes"}, {exhibit.MovedAssumption, "Assumptions"},
		{exhibit.MovedValue, "Values, those that moved furthest first"}, {exhibit.MovedSeries, "Series, by their greatest ordinate without sign and the root of the mean of squares"}, {exhibit.MovedBlock, "Blocks"}} {
		var rows []changeView
		for _, m := range b.revised.marks {
			if m.What == g.what {
				rows = append(rows, b.change(m))
			}
		}
		out = append(out, changeTable(g.title, rows, !b.o.Body)...)
	}
	return out
}

// withChanges puts the list of changes behind the first chapter of a change sheet.
func (b *book) withChanges(body []item) []item {
	at := len(body)
	for i, it := range body {
		if it.name == "chapter" && i > 0 {
			at = i
			break
		}
	}
	return slices.Concat(body[:at], b.changes(), body[at:])
}

func (b *book) change(m exhibit.Moved) changeView {
	v := changeView{Name: m.ID, Item: m.Label, Was: or(m.Old, "——"), Is: or(m.New, "——"), Flipped: m.Flipped}
	if m.Index != "" && m.What != exhibit.MovedCheck {
		v.Name += "[" + m.Index + "]"
	}
	if m.By != nil && m.What != exhibit.MovedCheck {
		v.By = partText(*m.By)
	}
	switch {
	case m.Flipped:
		v.By = "flipped"
	case m.Old == "":
		v.By = "new"
	case m.New == "":
		v.By = "gone"
	}
	switch m.What {
	case exhibit.MovedCheck:
		for _, c := range b.p.Checks {
			if c.ID == m.ID {
				v.To = or(b.rows[checkKey(c)], c.Anchor)
				break
			}
		}
	case exhibit.MovedAssumption:
		v.To = "q-assumptions"
	default:
		v.ID = m.ID
	}
	return v
}

// partText is a part as so many per cent.
func partText(part float64) string {
	sign := "+"
	if part < 0 {
		sign, part = "\u2212", -part
	}
	if part < 1e-4 {
		return sign + "under 0.01 %"
	}
	return sign + strings.TrimSuffix(quantity.Format(100*part, 3), ".00") + " %"
}

// changeTable is a table of changes that goes on from sheet to sheet.
func changeTable(title string, rows []changeView, sheets bool) []item {
	type view struct {
		Title  string
		Sheets bool
		Rows   []changeView
	}
	out := chunked("changes", captioned, rows, func(r changeView) float64 {
		return 0.2 + 4.6*max(lines(r.Name+r.Item, 30), lines(r.Was, 24), lines(r.Is, 24))
	}, nil)
	var titled func(items []item, title string) []item
	titled = func(items []item, title string) []item {
		for i := range items {
			it := &items[i]
			it.data = view{title, sheets, it.data.([]changeView)}
			if cut := it.cut; cut != nil {
				it.cut = func(room float64) (first, rest []item) {
					first, rest = cut(room)
					return titled(first, title), titled(rest, strings.TrimSuffix(title, ", continued")+", continued")
				}
			}
		}
		return items
	}
	return titled(out, title)
}
