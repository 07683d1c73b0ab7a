package field

import (
	"reflect"
	"slices"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/formula"
)

// Decode fills a struct of fields from a mapping. It yields every error it
// finds. names tells which formula names the document sets.
func Decode(n Node, fields any, what string, names formula.Names) diag.List {
	d := &decoder{what: what, names: names}
	d.group(n, reflect.ValueOf(fields).Elem())
	return d.diags
}

type decoder struct {
	what  string
	names formula.Names
	diags diag.List
	key   string // the name that leads to the group being read
}

// slot is where a field name leads.
type slot struct {
	spec  Spec
	value reflect.Value
}

func slots(v reflect.Value, out []slot) []slot {
	t := v.Type()
	for i := range t.NumField() {
		sf := t.Field(i)
		if sf.Anonymous && v.Field(i).Kind() == reflect.Struct {
			out = slots(v.Field(i), out)
			continue
		}
		if sf.Tag.Get("name") != "" {
			out = append(out, slot{specOf(sf.Tag), v.Field(i)})
		}
	}
	return out
}

func (d *decoder) group(n Node, v reflect.Value) {
	all := slots(v, nil)
	if n.Scalar() || n.IsList {
		var groups []string
		for _, s := range all {
			m, ok := s.value.Addr().Interface().(marked)
			if !ok {
				continue
			}
			if groups = append(groups, s.spec.Name); n.Scalar() && strings.TrimSpace(n.Text) == s.spec.Name { // the word alone: the group with its defaults
				m.mark(n.At)
				d.what = s.spec.Name
				d.group(Node{IsMap: true, At: n.At}, s.value)
				return
			}
		}
		if n.Scalar() && len(groups) > 0 && len(groups) == len(all) {
			d.unknown(n.Text, n.At, groups)
			return
		}
		for _, s := range all {
			if s.spec.Short {
				if f, ok := s.value.Addr().Interface().(*Field); ok && d.key != "" {
					f.As, s.spec.Name = d.key, d.key
				}
				d.one(n, s)
				d.missing(n, all)
				return
			}
		}
		e := d.diags.Errorf("shape", n.At, "%s is a mapping: lines of  field: value", d.what)
		if name, value, ok := strings.Cut(n.Text, "="); ok {
			e.WithHint("a field is written with a colon: %s: %s", strings.TrimSpace(name), strings.TrimSpace(value))
		} else if m, ok := v.Addr().Interface().(marked); ok {
			var names []string
			for _, s := range all {
				names = append(names, s.spec.Name)
			}
			e.WithHint("its fields are %s", strings.Join(names, ", "))
			m.unmark() // it is said what is wrong
		}
		return
	}
	what := d.what
	for _, p := range n.Pairs {
		var names []string
		found := false
		for _, s := range all {
			names = append(names, s.spec.Name)
			if s.spec.Name == p.Key {
				m, marks := s.value.Addr().Interface().(marked)
				if marks {
					m.mark(p.KeyAt)
					if len(p.Value.Pairs) == 0 && !p.Value.IsList && strings.TrimSpace(p.Value.Text) == "" {
						p.Value = Node{IsMap: true, At: p.KeyAt}
					}
				}
				if slices.Contains(s.spec.Must, "filled") && len(p.Value.Items)+len(p.Value.Pairs) == 0 && strings.TrimSpace(p.Value.Text) == "" {
					d.diags.Errorf("empty-field", p.KeyAt, "%s is an empty list", s.spec.Name).WithHint("%s", s.spec.Doc)
				}
				if marks || slices.Contains(s.spec.Must, "filled") {
					d.what = s.spec.Name
				}
				d.one(p.Value, s)
				d.what = what
				if f, ok := s.value.Addr().Interface().(*Field); ok && f.At.Line == 0 {
					f.At = p.KeyAt
				}
				found = true
			}
		}
		if !found {
			d.unknown(p.Key, p.KeyAt, names)
		}
	}
	d.missing(n, all)
}

// meant is what other words for a field stand for, where a block has that field.
var meant = map[string]string{"soil": "ground", "soil class": "ground", "ground type": "ground", "site class": "site", "risk category": "risk", "filter": "treat: bandpass"}

// unknown reports a name that is none of the fields.
func (d *decoder) unknown(name string, at diag.Range, fields []string) {
	hint := "its fields are " + strings.Join(fields, ", ")
	if other := meant[strings.ToLower(strings.ReplaceAll(name, "_", " "))]; slices.Contains(fields, strings.SplitN(other, ":", 2)[0]) {
		hint = "write " + other
	} else if near := diag.Nearest(name, fields); near != "" {
		hint = "did you mean " + near + "?"
	} else if name != "" && name[0] >= '0' && name[0] <= '9' {
		hint = "a comma parts the fields; decimals have a point"
	}
	d.diags.Errorf("unknown-field", at, "%s has no field %s", d.what, name).WithHint("%s", hint)
}

// missing reports needed fields that are not there and sets defaults.
func (d *decoder) missing(n Node, all []slot) {
	for _, s := range all {
		f, ok := s.value.Addr().Interface().(*Field)
		if !ok || f.Given {
			continue
		}
		if f.At.Line == 0 {
			f.At = n.At
		}
		if s.spec.Need {
			d.diags.Errorf("missing-field", n.At, "%s needs the field %s", d.what, s.spec.Name).WithHint("%s", s.spec.Doc)
		}
		if s.spec.Default != "" {
			text := Node{Text: s.spec.Default, At: n.At}
			if s.spec.Many {
				d.one(Node{IsList: true, At: n.At, Items: []Node{text}}, s)
			} else {
				d.one(text, s)
			}
			f.Given = false
		}
	}
}

