package page

import (
	"slices"
	"strings"

	"quoin/calc/exhibit"
)

// named tells whether a signature names a person.
func named(s exhibit.Sign) bool { return len(exhibit.People(s.Initials)) > 0 }

// samePerson tells whether a preparer is among the checkers.
func samePerson(prepared, checked string) bool {
	by := exhibit.People(checked)
	return slices.ContainsFunc(exhibit.People(prepared), func(p string) bool { return slices.Contains(by, p) })
}

// checkedText is the checker of a row: never one who checks their own work.
func checkedText(prepared, checked string) string {
	switch {
	case len(exhibit.People(checked)) == 0:
		return "——"
	case samePerson(prepared, checked):
		return "not checked: same person"
	case len(exhibit.People(prepared)) == 0:
		return checked + " (preparer not given)"
	}
	return checked
}

// personText is one who prepared, or a line for ink.
func personText(initials string) string {
	if len(exhibit.People(initials)) == 0 {
		return "——"
	}
	return initials
}

// signText is a signature, or a line for ink.
func signText(verb string, s exhibit.Sign) string {
	if !named(s) {
		return verb + " ——"
	}
	return strings.TrimSpace(verb + " " + s.Initials + " " + s.Date)
}
