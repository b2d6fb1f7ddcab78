// Package parser turns the text of a deck into syntax and back. Its one
// invariant: it is total and lossless. Parse cannot fail, and the texts of a
// file's cards, one after the other, are the file, byte for byte. It knows one
// file, no other files, no circuit and no numbers' meaning.
package parser

import (
	"sort"
	"sync/atomic"

	"triodeck/parser/source"
)

// File is the syntax of one text; it is immutable.
type File struct {
	Src      string
	Encoding Encoding
	Foreign  string // what the text is instead of a deck; empty for a deck

	cards   []*Card
	starts  []int32 // of each card in Src
	states  []state // of the splitter where each card begins
	foreign source.Span
	lines   atomic.Pointer[source.LineIndex]
}

// Len is the number of cards.
func (f *File) Len() int { return len(f.cards) }

// Card is the card at index i.
func (f *File) Card(i int) *Card { return f.cards[i] }

// Start is the offset of card i in the file.
func (f *File) Start(i int) int32 { return f.starts[i] }

// Span is the whole span of card i in the file.
func (f *File) Span(i int) source.Span {
	return source.Span{Start: f.starts[i], End: f.starts[i] + int32(len(f.cards[i].Text))}
}

// CardAt is the index of the card that contains the offset; the last card also
// owns the end of the file. It is -1 if the file has no card.
func (f *File) CardAt(offset int32) int {
	return sort.Search(len(f.starts), func(i int) bool { return f.starts[i] > max(offset, 0) }) - 1
}

// Lines is the file's line index, made when first asked for.
func (f *File) Lines() *source.LineIndex {
	if x := f.lines.Load(); x != nil {
		return x
	}
	// Two callers may both build it; they build the same and one is kept.
	f.lines.CompareAndSwap(nil, source.NewLineIndex(f.Src))
	return f.lines.Load()
}

// Errors is everything wrong in the file, in the order of the text; spans are
// relative to the file.
func (f *File) Errors() []Error {
	if f.Foreign != "" {
		return []Error{{Span: f.foreign, Message: "this text is " + f.Foreign + ", not a SPICE deck; it is left alone"}}
	}
	var errs []Error
	for i, c := range f.cards {
		from := len(errs)
		errs = append(errs, c.Errs...)
		for _, n := range c.Notes {
			if n.Err != nil {
				errs = append(errs, *n.Err)
			}
		}
		own := errs[from:]
		sort.SliceStable(own, func(a, b int) bool { return own[a].Span.Start < own[b].Span.Start })
		for k := range own {
			own[k].Span = own[k].Span.Shift(f.starts[i])
		}
	}
	return errs
}
