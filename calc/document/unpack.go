package document

import (
	"encoding/binary"
	"errors"
	"math"
	"reflect"
)

// errPacked is an entry that was not packed by pack, or as another type.
var errPacked = errors.New("document: not what was packed")

// unpack fills what each of to points at from bytes of pack, all of them.
func unpack(b []byte, from viewpoint, to ...any) (err error) {
	defer func() {
		if r := recover(); r != nil {
			if r != errPacked {
				panic(r)
			}
			err = errPacked
		}
	}()
	u := unpacker{b: b, from: from}
	for _, v := range to {
		u.value(reflect.ValueOf(v).Elem())
	}
	if len(u.b) > 0 {
		return errPacked
	}
	return nil
}

type unpacker struct {
	b    []byte
	from viewpoint
	met  [][]float64
}

func (u *unpacker) take(n int) []byte {
	if n < 0 || n > len(u.b) {
		panic(errPacked)
	}
	out := u.b[:n]
	u.b = u.b[n:]
	return out
}

func (u *unpacker) whole() uint64 {
	x, n := binary.Uvarint(u.b)
	if n <= 0 {
		panic(errPacked)
	}
	u.b = u.b[n:]
	return x
}

// length is how many there are, and whether there is anything. What follows takes a
// byte or more each, but for numbers that stood before.
func (u *unpacker) length(t reflect.Type) (int, bool) {
	n := u.whole()
	if n > uint64(len(u.b))+1 && t != numbers || n > math.MaxInt32 {
		panic(errPacked)
	}
	return int(n) - 1, n > 0
}

func (u *unpacker) value(v reflect.Value) {
	switch v.Kind() {
	case reflect.Bool:
		v.SetBool(u.whole() == 1)
	case reflect.Int, reflect.Int8, reflect.Int16, reflect.Int32, reflect.Int64:
		x, n := binary.Varint(u.b)
		if n <= 0 {
			panic(errPacked)
		}
		u.b = u.b[n:]
		v.SetInt(x)
	case reflect.Uint, reflect.Uint8, reflect.Uint16, reflect.Uint32, reflect.Uint64:
		v.SetUint(u.whole())
	case reflect.Float64:
		v.SetFloat(u.float())
	case reflect.String:
		n := u.whole()
		if n > uint64(len(u.b)) {
			panic(errPacked)
		}
		v.SetString(string(u.take(int(n))))
	case reflect.Pointer:
		if u.whole() == 1 {
			v.Set(reflect.New(v.Type().Elem()))
			u.value(v.Elem())
		}
	case reflect.Slice:
		n, some := u.length(v.Type())
		if !some {
			return
		}
		if v.Type() == numbers {
			v.Set(reflect.ValueOf(u.numbers(n)))
			return
		}
		v.Set(reflect.MakeSlice(v.Type(), n, n))
		for i := range n {
			u.value(v.Index(i))
		}
	case reflect.Array:
		for i := range v.Len() {
			u.value(v.Index(i))
		}
	case reflect.Map:
		n, some := u.length(v.Type())
		if !some {
			return
		}
		v.Set(reflect.MakeMapWithSize(v.Type(), n))
		for range n {
			key, item := reflect.New(v.Type().Key()).Elem(), reflect.New(v.Type().Elem()).Elem()
			u.value(key)
			u.value(item)
			v.SetMapIndex(key, item)
		}
	case reflect.Struct:
		for i := range v.NumField() {
			if !apart(v.Type(), i) {
				u.value(v.Field(i))
			}
		}
		if t := v.Type(); t == rangeType || t == placeType {
			v.Set(moved(v, u.from.back))
		}
	default:
		panic(errPacked)
	}
}

func (u *unpacker) float() float64 {
	return math.Float64frombits(binary.LittleEndian.Uint64(u.take(8)))
}

func (u *unpacker) numbers(n int) []float64 {
	if n == 0 {
		return []float64{}
	}
	if k := u.whole(); k > 0 {
		if k > uint64(len(u.met)) || len(u.met[k-1]) != n {
			panic(errPacked)
		}
		return u.met[k-1]
	}
	b := u.take(8 * n)
	x := make([]float64, n)
	for i := range x {
		x[i] = math.Float64frombits(binary.LittleEndian.Uint64(b[8*i:]))
	}
	u.met = append(u.met, x)
	return x
}
