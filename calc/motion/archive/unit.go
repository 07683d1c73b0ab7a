package archive

import (
	"fmt"
	"regexp"
	"strings"

	"quoin/calc/quantity"
)

// units is every unit text met in record files, in lower case and without blanks,
// and what one of it is in m/s². Zero marks what is no acceleration as it stands.
var units = map[string]float64{
	"g": quantity.Gravity, "g's": quantity.Gravity, "gs": quantity.Gravity, "mg": 1e-3 * quantity.Gravity, "microg": 1e-6 * quantity.Gravity,
	"gal": 0.01, "gals": 0.01,
	"cm/s/s": 0.01, "cm/s2": 0.01, "cm/s^2": 0.01, "cm/s**2": 0.01, "cm/s²": 0.01, "cms-2": 0.01, "cm/sec2": 0.01, "cm/sec^2": 0.01, "cm/sec/sec": 0.01, "cm/sec**2": 0.01, "cm/sec²": 0.01,
	"m/s/s": 1, "m/s2": 1, "m/s^2": 1, "m/s**2": 1, "m/s²": 1, "ms-2": 1, "m/sec2": 1, "m/sec^2": 1, "m/sec/sec": 1, "m/sec²": 1,
	"mm/s/s": 1e-3, "mm/s2": 1e-3, "mm/s^2": 1e-3, "mm/s²": 1e-3, "mm/sec2": 1e-3, "mm/sec/sec": 1e-3,
	"in/s2": 0.0254, "in/s/s": 0.0254, "in/s^2": 0.0254, "in/s²": 0.0254, "in/sec2": 0.0254, "in/sec/sec": 0.0254,
	"ft/s2": 0.3048, "ft/s/s": 0.3048, "ft/s^2": 0.3048, "ft/s²": 0.3048, "ft/sec2": 0.3048, "ft/sec/sec": 0.3048,
	"counts": 0, "count": 0, "cnt": 0, "v": 0, "volt": 0, "volts": 0, "mv": 0,
	"cm/s": 0, "m/s": 0, "mm/s": 0, "in/s": 0, "ft/s": 0, "cm/sec": 0, "m/sec": 0, "in/sec": 0, "cm": 0, "m": 0, "mm": 0, "in": 0, "ft": 0,
}

func unitKey(text string) string {
	return strings.ToLower(strings.Join(strings.Fields(text), ""))
}

// unitScale is one of a unit in m/s²; false if it is not a unit of acceleration.
func unitScale(text string) (float64, bool) {
	s := units[unitKey(text)]
	return s, s > 0
}

// isUnit tells whether a text is a unit at all.
func isUnit(text string) bool { _, ok := units[unitKey(text)]; return ok }

// askedUnit reads the unit that the caller gives.
func askedUnit(text string) (float64, error) {
	if s, ok := unitScale(text); ok {
		return s, nil
	}
	if u, err := quantity.ParseUnit(text); err == nil && u.Dim == quantity.Acceleration {
		return u.Scale, nil
	}
	return 0, &Error{Summary: fmt.Sprintf("%q is not a unit of acceleration", text), Hint: `write "g", "gal", "cm/s^2", "m/s^2" or "mm/s^2"`, Unit: true}
}

// plainUnit finds unmistakable units of acceleration within a line of text.
var plainUnit = regexp.MustCompile(`(?i)(?:^|[^\pL\pN/^])((?:cm|mm|m|in|ft)/s(?:ec)?(?:/s(?:ec)?|\^?2|\*\*2|²)|gals?|units? of g|in g|\(g\)|\[g\])(?:$|[^\pL\pN/^])`)

// unitIn is the unit that a line of header text states, "" for none.
func unitIn(line string) string {
	m := plainUnit.FindStringSubmatch(line)
	if m == nil {
		return ""
	}
	if s := strings.ToLower(m[1]); strings.Contains(s, "g") && !strings.Contains(s, "gal") {
		return "g"
	}
	return m[1]
}

// named splits the heading of a column into its name and its unit:
// "NS [gal]", "acc (cm/s2)", "acc_cm/s2", "a_g". A lone capital G may mean g or gal
// and counts as none.
func named(heading string) (name, unit string) {
	heading = strings.TrimSpace(strings.Trim(strings.TrimSpace(heading), `"`))
	name = heading
	if i := strings.IndexAny(heading, "([{"); i >= 0 {
		name = strings.TrimSpace(heading[:i])
		unit = strings.Trim(strings.TrimSpace(heading[i:]), "()[]{} ")
		unit = strings.TrimPrefix(unit, "in ")
	} else if i := strings.LastIndexAny(heading, "_ ,:"); i >= 0 && (isUnit(heading[i+1:]) || isTimeUnit(heading[i+1:])) {
		name, unit = strings.TrimRight(heading[:i], "_ ,:"), heading[i+1:]
	}
	if unit == "G" || !isUnit(unit) && !isTimeUnit(unit) {
		unit = ""
	}
	return name, unit
}

func isTimeUnit(text string) bool { return timeScale(text) > 0 }

// timeScale is one of a unit of time in s, 0 for none.
func timeScale(text string) float64 {
	switch unitKey(text) {
	case "s", "sec", "secs", "second", "seconds":
		return 1
	case "ms", "msec":
		return 1e-3
	}
	return 0
}
