package parser

import "triodeck/parser/source"

// CardKind says what a card is.
type CardKind uint8

// The kinds of card. A card with several physical lines (continuation) is one.
const (
	BlankCard      CardKind = iota // white space only
	CommentCard                    // a comment line
	TitleCard                      // the first line of a root deck; Stmt is set if it reads as an element too
	ElementCard                    // a device, source, instance
	DirectiveCard                  // a dot card
	AnnotationCard                 // a line that begins `*@`
	OpaqueCard                     // text that is kept and not read: after `.end`, in `.control`, another language
	ErrorCard                      // a card that could not be read; Errs tells why
)

// Card is one logical line: the physical line that starts it, its continuation
// lines, the comments between them, and the line ends. Everything in it is
// relative to Text, so that a card is shared between versions of a file.
type Card struct {
	Kind  CardKind
	Text  string        // every byte of the card
	Stmt  Stmt          // what it says; nil if nothing or not readable
	Notes []*Annotation // annotations carried: by a `*@` line, or behind an element
	Errs  []Error       // what is wrong with it
}

// Error is something wrong in a card, as one lower-case sentence.
type Error struct {
	Span    source.Span // relative to the card in Card.Errs, to the file from File.Errors
	Message string
}

// Word is a piece of a card as the writer spelt it.
type Word struct {
	Text  string
	Start int32 // relative to the card
}

// IsZero says that the word is absent.
func (w Word) IsZero() bool { return w.Text == "" && w.Start == 0 }

// Span is the word's place, relative to its card.
func (w Word) Span() source.Span {
	return source.Span{Start: w.Start, End: w.Start + int32(len(w.Text))}
}

// ValueForm tells how a value is written.
type ValueForm uint8

// The forms of a value.
const (
	NoValue     ValueForm = iota
	NumberValue           // 2u, 1e-9, 10kohm
	NameValue             // a bare name: a parameter, a keyword
	ExprValue             // '…', {…} or (…)
	StringValue           // "…"
)

// Value is a number, name, expression or string as written.
type Value struct {
	Word           // with its quotes or braces
	Form ValueForm //
	Num  float64   // the value of a NumberValue, SI, suffix applied
}

// Param is `name=value` on any card. A flag without a value has Form NoValue. In a
// list `tc=1m,2u` the values behind the first are params with a zero Name.
type Param struct {
	Name  Word
	Value Value
}

// Stmt is what a card says.
type Stmt interface{ stmt() }

// Element is a device line.
//
//	M d g s b model params     Q c b e [s] model      D a k model     R C L a b value | model
//	X nodes… subckt params     V I a b source         E G a b ca cb gain    F H a b vname gain    K la lb k
type Element struct {
	Letter  byte    // lower case: 'm', 'r', 'x' …
	Name    Word    // with its letter
	Nodes   []Word  // terminals in card order; for E and G the controlling pair follows the output pair
	Model   Word    // model or subckt name, if the form has one
	Control []Word  // names of other elements: the source of F and H, the inductors of K
	Values  []Value // positional values: resistance, gain, coupling, and whatever the form keeps unread
	Params  []Param
	Source  *Source // V and I only
	Pins    []Param // named connections of an instance, `$PINS port=net`
}

// Source is the stimulus of a V or I element.
type Source struct {
	DC   Value   // NoValue if the card states none
	AC   []Value // magnitude, phase
	Func Word    // pulse, sin, pwl …; zero if none
	Args []Value // arguments of Func
}

// Model is `.model name type (params)`.
type Model struct {
	Name, Type Word
	Base       Word // `ako:base`: the model whose parameters hold unless stated here
	Params     []Param
}

// ParamDefs is `.param a=1 b='2*a'` (also `.params`, `.csparam`).
type ParamDefs struct {
	Params []Param
	Funcs  []*FuncDef // functions defined on the same card
}

// FuncDef is `.func f(a,b)='…'` or `.param f(a,b)='…'`.
type FuncDef struct {
	Name Word
	Args []Word
	Body Value
}

// Subckt is `.subckt name ports params`.
type Subckt struct {
	Name     Word
	Ports    []Word
	Params   []Param
	Optional []Param // `OPTIONAL: port=node`: ports that a caller may leave out
}

// Ends is `.ends [name]` (also `.eom`).
type Ends struct{ Name Word }

// Include is `.include path` or `.inc path`; Path.Text has no quotes.
type Include struct{ Path Word }

// Lib is `.lib path section`: the call of a section of another file.
type Lib struct{ Path, Section Word }

// LibSection is `.lib section`: the start of a section's definition, up to `.endl`.
type LibSection struct{ Name Word }

// EndLib is `.endl [section]`.
type EndLib struct{ Name Word }

// PinInfo is the comment `*.PININFO a:I y:O`: the directions of a subckt's ports.
type PinInfo struct {
	Pins       []Word
	Directions []Word // of each pin; zero if not stated
}

// Global is `.global nodes`, or the comment `*.GLOBAL nodes`.
type Global struct{ Nodes []Word }

// Initial is `.ic` or `.nodeset`: `v(node)=value` pairs.
type Initial struct {
	Nodeset bool
	Nodes   []Word
	Values  []Value
}

// Temp is `.temp t …` in °C.
type Temp struct{ Values []Value }

// Options is `.option(s) key[=value] …`.
type Options struct{ Params []Param }

// CondKind is the word of a conditional directive.
type CondKind uint8

// The conditional directives.
const (
	If CondKind = iota
	ElseIf
	Else
	EndIf
)

// Cond is `.if (expr)`, `.elseif (expr)`, `.else`, `.endif`.
type Cond struct {
	Kind CondKind
	Test Value
}

// End is `.end`.
type End struct{}

// Other is a directive that is kept and not read further (analysis, output, unknown).
type Other struct {
	Name   Word   // with the dot
	Known  bool   // a directive of the trade that has no bearing on bias
	Fields []Word //
}

func (*Element) stmt()    {}
func (*Model) stmt()      {}
func (*ParamDefs) stmt()  {}
func (*FuncDef) stmt()    {}
func (*Subckt) stmt()     {}
func (*Ends) stmt()       {}
func (*Include) stmt()    {}
func (*Lib) stmt()        {}
func (*LibSection) stmt() {}
func (*EndLib) stmt()     {}
func (*Global) stmt()     {}
func (*PinInfo) stmt()    {}
func (*Initial) stmt()    {}
func (*Temp) stmt()       {}
func (*Options) stmt()    {}
func (*Cond) stmt()       {}
func (*End) stmt()        {}
func (*Other) stmt()      {}
