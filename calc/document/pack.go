package document

import (
	"cmp"
	"encoding/binary"
	"math"
	"reflect"
	"slices"
	"sync"

	"quoin/calc/diag"
	"quoin/calc/document/block"
	"quoin/calc/exhibit"
)

// Packing turns plain data into bytes and back, exactly: every bit of a number,
// and nil apart from empty. Both sides know the type, so nothing of it is written.
// Lines of one file are written as seen from one line of it, so that what was
// packed is unpacked in its new place where that line has moved.

// pack is the bytes of values. Two slices of numbers that are one in memory are one
// again when unpacked.
func pack(from viewpoint, values ...any) []byte {
	p := packer{from: from, at: map[*float64]int{}}
	for _, v := range values {
		p.value(reflect.ValueOf(v))
	}
	return p.b
}

// content is the bytes of values that are known by them and never unpacked.
func content(from viewpoint, values ...any) []byte {
	p := packer{from: from}
	for _, v := range values {
		p.value(reflect.ValueOf(v))
	}
	return p.b
}

// viewpoint is the line from which the lines of its file are counted.
type viewpoint struct {
	file string
	line int
}

// none stands for no line at all, wherever it is seen from.
const none = math.MinInt

func (o viewpoint) away(file string, line int) int {
	switch {
	case file != o.file:
		return line
	case line == 0:
		return none
	}
	return line - o.line
}

func (o viewpoint) back(file string, line int) int {
	switch {
	case file != o.file:
		return line
	case line == none:
		return 0
	}
	return line + o.line
}

var (
	numbers   = reflect.TypeFor[[]float64]()
	rangeType = reflect.TypeFor[diag.Range]()
	placeType = reflect.TypeFor[exhibit.Place]()

	resultType = reflect.TypeFor[block.Result]()
)

// apart tells the one field that is packed by itself: a product, whose type the
// kind of its block knows.
func apart(t reflect.Type, field int) bool {
	return t == resultType && t.Field(field).Name == "Made"
}

// moved is a struct with its lines taken through f, if it is one with lines.
func moved(v reflect.Value, f func(file string, line int) int) reflect.Value {
	switch v.Type() {
	case rangeType:
		r := v.Interface().(diag.Range)
		r.Line, r.EndLine = f(r.File, r.Line), f(r.File, r.EndLine)
		return reflect.ValueOf(r)
	case placeType:
		p := v.Interface().(exhibit.Place)
		p.Line = f(p.File, p.Line)
		return reflect.ValueOf(p)
	}
	return v
}

type packer struct {
	b    []byte
	from viewpoint
	at   map[*float64]int // slices of numbers met, by their first; nil: not looked for
	lens []int            // how long they are
}

func (p *packer) count(n int) { p.b = binary.AppendUvarint(p.b, uint64(n)) }

// length writes how many there are, and tells whether there is anything: 0 is nil.
func (p *packer) length(v reflect.Value) bool {
	if v.IsNil() {
		p.count(0)
		return false
	}
	p.count(v.Len() + 1)
	return true
}

func (p *packer) value(v reflect.Value) {
	switch v.Kind() {
	case reflect.Bool:
		if v.Bool() {
			p.count(1)
		} else {
			p.count(0)
		}
	case reflect.Int, reflect.Int8, reflect.Int16, reflect.Int32, reflect.Int64:
		p.b = binary.AppendVarint(p.b, v.Int())
	case reflect.Uint, reflect.Uint8, reflect.Uint16, reflect.Uint32, reflect.Uint64:
		p.b = binary.AppendUvarint(p.b, v.Uint())
	case reflect.Float64:
		p.b = binary.LittleEndian.AppendUint64(p.b, math.Float64bits(v.Float()))
	case reflect.String:
		p.count(v.Len())
		p.b = append(p.b, v.String()...)
	case reflect.Pointer:
		if v.IsNil() {
			p.count(0)
			return
		}
		p.count(1)
		p.value(v.Elem())
	case reflect.Slice:
		if !p.length(v) {
			return
		}
		if v.Type() == numbers && v.CanInterface() {
			p.numbers(v.Interface().([]float64))
			return
		}
		for i := range v.Len() {
			p.value(v.Index(i))
		}
	case reflect.Array:
		for i := range v.Len() {
			p.value(v.Index(i))
		}
	case reflect.Map:
		if !p.length(v) {
			return
		}
		keys := v.MapKeys()
		slices.SortFunc(keys, func(a, b reflect.Value) int { return cmp.Compare(a.String(), b.String()) })
		for _, k := range keys {
			p.value(k)
			p.value(v.MapIndex(k))
		}
	case reflect.Struct:
		v = moved(v, p.from.away)
		for i := range v.NumField() {
			if !apart(v.Type(), i) {
				p.value(v.Field(i))
			}
		}
	default:
		panic("document: no plain data: " + v.Type().String())
	}
}

func (p *packer) numbers(x []float64) {
	if len(x) == 0 {
		return
	}
	if p.at != nil {
		if n, ok := p.at[&x[0]]; ok && p.lens[n] == len(x) {
			p.count(n + 1)
			return
		}
		p.at[&x[0]] = len(p.lens)
		p.lens = append(p.lens, len(x))
	}
	p.count(0)
	p.b = slices.Grow(p.b, 8*len(x))
	for _, f := range x {
		p.b = binary.LittleEndian.AppendUint64(p.b, math.Float64bits(f))
	}
}

// packable tells whether values of a type come back from packing: no functions,
// no interfaces, no maps by anything but words, and no field that only its own
// package can set.
func packable(t reflect.Type) bool {
	if known, ok := packables.Load(t); ok {
		return known.(bool)
	}
	ok := plain(t, map[reflect.Type]bool{})
	packables.Store(t, ok)
	return ok
}

var packables sync.Map

func plain(t reflect.Type, seen map[reflect.Type]bool) bool {
	if seen[t] {
		return true
	}
	seen[t] = true
	switch t.Kind() {
	case reflect.Pointer, reflect.Slice, reflect.Array:
		return plain(t.Elem(), seen)
	case reflect.Map:
		return t.Key().Kind() == reflect.String && plain(t.Elem(), seen)
	case reflect.Struct:
		for i := range t.NumField() {
			f := t.Field(i)
			embedded := f.Anonymous && f.Type.Kind() == reflect.Struct // its own fields decide
			if !apart(t, i) && (!f.IsExported() && !embedded || !plain(f.Type, seen)) {
				return false
			}
		}
		return true
	case reflect.Bool, reflect.Int, reflect.Int8, reflect.Int16, reflect.Int32, reflect.Int64,
		reflect.Uint, reflect.Uint8, reflect.Uint16, reflect.Uint32, reflect.Uint64, reflect.Float64, reflect.String:
		return true
	}
	return false
}
