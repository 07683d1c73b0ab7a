package exhibit

import (
	"slices"
	"strconv"
	"strings"
)

// devices are names that Windows keeps for itself, with any extension.
var devices = []string{"con", "prn", "aux", "nul", "com1", "com2", "com3", "com4", "com5", "com6", "com7", "com8", "com9",
	"lpt1", "lpt2", "lpt3", "lpt4", "lpt5", "lpt6", "lpt7", "lpt8", "lpt9"}

// Device tells a name that Windows keeps for itself; name is without extension.
func Device(name string) bool { return slices.Contains(devices, strings.ToLower(name)) }

// FileStem makes a file name of an id: letters, digits, dot, underscore and
// hyphen, not hidden, no device.
func FileStem(id string) string {
	s := strings.Map(func(r rune) rune {
		switch {
		case r >= 'a' && r <= 'z', r >= 'A' && r <= 'Z', r >= '0' && r <= '9', r == '.', r == '_', r == '-':
			return r
		}
		return '_'
	}, id)
	first, _, _ := strings.Cut(strings.ToLower(s), ".")
	if s == "" || s[0] == '.' || s[0] == '-' || Device(first) {
		s = "_" + s
	}
	return s[:min(len(s), longestStem)]
}

// longestStem is how long a stem may be, so that a path stays short enough.
const longestStem = 100

// UniqueStem is FileStem with a number added where the name is used, case aside;
// it notes the name as used.
func UniqueStem(id string, used map[string]bool) string {
	stem := FileStem(id)
	name := stem
	for n := 2; used[strings.ToLower(name)]; n++ {
		end := "-" + strconv.Itoa(n)
		name = stem[:min(len(stem), longestStem-len(end))] + end
	}
	used[strings.ToLower(name)] = true
	return name
}
