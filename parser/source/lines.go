package source

import (
	"sort"
	"unicode/utf8"
)

// Encoding says in which unit a column counts.
type Encoding uint8

// The units of a column. A byte that is no UTF-8 counts as one unit in each.
const (
	Bytes Encoding = iota // UTF-8 code units
	UTF16                 // UTF-16 code units
	UTF32                 // code points
)

// UTF8 counts in UTF-8 code units, which are bytes.
const UTF8 = Bytes

// LineIndex knows where the lines of a text begin. "\n", "\r\n" and a lone "\r"
// end a line; the break itself belongs to no column. It is immutable.
type LineIndex struct {
	src    string
	starts []int32
}

// NewLineIndex indexes a text.
func NewLineIndex(src string) *LineIndex {
	starts := make([]int32, 1, len(src)/32+1)
	for i := 0; i < len(src); i++ {
		switch src[i] {
		case '\r':
			if i+1 < len(src) && src[i+1] == '\n' {
				i++
			}
			starts = append(starts, int32(i+1))
		case '\n':
			starts = append(starts, int32(i+1))
		}
	}
	return &LineIndex{src: src, starts: starts}
}

// Lines is the number of lines; a text that ends in a line break has an empty last line.
func (x *LineIndex) Lines() int { return len(x.starts) }

// LineSpan is the span of a line without its break; a line outside the text is
// the empty span at the nearer end.
func (x *LineIndex) LineSpan(line int) Span {
	n := int32(len(x.src))
	if line < 0 {
		return Span{}
	}
	if line >= len(x.starts) {
		return Span{n, n}
	}
	start, end := x.starts[line], n
	if line+1 < len(x.starts) {
		end = x.starts[line+1]
		if end > start && x.src[end-1] == '\n' {
			end--
		}
		if end > start && x.src[end-1] == '\r' {
			end--
		}
	}
	return Span{start, end}
}

// Line is the line an offset stands on; an offset outside the text is clamped.
func (x *LineIndex) Line(offset int32) int {
	return max(0, sort.Search(len(x.starts), func(i int) bool { return x.starts[i] > offset })-1)
}

// Position is the line and column of an offset, both from 0. An offset outside
// the text is clamped, one inside a line break stands at the end of its line, one
// inside a character at the character's start.
func (x *LineIndex) Position(offset int32, enc Encoding) (line, col int) {
	offset = min(max(offset, 0), int32(len(x.src)))
	line = x.Line(offset)
	sp := x.LineSpan(line)
	offset = min(offset, sp.End)
	units := 0
	for i := sp.Start; i < offset; {
		size, n := step(x.src[i:sp.End], enc)
		if i+size > offset {
			break
		}
		i += size
		units += n
	}
	return line, units
}

// Offset is the byte at a line and column, both from 0; each is clamped into the
// text, and a column inside a character gives the character's start.
func (x *LineIndex) Offset(line, col int, enc Encoding) int32 {
	sp := x.LineSpan(line)
	i := sp.Start
	for i < sp.End && col > 0 {
		size, n := step(x.src[i:sp.End], enc)
		if n > col {
			break
		}
		col -= n
		i += size
	}
	return i
}

// step is the length in bytes and units of the first character of s.
func step(s string, enc Encoding) (size int32, units int) {
	if s[0] < utf8.RuneSelf {
		return 1, 1
	}
	r, n := utf8.DecodeRuneInString(s)
	switch {
	case enc == Bytes:
		return int32(n), n
	case enc == UTF16 && r > 0xFFFF:
		return int32(n), 2
	}
	return int32(n), 1
}
