// Package cite is the one list of published sources: comments, equations and
// the reference pages of a package name them by key.
package cite

import (
	"slices"
	"strings"
)

// Source is one publication.
type Source struct {
	Key  string `json:"key"`  // as cited: "ASCE/SEI 7-22"
	Text string `json:"text"` // the full reference as printed
	Read bool   `json:"read"` // values taken from it were read in it; false: from memory, confirm
}

// Ref points into a source.
type Ref struct {
	Key    string `json:"key"`
	Clause string `json:"clause,omitempty"` // "Eq. 12.8-2", "Table 11.4-1"
	Memory bool   `json:"memory,omitempty"` // stated from memory: printed "from memory, confirm"
}

// String is the citation as printed.
func (r Ref) String() string { return strings.TrimSpace(r.Key + " " + r.Clause) }

// To makes a reference to a clause of a listed source; it panics on an unknown key.
func To(key, clause string) Ref {
	s, ok := Lookup(key)
	if !ok {
		panic("cite: unknown key " + key)
	}
	return Ref{Key: key, Clause: clause, Memory: !s.Read}
}

// Lookup returns the source with this key.
func Lookup(key string) (Source, bool) {
	i := slices.IndexFunc(Sources, func(s Source) bool { return s.Key == key })
	if i < 0 {
		return Source{}, false
	}
	return Sources[i], true
}

// Parse splits the text of a citation into the longest known key and the clause
// after it. extra are keys of the document's own references.
func Parse(text string, extra []string) (Ref, bool) {
	text = strings.Join(strings.Fields(text), " ")
	best := Ref{}
	try := func(key string, memory bool) {
		if len(key) > len(best.Key) && (text == key || strings.HasPrefix(text, key+" ") || strings.HasPrefix(text, key+",")) {
			best = Ref{Key: key, Clause: strings.TrimLeft(text[len(key):], " ,"), Memory: memory}
		}
	}
	for _, s := range Sources {
		try(s.Key, !s.Read)
	}
	for _, k := range extra {
		try(k, false)
	}
	return best, best.Key != ""
}
