package published

import "fmt"

// Misses runs all cases of an engine and says what is wrong: values that are
// missed, errors, ids that stand twice, and an engine without any case.
func Misses(cases []Case) (all []string) {
	if len(cases) == 0 {
		return []string{"there are no published cases"}
	}
	seen := map[string]bool{}
	for _, c := range cases {
		if seen[c.ID] {
			all = append(all, c.ID+": two cases have this id")
		}
		seen[c.ID] = true
		outcomes, err := c.Run()
		if err != nil {
			all = append(all, err.Error())
		}
		for _, o := range outcomes {
			if !o.OK {
				all = append(all, fmt.Sprintf("%s: %s: got %.12g, want %.12g within %g (%s)", c.ID, o.Want.Name, o.Got, o.Want.Value, o.Want.Tol, o.Want.Why))
			}
		}
	}
	return all
}
