package parser

import "triodeck/parser/spelling"

// suggest is `; did you mean "x"?` for the nearest of the known words, or nothing
// if none is near.
func suggest(word string, known []string) string {
	near := spelling.Nearest(Fold(word), known)
	if near == "" {
		return ""
	}
	return `; did you mean "` + near + `"?`
}
