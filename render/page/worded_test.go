package page

import (
	"strings"
	"testing"

	"quoin/calc/exhibit"
)

// TestWorded: words show the symbols of the notation as equations do; names of
// blocks and values of blocks stay as they are written, and text stays text.
func TestWorded(t *testing.T) {
	p := &exhibit.Package{Notation: []exhibit.Symbol{{Name: "S_DS"}, {Name: "C_s_max"}, {Name: "d_r"}, {Name: "storey_shear"}, {Name: "gamma_I"}},
		Chapters: []exhibit.Chapter{{Pieces: []exhibit.Piece{{Block: &exhibit.Block{Name: "d_r"}}}}}}
	b := newBook(p, Options{})
	for text, symbols := range map[string]int{
		"D by S_DS, risk category III":     1,
		"gamma_I and C_s_max; MCE_R":       3,
		"drifts of d_r, from elf.S_DS":     0,
		"storey_shear, S_D1, T_0 <b>S</b>": 0,
	} {
		got := string(b.worded(text))
		if n := strings.Count(got, "<msub>"); n != symbols {
			t.Errorf("%q has %d symbols, want %d: %s", text, n, symbols, got)
		}
		if strings.Contains(got, "<b>") {
			t.Errorf("%q lets markup through: %s", text, got)
		}
	}
}
