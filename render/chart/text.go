package chart

import (
	"math"
	"strings"
	"unicode"
)

// clean makes a text one line without control characters; what it says stays.
func clean(s string) string {
	s = strings.Map(func(r rune) rune {
		switch {
		case r == '\u2028' || r == '\u2029' || unicode.IsSpace(r) && r != '\u00a0' && r != '\u202f' && r != '\u2009':
			return ' '
		case unicode.IsControl(r) || r == '\ufffd' || r == '\ufffe' || r == '\uffff' || unicode.Is(unicode.Bidi_Control, r):
			return -1
		}
		return r
	}, s)
	s = strings.Join(strings.FieldsFunc(s, func(r rune) bool { return r == ' ' }), " ")
	// Names of curves become keys in the drawing script, where this one would be more
	// than a name: an invisible break takes its force.
	return strings.ReplaceAll(s, "__proto__", "_\u200b_proto__")
}

// textWidth guesses how wide a line is in the label face, in px.
func textWidth(s string, strong bool) float64 {
	w := 0.0
	for _, r := range s {
		switch {
		case strings.ContainsRune("il.,:;|!'()[] \u202f\u2009", r):
			w += 0.27
		case r >= 'A' && r <= 'Z' || r == 'm' || r == 'w' || r == '%':
			w += 0.62
		case r > 0x2e80 || r == '—':
			w += 1
		default:
			w += 0.5
		}
	}
	if strong {
		w *= 1.06
	}
	return w * size
}

// wrap breaks a line at blanks so that each part is at most limit px wide; a word
// that is too long is cut. At most three lines remain, the last ends in "…".
func wrap(s string, limit float64, strong bool) []string {
	var lines []string
	line := ""
	s = strings.ReplaceAll(s, " %", "\u00a0%")
	for _, word := range strings.Split(s, " ") {
		joined := strings.TrimSpace(line + " " + word)
		if textWidth(joined, strong) <= limit {
			line = joined
			continue
		}
		if line != "" {
			lines = append(lines, line)
		}
		for textWidth(word, strong) > limit {
			runes := []rune(word)
			n := len(runes) - 1
			for n > 1 && textWidth(string(runes[:n]), strong) > limit {
				n--
			}
			lines, word = append(lines, string(runes[:n])), string(runes[n:])
		}
		line = word
	}
	lines = append(lines, line)
	if len(lines) > 3 {
		lines = append(lines[:2], lines[2]+"…")
	}
	return lines
}

// spread moves the centres of labels (px, any order, heights given) apart so that
// none overlaps its neighbour and all stay from lo to hi where there is room,
// keeping their order. Groups that meet move together about their common mean.
func spread(at, height []float64, lo, hi float64) []float64 {
	n := len(at)
	order := make([]int, n)
	for i := range order {
		order[i] = i
	}
	// Stable insertion sort: few labels, equal places keep their order.
	for i := 1; i < n; i++ {
		for j := i; j > 0 && at[order[j]] < at[order[j-1]]; j-- {
			order[j], order[j-1] = order[j-1], order[j]
		}
	}
	type group struct {
		first, last       int
		top, height, want float64
	}
	var groups []group
	fit := func(g *group) {
		g.top = math.Max(lo, math.Min(g.want/float64(g.last-g.first+1), hi-g.height))
	}
	for k, i := range order {
		g := group{first: k, last: k, height: height[i], want: at[i] - height[i]/2}
		fit(&g)
		for len(groups) > 0 && groups[len(groups)-1].top+groups[len(groups)-1].height > g.top {
			b := groups[len(groups)-1]
			groups = groups[:len(groups)-1]
			// The wishes of the second group's members count from the joint top.
			g = group{first: b.first, last: g.last, height: b.height + g.height, want: b.want + g.want - b.height*float64(g.last-g.first+1)}
			fit(&g)
		}
		groups = append(groups, g)
	}
	out := make([]float64, n)
	for _, g := range groups {
		y := g.top
		for k := g.first; k <= g.last; k++ {
			out[order[k]] = y + height[order[k]]/2
			y += height[order[k]]
		}
	}
	return out
}
