package source

import (
	"fmt"
	"strings"
)

// Edit replaces the bytes of a span.
type Edit struct {
	Span
	New string
}

// Apply makes all edits at once; they must be sorted and must not overlap. Two
// insertions at one place are made in their order.
func Apply(src string, edits []Edit) (string, error) {
	var b strings.Builder
	at := int32(0)
	for i, e := range edits {
		if e.Start > e.End || e.End > int32(len(src)) || e.Start < 0 {
			return "", fmt.Errorf("edit %d at %v lies outside the text of %d bytes", i, e.Span, len(src))
		}
		if e.Start < at {
			return "", fmt.Errorf("edit %d at %v overlaps the one before it", i, e.Span)
		}
		b.WriteString(src[at:e.Start])
		b.WriteString(e.New)
		at = e.End
	}
	b.WriteString(src[at:])
	return b.String(), nil
}
