package parser

// quickParams reads `name=value` pairs from token i to the end; false leaves the
// card to the grammar.
func quickParams(l *lexed, i int, p *parts) ([]Param, bool) {
	p.reset()
	ts := l.tokens
	for i < len(ts) {
		if ts[i].kind != keyToken || !p.quickPair(l, i) {
			return nil, false
		}
		i += 3
	}
	return p.params, true
}

// quickPair reads the parameter at token i.
func (p *parts) quickPair(l *lexed, i int) bool {
	ts := l.tokens
	if i+2 >= len(ts) || ts[i+1].kind != assignToken {
		return false
	}
	switch v := ts[i+2]; v.kind {
	case wordToken, quoteToken, braceToken, parenToken, bareToken, stringToken:
		p.addParam(l.word(ts[i]), valueOf(v.kind, l.word(v)))
		return true
	}
	return false
}

// quickModel reads a model card of pairs and flags, with or without parentheses
// around them.
func quickModel(l *lexed, p *parts) (*Model, bool) {
	p.reset()
	ts := l.tokens
	if len(ts) < 3 || ts[0].kind != wordToken || ts[1].kind != wordToken || ts[2].kind != wordToken {
		return nil, false
	}
	i, end := 3, len(ts)
	if end > 4 && ts[3].kind == openToken && ts[end-1].kind == closeToken {
		i, end = 4, end-1
	}
	for i < end {
		switch ts[i].kind {
		case keyToken:
			if i+2 >= end || !p.quickPair(l, i) {
				return nil, false
			}
			i += 3
		case wordToken:
			p.addParam(l.word(ts[i]), Value{})
			i++
		default:
			return nil, false
		}
	}
	return &Model{Name: l.word(ts[1]), Type: l.word(ts[2])}, true
}
