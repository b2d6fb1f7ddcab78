package parser

import (
	"strings"

	"triodeck/parser/source"
)

// comment says whether a comment begins at x.at, where the byte before is a blank
// or the start of a line.
func (x *cardLexer) comment() bool {
	rest := x.text[x.at:]
	switch rest[0] {
	case ';':
		return true
	case '*':
		return x.starComment && x.depth == 0
	case '/':
		return x.slashComment && len(rest) > 1 && rest[1] == '/'
	case '$':
		return !x.dollarWord(rest)
	}
	return false
}

// dollarWord tells a field that begins with `$` from a comment: `$[nch]`, `$W=2u`
// and `$PINS` of extracted netlists, generated nodes such as `$N_0002` and `$3`,
// and variables in paths.
func (x *cardLexer) dollarWord(rest string) bool {
	if len(rest) < 2 || x.at > 0 && !blank(x.text[x.at-1]) && !lineBreak(x.text[x.at-1]) && x.text[x.at-1] != '+' {
		return len(rest) > 1
	}
	c := rest[1]
	if c == '[' {
		return strings.IndexByte(rest, ']') > 0
	}
	if x.path {
		return isLetter(c) || c == '{' || c == '('
	}
	n := wordEnd(rest, 1)
	word := rest[1:n]
	if word == "" || !isLetter(c) && !digit(c) && c != '_' {
		return false
	}
	if n < len(rest) && rest[n] == '=' || foldEqual(word, "pins") {
		return true
	}
	return x.words < x.fields && digit(word[len(word)-1])
}

func lineBreak(c byte) bool { return c == '\n' || c == '\r' }

// skipComment goes to the end of the line and keeps the annotations that the
// comment holds.
func (x *cardLexer) skipComment(at int) int {
	end := lineEnd(x.text, at)
	for end > at && lineBreak(x.text[end-1]) {
		end--
	}
	for i := at; i+1 < end; i++ {
		c := x.text[i]
		if (c == ';' || c == '$') && x.text[i+1] == '@' && (i == at || blank(x.text[i-1])) {
			if n := len(x.notes); n > 0 && int(x.notes[n-1].End) == end {
				x.notes[n-1].End = int32(i)
			}
			x.notes = append(x.notes, source.Span{Start: int32(i), End: int32(end)})
		}
	}
	return end
}

// dollar reads a field that begins with `$`. The dollar of `$[nch]`, `$W=` and
// their like is a mark, not a part of the name.
func (x *cardLexer) dollar() {
	start := x.at
	rest := x.text[start:]
	if strings.HasPrefix(rest, "$[") {
		if n := strings.IndexByte(rest, ']'); n > 0 && !strings.ContainsAny(rest[:n], "\r\n") {
			x.at = start + n + 1
			x.add(fieldToken, start)
			return
		}
	}
	n := wordEnd(rest, 1)
	if n < len(rest) && rest[n] == '=' {
		switch Fold(rest[1:n]) {
		case "w", "l", "m", "sub":
			start++
		}
	}
	x.at += max(n, 1)
	x.add(wordToken, start)
}
