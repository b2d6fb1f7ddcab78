// Package source holds what every other package says about places in a text:
// byte spans, the line index and edits. Its one invariant: inside the house a
// place is a byte offset; columns of any other kind are made here, on demand.
package source

import "fmt"

// Span is a half-open range of bytes, [Start, End).
type Span struct{ Start, End int32 }

// Len is the number of bytes covered.
func (s Span) Len() int { return int(s.End - s.Start) }

// Contains says whether the offset lies in the span; the end counts as inside,
// so that a cursor behind a word still touches it.
func (s Span) Contains(offset int32) bool { return s.Start <= offset && offset <= s.End }

// Covers says whether o lies wholly inside s.
func (s Span) Covers(o Span) bool { return s.Start <= o.Start && o.End <= s.End }

// Shift moves the span by n bytes.
func (s Span) Shift(n int32) Span { return Span{s.Start + n, s.End + n} }

func (s Span) String() string { return fmt.Sprintf("%d-%d", s.Start, s.End) }
