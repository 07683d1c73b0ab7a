package document

import (
	"crypto/sha256"
	"encoding/hex"
	"reflect"
	"slices"
	"sync"

	"quoin/calc/diag"
	"quoin/calc/document/block"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// Cache keeps bytes by key from one run of this very program to the next. What it
// gives is what was put under the key, or nothing; it may lose anything at any
// time. It is used from several goroutines.
//
// What a block gives follows from its kind, name and fields, resolved, and from
// what its Env answers, which it must ask. So two entries are kept of a block: by
// kind, name and fields, what it asked; by these and the answers, what it gave. The
// answer about another block is that block's own key; about a file, its hash. A
// place in the document is no part of a key but as seen from the block's first
// line: text may be written above it.
type Cache interface {
	Get(key string) ([]byte, bool)
	Put(key string, data []byte)
}

// question is what a block asked of its Env.
type question struct{ What, Name, Role string }

// What may be asked.
const (
	askProduct = "product"
	askCurves  = "curves"
	askKind    = "kind"
	askFile    = "file"
	askLine    = "line"
	askSetting = "setting"
	askWhatIf  = "what if"
)

// witness is the Env of a block, which remembers what was asked. It states every
// method of block.Env by itself: one that is not written down here would be asked
// without the cache knowing.
type witness struct {
	scope scope
	mu    sync.Mutex
	asked []question
}

var _ block.Env = &witness{}

func (w *witness) ask(q question) {
	w.mu.Lock()
	defer w.mu.Unlock()
	if !slices.Contains(w.asked, q) {
		w.asked = append(w.asked, q)
	}
}

// System is in the key of every block.
func (w *witness) System() quantity.System { return w.scope.System() }

func (w *witness) Product(name string) any {
	w.ask(question{askProduct, name, ""})
	return w.scope.Product(name)
}

func (w *witness) Curves(id string) []exhibit.Curve {
	w.ask(question{askCurves, id, ""})
	return w.scope.Curves(id)
}

func (w *witness) KindOf(name string) string {
	w.ask(question{askKind, name, ""})
	return w.scope.KindOf(name)
}

func (w *witness) Read(name, role string) ([]byte, string, error) {
	w.ask(question{askFile, name, role})
	return w.scope.Read(name, role)
}

func (w *witness) Line(name string) (*expr.Node, string) {
	w.ask(question{askLine, name, ""})
	return w.scope.Line(name)
}

func (w *witness) Setting(name string) (quantity.Value, bool) {
	w.ask(question{askSetting, name, ""})
	return w.scope.Setting(name)
}

func (w *witness) WhatIf(cases [][]exhibit.Override) []block.Outcome {
	w.ask(question{askWhatIf, "", ""}) // the cases follow from the fields and the settings
	return w.scope.WhatIf(cases)
}

// answer is what Env would answer now, in a few words. ok is false where it cannot
// be told.
func (s scope) answer(q question) (text string, ok bool) {
	switch q.What {
	case askProduct, askCurves:
		first := q.Name
		if q.What == askCurves {
			first, _ = cutPath(q.Name)
		}
		to := s.block(first)
		if to == nil {
			return "none", true
		}
		return to.key, to.key != ""
	case askKind:
		return s.KindOf(q.Name), true
	case askFile:
		full, sum, err := s.sum(q.Name)
		if err != nil {
			return "error " + err.Error(), true
		}
		return full + " " + sum, true
	case askSetting:
		v, ok := s.Setting(q.Name)
		return hashed(content(viewpoint{}, v, ok)), true
	case askWhatIf:
		return s.rests()
	case askLine:
		tree, words := s.Line(q.Name)
		return hashed(content(viewpoint{}, tree, words)), true
	}
	return "", false
}

// hashed is a key of the cache.
func hashed(content []byte) string {
	sum := sha256.Sum256(content)
	return hex.EncodeToString(sum[:])
}

func (n *node) viewpoint() viewpoint { return viewpoint{n.part.name, n.at.Line} }

// asking is the key of what a block asks; "" where there is no cache, or where the
// kind's fields are no plain data.
func (d *run) asking(n *node) string {
	if d.options.Cache == nil || !packable(reflect.TypeOf(n.body)) {
		return ""
	}
	return hashed(content(n.viewpoint(), "block", n.def.Name, n.name, n.order, d.system, n.at, n.body))
}

// giving is the key of what a block gives: what it asked, and the answers.
func (s scope) giving(asking string, asked []question) (key string, ok bool) {
	answers := make([]string, len(asked))
	for i, q := range asked {
		if answers[i], ok = s.answer(q); !ok {
			return "", false
		}
	}
	return hashed(content(viewpoint{}, "result", asking, asked, answers)), true
}

// recall gives a block the result it gave when all was as it is now.
func (d *run) recall(n *node, sc scope, asking string) bool {
	data, ok := d.options.Cache.Get(asking)
	if !ok {
		return false
	}
	var asked []question
	if unpack(data, viewpoint{}, &asked) != nil {
		return false
	}
	key, ok := sc.giving(asking, asked)
	if !ok {
		return false
	}
	if data, ok = d.options.Cache.Get(key); !ok {
		return false
	}
	var result block.Result
	var said diag.List
	to := []any{&said, &result}
	if n.def.Product != nil {
		result.Made = n.def.Product()
		to = append(to, result.Made)
	}
	if unpack(data, n.viewpoint(), to...) != nil {
		return false
	}
	n.result, n.key, n.cached, n.asked = result, key, true, asked
	n.diags = append(n.diags, said...)
	for _, q := range asked {
		if q.What == askFile {
			sc.Read(q.Name, q.Role) // it is an input of the package
		}
	}
	return true
}

// remember keeps what a block gave and said, if it is sound.
func (d *run) remember(n *node, w *witness, asking string, said diag.List) {
	if said.HasErrors() || d.asking(n) != asking { // a run that changed its own fields is none to repeat
		return
	}
	key, ok := w.scope.giving(asking, w.asked)
	if !ok {
		return
	}
	n.key = key
	values := []any{said, n.result}
	if n.def.Product != nil {
		made := reflect.TypeOf(n.result.Made)
		if made != reflect.TypeOf(n.def.Product()) || !packable(made) {
			return
		}
		values = append(values, reflect.ValueOf(n.result.Made).Elem().Interface())
	} else if n.result.Made != nil {
		return
	}
	d.options.Cache.Put(asking, pack(viewpoint{}, w.asked))
	d.options.Cache.Put(key, pack(n.viewpoint(), values...))
}

// called is what a block's function gives, from the cache where it is there.
func (s scope) called(to *node, name string, args []quantity.Value, call func() (quantity.Value, error)) (quantity.Value, error) {
	if s.d.options.Cache == nil || to.key == "" {
		return call()
	}
	key := hashed(content(viewpoint{}, "call", to.key, name, args))
	var v quantity.Value
	if data, ok := s.d.options.Cache.Get(key); ok && unpack(data, viewpoint{}, &v) == nil {
		return v, nil
	}
	v, err := call()
	if err == nil {
		s.d.options.Cache.Put(key, pack(viewpoint{}, v))
	}
	return v, err
}