func (d *decoder) one(n Node, s slot) {
	if f, ok := s.value.Addr().Interface().(*Field); ok {
		d.field(n, s.spec, f)
		return
	}
	switch s.value.Kind() {
	case reflect.Struct:
		key := d.key
		d.key = s.spec.Name
		d.group(n, s.value)
		d.key = key
	case reflect.Slice:
		items := n.Items
		if n.IsMap || n.Scalar() && n.Text != "" {
			items = []Node{n}
		}
		out := reflect.MakeSlice(s.value.Type(), len(items), len(items))
		what, key := d.what, d.key
		for i, it := range items {
			d.key = ""
			d.group(it, out.Index(i))
			d.what, d.key = what, key
		}
		s.value.Set(out)
	}
}

func (d *decoder) field(n Node, s Spec, f *Field) {
	f.Given, f.At = true, n.At
	if n.Scalar() && strings.TrimSpace(n.Text) == "" && s.Is == "text" && !s.Need {
		f.Given = false // a line left blank
		return
	}
	if t := strings.TrimSpace(n.Text); n.Scalar() && s.Many && !s.Quantity && strings.HasPrefix(t, "[") && strings.HasSuffix(t, "]") {
		n = quotedList(n, t)
	}
	items := []Node{n}
	if n.IsList {
		if !s.Many {
			d.diags.Errorf("shape", n.At, "%s takes one value, this is a list", s.Name)
			return
		}
		if items = n.Items; len(items) == 0 {
			d.diags.Errorf("empty-field", n.At, "%s is an empty list", s.Name)
			return
		}
	}
	var written []string
	for _, it := range items {
		if !it.Scalar() {
			d.diags.Errorf("shape", it.At, "%s takes %s, this is %s", s.Name, taken(s), shape(it)).WithHint("%s", s.Hint)
			return
		}
		if strings.TrimSpace(it.Text) == "" {
			d.diags.Errorf("empty-field", it.At, "%s has no value", s.Name).WithHint("%s", s.Doc)
			return
		}
		if !s.Quantity && strings.Contains(it.Text, "{{") {
			d.diags.Warnf("braces", it.At, "%s prints these braces as they stand", s.Name).WithHint("values in double braces are live in the prose only")
		}
		f.List = append(f.List, Item{Text: it.Text, At: it.At})
		written = append(written, it.Text)
	}
	f.Written = strings.Join(written, ", ")
	switch {
	case s.Quantity:
		for i, it := range f.List {
			tree, findings := formula.ParseExpr(it.Text, d.names)
			bad := tree == nil
			for _, is := range findings {
				bad = report(&d.diags, is, f.spot(i, is.From, is.To)).Severity == diag.Error || bad
			}
			if bad {
				f.Tree, f.Trees = nil, nil
				return
			}
			if n.IsList {
				f.Trees = append(f.Trees, tree)
			} else {
				f.Tree = tree
			}
		}
	case s.Is == "choice":
		for i, it := range f.List {
			if !d.choose(s, &f.List[i].Text) {
				hint := "one of " + strings.Join(s.Of, ", ")
				if near := diag.Nearest(it.Text, s.Of); near != "" {
					hint = "did you mean " + near + "?"
				}
				d.diags.Errorf("unknown-choice", it.At, "%s cannot be %s", s.Name, it.Text).WithHint("%s", hint)
			}
		}
	case s.Is == "block":
		for _, it := range f.List {
			if !formula.ValidName(formula.Normal(it.Text)) {
				d.diags.Errorf("name", it.At, "%s takes the name of a block", s.Name)
			}
		}
	}
}

// quotedList reads "[a, b]" as the list it is, each item at the place of the whole.
func quotedList(n Node, text string) Node {
	out := Node{At: n.At, IsList: true}
	for _, item := range strings.Split(text[1:len(text)-1], ",") {
		out.Items = append(out.Items, Node{At: n.At, Text: strings.TrimSpace(item)})
	}
	return out
}

// choose finds the word of a choice, whatever its case.
func (d *decoder) choose(s Spec, text *string) bool {
	for _, w := range s.Of {
		if strings.EqualFold(w, *text) {
			*text = w
			return true
		}
	}
	return false
}

func taken(s Spec) string {
	if s.Quantity {
		return "a quantity"
	}
	return "a text"
}

func shape(n Node) string {
	if n.IsList {
		return "a list"
	}
	return "a mapping"
}

// Specs lists the fields of a struct, for the reference; nested groups are
// given as Name.Inner.
func Specs(fields any) []Spec {
	var out []Spec
	var walk func(v reflect.Value, prefix string)
	walk = func(v reflect.Value, prefix string) {
		for _, s := range slots(v, nil) {
			s.spec.Name = prefix + s.spec.Name
			switch {
			case s.value.Type() == fieldType:
				out = append(out, s.spec)
			case s.value.Kind() == reflect.Struct:
				walk(s.value, s.spec.Name+".")
			case s.value.Kind() == reflect.Slice:
				walk(reflect.New(s.value.Type().Elem()).Elem(), s.spec.Name+"[].")
			}
		}
	}
	walk(reflect.ValueOf(fields).Elem(), "")
	return out
}
