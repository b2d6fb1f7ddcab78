package parser

// quickExpr reads an expression from token i on by recursive descent, several
// hundred times faster than the reflective grammar. It knows no errors: where it
// gives nil the grammar decides. A fuzz test holds the two equal. n is the token
// behind the expression.
func quickExpr(l *lexed, i int) (e Expr, n int) {
	q := quick{l: l, at: i}
	e = q.choice()
	if q.failed {
		return nil, q.at
	}
	return e, q.at
}

type quick struct {
	l      *lexed
	at     int
	failed bool
}

func (q *quick) kind() tokenKind {
	if q.at < len(q.l.tokens) && !q.failed {
		return q.l.tokens[q.at].kind
	}
	return endToken
}

// take is the word of the next token if it is of the kind; else reading has failed.
func (q *quick) take(k tokenKind) Word {
	if q.kind() != k {
		q.failed = true
		return Word{}
	}
	w := q.l.word(q.l.tokens[q.at])
	q.at++
	return w
}

func (q *quick) choice() Expr {
	test := q.binary(1)
	if q.kind() != askToken {
		return test
	}
	q.at++
	then := q.choice()
	q.take(elseToken)
	return &Choice{Test: test, Then: then, Else: q.choice()}
}

// binary reads operators that bind at least as tight as level.
func (q *quick) binary(level int) Expr {
	left := q.unary()
	for q.kind() == opToken {
		p := precedence(q.l.textOf(q.l.tokens[q.at]))
		if p < level {
			break
		}
		op := q.take(opToken)
		next := p + 1
		if p > signPrecedence {
			next = p // to the right
		}
		left = &Binary{Op: op, X: left, Y: q.binary(next)}
	}
	return left
}

func (q *quick) unary() Expr {
	k := q.kind()
	if k == opToken {
		if c := q.l.textOf(q.l.tokens[q.at]); c != "+" && c != "-" {
			q.failed = true
			return nil
		}
		return &Unary{Op: q.take(opToken), X: q.signed()}
	}
	if k == notToken {
		return &Unary{Op: q.take(notToken), X: q.signed()}
	}
	return q.primary()
}

// signed is what a sign applies to: another sign, or an operand with its power.
func (q *quick) signed() Expr {
	if k := q.kind(); k == opToken || k == notToken {
		return q.unary()
	}
	return q.binary(signPrecedence)
}

func (q *quick) primary() Expr {
	switch q.kind() {
	case numberToken:
		w := q.take(numberToken)
		n, _, _ := scanNumber(w.Text, false)
		return &NumberLit{Word: w, Value: n.Value}
	case nameToken:
		return q.name()
	case probeToken:
		return q.probe()
	case openToken:
		q.at++
		e := q.choice()
		q.take(closeToken)
		return e
	case tickToken:
		q.at++
		e := q.choice()
		q.take(tickToken)
		return e
	}
	q.failed = true
	return nil
}

func (q *quick) name() Expr {
	w := q.take(nameToken)
	if q.kind() != openToken {
		return &Ref{w}
	}
	q.at++
	c := &Call{Name: w}
	if q.kind() != closeToken {
		c.Args = append(c.Args, q.choice())
		for q.kind() == commaToken {
			q.at++
			c.Args = append(c.Args, q.choice())
		}
	}
	c.End = q.take(closeToken).Span().End
	return c
}

func (q *quick) probe() Expr {
	p := &Probe{Func: q.take(probeToken)}
	q.take(openToken)
	p.Names = append(p.Names, q.take(nodeToken))
	for q.kind() == commaToken {
		q.at++
		p.Names = append(p.Names, q.take(nodeToken))
	}
	p.End = q.take(closeToken).Span().End
	return p
}
