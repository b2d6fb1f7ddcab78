package settings

import (
	"slices"
	"triodeck/parser/spelling"
)

// didYouMean is `: did you mean "x"?` for the nearest of the known words, or
// nothing if none is near.
func didYouMean(word string, known []string) string {
	near := spelling.Nearest(word, slices.Sorted(slices.Values(known)))
	if near == "" {
		return ""
	}
	return ": did you mean \"" + near + "\"?"
}
