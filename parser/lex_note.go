package parser

import "strings"

// noteLexer cuts an annotation. Where names may stand it takes names as SPICE
// writes them, with `*`, `?`, `-`; behind a comparison it takes an expression, up to
// the blank that ends it.
type noteLexer struct {
	lexed
	at, end int
	regions bool // regions are words of this statement
}

// lexNote cuts text[start:end], what stands behind the annotation's mark.
func lexNote(text string, start, end int, regions bool, out *lexed) {
	x := noteLexer{lexed: *out, at: start, end: end, regions: regions}
	x.text, x.base = text, 0
	x.tokens = x.tokens[:0]
	for x.step() {
	}
	*out = x.lexed
}

func (x *noteLexer) add(k tokenKind, start int) {
	x.tokens = append(x.tokens, token{k, int32(start), int32(x.at)})
}

// skipBlanks goes over blanks and, at a line's end, over the mark `*@+`.
func (x *noteLexer) skipBlanks() {
	for x.at < x.end {
		c := x.text[x.at]
		switch {
		case blank(c):
			x.at++
		case lineBreak(c):
			for x.at < x.end && (lineBreak(x.text[x.at]) || blank(x.text[x.at])) {
				x.at++
			}
			if strings.HasPrefix(x.text[x.at:x.end], "*@+") {
				x.at += 3
			}
		default:
			return
		}
	}
}

func (x *noteLexer) step() bool {
	x.skipBlanks()
	if x.at >= x.end {
		return false
	}
	start := x.at
	c := x.text[start]
	if (c == ';' || c == '$') && (start == 0 || blank(x.text[start-1])) {
		// A plain comment behind the annotation.
		for x.at < x.end && !lineBreak(x.text[x.at]) {
			x.at++
		}
		return true
	}
	switch c {
	case '"':
		if n := strings.IndexAny(x.text[start+1:x.end], "\"\r\n"); n >= 0 && x.text[start+1+n] == '"' {
			x.at = start + n + 2
			x.add(stringToken, start)
			return true
		}
		for x.at < x.end && !lineBreak(x.text[x.at]) {
			x.at++
		}
		x.add(brokenToken, start)
		return true
	case '(':
		x.at++
		x.add(openToken, start)
		return true
	case ')':
		x.at++
		x.add(closeToken, start)
		return true
	case ',':
		x.at++
		x.add(commaToken, start)
		return true
	case '<', '>', '=':
		x.at++
		if c != '=' && x.at < x.end && x.text[x.at] == '=' {
			x.at++
		}
		x.compare(start, c)
		return true
	}
	x.word(start)
	return true
}

// compare takes a comparison and the expression behind it.
func (x *noteLexer) compare(start int, c byte) {
	last := ""
	if n := len(x.tokens); n > 0 {
		if t := &x.tokens[n-1]; t.kind == wordToken || t.kind == regionToken {
			t.kind = keyToken
			last = Fold(x.textOf(*t))
		}
	}
	if c == '=' {
		x.add(assignToken, start)
	} else {
		x.add(compareToken, start)
	}
	if last == "lib" {
		return // a section's name, not arithmetic
	}
	x.expression()
}

// expression takes tokens of an expression up to the blank that ends it: one that
// neither follows nor precedes an operator.
func (x *noteLexer) expression() {
	x.skipBlanks()
	e := exprLexer{lexed: x.lexed, at: x.at, end: x.end}
	depth := 0
	need := true // an operand must come
	for {
		before := e.at
		x.at = e.at
		x.skipBlanks()
		if x.at >= x.end {
			break
		}
		apart := x.at > before
		e.at = x.at
		c := x.text[x.at]
		if depth == 0 && !need && apart && !x.continues() {
			break
		}
		if strings.IndexByte("<>=\"", c) >= 0 && depth == 0 {
			break
		}
		if c == ',' && depth == 0 {
			break
		}
		n := len(e.tokens)
		if !e.step() {
			break
		}
		if len(e.tokens) == n {
			break
		}
		switch t := e.tokens[n]; t.kind {
		case openToken:
			depth++
			need = true
		case closeToken:
			depth--
			need = false
		case numberToken, nameToken, nodeToken:
			need = false
		default:
			need = true
		}
		if depth < 0 {
			break
		}
	}
	x.tokens = e.tokens
	x.at = max(x.at, e.at)
}

// continues says whether an operator stands at x.at, so that the expression goes
// on over the blank before it.
func (x *noteLexer) continues() bool {
	c := x.text[x.at]
	next := byte(' ')
	if x.at+1 < x.end {
		next = x.text[x.at+1]
	}
	switch c {
	case '+', '-', '*', '/', '^', '%':
		return true
	case '.':
		return next == '.'
	case '?', ':':
		return blank(next)
	}
	return false
}

// word takes a name: of a statement, a device, a region, a mode.
func (x *noteLexer) word(start int) {
	probe := (lower(x.text[start]) == 'v' || lower(x.text[start]) == 'i') && start+1 < x.end && x.text[start+1] == '('
	if probe {
		x.at++
		x.add(probeToken, start)
		x.nodes()
		return
	}
	for x.at < x.end {
		c := x.text[x.at]
		if c == '<' || c == '>' {
			n := busBit(x.text[x.at:x.end])
			if n == 0 {
				break
			}
			x.at += n
			continue
		}
		if blank(c) || lineBreak(c) || strings.IndexByte("(),=\"", c) >= 0 {
			break
		}
		x.at++
	}
	if x.at == start {
		x.at++
		x.add(strayToken, start)
		return
	}
	text := Fold(x.text[start:x.at])
	kind := wordToken
	switch text {
	case "in", "at", "on", "within", "to", "not", "from":
		kind = wordsToken
	case "cutoff", "triode", "saturation":
		if x.regions {
			kind = regionToken
		}
	case "deep", "weak":
		if n := x.second(text); n > 0 && x.regions {
			x.at += n
			kind = regionToken
		}
	}
	x.add(kind, start)
	switch {
	case (text == "path" || text == "settle") && x.at < x.end && x.text[x.at] == '(':
		x.nodes()
	case (text == "within" || text == "to") && x.regions:
		x.expression()
	}
}

// nodes takes a parenthesis with names of nodes in it, which may be any word.
func (x *noteLexer) nodes() {
	e := exprLexer{lexed: x.lexed, at: x.at, end: x.end, probe: 1}
	for e.step() {
		if k := e.tokens[len(e.tokens)-1].kind; k == closeToken || k == strayToken {
			break
		}
	}
	x.tokens, x.at = e.tokens, e.at
}

// second is the length of blanks and the second word of a region's name, 0 if it
// is none.
func (x *noteLexer) second(first string) int {
	want := map[string]string{"deep": "triode", "weak": "inversion"}[first]
	rest := x.text[x.at:x.end]
	trimmed := strings.TrimLeft(rest, " \t")
	if !foldPrefix(trimmed, want) || len(trimmed) == len(rest) {
		return 0
	}
	if n := len(want); n < len(trimmed) && !blank(trimmed[n]) && !lineBreak(trimmed[n]) && trimmed[n] != ',' {
		return 0
	}
	return len(rest) - len(trimmed) + len(want)
}

// busBit is the length of `<3>` or `<7:0>` at the start of s, else 0.
func busBit(s string) int {
	n := 1
	for n < len(s) && (digit(s[n]) || s[n] == ':') {
		n++
	}
	if s[0] != '<' || n == 1 || n >= len(s) || s[n] != '>' {
		return 0
	}
	return n + 1
}
