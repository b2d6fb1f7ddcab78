package parser

import (
	"strings"

	"triodeck/parser/source"
)

// dialect of a card: what counts as a comment and how a value ends depends on
// the statement, as it does in every SPICE.
type cardManner struct {
	starComment  bool // a blank and `*` end the line
	slashComment bool // a blank and `//` end the line
	wideValues   bool // behind `=` an operator joins what blanks separate
	path         bool // fields are paths: `$` begins a variable
	fields       int  // so many words may begin with `$` and be no comment
}

// cardLexer cuts one card. It is total: every byte that is no blank, comment or
// continuation mark lands in a token.
type cardLexer struct {
	lexed
	cardManner
	at    int
	depth int // open parentheses
	words int
}

// lexCard cuts a card's text into out's slices, which are reused.
func lexCard(text string, m cardManner, out *lexed) {
	x := cardLexer{lexed: *out, cardManner: m}
	x.text = text
	x.tokens, x.notes, x.joins = x.tokens[:0], x.notes[:0], x.joins[:0]
	if strings.HasPrefix(text, bom) {
		x.at = len(bom)
	}
	for x.step() {
	}
	*out = x.lexed
}

// step reads one token or one piece of trivia.
func (x *cardLexer) step() bool {
	if x.at >= len(x.text) {
		return false
	}
	start := x.at
	switch c := x.text[start]; c {
	case ' ', '\t', '\f', '\v', 0x1A:
		x.at++
		if x.at < len(x.text) && x.comment() {
			x.at = x.skipComment(x.at)
		}
		return true
	case '\r', '\n':
		x.newline()
		return true
	case '=':
		x.at++
		n := len(x.tokens)
		keyed := n > 0 && x.tokens[n-1].kind == wordToken
		if keyed {
			x.tokens[n-1].kind = keyToken
		}
		x.add(assignToken, start)
		if keyed || n > 0 && x.tokens[n-1].kind == closeToken {
			x.value() // else it joins a table to its points
		}
		return true
	case ',':
		x.at++
		x.add(commaToken, start)
		return true
	case '(':
		x.at++
		x.depth++
		x.add(openToken, start)
		return true
	case ')':
		x.at++
		x.depth = max(0, x.depth-1)
		x.add(closeToken, start)
		return true
	case '\'', '"', '{':
		x.quoted(c)
		return true
	case ';':
		x.at = x.skipComment(x.at)
		return true
	case '$':
		if x.comment() {
			x.at = x.skipComment(x.at)
			return true
		}
		x.dollar()
		return true
	}
	if x.strayJoin() {
		return true
	}
	x.wordAt()
	return true
}

func (x *cardLexer) add(k tokenKind, start int) {
	x.tokens = append(x.tokens, token{k, int32(start), int32(x.at)})
	if k == wordToken {
		x.words++
	}
}

// wordAt reads a field: everything up to a blank, a separator or a comment.
func (x *cardLexer) wordAt() {
	start := x.at
	x.at = wordEnd(x.text, start)
	if x.at == start {
		x.at++
	}
	if x.words == 0 && x.text[start] == '.' {
		x.at = start + len(directiveWord(x.text[start:]))
		x.add(wordToken, start)
		if x.at < len(x.text) && x.text[x.at] == '*' {
			x.at = x.skipComment(x.at) // .ends*note
		}
		return
	}
	x.add(wordToken, start)
}

func wordEnd(text string, at int) int {
	for at < len(text) && !separator[text[at]] {
		at++
	}
	return at
}

var separator = func() (t [256]bool) {
	for _, c := range []byte(" \t\f\v\x1a\r\n=,();") {
		t[c] = true
	}
	return t
}()

// value reads what stands behind `=`.
func (x *cardLexer) value() {
	for x.at < len(x.text) && (blank(x.text[x.at]) || x.text[x.at] == '\n' || x.text[x.at] == '\r') {
		if !x.step() {
			return
		}
		// A comment may have been skipped: then the next line decides.
	}
	if x.at >= len(x.text) {
		return
	}
	start := x.at
	switch c := x.text[start]; c {
	case '\'', '"', '{':
		x.quoted(c)
		return
	case '(':
		end, ok := closing(x.text, start)
		x.at = end
		if !ok {
			x.add(brokenToken, start)
			return
		}
		if more := x.bareEnd(end); more > end {
			x.at = more
			x.add(bareToken, start)
			return
		}
		x.add(parenToken, start)
		return
	case '=', ',', ')', ';':
		return
	case '$':
		if x.comment() {
			return
		}
	}
	x.at = x.bareEnd(start)
	if x.at == start {
		return
	}
	kind := wordToken
	if strings.ContainsAny(x.text[start:x.at], "( \t") {
		kind = bareToken
	}
	x.add(kind, start)
}

// bareEnd is the end of an unquoted value that goes on at at.
func (x *cardLexer) bareEnd(at int) int {
	start := at
	for at < len(x.text) {
		c := x.text[at]
		switch {
		case c == '(':
			end, ok := closing(x.text, at)
			if !ok {
				return at
			}
			at = end
			continue
		case c == '=' && x.wideValues && at+1 < len(x.text) && (x.text[at+1] == '=' || strings.IndexByte("=<>!", x.text[at-1]) >= 0):
			at++
			continue
		case blank(c) && x.wideValues:
			next := at
			for next < len(x.text) && blank(x.text[next]) {
				next++
			}
			if next < len(x.text) && at > start && x.joinsAcross(at, next) {
				at = next
				continue
			}
			return at
		case separator[c]:
			return at
		}
		at++
	}
	return at
}

