// Package ledger writes what a package says for machines and for keeping: the
// results, the tables, the inputs it was built from, the manifest with its
// digest; and it replaces the folder on disk as a whole.
//
// Numbers are written with full double precision, as the shortest decimal that
// reads back the same. A NaN or an infinity is an error, never a number.
package ledger

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"
)

// Schema is the version of every JSON file of a package.
const Schema = 1

// encode is compact JSON on one line, with <, > and & left readable.
func encode(v any) ([]byte, error) {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	if err := e.Encode(v); err != nil {
		return nil, fmt.Errorf("ledger: %w", err)
	}
	return bytes.TrimRight(b.Bytes(), "\n"), nil
}

// must is encode for what cannot fail: structs of texts and whole numbers.
func must(v any) []byte {
	b, err := encode(v)
	if err != nil {
		panic(err.Error())
	}
	return b
}

// object lays out a JSON object for line-by-line comparison: each member on a
// line of its own, a list with one item a line.
type object struct {
	b    bytes.Buffer
	some bool
}

func (o *object) member(name string, value []byte) {
	if o.some {
		o.b.WriteString(",\n")
	} else {
		o.b.WriteString("{\n")
	}
	o.some = true
	fmt.Fprintf(&o.b, "%s: %s", must(name), value)
}

func (o *object) bytes() []byte {
	o.b.WriteString("\n}\n")
	return o.b.Bytes()
}

// lines is a JSON list with one item a line.
func lines[T any](items []T) ([]byte, error) {
	var b bytes.Buffer
	b.WriteByte('[')
	for i, item := range items {
		text, err := encode(item)
		if err != nil {
			return nil, err
		}
		if i > 0 {
			b.WriteByte(',')
		}
		b.WriteString("\n  ")
		b.Write(text)
	}
	if len(items) > 0 {
		b.WriteByte('\n')
	}
	b.WriteByte(']')
	return b.Bytes(), nil
}

// finite refuses NaN and infinities, and gives -0 as 0.
func finite(what string, x float64) (float64, error) {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return 0, fmt.Errorf("ledger: %s is not a finite number", what)
	}
	return x + 0, nil
}
