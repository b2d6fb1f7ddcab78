package parser

// quickParts reads the tokens of a plain element card by hand: fields, then
// `name=value` pairs, no groups and no lists. Such cards are nearly all of a large
// deck. False leaves the card to the grammar, which gives the same for every card
// that both read; a fuzz test holds them equal.
func quickParts(letter byte, l *lexed, p *parts) bool {
	switch letter {
	case 'm', 'x', 'r', 'c', 'l', 'd', 'q', 'j':
	default:
		return false
	}
	p.reset()
	ts := l.tokens
	if len(ts) == 0 || ts[0].kind != wordToken {
		return false
	}
	p.name = l.word(ts[0])
	for i := 1; i < len(ts); i++ {
		switch k := ts[i].kind; k {
		case wordToken, quoteToken, braceToken:
			p.addField(field{l.word(ts[i]), k})
		case keyToken:
			if i+2 >= len(ts) || ts[i+1].kind != assignToken {
				return false
			}
			switch v := ts[i+2]; v.kind {
			case wordToken, quoteToken, braceToken, parenToken, bareToken:
				p.addParam(l.word(ts[i]), valueOf(v.kind, l.word(v)))
			default:
				return false
			}
			i += 2
		default:
			return false
		}
	}
	return true
}
