package ide

import (
	"triodeck/parser"
	"triodeck/parser/source"
)

// SymbolKind sorts symbols.
type SymbolKind uint8

// Kinds of symbol.
const (
	SubcktSymbol SymbolKind = iota
	ModelSymbol
	DeviceSymbol
	InstanceSymbol
	ParameterSymbol
	SectionSymbol
)

// Symbol is a name that a file defines, with what stands inside of it.
type Symbol struct {
	Kind           SymbolKind
	Name, Detail   string
	Span, NameSpan source.Span
	Children       []Symbol
}

// Symbols lists the subckts, library sections, models, parameters and elements
// of a file, each where it stands.
func Symbols(f *parser.File) []Symbol {
	b := symbolBuilder{open: []*Symbol{{}}}
	for i := range f.Len() {
		b.card(f, i)
	}
	for len(b.open) > 1 {
		b.close(int32(len(f.Src)))
	}
	return b.open[0].Children
}

// symbolBuilder holds the blocks that are open at a card, the file outermost.
type symbolBuilder struct{ open []*Symbol }

func (b *symbolBuilder) card(f *parser.File, i int) {
	c, start := f.Card(i), f.Start(i)
	span := source.Span{Start: start, End: start + textEnd(c.Text)}
	leaf := func(kind SymbolKind, name parser.Word, detail string) {
		if name.Text != "" {
			top := b.open[len(b.open)-1]
			top.Children = append(top.Children, Symbol{Kind: kind, Name: name.Text, Detail: detail, Span: span, NameSpan: name.Span().Shift(start)})
		}
	}
	block := func(kind SymbolKind, name parser.Word) {
		b.open = append(b.open, &Symbol{Kind: kind, Name: name.Text, Span: span, NameSpan: name.Span().Shift(start)})
	}
	switch s := c.Stmt.(type) {
	case *parser.Subckt:
		block(SubcktSymbol, s.Name)
	case *parser.LibSection:
		block(SectionSymbol, s.Name)
	case *parser.Ends:
		b.end(SubcktSymbol, span.End)
	case *parser.EndLib:
		b.end(SectionSymbol, span.End)
	case *parser.Model:
		leaf(ModelSymbol, s.Name, s.Type.Text)
	case *parser.ParamDefs:
		for _, p := range s.Params {
			leaf(ParameterSymbol, p.Name, p.Value.Text)
		}
	case *parser.FuncDef:
		leaf(ParameterSymbol, s.Name, s.Body.Text)
	case *parser.Element:
		switch {
		case c.Kind != parser.ElementCard:
		case s.Letter == 'x':
			leaf(InstanceSymbol, s.Name, s.Model.Text)
		default:
			leaf(DeviceSymbol, s.Name, s.Model.Text)
		}
	}
}

// end closes the innermost block of a kind and those left open inside of it.
func (b *symbolBuilder) end(kind SymbolKind, at int32) {
	for i := len(b.open) - 1; i > 0; i-- {
		if b.open[i].Kind != kind {
			continue
		}
		for len(b.open) > i {
			b.close(at)
		}
		return
	}
}

func (b *symbolBuilder) close(at int32) {
	done := b.open[len(b.open)-1]
	b.open = b.open[:len(b.open)-1]
	done.Span.End = at
	if done.Name == "" {
		// A name may not be empty in the protocol; what stands inside is kept.
		b.open[len(b.open)-1].Children = append(b.open[len(b.open)-1].Children, done.Children...)
		return
	}
	b.open[len(b.open)-1].Children = append(b.open[len(b.open)-1].Children, *done)
}
