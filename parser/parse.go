package parser

import (
	"triodeck/parser/source"
)

// maxSize is the largest text that is read; offsets are int32.
const maxSize = 1<<31 - 1<<20

// Parse reads a text. It cannot fail: what is no SPICE is kept as cards that say
// so.
func Parse(src []byte) *File {
	if len(src) > maxSize {
		src = src[:maxSize]
	}
	f := new(File)
	f.Src, f.Encoding = decode(src)
	s := splitter{src: f.Src}
	var pieces []piece
	for {
		st := s.st
		p, ok := s.next()
		if !ok {
			break
		}
		f.states = append(f.states, st)
		f.starts = append(f.starts, p.start)
		pieces = append(pieces, p)
	}
	cards := make([]Card, len(pieces))
	f.cards = make([]*Card, len(pieces))
	for i := range cards {
		f.cards[i] = &cards[i]
	}
	readAll(f.Src, pieces, cards)
	f.judge()
	return f
}

// Edit is the file with the bytes of sp replaced. Cards that the edit does not
// touch are shared with f; the result is what Parse would give for the new text.
func (f *File) Edit(sp source.Span, text string) *File {
	n := int32(len(f.Src))
	start := min(max(sp.Start, 0), n)
	end := min(max(sp.End, start), n)
	if int(n)-int(end-start)+len(text) > maxSize {
		return f
	}
	e := &File{Src: f.Src[:start] + text + f.Src[end:], Encoding: f.Encoding}
	first := f.firstTouched(start)
	s := splitter{src: e.Src}
	if first < len(f.cards) {
		s.at, s.st = int(f.starts[first]), f.states[first]
	}
	e.cards = append(make([]*Card, 0, len(f.cards)+4), f.cards[:first]...)
	e.starts = append(make([]int32, 0, len(f.cards)+4), f.starts[:first]...)
	e.states = append(make([]state, 0, len(f.cards)+4), f.states[:first]...)
	delta := int32(len(e.Src)) - n
	var r reader
	old := first
	for {
		at := int32(s.at)
		if at-delta >= end && at >= start+int32(len(text)) {
			for old < len(f.cards) && f.starts[old] < at-delta {
				old++
			}
			if old < len(f.cards) && f.starts[old] == at-delta && f.states[old] == s.st {
				break
			}
		}
		st := s.st
		p, ok := s.next()
		if !ok {
			old = len(f.cards)
			break
		}
		c := new(Card)
		// A copy, so that the card does not keep this whole text alive.
		r.read(string(append([]byte(nil), e.Src[p.start:p.end]...)), p, c)
		e.cards = append(e.cards, c)
		e.starts = append(e.starts, p.start)
		e.states = append(e.states, st)
	}
	e.cards = append(e.cards, f.cards[old:]...)
	e.states = append(e.states, f.states[old:]...)
	for _, at := range f.starts[old:] {
		e.starts = append(e.starts, at+delta)
	}
	e.judge()
	return e
}

// firstTouched is the first card that an edit at an offset can change: the last
// card before it that a continuation line could lengthen.
func (f *File) firstTouched(at int32) int {
	i := f.CardAt(at) - 1
	for i > 0 {
		if k := f.cards[i].Kind; k != BlankCard && k != CommentCard && k != AnnotationCard && k != OpaqueCard {
			break
		}
		i--
	}
	return max(i, 0)
}
