package structure

import (
	"regexp"
	"slices"
	"strconv"
	"strings"
)

var (
	roofName     = regexp.MustCompile(`^(?i:r|rf|roof)$`)
	numberedName = regexp.MustCompile(`^(?i:(l|lvl|level|f|fl|floor|st|storey|story)?)[ ._-]?(\d+)$`)
)

// Falling tells whether levels, which run lowest first, are named from the roof
// down: a roof comes first, or all names but those of roofs are one word with
// numbers that fall. Names that it cannot read, basements among them, count as
// rising.
func Falling(levels []string) bool {
	if len(levels) < 2 || roofName.MatchString(levels[len(levels)-1]) {
		return false
	}
	if roofName.MatchString(levels[0]) {
		return true
	}
	word, last := "", 0
	for i, name := range levels {
		m := numberedName.FindStringSubmatch(name)
		if m == nil {
			return false
		}
		n, err := strconv.Atoi(m[2])
		if err != nil || i > 0 && (n >= last || !strings.EqualFold(m[1], word)) {
			return false
		}
		word, last = m[1], n
	}
	return true
}

// lightest is how small a share of the median of the others the mass of a level is
// when it looks like a wrong unit.
const lightest = 0.02

// Light is the levels, counted from 0, whose mass is below 2 % of the median of the
// other levels' masses.
func Light(mass []float64) []int {
	var out []int
	for i, m := range mass {
		others := slices.Delete(slices.Clone(mass), i, i+1)
		slices.Sort(others)
		if n := len(others); n > 0 && m < lightest*(others[(n-1)/2]+others[n/2])/2 {
			out = append(out, i)
		}
	}
	return out
}
