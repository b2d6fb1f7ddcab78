package parser

import "github.com/alecthomas/participle/v2/lexer"

// The grammars of the element cards say what shape a card has; which field is a
// node, a model or a value is told by element_form.go.

// paramG is `name=value`, or `name=a,b,c`.
type paramG struct {
	Name  lexer.Token   `parser:"@Key '='"`
	Value lexer.Token   `parser:"@(Word | Quote | Brace | Paren | String | Bare | Field)"`
	More  []lexer.Token `parser:"@( ( ',' ( Word | Quote | Brace | String ) )+ )?"`
}

// itemG is what may follow an element's name: a parameter, a field, or the
// punctuation around groups of fields.
type itemG struct {
	Param *paramG     `parser:"  @@"`
	Field lexer.Token `parser:"| @(Word | Quote | Brace | Paren | String | Bare | Field)"`
	Mark  lexer.Token `parser:"| @(Open | Close | Comma)"`
}

// elementG is a device, a passive or an instance: `M1 d g s b nch w=2u l=0.18u`.
type elementG struct {
	Name  lexer.Token `parser:"@Word"`
	Items []*itemG    `parser:"@@*"`
}

// controlledG is an E or G element, where `=` also joins a table to its points:
// `E1 out 0 TABLE {v(in)} = (0,0) (1,5)`.
type controlledG struct {
	Name  lexer.Token `parser:"@Word"`
	Items []*jointG   `parser:"@@*"`
}

type jointG struct {
	Item *itemG      `parser:"  @@"`
	Join lexer.Token `parser:"| @Assign"`
}

// sourceG is a V or I element: `V1 in 0 DC 0.9 AC 1 SIN(0.9 10m 1k)`.
type sourceG struct {
	Name    lexer.Token  `parser:"@Word"`
	Items   []*itemG     `parser:"@@*"`
	Stimuli []*stimulusG `parser:"@@*"`
}

// stimulusG is a keyword with its values.
type stimulusG struct {
	Word  lexer.Token `parser:"@Keyword '='?"`
	Items []*itemG    `parser:"@@*"`
}

var (
	elementGrammar    = grammarFor[elementG]()
	controlledGrammar = grammarFor[controlledG]()
	sourceGrammar     = grammarFor[sourceG]()
)

// field is a positional field with the kind of its token.
type field struct {
	Word
	kind tokenKind
}

func (f field) value() Value { return valueOf(f.kind, f.Word) }

// parts is an element before its form is known.
type parts struct {
	name    Word
	lead    []field // before the first parameter
	rest    []field // behind it
	params  []Param
	pins    int // index in params of the first named connection, behind `$PINS`; -1 if none
	stimuli []stimulus
}

type stimulus struct {
	word   Word
	fields []field
}

func (p *parts) reset() {
	p.name = Word{}
	p.lead, p.rest, p.params, p.stimuli = p.lead[:0], p.rest[:0], p.params[:0], p.stimuli[:0]
	p.pins = -1
}

// addField takes a positional field.
func (p *parts) addField(f field) {
	if f.kind == wordToken && foldEqual(f.Text, "$pins") {
		p.pins = len(p.params)
		return
	}
	if len(p.params) == 0 {
		p.lead = append(p.lead, f)
	} else {
		p.rest = append(p.rest, f)
	}
}

func (p *parts) addParam(name Word, v Value) {
	p.params = append(p.params, Param{Name: name, Value: v})
}

func fieldOf(t lexer.Token) field { return field{wordOf(t), kindOf(t)} }

func valueOfToken(t lexer.Token) Value { return valueOf(kindOf(t), wordOf(t)) }

// take adds what an item says.
func (p *parts) take(g *itemG) {
	switch {
	case g.Param != nil:
		p.addParam(wordOf(g.Param.Name), valueOfToken(g.Param.Value))
		for _, m := range g.Param.More {
			if kindOf(m) != commaToken {
				p.addParam(Word{}, valueOfToken(m))
			}
		}
	case g.Mark.Type == 0:
		p.addField(fieldOf(g.Field))
	}
}

// grammarParts reads an element's tokens through its grammar; false if they do not
// fit, and at is where.
func grammarParts(letter byte, l *lexed, p *parts) (at int32, ok bool) {
	p.reset()
	switch letter {
	case 'v', 'i':
		g, at, ok := parseTokens(sourceGrammar(), l)
		if !ok {
			return at, false
		}
		p.name = wordOf(g.Name)
		for _, i := range g.Items {
			p.take(i)
		}
		for _, s := range g.Stimuli {
			p.stimulus(s)
		}
	case 'e', 'g':
		g, at, ok := parseTokens(controlledGrammar(), l)
		if !ok {
			return at, false
		}
		p.name = wordOf(g.Name)
		for _, i := range g.Items {
			if i.Item != nil {
				p.take(i.Item)
			}
		}
	default:
		g, at, ok := parseTokens(elementGrammar(), l)
		if !ok {
			return at, false
		}
		p.name = wordOf(g.Name)
		for _, i := range g.Items {
			p.take(i)
		}
	}
	return 0, true
}

func (p *parts) stimulus(g *stimulusG) {
	s := stimulus{word: wordOf(g.Word)}
	for _, i := range g.Items {
		switch {
		case i.Param != nil:
			p.take(i)
		case i.Mark.Type == 0:
			s.fields = append(s.fields, fieldOf(i.Field))
		}
	}
	p.stimuli = append(p.stimuli, s)
}
