package parser

import "github.com/alecthomas/participle/v2/lexer"

// paramDefsG is `.param a=1 f(x)='2*x'` behind its word.
type paramDefsG struct {
	Word lexer.Token `parser:"@Word"`
	Defs []*defG     `parser:"@@*"`
}

type defG struct {
	Func  *funcDefG   `parser:"  @@"`
	Param *paramG     `parser:"| @@"`
	Comma lexer.Token `parser:"| @Comma"`
}

// funcDefG is `f(a,b)='…'`.
type funcDefG struct {
	Name lexer.Token   `parser:"@Word '('"`
	Args []lexer.Token `parser:"@( Word ( ',' Word )* )? ')' '='"`
	Body lexer.Token   `parser:"@(Word | Quote | Brace | Paren | String | Bare)"`
}

// funcG is `.func f(a,b) {…}`, with or without `=`; an expression without quotes
// reaches to the card's end.
type funcG struct {
	Word lexer.Token   `parser:"@Word"`
	Name lexer.Token   `parser:"@Word '('"`
	Args []lexer.Token `parser:"@( Word ( ',' Word )* )? ')' '='?"`
	Body []lexer.Token `parser:"@( ( Word | Key | Quote | Brace | Paren | String | Bare | Open | Close | Comma | Assign )+ )"`
}

// subcktG is `.subckt name ports params`.
type subcktG struct {
	Word  lexer.Token `parser:"@Word"`
	Name  lexer.Token `parser:"@Word"`
	Items []*itemG    `parser:"@@*"`
}

// modelG is `.model name type (params)`; AKO names a model to start from.
type modelG struct {
	Word  lexer.Token `parser:"@Word"`
	Name  lexer.Token `parser:"@Word"`
	Type  lexer.Token `parser:"@Word"`
	Items []*itemG    `parser:"@@*"`
}

// wordsG is a directive that takes words: `.global`, `.ends`, `.temp`.
type wordsG struct {
	Word   lexer.Token   `parser:"@Word"`
	Fields []lexer.Token `parser:"@( ( Word | Quote | Brace | String | Comma )+ )?"`
}

// optionsG is `.option key[=value] …`.
type optionsG struct {
	Word  lexer.Token `parser:"@Word"`
	Items []*itemG    `parser:"@@*"`
}

// initialG is `.ic v(a)=0.9 v(b)=0`.
type initialG struct {
	Word  lexer.Token `parser:"@Word"`
	Pairs []*pairG    `parser:"@@*"`
}

type pairG struct {
	Node  lexer.Token `parser:"( 'v' '(' @Word ')' '='? | @Key '=' )"`
	Value lexer.Token `parser:"@(Word | Quote | Brace | Paren | Bare) Comma?"`
}

var (
	paramDefsGrammar = grammarFor[paramDefsG]()
	funcGrammar      = grammarFor[funcG]()
	subcktGrammar    = grammarFor[subcktG]()
	modelGrammar     = grammarFor[modelG]()
	wordsGrammar     = grammarFor[wordsG]()
	optionsGrammar   = grammarFor[optionsG]()
	initialGrammar   = grammarFor[initialG]()
)
