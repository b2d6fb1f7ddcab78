package parser

import "fmt"

// Limits that keep deep or endless expressions from exhausting the stack of
// whoever walks them.
const (
	maxExprTokens = 20000
	maxExprDepth  = 200
)

// ParseExpr reads an expression, with or without its quotes, braces or
// parentheses. Spans are relative to what w is relative to.
func ParseExpr(w Word) (Expr, *Error) {
	var l lexed
	lexExprWord(w, &l)
	return parseExpr(&l)
}

// Expr is the value as an expression; a number or name is one too.
func (v Value) Expr() (Expr, *Error) { return ParseExpr(v.Word) }

// lexExprWord cuts what stands between the quotes.
func lexExprWord(w Word, l *lexed) {
	start, end := 0, len(w.Text)
	if end >= 2 {
		switch open, shut := w.Text[0], w.Text[end-1]; {
		case open == '\'' && shut == '\'', open == '"' && shut == '"', open == '{' && shut == '}':
			start, end = 1, end-1
		}
	}
	lexExpr(w.Text, start, end, w.Start, l)
	if len(l.tokens) == 0 {
		// The finding about an empty expression needs a place.
		l.tokens = append(l.tokens, token{endToken, int32(start), int32(start)})
	}
}

// parseExpr reads tokens by hand; what that cannot read the grammar judges.
func parseExpr(l *lexed) (Expr, *Error) {
	if err := boundExpr(l); err != nil {
		return nil, err
	}
	if e, n := quickExpr(l, 0); e != nil && n == len(l.tokens) {
		return e, nil
	}
	return grammarExpr(l)
}

// grammarExpr reads tokens through the grammar.
func grammarExpr(l *lexed) (Expr, *Error) {
	g, at, ok := parseTokens(exprGrammar(), l)
	if !ok {
		return nil, exprError(l, 0, len(l.tokens), at)
	}
	return g.lower(), nil
}

// boundExpr refuses what is too long or too deep to walk.
func boundExpr(l *lexed) *Error {
	depth, deepest, signs, choices := 0, 0, 0, 0
	for i, t := range l.tokens {
		switch t.kind {
		case openToken:
			depth++
			signs = 0
		case closeToken:
			depth--
		case askToken:
			choices++
		case tickToken:
			depth++
		case opToken, notToken:
			signs++
		default:
			signs = 0
		}
		deepest = max(deepest, depth+signs+choices)
		if deepest > maxExprDepth || i > maxExprTokens {
			return &Error{Span: l.spanOf(t), Message: "the expression is nested too deep or too long to read"}
		}
	}
	return nil
}

// exprError says what is wrong with the expression in tokens[from:to], where the
// grammar stopped at an offset of the card.
func exprError(l *lexed, from, to int, at int32) *Error {
	say := func(t token, format string, args ...any) *Error {
		return &Error{Span: l.spanOf(t), Message: fmt.Sprintf(format, args...)}
	}
	tokens := l.tokens[from:to]
	if len(tokens) == 0 || tokens[0].kind == endToken {
		where := token{}
		if len(tokens) > 0 {
			where = tokens[0]
		}
		return say(where, "the expression is empty")
	}
	var open []token
	for _, t := range tokens {
		text := l.textOf(t)
		switch t.kind {
		case strayToken:
			if digit(text[0]) || text[0] == '.' && len(text) > 1 {
				return say(t, "the number %q is too large", text)
			}
			return say(t, "%q has no place in an expression", text)
		case brokenToken:
			return say(t, "%q is not closed", text[:1])
		case assignToken:
			return say(t, `"=" compares nothing: write "=="`)
		case openToken:
			open = append(open, t)
		case closeToken:
			if len(open) == 0 {
				return say(t, `")" closes nothing`)
			}
			open = open[:len(open)-1]
		}
	}
	if len(open) > 0 {
		return say(open[len(open)-1], `"(" is not closed`)
	}
	return exprErrorAt(l, tokens, at, say)
}

func exprErrorAt(l *lexed, tokens []token, at int32, say func(token, string, ...any) *Error) *Error {
	i := 0
	for i < len(tokens) && tokens[i].start+l.base < at {
		i++
	}
	if i == len(tokens) {
		last := tokens[len(tokens)-1]
		if k := last.kind; k == opToken || k == notToken || k == askToken || k == elseToken || k == commaToken {
			return say(last, "an operand is missing after %q", l.textOf(last))
		}
		return say(last, `the choice has no ":" and no second value`)
	}
	t := tokens[i]
	text := l.textOf(t)
	switch t.kind {
	case opToken, askToken, elseToken:
		return say(t, "an operand is missing before %q", text)
	case commaToken:
		return say(t, `"," separates nothing here`)
	case closeToken:
		if i > 0 && tokens[i-1].kind == openToken {
			return say(t, "nothing stands between the parentheses")
		}
		return say(t, `an operand is missing before ")"`)
	}
	return say(t, "an operator is missing before %q", text)
}
