package render

import (
	"bytes"
	"maps"
	"slices"
	"sync"
	"testing"

	"quoin/calc/exhibit"
)

// shelf is a cache in memory.
type shelf struct {
	mu   sync.Mutex
	kept map[string][]byte
}

func (s *shelf) Get(key string) ([]byte, bool) {
	s.mu.Lock()
	defer s.mu.Unlock()
	data, ok := s.kept[key]
	return slices.Clone(data), ok
}

func (s *shelf) Put(key string, data []byte) {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.kept[key] = slices.Clone(data)
}

// TestCachedPackage: with a cache the bytes are the same, nothing is drawn twice,
// and what is drawn follows from every part of a figure that shows.
func TestCachedPackage(t *testing.T) {
	c := &shelf{kept: map[string][]byte{}}
	want, err := Package(sample(), files, Options{})
	if err != nil {
		t.Fatal(err)
	}
	drawn := 0
	o := Options{Cache: c, Progress: func(int, int, string) { drawn++ }}
	for turn, count := range []int{3, 0} {
		got, err := Package(sample(), files, o)
		if err != nil {
			t.Fatal(err)
		}
		if !maps.EqualFunc(got, want, bytes.Equal) {
			t.Errorf("turn %d: the cache makes a difference", turn+1)
		}
		if drawn != count {
			t.Errorf("turn %d: %d things were made, want %d", turn+1, drawn, count)
		}
		drawn = 0
	}
	for what, change := range map[string]func(*exhibit.Figure){
		"the caption": func(f *exhibit.Figure) { f.Caption += "x" },
		"a value":     func(f *exhibit.Figure) { f.Panels[0].Series[0].Y[1] *= 1.01 },
		"the id":      func(f *exhibit.Figure) { f.ID += "x" },
	} {
		p := sample()
		change(p.Chapters[0].Pieces[1].Block.Parts[0].Items[0].Figure)
		drawn = 0
		got, err := Package(p, files, o)
		if err != nil {
			t.Fatal(err)
		}
		want, err := Package(p, files, Options{})
		if err != nil {
			t.Fatal(err)
		}
		if !maps.EqualFunc(got, want, bytes.Equal) || drawn != 1 {
			t.Errorf("%s: the same as without a cache: %t; made %d, want 1", what, maps.EqualFunc(got, want, bytes.Equal), drawn)
		}
	}
}