// joinsAcross says whether the blanks from at to next stand inside an expression.
func (x *cardLexer) joinsAcross(at, next int) bool {
	const operators = "+-*/%^<>&|?:"
	before, after := x.text[at-1], x.text[next]
	if separator[after] && after != '(' && !(after == '=' && next+1 < len(x.text) && x.text[next+1] == '=') {
		return false
	}
	if after == '/' && next+1 < len(x.text) && x.text[next+1] == '/' {
		return false
	}
	if strings.IndexByte(operators+"=", before) >= 0 {
		return after != '$' && after != '\'' && after != '"' && after != '{'
	}
	if after == '!' {
		return next+1 < len(x.text) && x.text[next+1] == '='
	}
	if after == '=' {
		return true
	}
	if strings.IndexByte(operators, after) < 0 {
		return false
	}
	// A lone `+` at the line's end is a stray continuation mark.
	rest := strings.TrimLeft(x.text[next+1:], " \t")
	return rest != "" && rest[0] != '\n' && rest[0] != '\r'
}

// quoted reads '…', "…" or {…}.
func (x *cardLexer) quoted(open byte) {
	start := x.at
	end, ok := closing(x.text, start)
	x.at = end
	if !ok {
		x.add(brokenToken, start)
		return
	}
	switch open {
	case '\'':
		x.add(quoteToken, start)
	case '"':
		x.add(stringToken, start)
	default:
		x.add(braceToken, start)
	}
}

// closing is the offset behind what closes the quote, brace or parenthesis at
// start; if nothing does, the end of the text without trailing blanks.
func closing(text string, start int) (end int, ok bool) {
	open := text[start]
	shut := open
	switch open {
	case '{':
		shut = '}'
	case '(':
		shut = ')'
	}
	if shut == open {
		if n := strings.IndexByte(text[start+1:], shut); n >= 0 {
			return start + 1 + n + 1, true
		}
		return unclosedEnd(text, start), false
	}
	depth := 0
	for i := start; i < len(text); i++ {
		switch c := text[i]; c {
		case open:
			depth++
		case shut:
			depth--
			if depth == 0 {
				return i + 1, true
			}
		case '\n', '\r':
			i = skipLines(text, i) - 1
		}
	}
	return unclosedEnd(text, start), false
}

func unclosedEnd(text string, start int) int {
	end := lineEnd(text, start)
	for end > start+1 && (blank(text[end-1]) || text[end-1] == '\n' || text[end-1] == '\r') {
		end--
	}
	return end
}

// skipLines goes from a line break over comment lines to what follows the next
// continuation mark, or to the end of the text.
func skipLines(text string, at int) int {
	for at < len(text) {
		for at < len(text) && (text[at] == '\n' || text[at] == '\r' || blank(text[at])) {
			at++
		}
		end := lineEnd(text, at)
		switch class, first := classify(text, at, end); class {
		case moreLine:
			return first + 1
		case textLine:
			return first
		}
		at = end
	}
	return at
}

// newline goes on to the next line of the card, and keeps the annotations that
// stand on lines of their own between its lines.
func (x *cardLexer) newline() {
	for x.at < len(x.text) {
		for x.at < len(x.text) && (x.text[x.at] == '\n' || x.text[x.at] == '\r') {
			x.at++
		}
		end := lineEnd(x.text, x.at)
		class, first := classify(x.text, x.at, end)
		switch class {
		case moreLine:
			x.at = first + 1
			if x.at < len(x.text) && x.comment() {
				x.at = x.skipComment(x.at)
			}
			return
		case textLine:
			x.at = first
			return
		case noteLine, noteMoreLine:
			if class == noteMoreLine && len(x.notes) > 0 {
				x.notes[len(x.notes)-1].End = int32(end)
			} else {
				x.notes = append(x.notes, source.Span{Start: int32(first), End: int32(end)})
			}
		case commentLine:
			if strings.HasPrefix(x.text[first:], ";@") || strings.HasPrefix(x.text[first:], "$@") {
				x.notes = append(x.notes, source.Span{Start: int32(first), End: int32(end)})
			}
		}
		x.at = end
	}
}

// strayJoin takes a `\` or `+` at the end of a line for what it is.
func (x *cardLexer) strayJoin() bool {
	c := x.text[x.at]
	if c != '\\' && c != '+' || x.at == 0 {
		return false
	}
	end := lineEnd(x.text, x.at)
	if strings.Trim(x.text[x.at:end], "\\+ \t\r\n\f") != "" || strayJoinAt(x.text, end) != x.at {
		return false
	}
	n := 1
	if strings.HasPrefix(x.text[x.at:], `\\`) {
		n = 2
	}
	x.joins = append(x.joins, source.Span{Start: int32(x.at), End: int32(x.at + n)})
	x.at += n
	return true
}
