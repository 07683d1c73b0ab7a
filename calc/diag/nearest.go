package diag

import (
	"strings"
	"unicode/utf8"
)

// Nearest returns the candidate most like name, or "" when none is close: at
// most a third of the letters of the longer word differ (insertions, deletions,
// exchanges of neighbours, changes), case aside. Among equals the first wins.
func Nearest(name string, candidates []string) string {
	found, best := "", 1<<20
	for _, c := range candidates {
		longer := max(utf8.RuneCountInString(name), utf8.RuneCountInString(c))
		if d := Distance(strings.ToLower(name), strings.ToLower(c)); d <= longer/3 && d < best {
			found, best = c, d
		}
	}
	return found
}

// Distance is the optimal string alignment distance between two words: how many
// letters differ, with exchanges of neighbours counted once. Words of more than 64
// letters are far from everything.
func Distance(a, b string) int {
	x, y := []rune(a), []rune(b)
	if len(x) > 64 || len(y) > 64 {
		return 1 << 20
	}
	d := make([][]int, len(x)+1)
	for i := range d {
		d[i] = make([]int, len(y)+1)
		d[i][0] = i
	}
	for j := range d[0] {
		d[0][j] = j
	}
	for i := 1; i <= len(x); i++ {
		for j := 1; j <= len(y); j++ {
			cost := 1
			if x[i-1] == y[j-1] {
				cost = 0
			}
			d[i][j] = min(d[i-1][j]+1, d[i][j-1]+1, d[i-1][j-1]+cost)
			if i > 1 && j > 1 && x[i-1] == y[j-2] && x[i-2] == y[j-1] {
				d[i][j] = min(d[i][j], d[i-2][j-2]+1)
			}
		}
	}
	return d[len(x)][len(y)]
}
