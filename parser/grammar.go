package parser

import (
	"errors"
	"io"
	"sync"

	"github.com/alecthomas/participle/v2"
	"github.com/alecthomas/participle/v2/lexer"

	"triodeck/parser/source"
)

// symbols names the tokens for the grammars.
var symbols = map[string]lexer.TokenType{
	"EOF":     lexer.EOF,
	"Word":    typeOf(wordToken),
	"Key":     typeOf(keyToken),
	"Quote":   typeOf(quoteToken),
	"Brace":   typeOf(braceToken),
	"Paren":   typeOf(parenToken),
	"String":  typeOf(stringToken),
	"Bare":    typeOf(bareToken),
	"Field":   typeOf(fieldToken),
	"Open":    typeOf(openToken),
	"Close":   typeOf(closeToken),
	"Comma":   typeOf(commaToken),
	"Assign":  typeOf(assignToken),
	"Broken":  typeOf(brokenToken),
	"Number":  typeOf(numberToken),
	"Name":    typeOf(nameToken),
	"Probe":   typeOf(probeToken),
	"Node":    typeOf(nodeToken),
	"Op":      typeOf(opToken),
	"Not":     typeOf(notToken),
	"Ask":     typeOf(askToken),
	"Else":    typeOf(elseToken),
	"Tick":    typeOf(tickToken),
	"Compare": typeOf(compareToken),
	"Range":   typeOf(rangeToken),
	"Region":  typeOf(regionToken),
	"Keyword": typeOf(wordsToken),
	"Stray":   typeOf(strayToken),
}

func typeOf(k tokenKind) lexer.TokenType { return lexer.TokenType(-2 - int(k)) }

func kindOf(t lexer.Token) tokenKind { return tokenKind(-2 - int(t.Type)) }

// definition is the lexer that participle asks for symbols. The tokens themselves
// come from our own lexers, which depend on the statement.
type definition struct{}

func (definition) Symbols() map[string]lexer.TokenType { return symbols }

// Lex cuts an element card; participle wants it, our parsers bring their tokens.
func (definition) Lex(_ string, r io.Reader) (lexer.Lexer, error) {
	text, err := io.ReadAll(r)
	if err != nil {
		return nil, err
	}
	l := new(lexed)
	lexCard(string(text), cardManner{}, l)
	return &tokenSource{l: l}, nil
}

// tokenSource hands our tokens to participle.
type tokenSource struct {
	l  *lexed
	at int
}

func (s *tokenSource) Next() (lexer.Token, error) {
	if s.at >= len(s.l.tokens) {
		return lexer.EOFToken(lexer.Position{Offset: len(s.l.text) + int(s.l.base)}), nil
	}
	t := s.l.tokens[s.at]
	s.at++
	return lexer.Token{
		Type:  typeOf(t.kind),
		Value: s.l.textOf(t),
		Pos:   lexer.Position{Offset: int(t.start + s.l.base)},
	}, nil
}

// grammarFor builds a parser once, when it is first needed: reflection over a
// grammar costs more than reading a small deck.
func grammarFor[G any]() func() *participle.Parser[G] {
	return sync.OnceValue(func() *participle.Parser[G] {
		return participle.MustBuild[G](
			participle.Lexer(definition{}),
			participle.CaseInsensitive("Word", "Key", "Keyword", "Name", "Region"),
		)
	})
}

// parseTokens runs a grammar over tokens. If it does not fit, at is the offset of
// the token that has no place, the end of the last token if one is missing.
func parseTokens[G any](p *participle.Parser[G], l *lexed) (tree *G, at int32, ok bool) {
	peek, err := lexer.Upgrade(&tokenSource{l: l})
	if err != nil {
		return nil, 0, false
	}
	tree, err = p.ParseFromLexer(peek)
	if err == nil {
		return tree, 0, true
	}
	at = endOf(l)
	var where participle.Error
	if errors.As(err, &where) {
		at = min(at, int32(where.Position().Offset))
	}
	return nil, at, false
}

// endOf is the end of the last token, in the card.
func endOf(l *lexed) int32 {
	if n := len(l.tokens); n > 0 {
		return l.tokens[n-1].end + l.base
	}
	return l.base
}

// tokenAt is the index of the token that begins at an offset of the card; at the
// end it is the number of tokens.
func tokenAt(l *lexed, at int32) int {
	for i, t := range l.tokens {
		if t.start+l.base >= at {
			return i
		}
	}
	return len(l.tokens)
}

func wordOf(t lexer.Token) Word {
	if t.Type == 0 {
		return Word{}
	}
	return Word{Text: t.Value, Start: int32(t.Pos.Offset)}
}

// wordsOf are the words of a captured list; the commas between them were captured
// too, for participle keeps only the last of repeated captures.
func wordsOf(ts []lexer.Token) []Word {
	if len(ts) == 0 {
		return nil
	}
	ws := make([]Word, 0, len(ts))
	for _, t := range ts {
		if kindOf(t) != commaToken {
			ws = append(ws, wordOf(t))
		}
	}
	return ws
}

func spanOf(t lexer.Token) source.Span { return wordOf(t).Span() }
