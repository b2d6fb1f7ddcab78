package parser

import "strings"

// exprLexer cuts an expression. Line breaks, continuation marks and the comment
// lines between them are blanks.
type exprLexer struct {
	lexed
	at, end int
	depth   int
	probe   int // depth of the parenthesis of v( or i( that is open, else 0
}

// lexExpr cuts text[start:end] into out's tokens; base is where text begins in its card.
func lexExpr(text string, start, end int, base int32, out *lexed) {
	start, end = unquoted(text, start, end)
	x := exprLexer{lexed: *out, at: start, end: end}
	x.text, x.base = text, base
	x.tokens = x.tokens[:0]
	for x.step() {
	}
	*out = x.lexed
}

// unquoted leaves out double quotes around the whole of an expression, as some
// libraries write them inside braces: {"-tol/2"}.
func unquoted(text string, start, end int) (int, int) {
	s, e := start, end
	for s < e && blank(text[s]) {
		s++
	}
	for e > s && blank(text[e-1]) {
		e--
	}
	if e-s < 2 || text[s] != '"' || text[e-1] != '"' || strings.Contains(text[s+1:e-1], `"`) {
		return start, end
	}
	return s + 1, e - 1
}

func (x *exprLexer) add(k tokenKind, start int) {
	x.tokens = append(x.tokens, token{k, int32(start), int32(x.at)})
}

func (x *exprLexer) peek(n int) byte {
	if x.at+n < x.end {
		return x.text[x.at+n]
	}
	return 0
}

// skipBlanks goes over what separates tokens.
func (x *exprLexer) skipBlanks() {
	for x.at < x.end {
		switch c := x.text[x.at]; {
		case blank(c):
			x.at++
		case lineBreak(c):
			x.at = min(skipLines(x.text, x.at), x.end)
		default:
			return
		}
	}
}

func (x *exprLexer) step() bool {
	x.skipBlanks()
	if x.at >= x.end {
		return false
	}
	start := x.at
	c := x.text[start]
	if x.probe > 0 && x.node(start, c) {
		return true
	}
	switch {
	case digit(c), c == '.' && digit(x.peek(1)):
		_, _, n := scanNumber(x.text[start:x.end], false)
		if n == 0 { // too large for a float64
			n = wordEnd(x.text[:x.end], start) - start
			x.at += n
			x.add(strayToken, start)
			return true
		}
		x.at += n
		x.add(numberToken, start)
	case nameStart(c):
		x.name(start)
	default:
		x.operator(start, c)
	}
	return true
}

func nameStart(c byte) bool {
	return isLetter(c) || c == '_' || c == '@' || c == '$' || c == '#' || c >= 0x80
}

// name reads a parameter, a function or a probe.
func (x *exprLexer) name(start int) {
	for x.at < x.end {
		c := x.text[x.at]
		if c == '[' && x.text[start] == '@' {
			// @m1[vth]: a device's quantity
			if n := strings.IndexByte(x.text[x.at:x.end], ']'); n > 0 {
				x.at += n + 1
				continue
			}
		}
		if !nameStart(c) && !digit(c) && !(c == '.' && x.peek(1) != '.') {
			break
		}
		x.at++
	}
	kind := nameToken
	if x.at == start+1 {
		if l := lower(x.text[start]); l == 'v' || l == 'i' {
			at := x.at
			x.skipBlanks()
			if x.peek(0) == '(' {
				kind = probeToken
				x.probe = x.depth + 1
			}
			x.at = at
		}
	}
	x.add(kind, start)
}

// node reads inside the parentheses of a probe, where everything but separators is
// a name.
func (x *exprLexer) node(start int, c byte) bool {
	switch c {
	case '(':
		if x.depth+1 != x.probe {
			x.at++
			x.add(strayToken, start)
			return true
		}
		return false
	case ')':
		x.probe = 0
		return false
	case ',':
		return false
	}
	for x.at < x.end && !blank(x.text[x.at]) && !lineBreak(x.text[x.at]) && strings.IndexByte("(),", x.text[x.at]) < 0 {
		x.at++
	}
	x.add(nodeToken, start)
	return true
}

func (x *exprLexer) operator(start int, c byte) {
	x.at++
	next := byte(0)
	if x.at < x.end {
		next = x.text[x.at]
	}
	kind := opToken
	switch c {
	case '(':
		x.depth++
		kind = openToken
	case ')':
		x.depth--
		kind = closeToken
	case ',':
		kind = commaToken
	case '?':
		kind = askToken
	case ':':
		kind = elseToken
	case '\'':
		kind = tickToken
	case '*':
		if next == '*' {
			x.at++
		}
	case '&', '|':
		if next == c {
			x.at++
		}
	case '<', '>', '!':
		if next == '=' {
			x.at++
		} else if c == '!' {
			kind = notToken
		}
	case '=':
		if next == '=' {
			x.at++
		} else {
			kind = assignToken
		}
	case '.':
		if next == '.' {
			x.at++
			kind = rangeToken
		} else {
			kind = strayToken
		}
	case '~':
		kind = notToken
	case '+', '-', '/', '%', '^':
	default:
		kind = strayToken
	}
	x.add(kind, start)
}
