package page

import (
	"strings"
	"unicode"
)

// face is how wide the characters of a typeface are, in thousandths of its size,
// from the blank to the tilde.
type face [95]float64

// The two faces of the page, as they are bundled: of prose and numbers, and of labels.
var (
	textFace = face{235, 283, 334, 573, 495, 692, 736, 187, 343, 343, 410, 720, 245, 315, 245, 387, 495, 495, 495, 495, 495, 495, 495, 495, 495, 495, 245, 245, 701, 720, 701, 411,
		905, 718, 618, 670, 730, 626, 588, 720, 777, 357, 396, 702, 585, 895, 742, 737, 569, 737, 659, 504, 603, 752, 680, 944, 664, 647, 594, 347, 385, 347, 480, 512,
		222, 480, 522, 446, 539, 464, 307, 484, 577, 285, 263, 542, 283, 852, 576, 514, 537, 521, 380, 395, 315, 570, 481, 749, 479, 483, 458, 312, 267, 312, 557}
	labelFace = face{212, 284, 429, 637, 538, 870, 644, 235, 303, 303, 514, 540, 274, 362, 274, 401, 540, 540, 540, 540, 540, 540, 540, 540, 540, 540, 282, 282, 540, 540, 540, 447,
		811, 606, 600, 581, 625, 544, 523, 641, 651, 387, 494, 614, 473, 737, 651, 642, 583, 642, 601, 546, 524, 624, 583, 861, 595, 566, 540, 299, 401, 299, 540, 502,
		540, 507, 544, 464, 544, 505, 328, 492, 532, 252, 255, 511, 268, 802, 532, 506, 544, 544, 357, 449, 334, 533, 476, 739, 488, 483, 452, 329, 346, 329, 540}
)

// monoFace is the face of listings.
var monoFace = func() (f face) {
	for i := range f {
		f[i] = 1000 * codeWide
	}
	return f
}()

// of is the width of a character, em. What is not in the list is taken as wide as
// is usual for its kind.
func (f *face) of(r rune) float64 {
	switch {
	case r >= ' ' && r <= '~':
		return f[r-' '] / 1000
	case r == 0x200b || unicode.Is(unicode.Mn, r):
		return 0
	case r == 0x202f || r == 0x2009:
		return 0.2
	case r >= 0x2e80:
		return 1
	case unicode.IsUpper(r):
		return 0.72
	case r == '–' || r == '°' || r == '·':
		return 0.5
	case unicode.IsLetter(r):
		return 0.55
	}
	return 0.75
}

// width is how wide a text is in one line, em.
func (f *face) width(text string) float64 {
	w := 0.0
	for _, r := range text {
		w += f.of(r)
	}
	return w
}

// longest is the widest word of a text, em: what must not break.
func (f *face) longest(text string) float64 {
	most := 0.0
	for w := range strings.FieldsSeq(text) {
		for _, part := range strings.SplitAfter(w, "-") {
			most = max(most, f.width(part))
		}
	}
	return most
}

// lines is how many lines a text takes, set word by word in so much room, em; a
// word wider than the room is broken.
func (f *face) lines(text string, room float64) float64 {
	n, room := 0.0, max(room, 1) // where nothing is left of it, a letter a line
	for line := range strings.Lines(text) {
		used := 0.0
		n++
		for w := range strings.FieldsSeq(line) {
			for i, part := range strings.SplitAfter(w, "-") {
				wide := f.width(part)
				if part == "" {
					continue
				}
				blank := f.of(' ')
				if i > 0 || used == 0 {
					blank = 0
				}
				if used > 0 && used+blank+wide > room {
					n++
					used, blank = 0, 0
				}
				used += blank + wide
				for used > room && wide > room {
					n++
					used -= room
				}
			}
		}
	}
	return max(1, n)
}
