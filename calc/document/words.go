package document

import "strings"

// cutPath splits "m.T" into the block's name and the rest.
func cutPath(p string) (first, rest string) {
	first, rest, _ = strings.Cut(p, ".")
	return first, rest
}

// origin names the function of ours in which a panic began.
func origin(stack []byte) string {
	for _, line := range strings.Split(string(stack), "\n") {
		if strings.HasPrefix(line, "quoin/") && !strings.Contains(line, "runNode") {
			name, _, _ := strings.Cut(line, "(")
			return "It arose in " + name
		}
	}
	return ""
}
