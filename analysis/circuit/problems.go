package circuit

import (
	"fmt"

	"triodeck/parser/source"
)

// problemKey tells causes apart: the same cause met again is not said again.
type problemKey struct {
	kind ProblemKind
	doc  *Document
	span source.Span
	name string
}

// problems collects causes, each once, in the order met.
type problems struct {
	list []Problem
	seen map[problemKey]bool
}

func (p *problems) add(kind ProblemKind, at Place, name, format string, args ...any) {
	key := problemKey{kind, at.Doc, at.Span, name}
	if p.seen[key] {
		return
	}
	if p.seen == nil {
		p.seen = map[problemKey]bool{}
	}
	p.seen[key] = true
	p.list = append(p.list, Problem{Kind: kind, Place: at, Name: name, Message: fmt.Sprintf(format, args...)})
}

// place is a span of card i of a document, made absolute.
func place(doc *Document, card int, sp source.Span) Place {
	return Place{Doc: doc, Card: card, Span: sp.Shift(doc.File.Start(card))}
}
