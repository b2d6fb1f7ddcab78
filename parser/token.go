package parser

import "triodeck/parser/source"

// tokenKind is what a token is. The card lexer, the expression lexer and the
// annotation lexer share the set, so that grammars of one can use the other's.
type tokenKind uint8

const (
	endToken     tokenKind = iota
	wordToken              // a field of a card, a name of an annotation
	keyToken               // a word before `=`, or before a comparison in an annotation
	quoteToken             // '…'
	braceToken             // {…}
	parenToken             // (…) behind `=`
	stringToken            // "…"
	bareToken              // an expression without quotes behind `=`
	fieldToken             // $[model]: a field of an extracted netlist
	openToken              // (
	closeToken             // )
	commaToken             // ,
	assignToken            // =
	brokenToken            // a quote, brace or parenthesis that is not closed
	numberToken            // in an expression
	nameToken              // in an expression
	probeToken             // v or i before a parenthesis
	nodeToken              // a name in the parentheses of a probe
	opToken                // an operator between operands; + and - are signs too
	notToken               // ! or ~
	askToken               // ?
	elseToken              // :
	tickToken              // ' inside an expression
	compareToken           // <= >= < > in an annotation
	rangeToken             // ..
	regionToken            // a region's name in an annotation
	wordsToken             // in, at, on, within, to, not, from: the words of the annotation language
	strayToken             // a character that has no place in an expression
)

// token is a piece of a card; its text is the card's, from start to end.
type token struct {
	kind       tokenKind
	start, end int32
}

func (l *lexed) spanOf(t token) source.Span {
	return source.Span{Start: t.start, End: t.end}.Shift(l.base)
}

// lexed is a card's text, cut.
type lexed struct {
	text   string
	base   int32         // where text begins in the card
	tokens []token       // without the end token
	notes  []source.Span // trailing annotations, and `*@` lines between continuation lines; from the mark to the end
	joins  []source.Span // stray continuation marks at line ends
}

func (l *lexed) textOf(t token) string { return l.text[t.start:t.end] }

// word is the token as a word of the card.
func (l *lexed) word(t token) Word {
	return Word{Text: l.text[t.start:t.end], Start: t.start + l.base}
}
