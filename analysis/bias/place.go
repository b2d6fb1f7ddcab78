package bias

import (
	"triodeck/analysis/circuit"
	"triodeck/parser/source"
)

// placeOf is a span of the annotation's card, given relative to the card.
func placeOf(n circuit.NoteAt, start, end int32) circuit.Place {
	base := n.Place.Doc.File.Start(n.Place.Card)
	return circuit.Place{Doc: n.Place.Doc, Card: n.Place.Card, Span: source.Span{Start: start, End: end}.Shift(base)}
}
