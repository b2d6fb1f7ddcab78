package analysis

import (
	"triodeck/analysis/circuit"
	"triodeck/parser"
	"triodeck/parser/source"
)

// Within is the place of a span that is relative to a card.
func Within(card circuit.Place, sp source.Span) circuit.Place {
	start := card.Doc.File.Start(card.Card)
	return circuit.Place{Doc: card.Doc, Card: card.Card, Span: sp.Shift(start)}
}

// WordAt is the place of a word of a card.
func WordAt(card circuit.Place, w parser.Word) circuit.Place { return Within(card, w.Span()) }

// CardAt is the place of a whole card without the line end behind it.
func CardAt(doc *circuit.Document, card int) circuit.Place {
	sp := doc.File.Span(card)
	text := doc.File.Card(card).Text
	n := len(text)
	for n > 0 && (text[n-1] == '\n' || text[n-1] == '\r' || text[n-1] == ' ' || text[n-1] == '\t') {
		n--
	}
	sp.End = sp.Start + int32(n)
	return circuit.Place{Doc: doc, Card: card, Span: sp}
}
